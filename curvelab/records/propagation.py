"""The law of propagation of uncertainty: what input covariances make of results (JCGM 100:2008, 5.2; JCGM 102)."""

import numpy as np
from numpy.typing import ArrayLike

from curvelab.records.arrays import Floats


def propagated(sensitivity: ArrayLike, covariance: ArrayLike) -> Floats:
    """Covariance of results.

    Parameters
    ----------
    sensitivity : array, shape (..., results, inputs)
        Partial derivatives of the results by the inputs.
    covariance : array, shape (..., inputs, inputs)
        Of the inputs.

    Returns
    -------
    array, shape (..., results, results)
    """
    derivatives = np.asarray(sensitivity, dtype=np.float64)
    result: Floats = derivatives @ np.asarray(covariance, dtype=np.float64) @ np.swapaxes(derivatives, -1, -2)
    return result
