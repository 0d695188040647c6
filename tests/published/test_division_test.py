"""Reducing a division test, held against worked figures.

- ISO 230-2 (edition 1997 onward, from memory), on a made-up set of 8 targets and 5 runs each way whose figures were worked
  out by hand and again in double precision: s 1.5811, |B| 11.0, mean 9.875, R_up 6.3246, R 17.3246, E 37.0, E_up 26.0,
  M 27.0, A 43.3246, A_up 32.3246; the first harmonic of the means of both directions is 12.086 at 30.36 deg, the second 4.133.
- Two faces of a theodolite (trade practice), made-up readings: directions 0, 45 10'20", 119 59'52"; collimation 5, 7, 4".
- ISO 17123-3 (from memory): a made-up block of 3 sets of 4 targets has a sum of squares of 18.5, nu 6, s 1.756"; acceptance
  factors 1.20 for 32 degrees of freedom and 1.39 for 8; two samples of 32 within 0.49 to 2.02 (chi-squared and F tables).
- A wave inside one crank turn: taking a straight line off first and transforming afterwards is wrong, one fit is right.
"""

from __future__ import annotations

import io
import math
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from setupcheck.division.design import Term, columns, sums_of
from setupcheck.division.faces import acceptance, spread_of_sets
from setupcheck.division.fit import fitted
from setupcheck.division.points import Points, prepare
from setupcheck.division.readings import Readings, read_test
from setupcheck.division.reduction import _found, reduce
from setupcheck.division.repeatability import Repeatability
from setupcheck.division.results import Reduced
from setupcheck.physics.student_t import f_above

ARCSEC = math.pi / 648_000.0
UP = ((14, 12, 2, -3, -6, -12, -10, 3), (0, 2, -1, 1, -2))
DOWN = ((5, 2, -9, -12, -16, -23, -19, -7), (1, -1, 0, 2, -2))


def told(folder: Path, text: str, **more: object) -> tuple[Readings, Reduced]:
    file = folder / "test.csv"
    file.write_text(text, encoding="utf-8")
    readings = read_test(file)
    return readings, reduce(readings, **{"count": 72, **more})  # type: ignore[arg-type]


def positioning() -> str:
    out = io.StringIO()
    out.write("angle_deg,deviation_arcsec,run,direction\n")
    for run in range(5):
        for (means, offs), way in ((UP, "forward"), (DOWN, "reverse")):
            for target, mean in enumerate(means):
                out.write(f"{45 * target},{mean + offs[run]},{run + 1},{way}\n")
    return out.getvalue()


def test_the_figures_of_positioning(tmp_path: Path) -> None:
    iso = told(tmp_path, positioning())[1].repeatability
    assert isinstance(iso, Repeatability)
    found = [x / ARCSEC for x in (iso.B, iso.mean_B, iso.R, iso.E, iso.M, iso.A)]
    assert [11.0, 9.875, 17.3246, 37.0, 27.0, 43.3246] == pytest.approx(found, abs=5e-5)
    assert [32.3246, 6.3246, 26.0] == pytest.approx([x / ARCSEC for x in iso.up], abs=5e-5)
    assert (8, 5) == (iso.stations, iso.runs)


def test_the_harmonics_of_the_means_of_both_directions(tmp_path: Path) -> None:
    # eight equal steps, every one read as often: without drift the joint fit and the sums of a Fourier series are the same
    ready = prepare(told(tmp_path, positioning())[0], count=72, worm_ratio=None, start=0.0, turn=1)
    terms = [*(Term("zero", float(run)) for run in range(5)), Term("reversal"), Term("wave", 1.0), Term("wave", 2.0)]
    fit = fitted(ready.points, sums_of(ready.points, terms), terms)
    first, second = fit.vector(Term("wave", 1.0)) / ARCSEC, fit.vector(Term("wave", 2.0)) / ARCSEC
    assert 12.086 == pytest.approx(float(np.hypot(*first)), abs=5e-4)
    assert 30.36 == pytest.approx(math.degrees(math.atan2(first[1], first[0])), abs=5e-3)
    assert 4.133 == pytest.approx(float(np.hypot(*second)), abs=5e-4)
    assert 9.875 == pytest.approx(float(fit.vector(Term("reversal"))[0]) / ARCSEC)


