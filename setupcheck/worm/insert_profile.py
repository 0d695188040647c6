"""What the profile of an insert tells: widths, flank angles, room at its tip, smallest concave radius. mm, rad.

A profile is an `Insert`: half width W over the height h above the tip, one for each flank, computed or measured. The insert's
flank is hollow (W'' > 0), as it makes the round flank of a tooth.
"""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Pair, Side, conjugate_gap, first_contact
from setupcheck.worm.geometry import not_below_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.plunge_gap import Cut, Insert, curve, on_cutter

CERTAIN = 0.02
"""Standard error of the strongest curvature, as a share of it, at which windows stop growing. Our screening choice."""

FEWEST = 5
"""Points of the shortest window: three fix a parabola, two are left to tell the scatter. Our choice."""

WIDEST_STEP = 0.25
"""Step between two points over the whole height; beyond it the profile between is a guess. Our choice, as for inserts."""

STRAIGHT = 1e4
"""Radii beyond so many heights of the profile are told as straight. Our choice: below the last bits of the points."""

SIDES: dict[Side, str] = {1: "right", -1: "left"}


@record(eq=False)
class Bends:
    """Parabolas through windows of neighbouring points of a flank; arrays of one length.

    heights    middle of each window [mm]
    slope      dW/dh there;  second  d2W/dh2 [1/mm]
    curvature  1/radius [1/mm], positive where the insert is hollow
    error      standard error of the curvature from the scatter of the points [1/mm]
    """

    heights: Array
    slope: Array
    second: Array
    curvature: Array
    error: Array


@record(kw_only=True)
class Hollow:
    """Smallest concave radius of a flank [mm].

    radius    best estimate; inf for a straight or convex flank
    height    above the tip at which it was found
    at_least  radius less what the scatter of the points leaves open (two standard errors of the curvature)
    """

    radius: float
    height: float
    at_least: float


def half_widths(insert: Insert, side: Side) -> Array:
    """Half widths of one flank [mm]; side +1 right, -1 left."""
    return insert.right if side == 1 else insert.left


def on_profile(insert: Insert, height: float) -> float:
    """The height, if the profile reaches it. Raises: ValueError for a height below the tip or above the profile's end."""
    if not insert.heights[0] <= height <= insert.heights[-1]:
        raise ValueError(
            f"the insert's profile goes from {insert.heights[0]:g} to {insert.heights[-1]:.4g} mm above its tip: at "
            f"{height:g} mm it is not known"
        )
    return height


def width_at(insert: Insert, height: float) -> float:
    """Full width at a height above the tip [mm]; at height 0 the tip width.

    Raises: ValueError for a height the profile does not reach.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> trapezium = measured_insert(h, 1.1 + 0.35 * h)
    >>> round(width_at(trapezium, 0.0), 3), round(width_at(trapezium, 2.2), 3)
    (2.2, 3.74)
    """
    return insert.width(on_profile(insert, height))


