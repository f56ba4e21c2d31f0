"""Where a draft may come from: bytes that were sent, a demo sheet, or what led to a stored device."""

from pathlib import Path, PurePosixPath

from curvelab.errors import InputError, SheetError
from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.paths import shipped
from curvelab.records.worksheet import Worksheet
from curvelab.workbench.draft import Draft
from curvelab.workbench.drafts import Drafts, NewSheet
from curvelab.workbench.failures import Unknown
from curvelab.workbench.names import shown_name
from curvelab.worksheets.read import parse_worksheet, read_worksheet


def from_upload(drafts: Drafts, name: str, data: bytes, *, page: int, plot: int | None) -> Draft:
    """A draft of a sheet's bytes, or of the text of a worksheet without a sheet.

    Raises
    ------
    InputError
        It is neither.
    """
    if name.lower().endswith(".toml"):
        return _typed(drafts, name, data)
    return drafts.begin(NewSheet(name=name, data=data, page=page, plot=plot))


def _typed(drafts: Drafts, name: str, data: bytes) -> Draft:
    shown = shown_name(name)
    try:
        worksheet = parse_worksheet(data.decode("utf-8-sig"), shown)
    except UnicodeDecodeError:
        raise InputError(f"'{shown}' is not UTF-8 text", "", "Save the worksheet as UTF-8") from None
    if worksheet.sheet is not None:
        raise InputError(
            f"'{shown}' is the worksheet of '{worksheet.sheet.file}'",
            "",
            "Open that sheet, then put in the worksheet's text",
        )
    return drafts.begin_typed(name, worksheet)


def demo_sheets() -> list[dict[str, str]]:
    """Name and title of each demo sheet."""
    named = ((place, read_worksheet(place)) for place in _demo_worksheets())
    return [{"name": _demo_name(place), "title": _title(place, each)} for place, each in named]


def from_demo(drafts: Drafts, name: str) -> Draft:
    """A draft of a demo sheet as its worksheet says.

    Raises
    ------
    Unknown
        There is none of that name.
    """
    for place in _demo_worksheets():
        if _demo_name(place) == name:
            worksheet = read_worksheet(place)
            if worksheet.sheet is None:
                return drafts.begin_typed(_title(place, worksheet), worksheet)
            sheet = place.parent / worksheet.sheet.file
            new = NewSheet(name=sheet.name, data=sheet.read_bytes(), page=worksheet.sheet.page)
            return drafts.begin(new, worksheet)
    raise Unknown(f"There is no demo sheet '{shown_name(name)}'", "", "List them")


def _demo_worksheets() -> list[Path]:
    folder = shipped("demo_curves") / "sheets"
    return [*sorted(folder.glob("*.toml")), *sorted(folder.glob("*/*.toml"))]


def _demo_name(place: Path) -> str:
    folder = shipped("demo_curves") / "sheets"
    return place.relative_to(folder).with_suffix("").as_posix()


def _title(place: Path, worksheet: Worksheet) -> str:
    title = worksheet.document.title or place.stem
    ending = Path(worksheet.sheet.file).suffix.removeprefix(".").upper() if worksheet.sheet else "typed"
    return f"{title} ({ending})"


def from_device(drafts: Drafts, library: Library, key: str, number: int) -> Draft:
    """A draft of a stored reading: the sheet's bytes and the worksheet as they were stored.

    Raises
    ------
    NotFoundError
        There is no such device or revision.
    InputError
        It has no such reading, or its sheet was not kept.
    """
    evidence = library.evidence(*split_key(key))
    if not 1 <= number <= len(evidence.readings):
        raise Unknown(f"'{key}' has {len(evidence.readings)} readings, no reading {number}")
    stored = evidence.readings[number - 1]
    said = stored.reading.worksheet
    worksheet = parse_worksheet(said.text) if said.text else said
    if said.sheet is None:
        return drafts.begin_typed(f"{evidence.key}@{evidence.revision}", worksheet)
    if stored.source is None:
        raise SheetError(f"The bytes of '{said.sheet.file}' are not in the library", "", "Open the sheet itself")
    new = NewSheet(name=PurePosixPath(said.sheet.file).name, data=stored.source, page=said.sheet.page)
    return drafts.begin(new, worksheet)
