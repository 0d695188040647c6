"""Backlash of worm and wheel over one turn, at 20 degC, cold and warm: from insert, depth, thread and housing. mm, rad.

One gap with the thread in its middle, circular, at r2:
    j = s2 - s_x + 2 (a - r1 - r2 + depth) tan(alpha) - growth (tan(alpha) - s_x/d2) + temperature -+ 2 (e + r_j) tan(alpha)
of a wheel measured over balls s2 is the gap as measured, which holds depth and growth already (`gap_finished`),
and over the whole mesh less what flanks lose that no longer fit each other (`_misfit`). The same numbers come out of a rack
in gaps, point by point, in tests/unit/worm.
"""

from __future__ import annotations

import math
from itertools import product

from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import OverATurn
from setupcheck.ledger.route import State
from setupcheck.physics.materials import Range, means_at
from setupcheck.quantities import backlash_read, growing, pairing, strength, within
from setupcheck.quantities.backlash_read import AsRead
from setupcheck.quantities.book import Open, OutOfRange, all_missing, in_range
from setupcheck.quantities.causes import Entry, length_error, size_error
from setupcheck.quantities.cutter_shape import insert_width, tilt_of
from setupcheck.quantities.drive import Drive, WheelCut, drive, wheel_cut
from setupcheck.quantities.gap_measured import measured_gap
from setupcheck.quantities.joining import JointSizes, interference_least, interference_most, sizes
from setupcheck.quantities.relations import Built, beside_its_axis, pair, second_order
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_named, material_of
from setupcheck.quantities.thread import Thread, thread
from setupcheck.record import record

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


@record(eq=False)
class Chain:
    """What makes the backlash at 20 degC, one gap with the thread in its middle, before flanks that do not fit take of it.

    open    gap less thread, and what the axes stand apart [mm];  depth  how much deeper than planned it is cut [mm]
    strain  of the wheel's pitch by the growth of its hub;  offset  of the ring of gaps [mm];  teeth, axis  as they are at last
    """

    found: Drive
    cut: WheelCut
    open: Account
    depth: Account
    strain: Account
    teeth: State
    axis: State

    @property
    def offset(self) -> Account:
        """How far the ring of gaps runs off the axis it works about [mm]."""
        return self.teeth.offset - self.axis.axis_at(self.teeth.z)

    @property
    def cold(self) -> Account:
        """Mean backlash at 20 degC along the reference circle [mm]."""
        return self.open - _misfit(self.cut, self.depth, self.strain)


def backlash(floor: Floor, stack: Stack) -> Built | Open:
    """The figure of a required backlash, or what is missing for it; as it was read, where it was.

    Source: rack rolling on the wheel's reference circle, derived here; thermal chain and growth as in their modules.
    """
    read = backlash_read.ruling(floor, stack)
    if read is not None:
        return _of_the_readings(floor, stack, read)
    found = drive(floor)
    served = _served(floor, found) if isinstance(found, Drive) else None
    made = chain(floor, stack)
    if isinstance(made, Open) and not made.missing:  # of another kind of wheel, whatever its temperature
        return made
    if isinstance(made, Open) or not isinstance(served, Served):
        return all_missing(made, served)
    factor = along_of(floor, stack, made.found)
    total = made.open + served.moved - _misfit(made.cut, made.depth, made.strain + served.strain)
    slope = 2.0 * math.tan(made.found.pressure_angle)
    figure = OverATurn(total * factor, made.offset, slope * factor, made.teeth.pattern)
    g, r = made.teeth, made.axis
    return Built(figure, second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z)))


