"""Ways of dividing a circle: turns of the crank, hole circles, settings rounded to a readout's step. Angles rad."""

from __future__ import annotations

import math
from fractions import Fraction


def turns_per_place(worm_ratio: int, count: int) -> Fraction:
    """Turns of the crank from one place to the next, exact. Source: ratio of the head, fact of the trade.

    >>> turns_per_place(40, 72)
    Fraction(5, 9)
    """
    return Fraction(worm_ratio, count)


def holes_left_over(worm_ratio: int, count: int, circle: int) -> float:
    """Part of a hole that one step on this circle leaves over, 0 .. 0.5; 0 where the circle fits. Source: arithmetic.

    >>> holes_left_over(40, 72, 18), round(holes_left_over(40, 72, 20), 3)
    (0.0, 0.111)
    """
    holes = turns_per_place(worm_ratio, count) * circle
    part = holes - math.floor(holes)
    return float(min(part, 1 - part))


def circles_that_fit(worm_ratio: int, count: int, circles: tuple[int, ...] = tuple(range(15, 67))) -> tuple[int, ...]:
    """Hole circles on which `count` places close: those the denominator of the turns divides. Source: arithmetic."""
    needed = turns_per_place(worm_ratio, count).denominator
    return tuple(c for c in circles if c % needed == 0)


def rounded_settings(count: int, step: float, start: float = 0.0) -> tuple[float, ...]:
    """Error of each absolute setting rounded to the readout's step [rad], first place as the zero.

    step  smallest step of the readout [rad], > 0.  Raises: ValueError for a step that is not above zero.
    Source: arithmetic; absolute angles, so nothing adds up round the turn.
    """
    if not step > 0.0:
        raise ValueError("a readout step must be above zero")
    angles = [start + math.tau * j / count for j in range(count)]
    errors = [round(a / step) * step - a for a in angles]
    return tuple(0.0 if abs(e) < 1e-12 else e for e in errors)
