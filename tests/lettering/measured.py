"""How many printed words are read rightly: ``python -m tests.lettering.measured`` prints a table per class."""

import argparse
import time
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from curvelab.lettering.numbers import number_of
from curvelab.lettering.read import read_words
from curvelab.lettering.titles import title_of
from curvelab.records.sheet import Word
from tests.lettering.printed import QUALITIES, PrintedSheet, Truth, printed_sheet

SURE = 0.9


@dataclass(frozen=True, kw_only=True, slots=True)
class Outcome:
    """What became of one printed word."""

    truth: Truth
    word: Word | None

    @property
    def right(self) -> bool:
        """Same number, or same meaning of a title."""
        if self.word is None:
            return False
        if self.truth.title:
            return _meaning(self.word.text) == _meaning(self.truth.text)
        return _value(self.word.text) == _value(self.truth.text)

    @property
    def possible(self) -> bool:
        """Right, or among the alternatives."""
        texts = () if self.word is None else (self.word.text, *(text for text, _ in self.word.alternatives))
        return self.right or any(_value(text) == _value(self.truth.text) is not None for text in texts)


def _meaning(text: str) -> tuple[object, ...] | None:
    title = title_of(text)
    return None if title is None else (title.quantity, title.unit, title.base, title.factor)


def _value(text: str) -> float | None:
    numbers = number_of(text)
    return numbers[0].value if numbers else None


def outcomes(printed: PrintedSheet) -> Iterator[Outcome]:
    """Each printed word with the word read at its middle."""
    words = read_words(printed.sheet)
    for truth in printed.words:
        x, y = truth.middle
        near = [
            word
            for word in words
            if word.box[0] - 2 <= x <= word.box[2] + 2 and word.box[1] - 2 <= y <= word.box[3] + 2
        ]
        yield Outcome(truth=truth, word=max(near, key=lambda word: word.confidence * len(word.text), default=None))


def table_row(quality: str, dpi: float, seeds: range) -> str:
    """One class: shares of numbers right, possible, wrong though sure, and of titles right; seconds a page."""
    found: list[Outcome] = []
    seconds = 0.0
    for seed in seeds:
        printed = printed_sheet(seed, quality, dpi)
        start = time.process_time()
        found += outcomes(printed)
        seconds += time.process_time() - start
    numbers = [one for one in found if not one.truth.title]
    titles = [one for one in found if one.truth.title and _meaning(one.truth.text) is not None]
    sure = [one for one in numbers if one.word is not None and one.word.confidence >= SURE]
    shares = (
        np.mean([one.right for one in numbers]),
        np.mean([one.possible for one in numbers]),
        len(sure) / len(numbers),
        np.mean([not one.right for one in sure]) if sure else 0.0,
        np.mean([one.right for one in titles]),
    )
    cells = " ".join(f"{100 * share:8.2f}" for share in shares)
    return f"{quality:8} {dpi:4.0f} {len(numbers):5d} {cells} {seconds / len(seeds):6.3f}"


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--sheets", type=int, default=24)
    parser.add_argument("--first", type=int, default=5000)
    parser.add_argument("--dpi", type=float, nargs="+", default=[100, 150, 200, 300])
    parser.add_argument("--quality", nargs="+", default=list(QUALITIES))
    parser.add_argument("--wrong", action="store_true", help="list what was misread")
    options = parser.parse_args()
    seeds = range(options.first, options.first + options.sheets)
    if options.wrong:
        for quality in options.quality:
            for dpi in options.dpi:
                _list_wrong(quality, dpi, seeds)
        return
    heads = " ".join(f"{head:>8}" for head in ("right", "possible", "sure", "sure, no", "titles"))
    print(f"{'quality':8} {'dpi':>4} {'n':>5} {heads} {'s/page':>6}")
    for quality in options.quality:
        for dpi in options.dpi:
            print(table_row(quality, dpi, seeds), flush=True)


def _list_wrong(quality: str, dpi: float, seeds: range) -> None:
    for seed in seeds:
        for one in outcomes(printed_sheet(seed, quality, dpi)):
            if not one.right:
                said = (
                    "nothing"
                    if one.word is None
                    else f"{one.word.text!r} {one.word.confidence:.2f} {one.word.alternatives[:2]}"
                )
                print(f"{seed} {quality} {dpi:.0f}: {one.truth.text!r} read as {said}")


if __name__ == "__main__":
    main()
