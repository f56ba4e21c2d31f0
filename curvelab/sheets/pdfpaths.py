"""A PDF path object becomes strokes: its exact corners, its curves flattened."""

import ctypes
from collections.abc import Iterator
from typing import Any

import numpy as np
from pypdfium2 import raw

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke
from curvelab.sheets.bezier import flattened
from curvelab.sheets.strokes import Colour, Paint, PointCount, Polyline, Setting, strokes_from


def path_segments(handle: Any) -> Iterator[Any]:
    """PDFium's segments of a path object."""
    for index in range(raw.FPDFPath_CountSegments(handle)):
        yield raw.FPDFPath_GetPathSegment(handle, index)


def clip_segments(handle: Any, path: int) -> Iterator[Any]:
    """PDFium's segments of one path of a clip."""
    for index in range(raw.FPDFClipPath_CountPathSegments(handle, path)):
        yield raw.FPDFClipPath_GetPathSegment(handle, path, index)


def subpaths(segments: Iterator[Any], tolerance: float) -> list[Polyline]:
    """Polylines in the segments' own space, each with whether it returns to its start.

    Parameters
    ----------
    segments : iterator of PDFium's path segments
    tolerance : float
        Greatest distance between a curve and its polyline, in that space.
    """
    found: list[Polyline] = []
    points: list[Floats] = []
    controls: list[Floats] = []
    closed = False

    def finish() -> None:
        if len(points) >= 2:
            found.append((np.array(points), closed))

    count = PointCount()
    x, y = ctypes.c_float(), ctypes.c_float()
    for segment in segments:
        raw.FPDFPathSegment_GetPoint(segment, ctypes.byref(x), ctypes.byref(y))
        point = np.array([x.value, y.value])
        kind = raw.FPDFPathSegment_GetType(segment)
        count.add(1)
        if kind == raw.FPDF_SEGMENT_MOVETO or not points:
            finish()
            points, controls, closed = [point], [], False
        elif kind == raw.FPDF_SEGMENT_BEZIERTO:
            controls.append(point)
            if len(controls) == 3:
                curve = flattened((points[-1], *controls), tolerance)
                points.extend(curve)
                count.add(len(curve))
                controls = []
        else:
            points.append(point)
        if raw.FPDFPathSegment_GetClose(segment):
            closed = True
            if not np.array_equal(points[0], points[-1]):
                points.append(points[0])
    finish()
    return found


def strokes_of(handle: Any, setting: Setting) -> list[Stroke]:
    """Visible strokes of one path object; a path both filled and drawn gives an outline and a line."""
    fill_rule, drawn = ctypes.c_int(), ctypes.c_int()
    raw.FPDFPath_GetDrawMode(handle, ctypes.byref(fill_rule), ctypes.byref(drawn))
    paint = Paint(
        fill=_colour(raw.FPDFPageObj_GetFillColor, handle) if fill_rule.value else None,
        line=_colour(raw.FPDFPageObj_GetStrokeColor, handle) if drawn.value else None,
        width=_width(handle),
        dash=_dash(handle),
    )
    if paint.fill is None and paint.line is None:
        return []
    return strokes_from(subpaths(path_segments(handle), setting.tolerance), paint, setting)


def _colour(getter: Any, handle: Any) -> Colour | None:
    """Red, green, blue; None where nothing shows."""
    red, green, blue, alpha = (ctypes.c_uint() for _ in range(4))
    known = getter(handle, *(ctypes.byref(part) for part in (red, green, blue, alpha)))
    if not known or alpha.value == 0:
        return None
    return red.value, green.value, blue.value


def _width(handle: Any) -> float:
    width = ctypes.c_float()
    raw.FPDFPageObj_GetStrokeWidth(handle, ctypes.byref(width))
    return width.value


def _dash(handle: Any) -> tuple[float, ...]:
    count = raw.FPDFPageObj_GetDashCount(handle)
    if count <= 0:
        return ()
    lengths = (ctypes.c_float * count)()
    raw.FPDFPageObj_GetDashArray(handle, lengths, count)
    return tuple(lengths)
