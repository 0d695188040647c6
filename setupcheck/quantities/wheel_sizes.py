"""The wheel's sizes that follow from the worm, and a backlash told in three ways. Lengths mm, rad."""

from __future__ import annotations

import math

from setupcheck.jobfile.worm import Mesh
from setupcheck.notation import show
from setupcheck.quantities.backlash import along_of
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.joint_shape import rim_over
from setupcheck.quantities.judged import Result
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import SAME, settled, starts_of, told, toothing
from setupcheck.record import record
from setupcheck.worm import geometry


@record
class Wheel:
    """Sizes that rule the wheel: starts, module, worm and wheel reference diameters, teeth, shift."""

    starts: int
    module: float
    worm_diameter: float
    teeth: int
    shift: float

    @property
    def diameter(self) -> float:
        """Reference circle of the wheel [mm]."""
        return self.teeth * self.module

    @property
    def pitch_diameter(self) -> float:
        """Diameter of the worm that rolls on it as drawn [mm]."""
        return self.worm_diameter + 2.0 * self.shift * self.module


def wheel(floor: Floor, mesh: Mesh) -> Wheel | Open | None:
    """What the wheel's sizes follow from; None without a worm or without teeth. Source: the job file, worm.closing."""
    node = toothing(floor)
    if floor.loaded.job.worm is None or node is None:
        return None
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    if isinstance(found, Open):
        return found
    return Wheel(round(found[0]), found[1], found[2], node.count, mesh.shift)


def _sizes(of: Wheel) -> geometry.WheelSizes:
    with in_range:
        return geometry.wheel_sizes(
            axial_module=of.module, reference_diameter=of.worm_diameter, wheel_teeth=of.teeth, shift=of.shift
        )


def reference_circle(of: Wheel) -> float:
    """Reference circle of the wheel [mm]: z2 m. Source: ISO 1122-2 quantities (from memory)."""
    return of.diameter


def closing_distance(of: Wheel) -> float:
    """Centre distance that closes the pair [mm]: (d1 + d2)/2 + x m. Source: worm.geometry."""
    return (of.worm_diameter + of.diameter) / 2.0 + of.shift * of.module


def throat(of: Wheel) -> float:
    """Usual throat diameter [mm]: d2 + 2 m (1 + x). Source: worm.geometry.wheel_sizes."""
    return _sizes(of).throat_diameter


def root(of: Wheel) -> float:
    """Usual root diameter [mm]: d2 - 2 m (1.2 - x). Source: worm.geometry.wheel_sizes."""
    return _sizes(of).root_diameter


def throat_radius(of: Wheel) -> float:
    """Radius of the hollow round the worm [mm]: d1/2 - m. Source: NAVEDTRA 14345, p. 14-23 (read)."""
    return _sizes(of).throat_radius


def outside(of: Wheel) -> float:
    """Usual diameter over the corners [mm]: throat + 1.5 m (1-2 starts), + 1.0 m (3, more). Source: NAVEDTRA 14345 (read)."""
    return geometry.outside_diameter(throat_diameter=throat(of), axial_module=of.module, starts=of.starts)


def usual_width(of: Wheel) -> float:
    """Usual width of the teeth [mm]: 2 m (0.5 + sqrt(q + 1)). Source: worm.geometry (from memory)."""
    return geometry.usual_face_width(axial_module=of.module, quotient=of.worm_diameter / of.module)


def us_width(of: Wheel) -> float:
    """Width of the teeth by the US Navy's rule [mm]. Source: NAVEDTRA 14345, p. 14-23 (read)."""
    return geometry.us_face_width(axial_pitch=math.pi * of.module, starts=of.starts)


def width(floor: Floor, mesh: Mesh) -> float | Open | None:
    """Width of the wheel's teeth [mm]. Source: the job file."""
    node = toothing(floor)
    if node is None or floor.loaded.job.worm is None:
        return None
    ref = floor.loaded.ref(mesh.wheel)
    return node.width if node.width is not None else Open((f"parts.{ref.part}.surfaces.{ref.surface}.width",))


def width_share(width: float, usual: float) -> float:
    """Width of the teeth over the usual one. Source: arithmetic."""
    return width / usual


def width_advice(width: float, usual: float, floor: Floor) -> str:
    """The usual width in words. Source: mesh.usual_width."""
    way = (
        "a wider face marks no more, as the flank's ends stand off" if width > usual else "a narrower face wears faster"
    )
    both = f"Usual is {floor.size(usual, 1)} for this worm, drawn is {floor.size(width, 1)}"
    return f"{both}: {way}. Check module and width."


def _tip_and_angle(floor: Floor) -> tuple[float, float] | Open:
    """Tip diameter [mm] and axial pressure angle [rad] of the worm, or the keys to fill."""
    worm = floor.loaded.job.worm
    assert worm is not None
    if worm.tip_diameter is None or worm.pressure_angle is None:
        return Open(tuple(f"worm.{key}" for key in ("tip_diameter", "pressure_angle") if getattr(worm, key) is None))
    return worm.tip_diameter, worm.pressure_angle


