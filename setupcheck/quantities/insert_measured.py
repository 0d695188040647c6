"""The insert as measured after grinding: what the contact is worked out with, and how far it is off its planned profile. mm.

Only for jobs with the exact gap (`mesh: {contact: exact}`), as the planned profile is known only there.
"""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

from setupcheck.jobfile.types import INCH, size_shown
from setupcheck.quantities import exact_gap
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.contact import Drill, Made, Points, bench_of, insert_of
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.exact_gap import row
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.gap_insert import Sections
    from setupcheck.worm.plunge_gap import Cut, Insert

WIDEST_STEP = 1.0 / 3.0
"""Steps between measured heights at most, in modules: a hollow of usual size is then met within a micrometre or two.

Our screening choice.
"""


@record
class Off:
    """The measured point that is farthest off the planned profile [mm].

    size    square to the flank; positive: metal stands out beyond the profile, so the gap comes out wider there
    height  above the tip;  flank  right, left, or each where both are alike
    """

    size: float
    height: float
    flank: str


def measured(asked: str, cut: WheelCut) -> Points | None:
    """Points of the insert as the job tells them; None where it tells none. Source: the job file."""
    told = cut.cutter.profile
    return Points(told.heights, *told.half_widths) if told is not None else None


@in_range
def made(cut: WheelCut, kind: str, drill: Drill, made_for: Cut, points: Points | None, floor: Floor) -> Made | Open:
    """What the insert is: as measured where the job tells its points with their uncertainty, else as planned.

    Open where the points leave a gap or end below the top of the flank: between and beyond them it would be a guess.
    Source: the job file; worm.gap_insert for the height of the flank.
    """
    from setupcheck.worm.gap_insert import flank_height

    if points is None:
        return kind
    path, units, step = f"{cut.cutter_path}.profile", floor.loaded.job.units, WIDEST_STEP * cut.drive.module
    wide = [(low, high) for low, high in pairwise(points.heights) if high - low > step + 1e-9]
    if wide:
        low, high = (size_shown(h, units) for h in wide[0])
        return Open(
            (f"{path}.heights",),
            f"between {low} and {high} above its tip the insert has no measured point: measure it there in steps of a third "
            f"of the module at most, {_rounded(step, units)}",
        )
    needed = flank_height(bench_of(drill).gap, made_for)
    if points.heights[-1] < needed:
        return Open(
            (f"{path}.heights",),
            f"the measured points end {size_shown(points.heights[-1], units)} above the insert's tip, and the flank goes up "
            f"to {_rounded(needed, units)}: measure on beyond that",
        )
    if cut.cutter.profile is None or cut.cutter.profile.uncertainty is None:
        return Open((f"{path}.uncertainty",))
    return points


def _rounded(mm: float, units: str) -> str:
    """A length to 10 um, or half a thou in an inch file."""
    return f"{mm / INCH:.4f} in" if units == "in" else f"{mm:.2f} mm"


@in_range
def insert(gap: Sections, drill: Drill, made_for: Cut, made: Made) -> Insert:
    """The insert that the contact is worked out with: as measured, else envelope or copied from the mid-plane section.

    Source: worm.gap_insert; smooth between measured points.
    """
    if isinstance(made, Points):
        return insert_of(drill, made_for.radius, made)
    return exact_gap.insert(gap, made_for, made)


