"""The gap that a single-point cutter leaves when it is plunged once: a body of revolution, with every error of its setting.

The cutter turns about an axis at height ac = a + R - ra1 - c, swung from the wheel's axis by the tilt, in the plane z = offset:
    v = x cos tau - hs z sin tau,  t = hs x sin tau + z cos tau,  rc = hypot(ac - y, t);   gap: -W_left(rc) <= v <= W_right(rc)
W is the half width of the revolved insert. Its profile grows steadily towards the throat, so what is left is what the last
position leaves. Lengths mm, angles rad.
"""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Pair, Side
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array

STEPS = 8
"""Newton steps from the conjugate flank to the cut one; four suffice, more cost little. Chosen here."""


@record(kw_only=True)
class Cut:
    """Setting of the cutter [mm, rad].

    radius      from the axis of the bar to the insert's tip, along the insert's face
    tilt        of the cutter's axis, positive the way the hand needs
    clearance   the circle of the tip below the worm's tip, at the pair's centre distance, as touched off; where the depth
                comes from the bar's radius instead, a tip off its axis is off_centre^2/(2 R) deeper
    offset      plane of the cutter from the wheel's mid-plane, along +z
    off_centre  insert's face from the axis of the bar; above and below centre act alike but for `raked` and `swung`
    turned      insert turned in its own face about the middle of its tip, its wide end towards +v
    raked       face turned about the line across its tip (rake), so that heights shorten
    swung       face turned about the radial line, so that widths shorten
    Raises: ValueError for a radius not above zero, no clearance, or angles beyond 45 deg.
    """

    radius: float
    tilt: float
    clearance: float
    offset: float = 0.0
    off_centre: float = 0.0
    turned: float = 0.0
    raked: float = 0.0
    swung: float = 0.0

    def __post_init__(self) -> None:
        above_zero(cutter_radius=self.radius)
        if not 0.0 <= self.clearance < math.inf:
            raise ValueError(
                f"a clearance of {self.clearance:g} mm lets the worm's tip run on the bottom of the gap: cut deeper"
            )
        for name in ("tilt", "turned", "raked", "swung"):
            if not abs(getattr(self, name)) < math.pi / 4.0:
                raise ValueError(f"the angle {name} must lie within 45 deg either way")
        if not abs(self.off_centre) < self.radius or not math.isfinite(self.offset):
            raise ValueError("the insert's face must lie within the cutter, and its offset be a number")

    @property
    def tip_circle(self) -> float:
        """Radius of the circle on which the tip turns [mm]: larger than `radius` off the bar's axis."""
        return math.hypot(self.radius, self.off_centre)

    def axis(self, pair: Pair) -> float:
        """Distance of the cutter's axis from the wheel's [mm]."""
        return pair.lowest - self.clearance + self.tip_circle


@record(eq=False)
class Curve:
    """A smooth curve y(x) through points, x rising: cubic pieces with parabolic slopes; beyond its ends, its tangents.

    x, y, slope  (n,)
    """

    x: Array
    y: Array
    slope: Array

    def at(self, x: Array) -> tuple[Array, Array]:
        """Value and slope at x, any shape."""
        inside = np.clip(x, self.x[0], self.x[-1])
        i = np.clip(np.searchsorted(self.x, inside, side="right") - 1, 0, len(self.x) - 2)
        step = self.x[i + 1] - self.x[i]
        u = (inside - self.x[i]) / step
        chord = (self.y[i + 1] - self.y[i]) / step
        a, b = self.slope[i] - chord, self.slope[i + 1] - chord
        value = self.y[i] + step * u * (chord + (1.0 - u) * (a * (1.0 - u) - b * u))
        slope = chord + a * (1.0 - u) * (1.0 - 3.0 * u) + b * u * (3.0 * u - 2.0)
        return value + slope * (x - inside), slope


def curve(x: Array, y: Array) -> Curve:
    """Curve through points with x rising, (n,), n >= 3.  Source: parabola through three neighbours for each slope."""
    return Curve(x, y, np.gradient(y, x, edge_order=2))


