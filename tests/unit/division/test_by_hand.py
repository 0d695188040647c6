"""Pieces of a division test against scipy, numpy and sums by hand: ends of a wave, odds of its owner, order, repeatability."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest
from scipy import stats

from setupcheck.division.amplitude import length_of, t_at
from setupcheck.division.columns import BadCell, reader
from setupcheck.division.design import Term, sums_of
from setupcheck.division.eccentric import Wheel
from setupcheck.division.faces import acceptance, spread_of_sets, wrapped
from setupcheck.division.fit import fitted, scatter_of
from setupcheck.division.methods import circles_that_fit, holes_left_over, rounded_settings, turns_per_place
from setupcheck.division.order import cutting_order, ranks
from setupcheck.division.owners import AS_PLANNED, OUT_OF_HAND, explained
from setupcheck.division.points import Points, _level
from setupcheck.division.repeatability import figures, repeatability, sighting

MANY = 1e5
"""Degrees of freedom as good as infinite: Student's t is 1.95998 there."""


@pytest.mark.parametrize("value", [3.0, 5.0, 12.0])
def test_ends_of_a_wave_are_those_of_rices_law(value: float) -> None:
    """|X| of a two-dimensional normal vector of length L squared is a non-central chi square, 2 degrees, lambda L^2."""
    found = length_of(np.array([0.0, value]), np.eye(2), MANY)
    assert found.value == pytest.approx(value)
    assert stats.ncx2.cdf(value**2, 2, found.low**2) == pytest.approx(0.975, abs=2e-3)
    assert stats.ncx2.cdf(value**2, 2, found.high**2) == pytest.approx(0.025, abs=2e-3)
    assert found.direction == pytest.approx(math.pi / 2.0)
    assert found.within == pytest.approx(math.asin(stats.norm.ppf(0.975) / value), rel=1e-4)


def test_few_degrees_of_freedom_widen_by_student_and_a_bound_is_added_straight() -> None:
    plain = length_of(np.array([-40.0, 0.0]), np.eye(2), 5.0)
    assert t_at(5.0) == pytest.approx(stats.t.ppf(0.975, 5))
    assert t_at(0.1) == pytest.approx(stats.t.ppf(0.975, 1))
    assert plain.within == pytest.approx(math.asin(stats.t.ppf(0.975, 5) / 40.0), rel=1e-6)
    # far from nothing Rice is normal, its mean 1/(2 L) too long: both ends sink by that
    assert plain.high - 40.0 == pytest.approx(stats.t.ppf(0.975, 5), abs=0.1)
    assert 40.0 - plain.low == pytest.approx(stats.t.ppf(0.975, 5), abs=0.1)
    also = length_of(np.array([-40.0, 0.0]), np.eye(2), 5.0, also=3.0)
    assert (also.low, also.high) == pytest.approx((plain.low - 3.0, plain.high + 3.0))
    assert also.within == pytest.approx((plain.within or 0.0) + math.asin(3.0 / 40.0))
    assert also.direction == pytest.approx(math.pi)


def test_a_wave_of_nothing_starts_at_zero_and_has_no_direction() -> None:
    found = length_of(np.zeros(2), np.eye(2), MANY)
    assert (found.value, found.low, found.within) == (0.0, 0.0, None)
    assert found.high >= 1.0  # readings that happen to agree prove no perfection
    exact = length_of(np.array([3.0, 4.0]), np.zeros((2, 2)), 10.0)
    assert (exact.value, exact.low, exact.high) == (5.0, 5.0, 5.0)


def test_unequal_scatter_turns_the_direction_where_it_is_wide() -> None:
    along = length_of(np.array([10.0, 0.0]), np.diag([4.0, 0.01]), MANY)
    across = length_of(np.array([10.0, 0.0]), np.diag([0.01, 4.0]), MANY)
    assert along.high - along.low > 3.0 * (across.high - across.low)
    assert across.within is not None and along.within is not None
    assert across.within > 10.0 * along.within


