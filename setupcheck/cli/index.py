"""`setupcheck index JOB`: the index table that the hand at the dividing head follows, place by place."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.options import Force
from setupcheck.cli.writing import refuse_place, write_whole


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    op: Annotated[int | None, typer.Option("--op", help="Only this operation.", show_default=False)] = None,
    csv: Annotated[Path | None, typer.Option("--csv", help="Write the table to this file.", show_default=False)] = None,
    force: Force = False,
) -> None:
    """Print the index table of a setup that divides a circle: every place with its setting, and the start again.

    Exit 0 told, 2 wrong use, unreadable job or nothing to tell.

    Example: setupcheck index jobs/rotator-worm-wheel.yaml --op 40 --csv teeth.csv
    """
    from setupcheck.errors import printable
    from setupcheck.flow import load_job, prepare
    from setupcheck.report.index_table import as_csv, as_index_table

    if csv is not None:
        refuse_place(csv, force=force)
    loaded = load_job(job)
    _, book = prepare(loaded)
    told = as_index_table(loaded, book, op)
    if csv is not None:
        write_whole(csv, as_csv(loaded, book, op), force=force)
        told += f"\nwritten: {printable(str(csv))}\n"
    sys.stdout.write(told)
