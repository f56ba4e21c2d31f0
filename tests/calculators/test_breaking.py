"""Breaking capacity at a voltage, alone, backed up by energy, and with a conditional short-circuit current."""

import pytest

from curvelab.calculators.breaking import ShortCircuit, breaking
from curvelab.errors import InputError
from curvelab.records.device import Breaking
from tests.devices.made import device, line

ICN = Breaking(quantity="Icn", value_a=6000.0, voltage_v=230.0)


def breaker(*curves, breaking=(ICN,), **fields):
    return device(*curves, key="c16", rated_current_a=16.0, breaking=breaking, **fields)


def energy(points, meaning="clearing", quantity="let_through"):
    return line("slow", points, base="A", quantity=quantity, meaning=meaning)


def back_up(*curves, capacity_a=80_000.0):
    entries = (Breaking(quantity="Icu", value_a=capacity_a, voltage_v=400.0),)
    return device(*curves, key="gg100", kind="fuse", characteristic="gG", rated_current_a=100.0, breaking=entries)


def outcomes(answer):
    return [(each.rule, each.outcome) for each in answer.findings if not each.advisory]


@pytest.mark.parametrize(
    ("prospective_a", "voltage_v", "outcome"),
    [
        (5000, 230, "meets"),
        (6000, 230, "at limit"),
        (6500, 230, "fails"),
        (5000, 120, "meets"),
        (500, 400, "not covered"),
    ],
)
def test_a_breaker_alone(prospective_a, voltage_v, outcome):
    answer = breaking(breaker(), ShortCircuit(prospective_a=prospective_a, voltage_v=voltage_v))
    assert outcomes(answer) == [("breaking-capacity", outcome)]


def test_the_capacity_is_that_of_the_voltage_and_the_supply():
    stated = (
        ICN,
        Breaking(quantity="Icu", value_a=3000.0, voltage_v=400.0),
        Breaking(quantity="Icu", value_a=10_000.0, voltage_v=250.0, supply="dc"),
    )
    made = breaker(breaking=stated)
    assert breaking(made, ShortCircuit(prospective_a=1, voltage_v=400)).capacity.value == 3000.0
    assert breaking(made, ShortCircuit(prospective_a=1, voltage_v=230, supply="ac")).capacity.value == 6000.0
    assert breaking(made, ShortCircuit(prospective_a=1, voltage_v=250, supply="dc")).capacity.value == 10_000.0


def test_a_back_up_is_not_needed_where_the_device_breaks_it_alone():
    answer = breaking(breaker(), ShortCircuit(prospective_a=5000, voltage_v=230), back_up())
    assert outcomes(answer) == []
    assert answer.findings[0].outcome == "meets"


def test_a_back_up_that_lets_through_less_than_the_device_itself_at_its_capacity():
    made = breaker(energy([(100, 300), (6000, 40_000)]))
    fuse = back_up(energy([(1000, 20_000), (50_000, 36_000)], meaning="operating"))
    answer = breaking(made, ShortCircuit(prospective_a=10_000, voltage_v=230), fuse)
    assert outcomes(answer) == [("breaking-capacity", "meets"), ("let_through", "meets")]
    assert answer.findings[-1].limit == pytest.approx(40_000.0)
    assert "maker's coordination table" in answer.findings[-1].note


def test_a_back_up_that_lets_through_more_fails():
    made = breaker(energy([(100, 300), (6000, 18_000)]))
    fuse = back_up(energy([(1000, 20_000), (50_000, 36_000)], meaning="operating"))
    answer = breaking(made, ShortCircuit(prospective_a=10_000, voltage_v=230), fuse)
    assert outcomes(answer) == [("breaking-capacity", "meets"), ("let_through", "fails")]


def test_peaks_are_compared_where_both_are_drawn():
    made = breaker(energy([(100, 300), (6000, 40_000)]), energy([(100, 150), (6000, 5000)], quantity="peak"))
    fuse = back_up(
        energy([(1000, 20_000), (50_000, 36_000)], meaning="operating"),
        energy([(1000, 2000), (50_000, 9000)], meaning="operating", quantity="peak"),
    )
    answer = breaking(made, ShortCircuit(prospective_a=50_000, voltage_v=230), fuse)
    assert outcomes(answer)[-1] == ("peak", "fails")


@pytest.mark.parametrize(
    ("device_curves", "fuse_curves"),
    [
        ((), ()),
        ((energy([(100, 300), (6000, 40_000)]),), ()),
        ((), (energy([(1000, 20_000), (50_000, 36_000)], meaning="operating"),)),
        (
            (energy([(100, 300), (6000, 40_000)]),),
            (energy([(1000, 20_000), (50_000, 36_000)], meaning="pre_arcing"),),
        ),
    ],
)
def test_without_both_energies_only_the_makers_table_tells(device_curves, fuse_curves):
    answer = breaking(breaker(*device_curves), ShortCircuit(prospective_a=10_000, voltage_v=230), back_up(*fuse_curves))
    assert [outcome for _, outcome in outcomes(answer)] == ["meets", "not covered"]


def test_a_back_up_that_cannot_break_it_fails():
    answer = breaking(breaker(), ShortCircuit(prospective_a=90_000, voltage_v=230), back_up())
    assert outcomes(answer)[0] == ("breaking-capacity", "fails")


def test_a_conditional_current_holds_with_the_back_up():
    entries = (Breaking(quantity="Inc", value_a=10_000.0, voltage_v=230.0),)
    residual = device(key="rcd", kind="rcd", rated_residual_current_a=0.03, breaking=entries)
    answer = breaking(residual, ShortCircuit(prospective_a=8000, voltage_v=230), back_up())
    assert outcomes(answer) == [("breaking-capacity", "meets"), ("breaking-capacity", "meets")]
    assert breaking(residual, ShortCircuit(prospective_a=8000, voltage_v=230)).findings[0].outcome == "not covered"


def test_a_switch_breaks_no_short_circuit():
    switch = device(key="isolator", kind="switch", breaking=(Breaking(quantity="Icw", value_a=5000.0, duration_s=1.0),))
    answer = breaking(switch, ShortCircuit(prospective_a=1000, voltage_v=230))
    assert "not a protective device" in answer.capacity.reason
    assert outcomes(answer) == [("breaking-capacity", "not covered")]


def test_numbers_that_cannot_be_are_refused():
    with pytest.raises(InputError, match="voltage_v"):
        ShortCircuit(prospective_a=1000.0, voltage_v=-230.0)
