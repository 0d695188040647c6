"""Witness surfaces: a narrow band or ring finished in one holding, for a later setup to be trued on. Lengths mm."""

from __future__ import annotations

from collections.abc import Container, Iterator
from dataclasses import replace

from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Edit
from setupcheck.jobfile.models import Flat, Pattern, Round, Throat, Toothing
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.devices import DEVICES
from setupcheck.quantities.finished import finished
from setupcheck.quantities.holdable import Standing, faces, rounds, standing_before
from setupcheck.quantities.proposals import Editor, Proposal, offered
from setupcheck.quantities.rehold import Move, centre_move, holds_on_the_chain, in_file, square_move
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.sharing import bare, cut_in, part_of
from setupcheck.quantities.trials import Bench
from setupcheck.record import record

WIDE = 3.0
"""Width of a witness [mm]. Source: common practice, room for the ball of a lever indicator."""
SKIM = 0.25
"""Depth a band or ring is turned below its surface, on the radius or along the axis [mm]. Source: our screening choice."""
CLEAR = 2.0
"""How far a witness stays away from jaws, teeth and the like [mm]. Source: our screening choice."""
OF_ITS_PARENT = 0.4
"""Share of its surface that a band may take. Source: our screening choice."""
TURNING = ("lathe", "grinder")


@record
class Witness:
    """A surface to add: its name, its text in the file, the surface it is turned on, and the node as it would be read."""

    name: str
    text: str
    parent: Standing
    node: Round | Flat


def witnesses(bench: Bench, key: str) -> Iterator[Proposal]:
    """Each holding that turns, given one witness, for each later hold on the chain of what fails."""
    for later in holds_on_the_chain(bench, key):
        for maker in makers(bench.loaded, later):
            for one in places(bench.loaded, maker, later):
                found = _offered(bench, key, maker, later, one)
                if found is not None:
                    yield found


def makers(loaded: LoadedJob, later: Setup) -> Iterator[Setup]:
    """Setups still to come, before a later one, that turn something finished on the same part."""
    gone = finished(loaded.job)
    for setup in loaded.job.setups:
        if setup.op == later.op:
            return
        _, machine = machine_of(loaded, setup)
        if not setup.cut or setup.op in gone or machine is None or machine.kind not in TURNING:
            continue
        if part_of(loaded, setup) == part_of(loaded, later) and any(c.state != "rough" for c in setup.cut.values()):
            yield setup


def _offered(bench: Bench, key: str, maker: Setup, later: Setup, one: Witness) -> Proposal | None:
    loaded, part = bench.loaded, one.parent.part
    there = Standing(part, one.name, maker.op, one.node)
    hold = later.hold
    assert hold is not None
    move: Move | None
    if isinstance(one.node, Round):
        if hold.centre is None or hold.centre.turned is not None:
            return None
        move = centre_move(bench, later, hold.centre, there, one.node, part, shortly=True)
    else:
        move = square_move(loaded, later, there, one.node, part)
    if move is None:
        return None
    idea = replace(
        move.idea,
        kind="witness",
        parent=one.parent.name,
        with_it=tuple(maker.cut),
        wide=WIDE,
        by=move.idea.by if isinstance(one.node, Round) else "",
    )
    made = (
        Change(f"parts.{part}.surfaces.{one.name}", one.text),
        Change(f"setups.{maker.op}.cut.{one.name}", f"{{from_surface: {one.parent.name}}}"),
    )
    return offered(bench, key, idea, _editor(made, move, inches=loaded.job.units == "in"), move.reading_at)


def _editor(made: tuple[Change, ...], move: Move, *, inches: bool) -> Editor:
    def edits(reading: float | None) -> tuple[Edit, ...]:
        return (*made, *move.edits(reading, inches=inches))

    return edits


def places(loaded: LoadedJob, maker: Setup, later: Setup) -> Iterator[Witness]:
    """Where a witness fits: on a surface that stands before its holding and is not cut in it or until the later setup.

    The surface has no limits of its own, the place is out of the jaws, and no teeth, throat or smaller cylinder is there.
    """
    part = part_of(loaded, maker)
    busy = _cut_until(loaded, maker, later)
    there = [one for one in standing_before(loaded, maker) if one.part == part and (part, one.name) not in busy]
    holder = next((s for s in loaded.job.setups if s.op == maker.keeps), maker)
    taken = loaded.job.parts[part].surfaces
    for one, round_ in rounds(there):
        band = _band(loaded, one, round_, holder, free_name(f"band-{maker.op}", taken))
        if band is not None:
            yield band
    seated = {bare(loaded, on, holder) for on in _seats(holder)}
    for one, flat in faces(there):
        if (part, one.name) not in seated and flat.facing == holder.looks_at_tool:
            ring = _ring(loaded, one, flat, free_name(f"ring-{maker.op}", taken))
            if ring is not None:
                yield ring


