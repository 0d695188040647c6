"""Each limit that a division test decides by, met from just below and from just above."""

from __future__ import annotations

import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

from setupcheck.division import design, doubts, reduction
from setupcheck.division.amplitude import t_at
from setupcheck.division.columns import ARCSEC
from setupcheck.division.design import Sums, Term, sums_of
from setupcheck.division.eccentric import _chance, _looks
from setupcheck.division.fit import Fit, fitted, scatter_of
from setupcheck.division.points import Points, Prepared, prepare
from setupcheck.division.results import Wave
from setupcheck.errors import SetupcheckError
from tests.unit.division.few_points import points, written

ZERO, ONE, TWO = Term("zero", 0.0), Term("wave", 1.0), Term("wave", 2.0)


# -- waves that can be told --------------------------------------------------------------------------------------------


def sums(terms: tuple[Term, ...], across: dict[tuple[int, int], float]) -> Sums:
    """Columns of length one whose products are those given, and nothing of any reading."""
    width = sum(t.width for t in terms) + 1
    products = np.eye(width)
    for (i, j), value in across.items():
        products[i, j] = products[j, i] = value
    return Sums(terms, products, 10)


@pytest.mark.parametrize(("left", "told"), [(0.0099, False), (0.0101, True)])
def test_a_wave_is_told_by_a_hundredth_of_its_square(left: float, told: bool) -> None:
    """Of the cosine 1 - c^2 is left beside a zero, of the sine all: the smaller one counts. Where both are as small, no station
    sees the wave."""
    c = math.sqrt(1.0 - left)
    one = sums((ZERO, ONE), {(0, 1): c})
    assert list(one.shares([ZERO], ONE)) == pytest.approx([left, 1.0])
    assert design._both(one, [ZERO], ONE) == told
    assert not design._invisible(one, [ZERO], ONE)
    two = sums((ZERO, Term("zero", 1.0), ONE), {(0, 2): c, (1, 3): c})
    assert design._invisible(two, [ZERO, Term("zero", 1.0)], ONE) == (not told)


@pytest.mark.parametrize(("gain", "left", "named"), [
    (0.099, 0.05, ()), (0.101, 0.05, (1.0,)), (-0.101, 0.05, (1.0,)), (0.5, 0.099, (1.0,)), (0.5, 0.101, ()),
])  # fmt: skip
def test_a_wave_is_taken_for_another_from_a_tenth_on(gain: float, left: float, named: tuple[float, ...]) -> None:
    """The cosine of the second wave is `gain` of that of the first, and what else is not left of it is a zero's."""
    zero = math.sqrt(1.0 - left - gain**2)
    made = sums((ZERO, ONE, TWO), {(0, 3): zero, (1, 3): gain})
    assert design._taken_for(made, [ZERO, ONE], TWO) == named
    assert design._taken_for(made, [ONE, ZERO], TWO) == named
    scale = np.array(
        [1.0, 1.0, 1.0, 3.0, 3.0, 1.0]
    )  # columns three times as long: so is what is taken up, and no share
    longer = Sums(made.terms, made.products * np.outer(scale, scale), 10)
    assert design._taken_for(longer, [ZERO, ONE], TWO) == (() if left > 0.1 else (1.0,))


# -- scatter, steps, what follows --------------------------------------------------------------------------------------


def bisected(goal: float, of: object, low: float, high: float) -> float:
    """Where a rising function of one number passes `goal`."""
    for _ in range(60):
        middle = (low + high) / 2.0
        low, high = (middle, high) if of(middle) < goal else (low, middle)  # type: ignore[operator]
    return low


