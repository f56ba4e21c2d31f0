"""PDF pages whose every number is known: drawn by two renderers, or written by hand."""

import io
from collections.abc import Callable

import matplotlib as mpl
import numpy as np
import pytest
from matplotlib.backends.backend_pdf import FigureCanvasPdf
from matplotlib.figure import Figure
from PIL import Image
from reportlab.pdfgen import canvas

from curvelab.errors import SheetError
from curvelab.records.sheet import Sheet, Stroke
from curvelab.sheets import limits
from curvelab.sheets.open import sheet_from_bytes
from curvelab.sheets.render import render_page
from tests.sheets.handmade import one_page, stream

EXACT = 6e-5
"""Points: half a unit in the last place of single precision at 842, composed twice (2.4e-5 was seen in trials)."""

LINE = "1 w 10 20 m 110 20 l S"
CURRENT_A = np.logspace(0.1, 2.9, 25)
TIME_S = 1e4 * CURRENT_A**-2.0


def log_log_page(font_type: int) -> tuple[bytes, np.ndarray]:
    """An A4 page with a red curve, and the curve's true places."""
    with mpl.rc_context({"pdf.fonttype": font_type, "path.simplify": False}):
        figure = Figure(figsize=(8.27, 11.69))
        FigureCanvasPdf(figure)
        axes = figure.add_subplot()
        axes.loglog(CURRENT_A, TIME_S, color="red", lw=1.3)
        axes.loglog(CURRENT_A, 3 * TIME_S, color="blue", ls=(0, (4, 2)), lw=2)
        axes.set(xlim=(1, 1000), ylim=(1e-2, 1e4), xlabel="Current in A", ylabel="Time in s")
        axes.grid(True, which="both")
        buffer = io.BytesIO()
        figure.savefig(buffer, format="pdf")
        places = axes.transData.transform(np.stack([CURRENT_A, TIME_S], axis=1)) / figure.dpi * 72
        places[:, 1] = figure.get_figheight() * 72 - places[:, 1]
    return buffer.getvalue(), places


def line_of(sheet: Sheet, colour: tuple[int, int, int]) -> Stroke:
    (stroke,) = (one for one in sheet.strokes if one.colour == colour and not one.filled)
    return stroke


def points_of(data: bytes) -> list[list[list[float]]]:
    return [stroke.points.tolist() for stroke in sheet_from_bytes("a.pdf", data).strokes]


@pytest.mark.parametrize("font_type", [3, 42])
def test_a_matplotlib_page_is_exact(font_type: int) -> None:
    data, places = log_log_page(font_type)
    sheet = sheet_from_bytes("a.pdf", data)
    curve = line_of(sheet, (255, 0, 0))
    # the last points lie below the frame and are cut off there
    inside = places[:, 1] <= curve.points[:, 1].max()
    assert np.abs(curve.points[: inside.sum()] - places[inside]).max() <= EXACT
    assert curve.width == pytest.approx(1.3)
    assert curve.dash == ()
    assert line_of(sheet, (0, 0, 255)).dash == pytest.approx((8, 4))
    assert sheet.pixels is None
    assert (sheet.width, sheet.height, sheet.unit) == (pytest.approx(595.44), pytest.approx(841.68), "pt")


@pytest.mark.parametrize("font_type", [3, 42])
def test_exponents_are_raised(font_type: int) -> None:
    data, _ = log_log_page(font_type)
    words = {word.text: word for word in sheet_from_bytes("a.pdf", data).words}
    assert {"10⁰", "10¹", "10²", "10³", "10⁻¹", "10⁻²", "Current in A", "Time in s"} <= set(words)
    assert words["Time in s"].turned_deg == pytest.approx(90)
    assert words["10³"].height == pytest.approx(10)
    assert words["10³"].turned_deg == 0
    x0, y0, x1, y1 = words["Current in A"].box
    assert 260 < (x0 + x1) / 2 < 350
    assert 760 < y0 < y1 < 842


def test_a_reportlab_page_is_exact() -> None:
    places = np.stack([np.linspace(50, 500, 30), 800 - np.linspace(5, 27, 30) ** 2], axis=1)
    buffer = io.BytesIO()
    page = canvas.Canvas(buffer, pagesize=(595, 842))
    page.setStrokeColorRGB(0, 0.5, 0)
    page.setLineWidth(0.75)
    page.setDash([3, 1])
    path = page.beginPath()
    path.moveTo(*places[0])
    for place in places[1:]:
        path.lineTo(*place)
    page.drawPath(path)
    page.setFont("Helvetica", 9)
    page.drawString(100, 50, "Prospective current in kA")
    page.save()
    sheet = sheet_from_bytes("a.pdf", buffer.getvalue())
    (curve,) = sheet.strokes
    assert np.abs(curve.points - np.array([0, 842]) - places * [1, -1]).max() <= EXACT
    assert curve.colour == (0, 128, 0)
    assert (curve.width, curve.dash) == (0.75, (3.0, 1.0))
    (word,) = sheet.words
    assert (word.text, word.height) == ("Prospective current in kA", pytest.approx(9))
    assert word.box[0] == pytest.approx(100, abs=1)


