"""Columns and sums of the fit by hand, the waves that stations allow, and the searches for what a fit hides, by brute force."""

from __future__ import annotations

import math

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import stats

from setupcheck.division import design as module
from setupcheck.division import doubts
from setupcheck.division.amplitude import t_at
from setupcheck.division.design import Sums, Term, blocks, cells, columns, comes_round, design, places, sums_of
from setupcheck.division.fit import Fit, Scatter, fitted, scatter_of
from setupcheck.division.points import Points
from tests.unit.division.few_points import points

Reals = NDArray[np.floating]
ALL = slice(None)


def test_every_column_by_hand() -> None:
    """Five readings at 0, 90, 180, 270, 360 deg; times 0, 1/4 … 1, counted from the middle of the test."""
    data = points([0, 90, 180, 270, 360], run=[0, 0, 1, 1, 2], direction=[1, 1, -1, -1, 0])
    by_hand = {
        Term("zero", 1.0): [[0, 0, 1, 1, 0]],
        Term("drift"): [[-0.5, -0.25, 0.0, 0.25, 0.5]],
        Term("bend", 2.0): [[1.0, 0.25, 0.0, 0.25, 1.0]],  # 4 t t
        Term("bend", 3.0): [[-1.0, -0.125, 0.0, 0.125, 1.0]],  # 8 t t t
        Term("reversal"): [[0.5, 0.5, -0.5, -0.5, 0.0]],
        Term("wave", 1.0): [[1, 0, -1, 0, 1], [0, 1, 0, -1, 0]],
        Term("wave", 2.0): [[1, -1, 1, -1, 1], [0, 0, 0, 0, 0]],
        Term("swing", 1.0): [[0.5, 0, 0.5, 0, 0], [0, 0.5, 0, 0.5, 0]],
        Term("slope"): [[-math.pi, -math.pi / 2, 0.0, math.pi / 2, math.pi]],
        Term("step", math.pi): [[0, 0, 1, 1, 1]],
        Term("slip", 0.5): [[0, 0, 1, 1, 1]],
    }
    for term, wanted in by_hand.items():
        found = columns(term, data, ALL)
        assert term.width == len(found) == len(wanted)
        for mine, its in zip(found, wanted, strict=True):
            assert mine == pytest.approx(its, abs=1e-12), term
        for mine, part in zip(found, columns(term, data, slice(1, 4)), strict=True):
            assert part == pytest.approx(mine[1:4], abs=1e-12), term


def test_sums_are_the_same_however_the_rows_are_cut(monkeypatch: pytest.MonkeyPatch) -> None:
    rng = np.random.default_rng(1)
    data = points(list(rng.uniform(0, 360, 29)), rng.normal(size=29), run=[0] * 10 + [1] * 19)
    terms = [Term("zero", 0.0), Term("zero", 1.0), Term("drift"), Term("wave", 3.0)]
    matrix = np.column_stack([*(c for t in terms for c in columns(t, data, ALL)), data.y])
    for block in (4_000_000, 20, 1):
        monkeypatch.setattr(module, "BLOCK", block)
        cut = list(blocks(data, terms))
        assert [rows.start for rows, _ in cut] == list(range(0, 29, {4_000_000: 29, 20: 4, 1: 1}[block]))
        assert [rows.stop for rows, _ in cut][-1] == 29
        assert np.concatenate([m for _, m in cut]) == pytest.approx(matrix[:, :-1])
        found = sums_of(data, terms)
        assert found.products == pytest.approx(matrix.T @ matrix)
        assert (found.n, found.terms) == (29, tuple(terms))
        assert found.at([terms[3], terms[1]]) == [3, 4, 1]


