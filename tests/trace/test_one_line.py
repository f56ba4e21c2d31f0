"""One line on a bare page: no bias in any direction, the bound reached in noise, kinks, crossings, gaps, errors."""

import time

import numpy as np
import pytest
from skimage.graph import route_through_array

from curvelab.errors import TraceError
from curvelab.trace.guided import Guide, trace_guided
from curvelab.trace.prepare import prepare
from curvelab.trace.profile import bound
from tests.trace.pages import away_from, axes_without_grid, ink_of, page

SHAPE = (420, 560)


def trace_of(sheet, *through, **guide):
    return trace_guided(prepare(sheet, axes_without_grid(sheet)), Guide(through=through, **guide))


@pytest.mark.parametrize("angle", [0.0, 0.7, 7.0, 30.0, 45.0, 63.0, 89.0, 90.0])
@pytest.mark.parametrize("width", [2.25, 3.5])
def test_noise_free_lines_of_any_direction_have_no_bias(angle: float, width: float) -> None:
    turn = np.radians(angle)
    # edges of level lines lie on the page's sub-pixels of 1/24, so that their ink is exact
    middle = np.array([280 + 7 / 24, 210 + 9 / 24])
    along = np.array([np.cos(turn), np.sin(turn)])
    line = np.array([middle - 160 * along, middle + 160 * along])
    trace, warnings = trace_of(page(ink_of(line, width, SHAPE)), (281.0, 209.5))
    normal = np.array([-np.sin(turn), np.cos(turn)])
    offset = (trace.places - middle) @ normal
    assert abs(offset.mean()) < 0.01
    assert np.sqrt(np.mean(offset**2)) < 0.02
    assert trace.width == pytest.approx(width, abs=0.1)
    assert warnings == ()
    # the very ends, a stroke's half width aside
    for end in line:
        assert np.hypot(*(trace.places - end).T).min() < 2.0 + width / 2


@pytest.mark.parametrize("noise", [0.02, 0.05, 0.10])
def test_centres_reach_the_cramer_rao_bound(noise: float) -> None:
    # Bound of the centre of a blurred box in white noise, per px of length: reference in profile.bound; the page is
    # anti-aliased, so the only blur is the pixel's own.
    errors = []
    for seed, angle in enumerate(np.radians([3.0, 17.0, 31.0, 44.0, 58.0, 75.0])):
        along = np.array([np.cos(angle), np.sin(angle)])
        line = np.array([[280.0, 210.0] - 170 * along, [280.0, 210.0] + 170 * along])
        trace, _ = trace_of(page(ink_of(line, 3.0, SHAPE), noise, seed), (280.0, 211.0))
        # a node holds the pixels of 1 / max|cos| px of length, the bound is for one px
        error = (trace.places - line[0]) @ np.array([-along[1], along[0]])
        errors.append(error / np.sqrt(np.abs(along).max()))
    rms = float(np.sqrt(np.mean(np.concatenate(errors) ** 2)))
    ratio = rms / float(bound(1.0 / noise, 3.0, 0.05))
    print(f"noise {noise:.0%}: {ratio:.3f} of the bound")
    assert ratio < 1.3


def test_kinks_of_a_breaker_are_followed() -> None:
    line = np.array([[60.0, 50.0], [230.4, 190.2], [230.4, 330.6], [500.0, 338.0]])
    trace, _ = trace_of(page(ink_of(line, 3.0, SHAPE)), (100.0, 83.0))
    away = away_from(trace.places, line)
    assert away.max() < 0.15
    for corner in line:
        assert np.hypot(*(trace.places - corner).T).min() < 6.0


