"""A graduation read by several heads at once, their mean taken: what is left of its eccentricity. rad."""

from __future__ import annotations

import math


def share_left(heads: int, off: float) -> float:
    """Most of an eccentricity's wave that the mean of n evenly spaced heads still shows, each `off` its place by so much [rad].

    The mean of exp(i (2 pi k/n + d_k)) over the heads is zero where all d_k are, and its length at most the mean of
    |exp(i d_k) - 1|: 2 sin(off/2). One head shows all of it.
    Validity: heads at one radius that look at the axis; e small against the radius. Waves of the division itself are another
    thing: those that come n times a turn stay whole, so nothing is taken off them here.
    Raises: ValueError for no head, or an `off` below 0.  Source: sum of evenly spaced waves, derived here.

    >>> share_left(1, 0.0), share_left(2, 0.0), round(share_left(2, math.radians(1.0)), 4)
    (1.0, 0.0, 0.0175)
    """
    if heads < 1 or off < 0.0:
        raise ValueError("there is at least one head, and none is off its place by less than 0")
    return 1.0 if heads == 1 else min(2.0 * math.sin(min(off, math.pi) / 2.0), 1.0)
