"""What each way of dividing costs: sights, polygons, plates, sine bars, coordinates. Angles rad, lengths mm; pure functions."""

from __future__ import annotations

import math
from fractions import Fraction

from setupcheck.division.order import Order, ranks

NOTHING = 1e-12
"""Below this a rounded length or angle is on its step. Source: our choice, far above the rounding of doubles."""


def parallax(centring: float, target: float) -> float:
    """Amplitude of the once-per-turn error of an instrument that stands off the axis it turns about [rad]: asin(c / D).

    atan(c sin t / (D - c cos t)) at its largest; 206 265" c / D for short. A second wave of c^2 / 2 D^2 is left out: 0.001"
    where the first is 20".
    centring  of the instrument over the axis [mm];  target  its distance [mm], above `centring` (ValueError)
    Source: geometry of a triangle, derived here.

    >>> round(math.degrees(parallax(1.0, 10_000.0)) * 3600.0, 1)
    20.6
    """
    if not 0.0 <= centring < target:
        raise ValueError("an instrument cannot stand as far off the axis as its target")
    return math.asin(centring / target)


def target_for(centring: float, error: float) -> float:
    """Distance [mm] from which the parallax of `centring` [mm] stays within `error` [rad, > 0]: c / sin(error).

    Source: `parallax` turned round.

    >>> round(target_for(1.0, math.radians(2.0 / 3600.0)) / 1000.0)
    103
    """
    return centring / math.sin(error)


def plumb_wave(plumb: float, elevation: float) -> float:
    """Amplitude [rad] of v sin(az) tan h: an upright axis out by v, a sight that slopes by h. Once per turn.

    The axis leans with the table it stands on, so its lean comes round past the target once a turn. A lean of the table's
    own axis stays where it is, and comes alike in every setting. Reading both faces takes nothing of it away.
    A second wave of v^2/4 is left out: 0.02" at v = 2'.  Source: axes of a theodolite, from memory; derived in the tests.

    >>> round(math.degrees(plumb_wave(math.radians(10.0 / 3600.0), math.radians(20.0))) * 3600.0, 2)
    3.64
    """
    return plumb * math.tan(abs(elevation))


def collimation_error(collimation: float, elevation: float) -> float:
    """What a line of sight out of square by c does to one direction on one face [rad]: c / cos h. Source: as `plumb_wave`.

    It has the other sign on the other face. One target at one elevation, and one face throughout: alike at every setting,
    so it cancels. Both faces averaged: cancels. Now one face, now the other: counts in full, either way.

    >>> round(math.degrees(collimation_error(math.radians(5.0 / 3600.0), math.radians(30.0))) * 3600.0, 2)
    5.77
    """
    return collimation / math.cos(elevation)


def trunnion_error(trunnion: float, elevation: float) -> float:
    """What a trunnion axis out of level by i does on one face [rad]: i tan h. It cancels as collimation does.

    Source: as `plumb_wave`.

    >>> round(math.degrees(trunnion_error(math.radians(10.0 / 3600.0), math.radians(30.0))) * 3600.0, 2)
    5.77
    """
    return trunnion * math.tan(abs(elevation))


def tilted_axis_wave(tilt: float) -> float:
    """Amplitude of the twice-per-turn error of a standard whose axis leans by b [rad]: tan^2(b / 2), some b^2 / 4.

    Source: a universal joint, from memory; held against turned vectors in the tests.

    >>> [round(math.degrees(tilted_axis_wave(math.radians(b))) * 3600.0, 1) for b in (0.25, 0.5, 1.0, 2.0)]
    [1.0, 3.9, 15.7, 62.8]
    """
    return math.tan(tilt / 2.0) ** 2


def left_over(positions: int, count: int) -> Fraction:
    """Part of a position that one step leaves over, 0 .. 1/2; 0 where `count` places fall on positions. Source: arithmetic.

    >>> left_over(24, 8), left_over(24, 9), left_over(24, 16)
    (Fraction(0, 1), Fraction(1, 3), Fraction(1, 2))
    """
    part = Fraction(positions, count) % 1
    return min(part, 1 - part)


