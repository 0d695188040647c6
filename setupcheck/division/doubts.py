"""Does the model hold? Outliers, steps, a bent drift, residuals that follow each other: what makes an answer wrong. rad.

Each search names what it found and from which line on. Thresholds are our screening choices, strict enough that readings
without fault are called faulty in about one file of a hundred.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.amplitude import t_at
from setupcheck.division.design import Sums, Term, columns, sums_of
from setupcheck.division.fit import Fit, Scatter, fitted, scatter_of
from setupcheck.division.points import Points
from setupcheck.record import record

Reals = NDArray[np.floating]

OUTLIER = 3.5
"""Residuals beyond so many robust standard deviations (1.4826 medians of their sizes) are flagged. Common practice, from
memory. Among more than a hundred readings the bound grows as the largest of so many does, sqrt(2 ln 5n); ours."""
STEP_CHANCE = 0.005
"""Chance of calling a step where there is none, over all places it might stand at."""
MOST_PLACES = 2_000
"""Places at which a step is looked for; more rows are looked at in so many groups."""
FOLLOWS = 2.6
"""Standard deviations by which neighbouring residuals must agree before they count as following each other."""


@record
class Step:
    """A step: over `time` from a line on, or round the `circle` from a station on; by how much [rad], first line, station."""

    along: str
    size: float
    line: int
    theta: float


def outliers(fit: Fit) -> NDArray[np.int64]:
    """Rows whose residual lies far outside the others."""
    off = np.abs(fit.residuals - np.median(fit.residuals))
    middle = float(np.median(off))
    if middle <= 0.0:
        return np.zeros(0, dtype=np.int64)
    inflate = math.sqrt(len(off) / max(fit.nu, 1))  # residuals of few degrees of freedom are too small
    bound = max(OUTLIER, math.sqrt(2.0 * math.log(5.0 * len(off))))
    return np.flatnonzero(off > bound * 1.4826 * middle * inflate)


def steps(points: Points, fit: Fit) -> tuple[Step, ...]:
    """The largest step over time, and the largest from one station on, where they cannot be chance.

    Each candidate is fitted beside all other terms, and must stand out from what is left then.
    """
    found = []
    for kind, order in (("step", points.theta), ("slip", points.t)):
        begins = _largest(points, fit, order)
        if begins is not None:
            found.append((kind, *begins))
    told = []
    for kind, at, chance in found:
        term = Term(kind, at)
        terms = [*fit.terms, term]
        again = fitted(points, sums_of(points, terms), terms)
        left = scatter_of(points, again)
        row = again.at(term)[0]
        spread = left.used * float(again.inverse[row, row])
        if again.nu < 2 or left.nu < 2 or not spread > 0.0:
            continue
        size = float(again.values[row])
        if abs(size) > t_at(left.nu, 1.0 - chance) * math.sqrt(spread):
            first = int(np.argmax(points.theta > at - 1e-8 if kind == "step" else points.t >= at))
            told.append(
                Step("circle" if kind == "step" else "time", size, int(points.line[first]), float(points.theta[first]))
            )
    return tuple(told)


def _largest(points: Points, fit: Fit, along: Reals) -> tuple[float, float] | None:
    """(where it begins, chance allowed at each place) of the step that takes most off the squares; None where none could.

    A column of ones from one place on: what it leaves of itself beside the terms is m - C' G^-1 C.
    """
    n = len(points)
    if fit.nu < 3 or n < 6:
        return None
    order = np.argsort(along, kind="stable")
    starts = np.flatnonzero(np.diff(along[order]) > 1e-8) + 1
    starts = starts[:: 1 + len(starts) // MOST_PLACES]
    if not len(starts):
        return None
    shares = np.zeros((len(starts), len(fit.values)))
    place = 0
    for term in fit.terms:
        for column in columns(term, points, slice(None)):
            shares[:, place] = _from_each(column[order], starts)
            place += 1
    sums = _from_each(fit.residuals[order], starts)
    counts = (n - starts).astype(float)
    left = counts - np.einsum("ij,jk,ik->i", shares, fit.inverse, shares)
    usable = left > 1e-4 * np.minimum(counts, n - counts)
    if not usable.any():
        return None
    taken = np.where(usable, sums**2 / np.where(usable, left, 1.0), 0.0)
    best = int(np.argmax(taken))
    chance = STEP_CHANCE / (2.0 * len(starts))
    rest = max(fit.square - float(taken[best]), 1e-12 * fit.square)
    if rest <= 0.0 or float(taken[best]) / rest * (fit.nu - 1) < t_at(fit.nu - 1, 1.0 - chance) ** 2:
        return None
    return float(along[order][starts[best]]), chance


def _from_each(values: Reals, starts: NDArray[np.int64]) -> Reals:
    """Sum of the values from each start to the end."""
    parts = np.add.reduceat(values, starts)
    return np.asarray(np.cumsum(parts[::-1])[::-1])


def follows(residuals: Reals, nu: int) -> float:
    """Correlation of neighbouring residuals where it cannot be chance, else 0.

    A fit takes some correlation away: -1 / nu is expected of readings that scatter.
    Source: first serial correlation, standard error 1 / sqrt(n); textbook, from memory.
    """
    n = len(residuals)
    square = float(residuals @ residuals)
    if n < 8 or square <= 0.0:
        return 0.0
    found = float(residuals[1:] @ residuals[:-1]) / square
    lean = (n - nu) / n / 2.0
    return min(found + lean / math.sqrt(n), 0.95) if (found + 1.0 / n) * math.sqrt(n) > FOLLOWS else 0.0


def bend_shows(sums: Sums, terms: Sequence[Term], bend: Term, scatter: Scatter) -> tuple[float, float]:
    """(share of the bend that the terms leave, how many of its own standard deviations it stands at)."""
    share = sums.told(terms, bend)
    at = [*sums.at([bend]), sums.products.shape[0] - 1]
    left = sums.left(terms, at)
    if share <= 0.0 or left[0, 0] <= 0.0 or not scatter.used > 0.0:
        return 0.0, 0.0
    return share, abs(float(left[0, 1])) / math.sqrt(float(left[0, 0]) * scatter.used)
