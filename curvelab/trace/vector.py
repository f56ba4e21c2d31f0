"""One line of a vector page: exact strokes chosen by guide places, joined and clipped to the plot."""

from dataclasses import dataclass

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke
from curvelab.records.trace import Gap, Trace
from curvelab.records.warning import ReadingWarning
from curvelab.trace.guide import Guide
from curvelab.trace.monotone import edge_of_outline
from curvelab.trace.outline import is_line, middle_line
from curvelab.trace.polyline import clipped, distance_to, filled_in, nearest_on
from curvelab.trace.prepared import Prepared
from curvelab.trace.select import TINT_TOLERANCE, ink_of_colour, tint_distance, written
from curvelab.trace.window import PlotWindow, plot_window

REACH = 3.0
"""Units (pt) within which a guide place means a line."""
TOUCH = 0.1
"""Ends of pieces of one line meet within this, or half the stroke's width."""
SPACING = 1.0
ON_GRID = 0.3
TURN_DEG = 35.0
"""Largest turn where more than one piece could go on."""
LONGEST_HOP = 60.0
CLIP_SLACK = 1e-6


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Piece:
    """A stroke as a line that may be traced."""

    points: Floats
    stroke: Stroke
    boundary: bool

    def alike(self, other: "Piece") -> bool:
        """Whether both are drawn the same way."""
        return (
            self.stroke.colour == other.stroke.colour
            and abs(self.stroke.width - other.stroke.width) < 0.01
            and self.boundary == other.boundary
            and bool(self.stroke.dash) == bool(other.stroke.dash)
        )


def trace_strokes(prepared: Prepared, guide: Guide) -> tuple[Trace, tuple[ReadingWarning, ...]]:
    """Trace one line on exact strokes; see ``trace_guided``."""
    window = plot_window(prepared.axes)
    places = np.array(guide.through, dtype=np.float64)
    wanted = ink_of_colour(guide.colour, 3)
    pieces = pieces_of(prepared, guide, window)
    start = _nearest(pieces, places, guide, wanted)
    line, jumps = _joined(start, [p for p in pieces if p is not start and p.alike(start)])
    if start.boundary:
        line = _edge(start.points, places[0])
    parts = clipped(line, window, CLIP_SLACK)
    part = min(parts, key=lambda points: distance_to(points, places[0]), default=None)
    if part is None:
        raise TraceError(f"The line at {written(guide.through[0])} lies off the plot", "", "Set the guide place inside")
    _check_guides(part, places, guide)
    dense = filled_in(part, SPACING)
    gaps = tuple(gap for gap in jumps if _has(part, gap))
    for gap in gaps:
        dense = _without(dense, gap)
    if _backwards(dense, places):
        dense = dense[::-1]
        gaps = tuple(Gap(start=gap.end, end=gap.start) for gap in reversed(gaps))
    depth = window.depth(dense[[0, -1]])
    near = max(1.0, start.stroke.width)
    trace = Trace(
        places=dense,
        sd=np.full(len(dense), _rounding(start.points)),
        correlation_length=0.0,
        gaps=gaps,
        ends_at_frame=(bool(depth[0] < near), bool(depth[1] < near)),
        colour=start.stroke.colour,
        width=start.stroke.width,
        boundary=start.boundary,
        origin="vector",
        confidence=1.0,
    )
    return trace, ()


def pieces_of(prepared: Prepared, guide: Guide, window: PlotWindow) -> list[Piece]:
    """Strokes inside the plot that are no grid line, frame or backdrop."""
    found = []
    for stroke in prepared.strokes:
        inside = window.depth(stroke.points) > -1.0
        if not inside.any() and len(stroke.points) > 2:
            continue
        if _is_grid(prepared, stroke, window) or _is_backdrop(stroke):
            continue
        if stroke.filled and is_line(stroke.points):
            found.append(Piece(points=_outside_boxes(middle_line(stroke.points), guide), stroke=stroke, boundary=False))
        else:
            points = stroke.points
            if stroke.closed and np.hypot(*(points[0] - points[-1])) > 1e-9:
                points = np.concatenate([points, points[:1]])
            found.append(Piece(points=_outside_boxes(points, guide), stroke=stroke, boundary=stroke.filled))
    return [piece for piece in found if len(piece.points) > 1]


