"""`setupcheck contact JOB`: where blue would mark a worm wheel, how unevenly it would run, and a map of both flanks."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import Force, Record
from setupcheck.cli.writing import refuse_place, write_whole


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    svg: Annotated[Path | None, typer.Option(help="Write the map to this file.", show_default=False)] = None,
    force: Force = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
) -> None:
    """Tell the contact of a worm wheel with its worm from the exact gap, and draw both flanks as a map.

    The job asks for it with contact: exact under mesh. Exit 0 told, 2 wrong use, unreadable job or nothing to tell.

    Example: setupcheck contact jobs/wheel-on-spindle.yaml --svg contact.svg
    """
    from setupcheck.errors import printable
    from setupcheck.flow import review
    from setupcheck.report.contact import contacts, the_contact
    from setupcheck.report.contact_drawing import as_drawing

    if svg is not None:
        refuse_place(svg, force=force)
    found = review(job, house=house_of(job, house, leave=no_house), devices=record)
    the_contact(found)
    if svg is not None:
        write_whole(svg, as_drawing(found), force=force)
    said = [*contacts(found)]
    if found.house is not None:
        from setupcheck.report.house import house_line

        said = [*house_line(found.house), "", *said]
    sys.stdout.write("\n".join(said) + "\n")
    if svg is not None:
        sys.stdout.write(f"\nwritten: {printable(str(svg))}\n")
