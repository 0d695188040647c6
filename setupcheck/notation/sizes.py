"""A size with its tolerance as a drawing writes it: `32 H6`, `32.041 ±0.003`, `32 +0.021/0`. Everything in mm."""

from __future__ import annotations

import re
from typing import NoReturn

from setupcheck.notation.figures import NUMBER, Figure, figure, refuse_odd_characters, text_of
from setupcheck.notation.lengths import LONGEST, Units, length_in_mm
from setupcheck.notation.units import LENGTH, Kind
from setupcheck.notation.wording import Given, NotationError, quoted, tidy
from setupcheck.record import record

SIZE = Kind("length", "a size", LENGTH.units, LENGTH.write, "32 H6 or 32.041 \u00b10.003", LENGTH.traps)

# Letters of the fundamental deviations and the range of grades: ISO 286-1 (IT01 and IT0 are not for fits).
FIT_LETTERS = (
    "A", "B", "C", "CD", "D", "E", "EF", "F", "FG", "G", "H", "J", "JS", "K", "M", "N", "P", "R", "S", "T", "U", "V",
    "X", "Y", "Z", "ZA", "ZB", "ZC",
)  # fmt: skip
_LETTERS = frozenset(FIT_LETTERS) | {letter.lower() for letter in FIT_LETTERS}
FINEST_GRADE, COARSEST_GRADE = 1, 18

_UNIT = r"[A-Za-z\"][A-Za-z.\"]*"
_NOMINAL = re.compile(rf"([+-]?\s?(?:[0-9]+ [0-9]+/[0-9]+|[0-9]+/[0-9]+|{NUMBER})(?:\s?(?:{_UNIT}))?)\s*(.*)")
_ONE = rf"([+-]?\s?{NUMBER}(?:\s?{_UNIT})?)"
_ONE_DEVIATION = re.compile(_ONE)
_TWO_DEVIATIONS = re.compile(rf"{_ONE}(?:\s*/\s*|\s+|(?=[+-])){_ONE}")
_FIT = re.compile(r"(.*?[0-9.\"A-Za-z])(\s*)(?<![A-Za-z])([A-Za-z]{1,2})([0-9]{1,2})")
_FIT_APART = re.compile(r"(.*?)\s([A-Za-z]{1,2})\s+([0-9]{1,2})")
_TWO_CLASSES = r".*[A-Za-z][0-9]{1,2}\s*/\s*[A-Za-z]{1,2}[0-9]{1,2}"


@record
class Size:
    """A nominal size and what may depart from it.

    nominal       mm
    lower, upper  deviations from the nominal size [mm], lower <= upper; None when no limits are written
    fit           tolerance class of ISO 286, `H6`; its limits are not looked up here. None without one
    """

    nominal: float
    lower: float | None = None
    upper: float | None = None
    fit: str | None = None


def size(given: Given, *, units: Units, at_least: float | None = None) -> Size:
    """A size: bare (`120`), with a class (`48 h6`), with limits (`32 mm ±3 um`, `32 +0.021/0`, `32 -0.009 -0.025`).

    Bare numbers take the file's units. Deviations without unit take the unit of the nominal size; deviations with a
    unit beside a bare nominal size are read only when it is the file's unit.
    at_least: smallest nominal size allowed [mm].  Raises NotationError.

    >>> size("32 H6", units="mm")
    Size(nominal=32.0, lower=None, upper=None, fit='H6')
    >>> size("32 mm \u00b13 um", units="mm")
    Size(nominal=32.0, lower=-0.003, upper=0.003, fit=None)
    """
    text = tidy(text_of(given, SIZE))
    refuse_odd_characters(text, given, SIZE)
    if "\u00b1" in text:
        return _symmetrical(given, text, units, at_least)
    if not isinstance(given, str):
        return Size(_nominal(given, text, units, at_least))
    if "/" in text and re.fullmatch(_TWO_CLASSES, text):
        raise NotationError(
            f"{quoted(given)} names the classes of two parts", "Write the class of this surface alone, as in 32 H7"
        )
    if found := _FIT.fullmatch(text):
        return _with_fit(given, found, units, at_least)
    if (found := _FIT_APART.fullmatch(text)) and found[2] in _LETTERS:
        raise NotationError(f"{quoted(given)} has a gap in its class", f"Write {found[1]} {found[2]}{found[3]}")
    if found := _NOMINAL.fullmatch(text):
        nominal, rest = found.groups()
        if deviations := _TWO_DEVIATIONS.fullmatch(rest):
            return _with_limits(given, nominal, deviations, units, at_least)
        if rest[:1] in ("+", "-") and _ONE_DEVIATION.fullmatch(rest):
            raise NotationError(f"{quoted(given)} has one deviation", f"Write both: {nominal.strip()} {rest}/0")
    return Size(_nominal(given, text, units, at_least))


