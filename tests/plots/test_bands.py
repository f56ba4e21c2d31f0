from dataclasses import replace

import numpy as np
import pypdfium2
import pytest
from PIL import Image

from curvelab.errors import DeviceError, InputError
from curvelab.plots.bands import bands_figure, draw_bands
from curvelab.records.curve import Curve, typed_part
from curvelab.records.device import DeviceRecord, Nameplate
from tests.plots.examples import FINDINGS, fuse, mcb


def texts(figure):
    return [text.get_text() for axes in figure.axes for text in axes.texts]


def test_a_png_is_an_a4_page_at_print_resolution(tmp_path):
    draw_bands([mcb()], tmp_path / "one.png", findings=FINDINGS)
    with Image.open(tmp_path / "one.png") as image:
        width, height = image.size
        assert image.format == "PNG"
        assert image.getextrema()[0][0] < 60
    assert width == pytest.approx(210 / 25.4 * 200, abs=2)
    assert height == pytest.approx(297 / 25.4 * 200, abs=2)


def test_a_pdf_is_one_a4_page_with_text_to_search(tmp_path):
    draw_bands([mcb()], tmp_path / "one.pdf")
    document = pypdfium2.PdfDocument(tmp_path / "one.pdf")
    width, height = document[0].get_size()
    words = document[0].get_textpage().get_text_range()
    document.close()
    assert (width / 72 * 25.4, height / 72 * 25.4) == pytest.approx((210, 297), abs=0.2)
    assert "riverside-b16" in words


def test_an_svg_keeps_words_as_words(tmp_path):
    draw_bands([mcb()], tmp_path / "one.svg")
    svg = (tmp_path / "one.svg").read_text(encoding="utf-8")
    assert svg.startswith("<?xml")
    assert "Miniature circuit-breaker, characteristic B, 16 A" in svg


@pytest.mark.parametrize("ending", ["png", "svg", "pdf"])
def test_the_same_picture_gives_the_same_bytes_without_a_date(ending, tmp_path):
    for name in ("a", "b"):
        draw_bands([mcb(), fuse(63, gap=True)], tmp_path / f"{name}.{ending}")
    first, second = ((tmp_path / f"{name}.{ending}").read_bytes() for name in ("a", "b"))
    assert first == second
    assert b"CreationDate" not in first
    assert b"<dc:date>" not in first


def test_the_axes_hold_every_point_and_every_limit():
    axes = bands_figure([mcb()], findings=FINDINGS).axes[0]
    (left, right), (bottom, top) = axes.get_xlim(), axes.get_ylim()
    for curve in mcb().curves:
        for part in curve.parts:
            assert left <= part.current.min() <= part.current.max() <= right
            assert bottom <= part.value.min() <= part.value.max() <= top
    assert left <= 1.13
    assert top >= 3600
    assert axes.get_xscale() == axes.get_yscale() == "log"


def test_one_device_is_drawn_in_its_multiples_with_amperes_on_top():
    figure = bands_figure([mcb(rating=16.0)])
    axes = figure.axes[0]
    assert "Multiple of rated current" in axes.get_xlabel()
    figure.draw_without_rendering()
    top = axes.child_axes[0]
    assert top.get_xlim() == pytest.approx(np.array(axes.get_xlim()) * 16)


def test_devices_of_different_ratings_are_drawn_in_amperes():
    axes = bands_figure([mcb(), mcb("riverside-b32", 32.0)]).axes[0]
    assert axes.get_xlabel() == "Current"
    thick = [line for line in axes.lines if line.get_linewidth() > 1.5]
    assert [line.get_xdata()[-1] for line in thick] == pytest.approx([1600, 3200])


def test_edges_are_told_apart_without_colour():
    lines = bands_figure([mcb(), fuse(63)]).axes[0].lines
    fast, slow, mean = lines[0], lines[1], lines[2]
    assert slow.get_linewidth() > 2 * fast.get_linewidth()
    assert mean.get_linestyle() == "--"
    assert fast.get_linestyle() == slow.get_linestyle() == "-"