def _is_backdrop(stroke: Stroke) -> bool:
    """White shapes and axis-parallel boxes: label backgrounds, the page, the plot's own rectangle."""
    if min(stroke.colour) >= 250:
        return True
    points = stroke.points
    parallel = bool(np.all(np.min(np.abs(np.diff(points, axis=0)), axis=1) < 1e-3))
    return stroke.closed and parallel and len(points) <= 5


def _is_grid(prepared: Prepared, stroke: Stroke, window: PlotWindow) -> bool:
    """Whether a straight stroke lies along a measured grid line, or spans the plot along an axis."""
    points = stroke.points
    if stroke.filled and not is_line(points):
        return False
    scaled = prepared.axes.map.scaled(points)
    slope = np.linalg.norm(prepared.axes.map.jacobian(points), axis=2)
    for k in (0, 1):
        if np.ptp(scaled[:, k] / slope[:, k]) > ON_GRID + 2.0 * stroke.width * stroke.filled:
            continue
        span = np.ptp(scaled[:, 1 - k]) / (window.high - window.low)[1 - k]
        if span > 0.98:
            return True
        name, axis = (("current", prepared.axes.current), ("value", prepared.axes.value))[k]
        lines = [line for line in prepared.axes.grid if line.axis == name]
        near = [line for line in lines if abs(float(axis.scaled(line.value)) - scaled[0, k]) < ON_GRID * slope[0, k]]
        if any(abs(line.width - stroke.width) < 0.05 for line in near):
            return True
    return False


def _outside_boxes(points: Floats, guide: Guide) -> Floats:
    """The longest part of a polyline outside the rectangles to avoid."""
    if not guide.avoid:
        return points
    dense = filled_in(points, SPACING)
    out = np.ones(len(dense), dtype=bool)
    for x0, y0, x1, y1 in guide.avoid:
        box_low, box_high = np.minimum([x0, y0], [x1, y1]), np.maximum([x0, y0], [x1, y1])
        out &= ~np.all((dense >= box_low) & (dense <= box_high), axis=1)
    if out.all():
        return points
    runs = np.split(np.arange(len(dense)), np.flatnonzero(np.diff(out.astype(int)) != 0) + 1)
    kept = [run for run in runs if out[run[0]]]
    return dense[max(kept, key=len)] if kept else points[:0]


def _nearest(pieces: list[Piece], places: Floats, guide: Guide, wanted: Floats | None) -> Piece:
    ranked = sorted(((distance_to(piece.points, places[0]), k) for k, piece in enumerate(pieces)))
    near = [(distance, pieces[k]) for distance, k in ranked if distance <= REACH]
    if not near:
        nearest = f"The nearest line is {ranked[0][0]:.1f} away" if ranked else "No line on this plot"
        raise TraceError(
            f"No line at guide place {written(guide.through[0])}", nearest, "Set the guide place on the line"
        )
    if wanted is not None:
        near = [(d, p) for d, p in near if tint_distance(_ink(p.stroke), wanted) <= TINT_TOLERANCE]
        if not near:
            raise TraceError(
                f"No line of colour {guide.colour} at {written(guide.through[0])}",
                "The line there has another colour",
                "Correct the colour, or leave it out",
            )
    if len(places) > 1:
        near.sort(key=lambda pair: pair[0] + max(min(distance_to(pair[1].points, p), 50.0) for p in places[1:]))
    # an outline of a filled area under a drawn line is not what is meant
    drawn = [piece for distance, piece in near if not piece.boundary]
    return drawn[0] if drawn else near[0][1]


def _ink(stroke: Stroke) -> Floats:
    return 1.0 - np.array(stroke.colour) / 255.0


def _joined(start: Piece, others: list[Piece]) -> tuple[Floats, list[Gap]]:
    """The line with every piece that goes on from its ends, and the gaps between them."""
    line = start.points
    left = list(others)
    gaps: list[Gap] = []
    if start.boundary or np.hypot(*(line[0] - line[-1])) < 1e-9:
        return line, gaps
    for _ in range(2):
        while True:
            found = _next_piece(line, left, max(TOUCH, 0.5 * start.stroke.width))
            if found is None:
                break
            index, points, hop = found
            if hop:
                gaps.append(Gap(start=_place(line[-1]), end=_place(points[0])))
            line = np.concatenate([line, points if hop or np.hypot(*(points[0] - line[-1])) > 1e-9 else points[1:]])
            del left[index]
        line = line[::-1]
        gaps = [Gap(start=gap.end, end=gap.start) for gap in reversed(gaps)]
    return line, gaps


