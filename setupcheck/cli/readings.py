"""`setupcheck readings JOB CSV`: a division test read back."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from setupcheck.cli.house import HouseFile, NoHouse, house_of
from setupcheck.cli.options import AsJson, Record

if TYPE_CHECKING:
    from collections.abc import Callable

    from setupcheck.flow import ReadBack

LARGE = 20_000_000
"""Bytes of a file from which on a bar shows how far it is read. Our choice: some seconds."""


def command(
    job: Annotated[Path | None, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)] = None,
    readings: Annotated[
        Path | None, typer.Argument(metavar="CSV", help="Readings of the test.", show_default=False)
    ] = None,
    of: Annotated[
        str | None, typer.Option(help="Teeth, holes or lines, as in wheel.teeth; the mesh's wheel if left out.")
    ] = None,
    turns_with_work: Annotated[
        bool, typer.Option("--turns-with-work", help="Stations are turns of the work: the instrument rides on it.")
    ] = False,
    instrument: Annotated[
        str | None,
        typer.Option(help="Uncertainty of the angle standard, k = 2, as in 1.5arcsec: without it no verdict."),
    ] = None,
    diameter: Annotated[
        str | None, typer.Option(help="Diameter of a workpiece to tell the range on, as in 200 or 8 in.")
    ] = None,
    as_json: AsJson = False,
    house: HouseFile = None,
    no_house: NoHouse = False,
    record: Record = None,
    template: Annotated[bool, typer.Option("--template", help="Print a CSV to start from and stop.")] = False,
) -> None:
    """Reduce the readings of a division test, and set them against the plan: eccentricity, worm, backlash, scatter, owner.

    Exit 0 inside the limit, 1 warn or open, 2 wrong use or unreadable, 3 outside the limit.

    Example: setupcheck readings --template > test.csv

    Example: setupcheck readings jobs/rotator-worm-wheel.yaml test.csv --instrument 1.5arcsec
    """
    if template:
        from setupcheck.report.readings import template as text

        sys.stdout.write(text())
        return
    if job is None or readings is None:
        raise typer.BadParameter("write the job and its readings, as in: setupcheck readings wheel.yaml test.csv")
    from setupcheck.report.typed import typed_angle, typed_size

    sure = typed_angle("--instrument", instrument) if instrument is not None else None
    from setupcheck.flow import read_back

    read = partial(read_back, job, readings, of=of, turns_with_work=turns_with_work, instrument=sure)
    found = _read(readings, partial(read, house=house_of(job, house, leave=no_house), devices=record))
    from setupcheck.report.against import verdict
    from setupcheck.report.readings import as_json as in_json
    from setupcheck.report.readings import as_text

    size = typed_size("--diameter", diameter, found.loaded) if diameter is not None else None
    sys.stdout.write(in_json(found) if as_json else as_text(found, diameter=size))
    raise typer.Exit({"pass": 0, "fail": 3}.get(verdict(found), 1))


def _read(readings: Path, read: "Callable[..., ReadBack]") -> "ReadBack":
    """The test read back, with a bar where its file is large and somebody looks on."""
    try:
        size = readings.stat().st_size
    except OSError:
        size = 0
    if size < LARGE or not sys.stderr.isatty():
        return read()
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task("reading", total=size)
        return read(progress=lambda done: bar.update(task, completed=done))
