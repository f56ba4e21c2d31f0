"""SVG files: path data against closed forms, and whole pages by two writers."""

import io
import math

import matplotlib as mpl
import numpy as np
import pytest
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.figure import Figure
from reportlab.graphics import renderSVG
from reportlab.graphics.shapes import Drawing, PolyLine, String
from reportlab.lib.colors import Color
from svgelements import Path

from curvelab.errors import SheetError
from curvelab.records.sheet import Sheet
from curvelab.sheets import limits
from curvelab.sheets.open import sheet_from_bytes
from curvelab.sheets.svgpath import polylines


def svg(body: str, view: str = 'viewBox="0 0 200 300"') -> Sheet:
    head = '<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink"'
    return sheet_from_bytes("a.svg", f"{head} {view}>{body}</svg>".encode())


def test_a_matplotlib_page_is_exact() -> None:
    current_a = np.logspace(0.1, 2.5, 25)
    with mpl.rc_context({"svg.fonttype": "none", "path.simplify": False}):
        figure = Figure(figsize=(8.27, 11.69))
        FigureCanvasSVG(figure)
        axes = figure.add_subplot()
        axes.loglog(current_a, 1e3 / current_a, color="red", lw=1.3)
        axes.loglog([1e-3, 1e6], [1, 1], color="blue", ls=(0, (4, 2)))
        axes.set(xlim=(1, 1000), ylim=(1e-2, 1e4), xlabel="Current in A", ylabel="Time in s")
        buffer = io.BytesIO()
        figure.savefig(buffer, format="svg")
        places = axes.transData.transform(np.stack([current_a, 1e3 / current_a], axis=1)) / figure.dpi * 72
        places[:, 1] = figure.get_figheight() * 72 - places[:, 1]
        frame = axes.get_window_extent().transformed(figure.dpi_scale_trans.inverted())
    sheet = sheet_from_bytes("a.svg", buffer.getvalue())
    (curve,) = (stroke for stroke in sheet.strokes if stroke.colour == (255, 0, 0))
    assert np.abs(curve.points - places).max() <= 1e-5
    assert curve.width == pytest.approx(1.3)
    (clipped,) = (stroke for stroke in sheet.strokes if stroke.colour == (0, 0, 255))
    assert clipped.points[[0, -1], 0] == pytest.approx([frame.x0 * 72, frame.x1 * 72], abs=2e-3)
    assert clipped.dash == pytest.approx((6, 3))
    words = {word.text: word for word in sheet.words}
    assert {"10⁰", "10³", "10⁻²", "10⁴", "Current in A", "Time in s"} <= set(words)
    assert words["Time in s"].turned_deg == pytest.approx(90)
    assert sum(words["Current in A"].box[::2]) / 2 == pytest.approx((frame.x0 + frame.x1) * 36, abs=0.5)
    assert (sheet.unit, sheet.width, sheet.height) == ("px", pytest.approx(595.44), pytest.approx(841.68))


def test_a_reportlab_page_is_exact() -> None:
    places = np.stack([np.linspace(60, 300, 40), np.linspace(5, 18, 40) ** 2], axis=1)
    drawing = Drawing(400, 500)
    drawing.add(PolyLine(places.ravel().tolist(), strokeColor=Color(1, 0, 0), strokeWidth=1.5, strokeDashArray=[4, 2]))
    drawing.add(String(100, 200, "Time in s", textAnchor="middle", fontSize=9))
    sheet = sheet_from_bytes("a.svg", renderSVG.drawToString(drawing).encode())
    (curve,) = (stroke for stroke in sheet.strokes if stroke.colour == (255, 0, 0))
    assert np.abs(curve.points - (places * [1, -1] + [0, 500])).max() <= 6e-5  # it writes seven figures
    assert (curve.width, curve.dash) == (1.5, (4.0, 2.0))
    (word,) = sheet.words
    assert (word.text, word.height, word.turned_deg) == ("Time in s", 9, 0)
    assert sum(word.box[::2]) / 2 == pytest.approx(100, abs=1.0)