def _place(point: Floats) -> tuple[float, float]:
    return float(point[0]), float(point[1])


def _next_piece(line: Floats, pieces: list[Piece], touch: float) -> tuple[int, Floats, bool] | None:
    """Index, points and whether a gap lies before it, of the piece that goes on from the line's last point."""
    tip, ahead = line[-1], _direction(line)
    touching, beyond = [], []
    for index, piece in enumerate(pieces):
        for points in (piece.points, piece.points[::-1]):
            step = points[0] - tip
            distance = float(np.hypot(*step))
            turn = _turn(ahead, -_direction(points[::-1]))
            if distance <= touch:
                touching.append((turn, index, points))
            elif distance <= LONGEST_HOP and turn < 12.0 and _turn(ahead, step / distance) < 4.0 + 0.5 * turn:
                beyond.append((distance, index, points))
    touching.sort(key=lambda item: item[0])
    if len(touching) == 1 or (touching and touching[0][0] < TURN_DEG):
        return touching[0][1], touching[0][2], False
    beyond.sort(key=lambda item: item[0])
    if not touching and beyond and (len(beyond) == 1 or beyond[1][0] > 1.5 * beyond[0][0]):
        return beyond[0][1], beyond[0][2], True
    return None


def _direction(line: Floats) -> Floats:
    """Unit vector at the last point, over at least one unit of length."""
    run = np.cumsum(np.hypot(*np.diff(line[::-1], axis=0).T))
    back = min(int(np.searchsorted(run, 1.0)) + 1, len(line) - 1)
    step = line[-1] - line[-1 - back]
    unit: Floats = step / max(float(np.hypot(*step)), 1e-12)
    return unit


def _turn(one: Floats, two: Floats) -> float:
    return float(np.degrees(np.arccos(np.clip(one @ two, -1.0, 1.0))))


def _edge(outline: Floats, place: Floats) -> Floats:
    """The edge of a filled area that a place means."""
    dense = filled_in(outline, SPACING)
    if np.hypot(*(dense[0] - dense[-1])) < 1e-9:
        dense = dense[:-1]
    start = int(np.hypot(*(dense - place).T).argmin())
    return edge_of_outline(dense, start, 0.05)


def _check_guides(part: Floats, places: Floats, guide: Guide) -> None:
    for place, given in zip(places[1:], guide.through[1:], strict=True):
        distance = distance_to(part, place)
        if distance > REACH:
            raise TraceError(
                f"Guide places {written(guide.through[0])} and {written(given)} lie on different lines",
                f"The line through the first passes {distance:.1f} from the other",
                "Move one of them, or add a place between them",
            )


def _has(part: Floats, gap: Gap) -> bool:
    return distance_to(part, np.array(gap.start)) < 1e-6 and distance_to(part, np.array(gap.end)) < 1e-6


def _without(dense: Floats, gap: Gap) -> Floats:
    """Drop points filled in between a gap's ends."""
    ends = [int(np.hypot(*(dense - np.array(end)).T).argmin()) for end in (gap.start, gap.end)]
    low, high = min(ends), max(ends)
    return np.concatenate([dense[: low + 1], dense[high:]])


def _backwards(dense: Floats, places: Floats) -> bool:
    if len(places) == 1:
        return bool(dense[-1, 0] < dense[0, 0])
    order = [int(np.hypot(*(nearest_on(dense, place) - place).T).argmin()) for place in (places[0], places[-1])]
    return order[-1] < order[0]


def _rounding(points: Floats) -> float:
    """Standard deviation of a coordinate from the decimals it is written with."""
    sample = points[:200].ravel()
    for decimals in range(5):
        if np.all(np.abs(sample - np.round(sample, decimals)) < 1e-5):
            return float(10.0**-decimals / np.sqrt(12.0))
    return float(1e-4 / np.sqrt(12.0))
