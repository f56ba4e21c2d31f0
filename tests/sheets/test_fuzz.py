"""Damaged files of every kind: a sheet or one clear error, nothing else."""

import io

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from PIL import Image

from curvelab.errors import SheetError
from curvelab.sheets.open import sheet_from_bytes
from tests.sheets.handmade import one_page, stream

RNG = np.random.default_rng(3)
PAGE = Image.fromarray(RNG.integers(0, 256, (40, 30, 3), dtype=np.uint8))
SVG = b"""<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 200 300"><style>.a{fill:none;stroke:#f00}</style>
<defs><clipPath id="c"><rect x="5" y="5" width="100" height="90"/></clipPath><path id="p" d="M0 0L9 9C1 2 3 4 5 6z"/>
</defs><g clip-path="url(#c)"><path class="a" d="M1,2 L30 40 H9 V8 Q1 2 3 4 T5 6 A 5 6 7 0 1 8 9 S1 2 3 4 Z"/></g>
<use href="#p" x="3" transform="rotate(3 4 5) scale(2)"/><text x="3" y="4">10<tspan dy="-3">2</tspan></text></svg>"""


def image(kind: str, **options: object) -> bytes:
    buffer = io.BytesIO()
    PAGE.convert("1" if options.get("compression") == "group4" else "RGB").save(buffer, kind, **options)
    return buffer.getvalue()


FILES = {
    "png": image("PNG"),
    "jpeg": image("JPEG"),
    "tiff": image("TIFF", compression="tiff_lzw"),
    "g4": image("TIFF", compression="group4"),
    "raw tiff": image("TIFF"),
    "bmp": image("BMP"),
    "webp": image("WEBP"),
    "pdf": one_page(
        "q 20 30 50 60 re W n 0 0 m 100 100 l S Q /F Do /I Do BT /T 10 Tf 20 20 Td (10) Tj ET",
        resources="/XObject << /F 5 0 R /I 6 0 R >> /Font << /T 7 0 R >>",
        extra={
            5: stream(b"10 20 m 30 40 50 60 70 80 c h B", "/Type /XObject /Subtype /Form /BBox [0 0 60 100]"),
            6: stream(
                bytes(range(8)),
                "/Type /XObject /Subtype /Image /Width 4 /Height 2 /ColorSpace /DeviceGray /BitsPerComponent 8",
            ),
            7: "<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica >>",
        },
    ),
    "svg": SVG,
}
FEW = settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])


def opens_or_tells(data: bytes) -> None:
    try:
        sheet = sheet_from_bytes("sheet", data)
    except SheetError as error:
        assert "\n" not in str(error)  # noqa: PT017 - both ways out are right
    else:
        assert sheet.width > 0
        assert sheet.height > 0


@pytest.mark.parametrize("kind", FILES)
def test_the_file_itself_opens(kind: str) -> None:
    assert sheet_from_bytes("sheet", FILES[kind]).pages == 1


@pytest.mark.parametrize("kind", FILES)
@FEW
@given(share=st.floats(0, 1))
def test_truncated(kind: str, share: float) -> None:
    opens_or_tells(FILES[kind][: int(share * len(FILES[kind]))])


@pytest.mark.parametrize("kind", FILES)
@FEW
@given(changes=st.lists(st.tuples(st.integers(0, 10**6), st.integers(0, 255)), min_size=1, max_size=12))
def test_changed_bytes(kind: str, changes: list[tuple[int, int]]) -> None:
    data = bytearray(FILES[kind])
    for at, value in changes:
        data[at % len(data)] = value
    opens_or_tells(bytes(data))


@FEW
@given(start=st.sampled_from([data[:12] for data in FILES.values()]), rest=st.binary(max_size=300))
def test_a_right_start_and_rubbish(start: bytes, rest: bytes) -> None:
    opens_or_tells(start + rest)
