"""Does the cutter suit the worm: radius, ridge of contact, depth, insert, bar, tool life. Lengths mm, angles rad."""

from __future__ import annotations

import math

from setupcheck.jobfile.models import Throat
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.drive import WheelCut, drive, wheel_cut
from setupcheck.quantities.joint_shape import rim_over
from setupcheck.quantities.scopes import CutEntry
from setupcheck.quantities.shop import Floor
from setupcheck.record import record
from setupcheck.worm import cutter as fly
from setupcheck.worm.depth import early_touch as touched_early
from setupcheck.worm.insert import insert_widening, insert_widths

USUAL_FILM = 0.006
"""Thickness of marking blue that a contact share is told for where no requirement says one [mm]. Common practice, 5 to 7 um."""


NEAR = 0.01
"""How far from pitch height a width still counts as that at pitch height [mm]. Source: our screening choice."""


@record
class Shape:
    """Second-order shape of the flank that the cutter leaves: crowning A and twist B [1/mm], ends of the face."""

    cut: WheelCut
    crowning: float
    twist: float


def here(floor: Floor, entry: CutEntry) -> WheelCut | Open | None:
    """The cut of the wheel, if it is this one; None for every other cut. Source: the job file."""
    found = drive(floor)
    if found is None:
        return None
    if isinstance(found, Open):
        return found if _is_the_wheel(floor, entry) else None
    made = wheel_cut(floor, found)
    if isinstance(made, Open):
        return made if _is_the_wheel(floor, entry) else None
    return made if made is not None and made.cut is entry.cut else None


def _is_the_wheel(floor: Floor, entry: CutEntry) -> bool:
    """Whether this is a cut of the mesh's wheel by a single point, or by nobody knows what."""
    job = floor.loaded.job
    if job.mesh is None:
        return False
    ref = floor.loaded.ref(job.mesh.wheel)
    for setup in job.setups:
        for name, cut in setup.cut.items():
            if cut is entry.cut:
                mine = floor.loaded.ref(name, setup.part)
                kind = job.cutters[cut.cutter].kind if cut.cutter is not None else "single-point"
                return (mine.part, mine.surface) == (ref.part, ref.surface) and kind == "single-point"
    return False


def radius(cut: WheelCut) -> float:
    """Radius of the cutter's tip circle [mm]. Source: the job file."""
    return cut.radius


def smallest_radius(cut: WheelCut) -> float:
    """Tip radius below which the worm rides on the ends of the teeth [mm]: zero crowning. Source: worm.cutter."""
    d = cut.drive
    with in_range:
        return fly.smallest_radius(
            pitch_diameter=d.pitch_diameter,
            worm_tip_diameter=d.tip_diameter,
            wheel_diameter=d.wheel_diameter,
            pressure_angle=d.pressure_angle,
            lead_angle=d.lead_angle,
            gap_arc=d.thread,
            clearance=max(cut.clearance, 0.0),
        )


def shape(cut: WheelCut) -> Shape:
    """Crowning and twist of the flank, gap as wide as the thread. Source: worm.cutter (second order, near the mid-plane)."""
    d = cut.drive
    with in_range:
        over = fly.oversize(
            cutter_radius=cut.radius, worm_tip_diameter=d.tip_diameter, clearance=max(cut.clearance, 0.0)
        )
        plunge = fly.Plunge(
            pitch_diameter=d.pitch_diameter,
            wheel_diameter=d.wheel_diameter,
            pressure_angle=d.pressure_angle,
            lead_angle=d.lead_angle,
            gap_arc=d.thread,
            oversize=over,
        )
        made = Shape(cut, fly.crowning(plunge), fly.twist(plunge))
    if made.twist < 0.0:  # the second order says nothing of such a flank
        raise OutOfRange("the thread is too thick for this wheel: its flank has no twist that could be computed")
    return made


