"""Worm and wheel of the job as numbers, and the cut that makes the wheel's gaps. Lengths mm, angles rad."""

from __future__ import annotations

from dataclasses import replace

from setupcheck.jobfile.models import Cutter, Dimension
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Cut
from setupcheck.quantities.book import Open
from setupcheck.quantities.joint_shape import cut_of, drawn_diameter, touched_diameter
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.thread import Thread, not_straight, thread
from setupcheck.quantities.worm_sizes import settled, toothing
from setupcheck.record import record
from setupcheck.worm.geometry import lead_angle, steep_enough


@record
class Drive:
    """Worm and wheel with everything the formulas ask for.

    reference_diameter, tip_diameter   of the worm [mm];  pressure_angle axial, lead_angle at the reference diameter [rad]
    wheel_diameter  d2 = z2 m, the rolling circle;  face_width  of its teeth, None where not stated [mm]
    centre_distance  middle of its limits [mm];  thread  axial thickness at the reference diameter, middle or measured [mm]
    """

    wheel: Ref
    starts: int
    module: float
    reference_diameter: float
    tip_diameter: float
    pressure_angle: float
    lead_angle: float
    teeth: int
    wheel_diameter: float
    face_width: float | None
    centre_distance: float
    thread: float

    @property
    def pitch_diameter(self) -> float:
        """Diameter of the worm that rolls on the wheel's reference circle [mm]: 2 a - d2."""
        return 2.0 * self.centre_distance - self.wheel_diameter


def drive(floor: Floor) -> Drive | Open | None:
    """Worm and wheel of the mesh; None where the job has none. Source: the job file; lead angle ISO 1122-2 (from memory).

    Module, worm diameter, starts and centre distance may be stated or follow from the others.
    """
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    if mesh is None or worm is None:
        return None
    wheel, node = floor.loaded.ref(mesh.wheel), toothing(floor)
    if node is None:
        return Open(("mesh.wheel",), f"{wheel} has no teeth")
    found, known = settled(floor, "starts", "axial_module", "reference_diameter", "centre_distance"), thread(floor)
    missing = tuple(
        f"worm.{key}" for key in ("tip_diameter", "pressure_angle", "profile") if getattr(worm, key) is None
    )
    opened = [x for x in (found, known) if isinstance(x, Open)]
    if opened or missing:
        of_all = (*(m for x in opened for m in x.missing), *missing)
        return Open(tuple(dict.fromkeys(of_all)), "; ".join(x.because for x in opened if x.because))
    assert not isinstance(found, Open) and isinstance(known, Thread)
    assert worm.tip_diameter is not None and worm.pressure_angle is not None
    starts, module, diameter, distance = found
    try:
        lead = lead_angle(starts=round(starts), axial_module=module, diameter=diameter)
        steep_enough(pressure_angle=worm.pressure_angle)
    except ValueError as why:
        return Open(because=str(why))
    bent = not_straight(floor, worm)
    if bent is not None:
        return bent
    return Drive(
        wheel=wheel,
        starts=round(starts),
        module=module,
        reference_diameter=diameter,
        tip_diameter=worm.tip_diameter,
        pressure_angle=worm.pressure_angle,
        lead_angle=lead,
        teeth=node.count,
        wheel_diameter=node.count * module,
        face_width=node.width,
        centre_distance=distance,
        thread=known.middle,
    )


def middle(given: Dimension) -> float:
    """The measured size, else the middle of its limits [mm]."""
    if given.measured is not None:
        return given.measured
    return given.value + ((given.lower or 0.0) + (given.upper or 0.0)) / 2.0


@record
class WheelCut:
    """The cut that makes the wheel's gaps, by a cutter with one point.

    path, cutter_path  where both stand in the job file
    root   radius of the gap's bottom in the mid-plane [mm];  clearance  between it and the worm's tip, may be negative
    drawn_root  the same for the touched surface as drawn, for which the insert was made, whatever was measured since [mm]
    radius  of the cutter's tip circle [mm]
    """

    drive: Drive
    op: int
    path: str
    cut: Cut
    cutter: Cutter
    cutter_path: str
    radius: float
    root: float
    clearance: float
    drawn_root: float

    @property
    def pitch_height(self) -> float:
        """Height of the rolling circle above the cutter's tip, in the mid-plane [mm]."""
        return self.drive.wheel_diameter / 2.0 - self.root

    def as_drawn(self) -> WheelCut:
        """The cut under the touched surface as drawn, whatever was measured of it."""
        return replace(self, root=self.drawn_root, clearance=self.clearance + self.root - self.drawn_root)

    @property
    def drawn_height(self) -> float:
        """Pitch height for the touched surface as drawn, for which the insert is ground [mm].

        A size measured there later moves the insert, and not where on it its width stands.
        """
        return self.drive.wheel_diameter / 2.0 - self.drawn_root

    @property
    def width_height(self) -> float:
        """Height above the tip at which the job states the insert's width [mm]: as it says, else pitch height as drawn."""
        stated = self.cutter.width_at
        return stated if stated is not None else self.drawn_height


def wheel_cut(floor: Floor, found: Drive) -> WheelCut | Open | None:
    """The last cut of the wheel's teeth; None where no single-point cutter makes them. Source: the job file."""
    cut = cut_of(floor, found.wheel.part, found.wheel.surface)
    if cut is None:
        return None
    op, key = next(
        (setup.op, name)
        for setup in reversed(floor.loaded.job.setups)
        for name, each in setup.cut.items()
        if each is cut
    )
    path = f"setups.{op}.cut.{key}"
    if cut.cutter is None:
        return Open((f"{path}.cutter",))
    cutter = floor.loaded.job.cutters[cut.cutter]
    if cutter.kind != "single-point":
        return None
    missing = tuple(f"{path}.{key}" for key in ("depth", "depth_from") if getattr(cut, key) is None)
    if cutter.tip_radius is None:
        missing += (f"cutters.{cut.cutter}.tip_radius",)
    touched = touched_diameter(floor, found.wheel.part, cut)
    if missing or cut.depth is None or cutter.tip_radius is None or not isinstance(touched, float):
        return Open(missing or (f"{path}.depth_from",))
    root = touched / 2.0 - cut.depth
    drawn = drawn_diameter(floor, found.wheel.part, cut)
    return WheelCut(
        drive=found,
        op=op,
        path=path,
        cut=cut,
        cutter=cutter,
        cutter_path=f"cutters.{cut.cutter}",
        radius=cutter.tip_radius,
        root=root,
        clearance=found.centre_distance - found.tip_diameter / 2.0 - root,
        drawn_root=(drawn if isinstance(drawn, float) else touched) / 2.0 - cut.depth,
    )
