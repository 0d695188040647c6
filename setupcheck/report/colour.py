"""The text report on a terminal with colour: the same words, verdicts tinted. Job text is never read as markup."""

from __future__ import annotations

import sys

from rich.console import Console
from rich.text import Text

TINTS = {"fail": "bold red", "open": "bold magenta", "warn": "bold yellow", "pass": "bold green", "waived": "dim"}


def print_coloured(text: str) -> None:
    """Print a report line by line, the word of a verdict at the head of a line tinted."""
    console = Console(file=sys.stdout, force_terminal=True, highlight=False, markup=False, soft_wrap=True)
    for line in text.splitlines():
        shown = Text(line)
        word = line.split(maxsplit=1)[0] if line.strip() else ""
        if word.lower() in TINTS:
            start = line.index(word)
            shown.stylize(TINTS[word.lower()], start, start + len(word))
        elif (line and line == line.upper() and line[0].isalpha()) or line.startswith(("WHAT WAS", "DIAL READING")):
            shown.stylize("bold")
        console.print(shown)