def chain(floor: Floor, stack: Stack) -> Chain | Open:
    """Every part of the backlash that the plan makes, or what is missing. Source: as `backlash`.

    Raises: OutOfRange for a ring of gaps too far off its axis.
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
        return all_missing(*opened)
    g, r = both
    gap, depth, mesh = gap_finished(floor, made, g), deeper(floor, made, g), _mesh(floor, found)
    grown = _growth(floor, found)
    opened = [x for x in (gap, depth, mesh, grown) if isinstance(x, Open)]
    if opened:
        return all_missing(*opened)
    assert isinstance(gap, Account) and isinstance(depth, Account) and isinstance(mesh, Account)
    assert isinstance(grown, Account)
    beside_its_axis(g.offset - r.axis_at(g.z), found.wheel_diameter / 2.0)
    return Chain(found, made, gap + mesh, depth, grown * (1.0 / found.wheel_diameter), g, r)


def _of_the_readings(floor: Floor, stack: Stack, read: AsRead | Open) -> Built | Open:
    """The figure as read in the room: its least and largest, and what the temperatures of service change of it.

    The pitch that the temperature strains may fit better or worse than it did: up to 2 w |strain| either way.
    Source: the readings; `_served`, `_misfit`.
    """
    found = drive(floor)
    if not isinstance(found, Drive):
        return all_missing(found)
    served = _served(floor, found, room=floor.loaded.job.room)
    if isinstance(read, Open) or isinstance(served, Open):
        return all_missing(read, served)
    middle, swing = backlash_read.over_a_turn(read)
    cut, name = wheel_cut(floor, found), "mesh, pitch of the wheel in service"
    root = cut.root + (cut.cut.depth or 0.0) if isinstance(cut, WheelCut) else found.wheel_diameter / 2.0 + found.module
    strained = 2.0 * _farthest(found, root) * served.strain.largest()
    fits = Cause(name, "length", high=strained, mode="derived", paths=("mesh",))
    factor = along_of(floor, stack, found)
    total = middle + served.moved + (Account.of(fits) if strained > 0.0 else Account())
    return Built(OverATurn(total * factor, swing, read.slope * factor), 0.0)


def along_of(floor: Floor, stack: Stack, found: Drive) -> float:
    """From the arc at the reference circle to what the requirement speaks of. Source: quantities.backlash_read."""
    return backlash_read.factor_of(floor, stack.require.along or "circular", found, f"require[{stack.index + 1}].along")


def gap_of_insert(floor: Floor, cut: WheelCut, width: float) -> float:
    """Gap of the wheel at its rolling circle that an insert of this width cuts at its planned depth under the touched surface
    as drawn [mm], by halving the error of the width.

    Raises: OutOfRange for sizes that give no insert.  Source: worm.insert.insert_widths turned round.
    """
    cut = cut.as_drawn()
    height = cut.width_height
    tilt = tilt_of(floor, cut)
    gap = width
    for _ in range(40):
        miss = width - insert_width(cut, gap, height=height, tilt=tilt)
        gap += miss
        if abs(miss) < 1e-9:
            break
    return gap


def gap_finished(floor: Floor, cut: WheelCut, teeth: State) -> Account | Open:
    """Gap of the finished wheel: as measured over balls, else as it is made. Source: the job file, worm.over_balls.

    The size measured holds what insert, depth and growth do to the gap, but not what they do to the flanks' form (`_misfit`).
    """
    known = measured_gap(floor, cut.drive, cut)
    if known is None:
        return gap_as_made(floor, cut, teeth)
    return known if isinstance(known, Open) else known.account(teeth.pattern, 2.0 * math.tan(cut.drive.pressure_angle))


def gap_as_made(floor: Floor, cut: WheelCut, teeth: State) -> Account | Open:
    """Gap at the reference circle that insert, depth and growth make: s2 + 2 d tan(alpha) - growth (tan(alpha) - s/d2) [mm].

    Source: rack rolling on the wheel's reference circle, derived here.
    """
    found = cut.drive
    gap, depth, grown = _gap(floor, cut), deeper(floor, cut, teeth), _growth(floor, found)
    opened = [x for x in (gap, depth, grown) if isinstance(x, Open)]
    if opened:
        return all_missing(*opened)
    assert isinstance(gap, Account) and isinstance(depth, Account) and isinstance(grown, Account)
    slope = 2.0 * math.tan(found.pressure_angle)
    return gap + depth * slope - grown * (slope / 2.0 - found.thread / found.wheel_diameter)


def _gap(floor: Floor, cut: WheelCut) -> Account | Open:
    """Gap that the insert makes at its planned depth, with the error of its width: s2 + dW."""
    given = cut.cutter.width
    if given is None:
        return Open((f"{cut.cutter_path}.width",))
    middle, of_width = size_error(given, Entry(f"op {cut.op}, insert: width", cut.op, f"{cut.cutter_path}.width", ""))
    try:
        return of_width.plus_constant(gap_of_insert(floor, cut, middle))
    except OutOfRange as why:
        return Open(because=str(why))


def deeper(floor: Floor, cut: WheelCut, teeth: State) -> Account | Open:
    """The same from the depth under the touched surface as drawn: half of what it was measured smaller comes to it [mm].

    Source: geometry, derived here.
    """
    account = depth_of_cut(floor, cut, teeth)
    return account if isinstance(account, Open) else account.plus_constant(cut.drawn_root - cut.root)


def depth_of_cut(floor: Floor, cut: WheelCut, teeth: State) -> Account | Open:
    """How much deeper than fed from the touched surface the insert goes, on the radius [mm]: feed, what the size touched may
    still be off, and where round it was touched.

    The touched surface runs out to the axis that the wheel turns about while it is cut, and it is touched at one place.
    Source: geometry, derived here.
    """
    touched, path = cut.cut.depth_from, cut.path
    missing = [f"{path}.depth_error"] if cut.cut.depth_error is None else []
    if touched is None or (touched.uncertainty is None and touched.at_most is None):
        missing.append(f"{path}.depth_from.{'uncertainty' if touched and touched.measured else 'at_most'}")
    if missing or touched is None:
        return Open(tuple(missing))
    surface = _surface_touched(floor, cut, touched.surface)
    if surface is None:
        return Open((f"{path}.depth_from.surface",), f"{touched.surface} is never made before op {cut.op}")
    fed = length_error(cut.cut.depth_error, Entry(f"op {cut.op}, teeth: depth", cut.op, f"{path}.depth_error", ""))
    name, where = f"op {cut.op}, diameter of {touched.surface} where touched", f"{path}.depth_from"
    if touched.uncertainty is not None:
        size = Cause(name, "gauss", cut.op, spread=touched.uncertainty / 2.0, mode="measured", paths=(where,))
    else:
        size = Cause(name, "length", cut.op, high=touched.at_most or 0.0, paths=(f"{where}.at_most",))
    place = Cause(f"op {cut.op}: where round the {touched.surface} it was touched", "ring", cut.op, high=1.0)
    out = (surface.axis_at(teeth.z) - teeth.offset).turned_by_an_unknown_angle(place).along(1)
    return fed - Account.of(size) * 0.5 - out


def _surface_touched(floor: Floor, cut: WheelCut, name: str) -> State | None:
    """The touched surface as it was when the gaps were cut."""
    ref = floor.loaded.ref(name, cut.drive.wheel.part)
    made = [
        setup.op
        for setup in floor.loaded.job.setups
        if setup.op <= cut.op
        for key in setup.cut
        if (mine := floor.loaded.ref(key, setup.part)) and (mine.part, mine.surface) == (ref.part, ref.surface)
    ]
    return floor.now(Ref(ref.part, ref.surface, made[-1]) if made else ref)


def _misfit(cut: WheelCut, depth: Account, strain: Account) -> Account:
    """What the flanks lose over the mesh because they no longer fit each other [mm], never below zero.

    A gap cut off its depth by d leans its flanks wrongly as it turns by w/r2 off the middle, a wheel of another pitch is
    off by strain w there; both flanks of the mesh together lose up to 2 w (|d|/r2 + |strain|), w where a flank is touched
    farthest from the middle.  Source: derived here; the rack in its gaps agrees in tests/unit/worm.
    """
    d = cut.drive
    wheel, away = d.wheel_diameter / 2.0, _farthest(d, cut.root + (cut.cut.depth or 0.0))
    total = Account()
    for words, of, share in (("depth", depth, 2.0 * away / wheel), ("pitch", strain, 2.0 * away)):
        if of.largest() > 0.0:
            name = f"mesh, flanks that no longer fit: {words}"
            total += Account.of(Cause(name, "high-point", None, of=of, mode="derived", paths=("mesh",))) * share
    return total


def _farthest(d: Drive, tip: float) -> float:
    """How far from the middle a gap is still touched, as arc at the rolling circle [mm]: by its tip, or by the worm's.

    tip  radius of the wheel's tips in the mid-plane [mm]

    tip of the wheel: (sqrt(ra2^2 - rb^2) - r2 sin(alpha))/cos(alpha) + s/2;  worm: h/(sin(alpha) cos(alpha)) - s/2, h what
    the worm reaches past the rolling circle.  Source: line of action of rack and involute (textbook).
    """
    wheel = d.wheel_diameter / 2.0
    sine, cosine = math.sin(d.pressure_angle), math.cos(d.pressure_angle)
    tip = max(tip, wheel)
    by_wheel = (math.sqrt(tip**2 - (wheel * cosine) ** 2) - wheel * sine) / cosine + d.thread / 2.0
    by_worm = (d.tip_diameter - d.pitch_diameter) / 2.0 / (sine * cosine) - d.thread / 2.0
    return max(by_wheel, by_worm)


def _mesh(floor: Floor, found: Drive) -> Account | Open:
    """- thread + 2 (a - r1 - r2) tan(alpha), with the errors of thread and centre distance."""
    mesh = floor.loaded.job.mesh
    assert mesh is not None
    if not isinstance(mesh.centre_distance, Dimension):  # settled by the other sizes, but with what limits?
        return Open(("mesh.centre_distance",))
    known = thread(floor)
    if not isinstance(known, Thread):
        return known if known is not None else Open(("worm",))
    a, of_distance = size_error(
        mesh.centre_distance, Entry("housing, centre distance", None, "mesh.centre_distance", "")
    )
    slope = 2.0 * math.tan(found.pressure_angle)
    apart = a - (found.reference_diameter + found.wheel_diameter) / 2.0
    return (of_distance * slope - known.error).plus_constant(slope * apart - known.middle)


def _growth(floor: Floor, found: Drive) -> Account | Open:
    """Growth of the tooth circle on diameter [mm], from every joint that teeth were cut before."""
    total = Account()
    for setup in floor.loaded.job.setups:
        join = setup.join
        if join is None or floor.loaded.ref(join.outer).part != found.wheel.part or join.by not in pairing.FITTED:
            continue
        if not growing.teeth_before(floor, found.wheel.part, setup.op, surface=found.wheel.surface):
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
        total += grown.account(cause)
    return total


def growth(floor: Floor, join: Join, op: int) -> Span | Open:
    """Least and largest growth of the teeth on diameter [mm]; open where a pair yields. Source: quantities.strength."""
    limits = sizes(floor, join)
    if not isinstance(limits, JointSizes):
        return limits if limits is not None else Span(0.0, 0.0)
    joint, served = pairing.pair(floor, join, limits), pairing.service(join, op)
    lost = pairing.smoothed(floor, join, joint) if isinstance(joint, pairing.Pair) else None
    opened = [x for x in (joint, served, lost) if isinstance(x, Open)]
    if opened:
        return all_missing(*opened)
    if not isinstance(joint, pairing.Pair) or not isinstance(lost, float) or served is None or isinstance(served, Open):
        return Span(0.0, 0.0)
    try:
        tight = strength.grip_most(joint, interference_most(limits), served)
        most = growing.growth_most(joint, within.tight(tight, None, within.limit(floor, joint)))
        least = growing.growth_least(joint, strength.grip_least(joint, interference_least(limits), lost, served))
    except OutOfRange as why:
        return Open(because=str(why))
    return Span(least or 0.0, most or 0.0)


@record
class Served:
    """What the temperatures of service do: to the backlash [mm], and to the wheel's pitch over the worm's (a strain)."""

    moved: Account
    strain: Account


def _served(floor: Floor, found: Drive, *, room: float = REFERENCE) -> Served | Open:
    """Change of the backlash and of the pitch over the service temperatures from what they are at `room`, it among them."""
    mesh = floor.loaded.job.mesh
    assert mesh is not None
    return warmed(floor, found, mesh.serves_at or _of_the_last_joint(floor), room=room)


def warmed(floor: Floor, found: Drive, served: tuple[float, ...] | None, *, room: float = REFERENCE) -> Served | Open:
    """Change of the backlash and of the pitch of a whole drive that goes from `room` through some temperatures [degC].

    Raises: OutOfRange for a temperature that no expansion is known for.  Source: linear expansion, `thermal_backlash`.
    """
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    assert mesh is not None and worm is not None
    missing: tuple[str, ...] = () if served is not None else ("mesh.serves_at",)
    missing += () if mesh.housing is not None else ("mesh.housing",)
    missing += () if worm.material is not None else ("worm.material",)
    wheel = material_of(floor, found.wheel.part)
    if isinstance(wheel, Open):
        missing += wheel.missing
    if missing or served is None or mesh.housing is None or worm.material is None or isinstance(wheel, Open):
        return Open(missing, wheel.because if isinstance(wheel, Open) else "")
    house, screw = material_named(mesh.housing, "mesh.housing"), material_named(worm.material, "worm.material")
    opened = [x for x in (house, screw) if isinstance(x, Open)]
    if opened or isinstance(house, Open) or isinstance(screw, Open):
        return all_missing(*opened)
    parts = (("housing", house), ("wheel", wheel), ("worm", screw))
    with in_range:
        means = {t: [means_at(of, what, t) for what, of in parts] for t in (*served, room)}
    each = [(t - room, h, w, s) for t, of in means.items() for h, w, s in product(*map(_ends, of))]
    moved = [thermal_backlash(found, rise=t, housing=h, wheel=w, worm=s) for t, h, w, s in each]
    strains = [t * (w - s) for t, _, w, s in each]
    path = "mesh.serves_at" if mesh.serves_at is not None else "mesh"
    name = "drive, its temperature in service"
    return Served(_spanned(moved, name, path), _spanned(strains, f"{name}: pitch", path))


def _of_the_last_joint(floor: Floor) -> tuple[float, float] | None:
    """Coldest and warmest that hub or shaft of the last joint get, where the drive itself says nothing [degC]."""
    joins = [s.join.serves_at for s in floor.loaded.job.setups if s.join is not None and s.join.serves_at is not None]
    each = [t for state in joins[-1] for t in (state.hub, state.shaft)] if joins else []
    return (min(each), max(each)) if each else None


def _spanned(values: list[float], name: str, path: str) -> Account:
    """Middle of some values, and half their range as a cause."""
    span = Span(min(values), max(values))
    half = (span.high - span.low) / 2.0
    return span.account(Cause(name, "length", high=half, mode="derived", paths=(path,)))


def _ends(found: Range) -> tuple[float, float]:
    return found.low, found.high


def thermal_backlash(found: Drive, *, rise: float, housing: float, wheel: float, worm: float) -> float:
    """What a rise of the whole drive's temperature adds to the backlash [mm]; expansions in 1/K.

    2 tan(alpha) (a alpha_h - r2 alpha_w - r1 alpha_s) dT - s (alpha_s - alpha_w) dT.  Source: linear expansion, derived here.
    """
    apart = found.centre_distance * housing - found.wheel_diameter / 2.0 * wheel - found.pitch_diameter / 2.0 * worm
    return rise * (2.0 * math.tan(found.pressure_angle) * apart - found.thread * (worm - wheel))
