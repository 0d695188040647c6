"""The command `setupcheck`: one file a command, errors caught once, here."""

from __future__ import annotations

import gc
import os
import sys

# One thread is enough for the small matrices here, and starting more would cost more than the whole review.
os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
# Looking for plugins of other packages reads the metadata of everything that is installed; none belongs in this command.
os.environ.setdefault("PYDANTIC_DISABLE_PLUGINS", "1")
# A command lives for a fraction of a second: looking for cycles while everything is being imported only delays it.
gc.set_threshold(200_000)

import typer  # noqa: E402

from setupcheck.cli import review, rules, working  # noqa: E402
from setupcheck.errors import SetupcheckError  # noqa: E402

app = typer.Typer(
    name="setupcheck",
    rich_markup_mode=None,
    no_args_is_help=True,
    add_completion=True,
    pretty_exceptions_enable=False,
    help="Check the setups of one precise part before the first chip: what every holding adds, and whether it is too much.",
    epilog="Exit: 0 pass, 1 warn or open, 2 wrong use or unreadable job, 3 fail.",
)
app.command("review")(review.command)
app.command("working")(working.command)
app.command("rules")(rules.command)


@app.callback(invoke_without_command=True)
def options(version: bool = typer.Option(False, "--version", help="Print the version and stop.")) -> None:
    if version:
        from setupcheck import __version__

        typer.echo(f"setupcheck {__version__}")
        raise typer.Exit()


def run() -> None:
    """Entry point of the console script."""
    try:
        app()
    except SystemExit:
        gc.freeze()  # nothing is left to do: the search for cycles at the end would take a quarter of the whole run
        raise
    except SetupcheckError as wrong:
        print(wrong, file=sys.stderr)
        sys.exit(2)
    except BrokenPipeError:
        sys.stderr.close()
        sys.exit(1)