def test_fewer_than_two_runs_each_way_have_no_figures_of_positioning(tmp_path: Path) -> None:
    lines = positioning().splitlines()
    one = "\n".join([lines[0], *(line for line in lines[1:] if ",1," in line)])
    assert "needs at least 2 runs each way at the same stations" == told(tmp_path, one)[1].repeatability


LEFT = ("0 0 12", "45 10 30", "120 0 5")
RIGHT = ("180 0 22", "225 10 44", "300 0 13")


def seconds(text: str) -> float:
    degrees, minutes, rest = map(float, text.split())
    return degrees * 3600.0 + minutes * 60.0 + rest


def test_both_faces_give_directions_and_collimation(tmp_path: Path) -> None:
    file = tmp_path / "faces.csv"
    rows = [
        f"{s};{x};{face}"
        for face, side in (("left", LEFT), ("right", RIGHT))
        for s, x in zip((0, 45, 120), side, strict=True)
    ]
    file.write_text("\n".join(["angle_deg;reading_dms;face", *rows]), encoding="utf-8")
    ready = prepare(read_test(file), count=72, worm_ratio=None, start=0.0, turn=1)
    directions = (ready.points.theta + ready.points.y - ready.points.y[0]) / ARCSEC
    assert [0.0, seconds("45 10 20"), seconds("119 59 52")] == pytest.approx(directions.tolist(), abs=1e-3)
    assert ready.collimation is not None
    assert (5.0 + 7.0 + 4.0) / 3.0 == pytest.approx(ready.collimation.mean / ARCSEC, abs=1e-6)
    assert 7.0 - 4.0 == pytest.approx(ready.collimation.spread / ARCSEC, abs=1e-6)


def test_a_file_with_both_faces_says_the_same(tmp_path: Path) -> None:
    # the three made-up stations and two more, so that there is something left over
    faces = [
        *zip(("0", "45", "120"), LEFT, RIGHT, strict=True),
        ("200", "200 0 10", "20 0 20"),
        ("300", "300 0 10", "120 0 22"),
    ]
    lines = ["angle_deg;reading_dms;face"]
    for station, left, right in faces:
        lines += [f"{station};{left};left", f"{station};{right};right"]
    readings, reduced = told(tmp_path, "\n".join(lines))
    assert 10 == reduced.rows == len(readings)
    assert reduced.collimation is not None
    assert (5.0 + 7.0 + 4.0 + 5.0 + 6.0) / 5.0 == pytest.approx(reduced.collimation.mean / ARCSEC, abs=1e-3)
    assert 3.0 == pytest.approx(reduced.collimation.spread / ARCSEC, abs=1e-3)


def test_a_block_of_sets() -> None:
    sets = np.array([[10.0, 31.0, 52.0, 18.0], [12.0, 30.0, 55.0, 21.0], [9.0, 33.0, 50.0, 19.0]])
    s, nu = spread_of_sets(sets)
    assert 6 == nu
    assert 18.5 == pytest.approx(s * s * nu)
    assert 1.756 == pytest.approx(s, abs=5e-4)
    assert [0, 21, 42, 9] == pytest.approx((sets - sets[:, :1]).mean(axis=0).round().tolist())


def test_acceptance_of_an_instrument() -> None:
    for nu, factor in ((32, 1.20), (8, 1.39)):
        assert factor == pytest.approx(acceptance(nu), abs=0.005)
        assert math.sqrt(stats.chi2.ppf(0.95, nu) / nu) == pytest.approx(acceptance(nu), rel=1e-10)
    for level, low, high in ((0.975, 0.4845, 0.4955), (0.025, 2.0145, 2.0255)):  # 0.49 and 2.02 of the table
        assert f_above(low, 32, 32) > level > f_above(high, 32, 32)
    for p, a, b in ((0.025, 32, 32), (0.95, 3, 7), (0.75, 11, 2.5), (0.995, 1, 400)):
        assert 1.0 - p == pytest.approx(f_above(float(stats.f.ppf(p, a, b)), a, b), rel=1e-9)


