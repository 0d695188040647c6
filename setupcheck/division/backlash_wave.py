"""Backlash read at some gaps round a wheel: its mean and the wave that comes once a turn. Lengths mm, angles rad.

A ring of gaps that is eccentric by e takes 2 e tan(alpha) off the mean where its teeth stand farthest out, and adds as much
half a turn on, so backlash at theta is mean + x cos(theta) + y sin(theta), to first order in e over the radius.
Source: rack rolling on the wheel's reference circle; least squares of {mean, cos, sin}, textbook.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from setupcheck.division.angles import once_round
from setupcheck.division.prove_out import angle_of, gap_at, inverse_of
from setupcheck.record import record

FEWEST = 4
"""Places that show one turn and one bad reading. Source: mean, cosine and sine are three unknowns; one more is our choice."""
USUAL = 8
"""Places usually read. Source: common practice."""
WIDEST = math.tau / 3.0
"""Largest stretch without a reading [rad]: three even ones are the fewest that a wave of one a turn needs. Our choice."""


@record
class Wave:
    """Backlash as a wave, all from least squares.

    mean  over the turn;  x, y  towards gap 1 and a quarter turn on [mm];  inverse  of the normal matrix
    left  what the readings leave beside it, by gap [mm]
    """

    mean: float
    x: float
    y: float
    inverse: tuple[tuple[float, ...], ...]
    left: Mapping[int, float]

    @property
    def amplitude(self) -> float:
        """Half of what the backlash swings once a turn [mm]."""
        return math.hypot(self.x, self.y)

    @property
    def loosest(self) -> float:
        """Where the wave is highest, counted from gap 1 [rad]."""
        return once_round(math.atan2(self.y, self.x))

    def spread_at(self, angle: float) -> float:
        """Uncertainty of the wave at one place over that of a reading: sqrt(v N^-1 v), v = (1, cos, sin).

        Source: covariance of least squares, JCGM 100:2008 H.3.
        """
        return self._spread((1.0, math.cos(angle), math.sin(angle)))

    @property
    def amplitude_spread(self) -> float:
        """Uncertainty of the amplitude over that of a reading, along its own direction. Source: as `spread_at`."""
        return self._spread((0.0, math.cos(self.loosest), math.sin(self.loosest)))

    def _spread(self, v: tuple[float, float, float]) -> float:
        return math.sqrt(sum(v[i] * v[j] * self.inverse[i][j] for i in range(3) for j in range(3)))

    @property
    def farthest(self) -> int:
        """The gap whose reading lies farthest beside the wave."""
        return max(self.left, key=lambda gap: abs(self.left[gap]))


def fitted(readings: Mapping[int, float], count: int) -> Wave:
    """The wave of some readings by number of the gap [mm].

    Raises: ValueError where they stand too close together (`division.prove_out`).
    Source: normal equations, textbook; numpy's least squares agrees in tests/unit/test_backlash_wave.py.

    >>> wave = fitted({1: 0.060, 19: 0.050, 37: 0.040, 55: 0.050}, 72)
    >>> round(wave.mean, 6), round(wave.amplitude, 6), round(math.degrees(wave.loosest), 6)
    (0.05, 0.01, 0.0)
    """
    rows = {gap: (1.0, math.cos(angle_of(gap, count)), math.sin(angle_of(gap, count))) for gap in readings}
    normal = [[sum(v[i] * v[j] for v in rows.values()) for j in range(3)] for i in range(3)]
    inverse = inverse_of(normal, len(rows))
    right = [sum(v[i] * readings[gap] for gap, v in rows.items()) for i in range(3)]
    mean, x, y = (sum(inverse[i][j] * right[j] for j in range(3)) for i in range(3))
    left = {gap: readings[gap] - mean - x * v[1] - y * v[2] for gap, v in rows.items()}
    return Wave(mean, x, y, tuple(tuple(row) for row in inverse), left)


def widest_stretch(gaps: Mapping[int, float] | tuple[int, ...], count: int) -> tuple[float, int, int]:
    """The largest angle between neighbours that were read [rad], and these two gaps; a whole turn for a single one.

    >>> widest_stretch((1, 19, 37), 72) == (math.pi, 37, 1)
    True
    """
    order = sorted(gaps)
    each = zip(order, [*order[1:], order[0] + count], strict=True)
    wide, one, other = max((b - a, -a, b) for a, b in each)
    return math.tau * wide / count, -one, (other - 1) % count + 1


def nearest_gap(angle: float, count: int) -> int:
    """Number of the gap nearest an angle.

    >>> nearest_gap(math.tau * 71.6 / 72, 72)
    1
    """
    return (round(gap_at(angle, count)) - 1) % count + 1