def on_curves(x: Array, y: Array, at: Array) -> Array:
    """Many curves, (curves, n), at the same places (m,): the values that `curve` gives one by one, (curves, m).

    Source: as `curve`; all at once it takes a fifth of the time.
    """
    step = np.diff(x, axis=1)
    chord = np.diff(y, axis=1) / step
    before, after = step[:, :-1], step[:, 1:]
    slope = np.empty_like(y)
    slope[:, 1:-1] = (after * chord[:, :-1] + before * chord[:, 1:]) / (before + after)
    for end, near, far in ((0, 0, 1), (-1, -1, -2)):
        slope[:, end] = chord[:, near] + (chord[:, near] - chord[:, far]) * step[:, near] / (
            step[:, near] + step[:, far]
        )
    inside = np.clip(at, x[:, :1], x[:, -1:])
    i = np.array([np.searchsorted(mine, there, side="right") for mine, there in zip(x, inside, strict=True)]) - 1
    i = np.clip(i, 0, x.shape[1] - 2)

    def here(of: Array) -> Array:
        return np.take_along_axis(of, i, axis=1)

    h, c, u = here(step), here(chord), (inside - here(x)) / here(step)
    a, b = here(slope[:, :-1]) - c, here(slope[:, 1:]) - c
    end_slope = c + a * (1.0 - u) * (1.0 - 3.0 * u) + b * u * (3.0 * u - 2.0)
    value = here(y[:, :-1]) + h * u * (c + (1.0 - u) * (a * (1.0 - u) - b * u))
    return np.asarray(value + end_slope * (at - inside), dtype=float)


@record(eq=False)
class Insert:
    """Profile of an insert in its own face: half widths over the height above its tip, for each flank [mm].

    heights      (n,), rising from 0
    right, left  (n,), half widths from the line through the middle of the tip, both positive
    """

    heights: Array
    right: Array
    left: Array

    def width(self, height: float) -> float:
        """Full width at a height above the tip [mm]."""
        at = np.array(height)
        return float(curve(self.heights, self.right).at(at)[0] + curve(self.heights, self.left).at(at)[0])


def measured_insert(heights: Array, right: Array, left: Array | None = None) -> Insert:
    """An insert from measured points: heights above the tip, half widths to the right and left [mm], (n,) each.

    left  None: symmetric. Between points the profile is taken as smooth, so a corner wants points close together.
    Raises: ValueError for fewer than five points, heights that do not rise from 0, steps so large that the profile
    between is a guess, widths that do not grow.

    >>> h = np.linspace(0.0, 6.0, 13)
    >>> round(measured_insert(h, 1.1 + 0.35 * h).width(2.2), 3)
    3.74
    """
    sides = [np.asarray(v, dtype=float) for v in (heights, right, right if left is None else left)]
    h = sides[0]
    if h.ndim != 1 or any(v.shape != h.shape for v in sides) or len(h) < 5:
        raise ValueError("an insert needs at least five points: a height above the tip and a half width for each")
    if not all(np.isfinite(v).all() for v in sides):
        raise ValueError("a height or width of the insert is missing: every point needs all its numbers")
    if h[0] != 0.0 or not np.all(np.diff(h) > 0.0):
        raise ValueError("the insert's points must begin at its tip, height 0, and rise from point to point: sort them")
    if np.diff(h).max() > 0.25 * h[-1]:
        at = int(np.argmax(np.diff(h)))
        raise ValueError(
            f"between {h[at]:g} and {h[at + 1]:g} mm the insert has no points: steps of a quarter of its height at most"
        )
    for name, v in zip(("right", "left"), sides[1:], strict=True):
        if not np.all(np.diff(v) > 0.0):
            raise ValueError(
                f"the insert's {name} flank must grow wider from tip to throat: a loop or a slip of the pen"
            )
    if not sides[1][0] + sides[2][0] > 0.0:
        raise ValueError("the insert has no width at its tip")
    return Insert(*sides)


