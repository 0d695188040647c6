"""What is refused, told on the terminal: never with a character that the terminal would obey."""

from __future__ import annotations

import sys

from setupcheck.errors import SetupcheckError, printable


def tell(wrong: SetupcheckError) -> None:
    """Prints an error. Whoever raised it has cleaned the words of others in it; this holds where one was forgotten."""
    text = wrong.wrapped()
    print("\n".join(map(printable, text.split("\n"))), file=sys.stderr)
