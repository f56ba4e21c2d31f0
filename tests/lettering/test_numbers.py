"""Numbers as they are printed along axes.

The SI Brochure (BIPM, 9th edition, 5.4.4) prints groups of three digits with thin spaces and allows a point or a comma
as the decimal marker; so a comma or point before three digits can be either and stays open.
"""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from curvelab.lettering.numbers import number_of, unit_of


@pytest.mark.parametrize(
    ("text", "value", "unit"),
    [
        ("0.01", 0.01, None),
        (".01", 0.01, None),
        ("0,01", 0.01, None),
        ("1 000", 1000.0, None),
        ("10 000", 10000.0, None),
        ("299 792", 299792.0, None),
        ("1,000,000", 1e6, None),
        ("10²", 100.0, None),
        ("10⁻²", 0.01, None),
        ("10^-2", 0.01, None),
        ("10^{-3}", 0.001, None),
        ("2 × 10³", 2000.0, None),
        ("1k", 1000.0, None),
        ("10 k", 10000.0, None),
        ("2M", 2e6, None),
        ("2 min", 2.0, "min"),
        ("1 h", 1.0, "h"),
        ("500 ms", 500.0, "ms"),
        ("20 kA", 20.0, "kA"),
        ("5 x In", 5.0, "xIn"),
        ("5×Ir", 5.0, "xIr"),
        ("0.5 IΔn", 0.5, "xIdn"),
        ("1e3", 1000.0, None),
    ],
)
def test_one_reading(text: str, value: float, unit: str | None) -> None:
    best, *others = number_of(text)
    assert (best.value, best.unit) == (value, unit)
    assert not others


@pytest.mark.parametrize("text", ["1,000", "1.000"])
def test_thousand_or_one(text: str) -> None:
    assert [number.value for number in number_of(text)] == [1000.0, 1.0]
    assert math.isclose(sum(number.weight for number in number_of(text)), 1.0)


def test_a_decimal_comma_before_a_zero_is_no_thousand() -> None:
    assert [number.value for number in number_of("0,001")] == [0.001]


@pytest.mark.parametrize(("text", "power"), [("102", 100.0), ("10-2", 0.01), ("10 3", 1000.0), ("101", 10.0)])
def test_a_lost_exponent_is_a_weak_alternative(text: str, power: float) -> None:
    weights = {number.value: number.weight for number in number_of(text)}
    assert 0.0 < weights[power] <= 0.15
    if text.isdigit():
        assert weights[float(text)] > 5 * weights[power]


@pytest.mark.parametrize(
    "text", ["", "x", "In", "0", "-5", "1000 2000", "B16", "5 furlongs", "10⁹⁹", "5 xA", "1..2", "10^"]
)
def test_no_number(text: str) -> None:
    assert number_of(text) == ()


@given(st.text(max_size=12))
def test_any_text_gives_positive_finite_numbers(text: str) -> None:
    numbers = number_of(text)
    assert all(math.isfinite(number.value) and number.value > 0 for number in numbers)
    assert sum(number.weight for number in numbers) <= 1.0 + 1e-9


@given(st.integers(1, 9), st.integers(-6, 7))
def test_decades_are_exact(digit: int, decade: int) -> None:
    value = float(f"{digit}e{decade}")
    raised = f"{decade}".translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))
    assert number_of(f"{digit} x 10{raised}")[0].value == value
    assert number_of(f"{value:.10f}".rstrip("0").rstrip("."))[0].value == value


@pytest.mark.parametrize(
    ("text", "unit"), [("seconds", "s"), ("× In", "xIn"), ("(kA)", "kA"), ("A²s", "A2s"), ("furlong", None)]
)
def test_units(text: str, unit: str | None) -> None:
    assert unit_of(text) == unit


@pytest.mark.parametrize(("text", "value", "unit"), [("IOO", 100.0, None), ("O.I", 0.1, None), ("5oo ms", 500.0, "ms")])
def test_digits_that_look_like_letters_are_a_doubtful_number(text: str, value: float, unit: str | None) -> None:
    (number,) = number_of(text)
    assert (number.value, number.unit) == (value, unit)
    assert number.weight < 1.0
