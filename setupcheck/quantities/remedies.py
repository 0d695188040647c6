"""Remedies: the smallest change of the job file that brings a stack inside its limit. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, Length, MidPlane, OverATurn, Vector, real_pushes
from setupcheck.quantities.book import Open
from setupcheck.quantities.cut_again import CutAgain, cut_again
from setupcheck.quantities.drive import Drive, WheelCut, drive, middle, wheel_cut
from setupcheck.quantities.entries import Stated, deviation, row_of, stated
from setupcheck.quantities.finished import finished, op_of
from setupcheck.quantities.gates import (
    FINE,
    Reach,
    excess_at,
    origins,
    reaches,
    reading_for,
    room,
    rounded_down,
    scaled,
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
from setupcheck.record import record

LEAST_KEPT = 0.2
"""Share of a bound that better work leaves when one change is not enough. Source: our screening choice."""

RECORD_BETTER = 3.0
"""How much better than a typical value a device's own record may turn out to be. Source: our screening choice."""
SAME_WEIGHT = 12
"""Decimals of a mm to which two causes weigh the same: the noise of sums puts none before the other. Source: our choice."""
GRIPS_FIRST = ".join.grips_first"


@record
class Change:
    """One entry of the job file and the value that would do.

    unit "um" or "arcsec"; values in base units
    also  other entries that speak of the same kept device and change with it
    is_typical  `now` is a typical value that the entry leaves to its device
    """

    cause: Cause
    path: str
    now: float
    needed: float
    unit: str
    also: tuple[str, ...] = ()
    is_typical: bool = False


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
class Wider:
    """Another insert: its width now and as it should be [mm], which moves the backlash and not its span."""

    path: str
    now: float
    needed: float


@record
class Remedy:
    """What to change: single entries, the datum of one hold, a shim, an insert, a depth. All empty where nothing simple does it.

    grip    the joint's entry that says where its hub bites first
    own     the dividing head's own record in place of typical values: one change for each of its errors
    """

    changes: tuple[Change, ...] = ()
    swap: Swap | None = None
    shim: Shim | None = None
    grip: str = ""
    insert: Wider | None = None
    again: CutAgain | None = None
    own: tuple[Change, ...] = ()


def remedies(loaded: LoadedJob, floor: Floor, results: Mapping[str, Result]) -> dict[str, Remedy]:
    """The smallest change for every stack outside its limit, one that serves all of them where they name the same entry.

    A length that only the gap behind a cooling hub spoils lets the shoulder end grip first; a mid-plane that another shim
    centres takes that shim; a backlash that only stands beside its limits takes another insert, or more depth.
    Else in this order: the biggest cause cut back by itself; another datum that the stack already runs through, with the
    dial reading that every requirement then needs; the head's own record in place of typical dividing errors; the two
    biggest causes cut back.  Causes of bought parts and
    of the housing come last.  Source: common practice (the fewest changes first).
    """
    trials: dict[tuple[int, str], Swap | None] = {}
    found: dict[str, Remedy] = {}
    for key, result in results.items():
        if result.margin is not None and result.margin < 0.0:
            found[key] = _remedy(loaded, floor, result, trials)
    least: dict[str, float] = {}
    for one in found.values():
        for change in (*one.changes, *one.own):
            least[change.path] = min(change.needed, least.get(change.path, change.needed))

    def together(changes: tuple[Change, ...]) -> tuple[Change, ...]:
        return tuple(replace(c, needed=least[c.path]) for c in changes)

    return {key: replace(one, changes=together(one.changes), own=together(one.own)) for key, one in found.items()}


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
    over = finished(loaded.job)
    grip = _gripped(result)
    if grip and op_of(grip) not in over:
        return Remedy(grip=grip)
    shim = _shimmed(floor, result)
    if shim is not None and shim.op not in over:
        return Remedy(shim=shim)
    again, insert = _of_the_cut(loaded, floor, result, over)
    if again is not None:
        return Remedy(again=again)
    if insert is not None:
        return Remedy(insert=insert)
    order = _by_weight(result.figure)
    one = _cut_back(loaded, result, order, most=1)
    if one:
        return Remedy(one)
    swap = next(_swaps(loaded, result, trials), None)
    if swap is not None:
        return Remedy(swap=swap)
    own, figure = _recorded(result, over)
    if own and worst_excess(figure, result.stack.low, result.stack.high) <= 0.0:
        return Remedy(own=own)
    two = _cut_back(loaded, result, order, most=2)
    if two:
        return Remedy(two)
    one = _cut_back(loaded, replace(result, figure=figure), _by_weight(figure), most=1) if own else ()
    return Remedy(one, own=own) if one else Remedy(_cut_back(loaded, result, order, most=1, bought=True))