def test_what_is_left_and_taken_is_what_numpy_leaves() -> None:
    """Terms are taken out of another one's columns: residuals of numpy's least squares, and its coefficients."""
    rng = np.random.default_rng(2)
    data = points(list(rng.uniform(0, 200, 15)), rng.normal(size=15))
    base, of = [Term("zero", 0.0), Term("drift")], Term("wave", 1.0)
    sums = sums_of(data, [of, *base])
    a = np.column_stack([c for t in base for c in columns(t, data, ALL)])
    b = np.column_stack(columns(of, data, ALL))
    took = np.linalg.lstsq(a, b, rcond=None)[0]
    rest = b - a @ took
    assert sums.left(base, sums.at([of])) == pytest.approx(rest.T @ rest)
    assert sums.taken(base, of) == pytest.approx(took)
    size = (b**2).sum(axis=0).mean()
    assert sums.shares(base, of) == pytest.approx(np.linalg.eigvalsh(rest.T @ rest / size))
    drift = columns(Term("drift"), data, ALL)[0]
    beside = np.column_stack([np.ones(15), b])
    off = drift - beside @ np.linalg.lstsq(beside, drift, rcond=None)[0]
    alone = ((drift - drift.mean()) ** 2).sum()
    assert sums.told([base[0], of], Term("drift")) == pytest.approx(off @ off / alone)


def test_a_column_of_nothing_has_no_share_and_divides_nothing() -> None:
    """Sine of twelve waves at stations of 15 deg and no direction at all: columns of zeros."""
    data = points([0.0, 15.0, 30.0, 45.0] * 2)
    zero, reversal, swing = Term("zero", 0.0), Term("reversal"), Term("swing", 1.0)
    sums = sums_of(data, [zero, reversal, swing])
    assert sums.told([zero], reversal) == 0.0
    assert list(sums.shares([zero], swing)) == [0.0, 0.0]
    assert sums.taken([zero], swing) == pytest.approx(np.zeros((1, 2)))


@pytest.mark.parametrize(("turns", "fits"), [(2, False), (1, False)])
def test_a_slope_over_more_than_a_turn_is_an_unknown_too(turns: int, fits: bool) -> None:
    """Stations at 0, 30, 60 deg: zero, slope and a wave of five are four unknowns, and three stations tell three."""
    data = points([30.0 * j + 360.0 * k for k in range(turns) for j in range(3)] * 4)
    plan = design(data, [5.0])
    assert (plan.stations, plan.arc, plan.has("slope")) == (3, True, True)
    assert plan.has("wave") == fits
    assert [a.why for a in plan.alike] == ["few" if turns == 2 else "folded"]


def test_on_an_arc_only_waves_of_five_and_more_are_told() -> None:
    data = points([10.0 * j for j in range(13)] * 2)
    plan = design(data, [1.0, 4.9, 5.0, 9.0])
    assert plan.arc
    assert [(a.harmonic, a.why, a.taken_for) for a in plan.alike] == [(1.0, "arc", ()), (4.9, "arc", ())]
    assert [t.harmonic for t in plan.terms if t.kind == "wave"] == [5.0, 9.0]


@pytest.mark.parametrize(("degrees", "arc"), [
    ([0.0, 90.0, 179.0], True), ([0.0, 90.0, 181.0], False), ([300.0, 0.0, 60.0], True), ([10.0], True),
    ([0.0, 359.9999999999, 120.0, 240.0], False), ([720.0, 90.0, 179.0], True),
])  # fmt: skip
def test_stations_within_half_a_turn_are_an_arc(degrees: list[float], arc: bool) -> None:
    plan = design(points(degrees * 3), [1.0])
    assert plan.arc == arc
    assert plan.stations == {4: 3}.get(len(degrees), len(degrees))  # a whole turn less nothing is the first station
    assert plan.repeated


def test_a_first_wave_needs_one_station_to_spare() -> None:
    """Zero and a wave are three unknowns: three stations have none to spare, four have one."""
    for stations, why in ((3, ["few"]), (4, [])):
        data = points([360.0 * j / stations for j in range(stations)] * 4)
        assert [a.why for a in design(data, [1.0]).alike] == why
    single = points([90.0 * j for j in range(4)])  # zero and drift and three more would be five readings
    assert [a.why for a in design(single, [1.0]).alike] == ["few"]
    assert not design(single, [1.0]).repeated


