"""`setupcheck remedy JOB`: what would bring a job inside, and what is good enough already."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import AsJson, Day, Record, day_of
from setupcheck.cli.review import EXIT


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML); it stays as it is.", show_default=False)],
    of: Annotated[
        str | None, typer.Option(metavar="require[N]", help="One requirement alone.", show_default=False)
    ] = None,
    as_json: AsJson = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    on: Day = None,
) -> None:
    """What each entry would have to become, which other datum or order does it, where to measure next.

    Of a job that passes: what is good enough already, and which setups could be one holding.

    Exit as review: 0 pass, 1 warn or open, 2 wrong use or unreadable job, 3 fail.

    Example: setupcheck remedy jobs/mistakes/hidden-chuck-run-out.yaml
    """
    from setupcheck.flow import mend

    day = day_of(on)
    found, mended = mend(job, of=of, house=house_of(job, house, leave=no_house), on=day, devices=record)
    if as_json:
        from setupcheck.report.remedy_data import as_json as report
    else:
        from setupcheck.report.remedy import as_text as report
    sys.stdout.write(report(found, mended))
    raise typer.Exit(EXIT[found.verdict])
