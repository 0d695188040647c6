"""Where a convex function of one number is not above zero: the searches behind gates. Pure numbers."""

from __future__ import annotations

import math
from collections.abc import Callable
from itertools import pairwise

CLOSE = 1e-10
"""A search ends this far from the end it looks for. Source: our choice."""
STEPS = 60
"""Most steps of one search. Source: our choice."""


def convex_span(excess: Callable[[float], float], start: float, *, least: float, most: float) -> tuple[float, float]:
    """(first, last) place between `least` and `most` where a convex function is not above zero; (inf, -inf) where none is.

    Source: Newton's method from outside, which never passes the end of a convex function; halving where its slope, taken
    over a small step, does pass.

    >>> low, high = convex_span(lambda x: abs(x - 1.0) - 0.25, 0.0, least=-5.0, most=5.0)
    >>> round(low, 9), round(high, 9)
    (0.75, 1.25)
    """
    inside = start if excess(start) <= 0.0 else _lowest(excess, least, most)
    if excess(inside) > 0.0:
        return math.inf, -math.inf
    return _end(excess, inside, least), _end(excess, inside, most)


def _lowest(excess: Callable[[float], float], least: float, most: float) -> float:
    """Where a convex function is smallest, or at least not above zero; anywhere once it is sure to be above zero everywhere.

    Source: golden section, a textbook search; a convex function lies above every chord that is drawn on beyond its ends.
    """
    golden = (math.sqrt(5.0) - 1.0) / 2.0
    a, b = least, most
    c, d = b - golden * (b - a), a + golden * (b - a)
    at_a, at_b, at_c, at_d = (excess(x) for x in (a, b, c, d))
    for _ in range(STEPS):
        if min(at_c, at_d) <= 0.0 or _least_possible((a, at_a), (c, at_c), (d, at_d), (b, at_b)) > 0.0:
            break
        if at_c <= at_d:
            b, at_b, d, at_d = d, at_d, c, at_c
            c = b - golden * (b - a)
            at_c = excess(c)
        else:
            a, at_a, c, at_c = c, at_c, d, at_d
            d = a + golden * (b - a)
            at_d = excess(d)
    return min(((at_a, a), (at_b, b), (at_c, c), (at_d, d)))[1]


def _least_possible(*at: tuple[float, float]) -> float:
    """What a convex function through four points (x, y), x rising, cannot be below between the outer two; -inf for equal x.

    Between the inner two it is above the outer chords drawn on, on either side of them above the inner chord drawn on.
    """
    (a, _), (c, at_c), (d, at_d), (b, _) = at
    if not a < c < d < b:
        return -math.inf
    left, inner, right = ((y - v) / (x - u) for (u, v), (x, y) in pairwise(at))
    bounds = [at_c + inner * (a - c), at_d + inner * (b - d), at_c, at_d]
    if left < 0.0 < right:  # the two meet below both
        x = (at_d - right * d - at_c + left * c) / (left - right)
        bounds.append(at_c + left * (min(max(x, c), d) - c))
    return min(bounds)


def _end(excess: Callable[[float], float], inside: float, outermost: float) -> float:
    """The last place from `inside` towards `outermost`; that one itself where even there it is not above zero."""
    at, value = outermost, excess(outermost)
    if value <= 0.0:
        return outermost
    way = 1.0 if outermost > inside else -1.0
    for _ in range(STEPS):
        if abs(at - inside) < CLOSE:
            break
        step = max(abs(at - inside) * 1e-3, 1e-9)
        slope = (value - excess(at - way * step)) / step
        closer = at - way * value / slope if slope > 0.0 else inside
        if (closer - inside) * way <= 0.0:  # that slope was taken across a bend
            closer = (at + inside) / 2.0
        there = excess(closer)
        if there <= 0.0:
            inside = closer
            if there > -CLOSE:
                break
        else:
            at, value = closer, there
            if there < CLOSE * 0.01:
                inside = closer
                break
    return inside


def falling_back(excess: Callable[[float], float], inside: float, tried: float, guess: float) -> float:
    """Where a function that rises from `inside` on passes zero; the guess, if it is still below at the place tried ."""
    at_high = excess(tried)
    if at_high <= 0.0:
        return guess
    low, high, at_low = inside, tried, excess(inside)
    if at_low > 0.0:
        return 0.0
    for _ in range(STEPS):
        if high - low < 1e-9:
            break
        middle = low + (high - low) * min(max(at_low / (at_low - at_high), 0.05), 0.95)
        there = excess(middle)
        if there <= 0.0:
            low, at_low = middle, there
        else:
            high, at_high = middle, there
    return low
