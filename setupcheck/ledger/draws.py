"""Random values of causes, patterns and accounts for Monte Carlo runs: drawn once, kept while they are wanted. mm, rad.

Source: Monte Carlo propagation of distributions, JCGM 101:2008.
"""

from __future__ import annotations

import math
from collections import deque
from collections.abc import Sequence
from typing import ClassVar
from weakref import ref

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause, stream_key
from setupcheck.ledger.figures import Figure
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped

Reals = NDArray[np.floating]
Complexes = NDArray[np.complexfloating]

TRIALS = 20_000
"""Trials of one Monte Carlo run: about 1e4/(1 - p) asks for 2e5 at 95 % (JCGM 101 7.2.2); a tenth of it settles the
chance within 0.2 %, and the sampling error is printed. Source: our screening choice."""

DRAWS_KEPT = 4
"""Of how many `Draws` the values stay in memory, 10 MB each: a change is held against what was before it, and what was measured
against its plan. Source: our choice."""


class Draws:
    """Random values of causes, drawn once each, every cause from its own stream named after it.

    Single precision: a draw of an error is good to 1e-7 of itself; nominal lengths are added in double precision. Values of the
    latest few stay in memory; those of others are drawn anew when somebody asks, and are the same.
    """

    _filled: ClassVar[deque[ref[Draws]]] = deque()

    def __init__(self, trials: int = TRIALS) -> None:
        self.trials = trials
        self._causes: dict[Cause, Reals | Complexes] = {}
        self._arcs: dict[int, tuple[Pattern, Reals]] = {}
        self._radials: dict[int, tuple[Pattern, Reals]] = {}
        self.memo: dict[object, Reals] = {}

    def forget(self) -> None:
        """Lets go of all values: whoever asks again gets the same ones, drawn anew from their streams."""
        for held in (self._causes, self._arcs, self._radials, self.memo):
            held.clear()

    def _let_go_of_older(self) -> None:
        """Those that were filled first make room: a list of reviews would fill the memory with what is seldom asked."""
        self._filled.append(ref(self))
        while len(self._filled) > DRAWS_KEPT:
            older = self._filled.popleft()()
            if older is not None:
                older.forget()

    @staticmethod
    def stream(name: str) -> np.random.Generator:
        """The stream of random numbers that belongs to a name, the same on every machine."""
        return np.random.Generator(np.random.PCG64(stream_key(name)))

    def cause(self, cause: Cause) -> Reals | Complexes:
        """X of one cause, shape (trials,)."""
        found = self._causes.get(cause)
        if found is None:
            if not self._causes:
                self._let_go_of_older()
            found = self._causes[cause] = self._draw(cause)
            if cause.mean:
                found += _single(cause.mean.real) if cause.is_real else np.complex64(cause.mean)
        return found

    def _draw(self, cause: Cause) -> Reals | Complexes:
        rng, n = self.stream(cause.identity), self.trials
        match cause.law:
            case "disc":
                return _polar(_single(cause.high) * np.sqrt(_uniform(rng, n)), _uniform(rng, n))
            case "ring":
                radius = np.full(n, cause.high, dtype=np.float32)
                if cause.spread:
                    radius += _single(cause.spread) * _cut_normal(rng, n)
                return _polar(radius, _uniform(rng, n))
            case "blur":
                return _polar(_single(cause.spread) * _cut_rayleigh(rng, n), _uniform(rng, n))
            case "clearance-disc" | "clearance-ring":
                play = _uniform(self.stream(cause.pair), n) if cause.pair else _uniform(rng, n)
                wall = _single(cause.low / 2.0) + _single((cause.high - cause.low) / 2.0) * play
                return _polar(
                    wall * np.sqrt(_uniform(rng, n)) if cause.law == "clearance-disc" else wall, _uniform(rng, n)
                )
            case "rectangle":
                return _complex(_single(cause.low) * _both_ways(rng, n), _single(cause.high) * _both_ways(rng, n))
            case "length":
                return _single(cause.high) * _both_ways(rng, n)
            case "gauss":
                return _single(cause.spread) * _cut_normal(rng, n)
            case "one-sided":
                return _single(cause.high) * _uniform(rng, n)
            case "high-point":
                assert cause.of is not None
                return np.asarray(np.abs(self.account(cause.of)))
            case _:
                raise ValueError(f"{cause.key} is undetermined and has no value to draw")

    def account(self, account: Account) -> Complexes:
        """Value of a vector account for all trials, shape (trials,)."""
        total = np.full(self.trials, account.constant, dtype=np.complex64)
        for cause, (a, b) in account.terms.items():
            x = self.cause(cause)
            if cause.is_real:
                total += np.complex64(a + b) * x
                continue
            if a:
                total += np.complex64(a) * x
            if b:
                total += np.complex64(b) * np.conj(x)
        return total

    def real(self, account: Account) -> Reals:
        """Value of a real account (a length, an angle) for all trials, double precision, shape (trials,)."""
        total = np.full(self.trials, account.constant.real)
        for cause, (a, b) in account.terms.items():
            x = self.cause(cause)
            total += _single(a.real + b.real) * x.real
            if not cause.is_real:
                total -= _single(a.imag - b.imag) * x.imag
        return total

    def take_over(self, source: Draws, mine: Figure, theirs: Figure) -> None:
        """Values that `source` drew for a figure, for the same figure with some causes changed: those of causes that are alike.

        Their streams are alike too, so nothing but time changes.
        """
        empty = not self._causes
        known = {push.cause.identity: push.cause for push in theirs.pushes()}
        for push in mine.pushes():
            other = known.get(push.cause.identity)
            drawn = source._causes.get(other) if other is not None and _alike(push.cause, other) else None
            if drawn is not None:
                self._causes.setdefault(push.cause, drawn)
        if empty and self._causes:
            self._let_go_of_older()
        ours, given = getattr(mine, "pattern", None), getattr(theirs, "pattern", None)
        if isinstance(ours, Pattern) and isinstance(given, Pattern) and _divided_alike(ours, given):
            for held, theirs_of in ((self._arcs, source._arcs), (self._radials, source._radials)):
                if (kept := theirs_of.get(id(given))) is not None:
                    held.setdefault(id(ours), (ours, kept[1]))

    def scatter(self, scatter: Scatter, pattern: Pattern, *, outward: bool = False) -> Reals:
        """Per-place values of one scatter as lengths [mm], uniform within its bound, shape (trials, count).

        outward  the part of a coordinate that lies outwards, of the same draws as the part round the circle
        """
        shares = scatter.outward if outward else scatter.around
        bound = scatter.bound * (pattern.radius if scatter.along == "angle" else 1.0)
        rng = self.stream(scatter.cause.identity)
        draws = max(scatter.groups) + 1 if scatter.groups else pattern.count
        drawn = np.empty((draws, self.trials), dtype=np.float32)
        for j, place in enumerate(drawn):  # one by one, while its values are in the processor's cache
            rng.random(out=place, dtype=np.float32)
            place -= np.float32(0.5)
            if scatter.either:
                np.copysign(np.float32(0.5), place, out=place)
            place *= _single(2.0 * bound * (shares[j] if shares else 1.0))
        return drawn[list(scatter.groups)].T if scatter.groups else drawn.T

    def arcs(self, pattern: Pattern) -> Reals:
        """Arc errors of all places from dividing alone [mm], shape (trials, count)."""
        found = self._arcs.get(id(pattern))
        if found is None:
            each = [self.scatter(s, pattern) for s in pattern.scatter if s.goes_round]
            waves = [self.cause(p.cause) for p in pattern.periodic]
            shaped = [self.cause(s.cause).real for s in pattern.shaped]
            found = self._arcs[id(pattern)] = (pattern, teeth.division_arcs(pattern, waves, shaped, each, self.trials))
        return found[1]

    def radials(self, pattern: Pattern) -> Reals:
        """Radial errors of all places, known and scattered [mm], shape (trials, count)."""
        found = self._radials.get(id(pattern))
        if found is None:
            total = np.zeros((pattern.count, self.trials), dtype=np.float32).T
            for s in pattern.scatter:
                if s.goes_outward:
                    total += self.scatter(s, pattern, outward=True)
            if pattern.outwards:
                total += np.asarray(pattern.outwards, dtype=np.float32)
            found = self._radials[id(pattern)] = (pattern, total)
        return found[1]


