"""`setupcheck working JOB QUANTITY`: how a number came about."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import Record


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    quantity: Annotated[
        str,
        typer.Argument(
            metavar="QUANTITY",
            help="A requirement (require[6], mid-plane, or its name in the report), or a number such as hold.reach@30/teeth.",
            show_default=False,
        ),
    ],
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
) -> None:
    """Show formula, inputs with their lines, source and evidence of one number.

    Exit 0 told, 2 wrong use, unreadable job or no such number.

    Example: setupcheck working jobs/index-plate.yaml require[1]
    """
    from setupcheck.flow import load_job, prepare, read_house, with_own
    from setupcheck.report.working import as_working

    loaded = load_job(job)
    acts = house_of(job, house, leave=no_house)
    own = read_house(acts) if acts is not None else None
    if record is not None or own is not None:
        loaded = with_own(loaded, record, own)[0]
    _, book = prepare(loaded)
    if own is not None:
        from setupcheck.report.house import house_line

        sys.stdout.write("\n".join([*house_line(own), "", ""]))
    sys.stdout.write(as_working(loaded, book, quantity))
