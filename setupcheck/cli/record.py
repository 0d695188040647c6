"""`setupcheck record FILE`: what a shop's own devices gave, and what the next one keeps below."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer


def command(
    file: Annotated[
        Path | None,
        typer.Argument(
            metavar="FILE", help="CSV with the columns device, what, date, value, note.", show_default=False
        ),
    ] = None,
    template: Annotated[bool, typer.Option("--template", help="Print a CSV to start from and stop.")] = False,
) -> None:
    """Tell each device of a record: entries, mean, spread, 95 % limit for the next value.

    Exit 0 told, 1 where a device wears, 2 wrong use or unreadable record.

    Example: setupcheck record --template > devices.csv

    Example: setupcheck record devices.csv
    """
    from setupcheck.report import device_record

    if template:
        sys.stdout.write(device_record.template())
        return
    if file is None:
        raise typer.BadParameter("write the record, as in: setupcheck record devices.csv")
    found = device_record.load_record(file)
    sys.stdout.write(device_record.as_record(found))
    raise typer.Exit(1 if any(one.rising for one in found.series.values()) else 0)
