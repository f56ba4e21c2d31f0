"""Stretches along which a line was not seen and its model was not carried across: no value is given there."""

from collections.abc import Iterator, Sequence

import numpy as np

from curvelab.records.axes import Axes
from curvelab.records.fit import FitGap
from curvelab.records.reading import ReadCurve
from curvelab.records.warning import ReadingWarning
from curvelab.units import written_current


def open_gaps(curves: Sequence[ReadCurve], axes: Axes) -> Iterator[ReadingWarning]:
    """A warning for each, at its middle."""
    for read in curves:
        for gap in read.fit.gaps if read.fit else ():
            if not gap.bridged:
                yield _warning(read, gap, axes)


def _warning(read: ReadCurve, gap: FitGap, axes: Axes) -> ReadingWarning:
    (start, end), base = 10.0 ** np.array([gap.start, gap.end]), read.curve.base
    x, y = axes.places(*np.array([start, end]).T).mean(axis=0)
    owner = f" of {', '.join(read.devices)}" if read.devices else ""
    between = f"{written_current(float(start[0]), base)} and {written_current(float(end[0]), base)}"
    return ReadingWarning(
        code="gap",
        text=f"The {read.curve.edge} line{owner} was not seen between {between}: no value is given there; "
        "give a place it passes, or avoid what hides it",
        at=(float(x), float(y)),
    )
