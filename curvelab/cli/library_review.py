"""``curvelab library review`` and ``log``: the state of revisions, who changed it and why."""

from dataclasses import asdict

import click

import curvelab
from curvelab.cli.output import json_option, library_option, reason_option, table, write_json
from curvelab.library.key import split_key

STATES = ("draft", "checked", "released", "withdrawn")


@click.command("review")
@click.argument("key")
@click.option("--state", type=click.Choice(STATES), help="The new state; left out, the reason is kept as a note.")
@click.option("--name", required=True, help="Who reviews.")
@reason_option
@library_option
def review_command(key: str, state: str | None, name: str, reason: str, library_file: str | None) -> int:
    """Set the state of a revision, or note something about it.

    KEY means the newest revision that is not withdrawn, KEY@3 the third. The way is draft, checked, released; anything
    may be withdrawn, with a reason. Only another person than the author releases.
    """
    device_key, revision = split_key(key)
    with curvelab.open_library(library_file, create=False) as library:
        done = library.review(device_key, revision, state=state, name=name, reason=reason)
    told = f"{done.before} -> {done.state}" if state else f"noted ({done.state})"
    click.echo(f"{done.key}@{done.revision}: {told}")
    return 0


@click.command("log")
@click.argument("key", required=False)
@library_option
@json_option
def log_command(key: str | None, library_file: str | None, json_file: str | None) -> int:
    """Show who did what, when and why: of one device, or of all."""
    with curvelab.open_library(library_file, create=False) as library:
        if key:
            library.history(key)
        found = library.log(key)
    if json_file:
        write_json([asdict(entry) for entry in found], json_file)
    if json_file != "-":
        rows = [
            [
                entry.at,
                f"{entry.device_key}@{entry.revision}",
                entry.action,
                entry.state,
                entry.name or "-",
                entry.reason,
            ]
            for entry in found
        ]
        click.echo(table(["at", "revision", "action", "state", "name", "reason"], rows))
    return 0
