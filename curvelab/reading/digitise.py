"""The way of a reading: a worksheet or a bare sheet in, axes, curves, devices and findings out."""

import os
from dataclasses import replace
from pathlib import Path

from threadpoolctl import threadpool_limits

from curvelab import __version__
from curvelab.axes.calibrate import calibrate
from curvelab.errors import InputError, SheetError
from curvelab.reading.accept import accept
from curvelab.reading.assemble import assemble, owned
from curvelab.reading.check import checked
from curvelab.reading.find import find_curves, with_found
from curvelab.reading.follow import follow_curves, open_edges
from curvelab.reading.form_doubts import form_doubts
from curvelab.reading.gaps import open_gaps
from curvelab.reading.model import fitted_curves, typed_curves
from curvelab.reading.remember import Remember, anew, within_reading
from curvelab.reading.said_forms import with_said_forms
from curvelab.reading.watch import Watch, unwatched
from curvelab.records.axes import Axes
from curvelab.records.curve import SheetKey
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry, SheetEntry, Worksheet
from curvelab.sheets.open import open_sheet
from curvelab.worksheets.read import read_worksheet


def digitise(
    source: str | os.PathLike[str], *, page: int | None = None, plot: int | None = None, watch: Watch = unwatched
) -> Reading:
    """Read a sheet by itself, or as a worksheet says.

    Parameters
    ----------
    source : path
        A sheet (PNG, JPEG, TIFF, BMP, WebP, PDF, SVG) or a worksheet (``.toml``).
    page, plot : int, optional
        Which page of the file and which plot of the page, from 1; a worksheet says so itself.
    watch : callable, optional
        Told the stage and the fraction done.

    Raises
    ------
    InputError
        The file, the worksheet, a mark or a guide cannot be used; the message says which and what to do.
    """
    path = Path(source)
    if path.suffix.lower() != ".toml":
        entry = SheetEntry(file=path.name, page=page or 1, plot=plot)
        return read(Worksheet(sheet=entry), path.parent, watch)
    if page is not None or plot is not None:
        raise InputError(
            f"'{path.name}' is a worksheet and says page and plot itself", "", "Set page and plot in its [sheet]"
        )
    return read(read_worksheet(path), path.parent, watch)


def read(worksheet: Worksheet, folder: Path, watch: Watch = unwatched, remember: Remember = anew) -> Reading:
    """Read what a worksheet says; file names are relative to ``folder``, ``remember`` may keep what stations made."""
    reading = read_curves(worksheet, folder, watch, remember)
    watch("Checking", 0.0)
    return with_findings(reading, remember)


def with_findings(reading: Reading, remember: Remember = anew) -> Reading:
    """The reading with its devices checked."""
    return replace(reading, findings=checked(reading.devices, remember))


def read_curves(worksheet: Worksheet, folder: Path, watch: Watch = unwatched, remember: Remember = anew) -> Reading:
    """Axes, curves and devices of a reading, not checked yet; arguments as for `read`.

    Linear algebra runs on one thread, so that the same worksheet gives the same bytes whatever the number of threads.
    """
    with threadpool_limits(limits=1, user_api="blas"):
        return _curves_of(worksheet, folder, watch, within_reading(remember))


def _curves_of(worksheet: Worksheet, folder: Path, watch: Watch, remember: Remember) -> Reading:
    sheet: Sheet | None = None
    axes: Axes | None = None
    warnings: tuple[ReadingWarning, ...] = ()
    entries = [owned(worksheet, entry, number) for number, entry in enumerate(worksheet.curves, start=1)]
    quantity = worksheet.value.quantity if worksheet.value else "time"
    followed_curves: tuple[ReadCurve, ...] = ()
    if worksheet.sheet is not None:
        watch("Opening the sheet", 0.0)
        page = worksheet.sheet
        sheet = _sheet(page, folder, remember)
        watch("Calibrating the axes", 0.0)
        current = worksheet.current or AxisEntry(quantity="current")
        axes, doubts = _calibrated(sheet, current, worksheet.value, page.plot, remember)
        worksheet = replace(worksheet, sheet=replace(page, plot=axes.plot))
        quantity = axes.value.quantity
        if worksheet.curves:
            guided = tuple(entry for entry in entries if entry.through)
            followed, more_doubts = follow_curves(sheet, axes, guided, watch, remember)
        else:
            found = find_curves(sheet, axes, worksheet.devices, watch, remember)
            followed, more_doubts = found.followed, found.warnings
            worksheet = with_found(worksheet, found)
        key = SheetKey(sha256=sheet.sha256, page=sheet.page, plot=axes.plot, file=page.file)
        watch("Fitting the bands", 0.0)
        followed_curves = fitted_curves(followed, axes, key, remember, pixel=sheet.pixel)
        warnings = (*doubts, *more_doubts, *open_edges(followed), *open_gaps(followed_curves, axes))
    curves = followed_curves + typed_curves([entry for entry in entries if entry.points], quantity)
    curves = with_said_forms(curves, worksheet.devices)
    warnings += form_doubts(curves, worksheet.devices)
    devices, device_doubts = assemble(worksheet, curves)
    return Reading(
        worksheet=worksheet,
        sheet=sheet,
        axes=axes,
        curves=curves,
        devices=devices,
        findings=(),
        warnings=accept(warnings + device_doubts, worksheet.accepted),
        program_version=__version__,
    )


def _sheet(entry: SheetEntry, folder: Path, remember: Remember) -> Sheet:
    """The sheet of a worksheet; only bytes known by their hash are the same again."""
    if entry.sha256 is None:
        return _open(entry, folder)
    return remember("sheet", (entry.file, entry.page, entry.sha256), lambda: _open(entry, folder))


def _calibrated(
    sheet: Sheet, current: AxisEntry, value: AxisEntry | None, plot: int | None, remember: Remember
) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    return remember("axes", (sheet, current, value, plot), lambda: calibrate(sheet, current, value, plot))


def _open(entry: SheetEntry, folder: Path) -> Sheet:
    """The sheet of a worksheet, refused when it is not the file the worksheet was made for."""
    sheet = open_sheet(folder / entry.file, entry.page)
    if entry.sha256 is not None and entry.sha256 != sheet.sha256:
        raise SheetError(
            f"'{entry.file}' has SHA-256 {sheet.sha256[:12]}..., the worksheet was made for {entry.sha256[:12]}...",
            "The same file as when the worksheet was written",
            "Find that file, or take sha256 out of [sheet] and check the marks again",
        )
    return sheet
