"""Shares of a turn, written for people straight from the exact fraction: nothing is rounded before the last digit."""

from __future__ import annotations

from fractions import Fraction


def nearest(up: int, low: int) -> int:
    """up / low (0 or more) to the nearest whole number, a half away from zero, in integers alone.

    >>> nearest(7, 2), nearest(5, 2), nearest(10, 3)
    (4, 3, 3)
    """
    return (2 * up + low) // (2 * low)


def fixed_of(share: Fraction, whole: int, digits: int) -> str:
    """A share of a turn in a unit of which `whole` make a turn, rounded exactly to so many decimals.

    >>> fixed_of(Fraction(1, 40), 360, 6), fixed_of(Fraction(1, 40), 400, 5), fixed_of(Fraction(-1, 3), 360, 1)
    ('9.000000', '10.00000', '-120.0')
    """
    scale = 10**digits
    steps = nearest(abs(share.numerator) * whole * scale, share.denominator)
    text = str(steps) if not digits else f"{steps // scale}.{steps % scale:0{digits}d}"
    return f"-{text}" if share < 0 and steps else text


def sexagesimal(share: Fraction, digits: int = 1) -> tuple[str, str, str]:
    """Degrees, minutes and seconds of a share of a turn (0 or more), rounded exactly; 60 seconds never appear.

    >>> sexagesimal(Fraction(1, 7))
    ('51', '25', '42.9')
    """
    scale = 10**digits
    ticks = nearest(share.numerator * 1_296_000 * scale, share.denominator)
    degrees, rest = divmod(ticks, 3600 * scale)
    minutes, rest = divmod(rest, 60 * scale)
    seconds = f"{rest // scale:02d}.{rest % scale:0{digits}d}" if digits else f"{rest:02d}"
    return str(degrees), f"{minutes:02d}", seconds
