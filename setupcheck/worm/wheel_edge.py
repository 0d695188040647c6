"""The rounded edge of a grinding wheel against the flank of an insert: centres, cusps, what it cannot reach. mm, rad.

The edge of the wheel is an arc in the plane of the insert's face. Frame: x from the insert's middle line out towards the flank
that is ground, h up from the tip; x = W(h) is the flank and psi its angle, tan psi = W'. The wheel stands outside, x > W.
"""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Side
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.insert_profile import SIDES, slope_and_width
from setupcheck.worm.plunge_gap import Insert

FINE = 1001
"""Heights at which a flank is looked at for what a wheel cannot reach; 1e-6 mm are kept. Chosen here."""

BETWEEN = 201
"""Places looked at between two plunges; a cusp is found to 1 %, one on even curvature exactly. Chosen here."""

LEFT = 0.002
"""Metal a wheel may leave in a hollow [mm]: half of what a projector shows at 50:1. Our screening choice."""

LARGEST_SHARE = 0.8
"""Radius of the wheel's edge over the largest that fits. Our screening choice: an edge just as large as the hollow touches along
a line, and an edge that wears grows flatter than it was measured."""


@record(eq=False)
class Centres:
    """Centres of the wheel's edge for contact at some heights of a flank; arrays of one length.

    across, along  x and h of the centre [mm]
    psi            angle of the flank where it touches [rad]
    lifted         how much the wheel keeps off the point because it would bite elsewhere first [mm, along x]
    """

    across: Array
    along: Array
    psi: Array
    lifted: Array


@record(kw_only=True)
class MetalLeft:
    """Most metal that a wheel leaves because its edge is too large for a hollow, square to the flank [mm], and where."""

    most: float
    height: float


def wheel_centres(insert: Insert, heights: Array, *, wheel_radius: float, side: Side) -> Centres:
    """Where the centre of the wheel's edge must stand to touch a flank at heights above the tip, (n,).

    x = W + r cos psi,  h_c = h - r sin psi: the point plus the radius along the outward normal. Where that would bite into
    another place of the flank the wheel is kept out just as far as it must: x = max of W(h') + sqrt(r^2 - (h' - h_c)^2).
    Raises: ValueError for a wheel radius not above zero or heights the profile does not reach.
    Source: offset curve (textbook); the maximum is the same for every point of the flank, derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> at = wheel_centres(measured_insert(h, 1.0 + 0.75 * h), np.array([2.0]), wheel_radius=5.0, side=1)
    >>> [round(float(v[0]), 6) for v in (at.across, at.along)]
    [6.5, -1.0]
    """
    above_zero(wheel_radius=wheel_radius)
    heights = np.asarray(heights, dtype=float)
    slope, width = slope_and_width(insert, heights, side=side)
    psi = np.arctan(slope)
    across, along = width + wheel_radius * np.cos(psi), heights - wheel_radius * np.sin(psi)
    fine = np.linspace(insert.heights[0], insert.heights[-1], FINE)
    nearest = (slope_and_width(insert, fine, side=side)[1] + _chord(along[:, np.newaxis] - fine, wheel_radius)).max(
        axis=1
    )
    kept_out = np.maximum(across, nearest)
    return Centres(kept_out, along, psi, kept_out - across)


def metal_left(insert: Insert, *, wheel_radius: float, side: Side) -> MetalLeft:
    """Most metal a wheel leaves on a flank when it goes all along it as deep as it can without biting.

    Zero where the edge's radius is smaller than the hollow's; a sharp bend holds r D^2/8, D the angle it turns by.
    Raises: ValueError for a wheel radius not above zero.
    Source: rolling a disc along a profile (mathematical closing); derived here.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 5.0, 51)
    >>> arc = measured_insert(h, 11.0 - np.sqrt(100.0 - (h + 1.0) ** 2))
    >>> [round(1e3 * metal_left(arc, wheel_radius=r, side=1).most) for r in (8.0, 12.0)]
    [0, 63]
    """
    fine = np.linspace(insert.heights[0], insert.heights[-1], FINE)
    at = wheel_centres(insert, fine, wheel_radius=wheel_radius, side=side)
    width = slope_and_width(insert, fine, side=side)[1]
    ground = (at.across - _chord(fine[:, np.newaxis] - at.along, wheel_radius)).min(axis=1)
    left = np.maximum(ground - width, 0.0) * np.cos(at.psi)
    worst = int(np.argmax(left))
    return MetalLeft(most=float(left[worst]), height=float(fine[worst]))


