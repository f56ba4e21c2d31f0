"""Published trip-time formulas, tabulated and asked: straight lines in log-log keep them within what they promise."""

import math

import numpy as np
import pytest

from tests.devices.made import device, line


def thermal_time_s(current: float, before: float, tau_s: float, k: float) -> float:
    """Thermal replica of IEC 60255-149 (formerly 60255-8), currents in multiples of the basic current."""
    return tau_s * math.log((current**2 - before**2) / (current**2 - k**2))


@pytest.mark.parametrize(
    ("before", "time_s"),
    # Worked by hand for tau 600 s, k 1.05, I 2 IB:
    # cold 600 ln(4 / (4 - 1.1025)) = 600 x 0.322447 = 193.468 s; after 0.9 IB 600 ln(3.19 / 2.8975) = 57.704 s.
    [(0.0, 193.468), (0.9, 57.704)],
)
def test_a_thermal_element_gives_the_hand_worked_time(before, time_s):
    assert thermal_time_s(2.0, before, 600.0, 1.05) == pytest.approx(time_s, abs=5e-4)
    currents = np.geomspace(1.06, 20, 400)
    points = [(current, thermal_time_s(current, before, 600.0, 1.05)) for current in currents]
    motor = device(line("mean", points, base="A", element="overload", meaning="relay_output"), kind="relay")
    assert motor.trip_time(2.0).mean.value == pytest.approx(time_s, rel=5e-4)
    assert motor.trip_current(time_s).mean.value == pytest.approx(2.0, rel=5e-4)


@pytest.mark.parametrize(
    ("k", "exponent", "multiple", "time_s"),
    # IEC 60255-151 curves A, B, C at a time multiplier of 1, as printed in relay manuals that quote it.
    [(0.14, 0.02, 10, 2.971), (0.14, 0.02, 2, 10.029), (13.5, 1.0, 5, 3.375), (80.0, 2.0, 10, 0.808)],
)
def test_an_inverse_relay_scales_its_tabulated_curve(k, exponent, multiple, time_s):
    points = [(m, k / (m**exponent - 1)) for m in np.geomspace(1.1, 20, 300)]
    relay = device(line("mean", points, base="A", meaning="relay_output", time_setting="tms", time_setting_at=1.0))
    assert relay.trip_time(float(multiple)).mean.value == pytest.approx(time_s, rel=1e-3)
