"""A draft's state as the page and other programs see it."""

from dataclasses import asdict
from functools import lru_cache
from pathlib import Path
from typing import Any

from curvelab.errors import InputError
from curvelab.records.finding import finding_json
from curvelab.records.reading import Reading
from curvelab.sheets.tiles import TILE, Pyramid
from curvelab.workbench.draft import Draft
from curvelab.workbench.failures import error_json
from curvelab.workbench.limits import drawn_limits
from curvelab.workbench.open_entry import OpenEntry
from curvelab.workbench.open_list import open_entries
from curvelab.workbench.said import only_read, tables, tables_read
from curvelab.workbench.thinned import page_reading
from curvelab.workbench.work import Work


def draft_state(draft: Draft, have: int | None = None) -> dict[str, Any]:
    """The state; the reading is left out where the asker has it already."""
    tick, work, history, name = draft.tick, draft.work, draft.history, draft.kept.name
    worksheet, reading = history.worksheet, work.reading
    entries = open_entries(worksheet, reading, work.error)
    data, read_from_sheet = _data(worksheet.text, reading if work.of is worksheet else None)
    return {
        "id": draft.id,
        "version": history.version,
        "tick": tick,
        "name": name,
        "changed": draft.kept.changed,
        "sheet": sheet_state(draft) if draft.kept.sheet else None,
        "work": _work_state(work),
        "worksheet": worksheet.text,
        "data": data,
        "read_from_sheet": read_from_sheet,
        "can_undo": history.can_undo,
        "can_redo": history.can_redo,
        "history": [{"text": step.words, "version": step.version} for step in history.steps],
        "position": history.position,
        "reading_version": work.number,
        "stale": work.of is not worksheet,
        **({} if have == work.number and reading else {"reading": _reading_state(draft)}),
        **(_judged(reading) if reading else {"findings": [], "limits": []}),
        "open": [entry_json(each) for each in entries],
        "can_store": can_store(work, entries) and work.of is worksheet,
    }


# While a reading is under way the page asks often, and most of the state is as it was.


@lru_cache(maxsize=16)
def _data(text: str, reading: Reading | None) -> tuple[dict[str, Any], list[str]]:
    """The worksheet's tables with what was read in them, and the paths of what was only read."""
    said = tables(text)
    data = tables_read(reading) if reading else said
    return data, only_read(said, data)


@lru_cache(maxsize=8)
def _judged(reading: Reading) -> dict[str, Any]:
    """What the checks found, and where the limits lie."""
    return {
        "findings": [finding_json(each) for each in reading.findings],
        "limits": drawn_limits(reading.devices, reading.findings),
    }


@lru_cache(maxsize=4)
def _thinned(reading: Reading) -> dict[str, Any]:
    return page_reading(reading)


def can_store(work: Work, entries: list[OpenEntry]) -> bool:
    """Whether a completed reading has devices, and nothing about it is open."""
    return work.state == "ready" and work.reading is not None and bool(work.reading.devices) and not entries


def storable(draft: Draft) -> tuple[Reading, list[Path]]:
    """The reading of the newest worksheet, with the file of its sheet.

    Raises
    ------
    InputError
        It is not ready, or something about it is open.
    """
    work, worksheet = draft.work, draft.history.worksheet
    entries = open_entries(worksheet, work.reading, work.error)
    if work.reading is None or work.of is not worksheet or not can_store(work, entries):
        left = entries[0].text if entries else "it is being read, or has no device"
        raise InputError(f"'{draft.kept.name}' cannot be stored yet: {left}", "", "Settle what is open, or accept it")
    own = draft.kept.sheet
    return work.reading, [draft.folder / own.file] if own else []


def sheet_state(draft: Draft) -> dict[str, Any]:
    """The sheet's page and the picture of it."""
    own, entry = draft.kept.sheet, draft.history.worksheet.sheet
    assert own is not None
    sheet, pyramid = draft.sheet(), draft.pyramid()
    return {
        "file": own.file,
        "sha256": own.sha256,
        "page": sheet.page,
        "pages": own.pages,
        "plot": _plot(draft.work.reading) or (entry.plot if entry else None) or 1,
        "plots": [{"plot": number, "box": list(box)} for number, box in enumerate(draft.work.plots, start=1)],
        "width": sheet.width,
        "height": sheet.height,
        "unit": sheet.unit,
        "pixels": _pixels_state(pyramid),
    }


def _plot(reading: Reading | None) -> int | None:
    return reading.axes.plot if reading and reading.axes else None


def _pixels_state(pyramid: Pyramid) -> dict[str, Any]:
    """What the tiles show: level 0 in pixels, and the way from its corners to places."""
    rows, columns = pyramid.image.shape[:2]
    map_ = pyramid.pixels.to_place
    across, down = float(map_[0, 0]), float(map_[1, 1])
    return {
        "width": columns,
        "height": rows,
        "per_unit": 1.0 / pyramid.pixels.size_in_places,
        "pixel": [across, down],
        "origin": [float(map_[0, 2]) - across / 2, float(map_[1, 2]) - down / 2],
        "tile": TILE,
        "levels": pyramid.levels,
    }


def _work_state(work: Work) -> dict[str, Any]:
    return {
        "state": work.state,
        "stage": work.stage,
        "fraction": work.fraction,
        "error": work.error and error_json(work.error),
    }


def _reading_state(draft: Draft) -> dict[str, Any] | None:
    reading = draft.work.reading
    return None if reading is None else _thinned(reading)


def entry_json(entry: OpenEntry) -> dict[str, Any]:
    """One entry of the open list."""
    return {"id": entry.id, **asdict(entry)}