def reach(floor: Floor, of: Wheel, width: float) -> float | Open:
    """How far along the worm its thread touches the teeth [mm].

    Raises: OutOfRange where it touches none, as with a module that is not the wheel's.  Source: worm.geometry.contact_reach.
    """
    known = _tip_and_angle(floor)
    if isinstance(known, Open):
        return known
    tip_diameter, pressure_angle = known
    with in_range:
        found = geometry.contact_reach(
            starts=of.starts,
            axial_module=of.module,
            pitch_diameter=of.pitch_diameter,
            tip_diameter=tip_diameter,
            wheel_diameter=of.diameter,
            throat_radius=throat_radius(of),
            outside_diameter=_rim(floor) or outside(of),
            pressure_angle=pressure_angle,
            face_width=width,
        )
    if found <= 0.0:
        raise OutOfRange("a worm of these sizes touches nothing of the wheel's teeth")
    return found


def _rim(floor: Floor) -> float | None:
    node, mesh = toothing(floor), floor.loaded.job.mesh
    return (
        rim_over(floor, floor.loaded.ref(mesh.wheel).part, node.at) if node is not None and mesh is not None else None
    )


def thread_length(of: Wheel, reach: float) -> float:
    """Threaded length of the worm that lets every tooth touch [mm]: twice the reach and a pitch. Source: worm.geometry."""
    return geometry.usual_thread_length(reach=reach, axial_pitch=math.pi * of.module)


def older_length(of: Wheel) -> float:
    """Threaded length by the older rule [mm]: sqrt(da2^2 - d2^2). Source: worm.geometry (from memory)."""
    with in_range:
        return geometry.older_thread_length(throat_diameter=throat(of), wheel_diameter=of.diameter)


def teeth(of: Wheel) -> float:
    """Teeth of the wheel. Source: the job file."""
    return float(of.teeth)


def fewest(floor: Floor, of: Wheel) -> float | Open:
    """Least count of teeth that is not undercut, for the worm's own tip and the axial pressure angle.

    Raises: OutOfRange for an angle that is none.  Source: worm.geometry.fewest_teeth.
    """
    known = _tip_and_angle(floor)
    if isinstance(known, Open):
        return known
    tip_diameter, pressure_angle = known
    with in_range:
        least = geometry.fewest_teeth(
            pressure_angle=pressure_angle,
            shift=of.shift,
            addendum_factor=(tip_diameter - of.worm_diameter) / (2.0 * of.module),
        )
    return float(max(math.ceil(least - 1e-9), 1))


def circle_advice(floor: Floor, of: Wheel) -> str | None:
    """What a pitch circle that is not the worm's most likely comes from, in this job's numbers; None without a miss.

    Source: the usual slips: module, diametral pitch and axial pitch taken for one another, starts miscounted.
    """
    node, worm = toothing(floor), floor.loaded.job.worm
    if node is None or worm is None or abs(node.on_circle - of.diameter) <= SAME * node.on_circle:
        return None
    module, inches = node.on_circle / node.count, floor.loaded.job.units == "in"

    def near(value: float, wanted: float) -> bool:
        return abs(value - wanted) <= SAME * wanted

    written = worm.axial_module / 25.4 if worm.axial_module is not None and inches else worm.axial_module
    if worm.diametral_pitch is not None and near(worm.diametral_pitch, module):
        return f"The diametral_pitch reads like the module in mm: write {told(floor, 'axial_module:', module)} in its place."
    if written is not None and near(written, 25.4 / module):
        return f"The axial_module reads like the diametral pitch: write diametral_pitch: {written:g} in its place."
    if worm.axial_module is not None and near(worm.axial_module, math.pi * module):
        instead = told(floor, "axial_pitch:", worm.axial_module)
        return f"The axial_module reads like the axial pitch: write {instead} in its place."
    said = starts_of(of.starts * of.module / module, of.starts) if worm.lead is not None else ""
    return said or (
        f"By circle and count the module is {show(module, 'in' if inches else 'mm', 4)}, by the worm "
        f"{show(of.module, 'in' if inches else 'mm', 4)}. Write on_circle as count times axial module; a shift moves the tip "
        "and the root, not this circle."
    )


# -- backlash, told as arc and as angles ----------------------------------------------------------------------------------


def arcs(floor: Floor, result: Result | None) -> tuple[float, float] | None:
    """Lowest and highest backlash of the worst case along the reference circle [mm]; None for every other figure.

    Source: stack.combined, whatever way the requirement states it.
    """
    if result is None or result.stack.require.what != "backlash":
        return None
    found = drive(floor)
    if not isinstance(found, Drive):
        return None
    factor = along_of(floor, result.stack, found)
    worst = result.combined.worst
    return worst.low / factor, worst.high / factor


def low(arcs: tuple[float, float]) -> float:
    """Lowest backlash along the reference circle [mm]. Source: mesh.arcs."""
    return arcs[0]


def high(arcs: tuple[float, float]) -> float:
    """Highest backlash along the reference circle [mm]. Source: mesh.arcs."""
    return arcs[1]


