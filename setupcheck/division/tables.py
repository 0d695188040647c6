"""Index tables: what a device is set to at each place of a divided circle, counted in whole steps, so that the last line is
the start again. Exact fractions of a turn throughout; no job, no floats before a coordinate needs one."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from fractions import Fraction

from setupcheck.division.methods import circles_that_fit, turns_per_place
from setupcheck.record import record

USUAL_CIRCLES = tuple(range(15, 67))
"""Hole circles looked at where a head lists none of its own. Source: common practice, 15 to 66 covers the usual plates."""
USUAL_RATIOS = (40, 60, 72, 90, 120)
"""Ratios of heads and rotary tables that are found in shops. Source: common practice."""
ARCSEC = 1_296_000
"""Seconds of arc in a turn."""
NOTHING = Fraction(0)


@record
class Setting:
    """One line of an index table.

    place  number on the part, counted from 1; the last line of a table is the first place again
    steps  where the device stands, in its smallest steps from the start
    moved  steps forward from the line before; 0 in the first line
    per_turn  steps in a turn of the work;  off  set less exact, share of a turn
    """

    place: int
    steps: int
    moved: int
    per_turn: Fraction
    off: Fraction

    @property
    def angle(self) -> Fraction:
        """What the work has turned as set, share of a turn."""
        return self.steps / self.per_turn


def to_whole(up: int, low: int) -> int:
    """up / low to the nearest whole number, a half to the even one, in integers alone. Source: arithmetic.

    >>> to_whole(7, 2), to_whole(5, 2), to_whole(10, 3)
    (4, 2, 3)
    """
    whole, rest = divmod(up, low)
    return whole + (2 * rest > low or (2 * rest == low and whole % 2))


def settings(count: int, per_turn: Fraction | int, order: Sequence[int] = ()) -> tuple[Setting, ...]:
    """The table of a device with `per_turn` steps in one turn of the work: count + 1 lines, the last one the start again.

    Each line is rounded for itself from the start, so nothing adds up; the device is only ever turned forward.
    count     places, 1 or more;  per_turn  ratio x holes of the circle, positions of a plate, or 1 / step of a readout
    order     places in the order they are cut, beginning with 1; empty for 1, 2, 3, …
    Raises: ValueError for an order that is not each place once.  Source: arithmetic, derived here.

    >>> [(s.place, s.steps, s.moved) for s in settings(3, 40 * 20)], settings(3, 40 * 20)[1].off
    ([(1, 0, 0), (2, 267, 267), (3, 533, 266), (1, 800, 267)], Fraction(1, 2400))
    """
    per_turn = Fraction(per_turn)
    up, low = per_turn.numerator, per_turn.denominator
    places = tuple(order) or tuple(range(1, count + 1))
    if places[0] != 1 or sorted(places) != list(range(1, count + 1)):
        raise ValueError("an order of cutting names each place once and begins with place 1")
    whole_turn = to_whole(up, low)
    found, at = [], 0
    for number, place in enumerate((*places, count + 1)):
        steps = to_whole((place - 1) * up, low * count)
        moved = 0 if number == 0 else whole_turn if count == 1 else (steps - at) % whole_turn
        rest = steps * low * count - (place - 1) * up
        off = Fraction(rest, up * count) if rest else NOTHING
        found.append(Setting(1 if place > count else place, steps, moved, per_turn, off))
        at = steps
    return tuple(found)


def left_open(lines: Sequence[Setting], per_turn: Fraction | int) -> Fraction:
    """What is missing between the last line and the start, share of a turn: 0 where the table closes.

    All moves are added one by one as the hands make them and held against whole turns of the work. A device whose steps
    do not divide the turn, such as a readout in steps of 7", does not stand at its start again after a turn.
    Source: counting.

    >>> left_open(settings(72, 40 * 18), 40 * 18), left_open(settings(4, Fraction(7, 2)), Fraction(7, 2))
    (Fraction(0, 1), Fraction(1, 7))
    """
    per_turn = Fraction(per_turn)
    turns = Fraction(sum(line.moved for line in lines)) / per_turn
    return abs(turns - round(turns))


def off_range(lines: Sequence[Setting]) -> Fraction:
    """Range of what rounding leaves over all places, share of a turn. Source: arithmetic."""
    return max(line.off for line in lines[:-1]) - min(line.off for line in lines[:-1])


def largest_off(lines: Sequence[Setting]) -> Fraction:
    """Largest error of a place from rounding, either way, share of a turn. Source: arithmetic."""
    return max(abs(line.off) for line in lines[:-1])


def shared_settings(lines: Sequence[Setting], per_turn: Fraction | int) -> int:
    """Places that have the setting of another one: the device has too few steps for them. Source: counting.

    >>> shared_settings(settings(48, 24), 24)
    24
    """
    whole_turn = to_whole(Fraction(per_turn).numerator, Fraction(per_turn).denominator)
    return len(lines) - 1 - len({line.steps % whole_turn for line in lines[:-1]})


# -- hole circles ----------------------------------------------------------------------------------------------------


def turn_and_holes(steps: int, circle: int) -> tuple[int, int]:
    """Steps of a crank on a hole circle as (whole turns, holes). Source: counting.

    >>> turn_and_holes(30, 27)
    (1, 3)
    """
    return divmod(steps, circle)


def step_on(worm_ratio: int, count: int, circle: int) -> tuple[int, int] | None:
    """(whole turns, holes) from place to place on a circle that fits; None where it does not. Source: exact fractions.

    >>> step_on(40, 72, 18), step_on(40, 36, 27), step_on(40, 72, 20)
    ((0, 10), (1, 3), None)
    """
    holes = turns_per_place(worm_ratio, count) * circle
    return turn_and_holes(int(holes), circle) if holes.denominator == 1 else None


def rounding_on(worm_ratio: int, count: int, circle: int) -> Fraction:
    """Largest error of a place where every place takes the nearest hole, counted from the start, share of a turn of the work.

    max |e| = g floor(N / 2g) / (N z c) with g = gcd(z c, N): the places meet every multiple of g/N of a hole alike.
    Never above half a hole.  Source: arithmetic of remainders, derived here.

    >>> rounding_on(40, 72, 18), rounding_on(40, 3, 20)
    (Fraction(0, 1), Fraction(1, 2400))
    """
    holes = worm_ratio * circle
    together = math.gcd(holes, count)
    return Fraction(together * (count // together // 2), count * holes)


def nearest_circles(worm_ratio: int, count: int, circles: Sequence[int], most: int = 3) -> list[tuple[int, Fraction]]:
    """(circle, largest error of a place) of the circles that come nearest, the best first. Source: `rounding_on`."""
    found = sorted((rounding_on(worm_ratio, count, circle), circle) for circle in set(circles))
    return [(circle, error) for error, circle in found[:most]]


def neighbouring_counts(worm_ratio: int, count: int, circles: Sequence[int]) -> tuple[int | None, int | None]:
    """The next smaller and the next larger count that close on these circles; None where there is none within a fifth.

    Source: exact fractions; a fifth is our screening choice.

    >>> neighbouring_counts(40, 127, USUAL_CIRCLES)
    (126, 128)
    """
    span = max(3, count // 5)

    def first(counts: Iterator[int]) -> int | None:
        return next((n for n in counts if circles_that_fit(worm_ratio, n, tuple(circles))), None)

    return first(iter(range(count - 1, max(1, count - span - 1), -1))), first(iter(range(count + 1, count + span + 1)))


def other_ratios(worm_ratio: int, count: int, circles: Sequence[int]) -> list[tuple[int, tuple[int, ...]]]:
    """(ratio, circles that fit) of the usual ratios on which the count closes. Source: exact fractions.

    >>> other_ratios(40, 57, (18, 19, 20))
    [(60, (19,)), (72, (19,)), (90, (19,)), (120, (19,))]
    """
    found = ((ratio, circles_that_fit(ratio, count, tuple(circles))) for ratio in USUAL_RATIOS if ratio != worm_ratio)
    return [(ratio, fits) for ratio, fits in found if fits]


# -- angles ----------------------------------------------------------------------------------------------------------


def exact_share(angle: float) -> Fraction:
    """An angle [rad] as a share of the turn: the plain number of seconds of arc or milligon it was written as, where it is one.

    Angles in the unit mrad are no plain share of a turn and stay as near as a float is.  Source: arithmetic.

    >>> exact_share(math.radians(1 / 3600)), exact_share(math.pi / 200 * 0.001)
    (Fraction(1, 1296000), Fraction(1, 400000))
    """
    turns = angle / math.tau
    for per_turn in (ARCSEC * 1000, 400_000_000):  # thousandths of a second of arc, thousandths of a milligon
        plain = Fraction(round(turns * per_turn), per_turn)
        if plain and abs(float(plain) - turns) <= 1e-12 * turns:
            return plain
    return Fraction(turns)


def sine_setting(share: Fraction, bar: float, step: float) -> tuple[int, Fraction, float, float]:
    """A place set by a sine bar from the nearest quarter of the turn: (quarter, angle from it, blocks, angle left over).

    Never more than an eighth of a turn from a quarter: beyond 45 deg a sine bar answers less and less.
    bar  centre distance of its rolls [mm];  step  the block sum is rounded to this [mm];  blocks [mm], left over [rad]
    quarter  1 for 90 deg, …;  the angle is a share of a turn, below 0 where the place stands before the quarter
    Source: sine of the angle times the bar (textbook).

    >>> quarter, away, blocks, left = sine_setting(Fraction(1, 12), 100.0, 0.001)
    >>> quarter, away, round(blocks, 3), round(math.degrees(left) * 3600, 2)
    (0, Fraction(1, 12), 50.0, 0.0)
    """
    quarter = to_whole(4 * share.numerator, share.denominator)
    away = share - Fraction(quarter, 4)
    angle = math.tau * float(abs(away))
    blocks = round(bar * math.sin(angle) / step) * step
    left = math.asin(min(1.0, blocks / bar)) - angle
    return quarter % 4, away, blocks, -left if away < 0 else left


@record
class Coordinate:
    """One hole by coordinates, as set: x, y [mm] from the axis, and what rounding leaves along the radius and across it [mm]."""

    x: float
    y: float
    radius: float
    radial: float
    tangential: float


def coordinate(share: Fraction, *, radius: float, start: float, step: float) -> Coordinate:
    """A hole at `share` of a turn past the first, x along the direction 0, both rounded to the readout's step [mm].

    radius  of the circle [mm];  start  direction of the first hole [rad], counter-clockwise from x;  Source: geometry.

    >>> c = coordinate(Fraction(1, 3), radius=100.0, start=0.0, step=0.001)
    >>> round(c.x, 3), round(c.y, 3), round(c.radial, 6)
    (-50.0, 86.603, 0.000398)
    """
    angle = start + math.tau * float(share)
    x, y = (round(radius * part / step) * step + 0.0 for part in (math.cos(angle), math.sin(angle)))
    across = y * math.cos(angle) - x * math.sin(angle)
    return Coordinate(x, y, math.hypot(x, y), math.hypot(x, y) - radius, across)
