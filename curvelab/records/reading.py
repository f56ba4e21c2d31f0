"""A reading: the result of digitising one worksheet or one bare sheet."""

from dataclasses import dataclass

from curvelab.records.arrays import Floats, freeze
from curvelab.records.axes import Axes
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord, Tolerance
from curvelab.records.finding import Finding
from curvelab.records.fit import CurveFit
from curvelab.records.sheet import Sheet
from curvelab.records.trace import Trace
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import Worksheet


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ReadCurve:
    """A trace with its values and its curve.

    ``current``, ``value`` are those of the trace's places in base units, ``sd_current``, ``sd_value`` their relative
    standard uncertainties (NaN where steep or flat). ``curve`` is the fitted and tabulated model, ``label`` what is
    printed on the line, ``tolerance`` what the worksheet states about this very line. ``fit`` is the model that was
    tabulated, with its published forms and uncertainty budget; None for typed points and readings kept without it.
    """

    trace: Trace | None
    current: Floats
    value: Floats
    sd_current: Floats
    sd_value: Floats
    curve: Curve
    devices: tuple[str, ...]
    tolerance: Tolerance | None = None
    label: str = ""
    fit: CurveFit | None = None

    def __post_init__(self) -> None:
        freeze(self, current=self.current, value=self.value, sd_current=self.sd_current, sd_value=self.sd_value)


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Reading:
    """Everything that led from a sheet to devices; ``sheet`` and ``axes`` are None for typed points."""

    worksheet: Worksheet
    sheet: Sheet | None
    axes: Axes | None
    curves: tuple[ReadCurve, ...]
    devices: tuple[DeviceRecord, ...]
    findings: tuple[Finding, ...]
    warnings: tuple[ReadingWarning, ...]
    program_version: str
