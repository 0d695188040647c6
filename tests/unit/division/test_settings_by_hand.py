"""Settings of an index table and ways of dividing, each by hand."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest

from setupcheck.division import tables, ways

# -- index tables ----------------------------------------------------------------------------------------------------


def test_a_table_of_three_on_ten_steps_by_hand() -> None:
    """Places at 0, 3 1/3, 6 2/3 of ten steps: 0, 3, 7, off by -1/30 and +1/30 of a turn."""
    lines = tables.settings(3, 10)
    assert [(s.place, s.steps, s.moved, s.off) for s in lines] == [
        (1, 0, 0, 0), (2, 3, 3, Fraction(-1, 30)), (3, 7, 4, Fraction(1, 30)), (1, 10, 3, 0)
    ]  # fmt: skip
    assert [s.angle for s in lines] == [0, Fraction(3, 10), Fraction(7, 10), 1]
    assert tables.off_range(lines) == Fraction(1, 15)
    assert tables.largest_off(lines) == Fraction(1, 30)
    assert (tables.left_open(lines, 10), tables.shared_settings(lines, 10)) == (0, 0)
    (one, again) = tables.settings(1, 10)
    assert (one.moved, again.moved, again.steps, again.place) == (0, 10, 10, 1)
    # cut as 1 3 2: from 7 on to 3 of the next turn are 6 steps, and from 3 to 10 are 7
    assert [s.moved for s in tables.settings(3, 10, (1, 3, 2))] == [0, 7, 6, 7]
    assert tables.off_range(tables.settings(5, 12)) == Fraction(2, 60) + Fraction(2, 60)  # 2.4 -> 2, 4.8 -> 5, 7.2, 9.6


def test_the_last_line_is_no_place_of_its_own() -> None:
    """Steps of two sevenths of a turn: 3 1/2 a turn, so the last line stands half a step past the start."""
    lines = tables.settings(2, Fraction(7, 2))
    assert [s.steps for s in lines] == [0, 2, 4]
    assert [s.off for s in lines] == [0, Fraction(1, 14), Fraction(1, 7)]
    assert tables.off_range(lines) == tables.largest_off(lines) == Fraction(1, 14)
    assert tables.left_open(lines, Fraction(7, 2)) == Fraction(1, 7)


@pytest.mark.parametrize(
    ("up", "low", "whole"), [(1, 2, 0), (3, 2, 2), (5, 2, 2), (7, 2, 4), (8, 3, 3), (7, 3, 2), (0, 5, 0), (9, 3, 3)]
)
def test_halves_go_to_the_even_one(up: int, low: int, whole: int) -> None:
    assert tables.to_whole(up, low) == whole == round(Fraction(up, low))


def test_circles_ratios_and_counts_near_by_hand() -> None:
    assert tables.USUAL_CIRCLES == tuple(range(15, 67))
    assert tables.turn_and_holes(100, 27) == (3, 19)
    assert tables.step_on(40, 12, 18) == (3, 6) and tables.step_on(40, 7, 20) is None
    # 40 x 20 = 800 holes over 7 places: remainders of seven, 3/7 of a hole at most
    assert tables.rounding_on(40, 7, 20) == Fraction(3, 7 * 800)
    assert tables.rounding_on(40, 2, 15) == 0
    found = tables.nearest_circles(40, 7, [20, 15, 20, 17, 18])
    assert found == sorted(found, key=lambda f: (f[1], f[0])) and len(found) == 3
    assert dict(found) == {c: tables.rounding_on(40, 7, c) for c in (15, 17, 18, 20) if c in dict(found)}
    assert tables.nearest_circles(40, 7, [20, 21], most=1) == [(21, 0)]
    assert tables.neighbouring_counts(40, 127, (16, 20)) == (None, 128)  # 100 lies 27 below, more than a fifth
    assert tables.neighbouring_counts(40, 11, (15,)) == (10, 12)
    assert tables.neighbouring_counts(40, 1, (15,)) == (None, 2)
    assert tables.neighbouring_counts(7, 100, (15,)) == (None, 105)  # 105 is 7 x 15; from 80 on below there is none
    assert tables.neighbouring_counts(7, 126, (15,)) == (105, None)
    assert tables.neighbouring_counts(7, 132, (15,)) == (None, None)  # 105 lies 27 below, more than a fifth
    assert tables.other_ratios(40, 57, (19,)) == [(60, (19,)), (72, (19,)), (90, (19,)), (120, (19,))]
    assert tables.other_ratios(60, 7, (15, 16)) == []


def test_a_step_of_a_readout_is_a_plain_share_within_rounding() -> None:
    assert tables.exact_share(math.tau / 1_296_000_000) == Fraction(1, 1_296_000_000)
    assert tables.exact_share(math.tau / 400_000_000) == Fraction(1, 400_000_000)
    odd = 0.001234567891234
    assert abs(float(tables.exact_share(odd)) * math.tau - odd) < 1e-18
    assert tables.exact_share(odd).denominator > 1_296_000_000
    near = math.radians(1.0 / 3600.0)
    assert tables.exact_share(near * (1.0 + 1e-13)) == Fraction(1, 1_296_000)
    assert tables.exact_share(near * (1.0 + 1e-11)) != Fraction(1, 1_296_000)


@pytest.mark.parametrize(("degrees", "quarter", "away"), [
    (30.0, 0, 30.0), (60.0, 1, -30.0), (100.0, 1, 10.0), (350.0, 0, -10.0), (260.0, 3, -10.0), (45.0, 0, 45.0), (0.0, 0, 0.0),
])  # fmt: skip
def test_a_sine_bar_by_hand(degrees: float, quarter: int, away: float) -> None:
    """Blocks 100 sin of the angle from the nearest quarter, to 10 um; what is left over is the angle they make less that."""
    share = Fraction(degrees) / 360
    found, off, blocks, left = tables.sine_setting(share, 100.0, 0.01)
    exact = 100.0 * math.sin(math.radians(abs(away)))
    assert (found, float(off) * 360.0) == (quarter, pytest.approx(away))
    assert blocks == pytest.approx(round(exact, 2))
    made = math.degrees(math.asin(round(exact, 2) / 100.0))
    assert math.degrees(left) == pytest.approx((made - abs(away)) * (-1.0 if away < 0 else 1.0), abs=1e-9)


def test_a_hole_by_coordinates_by_hand() -> None:
    """Radius 50 at 30 + 90 deg, steps of 0.1: exact -25, 43.30127; set -25.0, 43.3."""
    hole = tables.coordinate(Fraction(1, 4), radius=50.0, start=math.radians(30.0), step=0.1)
    assert (hole.x, hole.y) == pytest.approx((-25.0, 43.3))
    assert hole.radius == pytest.approx(math.hypot(25.0, 43.3))
    assert hole.radial == pytest.approx(hole.radius - 50.0)
    u = complex(math.cos(math.radians(120.0)), math.sin(math.radians(120.0)))
    assert hole.tangential == pytest.approx((complex(hole.x, hole.y) * u.conjugate()).imag)
    assert abs(hole.tangential) > 1e-4


# -- ways ------------------------------------------------------------------------------------------------------------


def test_ways_of_dividing_by_hand() -> None:
    assert ways.parallax(2.0, 100.0) == pytest.approx(math.asin(0.02))
    assert ways.parallax(0.0, 100.0) == 0.0
    for centring, target in ((-0.1, 1.0), (1.0, 1.0), (2.0, 1.0)):
        with pytest.raises(ValueError, match="as far off the axis"):
            ways.parallax(centring, target)
    assert ways.target_for(2.0, 0.01) == pytest.approx(2.0 / math.sin(0.01))
    for slope in (0.3, -0.3):
        assert ways.plumb_wave(0.001, slope) == pytest.approx(0.001 * math.tan(0.3))
        assert ways.collimation_error(0.001, slope) == pytest.approx(0.001 / math.cos(0.3))
        assert ways.trunnion_error(0.001, slope) == pytest.approx(0.001 * math.tan(0.3))
    assert ways.tilted_axis_wave(0.02) == pytest.approx(math.tan(0.01) ** 2)
    assert [ways.left_over(24, n) for n in (7, 16, 5, 1, 48)] == [
        Fraction(3, 7),
        Fraction(1, 2),
        Fraction(1, 5),
        0,
        Fraction(1, 2),
    ]
    assert (
        ways.counts_near(24, 2) == (3,) and ways.counts_near(24, 23) == (12, 24) and ways.counts_near(24, 100) == (24,)
    )
    assert ways.quarter_of(7, 12) == (2, Fraction(1, 12)) and ways.quarter_of(1, 8) == (1, Fraction(-1, 8))
    assert ways.quarter_of(0, 5) == (0, 0) and ways.quarter_of(4, 5) == (3, Fraction(1, 20))
    errors = ways.sine_bar_errors(6, 100.0, 0.002)
    # 0, 60 is 30 from 90, 120 likewise, 180, 240 and 300 from 270
    third = 0.002 / (100.0 * math.cos(math.radians(30.0)))
    assert errors == pytest.approx((0.0, third, third, 0.0, third, third))


def test_rounded_coordinates_by_hand() -> None:
    """0.7 of a step beyond a whole one is rounded up by 0.3: outwards at 0 deg, and at 90 deg counter-clockwise none."""
    (right, top, left) = ways.rounded_coordinates((0.0, math.pi / 2.0, math.pi), 10.007, 0.01)
    assert right == pytest.approx((0.003, 0.0), abs=1e-9)
    assert top == pytest.approx((0.003, 0.0), abs=1e-9)
    assert left == pytest.approx((0.003, 0.0), abs=1e-9)
    angle = math.radians(30.0)
    ((out, across),) = ways.rounded_coordinates((angle,), 10.0, 0.5)
    x, y = 8.5 - 10.0 * math.cos(angle), 0.0  # 5.0 lies on a step
    assert (out, across) == pytest.approx((x * math.cos(angle) + y, -x * math.sin(angle)))
    assert ways._rounded(5.0 + 1e-13, 0.5) == 0.0 and ways._rounded(5.1, 0.5) == pytest.approx(-0.1)
    assert ways._rounded(5000.0 + 4e-9, 0.5) == 0.0
    assert ways._rounded(0.25 + 1e-9, 0.5) == pytest.approx(0.25 - 1e-9, abs=1e-12)


def test_drifts_and_their_slow_waves_by_numpy() -> None:
    assert ways.drift_shape(1, None) == (0.0,)
    assert ways.drift_shape(6, "spread") == (0.0, 0.6, 0.2, 0.8, 0.4, 1.0)
    for n in (2, 3, 5, 8, 9, 30):
        shape = tuple(np.random.default_rng(n).normal(size=n))
        spectrum = 2.0 / n * np.abs(np.fft.fft(shape))
        for most in (1, 4):
            wanted = max(spectrum[1 : min(most, (n - 1) // 2) + 1], default=0.0)
            assert ways.slowest_waves(shape, most) == pytest.approx(wanted)


def test_blocks_longer_than_the_bar_stand_it_upright() -> None:
    """A step of 1.2 bars: 45 deg asks for 0.71 of a bar, the nearest sum is 1.2, and no bar goes beyond 90 deg."""
    quarter, away, blocks, left = tables.sine_setting(Fraction(1, 8), 1.0, 1.2)
    assert (quarter, away, blocks) == (0, Fraction(1, 8), pytest.approx(1.2))
    assert left == pytest.approx(math.pi / 4.0)
