"""Gates: the dial reading to accept at each hold. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import fields, replace
from functools import partial

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.figures import Figure, Push, Tooth, Vector, alternatives
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.book import Scope
from setupcheck.quantities.causes import kept_key
from setupcheck.quantities.convex import convex_span, falling_back
from setupcheck.quantities.dial_entries import DialEntry, dial_entries
from setupcheck.quantities.judged import Result
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

FINE, COARSE, FINE_BELOW = 0.0001, 0.001, 0.010
"""Gates are rounded down to 0.1 um below 10 um, to whole um above [mm]. Source: our screening choice."""
NEAR = 1.5
"""How many times the smallest limit another one may be and still be looked at closely. Source: our screening choice."""


@record
class Limit:
    """What one requirement alone asks of one entry: between `low` and `high` [mm]; infinite where it sets no such end.

    by  instance of the stack;  both ends 0 where no value of this entry alone brings it inside
    """

    by: str
    low: float
    high: float


@record
class Gate:
    """The largest dial reading an entry may show so that every requirement is still met at its worst.

    reading   full indicator movement [mm], exact (the report rounds it down); 0 where no reading will do, None where no
              requirement depends on it
    planned   what the job file plans, or has measured (`measured`) [mm];  by  instance of the stack that sets it
    step      entry of a hold (centre, and_centre, square), or through, fit, bought, bought-face, machine
    on        the surface or device it is read on;  op  None for bought parts and machines
    also      other operations held by the same device with its mark kept: one reading for all
    least     the reading must not be below this: a known high spot takes away from another
    high_at   where that high spot must stay
    paths     the entries of the job file, one for each operation it serves
    limits    what each requirement allows by itself, the tightest first
    indicator one division of the indicator that reads it [mm], 0 where the entry names none
    careful   somebody trues it by hand for this part: in a four-jaw, by indicator, or it has been measured

    >>> from setupcheck import Gate, example, review
    >>> gate = next(gate for gate in review(example("rotator-worm-wheel")).gates if gate.op == 50)
    >>> isinstance(gate, Gate), gate.on, gate.reading > gate.planned > 0.0
    (True, 'hub', True)
    >>> gate.keys
    ('setups.50.hold.centre.runout.measured',)
    """

    key: str
    op: int | None
    step: str
    on: str
    reading: float | None
    planned: float
    by: str
    measured: bool = False
    also: tuple[int, ...] = ()
    least: float = 0.0
    high_at: str = ""
    paths: tuple[str, ...] = ()
    limits: tuple[Limit, ...] = ()
    indicator: float = 0.0
    careful: bool = False

    @property
    def keys(self) -> tuple[str, ...]:
        """What to type the reading in at, as `setupcheck vary --set` takes it."""
        return tuple(f"{path}.measured" for path in self.paths)


@record
class Reach:
    """A figure at one of the places it is the worst of: with every cause at its known value, and how far each pushes it."""

    base: float
    pushes: list[Push]


def reaches(figure: Figure) -> list[Reach]:
    """All those places."""
    return [
        Reach(*one.at_its_worst()) if isinstance(one, Vector) else Reach(one.base(), one.pushes())
        for one in alternatives(figure)
    ]


def worst_excess(figure: Figure, low: float | None, high: float | None) -> float:
    """How far the worst case goes beyond its limits; negative inside. Source: base and pushes of the figure."""
    return excess_at(reaches(figure), low, high)


def excess_at(places: Sequence[Reach], low: float | None, high: float | None) -> float:
    """The same of the places a figure is the worst of, where they are known."""
    return max(_excesses(places, low, high), default=-math.inf)


def _excesses(places: Sequence[Reach], low: float | None, high: float | None) -> list[float]:
    """The same for each limit, at each of the places the figure is the worst of."""
    found = []
    for one in places:
        if high is not None:
            found.append(one.base + sum(p.up for p in one.pushes) - high)
        if low is not None:
            found.append(low - one.base + sum(p.down for p in one.pushes))
    return found


def room(places: Sequence[Reach], *causes: Cause, low: float | None = None, high: float | None = None) -> float | None:
    """Factor by which causes without direction may grow (or must shrink) together until the worst case meets its limit.

    1 + margin / push, over the places the figure is the worst of; 0 where it cannot help.  None where the cause does not
    reach the figure.
    Source: the worst case is linear in each bound, derived here.
    """
    found: list[float] = []
    for one in places:
        base, pushes = one.base, one.pushes
        mine = [p for p in pushes if p.cause in causes]
        if not mine:
            continue
        margins = []
        if high is not None:
            margins.append((high - base - sum(p.up for p in pushes), sum(p.up for p in mine)))
        if low is not None:
            margins.append((base - sum(p.down for p in pushes) - low, sum(p.down for p in mine)))
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
    """One gate for each entry that is a dial reading; one for all holds of a device whose mark is kept.

    FIM = (limit - what all others need) / (figure per FIM), the smallest over the requirements.
    """
    found: list[Gate] = []
    shared: dict[str, int] = {}
    behind = stacks_behind(results)
    for entry in dial_entries(scopes):
        if not entry.planned and not guard_of(entry.given):
            continue
        same = kept_as(entry)
        if same and entry.given.high_at is None:
            if same in shared:
                first = found[shared[same]]
                also = (*first.also, entry.op) if entry.op is not None else first.also
                found[shared[same]] = replace(first, also=also, paths=(*first.paths, entry.path))
                continue
            shared[same] = len(found)
        assert isinstance(scopes[0].node, Floor)
        found.append(_gate(scopes[0].node, entry, same, behind))
    return found


def is_careful(entry: DialEntry) -> bool:
    """Whether the entry of a hold takes work with an indicator each time the part is set up. Source: common practice."""
    if entry.step not in ("centre", "and_centre", "square"):
        return False
    trued = entry.device.startswith(("four-jaw", "indicator"))
    return trued or entry.given.measured is not None or entry.given.indicator is not None


def kept_as(entry: DialEntry) -> str:
    """Name of the one cause of a device whose mark is kept; empty for every other entry."""
    given = entry.given
    if not (given.device and given.mark == "kept"):
        return ""
    what = {"square": "face_runout", "bought-face": "face_runout", "machine": "axis"}.get(
        entry.step, "runout"
    )  # as the route names these causes
    return kept_key(given, what, second=entry.step == "and_centre")


@record(eq=False)
class Behind:
    """One stack, where it is the worst, and the causes behind it by the path (or the name) they were stated with."""

    key: str
    result: Result
    places: list[Reach]
    stated: dict[str, list[Cause]]

    def causes(self, *names: str) -> list[Cause]:
        return [cause for name in names if name for cause in self.stated.get(name, ())]


def stacks_behind(results: Sequence[tuple[str, Result]]) -> list[Behind]:
    """All stacks that have a limit, taken apart once for all their entries."""
    found = []
    for key, result in results:
        places = reaches(result.figure)
        stated: dict[str, list[Cause]] = {}
        for cause in origins(places):
            for name in (cause.key,) if cause.shared else cause.paths:
                stated.setdefault(name, []).append(cause)
        found.append(Behind(key, result, places, stated))
    return found


def _gate(floor: Floor, entry: DialEntry, kept: str, behind: Sequence[Behind]) -> Gate:
    given, guard = entry.given, guard_of(entry.given)
    limits = []
    directed = False
    for one in behind:
        causes = one.causes(entry.path, kept)
        if not causes:
            continue
        directed = directed or any(cause.mean for cause in causes)
        stack = one.result.stack
        if any(
            cause.law == "blur" and not cause.mean for cause in causes
        ):  # its direction went into a turn nobody knows
            low, high = _walked_again(floor, entry, one)
        else:
            low, high = span_of(
                one.result.figure, one.places, causes, entry.planned, guard, low=stack.low, high=stack.high
            )
        limits.append(Limit(one.key, low, high))
    if any(isinstance(one.result.figure, AsItRuns) for one in behind):
        limits = _as_they_run(floor, entry, behind, limits)
    limits.sort(key=lambda one: one.high)
    least = max((one.low for one in limits), default=0.0)
    reading = limits[0].high if limits and limits[0].high < math.inf else None
    return Gate(
        entry.name,
        entry.op,
        entry.step,
        entry.on,
        0.0 if reading is not None and reading < least else reading,
        entry.planned,
        limits[0].by if reading is not None else "",
        measured=given.measured is not None,
        least=least,
        high_at=(given.high_at or "") if directed else "",
        paths=(entry.path,),
        limits=tuple(limits),
        indicator=given.indicator or 0.0,
        careful=is_careful(entry),
    )


def _walked_again(floor: Floor, entry: DialEntry, one: Behind) -> tuple[float, float]:
    """(least, largest) reading for one requirement by walking the route again with each reading tried."""
    from setupcheck.quantities.trial import figure_with

    return _interval(partial(_excess_again, figure_with, floor, one.result.stack, entry.path), entry.planned)


def _as_they_run(floor: Floor, entry: DialEntry, behind: Sequence[Behind], limits: Sequence[Limit]) -> list[Limit]:
    """The limits with those of index figures that hear of the cutter's setting looked at on the route walked again.

    What a setting adds grows faster than it does, so the figure as it stands is too kind to a reading above the plan. One that
    comes near the smallest limit is tried there, and worked out where it does not hold; the others stay as they are.
    """
    from setupcheck.quantities.trial import figure_with

    running = {one.key: one.result.stack for one in behind if isinstance(one.result.figure, AsItRuns)}
    least = min((one.high for one in limits), default=math.inf)
    found = []
    for limit in limits:
        stack = running.get(limit.by)
        if stack is not None and entry.planned < limit.high < NEAR * least and not kept_as(entry):
            excess = partial(_excess_again, figure_with, floor, stack, entry.path)
            limit = replace(limit, high=falling_back(excess, entry.planned, least, limit.high))
        found.append(limit)
    return found


def _excess_again(figure_with: Callable[..., Figure], floor: Floor, stack: Stack, path: str, reading: float) -> float:
    """The same with that reading typed in and walked again; without end where nothing can be told of it any more."""
    try:
        figure = figure_with(floor.loaded, stack, (path,), measured=reading)
    except (ValueError, JobError):
        return math.inf
    return worst_excess(figure, stack.low, stack.high)


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
    """(least, largest) reading at which one requirement is met, where one cause stands behind it: see `span_of`."""
    return span_of(figure, places, (cause,), planned, guard, low=low, high=high)


def span_of(
    figure: Figure,
    places: Sequence[Reach],
    causes: Sequence[Cause],
    planned: float,
    guard: float,
    *,
    low: float | None,
    high: float | None,
) -> tuple[float, float]:
    """(least, largest) reading at which one requirement is met; (0, 0) where none will do.

    places          where the figure is the worst (`reaches`), found once for all its causes
    causes          all that come from this one reading and grow with it
    planned, guard  what the entry of the job file says now, and what its uncertainty adds
    """
    known = any(cause.mean for cause in causes)
    hidden = [p.cause.of.origins() for one in places for p in one.pushes if p.cause.of is not None]
    if not known and not any(cause in below for below in hidden for cause in causes):
        factor = room(places, *causes, low=low, high=high)
        return (0.0, math.inf) if factor is None else (0.0, reading_for(planned, guard, factor))

    def at(factor: float) -> Figure:
        other = figure
        for cause in causes:
            other = with_cause(other, cause, cause.scaled(factor))
        return other

    if not known:
        return _straight(at(0.0), places, planned, low=low, high=high)

    return _interval(lambda reading: worst_excess(at(reading / planned), low, high), planned)


def _straight(
    without: Figure, places: Sequence[Reach], planned: float, *, low: float | None, high: float | None
) -> tuple[float, float]:
    """The same for causes without direction that also stand under high points: every excess is straight in the reading.

    without  the figure with none of them
    """
    largest = math.inf
    for none, with_it in zip(_excesses(reaches(without), low, high), _excesses(places, low, high), strict=True):
        if with_it > none:
            largest = min(largest, -none / (with_it - none) * planned)
        elif none > 0.0:
            return 0.0, 0.0
    return 0.0, max(largest, 0.0)


def _interval(excess: Callable[[float], float], planned: float) -> tuple[float, float]:
    """Where a convex function of the reading is not above zero; (0, 0) where it is nowhere.

    The worst case is convex in the length of one known vector (a norm of an affine function).  Source: derived here.
    """
    most = 20.0 * planned + 1.0
    low, high = convex_span(excess, planned, least=0.0, most=most)
    if low > high:
        return 0.0, 0.0
    return low, math.inf if high >= most else high


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