def test_waves_that_look_alike_name_each_other_by_how_much() -> None:
    """At 12 stations, 11 waves are one wave the other way round, and 12 are a zero; 7 and 5 likewise."""
    data = points([30.0 * j for j in range(12)] * 3)
    plan = design(data, [1.0, 2.0, 5.0, 11.0, 12.0, 7.0, 13.0])
    told = {a.harmonic: (a.why, a.taken_for) for a in plan.alike}
    assert told == {
        11.0: ("folded", (1.0,)),
        12.0: ("invisible", ()),
        7.0: ("folded", (5.0,)),
        13.0: ("folded", (1.0,)),
    }


def test_a_swing_needs_six_stations_and_both_directions_in_one_run() -> None:
    def plan(stations: int, run: list[int] | None = None) -> module.Design:
        there = [360.0 * j / stations for j in range(stations)]
        ways = [1] * stations + [-1] * stations
        runs = None if run is None else [run[0]] * stations + [run[1]] * stations
        return design(
            points([*there, *there[::-1]] * 2, direction=ways * 2, run=None if runs is None else runs * 2), [1.0]
        )

    assert plan(6).has("swing") and plan(6).reversal == "fitted"
    assert not plan(5).has("swing") and plan(5).has("reversal")
    apart = plan(6, [0, 1])
    assert (apart.reversal, apart.has("reversal"), apart.has("swing")) == ("apart", False, False)
    assert design(points([60.0 * j for j in range(6)] * 2, direction=[1] * 12), [1.0]).reversal == "none"
    assert design(points([60.0 * j for j in range(6)] * 2), [1.0]).reversal == "none"


def test_stations_a_full_turn_on_are_the_same_where_all_waves_come_round() -> None:
    data = points([0.0, 90.0, 360.0, 450.0, 359.9999999999])
    assert list(np.degrees(places(data, whole=True))) == pytest.approx([0.0, 90.0, 0.0, 90.0, 0.0], abs=1e-6)
    assert list(cells(data, whole=True)) == [0, 1, 0, 1, 0]
    assert list(np.degrees(places(data, whole=False))) == pytest.approx([0.0, 90.0, 360.0, 450.0, 360.0], abs=1e-6)
    assert list(cells(data, whole=False)) == [0, 1, 2, 3, 2]
    assert comes_round([1.0, 72.0]) and not comes_round([1.0, 22.5])
    # 1e-7 deg are 1.7e-9 rad, less than any instrument reads: one station; 1e-6 deg are another one
    assert list(cells(points([10.0, 10.0 + 1e-7, 10.0 + 1e-6]), whole=True)) == [0, 0, 1]


# -- scatter ---------------------------------------------------------------------------------------------------------


def a_fit(data: Points, *terms: Term) -> Fit:
    return fitted(data, sums_of(data, terms), terms)


@pytest.mark.parametrize("own", [0.0, 2.0])
def test_repeats_and_stations_are_two_scatters(own: float) -> None:
    """Stations that stray by 2 of their own against repeats of 0.3: the lack of fit is used; with none both are pooled."""
    rng = np.random.default_rng(6)
    stray = own * rng.choice([-1.0, 1.0], 16)
    y = np.tile(stray, 4) + rng.normal(0.0, 0.3, 64)
    data = points([22.5 * j for j in range(16)] * 4, y)
    fit = a_fit(data, Term("zero", 0.0), Term("wave", 1.0))
    found = scatter_of(data, fit)
    each = y.reshape(4, 16)
    pure = float(((each - each.mean(axis=0)) ** 2).sum())  # 64 readings less 16 levels; the zero is one of them
    assert found.repeat_nu == 48
    assert found.repeat == pytest.approx(math.sqrt(pure / 48.0))
    lack_nu = 64 - 3 - 48
    lack = (fit.square - pure) / lack_nu
    assert found.uneven == pytest.approx(stats.f.sf(lack / (pure / 48.0), lack_nu, 48), rel=1e-6, abs=1e-12)
    if own:
        assert (found.used, found.nu) == pytest.approx((lack, lack_nu))
        assert found.stations == pytest.approx(math.sqrt((lack - pure / 48.0) / 4.0))  # four readings of each
    else:
        assert (found.used, found.nu, found.stations) == (pytest.approx(fit.square / 61.0), 61, 0.0)


