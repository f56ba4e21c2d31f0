"""``curvelab library``: what is stored, found, reviewed, exchanged and kept."""

from importlib import import_module

import click

COMMANDS = {
    "list": ("library_show", "List the current revision of every device."),
    "show": ("library_show", "Show a device: its ratings, curves and revisions."),
    "find": ("library_find", "Find devices by words, ratings or what their bands do."),
    "review": ("library_review", "Set the state of a revision, or note something about it."),
    "log": ("library_review", "Show who did what, when and why."),
    "evidence": ("library_evidence", "Write out what led to a device, and read it again."),
    "export": ("library_exchange", "Write devices to an open file (JSON lines), or points to a table (CSV)."),
    "import": ("library_exchange", "Take another library, an exported file or a table of points."),
    "verify": ("library_keep", "Check that nothing has changed since it was stored."),
    "backup": ("library_keep", "Copy the library to one file while others use it."),
    "restore": ("library_keep", "Put a backup back."),
    "compact": ("library_keep", "Give unused space back to the disk."),
}
"""Command -> the module it is in, and what it does; each is the function ``<name>_command`` there."""


class LibraryTable(click.Group):
    """Loads a command's module only when it is called."""

    def list_commands(self, ctx: click.Context) -> list[str]:  # noqa: ARG002 - the library's signature
        """Names in the order of the work."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:  # noqa: ARG002
        """The command, or None for an unknown word."""
        if cmd_name not in COMMANDS:
            return None
        module, _ = COMMANDS[cmd_name]
        found: click.Command = getattr(import_module(f"curvelab.cli.{module}"), f"{cmd_name}_command")
        return found

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:  # noqa: ARG002
        """List the commands without loading them."""
        with formatter.section("Commands"):
            formatter.write_dl([(name, told) for name, (_, told) in COMMANDS.items()])


@click.group(cls=LibraryTable)
def command() -> None:
    """List, show, find, review, exchange and keep what the library holds."""
