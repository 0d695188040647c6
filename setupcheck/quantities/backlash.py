"""Backlash of worm and wheel over one turn, at 20 degC, cold and warm: from insert, depth, thread and housing. mm, rad.

j = s2 - s_x + 2 (a - r1 - r2) tan(alpha) - growth tan(alpha) + temperature -+ 2 e tan(alpha),  circular, at r2.
"""

from __future__ import annotations

import math
from itertools import product

from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.setups import Join
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import OverATurn
from setupcheck.notation import NotationError, length
from setupcheck.physics.materials import Range
from setupcheck.quantities import pairing, strength
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.causes import Entry, length_error, size_error
from setupcheck.quantities.cutter_shape import insert_width, tilt_of
from setupcheck.quantities.drive import Drive, WheelCut, drive, wheel_cut
from setupcheck.quantities.joining import JointSizes, interference_least, interference_most, sizes
from setupcheck.quantities.relations import Built, pair, second_order
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import expansion_of, material_of
from setupcheck.record import record
from setupcheck.worm.geometry import normal_pressure_angle

ALONG = ("circular", "normal")
"""Ways a backlash is stated beside `at` a radius."""
REFERENCE = 20.0  # degC of all sizes, ISO 1


@record
class Span:
    """Least and largest of something that is not random but has a range [mm]."""

    low: float
    high: float

    def account(self, cause: Cause | None) -> Account:
        """Its middle, and half its range as a cause."""
        whole = Account().plus_constant((self.low + self.high) / 2.0)
        return whole if cause is None or self.high <= self.low else whole + Account.of(cause)


def backlash(floor: Floor, stack: Stack) -> Built | Open:
    """The figure of a required backlash, or what is missing for it.

    Source: rack rolling on the wheel's reference circle, derived here; thermal chain and growth as in their modules.
    """
    found = drive(floor)
    if found is None:
        return Open(("mesh.wheel",), "backlash is computed for a worm and its wheel")
    both = pair(floor, stack)
    made = wheel_cut(floor, found) if isinstance(found, Drive) else None
    if made is None and isinstance(found, Drive):
        return Open(because="backlash is computed for a wheel cut by a single point")
    opened = [x for x in (found, both, made) if isinstance(x, Open)]
    if opened or not isinstance(found, Drive) or isinstance(both, Open) or not isinstance(made, WheelCut):
        return _merged(opened)
    factor = _along(floor, stack, found)
    parts = [_gap(floor, made), _mesh(floor, found), _growth(floor, found), _temperature(floor, found)]
    opened = [x for x in parts if isinstance(x, Open)]
    if opened:
        return _merged(opened)
    total = Account()
    for part in parts:
        assert isinstance(part, Account)
        total += part
    g, r = both
    figure = OverATurn(total * factor, g.offset - r.axis_at(g.z), 2.0 * math.tan(found.pressure_angle) * factor)
    return Built(figure, second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z)))


def _merged(opened: list[Open]) -> Open:
    missing = tuple(dict.fromkeys(m for x in opened for m in x.missing))
    return Open(missing, "; ".join(dict.fromkeys(x.because for x in opened if x.because)))


def _along(floor: Floor, stack: Stack, found: Drive) -> float:
    """From the arc at the reference circle to what the requirement speaks of.

    Raises: JobError for a word that is none.  Source: j_n = j_t cos(alpha_n) cos(g), ISO 1122-2 quantities (from memory).
    """
    said = stack.require.along or "circular"
    if said == "circular":
        return 1.0
    if said == "normal":
        return math.cos(normal_pressure_angle(found.pressure_angle, found.lead_angle)) * math.cos(found.lead_angle)
    try:
        radius = length(said.removeprefix("at").strip(), units=floor.loaded.job.units)
    except NotationError:
        radius = 0.0
    if not said.startswith("at") or radius <= 0.0:
        raise floor.problem(
            f"require[{stack.index + 1}].along",
            f"'{said}' is no way to state a backlash",
            "Write circular, normal, or at and a radius, as in at 50 mm",
        )
    return radius / (found.wheel_diameter / 2.0)


