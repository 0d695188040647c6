"""Options that several commands take, said once: record of devices, day, JSON, colour, replacing a file."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import os
import sys
from pathlib import Path
from typing import Annotated

import typer

Record = Annotated[
    Path | None,
    typer.Option("--record", help="CSV of what your shop's own devices gave.", show_default=False),
]
Day = Annotated[
    str | None,
    typer.Option("--on", help="Day of the review (2027-03-31), for waivers that end.", show_default=False),
]
AsJson = Annotated[bool, typer.Option("--json", help="Print JSON instead of text.")]
Color = Annotated[str, typer.Option(help="auto (a terminal, unless NO_COLOR is set), always or never.")]
Force = Annotated[bool, typer.Option("--force", help="Replace a file that is already there.")]


def day_of(text: str | None) -> str | None:
    """The day of --on in ISO spelling; None where none is given.

    Raises: BadParameter for what is no day.
    """
    import datetime

    try:
        return datetime.date.fromisoformat(text).isoformat() if text is not None else None
    except ValueError:
        raise typer.BadParameter(f"'{text}' is not a day. Write it as 2027-03-31", param_hint="--on") from None


def wants_colour(asked: str) -> bool:
    """Whether standard output is coloured. NO_COLOR, set to anything but nothing, turns `auto` off; `always` stands above it.

    Raises: BadParameter for another word than auto, always and never.
    """
    if asked not in ("auto", "always", "never"):
        raise typer.BadParameter("write auto, always or never", param_hint="--color")
    if asked == "auto":
        return sys.stdout.isatty() and not os.environ.get("NO_COLOR") and os.environ.get("TERM") != "dumb"
    return asked == "always"