def ridge_reach(shape: Shape) -> float | None:
    """How far from the mid-plane the ridge of contact runs, one module from pitch height [mm]: 1.3 B m/(2 A).

    None where there is no crowning at all (the radius is judged by itself).  Source: worm.cutter, 1.3 fitted to own simulation.
    """
    if shape.crowning <= 0.0:
        return None
    return fly.RIDGE_ALLOWANCE * shape.twist * shape.cut.drive.module / (2.0 * shape.crowning)


def half_face(shape: Shape) -> float | Open:
    """Half the width of the wheel's teeth [mm], as far as closed forms tell what is at its ends.

    Raises: OutOfRange for teeth wider than the worm's pitch diameter.  Source: the job file; worm.cutter, second order.
    """
    d = shape.cut.drive
    if d.face_width is None:
        return Open((f"parts.{d.wheel.part}.surfaces.{d.wheel.surface}.width",))
    if d.face_width > d.pitch_diameter:
        raise OutOfRange(
            f"teeth {d.face_width:g} mm wide on a worm of {d.pitch_diameter:g} mm: closed forms hold near the mid-plane and not "
            f"at the ends of so wide a face"
        )
    return d.face_width / 2.0


def relief(shape: Shape, half_face: float) -> float:
    """Metal missing at the ends of the face, at pitch height [mm]: A (b/2)^2; negative: the ends ride. Source: worm.cutter."""
    return shape.crowning * half_face**2


def contact_area(shape: Shape, half_face: float, film: float) -> float | None:
    """Share of a flank that a marking film touches: 2 w/b, w = sqrt(f/(A cos alpha cos g)); None without crowning.

    Envelope insert, head at the lead angle, no load; within 15 % of simulation where the ends of the face stay clear, far too
    high for a smaller cutter.  Source: worm.cutter.
    """
    if shape.crowning <= 0.0:
        return None
    d = shape.cut.drive
    with in_range:
        return fly.contact_share(
            film,
            crowning=shape.crowning,
            pressure_angle=d.pressure_angle,
            lead_angle=d.lead_angle,
            face_width=2.0 * half_face,
        )


def contact_length(shape: Shape, half_face: float, film: float) -> float | None:
    """Share of the face from one end of the marking to the other: (B m/A + 2 w)/b, at most 1; None without crowning.

    The ridge runs across the face from tip to root, so the marking is longer than it is wide.  Source: worm.cutter.
    """
    area = contact_area(shape, half_face, film)
    if area is None:
        return None
    run = shape.twist * shape.cut.drive.module / shape.crowning
    return min(run / (2.0 * half_face) + area, 1.0)


def usual_contact(shape: Shape, half_face: float, exact: float | None) -> float | None:
    """Share of a flank that a film of 6 um marks, closed form: 2 w/b, w = sqrt(f/(A cos alpha cos g)).

    None where the exact gap gives that share.  Source: worm.cutter; film common practice.
    """
    return contact_area(shape, half_face, USUAL_FILM) if exact is None else None


def clearance(cut: WheelCut) -> float:
    """Clearance between the worm's tip and the bottom of the gap for the depth as planned [mm]. Source: geometry."""
    return cut.clearance


def module(cut: WheelCut) -> float:
    """Axial module [mm]. Source: the job file."""
    return cut.drive.module


def insert(cut: WheelCut) -> str | Open:
    """Whether the insert follows the envelope or the mid-plane section. Source: the job file."""
    return cut.cutter.insert if cut.cutter.insert is not None else Open((f"{cut.cutter_path}.insert",))


def insert_gap(shape: Shape, insert: str, error: float | None, budget: float | None) -> float | None:
    """What an insert copied from the mid-plane is too narrow by one module from pitch height, each side [mm].

    (B m)^2/(4 A) cos g; 0 for an envelope; None without crowning, and where the exact gap gives the transmission error that
    the insert leaves beside its budget, which CUTTER-012 judges.  Source: worm.insert, order of size.
    """
    if error is not None and budget is not None:
        return None
    if insert == "envelope":
        return 0.0
    if shape.crowning <= 0.0:
        return None
    d = shape.cut.drive
    return insert_widening(d.module, crowning=shape.crowning, twist=shape.twist, lead_angle=d.lead_angle)


