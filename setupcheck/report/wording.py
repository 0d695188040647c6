"""Shop words for figures and readings, shared by the reports. Values come in base units (mm, rad)."""

from __future__ import annotations

import math
import unicodedata
from collections.abc import Iterator, Sequence

from setupcheck.errors import in_lines
from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import INCH, Book, Scope
from setupcheck.quantities.requirements import spoken
from setupcheck.quantities.scopes import stack_of
from setupcheck.rulebook import Finding

WIDTH = 80
FINE_BELOW = 0.010
"""Dial readings below this are shown one decimal finer [mm]. Source: our screening choice."""
ROUNDING = 1e-6
"""Share of a step of the dial that is taken for the noise of a sum. Source: our choice."""


def clean(text: str) -> str:
    """Text of a job file with control characters, terminal escapes and separators of lines taken out."""
    if text.isprintable():  # none of them, seen at once
        return text.strip()
    return "".join(" " if _obeyed(unicodedata.category(c)) else c for c in text).strip()


def _obeyed(category: str) -> bool:
    """Whether characters of a Unicode category do something instead of being seen: controls, direction marks, new lines."""
    return category[0] == "C" or category in ("Zl", "Zp")


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
    return in_lines(clean(text), WIDTH, first=first, rest=rest) or [first.rstrip()]


def title_of(scope: Scope) -> str:
    """A requirement in shop words: `run-out at teeth about bearings`; with the parts where both surfaces share a name."""
    stack = stack_of(scope)
    what = stack.require.what
    if stack.require.name:
        return clean(stack.require.name)
    if what == "torque":
        return f"torque of the joint in op {stack.of}" if stack.of else "torque"
    return f"{what} at {spoken(stack) or 'the mesh'}"


def on_the_dial(value: float, *, inches: bool, up: bool = False, step: float = 0.0) -> str:
    """A dial reading, rounded down (or up) to what an indicator shows: 0.1 um below 10 um, else 1 um; 0.01 or 0.1 thou.

    step  one division of the indicator, where it is known [mm]

    >>> on_the_dial(0.00437, inches=False), on_the_dial(0.0539, inches=False), on_the_dial(0.0254, inches=True)
    ('4.3 um', '53 um', '1.0 thou')
    >>> on_the_dial(0.00437, inches=False, step=0.002)
    '4 um'
    """
    unit = INCH["um"] if inches else "um"
    digits = (1 if inches else 0) + (value < FINE_BELOW)
    steps = value / step if step else value * FACTOR[unit] * 10**digits
    whole = math.ceil(steps - ROUNDING) if up else math.floor(steps + ROUNDING)
    return as_stated(whole * step, inches=inches) if step else show(whole / 10**digits / FACTOR[unit], unit, digits)


def inwards(value: float, steps: float, *, up: bool) -> float:
    """A value on whole steps, so many to a unit; what misses a step by the noise of a sum stands on it.

    >>> inwards(2.3016, 1000.0, up=True), inwards(2.3016, 1000.0, up=False)
    (2.302, 2.301)
    """
    whole = math.ceil(value * steps - ROUNDING) if up else math.floor(value * steps + ROUNDING)
    return whole / steps


def as_stated(value: float, *, inches: bool) -> str:
    """A reading with as few decimals as tell it: `3 um`, `12.5 um`, `0.25 thou`."""
    unit = INCH["um"] if inches else "um"
    texts = [show(value, unit, digits) for digits in range(4)]
    return next((t for t in texts if abs(float(t.split()[0]) - value * FACTOR[unit]) < 1e-6), texts[-1])


def is_the_entry(finding: Finding) -> bool:
    """Whether what a finding waits for is the very entry that it stands at, so that its head names what to fill."""
    return finding.verdict == "open" and finding.missing == (finding.at,)


def waiting_alike(shown: Sequence[Finding]) -> Iterator[tuple[str, tuple[Finding, ...]]]:
    """The findings, alike ones together with their rules: those at one place that wait for the same thing, and entries
    that are left out where the same was taken for them."""
    groups: dict[object, list[Finding]] = {}
    for finding in shown:
        if is_the_entry(finding):
            same: object = (finding.rule, finding.message, finding.house)
        elif finding.verdict == "open":
            same = (finding.at, finding.message, finding.missing, finding.key, finding.house)
        else:
            same = (finding.rule, finding.key, finding.house)
        groups.setdefault(same, []).append(finding)
    for group in groups.values():
        yield ", ".join(dict.fromkeys(finding.rule for finding in group)), tuple(group)
