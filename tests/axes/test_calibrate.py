"""Axes calibrated from marks on small drawn pages: how exact, how honest, and what is said of doubtful marks."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.axes.calibrate import calibrate
from curvelab.records.axes import Axes, Mark
from curvelab.records.sheet import Pixels
from curvelab.records.worksheet import AxisEntry
from tests.axes.pages import MAIN, Page, image_sheet

ENDS = ((1.0, 100.0), (0.1, 100.0))


def phased(seed: int, **changes: object) -> Page:
    """A page whose lines fall on the pixels differently for each seed."""
    rng = np.random.default_rng(seed)
    page = Page(
        left=80 + rng.uniform(0, 1), bottom=470 + rng.uniform(0, 1), x_decade=235 + rng.uniform(0, 10), seed=seed
    )
    return replace(page, **changes)  # type: ignore[arg-type]


def off(page: Page, axes: Axes) -> tuple[np.ndarray, np.ndarray]:
    """Errors of places all over the plot in pixels, and their squares by the stated variances; shapes (n, 2)."""
    current = np.logspace(0, page.decades[0], 7)
    time = 0.1 * np.logspace(0, page.decades[1], 7)
    pairs = np.stack(np.meshgrid(current, time, indexing="ij"), axis=-1).reshape(-1, 2)
    truth = page.places(pairs[:, 0], pairs[:, 1])
    back = np.linalg.inv(axes.map.jacobian(truth))
    error = (back @ (axes.map.scaled(truth) - np.log10(pairs))[:, :, None])[:, :, 0]
    stated = back @ axes.map.covariance_at(truth) @ back.transpose(0, 2, 1)
    return error, error**2 / np.stack([stated[:, 0, 0], stated[:, 1, 1]], axis=1)


def codes(warnings: tuple) -> list[str]:
    return [warning.code for warning in warnings]


@pytest.mark.parametrize("width", [1.3, 2.0, 2.7])
def test_a_clean_drawing_is_calibrated_within_three_hundredths_of_a_pixel(width: float) -> None:
    for seed in range(4):
        page = phased(seed, width=width)
        axes, warnings = calibrate(page.sheet(), *page.marks(*ENDS))
        assert warnings == ()
        assert np.abs(off(page, axes)[0]).max() < 0.03
        assert axes.frame == pytest.approx((*page.places(1, 100)[0], *page.places(100, 0.1)[0]), abs=0.05)
        assert sum(line.axis == "current" for line in axes.grid) == 19
        assert sum(line.axis == "value" for line in axes.grid) == 28


def test_grid_lines_stand_at_their_logarithms() -> None:
    """Every measured line against log10, and a straight fit by numpy as independent calibration."""
    page = phased(7, width=2.0)
    axes, _ = calibrate(page.sheet(), *page.marks(*ENDS))
    lines = [line for line in axes.grid if line.axis == "current"]
    assert [line.value for line in lines] == pytest.approx([k * d for d in (1, 10) for k in range(1, 10)] + [100])
    across = np.array([line.points[:, 0].mean() for line in lines])
    logs = np.log10([line.value for line in lines])
    assert np.abs(across - page.places(10**logs, 1.0)[:, 0]).max() < 0.01
    rate, start = np.polyfit(logs, across, 1)
    middle = axes.places([10.0], [3.0])[0, 0]
    assert middle == pytest.approx(start + rate, abs=0.01)


def test_a_skewed_noisy_scan_states_what_errors_it_makes() -> None:
    errors, ratios = [], []
    for seed in range(6):
        page = phased(seed, skew=0.05 * (seed / 5 - 0.5), blur=0.8, noise=6.0, width=2.0)
        axes, warnings = calibrate(page.sheet(), *page.marks(*ENDS))
        assert warnings == ()
        error, ratio = off(page, axes)
        errors.append(error)
        ratios.append(ratio)
    assert np.sqrt(np.mean(np.square(errors))) < 0.02
    assert np.abs(errors).max() < 0.05
    assert 0.4 < np.mean(ratios) < 2.0


def test_lines_on_whole_pixels_are_recognised_and_bound_the_map() -> None:
    ratios = []
    for seed in range(8):
        page = phased(seed, snap=True, width=1.0)
        axes, warnings = calibrate(page.sheet(), *page.marks(*ENDS))
        assert codes(warnings) == ["grid-snapped"]
        error, ratio = off(page, axes)
        assert np.sqrt(np.mean(error**2)) < 0.30
        ratios.append(ratio)
    assert 0.2 < np.mean(ratios) < 2.0


def test_a_scan_in_black_and_white_is_calibrated() -> None:
    for seed in range(3):
        page = phased(seed, skew=0.02, blur=0.8, noise=5.0, width=2.5)
        grey = np.where(page.image() < 195, 0, 255).astype(np.uint8)
        axes, warnings = calibrate(image_sheet(grey), *page.marks(*ENDS))
        assert warnings == ()
        assert np.sqrt(np.mean(off(page, axes)[0] ** 2)) < 0.05


def test_strokes_are_met_within_a_hundred_thousandth_of_a_decade() -> None:
    for seed in range(5):
        page = phased(seed)
        axes, warnings = calibrate(page.vector_sheet(digits=3), *page.marks(*ENDS, scatter=0.2))
        assert warnings == ()
        error, ratio = off(page, axes)
        assert np.abs(error).max() / page.y_decade < 1e-5
        assert np.mean(ratio) < 4.0


@pytest.mark.parametrize("mantissas", [(1, 2, 5), MAIN, tuple(np.union1d(MAIN, np.arange(1.5, 10)))])
def test_every_usual_log_paper_is_met(mantissas: tuple[float, ...]) -> None:
    page = phased(3, mantissas=mantissas)
    axes, warnings = calibrate(page.sheet(), *page.marks(*ENDS))
    assert warnings == ()
    assert len(axes.grid) == sum(len(values) for values in page.values)
    assert np.abs(off(page, axes)[0]).max() < 0.03


def test_decades_alone_are_met_and_the_interval_says_how_well() -> None:
    """Three and four lines of a sharp 1.3 pixel stroke: too few phases to tell its width, hence some hundredths."""
    ratios = []
    for seed in range(8):
        page = phased(seed, mantissas=(1,))
        axes, warnings = calibrate(page.sheet(), *page.marks(*ENDS))
        assert warnings == ()
        assert len(axes.grid) == 7
        error, ratio = off(page, axes)
        assert np.abs(error).max() < 0.15
        ratios.append(ratio)
    assert np.mean(ratios) < 2.5


def test_marks_of_a_part_of_the_axes_reach_the_whole_plot() -> None:
    page = phased(5)
    axes, warnings = calibrate(page.sheet(), *page.marks((3.0, 20.0), (1.0, 6.0)))
    assert warnings == ()
    assert len(axes.grid) == 19 + 28
    assert np.abs(off(page, axes)[0]).max() < 0.03


def test_clicks_four_pixels_off_do_not_move_the_map() -> None:
    page = phased(2)
    current, time = page.marks(*ENDS, scatter=0.0)
    axes, _ = calibrate(page.sheet(), moved(current, 1, dx=3.8), moved(time, 0, dy=-3.8))
    assert np.abs(off(page, axes)[0]).max() < 0.03
    assert axes.current.marks[1].residual == pytest.approx(3.8, abs=0.03)
    assert axes.value.marks[0].residual == pytest.approx(-3.8, abs=0.03)
    assert axes.mark_residual_rms == pytest.approx(3.8 / np.sqrt(2), abs=0.03)


def moved(entry: AxisEntry, index: int, dx: float = 0.0, dy: float = 0.0, value: float | None = None) -> AxisEntry:
    marks = list(entry.marks)
    x, y = marks[index].at
    marks[index] = replace(marks[index], at=(x + dx, y + dy), value=value or marks[index].value)
    return replace(entry, marks=tuple(marks))


@pytest.mark.parametrize("values", [(1.0, 100.0), (1.0, 10.0, 100.0), (1.0, 5.0, 20.0, 100.0)])
def test_an_outlying_mark_is_named_and_outvoted(values: tuple[float, ...]) -> None:
    page = phased(4)
    current, time = page.marks(values, ENDS[1])
    axes, warnings = calibrate(page.sheet(), moved(current, 1, dx=12), time)
    assert codes(warnings) == ["mark-outlying"]
    assert f"mark {values[1]:g} at" in warnings[0].text
    assert warnings[0].at == axes.current.marks[1].at
    assert np.abs(off(page, axes)[0]).max() < 0.03


@pytest.mark.parametrize("wrong", [10.0, 1000.0, 20.0])
def test_a_wrong_value_is_never_followed_silently(wrong: float) -> None:
    page = phased(6)
    current, time = page.marks(*ENDS)
    _, warnings = calibrate(page.sheet(), moved(current, 1, value=wrong), time)
    assert "grid-disagrees" in codes(warnings) or "mark-outlying" in codes(warnings)


def test_a_wrong_value_among_three_is_outvoted_by_the_grid() -> None:
    page = phased(6)
    current, time = page.marks((1.0, 10.0, 100.0), ENDS[1])
    axes, warnings = calibrate(page.sheet(), moved(current, 1, value=1000.0), time)
    assert codes(warnings) == ["mark-outlying"]
    assert "mark 1000 at" in warnings[0].text
    assert np.abs(off(page, axes)[0]).max() < 0.03


def test_without_a_grid_the_marks_decide_and_say_how_well() -> None:
    blank = image_sheet(np.full((520, 640), 250, np.uint8))
    ratios = []
    for seed in range(40):
        page = phased(seed)
        axes, warnings = calibrate(blank, *page.marks(*ENDS))
        assert codes(warnings) == ["axes-from-marks", "axes-from-marks"]
        assert axes.grid == ()
        assert axes.grid_residual_rms is None
        ratios.append(off(page, axes)[1])
    assert 0.1 < np.mean(ratios) < 1.3


@pytest.mark.parametrize("beside", [0.0, 1.0, 2.5])
def test_a_curve_that_runs_along_a_grid_line_is_not_followed(beside: float) -> None:
    page = phased(1)
    x = float(page.places(3.0, 1.0)[0, 0]) + beside
    bold = replace(page, extras=((x, 60.0, x, 400.0, 3.0),))
    axes, _ = calibrate(bold.sheet(), *page.marks(*ENDS))
    assert np.abs(off(page, axes)[0]).max() < 0.03
    for line in axes.grid:
        if line.axis == "current" and line.value == pytest.approx(3.0):
            assert np.abs(line.points[:, 0] - page.places(3.0, 1.0)[0, 0]).max() < 0.3


def test_axes_may_be_exchanged() -> None:
    page = phased(9)
    first, second = page.marks(*ENDS)
    current = replace(second, quantity="current", unit="A")
    time = replace(first, quantity="time", unit="s")
    axes, _ = calibrate(page.sheet(), replace(current, direction="y"), time)
    assert (axes.current.direction, axes.value.direction) == ("y", "x")
    currents, times = axes.values(page.places(20.0, 5.0))
    assert (currents[0], times[0]) == pytest.approx((5.0, 20.0), rel=1e-4)


def test_a_linear_axis_finds_its_step() -> None:
    page = Page(mantissas=MAIN)
    grey = np.full((520, 640), 250, np.uint8)
    for k in range(11):
        grey[60:461, 80 + 48 * k] = 120
    for y in page.places(1.0, page.values[1])[:, 1]:
        grey[round(y), 80:561] = 120
    marks = (Mark(at=(80.6, 470.0), value=0.0), Mark(at=(559.2, 470.0), value=50.0))
    current = AxisEntry(quantity="current", scale="linear", unit="kA", marks=marks)
    axes, _ = calibrate(image_sheet(grey), current, page.marks(*ENDS)[1])
    lines = [line.value for line in axes.grid if line.axis == "current"]
    assert lines == pytest.approx(list(np.arange(0, 50_001, 5_000)))
    assert axes.values([[320.0, 300.0]])[0] == pytest.approx([25_000], abs=30)


def test_a_scan_in_a_page_is_given_in_places_of_the_page() -> None:
    """Pixels of a scan embedded at 200 pixels an inch: places are points, the map the same but for that scale."""
    page = phased(3)
    scale = 72 / 200
    shift = np.array([30.0, 40.0])
    plain = page.sheet()
    assert plain.pixels is not None
    to_place = np.array([[scale, 0.0, shift[0]], [0.0, scale, shift[1]]])
    pixels = Pixels(grey=plain.pixels.grey, colour=None, to_place=to_place)
    sheet = replace(plain, unit="pt", width=300, height=300, pixels=pixels)

    def placed(entry: AxisEntry) -> AxisEntry:
        marks = (replace(mark, at=tuple(scale * np.array(mark.at) + shift)) for mark in entry.marks)
        return replace(entry, marks=tuple(marks))

    current, time = page.marks(*ENDS)
    axes, _ = calibrate(sheet, placed(current), placed(time))
    expected, _ = calibrate(plain, current, time)
    places = page.places(np.array([2.0, 30.0]), np.array([0.5, 70.0]))
    assert axes.map.scaled(scale * places + shift) == pytest.approx(expected.map.scaled(places), abs=1e-5)
    assert axes.grid[0].width == pytest.approx(scale * expected.grid[0].width)


def test_pixels_need_not_be_square() -> None:
    """A turned page scanned with different resolutions across and down: the two directions lean differently."""
    page = phased(6, skew=0.02, blur=0.8, noise=4.0, width=2.0)
    tall = np.repeat(page.image(), 2, axis=0)

    def stretched(entry: AxisEntry) -> AxisEntry:
        marks = (replace(mark, at=(mark.at[0], 2 * mark.at[1] + 0.5)) for mark in entry.marks)
        return replace(entry, marks=tuple(marks))

    current, time = page.marks(*ENDS)
    axes, warnings = calibrate(image_sheet(tall), stretched(current), stretched(time))
    assert warnings == ()
    places = page.places(np.array([2.0, 30.0]), np.array([0.5, 70.0])) * [1, 2] + [0, 0.5]
    currents, times = axes.values(places)
    assert currents == pytest.approx([2.0, 30.0], rel=5e-4)
    assert times == pytest.approx([0.5, 70.0], rel=5e-4)
