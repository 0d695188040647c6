"""How a new job file is written: sizes in its units, errors with theirs, texts that stay inside their quotes. Lengths mm."""

from __future__ import annotations

import json
import math
import unicodedata
from typing import Literal

from setupcheck.errors import SetupcheckError, printable
from setupcheck.notation import plain
from setupcheck.record import record

LONGEST_TEXT = 200
"""Characters of a title or job number. Source: our screening choice; more is no title."""
_UNWRITABLE = frozenset({"Cc", "Cf", "Cs", "Cn", "Co", "Zl", "Zp"})
"""Controls, text direction, line ends, and what is no character. Source: Unicode general categories."""
STEPS = (1.0, 1.2, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0)
"""Figures that limits and errors are rounded to, times a power of ten. Source: our choice."""


def checked_text(text: str, what: str) -> str:
    """A title or job number, as it may stand in the file.

    Raises: SetupcheckError for nothing, too much, or characters that cannot be seen.

    >>> checked_text("  Wheel: 72 teeth # 3 ", "title")
    'Wheel: 72 teeth # 3'
    """
    text = text.strip()
    if not text:
        raise SetupcheckError(f"the {what} is empty. Write a few words, as on the drawing")
    if len(text) > LONGEST_TEXT:
        raise SetupcheckError(
            f"the {what} has {len(text)} characters. Write at most {LONGEST_TEXT}; more goes into a comment of the file"
        )
    for character in text:
        if unicodedata.category(character) in _UNWRITABLE:
            code = f"U+{ord(character):04X}"
            raise SetupcheckError(
                f"the {what} '{printable(text[:40])}' has the character {code}, which cannot be seen. Leave it out"
            )
    return text


def quoted_text(text: str) -> str:
    """A text as one YAML value in double quotes.

    >>> quoted_text('3" wheel: # 2')
    '"3\\\\" wheel: # 2"'
    """
    return json.dumps(text, ensure_ascii=False)  # what JSON escapes, YAML reads back


def nice(value: float, *, up: bool) -> float:
    """The next round figure at or beyond a positive value, 0 for 0.

    >>> nice(0.0173, up=True), nice(0.0173, up=False)
    (0.02, 0.015)
    """
    if value <= 0.0:
        return 0.0
    power = 10.0 ** math.floor(math.log10(value))
    part = value / power
    found = [s for s in STEPS if s >= part - 1e-9] if up else [s for s in STEPS if s <= part + 1e-9]
    return round((min(found) if up else max(found)) * power, 12)


def angle_words(angle: float) -> str:
    """An angle [rad] to the second, as a head is set.

    >>> angle_words(math.radians(3.5763))
    '3deg 34\\' 35"'
    """
    minutes, seconds = divmod(round(math.degrees(angle) * 3600.0), 60)
    degrees, minutes = divmod(minutes, 60)
    return f"{degrees}deg {minutes}' {seconds}\""


@record
class Measure:
    """Sizes and errors in the units of the file. All arguments mm."""

    units: Literal["mm", "in"]

    @property
    def unit(self) -> float:
        """One unit of the file [mm]."""
        return 1.0 if self.units == "mm" else 25.4

    def size(self, size: float) -> str:
        """A size or position as a bare number, to a micrometre or a tenth of a thou.

        >>> Measure("in").size(31.75), Measure("mm").size(31.75)
        ('1.25', '31.75')
        """
        return plain(round(size / self.unit, 3 if self.units == "mm" else 4) + 0.0)

    def exact(self, size: float) -> str:
        """A size as the planner gave it, to a millionth."""
        return plain(round(size / self.unit, 6) + 0.0)

    def told(self, size: float) -> str:
        """A size with its unit, for words."""
        return f"{self.size(size)} {self.units}"

    def with_limits(self, nominal: float, low: float, high: float) -> str:
        """A size with both deviations from it.

        >>> Measure("mm").with_limits(32.0, 0.026, 0.037)
        '32 +0.037/+0.026'
        """
        digits = 4 if self.units == "mm" else 5
        ends = [plain(round(end / self.unit, digits) + 0.0) for end in (high, low)]
        upper, lower = (end if end.startswith("-") or end == "0" else f"+{end}" for end in ends)
        return f"{self.exact(nominal)} {upper}/{lower}"

    def error(self, error: float) -> str:
        """An error with its unit, to a round figure.

        >>> Measure("mm").error(0.010), Measure("in").error(0.010)
        ('10 um', '0.4 thou')
        """
        if self.units == "in":
            return f"{plain(nice(error / 0.0254 * 0.95, up=True))} thou"
        return f"{plain(round(error * 1000.0, 3))} um"

    def limit(self, error: float, *, up: bool = True) -> str:
        """A limit with its unit, rounded up (or down) to a round figure."""
        scale, unit = (1000.0, "um") if self.units == "mm" else (1.0 / 0.0254, "thou")
        return f"{plain(nice(error * scale, up=up))} {unit}"

    def plus_minus(self, size: float, error: float) -> str:
        """A size with its tolerance, both ways."""
        away = plain(round(error / self.unit, 3 if self.units == "mm" else 4))
        return f"{self.size(size)} \u00b1{away}"

    def bore(self, size: float) -> float:
        """A plain bore at or below a size: whole millimetres, fives above 20 mm, eighths of an inch [mm]."""
        step = 3.175 if self.units == "in" else 5.0 if size >= 20.0 else 1.0
        return max(math.floor(size / step + 1e-9), 1) * step

    def up(self, size: float) -> float:
        """The next half millimetre, or two hundredths of an inch, at or above a size [mm]."""
        step = 0.5 if self.units == "mm" else 0.508
        return math.ceil(size / step - 1e-9) * step

    def down(self, size: float) -> float:
        """The next half millimetre, or two hundredths of an inch, at or below a size [mm]."""
        step = 0.5 if self.units == "mm" else 0.508
        return math.floor(size / step + 1e-9) * step
