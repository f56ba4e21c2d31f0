"""Elliptical arcs become polylines."""

import math
from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats

STEPS_AT_MOST = 5_000


@dataclass(frozen=True, kw_only=True, slots=True)
class Ellipse:
    """An ellipse: centre, half axes and the angle of its first half axis in radians."""

    centre: tuple[float, float]
    radii: tuple[float, float]
    turned: float = 0.0

    def points(self, start: float, sweep: float, tolerance: float) -> Floats:
        """Points from parameter ``start`` on over ``sweep`` (radians), chords within ``tolerance``; shape (n, 2)."""
        largest = max(self.radii)
        step = 2.0 * math.acos(max(-1.0, 1.0 - tolerance / largest)) if largest > 0 else math.pi
        count = min(max(2, math.ceil(abs(sweep) / step)), STEPS_AT_MOST) if step > 0 else STEPS_AT_MOST
        angle = start + sweep * np.arange(count + 1) / count
        along, across = self.radii[0] * np.cos(angle), self.radii[1] * np.sin(angle)
        cos, sin = math.cos(self.turned), math.sin(self.turned)
        x = self.centre[0] + cos * along - sin * across
        y = self.centre[1] + sin * along + cos * across
        return np.stack([x, y], axis=1)


@dataclass(frozen=True, kw_only=True, slots=True)
class Arc:
    """An arc as SVG's path data write it: half axes, x-axis rotation in degrees, large-arc and sweep flags, and end."""

    radii: tuple[float, float]
    turned_deg: float
    large: bool
    clockwise: bool
    end: tuple[float, float]


def arc_points(start: Floats, arc: Arc, tolerance: float) -> Floats:
    """Points after ``start`` along an arc, the last being its end exactly; shape (n, 2).

    Conversion to centre form as in SVG 1.1 (second edition), appendix F.6.5 and F.6.6.
    """
    end = np.array(arc.end)
    rx, ry = abs(arc.radii[0]), abs(arc.radii[1])
    if rx == 0 or ry == 0 or np.array_equal(start, end):
        return end[None, :]
    turned = math.radians(arc.turned_deg)
    rotation = np.array([[math.cos(turned), math.sin(turned)], [-math.sin(turned), math.cos(turned)]])
    half = rotation @ (start - end) / 2.0
    reach = math.hypot(half[0] / rx, half[1] / ry)
    if reach > 1.0:  # too small to join both ends: the smallest that does
        rx, ry, reach = rx * reach, ry * reach, 1.0
    side = math.sqrt(max(0.0, 1.0 / reach**2 - 1.0)) * (-1.0 if arc.large == arc.clockwise else 1.0)
    offset = side * np.array([rx * half[1] / ry, -ry * half[0] / rx])
    centre = rotation.T @ offset + (start + end) / 2.0
    first = math.atan2((half[1] - offset[1]) / ry, (half[0] - offset[0]) / rx)
    last = math.atan2((-half[1] - offset[1]) / ry, (-half[0] - offset[0]) / rx)
    sweep = (last - first) % math.tau if arc.clockwise else -((first - last) % math.tau)
    ellipse = Ellipse(centre=(float(centre[0]), float(centre[1])), radii=(rx, ry), turned=turned)
    points = ellipse.points(first, sweep, tolerance)[1:]
    points[-1] = end
    return points
