"""`setupcheck schema`: the JSON Schema of a job file, which an editor completes and checks from."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.options import Force
from setupcheck.cli.writing import refuse_place, write_whole


def command(
    output: Annotated[
        Path | None, typer.Option("-o", "--output", help="Write it to this file.", show_default=False)
    ] = None,
    force: Force = False,
) -> None:
    """Print the JSON Schema (draft 2020-12) of a job file: every key, what it is, the words it takes.

    Example: setupcheck schema -o job.schema.json
    """
    from setupcheck.errors import printable

    if output is not None:
        refuse_place(output, force=force)
    from setupcheck.report.job_schema import as_json_schema

    text = as_json_schema()
    if output is None:
        sys.stdout.write(text)
        return
    write_whole(output, text, force=force)
    sys.stdout.write(f"written: {printable(str(output))}\n")
