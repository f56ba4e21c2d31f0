"""The plane map fitted to lines, beside independent fits, and whether its stated covariance is true."""

import cv2
import numpy as np
import pytest

from curvelab.axes.planefit import Line, Scatter, Tilt, affine_map, fit_plane
from curvelab.records.axes import PlaneMap

CENTRE = np.array([500.0, 400.0])
REACH = 500.0
SCATTER = Scatter(lines=(1e-3, 1e-3), place=1e-3)
START = affine_map(CENTRE, REACH, np.array([[1.5, 1.5, 0.0], [1.0, 0.0, -1.6]]))
VALUES = np.log10([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 20, 30, 40, 50, 60, 70, 80, 90, 100])


def lines_of(plane: PlaneMap, whole: float, single: float, rng: np.random.Generator) -> list[Line]:
    """Lines of both axes, ten places each, off by an error of the line and one of each place."""
    lines = []
    for axis in (0, 1):
        for scaled in VALUES + (0.5 if axis == 0 else -1.0):
            pairs = np.full((10, 2), scaled)
            pairs[:, 1 - axis] = np.linspace(-0.4, 2.4, 10)
            places = plane.places(pairs)
            normal = plane.jacobian(places)[:, axis]
            normal = normal / np.linalg.norm(normal, axis=1)[:, None]
            off = whole * rng.standard_normal() + single * rng.standard_normal(10)
            lines.append(Line(axis=axis, scaled=float(scaled), points=places + off[:, None] * normal))
    return lines


def turned(angle: float, projective: tuple[float, float] = (0.0, 0.0)) -> PlaneMap:
    c, s = np.cos(angle), np.sin(angle)
    h = np.array([1.5, 1.5 * c, 1.5 * s, 1.0, 1.6 * s, -1.6 * c, *projective])
    return PlaneMap(
        centre=CENTRE, reach=REACH, projective=h, powers=(), warp=np.zeros((2, 0)), covariance=np.zeros((8, 8))
    )


def test_exact_lines_give_the_map_back() -> None:
    truth = turned(0.03)
    fitted = fit_plane(START, lines_of(truth, 0, 0, np.random.default_rng(0)), SCATTER)
    assert fitted.map.powers == ()
    assert fitted.map.projective == pytest.approx(truth.projective, abs=1e-9)


def test_an_upright_grid_agrees_with_polyfit() -> None:
    """Each axis by itself is a straight line through (place, logarithm): numpy's fit is the independent one."""
    lines = lines_of(turned(0.0), 0.2, 0.0, np.random.default_rng(4))
    fitted = fit_plane(START, lines, SCATTER, models=())
    for axis, coordinate in ((0, 0), (1, 1)):
        mine = [line for line in lines if line.axis == axis]
        across = [line.points[:, coordinate].mean() for line in mine]
        rate, place = np.polyfit([line.scaled for line in mine], across, 1)
        ours = fitted.map.places([[0.5, -1.0]] if axis else [[0.5, 0.0]])[0, coordinate]
        scaled = -1.0 if axis else 0.5
        assert ours == pytest.approx(place + rate * scaled, abs=0.02)


def test_perspective_is_found_and_agrees_with_find_homography() -> None:
    truth = turned(0.02, (0.03, -0.02))
    rng = np.random.default_rng(8)
    lines = lines_of(truth, 0.0, 0.05, rng)
    fitted = fit_plane(START, lines, SCATTER)
    assert fitted.map.projective[6:] == pytest.approx([0.03, -0.02], abs=2e-4)
    grid = np.stack(np.meshgrid(VALUES + 0.5, VALUES - 1.0, indexing="ij"), axis=-1).reshape(-1, 2)
    places = truth.places(grid)
    homography, _ = cv2.findHomography(places + 0.05 * rng.standard_normal(places.shape), grid, 0)
    theirs = cv2.perspectiveTransform(places[None], homography)[0]
    ours = fitted.map.scaled(places)
    assert np.abs(ours - grid).max() < 3e-4
    assert np.abs(ours - theirs).max() < 5e-4


