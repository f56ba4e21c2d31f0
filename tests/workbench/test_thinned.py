"""What the page is sent of a reading: fewer points that stray no further than is seen, numbers as short as shown."""

from itertools import pairwise

import numpy as np
from hypothesis import given
from hypothesis import strategies as st

from curvelab.workbench.said import only_read
from curvelab.workbench.thinned import FIGURES, rounded, thinned


@given(seed=st.integers(0, 10_000), stray=st.floats(0.1, 3.0))
def test_no_place_strays_further_than_allowed(seed: int, stray: float) -> None:
    rng = np.random.default_rng(seed)
    places = np.cumsum(rng.normal([1.0, 0.4], 0.6, (200, 2)), axis=0)
    kept = thinned(places, stray)
    assert kept[0] == 0
    assert kept[-1] == len(places) - 1
    for first, last in pairwise(kept):
        start, chord = places[first], places[last] - places[first]
        away = places[first : last + 1] - start
        across = np.abs(away[:, 0] * chord[1] - away[:, 1] * chord[0]) / np.hypot(*chord)
        assert across.max() <= stray + 1e-9


def test_a_straight_line_is_two_places() -> None:
    places = np.stack([np.linspace(0, 500, 900), np.linspace(10, 700, 900)], axis=1)
    assert thinned(places, 0.1) == [0, 899]
    assert thinned(np.zeros((0, 2)), 1.0) == []


@given(st.lists(st.floats(min_value=1e-12, max_value=1e12) | st.floats(min_value=-1e12, max_value=-1e-12), min_size=1))
def test_numbers_are_the_nearest_of_so_many_figures(values: list[float]) -> None:
    assert rounded(np.array(values)).tolist() == [float(f"{value:.{FIGURES}g}") for value in values]


def test_what_is_not_a_number_stays_so() -> None:
    found = rounded(np.array([0.0, np.nan, np.inf, 5e300, -0.0]))
    assert found[0] == found[4] == 0
    assert np.isnan(found[1])
    assert np.isinf(found[2])
    assert found[3] == 5e300


def test_what_was_only_read_is_told_by_its_path() -> None:
    said = {"format": 1, "devices": [{"key": "weir"}], "axes": {"current": {"unit": "A"}}}
    read = {
        "format": 1,
        "devices": [{"key": "weir", "kind": "mcb"}],
        "axes": {"current": {"unit": "A", "marks": [{"at": [1, 2], "value": 3}]}, "time": {"unit": "s"}},
        "curves": [{"edge": "fast", "through": [[1, 2]]}],
    }
    assert only_read(said, read) == [
        "devices.0.kind",
        "axes.current.marks",
        "axes.time.unit",
        "curves.0.edge",
        "curves.0.through",
    ]
