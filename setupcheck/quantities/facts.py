"""Facts of an instance for the conditions of rules and cautions: looked up outward, unknown where the planner left them out."""

from __future__ import annotations

from setupcheck.jobfile.heating import COLDEST, Heat
from setupcheck.jobfile.models import Flat, Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Clock, Join, Setup, Square, Stop
from setupcheck.quantities.book import Open, Scope
from setupcheck.quantities.chilling import cold_error
from setupcheck.quantities.contents import breaks, holds, material_family
from setupcheck.quantities.devices import DEVICES
from setupcheck.quantities.joining import heat_error, key_of_error
from setupcheck.quantities.readings import Reading
from setupcheck.quantities.requirements import Stack, spoken
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.scopes import CutEntry, HoldEntry
from setupcheck.quantities.shop import Floor, outline
from setupcheck.quantities.stuff import cap_of, material_of, porous
from setupcheck.record import record

HOT = 58.0
"""degC from which bare metal burns within seconds. Source: 58 to 60 degC at five seconds' touch (ISO 13732-1 and ASTM C1055
from memory, scope pages opened; a hot-surface page has 60); the stricter is taken."""
DEEP_COLD = -50.0
"""degC below which plain and hardened steel may crack without bending. Source: our screening choice."""
_TOUCH = 1e-6
"""mm within which two surfaces end at one height. Our choice."""
COLD_BELOW = 10.0
"""Kelvin under the room from which a shaft counts as chilled. Source: our screening choice."""


@record
class UnknownFact:
    """A fact the job could state and does not; `path` is the key to fill, `of` a material stated there that does not tell it.

    never  values that it cannot have, whatever is filled in
    """

    path: str
    of: str = ""
    never: tuple[str, ...] = ()


TURNED_BY_NOTHING = ("broach",)
"""Cutters that a machine with a turning cutter does not have: a broach is pushed or pulled straight. Source: common practice."""

Fact = str | int | float | bool | UnknownFact | None


def facts_of(floor: Floor, scope: Scope, name: str) -> Fact:
    """The answer to one fact at one instance; None where this kind of thing has no such fact."""
    family, _, field = name.partition(".")
    setup = next((s.node for s in scope.outward() if isinstance(s.node, Setup)), None)
    match family:
        case "job":
            if field == "has_mesh":
                return floor.loaded.job.mesh is not None
            return any(s.kind == "teeth" for p in floor.loaded.job.parts.values() for s in p.surfaces.values())
        case "instance":
            return _called(scope, field)
        case "part" | "surface":
            return _surface_fact(floor, scope, setup, name)
        case "hold":
            return _hold_fact(floor, scope, setup, field)
        case "cut" | "cutter":
            return _cut_fact(floor, scope, setup, name)
    if setup is None:
        return None
    path = f"setups.{setup.op}"
    if name == "setup.kind":
        return "join" if setup.join is not None else "cut"
    if name == "setup.machine_kind":
        if setup.join is not None:
            return None
        _, machine = machine_of(floor.loaded, setup)
        return machine.kind if machine is not None else UnknownFact(f"{path}.machine")
    if name == "setup.follows_heat":
        return _follows_heat(floor, setup)
    if name == "head.tilted":
        return setup.head is not None and setup.head.tilt != 0.0
    if name == "divide.by":
        return setup.divide.by if setup.divide is not None else None
    return _joint_fact(floor, setup, setup.join, name) if setup.join is not None else None


def _follows_heat(floor: Floor, setup: Setup) -> Fact:
    """Whether the setup before this one, in the order of the job file, joined hot the part that this one holds or cuts."""
    before = floor.loaded.job.setups[: floor.loaded.job.setups.index(setup)]
    join = before[-1].join if before else None
    if join is None or setup.join is not None:
        return False
    joined = {floor.loaded.ref(text).part for text in (join.outer, join.inner)}
    own = {floor.part_of.get(setup.op, ""), setup.part or ""}
    if not joined & own:
        return False
    hot = _heat_fact(floor, join, "heat.hot", f"setups.{before[-1].op}.join.heat")
    return hot if hot is not None else False


def _joint_fact(floor: Floor, setup: Setup, join: Join, name: str) -> Fact:
    path = f"setups.{setup.op}.join"
    match name:
        case "join.by":
            return join.by
        case "join.joint":
            return join.joint if join.joint is not None else UnknownFact(f"{path}.joint")
        case "hub.may_trap":
            return _may_trap(floor, join)
        case "join.may_trap":
            return _may_trap(floor, join) or _hollow(floor, floor.loaded.ref(join.inner).part)
        case "join.has_stop":
            return join.stop is not None
        case "shaft.hollow":
            return _hollow(floor, floor.loaded.ref(join.inner).part)
        case "hub.porous":
            part = floor.loaded.ref(join.outer).part
            found = porous(floor.loaded.job.parts[part])
            return found if found is not None else UnknownFact(f"parts.{part}.material")
        case "hub.brittle":
            return _breaks(floor, floor.loaded.ref(join.outer).part)
        case "join.brittle":
            both = [_breaks(floor, floor.loaded.ref(text).part) for text in (join.outer, join.inner)]
            return True if True in both else next((b for b in both if isinstance(b, UnknownFact)), False)
        case "shaft.material_family":
            inner = floor.loaded.ref(join.inner).part
            called = floor.loaded.job.parts[inner].material
            return _family(called, f"parts.{inner}.material")
    return _heat_fact(floor, join, name, f"{path}.heat")


