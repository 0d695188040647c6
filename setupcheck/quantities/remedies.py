"""Remedies: the smallest change of the job file that brings a stack inside its limit. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, MidPlane, real_pushes
from setupcheck.quantities.book import Open
from setupcheck.quantities.gates import (
    FINE,
    guard_of,
    origins,
    reading_for,
    room,
    rounded_down,
    span,
    with_cause,
    worst_excess,
)
from setupcheck.quantities.judged import Result
from setupcheck.quantities.placing import Shim, shim_for
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build
from setupcheck.quantities.typical import typical
from setupcheck.record import record

LEAST_KEPT = 0.2
"""Share of a bound that better work leaves when one change is not enough. Source: our screening choice."""


@record
class Change:
    """One entry of the job file and the value that would do.

    unit "um" or "arcsec"; values in base units
    also  other entries that speak of the same kept device and change with it
    """

    cause: Cause
    path: str
    now: float
    needed: float
    unit: str
    also: tuple[str, ...] = ()


@record
class Stated:
    """What an entry of the job file says: its value now, the guard its uncertainty adds, and the least it can be."""

    now: float
    unit: str
    guard: float = 0.0
    least: float = 0.0


def _node(loaded: LoadedJob, path: str) -> object:
    """What stands at a path of the typed job."""
    node: object = loaded.job
    for step in loaded.loc(path):
        if isinstance(node, dict):
            node = node.get(step)
        elif isinstance(node, tuple) and isinstance(step, int):
            node = node[step] if step < len(node) else None
        else:
            node = getattr(node, {"from": "low", "to": "high"}.get(str(step), str(step)), None)
    return node


def _deviation(loaded: LoadedJob, path: str) -> Deviation | None:
    node = _node(loaded, path)
    return node if isinstance(node, Deviation) else None


def stated(loaded: LoadedJob, path: str) -> Stated | None:
    """The entry a cause rests on, a device alone by its typical value; None where it is not one number."""
    node = _node(loaded, path)
    if isinstance(node, Deviation):
        value = node.measured if node.measured is not None else node.at_most
        if value is None:
            row = typical(node.device or "", path.rpartition(".")[2])
            return Stated(row.value, "um") if row is not None else None
        return Stated(abs(value), "um", guard_of(node))
    if isinstance(node, Dimension):
        half = node.uncertainty if node.uncertainty is not None else ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0
        return Stated(half, "um")
    if isinstance(node, tuple) and len(node) == 2:
        return Stated(float(node[1]), "um", least=float(node[0]))
    if isinstance(node, float):
        angular = any(word in path for word in (".divide.", ".tilt", "shaft_angle"))
        return Stated(node, "arcsec" if angular else "um")
    return None


@record
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


@record
class Remedy:
    """What to change: single entries, the datum of one hold, or a shim. All empty where nothing simple does it."""

    changes: tuple[Change, ...] = ()
    swap: Swap | None = None
    shim: Shim | None = None


def remedies(loaded: LoadedJob, floor: Floor, results: Mapping[str, Result]) -> dict[str, Remedy]:
    """The smallest change for every stack outside its limit, one that serves all of them where they name the same entry.

    A mid-plane that another shim centres takes that shim.
    Else in this order: the biggest cause cut back by itself; another datum that the stack already runs through, with the
    dial reading that every requirement then needs; the two biggest causes cut back.  Causes of bought parts are left
    alone.  Source: common practice (the fewest changes first).
    """
    trials: dict[tuple[int, str], Swap | None] = {}
    found: dict[str, Remedy] = {}
    for key, result in results.items():
        if result.margin is not None and result.margin < 0.0:
            found[key] = _remedy(loaded, floor, result, trials)
    least: dict[str, float] = {}
    for one in found.values():
        for change in one.changes:
            least[change.path] = min(change.needed, least.get(change.path, change.needed))
    return {
        key: replace(one, changes=tuple(replace(c, needed=least[c.path]) for c in one.changes))
        for key, one in found.items()
    }


def _shimmed(floor: Floor, result: Result) -> Shim | None:
    """The shim that centres a mid-plane, where that alone brings it inside its limit."""
    figure, stack = result.figure, result.stack
    if not isinstance(figure, MidPlane) or stack.high is None:
        return None
    offset = real_pushes(figure.axial)[0]
    centred = replace(figure, axial=figure.axial.plus_constant(-offset))
    if worst_excess(centred, None, stack.high) > 0.0:
        return None
    return shim_for(floor, offset)


def _remedy(loaded: LoadedJob, floor: Floor, result: Result, trials: dict[tuple[int, str], Swap | None]) -> Remedy:
    shim = _shimmed(floor, result)
    if shim is not None:
        return Remedy(shim=shim)
    one = _cut_back(loaded, result, most=1)
    if one:
        return Remedy(one)
    swap = next(_swaps(loaded, result, trials), None)
    if swap is not None:
        return Remedy(swap=swap)
    return Remedy(_cut_back(loaded, result, most=2))


def _cut_back(loaded: LoadedJob, result: Result, *, most: int) -> tuple[Change, ...]:
    """The biggest causes cut back, at most so many; empty where they cannot bring the stack inside.

    Each but the last is cut back as far as care goes (LEAST_KEPT), the last just as far as is needed.
    """
    stack, figure = result.stack, result.figure
    changes: list[Change] = []
    for cause in _by_weight(figure):
        entries = [(path, stated(loaded, path)) for path in cause.paths]
        said = entries[0][1] if entries else None
        if cause.op is None or said is None or said.now <= 0.0:
            continue
        least, largest = span(figure, cause, said.now, said.guard, low=stack.low, high=stack.high)
        if least == 0.0 and largest < said.now and _down(largest, said.unit) > said.least:
            return (*changes, *_changes(loaded, cause, entries, largest / said.now))
        if len(changes) + 1 >= most or cause.mean or LEAST_KEPT * said.now <= said.least:
            if most == 1:
                return ()
            continue
        changes += _changes(loaded, cause, entries, LEAST_KEPT)
        figure = with_cause(figure, cause, cause.scaled(LEAST_KEPT))
    return ()


def _by_weight(figure: Figure) -> list[Cause]:
    """The causes behind a figure, those first that take most with them when they go."""
    full = worst_excess(figure, None, 0.0) if not figure.signed else worst_excess(figure, 0.0, 0.0)

    def weight(cause: Cause) -> float:
        gone = with_cause(figure, cause, cause.scaled(0.0))
        return full - (worst_excess(gone, None, 0.0) if not figure.signed else worst_excess(gone, 0.0, 0.0))

    return sorted(origins(figure), key=weight, reverse=True)


def _changes(loaded: LoadedJob, cause: Cause, entries: list[tuple[str, Stated | None]], factor: float) -> list[Change]:
    """One change for each entry the cause rests on (two for a zero along x and y), with the twins of a kept device."""
    also = tuple(path for path in _twins(loaded, entries[0][0]) if cause.shared)
    return [
        Change(cause, path, said.now, _down(said.now * factor, said.unit), said.unit, also)
        for path, said in entries
        if said is not None
    ]


def _twins(loaded: LoadedJob, path: str) -> Iterator[str]:
    """The other entries that speak of the same kept device with the same value, in the same plane."""
    mine = _deviation(loaded, path)
    step = path.split(".")[-2]
    if mine is None:
        return
    for setup in loaded.job.setups:
        entry = getattr(setup.hold, step, None) if setup.hold is not None else None
        key = path.rpartition(".")[2]
        other = f"setups.{setup.op}.hold.{step}.{key}"
        if other != path and entry is not None and getattr(entry, key, None) == mine:
            yield other


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
