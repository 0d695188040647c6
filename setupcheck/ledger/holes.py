"""Figures of hole patterns: position, distance of neighbours, size of the circle. mm, rad."""

from __future__ import annotations

import cmath
import math
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.figures import Push, Reals, merged, real_pushes, vector_pushes
from setupcheck.ledger.route import Pattern, Scatter
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.ledger.draws import Draws


@record(eq=False)
class HolePosition:
    """Position of holes: twice the largest vector from where a hole belongs [mm].

    turn   account of the pattern's angle about the clocking feature [rad]; None: no clocking feature is asked for, so the
           pattern may be turned as a whole, and is, until its division errors reach equally far both ways
    """

    offset: Account
    pattern: Pattern
    turn: Account | None
    signed: bool = False

    def _worst_hole(self) -> Account:
        """Vector of the hole that can stand farthest off, by everything it shares with the others: where the pattern's axis
        lies, how it is turned and how large it is act together on each hole, so one cause counts once, with its direction."""
        arcs = [r * self.pattern.radius * self.pattern.turn for r in self.pattern.rounding] or [
            0.0
        ] * self.pattern.count
        middle = (max(arcs) + min(arcs)) / 2.0 if self.turn is None else 0.0
        turn = (self.turn if self.turn is not None else Account()) * self.pattern.radius
        found = []
        known = self.pattern.outwards or (0.0,) * self.pattern.count
        for number, (arc, out) in enumerate(zip(arcs, known, strict=True), 1):
            there = cmath.exp(1j * self.pattern.angle(number))
            moved = self.offset + self.pattern.radial * there + turn * (1j * there)
            found.append(moved.plus_constant(there * (out + 1j * (arc - middle))))
        return max(found, key=Account.largest)

    def base(self) -> float:
        return vector_pushes(self._worst_hole(), 2.0)[0]

    def pushes(self) -> list[Push]:
        r = self.pattern.radius
        division = [Push(p.cause, 0.0, 2.0 * r * p.cause.bound) for p in self.pattern.periodic]
        for s in self.pattern.scatter:
            largest = max(map(abs, s.around)) if s.around and s.along == "angle" else 1.0  # a coordinate counts in full
            division.append(Push(s.cause, 0.0, 2.0 * s.bound * largest * (r if s.along == "angle" else 1.0)))
        division += [Push(s.cause, 0.0, 2.0 * r * max(map(abs, s.shape)) * s.cause.bound) for s in self.pattern.shaped]
        return merged(vector_pushes(self._worst_hole(), 2.0)[1], division)

    def undetermined(self) -> tuple[str, ...]:
        mine = [p.cause.missing for p in self.pattern.periodic if p.cause.law == "undetermined"]
        mine += [s.cause.missing for s in self.pattern.scatter if s.cause.law == "undetermined"]
        turn = self.turn.undetermined() if self.turn is not None else ()
        return tuple(dict.fromkeys((*self.offset.undetermined(), *self.pattern.radial.undetermined(), *turn, *mine)))

    def vectors(self, draws: Draws) -> NDArray[np.complex128]:
        """Deviation of every hole in the frame of the pattern, shape (trials, count)."""
        arcs = draws.arcs(self.pattern)
        if self.turn is None:
            arcs = arcs - (arcs.max(axis=1, keepdims=True) + arcs.min(axis=1, keepdims=True)) / 2.0
        else:
            arcs = arcs + (self.pattern.radius * draws.real(self.turn))[:, None]
        outward = draws.radials(self.pattern) + draws.real(self.pattern.radial)[:, None]
        there = np.exp(1j * teeth.angles(self.pattern))[None, :]
        return np.asarray(draws.account(self.offset)[:, None] + (outward + 1j * arcs) * there)

    def sample(self, draws: Draws) -> Reals:
        return np.asarray(2.0 * np.abs(self.vectors(draws)).max(axis=1))


