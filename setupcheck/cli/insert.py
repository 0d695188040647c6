"""`setupcheck insert JOB`: sizes, readings and drawing of the insert that cuts a worm wheel."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import contextlib
import os
import sys
import tempfile
from pathlib import Path
from typing import Annotated

import typer

LARGEST = 1000.0
"""Largest enlargement that is drawn. Our choice: far beyond any sheet."""


def command(
    job: Annotated[Path, typer.Argument(metavar="JOB", help="Job file (YAML).", show_default=False)],
    svg: Annotated[Path | None, typer.Option(help="Write the drawing to this file.", show_default=False)] = None,
    scale: Annotated[float, typer.Option(help="Enlargement of the drawing, 20 for 20:1.")] = 20.0,
    paper: Annotated[str, typer.Option(help="A4 or A3.")] = "A4",
    force: Annotated[bool, typer.Option("--force", help="Replace a file that is already there.")] = False,
) -> None:
    """Tell the insert of a worm wheel's cutter: sizes, readings for grinding it, and a drawing true to scale.

    The job asks for it with contact: exact under mesh.

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
        _refuse_place(svg, force=force)
    found = review(job)
    the_insert(found)
    if svg is not None:
        drawing = as_drawing(found, scale=scale, paper=paper)
        _write(svg, drawing, force=force)
    told = [*inserts(found)]
    table = [*readings(found)]
    sys.stdout.write("\n".join([*told, *([""] if table else []), *table]) + "\n")
    if svg is not None:
        sys.stdout.write(
            f"\nwritten: {printable(str(svg))}, {scale:g}:1\nPrint it at 100 % and measure the two check lines.\n"
        )


def _refuse_place(path: Path, *, force: bool) -> None:
    """Refuses a place where the drawing cannot be written, before anything is worked out."""
    from setupcheck.errors import SetupcheckError, printable

    shown = printable(str(path))
    if path.is_dir():
        raise SetupcheckError(f"{shown} is a folder. Write the name of a file, as in {shown}/insert.svg")
    if not path.parent.is_dir():
        raise SetupcheckError(f"{shown}: there is no folder {printable(str(path.parent))}. Make it first")
    if path.exists() and not force:
        raise SetupcheckError(
            f"{shown} is already there and stays as it is. Write another name, or --force to replace it"
        )


def _write(path: Path, text: str, *, force: bool) -> None:
    """The whole file at once: it is written beside its place and then moved there, so nobody ever meets half of it."""
    from setupcheck.errors import SetupcheckError, printable

    beside: Path | None = None
    try:
        handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.", suffix=".part")
        beside = Path(name)
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
            file.write(text)
        beside.chmod(0o666 & ~_umask())
        _refuse_place(path, force=force)  # somebody may have written there meanwhile
        beside.replace(path)
    except OSError as why:
        raise SetupcheckError(f"{printable(str(path))} cannot be written: {why.strerror or why}") from None
    finally:
        if beside is not None:
            with contextlib.suppress(OSError):
                beside.unlink(missing_ok=True)


def _umask() -> int:
    """What new files of this process may not have."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
