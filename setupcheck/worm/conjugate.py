"""The gap of a wheel that runs exactly with a worm: plane stacks of rack and gear, any helicoid. mm, rad.

Every plane z = const holds a rigid rack, the worm's section there, that slides along x while the wheel turns on the rolling
circle d2 = z2 m, whatever the profile shift. A point of the wheel's flank is given by radius r, plane z and its angle th
from the middle of the gap, positive towards +x. Rack travel s and wheel turn s/r2 belong together.
"""

from __future__ import annotations

import math
from typing import Literal

import numpy as np

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array, Thread, flank, flank_slope, slope

Side = Literal[1, -1]
"""+1 the flank of a gap towards +x (right), -1 the other."""

SAMPLES = 21
"""Places tried along the path of a point before the largest is refined; the function has one or two humps. Chosen here."""

REFINEMENTS = 7
"""Newton steps; the slope's own change is left out, so each gains a factor 10 or more (ZA squares). Chosen here."""


@record(kw_only=True)
class Pair:
    """Worm and wheel in mesh: thread, tooth count, centre distance [mm].

    Raises: ValueError for sizes not above zero, a worm that does not reach the rolling circle, or an undercut wheel.
    """

    thread: Thread
    teeth: int
    centre_distance: float

    def __post_init__(self) -> None:
        above_zero(wheel_teeth=self.teeth, centre_distance=self.centre_distance)
        reach = self.rolling - self.lowest
        if not reach > 0.0:
            raise ValueError(
                f"the worm's tip stays {-reach:.3g} mm outside the rolling circle of {2.0 * self.rolling:g} mm: a smaller "
                f"centre distance or a larger worm is needed"
            )
        at_tip = math.atan(float(slope(self.thread, np.array(self.thread.tip))))
        longest = self.rolling * math.sin(at_tip) ** 2
        if reach > longest:
            raise ValueError(
                f"the wheel is undercut: the worm's tip reaches {reach:.4g} mm inside the rolling circle, the flank ends "
                f"at {longest:.4g} mm; more teeth, a larger pressure angle or a positive shift are needed"
            )

    @property
    def rolling(self) -> float:
        """Radius r2 of the wheel's rolling circle, z2 m/2 [mm]."""
        return self.teeth * self.thread.axial_module / 2.0

    @property
    def lowest(self) -> float:
        """How near the worm's tip comes to the wheel's axis in the mid-plane, a - ra1 [mm]."""
        return self.centre_distance - self.thread.tip

    @property
    def gap_arc(self) -> float:
        """Gap of a wheel without backlash at its rolling circle [mm]: the thread's thickness on the rolling line."""
        return self.thread.axial_thickness(2.0 * (self.centre_distance - self.rolling))


@record(eq=False)
class Gap:
    """A conjugate flank on a grid; all arrays of one shape.

    angle   th of the flank from the gap's middle [rad]; NaN where the worm does not reach
    turned  angle t_f at which the point is touched, measured from the line of centres [rad]
    inside  whether the thread's flank touches it (False: its tip edge sweeps past)
    """

    angle: Array
    turned: Array
    inside: np.ndarray


def lowest_reach(pair: Pair, z: Array) -> Array:
    """Height y down to which the worm's tip reaches in the planes z [mm]: a - sqrt(ra1^2 - z^2); NaN beyond the worm.

    Source: geometry.
    """
    room = pair.thread.tip**2 - np.square(z)
    return pair.centre_distance - np.sqrt(np.where(room > 0.0, room, np.nan))


def first_contact(pair: Pair, z: Array, *, side: Side = 1) -> Array:
    """Radius at which the flank touched by the worm begins in the planes z [mm]; in the mid-plane of a ZA worm the start
    of the involute, hypot(a - ra1, (r2 - a + ra1)/tan alpha).

    Source: meshing equation at the thread's tip, x dX/dy = r2 - y.

    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.0, reference_diameter=28.0, tip_diameter=32.0,
    ...               pressure_angle=math.radians(20.0), thickness=3.1)
    >>> round(float(first_contact(Pair(thread=worm, teeth=50, centre_distance=64.0), np.array(0.0))), 4)
    48.3135
    """
    y = lowest_reach(pair, z)
    x = (pair.rolling - y) / flank_slope(pair.thread, pair.centre_distance - y, z, side=side)
    return np.hypot(x, y)


