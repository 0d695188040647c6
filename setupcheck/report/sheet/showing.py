"""Values of the job file in the units of the file, as they go on paper. Lengths mm, angles rad."""

from __future__ import annotations

import math

from setupcheck.flow import Review
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.notation import FACTOR, show, show_angle
from setupcheck.quantities.sized import limits_of
from setupcheck.report.wording import as_stated, clean, inwards

MINUTE = 2.9e-4
"""A minute of arc [rad], from which on small angles are shown in minutes. Source: our choice."""
LONGEST = 160
"""Characters of one text of the job file on paper. Source: our choice; two lines of it."""


def paper(text: str, most: int = LONGEST) -> str:
    """Text of the job file for paper: nothing a reader of text would obey, and cut short where it is endless."""
    told = " ".join(clean(text[: 4 * most]).split())
    return told if len(told) <= most else told[: most - 1] + "…"


class Showing:
    """How one job shows its values."""

    def __init__(self, found: Review) -> None:
        self.inches = found.book.inches

    def fine(self, value: float) -> str:
        """A small length, with as few decimals as tell it."""
        return as_stated(value, inches=self.inches)

    def length(self, value: float) -> str:
        """A size."""
        unit, digits = ("in", 5) if self.inches else ("mm", 4)
        number, _, word = show(value, unit, digits).partition(" ")
        whole, _, decimals = number.partition(".")
        return f"{whole}.{decimals.rstrip('0').ljust(3 if self.inches else 2, '0')} {word}"

    def stock(self, value: float) -> str:
        """Stock that is left somewhere, never said to be more than it is."""
        unit, steps, digits = self._stock
        return show(math.floor(value * steps + 1e-9) / steps, unit, digits)

    def missing(self, value: float) -> str:
        """Stock that is missing somewhere, never said to be less than it is."""
        unit, steps, digits = self._stock
        return show(math.ceil(value * steps - 1e-9) / steps, unit, digits)

    @property
    def _stock(self) -> tuple[str, float, int]:
        """Unit, steps in a mm, digits."""
        return ("in", 1000.0 / 25.4, 3) if self.inches else ("mm", 100.0, 2)

    def angle(self, value: float) -> str:
        """An angle that is set, in all three spellings, so that nobody converts at the machine."""
        return f"{show_angle(value, 'dms', 0)} | {show_angle(value, 'gon', 4)} | {show_angle(value, 'deg', 4)}"

    def small_angle(self, value: float) -> str:
        """A bound on an angle."""
        minutes = abs(value) >= MINUTE
        return show(value, "arcmin" if minutes else "arcsec", 1 if minutes else 0)

    def heat(self, value: float) -> str:
        return f"{value:g} degC"

    def planned(self, given: Deviation | None) -> str:
        """What the job file says of an error: `up to 6 um; measured 4 um ± 1 um, high at tooth 14`; empty where it is silent."""
        if given is None:
            return ""
        parts = []
        if given.at_most is not None:
            parts.append(f"up to {self.fine(given.at_most)}")
        if given.measured is not None:
            known = f" ± {self.fine(2.0 * given.u)}" if given.u else ""
            high = f", high at {paper(given.high_at, 30)}" if given.high_at else ""
            parts.append(f"measured {self.fine(given.measured)}{known}{high}")
        if not parts and given.device:
            parts.append(f"typical of {paper(given.device, 30)}")
        return "; ".join(parts)

    def size(self, given: Dimension) -> str:
        """A size with its limits, and as measured."""
        parts = []
        if given.nominal is not None:
            fit = f" {given.fit}" if given.fit else ""
            number, _, unit = self.length(given.nominal).partition(" ")
            limits = ""
            if given.lower is not None and given.upper is not None and not given.fit:
                same = abs(given.lower + given.upper) < 1e-9
                both = f" {self._sign(given.upper)} / {self._sign(given.lower)}"
                limits = f" ± {self.fine(given.upper)}" if same else both
            between = limits_of(given) if given.fit else None
            told = f": {self._limit(between[0], up=True)} to {self._limit(between[1], up=False)}" if between else ""
            parts.append(f"{number}{fit} {unit}{limits}{told}")
        if given.measured is not None:
            parts.append(f"measured {self.length(given.measured)}")
        return "; ".join(parts)

    def _limit(self, value: float, *, up: bool) -> str:
        """A limit of size to the step it is measured by, rounded inwards; without its unit."""
        unit, digits = ("in", 4) if self.inches else ("mm", 3)
        return show(inwards(value, FACTOR[unit] * 10**digits, up=up), unit, digits).partition(" ")[0]

    def _sign(self, value: float) -> str:
        return ("+" if value > 0.0 else "-" if value < 0.0 else "") + self.fine(abs(value))
