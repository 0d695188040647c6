"""Exact gap of a ZA worm in its wheel and the gap a plunged fly cutter leaves, point by point; shares no code.

Frame: wheel's axis z, mid-plane z = 0, worm's axis along x at y = a. Each plane z holds a rack that rolls on r2: the
contact of a rack point lies where its normal passes through (0, r2). Right flank; half-turn symmetry gives the other.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from scipy.optimize import brentq


@dataclass(frozen=True, slots=True)
class Pair:
    """A worm pair and its fly cutter [mm, rad]; hand +1 right, -1 left."""

    starts: int
    module: float
    worm_diameter: float
    teeth: int
    pressure_angle: float
    cutter_radius: float
    tilt: float
    shift: float = 0.0
    clearance_factor: float = 0.2
    hand: int = 1

    @property
    def r1(self) -> float:
        return self.worm_diameter / 2.0

    @property
    def r2(self) -> float:
        return self.module * self.teeth / 2.0

    @property
    def a(self) -> float:
        return self.r1 + self.r2 + self.shift * self.module

    @property
    def axis(self) -> float:
        """Height of the cutter's axis: its tip lies the clearance below the worm's tip."""
        return self.a + self.cutter_radius - self.r1 - self.module * (1.0 + self.clearance_factor)

    def contact(self, y: float, z: float) -> tuple[float, float]:
        """Point of the conjugate wheel flank, r and angle, that the rack point at height y touches."""
        h = self.a - y
        rho, p = math.hypot(h, z), self.starts * self.module / 2.0
        slope = math.tan(self.pressure_angle)
        rack = math.pi * self.module / 4.0 - (rho - self.r1) * slope - self.hand * p * math.atan2(z, h)
        x = (self.r2 - y) / (slope * h / rho - self.hand * p * z / rho**2)
        return math.hypot(x, y), math.atan2(x, y) - (x - rack) / self.r2

    def gap(self, r: float, z: float) -> float:
        """Angle of the conjugate flank at radius r in the plane z."""
        y = brentq(lambda v: self.contact(v, z)[0] - r, r - 0.5 * self.module, r + 0.5 * self.module, xtol=1e-14)
        return self.contact(y, z)[1]

    def insert(self, rc: float) -> float:
        """Half width of the mid-plane insert at a cutter radius."""

        def at(r: float) -> tuple[float, float]:
            angle = self.gap(r, 0.0)
            x, y = r * math.sin(angle), r * math.cos(angle)
            return math.hypot(self.axis - y, x * math.sin(self.tilt)), x * math.cos(self.tilt)

        near = self.axis - rc
        r = brentq(lambda v: at(v)[0] - rc, near - 0.2 * self.module, near + 0.4 * self.module, xtol=1e-14)
        return at(r)[1]

    def cut(self, r: float, z: float) -> float:
        """Angle of the cut flank at radius r in the plane z."""
        sine, cosine = -self.hand * math.sin(self.tilt), math.cos(self.tilt)

        def outside(angle: float) -> float:
            x, y = r * math.sin(angle), r * math.cos(angle)
            rc = math.hypot(self.axis - y, sine * x + z * cosine)
            return x * cosine - sine * z - self.insert(rc)

        middle = self.gap(r, z)
        return brentq(outside, middle - 0.02, middle + 0.02, xtol=1e-15)

    def missing(self, r: float, z: float) -> float:
        """Metal missing on the cut flank [mm, as arc], the ease-off."""
        return r * (self.cut(r, z) - self.gap(r, z))

    def crowning_and_twist(self, step: float = 0.1) -> tuple[float, float, float]:
        """A, B and C0 of e = A z^2 - B z eta - C0 z at the pitch point, eta = r2 - r, by central differences."""
        e, r, d = self.missing, self.r2, step
        a = (e(r, d) + e(r, -d) - 2.0 * e(r, 0.0)) / (2.0 * d * d)
        b = (e(r + d, d) - e(r + d, -d) - e(r - d, d) + e(r - d, -d)) / (4.0 * d * d)
        return a, b, -(e(r, d) - e(r, -d)) / (2.0 * d)
