"""Words beside or on a line, with a leader where they stand apart."""

import numpy as np

from demo_curves.drawing.design import CurveDesign, CurveLabel
from demo_curves.drawing.fonts import text_width
from demo_curves.drawing.geometry import Box, Points, at_length, lengths
from demo_curves.drawing.ink import Fill, Ink, Stroke, Words, rectangle


def label_ink(label: CurveLabel, curve: CurveDesign, runs: list[Points], font: str) -> tuple[list[Ink], list[Box]]:
    """Ink of a label, and the boxes it hides."""
    run = max(runs, key=lambda points: lengths(points)[-1])
    on_line = at_length(run, np.array([label.along * lengths(run)[-1]]))[0]
    centre = on_line + np.array(label.offset_pt)
    half_width = text_width(label.text, font, False, label.size_pt) / 2
    words = Words(
        text=label.text,
        at_pt=(float(centre[0] - half_width), float(centre[1] + 0.36 * label.size_pt)),
        size_pt=label.size_pt,
        font=font,
        colour=curve.colour,
    )
    pad = 0.18 * label.size_pt
    box = (
        float(centre[0] - half_width - 2 * pad),
        float(centre[1] - 0.5 * label.size_pt - pad),
        float(centre[0] + half_width + 2 * pad),
        float(centre[1] + 0.5 * label.size_pt + pad),
    )
    ink: list[Ink] = _leader(centre, on_line, box) if label.leader else []
    if label.boxed:
        ink.append(Fill(points=rectangle(*box), colour="#ffffff"))
    return [*ink, words], [box] if label.boxed else []


def _leader(centre: Points, on_line: Points, box: Box) -> list[Ink]:
    """A thin line from the words' edge to the curve, with an arrow head of 4 points."""
    direction = on_line - centre
    reach = float(np.hypot(*direction))
    direction = direction / reach
    half = np.array([(box[2] - box[0]) / 2, (box[3] - box[1]) / 2])
    with np.errstate(divide="ignore"):
        leave = float(np.min(half / np.abs(direction)))
    across = np.array([-direction[1], direction[0]])
    barb = on_line - 4.0 * direction
    head = np.array([on_line, barb + 1.2 * across, barb - 1.2 * across, on_line])
    shaft = np.array([centre + direction * leave, barb])
    return [
        Stroke(points=shaft, width_pt=0.5, colour="#000000"),
        Fill(points=head, colour="#000000"),
    ]
