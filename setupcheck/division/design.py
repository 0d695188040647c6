"""What the stations of a division test can tell apart: the terms of the fit, and those that look alike. Angles rad.

    y = zero of the run + drift t + bend + reversal direction/2 + sum over h of a_h cos(h theta) + b_h sin(h theta)

All are fitted together: taking a line off first and looking for waves afterwards gives wrong waves on part of a circle.
Sums of products are kept, block by block of the rows, so that a file of millions of rows takes no more memory than one.
Sources: linear least squares; sampling (aliasing); derived here.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.points import Points
from setupcheck.record import record

Reals = NDArray[np.floating]

BLOCK = 4_000_000
"""Numbers of one block of the fit's matrix (32 MB)."""
RESOLVED = 0.01
"""Share of a wave's square that the terms before it must leave: its variance then grows by no more than a hundred. Our choice."""
GAIN = 0.1
"""A wave that is not fitted counts as look-alike from this share of it on that another one takes up. Our screening choice."""
SPARE = 3
"""Stations beyond the unknowns that the higher waves must leave: only they show what the teeth do of their own. Our choice."""
SEEN = 0.1
"""Share of its square that a wave which is not fitted must leave in the residuals, to widen the intervals. Our choice."""


@record
class Term:
    """Columns of the fit that belong together. kind: zero, drift, bend, reversal, swing, wave, slope, step, slip.

    harmonic  waves per turn; of a zero the run, of a bend its power; of a step the station, of a slip the time it begins at
    """

    kind: str
    harmonic: float = 0.0

    @property
    def width(self) -> int:
        return 2 if self.kind in ("wave", "swing") else 1


def columns(term: Term, points: Points, rows: slice) -> list[Reals]:
    """The columns of one term for some rows; a run's zero stands under `runs`."""
    theta, t = points.theta[rows], points.t[rows] - 0.5
    if term.kind == "wave":
        return [np.cos(term.harmonic * theta), np.sin(term.harmonic * theta)]
    if term.kind == "swing":
        half = points.direction[rows] / 2.0
        return [half * np.cos(term.harmonic * theta), half * np.sin(term.harmonic * theta)]
    if term.kind == "reversal":
        return [points.direction[rows] / 2.0]
    if term.kind == "drift":
        return [t]
    if term.kind == "bend":
        return [4.0 * t * t if term.harmonic == 2.0 else 8.0 * t * t * t]
    if term.kind == "slope":
        return [theta - points.theta.mean()]
    if term.kind == "step":
        return [(points.theta[rows] > term.harmonic - 1e-8).astype(float)]
    if term.kind == "slip":
        return [(points.t[rows] >= term.harmonic).astype(float)]
    assert term.kind == "zero"
    return [(points.run[rows] == int(term.harmonic)).astype(float)]


@record(eq=False)
class Sums:
    """Sums of products of all columns of some terms, the readings as the last: what every fit below is made from."""

    terms: tuple[Term, ...]
    products: Reals
    n: int

    def at(self, terms: Sequence[Term]) -> list[int]:
        """Numbers of the columns of some terms."""
        starts: dict[Term, int] = {}
        place = 0
        for term in self.terms:
            starts[term] = place
            place += term.width
        return [starts[t] + k for t in terms for k in range(t.width)]

    def left(self, terms: Sequence[Term], of: Sequence[int]) -> Reals:
        """Products of the columns `of` that are left when those of `terms` are taken out of them."""
        own = self.products[np.ix_(of, of)]
        base = self.at(terms)
        if not base:
            return own
        across = self.products[np.ix_(base, of)]
        return np.asarray(own - across.T @ _solve(self.products[np.ix_(base, base)], across))

    def shares(self, terms: Sequence[Term], of: Term) -> Reals:
        """Shares of the squares of a term that are left beside the others: eigenvalues, smallest first."""
        at = self.at([of])
        whole = np.sqrt(np.diag(self.products)[at].mean()) or 1.0
        return np.asarray(np.linalg.eigvalsh(self.left(terms, at) / whole**2))

    def told(self, terms: Sequence[Term], of: Term) -> float:
        """Share of what the zeros of the runs leave of a single column that the other terms leave of it."""
        at = self.at([of])
        alone = float(self.left([t for t in terms if t.kind == "zero"], at)[0, 0])
        if alone <= 1e-9 * float(self.products[at[0], at[0]]):
            return 0.0
        return float(self.left(terms, at)[0, 0]) / alone

    def taken(self, terms: Sequence[Term], of: Term) -> Reals:
        """How much of each fitted column a unit of each column of `of` is taken for, shape (columns of terms, width)."""
        base = self.at(terms)
        return _solve(self.products[np.ix_(base, base)], self.products[np.ix_(base, self.at([of]))])