def test_scatter_where_one_kind_is_missing() -> None:
    y = [0.1, -0.2, 0.3, 0.1, -0.1, 0.2]
    alone = points([60.0 * j for j in range(6)], y)
    fit = a_fit(alone, Term("zero", 0.0), Term("wave", 1.0))
    assert scatter_of(alone, fit) == Scatter(fit.square / 3.0, 3, None, 0, None, 0.0)
    # three stations twice: zero and wave take all three up, so nothing is left but repeats, (d^2)/2 each
    twice = points([0.0, 120.0, 240.0] * 2, [0.0, 1.0, 2.0, 0.2, 1.4, 2.6])
    found = scatter_of(twice, a_fit(twice, Term("zero", 0.0), Term("wave", 1.0)))
    pure = (0.2**2 + 0.4**2 + 0.6**2) / 2.0
    assert (found.used, found.nu, found.repeat_nu, found.uneven, found.stations) == (
        pytest.approx(pure / 3),
        3,
        3,
        None,
        0.0,
    )
    # four stations, both times the same numbers, off the wave: repeats of nothing, and stations that stray
    same = points([0.0, 90.0, 180.0, 270.0] * 2, [1.0, -1.0, 1.0, -1.0] * 2)
    found = scatter_of(same, a_fit(same, Term("zero", 0.0), Term("wave", 1.0)))
    assert (found.uneven, found.repeat) == (0.0, pytest.approx(0.0, abs=1e-7))
    assert (found.used, found.nu) == (pytest.approx(8.0), 1)  # squares of eight ones, one station beyond the unknowns
    assert found.stations == pytest.approx(math.sqrt(8.0 / 2.0))
    nothing = points([0.0, 90.0, 180.0, 270.0] * 2, [0.0] * 8)
    found = scatter_of(nothing, a_fit(nothing, Term("zero", 0.0), Term("wave", 1.0)))
    assert (found.used, found.uneven) == (0.0, 1.0)
    exact = points([0.0, 120.0, 240.0], [1.0, 2.0, 4.0])
    assert scatter_of(exact, a_fit(exact, Term("zero", 0.0), Term("wave", 1.0))).used == 0.0


def test_repeats_are_taken_without_drift_reversal_and_zeros() -> None:
    """What all stations share is no scatter of repeats: an even drift, each run's zero, the reversal of both directions."""
    degrees = [45.0 * j for j in (*range(8), *range(7, -1, -1))] * 3
    way, run = ([1] * 8 + [-1] * 8) * 3, [k for k in range(3) for _ in range(16)]
    t = np.linspace(-0.5, 0.5, 48)
    y = 7.0 * t + 0.4 * np.array(way) + np.array([1.0, -2.0, 5.0])[run] + 3.0 * np.cos(np.radians(degrees))
    data = points(degrees, y, direction=way, run=run)
    terms = [Term("zero", float(k)) for k in range(3)] + [Term("drift"), Term("reversal"), Term("wave", 1.0)]
    found = scatter_of(data, a_fit(data, *terms))
    assert found.repeat == pytest.approx(0.0, abs=1e-6)
    assert found.repeat_nu == 48 - 8 - (3 - 1) - 1 - 1  # levels, two more zeros, drift, reversal


# -- outliers, steps, what follows -------------------------------------------------------------------------------------


def a_fit_that_leaves(residuals: list[float], nu: int) -> Fit:
    left = np.array(residuals)
    return Fit((Term("zero", 0.0),), np.zeros(1), np.eye(1), left, float(left @ left), nu)


def test_outliers_lie_beyond_so_many_medians() -> None:
    """Sizes 0, 0, five of 1 and x about a median of 0: middle 1, so the bound is 3.5 x 1.4826 x sqrt(8/6)."""
    bound = 3.5 * 1.4826 * math.sqrt(8.0 / 6.0)
    for x, found in ((bound - 1e-6, []), (bound + 1e-6, [5])):
        assert list(doubts.outliers(a_fit_that_leaves([-1, -1, -1, 0, 0, x, 1, 1], 6))) == found
    many = [1.0, -1.0] * 1000
    wide = math.sqrt(2.0 * math.log(5.0 * 2004)) * 1.4826 * math.sqrt(2004 / 1990)
    assert wide > 3.5 * 1.4826
    for x, number in ((wide - 0.001, 0), (wide + 0.001, 1)):
        assert len(doubts.outliers(a_fit_that_leaves([*many, 0.0, 0.0, -1.0, x], 1990))) == number
    assert len(doubts.outliers(a_fit_that_leaves([0.0, 0.0, 0.0, 9.0], 2))) == 0


