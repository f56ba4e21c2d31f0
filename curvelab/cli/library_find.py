"""``curvelab library find``: devices by words, nameplate and bands."""

from dataclasses import asdict
from typing import Any

import click

import curvelab
from curvelab.cli.output import device_table, json_option, library_option, write_json
from curvelab.library.bands import BandQuery, BandsFound, Point
from curvelab.library.search import COLUMNS, MOST_COUNTED, PAGE, Found, Page, Wanted

point = click.Tuple([float, float])


@click.command("find")
@click.argument("words", nargs=-1)
@click.option("--kind", help="fuse, mcb, mccb, acb, rcd, rcbo, relay or switch.")
@click.option("--characteristic", help="As printed: B, C, gG, ...")
@click.option("--standard", help="As printed: IEC 60898-1, ...")
@click.option("--state", help="draft, checked or released.")
@click.option("--maker")
@click.option("--series")
@click.option("--rated-from", "rated_from_a", type=float, metavar="A", help="Least rated current.")
@click.option("--rated-to", "rated_to_a", type=float, metavar="A", help="Greatest rated current.")
@click.option("--holds", type=point, metavar="A S", help="Surely does not trip at A amperes before S seconds.")
@click.option("--trips", type=point, metavar="A S", help="Has surely cleared A amperes within S seconds.")
@click.option("--sort", type=click.Choice(COLUMNS), default="device_key", help="Column to sort by.")
@click.option("--falling", is_flag=True, help="Sort from large to small.")
@click.option("--first", type=int, default=0, help="Leave out this many of the first devices.")
@click.option("--count", type=int, default=PAGE, help=f"Show at most this many [default: {PAGE}].")
@library_option
@json_option
def find_command(words: tuple[str, ...], library_file: str | None, json_file: str | None, **given: Any) -> int:
    """Find devices whose key, maker, series, standard or document has all WORDS, or words that begin so.

    --holds and --trips ask the bands with their 95 % interval. Adjustable devices answer only at settings: they are
    counted, not listed.
    """
    page = Page(**{name: given.pop(name) for name in ("sort", "falling", "first", "count")})
    holds, trips = (
        (found and Point(current_a=found[0], time_s=found[1])) for found in (given.pop("holds"), given.pop("trips"))
    )
    wanted = Wanted(words=" ".join(words), **given)
    found: Found | BandsFound
    with curvelab.open_library(library_file, create=False) as library:
        if holds or trips:
            found = library.find_bands(BandQuery(holds=holds or None, trips=trips or None), wanted, page)
        else:
            found = library.find(wanted, page)
    if json_file:
        write_json({"format": 1, **asdict(found)}, json_file)
    if json_file != "-":
        click.echo(device_table(found.rows))
        click.echo(_counted(found, page))
    return 0


def _counted(found: Found | BandsFound, page: Page) -> str:
    shown = f"{len(found.rows)} shown from {page.first}" if page.first else f"{len(found.rows)} shown"
    if isinstance(found, Found):
        return f"Devices: {found.total}{' or more' if found.total == MOST_COUNTED else ''}, {shown}"
    more = "" if found.surely == found.at_most else f" to {found.at_most}"
    left_out = (
        f"; adjustable devices left out: {found.adjustable}, query each at its settings" if found.adjustable else ""
    )
    return f"Devices: {found.surely}{more}, {shown}{left_out}"
