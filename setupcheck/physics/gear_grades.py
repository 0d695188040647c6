"""Limits of ISO 1328-1:1995 and -2:1997 for cylindrical gears, grades 0 to 12. Lengths mm (the standard tabulates um).

Formulas for grade 5 with the geometric means of the table's ranges, other grades by sqrt(2) per step, then rounded.
Source: ISO 1328-1:1995, ISO 1328-2:1997, formulas from memory; recomputed cells agree with the printed table where compared.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import pairwise

MODULE_RANGES = (0.5, 2.0, 3.5, 6.0, 10.0, 16.0, 25.0, 40.0, 70.0)
"""Ends of the module ranges [mm]. Source: ISO 1328-1:1995 (from memory)."""
DIAMETER_RANGES = (5.0, 20.0, 50.0, 125.0, 280.0, 560.0, 1000.0, 1600.0, 2500.0, 4000.0, 6000.0, 8000.0, 10000.0)
"""Ends of the reference diameter ranges [mm]. Source: ISO 1328-1:1995 (from memory)."""

LIMITS = ("single-pitch", "cumulative-pitch", "run-out")
"""Figures a grade can limit: f_pt, F_p, F_r."""


def range_mean(value: float, ends: Sequence[float]) -> float:
    """Geometric mean of the range a value falls in; the upper end belongs to the range.

    Raises: ValueError outside the table.  Source: ISO 1328-1:1995 (from memory).

    >>> round(range_mean(100.0, DIAMETER_RANGES), 2)
    79.06
    """
    for low, high in pairwise(ends):
        if low < value <= high or value == low == ends[0]:
            return math.sqrt(low * high)
    raise ValueError(f"{value:g} mm is outside the table of ISO 1328-1:1995, {ends[0]:g} to {ends[-1]:g} mm")


def rounded(microns: float) -> float:
    """Rounding of the table: over 10 um to whole um, 5 to 10 to halves, below 5 to tenths; ties go up.

    Source: ISO 1328-1:1995 (from memory); the treatment of ties is our choice.

    >>> rounded(18.91), rounded(5.86), rounded(4.14)
    (19.0, 6.0, 4.1)
    """
    step = 1.0 if microns > 10.0 else 0.5 if microns >= 5.0 else 0.1
    return round(math.floor(microns / step + 0.5) * step, 1)


def grade_limit(what: str, *, module: float, reference_diameter: float, grade: int) -> float:
    """Limit of a pitch or run-out figure [mm].

    f_pt = 0.3 (m + 0.4 sqrt d) + 4;  F_p = 0.3 m + 1.25 sqrt d + 7;  F_r = 0.24 m + 1.0 sqrt d + 5.6   [um, grade 5]
    times sqrt(2)^(grade - 5), scaled before rounding; m and d are the geometric means of their ranges.
    Raises: ValueError for a figure without a grade, a grade outside 0..12, or a size outside the table.
    Source: ISO 1328-1:1995 and ISO 1328-2:1997 (from memory).

    >>> grade_limit("cumulative-pitch", module=2.5, reference_diameter=100.0, grade=6)
    0.027
    """
    if not 0 <= grade <= 12:
        raise ValueError(f"grade {grade} is outside 0 to 12")
    m, d = range_mean(module, MODULE_RANGES), range_mean(reference_diameter, DIAMETER_RANGES)
    root = math.sqrt(d)
    if what == "single-pitch":
        five = 0.3 * (m + 0.4 * root) + 4.0
    elif what == "cumulative-pitch":
        five = 0.3 * m + 1.25 * root + 7.0
    elif what == "run-out":
        five = 0.24 * m + root + 5.6
    else:
        raise ValueError(f"{what} has no grade in ISO 1328-1:1995")
    return rounded(five * math.sqrt(2.0) ** (grade - 5)) / 1000.0
