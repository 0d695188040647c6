"""What a stop out of square does to an insert: both flanks, swung to the second flank or turned over on the stop. mm, rad.

The shank lies against a stop that should be square to the cross slide and is not, by an angle d. Everything ground then comes
out turned by d about the place where the wheel touched off on the side of the shank. The first flank is the same either way.
  swung        the insert stays as it lies and the second flank is ground from the other side: both flanks turn the same way,
               so the insert leans and keeps its width, to first order
  turned over  the insert is laid on its other face against the same stop: the second flank is the mirror image of the first,
               so nothing leans, and the width changes from tip to top by twice the angle
"""

from __future__ import annotations

import math
from typing import Literal

import numpy as np

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.plunge_gap import Insert, curve, measured_insert

Way = Literal["swung", "turned over"]


@record(eq=False)
class OffStop:
    """An insert as a stop out of square leaves it.

    insert       both flanks as ground
    tip_width    change of the full width at the tip [mm];  top_width  at the top of the profile
    right, left  change of the flanks' mean angles to the shank [rad], positive: flatter, wider towards the top
    lean         of the middle line between the flanks, tip to top, positive: top towards the right flank [rad]
    tip_aside    middle of the tip from the middle of the shank, positive towards the right flank [mm]
    """

    insert: Insert
    tip_width: float
    top_width: float
    right: float
    left: float
    lean: float
    tip_aside: float


def ground_against_stop(insert: Insert, *, angle: float, way: Way, side: float, touched_at: float) -> OffStop:
    """The insert that is ground against a stop out of square by an angle, the intended one being `insert`.

    angle       of the stop [rad]; positive: the right flank, ground first, comes out wider towards the top, as with
                `Cut.turned`
    way         how the second flank, the left one, is come by: "swung" or "turned over"
    side        of the shank that is touched, from the middle line [mm];  touched_at  height above the tip where it is [mm]
    For small angles the half width of a flank changes by d (h - touched_at + W' W), so a touch far up the shank costs width at
    the tip. The tip is touched in its middle and taken as ground before. The wheel's radius against the leaning side of the
    shank counts in second order only and is left out.
    Raises: ValueError for an angle of 45 deg or more, a side not above zero, or one so large that the profile folds.
    Source: rigid motion that keeps both touched places, derived here.

    >>> h = np.linspace(0.0, 6.0, 13)
    >>> wedge, off = measured_insert(h, 1.1 + 0.35 * h), math.radians(0.25)
    >>> for way in ("swung", "turned over"):
    ...     got = ground_against_stop(wedge, angle=off, way=way, side=5.0, touched_at=0.0)
    ...     print(round(1e3 * (got.top_width - got.tip_width)), round(math.degrees(got.lean), 3))
    0 0.281
    59 0.0
    """
    above_zero(side=side)
    if way not in ("swung", "turned over"):
        raise ValueError(f"the second flank is come by 'swung' or 'turned over', not '{way}'")
    if not abs(angle) < math.pi / 4.0 or not math.isfinite(touched_at):
        raise ValueError("a stop is out of square by less than 45 deg, and the height of touching a number")
    second = angle if way == "turned over" else -angle
    right = _turned(insert.heights, insert.right, angle, side, touched_at)
    left = _turned(insert.heights, insert.left, second, side, touched_at)
    try:
        ground = measured_insert(insert.heights, right, left)
    except ValueError as problem:
        raise ValueError(f"{math.degrees(angle):g} deg out of square leaves no insert: {problem}") from None
    change = right + left - insert.right - insert.left
    middle = 0.5 * (right - left - (insert.right - insert.left))
    tall = float(insert.heights[-1])
    return OffStop(
        insert=ground,
        tip_width=float(change[0]),
        top_width=float(change[-1]),
        right=_mean_angle(right, tall) - _mean_angle(insert.right, tall),
        left=_mean_angle(left, tall) - _mean_angle(insert.left, tall),
        lean=math.atan(float(middle[-1] - middle[0]) / tall),
        tip_aside=float(middle[0]),
    )


def _turned(heights: Array, widths: Array, angle: float, side: float, touched_at: float) -> Array:
    """Half widths, at the same heights, of a flank turned by an angle towards its own side.

    A place q of the insert lies at p = T q + t on the machine, T a turn by the angle. The side touched, at height `touched_at`,
    must read `side` across, and the middle of the tip 0 along: t = (side (1 - cos d) + touched_at sin d, 0). What is ground
    along p is the flank q = T^-1 (p - t).
    """
    s, c = math.sin(angle), math.cos(angle)
    x = widths - (side * (1.0 - c) + s * touched_at)
    turned_up = c * heights - s * x
    if not np.all(np.diff(turned_up) > 0.0):
        raise ValueError(
            f"turned by {math.degrees(angle):g} deg the flank folds over: an angle well below its own is meant"
        )
    return curve(turned_up, c * x + s * heights).at(heights)[0]


def _mean_angle(widths: Array, tall: float) -> float:
    return math.atan(float(widths[-1] - widths[0]) / tall)
