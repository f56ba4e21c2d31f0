"""What printed words are taken to say: numbers with their units, and silence where they are not clear."""

import pytest

from curvelab.reading.said import said_by


@pytest.mark.parametrize(
    ("text", "ratings"),
    [
        ("In = 16 A", (16.0,)),
        ("waveform A,40 A,230 V", (40.0,)),
        ("16,5 A", (16.5,)),
        ("1.5 A", (1.5,)),
        ("10, 16, 20 A", (10.0, 16.0, 20.0)),
        ("6 A and 10 A", (6.0, 10.0)),
        ("6/10/16 A", (6.0, 10.0, 16.0)),
        ("16,25 A", ()),  # a list that lost its space, or a decimal comma: not clear
        ("6 A to 63 A", ()),
        ("30 mA", ()),
        ("12 A2s", ()),
        ("0 A", ()),
    ],
)
def test_ratings_are_numbers_before_amperes(text: str, ratings: tuple[float, ...]) -> None:
    assert said_by(text).ratings == ratings


def test_a_range_is_no_list() -> None:
    assert said_by("QM B series, 6 A to 40 A").rating_range == (6.0, 40.0)


@pytest.mark.parametrize("text", ["residual-current device, 30 mA", "residual-current device,30 mA"])
def test_residual_current_with_or_without_a_space(text: str) -> None:
    assert said_by(text).residual_current_a == 0.03


def test_two_residual_currents_are_none() -> None:
    assert said_by("30 mA or 100 mA").residual_current_a is None
