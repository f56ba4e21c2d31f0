"""The tables of installation facts: every row says where it is from, and a row that does not is refused."""

import tomllib
from pathlib import Path

import pytest

from curvelab.calculators import facts
from curvelab.calculators.facts import lies_in, rows_of
from curvelab.errors import StandardError
from curvelab.paths import shipped

FILES = sorted((shipped("database") / facts.FOLDER).glob("*.toml"))


def tables_of(file: Path) -> list[str]:
    content = tomllib.loads(file.read_text(encoding="utf-8"))
    return [name for name, value in content.items() if isinstance(value, list)]


@pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)
def test_every_row_has_a_clause_a_source_and_a_confidence(file):
    tables = tables_of(file)
    assert tables
    for table in tables:
        for row in rows_of(file.stem, table):
            assert row["origin"].clause
            assert len(row["origin"].source) > 10


def test_the_readme_names_every_file():
    readme = (shipped("database") / facts.FOLDER / "README.md").read_text(encoding="utf-8")
    assert all(f"`{file.name}`" in readme for file in FILES)


@pytest.mark.parametrize("left_out", ["clause", "source", "confidence"])
def test_a_row_without_its_origin_is_refused(left_out, tmp_path, monkeypatch):
    row = {"clause": "411", "source": "copy", "confidence": "published"}
    row.pop(left_out)
    (tmp_path / facts.FOLDER).mkdir()
    lines = "\n".join(f'{key} = "{value}"' for key, value in row.items())
    file = tmp_path / facts.FOLDER / f"broken-{left_out}.toml"
    file.write_text(f'[sources]\ncopy = "A copy"\n[[times]]\n{lines}\n', encoding="utf-8")
    monkeypatch.setattr(facts, "shipped", lambda _: tmp_path)
    with pytest.raises(StandardError, match=f"broken-{left_out}"):
        rows_of(file.stem, "times")


def test_required_times_cover_every_voltage_once():
    for system in ("TN", "TT"):
        rows = [
            row for row in rows_of("disconnection", "times") if (row["system"], row["circuit"]) == (system, "final")
        ]
        for voltage in (51, 120, 121, 230, 231, 400, 401, 1000):
            assert sum(lies_in(voltage, row, "v") for row in rows) == 1
        assert not any(lies_in(voltage, row, "v") for voltage in (50, 1001) for row in rows)


def test_spans_of_ratings_are_open_and_closed_as_they_say():
    row = {"above_a": 4, "below_a": 16}
    assert [lies_in(value, row, "a") for value in (4, 4.1, 15.9, 16)] == [False, True, True, False]
    assert [lies_in(value, {"from_a": 16, "up_to_a": 63}, "a") for value in (15.9, 16, 63, 63.1)] == [
        False,
        True,
        True,
        False,
    ]
