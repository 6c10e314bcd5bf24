"""`faying try`. Python keeps the word `try` for itself, hence the module's name."""

from __future__ import annotations

import sys
import webbrowser
from pathlib import Path

import click

from reports.commands.common import plain, taught

NEEDS = 'The page needs a small server: python -m pip install "faying[page]".'


@click.command("try")
@click.argument("case", required=False, type=click.Path(path_type=Path))
@click.option("--port", type=click.IntRange(0, 65535), default=0, help="Port to listen on; any free one if not given.")
@click.option("--browser/--no-browser", default=True, help="Open the page, or only print its address.")
@taught
def try_(case: Path | None, port: int, browser: bool) -> None:
    """Open a local page where the splice answers as it is changed.

    Begins with CASE, or with the shipped demo. Nothing but this machine can reach it; it reads and writes cases in the
    folder it is started in. Ctrl+C ends it.
    """
    try:
        from reports.live.server import opening_tables, serve
    except ModuleNotFoundError as error:
        if error.name not in ("starlette", "uvicorn", "anyio", "h11"):
            raise
        click.echo(NEEDS, err=True)
        sys.exit(1)

    def ready(address: str) -> None:
        click.echo(f"{address}\nCtrl+C ends it.")
        if browser:
            webbrowser.open(address)

    # paths in a case start from its own folder, as they do for `faying life`
    folder = Path.cwd() if case is None else case.resolve().parent
    try:
        serve(folder, opening_tables(case), port, ready)
    except KeyboardInterrupt:
        click.echo()
    except OSError as error:
        click.echo(plain(f"port {port} cannot be used ({error.strerror})."), err=True)
        sys.exit(1)
