"""The station that finds and names every curve of a plot where a worksheet guides none."""

from dataclasses import dataclass, replace

from curvelab.errors import FitError
from curvelab.lettering.read import read_words
from curvelab.reading.follow import Followed
from curvelab.reading.model import fit_trace
from curvelab.reading.naming import name_lines
from curvelab.reading.phrases import phrases_of
from curvelab.reading.remember import Remember
from curvelab.reading.watch import Watch
from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import DeviceEntry, Document, Worksheet
from curvelab.trace.find import FoundLine, FoundLines, find_lines
from curvelab.trace.prepare import prepare

NO_CURVES = ReadingWarning(
    code="no-curves",
    text="No curve was found on the plot: give each line an entry in [[curves]] with a place it passes.",
)


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Found:
    """The curves of a plot with their names, and the devices they belong to."""

    followed: tuple[Followed, ...]
    devices: tuple[DeviceEntry, ...]
    title: str
    warnings: tuple[ReadingWarning, ...]


def with_found(worksheet: Worksheet, found: Found) -> Worksheet:
    """The worksheet as it would have to be written to give the same curves."""
    titled = worksheet.document != Document() or not found.title
    return replace(
        worksheet,
        document=worksheet.document if titled else Document(title=found.title),
        curves=tuple(each.entry for each in found.followed),
        devices=found.devices,
    )


def find_curves(sheet: Sheet, axes: Axes, devices: tuple[DeviceEntry, ...], watch: Watch, remember: Remember) -> Found:
    """Find every curve, and name it by the words of the sheet; a line that is no curve is told and left out.

    Parameters
    ----------
    sheet : Sheet
    axes : Axes
    devices : tuple of DeviceEntry
        Those the worksheet gives; where there are none they are proposed from the sheet.
    watch : callable
    remember : callable
    """
    watch("Reading words", 0.0)
    words = remember("words", (sheet,), lambda: read_words(sheet))
    prepared = remember("page", (sheet, axes), lambda: prepare(sheet, axes))
    watch("Finding curves", 0.0)
    found = remember("lines", (prepared, words), lambda: find_lines(prepared, words))
    found = _curves_among(found, sheet, axes, remember)
    naming = name_lines(found, phrases_of(words), axes, devices)
    followed = tuple(
        Followed(entry=entry, trace=line.trace, label=label)
        for entry, line, label in zip(naming.entries, found.lines, naming.labels, strict=True)
    )
    doubts = tuple(doubt for line in found.lines for doubt in line.warnings)
    missing = () if found.lines else (NO_CURVES,)
    return Found(
        followed=followed,
        devices=naming.devices,
        title=naming.title,
        warnings=(*missing, *doubts, *found.warnings, *naming.warnings),
    )


def _curves_among(found: FoundLines, sheet: Sheet, axes: Axes, remember: Remember) -> FoundLines:
    """What was found, without lines that cannot be one curve."""
    lines, doubts = [], []
    for line in found.lines:
        try:
            fit_trace(line.trace, axes, remember, pixel=sheet.pixel)
        except FitError as error:
            doubts.append(_no_curve(line, error))
        else:
            lines.append(line)
    return replace(found, lines=tuple(lines), warnings=(*found.warnings, *doubts))


def _no_curve(line: FoundLine, error: FitError) -> ReadingWarning:
    x, y = line.guide.through[0]
    return ReadingWarning(
        code="line-no-curve",
        text=f"A line here is left out: {error.problem}; give it an entry in [[curves]] if it is a curve",
        at=(float(x), float(y)),
    )