def _of_the_cut(
    loaded: LoadedJob, floor: Floor, result: Result, over: frozenset[int]
) -> tuple[CutAgain | None, Wider | None]:
    """More depth for a measured wheel, else another insert, while its cut is still to come.

    Axes that come closer together are no setup, so that is left when the cut is done.
    """
    found = drive(floor)
    cut = wheel_cut(floor, found) if isinstance(found, Drive) else None
    done = isinstance(cut, WheelCut) and cut.op in over
    again = cut_again(floor, result)
    if again is not None:
        return (again if not done or again.deeper < 0.0 or again.in_place else None), None
    return None, None if done else _another_insert(loaded, floor, result)


def _gripped(result: Result) -> str:
    """The entry that says where a shrunk hub bites, where its gap at the shoulder alone puts the stack outside."""
    stack, figure, path = result.stack, result.figure, ""
    for cause in origins(reaches(figure)):
        mine = next((p for p in cause.paths if p.endswith(GRIPS_FIRST)), "")
        if mine and not path:
            figure, path = with_cause(figure, cause, cause.scaled(0.0)), mine
    return path if path and worst_excess(figure, stack.low, stack.high) <= 0.0 else ""


def _another_insert(loaded: LoadedJob, floor: Floor, result: Result) -> Wider | None:
    """The insert that puts a backlash in the middle of its limits, where it fits between them, or just inside its only one.

    A gap is as much wider as its insert is, so the first guess is exact but for the rounding; the route is walked again to
    make sure.  None where the step is finer than the width is known, so that measuring it does more.
    Source: quantities.backlash.
    """
    stack, worst = result.stack, result.combined.worst
    if not isinstance(result.figure, OverATurn):
        return None
    found = drive(floor)
    cut = wheel_cut(floor, found) if isinstance(found, Drive) else None
    if not isinstance(cut, WheelCut) or cut.cut.cutter is None or cut.cutter.width is None:
        return None
    given, name = cut.cutter.width, cut.cut.cutter
    now, path = middle(given), f"{cut.cutter_path}.width"
    step = 2.54e-3 if loaded.job.units == "in" else 1e-3
    up = stack.low - worst.low if stack.low is not None else -math.inf
    down = stack.high - worst.high if stack.high is not None else math.inf
    if up > down:
        return None  # its span is wider than the limits are apart
    shift = (
        (up + down) / 2.0 if math.isfinite(up + down) else up + step / 2.0 if math.isfinite(up) else down - step / 2.0
    )
    said = stated(loaded, path)
    needed = round((now + shift) / step) * step
    if said is None or abs(shift) <= said.now or needed <= 0.0:
        return None
    key = "measured" if given.measured is not None else "nominal"
    moved = given.model_copy(update={key: (getattr(given, key) or 0.0) + needed - now})
    cutters = {**loaded.job.cutters, name: cut.cutter.model_copy(update={"width": moved})}
    other = replace(loaded, job=loaded.job.model_copy(update={"cutters": cutters}))
    try:
        built = build(walk(other), stack)
    except JobError:
        return None
    if isinstance(built, Open) or worst_excess(built.figure, stack.low, stack.high) > 0.0:
        return None
    return Wider(path, now, needed)


