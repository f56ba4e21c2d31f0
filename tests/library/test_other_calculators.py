"""What other programs see: the examples of database/README.md run as printed; the views say what the records say."""

import csv
import math
import os
import re
import shutil
import sqlite3
import subprocess
from dataclasses import replace
from pathlib import Path

import formulas
import numpy as np
import pytest

from curvelab.cli.main import run
from curvelab.library.library import open_library
from curvelab.paths import shipped
from curvelab.records.curve import Conditions, Part, SheetKey
from curvelab.records.device import Breaking, Setting
from tests.library.devices import breaker, curve


def example(language: str) -> str:
    readme = (shipped("database") / "README.md").read_text(encoding="utf-8")
    (code,) = re.findall(rf"```{language}\n(.*?)```", readme, flags=re.DOTALL)
    return code


@pytest.fixture
def firm(tmp_path: Path) -> Path:
    """A breaker whose slow edge at 5 In (160 A) lies half-way, in log-log, between 100 s and 1 s."""
    path = tmp_path / "firm.sqlite"
    points = (Part(**columns([2.5, 10.0, 10.0, 20.0], [100.0, 1.0, 0.01, 0.01])),)
    slow = curve(at={"ir": 0.8}, leaves_top=True, conditions=Conditions(start="cold", voltage_v=230.0), sheet=SHEET)
    fast = curve("fast", time_s=20.0)
    with open_library(path) as library:
        library.store(
            breaker(
                "riverside-b32",
                replace(slow, parts=points),
                fast,
                curve(quantity="let_through", base="A"),
                rated_current_a=32.0,
                breaking=(Breaking(quantity="Icn", value_a=6000.0, voltage_v=230.0, supply="ac"),),
                settings=(
                    Setting(name="ir", from_value=0.4, to_value=1.0, base="xIn"),
                    Setting(name="tr", steps=(2.0, 4.0), at="6 Ir", can_be_off=True),
                ),
            )
        )
    return path


SHEET = SheetKey(sha256="a" * 64, page=2, plot=1, file="sheet.pdf")


def columns(current: list[float], value: list[float]) -> dict[str, object]:
    count = len(current)
    return {
        "current": np.array(current),
        "value": np.array(value),
        "sd_current": np.full(count, 0.01),
        "sd_value": np.full(count, 0.02),
        "sd_common": np.full(count, math.nan),
    }


def test_the_sql_example_finds_the_two_points(firm: Path) -> None:
    database = sqlite3.connect(firm)
    rows = database.execute(example("sql")).fetchall()
    database.close()
    assert rows == [(80.0, 100.0, 320.0, 1.0)]
    low_a, low_s, high_a, high_s = rows[0]
    share = math.log(160 / low_a) / math.log(high_a / low_a)
    assert low_s * (high_s / low_s) ** share == pytest.approx(10.0, rel=1e-12)


def test_the_python_example_agrees_with_the_program(firm: Path) -> None:
    names: dict[str, object] = {}
    exec(example("python"), names)
    slow_time_s = names["slow_time_s"]
    assert slow_time_s(firm, "riverside-b32", 160.0) == pytest.approx(10.0, rel=1e-12)
    assert slow_time_s(firm, "riverside-b32", 320.0) == 1.0
    assert slow_time_s(firm, "riverside-b32", 79.0) is None
    assert slow_time_s(firm, "riverside-b32", 641.0) is None


