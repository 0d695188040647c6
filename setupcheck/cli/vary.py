"""`setupcheck vary JOB --set KEY=VALUE`: what if an entry of the job were another."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.review import EXIT, day_of


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
    as_json: Annotated[bool, typer.Option("--json", help="Print JSON instead of text.")] = False,
    everything: Annotated[bool, typer.Option("--all", help="Every number that moved.")] = False,
    house: Annotated[Path | None, typer.Option(help="File of your shop's own limits.", show_default=False)] = None,
    record: Annotated[
        Path | None, typer.Option(help="CSV of what your shop's own devices gave.", show_default=False)
    ] = None,
    on: Annotated[str | None, typer.Option(help="Day of the review (2027-03-31).", show_default=False)] = None,
) -> None:
    """Judge a job as it stands and with entries changed, side by side. Exit as review, for the changed job.

    Example: setupcheck vary jobs/rotator-worm-wheel.yaml --set 'setups.30.hold.centre.runout=60 um'
    """
    from setupcheck.flow import vary
    from setupcheck.jobfile.changing import read_change
    from setupcheck.report.vary import as_json as in_json
    from setupcheck.report.vary import as_text

    day = day_of(on) if on is not None else None
    found = vary(job, [read_change(text) for text in changes], house=house, on=day, devices=record)
    sys.stdout.write(in_json(found) if as_json else as_text(found, everything=everything))
    raise typer.Exit(EXIT[found.after.verdict])
