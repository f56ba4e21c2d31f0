"""``curvelab report``: a document to review and sign, of one device or of two side by side."""

from collections.abc import Sequence
from contextlib import ExitStack
from pathlib import Path
from tempfile import TemporaryDirectory

import click

import curvelab
from curvelab.calculators.stretches import sides_of
from curvelab.cli.compare import settings_by_key
from curvelab.cli.many import ManyValues, Settings
from curvelab.cli.output import library_option
from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.library.place import library_path
from curvelab.reading.restore import with_sheets
from curvelab.reports.case import Case
from curvelab.reports.comparison import PairCase, comparison_document, preferred_currents
from curvelab.reports.document import Document
from curvelab.reports.review import review_document
from curvelab.reports.write import checked_ending, write_document
from curvelab.standards.review import review
from curvelab.standards.rules import rules_beside


@click.command(cls=ManyValues)
@click.argument("keys", nargs=-1, required=True, metavar="KEY [KEY]")
@click.option("--output", required=True, type=click.Path(dir_okay=False), metavar="FILE.pdf|.html", help="Where to.")
@click.option(
    "--current", "currents", type=float, multiple=True, metavar="A...", help="Currents of a comparison's table."
)
@click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="KEY.NAME=VALUE...", help="Settings of a device."
)
@library_option
def command(
    keys: tuple[str, ...],
    output: str,
    currents: tuple[float, ...],
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
) -> int:
    """Write a review document of KEY, or a comparison document of two; KEY@3 is about revision 3.

    The same library content gives the same file, byte for byte.
    """
    if len(keys) > 2:
        raise click.UsageError("A report is of one device, or of two to be compared.")
    checked_ending(output)
    given = settings_by_key(keys, settings)
    with ExitStack() as stack, curvelab.open_library(library_file, create=False) as library:
        cases = []
        for key in keys:
            folder = Path(stack.enter_context(TemporaryDirectory()))
            cases.append(_case(library, key, given[key], folder))
        document = review_document(cases[0]) if len(cases) == 1 else _comparison(cases, currents)
        write_document(document, output)
    click.echo(f"{document.title} of {document.name}: {output}")
    return 0


def _case(library: Library, key: str, settings: dict[str, float | str], folder: Path) -> Case:
    device = library.device(*split_key(key)).at(**settings)
    return Case(
        device=device,
        evidence=with_sheets(library.evidence(device.key, device.revision), folder),
        history=library.history(device.key),
        log=library.log(device.key),
        findings=review([device], rules_beside(library_path(library.path))),
    )


def _comparison(cases: Sequence[Case], currents: Sequence[float]) -> Document:
    devices = [case.device for case in cases]
    (sides,) = sides_of(devices)
    if not currents:
        every = curvelab.compare(devices).current_a
        currents = preferred_currents(float(every[0]), float(every[-1]))
    comparison = curvelab.compare(devices, currents)
    return comparison_document(PairCase(upstream=cases[0], downstream=cases[1], comparison=comparison, sides=sides))
