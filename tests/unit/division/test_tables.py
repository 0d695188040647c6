"""Index tables close and round as the exact fractions say, for every count, ratio and circle of a shop."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as some

from setupcheck.division import tables
from setupcheck.division.methods import circles_that_fit, rounded_settings
from setupcheck.division.order import cutting_order
from setupcheck.notation.shares import fixed_of, sexagesimal

RATIOS = (5, 40, 60, 72, 90, 120)
CIRCLES = (15, 16, 17, 18, 19, 20, 21, 23, 27, 29, 31, 33, 37, 39, 41, 43, 47, 49, 66)


@pytest.mark.parametrize("ratio", RATIOS)
def test_every_table_closes_and_the_constant_step_tells_where_a_circle_fits(ratio: int) -> None:
    """Hands add holes: ratio x circle of them are a turn of the work, whatever a single move was rounded to."""
    for count in range(2, 401):
        for circle in CIRCLES:
            whole = ratio * circle
            lines = tables.settings(count, whole)
            added = [line.moved for line in lines]
            assert sum(added) == whole
            assert len(lines) == count + 1
            fits = circle in circles_that_fit(ratio, count, (circle,))
            assert fits == (set(added[1:]) == {whole // count} and whole % count == 0)
            assert fits == (tables.step_on(ratio, count, circle) is not None)


@given(
    some.integers(1, 400),
    some.sampled_from(RATIOS),
    some.sampled_from(CIRCLES),
    some.sampled_from(["in-turn", "spread"]),
)
@settings(deadline=None)
def test_each_line_is_the_nearest_hole_counted_from_the_start(count: int, ratio: int, circle: int, how: str) -> None:
    """Worked out another way: decimal turns of the crank, hole by hole, in floats; and nothing adds up."""
    whole = ratio * circle
    order = cutting_order(count, how)  # type: ignore[arg-type]
    lines = tables.settings(count, whole, order if how == "spread" else ())
    assert [line.place for line in lines] == [*order, 1]
    at = 0
    for line in lines[:-1]:
        at = (at + line.moved) % whole
        wanted = (line.place - 1) / count * whole
        assert abs(line.steps - wanted) <= 0.5 + 1e-9
        assert at == line.steps % whole
        assert line.angle == Fraction(line.steps, whole)
        assert float(line.off) == pytest.approx((line.steps - wanted) / whole, abs=1e-15)
    assert tables.left_open(lines, whole) == 0
    assert tables.largest_off(lines) == tables.rounding_on(ratio, count, circle)
    assert tables.shared_settings(lines, whole) == max(0, count - whole)


@given(some.integers(1, 400), some.integers(1, 100_000))
def test_the_moves_of_a_readout_are_those_the_errors_are_counted_with(count: int, tenths: int) -> None:
    """The same rounding as the ledger's, which is worked out in floats; ties may go either way."""
    step = math.radians(tenths / 36_000)
    per_turn = 1 / tables.exact_share(step)
    assert per_turn == Fraction(12_960_000, tenths)
    lines = tables.settings(count, per_turn)
    for line, error in zip(lines, rounded_settings(count, step), strict=False):
        tie = abs(abs(float(line.off * per_turn)) - 0.5) < 1e-6
        assert (abs(error) if tie else error) == pytest.approx(
            math.tau * (abs(float(line.off)) if tie else float(line.off)), abs=1e-9
        )
    assert (tables.left_open(lines, per_turn) == 0) == (12_960_000 % tenths == 0)


def test_a_readout_that_does_not_divide_the_turn_is_open_by_the_rest() -> None:
    # 1 296 000" / 7" = 185 142.86: 185 143 steps are 1 296 001"
    lines = tables.settings(24, Fraction(1_296_000, 7))
    assert Fraction(1, 1_296_000) == tables.left_open(lines, Fraction(1_296_000, 7))


