"""The rules of the house: which way imports run, and which library stays in which room."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[1] / "curvelab"

BENEATH = {"errors", "units", "paths", "records"}
FLOW = ("sheets", "lettering", "axes", "trace", "fit", "devices", "standards", "library")
FACES = {"plots", "reports", "cli", "workbench"}

MAY_IMPORT: dict[str, set[str]] = {
    "errors": set(),
    "units": {"errors"},
    "paths": {"errors"},
    "records": {"errors", "units"},
    "worksheets": BENEATH,
    **{room: BENEATH | set(FLOW[:place]) for place, room in enumerate(FLOW)},
    "calculators": BENEATH | {"devices"},
    "reading": BENEATH | set(FLOW) - {"library"} | {"worksheets"},
    "plots": BENEATH | {"devices"},
    "reports": BENEATH | {"devices", "standards", "calculators", "plots"},
    "workbench": BENEATH | set(FLOW) | {"worksheets", "calculators", "reading", "plots", "reports"},
    "cli": BENEATH | set(FLOW) | {"worksheets", "calculators", "reading", "plots", "reports", "workbench"},
}
"""Room -> the other rooms it may import. The library stores records and knows neither images nor fits."""
MAY_IMPORT["library"] = BENEATH | {"devices", "standards"}
MAY_IMPORT["fit"] = BENEATH
MAY_IMPORT["devices"] = BENEATH
MAY_IMPORT["standards"] = BENEATH | {"devices"}

ONLY_IN: dict[str, set[str]] = {
    "cv2": {"sheets", "lettering", "axes", "trace"},
    "scipy": {"axes", "trace", "fit"},
    "sqlite3": {"library"},
    "sqlite_utils": {"library"},
    "matplotlib": {"plots", "reports"},
    "PIL": {"sheets"},
    "pypdfium2": {"sheets"},
    "click": {"cli"},
    "threadpoolctl": {"reading"},
    "distributed": {"reading"},
    "starlette": {"workbench"},
    "uvicorn": {"workbench"},
}


def room_of(path: Path) -> str:
    first = path.relative_to(PACKAGE).parts[0]
    return first.removesuffix(".py")


def imported_names(source: str) -> Iterator[tuple[str, int]]:
    """Every module imported, with its number of leading dots, inside functions too."""
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Import):
            yield from ((alias.name, 0) for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            yield node.module or "", node.level


def breaches(room: str, source: str) -> list[str]:
    found = []
    for name, dots in imported_names(source):
        top, *rest = name.split(".")
        if dots:
            found.append(f"{room} uses a relative import of '{name}'")
        elif top == "curvelab" and rest and rest[0] != room and rest[0] not in MAY_IMPORT[room]:
            found.append(f"{room} may not import {rest[0]}")
        elif top in ONLY_IN and room not in ONLY_IN[top]:
            found.append(f"{room} may not import {top}")
    return found


SOURCES = sorted(path for path in PACKAGE.rglob("*.py") if path.parent != PACKAGE or not path.name.startswith("__"))


@pytest.mark.parametrize("path", SOURCES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_run_one_way(path: Path) -> None:
    assert breaches(room_of(path), path.read_text(encoding="utf-8")) == []


@pytest.mark.parametrize(
    ("room", "line"),
    [
        ("fit", "from curvelab.library.library import open_library"),
        ("fit", "def f():\n    import curvelab.cli.main"),
        ("workbench", "import sqlite3"),
        ("axes", "from .calibrate import calibrate"),
        ("records", "from curvelab.devices.device import Device"),
    ],
)
def test_a_planted_breach_is_found(room: str, line: str) -> None:
    assert breaches(room, line)


def test_every_room_is_in_the_table() -> None:
    assert {room_of(path) for path in SOURCES} <= set(MAY_IMPORT)


def test_every_room_says_what_it_is_for() -> None:
    for init in PACKAGE.rglob("__init__.py"):
        assert ast.get_docstring(ast.parse(init.read_text(encoding="utf-8"))), f"{init} has no docstring"