@record(eq=False)
class HoleChord:
    """Largest error of the distance between neighbouring holes [mm]; the offset and the turn of the pattern cancel.

    A tangential step d changes the chord by d cos(pi/N); a radial error of both by (r1 + r2) sin(pi/N).
    Source: geometry, derived here.
    """

    pattern: Pattern
    signed: bool = False

    def base(self) -> float:
        n = self.pattern.count
        radial = 2.0 * math.sin(math.pi / n) * self.pattern.radial.known().real
        known = self.pattern.outwards
        if not known:
            return abs(radial) + math.cos(math.pi / n) * teeth.rounding_figure(self.pattern, stepwise=True)
        arcs = [self.pattern.radius * r for r in self.pattern.rounding]
        both = (known[j] + known[j - 1] for j in range(n))
        steps = (arcs[j] - arcs[j - 1] for j in range(n))
        outward, along = math.sin(math.pi / n), math.cos(math.pi / n)
        return max(abs(radial + outward * b + along * s) for b, s in zip(both, steps, strict=True))

    def pushes(self) -> list[Push]:
        n = self.pattern.count
        tangential, radial = math.cos(math.pi / n), 2.0 * math.sin(math.pi / n)
        gain = teeth.gains(self.pattern, stepwise=True, flank=False)
        found = [Push(p.cause, 0.0, tangential * gain.wave[p.harmonic] * p.cause.bound) for p in self.pattern.periodic]
        for s in self.pattern.scatter:
            found.append(Push(s.cause, 0.0, self._scattered(s)))
        for one in self.pattern.shaped:
            steps = self.pattern.radius * teeth.shape_gain(one.shape, stepwise=True)
            found.append(Push(one.cause, 0.0, tangential * steps * one.cause.bound))
        found += [Push(p.cause, 0.0, radial * p.size) for p in real_pushes(self.pattern.radial)[1]]
        return merged([p for p in found if p.up > 0.0])

    def _scattered(self, scatter: Scatter) -> float:
        """Most that what each hole draws for itself does to one distance [mm]."""
        n = self.pattern.count
        along, outward = math.cos(math.pi / n), math.sin(math.pi / n)
        if scatter.along == "radial":
            return 2.0 * outward * scatter.bound
        if not scatter.outward:
            return along * teeth.scatter_gain(scatter, self.pattern, stepwise=True, deeper=0.0)
        each = list(zip(scatter.around, scatter.outward, strict=True))
        first = [abs(outward * o - along * a) for a, o in each]
        second = [abs(outward * o + along * a) for a, o in each]
        return scatter.bound * max(first[j - 1] + second[j] for j in range(n))

    def undetermined(self) -> tuple[str, ...]:
        mine = [s.cause.missing for s in self.pattern.scatter if s.cause.law == "undetermined"]
        mine += [
            p.cause.missing
            for p in self.pattern.periodic
            if p.cause.law == "undetermined" and teeth.folded(p.harmonic, self.pattern.count)
        ]
        return tuple(dict.fromkeys((*self.pattern.radial.undetermined(), *mine)))

    def sample(self, draws: Draws) -> Reals:
        n = self.pattern.count
        arcs = draws.arcs(self.pattern) * self.pattern.turn
        outward = draws.radials(self.pattern) + draws.real(self.pattern.radial)[:, None]
        step = np.roll(arcs, -1, axis=1) - arcs
        both = np.roll(outward, -1, axis=1) + outward
        return np.asarray(np.abs(step * math.cos(math.pi / n) + both * math.sin(math.pi / n)).max(axis=1))


@record(eq=False)
class PitchCircle:
    """Error of the diameter of the circle through the holes [mm]: twice the mean radial error (least-squares circle).

    Source: least-squares circle, first order, derived here.
    """

    pattern: Pattern
    signed: bool = True

    def base(self) -> float:
        known = self.pattern.outwards
        return 2.0 * (real_pushes(self.pattern.radial)[0] + (sum(known) / len(known) if known else 0.0))

    def pushes(self) -> list[Push]:
        found = real_pushes(self.pattern.radial, 2.0)[1]
        for s in self.pattern.scatter:
            if s.goes_outward:
                reach = 2.0 * s.bound * (sum(map(abs, s.outward)) / self.pattern.count if s.outward else 1.0)
                found.append(Push(s.cause, reach, reach))
        return merged(found)

    def undetermined(self) -> tuple[str, ...]:
        mine = [s.cause.missing for s in self.pattern.scatter if s.cause.law == "undetermined" and s.goes_outward]
        return tuple(dict.fromkeys((*self.pattern.radial.undetermined(), *mine)))

    def sample(self, draws: Draws) -> Reals:
        outward = draws.radials(self.pattern).mean(axis=1) + draws.real(self.pattern.radial)
        return np.asarray(2.0 * outward)
