"""Which usual worm a measured axial pitch may be: modules, diametral pitches, threads per inch, pitches in sixteenths. mm."""

from __future__ import annotations

import math
from collections.abc import Iterator

from setupcheck.record import record
from setupcheck.worm.closing import INCH
from setupcheck.worm.geometry import above_zero, not_below_zero

FINE = (0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9)
MIDDLE = (
    1.0,
    1.125,
    1.25,
    1.375,
    1.5,
    1.75,
    2.0,
    2.25,
    2.5,
    2.75,
    3.0,
    3.5,
    4.0,
    4.5,
    5.0,
    5.5,
    6.0,
    6.5,
    7.0,
    8.0,
    9.0,
)
MODULES = (*FINE, *MIDDLE, 10.0, 11.0, 12.0, 14.0, 16.0, 18.0, 20.0, 22.0, 25.0, 28.0, 32.0)
"""ISO 54, both series, and the finer ones that older lists had (from memory)."""
WORM_MODULES = (1.6, 3.15, 6.3, 12.5)
"""Axial modules of worms in the steps of preferred numbers that ISO 54 does not have; DIN 780-2 (from memory)."""
COARSE = (1.0, 1.25, 1.5, 1.75, 2.0, 2.25, 2.5, 3.0, 3.5, 4.0, 5.0, 6.0, 7.0, 8.0, 9.0, 10.0, 12.0, 14.0, 16.0, 18.0)
DIAMETRAL_PITCHES = (*COARSE, 20.0, 22.0, 24.0, 26.0, 28.0, 30.0, 32.0, 36.0, 40.0, 48.0, 64.0, 72.0, 80.0)
"""Usual diametral pitches [1/in]. Common practice (from memory)."""
PER_INCH = (2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 16, 18, 20, 22, 24, 28, 32)
"""Threads per inch that change gears cut without odd ones. Common practice (from memory)."""
SIXTEENTHS = (3, 5, 6, 7, 10, 12, 14, 20, 24, 28)
"""Pitches in sixteenths of an inch that are no whole number of threads per inch. Common practice (from memory)."""


@record
class Candidate:
    """One usual worm: what it is called, its axial pitch and module [mm]."""

    name: str
    pitch: float

    @property
    def module(self) -> float:
        return self.pitch / math.pi


def usual() -> Iterator[Candidate]:
    """Every usual axial pitch. Source: the series of this module."""
    for m in (*MODULES, *WORM_MODULES):
        yield Candidate(f"module {m:g} mm", math.pi * m)
    for dp in DIAMETRAL_PITCHES:
        yield Candidate(f"diametral pitch {dp:g}", math.pi * INCH / dp)
    for n in PER_INCH:
        yield Candidate(f"{n} threads per inch", INCH / n)
    for n in SIXTEENTHS:
        over = math.gcd(n, 16)
        yield Candidate(f"pitch {n // over}/{16 // over} in", INCH * n / 16.0)


def candidates(pitch: float, *, uncertainty: float) -> list[Candidate]:
    """All usual axial pitches within the uncertainty of a measured one, the nearest first.

    pitch, uncertainty  as measured, expanded (k = 2) [mm]; a worn thread keeps its pitch
    Raises: ValueError for a pitch that is not above zero.  Source: `usual`.

    >>> [c.name for c in candidates(7.99, uncertainty=0.02)]
    ['diametral pitch 10']
    >>> [c.name for c in candidates(7.92, uncertainty=0.08)]
    ['pitch 5/16 in', 'diametral pitch 10', 'module 2.5 mm']
    """
    above_zero(pitch=pitch)
    not_below_zero(uncertainty=uncertainty)
    inside = [c for c in usual() if abs(c.pitch - pitch) <= uncertainty]
    return sorted(inside, key=lambda c: (abs(c.pitch - pitch), c.name))


def nearest(pitch: float) -> Candidate:
    """The usual axial pitch nearest to a measured one. Raises: ValueError for a pitch not above zero.  Source: `usual`.

    >>> nearest(7.7).name
    'module 2.5 mm'
    """
    above_zero(pitch=pitch)
    return min(usual(), key=lambda c: (abs(c.pitch - pitch), c.name))
