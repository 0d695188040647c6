"""What a division test says beside its waves, on readings whose answer is known: slips, drift, stray stations, faces."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from setupcheck.division import doubts
from setupcheck.division.amplitude import Length, t_at
from setupcheck.division.backlash_wave import Wave as Backlash
from setupcheck.division.columns import ARCSEC, unknown_column
from setupcheck.division.design import Term, columns, design, sums_of
from setupcheck.division.eccentric import Wheel, apart
from setupcheck.division.fit import fitted
from setupcheck.division.owners import Owner
from setupcheck.division.points import Points, prepare
from setupcheck.division.reduction import _against_flags, _found, _without, reduce
from setupcheck.division.results import Eccentric, Flanks, Interval, Wave
from tests.unit.division.few_points import points, round_the_circle, written


def test_something_that_slips_is_found_where_it_did_and_by_how_much() -> None:
    """Three turns of twelve stations; from the twenty-first reading on, line 22, everything stands 5 off, scatter 0.05."""
    y = np.random.default_rng(11).normal(0.0, 0.05, 36)
    y[20:] += 5.0
    data = points(round_the_circle(12, 3), list(y))
    terms = (Term("zero", 0.0), Term("drift"), Term("wave", 1.0))
    (slip,) = (s for s in doubts.steps(data, fitted(data, sums_of(data, terms), terms)) if s.along == "time")
    assert (slip.line, slip.theta) == (22, pytest.approx(math.radians(240.0)))
    assert slip.size == pytest.approx(5.0, abs=0.2)
    still = points(round_the_circle(12, 3), list(y - np.where(np.arange(36) >= 20, 5.0, 0.0)))
    assert doubts.steps(still, fitted(still, sums_of(still, terms), terms)) == ()


def test_a_step_begins_at_its_own_station() -> None:
    data = points(round_the_circle(6, 1))
    (column,) = columns(Term("step", float(data.theta[3])), data, slice(None))
    assert list(column) == [0.0, 0.0, 0.0, 1.0, 1.0, 1.0]


def test_a_drift_that_the_zeros_of_the_runs_take_up_is_not_fitted() -> None:
    """Two runs, each at one moment: time says nothing that their zeros do not."""
    degrees, run = round_the_circle(8, 2), [0] * 8 + [1] * 8
    plain = points(degrees, run=run)
    at_once = Points(plain.theta, plain.y, plain.run.astype(float), plain.run, plain.direction, plain.line)
    assert design(plain, [1.0]).has("drift")
    assert not design(at_once, [1.0]).has("drift")


def test_the_interval_of_a_drift_is_that_of_least_squares(tmp_path: Path) -> None:
    """Four turns of twelve stations with an even drift of 6 arc seconds and a scatter of half a one."""
    rng = np.random.default_rng(5)
    degrees, t = round_the_circle(12, 4), np.linspace(-0.5, 0.5, 48)
    y = 6.0 * t + rng.normal(0.0, 0.5, 48)
    rows = [f"{d},{v:.9f}" for d, v in zip(degrees, y, strict=True)]
    found = _found(prepare(written(tmp_path, "angle_deg,deviation_arcsec", *rows), count=12, worm_ratio=None, start=0.0,
                           turn=1).points, [1.0])  # fmt: skip
    whole = reduce(written(tmp_path, "angle_deg,deviation_arcsec", *rows), count=12)
    assert whole.drift is not None
    assert whole.drift.low < 6.0 * ARCSEC < whole.drift.high
    theta = np.radians(degrees)
    waves = [f(t.harmonic * theta) for t in found.fit.terms if t.kind == "wave" for f in (np.cos, np.sin)]
    bends = [4.0 * t * t if b.harmonic == 2.0 else 8.0 * t**3 for b in found.bends]
    matrix = np.column_stack([np.ones(48), t, *waves, *bends])
    _, square, *_ = np.linalg.lstsq(matrix, y, rcond=None)
    half = (whole.drift.high - whole.drift.low) / 2.0 / ARCSEC
    plain = math.sqrt(float(square[0]) / (48 - matrix.shape[1]) * np.linalg.inv(matrix.T @ matrix)[1, 1])
    # the scatter may be that of the stations alone, or widened: the same to a third, and never nothing
    assert half == pytest.approx(plain * stats.t.ppf(0.975, 48 - matrix.shape[1]), rel=0.35)


def test_scatter_of_a_reading_is_told_from_stations_that_stray(tmp_path: Path) -> None:
    """Stations stand 3 arc seconds off, now one way, now the other, six waves a turn and more; readings repeat to 0.2."""
    rng = np.random.default_rng(8)
    own = 3.0 * rng.choice([-1.0, 1.0], 24)
    rows = [f"{15 * j},{own[j] + rng.normal(0.0, 0.2):.6f},{k},forward" for k in range(4) for j in range(24)]
    found = reduce(written(tmp_path, "angle_deg,deviation_arcsec,run,direction", *rows), count=24)
    assert found.scatter == pytest.approx(0.2 * ARCSEC, rel=0.3)
    assert 60 <= found.nu <= 72  # 96 readings of 24 stations, less zeros, drift and bend
    assert found.stations_scatter == pytest.approx(3.0 * ARCSEC, rel=0.3)
    assert any(one.startswith(f'stations stray by {found.stations_scatter / ARCSEC:.1f}"') for one in found.limits)


@pytest.mark.parametrize(("readings", "enough"), [(6, False), (7, True)])
def test_flagged_readings_are_left_out_where_two_more_than_the_unknowns_remain(readings: int, enough: bool) -> None:
    """Zero, drift and one wave are four unknowns; one reading flagged of six leaves five, of seven six."""
    y = [0.3, -0.1, 0.2, 0.4, -0.3, 0.1, 0.0][:readings]
    found = _found(points(round_the_circle(4, 2)[:readings], y), [1.0])
    found_terms = sum(term.width for term in found.fit.terms)
    assert found_terms == 4
    assert (_without(found, np.array([0]), [1.0]) is not None) == enough
    assert _without(found, np.array([], dtype=int), [1.0]) is None


@pytest.mark.parametrize(("moved", "is_open"), [(0.5, False), (1.5, True)])
@pytest.mark.parametrize("wide", [0, 2])
def test_flagged_readings_that_move_a_wave_by_half_its_interval_make_it_open(
    moved: float, is_open: bool, wide: int
) -> None:
    """Known to t times 2e-5 along its wider axis: half of that is the limit; across it is known ten times as well."""
    covariance = [4e-12, 0.0, 4e-12]
    covariance[wide] = 4e-10
    length = Length(1e-3, 0.9e-3, 1.1e-3, 0.0, 0.1)
    limit = 0.5 * stats.t.ppf(0.975, 12) * 2e-5

    def wave(a: float) -> Wave:
        return Wave("once per turn", 1.0, a, 0.0, (covariance[0], covariance[1], covariance[2]), 12.0, 0.0, length)

    assert t_at(12.0) == pytest.approx(stats.t.ppf(0.975, 12))
    assert bool(_against_flags(wave(1e-3 + moved * limit), [wave(1e-3)]).open) == is_open


def test_both_faces_are_one_point_at_the_time_between_them(tmp_path: Path) -> None:
    """Minutes 0 and 2 are 1, 4 and 6 are 5, and the third station has one face at 10: nine minutes, so 0, 4/9, 1."""
    rows = ["0,0,left,0", "0,4,right,2", "90,0,left,4", "90,4,right,6", "180,0,left,10"]
    found = written(tmp_path, "angle_deg,deviation_arcsec,face,minutes", *rows)
    made = prepare(found, count=72, worm_ratio=None, start=0.0, turn=1)
    assert made.points.t == pytest.approx([0.0, 4.0 / 9.0, 1.0])
    assert made.points.y / ARCSEC == pytest.approx(
        [2.0, 2.0, 2.0]
    )  # the single one by half the difference of the others


def test_directions_that_some_readings_name_are_counted(tmp_path: Path) -> None:
    def said(*directions: str) -> str:
        rows = [f"{90 * i},0.5,{d}" for i, d in enumerate(directions)]
        found = written(tmp_path, "angle_deg,deviation_arcsec,direction", *rows)
        return "\n".join(prepare(found, count=72, worm_ratio=None, start=0.0, turn=1).limits)

    assert "2 readings name no direction" in said("forward", "", "", "forward")
    assert "name no direction" not in said("forward", "forward", "forward")
    assert "name no direction" not in said("", "", "")
    assert "in 1 pass the stations" in said_of_passes(tmp_path, 1)
    assert "in 2 passes the stations" in said_of_passes(tmp_path, 2)


def said_of_passes(folder: Path, runs: int) -> str:
    rows = [f"{angle},0.5,{run}" for run in range(runs) for angle in (0, 90, 45, 180)]
    found = written(folder, "angle_deg,deviation_arcsec,run", *rows)
    return "\n".join(prepare(found, count=72, worm_ratio=None, start=0.0, turn=1).limits)


def test_a_line_without_a_reading_is_left_out_and_told(tmp_path: Path) -> None:
    found = written(tmp_path, "angle_deg,deviation_arcsec", "0,1", "90,", "180,3", "270, ")
    assert list(found.line) == [2, 4]
    assert found.empty == (3, 5)


def test_a_column_without_its_unit_is_asked_for_it() -> None:
    assert "does not say its unit" in unknown_column("angle")
    assert "Did you mean angle_deg?" in unknown_column("angel_deg")


def test_one_flank_tells_how_far_teeth_are_off_once_their_pressure_angle_is_stated(tmp_path: Path) -> None:
    """20 arc seconds once per turn at a radius of 50 mm, seen along a flank of 20 deg: 50 cos(20 deg) times it."""
    rng = np.random.default_rng(2)
    rows = [
        f"{a},{20.0 * math.sin(math.radians(a - 40.0)) + rng.normal(0.0, 0.1):.6f},{run},forward"
        for run in range(3)
        for a in range(0, 360, 30)
    ]
    data = written(tmp_path, "angle_deg,deviation_arcsec,run,direction", *rows)
    stated = reduce(data, count=12, radius=50.0, pressure_angle=math.radians(20.0)).eccentric
    unsaid = reduce(data, count=12, radius=50.0).eccentric
    assert stated is not None and unsaid is not None
    assert stated.flanks == unsaid.flanks == "one"
    assert stated.amount.value == pytest.approx(50.0 * math.cos(math.radians(20.0)) * 20.0 * ARCSEC, rel=0.02)
    assert "pressure angle" in unsaid.open
    assert "pressure angle" not in stated.open


@pytest.mark.parametrize("towards", [25.0, 130.0, 250.0, 310.0])
def test_teeth_off_their_axis_are_told_apart_from_dividing(towards: float) -> None:
    """Moved by e towards phi, a place at theta goes e sin(phi - theta) round the circle, so a = e sin(phi)/r, b = -e cos(phi)/r;
    the flanks then differ by 2 tan(alpha) (-b, a). Dividing adds a wave of its own to the mean alone."""
    phi, e, r, alpha = math.radians(towards), 0.02, 40.0, math.radians(20.0)
    a, b = e * math.sin(phi) / r, -e * math.cos(phi) / r
    cut = (3e-4 * math.cos(1.0), 3e-4 * math.sin(1.0))
    vector = (a + cut[0], b + cut[1], -2.0 * math.tan(alpha) * b, 2.0 * math.tan(alpha) * a)
    flat = tuple(tuple(1e-12 * (i == j) for j in range(4)) for i in range(4))
    off = Eccentric(Interval(e, e, e), phi, 0.1, 1, "both", 0, "neither")
    found = apart(Flanks(vector, flat), off, Wheel(30, r, alpha), 20.0)
    assert found is not None
    assert (found.amount, found.direction) == pytest.approx((e, phi))
    assert (found.divided, found.highest) == pytest.approx((3e-4, 1.0))
    assert found.within == pytest.approx(r * stats.t.ppf(0.975, 20) * 1e-6 / (2.0 * math.tan(alpha)))


@pytest.mark.parametrize("degrees", [0.0, 45.0, 135.0, 225.0, 315.0])
def test_backlash_is_loosest_where_its_wave_points(degrees: float) -> None:
    at = math.radians(degrees)
    wave = Backlash(0.1, 0.02 * math.cos(at), 0.02 * math.sin(at), ((1.0,),), {})
    assert wave.loosest == pytest.approx(at)
    assert Backlash(0.1, 0.02, -1e-18, ((1.0,),), {}).loosest == 0.0


def test_a_share_of_both_flanks_is_as_long_as_its_part_in_the_wave() -> None:
    assert Owner("op 30", 0.5, (3.0, 4.0, 12.0, 1.0)).length == pytest.approx(5.0)
