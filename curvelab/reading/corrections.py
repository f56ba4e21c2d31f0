"""Everything a person can say about a reading in one step: each is a pure step from one worksheet to the next.

A correction has the word it is told apart by, ``made(worksheet)``, the next worksheet, and ``words``, what the step is
called.
"""

from typing import TypeAlias

from curvelab.reading.correct_axes import MoveMark, RemoveMark, SetAxis, SetMark
from curvelab.reading.correct_devices import FillDevice, RemoveDevice, SetDevice
from curvelab.reading.correct_lines import Avoid, Passes, RemoveCurve, SetCurve
from curvelab.reading.correct_sheet import Accept, ChoosePage, ChoosePlot

Correction: TypeAlias = (
    Passes
    | Avoid
    | SetCurve
    | RemoveCurve
    | SetMark
    | MoveMark
    | RemoveMark
    | SetAxis
    | SetDevice
    | FillDevice
    | RemoveDevice
    | Accept
    | ChoosePlot
    | ChoosePage
)
"""One of them."""