def counts_near(positions: int, count: int) -> tuple[int, ...]:
    """The next smaller and the next larger count that divide the positions, those that are there. Source: arithmetic.

    >>> counts_near(24, 9), counts_near(24, 25), counts_near(24, 8)
    ((8, 12), (24,), (6, 12))
    """
    good = [n for n in range(2, positions + 1) if positions % n == 0]
    below, above = [n for n in good if n < count], [n for n in good if n > count]
    return tuple(below[-1:] + above[:1])


def quarter_of(place: int, count: int) -> tuple[int, Fraction]:
    """(quarter turn 0 .. 3 nearest to a place, what the bar is set to from there, as part of a turn, -1/8 .. 1/8).

    place  0 .. count - 1.  A sine bar is not set beyond 45 deg, so every place starts from its nearest quarter turn.
    Source: arithmetic, exact.

    >>> quarter_of(1, 12), quarter_of(2, 12), quarter_of(11, 12)
    ((0, Fraction(1, 12)), (1, Fraction(-1, 12)), (0, Fraction(-1, 12)))
    """
    at = Fraction(place, count)
    quarter = math.floor(4 * at + Fraction(1, 2))
    return quarter % 4, at - Fraction(quarter, 4)


def sine_bar_errors(count: int, bar: float, blocks: float) -> tuple[float, ...]:
    """What an error of the blocks does at each place [rad]: dB / (L cos t), t the angle from the nearest quarter turn.

    Nothing where the bar lies flat.  bar  length between the rolls [mm];  blocks  error of one stack [mm].
    Source: sin t = B / L differentiated.

    >>> [round(1e6 * e, 2) for e in sine_bar_errors(8, 200.0, 0.001)][:3]
    [0.0, 7.07, 0.0]
    """
    rests = (quarter_of(place, count)[1] for place in range(count))
    return tuple(blocks / (bar * math.cos(math.tau * float(rest))) if rest else 0.0 for rest in rests)


def rounded_coordinates(angles: tuple[float, ...], radius: float, step: float) -> tuple[tuple[float, float], ...]:
    """(outward, counter-clockwise) error [mm] of each hole whose x and y are rounded to the step of a readout.

    angles  of the holes from the x axis [rad];  step  [mm], > 0 (ValueError).  A place just between two steps may go
    either way on the machine; here it goes to the even one.  Source: arithmetic; known before the job.
    """
    if not step > 0.0:
        raise ValueError("a readout step must be above zero")
    found = []
    for angle in angles:
        c, s = math.cos(angle), math.sin(angle)
        x, y = (_rounded(radius * part, step) for part in (c, s))
        found.append((x * c + y * s, y * c - x * s))
    return tuple(found)


def _rounded(length: float, step: float) -> float:
    """What rounding to a step does to a length; nothing where it lies on a step."""
    error = round(length / step) * step - length
    return 0.0 if abs(error) < NOTHING * max(1.0, abs(length)) else error


def drift_shape(count: int, order: Order | None) -> tuple[float, ...]:
    """Share of a steady drift that each place has when it is cut: 0 at the first cut, 1 at the last. Source: `order.ranks`.

    >>> drift_shape(5, None)
    (0.0, 0.25, 0.5, 0.75, 1.0)
    """
    if count == 1:
        return (0.0,)
    return tuple(rank / (count - 1) for rank in ranks(count, order or "in-turn"))


def slowest_waves(shape: tuple[float, ...], waves: int = 4) -> float:
    """Largest amplitude among the first `waves` waves round the turn, as part of the whole shape's unit.

    Waves that few places can show end at half the count.  Source: discrete Fourier sum.

    >>> round(slowest_waves(drift_shape(72, "in-turn")), 3), round(slowest_waves(drift_shape(72, "spread")), 3)
    (0.323, 0.027)
    """
    n, largest = len(shape), 0.0
    for k in range(1, min(waves, (n - 1) // 2) + 1):
        x = sum(s * math.cos(math.tau * k * j / n) for j, s in enumerate(shape))
        y = sum(s * math.sin(math.tau * k * j / n) for j, s in enumerate(shape))
        largest = max(largest, 2.0 / n * math.hypot(x, y))
    return largest
