"""Judging: the one place where a number meets its limit.

Float tolerance: a value beyond its limit by less than 1e-9 of the limit (1e-12 base units for a limit of zero)
counts as exactly at the limit, and exactly at the limit is inside. 1e-9 of 100 mm is 0.1 nm: far below any
measurement, far above rounding.
"""

from __future__ import annotations

import math

from setupcheck.record import record
from setupcheck.rulebook.records import Level, Verdict

RELATIVE_TOLERANCE = 1e-9
SMALLEST_TOLERANCE = 1e-12  # base units; for limits of zero

GUARD_FACTOR = 1.65
"""Guard band in standard uncertainties: one-sided 95 % of a normal distribution (1.645), as ISO 14253-1 is
remembered; from memory, the standard was not opened."""


@record
class Judgement:
    """Verdict, the limit it was held against, and the distance to the nearest limit (positive inside)."""

    verdict: Verdict
    limit: float | tuple[float, float]
    margin: float


def judge(
    value: float,
    *,
    low: float | None = None,
    high: float | None = None,
    level: Level,
    warn_within: float = 0.0,
    softened: bool = False,
    standard_uncertainty: float | None = None,
) -> Judgement:
    """Judge a number against one or two limits, all in the same base unit.

    margin m = min(high - value, value - low), over the limits given.
    plain value        pass while m >= 0, else `level`; inside, warn while m < warn_within * scale, where scale is
                       |limit| for one limit and high - low for two
    planned stack      as plain, but outside the limit it only warns when `softened` (its chance of meeting the
                       limit reaches the job's confidence)
    measured value     with standard uncertainty u and g = 1.65 u: pass while m >= g, `level` when m < -g, warn
                       between (ISO 14253-1, factor from memory)
    At exactly the limit a plain value passes (it warns if warn_within asks for room).

    Raises: ValueError when no limit is given, when low > high, or when u is negative.

    >>> judge(0.028, high=0.030, level="fail").verdict
    'pass'
    >>> judge(0.029, high=0.030, level="fail", standard_uncertainty=0.001).verdict
    'warn'
    """
    margin, tolerance = _margin(value, low, high)
    limit: float | tuple[float, float]
    if low is not None and high is not None:
        limit, scale = (low, high), high - low
    else:
        limit = high if high is not None else low if low is not None else math.nan
        scale = abs(limit)

    if standard_uncertainty is not None:
        if standard_uncertainty < 0.0:
            raise ValueError(f"a standard uncertainty cannot be negative: {standard_uncertainty}")
        guard = GUARD_FACTOR * standard_uncertainty
        verdict: Verdict = "pass" if margin >= guard - tolerance else level if margin < -guard - tolerance else "warn"
    elif margin < -tolerance:
        verdict = "warn" if softened else level
    elif warn_within > 0.0 and margin < warn_within * scale - tolerance:
        verdict = "warn"
    else:
        verdict = "pass"
    return Judgement(verdict, limit, margin)


def outside(value: float, *, low: float | None = None, high: float | None = None) -> bool:
    """True when the value lies beyond a limit by more than the float tolerance."""
    margin, tolerance = _margin(value, low, high)
    return margin < -tolerance


def judge_word(word: str, allowed: tuple[str, ...], *, level: Level) -> Verdict:
    """Judge a word against the words that are allowed: anything else, known or new, is not."""
    return "pass" if word in allowed else level


def reaches(value: float, limit: float) -> bool:
    """True when value >= limit within the float tolerance: used for chances and for caution triggers."""
    return value >= limit - max(RELATIVE_TOLERANCE * abs(limit), SMALLEST_TOLERANCE)


def _margin(value: float, low: float | None, high: float | None) -> tuple[float, float]:
    """Distance to the nearest limit, positive inside, and the float tolerance that goes with the limits."""
    if low is None and high is None:
        raise ValueError("a judgement needs a limit")
    if low is not None and high is not None and low > high:
        raise ValueError(f"the lower limit {low} lies above the upper limit {high}")
    margins = [high - value] if high is not None else []
    margins += [value - low] if low is not None else []
    size = max(abs(limit) for limit in (low, high) if limit is not None)
    return min(margins), max(RELATIVE_TOLERANCE * size, SMALLEST_TOLERANCE)