@pytest.mark.parametrize("chance", [0.245, 0.255])
def test_scatters_are_pooled_from_a_chance_of_a_quarter_on(chance: float) -> None:
    rng = np.random.default_rng(2)
    stray, noise = np.tile(rng.normal(size=12), 3), rng.normal(size=36)
    degrees = [30.0 * j for j in range(12)] * 3

    def fit(size: float) -> tuple[Points, Fit]:
        data = points(degrees, size * stray + noise)
        return data, fitted(data, sums_of(data, [ZERO, ONE]), [ZERO, ONE])

    size = bisected(-chance, lambda s: -(scatter_of(*fit(s)).uneven or 0.0), 0.0, 5.0)
    data, found = fit(size)
    scatter = scatter_of(data, found)
    assert scatter.uneven == pytest.approx(chance, abs=1e-6)
    assert (scatter.nu == found.nu) == (chance >= 0.25)
    assert (scatter.stations == 0.0) == (chance >= 0.25)


@pytest.mark.parametrize(("deviations", "shows"), [(2.59, False), (2.61, True)])
def test_neighbours_follow_from_two_point_six_deviations_on(deviations: float, shows: bool) -> None:
    n = 36
    white, level = np.random.default_rng(4).normal(size=n), np.ones(n)

    def stands(share: float) -> float:
        left = (1.0 - share) * white + share * level
        return (float(left[1:] @ left[:-1] / (left @ left)) + 1.0 / n) * math.sqrt(n)

    share = bisected(deviations, stands, 0.0, 1.0)
    assert stands(share) == pytest.approx(deviations)
    assert (doubts.follows((1.0 - share) * white + share * level, n - 4) > 0.0) == shows


def test_many_places_of_a_step_are_looked_at_in_groups(monkeypatch: pytest.MonkeyPatch) -> None:
    """Thirty-six readings have 35 places; of at most ten, each fourth is looked at: the second reading, the sixth, …"""
    y = np.random.default_rng(1).normal(0.0, 0.1, 36) + np.where(np.arange(36) >= 21, 5.0, 0.0)
    data = points([30.0 * (j % 12) for j in range(36)], y)
    fit = fitted(data, sums_of(data, [ZERO, ONE]), [ZERO, ONE])
    monkeypatch.setattr(doubts, "MOST_PLACES", 10)
    found = doubts._largest(data, fit, data.t)
    assert found == (pytest.approx(21.0 / 35.0), pytest.approx(0.005 / 18.0))
    monkeypatch.setattr(doubts, "MOST_PLACES", 36)
    assert doubts._largest(data, fit, data.t) == (pytest.approx(21.0 / 35.0), pytest.approx(0.005 / 70.0))


@pytest.mark.parametrize(("scale", "told"), [(0.999, False), (1.001, True)])
def test_a_step_is_told_beyond_its_own_interval(scale: float, told: bool, monkeypatch: pytest.MonkeyPatch) -> None:
    """Size against t at the chance allowed times what its scatter leaves open, the search itself let through."""
    monkeypatch.setattr(doubts, "_largest", lambda points, fit, along: (0.5, 0.001) if along is points.t else None)
    noise = np.random.default_rng(7).normal(0.0, 1.0, 20)
    degrees, step = [18.0 * j for j in range(20)], (np.linspace(0.0, 1.0, 20) >= 0.5).astype(float)
    matrix = np.column_stack([np.ones(20), step])
    noise -= matrix @ np.linalg.lstsq(matrix, noise, rcond=None)[0]
    open_by = math.sqrt(float(noise @ noise) / 18.0 * np.linalg.inv(matrix.T @ matrix)[1, 1])
    for sign in (1.0, -1.0):
        size = sign * scale * t_at(18.0, 0.999) * open_by
        data = points(degrees, noise + size * step)
        found = doubts.steps(data, fitted(data, sums_of(data, [ZERO]), [ZERO]))
        assert [s.size for s in found] == ([pytest.approx(size)] if told else [])
        assert [(s.along, s.line) for s in found] == ([("time", 12)] if told else [])


# -- which way a circle counts -----------------------------------------------------------------------------------------


