"""Lengths, error bounds and ranges in shop notation. Everything comes out in mm."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Literal, get_args

from setupcheck.notation.figures import Figure, figure, refuse_absurd, refuse_bare, text_of
from setupcheck.notation.units import LENGTH
from setupcheck.notation.wording import Given, NotationError, plain, quoted, tidy

Units = Literal["mm", "in"]  # what a bare size means in a job file

LONGEST = 10_000.0  # mm; no part of this trade is longer than 10 m; our screening choice
FILE_UNITS = get_args(Units)


def length(
    given: Given,
    *,
    units: Units,
    unit_needed: bool = False,
    at_least: float | None = None,
    longest: float = LONGEST,
) -> float:
    """A size or a position: `12 um`, `0.0005 in`, `1 1/4 in`, `0.5 thou`, or a bare number in the file's units.

    unit_needed  refuse a bare number (error entries: run-out, clearance, uncertainty)
    at_least     smallest value allowed [mm];  longest  largest [mm]
    Returns mm. Raises NotationError; beyond `longest` too.

    >>> length("12 um", units="mm"), length(1.25, units="in"), length("1 1/4 in", units="mm")
    (0.012, 31.75, 31.75)
    """
    read = figure(given, LENGTH, units=units)
    return length_in_mm(read, units, unit_needed=unit_needed, at_least=at_least, longest=longest)


def bound(given: Given, *, units: Units = "mm", unit_needed: bool = True) -> float:
    """An error bound, never negative: `10 um`, `±10 um`. It needs its unit unless `unit_needed` is False. Returns mm.

    >>> bound("\u00b10.0005 in"), bound("+-3 um")
    (0.0127, 0.003)
    """
    read = figure(given, LENGTH, text=without_plus_minus(text_of(given, LENGTH)), units=units)
    return length_in_mm(read, units, unit_needed=unit_needed, at_least=0.0)


def length_range(
    given: Sequence[Given] | str, *, units: Units = "mm", unit_needed: bool = True, at_least: float | None = None
) -> tuple[float, float]:
    """Smallest and largest length: `[2 um, 14 um]`, `2 um to 14 um`, `2..14 um`. Returns (low, high) in mm.

    >>> length_range(["2 um", "14 um"]), length_range("2 to 14 um")
    ((0.002, 0.014), (0.002, 0.014))
    """
    return span(
        given,
        lambda one: length(one, units=units, unit_needed=unit_needed, at_least=at_least),
        example="[2 um, 14 um]",
    )


def span(given: Sequence[Given] | str, read: Callable[[Given], float], *, example: str) -> tuple[float, float]:
    """Two values, the smaller first, each read by `read` (any reading function of this package).

    >>> from setupcheck.notation.amounts import temperature
    >>> span(["5 degC", "45 degC"], temperature, example="[5 degC, 45 degC]")
    (5.0, 45.0)
    """
    ends: Sequence[Given]
    if isinstance(given, str):
        ends = _ends_of_text(given, example)
    elif isinstance(given, list | tuple):
        ends = given
    else:
        raise NotationError(f"{quoted(given)} is not a smallest and a largest value", f"Write {example}")
    if len(ends) != 2:
        count = {0: "no value", 1: "one value"}.get(len(ends), f"{len(ends)} values")
        raise NotationError(f"the list has {count} where a smallest and a largest stand", f"Write two: {example}")
    low, high = read(ends[0]), read(ends[1])
    if low > high:
        raise NotationError(
            f"the first value {quoted(ends[0])} is larger than the second {quoted(ends[1])}",
            f"Write the smaller first: [{ends[1]}, {ends[0]}]",
        )
    return low, high


def without_plus_minus(text: str) -> str:
    """The text behind a leading ± (also `+-`, `+/-`). A second sign behind it is refused."""
    text = tidy(text)
    if not text.startswith("\u00b1"):
        return text
    rest = text[1:].strip()
    if rest[:1] in ("+", "-"):
        raise NotationError(f"{quoted(text)} has a second sign", f"Write \u00b1{rest[1:].strip()}")
    return rest


def length_in_mm(
    read: Figure, units: Units, *, unit_needed: bool = False, at_least: float | None = None, longest: float = LONGEST
) -> float:
    """The value of a figure read as a length, within its limits [mm]."""
    if units not in FILE_UNITS:
        raise ValueError(f"units must be one of {FILE_UNITS}, not {units!r}")
    if not read.unit and unit_needed:
        refuse_bare(read, LENGTH, _with_units(read.number, units))
    value = read.times(LENGTH.units[read.unit or units])
    if not abs(value) <= longest:
        refuse_absurd(read, f"longer than {longest / 1000.0:g} m")
    if at_least is not None and value < at_least:
        if at_least == 0.0:
            raise NotationError(f"{quoted(read.given)} is below zero", "Write 0 or more, without a minus sign")
        raise NotationError(f"{quoted(read.given)} is too small", f"Write {plain(at_least)} mm or more")
    return value


def _with_units(number: float, units: Units) -> str:
    """What a bare error may have meant: hundredths of a millimetre stand below one, micrometres above."""
    small = "um" if units == "mm" else "thou"
    says = "An error entry needs its unit: write"
    if number == 0:
        return f"{says} 0 {small}"
    if abs(number) < 1:
        return f"{says} {plain(number)} {units} or {plain(round(number * 1000, 9))} {small}"
    return f"{says} {plain(number)} {small}, or {plain(number)} {units} if that is meant"


def _ends_of_text(text: str, example: str) -> list[Given]:
    tidied = tidy(text)
    for mark in ("..", " to "):
        if tidied.count(mark) == 1:
            low, high = (part.strip() for part in tidied.split(mark))
            unit = high.lstrip("+-.0123456789 ")
            bare = low and not low.lstrip("+-.0123456789eE ")
            return [f"{low} {unit}" if bare and unit else low, high]
    if "," in tidied:
        raise NotationError(f"{quoted(text)} is one text, not two values", f"Write a list in brackets: {example}")
    raise NotationError(f"{quoted(text)} is not a smallest and a largest value", f"Write {example}")