def interference(floor: Floor, arcs: tuple[float, float], of: Wheel) -> str | None:
    """A backlash whose lowest end is below zero, as the interference it is; None above zero. Source: mesh.arcs."""
    if arcs[0] >= 0.0:
        return None
    least, most = (floor.fine(abs(arc)) for arc in arcs)
    if arcs[1] < 0.0:
        return f"{most} to {least} of interference along the reference circle: no backlash anywhere, the worm does not go in"
    wheel, worm = at_wheel(arcs[1], of), at_worm(arcs[1], of)
    angles = f"{show(wheel or 0.0, 'arcsec', 0)} at the wheel, {show(worm or 0.0, 'deg', 2)} of the worm"
    return f"{least} of interference to {most} of backlash along the reference circle ({angles}): at its least the worm binds"


def at_wheel(arc: float, of: Wheel) -> float | None:
    """Backlash as an angle of the wheel [rad]: j/r2; None for an interference, which is no turn. Source: geometry."""
    return arc / (of.diameter / 2.0) if arc >= 0.0 else None


def at_worm(arc: float, of: Wheel) -> float | None:
    """Backlash as a turn of the worm and its handwheel or crank [rad]: j/p, p = z1 m/2; None for an interference.

    Source: geometry of the screw.
    """
    return arc / (of.starts * of.module / 2.0) if arc >= 0.0 else None


_FLOOR = {"floor": "route.floor"}
_MESH = {**_FLOOR, "mesh": ":"}
_OF = {"of": "mesh.sizes"}
_WIDE = {"width": "mesh.width", "usual": "mesh.usual_width"}


def _row(
    name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str, per: str = "mesh"
) -> Quantity:
    return Quantity(f"mesh.{name}", per, unit, digits, of, inputs, says)  # type: ignore[arg-type]


WHEEL = (
    _row("sizes", "", 0, wheel, _MESH, "what the wheel's sizes follow from"),
    _row("reference_circle", "mm", 3, reference_circle, _OF, "reference circle of the wheel"),
    _row("closing_distance", "mm", 3, closing_distance, _OF, "centre distance that closes the pair"),
    _row("throat", "mm", 3, throat, _OF, "usual throat diameter"),
    _row("root", "mm", 3, root, _OF, "usual root diameter"),
    _row("throat_radius", "mm", 3, throat_radius, _OF, "radius of the hollow round the worm"),
    _row("outside", "mm", 2, outside, _OF, "usual diameter over the corners of the teeth"),
    _row("usual_width", "mm", 1, usual_width, _OF, "usual width of the teeth"),
    _row("us_width", "mm", 1, us_width, _OF, "width of the teeth by the US rule"),
    _row("width", "mm", 2, width, _MESH, "width of the teeth"),
    _row("width_share", "1", 2, width_share, _WIDE, "width of the teeth over the usual one"),
    _row("width_advice", "", 0, width_advice, {**_WIDE, **_FLOOR}, "the usual width in words"),
    _row(
        "reach", "mm", 1, reach, {**_FLOOR, **_OF, "width": "mesh.width"}, "how far along the worm it touches the teeth"
    ),
    _row(
        "thread_length", "mm", 1, thread_length, {**_OF, "reach": "mesh.reach"}, "threaded length for the whole contact"
    ),
    _row("older_length", "mm", 1, older_length, _OF, "threaded length by the older rule"),
    _row("teeth", "1", 0, teeth, _OF, "teeth of the wheel"),
    _row("fewest_teeth", "1", 0, fewest, {**_FLOOR, **_OF}, "least count of teeth that is not undercut"),
    _row("circle_advice", "", 0, circle_advice, {**_FLOOR, **_OF}, "what a pitch circle that misses may come from"),
    Quantity(
        "mesh.arcs",
        "stack",
        "",
        0,
        arcs,
        {**_FLOOR, "result": "settled stack.combined"},
        "both ends of the backlash along the reference circle",
        {"result": None},
    ),
    _row("arc_low", "um", 1, low, {"arcs": "mesh.arcs"}, "lowest backlash along the reference circle", "stack"),
    _row("arc_high", "um", 1, high, {"arcs": "mesh.arcs"}, "highest backlash along the reference circle", "stack"),
    _row(
        "interference",
        "",
        0,
        interference,
        {**_FLOOR, **_OF, "arcs": "mesh.arcs"},
        "a backlash below zero, as the interference it is",
        "stack",
    ),
    _row("wheel_low", "arcsec", 0, at_wheel, {"arc": "mesh.arc_low", **_OF}, "lowest backlash at the wheel", "stack"),
    _row(
        "wheel_high", "arcsec", 0, at_wheel, {"arc": "mesh.arc_high", **_OF}, "highest backlash at the wheel", "stack"
    ),
    _row(
        "worm_low", "deg", 2, at_worm, {"arc": "mesh.arc_low", **_OF}, "lowest backlash as a turn of the worm", "stack"
    ),
    _row(
        "worm_high",
        "deg",
        2,
        at_worm,
        {"arc": "mesh.arc_high", **_OF},
        "highest backlash as a turn of the worm",
        "stack",
    ),
)
