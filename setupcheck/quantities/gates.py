"""Gates: the dial reading to accept at each hold. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import fields, replace

from setupcheck.jobfile.models import Deviation
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.figures import Figure, Push, Tooth, alternatives
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.book import Scope
from setupcheck.quantities.causes import kept_key
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.record import record

FINE, COARSE, FINE_BELOW = 0.0001, 0.001, 0.010
"""Gates are rounded down to 0.1 um below 10 um, to whole um above [mm]. Source: our screening choice."""


@record
class Gate:
    """The largest dial reading a hold may show so that every requirement is still met at its worst.

    reading   full indicator movement [mm], exact (the report rounds it down); 0 where no reading will do, None where no
              requirement depends on it
    planned   what the job file plans, or has measured (`measured`) [mm];  by  instance of the stack that sets it
    also      other operations held by the same device with its mark kept: one reading for all
    least     the reading must not be below this: a known high spot takes away from another
    high_at   where that high spot must stay
    """

    key: str
    op: int
    step: str
    on: str
    reading: float | None
    planned: float
    by: str
    measured: bool = False
    also: tuple[int, ...] = ()
    least: float = 0.0
    high_at: str = ""


@record
class Reach:
    """A figure at one of the places it is the worst of: with every cause at its known value, and how far each pushes it."""

    base: float
    pushes: list[Push]


def reaches(figure: Figure) -> list[Reach]:
    """All those places."""
    return [Reach(one.base(), one.pushes()) for one in alternatives(figure)]


def worst_excess(figure: Figure, low: float | None, high: float | None) -> float:
    """How far the worst case goes beyond its limits; negative inside. Source: base and pushes of the figure."""
    return max(_excesses(reaches(figure), low, high), default=-math.inf)


def _excesses(places: Sequence[Reach], low: float | None, high: float | None) -> list[float]:
    """The same for each limit, at each of the places the figure is the worst of."""
    found = []
    for one in places:
        if high is not None:
            found.append(one.base + sum(p.up for p in one.pushes) - high)
        if low is not None:
            found.append(low - one.base + sum(p.down for p in one.pushes))
    return found


def room(places: Sequence[Reach], cause: Cause, *, low: float | None, high: float | None) -> float | None:
    """Factor by which one cause without direction may grow (or must shrink) until the worst case meets its limit.

    1 + margin / push, over the places the figure is the worst of; 0 where it cannot help.  None where the cause does not
    reach the figure.
    Source: the worst case is linear in each bound, derived here.
    """
    found: list[float] = []
    for one in places:
        base, pushes = one.base, one.pushes
        mine = next((p for p in pushes if p.cause == cause), None)
        if mine is None:
            continue
        margins = []
        if high is not None:
            margins.append((high - base - sum(p.up for p in pushes), mine.up))
        if low is not None:
            margins.append((base - sum(p.down for p in pushes) - low, mine.down))
        pushed = [1.0 + margin / push for margin, push in margins if push > 0.0]
        if pushed and any(margin < 0.0 for margin, push in margins if push <= 0.0):
            pushed.append(0.0)  # the other limit is passed without it, so no size of it will do
        found += pushed
    return min(found, default=None)


def guard_of(given: Deviation) -> float:
    """What the uncertainty of a measured reading adds to it in the worst case [mm]; 0 for a planned bound."""
    if given.measured is None:
        return 0.0
    return (TRUNCATION_2D if given.high_at is not None else TRUNCATION) * given.u


def reading_for(now: float, guard: float, factor: float) -> float:
    """Dial reading at which a push that now comes from `now` + guard is `factor` times as large [mm], never below 0."""
    return max(0.0, (now + guard) * factor - guard)


def rounded_down(reading: float) -> float:
    """A gate on the step of an indicator."""
    step = FINE if reading < FINE_BELOW else COARSE
    return math.floor(reading / step + 1e-6) * step


def gates(scopes: Sequence[Scope], results: Sequence[tuple[str, Result]]) -> list[Gate]:
    """One gate for each hold entry whose error is a dial reading; one for all holds of a device whose mark is kept.

    FIM = (limit - what all others need) / (figure per FIM), the smallest over the requirements.
    """
    found: list[Gate] = []
    shared: dict[str, int] = {}
    behind = [
        _Behind(key, result, places, origins(places)) for key, result in results for places in [reaches(result.figure)]
    ]
    for scope in scopes:
        entry = scope.node
        if not isinstance(entry, HoldEntry) or entry.key == "error" or entry.error is None or scope.op is None:
            continue
        given = entry.error
        planned = given.measured if given.measured is not None else given.at_most
        if not planned:
            continue
        if given.device and given.mark == "kept" and given.high_at is None:
            same = kept_key(given, entry.key, second=entry.step == "and_centre")
            if same in shared:
                first = found[shared[same]]
                found[shared[same]] = replace(first, also=(*first.also, scope.op))
                continue
            shared[same] = len(found)
        gate = _gate(scope, entry, given, planned, behind)
        found.append(gate)
    return found


@record(eq=False)
class _Behind:
    """One stack, where it is the worst, and every cause behind it."""

    key: str
    result: Result
    places: list[Reach]
    causes: list[Cause]


def _gate(
    scope: Scope,
    entry: HoldEntry,
    given: Deviation,
    planned: float,
    behind: Sequence[_Behind],
) -> Gate:
    path = f"{scope.path}.{entry.key}"
    kept = (
        kept_key(given, entry.key, second=entry.step == "and_centre") if given.device and given.mark == "kept" else ""
    )
    lowest, highest, by = 0.0, math.inf, ""
    directed = False
    for one in behind:
        for cause in one.causes:
            if path not in cause.paths and not (kept and cause.key == kept):
                continue
            directed = directed or bool(cause.mean)
            stack = one.result.stack
            low, high = span(
                one.result.figure, one.places, cause, planned, guard_of(given), low=stack.low, high=stack.high
            )
            lowest = max(lowest, low)
            if high < highest:
                highest, by = high, one.key
    assert scope.op is not None
    reading = None if highest == math.inf else highest
    least = lowest
    return Gate(
        scope.key,
        scope.op,
        entry.step,
        entry.entry.on,
        0.0 if reading is not None and reading < least else reading,
        planned,
        by,
        measured=given.measured is not None,
        least=least,
        high_at=(given.high_at or "") if directed else "",
    )


def origins(places: Sequence[Reach]) -> list[Cause]:
    """Every cause behind a figure, at any of the places it is the worst of, those within high points included."""
    found: dict[Cause, None] = {}
    for one in places:
        for push in one.pushes:
            found.update(push.cause.of.origins() if push.cause.of is not None else {push.cause: None})
    return list(found)


def span(
    figure: Figure,
    places: Sequence[Reach],
    cause: Cause,
    planned: float,
    guard: float,
    *,
    low: float | None,
    high: float | None,
) -> tuple[float, float]:
    """(least, largest) reading at which one requirement is met; (0, 0) where none will do.

    places          where the figure is the worst (`reaches`), found once for all its causes
    planned, guard  what the entry of the job file says now, and what its uncertainty adds
    """
    plain = not cause.mean and all(
        cause not in p.cause.of.origins() for one in places for p in one.pushes if p.cause.of is not None
    )
    if plain:
        factor = room(places, cause, low=low, high=high)
        return (0.0, math.inf) if factor is None else (0.0, reading_for(planned, guard, factor))

    if not cause.mean:
        return _straight(figure, places, cause, planned, low=low, high=high)

    def excess(reading: float) -> float:
        return worst_excess(with_cause(figure, cause, cause.scaled(reading / planned)), low, high)

    return _interval(excess, planned)


def _straight(
    figure: Figure, places: Sequence[Reach], cause: Cause, planned: float, *, low: float | None, high: float | None
) -> tuple[float, float]:
    """The same for a cause without direction that also stands under high points: every excess is straight in the reading."""
    largest = math.inf
    none = _excesses(reaches(with_cause(figure, cause, cause.scaled(0.0))), low, high)
    for without, with_it in zip(none, _excesses(places, low, high), strict=True):
        if with_it > without:
            largest = min(largest, -without / (with_it - without) * planned)
        elif without > 0.0:
            return 0.0, 0.0
    return 0.0, max(largest, 0.0)


def _interval(excess: Callable[[float], float], planned: float) -> tuple[float, float]:
    """Where a convex function of the reading is not above zero; (0, 0) where it is nowhere.

    The worst case is convex in the length of one known vector (a norm of an affine function), so the best reading is found
    by thirds and both ends by halving.  Source: textbook search, derived here.
    """
    left, right = 0.0, 20.0 * planned + 1.0
    a, b = left, right
    for _ in range(80):
        third = (b - a) / 3.0
        if excess(a + third) <= excess(b - third):
            b -= third
        else:
            a += third
    best = (a + b) / 2.0
    if excess(best) > 0.0:
        return 0.0, 0.0

    def edge(inside: float, outside: float) -> float:
        for _ in range(60):
            half = (inside + outside) / 2.0
            inside, outside = (half, outside) if excess(half) <= 0.0 else (inside, half)
        return inside

    low = 0.0 if excess(left) <= 0.0 else edge(best, left)
    return low, math.inf if excess(right) <= 0.0 else edge(best, right)


def with_cause(figure: Figure, old: Cause, new: Cause) -> Figure:
    """The same figure with one cause replaced in all its accounts, those of the figures it is made of included."""

    def other(value: object) -> object:
        if isinstance(value, Account):
            return value.with_cause(old, new)
        if isinstance(value, tuple):
            return tuple(other(one) for one in value)
        return with_cause(value, old, new) if hasattr(value, "pushes") else value  # type: ignore[arg-type]

    changed = {f.name: other(getattr(figure, f.name)) for f in fields(figure)}  # type: ignore[arg-type]
    return replace(figure, **changed)  # type: ignore[type-var]


def scaled(figure: Figure, cause: Cause, factor: float) -> Figure:
    """The figure with one cause so many times as large, also where it sits in the division of teeth or holes."""
    new, figure = cause.scaled(factor), with_cause(figure, cause, cause.scaled(factor))
    if isinstance(figure, AsItRuns):
        ring = scaled(figure.ring, cause, factor)
        assert isinstance(ring, Tooth)
        return replace(figure, ring=ring)
    pattern = getattr(figure, "pattern", None)
    if not isinstance(pattern, Pattern):
        return figure
    divided = replace(
        pattern,
        periodic=tuple(replace(p, cause=new) if p.cause == cause else p for p in pattern.periodic),
        scatter=tuple(
            replace(s, cause=new, bound=s.bound * factor) if s.cause == cause else s for s in pattern.scatter
        ),
        shaped=tuple(replace(s, cause=new) if s.cause == cause else s for s in pattern.shaped),
        radial=pattern.radial.with_cause(cause, new),
    )
    return replace(figure, pattern=divided)  # type: ignore[type-var]
