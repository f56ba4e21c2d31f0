"""Every curve line of a vector page: each stroke that no line explains yet is traced as a guide on it would be."""

from dataclasses import dataclass

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke
from curvelab.trace.cover import Cover
from curvelab.trace.found import FoundLine, FoundLines, ShortLine
from curvelab.trace.guide import Guide
from curvelab.trace.hatching import hatch_lines
from curvelab.trace.judge import LEAST_LENGTH, Judge, bow, length_of
from curvelab.trace.polyline import filled_in
from curvelab.trace.prepared import Prepared
from curvelab.trace.vector import SPACING, Piece, pieces_of, trace_strokes
from curvelab.trace.window import PlotWindow

NEAR = 0.25
"""Strokes this close (pt) to a traced line, or within half its width, are explained by it."""
IN_PLOT = 1.0
"""pt from the frame: what lies no deeper in the plot is the frame itself."""
STRAIGHT = 0.1
"""pt: largest distance of a straight stroke from its chord."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Candidate:
    piece: Piece
    points: Floats
    length: float


def find_on_strokes(prepared: Prepared) -> FoundLines:
    """All curve lines of a vector plot, see ``find_lines``."""
    judge = Judge.of(prepared.axes, STRAIGHT)
    cover = Cover(spacing=SPACING, slack=NEAR)
    candidates = _candidates(prepared, judge.window)
    short = [one for one in candidates if _is_straight(one) and judge.is_furniture(one.points)]
    lines: list[FoundLine] = []
    for candidate in _without_hatching(candidates):
        if candidate.length < LEAST_LENGTH * judge.side or cover.holds(candidate.points):
            continue
        guide = Guide(through=(_middle(candidate.points),))
        try:
            trace, doubts = trace_strokes(prepared, guide)
        except TraceError:
            continue
        cover.add(trace)
        verdict = judge.verdict(trace.places, trace.width)
        if verdict == "curve" or (verdict == "straight" and not judge.is_furniture(trace.places)):
            dashed = bool(candidate.piece.stroke.dash)
            lines.append(FoundLine(trace=trace, guide=guide, dashed=dashed, warnings=doubts))
    return FoundLines(lines=tuple(lines), short_lines=tuple(map(_short_line, short)), warnings=())


def _without_hatching(candidates: list[_Candidate]) -> list[_Candidate]:
    straight = [one for one in candidates if _is_straight(one)]
    hatched = hatch_lines([one.piece.points for one in straight])
    hatching = {id(one) for one, is_hatched in zip(straight, hatched, strict=True) if is_hatched}
    return [one for one in candidates if id(one) not in hatching]


def _is_straight(candidate: _Candidate) -> bool:
    return not candidate.piece.boundary and bow(candidate.piece.points) <= STRAIGHT


def _candidates(prepared: Prepared, window: PlotWindow) -> list[_Candidate]:
    """Strokes inside the plot, drawn lines before outlines of areas, the longest first."""
    found = []
    for piece in pieces_of(prepared, Guide(through=()), window):
        if _is_loop(piece.stroke):
            continue
        dense = filled_in(piece.points, SPACING)
        inside = dense[window.depth(dense) > IN_PLOT]
        if len(inside) > 1:
            found.append(_Candidate(piece=piece, points=inside, length=length_of(piece.points)))
    return sorted(found, key=lambda one: (one.piece.boundary, -one.length))


def _is_loop(stroke: Stroke) -> bool:
    """A closed line that is drawn and not filled: a frame about words, a ring, a character."""
    ends = stroke.points[-1] - stroke.points[0]
    return not stroke.filled and (stroke.closed or float(np.hypot(*ends)) < 1e-6)


def _middle(points: Floats) -> tuple[float, float]:
    x, y = points[len(points) // 2]
    return round(float(x), 3), round(float(y), 3)


def _short_line(candidate: _Candidate) -> ShortLine:
    points, stroke = candidate.piece.points, candidate.piece.stroke
    start, end = sorted(((float(x), float(y)) for x, y in points[[0, -1]]))
    return ShortLine(start=start, end=end, colour=stroke.colour, width=stroke.width, dashed=bool(stroke.dash))