def _recorded(result: Result, over: frozenset[int]) -> tuple[tuple[Change, ...], Figure]:
    """All typical errors of one division made smaller alike, to what the head's own record has to show; the figure then.

    All of them, because a record that states one takes the place of every typical value.  By RECORD_BETTER where even that
    is not enough; nothing where no typical error of a division is in it.
    """
    stack, figure = result.stack, result.figure
    each = [
        (c, row)
        for c in origins(reaches(figure))
        if any(".divide." in p for p in c.paths) and (row := row_of(c)) is not None and c.op not in over
    ]
    if not each:
        return (), figure
    each = [(cause, row) for cause, row in each if cause.op == each[0][0].op]

    def at(factor: float) -> Figure:
        one = figure
        for cause, _ in each:
            one = scaled(one, cause, factor)
        return one

    inside, outside = 1.0 / RECORD_BETTER, 1.0
    while outside - inside > 1e-9:  # an end that is not inside stays where it is
        half = (inside + outside) / 2.0
        inside, outside = (half, outside) if worst_excess(at(half), stack.low, stack.high) <= 0.0 else (inside, half)
    changes = tuple(
        Change(cause, cause.paths[0], row.value, _down(row.value * inside, "arcsec"), "arcsec", is_typical=True)
        for cause, row in each
    )
    return changes, at(inside)


def _cut_back(
    loaded: LoadedJob, result: Result, order: Sequence[Cause], *, most: int, bought: bool = False
) -> tuple[Change, ...]:
    """The biggest causes cut back, at most so many; empty where they cannot bring the stack inside.

    order  the causes, those first that are cut back first: `_by_weight`
    Each but the last is cut back as far as care goes (LEAST_KEPT), the last just as far as is needed.
    """
    stack, figure, over = result.stack, result.figure, finished(loaded.job)
    changes: list[Change] = []
    places = reaches(figure)
    for cause in order:
        entries = [(path, stated(loaded, path, cause)) for path in cause.paths]
        said = entries[0][1] if entries else None
        if said is None or said.now <= 0.0 or cause.mode == "derived" or (cause.op is None and not bought):
            continue
        if cause.op in over:
            continue
        least, largest = span(figure, places, cause, said.now, said.guard, low=stack.low, high=stack.high)
        if least == 0.0 and largest < said.now and _down(largest, said.unit) > said.least:
            return (*changes, *_changes(loaded, cause, entries, largest / said.now))
        if len(changes) + 1 >= most or cause.mean or LEAST_KEPT * said.now <= said.least:
            if most == 1:
                return ()
            continue
        changes += _changes(loaded, cause, entries, LEAST_KEPT)
        figure = scaled(figure, cause, LEAST_KEPT)
        places = reaches(figure)
    return ()


def _by_weight(figure: Figure) -> list[Cause]:
    """The causes behind a figure, those first that take most with them when they go."""
    low = 0.0 if figure.signed else None
    places = reaches(figure)
    full = worst_excess(figure, low, 0.0)
    hidden = {cause for one in places for p in one.pushes if p.cause.of is not None for cause in p.cause.of.origins()}
    straight = isinstance(figure, Vector | Length)

    def weight(cause: Cause) -> float:
        if straight and not cause.mean and cause not in hidden:  # what it pushes is all that it takes with it
            gone = [Reach(one.base, [p for p in one.pushes if p.cause != cause]) for one in places]
            return round(full - excess_at(gone, low, 0.0), SAME_WEIGHT)
        return round(full - worst_excess(scaled(figure, cause, 0.0), low, 0.0), SAME_WEIGHT)

    return sorted(origins(places), key=weight, reverse=True)


def _changes(loaded: LoadedJob, cause: Cause, entries: list[tuple[str, Stated | None]], factor: float) -> list[Change]:
    """One change for each entry the cause rests on (two for a zero along x and y), with the twins of a kept device."""
    also = tuple(path for path in twins(loaded, entries[0][0]) if cause.shared)
    return [
        Change(cause, path, said.now, _down(said.now * factor, said.unit), said.unit, also, bool(cause.rests_on))
        for path, said in entries
        if said is not None
    ]


def twins(loaded: LoadedJob, path: str) -> Iterator[str]:
    """The other entries that speak of the same kept device with the same value, in the same plane."""
    mine = deviation(loaded, path)
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
    if (
        setup is None
        or centre is None
        or setup.op in finished(loaded.job)
        or f"setups.{setup.op}.hold.centre.runout" not in biggest.paths
    ):
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
        grow = room(reaches(figure.figure), mine, low=stack.low, high=stack.high) if mine is not None else None
        if grow is not None and (allowed := reading_for(planned.now, planned.guard, grow)) > FINE:
            reading = min(reading, allowed)
            cures.append(stack.index)
    if not cures:
        return None
    return Swap(
        setup.op, f"setups.{setup.op}.hold.centre", hold.centre.on, on, like, rounded_down(reading), tuple(cures)
    )
