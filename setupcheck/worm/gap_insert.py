"""Insert for a plunged cutter made from the exact gap: mid-plane section, or the envelope that nothing of the worm enters.

Lengths mm, angles rad. Both flanks of these inserts are alike, as the gap comes back on itself by half a turn about the line
of centres. The sections of the gap do not depend on the cutter: compute them once where many cutters are compared.
"""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Pair, conjugate_gap, first_contact
from setupcheck.worm.helicoid import Array
from setupcheck.worm.plunge_gap import Curve, Cut, Insert, check_size, curve, on_curves, on_cutter
from setupcheck.worm.wheel_flank import Blank, ends_of_flank

POINTS = 240
"""Heights at which a profile is tabulated; cubic between them, so that 1e-6 mm are kept. Chosen here."""

NOTHING = -1e9
"""Width [mm] that stands for no metal at all."""

HIGHER = 0.02
"""How much higher than the tooth's tip an envelope still holds the flank, in modules: without it the corners of the teeth
are the first to ride when the tilt is a little wrong. Chosen here."""

MARGIN = 0.1
"""What a profile goes on beyond the highest point of the flank, in modules, for a cutter set a little wrong. Chosen here."""


@record(eq=False)
class Sections:
    """Right flank of the conjugate gap in planes across the face, from first contact to a little above the tooth's tip.

    r, angle       (40, planes) [mm, rad];  z (planes,) [mm]
    edge_r, edge_angle, edge_z   the top of it, closer together, (n,)
    middle_r, middle_angle       mid-plane section, from first contact on beyond the throat, (n,)
    """

    pair: Pair
    r: Array
    angle: Array
    z: Array
    edge_r: Array
    edge_angle: Array
    edge_z: Array
    middle_r: Array
    middle_angle: Array


def sections(pair: Pair, blank: Blank, *, planes: int = 97) -> Sections:
    """Sections of the gap that inserts are made from; planes  across the face, 9 or more.

    Raises: ValueError for a face or throat the worm does not reach.  Source: `conjugate_gap`.
    """
    if planes < 9:
        raise ValueError("fewer than 9 planes miss where the envelope touches: 49 to 97 are usual")
    higher = HIGHER * pair.thread.axial_module
    z, edge_z = (np.linspace(-0.5, 0.5, n) * blank.face_width for n in (planes, 8 * planes))
    ends_of_flank(pair, blank, z)
    top, edge_r = blank.top(z) + higher, blank.top(edge_z) + higher
    bottom = np.minimum(first_contact(pair, z), top - 0.05 * pair.thread.axial_module)
    r = bottom + (top - bottom) * np.linspace(0.0, 1.0, 40)[:, np.newaxis]
    deepest = pair.centre_distance - 1.02 * pair.thread.innermost
    middle_r = np.linspace(float(first_contact(pair, np.array(0.0))), min(float(top.max()) + higher, deepest), POINTS)
    return Sections(
        pair=pair,
        r=r,
        angle=conjugate_gap(pair, r, z).angle,
        z=z,
        edge_r=edge_r,
        edge_angle=conjugate_gap(pair, edge_r, edge_z).angle,
        edge_z=edge_z,
        middle_r=middle_r,
        middle_angle=conjugate_gap(pair, middle_r, np.zeros(POINTS)).angle,
    )


def mid_plane_insert(gap: Sections, cut: Cut) -> Insert:
    """Insert copied from the wheel's mid-plane section: W = x cos tau over rc = hypot(ac - y, x sin tau).

    cut  radius, tilt and clearance it is made for; errors of setting are left out
    From the start of contact to the height of the teeth's highest corner; below, down to the tip, along its tangent.
    Raises: ValueError for a cutter smaller than the worm.
    Source: derived here; ZA: an exact involute, compared with worm.insert in tests/unit/worm.
    """
    made = _made_for(gap.pair, cut)
    heights = _heights(gap, made, on_cutter(gap.pair, made, gap.r, gap.angle, gap.z)[0])
    return _insert(heights, _middle(gap, made).at(made.radius - heights)[0])


def envelope_insert(gap: Sections, cut: Cut) -> Insert:
    """Insert whose body holds all that the thread touches: W(rc) = max of v over the conjugate flank at equal rc.

    cut      radius, tilt and clearance it is made for; errors of setting are left out
    Below the start of contact, where nothing touches, it goes on parallel to the mid-plane's tangent; above the corner of
    the tooth that stands out farthest along its own tangent. Between planes the maximum is that of a parabola.
    Raises: ValueError for a cutter smaller than the worm.
    Source: derived here: the smallest body of revolution that lets the thread pass.

    >>> from setupcheck.worm.helicoid import Thread
    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.5, reference_diameter=30.0, tip_diameter=35.0,
    ...               pressure_angle=np.radians(20.0), thickness=np.pi * 1.25)
    >>> blank = Blank(face_width=16.0, throat_diameter=105.0, throat_radius=12.5, outside_diameter=107.5)
    >>> gap = sections(Pair(thread=worm, teeth=40, centre_distance=65.0), blank, planes=33)
    >>> cut = Cut(radius=29.75, tilt=np.arctan(1.0 / 12.0), clearance=0.5)
    >>> [[round(insert(gap, cut).width(h), 2) for h in (0.0, 3.0, 5.5)] for insert in (mid_plane_insert, envelope_insert)]
    [[2.15, 3.94, 6.43], [2.17, 3.95, 6.59]]
    """
    made = _made_for(gap.pair, cut)
    rc, v = on_cutter(gap.pair, made, gap.r, gap.angle, gap.z)
    heights = _heights(gap, made, rc)
    at = made.radius - heights
    widths = _in_planes(gap, rc, v, at)
    touched = np.where(at <= rc[0][:, np.newaxis], widths, NOTHING).max(axis=0)
    peak = np.maximum(_peak(widths), _edge(gap, made, at))
    shrinks = np.flatnonzero(np.diff(peak) < 0.0)  # above the corner that stands out farthest; an insert cannot shrink
    live = len(peak) if len(shrinks) == 0 else int(shrinks[0]) + 1
    whole = curve(at[:live][::-1], peak[:live][::-1])
    peak = np.maximum(whole.at(at)[0], peak)
    middle = _middle(gap, made)
    start = float(middle.x[-1])  # where contact begins in the mid-plane
    below = middle.at(at)[0] + float(whole.at(np.array(start))[0] - middle.y[-1])
    return _insert(heights, np.where(at <= start, peak, np.maximum(below, touched)))


