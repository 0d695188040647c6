"""`setupcheck rules [ID]`: the rule book, with a shop's house file on it; `--check FILE` looks such a file over."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from pathlib import Path
from typing import Annotated

import typer

from setupcheck.cli.options import day_of


def command(
    rule: Annotated[str | None, typer.Argument(metavar="[ID]", help="Such as STACK-001.", show_default=False)] = None,
    house: Annotated[
        Path | None, typer.Option(help="House file, whose own rules are listed as well.", show_default=False)
    ] = None,
    check: Annotated[
        Path | None,
        typer.Option(metavar="FILE", help="Look a house file over and tell what it changes.", show_default=False),
    ] = None,
    on: Annotated[
        str | None, typer.Option(help="Day of the check (2027-03-31), for waivers that end.", show_default=False)
    ] = None,
) -> None:
    """List the rules, or show one with its reason and sources; --check tells all that is wrong with a house file.

    Exit 0 told, 2 wrong use, no such rule or a house file with a mistake.

    Example: setupcheck rules DATUM-001
    """
    from setupcheck.flow import read_house, rules

    if check is not None:
        if rule is not None or house is not None:
            raise typer.BadParameter("it stands alone: write setupcheck rules --check FILE", param_hint="--check")
        from setupcheck.report.house_check import as_text

        day = day_of(on)
        sys.stdout.write(as_text(read_house(check, on=day), rules(), on=day))
        return
    if on is not None:
        raise typer.BadParameter("it goes with --check FILE", param_hint="--on")
    from setupcheck.errors import printable
    from setupcheck.rulebook.describe import describe

    own = read_house(house) if house is not None else None
    text = describe(own.rulebook if own is not None else rules(), rule).rstrip()
    sys.stdout.write("\n".join(map(printable, text.split("\n"))) + "\n")