ROTATED: dict[int, Callable[[float, float], tuple[float, float]]] = {
    0: lambda x, y: (x - 5, 280 - y),
    90: lambda x, y: (y - 10, x - 5),
    180: lambda x, y: (150 - x, y - 10),
    270: lambda x, y: (280 - y, 150 - x),
}
"""Where a place of the page lies from the top left corner of the crop box [5 10 150 280] after the rotation."""


@pytest.mark.parametrize("rotation", ROTATED)
def test_rotation_and_crop_box(rotation: int) -> None:
    sheet = sheet_from_bytes("a.pdf", one_page(LINE, page=f"/Rotate {rotation} /CropBox [5 10 150 280]"))
    expected = [ROTATED[rotation](10, 20), ROTATED[rotation](110, 20)]
    assert sheet.strokes[0].points == pytest.approx(np.array(expected))
    assert (sheet.width, sheet.height) == ((145, 270) if rotation % 180 == 0 else (270, 145))


def test_a_nested_form_on_a_rotated_page_is_exact() -> None:
    """The maps composed by hand: inner form matrix, its placing, outer placing, then the page's quarter turn."""
    outer = stream(
        b"q 0.5 0 0 0.5 1 1 cm /G Do Q",
        "/Type /XObject /Subtype /Form /BBox [0 0 500 500] /Resources << /XObject << /G 6 0 R >> >>",
    )
    inner = stream(
        b"1 w [3 2] 0 d 10 20 m 30.25 77.5 l S",
        "/Type /XObject /Subtype /Form /BBox [0 0 600 600] /Matrix [1 0 0 1 11 13]",
    )
    data = one_page(
        "q 0 2 -2 0 100 3 cm /F Do Q",
        page="/Rotate 90",
        resources="/XObject << /F 5 0 R >>",
        extra={5: outer, 6: inner},
    )
    sheet = sheet_from_bytes("a.pdf", data)
    expected = []
    for x, y in ((10, 20), (30.25, 77.5)):
        u, v = 0.5 * (x + 11) + 1, 0.5 * (y + 13) + 1
        page_x, page_y = 100 - 2 * v, 3 + 2 * u
        expected.append((page_y, page_x))
    (stroke,) = sheet.strokes
    assert np.abs(stroke.points - expected).max() <= EXACT
    assert stroke.width == pytest.approx(1.0)
    assert stroke.dash == pytest.approx((3.0, 2.0))


def test_a_curve_is_cut_at_the_clip() -> None:
    ((start, end),) = points_of(one_page("q 20 30 50 60 re W n 0 0 m 100 100 l S Q"))
    assert start == pytest.approx([30, 270], abs=2e-3)
    assert end == pytest.approx([70, 230], abs=2e-3)


def test_a_clip_set_in_a_scaled_space_and_a_form_s_own_box() -> None:
    form = stream(LINE.encode(), "/Type /XObject /Subtype /Form /BBox [0 0 60 100] /Matrix [1 0 0 1 11 13]")
    resources, extra = "/XObject << /F 5 0 R >>", {5: form}
    ((_, by_box),) = points_of(one_page("q 2 0 0 2 7 3 cm /F Do Q", resources=resources, extra=extra))
    assert by_box == pytest.approx([7 + 2 * (60 + 11), 300 - (3 + 2 * (20 + 13))], abs=2e-3)
    clipped = "q 0 0 100 300 re W n 2 0 0 2 7 3 cm /F Do Q"
    ((_, by_page),) = points_of(one_page(clipped, resources=resources, extra=extra))
    assert by_page == pytest.approx([100, by_box[1]], abs=2e-3)


def test_a_line_on_the_clip_s_own_edge_is_kept() -> None:
    assert len(points_of(one_page("q 20 30 50 60 re W n 20 30 m 20 90 l S 70 90 m 20 90 l S Q"))) == 2


def test_a_triangular_clip() -> None:
    ((start, end),) = points_of(one_page("q 0 0 m 100 0 l 50 100 l h W n 0 50 m 200 50 l S Q"))
    assert (start[0], end[0]) == (pytest.approx(25), pytest.approx(75))