def _heat_fact(floor: Floor, join: Join, name: str, path: str) -> Fact:
    """What is planned of heat and cold. A shrink fit without `heat` has it unstated; another joint without has none."""
    heat = join.heat
    if heat is None and join.by != "shrink":
        return None
    heat = heat if heat is not None else Heat()
    room = floor.loaded.job.room
    chilled, cold_alone = heat.shaft is not None and heat.shaft < room - COLD_BELOW, heat.by_cold_alone(room)
    match name:
        case "heat.by":
            return heat.by if heat.by is not None else None if cold_alone else UnknownFact(f"{path}.by")
        case "heat.hot" | "heat.above_cap" if cold_alone:
            return False
        case "heat.hot":
            found = heat_error(heat)
            hottest = heat.hub + (found[0] if found is not None else 0.0) if heat.hub is not None else None
            return hottest >= HOT if hottest is not None else UnknownFact(f"{path}.hub")
        case "heat.above_cap":
            return _above_cap(floor, join, heat, path)
        case "heat.cold_by":
            return heat.cold_by if heat.cold_by is not None else UnknownFact(f"{path}.cold_by") if chilled else None
        case "heat.deep_cold":
            if heat.cold_by is None and heat.shaft is None:
                return False
            error = cold_error(heat)
            off = error[0] if error is not None else 0.0
            coldest = heat.shaft - off if heat.shaft is not None else COLDEST.get(heat.cold_by or "")
            return coldest < DEEP_COLD if coldest is not None else UnknownFact(f"{path}.shaft")
    return None


def _above_cap(floor: Floor, join: Join, heat: Heat, path: str) -> Fact:
    """Whether the hub may come above what its material stands: planned heat and error of the heat source over its cap."""
    part = floor.loaded.ref(join.outer).part
    if heat.hub is None:
        return UnknownFact(f"{path}.hub")
    error = heat_error(heat)
    if error is None:
        return UnknownFact(f"{path}.{key_of_error(heat)}")
    found = material_of(floor, part)
    if isinstance(found, Open):
        return _unknown_of(floor, part, found)
    return heat.hub + error[0] > cap_of(floor, part, found)


def _may_trap(floor: Floor, join: Join) -> bool:
    """Whether a hub may shut in air or a liquid: its bore ends inside it, or it has holes or threads besides."""
    ref = floor.loaded.ref(join.outer)
    drawn = floor.loaded.job.parts[ref.part].surfaces.items()
    surfaces = {n: s for n, s in drawn if s.made != "stock" or n == ref.surface}  # a bought hub's bore comes with it
    if any(s.kind in ("holes", "thread") for n, s in surfaces.items() if n != ref.surface):
        return True
    if not any(isinstance(s, Round | Flat) for n, s in surfaces.items() if n != ref.surface):
        surfaces = dict(drawn)  # a hub bought as it is: its stock is its shape
    shapes = [outline(s) for s in surfaces.values() if isinstance(s, Round | Flat)]
    open_to = min(s.low for s in shapes)
    for bore in sorted((s for s in shapes if s.kind in ("bore", "taper", "thread")), key=lambda s: s.low):
        if bore.low <= open_to + _TOUCH:
            open_to = max(open_to, bore.high)
    return open_to < max(s.high for s in shapes) - _TOUCH


def _hollow(floor: Floor, part: str) -> bool:
    """Whether a part has a bore, a thread or holes that hold what it is dipped in."""
    return any(
        s.kind in ("bore", "holes", "thread") or (isinstance(s, Round) and bool(s.hole))
        for s in floor.loaded.job.parts[part].surfaces.values()
    )


def _breaks(floor: Floor, part: str) -> bool | UnknownFact:
    found = material_of(floor, part)
    return _unknown_of(floor, part, found) if isinstance(found, Open) else breaks(found)


def _unknown_of(floor: Floor, part: str, found: Open) -> UnknownFact:
    """What is missing of a material: its name, one of its properties, or a name that is in the list."""
    path = found.missing[0]
    named = path == f"parts.{part}.material"
    return UnknownFact(path, (floor.loaded.job.parts[part].material or "") if named else "")


def _called(scope: Scope, field: str) -> str | None:
    """How an instance is called in messages, and the surface it is about."""
    node = scope.node
    if isinstance(node, Stack):
        return node.require.name or f"{node.require.what} at {spoken(node)}" if field == "name" else node.of
    if isinstance(node, HoldEntry):
        return node.entry.on if field == "surface" else held_in_words(node)
    if isinstance(node, Reading):
        return node.name
    if isinstance(node, CutEntry):
        return node.name
    return None


