"""`setupcheck schema`: the JSON Schema of a job file, which an editor completes and checks from, or of the review's JSON."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.options import Force
from setupcheck.cli.writing import refuse_place, write_whole

OF = ("job", "review")
"""What there is a schema of."""


def command(
    of: Annotated[str, typer.Option("--of", help="job (the file), or review (what review --json prints).")] = "job",
    output: Annotated[
        Path | None, typer.Option("-o", "--output", help="Write it to this file.", show_default=False)
    ] = None,
    force: Force = False,
) -> None:
    """Print the JSON Schema (draft 2020-12) of a job file: every key, what it is, the words it takes.

    With --of review that of the JSON that setupcheck review --json prints, with units. Exit 0 written, 2 wrong use.

    Example: setupcheck schema -o job.schema.json

    Example: setupcheck schema --of review -o review.schema.json
    """
    from setupcheck.errors import printable

    if of not in OF:
        raise typer.BadParameter(f"write {' or '.join(OF)}", param_hint="--of")
    if output is not None:
        refuse_place(output, force=force)
    if of == "job":
        from setupcheck.report.job_schema import as_json_schema
    else:
        from setupcheck.report.review_schema import as_json_schema

    text = as_json_schema()
    if output is None:
        sys.stdout.write(text)
        return
    write_whole(output, text, force=force)
    sys.stdout.write(f"written: {printable(str(output))}\n")
