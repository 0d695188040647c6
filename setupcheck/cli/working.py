"""`setupcheck working JOB QUANTITY`: how a number came about."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    quantity: Annotated[
        str,
        typer.Argument(
            metavar="QUANTITY",
            help="A requirement (require[6], mid-plane, or its name in the report), or a number such as hold.reach@30/teeth.",
            show_default=False,
        ),
    ],
    record: Annotated[
        Path | None, typer.Option(help="CSV of what your shop's own devices gave.", show_default=False)
    ] = None,
) -> None:
    """Show formula, inputs with their lines, source and evidence of one number.

    Example: setupcheck working jobs/index-plate.yaml require[1]
    """
    from setupcheck.flow import load_job, prepare, with_devices
    from setupcheck.report.working import as_working

    loaded = load_job(job)
    if record is not None:
        loaded, _ = with_devices(loaded, record)
    _, book = prepare(loaded)
    sys.stdout.write(as_working(loaded, book, quantity))
