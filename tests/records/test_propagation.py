"""Propagation of uncertainty against the GUM's worked example and a general library on the same expressions."""

import numpy as np
import pytest
from uncertainties import correlated_values, ufloat, umath

from curvelab.records.normal import along_axes
from curvelab.records.propagation import propagated

# JCGM 100:2008, H.2, simultaneous resistance and reactance: five observations of table H.2 (V, A, rad), results H.4.
OBSERVED = np.array(
    [
        [5.007, 4.994, 5.005, 4.990, 4.999],
        [19.663e-3, 19.639e-3, 19.640e-3, 19.685e-3, 19.678e-3],
        [1.0456, 1.0438, 1.0468, 1.0428, 1.0433],
    ]
)
VOLTAGE_V, CURRENT_A, PHASE = OBSERVED.mean(axis=1)
MEANS_COVARIANCE = np.cov(OBSERVED) / 5
RESULTS = {"R": (127.732, 0.071), "X": (219.847, 0.295), "Z": (254.260, 0.236)}
RESULT_CORRELATION = {("R", "X"): -0.588, ("R", "Z"): -0.485, ("X", "Z"): 0.993}


def impedance_sensitivity():
    c, s, i, z = np.cos(PHASE), np.sin(PHASE), CURRENT_A, VOLTAGE_V / CURRENT_A
    return np.array([[c / i, -z * c / i, -z * s], [s / i, -z * s / i, z * c], [1.0 / i, -z / i, 0.0]])


def test_the_worked_example_h2_of_the_gum():
    covariance = propagated(impedance_sensitivity(), MEANS_COVARIANCE)
    sd = np.sqrt(np.diag(covariance))
    values = np.array([np.cos(PHASE), np.sin(PHASE), 1.0]) * VOLTAGE_V / CURRENT_A
    for k, (value, uncertainty) in enumerate(RESULTS.values()):
        assert values[k] == pytest.approx(value, abs=6e-4)
        assert sd[k] == pytest.approx(uncertainty, abs=7e-4)
    names = list(RESULTS)
    for (a, b), expected in RESULT_CORRELATION.items():
        i, j = names.index(a), names.index(b)
        assert covariance[i, j] / (sd[i] * sd[j]) == pytest.approx(expected, abs=6e-4)


def test_a_general_library_gives_the_same_covariance():
    v, i, phi = correlated_values([VOLTAGE_V, CURRENT_A, PHASE], MEANS_COVARIANCE)
    expected = [result.std_dev for result in (v / i * umath.cos(phi), v / i * umath.sin(phi), v / i)]
    sd = np.sqrt(np.diag(propagated(impedance_sensitivity(), MEANS_COVARIANCE)))
    np.testing.assert_allclose(sd, expected, rtol=1e-9)


@pytest.mark.parametrize("slope", [-0.02, -0.5, -2.0, -30.0])
def test_time_at_a_current_and_current_at_a_time_of_a_line_that_is_off_along_its_normal(slope):
    """Both are found by moving a power law by a distance along its normal in logarithms."""
    distance = ufloat(0.0, 0.004)
    rise = distance * np.sqrt(1.0 + slope**2)
    time = 3.0 * (umath.exp(rise))
    current = 50.0 * umath.exp(rise / abs(slope))
    sd_current, sd_value = along_axes([0.004], [[1.0, slope]])
    assert sd_value[0] == pytest.approx(time.std_dev / time.nominal_value, rel=1e-9)
    assert sd_current[0] == pytest.approx(current.std_dev / current.nominal_value, rel=1e-9)
