"""Insert for a plunged cutter made from the exact gap: mid-plane section, or the envelope that nothing of the worm enters.

Lengths mm, angles rad. Both flanks of these inserts are alike, as the gap is when it is turned half round.
"""

from __future__ import annotations

import numpy as np

from setupcheck.worm.conjugate import Pair, conjugate_gap, first_contact
from setupcheck.worm.helicoid import Array
from setupcheck.worm.plunge_gap import Curve, Cut, Insert, check_size, curve, on_cutter
from setupcheck.worm.wheel_flank import Blank

POINTS = 240
"""Heights at which a profile is tabulated; cubic between them, so that 1e-6 mm are kept. Chosen here."""

NOTHING = -1e9
"""Width [mm] that stands for no metal at all."""

MARGIN = 0.1
"""What a profile goes on beyond the highest point of the flank, in modules, for a cutter set a little wrong. Chosen here."""


def mid_plane_insert(pair: Pair, blank: Blank, cut: Cut) -> Insert:
    """Insert copied from the wheel's mid-plane section: W = x cos tau over rc = hypot(ac - y, x sin tau).

    cut  radius, tilt and clearance it is made for; errors of setting are left out
    From the start of contact to the height of the teeth's highest corner; below, down to the tip, along its tangent.
    Raises: ValueError for a cutter smaller than the worm.
    Source: derived here; ZA: an exact involute, compared with worm.insert in tests/unit/worm.
    """
    made = _made_for(pair, cut)
    rc, _ = _sections(pair, blank, made, columns=41)
    heights = _heights(pair, made, float(rc.min()))
    return _insert(heights, _mid_section(pair, made, float(rc.min())).at(made.radius - heights)[0])


def envelope_insert(pair: Pair, blank: Blank, cut: Cut, *, columns: int = 97) -> Insert:
    """Insert whose body holds all that the thread touches: W(rc) = max of v over the conjugate flank at equal rc.

    cut      radius, tilt and clearance it is made for; errors of setting are left out
    columns  planes across the face that are looked at; between them the maximum is that of a parabola
    Below the start of contact, where nothing touches, it goes on parallel to the mid-plane's tangent; above the corner of
    the tooth that stands out farthest along its own tangent.
    Raises: ValueError for a cutter smaller than the worm.
    Source: derived here: the smallest body of revolution that lets the thread pass.
    """
    made = _made_for(pair, cut)
    rc, v = _sections(pair, blank, made, columns=columns)
    heights = _heights(pair, made, float(rc.min()))
    at = made.radius - heights
    widths = np.empty((columns, len(heights)))
    for i in range(columns):
        widths[i] = curve(rc[::-1, i], v[::-1, i]).at(at)[0]
        widths[i][at < rc[-1, i]] = NOTHING  # above the tooth's tip
    touched = np.where(at <= rc[0][:, np.newaxis], widths, NOTHING).max(axis=0)
    middle = _mid_section(pair, made, float(rc.min()))
    start = float(middle.x[-1])  # where contact begins in the mid-plane
    peak = np.maximum(_peak(widths), _edge(pair, blank, made, at, planes=8 * columns))
    shrinks = np.flatnonzero(np.diff(peak) < 0.0)  # above the corner that stands out farthest; an insert cannot shrink
    live = len(peak) if len(shrinks) == 0 else int(shrinks[0]) + 1
    whole = curve(at[:live][::-1], peak[:live][::-1])
    peak = np.maximum(whole.at(at)[0], peak)
    below = middle.at(at)[0] + float(whole.at(np.array(start))[0] - middle.y[-1])
    return _insert(heights, np.where(at <= start, peak, np.maximum(below, touched)))


def _mid_section(pair: Pair, cut: Cut, nearest: float) -> Curve:
    """Mid-plane section of the right flank on the cutter, v over rc, from first contact to a little beyond `nearest`."""
    bottom = float(first_contact(pair, np.array(0.0)))
    top = 1.01 * (cut.axis(pair) - nearest) + MARGIN * pair.thread.axial_module
    r, z = np.linspace(bottom, top, POINTS), np.zeros(POINTS)
    rc, v = on_cutter(pair, cut, r, conjugate_gap(pair, r, z).angle, z)
    return curve(rc[::-1], v[::-1])


def _made_for(pair: Pair, cut: Cut) -> Cut:
    check_size(pair, cut)
    return Cut(radius=cut.radius, tilt=cut.tilt, clearance=cut.clearance)


def _heights(pair: Pair, cut: Cut, nearest: float) -> Array:
    return np.linspace(0.0, cut.radius - nearest + MARGIN * pair.thread.axial_module, POINTS)


def _insert(heights: Array, width: Array) -> Insert:
    if not width[0] > 0.0:
        raise ValueError("the insert closes to a point above its tip: less clearance or a thicker thread is needed")
    return Insert(heights, width, width)


def _sections(pair: Pair, blank: Blank, cut: Cut, *, columns: int) -> tuple[Array, Array]:
    """Cutter radius and axial place on the cutter of the right conjugate flank, from first contact to tip: (40, columns)."""
    z = np.linspace(-blank.face_width / 2.0, blank.face_width / 2.0, columns)
    bottom, top = first_contact(pair, z), blank.top(z)
    bottom = np.minimum(bottom, top - 0.05 * pair.thread.axial_module)
    r = bottom + (top - bottom) * np.linspace(0.0, 1.0, 40)[:, np.newaxis]
    planes = np.broadcast_to(z, r.shape)
    return on_cutter(pair, cut, r, conjugate_gap(pair, r, planes).angle, planes)


def _edge(pair: Pair, blank: Blank, cut: Cut, at: Array, *, planes: int) -> Array:
    """Largest v of the tooth's tip edge at cutter radii `at`, (n,); where the edge does not pass, NOTHING.

    Between planes of the face the edge is taken as straight.
    """
    z = np.linspace(-blank.face_width / 2.0, blank.face_width / 2.0, planes)
    r = blank.top(z)
    rc, v = on_cutter(pair, cut, r, conjugate_gap(pair, r, z).angle, z)
    part = (at[:, np.newaxis] - rc[:-1]) / np.where(np.diff(rc) == 0.0, 1.0, np.diff(rc))
    return np.where((part >= 0.0) & (part <= 1.0), v[:-1] + part * np.diff(v), NOTHING).max(axis=1)


def _peak(values: Array) -> Array:
    """Largest value down each column of (planes, n), refined by the parabola through its neighbours."""
    n = np.arange(values.shape[1])
    i = np.clip(np.argmax(values, axis=0), 1, len(values) - 2)
    before, at, after = values[i - 1, n], values[i, n], values[i + 1, n]
    bend = before - 2.0 * at + after
    peak = at - np.where(bend < 0.0, (after - before) ** 2 / (8.0 * np.where(bend < 0.0, bend, -1.0)), 0.0)
    real = np.minimum(before, after) > NOTHING / 2.0
    return np.maximum(np.maximum(before, after), np.where(real & (peak > at), peak, at))
