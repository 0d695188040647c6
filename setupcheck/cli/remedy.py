"""`setupcheck remedy JOB`: what would bring a job inside, and what is good enough already."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.review import EXIT, day_of


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML); it stays as it is.", show_default=False)],
    of: Annotated[
        str | None, typer.Option(metavar="require[N]", help="One requirement alone.", show_default=False)
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print JSON instead of text.")] = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Annotated[
        Path | None, typer.Option(help="CSV of what your shop's own devices gave.", show_default=False)
    ] = None,
    on: Annotated[str | None, typer.Option(help="Day of the review (2027-03-31).", show_default=False)] = None,
) -> None:
    """What each entry would have to become, which other datum or order does it, where to measure next. Exit as review.

    Of a job that passes: what is good enough already, and which setups could be one holding.

    Example: setupcheck remedy jobs/mistakes/hidden-chuck-run-out.yaml
    """
    from setupcheck.flow import mend

    day = day_of(on) if on is not None else None
    found, mended = mend(job, of=of, house=house_of(job, house, leave=no_house), on=day, devices=record)
    if as_json:
        from setupcheck.report.remedy_data import as_json as report
    else:
        from setupcheck.report.remedy import as_text as report
    sys.stdout.write(report(found, mended))
    raise typer.Exit(EXIT[found.verdict])