def held_in_words(node: HoldEntry) -> str:
    """What is held and what holds it, as causes are called: `hub in four-jaw chuck (four-jaw-A)`, `seat on parallels`.

    A device that the error entry names itself stands behind, where the words do not name it.
    """
    entry, given = node.entry, node.error
    by = getattr(entry, "by", None)
    if isinstance(entry, Stop | Clock):
        said = f"the stop on {entry.on}" if isinstance(entry, Stop) else f"the clocking on {entry.on}"
    elif isinstance(entry, Square):
        said = f"{entry.on} on {by}" if by else entry.on
    else:
        said = f"{entry.on} {DEVICES[entry.by].words}{', second plane' if node.step == 'and_centre' else ''}"
    own = given.device if given is not None else None
    return f"{said} ({own})" if own is not None and own != by else said


def _ref(floor: Floor, scope: Scope, setup: Setup | None) -> Ref | None:
    part = setup.part if setup is not None else None
    if isinstance(scope.node, CutEntry):
        return floor.loaded.ref(scope.node.name, part)
    if isinstance(scope.node, HoldEntry):
        own = part or (floor.part_of.get(setup.op) if setup is not None else None)
        found = floor.loaded.surfaces().get(own or "", ())
        return floor.loaded.ref(scope.node.entry.on, own if scope.node.entry.on.partition("@")[0] in found else None)
    if isinstance(scope.node, Stack) and scope.node.of and not scope.node.of.isdigit():
        return floor.loaded.ref(scope.node.of)
    return None


def _surface_fact(floor: Floor, scope: Scope, setup: Setup | None, name: str) -> Fact:
    ref = _ref(floor, scope, setup)
    if name == "surface.kind":
        return floor.loaded.job.parts[ref.part].surfaces[ref.surface].kind if ref is not None else None
    parts = [ref.part] if ref is not None else []
    if not parts and setup is not None:
        parts = [floor.part_of[setup.op]] if setup.op in floor.part_of else []
        if setup.join is not None:
            parts = [floor.loaded.ref(setup.join.outer).part]
    if not parts:
        return None
    called = floor.loaded.job.parts[parts[0]].material
    if called is None:
        return UnknownFact(f"parts.{parts[0]}.material")
    if name == "part.material":
        return called
    if name == "part.material_family":
        return _family(called, f"parts.{parts[0]}.material")
    found = _content(called, name.removeprefix("part."))
    return found if found is not None else UnknownFact(f"parts.{parts[0]}.material", called)


def _content(called: str, of: str) -> bool | None:
    """Whether a material may hold `lead`, `zinc` or `beryllium`, or (`fume`) any of them."""
    held = {"lead": holds(called, "lead"), "zinc": holds(called, "zinc"), "beryllium": holds(called, "beryllium")}
    if of in held:
        return held[of]
    return True if True in held.values() else None if None in held.values() else False


def _hold_fact(floor: Floor, scope: Scope, setup: Setup | None, field: str) -> Fact:
    entry = (
        scope.node.entry
        if isinstance(scope.node, HoldEntry)
        else (setup.hold.centre if setup is not None and setup.hold is not None else None)
    )
    if entry is None:
        return None
    if field == "by":
        return getattr(entry, "by", None)
    if field == "jaws_stand_out":
        out = getattr(entry, "jaws_stand_out", None)
        return out > 0.0 if out is not None else None
    ref = _ref(floor, scope, setup)
    return floor.loaded.job.parts[ref.part].surfaces[ref.surface].kind if ref is not None else None


def _cut_fact(floor: Floor, scope: Scope, setup: Setup | None, name: str) -> Fact:
    if not isinstance(scope.node, CutEntry) or setup is None:
        return None
    cut = scope.node.cut
    if name == "cut.state":
        return cut.state or "finish"
    if name == "cut.kind":
        ref = floor.loaded.ref(scope.node.name, setup.part)
        return floor.loaded.job.parts[ref.part].surfaces[ref.surface].kind
    cutter = floor.loaded.job.cutters[cut.cutter] if cut.cutter is not None else None
    if name == "cutter.insert":
        return cutter.insert is not None if cutter is not None else None
    _, machine = machine_of(floor.loaded, setup)
    if name == "cut.grinds":
        if cutter is not None and cutter.kind == "grinding-wheel":
            return True
        return machine.kind == "grinder" if machine is not None else UnknownFact(f"setups.{setup.op}.machine")
    if cutter is not None:
        return cutter.kind
    turns_a_cutter = machine is not None and machine.kind in ("dividing-head", "rotary-table", "mill", "jig-borer")
    unknown = UnknownFact(f"setups.{setup.op}.cut.{scope.node.name}.cutter", never=TURNED_BY_NOTHING)
    return unknown if turns_a_cutter else None


def _family(called: str | None, path: str) -> Fact:
    """Family of a material; unknown where none is named, or where its name does not say."""
    family = material_family(called) if called is not None else "other"
    return family if family != "other" else UnknownFact(path, called or "")
