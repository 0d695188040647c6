"""Angles in shop notation: degrees with minutes and seconds, decimal degrees, gon, mrad. All come out in rad."""

from __future__ import annotations

import math
import re

from setupcheck.notation.figures import NUMBER, figure, ratio_of, refuse_bare, refuse_odd_characters, text_of
from setupcheck.notation.lengths import without_plus_minus
from setupcheck.notation.units import ANGLE, RADIANS
from setupcheck.notation.wording import Given, NotationError, quoted, tidy

LARGEST = 100 * 2 * math.pi  # rad; a hundred turns of a crank; our screening choice

_STEPS = {"deg": 0, "\u00b0": 0, "'": 1, "arcmin": 1, '"': 2, "arcsec": 2}
_PART = re.compile(rf"\s*({NUMBER})\s*(deg|\u00b0|'|\"|arcmin|arcsec)(?![A-Za-z])")
_SIGN_INSIDE = re.compile(r".*(deg|\u00b0|'|arcmin)\s*[+-]")
_COLONS = re.compile(r"([+-]?)([0-9]+):([0-9]+)(?::([0-9]+))?")


def angle(given: Given, *, at_least: float | None = None) -> float:
    """An angle with its unit: `3deg 34' 35"`, `3.5764 deg`, `3.9737 gon`, `20"`, `1.5 arcmin`, `0.2 mrad`.

    A bare number is refused: degrees and radians would both be a guess.
    at_least: smallest angle allowed [rad].  Returns rad.  Raises NotationError.

    >>> round(math.degrees(angle("3deg 34' 35\\"")), 6)
    3.576389
    """
    return _angle(given, tidy(text_of(given, ANGLE)), at_least)


def angle_bound(given: Given) -> float:
    """An error bound of an angle, never negative: `20"`, `±20"`, `2'`. Returns rad.

    >>> round(math.degrees(angle_bound("\u00b118\\"")), 6)
    0.005
    """
    return _angle(given, without_plus_minus(text_of(given, ANGLE)), 0.0)


def _angle(given: Given, text: str, at_least: float | None) -> float:
    refuse_odd_characters(text, given, ANGLE)
    if colons := _COLONS.fullmatch(text):
        sign, degrees, minutes, seconds = colons.groups()
        written = f"{sign}{int(degrees)}deg {int(minutes)}'" + (f' {int(seconds)}"' if seconds else "")
        raise NotationError(f"{quoted(given)} may be an angle or a time of day", f"Write {written}")
    if _SIGN_INSIDE.match(text):
        raise NotationError(
            f"{quoted(given)} has a sign inside", f"Write one sign, in front of the degrees: {ANGLE.example}"
        )
    parts = _compound(text)
    if parts is not None and len(parts) > 1:
        value = _joined(given, text, parts)
    else:
        read = figure(given, ANGLE, text=text)
        if not read.unit:
            number = text.lstrip("+")
            refuse_bare(read, ANGLE, f'Write the unit: {number} deg, or {number}" for seconds of arc')
        value = read.times(ANGLE.units[read.unit])
        value = value if read.unit in RADIANS else math.radians(value)
    if not abs(value) <= LARGEST:
        raise NotationError(f"{quoted(given)} is more than a hundred turns", "Check the number and its unit")
    if at_least is not None and value < at_least:
        if at_least == 0.0:
            raise NotationError(f"{quoted(given)} is below zero", "Write 0 or more, without a minus sign")
        raise NotationError(f"{quoted(given)} is too small", f"Write {math.degrees(at_least):.6g} deg or more")
    return value


def _compound(text: str) -> list[tuple[str, str]] | None:
    """Numbers and their units when the whole text is a row of degrees, minutes, seconds; else None."""
    body = text[1:].lstrip() if text[:1] in ("+", "-") else text
    parts, at = [], 0
    while at < len(body):
        found = _PART.match(body, at)
        if not found:
            return None
        parts.append((found[1], found[2]))
        at = found.end()
    return parts


def _joined(given: Given, text: str, parts: list[tuple[str, str]]) -> float:
    """Degrees, minutes and seconds added up exactly, in seconds of arc, then made to rad once."""
    steps = [_STEPS[unit] for _, unit in parts]
    if steps != sorted(set(steps)):
        raise NotationError(
            f"{quoted(given)} has degrees, minutes and seconds out of order", f"Write each once, as in {ANGLE.example}"
        )
    for number, _ in parts[:-1]:
        if not number.isdigit():
            raise NotationError(
                f"{quoted(given)} has a decimal before its last part",
                f"Write whole degrees and minutes, as in {ANGLE.example}",
            )
    for (number, _), step in list(zip(parts, steps, strict=True))[1:]:
        if float(number) >= 60:
            called = "minutes" if step == 1 else "seconds"
            raise NotationError(
                f"{quoted(given)} has {number} {called}", f"Write fewer than 60 {called} and carry the rest"
            )
    seconds_up, seconds_low = 0, 1
    for number, unit in parts:
        up, low = ratio_of(number, given, ANGLE)
        each = 3600 // 60 ** _STEPS[unit]
        seconds_up, seconds_low = seconds_up * low + up * each * seconds_low, seconds_low * low
    degrees = seconds_up / (seconds_low * 3600)
    return math.radians(-degrees if text.startswith("-") else degrees)
