"""The schema, its migrations and its views: complete, documented, all or nothing."""

import csv
import sqlite3
from pathlib import Path

import pytest
from sqlite_utils import Database

from curvelab.library import connect, migrate
from curvelab.library.library import open_library
from curvelab.library.verify import schema_of
from curvelab.paths import shipped
from tests.library.devices import breaker, curve

CONTRACT = {
    "device_index": "device_key revision is_current state kind characteristic standard maker series rated_current_a"
    " rated_residual_current_a residual_waveform residual_delay rated_voltage_v poles",
    "trip_points": "device_key revision curve_id element edge meaning part seq base current time_s time_setting"
    " time_setting_at sd_current sd_time sd_common sheet_id",
    "let_through_points": "device_key revision curve_id quantity edge voltage_v part seq base current value sd_current"
    " sd_value sd_common sheet_id",
    "curve_conditions": "device_key revision curve_id start time_kind supply voltage_v frequency_hz ambient_c"
    " poles_loaded settings",
    "device_settings": "device_key revision name base from_value to_value step_value can_be_off",
    "device_breaking": "device_key revision quantity value_a voltage_v supply duration_s",
    "review_log": "seq device_key revision at name action state reason",
}


@pytest.fixture
def database(tmp_path: Path) -> Database:
    database = migrate.open_migrated(tmp_path / "firm.sqlite")
    yield database
    database.close()


def test_schema_sql_is_what_the_migrations_give(database: Database) -> None:
    written = sqlite3.connect(":memory:")
    written.executescript((shipped("database") / "schema.sql").read_text(encoding="utf-8"))
    assert schema_of(written) == schema_of(database.conn)
    written.close()


def test_the_program_knows_its_newest_migration(database: Database) -> None:
    assert list(migrate.migrations()) == list(range(1, connect.SCHEMA_VERSION + 1))
    assert database.execute("PRAGMA user_version").fetchone() == (connect.SCHEMA_VERSION,)
    assert database.execute("PRAGMA application_id").fetchone() == (connect.APPLICATION_ID,)


def test_the_writing_side_is_strict_and_checks_references(database: Database) -> None:
    assert database.journal_mode == "wal"
    assert database.execute("PRAGMA foreign_keys").fetchone() == (1,)
    assert all(table.strict for table in database.tables if not table.name.startswith(("device_text", "sqlite_")))
    with pytest.raises(sqlite3.IntegrityError, match="FOREIGN KEY"):
        database.conn.execute("INSERT INTO point VALUES (9, 1, 1, 1.0, 1.0, NULL, NULL, NULL)")


def test_no_sql_mathematics() -> None:
    for file in migrate.migrations().values():
        words = file.read_text(encoding="utf-8").lower()
        assert not any(f"{name}(" in words for name in ("log", "log10", "ln", "exp", "pow", "power", "sqrt"))


@pytest.mark.parametrize("view", CONTRACT)
def test_a_view_has_the_promised_columns_first(database: Database, view: str) -> None:
    promised = CONTRACT[view].split()
    assert [column.name for column in database[view].columns][: len(promised)] == promised


def test_every_column_of_every_view_is_documented(database: Database) -> None:
    with (shipped("database") / "columns.csv").open(encoding="utf-8", newline="") as file:
        glossary = list(csv.DictReader(file))
    described = [(row["view"], row["column"]) for row in glossary]
    assert described == [(view, column.name) for view in database.view_names() for column in database[view].columns]
    readme = (shipped("database") / "README.md").read_text(encoding="utf-8")
    for row in glossary:
        assert row["meaning"]
        assert f"| {row['column']} | {row['unit']} | {row['meaning']} |" in readme


def test_a_failing_migration_leaves_nothing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    number = connect.SCHEMA_VERSION + 1
    broken = tmp_path / f"{number:04}_broken.sql"
    broken.write_text("CREATE TABLE half (x INTEGER) STRICT; INSERT INTO missing VALUES (1);", encoding="utf-8")
    path = tmp_path / "firm.sqlite"
    with open_library(path) as library:
        library.store(breaker("b32", curve()))
    good = migrate.migrations()
    monkeypatch.setattr(migrate, "migrations", lambda: {**good, number: broken})
    monkeypatch.setattr(migrate, "SCHEMA_VERSION", number)
    with pytest.raises(sqlite3.OperationalError, match="no such table: missing"):
        migrate.open_migrated(path)
    monkeypatch.undo()
    with open_library(path) as library:
        assert library.record("b32").revision == 1
        assert library.open().execute("SELECT count(*) FROM sqlite_master WHERE name = 'half'").fetchone() == (0,)


def test_an_old_sqlite_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sqlite3, "sqlite_version_info", (3, 36, 0))
    with pytest.raises(connect.LibraryError, match=r"SQLite 3\.37 or later is needed"):
        connect.open_to_write(tmp_path / "firm.sqlite")
