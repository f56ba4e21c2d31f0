"""A stored reading made whole again, so that it can be drawn over its sheet."""

from dataclasses import replace
from pathlib import Path, PurePosixPath

from curvelab.errors import InputError, SheetError
from curvelab.records.evidence import Evidence, StoredReading
from curvelab.records.reading import Reading
from curvelab.records.worksheet import Worksheet
from curvelab.sheets.open import open_sheet
from curvelab.worksheets.read import parse_worksheet


def with_sheets(evidence: Evidence, folder: Path) -> Evidence:
    """The evidence with every reading made whole whose sheet was kept; ``folder`` as for `restored`."""
    readings = []
    for number, stored in enumerate(evidence.readings):
        place = folder / str(number)
        place.mkdir()
        readings.append(replace(stored, reading=restored(stored, place)) if stored.source is not None else stored)
    return replace(evidence, readings=tuple(readings))


def restored(stored: StoredReading, folder: Path) -> Reading:
    """The reading with its worksheet in full and its sheet opened from the bytes kept, ready to be drawn.

    Parameters
    ----------
    folder : Path
        An empty folder; the sheet's file is written into it and must stay while the reading is used.

    Raises
    ------
    InputError
        The sheet's bytes were not kept.
    """
    worksheet = laid_out(stored, folder)
    if worksheet.sheet is None:
        return replace(stored.reading, worksheet=worksheet)
    sheet = open_sheet(folder / worksheet.sheet.file, worksheet.sheet.page)
    return replace(stored.reading, worksheet=worksheet, sheet=sheet)


def laid_out(stored: StoredReading, folder: Path) -> Worksheet:
    """The worksheet of a stored reading, with its sheet's file where the worksheet names it."""
    reading = stored.reading
    text, entry = reading.worksheet.text, reading.worksheet.sheet
    if entry is None:
        return parse_worksheet(text) if text else reading.worksheet
    worksheet = parse_worksheet(text) if text else Worksheet(sheet=replace(entry, file=PurePosixPath(entry.file).name))
    if worksheet.sheet is None:
        raise InputError("The stored worksheet names no sheet, its reading has one")
    if stored.source is None:
        raise SheetError(
            f"The bytes of '{entry.file}' are not in the library", "", "Store the worksheet again beside its sheet"
        )
    place = folder / worksheet.sheet.file
    if not place.resolve().is_relative_to(folder.resolve()):
        raise SheetError(f"'{worksheet.sheet.file}' lies outside the folder of its worksheet")
    place.parent.mkdir(parents=True, exist_ok=True)
    place.write_bytes(stored.source)
    return worksheet