@pytest.mark.parametrize(("apart", "told"), [(18.0, False), (18.5, True)])
def test_the_sense_of_a_circle_is_told_by_a_twentieth(tmp_path: Path, apart: float, told: bool) -> None:
    """Two stations d apart: along they agree wholly, against by cos d; 1 - cos d passes 0.05 at 18.2 deg."""
    rows = ["angle_deg,reading_deg", "0,10", f"{apart},{10.0 + apart}"]
    if told:
        assert not prepare(written(tmp_path, *rows), count=72, worm_ratio=None, start=0.0, turn=1).against
    else:
        with pytest.raises(SetupcheckError, match="nobody can tell which way"):
            prepare(written(tmp_path, *rows), count=72, worm_ratio=None, start=0.0, turn=1)


# -- what both flanks look like ----------------------------------------------------------------------------------------


@pytest.mark.parametrize("own", [0.0095, 0.0105])
@pytest.mark.parametrize("none", [0.0095, 0.0105])
def test_both_flanks_are_judged_at_a_chance_of_a_hundredth(own: float, none: float) -> None:
    """The difference seen stands off that of an eccentric ring by so much that chance has `own`, and off nothing by `none`."""
    alpha, nu = math.radians(20.0), 40.0
    covariance = 0.01 * np.eye(2)

    def far(chance: float, wide: NDArray[np.floating]) -> float:
        return bisected(-chance, lambda x: -_chance(np.array([x, 0.0]), wide, nu), 0.0, 10.0)

    factor = 2.0 * math.tan(alpha)
    off_none, off_own = far(none, covariance), far(own, covariance * (1.0 + factor**2))
    seen = np.array([off_none, 0.0])
    expected = seen + np.array([off_own, 0.0])  # 2 tan(alpha) (-b, a)
    mean = np.array([0.0, -expected[0]]) / factor
    fit = Fit((ONE, Term("swing", 1.0)), np.concatenate([mean, seen]), 0.01 * np.eye(4), np.zeros(1), 0.0, 40)
    looks = {
        (True, True): "undecided",
        (True, False): "eccentric",
        (False, True): "division",
        (False, False): "neither",
    }
    assert _looks(fit, 1.0, nu, alpha, 1) == looks[own > 0.01, none > 0.01]


# -- reasons and limits ------------------------------------------------------------------------------------------------


@pytest.fixture(scope="module")
def found() -> reduction._Found:
    y = np.random.default_rng(3).normal(0.0, 1.0, 36) * ARCSEC
    return reduction._found(points([30.0 * (j % 12) for j in range(36)], y), [1.0, 2.0])


def ready(found: reduction._Found) -> Prepared:
    return Prepared(found.points, None, (), False, ())


def test_scatter_of_nothing_is_told_from_a_little(found: reduction._Found) -> None:
    """Below a hundred-thousandth of a second of arc and a milliardth of the largest reading there is no scatter."""
    least = 1e-5 * ARCSEC + 1e-9 * float(np.abs(found.points.y).max())

    def said(used: float, *, nu: float = 30.0, fit_nu: int = 30) -> tuple[str, ...]:
        changed = replace(found, scatter=replace(found.scatter, used=used, nu=nu), fit=replace(found.fit, nu=fit_nu))
        return reduction._reasons(ready(found), changed, ())

    assert said((least * 0.999) ** 2) == (reduction.NO_SCATTER,)
    assert said((least * 1.001) ** 2) == ()
    assert said(math.nan) == (reduction.NO_SCATTER,)
    assert said(1.0, nu=0.9) == (reduction.NO_SCATTER,)
    assert said(1.0, nu=1.0) == ()
    assert said(0.0, nu=0.0, fit_nu=0) == (reduction.NO_SPARE,)
    assert said(0.0, fit_nu=1) == (reduction.NO_SCATTER,)


