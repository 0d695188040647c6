"""A ring of teeth, holes or lines as planned and as read: worst case, draws place by place, measured means. mm, rad."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.relations import Built
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.flow import ReadBack, Review
    from setupcheck.ledger.account import Account
    from setupcheck.ledger.figures import Tooth
    from setupcheck.ledger.running import AsItRuns

MOST_DRAWN = 2_000_000
"""Places times draws that are looked at; of a larger ring fewer draws. Our choice, for the time it takes."""
SHARE = 0.95
"""Of the draws, place by place, within the dashed lines. Our choice, as the review's likely value."""


@record(eq=False)
class Planned:
    """A ring as planned; arcs on its circle [mm].

    kind    gap, hole or line;  worst  range of the worst case, None where open;  limit  of that range, None without
    low, high  of each place what SHARE of the draws stay within;  one  a draw whose range is the likely one, and that range
    missing what to fill;  gaps  what the gaps add within their pitch, which the worst case counts [mm]
    """

    name: str
    kind: str
    count: int
    radius: float
    worst: float | None
    limit: float | None
    low: tuple[float, ...]
    high: tuple[float, ...]
    one: tuple[float, ...]
    likely: float
    missing: tuple[str, ...]
    gaps: float
    title: str


@record
class Shown:
    """A measured mean: place as a number round the ring, deviation and its uncertainty (k = 2) as arcs [mm], direction."""

    place: float
    value: float
    uncertain: float
    direction: int


def count_of(found: Review, name: str) -> int:
    """How many teeth, holes or lines it has."""
    ref = found.loaded.ref(name)
    node = found.loaded.job.parts[ref.part].surfaces[ref.surface]
    return int(getattr(node, "count", 1) or 1)


@record(eq=False)
class Figure:
    """What a requirement computes of a ring: its places, and how it runs where it is asked as it runs."""

    ring: Tooth
    running: AsItRuns | None


def figure_of(found: Review, scope: Scope) -> Figure | tuple[str, ...]:
    """The figure of a requirement; what is missing where it cannot be told."""
    from setupcheck.ledger.running import AsItRuns

    built = found.book.get("stack.built", scope)
    if not isinstance(built, Known) or not isinstance(built.value, Built):
        return (built.missing or (built.because,)) if isinstance(built, Open) else ()
    figure = built.value.figure
    running = figure if isinstance(figure, AsItRuns) else None
    ring = _as_ring(running.ring if running is not None else figure)
    return Figure(ring, running) if ring is not None else ("a pitch figure of this ring, as in what: gap-centre-pitch",)


def planned(found: Review, scope: Scope, name: str) -> Planned:
    """The ring as planned: worst case of the review, and draws of it place by place."""
    stack, ref = stack_of(scope), found.loaded.ref(name)
    node = found.loaded.job.parts[ref.part].surfaces[ref.surface]
    kind = {"teeth": "gap", "lines": "line"}.get(node.kind, "hole")
    circle = getattr(node, "on_circle", None) or 0.0
    title = f"Cumulative pitch of {name}, {count_of(found, name)} {'teeth' if kind == 'gap' else f'{kind}s'}"
    empty = Planned(name, kind, count_of(found, name), circle / 2.0, None, None, (), (), (), 0.0, (), 0.0, title)
    figure = figure_of(found, scope)
    if not isinstance(figure, Figure):
        return replace(empty, missing=figure)
    ring, running = figure.ring, figure.running
    result = found.results.get(scope.key)
    asked = result is not None and stack.require.what not in ("single-pitch", "position", "chord")
    if asked and isinstance(result, Result):
        worst = result.combined.worst.high / ring.factor
        limit = stack.high / ring.factor if stack.high is not None else None
        gaps = running.within_a_pitch() / ring.factor if running is not None else 0.0
    else:
        whole = replace(ring, factor=1.0, stepwise=False)
        worst, limit, gaps = whole.base() + sum(p.up for p in whole.pushes()), None, 0.0
    low, high, one, likely = _drawn(found, ring)
    return replace(
        empty,
        count=ring.pattern.count,
        radius=ring.pattern.radius,
        worst=worst,
        limit=limit,
        low=low,
        high=high,
        one=one,
        likely=likely,
        gaps=gaps,
    )


