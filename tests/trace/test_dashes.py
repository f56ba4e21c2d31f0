"""A line followed from dashes into an unbroken stretch is doubted where its print changes."""

import numpy as np

from curvelab.records.trace import Gap, Trace
from curvelab.trace.dashes import changes_of_print, is_broken

SOLID = np.stack([np.full(400, 50.0), np.arange(400.0)], axis=1)
DASHED = np.stack([np.full(800, 50.0), 430.0 + np.arange(800.0)], axis=1)[np.arange(800) % 20 < 13]


def followed(*pieces: np.ndarray) -> Trace:
    places = np.concatenate(pieces)
    ends = np.cumsum([len(piece) for piece in pieces])[:-1]
    gaps = tuple(Gap(start=tuple(places[k - 1]), end=tuple(places[k])) for k in ends)
    return Trace(
        places=places,
        sd=np.full(len(places), 0.1),
        correlation_length=5.0,
        gaps=gaps,
        ends_at_frame=(True, True),
        colour=None,
        width=2.0,
        boundary=False,
        origin="guided",
        confidence=1.0,
    )


def test_dashes_are_told_from_a_line() -> None:
    assert is_broken(DASHED)
    assert not is_broken(SOLID)


def test_a_change_of_print_is_at_the_gap() -> None:
    assert changes_of_print(followed(SOLID, DASHED), 1.0) == [(50.0, 399.0)]


def test_a_label_on_a_line_changes_nothing() -> None:
    assert changes_of_print(followed(SOLID, np.add(SOLID, (0.0, 430.0))), 1.0) == []
    assert changes_of_print(followed(DASHED, np.add(DASHED, (0.0, 840.0))), 1.0) == []
    assert changes_of_print(followed(SOLID), 1.0) == []