def test_a_curl_of_the_page_is_met_by_a_warp() -> None:
    plain = turned(0.01)
    curled = PlaneMap(
        centre=CENTRE,
        reach=REACH,
        projective=plain.projective,
        powers=((2, 0), (1, 1), (0, 2)),
        warp=np.array([[0.01, 0.0, 0.004], [0.0, -0.006, 0.012]]),
        covariance=np.zeros((14, 14)),
    )
    fitted = fit_plane(START, lines_of(curled, 0.01, 0.03, np.random.default_rng(1)), SCATTER)
    assert fitted.map.powers != ()
    places = curled.places(np.stack(np.meshgrid(VALUES + 0.5, VALUES - 1.0), axis=-1).reshape(-1, 2))
    assert np.abs(fitted.map.scaled(places) - curled.scaled(places)).max() < 3e-4


def test_errors_shared_along_lines_are_counted_per_line() -> None:
    """The normalised squared error averages one over many draws: the covariance states what errors are made."""
    truth = turned(0.01)
    where = CENTRE + np.array([[-300.0, -200], [0, 0], [250, 200], [-200, 300]])
    ratios = []
    for seed in range(60):
        fitted = fit_plane(START, lines_of(truth, 0.3, 0.1, np.random.default_rng(seed)), SCATTER, models=())
        off = fitted.map.scaled(where) - truth.scaled(where)
        stated = fitted.map.covariance_at(where)
        ratios.append(off[:, 0] ** 2 / stated[:, 0, 0])
        ratios.append(off[:, 1] ** 2 / stated[:, 1, 1])
    assert 0.75 < np.mean(ratios) < 1.35


def test_a_line_of_another_pattern_is_left_out() -> None:
    truth = turned(0.0)
    lines = lines_of(truth, 0.02, 0.02, np.random.default_rng(2))
    lines[5] = Line(axis=0, scaled=lines[5].scaled, points=lines[5].points + np.array([4.0, 0.0]))
    fitted = fit_plane(START, lines, SCATTER)
    assert list(np.flatnonzero(~fitted.kept)) == [5]
    assert np.abs(fitted.map.scaled(CENTRE) - truth.scaled(CENTRE)).max() < 1e-4


def test_marks_alone_need_a_tilt_and_state_their_scatter() -> None:
    marks = [Line(axis=0, scaled=s, points=np.array([[p, 700.0]]), sd=0.7) for s, p in ((0.0, 0.0), (2.0, 666.7))]
    marks += [Line(axis=1, scaled=s, points=np.array([[10.0, p]]), sd=0.7) for s, p in ((0.0, 712.5), (2.0, 87.5))]
    tilts = [Tilt(axis=0, square=False, sd=5e-3), Tilt(axis=1, square=True, sd=2e-3)]
    fitted = fit_plane(START, marks, SCATTER, tilts)
    at_mark = fitted.map.covariance_at([[0.0, 700.0]])[0, 0, 0] ** 0.5
    assert at_mark == pytest.approx(0.7 / 333.3, rel=0.1)
    assert fitted.map.places([[0.0, 0.0]])[0] == pytest.approx([0.0, 712.5], abs=0.5)


def test_bowed_paper_shows_itself_in_a_few_lines() -> None:
    """Four lines an axis tell a bulge of 6 px along both sides, seen at an angle; places between them are right."""
    truth = turned(0.01, (0.03, -0.02))
    waves = np.array([0.012, 0.009])

    def bowed(places: np.ndarray) -> np.ndarray:
        shares = (places - CENTRE) / REACH
        return places + REACH * waves * np.cos(1.5 * shares[:, ::-1])

    lines = []
    for axis in (0, 1):
        for scaled in (0.0, 0.7, 1.4, 2.0) if axis == 0 else (-1.0, 0.0, 1.0, 1.5):
            pairs = np.full((10, 2), scaled)
            pairs[:, 1 - axis] = np.linspace(0.0, 1.8, 10)
            lines.append(Line(axis=axis, scaled=scaled, points=bowed(truth.places(pairs))))
    fitted = fit_plane(START, lines, SCATTER)
    between = np.array([[0.3, 0.4], [1.1, 1.2], [1.7, 0.7]])
    off = fitted.map.scaled(bowed(truth.places(between))) - between
    assert fitted.model.bowed
    assert np.abs(off).max() < 0.0013  # 0.3 % of a value
