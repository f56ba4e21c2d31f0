"""What a folder holds, who does the work, and going on where it was stopped."""

import pickle
import sys
from dataclasses import replace
from pathlib import Path

import pytest
from PIL import Image

from curvelab.errors import InputError
from curvelab.reading.batch import DONE, Job, failed, jobs_in
from curvelab.reading.engines import cluster, processes
from curvelab.reading.journal import Journal
from tests.reading.batch_work import deadly, quick
from tests.reading.example import reading

WORKSHEET = 'format = 1\n[sheet]\nfile = "{}"\npage = {}\n'


def job(source="a.png", page=1, key="1"):
    return Job(source=source, path=Path(source), page=page, pages=page, key=key)


@pytest.fixture
def folder(tmp_path):
    """Two images, three pages in one file, a worksheet of its second page, a text file and a hidden folder."""
    page = Image.new("L", (20, 10), 255)
    (tmp_path / "sub").mkdir()
    (tmp_path / ".hidden").mkdir()
    page.save(tmp_path / "b.png")
    page.save(tmp_path / "sub" / "a.jpg")
    page.save(tmp_path / ".hidden" / "c.png")
    page.save(tmp_path / "many.tif", save_all=True, append_images=[page, page])
    (tmp_path / "notes.txt").write_text("nothing")
    (tmp_path / "second.toml").write_text(WORKSHEET.format("many.tif", 2))
    return tmp_path


def test_every_page_is_read_but_those_a_worksheet_speaks_of(folder):
    found = jobs_in(folder, folder / "results")
    assert [(each.source, each.page) for each in found] == [
        ("b.png", 1),
        ("many.tif", 1),
        ("many.tif", 3),
        ("second.toml", 1),
        ("sub/a.jpg", 1),
    ]
    assert [each.stem for each in found][1:3] == ["many.tif-page1", "many.tif-page3"]


def test_results_are_not_read_again(folder):
    results = folder / "results"
    results.mkdir()
    Image.new("L", (20, 10), 255).save(results / "b.png.overlay.png")
    assert all("results" not in each.source for each in jobs_in(folder, results))


def test_results_of_another_run_are_not_read_either(folder):
    other = folder / "sub" / "elsewhere"
    Journal(other).add(quick(job()))
    Image.new("L", (20, 10), 255).save(other / "b.png.overlay.png")
    assert all("elsewhere" not in each.source for each in jobs_in(folder, folder / "results"))


def test_a_key_follows_the_bytes_of_sheet_and_worksheet(folder):
    def keys():
        return {(each.source, each.page): each.key for each in jobs_in(folder, folder / "results")}

    before = keys()
    assert keys() == before
    assert len(set(before.values())) == len(before)
    page = Image.new("L", (20, 10), 200)
    page.save(folder / "many.tif", save_all=True, append_images=[page, page])
    changed = {name for name, key in keys().items() if before[name] != key}
    assert changed == {("many.tif", 1), ("many.tif", 3), ("second.toml", 1)}


def test_a_broken_file_is_a_job_of_its_own(tmp_path):
    (tmp_path / "bad.pdf").write_bytes(b"%PDF-1.4 nonsense")
    assert [(each.source, each.pages) for each in jobs_in(tmp_path, tmp_path / "results")] == [("bad.pdf", 1)]


def test_what_is_done_is_not_done_again_unless_it_changed_or_its_file_is_gone(tmp_path):
    journal = Journal(tmp_path / "results")
    journal.add(quick(job()))
    again = Journal(tmp_path / "results")
    assert again.entries(job()) == quick(job()).entries
    assert again.entries(job(key="2")) is None
    assert again.entries(job(page=2)) is None
    assert Journal(tmp_path / "results", "firm.sqlite").entries(job()) is None
    (tmp_path / "results" / "a.png.json").unlink()
    assert Journal(tmp_path / "results").entries(job()) is None


def test_a_line_cut_off_by_a_stop_costs_that_page_alone(tmp_path):
    journal = Journal(tmp_path)
    journal.add(quick(job("a.png")))
    journal.add(quick(job("b.png")))
    text = (tmp_path / DONE).read_text(encoding="utf-8")
    (tmp_path / DONE).write_text(text[:-30], encoding="utf-8")
    again = Journal(tmp_path)
    assert again.entries(job("a.png")) is not None
    assert again.entries(job("b.png")) is None


def test_what_follows_a_cut_off_line_is_kept_too(tmp_path):
    journal = Journal(tmp_path)
    journal.add(quick(job("a.png")))
    (tmp_path / DONE).write_text('{"source": "b', encoding="utf-8")
    Journal(tmp_path).add(quick(job("c.png")))
    assert Journal(tmp_path).entries(job("c.png")) is not None


def test_a_failure_is_an_outcome_too_and_unreadable_files_are_tried_again(tmp_path):
    journal = Journal(tmp_path)
    journal.add(failed(job(), "it is torn"))
    journal.add(failed(job("locked.png", key=""), "not permitted"))
    again = Journal(tmp_path)
    assert again.entries(job())[0].message == "it is torn"
    assert again.entries(job("locked.png", key="")) is None


def test_results_that_cannot_be_written_are_told(tmp_path):
    (tmp_path / "results").write_text("a file")
    with pytest.raises(InputError, match="--output"):
        Journal(tmp_path / "results").add(quick(job()))


def test_readings_travel_between_processes():
    sent = pickle.loads(pickle.dumps(reading()))
    assert [read.curve.at for read in sent.curves] == [read.curve.at for read in reading().curves]


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no such signal")
def test_a_page_that_kills_its_process_does_not_stop_the_others():
    jobs = [job("a.png"), job("deadly.png"), *(job(f"{letter}.png") for letter in "bcdefgh")]
    found = {each.source: outcome for each, outcome in processes(2)(deadly, jobs)}
    assert found.pop("deadly.png") is None
    assert len(found) == 8
    assert all(outcome.entries[0].outcome == "read" for outcome in found.values())


def test_a_cluster_does_the_same_work():
    distributed = pytest.importorskip("distributed")
    with distributed.LocalCluster(n_workers=2, threads_per_worker=1, processes=False, dashboard_address=None) as local:
        jobs = [job(f"{letter}.png") for letter in "abc"]
        found = dict(cluster(local.scheduler_address)(quick, jobs))
    assert {each.source: outcome.entries for each, outcome in found.items()} == {
        each.source: quick(each).entries for each in jobs
    }


def test_a_cluster_that_is_not_there_is_told(monkeypatch):
    monkeypatch.setitem(sys.modules, "distributed", None)
    with pytest.raises(InputError, match="curvelab\\[cluster\\]"):
        cluster("tcp://nowhere:8786")


def test_jobs_can_be_told_apart():
    assert len({job(), replace(job(), page=2), job()}) == 2