def _nominal(given: Given, text: str, units: Units, at_least: float | None) -> float:
    return length_in_mm(figure(given, SIZE, text=text, units=units), units, at_least=at_least)


def _with_fit(given: Given, found: re.Match[str], units: Units, at_least: float | None) -> Size:
    nominal, _, letters, grade = found.groups()
    if letters not in _LETTERS:
        meant = letters.upper() if letters.upper() in FIT_LETTERS else None
        advice = (
            f"Write {meant}{grade} for a bore, {meant.lower()}{grade} for a shaft"
            if meant
            else "Write a class such as H6 or h6"
        )
        raise NotationError(f"{quoted(given)} has the class '{letters}{grade}', which ISO 286 does not have", advice)
    if grade.startswith("0") or not FINEST_GRADE <= int(grade) <= COARSEST_GRADE:
        grades = f"from {FINEST_GRADE} to {COARSEST_GRADE}"
        raise NotationError(f"{quoted(given)} has the grade {grade}", f"Write a grade {grades}, as in {letters}6")
    if _FIT.fullmatch(nominal):
        raise NotationError(f"{quoted(given)} has two classes", "Write the class of this surface alone, as in 32 H7")
    whole = _NOMINAL.fullmatch(nominal)
    if whole and (_TWO_DEVIATIONS.fullmatch(whole[2]) or _ONE_DEVIATION.fullmatch(whole[2])):
        _refuse_limits_and_class(given)
    return Size(_nominal(given, nominal, units, at_least), fit=f"{letters}{grade}")


def _symmetrical(given: Given, text: str, units: Units, at_least: float | None) -> Size:
    nominal, _, deviation = (part.strip() for part in text.partition("\u00b1"))
    if not nominal:
        raise NotationError(f"{quoted(given)} has no nominal size", f"Write it before the tolerance: 32 {text}")
    if not re.match(r"[0-9.]", deviation):
        raise NotationError(
            f"{quoted(given)} has no plain number after the \u00b1 sign", "Write it as in 32.041 \u00b10.003"
        )
    if _FIT.fullmatch(deviation) or _FIT.fullmatch(nominal):
        _refuse_limits_and_class(given)
    read = figure(given, SIZE, text=nominal, units=units)
    half = figure(given, SIZE, text=deviation, units=units)
    value = length_in_mm(read, units, at_least=at_least)
    away = _deviation(given, half, half.unit, nominal=read, written=nominal, units=units)
    return Size(value, 0.0 - away, away)


def _with_limits(given: Given, nominal: str, found: re.Match[str], units: Units, at_least: float | None) -> Size:
    read = figure(given, SIZE, text=nominal, units=units)
    first, second = (figure(given, SIZE, text=text, units=units) for text in found.groups())
    for end, text in zip((first, second), found.groups(), strict=True):
        if end.ratio[0] and text[0] not in "+-":
            raise NotationError(
                f"{quoted(given)} has a deviation without sign",
                "Write both signs, as in 32 +0.021/-0.005 or 32 +0.021/0",
            )
    if first.unit and not second.unit and second.ratio[0]:
        raise NotationError(
            f"{quoted(given)} has a unit on its first deviation only",
            f"Write it on both: {found[1]}/{found[2]} {first.unit}",
        )
    value = length_in_mm(read, units, at_least=at_least)
    shared = second.unit or first.unit  # `+21/-5 um`: the unit behind stands for both
    ends = [
        _deviation(given, end, end.unit or shared, nominal=read, written=nominal, units=units)
        for end in (first, second)
    ]
    return Size(value, min(ends), max(ends))


def _deviation(given: Given, read: Figure, unit: str, *, nominal: Figure, written: str, units: Units) -> float:
    """A deviation in mm. `32 ±3 um` is refused: by the letter it is a size of 32 um, and nobody means that."""
    if unit and not nominal.unit and LENGTH.units[unit] != LENGTH.units[units]:
        whole = tidy(str(given)).replace(written.strip(), f"{written.strip()} {units}", 1)
        raise NotationError(f"{quoted(given)} has a unit on its tolerance only", f"Write it on the size too: {whole}")
    value = read.times(LENGTH.units[unit or nominal.unit or units])
    if not abs(value) <= LONGEST:
        raise NotationError(f"{quoted(given)} has a deviation of more than 10 m", "Check the number and its unit")
    return value


def _refuse_limits_and_class(given: Given) -> NoReturn:
    raise NotationError(f"{quoted(given)} has limits and a class", "Write one of them: 32 H6, or 32 +0.016/0")
