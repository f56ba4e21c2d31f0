"""Every curve line of a raster plot: each long enough chain that no line explains yet is followed to both its ends."""

from dataclasses import dataclass, replace

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.arrays import Floats
from curvelab.records.sheet import Word
from curvelab.records.trace import Place, Trace
from curvelab.records.warning import ReadingWarning
from curvelab.trace.areas import bare_edges
from curvelab.trace.cover import Cover
from curvelab.trace.dashes import is_broken
from curvelab.trace.found import FoundLine, FoundLines, ShortLine
from curvelab.trace.furniture import furniture
from curvelab.trace.guide import Guide
from curvelab.trace.hatching import hatch_lines
from curvelab.trace.joining import successions
from curvelab.trace.judge import LEAST_LENGTH, Judge
from curvelab.trace.prepared import Prepared, Raster
from curvelab.trace.raster import trace_raster
from curvelab.trace.seeds import Seed, pins, places_of, seeds_of, short_line, walked
from curvelab.trace.walk import Walk

MOST_TRIED = 80
"""Chains followed on one plot."""
FAINT, WIDE = 0.18, 5.0
"""Ink, and px of width, below and beyond which a line is a scrap of a tinted area."""
SHARED = 0.2
"""Share of a line along others from which it may be a mixture of them."""
SAME = 0.95
"""Share of a traced line along a walked one from which it is the same."""
EXPLAINED = 0.98
"""Share of a line along others from which it is none of its own."""
MOST_PASSED = 3
"""Such lines through one chain that are walked."""
OWN = 0.12
"""Least share of its own that such a line has if it is one."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Straight:
    """A straight line that was walked and not measured: what it is depends on the others."""

    seed: Seed
    walk: Walk
    places: Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Doubtful:
    """A line that runs along others for a good part: it may have left its own line for one of theirs."""

    seed: Seed
    walk: Walk
    places: Floats
    doubts: int
    shared: float


class _Finder:
    """One plot's search: what was found so far and what it explains."""

    def __init__(self, prepared: Prepared, raster: Raster) -> None:
        self.prepared, self.raster = prepared, raster
        size = raster.pixels.size_in_places
        self.judge = Judge.of(prepared.axes, 1.5 * size)
        self.cover = Cover(spacing=size, slack=2.5 * size)
        self.lines: list[FoundLine] = []
        self.doubtful: list[_Doubtful] = []
        self.short_lines: list[ShortLine] = []
        self.straights: list[_Straight] = []
        self.unexplained: list[Place] = []

    def try_seed(self, seed: Seed) -> None:
        """Follow the line a seed is part of, and keep it where it may be a curve."""
        walk = walked(self.raster, seed.number)
        places = places_of(self.raster, walk.line)
        width = self.raster.graph.chains[seed.number].width * self.raster.pixels.size_in_places
        verdict = "scrap" if seed.furniture else self.judge.verdict(places, width)
        if verdict != "curve":
            self.put_aside(seed, walk, places, straight=verdict == "straight")
        elif (share := self.cover.share(places)) > SHARED:
            self.doubtful.append(_Doubtful(seed=seed, walk=walk, places=places, doubts=len(walk.doubts), shared=share))
            self.cover.add_line(seed.points, 0.0)
        else:
            self.follow(seed, walk)

    def put_aside(self, seed: Seed, walk: Walk, places: Floats, *, straight: bool) -> None:
        """What is no curve, or may be one only if nothing else explains it."""
        short = short_line(self.raster, walk)
        if short is not None:
            self.short_lines.append(short)
        if straight:
            self.straights.append(_Straight(seed=seed, walk=walk, places=places))
        elif self.judge.is_odd(places) and not seed.furniture:
            self.unexplained.append(seed.middle)
        self.cover.add_line(places, 0.0)

    def follow(self, seed: Seed, walk: Walk, *, straight: bool = False) -> None:
        """Trace a walked line, and keep it where it is measured to be a curve, or straight as was known."""
        traced = self.traced(seed, walk)
        if traced is None:
            self.cover.add_line(places_of(self.raster, walk.line), 0.0)
            self.unexplained.append(seed.middle)
            return
        self.cover.add(traced.trace)
        verdict = self.judge.verdict(traced.trace.places, traced.trace.width)
        if verdict == "straight" and not straight:
            self.straights.append(_Straight(seed=seed, walk=walk, places=traced.trace.places))
        elif verdict in ("curve", "straight") and not self.is_tint(traced.trace):
            self.lines.append(traced)

    def traced(self, seed: Seed, walk: Walk) -> FoundLine | None:
        """The walked line as a guide leads to it: one place, or where that means another line, several."""
        line = self.guided(Guide(through=(seed.middle,)))
        if line is None or not self.is_along(line, walk):
            pinned = self.guided(Guide(through=pins(self.raster, walk)))
            line = pinned if pinned is not None and (line is None or self.is_along(pinned, walk)) else line
        return line and replace(line, dashed=is_broken(walk.line))

    def guided(self, guide: Guide) -> FoundLine | None:
        """The line a guide leads to; None where there is none."""
        try:
            trace, doubts = trace_raster(self.prepared, self.raster, guide)
        except TraceError:
            return None
        return FoundLine(
            trace=replace(trace, origin="found"), guide=guide, dashed=is_broken(trace.places), warnings=doubts
        )

    def is_along(self, line: FoundLine, walk: Walk) -> bool:
        """Whether a traced line is the walked one."""
        size = self.raster.pixels.size_in_places
        cover = Cover(spacing=size, slack=4.0 * size)
        cover.add_line(places_of(self.raster, walk.line), line.trace.width)
        return cover.share(line.trace.places) > SAME

    def is_tint(self, trace: Trace) -> bool:
        """Whether it is a scrap of a tinted area."""
        faintest = 255.0 * (1.0 - FAINT)
        wide = trace.width > WIDE * self.raster.pixels.size_in_places
        return wide and trace.colour is not None and min(trace.colour) > faintest

    def passed_often(self, seed: Seed) -> bool:
        """Whether lines that mostly run along others have passed a seed often enough."""
        size = self.raster.pixels.size_in_places
        near = (np.hypot(*(line.places[:, None] - seed.points[None, ::8]).transpose(2, 0, 1)) for line in self.doubtful)
        return sum(bool(distance.min(axis=0).max() < 3.0 * size) for distance in near) >= MOST_PASSED

    def settle_straights(self) -> None:
        """Straight lines are curves where they are neither hatching nor as short as leaders."""
        hatching = hatch_lines([straight.places for straight in self.straights])
        for straight, hatched in zip(self.straights, hatching, strict=True):
            if not hatched and not self.judge.is_furniture(straight.places):
                self.follow(straight.seed, straight.walk, straight=True)

    def settle_doubtful(self) -> None:
        """Of lines that run along others those stay that have a stretch of their own."""
        for line in sorted(self.doubtful, key=lambda one: (one.doubts, one.shared)):
            size = self.raster.pixels.size_in_places
            cover = Cover(spacing=size, slack=2.5 * size)
            for other in self.lines:
                cover.add(other.trace)
            if cover.share(line.places) >= 1.0 - OWN:
                continue
            traced = self.traced(line.seed, line.walk)
            if traced is not None and cover.share(traced.trace.places) < 1.0 - OWN:
                doubt = ReadingWarning(
                    code="trace-doubt",
                    text="The line runs along another for a good part and may have left its own: add guide places",
                    at=line.seed.middle,
                )
                self.lines.append(replace(traced, warnings=(*traced.warnings, doubt)))

    def join_parts(self) -> None:
        """Make one of lines that go on from one another, where the tracer too finds a way from one to the other."""
        for one, other in successions([line.trace for line in self.lines], self.judge.side):
            first, second = self.lines[one], self.lines[other]
            joined = self.guided(Guide(through=(*first.guide.through, *second.guide.through)))
            if joined is None:
                continue
            self.lines = [line for line in self.lines if line not in (first, second)]
            self.lines.append(joined)
            self.join_parts()
            return

    def add_areas(self) -> None:
        """The edges of filled areas along which no line is drawn."""
        for place in bare_edges(self.raster, self.cover, LEAST_LENGTH * self.judge.side):
            if self.cover.holds(np.array([place])):
                continue
            line = self.guided(Guide(through=(place,)))
            if line is not None:
                self.cover.add(line.trace)
                if self.judge.verdict(line.trace.places, line.trace.width) == "curve":
                    self.lines.append(line)

    def drop_mixtures(self) -> None:
        """Leave out lines of which the others together explain everything: parts of one, or mixtures of several."""
        while len(self.lines) > 1:
            shares = [self.explained(number) for number in range(len(self.lines))]
            worst = int(np.argmax(shares))
            if shares[worst] < EXPLAINED:
                return
            del self.lines[worst]

    def explained(self, number: int) -> float:
        """Share of a line that lies along the others."""
        size = self.raster.pixels.size_in_places
        cover = Cover(spacing=size, slack=1.5 * size)
        for other, line in enumerate(self.lines):
            if other != number:
                cover.add(line.trace)
        return cover.share(self.lines[number].trace.places)


def find_on_raster(prepared: Prepared, raster: Raster, words: tuple[Word, ...]) -> FoundLines:
    """All curve lines of a raster plot, see ``find_lines``."""
    finder = _Finder(prepared, raster)
    tried = 0
    for seed in seeds_of(raster, furniture(raster, words)):
        if finder.cover.holds(seed.points) or finder.passed_often(seed):
            continue
        finder.try_seed(seed)
        tried += 1
        if tried == MOST_TRIED:
            break
    finder.settle_straights()
    finder.settle_doubtful()
    finder.join_parts()
    finder.drop_mixtures()
    finder.add_areas()
    return FoundLines(
        lines=tuple(finder.lines),
        short_lines=tuple(finder.short_lines),
        warnings=tuple(map(_unexplained, finder.unexplained)),
    )


def _unexplained(place: Place) -> ReadingWarning:
    return ReadingWarning(
        code="line-unexplained",
        text="What looks like a line here is not read as a curve: give it an entry in [[curves]] if it is one",
        at=place,
    )
