"""`setupcheck review JOB…`: judge job files, one in full, many with a line each."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import AsJson, Color, Day, Record, day_of, wants_colour

EXIT = {"pass": 0, "warn": 1, "open": 1, "fail": 3}


def command(
    jobs: Annotated[
        list[Path],
        typer.Argument(metavar="JOB…", help="Job files (YAML), and folders of them.", show_default=False),
    ],
    as_json: AsJson = False,
    everything: Annotated[
        bool,
        typer.Option("--all", help="Passed findings, every cause and caution as well; of many jobs each whole report."),
    ] = False,
    quiet: Annotated[
        bool, typer.Option("--quiet", "-q", help="Only the line of the verdict; of many jobs only the counts.")
    ] = False,
    workers: Annotated[
        int | None,
        typer.Option(
            "--workers",
            min=1,
            help="Processes for many jobs; without it the processors from 32 jobs on.",
            show_default=False,
        ),
    ] = None,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    on: Day = None,
    color: Color = "auto",
) -> None:
    """Judge every chain of errors of a job. Exit 0 pass, 1 warn or open, 2 unreadable, 3 fail.

    Of a folder, or of several files, every job is judged: a line each, worst first, and the counts. Folders in folders are
    looked into, hidden ones and house files left out. --json prints one line of JSON for each job then. The exit is the
    highest of all; Ctrl-C prints what is done so far and exits 130.

    Example: setupcheck review jobs/rotator-worm-wheel.yaml; setupcheck review jobs --json > reviews.jsonl
    """
    if quiet and (as_json or everything):
        raise typer.BadParameter("--quiet prints one line; leave it out, or --json or --all")
    colour = wants_colour(color) and not as_json
    on = day_of(on)
    acts = house_of(jobs[0], house, leave=no_house)  # refuses both at once
    if len(jobs) == 1 and not jobs[0].is_dir():
        code, text = _reviewed(
            jobs[0], as_json=as_json, everything=everything, quiet=quiet, house=acts, record=record, on=on
        )
        _show(text, colour=colour)
        raise typer.Exit(code)
    from setupcheck.cli.many import Asked, review_drawer

    asked = Asked(
        as_json=as_json,
        everything=everything,
        quiet=quiet,
        house=str(house) if house is not None else None,
        beside=not no_house,
        on=on,
        record=str(record) if record is not None else None,
        workers=workers,
        show=lambda text: _show(text, colour=colour),
        colour=color,
    )
    raise typer.Exit(review_drawer(jobs, asked))


def _reviewed(
    path: Path, *, as_json: bool, everything: bool, quiet: bool, house: Path | None, record: Path | None, on: str | None
) -> tuple[int, str]:
    """Exit code of one job, and what is printed of it."""
    from setupcheck.flow import review

    found = review(path, house=house, on=on, devices=record)
    if as_json:
        from setupcheck.report.json import as_json as report

        return EXIT[found.verdict], report(found)
    from setupcheck.report.text import as_text, verdict_line

    if quiet:
        return EXIT[found.verdict], f"{verdict_line(found)}\n"
    return EXIT[found.verdict], as_text(found, everything=everything)


def _show(text: str, *, colour: bool) -> None:
    if not colour:
        sys.stdout.write(text)
        return
    from setupcheck.report.colour import print_coloured

    print_coloured(text)