def test_the_python_example_never_crosses_a_gap(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    first, second = (Part(**columns(*points)) for points in (([1.5, 2.0], [90.0, 80.0]), ([4.0, 5.0], [9.0, 8.0])))
    line = replace(curve(), parts=(first, second))
    with open_library(path) as library:
        library.store(breaker("gap", line, rated_current_a=10.0))
    names: dict[str, object] = {}
    exec(example("python"), names)
    assert names["slow_time_s"](path, "gap", 30.0) is None
    assert names["slow_time_s"](path, "gap", 40.0) == 9.0


TABLE_S = 10.0
"""At 160 A, half-way in log-log between 80 A, 100 s and 320 A, 1 s."""


def exported_points(firm: Path, folder: Path) -> Path:
    target = folder / "points.csv"
    assert run(["library", "export", str(target), "riverside-b32", "--library", str(firm)]) == 0
    return target


def test_the_spreadsheet_example_gives_the_time(firm: Path, tmp_path: Path) -> None:
    """Computed by an independent implementation of spreadsheet formulas (the library ``formulas``)."""
    with exported_points(firm, tmp_path).open(encoding="utf-8", newline="") as file:
        rows = [row for row in csv.DictReader(file) if row["edge"] == "slow" and row["quantity"] == "time"]
    cells = dict(line.split(": ", 1) for line in example("excel").splitlines())
    empty = [[np.nan]] * (98 - len(rows))
    currents = np.array([[float(row["current"])] for row in rows] + empty, dtype=object)
    times = np.array([[float(row["value"])] for row in rows] + empty, dtype=object)
    currents[len(rows) :], times[len(rows) :] = "", ""
    given = {"A2:A99": currents, "B2:B99": times, "D1": 5.0}
    for cell in ("E1", "F1"):
        formula = formulas.Parser().ast(cells[cell])[1].compile()
        given[cell] = float(np.ravel(formula(*(given[name] for name in formula.inputs)))[0])
    assert given["F1"] == pytest.approx(TABLE_S, rel=1e-9)


@pytest.mark.skipif(shutil.which("awk") is None, reason="no awk on this system")
@pytest.mark.parametrize(("asked", "answers"), [("5", [TABLE_S]), ("10", [1.0]), ("2.4", []), ("21", [])])
def test_the_awk_example_gives_the_time(firm: Path, tmp_path: Path, asked: str, answers: list[float]) -> None:
    script = tmp_path / "slow.awk"
    script.write_text(example("awk"), encoding="utf-8")
    points = exported_points(firm, tmp_path)
    done = subprocess.run(
        ["awk", "-v", "edge=slow", "-v", f"asked={asked}", "-f", str(script), str(points)],
        capture_output=True,
        text=True,
        check=True,
        env={"LC_ALL": "C", "PATH": os.environ["PATH"]},
    )
    assert [float(line) for line in done.stdout.split()] == answers
    assert done.stderr == ""


def rows_of(path: Path, view: str, wanted: str) -> list[tuple[object, ...]]:
    database = sqlite3.connect(path)
    rows = database.execute(f"SELECT {wanted} FROM {view} ORDER BY 1, 2").fetchall()
    database.close()
    return rows


def test_the_views_say_what_the_records_say(firm: Path) -> None:
    assert rows_of(firm, "device_index", "device_key, revision, is_current, state, kind, rated_current_a, maker") == [
        ("riverside-b32", 1, 1, "draft", "mcb", 32.0, None)
    ]
    assert rows_of(firm, "device_settings", "name, step_value, base, from_value, to_value, can_be_off, at_current") == [
        ("ir", None, "xIn", 0.4, 1.0, 0, None),
        ("tr", 2.0, None, None, None, 1, "6 Ir"),
        ("tr", 4.0, None, None, None, 1, "6 Ir"),
    ]
    assert rows_of(firm, "device_breaking", "quantity, value_a, voltage_v, supply, duration_s") == [
        ("Icn", 6000.0, 230.0, "ac", None)
    ]
    assert rows_of(firm, "curve_conditions", "start, voltage_v, settings, leaves_top, basis") == [
        (None, None, "{}", 0, "sheet"),
        (None, None, "{}", 0, "sheet"),
        ("cold", 230.0, '{"ir": 0.8}', 1, "sheet"),
    ]
    slow = "trip_points WHERE edge = 'slow'"
    assert rows_of(firm, slow, "part, seq, current, time_s, sd_current, sd_time, sd_common, base, sheet_id") == [
        (1, 1, 2.5, 100.0, 0.01, 0.02, None, "xIn", 1),
        (1, 2, 10.0, 1.0, 0.01, 0.02, None, "xIn", 1),
        (1, 3, 10.0, 0.01, 0.01, 0.02, None, "xIn", 1),
        (1, 4, 20.0, 0.01, 0.01, 0.02, None, "xIn", 1),
    ]
    assert rows_of(firm, "let_through_points", "quantity, seq, current, value, base") == [
        ("let_through", 1, 1.5, 1000.0, "A"),
        ("let_through", 2, 3.0, 60.0, "A"),
        ("let_through", 3, 5.0, 0.01, "A"),
    ]


def test_one_device_is_found_by_its_key_without_reading_the_whole_file(firm: Path) -> None:
    database = sqlite3.connect(firm)
    for view in ("device_index", "trip_points", "let_through_points", "curve_conditions", "device_breaking"):
        plan = database.execute(
            f"EXPLAIN QUERY PLAN SELECT * FROM {view} WHERE device_key = 'x' AND revision = 1"
        ).fetchall()
        steps = [row[3] for row in plan]
        assert steps
        assert not [step for step in steps if step.startswith("SCAN")], view
    database.close()
