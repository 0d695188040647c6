"""Facts of an instance for the conditions of rules and cautions: looked up outward, unknown where the planner left them out."""

from __future__ import annotations

import re

from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.book import Scope
from setupcheck.quantities.readings import Reading
from setupcheck.quantities.requirements import Stack, spoken
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.scopes import CutEntry, HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

FAMILIES = (
    ("copper-alloy", r"cu|cc\d|c[1-9]\d{4}|bronze|brass|gunmetal|rg\d|sae 6\d"),
    ("cast-iron", r"gg|gj|jl|jm|js|cast.?iron|gr[ea]y.?iron"),
    ("aluminium", r"al|aw|[2-7]\d{3}(-t\d|$)"),
    ("steel", r"\d|steel|c\d\d?\b|s\d{3}|x\d"),
)
"""How names of materials begin, and what they are: EN, UNS and trade names. Source: common designations, from memory."""


@record
class UnknownFact:
    """A fact the job could state and does not; `path` is the key to fill."""

    path: str


Fact = str | int | float | bool | UnknownFact | None


def material_family(material: str) -> str:
    """copper-alloy, steel, cast-iron, aluminium or other, from the name of a material.

    >>> [material_family(name) for name in ("CuSn12-C", "C93200", "CC483K", "42CrMo4", "C45", "EN-GJL-250", "6082-T6")]
    ['copper-alloy', 'copper-alloy', 'copper-alloy', 'steel', 'steel', 'cast-iron', 'aluminium']
    """
    name = re.sub(r"^en[- ]?", "", material.strip().lower())
    return next((family for family, begins in FAMILIES if re.match(begins, name)), "other")


def facts_of(floor: Floor, scope: Scope, name: str) -> Fact:
    """The answer to one fact at one instance; None where this kind of thing has no such fact."""
    family, _, field = name.partition(".")
    setup = next((s.node for s in scope.outward() if isinstance(s.node, Setup)), None)
    match family:
        case "job":
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
    if name == "head.tilted":
        return setup.head is not None and setup.head.tilt != 0.0
    if name == "divide.by":
        return setup.divide.by if setup.divide is not None else None
    if setup.join is None:
        return None
    if name == "join.by":
        return setup.join.by
    if name == "heat.by":
        heat = setup.join.heat
        if heat is None and setup.join.by != "shrink":
            return None
        return heat.by if heat is not None and heat.by is not None else UnknownFact(f"{path}.join.heat.by")
    return None


def _called(scope: Scope, field: str) -> str | None:
    """How an instance is called in messages, and the surface it is about."""
    node = scope.node
    if isinstance(node, Stack):
        return node.require.name or f"{node.require.what} at {spoken(node)}" if field == "name" else node.of
    if isinstance(node, HoldEntry):
        return (
            node.entry.on if field == "surface" else f"op {scope.op}, {node.step.replace('_', ' ')} on {node.entry.on}"
        )
    if isinstance(node, Reading):
        return node.name
    if isinstance(node, CutEntry):
        return node.name
    return None


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
    material = floor.loaded.job.parts[parts[0]].material
    if material is None:
        return UnknownFact(f"parts.{parts[0]}.material")
    return material if name == "part.material" else material_family(material)


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
    if cut.cutter is not None:
        return floor.loaded.job.cutters[cut.cutter].kind
    _, machine = machine_of(floor.loaded, setup)
    turns_a_cutter = machine is not None and machine.kind in ("dividing-head", "rotary-table", "mill", "jig-borer")
    return UnknownFact(f"setups.{setup.op}.cut.{scope.node.name}.cutter") if turns_a_cutter else None
