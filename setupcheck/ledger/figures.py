"""Figures: the trade figures of a relation, each with its worst case by cause and its value for drawn causes. mm, rad.

A figure knows three things: which causes reach it and how far each can push it (`pushes`), what it is with every cause
at its known value (`base`), and its value for a set of draws (`sample`). worst = base + the sum of the pushes.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import field
from typing import TYPE_CHECKING, Protocol

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger import teeth
from setupcheck.ledger.account import NOTHING, Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern, Scatter
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.ledger.draws import Draws

Reals = NDArray[np.floating]


@record
class Push:
    """How far one cause can move a figure, in the figure's unit: down by `down`, up by `up`.

    known  the part of it that is certain (a run-out with a direction), signed upwards; it may take away from the others
    """

    cause: Cause
    down: float
    up: float
    known: float = 0.0

    @property
    def size(self) -> float:
        return max(self.down, self.up)


class Figure(Protocol):
    """What every figure offers; `signed` figures have two ends, the others start at zero."""

    @property
    def signed(self) -> bool: ...
    def base(self) -> float: ...
    def pushes(self) -> list[Push]: ...
    def undetermined(self) -> tuple[str, ...]: ...
    def sample(self, draws: Draws) -> Reals: ...


def vector_pushes(account: Account, factor: float) -> tuple[float, list[Push]]:
    """(factor |vector sum of known means| with the unnamed constant alone as base, pushes of all causes).

    A known run-out counts by its component along the sum of all known ones, so one that cancels counts negative; where
    they all cancel there is no such direction, and none of them counts.
    """
    known = account.known()
    towards = known / abs(known) if abs(known) > NOTHING else 0j
    found = []
    for cause, (a, b) in account.terms.items():
        along = ((a * cause.mean + b * cause.mean.conjugate()) * towards.conjugate()).real
        up = factor * (account.reach(cause) * cause.bound + along)
        found.append(Push(cause, max(-up, 0.0), up, factor * along))
    return factor * (account.constant * towards.conjugate()).real, found


def taken_away(pushes: list[Push]) -> list[Push]:
    """The pushes of `something - |vector|`, from those of the vector: it is least by its longest, most where it is zero.

    No cause adds anything to that most, a known part that takes away from another least of all.  Source: geometry.
    """
    return [Push(p.cause, p.up, 0.0, -p.known) for p in pushes]


def real_pushes(account: Account, factor: float = 1.0) -> tuple[float, list[Push]]:
    """(value with every cause at its known value, pushes around it) of a real account times `factor`."""
    found = []
    for cause, (a, b) in account.terms.items():
        push = factor * ((a + b).real * cause.bound if cause.is_real else account.reach(cause) * cause.bound)
        if cause.is_one_sided:
            found.append(Push(cause, max(-push, 0.0), max(push, 0.0)))
        else:
            found.append(Push(cause, abs(push), abs(push)))
    return account.known().real * factor, found


def merged(*lists: list[Push]) -> list[Push]:
    """Pushes of the same cause added up, order of first appearance kept."""
    total: dict[Cause, Push] = {}
    for pushes in lists:
        for p in pushes:
            mine = total.get(p.cause, Push(p.cause, 0.0, 0.0))
            total[p.cause] = Push(p.cause, mine.down + p.down, mine.up + p.up, mine.known + p.known)
    return list(total.values())


@record(eq=False)
class Vector:
    """factor times the largest of |account|: run-out (2), face run-out (across), coaxial (2), squareness (1 or across)."""

    accounts: tuple[Account, ...]
    factor: float
    signed: bool = False

    def _worse(self) -> Account:
        return max(self.accounts, key=Account.largest) if len(self.accounts) > 1 else self.accounts[0]

    def at_its_worst(self) -> tuple[float, list[Push]]:
        """Base and pushes of the larger account."""
        return vector_pushes(self._worse(), self.factor)

    def base(self) -> float:
        return self.at_its_worst()[0]

    def pushes(self) -> list[Push]:
        return self.at_its_worst()[1]

    def undetermined(self) -> tuple[str, ...]:
        return tuple(dict.fromkeys(m for a in self.accounts for m in a.undetermined()))

    def sample(self, draws: Draws) -> Reals:
        values = np.abs(draws.account(self.accounts[0]))
        for account in self.accounts[1:]:
            values = np.maximum(values, np.abs(draws.account(account)))
        return np.asarray(values * self.factor)


@record(eq=False)
class Length:
    """A signed axial distance or deviation [mm], the nominal distance included."""

    account: Account
    signed: bool = True

    def base(self) -> float:
        return real_pushes(self.account)[0]

    def pushes(self) -> list[Push]:
        return real_pushes(self.account)[1]

    def undetermined(self) -> tuple[str, ...]:
        return self.account.undetermined()

    def sample(self, draws: Draws) -> Reals:
        return draws.real(self.account)


@record(eq=False)
class OverATurn:
    """A length that swings once a turn with an eccentricity: account -+ factor |offset|. Both ends count.

    pattern  places that also scatter outwards, each by factor r_j; None where there are none
    `sample` has two rows, the least and the largest of the turn.  Source: geometry, derived here.
    """

    account: Account
    offset: Account
    factor: float
    pattern: Pattern | None = None
    signed: bool = True

    def _outwards(self) -> list[Scatter]:
        return [s for s in self.pattern.scatter if s.goes_outward] if self.pattern is not None else []

    def base(self) -> float:
        return real_pushes(self.account)[0]

    def pushes(self) -> list[Push]:
        _, each = vector_pushes(self.offset, self.factor)
        both = [Push(p.cause, p.up, p.up) for p in each]  # what swings out swings in half a turn later
        own = [Push(s.cause, self.factor * s.bound, self.factor * s.bound) for s in self._outwards()]
        return merged(real_pushes(self.account)[1], both, own)

    def undetermined(self) -> tuple[str, ...]:
        mine = tuple(s.cause.missing for s in self._outwards() if s.cause.law == "undetermined")
        return tuple(dict.fromkeys((*self.account.undetermined(), *self.offset.undetermined(), *mine)))

    def sample(self, draws: Draws) -> Reals:
        if self.pattern is not None and self._outwards():
            offset, places = draws.account(self.offset), teeth.angles(self.pattern)
            each = teeth.waves(offset, places) + draws.radials(self.pattern)
            middle = draws.real(self.account)
            return np.asarray([middle + self.factor * each.min(axis=1), middle + self.factor * each.max(axis=1)])
        middle, swing = draws.real(self.account), self.factor * np.abs(draws.account(self.offset))
        return np.asarray([middle - swing, middle + swing])


@record(eq=False)
class Stock:
    """Radial stock left at the worst place round the part [mm]: depth - largest |offset| at the ends of the cut.

    Source: geometry, derived here (a circle turned about another centre).
    """

    depth: float
    offsets: tuple[Account, ...]
    signed: bool = True

    def _vector(self) -> Vector:
        return Vector(self.offsets, 1.0)

    def base(self) -> float:
        return self.depth - self._vector().base()

    def pushes(self) -> list[Push]:
        return taken_away(self._vector().pushes())

    def undetermined(self) -> tuple[str, ...]:
        return self._vector().undetermined()

    def sample(self, draws: Draws) -> Reals:
        return np.asarray(self.depth - self._vector().sample(draws).astype(np.float64))


@record(eq=False)
class MidPlane:
    """Distance of the tooth mid-plane from where it belongs, worst tooth [mm]: max over j of |a - Re(conj(t) r e^(i theta_j))|.

    Source: geometry, derived here (a leaning ring of teeth).
    """

    axial: Account
    lean: Account
    pattern: Pattern
    signed: bool = False

    def base(self) -> float:
        return abs(real_pushes(self.axial)[0]) + vector_pushes(self.lean, self.pattern.radius)[0]

    def pushes(self) -> list[Push]:
        middle, axial = real_pushes(self.axial)
        low = middle - sum(p.down for p in axial)
        high = middle + sum(p.up for p in axial)
        outward = [Push(p.cause, 0.0, p.up if high >= -low else p.down) for p in axial]
        if (high >= -low > 0.0 and middle < 0.0) or (-low > high > 0.0 and middle > 0.0):
            outward = [Push(p.cause, 0.0, p.size) for p in axial]  # the middle counts outward, so take the larger side
        return merged(outward, vector_pushes(self.lean, self.pattern.radius)[1])

    def undetermined(self) -> tuple[str, ...]:
        return tuple(dict.fromkeys(self.axial.undetermined() + self.lean.undetermined()))

    def sample(self, draws: Draws) -> Reals:
        axial, lean = draws.real(self.axial), draws.account(self.lean)
        low, high = teeth.wave_ends(lean, teeth.angles(self.pattern))
        r = self.pattern.radius
        return np.asarray(np.maximum(np.abs(axial - r * high), np.abs(axial - r * low)))


@record(eq=False)
class Tooth:
    """A figure of the division of teeth, gaps or holes.

    flank     True: the worse of both flanks at fixed radius; False: gap centres
    stepwise  True: largest step between neighbours; False: max - min over the turn
    driven    True: as a worm driving one flank sees it (index figures)
    oblique   what the lean of oblique gaps adds, as teeth.oblique has it
    factor    from arc on the pattern radius to the figure's unit (1, 1/r for an angle, D/(2 r) on a workpiece, …)
    """

    offset: Account
    pattern: Pattern
    flank: bool
    stepwise: bool
    factor: float = 1.0
    driven: bool = False
    signed: bool = False
    oblique: Account = field(default_factory=Account)

    def _sides(self) -> tuple[int, ...]:
        return (1, -1) if self.flank and self.pattern.pressure_angle else (0,)

    def wave(self, side: int) -> Account:
        """Vector F of one flank (0: gap centre): its arcs are Im(F exp(-i theta_j)) before division."""
        own = self.offset * teeth.flank_turn(self.pattern, side=side, driven=self.driven)
        if self.oblique == Account():
            return own
        return own + self.oblique * teeth.oblique_turn(self.pattern, side=side, driven=self.driven)

    def _worse(self) -> Account:
        return max((self.wave(side) for side in self._sides()), key=Account.largest)

    def base(self) -> float:
        gain = teeth.gains(self.pattern, stepwise=self.stepwise, flank=False)
        rounding = teeth.rounding_figure(self.pattern, stepwise=self.stepwise, deeper=self._deeper())
        return self.factor * rounding + vector_pushes(self._worse(), self.factor * gain.offset)[0]

    def pushes(self) -> list[Push]:
        gain = teeth.gains(self.pattern, stepwise=self.stepwise, flank=False)
        division = [
            Push(p.cause, 0.0, self.factor * gain.wave[p.harmonic] * (p.cause.bound + abs(p.cause.mean)))
            for p in self.pattern.periodic
        ]
        for s in self.pattern.scatter:
            own = teeth.scatter_gain(s, self.pattern, stepwise=self.stepwise, deeper=self._deeper())
            division.append(Push(s.cause, 0.0, self.factor * own))
        for one in self.pattern.shaped:
            own = self.pattern.radius * teeth.shape_gain(one.shape, stepwise=self.stepwise)
            division.append(Push(one.cause, 0.0, self.factor * own * one.cause.bound))
        return merged(vector_pushes(self._worse(), self.factor * gain.offset)[1], [p for p in division if p.up > 0.0])

    def _deeper(self) -> float:
        """What a gap cut deeper by r moves each of its flanks by, over r."""
        return math.tan(self.pattern.pressure_angle or 0.0) if self.flank else 0.0

    def undetermined(self) -> tuple[str, ...]:
        mine = [
            p.cause.missing
            for p in self.pattern.periodic
            if p.cause.law == "undetermined" and teeth.folded(p.harmonic, self.pattern.count)
        ]
        mine += [
            s.cause.missing for s in self.pattern.scatter if s.cause.law == "undetermined" and self.pattern.count > 1
        ]
        return tuple(dict.fromkeys((*self.offset.undetermined(), *self.oblique.undetermined(), *mine)))

    def sample(self, draws: Draws) -> Reals:
        return np.asarray(self._over_the_turn(draws) * self.factor)

    def _has_radial(self) -> bool:
        return bool(self.pattern.outwards) or any(s.goes_outward for s in self.pattern.scatter)

    def _over_the_turn(self, draws: Draws) -> Reals:
        """Range or largest step of the worse flank for all trials [mm]; figures of one ring share it."""
        waves = [self.wave(side) for side in self._sides()]
        terms = frozenset((i, c.identity, a, b) for i, w in enumerate(waves) for c, (a, b) in w.terms.items())
        key = (self.stepwise, id(self.pattern), tuple(w.constant for w in waves), terms)
        found = draws.memo.get(key)
        if found is None:
            figure = teeth.largest_steps if self.stepwise else teeth.ranges
            places, arcs = teeth.angles(self.pattern), draws.arcs(self.pattern)
            deep = draws.radials(self.pattern) * np.float32(self._deeper()) if self._has_radial() else None
            own = [arcs if deep is None else arcs + np.float32(side) * deep for side in self._sides()]
            found = teeth.figure_of(figure, [draws.account(w) * -1j for w in waves], places, own)
            draws.memo[key] = found
        return found


@record(eq=False)
class ToothRunOut:
    """Run-out of gaps or holes that also scatter outwards: factor (max - min over j of e cos(phi - theta_j) + r_j).

    factor  1 for the full movement of a ball in the gaps, 2 tan(alpha) for the swing of the backlash
    Source: geometry, derived here.
    """

    offset: Account
    pattern: Pattern
    factor: float
    signed: bool = False

    def base(self) -> float:
        known = self.pattern.outwards
        swing = self.factor * (max(known) - min(known)) if known else 0.0
        return swing + vector_pushes(self.offset, 2.0 * self.factor)[0]

    def pushes(self) -> list[Push]:
        own = [Push(s.cause, 0.0, 2.0 * self.factor * s.bound) for s in self.pattern.scatter if s.goes_outward]
        return merged(vector_pushes(self.offset, 2.0 * self.factor)[1], own)

    def undetermined(self) -> tuple[str, ...]:
        mine = (s.cause.missing for s in self.pattern.scatter if s.cause.law == "undetermined" and s.goes_outward)
        return tuple(dict.fromkeys((*self.offset.undetermined(), *mine)))

    def sample(self, draws: Draws) -> Reals:
        around, radials = teeth.angles(self.pattern), draws.radials(self.pattern)
        return np.asarray(teeth.figure_of(teeth.ranges, [draws.account(self.offset)], around, [radials]) * self.factor)


@record(eq=False)
class FaceStock:
    """Axial stock left on a face where the cut is thinnest [mm]: depth - radius |lean between old and new face|.

    Source: geometry, derived here.
    """

    axial: Account
    lean: Account
    radius: float
    signed: bool = True

    def base(self) -> float:
        return real_pushes(self.axial)[0] - vector_pushes(self.lean, self.radius)[0]

    def pushes(self) -> list[Push]:
        return merged(real_pushes(self.axial)[1], taken_away(vector_pushes(self.lean, self.radius)[1]))

    def undetermined(self) -> tuple[str, ...]:
        return tuple(dict.fromkeys(self.axial.undetermined() + self.lean.undetermined()))

    def sample(self, draws: Draws) -> Reals:
        return np.asarray(draws.real(self.axial) - self.radius * np.abs(draws.account(self.lean)))


def alternatives(figure: Figure) -> tuple[Figure, ...]:
    """The places a figure is the worst of, each as a figure of its own; itself where there is only one."""
    places: Callable[[], tuple[Figure, ...]] | None = getattr(figure, "places", None)
    if places is not None:
        return places()
    if isinstance(figure, Vector) and len(figure.accounts) > 1:
        return tuple(Vector((a,), figure.factor) for a in figure.accounts)
    if isinstance(figure, Stock) and len(figure.offsets) > 1:
        return tuple(Stock(figure.depth, (a,)) for a in figure.offsets)
    return (figure,)