def brute(data: Points, terms: list[Term], along: Reals) -> tuple[float, float, float]:
    """(where, squares taken off, squares left) of the best step among all places, each fitted by numpy."""
    matrix = np.column_stack([c for t in terms for c in columns(t, data, ALL)])
    square = np.linalg.lstsq(matrix, data.y, rcond=None)[1][0]
    best = (0.0, -1.0, 0.0)
    for at in np.unique(np.round(along, 9))[1:]:
        with_step = np.column_stack([matrix, along > at - 1e-7])
        rest = np.linalg.lstsq(with_step, data.y, rcond=None)[1]
        if rest.size and square - rest[0] > best[1]:
            best = (float(at), float(square - rest[0]), float(rest[0]))
    return best


@pytest.mark.parametrize("seed", range(4))
@pytest.mark.parametrize("size", [3.0, -3.0])
def test_the_largest_step_is_the_one_that_takes_most_off_the_squares(seed: int, size: float) -> None:
    rng = np.random.default_rng(seed)
    degrees = [30.0 * j for j in range(12)] * 3
    at = int(rng.integers(8, 28))
    y = rng.normal(0.0, 0.5, 36) + np.where(np.arange(36) >= at, size, 0.0)
    data = points(degrees, y)
    terms = [Term("zero", 0.0), Term("drift"), Term("wave", 1.0)]
    fit = a_fit(data, *terms)
    where, taken, left = brute(data, terms, data.t)
    found = doubts._largest(data, fit, data.t)
    assert found is not None
    assert found[0] == pytest.approx(where)
    assert found[1] == pytest.approx(0.005 / (2.0 * 35))  # 36 times have 35 places between them
    assert taken / left * (fit.nu - 1) > stats.t.ppf(1.0 - found[1], fit.nu - 1) ** 2
    (slip,) = (s for s in doubts.steps(data, fit) if s.along == "time")
    column = (data.t >= found[0]).astype(float)
    again = np.linalg.lstsq(
        np.column_stack([*(c for t in terms for c in columns(t, data, ALL)), column]), y, rcond=None
    )[0]
    assert slip.size == pytest.approx(again[-1])
    row = int(np.argmax(data.t >= found[0]))
    assert (slip.line, slip.theta) == (row + 2, pytest.approx(data.theta[row]))


@pytest.mark.parametrize("scale", [0.998, 1.002])
def test_a_step_counts_from_its_chance_on(scale: float) -> None:
    """A step so large that t stands just at its limit, and just below: squares taken over squares left times nu - 1 is t^2."""
    degrees, n = [30.0 * j for j in range(12)] * 3, 36
    terms = [Term("zero", 0.0), Term("wave", 1.0)]
    noise = np.random.default_rng(9).normal(0.0, 1.0, n)
    step = (np.arange(n) >= 18).astype(float)
    matrix = np.column_stack([*(c for t in terms for c in columns(t, points(degrees), ALL)), step])
    noise -= matrix @ np.linalg.lstsq(matrix, noise, rcond=None)[0]  # nothing of the step in it
    rest = step - matrix[:, :3] @ np.linalg.lstsq(matrix[:, :3], step, rcond=None)[0]
    t = t_at(32.0, 1.0 - 0.005 / 2.0)  # one place alone, looked at both ways
    size = scale * t * math.sqrt(float(noise @ noise) / 32.0 / float(rest @ rest))
    data = points(degrees, noise + size * step)
    found = doubts._largest(data, a_fit(data, *terms), step)
    assert (found is not None) == (scale > 1.0)