def test_bezier_curves_stay_within_a_thousandth_of_a_point() -> None:
    (points,) = points_of(one_page("10 10 m 60 290 110 -200 190 250 c S"))
    corners = np.array([[10, 10], [60, 290], [110, -200], [190, 250]], dtype=float)
    t = np.linspace(0, 1, 20_001)[:, None]
    weights = np.hstack([(1 - t) ** 3, 3 * (1 - t) ** 2 * t, 3 * (1 - t) * t**2, t**3])
    true = weights @ corners * [1, -1] + [0, 300]
    polyline = np.array(points)
    start, along = polyline[:-1], np.diff(polyline, axis=0)
    offset = true[::20, None, :] - start[None]
    share = np.clip((offset * along).sum(axis=2) / (along**2).sum(axis=1), 0, 1)
    away = np.hypot(*np.moveaxis(offset - share[:, :, None] * along, 2, 0)).min(axis=1)
    assert away.max() <= 1e-3


def test_an_area_and_its_line() -> None:
    sheet = sheet_from_bytes("a.pdf", one_page("1 0 0 rg 0 0 1 RG 2 w 10 10 m 60 10 l 60 60 l b"))
    area, line = sheet.strokes
    assert (area.filled, area.colour, area.width, area.closed) == (True, (255, 0, 0), 0.0, True)
    assert (line.filled, line.colour, line.width, line.closed) == (False, (0, 0, 255), 2.0, True)
    assert area.path == line.path
    assert np.array_equal(area.points[0], area.points[-1])


def test_what_does_not_show_is_left_out() -> None:
    state = "/ExtGState << /Z << /CA 0 /ca 0 >> >>"
    assert points_of(one_page("/Z gs 0 0 m 50 50 l S", resources=state)) == []
    assert points_of(one_page("0 0 m 50 50 l n")) == []


def scan(entries: str, samples: bytes, content: str = "q 200 0 0 300 0 0 cm /I Do Q", page: str = "") -> Sheet:
    image = stream(samples, f"/Type /XObject /Subtype /Image {entries}")
    return sheet_from_bytes(
        "a.pdf", one_page(content, page=page, resources="/XObject << /I 5 0 R >>", extra={5: image})
    )


GREY = "/Width 4 /Height 2 /ColorSpace /DeviceGray /BitsPerComponent 8"
SAMPLES = bytes(range(0, 80, 10))
BITS = bytes([0b10100000, 0b11000000])


def test_a_scan_keeps_its_own_pixels() -> None:
    sheet = scan(GREY, SAMPLES)
    assert sheet.pixels is not None
    assert sheet.pixels.grey.tolist() == [[0, 10, 20, 30], [40, 50, 60, 70]]
    assert sheet.pixels.to_place == pytest.approx(np.array([[50, 0, 25], [0, 150, 75]]))
    assert (sheet.unit, sheet.width, sheet.height) == ("pt", 200, 300)
    assert sheet.strokes == ()


def test_a_jpeg_scan_is_decoded_as_pillow_does() -> None:
    rng = np.random.default_rng(1)
    buffer = io.BytesIO()
    Image.fromarray(rng.integers(0, 256, (300, 200), dtype=np.uint8)).save(buffer, "JPEG", quality=70)
    entries = "/Width 200 /Height 300 /ColorSpace /DeviceGray /BitsPerComponent 8 /Filter /DCTDecode"
    sheet = scan(entries, buffer.getvalue())
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.grey, np.asarray(Image.open(buffer)))


@pytest.mark.parametrize(
    ("entries", "expected"),
    [
        ("/ColorSpace /DeviceGray /BitsPerComponent 1", [[255, 0, 255, 0], [255, 255, 0, 0]]),
        ("/ColorSpace /DeviceGray /BitsPerComponent 1 /Decode [1 0]", [[0, 255, 0, 255], [0, 0, 255, 255]]),
        ("/ImageMask true /BitsPerComponent 1", [[255, 0, 255, 0], [255, 255, 0, 0]]),
        ("/ImageMask true /BitsPerComponent 1 /Decode [1 0]", [[0, 255, 0, 255], [0, 0, 255, 255]]),
    ],
)
def test_one_bit_scans(entries: str, expected: list[list[int]]) -> None:
    sheet = scan(f"/Width 4 /Height 2 {entries}", BITS)
    assert sheet.pixels is not None
    assert sheet.pixels.grey.tolist() == expected


def test_a_soft_mask_lets_the_paper_through() -> None:
    mask = stream(
        bytes([255, 0, 255, 0, 0, 255, 0, 255]),
        "/Type /XObject /Subtype /Image /Width 4 /Height 2 /ColorSpace /DeviceGray /BitsPerComponent 8",
    )
    image = stream(bytes(8), f"/Type /XObject /Subtype /Image {GREY} /SMask 6 0 R")
    data = one_page("q 200 0 0 300 0 0 cm /I Do Q", resources="/XObject << /I 5 0 R >>", extra={5: image, 6: mask})
    sheet = sheet_from_bytes("a.pdf", data)
    assert sheet.pixels is not None
    assert sheet.pixels.grey.tolist() == [[0, 255, 0, 255], [255, 0, 255, 0]]