def conjugate_gap(pair: Pair, r: Array, z: Array, *, side: Side = 1) -> Gap:
    """Angle of the conjugate flank at radii r in the planes z, arrays that broadcast to one shape.

    Right flank:  TH(r, z) = max over t of [t - (r sin t - X(r cos t, z))/r2],  rho <= ra1;  left flank: min.
    The rack has swept everything up to the largest angle any of its positions reaches, so the form holds for a flank
    that is undercut or only swept by the thread's tip edge as well. The largest of 21 samples is refined by Newton on
    1 - (y + x dX/dy)/r2 = 0, which is the meshing equation x dX/dy = r2 - y.
    Source: derived here; the meshing equation is the rack's normal through the pitch point (Litvin, Gear Geometry, from
    memory). In the mid-plane of a ZA worm an exact involute of base r2 cos alpha, which a test holds.

    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.0, reference_diameter=28.0, tip_diameter=32.0,
    ...               pressure_angle=math.radians(20.0), thickness=3.1)
    >>> gap = conjugate_gap(Pair(thread=worm, teeth=50, centre_distance=64.0), np.array(50.0), np.array([-3.0, 0.0, 3.0]))
    >>> [round(100.0 * float(th), 4) for th in gap.angle]  # on the rolling circle X(r2, z)/r2
    [3.2908, 3.1, 2.4465]
    """
    r, z = (np.array(v, dtype=float) for v in np.broadcast_arrays(r, z))
    lowest = lowest_reach(pair, z)
    reached = r > lowest
    ratio = np.where(reached, lowest / np.where(reached, r, 1.0), 1.0)
    widest = np.arccos(ratio)

    best = np.full(r.shape, -np.inf)
    at = np.zeros(r.shape)
    for part in np.linspace(-1.0, 1.0, SAMPLES):
        t = widest * part
        value = side * _reached(pair, r, z, t, side)
        better = value > best
        best = np.where(better, value, best)
        at = np.where(better, t, at)
    cell = widest * (2.0 / (SAMPLES - 1))
    low, high = np.maximum(at - cell, -widest), np.minimum(at + cell, widest)
    for _ in range(REFINEMENTS):
        at = np.clip(at + _step(pair, r, z, at, side), low, high)
    inside = reached & (np.abs(at) < widest * (1.0 - 1e-9))
    angle = np.where(reached, _reached(pair, r, z, at, side), np.nan)
    return Gap(angle, np.where(reached, at, np.nan), inside)


def roll_of(pair: Pair, gap: Gap, r: Array, z: Array, *, side: Side = 1) -> Array:
    """Travel s of the rack at which each point of the flank is touched [mm]: r sin t - X.  Source: `conjugate_gap`."""
    y = r * np.cos(gap.turned)
    return r * np.sin(gap.turned) - flank(pair.thread, pair.centre_distance - y, z, side=side)


def _reached(pair: Pair, r: Array, z: Array, t: Array, side: Side) -> Array:
    """Angle of the point of the wheel that the rack touches where it stands at t."""
    x = r * np.sin(t) - flank(pair.thread, pair.centre_distance - r * np.cos(t), z, side=side)
    return t - x / pair.rolling


def _step(pair: Pair, r: Array, z: Array, t: Array, side: Side) -> Array:
    """Newton step towards the meshing equation, without the slope's own change along the profile.

    F' = 1 - (y + X' x)/r2,  F'' = (x - X' y + X'' x^2)/r2
    """
    thread, x, y = pair.thread, r * np.sin(t), r * np.cos(t)
    h = pair.centre_distance - y
    rho2 = h * h + z * z
    rho = np.sqrt(rho2)
    rise = side * slope(thread, rho)
    turn = thread.sense * thread.lead * z / rho2
    first = rise * h / rho + turn
    second = -rise * z * z / (rho * rho2) + 2.0 * turn * h / rho2
    gradient = pair.rolling - y - first * x
    bend = x - first * y + second * x * x
    return np.where(side * bend < 0.0, -gradient / np.where(bend == 0.0, 1.0, bend), np.sign(side * gradient))
