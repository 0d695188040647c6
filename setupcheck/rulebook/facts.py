"""Facts of an instance against the conditions of a rule or caution: yes, no, or unknown."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Literal

from setupcheck.record import record
from setupcheck.rulebook.needs import Facts, S, Unknown
from setupcheck.rulebook.records import Condition

FACTS: Mapping[str, str] = {
    "job.has_teeth": "true when a part of the job has teeth",
    "job.has_mesh": "true when worm and wheel are stated as a mesh",
    "part.material": "material as the job names it",
    "part.material_family": "copper-alloy, steel, cast-iron, aluminium, other",
    "part.lead": "true when the material may hold 0.1 % lead or more, by the list of materials or by its name",
    "part.zinc": "true when it may hold 1 % zinc or more",
    "part.beryllium": "true when it may hold 0.1 % beryllium or more",
    "part.fume": "true when it may hold any of the three",
    "surface.kind": "cylinder, bore, taper, thread, face, centre, throat, teeth, holes, slot",
    "setup.kind": "cut or join",
    "setup.machine_kind": "lathe, dividing-head, rotary-table, mill, grinder, drill-press, jig-borer, press",
    "hold.by": "device of a hold entry: three-jaw, spigot, ...",
    "hold.datum_kind": "kind of surface the entry is set on",
    "setup.follows_heat": "true when the setup just before joined this part hot, 58 degC or more",
    "hold.jaws_stand_out": "true when the jaws reach beyond the body of their chuck",
    "head.tilted": "true when a head is set to an angle for the cut",
    "divide.by": "hole-circle, direct, vernier, readout, ...",
    "cut.kind": "kind of surface that is cut",
    "cut.state": "rough or finish",
    "cut.grinds": "true on a grinder or with a grinding wheel",
    "cutter.insert": "true when the cutter has an insert that is ground for the job",
    "cutter.kind": "single-point, hob, form-cutter, drill, reamer, ...",
    "join.by": "shrink, press, slide, taper, screw, bond",
    "join.joint": "degreased or oiled",
    "join.has_stop": "true when the hub goes up to a stop",
    "join.brittle": "true when hub or shaft is of grey iron or hardened steel",
    "join.may_trap": "true when the hub may trap, or the shaft has a bore, a thread or holes",
    "hub.brittle": "true when the hub is",
    "hub.porous": "true when the hub is sintered with pores, by its name or by what is stated of it",
    "hub.may_trap": "true when the hub's bore ends inside it, or it has threads or holes",
    "shaft.hollow": "true when the part that goes in has a bore, a thread or holes",
    "shaft.material_family": "family of the part that goes in",
    "heat.by": "oven, hot-plate, induction, oil-bath, flame",
    "heat.hot": "true when the hub is planned at 58 degC or more, the heat source's error counted",
    "heat.above_cap": "true when it may come above what its material stands",
    "heat.cold_by": "freezer, dry-ice, liquid-nitrogen",
    "heat.deep_cold": "true when the shaft is colder than -50 degC",
}
"""The closed list of facts that rules and cautions may ask for, with their values; looked up outward."""


@record
class Applies:
    """The answer, and for `unknown` the job paths that would settle it and the first doubt in words."""

    answer: Literal["yes", "no", "unknown"]
    missing: tuple[str, ...] = ()
    doubt: str = ""


_YES, _NO = Applies("yes"), Applies("no")


def applies(conditions: Sequence[Condition], facts: Facts[S], at: S) -> Applies:
    """AND over the conditions, OR over the values of each. One clear no decides, whatever else is unknown.

    A fact that this kind of thing does not have (None) is a no.
    """
    missing: list[str] = []
    doubt = ""
    for condition in conditions:
        fact = facts(at, condition.fact)
        if isinstance(fact, Unknown):
            if all(value in fact.never for value in condition.values):
                return _NO
            missing.append(fact.path)
            doubt = doubt or fact.doubt
        elif fact is None or not any(_same(fact, value) for value in condition.values):
            return _NO
    return Applies("unknown", tuple(dict.fromkeys(missing)), doubt) if missing else _YES


def _same(fact: str | float | bool, value: str | float | bool) -> bool:
    """Equal and of one sort: yes/no is never the number 1 or 0."""
    return isinstance(fact, bool) == isinstance(value, bool) and fact == value
