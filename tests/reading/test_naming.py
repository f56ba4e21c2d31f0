"""Lines named by the words of their sheet; what is not printed stays open and is warned of."""

from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from curvelab.axes.calibrate import calibrate
from curvelab.reading.complete import completed
from curvelab.reading.digitise import digitise
from curvelab.reading.find import Found, find_curves
from curvelab.reading.follow import open_edges
from curvelab.reading.name_order import monotone_match
from curvelab.reading.phrases import phrases_of
from curvelab.reading.remember import anew
from curvelab.reading.respell import respelt
from curvelab.reading.said import said_by
from curvelab.reading.watch import unwatched
from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet, Word
from curvelab.records.worksheet import AxisEntry, DeviceEntry
from curvelab.sheets.open import open_sheet
from curvelab.worksheets.read import read_worksheet
from curvelab.worksheets.write import worksheet_text
from tests.drawn import DrawnSheet, worded_sheet


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("16 A", {"ratings": (16.0,)}),
        ("6, 10, 16 and 20 A", {"ratings": (6.0, 10.0, 16.0, 20.0)}),
        ("6 A to 63 A", {"rating_range": (6.0, 63.0), "ratings": ()}),
        ("63", {"number": 63.0}),
        ("B16", {"characteristic": "B", "ratings": (16.0,)}),
        ("Types C and D, limits", {"characteristic": None, "characteristics": ("C", "D")}),
        ("MCB type C", {"kind": "mcb", "characteristic": "C"}),
        ("gG fuse-links", {"kind": "fuse", "characteristic": "gG"}),
        ("Overcurrent relay, IEC very inverse", {"kind": "relay", "characteristic": "IEC very inverse"}),
        ("RCD 30 mA, general type", {"kind": "rcd", "residual_current_a": 0.03, "residual_delay": "general"}),
        ("pre-arcing, min.", {"edge": "fast", "meaning": "pre_arcing"}),
        ("Operating time, max.", {"edge": "slow", "meaning": "operating"}),
        ("minimum and maximum", {"edge": None}),
        ("tr = 2 s", {"settings": {"tr": 2.0}, "number": None}),
        ("TMS 0.3", {"settings": {"tms": 0.3}}),
        ("from cold", {"start": "cold"}),
        ("hot or cold", {"start": None}),
        ("IEC 60898-1", {"standard": "IEC 60898-1", "ratings": ()}),
        ("400 V a.c.", {"ratings": ()}),
    ],
)
def test_what_words_say(text: str, said: dict[str, Any]) -> None:
    found = said_by(text)
    assert {name: getattr(found, name) for name in said} == said


@pytest.mark.parametrize(
    ("misread", "meant"),
    [("mlnlmum", "minimum"), ("0perating", "operating"), ("fuse-Iinks", "fuse-links"), ("Quolvane", "Quolvane")],
)
def test_long_words_are_put_right(misread: str, meant: str) -> None:
    assert respelt(misread).lower() == meant.lower()


def test_values_side_by_side_are_labels_of_their_own() -> None:
    word = Word(text="50 A 100 A", box=(0.0, 0.0, 100.0, 8.0), height=8.0)
    first, second = sorted(phrases_of([word]), key=lambda one: one.box[0])
    assert (first.text, second.text) == ("50 A", "100 A")
    assert first.box[2] < second.box[0]


def test_labels_keep_the_order_of_their_lines() -> None:
    # the middle label stands nearest to the first line, which is the first label's
    gains = np.array([[5.0, 1.0, -np.inf], [4.0, 3.5, 2.0], [-np.inf, 2.0, 5.0]])
    assert monotone_match(gains) == {0: 0, 1: 1, 2: 2}


def _named(sheet: DrawnSheet, folder: Path, devices: tuple[DeviceEntry, ...] = ()) -> tuple[Sheet, Axes, Found]:
    sheet.written(folder)
    opened = open_sheet(folder / sheet.name, 1)
    axes, _ = calibrate(opened, AxisEntry(quantity="current"), None)
    return opened, axes, find_curves(opened, axes, devices, unwatched, anew)


@pytest.mark.parametrize("seed", [40001, 40002, 40003, 40004, 40006, 40008])
def test_words_of_a_vector_page_name_every_line(tmp_path: Path, seed: int) -> None:
    sheet = worded_sheet(seed, "vector")
    _, axes, found = _named(sheet, tmp_path)
    plates = {entry.nameplate.key: entry.nameplate for entry in found.devices}
    given = {
        entry.nameplate.key: entry.nameplate for entry in read_worksheet(tmp_path / f"{sheet.name[:-4]}.toml").devices
    }
    plot = sheet.truth.plots[0]
    assert len(found.followed) == len(plot.curves)
    assert open_edges(found.followed) == ()
    for each in found.followed:
        middle = each.trace.places[len(each.trace.places) // 2]
        truth = min(
            plot.curves, key=lambda curve: np.hypot(*(curve.places - middle).T).min() if _has(curve, middle) else 1e9
        )
        design = truth.design
        own, right = (
            plates[each.entry.devices[0]],
            given[design.devices[0]] if design.devices else next(iter(given.values())),
        )
        assert each.entry.edge == design.edge
        assert dict(each.entry.at) == dict(design.at)
        assert (own.kind, own.characteristic, own.rated_current_a) == (
            right.kind, right.characteristic, right.rated_current_a,
        )  # fmt: skip
    assert axes.automatic


def _has(curve: Any, place: np.ndarray) -> bool:
    """Whether a place lies on a line, its vertices joined."""
    steps = np.diff(curve.places, axis=0)
    part = ((place - curve.places[:-1]) * steps).sum(axis=1) / np.maximum((steps**2).sum(axis=1), 1e-12)
    feet = curve.places[:-1] + np.clip(part, 0, 1)[:, None] * steps
    return bool(np.hypot(*(feet - place).T).min() < 0.2)


def test_lines_without_words_are_of_no_device_and_warned_of(tmp_path: Path) -> None:
    sheet = worded_sheet(40009, "vector", "fuse-family")
    sheet.written(tmp_path)
    opened = open_sheet(tmp_path / sheet.name, 1)
    axes, _ = calibrate(opened, AxisEntry(quantity="current"), None)
    left, top, right, bottom = axes.frame
    silent = replace(
        opened,
        words=tuple(w for w in opened.words if not (left < w.box[0] < right and top < w.box[1] < bottom)),
    )
    found = find_curves(silent, axes, (), unwatched, anew)
    assert len(found.followed) >= 8
    assert {each.entry.edge for each in found.followed} == {None}
    assert {each.entry.devices for each in found.followed} == {()}
    assert len(open_edges(found.followed)) == len(found.followed)


def test_the_complete_worksheet_repeats_the_reading(tmp_path: Path) -> None:
    sheet = worded_sheet(40002, "vector", "one-breaker")
    sheet.written(tmp_path)
    reading = digitise(tmp_path / sheet.name)
    (tmp_path / "complete.toml").write_text(worksheet_text(completed(reading)), encoding="utf-8")
    again = digitise(tmp_path / "complete.toml")
    assert [each.curve.edge for each in again.curves] == [each.curve.edge for each in reading.curves] != []
    assert [each.devices for each in again.curves] == [each.devices for each in reading.curves]
    for one, other in zip(reading.curves, again.curves, strict=True):
        assert one.trace is not None
        assert other.trace is not None
        assert np.array_equal(one.trace.places, other.trace.places)
        assert np.allclose(one.current, other.current, rtol=1e-9)
