"""Sizes of worm, wheel and cutter that cannot be true together, most often a radius for a diameter. Sizes mm.

Only what is certainly wrong. How wide "certainly" is, is our screening choice at each bound.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from contextlib import suppress

from pydantic import ValidationError

from setupcheck.jobfile.drawing import Drawing
from setupcheck.jobfile.models import Surface, Throat, Toothing
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import map_of
from setupcheck.jobfile.worm import Thickness

THINNEST, THICKEST = 0.2, 0.8  # share of the axial pitch that a thread takes, half as drawn; our screening choice
ROOTS_BELOW = 3.0  # modules below the pitch circle, where no tooth reaches any more (2.2 to 2.5 is usual); our choice
SMALLEST_THROAT = 0.8  # of the pitch circle, for wheels of few teeth; our screening choice
LARGEST_CUTTER = (
    8.0  # tip radii of the worm; far above every fly cutter, below a slip of mm and inch; our screening choice
)
FARTHEST_BALL = (
    6.0  # modules that both centres lie off the pitch circle at most, across; 3 in a gap; our screening choice
)
SAME = 1e-3  # relative; two figures for one module that differ by more were not rounded apart; our screening choice


def unlikely(drawing: Drawing) -> Iterator[Miss]:
    """Sizes of the worm, its wheel and the cutters of the wheel that contradict each other."""
    worm, wheel = map_of(drawing.data.get("worm")), drawing.ref(map_of(drawing.data.get("mesh")).get("wheel"))
    yield from _worm(drawing, worm)
    yield from _balls(drawing, map_of(drawing.data.get("mesh")), drawing.surface(wheel))
    for part, surfaces in drawing.parts.items():
        yield from _throats(drawing, part, surfaces)
    teeth = drawing.surface(wheel)
    if wheel is None or not isinstance(teeth, Toothing):
        return
    module = drawing.length(worm.get("axial_module"))
    if module is not None and teeth.module is not None and abs(module - teeth.module) > SAME * module:
        says = f"module {drawing.shown(teeth.module)} is not the worm's axial_module, {drawing.shown(module)}"
        path = ("parts", wheel.part, "surfaces", wheel.surface, "module")
        yield Miss(path, f"{says}. Write one module for both, or leave it away here")
    used: dict[str, None] = {}  # each cutter is told once, in the order of the setups
    for setup in drawing.setups:
        for _, ref, cut in drawing.cut_by(setup):
            if (ref.part, ref.surface) == (wheel.part, wheel.surface) and isinstance(cutter := cut.get("cutter"), str):
                used[cutter] = None
    for name in used:
        yield from _cutter(drawing, name, drawing.length(worm.get("tip_diameter")))


def _worm(drawing: Drawing, worm: Mapping[str, object]) -> Iterator[Miss]:
    tip, reference = drawing.length(worm.get("tip_diameter")), drawing.length(worm.get("reference_diameter"))
    if tip is not None and reference is not None and 0.0 < tip <= reference:
        says = f"tip_diameter {drawing.shown(tip)} is not above reference_diameter {drawing.shown(reference)}"
        yield Miss(("worm", "tip_diameter"), f"{says}. Is it the radius? Write the diameter")
    yield from _measured(drawing, worm, tip, reference)
    module, thickness = drawing.length(worm.get("axial_module")), _thickness(drawing, worm.get("thread_thickness"))
    if module is None or module <= 0.0 or thickness is None:
        return
    pitch = math.pi * module  # axial pitch of neighbouring threads, p_x = pi m_x, by definition of the module
    if not THINNEST * pitch <= thickness <= THICKEST * pitch:
        says = f"a thread of {drawing.shown(thickness)} does not fit a pitch of {drawing.shown(round(pitch, 2))}"
        half = drawing.shown(round(pitch / 2.0, 2))
        yield Miss(("worm", "thread_thickness"), f"{says}. Write its thickness along the axis, near {half}")


def _measured(
    drawing: Drawing, worm: Mapping[str, object], tip: float | None, reference: float | None
) -> Iterator[Miss]:
    """A thickness measured off the thread, and a size over wires that do not stand proud of the tip."""
    at = drawing.length(map_of(worm.get("thread_thickness")).get("at"))
    if at is not None and tip is not None and reference is not None and not 2.0 * reference - tip <= at <= tip:
        says = f"a thread between {drawing.shown(2.0 * reference - tip)} and {drawing.shown(tip)} is not measured at"
        radius = " Is it the radius?" if 2.0 * reference - tip <= 2.0 * at <= tip else ""
        yield Miss(("worm", "thread_thickness", "at"), f"{says} {drawing.shown(at)}.{radius} Write the diameter")
    over = map_of(worm.get("over_wires"))
    for key in ("measured", "nominal"):
        size, wire = drawing.length(over.get(key)), drawing.length(over.get("wire"))
        if size is None or tip is None or wire is None:
            continue
        if size <= tip:
            says = f"{drawing.shown(size)} over wires is not above the tip diameter, {drawing.shown(tip)}"
            yield Miss(("worm", "over_wires", key), f"{says}. Write the size over the wires, or take thicker wires")
        elif wire > size - wire:
            says = f"wires of {drawing.shown(wire)} are larger than what they leave of {drawing.shown(size)}"
            yield Miss(("worm", "over_wires", "wire"), f"{says}. Write the diameter of one wire")


def _balls(drawing: Drawing, mesh: Mapping[str, object], teeth: Surface | None) -> Iterator[Miss]:
    """A size over balls without its ball, with two of them, or far from the wheel's circle."""
    given, path = mesh.get("over_balls"), ("mesh", "over_balls")
    if not isinstance(given, Mapping):
        return
    if "ball" not in given and "ball" not in mesh:
        says = "a size over balls needs the diameter of a ball"
        yield Miss(path, f"{says}. Write it as in {{measured: 124.964, ball: 3.50, uncertainty: 8 um}}")
        return
    mine, planned = drawing.length(given.get("ball")), drawing.length(mesh.get("ball"))
    if mine is not None and planned is not None and mine != planned:
        says = f"measured over balls of {drawing.shown(mine)}, and mesh.ball is {drawing.shown(planned)}"
        yield Miss((*path, "ball"), f"{says}. Write the ball once, the one that was measured with")
    size, ball = drawing.length(given.get("measured")), mine if mine is not None else planned
    if size is None or ball is None or ball <= 0.0 or not isinstance(teeth, Toothing):
        return
    module = teeth.module if teeth.module is not None else teeth.on_circle / teeth.count
    if abs(size - ball - teeth.on_circle) > FARTHEST_BALL * module:
        says = f"{drawing.shown(size)} over balls of {drawing.shown(ball)} does not fit teeth on a circle of"
        hint = f"{drawing.shown(teeth.on_circle)}. Write the size over both balls, and the diameter of one"
        yield Miss((*path, "measured"), f"{says} {hint}")


