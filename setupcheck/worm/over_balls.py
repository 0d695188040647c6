"""A worm wheel measured over balls in its gaps, exact for the gap that a ZA worm asks for. Lengths mm, angles rad.

Balls, not pins: the gaps of a worm wheel curve round the worm, and a straight pin would ride on their ends.
"""

from __future__ import annotations

import math
from collections.abc import Callable

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

    def rise(self, y: float, z: float, ball_radius: float) -> float:
        """How far a ball that touches at (y, z) comes out when its gap closes by 1 mm of arc, d r_c/d(-s2): positive.

        Either flank turns about the wheel by half of it over r2. Its normal n passes through the ball's centre, so the flank
        drives the centre by r_c n_t per radian along n, and the centre can only move outwards: d r_c = r_c n_t d(turn)/n_r.
        """
        h = self.worm_radius + self.wheel_radius - y
        rho = math.hypot(h, z)
        along_y = self.slope * h / rho - self.p * z / rho**2
        along_z = -self.slope * z / rho - self.p * h / rho**2
        x = (self.wheel_radius - y) / along_y
        inward = ball_radius / math.sqrt(1.0 + along_y**2 + along_z**2)
        cx, cy = x - inward, y + inward * along_y
        across, outward = cy + along_y * cx, along_y * cy - cx  # of the normal (1, -X_y) times r_c, towards the ball
        return math.hypot(cx, cy) * across / outward / (2.0 * self.wheel_radius)

    def seat(self, of: Callable[[float, float], tuple[float, float]], module: float) -> tuple[float, float] | None:
        """Rack point where both values of `of` are zero, by Newton's steps from the pitch point; None where there is none."""
        y, z, step = self.wheel_radius, 0.0, 1e-6 * module
        for _ in range(50):
            (first, second), in_y, in_z = of(y, z), of(y + step, z), of(y, z + step)
            ay, az = (in_y[0] - first) / step, (in_z[0] - first) / step
            hy, hz = (in_y[1] - second) / step, (in_z[1] - second) / step
            turns = ay * hz - az * hy
            if turns == 0.0:
                return None
            dy, dz = (az * second - hz * first) / turns, (hy * first - ay * second) / turns
            if not max(abs(dy), abs(dz)) < self.wheel_radius:
                return None
            y, z = y + dy, z + dz
            if not abs(y - self.wheel_radius) < 3.0 * module or not abs(z) < self.worm_radius:
                return None
            if max(abs(dy), abs(dz)) < 1e-12 * self.wheel_radius:
                return y, z
        return None


def _gap_of(
    starts: int, axial_module: float, teeth: int, pitch_diameter: float, pressure_angle: float, *, half: float
) -> _Gap:
    """The gap of a wheel whose sizes are above zero.  Raises: ValueError for a pressure angle that is none."""
    steep_enough(pressure_angle=pressure_angle)
    return _Gap(
        p=starts * axial_module / 2.0,
        wheel_radius=teeth * axial_module / 2.0,
        worm_radius=pitch_diameter / 2.0,
        slope=math.tan(pressure_angle),
        half=half,
    )


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
    at = _gap_of(starts, axial_module, teeth, pitch_diameter, pressure_angle, half=gap / 2.0)

    def seated(y: float, z: float) -> tuple[float, float]:
        angle, _, height = at.centre(y, z, ball / 2.0)
        return angle, height

    found = at.seat(seated, axial_module)
    if found is None:
        raise ValueError(f"a ball of {ball:g} mm finds no seat in the gap")
    _, radius, _ = at.centre(*found, ball / 2.0)
    return OverBalls(2.0 * radius * _opposite(teeth) + ball, 2.0 * _touched(at, *found), abs(found[1]))


def _opposite(teeth: int) -> float:
    """Share of the distance of two opposite gaps that the gaps measured over have: cos(90 deg/z) for an odd count."""
    return math.cos(math.pi / (2.0 * teeth)) if teeth % 2 else 1.0


@record
class GapOverBalls:
    """The gap of a wheel from its size over balls: arc at the reference circle [mm], its change per mm of size (below zero),
    and the diameter of the wheel where a ball touches [mm]."""

    gap: float
    per_size: float
    contact_diameter: float


def gap_over_balls(
    *,
    size: float,
    starts: int,
    axial_module: float,
    teeth: int,
    pitch_diameter: float,
    pressure_angle: float,
    ball: float,
) -> GapOverBalls:
    """Arc of the gap at the wheel's reference circle from the size over two balls: `over_balls` turned round, exact.

    The size is the height of a ball's centre, r_c = (M - D)/2 (over cos(90 deg/z) if odd). The rack point where a ball at that
    height in the mid-plane touches does not depend on the gap, which is then twice what the flank is short of the ball there.
    d s2/dM = -1/(2 d r_c/d(-s2)), see `_Gap.rise`.
    An eccentric ring changes nothing, even or odd: two balls and a micrometer know no axis. Of a ring that is out of round,
    or whose gaps are unlike, this is the mean of two gaps only.
    Validity: as `over_balls`.
    Raises: ValueError for sizes not above zero, or a size that no gap of this pitch gives.
    Source: derived here; round trip and derivative in tests/unit/worm/test_over_balls.py.

    >>> found = gap_over_balls(size=105.65404, starts=1, axial_module=2.5, teeth=40, pitch_diameter=30.0,
    ...                        pressure_angle=math.radians(20.0), ball=4.2)
    >>> round(found.gap, 4), round(found.per_size, 3), round(found.contact_diameter, 2)
    (3.927, -0.4, 99.95)
    """
    above_zero(
        size=size, starts=starts, axial_module=axial_module, teeth=teeth, pitch_diameter=pitch_diameter, ball=ball
    )
    at = _gap_of(starts, axial_module, teeth, pitch_diameter, pressure_angle, half=0.0)
    centre = (size - ball) / 2.0 / _opposite(teeth)

    def high_enough(y: float, z: float) -> tuple[float, float]:
        _, radius, height = at.centre(y, z, ball / 2.0)
        return radius - centre, height

    pitch = math.pi * axial_module
    found = at.seat(high_enough, axial_module)
    gap = -2.0 * at.wheel_radius * at.centre(*found, ball / 2.0)[0] if found is not None else 0.0
    rise = at.rise(*found, ball / 2.0) if found is not None else 0.0
    if found is None or not 0.0 < gap < pitch or not rise > 0.0:
        raise ValueError(f"{size:g} mm over balls of {ball:g} mm fits no gap of {pitch:g} mm pitch")
    return GapOverBalls(gap, -1.0 / (2.0 * _opposite(teeth) * rise), 2.0 * _touched(at, *found))


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
