"""A folder of sheets read at once: progress, results and summary, and on from where it was stopped."""

import csv
import io
import json
import sys
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import asdict, dataclass, replace
from functools import partial
from pathlib import Path
from typing import Any

import click

import curvelab
from curvelab.cli.batch_page import read_page
from curvelab.cli.output import table, write_json, write_text
from curvelab.errors import CurvelabError, InputError
from curvelab.reading.batch import SHEETS, WORKSHEET, Engine, Entry, Job, Outcome, Work, failed, jobs_in
from curvelab.reading.engines import cluster, processes
from curvelab.reading.journal import Journal

RESULTS = "curvelab-results"
"""The folder of results within the folder that is read, where none is named."""
KILLED = "Whatever read this page was stopped by the system: the page may need more memory than there is."
COLUMNS = ("source", "page", "plot", "outcome", "curves", "devices", "findings", "warnings", "message", "files")


@dataclass(frozen=True, kw_only=True, slots=True)
class Where:
    """Where results go, and who does the work."""

    results: Path
    library_file: str | None
    json_file: str | None
    cluster: str | None


def read_folder(folder: Path, where: Where) -> int:
    """Read what of a folder is not read yet; 2 where a page cannot be read, 1 where a check does not meet."""
    jobs = jobs_in(folder, where.results)
    if not jobs:
        raise InputError(
            f"Folder '{folder}' holds no sheet", f"Files that end in {', '.join(sorted({*SHEETS, WORKSHEET}))}"
        )
    engine = cluster(where.cluster) if where.cluster else processes()
    library = str(Path(where.library_file).resolve()) if where.library_file else ""
    journal = Journal(where.results, library)
    known = {job: before for job in jobs if (before := journal.entries(job)) is not None}
    done = dict(known)
    try:
        _work(engine, [job for job in jobs if job not in known], journal, done, where)
    except KeyboardInterrupt:
        click.echo(f"Stopped after {len(done)} of {len(jobs)}; run it again to go on from there.", err=True)
        return 2
    entries = [entry for job in jobs for entry in done[job]]
    _write_summary(entries, where.results)
    if where.json_file:
        write_json(_readings(entries, where.results), where.json_file)
    if where.json_file != "-":
        click.echo(summary_text(entries))
        again = f", {len(known)} of them before" if known else ""
        click.echo(f"{len(jobs)} pages and worksheets read{again}. Results in {where.results}")
    return _status(entries)


def _work(engine: Engine, jobs: list[Job], journal: Journal, done: dict[Job, tuple[Entry, ...]], where: Where) -> None:
    """Do what is left, and keep each outcome as soon as it is there."""
    work: Work = partial(read_page, with_readings=bool(where.library_file))
    outcomes = _as_done(engine(work, jobs))
    if where.library_file:
        outcomes = (_stored(outcome, where.library_file) for outcome in _in_order(outcomes, jobs))
    with click.progressbar(
        outcomes,
        length=len(jobs),
        label="Reading",
        show_pos=True,
        file=sys.stderr,
        item_show_func=lambda outcome: outcome.job.stem if outcome else None,
    ) as bar:
        for outcome in bar:
            journal.add(outcome)
            done[outcome.job] = outcome.entries


def _as_done(outcomes: Iterator[tuple[Job, Outcome | None]]) -> Iterator[Outcome]:
    for job, outcome in outcomes:
        yield outcome or failed(job, KILLED)


def _in_order(outcomes: Iterator[Outcome], jobs: Sequence[Job]) -> Iterator[Outcome]:
    """Outcomes in the order of the jobs, so that the revisions of a library do not depend on who was done first."""
    waiting: dict[Job, Outcome] = {}
    place = 0
    for outcome in outcomes:
        waiting[outcome.job] = outcome
        while place < len(jobs) and jobs[place] in waiting:
            yield waiting.pop(jobs[place])
            place += 1


def _stored(outcome: Outcome, library_file: str) -> Outcome:
    """The outcome with its devices stored, or its entries saying why they could not be."""
    readings = [reading for reading in outcome.readings if reading.devices]
    files = {outcome.job.path.parent / reading.worksheet.sheet.file for reading in readings if reading.worksheet.sheet}
    if not readings:
        return outcome
    try:
        with curvelab.open_library(library_file) as library:
            library.store(readings, sheet_files=sorted(files))
    except CurvelabError as error:
        entries = tuple(replace(entry, outcome="not stored", message=str(error)) for entry in outcome.entries)
        return replace(outcome, entries=entries)
    return outcome


def _write_summary(entries: Sequence[Entry], results: Path) -> None:
    write_json([asdict(entry) for entry in entries], str(results / "summary.json"))
    content = io.StringIO()
    writer = csv.writer(content, lineterminator="\n")
    writer.writerow(COLUMNS)
    writer.writerows([_csv_cell(getattr(entry, column)) for column in COLUMNS] for entry in entries)
    write_text(content.getvalue(), str(results / "summary.csv"))


def _csv_cell(value: Any) -> str:
    """Lists with spaces between; counts as ``meets 3 fails 1``."""
    if isinstance(value, dict):
        return " ".join(f"{name} {count}" for name, count in value.items())
    if isinstance(value, tuple):
        return " ".join(value)
    return "" if value is None else str(value)


def _readings(entries: Sequence[Entry], results: Path) -> list[Any]:
    """The readings again, from their files."""
    names = [name for entry in entries for name in entry.files if name.endswith(".json")]
    return [json.loads((results / name).read_text(encoding="utf-8")) for name in names]


def summary_text(entries: Sequence[Entry]) -> str:
    """A row for each plot, what could not be read with its reason."""
    rows = [
        [entry.source, str(entry.page), str(entry.plot or "-"), str(entry.curves), _keys(entry.devices), _told(entry)]
        for entry in entries
    ]
    return table(["sheet or worksheet", "page", "plot", "curves", "devices", "outcome"], rows)


def _keys(devices: Sequence[str]) -> str:
    return ", ".join(devices[:2]) + (f" and {len(devices) - 2} more" if len(devices) > 2 else "") or "-"


def _told(entry: Entry) -> str:
    if entry.outcome != "read":
        return f"{entry.outcome}: {entry.message}" if entry.message else entry.outcome
    warnings = Counter(entry.warnings)
    words = [
        f"{count} checks {outcome}" for outcome, count in entry.findings.items() if outcome in ("fails", "undecided")
    ]
    words += [f"{len(entry.warnings)} warnings ({', '.join(warnings)})"] if warnings else []
    return ", ".join(words) or "read"


def _status(entries: Sequence[Entry]) -> int:
    if any(entry.outcome in {"failed", "not stored"} for entry in entries):
        return 2
    return 1 if any(entry.findings.get(outcome) for entry in entries for outcome in ("fails", "undecided")) else 0
