"""`setupcheck sheet JOB -o FILE.html`: the job on paper, or one of its drawings."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import Day, Force, Record, day_of
from setupcheck.cli.writing import refuse_place, write_whole
from setupcheck.errors import SetupcheckError, printable


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    out: Annotated[
        Path | None, typer.Option("--out", "-o", help="File to write, HTML; with --drawing SVG.", show_default=False)
    ] = None,
    drawing: Annotated[
        str | None,
        typer.Option(help="Write this drawing alone, as in hold-30; an unknown name lists all.", show_default=False),
    ] = None,
    force: Force = False,
    readings: Annotated[
        Path | None, typer.Option(help="CSV of a division test, drawn beside the prediction.", show_default=False)
    ] = None,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    on: Day = None,
) -> None:
    """Write the setup sheet of a job: one file that prints on A4 and letter, a page for each operation.

    Exit 0 written, whatever the verdict, 2 wrong use or unreadable job.

    Example: setupcheck sheet jobs/rotator-worm-wheel.yaml -o sheet.html
    """
    from setupcheck.flow import read_back, review

    if out is None and drawing is None:
        raise SetupcheckError("a sheet goes into a file. Name it: -o sheet.html")
    if out is not None:
        refuse_place(out, force=force)
    acts = house_of(job, house, leave=no_house)
    found = review(job, house=acts, on=day_of(on), devices=record)
    read = read_back(found.loaded, readings) if readings is not None else None
    if drawing is not None:
        from setupcheck.report.pictures import pictures

        drawn = pictures(found, read)
        if drawing not in drawn:
            raise SetupcheckError(
                f"this job has no drawing '{printable(drawing)}'. It has {', '.join(drawn) or 'none'}"
            )
        if out is None:
            raise SetupcheckError(f"a drawing goes into a file. Name it: -o {printable(drawing)}.svg")
        text = drawn[drawing].draw()
    else:
        from setupcheck.report.sheet import as_sheet

        text = as_sheet(found, read)
    assert out is not None
    write_whole(out, text, force=force)
    sys.stdout.write(f"written: {printable(str(out))}\nthe review says {found.verdict.upper()}\n")
