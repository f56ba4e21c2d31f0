"""Read-only arrays for frozen records."""

from typing import Any, TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats: TypeAlias = NDArray[np.float64]
Bytes: TypeAlias = NDArray[np.uint8]


def frozen_floats(values: ArrayLike) -> Floats:
    """A read-only float copy, so that no caller can change a record through its own array."""
    array = np.array(values, dtype=np.float64)
    array.flags.writeable = False
    return array


def freeze(record: object, **fields: ArrayLike) -> None:
    """Replace fields of a frozen record under construction by read-only float copies."""
    for name, values in fields.items():
        object.__setattr__(record, name, frozen_floats(values))


def distinct(values: Floats) -> Floats:
    """The distinct values in rising order; ``np.unique`` would load all of ``numpy.ma`` for it, which a query feels."""
    ordered: Floats = np.sort(values)
    first: Floats = ordered[np.concatenate([[True], ordered[1:] != ordered[:-1]])]
    return first


def lock(array: NDArray[Any]) -> NDArray[Any]:
    """A read-only view of an image too large to copy."""
    view = array.view()
    view.flags.writeable = False
    return view
