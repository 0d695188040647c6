"""Shop words for figures and causes, shared by the reports. Values come in base units (mm, rad)."""

from __future__ import annotations

import textwrap
import unicodedata

from setupcheck.notation import show
from setupcheck.quantities.book import INCH, Book, Scope

WIDTH = 80


def clean(text: str) -> str:
    """Text of a job file with control characters and terminal escapes taken out."""
    return "".join(c if unicodedata.category(c)[0] != "C" else " " for c in text).strip()


def in_unit(value: float, unit: str, digits: int) -> str:
    """A number in its display unit, without the unit."""
    return show(value, unit, digits).removesuffix(f" {unit}").removesuffix('"').removesuffix(" N m")


def unit_of(book: Book, scope: Scope) -> tuple[str, int]:
    """Display unit and decimals of a stack."""
    return book.unit("stack.worst", scope), book.digits("stack.worst", scope)


def finer(unit: str, *, inches: bool) -> tuple[str, int]:
    """Unit and decimals in which the causes of a stack are said: micrometres even where the stack counts in mm."""
    if unit in ("mm", "in", "um", "thou"):
        return (INCH["um"], 2) if inches else ("um", 1)
    return unit, 1


def wrap(text: str, *, first: str = "", rest: str = "") -> list[str]:
    """Lines of at most 80 columns, everything a terminal would obey taken out."""
    return textwrap.wrap(
        clean(text),
        WIDTH,
        initial_indent=first,
        subsequent_indent=rest,
        break_long_words=False,
        break_on_hyphens=False,
    ) or [first.rstrip()]


def cause_in_words(key: str) -> str:
    """`op 40, hub in spigot: clearance` as a phrase: `clearance of hub in spigot (op 40)`."""
    place, colon, what = key.rpartition(": ")
    if not colon:
        op, comma, rest = key.partition(", ")
        return f"{rest} ({op})" if comma and op.startswith("op ") else key
    op, comma, rest = place.partition(", ")
    if comma and op.startswith("op "):
        return f"{what} of {rest} ({op})"
    return f"{what} of {place}"
