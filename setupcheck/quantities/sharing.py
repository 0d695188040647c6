"""Neighbouring setups that one holding could cut: read from the job alone, nothing is walked. Lengths mm."""

from __future__ import annotations

from setupcheck.jobfile.models import Deviation, Flat, Round
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Centre, Hold, Setup
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.devices import DIALLED
from setupcheck.quantities.finished import finished
from setupcheck.quantities.shop import Floor


def may_share(loaded: LoadedJob, first: Setup, second: Setup) -> bool:
    """Whether one holding can cut both: same machine, same part, same end to the tool, and nothing cut that it is held by.

    A tilted head or another way of dividing is another setting of the machine, not another cut.
    """
    holder = next((s for s in loaded.job.setups if s.op == first.keeps), first)
    if second.hold is None or holder.hold is None or not first.cut or not second.cut:
        return False
    if any(s.head is not None or s.divide is not None for s in (first, second)):
        return False
    if (holder.machine, part_of(loaded, holder), holder.looks_at_tool) != (
        second.machine,
        part_of(loaded, second),
        second.looks_at_tool,
    ):
        return False
    held = {bare(loaded, on, holder) for on in held_on(holder)}
    return not held & cut_in(loaded, second)


def part_of(loaded: LoadedJob, setup: Setup) -> str:
    """The part a setup holds."""
    return setup.part if setup.part is not None else loaded.ref(next(iter(setup.cut)), setup.part).part


def bare(loaded: LoadedJob, name: str, setup: Setup) -> tuple[str, str]:
    """(part, surface) that a name means in a setup."""
    own = part_of(loaded, setup) if "." not in name else setup.part
    known = own is not None and name.partition("@")[0] in loaded.job.parts[own].surfaces
    ref = loaded.ref(name, own if known else setup.part)
    return ref.part, ref.surface


def cut_in(loaded: LoadedJob, setup: Setup) -> set[tuple[str, str]]:
    """Surfaces that a setup cuts."""
    return {bare(loaded, name, setup) for name in setup.cut}


def held_on(setup: Setup) -> list[str]:
    """Surfaces that a setup is held on, its clock included."""
    entries = [getattr(setup.hold, step) for step in ("centre", "and_centre", "square", "stop", "clock")]
    return [entry.on for entry in entries if entry is not None]


def _held_alike(loaded: LoadedJob, holder: Setup, first: Setup, second: Setup) -> bool:
    """Whether the second setup is held as the first one holds, or on what the first one cuts where its jaws leave room.

    Alike: the same surfaces by the same devices for axis and lean. Chucks may be said to give another error, but a part
    that is trued by dial, and finer than before, has a reason to be set up again.
    """
    old, new = holder.hold, second.hold
    if old is None or new is None or old.centre is None or new.centre is None or new.clock is not None:
        return False
    if _datums(loaded, old, holder) == _datums(loaded, new, second):
        return not _finer(old, new)
    made = cut_in(loaded, holder) | cut_in(loaded, first)
    on = {bare(loaded, entry.on, second) for entry in (new.centre, new.and_centre, new.square) if entry is not None}
    return on <= made and _clear_of_the_grip(loaded, holder, old.centre, second)


def _finer(old: Hold, new: Hold) -> bool:
    """Whether any dial reading is asked finer in the second hold."""
    for step in ("centre", "and_centre"):
        was, now = getattr(old, step), getattr(new, step)
        if was is None or now is None or now.by not in DIALLED:
            continue
        before, after = (_bound(entry.runout) for entry in (was, now))
        if after is not None and (before is None or after < before):
            return True
    return False


def _bound(given: Deviation | None) -> float | None:
    if given is None:
        return None
    return given.measured if given.measured is not None else given.at_most


def _datums(loaded: LoadedJob, hold: Hold, setup: Setup) -> list[tuple[object, ...]]:
    found: list[tuple[object, ...]] = []
    for step in ("centre", "and_centre", "square"):
        entry = getattr(hold, step)
        found.append((step, bare(loaded, entry.on, setup), entry.by) if entry is not None else (step,))
    return found


def _clear_of_the_grip(loaded: LoadedJob, holder: Setup, centre: Centre, second: Setup) -> bool:
    """Whether everything the second setup cuts lies on the tool's side of what the first one grips; no where nobody says."""
    if centre.grip is None:
        return False
    way = holder.looks_at_tool or 1
    edge = max(way * centre.grip.low, way * centre.grip.high)
    for part, name in cut_in(loaded, second):
        node = loaded.job.parts[part].surfaces[name]
        if part != bare(loaded, centre.on, holder)[0]:
            return False
        if isinstance(node, Round) and node.kind != "bore":
            ends = (node.low, node.high)
        elif isinstance(node, Flat | Round):
            continue  # a face of this end, a bore from this end
        else:
            ends = (node.at, node.at)
        if min(way * end for end in ends) < edge:
            return False
    return True


def _pair(floor: Floor, setup: Setup) -> tuple[Setup, Setup] | None:
    """(setup that took the part, setup before this one), where this one takes a part anew that the one before had held."""
    loaded, job = floor.loaded, floor.loaded.job
    place = next(i for i, one in enumerate(job.setups) if one.op == setup.op)
    if place == 0 or setup.hold is None or not setup.cut or setup.op in finished(job):
        return None
    before = job.setups[place - 1]
    holder = before
    while holder.keeps is not None:
        found = next((s for s in job.setups if s.op == holder.keeps), None)
        if found is None:
            return None
        holder = found
    same = before.cut and part_of(loaded, holder) == part_of(loaded, setup) and holder.machine == setup.machine
    return (holder, before) if same else None


def taken_anew(floor: Floor, setup: Setup) -> str | None:
    """needed or alike: whether the part is taken out and held again where the holding before could have cut it.

    None where the setup before held another part or stood on another machine.  alike: same end to the tool, same machine,
    no head and no dividing, nothing cut that it is held by, and held alike.  Source: the order of the route.
    """
    pair = _pair(floor, setup)
    if pair is None:
        return None
    holder, before = pair
    shares = may_share(floor.loaded, before, setup) and _held_alike(floor.loaded, holder, before, setup)
    return "alike" if shares else "needed"


def keep_advice(floor: Floor, setup: Setup, anew: str) -> str | None:
    """What to write to cut both in one holding. Source: the job file."""
    pair = _pair(floor, setup)
    if pair is None or anew != "alike":
        return None
    holder, before = pair
    both = f"op {before.op} and op {setup.op}" if before.op == holder.op else f"op {holder.op} to op {setup.op}"
    return (
        f"Cut {both} in one holding: in op {setup.op} write keeps: {holder.op} in place of hold and looks_at_tool. If the "
        f"part has to come out (to let stress go, to be tempered), waive this finding with that reason."
    )


_HERE = {"floor": "route.floor", "setup": ":"}

SHARING = (
    Quantity("hold.taken_anew", "setup", "", 0, taken_anew, _HERE, "whether the part had to be held again"),
    Quantity(
        "hold.keep_advice",
        "setup",
        "",
        0,
        keep_advice,
        {**_HERE, "anew": "hold.taken_anew"},
        "how to cut two setups in one holding",
    ),
)
