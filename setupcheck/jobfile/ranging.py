"""A range of values for one entry, as it is typed: `2 um..20 um/7`. Decimal numbers throughout, so that values print exactly."""

from __future__ import annotations

import re
from decimal import Decimal

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.changing import Change
from setupcheck.notation import quoted
from setupcheck.record import record

USUAL = 9
"""Values of a range that says no number of them. Source: our choice."""
MOST = 101
"""Most values of a range. Source: our screening choice; each is a review of its own."""
FIGURES = 3
"""Digits of the step between two values that are kept. Source: our choice."""
PARTS = 20
"""The step of a turning point is the power of ten at or below this part of the step between values. Source: our choice."""

_END = r"\s*(±?)([+-]?(?:[0-9]{1,12}(?:\.[0-9]{1,12})?|\.[0-9]{1,12}))(\s*(?:[^\s0-9.,/][^0-9.,/]{0,11}|1/min)?)\s*"
_RANGE = re.compile(f"{_END}\\.\\.{_END}(?:/\\s*([0-9]{{1,6}})\\s*)?")


@record
class Range:
    """Values of one entry, evenly spaced.

    key      path of the entry
    sign     what stands before each number (`±` or nothing);  unit  what stands behind it
    numbers  the values, decimal and in that unit;  step  of a turning point between two of them
    paired   the entry has a smallest and a largest value, as a clearance has: both are set alike
    """

    key: str
    sign: str
    unit: str
    numbers: tuple[Decimal, ...]
    step: Decimal
    paired: bool = False

    def change(self, number: Decimal) -> Change:
        """The entry at one value."""
        value = self.written(number)
        return Change(self.key, f"[{value}, {value}]" if self.paired else value)

    def written(self, number: Decimal) -> str:
        """A value as it is typed."""
        return f"{self.sign}{number:f}{self.unit}"


def read_range(change: Change) -> Range | None:
    """The range that a change asks for; None where it is one value. A text with `..` in it stands in quotes.

    Raises: SetupcheckError where `..` does not stand between two numbers of one unit.

    >>> found = read_range(Change("a", "2um..20um/7"))
    >>> [found.written(n) for n in found.numbers], found.written(found.step)
    (['2 um', '5 um', '8 um', '11 um', '14 um', '17 um', '20 um'], '0.1 um')
    """
    if ".." not in change.value or change.value[0] in "\"'[{":
        return None
    found = _RANGE.fullmatch(change.value)
    if found is None:
        raise _refused(
            change, "is no range of numbers", "Write two numbers of one unit, as in 2 um..20 um, or 2 um..20 um/7"
        )
    sign, low, unit, sign_too, high, unit_too, asked = found.groups()
    if (unit.strip() and unit.split() != unit_too.split()) or (sign != sign_too and sign_too):
        raise _refused(change, "has two ends that are not written alike", "Write both with one unit, as in 2 um..20 um")
    first, last = Decimal(low), Decimal(high)
    count = int(asked) if asked is not None else USUAL
    if first == last:
        raise _refused(change, "begins where it ends", f"Write one value: {change.key}={low}{unit_too}")
    if not 2 <= count <= MOST:
        raise _refused(change, f"asks for {count} values", f"Write from 2 to {MOST} of them, as in 2 um..20 um/7")
    apart = (last - first) / (count - 1)
    grain = min(_ten_below(apart) * Decimal(10) ** (1 - FIGURES), _grain(first), _grain(last))
    inner = (_on(first + apart * i, grain) for i in range(1, count - 1))
    word = unit_too.strip()
    spaced = f" {word}" if word[:1].isalnum() or word[:1] == "%" else word
    return Range(change.key, sign, spaced, (first, *inner, last), _ten_below(apart / PARTS))


def _grain(number: Decimal) -> Decimal:
    """One of the last digit as written."""
    exponent = number.as_tuple().exponent
    assert isinstance(exponent, int)
    return Decimal(10) ** exponent


def _ten_below(number: Decimal) -> Decimal:
    """The power of ten at or below a size."""
    return Decimal(10) ** abs(number).adjusted()


def _on(number: Decimal, grain: Decimal) -> Decimal:
    """A number on a grain, without zeros at its end.

    >>> _on(Decimal("4.2500"), Decimal("0.01")), _on(Decimal("20.00"), Decimal("0.01"))
    (Decimal('4.25'), Decimal('20'))
    """
    rounded = number.quantize(grain).normalize()
    exponent = rounded.as_tuple().exponent
    return rounded.quantize(Decimal(1)) if isinstance(exponent, int) and exponent > 0 else rounded


def _refused(change: Change, problem: str, hint: str) -> SetupcheckError:
    return SetupcheckError(f"--set {change.told()}: {quoted(change.value)} {problem}. {hint}")
