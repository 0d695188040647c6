"""`setupcheck insert JOB`: sizes, readings and drawing of the insert that cuts a worm wheel."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.options import Force
from setupcheck.cli.writing import refuse_place, write_whole

LARGEST = 1000.0
"""Largest enlargement that is drawn. Our choice: far beyond any sheet."""


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    svg: Annotated[Path | None, typer.Option(help="Write the drawing to this file.", show_default=False)] = None,
    scale: Annotated[float, typer.Option(help="Enlargement of the drawing, 20 for 20:1.")] = 20.0,
    paper: Annotated[str, typer.Option(help="A4 or A3.")] = "A4",
    force: Force = False,
) -> None:
    """Tell the insert of a worm wheel's cutter: sizes, readings for grinding it, and a drawing true to scale.

    The job asks for it with contact: exact under mesh. Exit 0 told, 2 wrong use, unreadable job or nothing to tell.

    Example: setupcheck insert jobs/wheel-on-spindle.yaml --svg insert.svg --scale 20
    """
    from setupcheck.errors import printable
    from setupcheck.flow import review
    from setupcheck.report.insert import inserts, readings, the_insert
    from setupcheck.report.insert_drawing import PAPERS, as_drawing

    if paper not in PAPERS:
        raise typer.BadParameter(f"write {' or '.join(PAPERS)}", param_hint="--paper")
    if not 1.0 <= scale <= LARGEST:
        raise typer.BadParameter(f"write 20 for 20:1; from 1 to {LARGEST:g}", param_hint="--scale")
    if svg is not None:
        refuse_place(svg, force=force)
    found = review(job)
    the_insert(found)
    if svg is not None:
        drawing = as_drawing(found, scale=scale, paper=paper)
        write_whole(svg, drawing, force=force)
    told = [*inserts(found)]
    table = [*readings(found)]
    sys.stdout.write("\n".join([*told, *([""] if table else []), *table]) + "\n")
    if svg is not None:
        sys.stdout.write(
            f"\nwritten: {printable(str(svg))}, {scale:g}:1\nPrint it at 100 % and measure the two check lines.\n"
        )
