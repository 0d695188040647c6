"""Grinding the flanks of an insert point by point with a wheel of rounded edge: how many points, where, what readings. mm, rad.

One flank at a time, with x from the insert's middle line out towards that flank and h up from its tip (`wheel_edge`). The
form error told here is that of the flank, square to it, with a wheel and a machine free of error.
"""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Side
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.insert_profile import slope_and_width
from setupcheck.worm.plunge_gap import Insert
from setupcheck.worm.wheel_edge import along_flank, cusps, refuse_gouging, wheel_centres

MOST_POINTS = 2000
"""More points than anybody grinds by hand: more are refused as a slip of the pen. Our screening choice."""


@record(kw_only=True)
class Datum:
    """Where the readings of the grinder begin [mm].

    side    of the shank that the wheel touches off on, from the insert's middle line, on the side of the flank that is ground
    across  reading with the wheel touching that side; grows as the wheel goes away from the middle line
    along   reading with the wheel touching the tip from outside; grows as the wheel goes from tip to shank
    An indicator that stands at something other than 0 at touch-off is stated there.
    Raises: ValueError for a side not above zero, or readings that are no numbers.
    """

    side: float
    across: float = 0.0
    along: float = 0.0

    def __post_init__(self) -> None:
        above_zero(side=self.side)
        if not (math.isfinite(self.across) and math.isfinite(self.along)):
            raise ValueError("the readings at touch-off must be numbers: 0 where the dials were set to zero there")


@record(eq=False)
class Coordinates:
    """Table for one flank, from tip to top; arrays of length n unless stated [mm].

    heights, half_widths  the point of the flank that is touched
    across, along         readings of the grinder, rounded to its step
    rounding              what rounding does to the flank there, square to it; positive: metal left, negative: too deep
    cusps                 metal left between neighbouring points, (n - 1,)
    form_error            largest distance of the ground flank from the intended one, either way
    """

    heights: Array
    half_widths: Array
    across: Array
    along: Array
    rounding: Array
    cusps: Array
    form_error: float


def readings(insert: Insert, heights: Array, *, wheel_radius: float, datum: Datum, side: Side) -> tuple[Array, Array]:
    """Readings across and along at which the wheel touches a flank at heights above the tip [mm], (n,) each, not rounded.

    Touching the side the wheel's centre stands at x = side + r, touching the tip at h = -r:
        across = datum.across + x_c - (side + r)        along = datum.along + h_c + r
    Raises: ValueError for a wheel too large for the flank, sizes not above zero, heights the profile does not reach.
    Source: geometry, derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> at = dict(wheel_radius=5.0, datum=Datum(side=8.0, along=0.5), side=1)
    >>> [round(float(v[0]), 6) for v in readings(measured_insert(h, 1.0 + 0.75 * h), np.array([2.0]), **at)]
    [-6.5, 4.5]
    """
    refuse_gouging(insert, wheel_radius=wheel_radius, side=side)
    centre = wheel_centres(insert, heights, wheel_radius=wheel_radius, side=side)
    return centre.across - (datum.side + wheel_radius) + datum.across, centre.along + wheel_radius + datum.along


def equal_errors(insert: Insert, count: int, *, wheel_radius: float, side: Side) -> Array:
    """Heights of `count` points, tip and top among them, between which the wheel leaves equal cusps [mm], (count,).

    Points per length go as sqrt(1/r - 1/rho): fewer where the flank is as hollow as the edge is round.
    Raises: ValueError for fewer than two points or a wheel radius not above zero.  Source: `cusps`, shared out evenly.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 5.0, 51)
    >>> arc = measured_insert(h, 11.0 - np.sqrt(100.0 - (h + 1.0) ** 2))
    >>> at = equal_errors(arc, 6, wheel_radius=6.0, side=1)
    >>> [round(1e3 * float(c), 1) for c in cusps(arc, at, wheel_radius=6.0, side=1)]
    [9.8, 9.8, 9.8, 9.8, 9.8]
    """
    above_zero(wheel_radius=wheel_radius)
    fine, weight = _cusp_weight(insert, wheel_radius, side)
    return _shared_out(fine, weight, count)


def rounding_bound(insert: Insert, *, step: float, side: Side) -> float:
    """Most that rounding both readings to a step can move a flank, square to it [mm]: step/2 (cos psi + sin psi).

    Raises: ValueError for a step not above zero.  Source: two halves of a step along the normal, derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> round(rounding_bound(measured_insert(h, 1.0 + 0.75 * h), step=0.01, side=1), 6)
    0.007
    """
    above_zero(step=step)
    psi = np.arctan(slope_and_width(insert, insert.heights, side=side)[0])
    return 0.5 * step * float((np.cos(psi) + np.sin(psi)).max())


