"""Worm, wheel and cutter of the job for the exact gap, where the job asks for it (`mesh: {contact: exact}`). Lengths mm, rad.

A map of contact takes longer than the rest of a review, so nothing here is worked out unless it is asked for.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from setupcheck.jobfile.models import Throat
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.joint_shape import rim_over
from setupcheck.quantities.shop import Floor

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.conjugate import Pair
    from setupcheck.worm.gap_insert import Sections
    from setupcheck.worm.plunge_gap import Cut, Insert
    from setupcheck.worm.wheel_flank import Blank


def asked(floor: Floor) -> str | None:
    """exact where the job asks for the exact gap; None elsewhere. Source: the job file."""
    mesh = floor.loaded.job.mesh
    return mesh.contact if mesh is not None else None


@in_range
def pair(asked: str, cut: WheelCut, floor: Floor) -> Pair:
    """Thread of the worm as drawn or measured, tooth count and centre distance. Source: the job file; worm.helicoid."""
    from setupcheck.worm.conjugate import Pair
    from setupcheck.worm.helicoid import Thread

    d, worm = cut.drive, floor.loaded.job.worm
    assert worm is not None and worm.profile is not None
    thread = Thread(
        profile=worm.profile,
        starts=d.starts,
        axial_module=d.module,
        reference_diameter=d.reference_diameter,
        tip_diameter=d.tip_diameter,
        pressure_angle=d.pressure_angle,
        thickness=d.thread,
        hand=worm.hand or "right",  # the map of the other hand is the mirror image; TILT-003 asks for it
    )
    return Pair(thread=thread, teeth=d.teeth, centre_distance=d.centre_distance)


@in_range
def blank(asked: str, cut: WheelCut, floor: Floor) -> Blank | Open:
    """Outside of the wheel's teeth: its throat and the rim over it, or a plain rim. Source: the drawing."""
    from setupcheck.worm.wheel_flank import Blank

    d = cut.drive
    part = floor.loaded.job.parts[d.wheel.part]
    path = f"parts.{d.wheel.part}.surfaces"
    if d.face_width is None:
        return Open((f"{path}.{d.wheel.surface}.width",))
    middle = part.surfaces[d.wheel.surface].at  # type: ignore[union-attr]
    throats = [s for s in part.surfaces.values() if isinstance(s, Throat)]
    rim = rim_over(floor, d.wheel.part, middle)
    if throats:
        throat = min(throats, key=lambda s: abs(s.at - middle))
        return Blank(
            face_width=d.face_width,
            throat_diameter=throat.diameter,
            throat_radius=throat.radius,
            outside_diameter=rim if rim is not None and rim > throat.diameter else None,
        )
    if rim is None:
        return Open((path,), f"neither a throat nor a rim is drawn over the teeth of {d.wheel.part}")
    return Blank(face_width=d.face_width, throat_diameter=rim)


def needed_tilt(pair: Pair) -> float:
    """Lead angle at the pitch point, which the insert is made for [rad]. Source: definition."""
    return math.atan(pair.thread.lead / (pair.centre_distance - pair.rolling))


@in_range
def made_for(pair: Pair, cut: WheelCut) -> Cut:
    """Setting that the insert is made for: the planned radius and depth, the lead angle, nothing off. Source: the job file."""
    from setupcheck.worm.plunge_gap import Cut

    return Cut(radius=cut.radius, tilt=needed_tilt(pair), clearance=cut.clearance)


@in_range
def setting(pair: Pair, cut: WheelCut, floor: Floor) -> Cut | Open:
    """Setting as the job plans it: radius, tilt of the head, depth; the side of lean is taken as right (TILT-003 judges it).

    Source: the job file.
    """
    from setupcheck.worm.plunge_gap import Cut

    setup = _setup(floor, cut)
    if setup.head is None or setup.head.tilt is None:
        return Open((f"setups.{cut.op}.head.tilt",))
    return Cut(radius=cut.radius, tilt=setup.head.tilt, clearance=cut.clearance)


def _setup(floor: Floor, cut: WheelCut) -> Setup:
    return next(s for s in floor.loaded.job.setups if s.op == cut.op)


@in_range
def gap(pair: Pair, blank: Blank) -> Sections:
    """Sections of the exact gap that inserts are made from. Source: worm.gap_insert."""
    from setupcheck.worm.gap_insert import sections

    return sections(pair, blank)


@in_range
def insert(gap: Sections, made_for: Cut, kind: str) -> Insert:
    """The insert as the job plans it, envelope or copied from the mid-plane section. Source: worm.gap_insert."""
    from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert

    return (envelope_insert if kind == "envelope" else mid_plane_insert)(gap, made_for)


def row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    """A row of the family `contact`, which a cut of a worm wheel owns."""
    return Quantity(f"contact.{name}", "cut", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_ASKED = {"asked": "contact.asked"}  # first everywhere: without it nothing else is asked for
_CUT = {"cut": "cutter.wheel_cut"}
_FLOOR = {"floor": "route.floor"}

EXACT = (
    row("asked", "", 0, asked, _FLOOR, "whether the job asks for the exact gap"),
    row("pair", "", 0, pair, {**_ASKED, **_CUT, **_FLOOR}, "worm and wheel for the exact gap"),
    row("blank", "", 0, blank, {**_ASKED, **_CUT, **_FLOOR}, "outside of the wheel's teeth"),
    row("made_for", "", 0, made_for, {"pair": "contact.pair", **_CUT}, "setting that the insert is made for"),
    row("setting", "", 0, setting, {"pair": "contact.pair", **_CUT, **_FLOOR}, "setting of the cutter as planned"),
    row("gap", "", 0, gap, {"pair": "contact.pair", "blank": "contact.blank"}, "sections of the exact gap"),
)
