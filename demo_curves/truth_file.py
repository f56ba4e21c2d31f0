"""The truth of a demo sheet as JSON: values of every line, and the maps from values to places on each of its files."""

import json
from collections.abc import Mapping

from demo_curves.drawing.truth import CurveTruth, SheetTruth


def truth_text(points: SheetTruth, pixels: SheetTruth, scans: Mapping[str, SheetTruth]) -> str:
    """The truth of one sheet.

    Place = matrix @ (log10 current, log10 value, 1): `matrix_pt` on the PDF, `matrix_px` on the PNG. On a scan that
    place in px goes through the scan's own map. Lines are straight in log-log between their vertices; `seen` are
    ranges of vertices between which nothing covers the line.
    """
    plots = [
        {
            "quantity": plot.value.quantity,
            "current_unit": plot.current.unit,
            "value_unit": plot.value.unit,
            "matrix_pt": plot.matrix.tolist(),
            "matrix_px": in_pixels.matrix.tolist(),
            "curves": [_curve(curve) for curve in plot.curves],
        }
        for plot, in_pixels in zip(points.plots, pixels.plots, strict=True)
    ]
    maps = {
        file: {"dpi": scan.dpi, "matrix_px": scan.plots[0].matrix.tolist(), **scan.plots[0].place_map.described()}
        for file, scan in scans.items()
    }
    sheet = {"width_px": pixels.width, "height_px": pixels.height, "dpi": pixels.dpi, "plots": plots, "scans": maps}
    return json.dumps(sheet, separators=(",", ":")) + "\n"


def _curve(curve: CurveTruth) -> dict[str, object]:
    design = curve.design
    return {
        "name": design.name,
        "edge": design.edge,
        "meaning": design.meaning,
        "element": design.element,
        "devices": list(design.devices),
        "at": dict(design.at),
        "current": [float(f"{current:.7g}") for current in curve.current],
        "value": [float(f"{value:.7g}") for value in curve.value],
        "seen": _ranges(curve.visible.tolist()),
    }


def _ranges(seen: list[bool]) -> list[list[int]]:
    """First and last vertex of each stretch that is seen."""
    ranges: list[list[int]] = []
    for index, visible in enumerate(seen):
        if not visible:
            continue
        if ranges and ranges[-1][1] == index:
            ranges[-1][1] = index + 1
        else:
            ranges.append([index, index + 1])
    return ranges