def width_needed(cut: WheelCut, floor: Floor) -> float:
    """Width of the insert at pitch height that just fits the thread as measured, no backlash [mm]. Source: worm.insert."""
    return insert_width(cut.as_drawn(), cut.drive.thread, height=cut.drawn_height, tilt=tilt_of(floor, cut))


def width_at_pitch(cut: WheelCut) -> float | None:
    """Smallest width of the insert at pitch height [mm]; None where none is stated there. Source: the job file."""
    given = cut.cutter.width
    if given is None or (cut.cutter.width_at is not None and abs(cut.cutter.width_at - cut.drawn_height) > NEAR):
        return None
    if given.measured is not None:
        return given.measured - (given.uncertainty or 0.0)
    return given.value + (given.lower or 0.0)


def tip_width(cut: WheelCut, floor: Floor) -> float:
    """Width of the insert at its tip that just fits the thread as measured, no backlash [mm]; an envelope is a little wider.

    Source: worm.insert, mid-plane section.
    """
    return insert_width(cut, cut.drive.thread, height=0.0, tilt=tilt_of(floor, cut))


def tilt_of(floor: Floor, cut: WheelCut) -> float:
    """Tilt of the head at that cut, else the lead angle [rad]."""
    setup = next(s for s in floor.loaded.job.setups if s.op == cut.op)
    return abs(setup.head.tilt) if setup.head is not None else cut.drive.lead_angle


def insert_width(cut: WheelCut, gap_arc: float, *, height: float, tilt: float) -> float:
    """Width of a mid-plane insert at a height above its tip for a gap at the rolling circle [mm].

    Raises: OutOfRange for sizes that give no insert.  Source: worm.insert.
    """
    d = cut.drive
    with in_range:
        return insert_widths(
            [height],
            axial_module=d.module,
            wheel_teeth=d.teeth,
            centre_distance=d.centre_distance,
            worm_tip_diameter=d.tip_diameter,
            clearance=cut.clearance,
            pressure_angle=d.pressure_angle,
            gap_arc=gap_arc,
            tilt=tilt,
            cutter_radius=cut.radius,
        )[0]


def early_touch(cut: WheelCut, floor: Floor) -> float | Open | None:
    """How much earlier a turning cutter meets the corners of the throat than its bottom [mm]; 0 for a standing one.

    None where the depth is not counted from a throat. Taken as turning where nothing is said.  Source: worm.depth.
    """
    assert cut.cut.depth_from is not None
    part = cut.drive.wheel.part
    ref = floor.loaded.ref(cut.cut.depth_from.surface, part)
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    if not isinstance(node, Throat):
        return None
    if cut.cut.depth_from.tool == "standing":
        return 0.0
    rim = rim_over(floor, part, node.at)
    if rim is None:
        return Open((f"parts.{part}.surfaces",), "no rim is drawn over the throat")
    height = (rim - node.diameter) / 2.0
    half = math.sqrt(max(node.radius**2 - (node.radius - height) ** 2, 0.0))
    with in_range:
        return touched_early(throat_radius=node.radius, cutter_radius=cut.radius, throat_width=2.0 * half)


def overhang(entry: CutEntry, floor: Floor) -> float | Open | None:
    """Overhang of the cutter's bar over its diameter; a boring head always has a bar, others where either is stated.

    Source: the job file.
    """
    name = entry.cut.cutter
    cutter = floor.loaded.job.cutters[name] if name is not None else None
    if cutter is None or (cutter.kind != "boring-head" and cutter.overhang is None and cutter.bar_diameter is None):
        return None
    if cutter.overhang is None or cutter.bar_diameter is None:
        keys = ("overhang", "bar_diameter")
        return Open(tuple(f"cutters.{name}.{key}" for key in keys if getattr(cutter, key) is None))
    return cutter.overhang / cutter.bar_diameter


