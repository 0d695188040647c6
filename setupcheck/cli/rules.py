"""`setupcheck rules [ID]`: the rule book."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from typing import Annotated

import typer


def command(
    rule: Annotated[str | None, typer.Argument(metavar="[ID]", help="Such as STACK-001.", show_default=False)] = None,
) -> None:
    """List the rules, or show one with its reason and sources.

    Example: setupcheck rules DATUM-001
    """
    from setupcheck.flow import rules
    from setupcheck.rulebook.describe import describe

    sys.stdout.write(describe(rules(), rule).rstrip() + "\n")
