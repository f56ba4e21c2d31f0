"""An OCR library reads the same crops: ``python -m tests.lettering.second_reader`` where `rapidocr` is installed.

rapidocr 3 (Apache-2.0) carries PP-OCR's recogniser in its wheel; it reads level crops without its detector.
"""

import argparse
import time

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.exact import plain_text
from curvelab.lettering.read import read_words
from curvelab.records.sheet import Word
from tests.lettering.measured import Outcome
from tests.lettering.printed import PrintedSheet, Truth, printed_sheet

MARKS = str.maketrans("°ºo˚", "⁰⁰⁰⁰")


def area_of(truth: Truth, dpi: float) -> tuple[float, float, float, float]:
    """A rectangle around a printed word, in pixels."""
    along, size = (length * dpi / 72 for length in truth.half)
    reach = (along + 0.5 * size, 0.85 * size)
    across, down = reach[::-1] if truth.turned_deg else reach
    x, y = truth.middle
    return x - across, y - down, x + across, y + down


def crop(printed: PrintedSheet, area: tuple[float, float, float, float], turned: bool) -> NDArray[np.uint8]:
    assert printed.sheet.pixels is not None
    grey = printed.sheet.pixels.grey
    x0, y0, x1, y1 = (max(0, round(edge)) for edge in area)
    piece = grey[y0 : y1 + 1, x0 : x1 + 1]
    return np.ascontiguousarray(np.rot90(piece, -1) if turned else piece)


def other_text(engine: object, image: NDArray[np.uint8]) -> tuple[str, float]:
    """What the library reads in a crop, exponents written our way, and its confidence."""
    result = engine(np.dstack([image] * 3), use_det=False, use_cls=False, use_rec=True)  # type: ignore[operator]
    if result is None or not result.txts:
        return "", 0.0
    text = plain_text(result.txts[0])
    return (text[:2] + text[2:].translate(MARKS) if text.startswith("10") else text), float(result.scores[0])


def main() -> None:
    from rapidocr import RapidOCR  # noqa: PLC0415 - not among the test libraries

    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--sheets", type=int, default=6)
    parser.add_argument("--dpi", type=float, nargs="+", default=[100, 150, 300])
    parser.add_argument("--quality", nargs="+", default=["clean", "grey", "bilevel"])
    options = parser.parse_args()
    engine = RapidOCR(params={"Global.log_level": "error"})
    heads = ("ours", "other", "both wrong", "ours, ms", "other, ms", "ours", "other")
    print(
        f"{'quality':8} {'dpi':>4} {'n':>5} " + " ".join(f"{head:>10}" for head in heads) + "   (the last two: titles)"
    )
    for quality in options.quality:
        for dpi in options.dpi:
            _row(engine, quality, dpi, options.sheets)


def _row(engine: object, quality: str, dpi: float, sheets: int) -> None:
    ours, other, kinds = [], [], []
    spent = [0.0, 0.0]
    for seed in range(6000, 6000 + sheets):
        printed = printed_sheet(seed, quality, dpi)
        for truth in printed.words:
            area = area_of(truth, dpi)
            start = time.process_time()
            words = read_words(printed.sheet, areas=(area,))
            word = max(words, key=lambda one: one.confidence * len(one.text), default=None)
            middle = time.process_time()
            text, _ = other_text(engine, crop(printed, area, bool(truth.turned_deg)))
            spent[0] += middle - start
            spent[1] += time.process_time() - middle
            ours.append(Outcome(truth=truth, word=word).right)
            other.append(Outcome(truth=truth, word=Word(text=text, box=area, height=1.0)).right)
            kinds.append(truth.title)
    is_ours, is_other, is_title = np.array(ours), np.array(other), np.array(kinds)
    numbers = ~is_title
    shares = [
        100 * float(share.mean()) for share in (is_ours[numbers], is_other[numbers], (~is_ours & ~is_other)[numbers])
    ]
    of_titles = [100 * float(share[is_title].mean()) for share in (is_ours, is_other)]
    milliseconds = [1e3 * seconds / len(ours) for seconds in spent]
    cells = " ".join(f"{cell:10.1f}" for cell in (*shares, *milliseconds, *of_titles))
    print(f"{quality:8} {dpi:4.0f} {numbers.sum():5d} {cells}", flush=True)


if __name__ == "__main__":
    main()
