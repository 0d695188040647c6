"""A division test against the plan: wave by wave as vectors, whose error it is, what putting the teeth true again would bring.

Only `setupcheck readings` needs it. Lengths mm, angles rad; waves as arcs on the pitch circle, in the frame of the part.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.owners import Explained, explained
from setupcheck.division.results import Reduced, Wave
from setupcheck.ledger import harmonic
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.running import AsItRuns
from setupcheck.ledger.teeth import folded
from setupcheck.quantities.book import Book, Known, Open, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import stack_of
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

Reals = NDArray[np.floating]

INDEX = ("index-within", "index-range", "on-workpiece", "cumulative-pitch", "gap-centre-pitch")
"""Requirements a division test answers, the nearest to what it reads first."""

PUZZLING = 0.05
"""How rarely a plan that is kept may give a wave before an owner is looked for. Our screening choice."""


@record(eq=False)
class WaveAgainst:
    """One wave as read and as planned, on the pitch circle.

    measured, low, high  its length with the 95 % interval [mm];  usual  what the plan stays under in 95 of 100 [mm]
    explained  None where the answer is open
    """

    wave: Wave
    measured: float
    low: float
    high: float
    usual: float
    explained: Explained | None


@record
class Move:
    """What putting the first wave right would bring.

    amount, within    how far the teeth are off the axis of use, and its 95 % half interval [mm];  tooth  towards which
    then, most        what is left of a figure with the first wave gone, and with what is left of its interval, as shares
    """

    amount: float
    within: float
    tooth: int
    then: float
    most: float


@record(eq=False)
class Answer:
    """What the test says to one requirement.

    scope, plan  the requirement, and its figure as planned
    value, u     as measured, and the standard uncertainty of that, None without the instrument's [base unit of the figure]
    """

    scope: Scope
    plan: Result
    value: float
    u: float | None


@record(eq=False)
class Against:
    """A test against the plan.

    answers    to the requirements of these teeth that a test answers, the nearest to what it reads first
    scatter    what the scatter of the readings alone does to a difference of two stations, k = 2 [rad]
    read, of   places read, places there are
    """

    answers: tuple[Answer, ...]
    scatter: float
    waves: tuple[WaveAgainst, ...]
    move: Move | None
    read: int
    of: int


def asked(book: Book, floor: Floor, of: str) -> list[Scope]:
    """The requirements of these teeth that a division test answers, best first; none that the mean of several heads must meet."""
    requires = ((s, stack_of(s).require) for s in book.instances("stack"))
    scopes = [s for s, require in requires if require.what in INDEX and (require.heads or 1) == 1]
    mine = [s for s in scopes if str(replace(floor.loaded.ref(stack_of(s).of), op=None)) == of]
    return sorted(mine, key=lambda s: INDEX.index(stack_of(s).require.what))


def against(book: Book, floor: Floor, test: Reduced, of: str, *, instrument: float | None = None) -> Against | Open:
    """The test of some teeth against the plan; Open where the job asks for no such figure, or the plan's is not known.

    instrument  expanded uncertainty of the angle standard, k = 2, between any two stations [rad]; None: not stated
    Source: ledger.harmonic for the plan, division.owners for the odds.
    """
    scopes = asked(book, floor, of)
    if not scopes:
        return Open(
            because=f"no index or pitch figure of {of} is required as one head reads it: write one, as in what: index-within"
        )
    found = [(scope, book.get("stack.combined", scope)) for scope in scopes]
    known = [(s, a.value) for s, a in found if isinstance(a, Known) and isinstance(a.value, Result)]
    if not known:
        return next((a for _, a in found if isinstance(a, Open)), Open(because="the plan's figure is not known"))
    first = known[0][1].figure
    ring = first.ring if isinstance(first, AsItRuns) else first
    if not isinstance(ring, Tooth):
        return Open(because="the figure of that requirement is none of a ring of teeth or holes")
    drawn = book.get("route.draws", book.instances("job")[0])
    assert isinstance(drawn, Known) and isinstance(drawn.value, Draws)
    scatter = test.scatter * math.sqrt(2.0 / test.per_mean)  # the range is a difference of two means of one direction
    u = math.hypot(scatter, instrument / 2.0) if instrument is not None else None
    factors = [(scope, plan, _factor(plan, ring.pattern.radius)) for scope, plan in known]
    return Against(
        answers=tuple(
            Answer(scope, plan, f * test.range, None if u is None else f * u)
            for scope, plan, f in factors
            if f is not None
        ),
        scatter=2.0 * scatter,
        waves=tuple(_waves(test, ring, drawn.value)),
        move=_move(test, ring.pattern.radius),
        read=test.places,
        of=ring.pattern.count,
    )


def _factor(result: Result, radius: float) -> float | None:
    """From the range of the wheel's angle to the unit of the requirement."""
    require = result.stack.require
    if require.what == "index-within":
        return 0.5
    if require.what == "index-range":
        return 1.0
    if require.what == "on-workpiece":
        return require.on_diameter / 2.0 if require.on_diameter is not None else None
    return radius


def _waves(test: Reduced, ring: Tooth, draws: Draws) -> Iterator[WaveAgainst]:
    """Waves against the plan. Read at whole pitches, a quick wave is the slow one that so many places see of it."""
    radius, count = ring.pattern.radius, ring.pattern.count
    for wave in test.waves:
        number = folded(round(wave.harmonic), count)
        if abs(wave.harmonic - round(wave.harmonic)) > 1e-9 or not 1 <= number < count / 2.0:
            continue
        if number != round(wave.harmonic) and test.places < test.stations:
            continue
        found = []
        for side in _sides(test):
            planned = harmonic.planned_wave(ring, number, draws, side=side)
            told = None if wave.open else _explained(test, wave, planned, ring, draws)
            found.append((told, float(np.quantile(np.abs(planned.drawn), 0.95))))
        told, usual = max(found, key=lambda one: one[0].beyond if one[0] is not None else 0.0)
        yield WaveAgainst(
            wave, radius * wave.length.value, radius * wave.length.low, radius * wave.length.high, usual, told
        )


