"""What is done with one page of a batch: read it, every plot of it, and make its files."""

from collections.abc import Iterator
from dataclasses import replace

from curvelab.errors import CurvelabError
from curvelab.plots.overlay import overlay_figure
from curvelab.plots.save import picture_bytes
from curvelab.reading.as_json import json_text, reading_json
from curvelab.reading.batch import WORKSHEET, Entry, Job, Outcome, failed, without_plot
from curvelab.reading.complete import completed
from curvelab.reading.digitise import digitise
from curvelab.reading.plots import plot_count
from curvelab.records.reading import Reading
from curvelab.worksheets.write import worksheet_text

SEVERAL = "several-plots"
OUTCOMES = ("meets", "fails", "undecided", "at limit", "not covered")

Plots = list[tuple[int | None, Reading | CurvelabError]]
"""Number of a plot, None for the only one, and its reading or what is wrong with it."""


def read_page(job: Job, *, with_readings: bool = False) -> Outcome:
    """Read a page or a worksheet; whatever goes wrong becomes its outcome, so that the others go on.

    ``with_readings`` sends the readings along to be stored, without their pixels.
    """
    try:
        plots = _plots(job)
        if not plots:
            return without_plot(job)
        parts = [_part(job, number, read, several=len(plots) > 1) for number, read in plots]
    except Exception as error:
        return failed(job, f"The program failed on this page: {type(error).__name__}: {error}")
    readings = tuple(_light(read) for _, read in plots if isinstance(read, Reading)) if with_readings else ()
    contents = {name: content for _, files in parts for name, content in files.items()}
    return Outcome(job=job, entries=tuple(entry for entry, _ in parts), contents=contents, readings=readings)


def _plots(job: Job) -> Plots:
    if job.path.suffix.lower() == WORKSHEET:
        return [(None, _attempt(job, None))]
    first = _attempt(job, None)
    is_alone = isinstance(first, Reading) and all(warning.code != SEVERAL for warning in first.warnings)
    count = 1 if is_alone else _count(job)
    if count == 0 and job.pages > 1:
        return []
    if count <= 1:
        return [(None, first)]
    return [(number, _attempt(job, number)) for number in range(1, count + 1)]


def _attempt(job: Job, plot: int | None) -> Reading | CurvelabError:
    is_worksheet = job.path.suffix.lower() == WORKSHEET
    try:
        return digitise(job.path) if is_worksheet else digitise(job.path, page=job.page, plot=plot)
    except CurvelabError as error:
        return error


def _count(job: Job) -> int:
    try:
        return plot_count(job.path, job.page)
    except CurvelabError:
        return 1


def _part(
    job: Job, plot: int | None, read: Reading | CurvelabError, *, several: bool
) -> tuple[Entry, dict[str, bytes]]:
    """One plot's line of the summary, and its files by name."""
    if isinstance(read, CurvelabError):
        (entry,) = failed(job, str(read)).entries
        return replace(entry, plot=plot), {}
    files = dict(_files(job, read, f"{job.stem}-plot{plot}" if several else job.stem))
    judged = [each.outcome for each in read.findings if not each.advisory]
    sheet = read.worksheet.sheet
    entry = Entry(
        source=job.source,
        page=sheet.page if sheet else job.page,
        plot=sheet.plot if sheet else None,
        outcome="read",
        curves=len(read.curves),
        devices=tuple(record.nameplate.key for record in read.devices),
        findings={outcome: judged.count(outcome) for outcome in OUTCOMES if outcome in judged},
        warnings=tuple(warning.code for warning in read.warnings if warning.accepted is None),
        files=tuple(files),
    )
    return entry, files


def _files(job: Job, reading: Reading, stem: str) -> Iterator[tuple[str, bytes]]:
    yield f"{stem}.json", json_text(reading_json(reading)).encode("utf-8")
    if reading.sheet is not None:
        yield f"{stem}.overlay.png", picture_bytes(overlay_figure(reading), "png")
    if job.path.suffix.lower() != WORKSHEET:
        yield f"{stem}.toml", worksheet_text(completed(reading)).encode("utf-8")


def _light(reading: Reading) -> Reading:
    """Without what is large and is not stored."""
    sheet = reading.sheet and replace(reading.sheet, pixels=None, strokes=(), words=())
    return replace(reading, sheet=sheet)