def _thickness(drawing: Drawing, node: object) -> float | None:
    """The thread's thickness along the worm's axis [mm]; None where it is missing or wrong, which is told elsewhere."""
    with suppress(ValidationError):
        found = Thickness.model_validate(node, context={"units": drawing.units})
        return found.value if found.at is None else None  # elsewhere than at the reference diameter it may well differ
    return None


def _throats(drawing: Drawing, part: str, surfaces: Mapping[str, Surface]) -> Iterator[Miss]:
    """A throat below the roots of the teeth it belongs to, those nearest along the part."""
    rings = [(name, s) for name, s in surfaces.items() if isinstance(s, Toothing)]
    for name, throat in surfaces.items():
        if not isinstance(throat, Throat) or not rings:
            continue
        at = throat.at
        of, teeth = min(rings, key=lambda ring: abs(ring[1].at - at))
        module = teeth.module if teeth.module is not None else teeth.on_circle / teeth.count
        if throat.diameter < max(teeth.on_circle - ROOTS_BELOW * module, SMALLEST_THROAT * teeth.on_circle):
            says = f"a throat of {drawing.shown(throat.diameter)} lies below the roots of {of}"
            hint = f"on a circle of {drawing.shown(teeth.on_circle)}. Is it the radius? Write the diameter"
            yield Miss(("parts", part, "surfaces", name, "diameter"), f"{says} {hint}")


def _cutter(drawing: Drawing, name: str, worm_tip: float | None) -> Iterator[Miss]:
    """A cutter of a worm wheel that dwarfs the worm it stands in for.

    One of twice or thrice the worm's size is no mistake for certain: a large radius is a way to crown the teeth.
    """
    radius = drawing.length(map_of(map_of(drawing.data.get("cutters")).get(name)).get("tip_radius"))
    if radius is None or worm_tip is None or worm_tip <= 0.0 or radius <= LARGEST_CUTTER * worm_tip / 2.0:
        return
    says = f"a tip_radius of {drawing.shown(radius)} is more than {LARGEST_CUTTER:.0f} times the worm's"
    yield Miss(
        ("cutters", name, "tip_radius"), f"{says}, {drawing.shown(worm_tip / 2.0)}. Check the number and its unit"
    )