@pytest.mark.parametrize("angle", [10.0, 15.0, 25.0, 60.0])
def test_crossing_lines_are_not_exchanged(angle: float) -> None:
    middle = np.array([280.0, 210.0])
    lines = []
    for turn in np.radians([20.0, 20.0 + angle]):
        along = np.array([np.cos(turn), np.sin(turn)])
        lines.append(np.array([middle - 180 * along, middle + 180 * along]))
    sheet = page(np.maximum(*(ink_of(line, 3.0, SHAPE) for line in lines)), 0.03)
    for line in lines:
        start = tuple(line[0] + 0.2 * (line[1] - line[0]))
        trace, _ = trace_of(sheet, start)
        away = away_from(trace.places, line)
        # an exchanged line would end 30 px away; where both print as one, a stroke's width is what can be told
        assert away.max() < 1.5
        assert np.median(away) < 0.05
        assert np.hypot(*(trace.places - line[1]).T).min() < 4.0


def test_a_gap_is_recorded_and_left_empty() -> None:
    line = np.array([[60.0, 80.0], [500.0, 330.0]])
    ink = ink_of(line, 3.0, SHAPE)
    ink[170:215, 240:300] = 0.0
    trace, _ = trace_of(page(ink), (100.0, 103.0))
    assert len(trace.gaps) == 1
    x = trace.places[:, 0]
    assert not np.any((x > 245) & (x < 290) & (trace.places[:, 1] > 172) & (trace.places[:, 1] < 212))
    assert x.max() > 495


def test_what_the_guide_avoids_is_no_part_of_the_line() -> None:
    line = np.array([[60.0, 80.0], [500.0, 330.0]])
    trace, _ = trace_of(page(ink_of(line, 3.0, SHAPE)), (100.0, 103.0), avoid=((380.0, 200.0, 540.0, 400.0),))
    assert trace.places[:, 0].max() < 400


def test_a_guide_without_a_line_says_how_far_the_nearest_is() -> None:
    sheet = page(ink_of(np.array([[60.0, 80.0], [500.0, 330.0]]), 3.0, SHAPE))
    with pytest.raises(TraceError, match=r"No line at .* \(60\.0, 300\.0\)\. The nearest line is \d+\.\d away"):
        trace_of(sheet, (60.0, 300.0))
    with pytest.raises(TraceError, match="off the plot"):
        trace_of(sheet, (-50.0, 100.0))


def test_guides_on_different_lines_are_refused() -> None:
    first, second = np.array([[60.0, 80.0], [500.0, 180.0]]), np.array([[60.0, 280.0], [500.0, 380.0]])
    sheet = page(np.maximum(ink_of(first, 3.0, SHAPE), ink_of(second, 3.0, SHAPE)))
    with pytest.raises(TraceError, match="different lines"):
        trace_of(sheet, tuple(first.mean(axis=0)), tuple(second.mean(axis=0)))


def test_a_minimal_path_is_a_coarser_independent_tracer() -> None:
    # External check: scikit-image's minimal-cost path over the same ink follows the same line, to a pixel.
    line = np.array([[60.0, 60.0], [180.0, 190.0], [320.0, 270.0], [500.0, 300.0]])
    ink = ink_of(line, 3.0, SHAPE)
    sheet = page(ink, 0.05)
    prepared = prepare(sheet, axes_without_grid(sheet))
    begun = time.perf_counter()
    trace, _ = trace_guided(prepared, Guide(through=((100.0, 103.0),)))
    ours = time.perf_counter() - begun
    begun = time.perf_counter()
    cost = 0.05 + np.asarray(sheet.pixels.grey, dtype=float) / 255.0
    path, _ = route_through_array(cost, (60, 60), (300, 500), fully_connected=True, geometric=True)
    theirs = time.perf_counter() - begun
    other = away_from(np.array(path, dtype=float)[:, ::-1], line)
    mine = away_from(trace.places, line)
    rms, path_rms = np.sqrt(np.mean(mine**2)), np.sqrt(np.mean(other**2))
    print(f"trace {rms:.3f} px in {ours * 1e3:.0f} ms, minimal path {path_rms:.3f} px in {theirs * 1e3:.0f} ms")
    assert rms < 0.3 * path_rms
