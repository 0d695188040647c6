"""A division test against the plan: wave by wave as vectors, whose error it is, what putting the teeth true again would bring.

Only `setupcheck readings` needs it. Lengths mm, angles rad; waves as arcs on the pitch circle, in the frame of the part.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.owners import Explained, explained
from setupcheck.division.results import Reduced, Wave
from setupcheck.ledger import harmonic
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import Draws
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.book import Book, Known, Open, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

Reals = NDArray[np.floating]

INDEX = ("index-within", "index-range", "on-workpiece", "cumulative-pitch", "gap-centre-pitch")
"""Requirements a division test answers, the nearest to what it reads first."""

SMALL = 0.0005
"""Length of a wave that nobody has to explain [mm]. Our screening choice."""


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

    amount, within    how far the teeth are off the axis of use, and its 95 % half interval [mm]
    range, then       range of the index now, and with the first wave gone [rad];  then_most  with what is left of its interval
    """

    amount: float
    within: float
    range: float
    then: float
    then_most: float


@record(eq=False)
class Against:
    """A test against the plan.

    stack      the requirement it is held against, None where the job has none;  figure  its value as measured [its unit]
    u          standard uncertainty of that;  worst, likely  as planned
    read, of   stations read, places there are
    radius     of the pitch circle [mm]
    """

    stack: Result | None
    figure: float | None
    u: float | None
    waves: tuple[WaveAgainst, ...]
    move: Move | None
    read: int
    of: int
    radius: float


def index_stack(book: Book) -> Scope | None:
    """The requirement a division test answers; None where the job asks for none."""
    scopes = [s for s in book.instances("stack") if s.node.require.what in INDEX]  # type: ignore[attr-defined]
    return min(scopes, key=lambda s: INDEX.index(s.node.require.what), default=None)  # type: ignore[attr-defined]


def against(book: Book, floor: Floor, test: Reduced, scope: Scope | None) -> Against | Open:
    """The test against the figure of one requirement; Open where the plan's figure is not known.

    Source: ledger.harmonic for the plan, division.owners for the odds.
    """
    if scope is None:
        return Open(because="the job requires no index or pitch figure of a toothing: write one under require")
    answer = book.get("stack.combined", scope)
    if not isinstance(answer, Known) or not isinstance(answer.value, Result):
        return answer if isinstance(answer, Open) else Open(because="the figure of that requirement is not known")
    result = answer.value
    ring = result.figure.ring if isinstance(result.figure, AsItRuns) else result.figure
    if not isinstance(ring, Tooth):
        return Open(because="the figure of that requirement is none of a ring of teeth or holes")
    drawn = book.get("route.draws", book.instances("job")[0])
    assert isinstance(drawn, Known) and isinstance(drawn.value, Draws)
    radius = ring.pattern.radius
    waves = tuple(_waves(test, ring, drawn.value))
    factor = _factor(result, radius)
    u = test.scatter * math.sqrt(2.0 * max(test.stations, 1) / max(test.rows, 1))
    return Against(
        stack=result,
        figure=factor * test.range if factor is not None else None,
        u=factor * u if factor is not None else None,
        waves=waves,
        move=_move(test, waves, radius),
        read=test.stations,
        of=ring.pattern.count,
        radius=radius,
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
    radius, side = ring.pattern.radius, _side(test)
    for wave in test.waves:
        number = round(wave.harmonic)
        if abs(wave.harmonic - number) > 1e-9 or not 1 <= number < ring.pattern.count / 2.0:
            continue
        planned = harmonic.planned_wave(ring, number, draws, side=side)
        aa, ab, bb = wave.covariance
        yield WaveAgainst(
            wave,
            radius * wave.length.value,
            radius * wave.length.low,
            radius * wave.length.high,
            float(np.quantile(np.abs(planned.drawn), 0.95)),
            None if wave.open else _explained(wave, planned, radius**2 * np.array([[aa, ab], [ab, bb]]), radius),
        )


def _side(test: Reduced) -> int:
    """Flank the wave is of: 0 where both were read, or nobody knows which."""
    return test.eccentric.side if test.eccentric is not None else 0


def _explained(wave: Wave, planned: harmonic.Wave, uncertainty: Reals, radius: float) -> Explained | None:
    spreads: dict[str, Reals] = {}
    for part in planned.parts:
        name = owner(part.cause)
        spreads[name] = spreads.get(name, np.zeros((2, 2))) + part.covariance
    try:
        return explained(
            (radius * wave.a, radius * wave.b),
            uncertainty,
            expected=(planned.middle.real, planned.middle.imag),
            spreads=spreads,
        )
    except ValueError:
        return None


def owner(cause: Cause) -> str:
    """Setup that a cause belongs to, dividing apart from holding: they are put right at different places."""
    if cause.op is None:
        return "parts as bought, and the place they work in"
    dividing = any(".divide." in path or path.endswith(".divide") for path in cause.paths)
    return f"op {cause.op}, {'dividing' if dividing else 'holding'}"


def _move(test: Reduced, waves: tuple[WaveAgainst, ...], radius: float) -> Move | None:
    """What truing the teeth's axis to the axis of use would bring; None where nothing can be told of it."""
    off = test.eccentric
    if off is None or off.open or not waves or waves[0].wave.harmonic != 1.0:
        return None
    rest = test.range_without_first
    if rest is None:
        return None
    left = (off.amount.high - off.amount.low) / 2.0
    return Move(off.amount.value, left, test.range, rest, rest + 2.0 * left / radius)