def free_name(wanted: str, taken: Container[str]) -> str:
    """A name that no surface of the part has yet."""
    name, n = wanted, 1
    while name in taken:
        n += 1
        name = f"{wanted}-{n}"
    return name


def _seats(setup: Setup) -> list[str]:
    """Faces that a setup is squared on or stopped by."""
    entries = (setup.hold.square, setup.hold.stop) if setup.hold is not None else ()
    return [entry.on for entry in entries if entry is not None]


def _cut_until(loaded: LoadedJob, maker: Setup, later: Setup) -> set[tuple[str, str]]:
    """Surfaces cut or taken away from the maker to the later setup, both included."""
    found: set[tuple[str, str]] = set()
    for setup in loaded.job.setups:
        if maker.op <= setup.op <= later.op and setup.cut:
            found |= cut_in(loaded, setup)
            found |= {bare(loaded, gone, setup) for cut in setup.cut.values() for gone in cut.removes}
    return found


def _band(loaded: LoadedJob, one: Standing, node: Round, holder: Setup, name: str) -> Witness | None:
    size = node.diameter
    plain_size = size.fit is None and size.lower is None and size.upper is None and size.measured is None
    if node.kind != "cylinder" or not plain_size or WIDE > OF_ITS_PARENT * (node.high - node.low):
        return None
    ends = ((node.low, node.low + WIDE), (node.high - WIDE, node.high))
    for low, high in ends if holder.looks_at_tool == -1 else reversed(ends):  # the end at the tool first
        if _covered(loaded, one, holder, low, high) or _crowded(loaded, one, node, low, high):
            continue
        diameter = size.value - 2.0 * SKIM
        at = f"from: {in_file(low, loaded)}, to: {in_file(high, loaded)}"
        text = f"{{kind: cylinder, diameter: {in_file(diameter, loaded)}, {at}}}"
        seen = node.model_copy(update={"low": low, "high": high})
        return Witness(name, text, one, seen)
    return None


def _covered(loaded: LoadedJob, one: Standing, holder: Setup, low: float, high: float) -> bool:
    """Whether the device that holds the part lies on the place, or might: its grip is not said."""
    for step in ("centre", "and_centre"):
        entry = getattr(holder.hold, step) if holder.hold is not None else None
        if entry is None or bare(loaded, entry.on, holder) != (one.part, one.name):
            continue
        if not DEVICES[entry.by].covers and entry.by != "four-jaw":
            continue
        if entry.grip is None or (low < entry.grip.high + CLEAR and high > entry.grip.low - CLEAR):
            return True
    return False


def _crowded(loaded: LoadedJob, one: Standing, node: Round, low: float, high: float) -> bool:
    """Whether teeth, a throat, holes or a smaller cylinder share the place."""
    for name, other in loaded.job.parts[one.part].surfaces.items():
        if name == one.name:
            continue
        if isinstance(other, Toothing):
            half = (other.width or 0.0) / 2.0
        elif isinstance(other, Throat):
            half = other.radius
        elif isinstance(other, Pattern):
            half = (other.width or other.diameter or 0.0) / 2.0
        elif isinstance(other, Round) and other.kind != "bore" and other.diameter.value < node.diameter.value:
            if low < other.high and high > other.low:
                return True
            continue
        else:
            continue
        if low < other.at + half + CLEAR and high > other.at - half - CLEAR:
            return True
    return False


def _ring(loaded: LoadedJob, one: Standing, node: Flat, name: str) -> Witness | None:
    """The rim of a face turned a little lower; its length stays that of the face inside."""
    if node.diameter is None or node.diameter - 2.0 * WIDE <= (node.hole or 0.0) + 2.0 * WIDE:
        return None
    at, hole = node.at - node.facing * SKIM, node.diameter - 2.0 * WIDE
    way = "+z" if node.facing > 0 else "-z"
    text = (
        f"{{kind: face, at: {in_file(at, loaded)}, facing: {way}, "
        f"diameter: {in_file(node.diameter, loaded)}, hole: {in_file(hole, loaded)}}}"
    )
    return Witness(name, text, one, node.model_copy(update={"at": at, "hole": hole}))