def revolved(insert: Insert, cut: Cut, *, side: Side) -> Curve:
    """Half width W over the cutter radius rc of the body that an insert sweeps, one flank; x of the curve is rc.

    A point at height q and width w in the face is turned by `turned`, then the face by `raked` and `swung`:
        radial U - q cos(raked), sideways e0 + q sin(raked) + w sin(swung), axial w cos(swung); rc the hypot of the first two
    Raises: ValueError where the profile then no longer grows from tip to throat.  Source: geometry, derived here.
    """
    w = insert.right if side == 1 else -insert.left
    s, c = math.sin(cut.turned), math.cos(cut.turned)
    height, across = insert.heights * c - w * s, w * c + insert.heights * s
    aside = cut.off_centre + height * math.sin(cut.raked) + across * math.sin(cut.swung)
    rc = np.hypot(cut.radius - height * math.cos(cut.raked), aside)
    if not (np.all(np.diff(rc) < 0.0) and np.all(side * np.diff(across) > 0.0)):
        raise ValueError("turned like that the insert no longer grows wider towards the throat: smaller angles, please")
    return curve(rc[::-1], side * across[::-1] * math.cos(cut.swung))


def on_cutter(pair: Pair, cut: Cut, r: Array, angle: Array, z: Array) -> tuple[Array, Array]:
    """Cutter radius rc and axial place v on the cutter of points of the wheel [mm]; arrays of one shape.

    Source: the frame above.
    """
    hs, z = pair.thread.sense, z - cut.offset
    x, y = r * np.sin(angle), r * np.cos(angle)
    s, c = math.sin(cut.tilt), math.cos(cut.tilt)
    return np.hypot(cut.axis(pair) - y, hs * s * x + c * z), c * x - hs * s * z


def cut_gap(pair: Pair, cut: Cut, insert: Insert, r: Array, z: Array, *, side: Side, start: Array) -> Array:
    """Angle of the cut flank from the middle of the gap at radii r in the planes z [rad]; arrays of one shape.

    start  a flank near it, such as the conjugate one
    Solves side v = W(rc) along the arc at r by Newton.
    Raises: ValueError for a cutter smaller than the worm, or an insert too short for the flank.
    Source: the frame above; derived here.

    >>> from setupcheck.worm.helicoid import Thread
    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.0, reference_diameter=28.0, tip_diameter=32.0,
    ...               pressure_angle=math.radians(20.0), thickness=3.1)
    >>> pair, h = Pair(thread=worm, teeth=50, centre_distance=64.0), np.linspace(0.0, 6.0, 13)
    >>> cut, insert = Cut(radius=25.0, tilt=math.atan(1.0 / 14.0), clearance=0.4), measured_insert(h, 0.7 + 0.36 * h)
    >>> r, z, start = np.array([49.0, 50.0, 51.0]), np.zeros(3), np.full(3, 0.03)
    >>> [round(50.0 * float(th), 3) for th in cut_gap(pair, cut, insert, r, z, side=1, start=start)]
    [1.226, 1.559, 1.879]
    """
    check_size(pair, cut)
    body = revolved(insert, cut, side=side)
    hs, z = pair.thread.sense, z - cut.offset
    sine, cosine, axis = hs * math.sin(cut.tilt), math.cos(cut.tilt), cut.axis(pair)
    across, along = sine * z, cosine * z
    th = start
    for _ in range(STEPS):
        x, y = r * np.sin(th), r * np.cos(th)
        t = sine * x + along
        rc = np.sqrt((axis - y) ** 2 + t * t)
        width, rise = body.at(rc)
        miss = side * (cosine * x - across) - width
        slope = side * cosine * y - rise * ((axis - y) * x + t * sine * y) / rc
        step = miss / slope
        th = th - step
        if float(np.abs(step).max()) < 1e-12:
            break
    else:
        raise ValueError("the cut does not close on the flank: radius, tilt or depth are far from what the worm needs")
    short = float(body.x[0] - rc.min())
    if short > 0.1 * pair.thread.axial_module:
        raise ValueError(
            f"the insert is {short:.2g} mm too short: its profile must go on above the throat of the wheel"
        )
    return th


def check_size(pair: Pair, cut: Cut) -> None:
    """Refuses a cutter smaller than the worm. Raises: ValueError."""
    if cut.radius < pair.thread.tip:
        raise ValueError(
            f"a cutter of {cut.radius:g} mm radius is smaller than the worm's tip, {pair.thread.tip:g} mm: the worm would "
            f"ride on the ends of the face"
        )
