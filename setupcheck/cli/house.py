"""The house file of a command: named by --house, else the one that lies beside the job, unless --no-house."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

from pathlib import Path
from typing import Annotated

import typer

HouseFile = Annotated[
    Path | None,
    typer.Option("--house", help="House file; without it, setupcheck-house.yaml beside the job.", show_default=False),
]
NoHouse = Annotated[bool, typer.Option("--no-house", help="Leave the house file beside the job.")]


def house_of(job: Path, house: Path | None, *, leave: bool) -> Path | None:
    """The house file that acts on a job, None where none does."""
    if house is not None and leave:
        raise typer.BadParameter("--house names a house file and --no-house leaves it. Write one of them")
    if house is not None or leave:
        return house
    from setupcheck.flow import house_beside

    return house_beside(job)
