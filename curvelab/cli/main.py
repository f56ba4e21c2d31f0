"""The command group: finds commands when asked for; an expected error becomes one line and exit status 2."""

import sys
from importlib import import_module
from typing import Any

import click

import curvelab
from curvelab.errors import CurvelabError

COMMANDS = {
    "digitise": "Read a sheet, a worksheet or a folder of worksheets.",
    "store": "Read worksheets and store their devices in the library.",
    "check": "Check a device against its standard.",
    "query": "Trip times at currents, or currents for times.",
    "compare": "Set two or more devices side by side.",
    "disconnection": "Whether a device disconnects a fault in time, and the greatest loop impedance.",
    "withstand": "Whether a conductor withstands what a device lets through.",
    "report": "A document to review and sign, of one device or two.",
    "discrimination": "Up to which current only the downstream one of two devices acts.",
    "overload": "Whether a device protects a conductor against overload.",
    "breaking": "Whether a device breaks a short circuit, alone or backed up.",
    "library": "List, find, review, exchange and keep what is stored.",
    "workbench": "Read, correct, compare and review in the browser.",
    "demo": "Run the whole chain on the shipped sheets.",
}
"""Command -> what it does; each is the function ``command`` of the module of its name."""


class CommandTable(click.Group):
    """Loads a command's module only when it is called, so that a query does not wait for image libraries."""

    def list_commands(self, ctx: click.Context) -> list[str]:  # noqa: ARG002 - the library's signature
        """Names in the order of the work."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:  # noqa: ARG002
        """The command, or None for an unknown word."""
        if cmd_name not in COMMANDS:
            return None
        command: click.Command = import_module(f"curvelab.cli.{cmd_name}").command
        return command

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:  # noqa: ARG002
        """List the commands without loading them."""
        with formatter.section("Commands"):
            formatter.write_dl(list(COMMANDS.items()))


@click.group(cls=CommandTable, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(curvelab.__version__, prog_name="curvelab")
def entry() -> None:
    """Time-current curves from datasheets: read, checked, stored, asked.

    Results support the work of a qualified person; they do not replace the maker's data, local codes or
    licensed practice.
    """


def main(arguments: list[str] | None = None) -> None:
    """Run one command; exit 0 done, 1 a finding fails or something is not covered, 2 bad input or usage."""
    sys.exit(run(arguments))


def run(arguments: list[str] | None = None) -> int:
    """Run one command and return its exit status."""
    try:
        status: Any = entry.main(args=arguments, prog_name="curvelab", standalone_mode=False)
    except CurvelabError as error:
        click.echo(f"curvelab: {error}", err=True)
        return 2
    except click.exceptions.NoArgsIsHelpError as error:
        click.echo(error.format_message())
        return 2
    except click.ClickException as error:
        message = " ".join(error.format_message().split())
        click.echo(f"curvelab: {message}", err=True)
        return 2
    except (click.Abort, KeyboardInterrupt):
        click.echo("curvelab: Stopped; nothing was stored.", err=True)
        return 2
    return status if isinstance(status, int) else 0