def crank(at: np.ndarray) -> np.ndarray:
    """12" once per turn of the wheel and 4" once per turn of a 90 : 1 worm, highest at 25 deg of its turn."""
    return 12.0 * np.cos(at - math.radians(20.0)) + 4.0 * np.cos(90.0 * at - math.radians(25.0))


def test_a_wave_inside_one_crank_turn_is_fitted_together_with_its_slope(tmp_path: Path) -> None:
    at = np.radians(60.0 + np.arange(8) * 0.5)
    y = crank(at)
    line = np.polyval(np.polyfit(at, y, 1), at)
    transformed = abs(np.exp(-1j * 90.0 * at) @ (y - line)) / 4.0
    text = "angle_deg,deviation_arcsec\n" + "".join(
        f"{math.degrees(a):.4f},{v:.9f}\n" for a, v in zip(at, y, strict=True)
    )
    reduced = told(tmp_path, text, worm_ratio=90.0)[1]
    assert abs(transformed - 4.0) > 0.8  # detrended first it comes out a quarter short
    assert reduced.worm is not None
    assert 4.0 == pytest.approx(reduced.worm.length.value / ARCSEC, abs=0.005)
    assert 25.0 == pytest.approx(math.degrees(reduced.worm.length.direction), abs=0.1)
    assert ["within half a turn" in said for said in reduced.limits].count(True) == 1


def scattered(seed: int) -> Points:
    rng = np.random.default_rng(seed)
    stations = np.concatenate([np.arange(0, 361, 10.0), 30.0 + np.arange(1, 9) * 0.55])
    theta = np.radians(np.tile(np.concatenate([stations, stations[::-1]]), 3))
    n = len(theta)
    run = np.repeat(np.arange(3), n // 3).astype(np.int32)
    direction = np.tile(np.repeat([1, -1], n // 6), 3).astype(np.int8)
    y = (crank(theta) + rng.normal(size=n) + 8.0 * run + 3.0 * direction) * ARCSEC
    return Points(theta, y, np.linspace(0.0, 1.0, n), run, direction, np.arange(n, dtype=np.int32))


@pytest.mark.parametrize("seed", range(3))
def test_the_joint_fit_is_that_of_an_orthogonal_factorization(seed: int) -> None:
    points = scattered(seed)
    found = _found(points, [1.0, 2.0, 90.0, 40.0, 3.0, 4.0])
    assert {"zero", "drift", "reversal", "swing", "wave", "bend"} == {t.kind for t in found.fit.terms}
    matrix = np.column_stack([c for t in found.fit.terms for c in columns(t, points, slice(None))])
    expected, square, _, _ = np.linalg.lstsq(matrix, points.y)
    assert expected == pytest.approx(found.fit.values, rel=1e-9, abs=1e-9 * ARCSEC)
    assert square[0] == pytest.approx(found.fit.square, rel=1e-9)
    covariance = np.linalg.inv(matrix.T @ matrix)
    assert covariance == pytest.approx(found.fit.inverse, rel=1e-7, abs=1e-9)


def test_a_fit_in_blocks_is_the_fit_in_one(monkeypatch: pytest.MonkeyPatch) -> None:
    points = scattered(1)
    terms = [Term("zero", 0.0), Term("zero", 1.0), Term("zero", 2.0), Term("drift"), Term("wave", 1.0)]
    from setupcheck.division import design

    whole = fitted(points, design.sums_of(points, terms), terms)
    monkeypatch.setattr(design, "BLOCK", 50)
    parts = fitted(points, design.sums_of(points, terms), terms)
    assert whole.values == pytest.approx(parts.values, rel=1e-11)