def bends(heights: Array, half_width: Array) -> Bends:
    """Slope and curvature along a flank by local least squares, windows as long as the scatter of the points asks for.

    curvature = W''/(1 + W'^2)^(3/2), from a parabola through each window of neighbouring points. A window has at first 5
    points and grows until the scatter leaves the strongest curvature uncertain by 2 %, to half of the points at most. A
    parabola's second derivative is a mean of the profile's over the window, so it never tells a flank more hollow than it is.
    Points may scatter, so a width may be a little less than the one below it.
    Raises: ValueError for fewer than five points, a number that is missing, heights that do not rise, or a gap of more than
    a quarter of the whole.
    Source: curvature of a plane curve and variance of least squares (textbook); size of windows chosen here.

    >>> h = np.linspace(0.0, 5.0, 51)
    >>> arc = bends(h, 11.0 - np.sqrt(100.0 - (h + 1.0) ** 2))
    >>> round(float(1.0 / arc.curvature[20]), 2)
    10.0
    """
    heights, half_width = (np.asarray(v, dtype=float) for v in (heights, half_width))
    _refuse_no_profile(heights, half_width)
    count, size = len(heights), FEWEST
    while True:
        found = _parabolas(heights, half_width, size)
        at = int(np.argmax(found.curvature))
        longer = size + 2 * max(1, size // 8)
        sure = found.error[at] <= CERTAIN * found.curvature[at]
        if sure or longer > max(FEWEST, count // 2):
            return found
        size = longer


def flank_angle(insert: Insert, height: float, *, side: Side) -> float:
    """Angle between one flank and the insert's middle line at a height [rad], from the local parabola.

    Raises: ValueError for a height the profile does not reach.  Source: atan dW/dh.
    """
    found = bends(insert.heights, half_widths(insert, side))
    at = int(np.argmin(np.abs(found.heights - on_profile(insert, height))))
    return math.atan(float(found.slope[at] + found.second[at] * (height - found.heights[at])))


def included_angle(insert: Insert, height: float) -> float:
    """Angle between the two flanks' tangents at a height [rad]; at pitch height what a protractor is set to.

    On a hollow flank it changes with the height, so it is worth nothing without it.
    Raises: ValueError for a height the profile does not reach.  Source: sum of both flanks' angles.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> round(math.degrees(included_angle(measured_insert(h, 1.1 + math.tan(math.radians(20.0)) * h), 3.0)), 6)
    40.0
    """
    return sum(flank_angle(insert, height, side=side) for side in SIDES)


def largest_corner(insert: Insert, clearance: float) -> float:
    """Largest radius that may round the corners of the tip [mm]: it ends below the worm's tip, where nothing touches.

    r = c/(1 - sin psi), psi the flank's angle at the tip, and no more than half the tip holds, W cos psi/(1 - sin psi).
    clearance  of the tip below the worm's tip [mm], >= 0; the smaller of both flanks counts
    Raises: ValueError for a clearance below zero.  Source: circle that touches tip and flank, derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> round(largest_corner(measured_insert(h, 1.1 + math.tan(math.radians(20.0)) * h), 0.4), 3)
    0.608
    """
    not_below_zero(clearance=clearance)
    most = math.inf
    for side in SIDES:
        psi = flank_angle(insert, 0.0, side=side)
        within_tip = float(half_widths(insert, side)[0]) * math.cos(psi)
        most = min(most, min(clearance, within_tip) / (1.0 - math.sin(psi)))
    return most


def smallest_hollow(insert: Insert, *, side: Side, live_from: float = 0.0, live_to: float = math.inf) -> Hollow:
    """Smallest concave radius of a flank between two heights above its tip [mm].

    live_from  where the profile that touches begins (`contact_begins`); below it the flank is a straight run-out, and a
               window across the bend between both would tell too large a radius
    live_to    below the throat's corner, where an envelope has a bend of its own, sharp and less than 2 um deep
               (`wheel_edge.metal_left` tells it)
    Half a window at either end is reached by continuing the square of the radius evenly, as on an involute, where
    d(rho^2)/ds = 2 rb.
    Raises: ValueError for fewer than five points between them, or points that are no profile.
    Source: local least squares (`bends`); involute: rho = rb t, ds = rb t dt (textbook).

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 5.0, 51)
    >>> arc = measured_insert(h, 11.0 - np.sqrt(100.0 - (h + 1.0) ** 2))
    >>> round(smallest_hollow(arc, side=1).radius, 1)
    10.0
    """
    live = (insert.heights >= live_from) & (insert.heights <= live_to)
    if live.sum() < FEWEST:
        raise ValueError(
            f"only {live.sum()} points of the insert stand between {live_from:g} and {live_to:g} mm: five are the least that "
            f"tell a radius"
        )
    heights = insert.heights[live]
    found = bends(heights, half_widths(insert, side)[live])
    at = int(np.argmax(found.curvature))
    strongest, error, where = (float(v[at]) for v in (found.curvature, found.error, found.heights))
    reach = (len(heights) - len(found.heights)) // 2
    for end, inner in ((0, reach), (-1, -1 - reach)) if len(found.heights) > reach else ():
        beyond = _continued(found, end, inner, float(heights[end]))
        if beyond > strongest:
            strongest, error, where = beyond, 3.0 * float(found.error[end]), float(heights[end])
    return Hollow(radius=_radius(strongest, heights), height=where, at_least=_radius(strongest + 2.0 * error, heights))


def contact_begins(pair: Pair, cut: Cut) -> float:
    """Height above the insert's tip at which the mid-plane profile begins to touch the worm [mm].

    Below it the insert runs out along the tangent.  Source: `first_contact` seen on the cutter.

    >>> from setupcheck.worm.helicoid import Thread
    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.5, reference_diameter=30.0, tip_diameter=35.0,
    ...               pressure_angle=math.radians(20.0), thickness=math.pi * 1.25)
    >>> cut = Cut(radius=29.75, tilt=math.atan(1.0 / 12.0), clearance=0.5)
    >>> round(contact_begins(Pair(thread=worm, teeth=40, centre_distance=65.0), cut), 3)
    0.976
    """
    z = np.zeros(1)
    r = first_contact(pair, z)
    rc, _ = on_cutter(pair, cut, r, conjugate_gap(pair, r, z).angle, z)
    return cut.radius - float(rc[0])


def _refuse_no_profile(heights: Array, half_width: Array) -> None:
    if heights.ndim != 1 or heights.shape != half_width.shape or len(heights) < FEWEST:
        raise ValueError("a flank needs at least five points: a height above the tip and a half width for each")
    if not (np.isfinite(heights).all() and np.isfinite(half_width).all()):
        raise ValueError("a height or width of the flank is missing: every point needs both its numbers")
    steps = np.diff(heights)
    if not np.all(steps > 0.0):
        at = int(np.argmin(steps))
        raise ValueError(
            f"after {heights[at]:g} mm comes {heights[at + 1]:g} mm: a loop, or points out of order; heights must rise from "
            f"point to point"
        )
    if steps.max() > WIDEST_STEP * (heights[-1] - heights[0]):
        at = int(np.argmax(steps))
        raise ValueError(
            f"between {heights[at]:g} and {heights[at + 1]:g} mm the flank has no points: steps of a quarter of its height at "
            f"most"
        )


def _parabolas(heights: Array, widths: Array, size: int) -> Bends:
    """Least-squares parabola through every run of `size` neighbouring points."""
    h = np.lib.stride_tricks.sliding_window_view(heights, size)
    w = np.lib.stride_tricks.sliding_window_view(widths, size)
    middle = 0.5 * (h[:, :1] + h[:, -1:])
    half = 0.5 * (h[:, -1:] - h[:, :1])
    u = (h - middle) / half
    powers = np.stack([np.ones_like(u), u, u * u], axis=-1)
    level = w[:, :1]
    fitted = np.linalg.pinv(powers) @ (w - level)[..., np.newaxis]
    left_over = ((powers @ fitted)[..., 0] - (w - level)) ** 2
    spare = size - 3
    scatter2 = float(np.median(left_over.sum(axis=1))) / spare / (1.0 - 2.0 / (9.0 * spare)) ** 3
    spread = np.linalg.inv(np.swapaxes(powers, 1, 2) @ powers)[:, 2, 2]
    scale = half[:, 0]
    slope = fitted[:, 1, 0] / scale
    second = 2.0 * fitted[:, 2, 0] / scale**2
    bend = (1.0 + slope**2) ** -1.5
    return Bends(
        heights=middle[:, 0],
        slope=slope,
        second=second,
        curvature=second * bend,
        error=2.0 * np.sqrt(scatter2 * spread) / scale**2 * bend,
    )


def _continued(found: Bends, end: int, inner: int, place: float) -> float:
    """Curvature at an end of the profile, half a window beyond the last one; 0 where no rise stands out of the scatter."""
    outer, before = float(found.curvature[end]), float(found.curvature[inner])
    if before <= 0.0 or not outer - before > 3.0 * float(found.error[end] + found.error[inner]):
        return 0.0
    share = (place - float(found.heights[end])) / float(found.heights[end] - found.heights[inner])
    squared = outer**-2 + (outer**-2 - before**-2) * share
    return squared**-0.5 if squared > 0.0 else math.inf


def _radius(curvature: float, heights: Array) -> float:
    """1/curvature; inf where it is convex or straight within the last bits of the points."""
    return 1.0 / curvature if curvature * STRAIGHT * float(heights[-1] - heights[0]) > 1.0 else math.inf


def slope_and_width(insert: Insert, heights: Array, *, side: Side) -> tuple[Array, Array]:
    """dW/dh and half width of one flank at heights above its tip, (n,); smooth between the points.

    Raises: ValueError for heights the profile does not reach.
    """
    on_profile(insert, float(np.min(heights)))
    on_profile(insert, float(np.max(heights)))
    width, slope = curve(insert.heights, half_widths(insert, side)).at(heights)
    return slope, width
