import pytest

from curvelab.plots.ticks import (
    between,
    current_label,
    decades,
    human_times,
    is_two_or_five,
    rounded_range,
    value_label,
)


@pytest.mark.parametrize(
    ("given", "expected"),
    [((1.13, 87.0), (1, 100)), ((1.0, 100.0), (1, 100)), ((0.004, 7200), (0.002, 10000)), ((2.1, 4.9), (2, 5))],
)
def test_ranges_widen_to_one_two_or_five(given, expected):
    assert rounded_range(*given) == pytest.approx(expected)


def test_decades_and_the_lines_between_include_the_ends():
    assert decades(0.01, 1000) == pytest.approx([0.01, 0.1, 1, 10, 100, 1000])
    assert between(5, 30) == pytest.approx([5, 6, 7, 8, 9, 20, 30])


@pytest.mark.parametrize(
    ("value", "base", "words"),
    [
        (0.03, "A", "30 mA"),
        (1, "A", "1 A"),
        (500, "A", "500 A"),
        (1000, "A", "1 kA"),
        (20000, "A", "20 kA"),
        (5, "xIn", "5"),
        (0.5, "xIdn", "0.5"),
    ],
)
def test_currents_are_labelled_as_engineers_write_them(value, base, words):
    assert current_label(value, base) == words


@pytest.mark.parametrize(
    ("value", "words"), [(0.001, "1 ms"), (0.1, "100 ms"), (1, "1 s"), (1000, "1\N{THIN SPACE}000 s")]
)
def test_times_are_labelled_as_engineers_write_them(value, words):
    assert value_label(value, "time") == words


def test_let_through_is_labelled_by_powers_of_ten():
    assert value_label(1e6, "let_through") == "$10^{6}$"
    assert value_label(2000.0, "let_through") == "$2\\cdot 10^{3}$"
    assert value_label(2000.0, "peak") == "2 kA"


def test_twos_and_fives_of_any_decade_are_found():
    assert [value for value in between(0.01, 100) if is_two_or_five(value)] == pytest.approx(
        [0.02, 0.05, 0.2, 0.5, 2, 5, 20, 50]
    )


def test_long_times_have_names():
    assert human_times(10, 4000) == {60: "1 min", 300: "5 min", 1200: "20 min", 3600: "1 h"}
    assert human_times(0.001, 30) == {}
