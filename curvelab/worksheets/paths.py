"""Where a worksheet's sheet lies: relative to the worksheet, and nowhere outside its folder tree."""

from pathlib import Path, PurePosixPath, PureWindowsPath

from curvelab.errors import WorksheetError

LONGEST = 1024


def check_relative(file: str, place: str) -> None:
    """Refuse a written file name that leaves the worksheet's folder, on whatever system it is read.

    Raises
    ------
    WorksheetError
        It is absolute, names a drive or a server, climbs with ``..``, or is no file name at all.
    """
    windows, posix = PureWindowsPath(file), PurePosixPath(file)
    climbs = ".." in windows.parts or ".." in posix.parts
    anchored = bool(windows.anchor) or posix.is_absolute() or file.startswith("~")
    # A colon would open another data stream of the file on Windows.
    unusable = not windows.name or ":" in file or len(file) > LONGEST or any(ord(sign) < 32 for sign in file)
    if climbs or anchored or unusable:
        shown = file if len(file) <= 60 else f"{file[:60]}..."
        raise WorksheetError(
            f"{place}: file = '{shown}' is not a file beside the worksheet",
            "Expected a path relative to the worksheet, inside its folder",
            "Put the sheet into the worksheet's folder",
        )


def sheet_path(worksheet: Path, file: str) -> Path:
    """The sheet's path on this machine; links are followed and must not lead out of the worksheet's folder.

    Parameters
    ----------
    worksheet : Path
        The worksheet's own path.
    file : str
        ``[sheet] file`` as written.

    Raises
    ------
    WorksheetError
        The path, or what a link in it points to, lies outside the worksheet's folder.
    """
    place = f"{worksheet.name}, [sheet]"
    check_relative(file, place)
    folder = worksheet.resolve().parent
    target = folder / file
    try:
        resolved = target.resolve()
    except (OSError, RuntimeError) as error:
        raise WorksheetError(f"{place}: file = '{file}' cannot be followed ({error})") from error
    if not resolved.is_relative_to(folder):
        raise WorksheetError(
            f"{place}: file = '{file}' leads outside the worksheet's folder, to {resolved}",
            "",
            "Copy the sheet into the worksheet's folder",
        )
    return target