def test_odds_are_bayes_with_gaussians_of_scipy() -> None:
    off = np.array([4.0, -3.0])
    spreads = {"op 30": np.diag([1.0, 2.0]), "op 40": np.array([[3.0, 0.5], [0.5, 1.0]])}
    noise, middle = np.eye(2) * 0.2, np.array([0.5, 0.25])
    found = explained(off + middle, noise, expected=middle, spreads=spreads)
    planned = noise + sum(spreads.values())
    density = {AS_PLANNED: stats.multivariate_normal(cov=planned).pdf(off)}
    shares = {}
    for name, spread in spreads.items():
        wide = planned + (OUT_OF_HAND**2 - 1.0) * spread
        density[name] = stats.multivariate_normal(cov=wide).pdf(off)
        shares[name] = OUT_OF_HAND**2 * spread @ np.linalg.inv(wide) @ off
    total = sum(density.values())
    assert {o.name: o.odds for o in found.owners} == pytest.approx({n: d / total for n, d in density.items()})
    assert [o.odds for o in found.owners] == sorted((o.odds for o in found.owners), reverse=True)
    for owner in found.owners:
        if owner.name in shares:
            assert owner.share == pytest.approx(tuple(shares[owner.name]))
            assert owner.length == pytest.approx(math.hypot(*shares[owner.name]))
    assert found.beyond == pytest.approx(stats.chi2.sf(off @ np.linalg.inv(planned) @ off, 2))
    four = explained(np.array([1.0, 2.0, 3.0, 4.0]), np.eye(4), expected=np.zeros(4), spreads={"a": np.eye(4)})
    assert four.beyond == pytest.approx(stats.chi2.sf(30.0 / 2.0, 4))
    first, second = (o.odds for o in four.owners[:2])
    assert four.told_apart == (first >= 3.0 * second)
    with pytest.raises(ValueError, match="room"):
        explained(np.zeros(2), np.zeros((2, 2)), expected=np.zeros(2), spreads={})


def test_a_run_counts_from_where_most_of_its_readings_stand() -> None:
    """Three of five at 0.3 of a pitch, one a pitch above it and one two below."""
    for pitch in (0.08, 5.0):
        own = pitch * np.array([0.3, 1.3, 0.3, -1.7, 0.3])
        assert 0.3 * pitch == pytest.approx(_level(own, pitch))


def test_an_angle_comes_back_within_half_a_turn() -> None:
    assert wrapped(np.array([math.pi + 0.1, -math.pi - 0.1, 0.2])) == pytest.approx(
        [-math.pi + 0.1, math.pi - 0.1, 0.2]
    )


def test_sets_of_sightings_scatter_as_a_two_way_table_says() -> None:
    """Rows 1 2 6 and 2 5 8: targets' means 1.5 3.5 7, left -.5 -1.5 -1 and its opposite; means -1 and 1; rest .5 -.5 0."""
    spread, nu = spread_of_sets(np.array([[1.0, 2.0, 6.0], [2.0, 5.0, 8.0]]))
    assert nu == 2
    assert spread == pytest.approx(math.sqrt(2.0 * (0.25 + 0.25) / 2.0))
    assert acceptance(8) == pytest.approx(math.sqrt(stats.chi2.ppf(0.95, 8) / 8.0), rel=1e-6)


@pytest.mark.parametrize("count", [1, 2, 3, 5, 7, 8, 12, 39, 40, 72, 97, 360])
def test_every_order_meets_every_place_once_and_spreads_its_first(count: int) -> None:
    order = cutting_order(count, "spread")
    assert sorted(order) == list(range(1, count + 1)) and order[0] == 1
    assert cutting_order(count, "in-turn") == tuple(range(1, count + 1))
    assert [order[r] for r in ranks(count, "spread")] == list(range(1, count + 1))
    if count >= 6:
        near = min(abs(a - b) for i, a in enumerate(order[:3]) for b in order[:i])
        near = min(near, *(count - abs(a - b) for i, a in enumerate(order[:3]) for b in order[:i]))
        assert near >= count // 4  # thirds, quarters or fifths of the circle, rounded down


def test_orders_by_hand_and_what_is_none() -> None:
    assert cutting_order(5, "spread") == (1, 2, 3, 4, 5)
    assert cutting_order(7, "spread") == (1, 3, 5, 2, 4, 6, 7)
    for count, how, says in ((0, "spread", "one place"), (4, "backwards", "no order")):
        with pytest.raises(ValueError, match=says):
            cutting_order(count, how)  # type: ignore[arg-type]


