"""Quantiles of Student's t and of chi-squared, for limits from few readings. Pure numbers, standard library only.

    t            P(|T| > t) = I_x(nu/2, 1/2),  x = nu / (nu + t^2)
    chi-squared  P(X <= x)  = P(nu/2, x/2)

I_x is the regularized incomplete beta function, P the regularized incomplete gamma function. Each is summed where its
series or continued fraction runs fast, and the quantile is found by halving a bracket: slow but it cannot go astray.

Sources: Abramowitz & Stegun, Handbook of Mathematical Functions, 26.5.8 (continued fraction of the beta function), 26.7.1
(t), 6.5.29 and 6.5.31 (gamma function), 26.4.19 (chi-squared), from memory; the way of evaluating a continued fraction is
Lentz's as Thompson and Barnett changed it, from memory. Tests hold both quantiles against scipy.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable

MOST_TERMS = 5000
"""Terms of a series or fraction before it is given up. Our screening choice: nu 1e5 takes some hundred."""
LARGEST_NU = 1e5
"""Largest degrees of freedom. Our screening choice: nobody takes more readings, and the sums stay short."""
_TINY = 1e-300  # keeps a fraction from a division by zero; our choice
_ENOUGH = 1e-15  # relative; binary fractions carry no more


class OutOfRange(ValueError):
    """Probability or degrees of freedom that have no quantile here."""


def t_quantile(p: float, nu: float) -> float:
    """The value that Student's t stays below with probability p.

    p   probability, 0 < p < 1
    nu  degrees of freedom, 1 .. LARGEST_NU, not only whole ones
    Returns: no unit; negative for p < 0.5.
    Raises: OutOfRange.
    Source: module docstring.

    >>> round(t_quantile(0.95, 4), 4)
    2.1318
    """
    _check(p, nu)
    if p == 0.5:
        return 0.0
    tail = min(p, 1.0 - p)
    t = _root(lambda t: 0.5 * _beta_share(nu / 2.0, 0.5, nu / (nu + t * t)), tail)
    return math.copysign(t, p - 0.5)


def chi2_quantile(p: float, nu: float) -> float:
    """The value that chi-squared stays below with probability p.

    p   probability, 0 < p < 1
    nu  degrees of freedom, 1 .. LARGEST_NU, not only whole ones
    Returns: no unit, > 0.
    Raises: OutOfRange.
    Source: module docstring.

    >>> round(chi2_quantile(0.05, 4), 4)
    0.7107
    """
    _check(p, nu)
    if p < 0.5:  # the small one of both shares, which keeps its digits
        return _root(lambda x: _gamma_shares(nu / 2.0, x / 2.0)[0], p)
    return _root(lambda x: _gamma_shares(nu / 2.0, x / 2.0)[1], 1.0 - p)


def f_above(x: float, nu1: float, nu2: float) -> float:
    """Probability that a ratio of two mean squares of the same variance comes out above x, Fisher's F.

    nu1, nu2  degrees of freedom above and below the line, 1 .. LARGEST_NU
    Raises: OutOfRange.
    Source: P(F > x) = I_z(nu2/2, nu1/2), z = nu2/(nu2 + nu1 x); Abramowitz & Stegun 26.6.2, from memory.

    >>> round(f_above(4.0, 1, 20), 4)
    0.0593
    """
    _check(0.5, nu1)
    _check(0.5, nu2)
    return 1.0 if x <= 0.0 else _beta_share(nu2 / 2.0, nu1 / 2.0, nu2 / (nu2 + nu1 * x))


def _check(p: float, nu: float) -> None:
    if not 0.0 < p < 1.0:  # NaN as well
        raise OutOfRange(f"a probability lies between 0 and 1, not {p:g}. Write 0.95")
    if not 1.0 <= nu <= LARGEST_NU:
        raise OutOfRange(f"degrees of freedom run from 1 to {LARGEST_NU:g}, not {nu:g}")


def _root(share: Callable[[float], float], target: float) -> float:
    """x > 0 with share(x) = target, for a share between 0 and 1 that rises all the way or falls all the way."""
    high = 1.0
    rising = share(0.0) < 0.5
    while (share(high) < target) == rising:
        high *= 2.0
    low = 0.0 if high == 1.0 else high / 2.0
    while True:
        middle = 0.5 * (low + high)
        if middle in (low, high) or high - low <= _ENOUGH * high:
            return middle
        if (share(middle) < target) == rising:
            low = middle
        else:
            high = middle


def _beta_share(a: float, b: float, x: float) -> float:
    """Regularized incomplete beta function I_x(a, b), a, b > 0, 0 <= x <= 1."""
    if x <= 0.0 or x >= 1.0:
        return 0.0 if x <= 0.0 else 1.0
    front = math.exp(math.lgamma(a + b) - math.lgamma(a) - math.lgamma(b) + a * math.log(x) + b * math.log1p(-x))
    if x < (a + 1.0) / (a + b + 2.0):
        return front / (a * _fraction(1.0, _beta_terms(a, b, x)))
    return 1.0 - front / (b * _fraction(1.0, _beta_terms(b, a, 1.0 - x)))


def _beta_terms(a: float, b: float, x: float) -> Iterable[tuple[float, float]]:
    for term in range(1, MOST_TERMS):
        m, odd = divmod(term, 2)
        if odd:
            top = -(a + m) * (a + b + m) * x / ((a + 2.0 * m) * (a + 2.0 * m + 1.0))
        else:
            top = m * (b - m) * x / ((a + 2.0 * m - 1.0) * (a + 2.0 * m))
        yield top, 1.0


def _gamma_shares(a: float, x: float) -> tuple[float, float]:
    """Regularized incomplete gamma functions P(a, x) and 1 - P(a, x), a > 0, x >= 0."""
    if x <= 0.0:
        return 0.0, 1.0
    front = math.exp(a * math.log(x) - x - math.lgamma(a))
    if x < a + 1.0:
        below = front * _gamma_series(a, x)
        return below, 1.0 - below
    above = front / _fraction(x + 1.0 - a, ((-k * (k - a), x + 2.0 * k + 1.0 - a) for k in range(1, MOST_TERMS)))
    return 1.0 - above, above


def _gamma_series(a: float, x: float) -> float:
    """1/a (1 + x/(a+1) + x^2/((a+1)(a+2)) + …)."""
    term = total = 1.0 / a
    for k in range(1, MOST_TERMS):
        term *= x / (a + k)
        total += term
        if term <= _ENOUGH * total:
            return total
    raise ArithmeticError(f"series of the gamma function at {a:g}, {x:g}")


def _fraction(first: float, terms: Iterable[tuple[float, float]]) -> float:
    """Continued fraction first + top1/(bottom1 + top2/(bottom2 + …)), by the changed way of Lentz."""
    value = first or _TINY
    c, d = value, 0.0
    for top, bottom in terms:
        d = 1.0 / (bottom + top * d or _TINY)
        c = bottom + top / c or _TINY
        value *= c * d
        if abs(c * d - 1.0) <= _ENOUGH:
            return value
    raise ArithmeticError("the continued fraction does not settle")