def test_a_bend_that_nobody_saw_counts_unless_an_arc_tells_more(found: reduction._Found) -> None:
    def said(*, sag: float = 0.0, **plan: object) -> tuple[str, ...]:
        return reduction._reasons(ready(found), replace(found, sag=sag, plan=replace(found.plan, **plan)), ())

    assert said() == ()
    assert said(sag=1e-9) == (reduction.NO_SAG,)
    assert said(sag=1e-9, arc=True) == ()
    assert said(repeated=False) == (reduction.DISCONNECTED,)
    assert said(repeated=False, sag=1e-9) == (reduction.DISCONNECTED,)
    assert said(repeated=False, arc=True) == ()


def test_steps_are_said_by_line_or_by_station(found: reduction._Found) -> None:
    steps = (doubts.Step("time", -3.04 * ARCSEC, 17, 1.0), doubts.Step("circle", 2.0 * ARCSEC, 5, math.radians(370.0)))
    assert reduction._reasons(ready(found), found, steps) == (
        'from line 17 on all readings stand 3.0" off: something slipped or was counted wrong',
        'from the station at 10.00 deg on round the circle everything stands 2.0" off',
    )


def limits(found: reduction._Found, **more: object) -> str:
    return "\n".join(reduction._limits(replace(found, **more)))


def test_limits_are_said_where_they_begin(found: reduction._Found) -> None:
    scatter = found.scatter
    bend = found.bends[0]
    at = found.fit.at(bend)[0]
    one = abs(float(found.fit.values[at])) ** 2 / float(found.fit.inverse[at, at])  # spread at which it stands at 1
    assert "the drift was bent" in limits(found, spread=one / 2.61**2)
    assert "the drift was bent" not in limits(found, spread=one / 2.59**2)
    assert "the drift was bent" not in limits(found, spread=one / 2.61**2, bends=())
    assert "hold for a drift that bends" in limits(found, sag=1e-9)
    assert "hold for a drift that bends" not in limits(found, sag=0.0)
    for uneven, told in ((0.0099, True), (0.0101, False), (None, False)):
        said = limits(found, scatter=replace(scatter, uneven=uneven, stations=2.54 * ARCSEC))
        assert ('stations stray by 2.5" of their own' in said) == told
    assert "residuals follow each other" in limits(found, follows=1e-9)
    assert "residuals follow each other" not in limits(found, follows=0.0)
    alone = replace(scatter, repeat=None)
    assert "no station was read twice in one direction" in limits(found, scatter=alone)
    assert "no station was read twice" not in limits(found, scatter=alone, fit=replace(found.fit, nu=0))
    assert "no station was read twice" not in limits(found)


@pytest.mark.parametrize(("moved", "is_open"), [(0.49, False), (0.51, True)])
@pytest.mark.parametrize("along", [True, False])
def test_flagged_readings_count_from_half_an_interval_on(
    found: reduction._Found, moved: float, is_open: bool, along: bool
) -> None:
    wave: Wave = reduction._waves(found, {1.0: "one", 2.0: "two"}, False, ())[0]
    known = t_at(wave.nu) * math.sqrt(max(wave.covariance[0], wave.covariance[2]))
    far = moved * known + (2e-3 if is_open else 0.0) * ARCSEC  # a thousandth of a second counts as nothing
    mate = replace(wave, a=wave.a + (far if along else 0.0), b=wave.b - (0.0 if along else far))
    assert bool(reduction._against_flags(wave, [mate]).open) == is_open
    assert reduction._against_flags(wave, []) is wave
    assert reduction._against_flags(wave, [replace(mate, harmonic=2.0)]) is wave
    shut = replace(wave, open="a reason")
    assert reduction._against_flags(shut, [mate]) is shut


