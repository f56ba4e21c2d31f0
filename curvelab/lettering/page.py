"""All lines of a page's ink, cut, told apart in one go and written as words."""

from collections.abc import Iterator

import numpy as np

from curvelab.lettering.decode import decode
from curvelab.lettering.ink import Ink
from curvelab.lettering.lines import text_lines
from curvelab.lettering.network import Matrix, Network, trained
from curvelab.lettering.segments import Cutting, cut
from curvelab.lettering.strip import strip_of
from curvelab.lettering.words import words_of_readings
from curvelab.records.sheet import Word

BATCH = 4096


def words_of_ink(ink: Ink) -> list[Word]:
    """Words read from ink, boxes in its pixels with whole edges."""
    cut_lines = cut_ways(ink)
    network = trained()
    chances = _log_chances(network, [cutting for ways in cut_lines for cutting in ways])
    words: list[Word] = []
    for ways in cut_lines:
        read = [(cutting, readings) for cutting in ways if (readings := decode(cutting, next(chances)))]
        if read:
            cutting, readings = max(read, key=lambda one: one[1][0].score)
            words += words_of_readings(cutting.strip, readings, network.confidence)
    return words


def cut_ways(ink: Ink) -> list[list[Cutting]]:
    """Every line of lettering cut into segments: upright ones in both directions they may be read in."""
    return [
        [cut(strip) for way in ((90, 270) if line.upright else (0,)) if (strip := strip_of(ink, line, way)) is not None]
        for line in text_lines(ink)
    ]


def _log_chances(network: Network, cuttings: list[Cutting]) -> Iterator[Matrix]:
    """Log chances of each cutting's segments, told in batches over the page."""
    waiting: list[Cutting] = []
    for cutting in cuttings:
        waiting.append(cutting)
        if sum(len(one.segments) for one in waiting) >= BATCH:
            yield from _told(network, waiting)
            waiting = []
    yield from _told(network, waiting)


def _told(network: Network, cuttings: list[Cutting]) -> list[Matrix]:
    if not cuttings:
        return []
    chances = network.log_chances(np.vstack([cutting.features for cutting in cuttings]))
    return np.split(chances, np.cumsum([len(cutting.segments) for cutting in cuttings])[:-1])
