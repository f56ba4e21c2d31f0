"""A folder read at once, as a person does it: results, summary, going on, storing."""

import csv
import json
import os
import shutil
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from PIL import Image

import curvelab
from curvelab.cli import batch
from curvelab.cli.main import run
from curvelab.reading.batch import DONE
from tests.cli.test_commands import B32, FUSE

ROOT = Path(__file__).parents[2]
SHEETS = ROOT / "demo_curves" / "sheets"


@pytest.fixture
def asked(monkeypatch):
    """The work is done here, so that tests need not wait for processes to start; what was asked for is told."""
    sources = []

    def engine(work, jobs):
        for job in jobs:
            sources.append(job.source)
            yield job, work(job)

    monkeypatch.setattr(batch, "processes", lambda: engine)
    return sources


@pytest.fixture
def folder(tmp_path):
    """Two worksheets, one of a sheet beside it, and a file that is no sheet."""
    folder = tmp_path / "datasheets"
    (folder / "pumps").mkdir(parents=True)
    (folder / "b32.toml").write_text(B32, encoding="utf-8")
    (folder / "pumps" / "gg100.toml").write_text(FUSE, encoding="utf-8")
    (folder / "torn.png").write_bytes(b"no image")
    return folder


def summary(folder):
    results = folder / batch.RESULTS
    with (results / "summary.csv").open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    return rows, json.loads((results / "summary.json").read_text(encoding="utf-8"))


@pytest.mark.usefixtures("asked")
def test_one_bad_page_does_not_stop_the_others_and_all_is_summed_up(folder, capsys):
    assert run(["digitise", str(folder)]) == 2
    shown = capsys.readouterr().out
    assert "hall-b32" in shown
    assert "failed: " in shown
    assert "is not a sheet that can be read" in shown
    rows, entries = summary(folder)
    assert [row["source"] for row in rows] == ["b32.toml", "pumps/gg100.toml", "torn.png"]
    assert [row["outcome"] for row in rows] == [entry["outcome"] for entry in entries] == ["read", "read", "failed"]
    assert entries[1]["devices"] == ["hall-gg100"]
    reading = json.loads((folder / batch.RESULTS / "pumps" / "gg100.toml.json").read_text(encoding="utf-8"))
    assert reading["format"] == 1


def test_run_again_it_reads_only_what_is_new_or_has_changed(folder, asked, capsys):
    run(["digitise", str(folder)])
    first = summary(folder)
    asked.clear()
    run(["digitise", str(folder)])
    assert asked == []
    assert "3 of them before" in capsys.readouterr().out
    assert summary(folder) == first
    (folder / "b32.toml").write_text(B32.replace("[160, 9]", "[160, 8]"), encoding="utf-8")
    (folder / "new.toml").write_text(FUSE.replace("hall-gg100", "hall-gg101"), encoding="utf-8")
    run(["digitise", str(folder)])
    assert asked == ["b32.toml", "new.toml"]


def test_another_version_reads_everything_again(folder, asked, monkeypatch):
    run(["digitise", str(folder)])
    asked.clear()
    monkeypatch.setattr("curvelab.reading.batch.__version__", "9.9")
    run(["digitise", str(folder)])
    assert len(asked) == 3


def test_stopped_it_says_so_and_goes_on_from_there(folder, asked, monkeypatch, capsys):
    def stopped(work, jobs):
        yield jobs[0], work(jobs[0])
        raise KeyboardInterrupt

    whole = batch.processes
    monkeypatch.setattr(batch, "processes", lambda: stopped)
    assert run(["digitise", str(folder)]) == 2
    assert "Stopped after 1 of 3; run it again to go on from there." in capsys.readouterr().err
    monkeypatch.setattr(batch, "processes", whole)
    run(["digitise", str(folder)])
    assert asked == ["pumps/gg100.toml", "torn.png"]


