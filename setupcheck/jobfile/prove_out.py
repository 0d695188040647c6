"""Shallow gaps cut before the teeth, and the dial over a ball in each. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
import re

from pydantic import Field

from setupcheck.jobfile.types import Bound, Reading, Shop, Size


class ProveOut(Shop):
    """Shallow gaps for a ball: `{depth: 0.8 mm, about: hub, readings: {gap 1: 0 um, gap 19: 6 um, gap 37: 11 um}, …}`.

    depth        of the shallow gaps [mm];  ball  its diameter, only to take the same one again
    about        the surface whose axis the part turned about while it was read
    readings     of the dial by number of the gap, in the order of cutting; more is farther out [mm]
    uncertainty  of one reading, expanded, k = 2 [mm]
    """

    depth: Size
    ball: Size | None = None
    about: str | None = None
    readings: dict[str, Reading] = Field(default_factory=dict)
    uncertainty: Bound | None = None

    @property
    def by_gap(self) -> dict[int, float]:
        """Readings by number of the gap [mm]; the reader has seen to it that each names one."""
        return {number: value for name, value in self.readings.items() if (number := gap_number(name)) is not None}


_GAP = re.compile(r"(?:gap\s+)?([1-9]\d{0,3})")


def gap_number(name: str) -> int | None:
    """The number that `gap 19` names; None where it names none."""
    found = _GAP.fullmatch(name.strip())
    return int(found[1]) if found else None