def changed_inside(entry: CutEntry, floor: Floor) -> str | None:
    """inside or outside: where a tool change, due after so many gaps cut, falls by the last full round of the teeth.

    None where no change is planned or the surface has no teeth.  Source: counting the gaps of all passes.
    """
    every = entry.cut.tool_change_after
    if every is None:
        return None
    for setup in floor.loaded.job.setups:
        for name, cut in setup.cut.items():
            if cut is entry.cut:
                ref = floor.loaded.ref(name, setup.part)
                count = getattr(floor.loaded.job.parts[ref.part].surfaces[ref.surface], "count", None)
                if count is None:
                    return None
                rounds = max(len(cut.passes), 1)
                begins, ends = (rounds - 1) * count, rounds * count
                within = (ends - 1) // every * every > begins
                return "inside" if within else "outside"
    return None


_CUT = {"cut": "cutter.wheel_cut"}
_HERE = {**_CUT, "floor": "route.floor"}
_SHAPE = {"shape": "cutter.shape"}
_FACE = {**_SHAPE, "half_face": "cutter.half_face"}


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str, *exact: str) -> Quantity:
    """A row of a cut; exact: arguments that are None where the exact gap is not asked for or gives no number."""
    return Quantity(f"cutter.{name}", "cut", unit, digits, of, inputs, says, dict.fromkeys(exact))  # type: ignore[arg-type]


SHAPE = (
    _row("wheel_cut", "", 0, here, {"floor": "route.floor", "entry": ":"}, "worm, wheel and cutter of this cut"),
    _row("radius", "mm", 2, radius, _CUT, "radius of the cutter's tip circle"),
    _row("smallest_radius", "mm", 2, smallest_radius, _CUT, "radius below which the worm rides on the ends"),
    _row("shape", "", 0, shape, _CUT, "crowning and twist of the flank"),
    _row("half_face", "mm", 2, half_face, _SHAPE, "half the width of the teeth"),
    _row("ridge_reach", "mm", 2, ridge_reach, _SHAPE, "reach of the contact ridge along the face"),
    _row("relief", "um", 0, relief, _FACE, "metal missing at the ends of the face"),
    _row(
        "contact",
        "%",
        1,
        usual_contact,
        {**_FACE, "exact": "settled contact.share"},
        "share of a flank that 6 um of blue marks",
        "exact",
    ),
    _row("clearance", "mm", 3, clearance, _CUT, "clearance under the worm's tip for the depth as planned"),
    _row("module", "mm", 3, module, _CUT, "axial module"),
    _row("insert", "", 0, insert, _CUT, "profile of the insert"),
    _row(
        "insert_gap",
        "um",
        1,
        insert_gap,
        {
            **_SHAPE,
            "insert": "cutter.insert",
            "error": "settled contact.error",
            "budget": "settled contact.budget",
        },
        "what the insert is too narrow by",
        "error",
        "budget",
    ),
    _row("width_needed", "mm", 4, width_needed, _HERE, "insert at pitch height for the thread, no backlash"),
    _row("width", "mm", 4, width_at_pitch, _CUT, "smallest width of the insert at pitch height"),
    _row("tip_width", "mm", 4, tip_width, _HERE, "insert at its tip for the thread, no backlash"),
    _row("early_touch", "um", 0, early_touch, _HERE, "how early a turning cutter meets the throat's corners"),
    _row("overhang", "1", 1, overhang, {"entry": ":", "floor": "route.floor"}, "overhang of the bar over its diameter"),
    _row("tool_change", "", 0, changed_inside, {"entry": ":", "floor": "route.floor"}, "where a tool change falls"),
)