@pytest.mark.usefixtures("asked")
def test_results_and_readings_go_where_they_are_asked_to(folder, tmp_path, capsys):
    capsys.readouterr()
    assert run(["digitise", str(folder), "--output", str(tmp_path / "out"), "--json", "-"]) == 2
    readings = json.loads(capsys.readouterr().out)
    assert [reading["bands"][0]["device"] for reading in readings] == ["hall-b32", "hall-gg100"]
    assert (tmp_path / "out" / DONE).exists()
    assert not (folder / batch.RESULTS).exists()


def test_devices_are_stored_in_the_order_of_their_names_whoever_was_done_first(folder, monkeypatch, tmp_path):
    def backwards(work, jobs):
        yield from ((job, work(job)) for job in reversed(jobs))

    monkeypatch.setattr(batch, "processes", lambda: backwards)
    (folder / "pumps" / "again.toml").write_text(B32.replace("[160, 9]", "[160, 8]"), encoding="utf-8")
    library_file = tmp_path / "firm.sqlite"
    run(["digitise", str(folder), "--library", str(library_file)])
    with curvelab.open_library(library_file) as library:
        assert sorted(library.keys()) == ["hall-b32", "hall-gg100"]
        assert library.device("hall-b32").trip_time(160.0).slow.value == 8
        assert len(library.history("hall-b32")) == 2


def test_whoever_is_killed_is_told_as_a_failure(folder, monkeypatch):
    def killed(_work, jobs):
        return ((job, None) for job in jobs)

    monkeypatch.setattr(batch, "processes", lambda: killed)
    assert run(["digitise", str(folder)]) == 2
    assert {entry["message"] for entry in summary(folder)[1]} == {batch.KILLED}


@pytest.mark.usefixtures("asked")
def test_pages_without_a_plot_are_no_failure_and_every_sheet_has_its_files(tmp_path):
    blank = Image.new("L", (400, 300), 255)
    blank.save(tmp_path / "text.tif", save_all=True, append_images=[blank])
    for name in ("mcb-b.png", "mcb-b.toml"):
        shutil.copy(SHEETS / name, tmp_path / name)
    assert run(["digitise", str(tmp_path)]) in {0, 1}
    rows, entries = summary(tmp_path)
    assert [(row["source"], row["page"], row["outcome"]) for row in rows] == [
        ("mcb-b.toml", "1", "read"),
        ("text.tif", "1", "no plot"),
        ("text.tif", "2", "no plot"),
    ]
    assert entries[0]["files"] == ["mcb-b.toml.json", "mcb-b.toml.overlay.png"]
    with (
        Image.open(tmp_path / batch.RESULTS / "mcb-b.toml.overlay.png") as picture,
        Image.open(tmp_path / "mcb-b.png") as sheet,
    ):
        assert picture.size == sheet.size


def test_an_empty_folder_and_options_of_the_other_kind_are_refused(tmp_path, folder, capsys):
    (tmp_path / "empty").mkdir()
    assert run(["digitise", str(tmp_path / "empty")]) == 2
    assert "holds no sheet" in capsys.readouterr().err
    assert run(["digitise", str(folder), "--page", "2"]) == 2
    assert run(["digitise", str(folder / "b32.toml"), "--output", str(tmp_path / "out")]) == 2
    assert "with a folder" in capsys.readouterr().err


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no such signal")
def test_processes_do_the_work_and_a_kill_in_the_midst_loses_little(folder):
    command = [sys.executable, "-m", "curvelab", "digitise", str(folder)]
    done = folder / batch.RESULTS / DONE
    for number in range(2):
        (folder / f"more-{number}.toml").write_text(FUSE.replace("hall-gg100", f"hall-{number}"), encoding="utf-8")
    with subprocess.Popen(command, cwd=ROOT, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL) as process:
        limit = time.monotonic() + 120
        while not (done.exists() and done.read_bytes().count(b"\n")) and time.monotonic() < limit:
            time.sleep(0.05)
        os.kill(process.pid, signal.SIGKILL)
    before = done.read_bytes().count(b"\n")
    assert before >= 1
    assert subprocess.run(command, cwd=ROOT, capture_output=True, check=False).returncode == 2
    assert done.read_bytes().count(b"\n") == 5
    assert len(summary(folder)[1]) == 5
