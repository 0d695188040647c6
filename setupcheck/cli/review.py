"""`setupcheck review JOB…`: judge job files."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import os
import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import AsJson, Day, Record, day_of
from setupcheck.cli.telling import tell

EXIT = {"pass": 0, "warn": 1, "open": 1, "fail": 3}


def command(
    jobs: Annotated[list[Path], typer.Argument(metavar="JOB…", help="Job files (YAML).", show_default=False)],
    as_json: AsJson = False,
    everything: Annotated[
        bool, typer.Option("--all", help="Passed findings, every cause and every caution as well.")
    ] = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    on: Day = None,
    color: Annotated[str, typer.Option(help="auto, always or never.")] = "auto",
) -> None:
    """Judge every chain of errors of a job. Exit 0 pass, 1 warn or open, 2 unreadable, 3 fail.

    Example: setupcheck review jobs/rotator-worm-wheel.yaml
    """
    from setupcheck.errors import SetupcheckError

    if color not in ("auto", "always", "never"):
        raise typer.BadParameter("write auto, always or never", param_hint="--color")
    on = day_of(on)
    worst = 0
    for path in jobs:
        try:
            acts = house_of(path, house, leave=no_house)
            code, text = _reviewed(path, as_json=as_json, everything=everything, house=acts, record=record, on=on)
        except SetupcheckError as wrong:
            tell(wrong)
            worst = max(worst, 2)
            continue
        _show(text, colour=not as_json and _wants_colour(color))
        worst = max(worst, code)
    raise typer.Exit(worst)


def _reviewed(
    path: Path, *, as_json: bool, everything: bool, house: Path | None, record: Path | None, on: str | None
) -> tuple[int, str]:
    from setupcheck.flow import review

    found = review(path, house=house, on=on, devices=record)
    if as_json:
        from setupcheck.report.json import as_json as report

        return EXIT[found.verdict], report(found)
    from setupcheck.report.text import as_text

    return EXIT[found.verdict], as_text(found, everything=everything)


def _wants_colour(asked: str) -> bool:
    if asked == "auto":
        return sys.stdout.isatty() and "NO_COLOR" not in os.environ and os.environ.get("TERM") != "dumb"
    return asked == "always"


def _show(text: str, *, colour: bool) -> None:
    if not colour:
        sys.stdout.write(text)
        return
    from setupcheck.report.colour import print_coloured

    print_coloured(text)