def _sides(test: Reduced) -> tuple[int, ...]:
    """Flanks a test may have been read on: of one that nobody names, the flank that suits the plan better counts."""
    off = test.eccentric
    if off is None:
        return (0,)
    return (1, -1) if off.flanks == "unknown" else (off.side,)


def _explained(test: Reduced, wave: Wave, planned: harmonic.Wave, ring: Tooth, draws: Draws) -> Explained | None:
    """Owners of a wave; where both flanks were read, of its mean and their difference together."""
    radius = ring.pattern.radius
    if test.flanks is not None and planned.harmonic == 1 and ring.pattern.pressure_angle:
        mean, spreads = _of_both_flanks(ring, draws)
        read, covariance = np.array(test.flanks.vector), np.array(test.flanks.covariance)
    else:
        mean, spreads = _by_owner({p.cause.identity: (p.cause, _plane(p.drawn)) for p in planned.parts})
        mean = mean + _plane(np.array([planned.known]))[:, 0]
        aa, ab, bb = wave.covariance
        turned = _as_slow(round(wave.harmonic), ring.pattern)
        read, covariance = turned @ (wave.a, wave.b), turned @ np.array([[aa, ab], [ab, bb]]) @ turned.T
    try:
        return explained(radius * read, radius**2 * covariance, expected=mean, spreads=spreads)
    except ValueError:
        return None


def _as_slow(harmonic: int, pattern: Pattern) -> Reals:
    """What makes of a wave's vector that of the slow wave which the gaps see, (2, 2): turned by whole waves a pitch times the
    first gap's direction, and mirrored where it runs the other way.  Source: sampling at N equal steps, derived here."""
    slow = folded(harmonic, pattern.count)
    sense = 1 if harmonic % pattern.count == slow else -1
    by = (harmonic - sense * slow) * pattern.start
    return np.array([[1.0, 0.0], [0.0, sense]]) @ [[math.cos(by), math.sin(by)], [-math.sin(by), math.cos(by)]]


def _plane(values: NDArray[np.generic]) -> Reals:
    return np.stack([np.real(values), np.imag(values)])


def _of_both_flanks(ring: Tooth, draws: Draws) -> tuple[Reals, dict[str, Reals]]:
    """Middle (4,) and covariance by owner of mean and difference of both flanks: the clockwise flank less the other, side -1 less
    side +1, as `Flanks` has it."""
    sides = {side: harmonic.planned_wave(ring, 1, draws, side=side) for side in (-1, 1)}
    drawn = {side: {p.cause.identity: (p.cause, p.drawn) for p in wave.parts} for side, wave in sides.items()}
    both: dict[str, tuple[Cause, Reals]] = {}
    for name in drawn[-1] | drawn[1]:
        cause = drawn[-1][name][0] if name in drawn[-1] else drawn[1][name][0]
        less, more = (drawn[side][name][1] if name in drawn[side] else np.zeros(draws.trials) for side in (-1, 1))
        both[name] = cause, np.concatenate([_plane((less + more) / 2.0), _plane(less - more)])
    mean, spreads = _by_owner(both)
    less_known, more_known = sides[-1].known, sides[1].known
    known = np.array([(less_known + more_known) / 2.0, less_known - more_known])
    return mean + np.stack([known.real, known.imag], axis=1).ravel(), spreads


def _by_owner(parts: Mapping[str, tuple[Cause, Reals]]) -> tuple[Reals, dict[str, Reals]]:
    """Middle and covariance of all that each owner may add, from its causes as drawn, each of shape (n, trials)."""
    total: dict[str, Reals] = {}
    for cause, drawn in parts.values():
        name = owner(cause)
        total[name] = total[name] + drawn if name in total else drawn
    sizes = [len(drawn) for drawn in total.values()]
    middle = sum((drawn.mean(axis=1) for drawn in total.values()), np.zeros(sizes[0] if sizes else 2))
    return middle, {name: np.cov(drawn) for name, drawn in total.items()}


def owner(cause: Cause) -> str:
    """Setup that a cause belongs to; dividing, cutting and holding apart: they are put right at different places."""
    if cause.op is None:
        return "parts as bought, and the place they work in"
    dividing = any(".divide." in path or path.endswith(".divide") for path in cause.paths)
    cutting = any(".cut." in path for path in cause.paths)
    return f"op {cause.op}, {'dividing' if dividing else 'cutting' if cutting else 'holding'}"


def _move(test: Reduced, radius: float) -> Move | None:
    """What truing the teeth's axis to the axis of use would bring; None where nothing can be told of it.

    Source: the readings less their first wave; what is left of its interval counts to both sides.
    """
    off, rest = test.eccentric, test.range_without_first
    if off is not None and off.looks in ("division", "neither"):
        return None  # the flanks differ otherwise than teeth off their axis make them: moving those cures one flank at most
    if off is None or off.open or rest is None or off.amount.low <= 0.0 or not test.range > 0.0:
        return None
    left = (off.amount.high - off.amount.low) / 2.0
    return Move(off.amount.value, left, off.tooth, rest / test.range, (rest + 2.0 * left / radius) / test.range)