def test_turns_of_the_crank_are_exact() -> None:
    assert turns_per_place(40, 127) == Fraction(40, 127)
    assert holes_left_over(40, 72, 27) == 0.0  # 5/9 of 27 is 15
    assert holes_left_over(40, 72, 20) == pytest.approx(1 / 9)  # 11 1/9
    assert holes_left_over(40, 72, 25) == pytest.approx(1 / 9)  # 13 8/9
    assert circles_that_fit(40, 72) == (18, 27, 36, 45, 54, 63)
    assert circles_that_fit(40, 127) == ()
    errors = rounded_settings(3, math.radians(0.1), start=math.radians(0.03))
    # 0.03 -> 0.0, 120.03 -> 120.0, 240.03 -> 240.0
    assert [math.degrees(e) for e in errors] == pytest.approx([-0.03, -0.03, -0.03])
    assert rounded_settings(4, math.radians(0.25)) == (0.0, 0.0, 0.0, 0.0)
    for step in (0.0, -1.0):
        with pytest.raises(ValueError, match="above zero"):
            rounded_settings(3, step)


def test_figures_of_positioning_by_hand() -> None:
    """Two stations; forward means 4, 7 with s 0.5, 1; reverse 1, 2 with s 0.25, 0.5."""
    up, down = (np.array([4.0, 7.0]), np.array([0.5, 1.0])), (np.array([1.0, 2.0]), np.array([0.25, 0.5]))
    found = figures(up, down, 3)
    assert (found.A, found.R, found.E) == (9.0 - 0.5, 2.0 + 1.0 + 5.0, 6.0)
    assert (found.B, found.mean_B, found.M) == (5.0, 4.0, 2.0)
    assert found.up == (9.0 - 3.0, 4.0, 3.0)
    assert found.down == (3.0 - 0.5, 2.0, 1.0)
    assert (found.stations, found.runs) == (2, 3)
    still = figures((np.array([0.0, 0.0]), np.array([3.0, 0.0])), (np.zeros(2), np.zeros(2)), 2)
    assert still.R == 12.0  # 4 s of one direction passes 2 s + 2 s + |B|


def points(rows: list[tuple[int, int, float, float]]) -> Points:
    """(run, direction, station, deviation) in the order of time."""
    run, direction, theta, y = (np.array(column) for column in zip(*rows, strict=True))
    n = len(rows)
    return Points(
        theta.astype(float), y.astype(float), np.linspace(0.0, 1.0, n), run.astype(np.int32), direction.astype(np.int8),
        np.arange(n, dtype=np.int32) + 2,
    )  # fmt: skip


def test_repeatability_of_a_file_is_that_of_its_stations() -> None:
    rows = []
    for run, (direction, values) in enumerate([(1, (4.0, 6.0)), (-1, (1.0, 2.5)), (1, (5.0, 8.0)), (-1, (2.0, 1.5))]):
        rows += [(run, direction, theta, y) for theta, y in zip((0.0, 1.0), values, strict=True)]
    found = repeatability(points(rows))
    assert not isinstance(found, str)
    s = [math.sqrt(0.5), math.sqrt(2.0)], [math.sqrt(0.5)] * 2
    by_hand = figures((np.array([4.5, 7.0]), np.array(s[0])), (np.array([1.5, 2.0]), np.array(s[1])), 2)
    for name in ("A", "R", "E", "B", "mean_B", "M", "stations", "runs"):
        assert getattr(found, name) == pytest.approx(getattr(by_hand, name)), name
    zeros = np.array([1.0, 0.0, 1.0, 0.0])
    shifted = repeatability(points([(r, d, t, y + zeros[r]) for r, d, t, y in rows]), zeros)
    assert not isinstance(shifted, str)
    assert (shifted.B, shifted.A, shifted.R) == pytest.approx((found.B, found.A, found.R))
    one_way = [r for r in rows if r[1] > 0]
    assert "forward and reverse" in str(repeatability(points(one_way)))
    assert "2 runs each way" in str(repeatability(points(rows[:4])))
    assert sighting(points(rows)) == pytest.approx(spread_of_sets(np.array([[4.0, 6.0], [5.0, 8.0]])))
    assert sighting(points(rows[:4])) is None


