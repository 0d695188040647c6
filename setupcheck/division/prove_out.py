"""Dial readings over a ball in a few shallow gaps, reduced to the eccentricity of the ring of gaps. Lengths mm, angles rad.

A ball in a gap reads how far out that gap stands. Where the gaps lie on a circle whose centre is off the axis of the reading by
e towards phi, the reading at theta is mean + e cos(phi - theta), to first order in e over the radius (the rest is e^2 / 2r:
a hundredth of a micrometre for 30 um on 50 mm). How deep the ball sits drops out of differences.
Source: first-order geometry of an eccentric circle; least squares of {mean, cos, sin}, textbook.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from setupcheck.division.angles import once_round
from setupcheck.record import record

FEWEST = 3
"""Readings that mean, cosine and sine need. Source: three unknowns."""
FLAT = 1e-6
"""Determinant of the normal equations, each reading counted as one, below which the gaps cannot tell a direction. Our choice."""


@record
class Ring:
    """A ring of gaps as read: all from least squares.

    mean       of the readings [mm];  x, y  its eccentricity towards gap 1 and towards a quarter turn on [mm]
    along      share of a reading's uncertainty that the size of the eccentricity has;  across  likewise square to it
    misfit     root of the squared residuals over their number of freedoms [mm]; None where three gaps leave none
    """

    mean: float
    x: float
    y: float
    along: float
    across: float
    misfit: float | None

    @property
    def eccentricity(self) -> float:
        """e = hypot(x, y) [mm]."""
        return math.hypot(self.x, self.y)

    @property
    def direction(self) -> float:
        """Direction of the gap that stands farthest out, counted from gap 1 in the order of cutting, 0 .. 2 pi [rad]."""
        return once_round(math.atan2(self.y, self.x))


def angle_of(gap: float, count: int) -> float:
    """Angle of gap `gap` from gap 1, in the order of cutting: 2 pi (gap - 1) / count [rad]. Source: even division."""
    return math.tau * (gap - 1.0) / count


def gap_at(angle: float, count: int) -> float:
    """The other way: which gap stands at an angle, from 1 to below count + 1, with decimals between two of them.

    >>> round(gap_at(math.radians(180.0), 72), 6)
    37.0
    """
    return 1.0 + once_round(angle) / math.tau * count


def gaps_to_cut(count: int) -> tuple[int, ...]:
    """Four gaps as near as they can be to quarter turns; three or fewer where there are no more. Source: even division.

    >>> gaps_to_cut(72), gaps_to_cut(73), gaps_to_cut(3)
    ((1, 19, 37, 55), (1, 19, 38, 56), (1, 2, 3))
    """
    if count <= 4:
        return tuple(range(1, count + 1))
    return tuple(1 + math.floor(k * count / 4.0 + 0.5) for k in range(4))


def off_the_quarters(count: int) -> float:
    """Largest angle by which those gaps miss their quarter turns [rad]; exact angles are used in the fit all the same."""
    return max(
        (abs(angle_of(gap, count) - k * math.tau / 4.0) for k, gap in enumerate(gaps_to_cut(count))), default=0.0
    )


def reduce(readings: Mapping[int, float], count: int) -> Ring:
    """Mean and eccentricity of a ring of `count` gaps from readings by number of the gap [mm].

    Least squares of r = mean + x cos(theta) + y sin(theta).
    Raises: ValueError for fewer than three gaps, for gaps that are not there, and where they all stand one way.
    Source: normal equations, textbook; covariance of the estimates is u^2 times their inverse (JCGM 100:2008 H.3).

    >>> ring = reduce({1: 0.0, 19: 0.006, 37: 0.010, 55: 0.004}, 72)
    >>> round(ring.x, 6), round(ring.y, 6), round(ring.misfit or 0.0, 6)
    (-0.005, 0.001, 0.0)
    """
    if len(readings) < FEWEST:
        raise ValueError(f"{len(readings)} gaps were read, and an eccentricity needs three; four show a bad reading")
    if wrong := [gap for gap in readings if not 1 <= gap <= count]:
        raise ValueError(f"there is no gap {wrong[0]}; write numbers from 1 to {count}")
    rows = [(1.0, math.cos(angle_of(gap, count)), math.sin(angle_of(gap, count))) for gap in readings]
    values = list(readings.values())
    normal = [[sum(row[i] * row[j] for row in rows) for j in range(3)] for i in range(3)]
    inverse = inverse_of(normal, len(rows))
    right = [sum(row[i] * value for row, value in zip(rows, values, strict=True)) for i in range(3)]
    mean, x, y = (sum(inverse[i][j] * right[j] for j in range(3)) for i in range(3))
    free = len(rows) - 3
    left = sum((v - mean - x * row[1] - y * row[2]) ** 2 for v, row in zip(values, rows, strict=True))
    e = math.hypot(x, y)
    cos, sin = (x / e, y / e) if e > 0.0 else (1.0, 0.0)

    def spread(a: float, b: float) -> float:
        return math.sqrt(a * a * inverse[1][1] + 2.0 * a * b * inverse[1][2] + b * b * inverse[2][2])

    return Ring(mean, x, y, spread(cos, sin), spread(-sin, cos), math.sqrt(left / free) if free else None)


def inverse_of(m: list[list[float]], rows: int) -> list[list[float]]:
    """Inverse of a symmetric 3 x 3 matrix by cofactors. Source: textbook."""
    (a, b, c), (_, d, e), (_, _, f) = m
    determinant = a * (d * f - e * e) - b * (b * f - c * e) + c * (b * e - c * d)
    if determinant < FLAT * rows**3:
        raise ValueError(
            "the gaps that were read stand too close together to tell a direction; read them round the turn"
        )
    cofactors = [
        [d * f - e * e, c * e - b * f, b * e - c * d],
        [c * e - b * f, a * f - c * c, b * c - a * e],
        [b * e - c * d, b * c - a * e, a * d - b * b],
    ]
    return [[entry / determinant for entry in row] for row in cofactors]


def flank_shift(eccentricity: float, pressure_angle: float) -> float:
    """Most metal that moving the blank by e takes off the flank's side of a shallow gap, along the circle: e / cos(alpha) [mm].

    A gap with straight flanks that moves by e at the angle psi to its own middle needs e cos(psi) tan(alpha) for the
    radial part and e sin(psi) for the rest; the largest sum is e sqrt(1 + tan(alpha)^2).  Source: geometry, derived here.
    """
    return eccentricity / math.cos(pressure_angle)


def flank_stock(rest: float, pressure_angle: float) -> float:
    """What the depth still to come leaves on each flank along the circle: rest x tan(alpha) [mm].

    Source: straight-sided gap, geometry.
    """
    return rest * math.tan(pressure_angle)
