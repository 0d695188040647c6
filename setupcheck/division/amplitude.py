"""How large a wave is and where it is highest, with what its readings leave open. Any unit; angles rad.

A wave a cos(h theta) + b sin(h theta) is the vector (a, b) with a covariance. Its length is always read too long, the more
so the nearer it is to nothing (Rice), so the ends of the interval are those lengths for which the one that was read lies at
the 2.5 % ends of what would be read, integrated over the component across. Its direction is where the component
across is not larger than t times its own uncertainty (Fieller); there may be none.
Sources: Rice's distribution and Fieller's theorem, from memory; the scaling by t / z for few degrees of freedom is ours.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.angles import once_round
from setupcheck.physics.student_t import LARGEST_NU, t_quantile
from setupcheck.record import record

Reals = NDArray[np.floating]

LEVEL = 0.95
"""Of all intervals of a division test. Common practice."""
_Z = 1.959963984540054
"""97.5 % point of the normal distribution; textbook."""
_NODES, _WEIGHTS = np.polynomial.hermite_e.hermegauss(15)
_WEIGHTS = _WEIGHTS / _WEIGHTS.sum()


@record
class Length:
    """Length of a vector, its 95 % interval, direction [rad, 0 .. 2 pi] and half the interval of that: None where none."""

    value: float
    low: float
    high: float
    direction: float
    within: float | None


@lru_cache(4096)
def t_at(nu: float, p: float = (1.0 + LEVEL) / 2.0) -> float:
    """Student's t, two-sided 95 %, for any number of degrees of freedom from 1 on."""
    return t_quantile(p, min(max(nu, 1.0), LARGEST_NU))


def length_of(vector: Reals, covariance: Reals, nu: float, *, also: float = 0.0) -> Length:
    """Length and direction of a vector.

    covariance  of its two components, from nu degrees of freedom
    also        what may lie on it besides, in any direction: a bound, added straight

    >>> far = length_of(np.array([10.0, 0.0]), np.eye(2), 1e5)
    >>> round(far.low, 1), round(far.high, 1), round(math.degrees(far.within or 0.0), 1)
    (8.0, 11.9, 11.3)
    >>> length_of(np.array([0.5, 0.5]), np.eye(2), 1e5).within is None
    True
    """
    value = float(np.hypot(*vector))
    t = t_at(nu)
    along = vector / value if value > 0.0 else np.array([1.0, 0.0])
    across = np.array([-along[1], along[0]])
    wide = covariance * (t / _Z) ** 2
    s_along, s_across = (math.sqrt(max(float(v @ wide @ v), 0.0)) for v in (along, across))
    turned = min((s_across / value) ** 2, 1.0) if value > 0.0 else 1.0  # `along` is only as sure as the direction read
    low, high = _ends(value, math.sqrt(s_along**2 * (1.0 - turned) + s_across**2 * turned), s_across)
    low, high = max(float(low) - also, 0.0), float(high) + also
    direction = once_round(float(np.arctan2(vector[1], vector[0])))
    within = _within(vector, covariance, t) if low > 0.0 else None
    if within is not None and also > 0.0:
        within = within + math.asin(also / value) if also < value else None
    return Length(value, low, high, direction, within)


def _ends(value: float, s_along: float, s_across: float) -> tuple[float, float]:
    """Lengths for which a longer one than `value` would be read 2.5 % of the time, and a shorter one."""
    if max(s_along, s_across) <= 0.0:
        return value, value
    chords = [
        (float(weight), math.sqrt(value * value - float(node) ** 2 * s_across**2))
        for node, weight in zip(_NODES, _WEIGHTS, strict=True)
        if abs(float(node)) * s_across < value
    ]

    def below(length: float) -> float:
        """Chance that the length read is below `value` when the true one is `length`."""
        if s_along <= 0.0:
            return sum(weight for weight, chord in chords if chord > length)
        root = s_along * math.sqrt(2.0)
        return 0.5 * sum(
            weight * (math.erfc((length - chord) / root) - math.erfc((length + chord) / root))
            for weight, chord in chords
        )

    top = value + 10.0 * (s_along + s_across)
    high = _root(lambda length: below(length) - 0.025, 0.0, top)
    low = 0.0 if below(0.0) <= 0.975 else _root(lambda length: below(length) - 0.975, 0.0, top)
    return low, max(high, low, s_along, s_across)  # readings that happen to agree with nothing do not prove it


def _root(falls: Callable[[float], float], low: float, high: float) -> float:
    """Where a falling function passes zero; `low` where it is below zero there already."""
    if falls(low) <= 0.0:
        return low
    for _ in range(36):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if falls(middle) > 0.0 else (low, middle)
    return 0.5 * (low + high)


def _within(vector: Reals, covariance: Reals, t: float) -> float | None:
    """Largest turn from the vector's direction that its readings allow, to the worse side; None from a quarter turn on."""
    base = math.atan2(vector[1], vector[0])

    def outside(turn: float) -> float:
        normal = np.array([-math.sin(base + turn), math.cos(base + turn)])
        return abs(float(normal @ vector)) - t * math.sqrt(max(float(normal @ covariance @ normal), 0.0))

    worst = 0.0
    for side in (1.0, -1.0):
        if outside(side * math.pi / 2.0) <= 0.0:
            return None
        worst = max(worst, _root(lambda turn, side=side: -outside(side * turn), 0.0, math.pi / 2.0))  # type: ignore[misc]
    return worst
