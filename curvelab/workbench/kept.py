"""A draft on disk: its sheet, its worksheet for the command line, and all its steps; each write is whole or not at all.

<id>/draft.json        what it is called, and which steps there are; written last, so it says what holds
<id>/steps/12.toml     the worksheet of step 12
<id>/worksheet.toml    the worksheet that holds
<id>/NAME.png          the sheet, where there is one
"""

import json
import os
import shutil
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from curvelab.errors import LibraryError
from curvelab.workbench.history import History, Step
from curvelab.worksheets.read import parse_worksheet

STEPS = "steps"
RECORD = "draft.json"
WORKSHEET = "worksheet.toml"
FORMAT = 1


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetFile:
    """The file of a draft's sheet."""

    file: str
    sha256: str
    pages: int


@dataclass(frozen=True, kw_only=True, slots=True)
class Kept:
    """What a draft's folder holds beside the sheet."""

    name: str
    changed: str
    sheet: SheetFile | None
    history: History


def write(folder: Path, kept: Kept, before: Kept | None = None) -> None:
    """Write what is not there yet.

    Parameters
    ----------
    folder : Path
    kept : Kept
        What is to hold.
    before : Kept or None
        What holds. Steps of its own are there; a worksheet of any other step was left by a crash.

    Raises
    ------
    LibraryError
        The folder cannot be written.
    """
    try:
        (folder / STEPS).mkdir(parents=True, exist_ok=True)
        known = {step.version for step in before.history.steps} if before else set()
        for step in kept.history.steps:
            if step.version not in known:
                write_whole(folder / STEPS / f"{step.version}.toml", step.worksheet.text.encode())
        write_whole(folder / RECORD, json.dumps(_json_of(kept), ensure_ascii=False, indent=1).encode())
        write_whole(folder / WORKSHEET, kept.history.worksheet.text.encode())
        _clean(folder, kept.history)
    except OSError as error:
        raise LibraryError(
            f"The draft in {folder} cannot be written: {error.strerror}", "", "Free some space, or allow writing there"
        ) from error


def read(folder: Path) -> Kept:
    """What was written last.

    Raises
    ------
    LibraryError
        It is not there, or not as it was written.
    """
    told = _record(folder)
    try:
        steps = tuple(_step(folder, each) for each in told["steps"])
        sheet = told["sheet"] and SheetFile(**told["sheet"])
        history = History(version=int(told["version"]), position=int(told["position"]), steps=steps)
        return Kept(name=told["name"], changed=told["changed"], sheet=sheet, history=history)
    except (OSError, ValueError, KeyError, TypeError) as error:
        raise _unreadable(folder, error) from error


def version_of(folder: Path) -> int:
    """The version that holds on the disk, perhaps written by another process; errors as for `read`."""
    return int(_record(folder)["version"])


def _record(folder: Path) -> dict[str, Any]:
    try:
        told: dict[str, Any] = json.loads((folder / RECORD).read_bytes())
        int(told["version"])
    except (OSError, ValueError, KeyError, TypeError) as error:
        raise _unreadable(folder, error) from error
    return told


def _unreadable(folder: Path, error: Exception) -> LibraryError:
    return LibraryError(f"The draft in {folder} cannot be read: {error}", "", "Read its sheet again")


def _step(folder: Path, told: dict[str, Any]) -> Step:
    text = (folder / STEPS / f"{int(told['version'])}.toml").read_text(encoding="utf-8")
    return Step(version=int(told["version"]), words=told["words"], worksheet=parse_worksheet(text))


def _json_of(kept: Kept) -> dict[str, Any]:
    history, sheet = kept.history, kept.sheet
    return {
        "format": FORMAT,
        "name": kept.name,
        "changed": kept.changed,
        "sheet": sheet and {name: getattr(sheet, name) for name in SheetFile.__slots__},
        "version": history.version,
        "position": history.position,
        "steps": [{"version": step.version, "words": step.words} for step in history.steps],
    }


def _clean(folder: Path, history: History) -> None:
    """Take away worksheets of steps that nobody can return to."""
    named = {f"{step.version}.toml" for step in history.steps}
    for place in (folder / STEPS).iterdir():
        if place.name not in named:
            place.unlink(missing_ok=True)


def write_whole(place: Path, content: bytes) -> None:
    """Write a file so that after a crash it holds all of the old or all of the new content."""
    part = place.with_name(place.name + ".part")
    with part.open("wb") as file:
        file.write(content)
        file.flush()
        os.fsync(file.fileno())
    os.replace(part, place)


def remove(folder: Path) -> None:
    """Take a folder away with all that is in it."""
    with suppress(OSError):
        shutil.rmtree(folder)
