"""`setupcheck record FILE`: what a shop's own devices gave, and what the next one keeps below."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer


def command(
    file: Annotated[
        Path,
        typer.Argument(
            metavar="FILE", help="CSV with the columns device, what, date, value, note.", show_default=False
        ),
    ],
) -> None:
    """Tell each device of a record: entries, mean, spread, 95 % limit for the next value. Exit 1 where one wears.

    Example: setupcheck record devices.csv
    """
    from setupcheck.report.device_record import as_record, load_record

    found = load_record(file)
    sys.stdout.write(as_record(found))
    raise typer.Exit(1 if any(one.rising for one in found.series.values()) else 0)
