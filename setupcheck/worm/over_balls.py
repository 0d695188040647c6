"""A worm wheel measured over balls in its gaps, exact for the gap that a ZA worm asks for. Lengths mm, angles rad.

Balls, not pins: the gaps of a worm wheel curve round the worm, and a straight pin would ride on their ends.
"""

from __future__ import annotations

import math

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero, steep_enough


@record
class _Gap:
    """A gap of the wheel: reduced lead p, radii of the wheel's rolling circle and of the worm's, slope, half width there."""

    p: float
    wheel_radius: float
    worm_radius: float
    slope: float
    half: float

    def centre(self, y: float, z: float, ball_radius: float) -> tuple[float, float, float]:
        """Angle, radius and height of a ball that touches the right flank where the rack point (y, z) does.

        Every plane z holds a rack x = X(y, z) that rolls on the wheel: X = s2/2 - (rho - rp) tan(alpha) - p atan(z/h),
        h = a - y. It touches where its normal goes through the pitch point, x = (r2 - y)/X_y, after a shift of x - X; its
        normal (1, -X_y, -X_z) is the flank's, and the wheel has turned by (x - X)/r2.
        """
        h = self.worm_radius + self.wheel_radius - y
        rho = math.hypot(h, z)
        rack = self.half - (rho - self.worm_radius) * self.slope - self.p * math.atan2(z, h)
        along_y = self.slope * h / rho - self.p * z / rho**2
        along_z = -self.slope * z / rho - self.p * h / rho**2
        x = (self.wheel_radius - y) / along_y
        inward = ball_radius / math.sqrt(1.0 + along_y**2 + along_z**2)
        cx, cy = x - inward, y + inward * along_y
        return math.atan2(cx, cy) - (x - rack) / self.wheel_radius, math.hypot(cx, cy), z + inward * along_z


@record
class OverBalls:
    """A worm wheel over two balls: size M, the diameter of the wheel where a ball touches, and how far off the mid-plane."""

    size: float
    contact_diameter: float
    off_middle: float


def over_balls(
    *,
    starts: int,
    axial_module: float,
    teeth: int,
    pitch_diameter: float,
    pressure_angle: float,
    gap: float,
    ball: float,
) -> OverBalls:
    """Size over two balls in opposite gaps, or as opposite as an odd count allows: M = 2 r_c (cos(90 deg/z) if odd) + D.

    A ball in the mid-plane touches both flanks alike (half a turn about the gap's middle maps one on the other): the touching
    point is where the ball's centre comes to stand in the gap's middle, by Newton's steps.
    pitch_diameter  of the worm, 2 a - d2;  gap  arc of the gap at the wheel's reference circle, s2
    Validity: the gap of a ZA worm itself, both flanks true. A plunged cutter leaves A z^2 - B z eta more there, below a
    micrometre for one start and a ball that touches near the reference circle (`best_ball`).
    Raises: ValueError for sizes not above zero, or a ball that finds no seat.
    Source: derived here from the racks of all planes; a search point by point agrees (tests/unit/worm/test_over_balls.py).

    >>> m = over_balls(starts=1, axial_module=2.5, teeth=40, pitch_diameter=30.0, pressure_angle=math.radians(20.0),
    ...                gap=math.pi * 1.25, ball=4.2)
    >>> round(m.size, 4), round(m.contact_diameter, 2), round(m.off_middle, 2)
    (105.654, 99.95, 0.17)
    """
    above_zero(starts=starts, axial_module=axial_module, teeth=teeth, pitch_diameter=pitch_diameter, gap=gap, ball=ball)
    steep_enough(pressure_angle=pressure_angle)
    at = _Gap(
        p=starts * axial_module / 2.0,
        wheel_radius=teeth * axial_module / 2.0,
        worm_radius=pitch_diameter / 2.0,
        slope=math.tan(pressure_angle),
        half=gap / 2.0,
    )
    y, z, step = at.wheel_radius, 0.0, 1e-6 * axial_module
    for _ in range(50):
        angle, radius, height = at.centre(y, z, ball / 2.0)
        in_y, in_z = at.centre(y + step, z, ball / 2.0), at.centre(y, z + step, ball / 2.0)
        ay, az = (in_y[0] - angle) / step, (in_z[0] - angle) / step
        hy, hz = (in_y[2] - height) / step, (in_z[2] - height) / step
        turns = ay * hz - az * hy
        if turns == 0.0:
            break
        dy, dz = (az * height - hz * angle) / turns, (hy * angle - ay * height) / turns
        if not max(abs(dy), abs(dz)) < at.wheel_radius:
            break
        y, z = y + dy, z + dz
        if not abs(y - at.wheel_radius) < 3.0 * axial_module or not abs(z) < at.worm_radius:
            break
        if max(abs(dy), abs(dz)) < 1e-12 * at.wheel_radius:
            _, radius, _ = at.centre(y, z, ball / 2.0)
            opposite = math.cos(math.pi / (2.0 * teeth)) if teeth % 2 else 1.0
            return OverBalls(2.0 * radius * opposite + ball, 2.0 * _touched(at, y, z), abs(z))
    raise ValueError(f"a ball of {ball:g} mm finds no seat in the gap")


def _touched(at: _Gap, y: float, z: float) -> float:
    """Radius of the wheel that the rack point (y, z) touches [mm]."""
    h = at.worm_radius + at.wheel_radius - y
    rho = math.hypot(h, z)
    return math.hypot((at.wheel_radius - y) / (at.slope * h / rho - at.p * z / rho**2), y)


def best_ball(*, wheel_diameter: float, pressure_angle: float, lead_angle: float, gap: float) -> float:
    """Ball that touches about at the reference circle [mm]: D = 2 r_b cos(beta_b) (tan(alpha + s2/d2) - tan(alpha)).

    r_b = r2 cos(alpha), tan(beta_b) = tan(g) cos(alpha): as in a helical gear over balls. For choosing a ball, not for sizes.
    Raises: ValueError for sizes not above zero.  Source: involute geometry, derived here.

    >>> round(best_ball(wheel_diameter=100.0, pressure_angle=math.radians(20.0), lead_angle=math.atan(1.0 / 12.0),
    ...                 gap=math.pi * 1.25), 3)
    4.229
    """
    above_zero(wheel_diameter=wheel_diameter, gap=gap)
    steep_enough(pressure_angle=pressure_angle, lead_angle=lead_angle)
    base = wheel_diameter / 2.0 * math.cos(pressure_angle)
    slant = math.cos(math.atan(math.tan(lead_angle) * math.cos(pressure_angle)))
    return 2.0 * base * slant * (math.tan(pressure_angle + gap / wheel_diameter) - math.tan(pressure_angle))
