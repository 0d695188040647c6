"""Remedies: the smallest change of the job file that brings a stack inside its limit. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Open
from setupcheck.quantities.gates import FINE, guard_of, reading_for, room, rounded_down, span
from setupcheck.quantities.judged import Result
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.stacks import build

LEAST_KEPT = 0.2
"""Share of a bound that better work leaves when one change is not enough. Source: our screening choice."""


@dataclass(frozen=True, slots=True)
class Change:
    """One entry of the job file and the value that would do.

    unit "um" or "arcsec"; values in base units
    """

    cause: Cause
    path: str
    now: float
    needed: float
    unit: str


@dataclass(frozen=True, slots=True)
class Stated:
    """What an entry of the job file says: its value now, the guard its uncertainty adds, and the least it can be."""

    now: float
    unit: str
    guard: float = 0.0
    least: float = 0.0


def stated(loaded: LoadedJob, path: str) -> Stated | None:
    """The entry a cause rests on; None where it is not one number."""
    node: object = loaded.job
    for step in loaded.loc(path):
        if isinstance(node, dict):
            node = node.get(step)
        elif isinstance(node, tuple) and isinstance(step, int):
            node = node[step] if step < len(node) else None
        else:
            node = getattr(node, {"from": "low", "to": "high"}.get(str(step), str(step)), None)
    if isinstance(node, Deviation):
        value = node.measured if node.measured is not None else node.at_most
        return Stated(abs(value), "um", guard_of(node)) if value is not None else None
    if isinstance(node, Dimension):
        half = node.uncertainty if node.uncertainty is not None else ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0
        return Stated(half, "um")
    if isinstance(node, tuple) and len(node) == 2:
        return Stated(float(node[1]), "um", least=float(node[0]))
    if isinstance(node, float):
        angular = any(word in path for word in (".divide.", ".tilt", "shaft_angle"))
        return Stated(node, "arcsec" if angular else "um")
    return None


@dataclass(frozen=True, slots=True)
class Swap:
    """Another datum for one hold: hold operation `op` on `on`, as operation `like` does.

    reading  the dial reading that every requirement in `cures` (their numbers) then meets
    """

    op: int
    path: str
    was: str
    on: str
    like: int
    reading: float
    cures: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Remedy:
    """What to change: single entries, or the datum of one hold. Both empty where nothing simple does it."""

    changes: tuple[Change, ...] = ()
    swap: Swap | None = None


def remedies(loaded: LoadedJob, results: Mapping[str, Result]) -> dict[str, Remedy]:
    """The smallest change for every stack outside its limit, one that serves all of them where they name the same entry.

    In this order: the biggest cause cut back by itself; another datum that the stack already runs through, with the
    dial reading that every requirement then needs; the two biggest causes cut back.  Causes of bought parts are left
    alone.  Source: common practice (the fewest changes first).
    """
    trials: dict[tuple[int, str], Swap | None] = {}
    found: dict[str, Remedy] = {}
    for key, result in results.items():
        if result.margin is not None and result.margin < 0.0:
            found[key] = _remedy(loaded, result, trials)
    least: dict[str, float] = {}
    for one in found.values():
        for change in one.changes:
            least[change.path] = min(change.needed, least.get(change.path, change.needed))
    return {
        key: Remedy(tuple(replace(c, needed=least[c.path]) for c in one.changes), one.swap)
        for key, one in found.items()
    }


def _remedy(loaded: LoadedJob, result: Result, trials: dict[tuple[int, str], Swap | None]) -> Remedy:
    one = _cut_back(loaded, result, most=1)
    if one:
        return Remedy(one)
    swap = next(_swaps(loaded, result, trials), None)
    if swap is not None:
        return Remedy(swap=swap)
    return Remedy(_cut_back(loaded, result, most=2))


def _cut_back(loaded: LoadedJob, result: Result, *, most: int) -> tuple[Change, ...]:
    """The biggest causes cut back, at most so many; empty where they cannot bring the stack inside."""
    over = -(result.margin or 0.0)
    changes: list[Change] = []
    for share in result.combined.shares:
        cause, path = share.cause, share.cause.paths[0] if share.cause.paths else ""
        found = stated(loaded, path) if path and cause.op is not None else None
        if found is None or share.worst <= 0.0:
            continue
        if cause.mean:  # a known high spot: only by itself, and along the way it points
            least, largest = span(result, cause, found.now, found.guard)
            if not changes and least == 0.0 and 0.0 < (needed := _down(largest, found.unit)) < found.now:
                return (Change(cause, path, found.now, needed, found.unit),)
            continue
        keep = 1.0 - over / share.worst
        if keep <= LEAST_KEPT:  # this one alone will not do: cut it back as far as care goes, and look at the next
            keep = LEAST_KEPT if over >= share.worst else keep
        needed = _down(reading_for(found.now, found.guard, keep), found.unit)
        if needed <= found.least:
            return ()
        changes.append(Change(cause, path, found.now, needed, found.unit))
        over -= share.worst * (1.0 - keep)
        if over <= 1e-12:
            return tuple(changes)
        if len(changes) == most:
            return ()
    return ()


def _down(value: float, unit: str) -> float:
    """Rounded down to a tenth of a micrometre or second of arc, so that the printed value does it."""
    step = FINE if unit == "um" else math.radians(0.1 / 3600.0)
    return math.floor(value / step + 1e-6) * step


def _swaps(loaded: LoadedJob, result: Result, trials: dict[tuple[int, str], Swap | None]) -> Iterator[Swap]:
    """Datums that other operations of this stack are held on, tried at the hold of its biggest cause."""
    if not result.combined.shares:
        return
    biggest = result.combined.shares[0].cause
    setup = next((s for s in loaded.job.setups if s.op == biggest.op), None)
    centre = setup.hold.centre if setup is not None and setup.hold is not None else None
    if setup is None or centre is None or f"setups.{setup.op}.hold.centre.runout" not in biggest.paths:
        return
    involved = {s.cause.op for s in result.combined.shares}
    for other in loaded.job.setups:
        theirs = other.hold.centre if other.hold is not None else None
        if other.op not in involved or theirs is None or theirs.on == centre.on:
            continue
        if (setup.op, theirs.on) not in trials:
            trials[setup.op, theirs.on] = _tried(loaded, setup, theirs.on, other.op)
        swap = trials[setup.op, theirs.on]
        if swap is not None and result.stack.index in swap.cures:
            yield swap


def _tried(loaded: LoadedJob, setup: Setup, on: str, like: int) -> Swap | None:
    """The route walked again with the other datum; None where that is impossible or no dial reading makes it enough."""
    hold = setup.hold
    assert hold is not None and hold.centre is not None
    held = hold.model_copy(update={"centre": hold.centre.model_copy(update={"on": on, "at": None})})
    setups = tuple(s.model_copy(update={"hold": held}) if s.op == setup.op else s for s in loaded.job.setups)
    other = replace(loaded, job=loaded.job.model_copy(update={"setups": setups}))
    path = f"setups.{setup.op}.hold.centre.runout"
    planned = stated(loaded, path)
    try:
        floor = walk(other)
        stacks = [read_stack(floor, i) for i in range(len(loaded.job.require))]
        built = [(stack, build(floor, stack)) for stack in stacks]
    except JobError:
        return None
    if planned is None or floor.datums[f"{setup.op}/centre"].state not in ("made", "stock"):
        return None
    reading, cures = planned.now, []
    for stack, figure in built:
        if isinstance(figure, Open):
            continue
        mine = next((p.cause for p in figure.figure.pushes() if path in p.cause.paths), None)
        grow = room(figure.figure, mine, low=stack.low, high=stack.high) if mine is not None else None
        if grow is not None and (allowed := reading_for(planned.now, planned.guard, grow)) > FINE:
            reading = min(reading, allowed)
            cures.append(stack.index)
    if not cures:
        return None
    return Swap(
        setup.op, f"setups.{setup.op}.hold.centre", hold.centre.on, on, like, rounded_down(reading), tuple(cures)
    )