def largest_wheel(insert: Insert, *, side: Side, left: float = LEFT) -> float:
    """Largest radius of a wheel's edge that leaves no more than `left` on a flank [mm], by halving to 0.1 %.

    inf where even an edge a thousand times the flank's height leaves less: straight or convex.
    Raises: ValueError for `left` not above zero.  Source: `metal_left`.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 5.0, 51)
    >>> round(largest_wheel(measured_insert(h, 11.0 - np.sqrt(100.0 - (h + 1.0) ** 2)), side=1, left=1e-4), 1)
    10.0
    """
    above_zero(left=left)

    def fits(radius: float) -> bool:
        return metal_left(insert, wheel_radius=radius, side=side).most <= left

    tallest = float(insert.heights[-1])
    low, high = 1e-3 * tallest, 1e3 * tallest
    if fits(high):
        return math.inf
    while high > 1.001 * low:
        middle = math.sqrt(low * high)
        low, high = (middle, high) if fits(middle) else (low, middle)
    return low


def refuse_gouging(insert: Insert, *, wheel_radius: float, side: Side, left: float = LEFT) -> None:
    """Refuses a wheel whose edge does not go into the hollow of a flank.

    Raises: ValueError that tells 0.8 of the largest that does.
    """
    found = metal_left(insert, wheel_radius=wheel_radius, side=side)
    if found.most > left:
        fits = LARGEST_SHARE * largest_wheel(insert, side=side, left=left)
        raise ValueError(
            f"an edge of {wheel_radius:g} mm radius is too large for the hollow of the {SIDES[side]} flank: "
            f"{found.height:.2f} mm above the tip it gouges, or leaves {1e3 * found.most:.2g} um; {fits:.2g} mm or less would "
            f"be right"
        )


def cusps(insert: Insert, heights: Array, *, wheel_radius: float, side: Side) -> Array:
    """Metal left standing between neighbouring plunges of the wheel at heights (n,), square to the flank [mm], (n - 1,).

    Along the flank, t from a plunge, the wheel stands off by t^2/(2 r) less what the flank bends away from its tangent there;
    the cusp is where the two wheels meet. On a flank of even curvature s^2/8 (1/r - 1/rho), s the chord: a straight one
    leaves s^2/(8 r), one as hollow as the edge is large leaves nothing.
    Validity: s well below r; at s = r/2 it is 2 % low.
    Raises: ValueError for heights that do not rise, or plunges so far apart that they do not meet.
    Source: derived here; tests/unit/worm compares it with discs taken out of the metal one by one.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> flat = measured_insert(h, 1.0 + 0.75 * h)
    >>> [round(1e3 * float(c), 3) for c in cusps(flat, np.array([0.0, 0.16, 0.48]), wheel_radius=5.0, side=1)]
    [1.0, 4.0]
    """
    if not np.all(np.diff(heights) > 0.0):
        raise ValueError("the heights of the points to be ground must rise from tip to top: sort them")
    centres = wheel_centres(insert, heights, wheel_radius=wheel_radius, side=side)
    fine, psi, length = along_flank(insert, side)
    bent = np.concatenate([[0.0], np.cumsum(0.5 * (psi[1:] + psi[:-1]) * np.diff(length))])
    s, bent_there = np.interp(heights, fine, length), np.interp(heights, fine, bent)
    apart = np.diff(s)
    if len(apart) and apart.max() >= 2.0 * wheel_radius:
        raise ValueError(
            f"points {apart.max():.3g} mm apart leave a wheel of {wheel_radius:g} mm edge radius no common metal: more points"
        )
    between = s[:-1, np.newaxis] + apart[:, np.newaxis] * np.linspace(0.0, 1.0, BETWEEN)
    bends = np.interp(between, length, bent)

    def stands_off(at: slice) -> Array:
        t = between - s[at, np.newaxis]
        bends_away = bends - bent_there[at, np.newaxis] - centres.psi[at, np.newaxis] * t
        off = t * t / (2.0 * wheel_radius) - bends_away + (centres.lifted * np.cos(centres.psi))[at, np.newaxis]
        return np.asarray(off, dtype=float)

    lowest = np.minimum(stands_off(slice(None, -1)), stands_off(slice(1, None)))
    return np.asarray(np.maximum(lowest.max(axis=1), 0.0), dtype=float)


def along_flank(insert: Insert, side: Side) -> tuple[Array, Array, Array]:
    """Heights close together, the flank's angle there [rad] and its length from the tip [mm]; (FINE,) each."""
    fine = np.linspace(insert.heights[0], insert.heights[-1], FINE)
    slope, width = slope_and_width(insert, fine, side=side)
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(fine), np.diff(width)))])
    return fine, np.arctan(slope), length


def _chord(off: Array, radius: float) -> Array:
    """Half the chord of a circle at a distance from its middle; far below zero outside it."""
    room = radius * radius - off * off
    return np.where(room >= 0.0, np.sqrt(np.maximum(room, 0.0)), -1e9)