def gap_of_insert(floor: Floor, cut: WheelCut, width: float) -> float:
    """Gap of the wheel at its rolling circle that an insert of this width cuts [mm], by halving the error of the width.

    Raises: OutOfRange for sizes that give no insert.  Source: worm.cutter.insert_widths turned round.
    """
    height = cut.cutter.width_at if cut.cutter.width_at is not None else cut.pitch_height
    tilt = tilt_of(floor, cut)
    gap = width
    for _ in range(40):
        miss = width - insert_width(cut, gap, height=height, tilt=tilt)
        gap += miss
        if abs(miss) < 1e-9:
            break
    return gap


def _gap(floor: Floor, cut: WheelCut) -> Account | Open:
    """Gap as the insert and the depth make it, with their errors: s2 + dW + 2 dd tan(alpha + s2/d2)."""
    given, path = cut.cutter.width, cut.path
    touched = cut.cut.depth_from
    missing = [f"{cut.cutter_path}.width"] if given is None else []
    if cut.cut.depth_error is None:
        missing.append(f"{path}.depth_error")
    if touched is None or (touched.uncertainty is None and touched.at_most is None):
        missing.append(f"{path}.depth_from.{'uncertainty' if touched and touched.measured else 'at_most'}")
    if missing or given is None or touched is None:
        return Open(tuple(missing))
    middle, of_width = size_error(given, Entry(f"insert of op {cut.op}: width", None, f"{cut.cutter_path}.width", ""))
    try:
        gap = gap_of_insert(floor, cut, middle)
    except OutOfRange as why:
        return Open(because=str(why))
    wall = 2.0 * math.tan(cut.drive.pressure_angle + gap / cut.drive.wheel_diameter)
    depth = length_error(cut.cut.depth_error, Entry(f"op {cut.op}, teeth: depth", cut.op, f"{path}.depth_error", ""))
    name, where = f"op {cut.op}, diameter of {touched.surface} where touched", f"{path}.depth_from"
    if touched.uncertainty is not None:
        surface = Cause(name, "gauss", cut.op, spread=touched.uncertainty / 2.0, mode="measured", paths=(where,))
    else:
        surface = Cause(name, "length", cut.op, high=touched.at_most or 0.0, paths=(f"{where}.at_most",))
    return (of_width + depth * wall - Account.of(surface) * (wall / 2.0)).plus_constant(gap)


def _mesh(floor: Floor, found: Drive) -> Account | Open:
    """- thread + 2 (a - r1 - r2) tan(alpha), with the errors of thread and centre distance."""
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    assert mesh is not None and worm is not None
    assert isinstance(mesh.centre_distance, Dimension) and isinstance(worm.thread_thickness, Dimension)
    a, of_distance = size_error(
        mesh.centre_distance, Entry("housing, centre distance", None, "mesh.centre_distance", "")
    )
    s, of_thread = size_error(
        worm.thread_thickness, Entry("worm, thickness of its thread", None, "worm.thread_thickness", "")
    )
    slope = 2.0 * math.tan(found.pressure_angle)
    apart = a - (found.reference_diameter + found.wheel_diameter) / 2.0
    return (of_distance * slope - of_thread).plus_constant(slope * apart - s)


def _growth(floor: Floor, found: Drive) -> Account | Open:
    """- growth of the tooth circle times tan(alpha), from every joint that teeth were cut before."""
    total = Account()
    slope = math.tan(found.pressure_angle)
    for setup in floor.loaded.job.setups:
        join = setup.join
        if join is None or floor.loaded.ref(join.outer).part != found.wheel.part or join.by not in pairing.FITTED:
            continue
        if not strength.teeth_before(floor, found.wheel.part, setup.op, surface=found.wheel.surface):
            continue
        grown = growth(floor, join, setup.op)
        if isinstance(grown, Open):
            return grown
        cause = Cause(
            f"op {setup.op}: growth of the hub",
            "length",
            setup.op,
            high=(grown.high - grown.low) / 2.0,
            mode="derived",
            paths=(f"setups.{setup.op}.join",),
        )
        total -= grown.account(cause) * slope
    return total


