"""The range of a value in which no rule and no requirement says worse of it than at its plan."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace

from setupcheck.allowed.entries import Entry
from setupcheck.allowed.judging import RANK, STACK, Key, Said, Trial, rank
from setupcheck.flow import Review
from setupcheck.record import record

STRIDES = (0.25, 0.5, 1.0, 2.0, 4.0, 8.0, 16.0, 32.0)
"""How far from its plan a value is tried, in what the plan allows of it. Source: our screening choice."""
FINEST = {"size": 5e-5, "error": 5e-5, "most": 5e-5, "angle": 5e-6, "heat": 0.2, "time": 0.1}
"""How close an end is found [mm, rad, degC, s]: finer than the box is filled in. Source: our choice."""
SHORT_OF_IT, PAST_IT = 1e-6, 0.9
"""How far on the good side, and how far beyond it, an end is tried where the margins put it, in FINEST: past rounding, and near
enough that two trials close it in. Source: our choice."""
KEEPS_TO_PLAN = "HOLD-007"
"""A reading above its plan is to be trued again. Where a requirement hears of it, the range says how far it may go even so."""
NO_ROUTE = "no route"
"""Stands for a rule beyond a value with which the route cannot be walked."""

Bad = Callable[[float], tuple[str, ...]]
"""From a value to what says worse of it than it may: ids of rules, keys of requirements."""
Crossing = Callable[[float, float], float | None]
"""From a value that does and one that does not to where, by their margins, the turn between them should lie."""


@record
class Allowed:
    """The range of one entry in which nothing says worse than at its plan, nor fails.

    low, high        infinite where nothing sets that end within the strides; both NaN where no value tried will do
    by_low, by_high  what sets them: ids of rules, keys of requirements, NO_ROUTE;  planned, kind  as of the entry
    heard            whether any rule's number moves with it at all
    untold           what hears of it and is open as the job is written, so that no range can be told
    """

    path: str
    kind: str
    planned: float
    low: float
    high: float
    by_low: tuple[str, ...] = ()
    by_high: tuple[str, ...] = ()
    heard: bool = True
    untold: tuple[str, ...] = ()

    @property
    def lost(self) -> bool:
        return math.isnan(self.low)


def allowed(found: Review, entry: Entry) -> Allowed:
    """Search outwards from the plan, then by halves. Source: every changed job, judged again."""
    trial = Trial(found, entry)
    start = trial.at(entry.planned)
    ways = (-1.0, 1.0)
    far = [said for way in ways if (said := _farthest(trial, way)) is not None]
    free = Allowed(entry.path, entry.kind, entry.planned, -math.inf, math.inf)
    if start is None:
        return replace(free, low=math.nan, high=math.nan, by_low=(NO_ROUTE,))
    moved = _moved(found, start, far)
    failing = [key for key in moved if rank(start, key) == RANK["fail"]]
    turning = [
        key for key in moved if key in failing or any(_verdict(said, key) != _verdict(start, key) for said in far)
    ]
    if untold := [key for key in moved if rank(start, key) == RANK["open"]]:
        return replace(free, untold=_names(untold))
    if not moved and all(trial.at(entry.planned + way * STRIDES[-1] * entry.stride) is not None for way in ways):
        return replace(free, heard=False)
    if lost := [key for key in failing if not _curable(start, far, key)]:
        return replace(free, low=math.nan, high=math.nan, by_low=_names(lost))
    trial.narrow(turning)
    least = {key: max(rank(start, key), RANK["warn"]) for key in turning}

    def bad(value: float) -> tuple[str, ...]:
        said = trial.at(value)
        return (NO_ROUTE,) if said is None else _names([key for key in turning if rank(said, key) < least[key]])

    towards = trial.towards(failing[0]) if failing else ()
    inside = next((value for value in (*_outwards(entry), *towards) if not bad(value)), None)
    if inside is None:
        return replace(free, low=math.nan, high=math.nan, by_low=bad(entry.planned))

    def crossing(good: float, worse: float) -> float | None:
        return _crossing(trial, turning, good, worse)

    low, by_low = _end(bad, crossing, inside, entry, -1.0)
    high, by_high = _end(bad, crossing, inside, entry, 1.0)
    return replace(free, low=low, high=high, by_low=by_low, by_high=by_high)


def _farthest(trial: Trial, way: float) -> Said | None:
    """What is said as far out as the route can still be walked."""
    entry = trial.entry
    values = (entry.planned + way * stride * entry.stride for stride in reversed(STRIDES))
    return next((said for value in values if (said := trial.at(value)) is not None), None)


def _moved(found: Review, start: Said, far: Sequence[Said]) -> list[Key]:
    """What says something else far out; not what the planner has waived, nor the plan itself where a requirement hears of it."""
    waived = {(f.rule, f.key) for f in found.evaluation.findings if f.verdict == "waived"}
    accepted = {place for rule, place in waived if rule.startswith("STACK-")}
    moved = [
        key
        for key in dict.fromkeys(key for said in (start, *far) for key in said)
        if any(said.get(key) != start.get(key) for said in far)
        and key not in waived
        and not (key[0] == STACK and key[1] in accepted)
    ]
    heard = any(rule == STACK for rule, _ in moved)
    return [key for key in moved if not (heard and key[0] == KEEPS_TO_PLAN)]


def _verdict(said: Said, key: Key) -> str:
    return said[key].verdict if key in said else ""


def _names(keys: Sequence[Key]) -> tuple[str, ...]:
    """Ids of the rules, keys of the requirements; each once."""
    return tuple(dict.fromkeys(place if rule == STACK else rule for rule, place in keys))


def _curable(start: Said, far: Sequence[Said], key: Key) -> bool:
    """Whether what fails as planned might not between the far ends: a concave margin lies below its chords drawn on."""
    if any(rank(said, key) >= RANK["warn"] for said in far):
        return True
    at, *ends = (said[key].margin if key in said else None for said in (start, *far))
    known = [end for end in ends if end is not None]
    return at is not None and len(known) == len(far) and any(2.0 * at - end > 0.0 for end in known)


def _outwards(entry: Entry) -> Iterator[float]:
    """The plan, then what lies about it, nearest first."""
    yield entry.planned
    for stride in STRIDES:
        for way in (-1.0, 1.0):
            yield max(entry.planned + way * stride * entry.stride, entry.least)


def _end(bad: Bad, crossing: Crossing, inside: float, entry: Entry, way: float) -> tuple[float, tuple[str, ...]]:
    """The last value that way of which nothing says worse, and what does so beyond it."""
    good = inside
    if inside == entry.planned and not bad(max(inside + way * STRIDES[-1] * entry.stride, entry.least)):
        return way * math.inf, ()
    for stride in STRIDES:
        there = inside + way * stride * entry.stride
        if there < entry.least:
            break
        if by := bad(there):
            return _closed_in(bad, crossing, (good, there), by, FINEST[entry.kind])
        good = there
    return way * math.inf, ()


def _crossing(trial: Trial, turning: Sequence[Key], good: float, worse: float) -> float | None:
    """Where the chord of the first margin to run out meets zero; margins of worst cases are straight over long pieces."""
    here, there = trial.at(good) or {}, trial.at(worse) or {}
    shares = []
    for key in turning:
        inside, outside = (said[key].margin if key in said else None for said in (here, there))
        if inside is not None and outside is not None and inside >= 0.0 > outside:
            shares.append(inside / (inside - outside))
    return good + (worse - good) * min(shares) if shares else None


def _closed_in(
    bad: Bad, crossing: Crossing, between: tuple[float, float], by: tuple[str, ...], finest: float
) -> tuple[float, tuple[str, ...]]:
    """The turn between a value that does and one that does not: on either side of where the margins put it, else by halves."""
    good, there = between

    def tried(value: float) -> None:
        nonlocal good, there, by
        if min(good, there) < value < max(good, there):
            if said := bad(value):
                there, by = value, said
            else:
                good = value

    while (width := abs(there - good)) > finest:
        step = math.copysign(finest, there - good)
        if (turn := crossing(good, there)) is not None:
            tried(turn - SHORT_OF_IT * step)
            tried(turn + PAST_IT * step)
        if abs(there - good) > width / 2.0:
            tried((good + there) / 2.0)
    return good, by