def test_several_devices_carry_letters_and_hatching():
    figure = bands_figure([mcb(), mcb("riverside-b32", 32.0), fuse(63)])
    assert texts(figure) == ["A", "B", "C"]
    assert {patch.get_hatch() for patch in figure.axes[0].patches if patch.get_hatch()} == {"/////"}


def test_a_gap_stays_open():
    lines = bands_figure([fuse(63, gap=True)]).axes[0].lines
    assert len(lines) == 2
    assert lines[0].get_xdata()[-1] < lines[1].get_xdata()[0]


def test_limits_stand_at_their_place_with_their_multiple_and_open_ones_say_so():
    figure = bands_figure([mcb()], findings=FINDINGS)
    assert [text.split(" ")[0] for text in texts(figure)] == ["1.13", "1.45", "2.55", "2.55", "3", "5"]
    assert texts(figure)[2].endswith("undecided")
    markers = [line for line in figure.axes[0].lines if line.get_linestyle() == "None"]
    places = [(line.get_xdata()[0], line.get_ydata()[0]) for line in markers]
    assert places == [(1.13, 3600), (1.45, 3600), (2.55, 60), (2.55, 1), (3, 0.1), (5, 0.1)]


def test_a_bracket_is_open_to_the_permitted_side():
    figure = bands_figure([mcb()], findings=FINDINGS)
    markers = [line.get_marker().vertices for line in figure.axes[0].lines if line.get_linestyle() == "None"]
    hold, trip = markers[0], markers[1]
    assert hold[:, 1].max() > 0 == hold[:, 1].min()
    assert trip[:, 1].min() < 0 == trip[:, 1].max()
    at_least, at_most = markers[4], markers[5]
    assert at_least[:, 0].max() > 0 == at_least[:, 0].min()
    assert at_most[:, 0].min() < 0 == at_most[:, 0].max()


def test_limits_of_other_devices_are_left_out():
    others = [replace(finding, device="elsewhere") for finding in FINDINGS]
    assert texts(bands_figure([mcb()], findings=others)) == []


@pytest.mark.parametrize(("quantity", "words"), [("let_through", "Let-through"), ("peak", "Cut-off")])
def test_let_through_and_cut_off_are_drawn_on_their_own_axes(quantity, words):
    part = typed_part([100.0, 1000.0, 10000.0], [500.0, 4000.0, 20000.0])
    curve = Curve(element="whole", edge="slow", meaning="operating", base="A", parts=(part,), quantity=quantity)
    device = DeviceRecord(nameplate=Nameplate(key="moor-g63", kind="fuse"), curves=(curve,))
    axes = bands_figure([device], quantity=quantity).axes[0]
    assert words in axes.get_ylabel()
    with pytest.raises(DeviceError, match="no curve of time"):
        bands_figure([device])


def test_what_cannot_be_drawn_is_refused_and_nothing_written(tmp_path):
    with pytest.raises(InputError, match=r"\.png, \.svg or \.pdf"):
        draw_bands([mcb()], tmp_path / "one.jpg")
    with pytest.raises(DeviceError, match="no curve"):
        draw_bands([DeviceRecord(nameplate=Nameplate(key="isolator", kind="switch"))], tmp_path / "one.png")
    unrated = replace(mcb(), nameplate=replace(mcb().nameplate, key="unrated", rated_current_a=None))
    with pytest.raises(DeviceError, match="unrated"):
        draw_bands([mcb(), unrated], tmp_path / "one.png")
    with pytest.raises(InputError, match="cannot be written"):
        draw_bands([mcb()], tmp_path / "absent" / "one.png")
    assert list(tmp_path.iterdir()) == []


def test_limits_of_load_currents_are_not_drawn_beside_residual_currents():
    curve = Curve(
        element="residual", edge="slow", meaning="clearing", base="xIdn", parts=(typed_part([1.0, 50.0], [0.3, 0.04]),)
    )
    plate = Nameplate(key="riverside-b16", kind="rcbo", rated_current_a=16.0, rated_residual_current_a=0.03)
    residual = replace(FINDINGS[0], base="xIdn", current=1.0, limit=0.3)
    figure = bands_figure([DeviceRecord(nameplate=plate, curves=(curve,))], findings=(FINDINGS[1], residual))
    assert [text.split(" ")[0] for text in texts(figure)] == ["1"]