def points_for(insert: Insert, *, form_error: float, wheel_radius: float, step: float, side: Side) -> int:
    """Points, equal cusps between them, that keep a flank within a form error, rounding counted at its worst [mm].

    n - 1 = (integral of sqrt(1/r - 1/rho) ds)/sqrt(8 e), e the form error less the rounding.
    Raises: ValueError where rounding alone takes up the form error, a wheel too large, or more than 2000 points.
    Source: `cusps` summed over the flank, derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> flat = measured_insert(h, 1.0 + 0.75 * h)
    >>> points_for(flat, form_error=0.002, wheel_radius=5.0, step=0.001, side=1)  # 7.5 mm long, chord 0.228 mm
    34
    """
    above_zero(form_error=form_error)
    refuse_gouging(insert, wheel_radius=wheel_radius, side=side)
    rounding = rounding_bound(insert, step=step, side=side)
    for_cusps = form_error - rounding
    if not for_cusps > 0.0:
        raise ValueError(
            f"readings rounded to {1e3 * step:g} um move the flank by up to {1e3 * rounding:.2g} um, so a form error of "
            f"{1e3 * form_error:g} um cannot be held: a step of {0.5e3 * step * form_error / rounding:.2g} um would be right"
        )
    whole = float(_cusp_weight(insert, wheel_radius, side)[1][-1])
    intervals = max(whole / math.sqrt(8.0 * for_cusps), 1.0)
    if intervals >= MOST_POINTS:
        raise ValueError(f"{intervals:.0f} points would be needed: a larger wheel edge or a larger form error, please")
    count = math.ceil(intervals) + 1
    while cusps_of(insert, count, wheel_radius, side) > for_cusps:  # where the curvature changes within one interval
        count += 1
    return count


def cusps_of(insert: Insert, count: int, wheel_radius: float, side: Side) -> float:
    """Largest cusp between so many points with equal errors [mm]."""
    at = equal_errors(insert, count, wheel_radius=wheel_radius, side=side)
    return float(cusps(insert, at, wheel_radius=wheel_radius, side=side).max())


def coordinates(
    insert: Insert, heights: Array, *, wheel_radius: float, datum: Datum, step: float, side: Side
) -> Coordinates:
    """Table of a flank for points at heights above the tip, (n,), n >= 2: rounded readings and what form error is left.

    The form error is that of the highest cusp, with what rounding does to both its points, or of the deepest point.
    Raises: ValueError as `readings` does, and for fewer than two points.
    Source: rounding along the normal (cos psi, -sin psi), derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> table = coordinates(measured_insert(h, 1.0 + 0.75 * h), np.array([0.0, 0.24, 0.48]), wheel_radius=5.0,
    ...                     datum=Datum(side=8.0), step=0.01, side=1)
    >>> [round(float(v), 2) for v in table.across], [round(1e3 * float(e), 2) for e in table.cusps]
    ([-8.0, -7.82, -7.64], [2.25, 2.25])
    """
    heights = np.asarray(heights, dtype=float)
    if heights.ndim != 1 or len(heights) < 2:
        raise ValueError("a flank is ground at two points or more: its tip and its top at least")
    above_zero(step=step)
    exact = readings(insert, heights, wheel_radius=wheel_radius, datum=datum, side=side)
    across, along = (step * np.round(v / step) for v in exact)
    slope, width = slope_and_width(insert, heights, side=side)
    psi = np.arctan(slope)
    rounding = (across - exact[0]) * np.cos(psi) - (along - exact[1]) * np.sin(psi)
    between = cusps(insert, heights, wheel_radius=wheel_radius, side=side)
    highest = float(_tops(between, rounding).max())
    return Coordinates(
        heights=heights,
        half_widths=width,
        across=across,
        along=along,
        rounding=rounding,
        cusps=between,
        form_error=max(highest, float(np.abs(rounding).max())),
    )


def _cusp_weight(insert: Insert, wheel_radius: float, side: Side) -> tuple[Array, Array]:
    """Heights, and the sum of sqrt(1/r - 1/rho) ds up to each; (n,)."""
    fine, psi, length = along_flank(insert, side)
    ds = np.diff(length)
    parts = np.sqrt(np.maximum(ds * (ds / wheel_radius - np.diff(psi)), 0.0))
    return fine, np.concatenate([[0.0], np.cumsum(parts)])


def _tops(between: Array, rounding: Array) -> Array:
    """Height of each cusp when the points beside it stand off by their rounding; (n - 1,).

    Two parabolas of cusp c, one d deeper than the other, meet at the mean + c + d^2/(16 c); from d = 4 c on the deeper one
    takes the other's place as well.
    """
    first, second = rounding[:-1], rounding[1:]
    apart = np.abs(second - first)
    meet = apart < 4.0 * between
    over = np.square(apart) / (16.0 * np.where(meet, between, 1.0))
    return np.where(meet, 0.5 * (first + second) + between + over, np.maximum(first, second))


def _shared_out(fine: Array, sum_so_far: Array, count: int) -> Array:
    """Heights that divide a growing sum into count - 1 equal parts."""
    if count < 2:
        raise ValueError("a flank is ground at two points or more: its tip and its top at least")
    return np.interp(np.linspace(0.0, float(sum_so_far[-1]), count), sum_so_far, fine)