def _as_ring(figure: object) -> Tooth | None:
    """The figure of the ring's places; of a position that of its holes round the circle."""
    from setupcheck.ledger.figures import Tooth
    from setupcheck.ledger.holes import HolePosition

    if isinstance(figure, Tooth):
        return figure
    if isinstance(figure, HolePosition):
        return Tooth(figure.offset, figure.pattern, flank=False, stepwise=False)
    return None


def _drawn(found: Review, ring: Tooth) -> tuple[tuple[float, ...], tuple[float, ...], tuple[float, ...], float]:
    """(lower, upper) ends that SHARE of the draws stay within, one draw of the likely range, that range; arcs [mm].

    The draws are those of the review, each cause from its own stream; of both flanks each draw counts with the one that
    ranges farther, as the figure has it.
    """
    import numpy as np

    from setupcheck.ledger import teeth
    from setupcheck.ledger.draws import Draws

    answer = found.book.get("route.draws", found.book.instances("job")[0])
    draws = answer.value if isinstance(answer, Known) and isinstance(answer.value, Draws) else Draws()
    some = max(200, min(draws.trials, MOST_DRAWN // ring.pattern.count))
    places = teeth.angles(ring.pattern)
    arcs = draws.arcs(ring.pattern)[:some]
    best, widest = None, None
    for side, account in sides_of(ring):
        own = teeth.waves(draws.account(account)[:some] * -1j, places) + arcs
        if side and (ring.pattern.outwards or any(s.goes_outward for s in ring.pattern.scatter)):
            own = own + side * math.tan(ring.pattern.pressure_angle or 0.0) * draws.radials(ring.pattern)[:some]
        top, bottom = own.max(axis=1), own.min(axis=1)
        own = own - ((top + bottom) / 2.0)[:, None]
        if best is None or widest is None:
            best, widest = own, top - bottom
        else:
            best = np.where((top - bottom > widest)[:, None], own, best)
            widest = np.maximum(widest, top - bottom)
    assert best is not None and widest is not None, "a ring has at least one flank"
    beyond = (1.0 - SHARE) / 2.0
    low, high = np.quantile(best, [beyond, 1.0 - beyond], axis=0)
    likely = float(np.quantile(widest, SHARE))
    chosen = int(np.argmin(np.abs(widest - likely)))
    return tuple(low.tolist()), tuple(high.tolist()), tuple(best[chosen].tolist()), float(widest[chosen])


def sides_of(ring: Tooth) -> list[tuple[int, Account]]:
    """The waves of the flanks that count: both of teeth with flanks, else the middle of the gap."""
    sides = (1, -1) if ring.flank and ring.pattern.pressure_angle else (0,)
    return [(side, ring.wave(side)) for side in sides]


def measured(read: ReadBack | None, name: str) -> list[Shown]:
    """The means of the test, if it is of this ring: each direction about the middle of its own highest and lowest.

    Uncertain by twice the scatter of a reading over the root of their number: the readings alone, without the instrument.
    Source: k = 2, JCGM 100:2008.
    """
    if read is None or read.of.name != name:
        return []
    of, found = read.of, []
    for direction in sorted({m.direction for m in read.reduced.means}, reverse=True):
        mine = [m for m in read.reduced.means if m.direction == direction]
        values = [m.value for m in mine]
        middle = (max(values) + min(values)) / 2.0
        for m in mine:
            pitches = of.turn * (m.theta - of.start) * of.count / math.tau
            place = (
                (pitches + (0.0 if of.holes else 0.5) + 1e-9) % of.count - 1e-9 + 0.5
            )  # a ring's edge lies before its first
            doubt = 2.0 * read.reduced.scatter / math.sqrt(m.readings)
            found.append(
                Shown(
                    place, of.radius * (m.value - middle), of.radius * doubt if math.isfinite(doubt) else 0.0, direction
                )
            )
    return sorted(found, key=lambda p: (-p.direction, p.place))
