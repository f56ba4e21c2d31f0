"""SVG path data become polylines: M L H V C S Q T A Z, absolute and relative (SVG 2, section 9.3)."""

import re
from collections.abc import Callable

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.sheets.bezier import flattened
from curvelab.sheets.ellipse import Arc, arc_points
from curvelab.sheets.strokes import PointCount, Polyline
from curvelab.sheets.svgnumbers import NUMBER

COUNTS = {"M": 2, "L": 2, "H": 1, "V": 1, "C": 6, "S": 4, "Q": 4, "T": 2, "A": 7, "Z": 0}
BETWEEN = re.compile(r"[\s,]*")
FLAGS = (3, 4)
"""Places of an arc's two flags: single digits that need no space after them."""


def polylines(data: str, tolerance: float) -> list[Polyline]:
    """Polylines of path data, up to its first error, as the standard asks.

    Parameters
    ----------
    data : str
    tolerance : float
        Greatest distance between a curve and its polyline, in user units.
    """
    pen = _Pen(tolerance)
    at, command = BETWEEN.match(data, 0).end(), ""  # type: ignore[union-attr]  # an empty match always succeeds
    while at < len(data):
        if data[at].upper() in COUNTS:
            command, at = data[at], at + 1
        elif command.upper() in ("", "Z"):
            break
        read = _arguments(data, at, command.upper())
        if read is None:
            break
        values, at = read
        if not pen.has_started and command.upper() != "M":
            break
        pen.do(command, values)
        command = {"M": "L", "m": "l"}.get(command, command)
        at = BETWEEN.match(data, at).end()  # type: ignore[union-attr]
    return pen.finished()


def _arguments(data: str, at: int, command: str) -> tuple[list[float], int] | None:
    values: list[float] = []
    for index in range(COUNTS[command]):
        at = BETWEEN.match(data, at).end()  # type: ignore[union-attr]
        if command == "A" and index in FLAGS:
            if data[at : at + 1] not in ("0", "1"):
                return None
            values.append(float(data[at]))
            at += 1
            continue
        match = NUMBER.match(data, at)
        if match is None:
            return None
        values.append(float(match[0]))
        at = match.end()
    return values, at


class _Pen:
    """Draws commands one after another."""

    def __init__(self, tolerance: float) -> None:
        self._tolerance = tolerance
        self._count = PointCount()
        self._found: list[Polyline] = []
        self._points: list[Floats] = []
        self._control: tuple[str, Floats] | None = None
        self._draw: dict[str, Callable[[Floats], None]] = {
            "M": lambda ends: self._move(ends[0]),
            "L": self._add,
            "C": self._cubic,
            "S": lambda ends: self._cubic(np.vstack([self._reflected("C"), ends])),
            "Q": self._quadratic,
            "T": lambda ends: self._quadratic(np.vstack([self._reflected("Q"), ends])),
        }

    @property
    def has_started(self) -> bool:
        """Whether a first place is known."""
        return bool(self._points)

    def do(self, command: str, values: list[float]) -> None:
        """One command with one set of arguments."""
        kind, control = command.upper(), self._control
        here = self._points[-1] if self._points else np.zeros(2)
        origin = here if command.islower() else np.zeros(2)
        if kind == "Z":
            self._close()
        elif kind == "H":
            self._add(np.array([[origin[0] + values[0], here[1]]]))
        elif kind == "V":
            self._add(np.array([[here[0], origin[1] + values[0]]]))
        elif kind == "A":
            end = origin + values[5:]
            arc = Arc(
                radii=(values[0], values[1]),
                turned_deg=values[2],
                large=bool(values[3]),
                clockwise=bool(values[4]),
                end=(float(end[0]), float(end[1])),
            )
            self._add(arc_points(here, arc, self._tolerance))
        else:
            self._draw[kind](np.reshape(values, (-1, 2)) + origin)
        if self._control is control:
            self._control = None

    def finished(self) -> list[Polyline]:
        """Everything drawn."""
        self._finish(closed=False)
        return self._found

    def _move(self, place: Floats) -> None:
        self._finish(closed=False)
        self._points = [place]

    def _add(self, places: Floats) -> None:
        self._count.add(len(places))
        self._points.extend(places)

    def _cubic(self, ends: Floats) -> None:
        self._add(flattened((self._points[-1], *ends), self._tolerance))
        self._control = ("C", ends[1])

    def _quadratic(self, ends: Floats) -> None:
        start, (control, end) = self._points[-1], ends
        corners = (start, start + (control - start) * 2 / 3, end + (control - end) * 2 / 3, end)
        self._add(flattened(corners, self._tolerance))
        self._control = ("Q", control)

    def _reflected(self, kind: str) -> Floats:
        """The mirror image of the last control point, or the place itself after another kind of command."""
        here = self._points[-1]
        if self._control is None or self._control[0] != kind:
            return here
        return 2 * here - self._control[1]

    def _close(self) -> None:
        start = self._points[0]
        if not np.array_equal(start, self._points[-1]):
            self._points.append(start)
        self._finish(closed=True)
        self._points = [start]

    def _finish(self, closed: bool) -> None:
        if len(self._points) >= 2:
            self._found.append((np.array(self._points), closed))
        self._points = []