def _solve(matrix: Reals, right: Reals) -> Reals:
    """Solution of the normal equations, columns brought to length one first."""
    length = np.sqrt(np.diag(matrix))
    length[length == 0.0] = 1.0
    scaled = right / (length[:, None] if right.ndim == 2 else length)
    found = np.linalg.lstsq(matrix / np.outer(length, length), scaled, rcond=1e-13)[0]
    return np.asarray(found / (length[:, None] if right.ndim == 2 else length))


def blocks(points: Points, terms: Sequence[Term]) -> Iterator[tuple[slice, Reals]]:
    """The matrix of the fit, block by block of the rows."""
    width = sum(term.width for term in terms)
    step = max(1, BLOCK // max(width, 1))
    for start in range(0, len(points), step):
        rows = slice(start, min(start + step, len(points)))
        yield rows, np.stack([c for term in terms for c in columns(term, points, rows)], axis=1)


def sums_of(points: Points, terms: Sequence[Term]) -> Sums:
    """Sums of products of the terms and the readings."""
    width = sum(term.width for term in terms) + 1
    total = np.zeros((width, width))
    for rows, matrix in blocks(points, terms):
        whole = np.column_stack([matrix, points.y[rows]])
        total += whole.T @ whole
    return Sums(tuple(terms), total, len(points))


@record
class Alike:
    """A wave that is not fitted: why (invisible, folded, few, arc), and the fitted waves it is taken for."""

    harmonic: float
    why: str
    taken_for: tuple[float, ...] = ()


@record(eq=False)
class Design:
    """The terms that are fitted, those left out and why, and what the stations are."""

    sums: Sums
    terms: tuple[Term, ...]
    alike: tuple[Alike, ...]
    stations: int
    arc: bool
    """All stations lie within half a turn, so that waves of the wheel cannot be told; a slope stands for them."""
    repeated: bool
    """Some station was read at more than one time, so that drift is told from division."""
    reversal: str
    """fitted, none (one direction, or none said), or apart (each run has one direction and a zero of its own)."""

    def has(self, kind: str) -> bool:
        return any(t.kind == kind for t in self.terms)


def design(points: Points, asked: Sequence[float]) -> Design:
    """The terms to fit.

    asked  waves per turn that may be there, the most important first
    """
    runs = [Term("zero", float(r)) for r in range(int(points.run.max()) + 1)]
    waves = [Term("wave", h) for h in asked]
    swing = Term("swing", 1.0)
    drift, reversal, slope = Term("drift"), Term("reversal"), Term("slope")
    bends = [Term("bend", 2.0), Term("bend", 3.0)]
    sums = sums_of(points, [*runs, drift, reversal, slope, swing, *bends, *waves])
    chosen: list[Term] = [*runs]
    stations, arc = _stations(points, asked)
    said = np.abs(points.direction) == 1
    both = bool((points.direction == 1).any() and (points.direction == -1).any())
    turned = "none"
    if both and said.any():
        turned = "fitted" if sums.told(chosen, reversal) > RESOLVED else "apart"
        if turned == "fitted":
            chosen.append(reversal)
    unknowns = 1
    if len(np.unique(points.t)) > 1 and sums.told(chosen, drift) > RESOLVED:
        chosen.append(drift)
    if arc and sums.told(chosen, slope) > RESOLVED:
        chosen.append(slope)
        unknowns += 1
    at = places(points, whole=comes_round(asked))
    repeated = len(np.unique(at)) < len(at)
    left_out: list[tuple[Term, str]] = []
    for place, wave in enumerate(waves):
        spare = 0 if arc else SPARE if place > 0 else 1
        if arc and wave.harmonic < 5.0:
            left_out.append((wave, "arc"))
        elif _invisible(sums, runs, wave):
            left_out.append((wave, "invisible"))
        elif not _both(sums, chosen, wave):
            left_out.append((wave, "folded"))
        elif unknowns + 2 + spare > stations or len(points) < len(_wide(chosen)) + 3:
            left_out.append((wave, "few"))
        else:
            chosen.append(wave)
            unknowns += 2
    if turned == "fitted" and waves[0] in chosen and stations >= 6 and _both(sums, chosen, swing):
        chosen.append(swing)
    alike = tuple(Alike(w.harmonic, why, _taken_for(sums, chosen, w) if why != "arc" else ()) for w, why in left_out)
    return Design(sums, tuple(chosen), alike, stations, arc, repeated, turned)


def _wide(terms: Sequence[Term]) -> list[int]:
    return [k for term in terms for k in range(term.width)]


def _both(sums: Sums, chosen: Sequence[Term], wave: Term) -> bool:
    return bool(sums.shares(chosen, wave)[0] > RESOLVED)


def _invisible(sums: Sums, runs: Sequence[Term], wave: Term) -> bool:
    """Every station sees the wave alike, up to the zeros of the runs."""
    return bool(sums.shares(runs, wave)[-1] < RESOLVED)


def _taken_for(sums: Sums, chosen: Sequence[Term], wave: Term) -> tuple[float, ...]:
    """Fitted waves that take up a phase of one that is not, without leaving it in the residuals."""
    at = sums.at([wave])
    values, phases = np.linalg.eigh(sums.left(chosen, at) / (np.diag(sums.products)[at].mean() or 1.0))
    hidden = phases[:, values < SEEN]
    taken = sums.taken(chosen, wave) @ hidden
    found, place = [], 0
    for term in chosen:
        part = taken[place : place + term.width]
        place += term.width
        if term.kind == "wave" and hidden.size and float(np.linalg.norm(part, 2)) > GAIN:
            found.append(term.harmonic)
    return tuple(found)


def _stations(points: Points, asked: Sequence[float]) -> tuple[int, bool]:
    """(different stations, whether all lie within half a turn)."""
    whole = comes_round(asked)
    at = np.unique(np.round(np.remainder(points.theta, math.tau) if whole else points.theta, 9))
    round_ = np.unique(np.round(np.remainder(points.theta, math.tau), 9))
    if len(round_) > 1 and math.tau - round_[-1] + round_[0] < 2e-9:
        round_, at = round_[:-1], at[:-1] if whole else at
    gap = float(np.diff(round_, append=round_[0] + math.tau).max()) if len(round_) > 1 else math.tau
    return len(at), gap > math.pi


def places(points: Points, *, whole: bool) -> Reals:
    """Stations that are told apart [rad], full turns taken off where every wave comes round with the work (`whole`)."""
    at = np.round(np.remainder(points.theta, math.tau) if whole else points.theta, 8)
    if whole:
        at[math.tau - at < 2e-8] = 0.0
    return np.asarray(at)


def comes_round(harmonics: Iterable[float]) -> bool:
    """Whether all waves are whole numbers a turn: a worm of two starts may need two turns of the wheel.

    >>> comes_round([1.0, 72.0]), comes_round([1.0, 22.5])
    (True, False)
    """
    return all(float(h).is_integer() for h in harmonics)


def cells(points: Points, *, whole: bool) -> NDArray[np.int64]:
    """Number of each row's station."""
    return np.asarray(np.unique(places(points, whole=whole), return_inverse=True)[1]).astype(np.int64)
