"""A worksheet's text, read strictly: what is not understood is refused with its place, never skipped."""

import re
import tomllib
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

from curvelab.errors import WorksheetError
from curvelab.records.warning import Acceptance
from curvelab.records.worksheet import CurveEntry, DeviceEntry, Document, SheetEntry, Worksheet
from curvelab.worksheets import keys
from curvelab.worksheets.axes import read_axes
from curvelab.worksheets.curves import read_curve
from curvelab.worksheets.devices import read_device
from curvelab.worksheets.fields import Table, nearest
from curvelab.worksheets.paths import check_relative, sheet_path
from curvelab.worksheets.series import device_keys

FORMAT = 1
LARGEST_BYTES = 4 * 1024 * 1024
"""A worksheet is typed by a person; anything larger is another kind of file."""


def read_worksheet(path: str | Path) -> Worksheet:
    """Read the worksheet at ``path``.

    Raises
    ------
    WorksheetError
        The file cannot be read, is no worksheet of this format, or names a sheet outside its folder.
    """
    path = Path(path)
    worksheet = parse_worksheet(_file_text(path), path.name)
    if worksheet.sheet is not None:
        sheet_path(path, worksheet.sheet.file)
    return worksheet


def parse_worksheet(text: str, name: str = "worksheet") -> Worksheet:
    """A worksheet from its text; ``name`` is what messages call it.

    Raises
    ------
    WorksheetError
        The first thing that is wrong, with its place.
    """
    if len(text) > LARGEST_BYTES:
        raise _too_large(name)
    return worksheet_of(_toml(text, name), name, text)


def worksheet_of(entries: Mapping[str, Any], name: str = "worksheet", text: str = "") -> Worksheet:
    """A worksheet from the tables its text holds; errors as for `parse_worksheet`."""
    _check_format(entries, name)
    top = Table(entries, name, keys.TOP)
    sheet = _sheet(top, name)
    current, value = read_axes(top, name)
    devices = _devices(top, name)
    if sheet is None and any(axis.marks for axis in (current, value) if axis):
        raise WorksheetError(f"{name}, [axes]: there are marks but no [sheet]", "", "Name it: [sheet] file = '...'")
    curves = tuple(
        read_curve(table, current, value, has_sheet=sheet is not None)
        for table in top.tables("curves", keys.CURVE, f"{name}, [[curves]]")
    )
    _check_references(curves, devices, name)
    return Worksheet(
        document=_document(top, name),
        sheet=sheet,
        current=current,
        value=value,
        curves=curves,
        devices=devices,
        accepted=tuple(_acceptance(table) for table in top.tables("accepted", keys.ACCEPTED, f"{name}, [[accepted]]")),
        text=text,
    )


def _too_large(name: str) -> WorksheetError:
    return WorksheetError(f"{name} is larger than {LARGEST_BYTES // 1024**2} MB", "", "Give a worksheet, a TOML text")


def _file_text(path: Path) -> str:
    try:
        with path.open("rb") as file:
            content = file.read(LARGEST_BYTES + 1)
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        raise WorksheetError(f"Worksheet '{path}' cannot be read: {reason}", "", "Check its name and folder") from error
    if len(content) > LARGEST_BYTES:
        raise _too_large(path.name)
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise WorksheetError(
            f"{path.name} is not UTF-8 text (byte {error.start + 1})", "", "Save the worksheet as UTF-8"
        ) from error


def _toml(text: str, name: str) -> Mapping[str, Any]:
    try:
        return tomllib.loads(text)
    except RecursionError as error:
        raise WorksheetError(f"{name} is nested too deeply to be a worksheet") from error
    except ValueError as error:
        # The parser writes its place at the end of its message, and nowhere else before Python 3.14.
        message = str(error).splitlines()[0]
        found = re.fullmatch(r"(?P<what>.*) \(at (?P<where>line \d+, column \d+|end of document)\)", message)
        where, what = (found["where"], found["what"]) if found else ("its text", message)
        if where == "end of document":
            where = f"line {text.count(chr(10)) + 1}, end"
        raise WorksheetError(f"{name}, {where}: not valid TOML: {what}", "", "Correct it there") from error


def _check_format(entries: Mapping[str, Any], name: str) -> None:
    """Before anything else, since the keys of a newer format are not known here."""
    found = entries.get("format")
    if isinstance(found, int) and not isinstance(found, bool) and found > FORMAT:
        raise WorksheetError(
            f"{name}: format = {found} is newer than this program",
            f"It reads format = {FORMAT}",
            "Update curvelab, or save the worksheet in the older format",
        )
    if found != FORMAT or isinstance(found, bool | float):
        shown = "the worksheet has no format" if found is None else f"format = {found!r} is not valid"
        raise WorksheetError(f"{name}: {shown}", f"Expected format = {FORMAT} on its first line")


def _document(top: Table, name: str) -> Document:
    if "document" not in top:
        return Document()
    table = Table(top.raw("document"), f"{name}, [document]", keys.DOCUMENT)
    return Document(**{key: table.text(key) or "" for key in keys.DOCUMENT})


def _sheet(top: Table, name: str) -> SheetEntry | None:
    if "sheet" not in top:
        return None
    table = Table(top.raw("sheet"), f"{name}, [sheet]", keys.SHEET)
    file = table.needed_text("file")
    check_relative(file, table.place)
    sha256 = table.pattern("sha256", "[0-9a-fA-F]{64}", "Expected the 64 hexadecimal digits of the file's SHA-256")
    return SheetEntry(
        file=file.replace("\\", "/"),
        page=table.count("page") or 1,
        plot=table.count("plot"),
        sha256=sha256.lower() if sha256 else None,
    )


def _devices(top: Table, name: str) -> tuple[DeviceEntry, ...]:
    entries: list[DeviceEntry] = []
    taken: set[str] = set()
    for table in top.tables("devices", keys.DEVICE, f"{name}, [[devices]]"):
        entry = read_device(table)
        for key in device_keys(entry):
            if key in taken:
                raise WorksheetError(f"{table.place}: the key '{key}' is used twice", "", "Give each device its own")
            taken.add(key)
        entries.append(entry)
    return tuple(entries)


def _check_references(curves: Sequence[CurveEntry], devices: Sequence[DeviceEntry], name: str) -> None:
    known = [entry.nameplate.key for entry in devices] + [
        key for entry in devices if entry.ratings for key in device_keys(entry)
    ]
    for index, curve in enumerate(curves, start=1):
        for key in curve.devices:
            if key not in known:
                fix = nearest(key, known) if known else "Add it: [[devices]] key = '...', kind = '...'"
                raise WorksheetError(f"{name}, [[curves]] {index}: '{key}' is the key of no [[devices]] entry", fix)


def _acceptance(table: Table) -> Acceptance:
    return Acceptance(
        code=table.needed_text("code"),
        place=table.pair("place", "a place on the sheet: place = [x, y]"),
        reason=table.text("reason") or "",
        name=table.text("name") or "",
    )