PATHS = [
    "M10 10 L 20 30 40 50 l-5-5 H 70 h-3.5 V 8 v.5.25",
    "m 5,5 10,0 0,10 z l 3 3",
    "M10 10 C 20 90 60 -40 90 70 S 10 20 120 130 c 1 2 3 4 5 6 s 7 8 9 10",
    "M10 10 Q 60 90 90 20 T 150 60 t 20 -10 q 5 5 10 -5",
    "M50 50 A 30 20 25 0 1 90 80 a30,20 25 1 0 10-20 A 5 5 0 11 200 90 a1e1 1e1 0 01-5 5",
]


@pytest.mark.parametrize("data", PATHS)
def test_path_data_against_another_reader(data: str) -> None:
    """Every point of ours lies on svgelements' path and ours reaches all of theirs."""
    ours = np.vstack([_dense(points) for points, _ in polylines(data, 1e-4)])
    theirs = []
    for segment in Path(data):
        if type(segment).__name__ == "Move":
            continue
        theirs += [segment.point(t) for t in np.linspace(0, 1, 60)]
    other = np.array([[point.x, point.y] for point in theirs])
    away = np.hypot(*np.moveaxis(other[:, None] - ours[None], 2, 0)).min(axis=1)
    assert away.max() <= 0.06  # half the spacing of our dense points


