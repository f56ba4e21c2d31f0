"""``curvelab workbench``: the page in the browser and the HTTP interface, served on this computer."""

import click

from curvelab.cli.output import library_option
from curvelab.library.place import library_path


@click.command()
@library_option
@click.option("--port", type=click.IntRange(0, 65_535), default=0, help="Port [default: any that is free].")
@click.option(
    "--host", default="127.0.0.1", help="Beyond this computer a token is needed, which is printed [default: 127.0.0.1]."
)
@click.option("--open/--no-open", "opens", default=True, help="Show the page in the browser.")
def command(library_file: str | None, port: int, host: str, opens: bool) -> int:
    """Read sheets, settle what is open, store, compare and review, in the browser.

    Serves on this computer alone unless --host says otherwise; other programs read the library over HTTP, see
    /api/openapi.json.
    """
    # The web framework is for this command alone.
    from curvelab.workbench.serve import Wanted, serve  # noqa: PLC0415

    serve(Wanted(library=library_path(library_file), host=host, port=port, opens=opens), click.echo)
    return 0
