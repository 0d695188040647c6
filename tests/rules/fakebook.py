"""A small book for the rule engine: things, numbers and facts handed in by a test. Base units inside, as in the real one."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from setupcheck.notation import amount
from setupcheck.rulebook import Fact


@dataclass(frozen=True)
class FakeScope:
    kind: str
    key: str = ""
    path: str = ""
    op: int | None = None
    line: int = 0


@dataclass(frozen=True)
class Has:
    """A value that is there, and the typical values it rests on."""

    value: object
    rests_on: frozenset[str] = frozenset()


@dataclass(frozen=True)
class Lacks:
    """A value that is not there."""

    missing: tuple[str, ...] = ()
    because: str = ""


@dataclass(frozen=True)
class FakeQuantity:
    name: str
    per: str
    unit: str
    digits: int


@dataclass(frozen=True)
class FakeBook:
    """`values`: name -> value for every instance, or (name, key) -> value for one. Absent means the job lacks it."""

    quantities: Mapping[str, FakeQuantity]
    scopes: Sequence[FakeScope]
    values: Mapping[str | tuple[str, str], Has | Lacks]
    units: Mapping[str, tuple[str, int]] = field(default_factory=dict)

    def instances(self, kind: str) -> list[FakeScope]:
        return [scope for scope in self.scopes if scope.kind == kind]

    def get(self, name: str, at: FakeScope) -> Has | Lacks | None:
        return self.values.get((name, at.key), self.values.get(name))

    def unit(self, name: str, at: FakeScope) -> str:
        unit = self.quantities[name].unit
        return self.units[at.key][0] if unit == "stack" else unit

    def digits(self, name: str, at: FakeScope) -> int:
        quantity = self.quantities[name]
        return self.units[at.key][1] if quantity.unit == "stack" else quantity.digits


def facts_from(given: Mapping[str, Fact]):  # type: ignore[no-untyped-def]
    """The same facts for every instance; what is not given, no instance has."""

    def facts(at: FakeScope, name: str) -> Fact:
        return given.get(name)

    return facts


def value_of(text: object, unit: str) -> Has | Lacks:
    """A value of a case: `28 um`, `measured`, `{fill: path}`, `{because: reason}`."""
    if isinstance(text, Mapping):
        if "because" in text:
            return Lacks((), text["because"])
        return Lacks(tuple([text["fill"]] if isinstance(text["fill"], str) else text["fill"]))
    if unit == "":
        assert isinstance(text, str)
        return Has(text)
    return Has(amount(text).value)  # type: ignore[arg-type]


QUANTITIES: Mapping[str, FakeQuantity] = {
    q.name: q
    for q in (
        FakeQuantity("job.requirements", "job", "1", 0),
        FakeQuantity("stack.worst", "stack", "stack", 1),
        FakeQuantity("stack.limit", "stack", "stack", 1),
        FakeQuantity("stack.lowest", "stack", "stack", 1),
        FakeQuantity("stack.floor", "stack", "stack", 1),
        FakeQuantity("stack.chance", "stack", "%", 1),
        FakeQuantity("stack.confidence", "stack", "%", 1),
        FakeQuantity("stack.second_order", "stack", "%", 2),
        FakeQuantity("datum.state", "hold", "", 0),
        FakeQuantity("datum.laid_on", "hold", "", 0),
        FakeQuantity("hold.tilt_datums", "setup", "1", 0),
        FakeQuantity("hold.error_stated", "hold", "", 0),
        FakeQuantity("hold.error_kind", "hold", "", 0),
        FakeQuantity("hold.direction_known", "hold", "", 0),
        FakeQuantity("hold.within_plan", "hold", "um", 1),
        FakeQuantity("hold.planned", "hold", "um", 1),
        FakeQuantity("hold.measured_u", "hold", "um", 2),
        FakeQuantity("hold.clearance_share", "hold", "%", 0),
        FakeQuantity("hold.beyond_at_an_end", "hold", "%", 1),
        FakeQuantity("truing.need", "hold", "um", 1),
        FakeQuantity("truing.room", "hold", "um", 1),
        FakeQuantity("hold.reach", "cut", "1", 2),
        FakeQuantity("hold.overhang", "hold", "1", 1),
        FakeQuantity("machine.error_stated", "setup", "", 0),
        FakeQuantity("machine.error_kind", "setup", "", 0),
        FakeQuantity("hold.as_planned", "hold", "um", 1),
        FakeQuantity("hold.best_usual", "hold", "um", 1),
        FakeQuantity("hold.usual_advice", "hold", "", 0),
        FakeQuantity("hold.size_off", "hold", "%", 0),
        FakeQuantity("hold.size_advice", "hold", "", 0),
        FakeQuantity("clamp.jaws_out", "hold", "mm", 1),
        FakeQuantity("turn.speed", "setup", "rpm", 0),
        FakeQuantity("turn.chuck_speed", "setup", "rpm", 0),
        FakeQuantity("turn.throw", "setup", "N", 1),
        FakeQuantity("turn.throw_allowed", "setup", "N", 1),
        FakeQuantity("turn.throw_advice", "setup", "", 0),
        FakeQuantity("turn.bar_behind", "setup", "mm", 0),
        FakeQuantity("hold.lean_read", "setup", "", 0),
        FakeQuantity("hold.lean_advice", "setup", "", 0),
        FakeQuantity("hold.typical_advice", "hold", "", 0),
        FakeQuantity("hold.reading_u", "hold", "um", 2),
        FakeQuantity("hold.tenth_division", "hold", "um", 2),
        FakeQuantity("hold.taken_anew", "setup", "", 0),
        FakeQuantity("hold.keep_advice", "setup", "", 0),
        FakeQuantity("machine.as_planned", "setup", "um", 1),
        FakeQuantity("machine.best_usual", "setup", "um", 1),
        FakeQuantity("machine.usual_advice", "setup", "", 0),
        FakeQuantity("allow.least_stock", "cut", "mm", 3),
        FakeQuantity("allow.finishing_cut", "cut", "mm", 3),
        FakeQuantity("divide.left_over", "setup", "1", 3),
        FakeQuantity("divide.folded_harmonic", "setup", "1", 0),
        FakeQuantity("divide.step_error", "setup", "arcsec", 2),
        FakeQuantity("divide.setting_error", "setup", "arcsec", 2),
        FakeQuantity("divide.error_stated", "setup", "", 0),
        FakeQuantity("divide.error_kind", "setup", "", 0),
        FakeQuantity("divide.left_out", "setup", "", 0),
        FakeQuantity("divide.table_range", "setup", "arcsec", 1),
        FakeQuantity("divide.table_limit", "setup", "arcsec", 1),
        FakeQuantity("divide.table_open", "setup", "arcsec", 2),
        FakeQuantity("divide.table_shared", "setup", "1", 0),
        FakeQuantity("divide.circle_there", "setup", "", 0),
        FakeQuantity("divide.off_position", "setup", "1", 3),
        FakeQuantity("divide.face_errors", "setup", "", 0),
        FakeQuantity("divide.parallax", "setup", "arcsec", 2),
        FakeQuantity("divide.single_error", "setup", "arcsec", 2),
        FakeQuantity("divide.standard_lean", "setup", "arcsec", 2),
        FakeQuantity("divide.plumb_wave", "setup", "arcsec", 2),
        FakeQuantity("divide.drift_wave", "setup", "arcsec", 2),
        FakeQuantity("divide.count_advice", "setup", "", 0),
        FakeQuantity("divide.parallax_advice", "setup", "", 0),
        FakeQuantity("divide.lean_advice", "setup", "", 0),
        FakeQuantity("divide.plumb_advice", "setup", "", 0),
        FakeQuantity("divide.drift_advice", "setup", "", 0),
        FakeQuantity("tilt.error", "setup", "arcmin", 1),
        FakeQuantity("tilt.cone_error", "setup", "arcmin", 1),
        FakeQuantity("tilt.cone_advice", "setup", "", 0),
        FakeQuantity("cutter.passes_left", "cut", "um", 1),
        FakeQuantity("cutter.last_pass", "cut", "mm", 3),
        FakeQuantity("fit.kind", "join", "", 0),
        FakeQuantity("heat.planned_low", "join", "degC", 0),
        FakeQuantity("heat.planned_high", "join", "degC", 0),
        FakeQuantity("heat.needed", "join", "degC", 0),
        FakeQuantity("heat.cap", "join", "degC", 0),
        FakeQuantity("heat.error_kind", "join", "", 0),
        FakeQuantity("tilt.uncertainty_kind", "setup", "", 0),
        FakeQuantity("heat.advice", "join", "", 0),
        FakeQuantity("tilt.advice", "setup", "", 0),
        FakeQuantity("tilt.picture", "setup", "", 0),
        FakeQuantity("cutter.advice", "cut", "", 0),
        FakeQuantity("fit.advice_grip", "join", "", 0),
        FakeQuantity("fit.advice_slack", "join", "", 0),
        FakeQuantity("cutter.advice_depth", "cut", "", 0),
        FakeQuantity("insert.wheel_radius", "cut", "mm", 2),
        FakeQuantity("insert.largest_wheel", "cut", "mm", 2),
        FakeQuantity("insert.change_at_pitch", "cut", "um", 1),
        FakeQuantity("insert.width_tolerance", "cut", "um", 1),
        FakeQuantity("insert.lean", "cut", "arcmin", 1),
        FakeQuantity("insert.rounding", "cut", "um", 2),
        FakeQuantity("cutter.hob_diameter", "cut", "mm", 3),
        FakeQuantity("cutter.hob_least", "cut", "mm", 3),
        FakeQuantity("cutter.hob_oversize", "cut", "%", 1),
        FakeQuantity("cutter.hob_advice", "cut", "", 0),
        FakeQuantity("insert.form_error", "cut", "um", 1),
        FakeQuantity("insert.shown", "cut", "um", 1),
        FakeQuantity("insert.shown_advice", "cut", "", 0),
        FakeQuantity("insert.taper", "cut", "um", 1),
        FakeQuantity("insert.off_worst", "cut", "um", 1),
        FakeQuantity("insert.off_limit", "cut", "um", 1),
        FakeQuantity("mesh.advice", "mesh", "", 0),
        FakeQuantity("mark.move", "mesh", "", 0),
        FakeQuantity("divide.advice", "setup", "", 0),
        FakeQuantity("divide.other_ways", "setup", "", 0),
        FakeQuantity("divide.fold_advice", "setup", "", 0),
        FakeQuantity("place.shim", "place", "", 0),
        FakeQuantity("fit.load_stated", "join", "", 0),
        FakeQuantity("fit.errors_stated", "join", "", 0),
        FakeQuantity("tilt.cone_lean", "setup", "", 0),
        FakeQuantity("tilt.cone_lean_advice", "setup", "", 0),
        FakeQuantity("fit.odd_properties", "part", "", 0),
        FakeQuantity("fit.elastic_kind", "join", "", 0),
        FakeQuantity("fit.press_force", "join", "kN", 1),
        FakeQuantity("fit.press_allowed", "join", "kN", 1),
        FakeQuantity("mesh.least_backlash", "stack", "mm", 4),
        FakeQuantity("contact.ends", "cut", "%", 2),
        FakeQuantity("contact.error", "cut", "um", 1),
        FakeQuantity("contact.budget", "cut", "um", 1),
        FakeQuantity("contact.planned_radius", "cut", "mm", 2),
        FakeQuantity("contact.radius", "cut", "mm", 2),
        FakeQuantity("contact.depth_error", "cut", "um", 0),
        FakeQuantity("contact.depth", "cut", "um", 0),
        FakeQuantity("contact.tilt_error", "cut", "arcmin", 1),
        FakeQuantity("contact.tilt", "cut", "arcmin", 1),
        FakeQuantity("contact.turned_error", "cut", "arcmin", 1),
        FakeQuantity("contact.turned", "cut", "arcmin", 1),
        FakeQuantity("contact.mid_plane_error", "cut", "um", 0),
        FakeQuantity("contact.mid_plane", "cut", "um", 0),
        FakeQuantity("contact.advice_ends", "cut", "", 0),
        FakeQuantity("contact.advice_error", "cut", "", 0),
        FakeQuantity("contact.advice_radius", "cut", "", 0),
        FakeQuantity("contact.advice_depth", "cut", "", 0),
        FakeQuantity("contact.advice_tilt", "cut", "", 0),
        FakeQuantity("contact.advice_turned", "cut", "", 0),
        FakeQuantity("contact.advice_mid_plane", "cut", "", 0),
        FakeQuantity("cutter.width", "cut", "mm", 4),
        FakeQuantity("cutter.width_needed", "cut", "mm", 4),
        FakeQuantity("fit.force_held", "join", "kN", 2),
        FakeQuantity("fit.force_asked", "join", "kN", 2),
        FakeQuantity("fit.grip_most", "join", "um", 1),
        FakeQuantity("fit.elastic", "join", "um", 1),
        FakeQuantity("fit.growth_uncounted", "join", "um", 1),
        FakeQuantity("fit.length_ratio", "join", "1", 2),
        FakeQuantity("fit.share_moved", "join", "%", 0),
        FakeQuantity("fit.advice_moved", "join", "", 0),
        FakeQuantity("fit.galls", "join", "", 0),
        FakeQuantity("fit.lead_in", "join", "mm", 1),
        FakeQuantity("fit.pairs_fit", "join", "", 0),
        FakeQuantity("fit.pairs_told", "join", "", 0),
        FakeQuantity("heat.at_shaft", "join", "degC", 0),
        FakeQuantity("heat.spare", "join", "K", 0),
        FakeQuantity("heat.window", "join", "s", 0),
        FakeQuantity("heat.carry", "join", "s", 0),
        FakeQuantity("heat.carry_allowed", "join", "s", 0),
        FakeQuantity("heat.carry_advice", "join", "", 0),
        FakeQuantity("heat.gauge", "join", "mm", 3),
        FakeQuantity("heat.go_gauge", "join", "mm", 3),
        FakeQuantity("fit.keyways", "join", "", 0),
        FakeQuantity("heat.gap_uncounted", "join", "um", 1),
        FakeQuantity("heat.gap_advice", "join", "", 0),
        FakeQuantity("heat.gauge_enters", "join", "mm", 3),
        FakeQuantity("heat.gauge_advice", "join", "", 0),
        FakeQuantity("heat.proved", "join", "", 0),
        FakeQuantity("heat.flame", "join", "", 0),
        FakeQuantity("heat.flame_evens", "join", "", 0),
        FakeQuantity("heat.shaft", "join", "degC", 0),
        FakeQuantity("heat.room", "join", "degC", 0),
        FakeQuantity("heat.flash_margin", "join", "K", 0),
        FakeQuantity("heat.flash_advice", "join", "", 0),
        FakeQuantity("heat.out_of_oil", "join", "", 0),
        FakeQuantity("heat.oxygen", "join", "%", 1),
        FakeQuantity("heat.carbon_dioxide", "join", "%", 2),
        FakeQuantity("heat.carbon_dioxide_long", "join", "%", 2),
        FakeQuantity("heat.cold_error_kind", "join", "", 0),
        FakeQuantity("heat.gas_advice", "join", "", 0),
        FakeQuantity("heat.beside", "join", "degC", 0),
        FakeQuantity("heat.beside_stands", "join", "degC", 0),
        FakeQuantity("heat.beside_advice", "join", "", 0),
        FakeQuantity("cutter.radius", "cut", "mm", 2),
        FakeQuantity("cutter.smallest_radius", "cut", "mm", 2),
        FakeQuantity("cutter.ridge_reach", "cut", "mm", 2),
        FakeQuantity("cutter.half_face", "cut", "mm", 2),
        FakeQuantity("cutter.clearance", "cut", "mm", 3),
        FakeQuantity("cutter.module", "cut", "mm", 3),
        FakeQuantity("cutter.early_touch", "cut", "um", 0),
        FakeQuantity("cutter.tool_change", "cut", "", 0),
        FakeQuantity("cutter.overhang", "cut", "1", 1),
        FakeQuantity("cutter.insert_gap", "cut", "um", 1),
        FakeQuantity("mesh.teeth", "mesh", "1", 0),
        FakeQuantity("mesh.fewest_teeth", "mesh", "1", 0),
        FakeQuantity("mesh.circle_advice", "mesh", "", 0),
        FakeQuantity("mesh.width_share", "mesh", "1", 2),
        FakeQuantity("mesh.width_advice", "mesh", "", 0),
        FakeQuantity("worm.thickness_share", "worm", "1", 2),
        FakeQuantity("worm.share_advice", "worm", "", 0),
        FakeQuantity("worm.agree", "worm", "", 0),
        FakeQuantity("worm.advice", "worm", "", 0),
        FakeQuantity("mesh.circle_miss", "mesh", "um", 1),
        FakeQuantity("mesh.distance_miss", "mesh", "um", 1),
        FakeQuantity("mesh.measured_miss", "mesh", "um", 0),
        FakeQuantity("mesh.measured_allowed", "mesh", "um", 0),
        FakeQuantity("mesh.measured_advice", "mesh", "", 0),
        FakeQuantity("mesh.end_float", "mesh", "um", 1),
        FakeQuantity("mesh.eccentric_at", "mesh", "deg", 1),
        FakeQuantity("mesh.eccentric_left_share", "mesh", "%", 0),
        FakeQuantity("mesh.eccentric_advice", "mesh", "", 0),
        FakeQuantity("mesh.film", "mesh", "um", 1),
        FakeQuantity("mesh.film_advice", "mesh", "", 0),
        FakeQuantity("read.places", "mesh", "1", 0),
        FakeQuantity("read.usual_places", "mesh", "1", 0),
        FakeQuantity("read.miss", "mesh", "um", 1),
        FakeQuantity("read.allowed", "mesh", "um", 1),
        FakeQuantity("read.advice", "mesh", "", 0),
        FakeQuantity("read.swing", "mesh", "um", 1),
        FakeQuantity("read.swing_allowed", "mesh", "um", 1),
        FakeQuantity("read.swing_advice", "mesh", "", 0),
        FakeQuantity("read.off_wave", "mesh", "um", 1),
        FakeQuantity("read.uncertainty", "mesh", "um", 1),
        FakeQuantity("read.off_wave_advice", "mesh", "", 0),
        FakeQuantity("read.end_float", "mesh", "um", 1),
        FakeQuantity("read.smallest", "mesh", "um", 1),
        FakeQuantity("mesh.backlash_asked", "mesh", "", 0),
        FakeQuantity("mark.cause", "mesh", "", 0),
        FakeQuantity("tilt.ridge_shift", "cut", "mm", 2),
        FakeQuantity("tilt.profile_error", "cut", "um", 1),
        FakeQuantity("tilt.middle_found", "setup", "", 0),
        FakeQuantity("tilt.bar_miss", "setup", "arcmin", 2),
        FakeQuantity("tilt.allowed", "setup", "arcmin", 1),
        FakeQuantity("tilt.belongs_to", "setup", "", 0),
        FakeQuantity("tilt.lean", "setup", "", 0),
        FakeQuantity("place.nominal_gap", "place", "um", 1),
        FakeQuantity("clamp.grip", "hold", "mm", 1),
        FakeQuantity("clamp.grip_wanted", "hold", "mm", 1),
        FakeQuantity("clamp.overhang", "cut", "1", 2),
        FakeQuantity("clamp.wall_share", "hold", "%", 1),
        FakeQuantity("clamp.lobing", "hold", "um", 1),
        FakeQuantity("clamp.lobing_allowed", "hold", "um", 1),
        FakeQuantity("measure.uncertainty_stated", "reading", "", 0),
        FakeQuantity("measure.share", "reading", "%", 0),
        FakeQuantity("measure.tolerance", "reading", "um", 1),
        FakeQuantity("measure.warm_by", "reading", "um", 1),
        FakeQuantity("measure.shims", "hold", "", 0),
        FakeQuantity("measure.thread", "setup", "", 0),
        FakeQuantity("measure.end_float", "stack", "", 0),
        FakeQuantity("measure.planned", "hold", "um", 1),
        FakeQuantity("measure.half_division", "hold", "um", 1),
        FakeQuantity("entry.stand_in", "entry", "", 0),
        FakeQuantity("entry.not_made", "part", "", 0),
        FakeQuantity("prove.enough", "cut", "", 0),
        FakeQuantity("prove.most", "cut", "um", 1),
        FakeQuantity("prove.allowed", "cut", "um", 1),
        FakeQuantity("prove.misfit", "cut", "um", 1),
        FakeQuantity("prove.reading_uncertainty", "cut", "um", 1),
        FakeQuantity("prove.shift", "cut", "um", 1),
        FakeQuantity("prove.stock", "cut", "um", 0),
        FakeQuantity("prove.move", "cut", "", 0),
        FakeQuantity("opposite.saves", "join", "um", 1),
        FakeQuantity("opposite.says", "join", "", 0),
    )
}
"""The quantities that the shipped rules name, written down once more so that a change on one side is noticed."""
