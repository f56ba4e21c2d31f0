"""Let-through energies and cut-off currents asked of a device, both ways, and a mean line's tolerance on them."""

import numpy as np
import pytest

from curvelab.devices.tolerance import edges_of_mean
from curvelab.errors import DeviceError
from curvelab.records.curve import Conditions
from curvelab.records.device import Breaking, Tolerance
from tests.devices.made import device, line

RISING = [(100.0, 300.0), (10_000.0, 30_000.0)]
"""3 A2s for each ampere of prospective current."""


def limiting(*curves, quantity="let_through", **plate):
    lines = curves or (line("slow", RISING, base="A", quantity=quantity),)
    return device(*lines, key="bay-c20", rated_current_a=20.0, **plate)


def test_an_energy_at_a_current_lies_on_the_line_and_nowhere_beyond():
    answer = limiting().let_through([100.0, 3240.0, 10_000.0, 10_001.0, 99.0])
    assert answer.slow.status.tolist() == ["value"] * 3 + ["not_covered"] * 2
    np.testing.assert_allclose(answer.slow.value[:3], [300.0, 9720.0, 30_000.0], rtol=1e-12)
    assert (answer.fast, answer.mean) == (None, None)


def test_no_bound_is_given_to_the_right_of_a_let_through_line():
    breaking = (Breaking(quantity="Icn", value_a=20_000.0),)
    answer = limiting(breaking=breaking).let_through([15_000.0, 25_000.0])
    assert answer.slow.status.tolist() == ["not_covered", "above_breaking"]


def test_the_current_up_to_which_an_energy_is_not_exceeded_is_the_inverse():
    found = limiting().let_through_current([9720.0, 30_000.0, 31_000.0, 299.0]).slow
    assert found.status.tolist() == ["value", "value", "at_least", "not_covered"]
    np.testing.assert_allclose(found.value[:3], [3240.0, 10_000.0, 10_000.0], rtol=1e-12)


def test_a_level_stretch_is_passed_to_its_end_and_a_dip_does_not_count_twice():
    dipping = limiting(
        line("slow", [(100, 500), (200, 900), (400, 700), (800, 900), (1600, 2000)], quantity="let_through")
    )
    assert dipping.let_through_current(900.0, base="xIn").slow.value == pytest.approx(800.0)
    # Already exceeded between 100 and 200 In, though the line comes back below it.
    assert dipping.let_through_current(800.0, base="xIn").slow.value < 200.0


def test_the_interval_of_the_inverse_holds_it_and_narrows_with_the_uncertainty():
    wide, narrow = (limiting(line("slow", RISING, base="A", quantity="let_through", sd=sd)) for sd in (0.02, 0.002))
    for made, sd in ((wide, 0.02), (narrow, 0.002)):
        found = made.let_through_current(3000.0).slow
        # Of slope 1 the current is as uncertain as the energy: 1.96 sd about 1000 A.
        assert found.lower == pytest.approx(1000 * np.exp(-1.96 * sd), rel=1e-3)
        assert found.upper == pytest.approx(1000 * np.exp(1.96 * sd), rel=1e-3)


def test_a_peak_is_asked_apart_from_an_energy():
    cut_off = limiting(quantity="peak")
    assert cut_off.let_through(1000.0, quantity="peak").slow.value == pytest.approx(3000.0)
    assert cut_off.let_through(1000.0).slow is None


def test_over_several_voltages_the_largest_answers_and_one_asked_for_answers_alone():
    curves = [
        line(
            "slow",
            [(100, value), (1000, 10 * value)],
            base="A",
            quantity="let_through",
            conditions=Conditions(voltage_v=u),
        )
        for u, value in ((230.0, 300.0), (400.0, 450.0))
    ]
    made = limiting(*curves)
    assert made.let_through(100.0).slow.value == 450.0
    assert made.let_through(100.0, conditions=Conditions(voltage_v=230.0)).slow.value == 300.0
    assert made.let_through(100.0, conditions=Conditions(voltage_v=500.0)).slow.status == "not_covered"


def test_pre_arcing_energy_never_answers_for_operating():
    fuse = device(line("slow", RISING, base="A", quantity="let_through", meaning="pre_arcing"), kind="fuse")
    assert fuse.let_through(1000.0, meaning="operating").slow.status == "not_covered"
    assert fuse.let_through(1000.0, meaning="pre_arcing").slow.value == pytest.approx(3000.0)


def test_a_tolerance_in_current_scales_an_energy_by_its_square_and_a_peak_by_itself():
    # A fuse that melts at 0.9 of the current melts at 0.81 of the energy: 12 000 A2s become 9 720 A2s.
    mean = line("mean", [(500, 12_000), (50_000, 12_000)], base="A", quantity="let_through", meaning="pre_arcing")
    fast, slow = edges_of_mean(mean, Tolerance(current=(-0.1, 0.1)))
    np.testing.assert_allclose(fast.parts[0].value, 9720.0, rtol=1e-12)
    np.testing.assert_allclose(slow.parts[0].value, 14_520.0, rtol=1e-12)
    np.testing.assert_allclose(fast.parts[0].current, [450.0, 45_000.0])
    peak = line("mean", [(500, 1000), (50_000, 4000)], base="A", quantity="peak")
    np.testing.assert_allclose(edges_of_mean(peak, Tolerance(current=(-0.1, 0.1)))[1].parts[0].value, [1100, 4400])
    assert edges_of_mean(peak, Tolerance(time=(-0.1, 0.1))) == ()


@pytest.mark.parametrize("wrong", [0.0, -3.0, float("nan")])
def test_an_energy_that_is_none_is_refused(wrong):
    with pytest.raises(DeviceError, match="let-through"):
        limiting().let_through_current(wrong)