def test_a_fit_is_numpys_least_squares_and_its_scatter_the_pooled_one() -> None:
    rng = np.random.default_rng(4)
    rows = [
        (0, 1, theta, 0.3 + 2.0 * math.cos(theta) - math.sin(theta) + e)
        for _ in range(2)
        for theta, e in zip(np.arange(12) * math.tau / 12, rng.normal(0.0, 0.1, 12), strict=True)
    ]
    data = points(rows)
    terms = (Term("zero", 0.0), Term("wave", 1.0))
    found = fitted(data, sums_of(data, terms), terms)
    matrix = np.column_stack([np.ones(24), np.cos(data.theta), np.sin(data.theta)])
    values, square, *_ = np.linalg.lstsq(matrix, data.y, rcond=None)
    assert found.values == pytest.approx(values)
    assert found.square == pytest.approx(float(square[0]))
    assert found.nu == 21
    assert found.vector(terms[1]) == pytest.approx(values[1:])
    assert found.covariance(terms[1]) == pytest.approx(np.linalg.inv(matrix.T @ matrix)[1:, 1:])
    pure = sum((a[3] - b[3]) ** 2 / 2.0 for a, b in zip(rows[:12], rows[12:], strict=True))
    scatter = scatter_of(data, found)
    assert scatter.repeat_nu == 12
    assert scatter.repeat == pytest.approx(math.sqrt(pure / 12.0))
    lack = (found.square - pure) / 9.0
    assert scatter.uneven == pytest.approx(stats.f.sf(lack / (pure / 12.0), 9, 12), rel=1e-6)
    if scatter.uneven is not None and scatter.uneven >= 0.25:
        assert (scatter.used, scatter.nu) == pytest.approx((found.square / 21.0, 21))
    else:
        assert (scatter.used, scatter.nu) == pytest.approx((lack, 9))
    with pytest.raises(KeyError):
        found.at(Term("wave", 5.0))


def test_teeth_stand_half_a_pitch_on_from_their_gaps() -> None:
    """Four gaps at 10, 100, 190, 280 deg: teeth at 55, 145, 235, 325; counted the other way at 325, 235, 145, 55."""
    on = Wheel(4, start=math.radians(10.0))
    back = Wheel(4, start=math.radians(10.0), turn=-1)
    assert [on.tooth(math.radians(d)) for d in (55, 145, 235, 325, 60, 99)] == [1, 2, 3, 4, 1, 1]
    assert [back.tooth(math.radians(d)) for d in (325, 235, 145, 55)] == [1, 2, 3, 4]


def test_a_cell_of_degrees_minutes_and_seconds_is_never_a_bare_number() -> None:
    read = reader("reading_dms")
    assert read("0") == read("0.0") == 0.0
    assert read("12°30'36\"") == pytest.approx(math.radians(12.51))
    for bare in ("5", "12.5"):
        with pytest.raises(BadCell):
            read(bare)


@pytest.mark.parametrize("unit", [1e-3, 5.0, 300.0])
def test_another_unit_changes_no_interval(unit: float) -> None:
    for vector in ([0.6, 0.0], [2.5, -1.0], [8.0, 3.0]):
        plain = length_of(np.array(vector), np.eye(2), 9.0)
        scaled = length_of(unit * np.array(vector), unit**2 * np.eye(2), 9.0)
        assert (scaled.low, scaled.high) == pytest.approx((unit * plain.low, unit * plain.high), rel=1e-6)
        assert scaled.within == (None if plain.within is None else pytest.approx(plain.within, rel=1e-6))


def test_a_direction_that_scatters_alone_counts_four_times() -> None:
    back = figures((np.zeros(2), np.zeros(2)), (np.zeros(2), np.array([3.0, 0.0])), 2)
    assert back.R == 12.0


def test_a_cell_in_another_unit_than_its_column_is_refused() -> None:
    assert reader("reading_deg")("12.5") == pytest.approx(math.radians(12.5))
    assert reader("reading_deg")("12.5 deg") == pytest.approx(math.radians(12.5))
    with pytest.raises(BadCell, match=r"Write 11\.25"):
        reader("reading_deg")("12.5 gon")