@pytest.mark.parametrize(("count", "notches", "shared"), [(24, 24, 0), (48, 24, 24), (25, 24, 1), (7, 24, 0)])
def test_a_plate_with_too_few_notches_has_places_in_one_notch(count: int, notches: int, shared: int) -> None:
    lines = tables.settings(count, notches)
    assert shared == tables.shared_settings(lines, notches)
    assert tables.left_open(lines, notches) == 0


def test_an_order_names_each_place_once() -> None:
    for order in ((1, 2, 2), (2, 1, 3), (1, 2)):
        with pytest.raises(ValueError, match="each place once"):
            tables.settings(3, 100, order)


@given(some.fractions(0, 1, max_denominator=500))
def test_the_three_spellings_of_an_angle_agree_within_their_digits(share: Fraction) -> None:
    degrees, minutes, seconds = sexagesimal(share)
    assert float(minutes) < 60
    assert float(seconds) < 60
    dms = Fraction(degrees) + Fraction(minutes) / 60 + Fraction(seconds) / 3600
    gon, decimal = Fraction(fixed_of(share, 400, 5)), Fraction(fixed_of(share, 360, 6))
    assert abs(dms - share * 360) <= Fraction(1, 2) / 36_000
    assert abs(gon - share * 400) <= Fraction(1, 2) / 100_000
    assert abs(decimal - share * 360) <= Fraction(1, 2) / 1_000_000
    assert abs(dms - gon * Fraction(9, 10)) <= Fraction(1, 2) / 36_000 + Fraction(9, 20) / 100_000


@given(some.fractions(0, 1, max_denominator=400), some.sampled_from([100.0, 127.0, 200.0, 254.0]))
def test_a_sine_bar_is_never_asked_for_more_than_45_deg(share: Fraction, bar: float) -> None:
    quarter, away, blocks, left = tables.sine_setting(share, bar, 0.001)
    assert abs(away) <= Fraction(1, 8)
    assert (Fraction(quarter, 4) + away - share) % 1 == 0
    angle = math.asin(blocks / bar) * (-1 if away < 0 else 1)
    assert math.tau * float(away) + left == pytest.approx(angle, abs=1e-12)
    # half a step of the blocks at 45 deg: 0.5 um / (bar cos 45)
    assert abs(left) <= 0.0005 / (bar * math.cos(math.pi / 4)) * 1.00002


@given(some.integers(2, 60), some.floats(5.0, 500.0), some.floats(-7.0, 7.0))
def test_coordinates_come_within_half_a_step_and_their_angles_close(count: int, radius: float, start: float) -> None:
    step = 0.001
    for j in range(count + 1):
        hole = tables.coordinate(Fraction(j, count), radius=radius, start=start, step=step)
        exact = radius * complex(math.cos(start + math.tau * j / count), math.sin(start + math.tau * j / count))
        off = complex(hole.x, hole.y) - exact
        assert max(abs(off.real), abs(off.imag)) <= step / 2 + 1e-9
        assert abs(off) == pytest.approx(math.hypot(hole.radial, hole.tangential), abs=1e-6)
    first, last = (tables.coordinate(Fraction(n), radius=radius, start=0.0, step=step) for n in (0, 1))
    assert (first.x, first.y) == (last.x, last.y)


@pytest.mark.parametrize(
    ("written", "share"),
    [
        (math.radians(0.001), Fraction(1, 360_000)),
        (math.radians(5 / 60), Fraction(1, 4320)),
        (math.pi / 200 * 0.0001, Fraction(1, 4_000_000)),
        (math.radians(0.1 / 3600), Fraction(1, 12_960_000)),
    ],
)
def test_a_step_is_the_plain_share_it_was_written_as(written: float, share: Fraction) -> None:
    assert share == tables.exact_share(written)


def test_an_angle_that_is_no_plain_share_keeps_its_float() -> None:
    assert float(tables.exact_share(0.0002) * Fraction(math.tau)) == pytest.approx(0.0002, rel=1e-15)
    assert tables.exact_share(0.0) == 0