@in_range
def farthest(points: Points, profile: Insert, made_for: Cut) -> Off:
    """The measured point farthest off the planned profile, at its stated width.

    Points below the worm's tip are left out, since corners may be rounded there and nothing touches, and so are those above
    the top of the planned profile.  Source: worm.overlay, first order, square to the flank.
    """
    import numpy as np

    from setupcheck.worm.conjugate import Side
    from setupcheck.worm.overlay import off_profile

    heights = np.array(points.heights)
    live = (heights >= made_for.clearance) & (heights <= profile.heights[-1])
    if not live.any():
        raise OutOfRange("no measured point of the insert stands on the part of its profile that cuts the flank")
    found: list[Off] = []
    sides: tuple[tuple[Side, str, tuple[float, ...]], ...] = ((1, "right", points.right), (-1, "left", points.left))
    for side, name, widths in sides:
        off = off_profile(profile, heights[live], np.array(widths)[live], side=side)
        at = int(np.argmax(np.abs(off)))
        found.append(Off(float(off[at]), float(heights[live][at]), name))
    right, left = found
    if points.right == points.left:
        return Off(right.size, right.height, "each")
    return right if abs(right.size) >= abs(left.size) else left


def off_profile(farthest: Off) -> float:
    """Largest distance of a measured point from the planned profile, square to the flank, either way [mm].

    Source: worm.overlay.
    """
    return abs(farthest.size)


def off_height(farthest: Off) -> float:
    """Height above the tip of that point [mm]. Source: worm.overlay."""
    return farthest.height


def off_where(farthest: Off) -> str:
    """Which flank, and whether metal stands out there or is missing, in words. Source: worm.overlay."""
    return f"{farthest.flank} flank, {'too wide' if farthest.size > 0.0 else 'too narrow'} there"


def uncertainty(points: Points, cut: WheelCut) -> float | Open:
    """Uncertainty of one measured point, square to the flank [mm]. Source: the job file."""
    told = cut.cutter.profile.uncertainty if cut.cutter.profile is not None else None
    return told if told is not None else Open((f"{cut.cutter_path}.profile.uncertainty",))


def off_worst(off_profile: float, uncertainty: float) -> float:
    """Largest deviation with the uncertainty of a point added [mm]. Source: worst case."""
    return off_profile + uncertainty


def off_limit(points: Points, cut: WheelCut) -> float | Open:
    """Form error that a measured flank may have [mm]. Source: the job file."""
    ground = cut.cutter.grinding
    told = ground.form_error if ground is not None else None
    return told if told is not None else Open((f"{cut.cutter_path}.grinding.form_error",))


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"insert.{name}", "cut", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_CUT = {"cut": "cutter.wheel_cut"}
_POINTS = {"points": "insert.measured"}
_DRILL = {"drill": "contact.drill", "made_for": "contact.made_for"}
_OFF = {"farthest": "insert.farthest"}

MEASURED: tuple[Quantity, ...] = (
    _row("measured", "", 0, measured, {"asked": "contact.asked", **_CUT}, "measured points of the insert"),
    Quantity(
        "contact.made",
        "cut",
        "",
        0,
        made,
        {**_CUT, "kind": "cutter.insert", **_DRILL, **_POINTS, "floor": "route.floor"},
        "what the insert is: as planned, or its measured points",
        {"points": None},
    ),
    row(
        "insert",
        "",
        0,
        insert,
        {"gap": "contact.gap", **_DRILL, "made": "contact.made"},
        "profile of the insert, as measured or as planned",
    ),
    _row(
        "farthest",
        "",
        0,
        farthest,
        {**_POINTS, "profile": "insert.profile", "made_for": "contact.made_for"},
        "the measured point farthest off the planned profile",
    ),
    _row("off_profile", "um", 1, off_profile, _OFF, "what the measured insert is off its planned profile"),
    _row("off_height", "mm", 3, off_height, _OFF, "height above the tip at which it is off most"),
    _row("off_where", "", 0, off_where, _OFF, "flank on which it is off most, and which way"),
    _row("uncertainty", "um", 1, uncertainty, {**_POINTS, **_CUT}, "uncertainty of a measured point"),
    _row(
        "off_worst",
        "um",
        1,
        off_worst,
        {"off_profile": "insert.off_profile", "uncertainty": "insert.uncertainty"},
        "the same with the uncertainty of a point",
    ),
    _row("off_limit", "um", 1, off_limit, {**_POINTS, **_CUT}, "form error that the measured insert may have"),
)
