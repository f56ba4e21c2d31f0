"""``curvelab library``: found, reviewed, exchanged, kept; one line and status 2 for what is wrong."""

import json
import shutil
from pathlib import Path

import pytest

from curvelab.cli.library import COMMANDS
from curvelab.cli.main import run
from curvelab.library.library import open_library
from curvelab.paths import shipped
from tests.library.devices import breaker, curve
from tests.library.test_point_table import HANDBOOK

SHEETS = shipped("demo_curves") / "sheets"


@pytest.fixture
def firm(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    path = tmp_path / "firm.sqlite"
    monkeypatch.setenv("CURVELAB_LIBRARY", str(path))
    with open_library(path) as library:
        plates = [
            breaker(f"weir-b{rating}", curve("fast"), curve(), rated_current_a=float(rating)) for rating in (6, 16, 32)
        ]
        library.store(plates, author="A. Author", reason="first issue")
    return path


def told(capsys: pytest.CaptureFixture[str], *words: object) -> tuple[int, str, str]:
    status = run(["library", *map(str, words)])
    captured = capsys.readouterr()
    return status, captured.out, captured.err


@pytest.mark.parametrize("name", COMMANDS)
def test_each_command_has_help(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = told(capsys, name, "--help")
    assert (status, "Usage: curvelab library" in out) == (0, True)


@pytest.mark.usefixtures("firm")
def test_find_by_words_and_rating(capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = told(capsys, "find", "weir", "--rated-from", 10, "--sort", "rated_current_a", "--falling")
    assert status == 0
    assert [line.split()[0] for line in out.splitlines()] == ["device", "weir-b32", "weir-b16", "Devices:"]


@pytest.mark.usefixtures("firm")
def test_find_by_bands(capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = told(capsys, "find", "--holds", 30, 100, "--trips", 80, 60, "--json", "-")
    found = json.loads(out)
    assert (status, [row["device_key"] for row in found["rows"]], found["adjustable"]) == (0, ["weir-b16"], 0)
    status, out, _ = told(capsys, "find", "--trips", 80, 60)
    assert "Devices: 1, 1 shown" in out


@pytest.mark.usefixtures("firm")
def test_review_and_log(capsys: pytest.CaptureFixture[str]) -> None:
    assert (
        told(capsys, "review", "weir-b6", "--state", "checked", "--name", "B. Checker")[1]
        == "weir-b6@1: draft -> checked\n"
    )
    status, _, err = told(capsys, "review", "weir-b6", "--state", "released", "--name", "A. Author")
    assert (status, len(err.splitlines())) == (2, 1)
    assert "second person" in err
    assert told(capsys, "review", "weir-b6@1", "--state", "released", "--name", "C", "--reason", "for use")[0] == 0
    assert told(capsys, "review", "weir-b6", "--name", "C", "--reason", "seen")[1] == "weir-b6@1: noted (released)\n"
    status, out, _ = told(capsys, "log", "weir-b6")
    assert [line.split()[2] for line in out.splitlines()[1:]] == ["stored", "reviewed", "reviewed", "noted"]
    assert told(capsys, "log", "none")[0] == 2
    assert len(json.loads(told(capsys, "log", "--json", "-")[1])) == 6


def test_export_and_import(firm: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    lines, other = tmp_path / "all.jsonl", tmp_path / "other.sqlite"
    assert told(capsys, "export", lines)[0] == 0
    assert told(capsys, "import", lines, "--library", other, "--name", "D") == (0, "3 revisions new, 0 known\n", "")
    assert told(capsys, "import", firm, "--library", other)[1] == "0 revisions new, 3 known\n"
    with open_library(other) as library:
        library.store(breaker("weir-b6", curve(time_s=61.0)))
        library.review("weir-b16", state="checked", name="B")
    status, out, err = told(capsys, "import", other)
    assert (status, out) == (1, "1 revisions new, 3 known\n")
    assert err == "weir-b16@1 is draft here and checked there: it stays draft\n"
    assert told(capsys, "verify")[0] == 0
    assert told(capsys, "export", "-", "weir-b6")[1].splitlines()[0].startswith('{"format":"curvelab-library"')


@pytest.mark.usefixtures("firm")
def test_tables(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    table, points = tmp_path / "handbook.csv", tmp_path / "points.csv"
    table.write_text("\ufeff" + HANDBOOK, encoding="utf-8")
    assert told(capsys, "import", table, "--name", "A")[:2] == (0, "2 revisions new, 0 known\n")
    assert told(capsys, "export", points, "weir-c10", "weir-b6@1")[0] == 0
    rows = points.read_text(encoding="utf-8").splitlines()
    assert len(rows) == 1 + 4 + 6
    assert rows[1].startswith("weir-c10,1,draft,mcb,whole,fast,clearing,time,xIn,")
    assert told(capsys, "import", points, "--library", tmp_path / "new.sqlite")[0] == 2


def test_keeping(firm: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    copy = tmp_path / "copy.sqlite"
    assert told(capsys, "backup", copy)[0] == 0
    status, out, _ = told(capsys, "verify")
    assert (status, out.splitlines()[0]) == (0, "Sound: 3 revisions, 3 entries in the log")
    assert told(capsys, "compact")[0] == 0
    firm.write_bytes(b"rubbish" * 999)
    status, _, err = told(capsys, "verify")
    assert (status, len(err.splitlines())) == (2, 1)
    assert "firm.sqlite.before-restore" in told(capsys, "restore", copy)[1]
    assert told(capsys, "verify", "--library", copy)[0] == told(capsys, "verify")[0] == 0


@pytest.mark.usefixtures("firm")
def test_evidence_of_a_read_sheet(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    folder = tmp_path / "sheets"
    folder.mkdir()
    for ending in ("toml", "png"):
        shutil.copy(SHEETS / f"rcd-general.{ending}", folder)
    assert run(["store", str(folder / "rcd-general.toml"), "--name", "A. Author", "--reason", "first issue"]) == 0
    shutil.rmtree(folder)
    key = next(line.split(":")[0] for line in capsys.readouterr().out.splitlines() if ": revision" in line)
    status, out, _ = told(capsys, "evidence", key, "--rerun", "--output", tmp_path / "out")
    assert status == 0
    assert "by A. Author: first issue" in out
    assert "read again: the same" in out
    assert "residual fast: standard uncertainty" in out or "whole fast: standard uncertainty" in out
    assert "calibration" in out
    written = {path.name for path in (tmp_path / "out").rglob("*") if path.is_file()}
    assert written == {"worksheet.toml", "overlay.png", "band.png", "rcd-general.png"}


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["find", "--holds", "0", "1"], "positive and finite"),
        (["find", "--count", "0"], "There is no page"),
        (["find", "%%%"], "no word to look for"),
        (["import", "none.jsonl"], "cannot be read"),
        (["import", "bytes.csv"], "is no text in UTF-8"),
        (["import", "bytes.sqlite"], "is not a library"),
        (["export", "x.csv", "nothing"], "no device 'nothing'"),
        (["export", "no/such/folder/x.jsonl"], "Cannot write"),
        (["backup", "no/such/folder/x.sqlite"], "x.sqlite"),
        (["restore", "none.sqlite"], "There is no library"),
        (["review", "weir-b6", "--state", "checked"], "--name"),
        (["review", "weir-b6@9", "--state", "checked", "--name", "B"], "has no revision 9"),
        (["evidence", "nothing"], "no device 'nothing'"),
        (["nonsense"], "nonsense"),
    ],
)
def test_what_is_wrong_is_said_in_one_line(
    firm: Path,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
    words: list[str],
    said: str,
) -> None:
    monkeypatch.chdir(tmp_path)
    for name in ("bytes.csv", "bytes.sqlite"):
        (tmp_path / name).write_bytes(b"\xff\xfe\x00rubbish" * 100)
    before = firm.read_bytes()
    status, out, err = told(capsys, *words)
    assert (status, out, len(err.splitlines())) == (2, "", 1)
    assert said in err
    assert firm.read_bytes() == before
