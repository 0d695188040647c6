"""The joint fit of a division test and what its residuals say of one reading's scatter. Angles rad.

Normal equations of columns brought to length one, then one step of refinement with the residuals themselves, which gives
the digits of an orthogonal factorization back.
Sources: linear least squares; lack of fit against pure error (textbook, from memory).
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.design import Sums, Term, _solve, blocks, cells, comes_round
from setupcheck.division.points import Points
from setupcheck.physics.student_t import LARGEST_NU, f_above
from setupcheck.record import record

Reals = NDArray[np.floating]

POOL = 0.25
"""Two mean squares are pooled where a larger ratio would come by chance more often than this. Common practice, from memory."""
SURE = 0.01
"""Chance below which what shows in the readings counts as there. Common practice, from memory."""


@record(eq=False)
class Fit:
    """Terms with their coefficients, and the residuals of all points.

    inverse  of the sums of products: covariance for readings of scatter 1
    square   sum of squared residuals;  nu  degrees of freedom of it
    """

    terms: tuple[Term, ...]
    values: Reals
    inverse: Reals
    residuals: Reals
    square: float
    nu: int

    def at(self, term: Term) -> list[int]:
        """Places of a term's coefficients."""
        place = 0
        for mine in self.terms:
            if mine == term:
                return list(range(place, place + term.width))
            place += mine.width
        raise KeyError(term)

    def vector(self, term: Term) -> Reals:
        return np.asarray(self.values[self.at(term)])

    def covariance(self, term: Term) -> Reals:
        """For readings of scatter 1."""
        at = self.at(term)
        return np.asarray(self.inverse[np.ix_(at, at)])


def fitted(points: Points, sums: Sums, terms: Sequence[Term]) -> Fit:
    """Least squares of the terms, `sums` made of the same points."""
    at = sums.at(terms)
    matrix, right = sums.products[np.ix_(at, at)], sums.products[at, -1]
    values = _solve(matrix, right)
    correction, residuals = _residuals(points, terms, values)
    values = values + _solve(matrix, correction)
    _, residuals = _residuals(points, terms, values)
    inverse = _solve(matrix, np.eye(len(at)))
    return Fit(tuple(terms), values, inverse, residuals, float(residuals @ residuals), len(points) - len(at))


def _residuals(points: Points, terms: Sequence[Term], values: Reals) -> tuple[Reals, Reals]:
    """(what is left of the normal equations, residuals)."""
    left, residuals = np.zeros(len(values)), np.empty(len(points))
    for rows, matrix in blocks(points, terms):
        residuals[rows] = points.y[rows] - matrix @ values
        left += matrix.T @ residuals[rows]
    return left, residuals


@record
class Scatter:
    """What one reading scatters by.

    used, nu       variance that the intervals take, and its degrees of freedom
    repeat         standard deviation of readings of one station, None without repeats;  repeat_nu its degrees of freedom
    uneven         chance that the stations stray so far beyond what repeats explain, None where it cannot be said
    stations       standard deviation of the stations themselves, 0 where repeats explain all
    """

    used: float
    nu: float
    repeat: float | None
    repeat_nu: int
    uneven: float | None
    stations: float


def scatter_of(points: Points, fit: Fit) -> Scatter:
    """Variance of a reading: both sources pooled where repeats explain the stations, else that of the stations alone."""
    pure, pure_nu = _pure_error(points, fit.terms)
    mean = fit.square / fit.nu if fit.nu > 0 else 0.0
    lack_nu = fit.nu - pure_nu
    if pure_nu < 1:
        return Scatter(mean, fit.nu, None, 0, None, 0.0)
    repeat = math.sqrt(pure / pure_nu)
    lack = max(fit.square - pure, 0.0)
    if lack_nu < 1:
        return Scatter(pure / pure_nu, pure_nu, repeat, pure_nu, None, 0.0)
    if pure <= 1e-12 * lack or pure == 0.0:
        chance = 0.0 if lack > 0.0 else 1.0
    else:
        most = LARGEST_NU
        chance = f_above(lack / lack_nu / (pure / pure_nu), min(lack_nu, most), min(pure_nu, most))
    if chance >= POOL:
        return Scatter(mean, fit.nu, repeat, pure_nu, chance, 0.0)
    each = len(points) / (len(points) - pure_nu)  # readings of one station
    own = math.sqrt(max(lack / lack_nu - pure / pure_nu, 0.0) / max(each, 1.0))
    return Scatter(lack / lack_nu, lack_nu, repeat, pure_nu, chance, own)


def _pure_error(points: Points, terms: Sequence[Term]) -> tuple[float, int]:
    """(sum of squares, degrees of freedom) of readings of one station, zeros, drift and reversal taken out.

    Both directions of a station count as one place: what a tooth does of its own it does both ways.
    """
    group = cells(points, whole=comes_round(t.harmonic for t in terms if t.kind == "wave"))
    number = int(group.max()) + 1
    times = np.bincount(group, minlength=number)
    if number == len(points):
        return 0.0, 0
    free = [t for t in terms if t.kind in ("zero", "drift", "bend", "reversal", "swing", "step", "slip")]
    width = sum(t.width for t in free) + 1
    sums, total = np.zeros((number, width)), np.zeros((width, width))
    for rows, matrix in blocks(points, free):
        whole = np.column_stack([matrix, points.y[rows]])
        for k in range(width):
            sums[:, k] += np.bincount(group[rows], whole[:, k], minlength=number)
    means = sums / times[:, None]
    for rows, matrix in blocks(points, free):
        whole = np.column_stack([matrix, points.y[rows]]) - means[group[rows]]
        total += whole.T @ whole
    base, right = total[:-1, :-1], total[:-1, -1]
    rank = int(np.linalg.matrix_rank(base, tol=1e-9 * max(float(np.abs(base).max()), 1e-30), hermitian=True))
    found = _solve(base, right) if width > 1 else right
    square = float(total[-1, -1] - found @ right)
    nu = len(points) - number - rank
    return (max(square, 0.0), nu) if nu > 0 else (0.0, 0)
