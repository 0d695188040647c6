"""Remedies: the smallest change of the job file that brings a stack inside its limit. Lengths mm, angles rad."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Open
from setupcheck.quantities.gates import STEP, room
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


def stated(loaded: LoadedJob, path: str) -> tuple[float, str] | None:
    """(value in base unit, display unit) of the entry a cause rests on; None where it is not one number."""
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
        return (value, "um") if value is not None else None
    if isinstance(node, Dimension):
        if node.uncertainty is not None:
            return node.uncertainty, "um"
        return ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0, "um"
    if isinstance(node, tuple) and len(node) == 2:
        return float(node[1]), "um"
    if isinstance(node, float):
        angular = any(word in path for word in (".divide.", ".tilt", "shaft_angle"))
        return node, "arcsec" if angular else "um"
    return None


@dataclass(frozen=True, slots=True)
class Swap:
    """Another datum for one hold: hold operation `op` on `on`, as operation `like` does; `reading` is the dial to accept."""

    op: int
    path: str
    was: str
    on: str
    like: int
    reading: float


@dataclass(frozen=True, slots=True)
class Remedy:
    """What to change: single entries, or the datum of one hold. Both empty where nothing simple does it."""

    changes: tuple[Change, ...] = ()
    swap: Swap | None = None


def remedy(loaded: LoadedJob, result: Result) -> Remedy:
    """The smallest change that brings a stack inside its limit.

    In this order: the biggest cause cut back by itself; another datum that the stack already runs through, with the
    dial reading it then needs; the two biggest causes cut back.  Source: common practice (the fewest changes first).
    """
    margin = result.margin
    if margin is None or margin >= 0.0:
        return Remedy()
    one = _cut_back(loaded, result, most=1)
    if one:
        return Remedy(one)
    swap = next(_swaps(loaded, result), None)
    if swap is not None:
        return Remedy(swap=swap)
    return Remedy(_cut_back(loaded, result, most=2))


def _cut_back(loaded: LoadedJob, result: Result, *, most: int) -> tuple[Change, ...]:
    """The biggest causes cut back, at most so many; empty where they cannot bring the stack inside."""
    over = -(result.margin or 0.0)
    changes: list[Change] = []
    for share in result.combined.shares[:most]:
        path = share.cause.paths[0] if share.cause.paths else ""
        found = stated(loaded, path) if path else None
        if found is None or share.worst <= 0.0:
            return ()
        now, unit = found
        keep = 1.0 - over / share.worst
        if keep <= LEAST_KEPT:  # this one alone will not do: cut it back as far as care goes, and look at the next
            keep = LEAST_KEPT if over >= share.worst else keep
        changes.append(Change(share.cause, path, now, now * keep, unit))
        over -= share.worst * (1.0 - keep)
        if over <= 1e-12:
            return tuple(changes)
    return ()


def _swaps(loaded: LoadedJob, result: Result) -> Iterator[Swap]:
    """Datums that other operations of this stack are held on, tried at the hold of its biggest cause."""
    if not result.combined.shares:
        return
    biggest = result.combined.shares[0].cause
    setup = next((s for s in loaded.job.setups if s.op == biggest.op), None)
    centre = setup.hold.centre if setup is not None and setup.hold is not None else None
    if setup is None or centre is None or f"setups.{setup.op}.hold.centre.runout" not in biggest.paths:
        return
    involved = {s.cause.op for s in result.combined.shares}
    tried = {centre.on}
    for other in loaded.job.setups:
        theirs = other.hold.centre if other.hold is not None else None
        if other.op not in involved or theirs is None or theirs.on in tried:
            continue
        tried.add(theirs.on)
        swap = _tried(loaded, result, setup, theirs.on, other.op)
        if swap is not None:
            yield swap


def _tried(loaded: LoadedJob, result: Result, setup: Setup, on: str, like: int) -> Swap | None:
    """The route walked again with the other datum; None where that is impossible or no dial reading makes it enough."""
    hold = setup.hold
    assert hold is not None and hold.centre is not None
    held = hold.model_copy(update={"centre": hold.centre.model_copy(update={"on": on, "at": None})})
    setups = tuple(s.model_copy(update={"hold": held}) if s.op == setup.op else s for s in loaded.job.setups)
    other = replace(loaded, job=loaded.job.model_copy(update={"setups": setups}))
    try:
        floor = walk(other)
        found = build(floor, read_stack(floor, result.stack.index))
    except JobError:
        return None
    if isinstance(found, Open) or floor.datums[f"{setup.op}/centre"].state not in ("made", "stock"):
        return None
    path = f"setups.{setup.op}.hold.centre.runout"
    planned = stated(loaded, path)
    mine = next((p.cause for p in found.figure.pushes() if path in p.cause.paths), None)
    if planned is None or mine is None:
        return None
    grow = room(found.figure, mine, low=result.stack.low, high=result.stack.high)
    reading = planned[0] * min(grow, 1.0) if grow is not None else 0.0
    reading = int(reading / STEP + 1e-6) * STEP
    return (
        Swap(setup.op, f"setups.{setup.op}.hold.centre", hold.centre.on, on, like, reading) if reading >= STEP else None
    )