def test_a_step_needs_six_readings_and_three_to_spare() -> None:
    for n, told in ((5, False), (6, True)):
        y = np.where(np.arange(n) >= 3, 10.0, 0.0) + 0.01 * np.array([1, -1, 0.5, 0.7, -1, 0.3][:n])
        data = points([10.0 * j for j in range(n)], y)
        assert (doubts._largest(data, a_fit(data, Term("zero", 0.0)), data.t) is not None) == told
    data = points([10.0 * j for j in range(6)], [0.0, 0.01, 0.0, 9.0, 9.01, 9.0])
    fit = a_fit(data, Term("zero", 0.0))
    few = Fit(fit.terms, fit.values, fit.inverse, fit.residuals, fit.square, 2)
    assert doubts._largest(data, few, data.t) is None
    assert doubts._largest(data, fit, np.zeros(6)) is None  # nowhere to begin
    assert list(doubts._from_each(np.array([1.0, 2.0, 3.0, 4.0]), np.array([1, 3]))) == [9.0, 4.0]


def test_neighbours_that_agree_count_from_two_point_six_deviations_on() -> None:
    """Pairs of equal signs: correlation found, times sqrt(n), against 2.6; a little more for what a fit takes away."""
    rng = np.random.default_rng(12)
    for _ in range(40):
        n = int(rng.integers(8, 40))
        left = np.convolve(rng.normal(size=n + 1), [1.0, rng.uniform(0.0, 1.0)])[1:-1]
        nu = n - int(rng.integers(1, 5))
        r = float((left[1:] * left[:-1]).sum() / (left**2).sum())
        shows = (r + 1.0 / n) * math.sqrt(n) > 2.6
        wanted = min(r + (n - nu) / n / 2.0 / math.sqrt(n), 0.95) if shows else 0.0
        assert doubts.follows(left, nu) == pytest.approx(wanted)
    assert doubts.follows(np.ones(400), 399) == 0.95
    assert doubts.follows(np.ones(8), 8) == pytest.approx(7.0 / 8.0)  # seven products of eight squares
    assert doubts.follows(np.ones(7), 7) == 0.0


def test_a_bend_is_seen_by_its_share_and_its_deviations() -> None:
    rng = np.random.default_rng(14)
    data = points([30.0 * j for j in range(12)] * 3, rng.normal(size=36))
    terms, bend = [Term("zero", 0.0), Term("drift"), Term("wave", 1.0)], Term("bend", 2.0)
    sums: Sums = sums_of(data, [*terms, bend])
    used = Scatter(0.8, 20.0, None, 0, None, 0.0)
    share, sigmas = doubts.bend_shows(sums, terms, bend, used)
    matrix = np.column_stack([c for t in terms for c in columns(t, data, ALL)])
    column = columns(bend, data, ALL)[0]
    rest = column - matrix @ np.linalg.lstsq(matrix, column, rcond=None)[0]
    assert share == pytest.approx(rest @ rest / ((column - column.mean()) ** 2).sum())
    assert sigmas == pytest.approx(abs(rest @ data.y) / math.sqrt(rest @ rest * 0.8))
    assert doubts.bend_shows(sums, terms, bend, Scatter(0.0, 20.0, None, 0, None, 0.0)) == (0.0, 0.0)
    assert doubts.bend_shows(sums, [*terms, bend], bend, used)[0] == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(("stations", "told"), [(3, False), (4, True)])
def test_a_step_is_told_where_two_degrees_of_freedom_are_left(stations: int, told: bool) -> None:
    """Stations that stray more than their repeats: beside a zero and a step four of them leave two to say how far, three one."""
    stray, repeat = [0.0, 1.0, -1.0, 0.5], 0.001
    degrees = [90.0 * j for j in range(stations) for _ in range(2)]
    y = [stray[j] + (1e3 if j >= stations // 2 else 0.0) + k * repeat for j in range(stations) for k in range(2)]
    data = points(degrees, y)
    fit = a_fit(data, Term("zero", 0.0))
    assert doubts._largest(data, fit, data.t) is not None
    found = doubts.steps(data, fit)
    assert {s.along for s in found} == ({"time", "circle"} if told else set())
    if told:
        matrix = np.column_stack([np.ones(8), np.arange(8) >= 4])
        size = np.linalg.lstsq(matrix, np.array(y), rcond=None)[0][1]
        assert [s.size for s in found] == pytest.approx([size, size])
