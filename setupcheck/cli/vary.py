"""`setupcheck vary JOB --set KEY=VALUE`: what if an entry of the job were another."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import AsJson, Day, Force, Record, day_of
from setupcheck.cli.review import EXIT
from setupcheck.cli.writing import refuse_place, write_whole
from setupcheck.errors import printable


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML); it stays as it is.", show_default=False)],
    changes: Annotated[
        list[str],
        typer.Option(
            "--set",
            metavar="KEY=VALUE",
            help="Entry by its path, value as in the file; as often as needed.",
            show_default=False,
        ),
    ],
    as_json: AsJson = False,
    svg: Annotated[
        Path | None,
        typer.Option("--svg", "-o", help="Of a range: draw the requirements into this file.", show_default=False),
    ] = None,
    force: Force = False,
    everything: Annotated[bool, typer.Option("--all", help="Every number that moved.")] = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    on: Day = None,
) -> None:
    """Judge a job as it stands and with entries changed, side by side.

    One value may be a range, as in 2um..20um or 2um..20um/7: a table tells where the verdict turns.

    Exit of the changed job, or the worst of a range: 0 pass, 1 warn or open, 2 wrong use or unreadable job, 3 fail.

    Example: setupcheck vary jobs/rotator-worm-wheel.yaml --set 'setups.30.hold.centre.runout=60 um'
    """
    from functools import partial

    from setupcheck.flow import read_house, review, vary
    from setupcheck.report.vary import as_json as in_json
    from setupcheck.report.vary import as_text, typed_changes

    day = day_of(on)
    singles, spans = typed_changes(changes)
    if len(spans) > 1:
        raise typer.BadParameter("write one range at a time, and one value for the others", param_hint="--set")
    if svg is not None:
        if not spans:
            raise typer.BadParameter("a drawing needs a range, as in --set KEY=2um..20um", param_hint="--svg")
        refuse_place(svg, force=force)
    acts = house_of(job, house, leave=no_house)
    own = read_house(acts) if acts is not None else None
    before = review(job, house=own, on=day, devices=record)

    again = partial(vary, before, house=own, on=day, devices=record)
    if not spans:
        found = again(singles)
        sys.stdout.write(in_json(found) if as_json else as_text(found, everything=everything))
        raise typer.Exit(EXIT[found.after.verdict])
    from setupcheck.report import vary_range

    swept = vary_range.sweep(before, spans[0], singles, again)
    if svg is not None:
        from setupcheck.report.vary_drawing import as_drawing

        write_whole(svg, as_drawing(swept), force=force)
    sys.stdout.write(vary_range.as_json(swept) if as_json else vary_range.as_text(swept))
    if svg is not None and not as_json:
        sys.stdout.write(f"\nwritten: {printable(str(svg))}\n")
    raise typer.Exit(max(EXIT[one.after.verdict] for one in swept.found))
