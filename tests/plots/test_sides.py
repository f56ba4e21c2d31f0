from dataclasses import replace

import pytest

from curvelab.plots.bands import bands_figure
from curvelab.plots.ink import DEVICE_INKS
from curvelab.records.stretch import Sides, Stretch
from tests.plots.examples import fuse, mcb

BREAKER, UPSTREAM = "riverside-b16", "moor-g63"
STRETCHES = (
    Stretch(from_a=20.0, to_a=25.0, sooner="not_covered"),
    Stretch(from_a=25.0, to_a=600.0, sooner=BREAKER),
    Stretch(from_a=600.0, to_a=900.0, sooner="undecided"),
)
SIDES = Sides(a=UPSTREAM, b=BREAKER, stretches=STRETCHES)


def drawn(devices, sides):
    figure = bands_figure(devices, sides=sides)
    figure.draw_without_rendering()
    return figure, figure.axes


def test_the_strip_shares_the_current_axis_and_names_who_clears_first():
    _, (plot, strip) = drawn([fuse(63), mcb()], [SIDES])
    assert strip.get_xlim() == plot.get_xlim()
    assert [text.get_text() for text in strip.texts] == ["A / B", "B"]
    bars = {(bar.get_x(), bar.get_x() + bar.get_width()): bar.get_hatch() for bar in strip.patches if bar.get_hatch()}
    assert bars == {(25.0, 600.0): DEVICE_INKS[1].hatch, (600.0, 900.0): "xxxxxx"}


def test_what_one_pair_leaves_undecided_is_shaded_over_the_whole_plot():
    _, (plot, _) = drawn([fuse(63), mcb()], [SIDES])
    shaded = [patch for patch in plot.patches if type(patch).__name__ == "Rectangle"]
    assert [(patch.get_x(), patch.get_x() + patch.get_width()) for patch in shaded] == [pytest.approx((600.0, 900.0))]


def test_several_pairs_have_a_row_each_beneath_the_labels_of_the_axes():
    other = replace(SIDES, b="riverside-b32")
    _, (plot, strip) = drawn([fuse(63), mcb(), mcb("riverside-b32", 32.0)], [SIDES, other])
    assert strip.get_ylim() == (2.0, 0.0)
    assert strip.get_window_extent().y1 < plot.xaxis.get_tightbbox().y0


def test_devices_of_one_rating_are_drawn_in_multiples_and_so_is_the_strip():
    second = mcb("riverside-b16-new")
    sides = Sides(a=BREAKER, b="riverside-b16-new", stretches=(Stretch(from_a=32.0, to_a=64.0, sooner="undecided"),))
    _, (plot, strip) = drawn([mcb(), second], [sides])
    assert "Multiple" in plot.get_xlabel()
    assert [bar.get_x() for bar in strip.patches if bar.get_hatch()] == [pytest.approx(2.0)]


def test_revisions_of_one_device_are_told_apart_by_number():
    figure, _ = drawn([replace(mcb(), revision=2), replace(mcb(), revision=3)], [])
    assert "riverside-b16@2 · riverside-b16@3" in [text.get_text() for text in figure.texts]


def test_eight_devices_have_inks_and_hatchings_of_their_own():
    assert len({ink.colour for ink in DEVICE_INKS}) == len({ink.hatch for ink in DEVICE_INKS}) == 8


def test_eight_devices_are_listed_within_the_page():
    figure, _ = drawn([mcb(f"riverside-breaker-of-hall-{number}", 16.0 + number) for number in range(8)], [])
    page = figure.bbox
    for legend in figure.legends:
        extent = legend.get_window_extent()
        assert page.x0 < extent.x0 < extent.x1 < page.x1