def flank_height(gap: Sections, cut: Cut) -> float:
    """Height above the tip that the flank of the gap takes, up to its highest corner [mm]; profiles go on a little beyond.

    Raises: ValueError for a cutter smaller than the worm.  Source: the frame of worm.plunge_gap.
    """
    made = _made_for(gap.pair, cut)
    return made.radius - float(on_cutter(gap.pair, made, gap.r, gap.angle, gap.z)[0].min())


def widened(gap: Sections, by: float) -> Sections:
    """The sections of a gap that is wider by so much along the rolling circle [mm], for backlash; both flanks turn alike.

    Raises: ValueError for a width that is no number.  Source: a flank turned about the wheel's axis stays conjugate.
    """
    if not math.isfinite(by):
        raise ValueError("a gap is widened by a number, 0 where it fits the thread")
    turn = 0.5 * by / gap.pair.rolling
    return replace(gap, angle=gap.angle + turn, edge_angle=gap.edge_angle + turn, middle_angle=gap.middle_angle + turn)


def end_takes_over(gap: Sections, cut: Cut) -> float:
    """Height above the tip up to which an envelope is made by the ridge inside the face [mm].

    Above it an end of the face or the edge of the tooth's tip stands out farthest, and the profile has a bend there that no
    radius describes. The whole height of the profile where neither ever does; where contact begins, if one does from there.
    Raises: ValueError for a cutter smaller than the worm.  Source: which section is the widest, height by height.
    """
    made = _made_for(gap.pair, cut)
    rc, v = on_cutter(gap.pair, made, gap.r, gap.angle, gap.z)
    heights = _heights(gap, made, rc)
    at = made.radius - heights
    widths = _in_planes(gap, rc, v, at)
    widest = np.argmax(widths, axis=0)
    outermost = (widest == 0) | (widest == len(gap.z) - 1) | (_edge(gap, made, at) > widths.max(axis=0))
    start = made.radius - float(_middle(gap, made).x[-1])
    over = np.flatnonzero(outermost & (heights > start))
    return float(heights[-1]) if len(over) == 0 else max(start, float(heights[over[0] - 1]))


def _in_planes(gap: Sections, rc: Array, v: Array, at: Array) -> Array:
    """Width of each plane's section at cutter radii `at`, (planes, n); NOTHING above the tooth's tip."""
    x, y = np.ascontiguousarray(rc[::-1].T), np.ascontiguousarray(v[::-1].T)
    return np.where(at < x[:, :1], NOTHING, on_curves(x, y, at))


def _middle(gap: Sections, cut: Cut) -> Curve:
    """Mid-plane section of the right flank on the cutter, v over rc."""
    rc, v = on_cutter(gap.pair, cut, gap.middle_r, gap.middle_angle, np.zeros(POINTS))
    return curve(rc[::-1], v[::-1])


def _made_for(pair: Pair, cut: Cut) -> Cut:
    check_size(pair, cut)
    return Cut(radius=cut.radius, tilt=cut.tilt, clearance=cut.clearance)


def _heights(gap: Sections, cut: Cut, rc: Array) -> Array:
    return np.linspace(0.0, cut.radius - float(rc.min()) + MARGIN * gap.pair.thread.axial_module, POINTS)


def _insert(heights: Array, width: Array) -> Insert:
    if not width[0] > 0.0:
        raise ValueError("the insert closes to a point above its tip: less clearance or a thicker thread is needed")
    return Insert(heights, width, width)


def _edge(gap: Sections, cut: Cut, at: Array) -> Array:
    """Largest v of the tooth's tip edge at cutter radii `at`, (n,); where the edge does not pass, NOTHING.

    Between its points the edge is taken as straight.
    """
    rc, v = on_cutter(gap.pair, cut, gap.edge_r, gap.edge_angle, gap.edge_z)
    part = (at[:, np.newaxis] - rc[:-1]) / np.where(np.diff(rc) == 0.0, 1.0, np.diff(rc))
    passing = np.where((part >= 0.0) & (part <= 1.0), v[:-1] + part * np.diff(v), NOTHING)
    return np.asarray(passing.max(axis=1), dtype=float)


def _peak(values: Array) -> Array:
    """Largest value down each column of (planes, n), refined by the parabola through its neighbours."""
    n = np.arange(values.shape[1])
    i = np.clip(np.argmax(values, axis=0), 1, len(values) - 2)
    before, at, after = values[i - 1, n], values[i, n], values[i + 1, n]
    bend = before - 2.0 * at + after
    inside = (np.minimum(before, after) > NOTHING / 2.0) & (at >= np.maximum(before, after)) & (bend < 0.0)
    more = np.where(inside, (after - before) ** 2 / (-8.0 * np.where(bend < 0.0, bend, -1.0)), 0.0)
    return np.asarray(np.maximum(np.maximum(before, after), at + more), dtype=float)
