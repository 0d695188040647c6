"""The text report on a terminal with colour: the same words, verdicts tinted. Job text is never read as markup."""

from __future__ import annotations

import sys
from typing import Literal

from rich.console import Console
from rich.text import Text

TINTS = {
    "unreadable": "bold red",
    "fail": "bold red",
    "open": "bold magenta",
    "warn": "bold yellow",
    "pass": "bold green",
    "waived": "dim",
    "skipped": "dim",
}


def _console(system: Literal["auto", "standard"]) -> Console:
    """A console that colours: NO_COLOR has been heard by whoever called, and is not asked again."""
    return Console(
        file=sys.stdout,
        force_terminal=True,
        no_color=False,
        color_system=system,
        highlight=False,
        markup=False,
        soft_wrap=True,
    )


def print_coloured(text: str) -> None:
    """Print a report line by line, the word of a verdict at the head of a line tinted."""
    console = _console("auto")
    if console.color_system is None:  # TERM says of itself that it knows none; whoever called has decided otherwise
        console = _console("standard")
    for line in text.splitlines():
        shown = Text(line)
        word = line.split(maxsplit=1)[0] if line.strip() else ""
        if word.lower() in TINTS:
            start = line.index(word)
            shown.stylize(TINTS[word.lower()], start, start + len(word))
        elif (line and line == line.upper() and line[0].isalpha()) or line.startswith(("WHAT WAS", "DIAL READING")):
            shown.stylize("bold")
        console.print(shown)