@pytest.mark.parametrize(
    ("content", "page"),
    [
        ("q 200 0 0 300 0 0 cm /I Do Q", ""),
        ("q 200 0 0 300 0 0 cm /I Do Q", "/Rotate 90"),
        ("q 200 0 0 300 0 0 cm /I Do Q", "/Rotate 180"),
        ("q 200 0 0 300 0 0 cm /I Do Q", "/Rotate 270"),
        ("q 0 300 -200 0 200 0 cm /I Do Q", ""),
        ("q -200 0 0 300 200 0 cm /I Do Q", ""),
        ("q 198 6 -6 298 3 1 cm /I Do Q", ""),
    ],
)
def test_a_scan_stands_upright_and_lies_where_a_rendering_shows_it(content: str, page: str) -> None:
    """Against PDFium's own rendering of the page, which takes another way."""
    sheet = scan(GREY, bytes([0, 30, 60, 90, 120, 150, 180, 210]), content, page)
    pixels = sheet.pixels
    assert pixels is not None
    assert pixels.to_place[0, 0] > 0
    assert pixels.to_place[1, 1] > 0
    image = stream(bytes([0, 30, 60, 90, 120, 150, 180, 210]), f"/Type /XObject /Subtype /Image {GREY}")
    picture = render_page(
        "a.pdf", one_page(content, page=page, resources="/XObject << /I 5 0 R >>", extra={5: image}), dots_per_inch=72
    )
    rows, columns = np.indices(pixels.grey.shape)
    places = pixels.places(np.stack([columns.ravel(), rows.ravel()], axis=1).astype(float))
    at = np.rint(picture.columns_rows(places)).astype(int)
    assert np.abs(picture.grey[at[:, 1], at[:, 0]].astype(int) - pixels.grey.ravel()).max() <= 4


def test_hidden_text_behind_a_scan_stays() -> None:
    content = "q 200 0 0 300 0 0 cm /I Do Q BT 3 Tr /T 12 Tf 20 100 Td (0.01 s) Tj ET"
    image = stream(SAMPLES, f"/Type /XObject /Subtype /Image {GREY}")
    data = one_page(
        content,
        resources="/XObject << /I 5 0 R >> /Font << /T 6 0 R >>",
        extra={5: image, 6: "<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica >>"},
    )
    sheet = sheet_from_bytes("a.pdf", data)
    assert sheet.pixels is not None
    assert [word.text for word in sheet.words] == ["0.01 s"]


def test_a_photo_beside_a_drawing_is_not_the_plot() -> None:
    lines = " ".join(f"10 {y} m 190 {y} l S" for y in range(20, 100, 4))
    sheet = scan(GREY, SAMPLES, f"q 200 0 0 150 0 150 cm /I Do Q {lines}")
    assert sheet.pixels is None
    assert len(sheet.strokes) == 20


def test_pages_are_counted() -> None:
    with pytest.raises(SheetError, match=r"'a.pdf' has no page 3\. It has one page"):
        sheet_from_bytes("a.pdf", one_page(LINE), page=3)


def test_a_form_that_contains_itself_comes_to_an_end(monkeypatch: pytest.MonkeyPatch) -> None:
    entries = "/Type /XObject /Subtype /Form /BBox [0 0 500 500] /Resources << /XObject << /F 5 0 R >> >>"
    data = one_page("/F Do", resources="/XObject << /F 5 0 R >>", extra={5: stream(b"0 0 m 9 9 l S /F Do", entries)})
    assert len(sheet_from_bytes("a.pdf", data).strokes) <= limits.NESTING
    monkeypatch.setattr(limits, "NESTING", 5)
    with pytest.raises(SheetError, match="nested forms"):
        sheet_from_bytes("a.pdf", data)


@pytest.mark.parametrize(
    ("limit", "word"), [("STROKES", "strokes"), ("STROKE_POINTS", "points"), ("ELEMENTS", "objects")]
)
def test_limits_of_a_page(monkeypatch: pytest.MonkeyPatch, limit: str, word: str) -> None:
    monkeypatch.setattr(limits, limit, 10)
    with pytest.raises(SheetError, match=f"too many {word}.*At most 10"):
        sheet_from_bytes("a.pdf", one_page("0 0 m 9 9 l S " * 20))


def test_a_huge_page_is_rendered_within_the_limit(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "RENDERED_PIXELS", 100_000)
    picture = render_page("a.pdf", one_page(LINE, page="/MediaBox [0 0 14400 14400]"))
    assert picture.grey.size <= 101_000
    assert picture.places(np.array([[picture.grey.shape[1] - 0.5, 0.0]]))[0, 0] == pytest.approx(14400)