def _dense(points: np.ndarray) -> np.ndarray:
    length = np.concatenate([[0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
    at = np.arange(0, length[-1] + 0.1, 0.1)
    return np.stack([np.interp(at, length, points[:, 0]), np.interp(at, length, points[:, 1])], axis=1)


def test_an_arc_keeps_to_its_circle() -> None:
    ((points, _),) = polylines("M 0 0 A 50 50 0 0 1 100 0", 1e-3)
    radius = np.hypot(points[:, 0] - 50, points[:, 1])
    assert radius == pytest.approx(50, abs=1e-9)
    middle = (points[:-1] + points[1:]) / 2
    assert np.hypot(middle[:, 0] - 50, middle[:, 1]).min() >= 50 - 1e-3
    assert points[:, 1].min() < -49  # the sweep flag goes clockwise on the page, over the top


def test_path_data_are_read_up_to_their_first_error() -> None:
    ((points, _),) = polylines("M0 0 L10 10 L oops 20 20", 1e-3)
    assert points.tolist() == [[0, 0], [10, 10]]
    assert polylines("L 1 1 2 2", 1e-3) == []


def test_shapes() -> None:
    sheet = svg(
        '<g fill="none" stroke="#123456"><line x1="1" y1="2" x2="3" y2="4"/><polyline points="0,0 1,1 2 0"/>'
        '<polygon points="0 0 4 0 4 4"/><rect x="5" y="6" width="7" height="8"/><circle cx="50" cy="60" r="10"/>'
        '<ellipse cx="5" cy="6" rx="3" ry="2"/><rect x="0" y="0" width="40" height="20" rx="4"/></g>'
    )
    line, polyline, polygon, rectangle, circle, ellipse, rounded = sheet.strokes
    assert line.points.tolist() == [[1, 2], [3, 4]]
    assert (polyline.closed, polygon.closed) == (False, True)
    assert rectangle.points.tolist() == [[5, 6], [12, 6], [12, 14], [5, 14], [5, 6]]
    assert np.hypot(*(circle.points - [50, 60]).T) == pytest.approx(10)
    assert ((ellipse.points - [5, 6]) ** 2 @ [1 / 9, 1 / 4]) == pytest.approx(1)
    assert rounded.points.min() == pytest.approx(0, abs=1e-12)
    assert not np.any(np.all(rounded.points == 0, axis=1))
    assert all(stroke.colour == (0x12, 0x34, 0x56) and stroke.width == 1 for stroke in sheet.strokes)


def test_transforms_compose_from_the_outside_in() -> None:
    sheet = svg(
        '<g transform="translate(10,20) scale(2)"><path transform="rotate(90 1 1)" stroke="red" fill="none" '
        'stroke-width="3" stroke-dasharray="4" d="M1 1L5 1"/></g>'
    )
    (stroke,) = sheet.strokes
    assert stroke.points == pytest.approx(np.array([[12, 22], [12, 30]]))
    assert stroke.width == pytest.approx(6)
    assert stroke.dash == pytest.approx((8, 8))


def test_the_view_box_s_corner_is_the_origin() -> None:
    sheet = svg('<path fill="none" stroke="red" d="M0 0L5 5"/>', view='viewBox="-10 -20 100 50" width="1000"')
    assert sheet.strokes[0].points.tolist() == [[10, 20], [15, 25]]
    assert (sheet.width, sheet.height) == (100, 50)


def test_size_without_a_view_box() -> None:
    assert svg("", view='width="72pt" height="25.4mm"').width == pytest.approx(96)
    with pytest.raises(SheetError, match="has no size"):
        svg("", view="")


def test_style_sheets_and_inheritance() -> None:
    sheet = svg(
        "<style>path{stroke:blue} .a{stroke:#0f0;fill:none} #x{stroke-width:5}</style>"
        '<g stroke-width="2"><path class="a" d="M0 0L1 1"/><path id="x" class="a" style="stroke:red" d="M0 0L1 1"/>'
        '<path fill="none" d="M0 0L1 1"/><path class="a" stroke-opacity="0" d="M0 0L1 1"/>'
        '<path class="a" display="none" d="M0 0L1 1"/></g>'
    )
    assert [(one.colour, one.width) for one in sheet.strokes] == [
        ((0, 255, 0), 2),
        ((255, 0, 0), 5),
        ((0, 0, 255), 2),
    ]


def test_use_follows_names_of_the_file_alone() -> None:
    sheet = svg(
        '<defs><path id="p" stroke="red" fill="none" d="M0 0L1 1"/></defs><use xlink:href="#p" x="10" y="20"/>'
        '<use href="#p" transform="scale(3)"/><use href="http://example.org/x.svg#p"/><use href="#nothing"/>'
        '<image href="file:///etc/hostname" width="10" height="10"/>'
    )
    assert [stroke.points.tolist() for stroke in sheet.strokes] == [[[10, 20], [11, 21]], [[0, 0], [3, 3]]]


def test_uses_that_contain_themselves_are_refused() -> None:
    with pytest.raises(SheetError, match="nested"):
        svg('<g id="a"><use href="#a"/></g>')


def test_uses_that_multiply_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "ELEMENTS", 5_000)
    levels = "".join(f'<g id="a{k}">{f"""<use href="#a{k + 1}"/>""" * 10}</g>' for k in range(9))
    with pytest.raises(SheetError, match="too many elements"):
        svg(f'<defs>{levels}<g id="a9"/></defs><use href="#a0"/>')


def test_entities_that_multiply_are_refused() -> None:
    entities = "".join(f'<!ENTITY e{k} "{f"&e{k - 1};" * 10}">' for k in range(1, 9))
    bomb = f'<!DOCTYPE svg [<!ENTITY e0 "{"x" * 1000}">{entities}]><svg xmlns="http://www.w3.org/2000/svg">&e8;</svg>'
    with pytest.raises(SheetError, match="not well-formed"):
        sheet_from_bytes("a.svg", bomb.encode())


def test_external_entities_are_not_fetched() -> None:
    text = '<!DOCTYPE svg [<!ENTITY e SYSTEM "file:///etc/hostname">]><svg viewBox="0 0 9 9"><text>&e;</text></svg>'
    with pytest.raises(SheetError, match="not well-formed"):
        sheet_from_bytes("a.svg", text.encode())


def test_deep_nesting_is_refused() -> None:
    with pytest.raises(SheetError, match="nested elements"):
        svg("<g>" * 5000 + "</g>" * 5000)


def test_text_anchors_exponents_and_turns() -> None:
    sheet = svg(
        '<g font-size="10"><text x="100" y="50" text-anchor="middle">Current in A</text>'
        '<text x="60" y="80" text-anchor="end" style="font: 8px sans-serif">1000</text>'
        '<text x="20" y="90">10<tspan dy="-4" font-size="7">-2</tspan></text>'
        '<text transform="translate(15 200) rotate(-90)">Time</text></g>'
    )
    middle, end, raised, turned = sheet.words
    assert middle.text == "Current in A"
    assert sum(middle.box[::2]) / 2 == pytest.approx(100)
    assert (end.text, end.height) == ("1000", 8)
    assert end.box[2] == pytest.approx(60)
    assert raised.text == "10⁻²"
    assert (turned.text, turned.turned_deg) == ("Time", pytest.approx(90))
    assert turned.box[3] == pytest.approx(200)
    assert math.isclose(turned.height, 10)


def test_another_root_is_refused() -> None:
    with pytest.raises(SheetError, match="no SVG"):
        sheet_from_bytes("a.svg", b"<html><svg/></html>")