def _alike(one: Cause, other: Cause) -> bool:
    """Whether two causes of one name draw the same values; never said of what follows from other causes."""
    fields = ("identity", "law", "high", "low", "spread", "mean", "pair")
    return one.of is None and other.of is None and all(getattr(one, f) == getattr(other, f) for f in fields)


def _divided_alike(one: Pattern, other: Pattern) -> bool:
    """Whether dividing leaves the same errors at the places of two patterns, draw by draw."""
    plain = ("count", "radius", "turn", "start", "rounding", "outwards")
    if any(getattr(one, f) != getattr(other, f) for f in plain):
        return False
    return (
        _each_alike(one.periodic, other.periodic, "harmonic")
        and _each_alike(one.shaped, other.shaped, "shape")
        and _each_alike(one.scatter, other.scatter, "along", "bound", "around", "outward", "either", "groups")
    )


def _each_alike(
    mine: Sequence[Periodic | Shaped | Scatter], theirs: Sequence[Periodic | Shaped | Scatter], *fields: str
) -> bool:
    """Whether errors pair off, one by one: causes alike, and these entries the same."""
    return len(mine) == len(theirs) and all(
        _alike(a.cause, b.cause) and all(getattr(a, f) == getattr(b, f) for f in fields)
        for a, b in zip(mine, theirs, strict=True)
    )


def _single(value: float) -> np.float32:
    return np.float32(value)


def _uniform(rng: np.random.Generator, n: int) -> Reals:
    return rng.random(n, dtype=np.float32)


def _both_ways(rng: np.random.Generator, n: int) -> Reals:
    return np.float32(2.0) * rng.random(n, dtype=np.float32) - np.float32(1.0)


def _polar(radius: Reals, turns: Reals) -> Complexes:
    angle = turns * np.float32(2.0 * np.pi)
    return _complex(radius * np.cos(angle), radius * np.sin(angle))


def _complex(real: Reals, imag: Reals) -> Complexes:
    out = np.empty(len(real), dtype=np.complex64)
    out.real, out.imag = real, imag
    return out


def _cut_normal(rng: np.random.Generator, n: int) -> Reals:
    """Standard normal numbers with everything beyond 3 drawn again."""
    values = rng.standard_normal(n, dtype=np.float32)
    while (beyond := np.flatnonzero(np.abs(values) > TRUNCATION)).size:
        values[beyond] = rng.standard_normal(beyond.size, dtype=np.float32)
    return values


def _cut_rayleigh(rng: np.random.Generator, n: int) -> Reals:
    """Lengths of two-dimensional standard normal vectors, none longer than 3.44 (inverse of the cut Rayleigh law)."""
    share = _uniform(rng, n) * _single(1.0 - math.exp(-(TRUNCATION_2D**2) / 2.0))
    return np.asarray(np.sqrt(np.float32(-2.0) * np.log1p(-share)))
