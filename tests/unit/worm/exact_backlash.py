"""Backlash of the mid-plane section by brute force: a straight rack in gaps cut by a plunged insert; shares no code.

The wheel's axis is the origin, the rack's pitch line runs along x at height y, the cut comes down along y. Nothing here
knows a formula for backlash: flanks are lists of points, and the wheel is turned until one of them touches.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq

Points = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Section:
    """Mid-plane of a ZA worm and its wheel [mm, rad].

    shift    profile shift the insert is ground for, in modules
    gap      width of the gap at the rolling circle that the insert is ground for, cut to its right depth
    wider    what the insert is wider than that;  deeper  what it is fed beyond its depth
    off, at  eccentricity of the wheel and its direction from the line of centres [rad]
    growth   what the teeth move outwards on diameter; stretched  whether they widen with the rim they stand on
    grown    scales of worm, wheel and housing (1 + expansion times rise)
    """

    module: float = 1.5
    teeth: int = 72
    worm_diameter: float = 24.0
    pressure_angle: float = math.radians(20.0)
    thread: float = 2.31
    gap: float = 2.385
    distance: float = 66.0
    shift: float = 0.0
    wider: float = 0.0
    deeper: float = 0.0
    off: float = 0.0
    at: float = 0.0
    growth: float = 0.0
    stretched: bool = True
    grown: tuple[float, float, float] = (1.0, 1.0, 1.0)

    @property
    def r2(self) -> float:
        return self.module * self.teeth / 2.0

    def involute(self) -> Points:
        """Right flank of a gap at its design depth, gap on the y axis: an involute of base r2 cos alpha."""
        base = self.r2 * math.cos(self.pressure_angle)
        lowest = self.distance_of_cut - self.worm_diameter / 2.0 - self.module  # where the worm's tip comes to
        reach = self.r2 - lowest
        first = math.hypot(lowest, reach / math.tan(self.pressure_angle))
        last = self.r2 + 0.99 * self.module
        lean = np.arccos(base / np.linspace(first, last, 1201))
        own = math.tan(self.pressure_angle) - self.pressure_angle
        theta = self.gap / (2.0 * self.r2) - own + np.tan(lean) - lean
        r = base / np.cos(lean)
        return np.stack([r * np.sin(theta), r * np.cos(theta)], axis=1)

    @property
    def distance_of_cut(self) -> float:
        """The insert is ground for the nominal distance, whatever the housing has."""
        return self.r2 + self.worm_diameter / 2.0 + self.shift * self.module

    def flank(self) -> Points:
        """The same flank as cut, grown and warm: the insert wider and deeper, the tooth beside it moved outwards."""
        cut = self.involute() + np.array([self.wider / 2.0, -self.deeper])
        if self.growth:
            if self.stretched:  # rim and teeth by the same strain, as one body
                cut = cut * (1.0 + self.growth / (2.0 * self.r2))
            else:  # a stiff tooth on a stretched rim: it moves along its own middle, half a pitch from the gap's
                half = math.pi / self.teeth
                cut = cut + self.growth / 2.0 * np.array([math.sin(half), math.cos(half)])
        return cut * self.grown[1]

    def rack(self, heights: Points) -> Points:
        """Half thickness of the thread over heights from the wheel's axis in the housing."""
        scale = self.grown[0]
        below = self.distance * self.grown[2] - heights
        return scale * self.thread / 2.0 - (below - scale * self.worm_diameter / 2.0) * math.tan(self.pressure_angle)

    def room(self, shift: float, *, side: int, tooth: int) -> float:
        """How far the wheel can turn [mm of arc at r2] till one flank of one gap meets the thread, from its place at `shift`.

        shift  of the rack along its line: the wheel has turned shift/(rolling radius) with it; side +1 right, -1 left flank
        """
        scale, r2 = self.grown[0], self.r2
        points = self.flank() * np.array([float(side), 1.0])
        x0 = tooth * math.pi * self.module * scale + shift
        turned = tooth * 2.0 * math.pi / self.teeth + shift / (r2 * scale)
        centre = self.off * np.array([math.sin(self.at), math.cos(self.at)])
        radius, angle = np.hypot(points[:, 0], points[:, 1]), np.arctan2(points[:, 0], points[:, 1])
        tip = self.distance * self.grown[2] - scale * (self.worm_diameter / 2.0 + self.module)

        def gaps(extra: float) -> Points:
            """Clearance along x of every flank point when the wheel is turned on by extra [rad]."""
            theta = angle + turned + extra
            x, y = radius * np.sin(theta) + centre[0], radius * np.cos(theta) + centre[1]
            free = side * (x - x0) - self.rack(y)
            free[y < tip] = np.inf  # the thread ends there
            return free

        def least(extra: float) -> float:
            free = gaps(-side * extra)
            i = int(np.argmin(free))
            if 0 < i < len(free) - 1 and np.isfinite(free[i - 1 : i + 2]).all():  # a parabola through three points
                a, b, c = free[i - 1 : i + 2]
                curve = a - 2.0 * b + c
                return float(b - (a - c) ** 2 / (8.0 * curve)) if curve > 0.0 else float(b)
            return float(free[i])

        return r2 * float(brentq(least, -0.02, 0.02, xtol=1e-15))

    def backlash(self) -> float:
        """Arc at r2 that one gap leaves free with the thread in its middle, both flanks together."""
        return sum(self.room(0.0, side=side, tooth=0) for side in (1, -1))

    def backlash_in_mesh(self, phases: int = 12) -> tuple[float, float]:
        """Least and largest backlash over one pitch of travel, every flank in the mesh counted."""
        found = []
        for shift in np.linspace(0.0, math.pi * self.module, phases, endpoint=False):
            free = [min(self.room(shift, side=side, tooth=t) for t in range(-3, 3)) for side in (1, -1)]
            found.append(sum(free))
        return min(found), max(found)


def slope(section: Section, key: str, step: float) -> float:
    """Central difference of the backlash over one entry."""
    up, down = (replace(section, **{key: getattr(section, key) + way * step}) for way in (1.0, -1.0))
    return (up.backlash() - down.backlash()) / (2.0 * step)


def gap_of(section: Section, *, width: float, height: float, radius: float, tilt: float, clearance: float) -> float:
    """Gap at the rolling circle that an insert of this width at this height above its tip cuts [mm]."""
    axis = section.distance_of_cut - section.worm_diameter / 2.0 - section.module - clearance + radius

    def too_wide(gap: float) -> float:
        x, y = replace(section, gap=gap).involute().T
        over = radius - np.hypot(axis - y, x * math.sin(tilt))
        return float(np.interp(height, over, 2.0 * x * math.cos(tilt))) - width

    return float(brentq(too_wide, 0.8 * width, 1.2 * width, xtol=1e-12))