def growth(floor: Floor, join: Join, op: int) -> Span | Open:
    """Least and largest growth of the teeth on diameter [mm]. Source: quantities.strength."""
    limits = sizes(floor, join)
    if not isinstance(limits, JointSizes):
        return limits if limits is not None else Span(0.0, 0.0)
    joint, served = pairing.pair(floor, join, limits), pairing.service(join, op)
    lost = pairing.smoothing(floor, join, joint) if isinstance(joint, pairing.Pair) else None
    opened = [x for x in (joint, served, lost) if isinstance(x, Open)]
    if opened:
        return _merged(opened)
    if not isinstance(joint, pairing.Pair) or not isinstance(lost, float) or isinstance(served, Open):
        return Span(0.0, 0.0)
    try:
        most = strength.growth_most(joint, strength.grip_most(joint, interference_most(limits), served))
        least = strength.growth_least(joint, strength.grip_least(joint, interference_least(limits), lost, served))
    except OutOfRange as why:
        return Open(because=str(why))
    return Span(least or 0.0, most or 0.0)


def _temperature(floor: Floor, found: Drive) -> Account | Open:
    """2 tan(alpha) (a alpha_h - r2 alpha_w - r1 alpha_s) dT - s (alpha_s - alpha_w) dT over the service temperatures."""
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    assert mesh is not None and worm is not None
    served = mesh.serves_at
    if served is None:
        joins = [s.join for s in floor.loaded.job.setups if s.join is not None and s.join.serves_at is not None]
        served = joins[-1].serves_at if joins else None
    missing: tuple[str, ...] = () if served is not None else ("mesh.serves_at",)
    missing += () if mesh.housing is not None else ("mesh.housing",)
    missing += () if worm.material is not None else ("worm.material",)
    wheel = material_of(floor, found.wheel.part)
    if isinstance(wheel, Open):
        missing += wheel.missing
    if missing or served is None or mesh.housing is None or worm.material is None or isinstance(wheel, Open):
        return Open(missing, wheel.because if isinstance(wheel, Open) else "")
    house, screw = expansion_of(mesh.housing, "mesh.housing"), expansion_of(worm.material, "worm.material")
    opened = [x for x in (house, screw) if isinstance(x, Open)]
    if opened or isinstance(house, Open) or isinstance(screw, Open):
        return _merged(opened)
    moved = [
        thermal_backlash(found, rise=t - REFERENCE, housing=h, wheel=w, worm=s)
        for t in (*served, REFERENCE)
        for h, w, s in product(_ends(house), _ends(wheel.heating), _ends(screw))
    ]
    span = Span(min(moved), max(moved))
    path = "mesh.serves_at" if mesh.serves_at is not None else "mesh"
    cause = Cause(
        "drive, its temperature in service", "length", high=(span.high - span.low) / 2.0, mode="derived", paths=(path,)
    )
    return span.account(cause)


def _ends(found: Range) -> tuple[float, float]:
    return found.low, found.high


def thermal_backlash(found: Drive, *, rise: float, housing: float, wheel: float, worm: float) -> float:
    """What a rise of the whole drive's temperature adds to the backlash [mm]; expansions in 1/K.

    2 tan(alpha) (a alpha_h - r2 alpha_w - r1 alpha_s) dT - s (alpha_s - alpha_w) dT.  Source: linear expansion, derived here.
    """
    apart = found.centre_distance * housing - found.wheel_diameter / 2.0 * wheel - found.pitch_diameter / 2.0 * worm
    return rise * (2.0 * math.tan(found.pressure_angle) * apart - found.thread * (worm - wheel))