def test_scatter_of_a_reading_is_that_of_repeats_where_three_say_so(tmp_path: Path) -> None:
    """Twelve stations and some again: repeats less one for what drift takes, three of them are enough."""
    rng, seen = np.random.default_rng(5), set()
    for again in range(2, 7):
        degrees = [30.0 * j for j in (*range(12), *range(again))]
        rows = [f"{d},{rng.normal(0.0, 2.0):.6f}" for d in degrees]
        data = written(tmp_path, "angle_deg,deviation_arcsec", *rows)
        made = reduction.reduce(data, count=12)
        points_ = prepare(data, count=12, worm_ratio=None, start=0.0, turn=1).points
        f = reduction._found(points_, [1.0, 2.0, 3.0, 4.0])
        enough = f.scatter.repeat_nu >= 3
        seen.add(f.scatter.repeat_nu)
        assert made.scatter == pytest.approx(f.scatter.repeat if enough else math.sqrt(f.fit.square / f.fit.nu))
        assert made.nu == (f.scatter.repeat_nu if enough else f.fit.nu)
    assert {2, 3} <= seen


def test_a_wave_without_scatter_has_no_interval(found: reduction._Found) -> None:
    (first, _) = reduction._waves(replace(found, spread=0.0), {1.0: "one", 2.0: "two"}, False, ("why", "else"))
    assert (first.length.low, first.length.high, first.length.within) == (0.0, math.inf, None)
    assert (first.covariance, first.nu, first.open) == ((0.0, 0.0, 0.0), 1.0, "why")
    assert first.length.value == pytest.approx(math.hypot(first.a, first.b))
    assert reduction._flanks(found, False, 1) is None


def test_teeth_numbered_clockwise_exchange_their_flanks() -> None:
    degrees = [30.0 * j for j in (*range(12), *range(11, -1, -1))] * 2
    way = np.array(([1] * 12 + [-1] * 12) * 2, np.int8)
    theta = np.radians(degrees)
    y = (
        3.0 * np.cos(theta)
        + way / 2.0 * (np.cos(theta) - 2.0 * np.sin(theta))
        + np.random.default_rng(0).normal(0, 0.1, 48)
    )
    plain = points(degrees, y)
    data = replace(plain, direction=way)
    f = reduction._found(data, [1.0])
    on, back = reduction._flanks(f, False, 1), reduction._flanks(f, False, -1)
    assert on is not None and back is not None
    a, b, c, d = on.vector
    assert back.vector == (a, b, -c, -d)
    assert (a, c, d) == pytest.approx((3.0, 1.0, -2.0), abs=0.2)
    assert np.array(back.covariance) == pytest.approx(
        np.array(on.covariance) * np.outer([1, 1, -1, -1], [1, 1, -1, -1])
    )
    assert reduction._flanks(replace(f, spread=0.0), False, 1) is None


def test_a_third_power_of_drift_is_taken_where_it_stands_at_two() -> None:
    """A square bend is fitted wherever stations show one; a cube only where it stands out by two of its deviations."""
    degrees = [30.0 * (j % 12) for j in range(48)]
    t = np.linspace(-0.5, 0.5, 48)
    noise = np.random.default_rng(8).normal(0.0, 1.0, 48)
    theta = np.radians(degrees)
    matrix = np.column_stack([np.ones(48), t, np.cos(theta), np.sin(theta), 4 * t * t])
    cube = 8.0 * t**3
    full = np.column_stack([matrix, cube])
    noise -= full @ np.linalg.lstsq(full, noise, rcond=None)[0]
    left = cube - matrix @ np.linalg.lstsq(matrix, cube, rcond=None)[0]

    def fitted_with(size: float) -> reduction._Found:
        return reduction._found(points(degrees, noise + size * cube), [1.0])

    def stands(size: float) -> float:
        data = points(degrees, noise + size * cube)
        terms = [ZERO, Term("drift"), ONE, Term("bend", 2.0)]
        scatter = scatter_of(data, fitted(data, sums_of(data, terms), terms))
        return size * float(left @ left) / math.sqrt(float(left @ left) * scatter.used)

    size = bisected(2.0, stands, 0.0, 50.0)
    below, above = fitted_with(size * 0.99), fitted_with(size * 1.01)
    assert [b.harmonic for b in below.bends] == [2.0]
    assert [b.harmonic for b in above.bends] == [2.0, 3.0]
    assert (below.sag, above.sag) == (0.0, 0.0)
