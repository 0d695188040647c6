"""A whole division test reduced, every figure of it against numpy's least squares and scipy's quantiles."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import stats

from setupcheck.division.columns import ARCSEC
from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce
from setupcheck.division.results import Reduced

Reals = NDArray[np.floating]
STATIONS, RUNS = 24, 3
HARMONICS = (1.0, 2.0, 8.0, 5.0, 3.0, 4.0)
PLANTED = {1.0: (9.0, -4.0), 2.0: (1.5, 2.5), 8.0: (-3.0, 1.0), 5.0: (0.5, 2.0), 3.0: (1.0, 0.0), 4.0: (0.0, -1.0)}


class Rows:
    """Three runs, each there and back over 24 stations, in the order of time; arc seconds."""

    def __init__(self, seed: int = 17) -> None:
        rng = np.random.default_rng(seed)
        there = list(range(STATIONS))
        rows = [(run, way, j) for run in range(RUNS) for way in (1, -1) for j in there[::way]]
        self.run, self.way, self.station = (np.array(c) for c in zip(*rows, strict=True))
        self.theta = self.station * math.tau / STATIONS
        self.n = len(rows)
        self.t = np.linspace(-0.5, 0.5, self.n)
        y = np.array([2.0, -1.0, 4.0])[self.run] + 3.0 * self.t + 1.0 * 4.0 * self.t**2 + 0.8 * self.way / 2.0
        for h, (a, b) in PLANTED.items():
            y = y + a * np.cos(h * self.theta) + b * np.sin(h * self.theta)
        y = y + self.way / 2.0 * (0.6 * np.cos(self.theta) + 1.2 * np.sin(self.theta))
        self.y = np.round(y + rng.normal(0.0, 0.4, self.n), 6)

    def file(self, folder: Path, column: str = "angle_deg") -> Path:
        made = folder / "test.csv"
        lines = [
            f"{15 * j},{y:.6f},{run},{'forward' if way > 0 else 'reverse'}"
            for j, y, run, way in zip(self.station, self.y, self.run, self.way, strict=True)
        ]
        made.write_text("\n".join([f"{column},deviation_arcsec,run,direction", *lines]) + "\n", encoding="utf-8")
        return made

    def common(self) -> list[Reals]:
        """Columns that are the same at all stations: zeros, drift, reversal, bend."""
        zeros = [(self.run == r).astype(float) for r in range(RUNS)]
        return [*zeros, self.t, self.way / 2.0, 4.0 * self.t**2]

    def matrix(self, *, cubed: bool = False) -> Reals:
        """Those, the swing of the first wave, then the waves."""
        half = self.way / 2.0
        swing = [half * np.cos(self.theta), half * np.sin(self.theta)]
        waves = [f(h * self.theta) for h in HARMONICS for f in (np.cos, np.sin)]
        return np.column_stack([*self.common(), *swing, *waves, *([8.0 * self.t**3] if cubed else [])])


@pytest.fixture(scope="module")
def data() -> Rows:
    return Rows()


@pytest.fixture(scope="module")
def found(data: Rows, tmp_path_factory: pytest.TempPathFactory) -> Reduced:
    file = data.file(tmp_path_factory.mktemp("reduced"))
    return reduce(
        read_test(file), count=72, worm_ratio=8.0, head_ratio=5.0, radius=50.0, pressure_angle=math.radians(20.0)
    )


def scatter(data: Rows, square: float, free: int) -> tuple[float, float, float, int, float]:
    """(variance used, its degrees of freedom, of repeats, theirs, own of the stations): repeats apart from lack of fit [arcsec2].

    Repeats are readings of one station: the fit of a level for each station beside what all share.
    """
    swing = [data.way / 2.0 * np.cos(data.theta), data.way / 2.0 * np.sin(data.theta)]
    levels = [(data.station == j).astype(float) for j in range(STATIONS)]
    matrix = np.column_stack([*data.common(), *swing, *levels])
    values = np.linalg.lstsq(matrix, data.y, rcond=None)[0]
    pure, nu = float(((data.y - matrix @ values) ** 2).sum()), data.n - int(np.linalg.matrix_rank(matrix))
    lack = (square - pure) / (free - nu)
    if stats.f.sf(lack / (pure / nu), free - nu, nu) >= 0.25:
        return square / free, free, pure / nu, nu, 0.0
    return lack, free - nu, pure / nu, nu, math.sqrt((lack - pure / nu) / (data.n / (data.n - nu)))


def test_waves_drift_and_reversal_are_numpys_with_their_intervals(data: Rows, found: Reduced) -> None:
    matrix = data.matrix()
    values = np.linalg.lstsq(matrix, data.y, rcond=None)[0]
    square = float(((data.y - matrix @ values) ** 2).sum())
    used, nu, repeats, repeat_nu, own = scatter(data, square, data.n - matrix.shape[1])
    covariance = np.linalg.inv(matrix.T @ matrix) * used
    assert (
        own > 0.0
    )  # three runs there and back: the stations stray further than repeats explain at the level of pooling
    names = ["once per turn", "twice per turn", "once per turn of the worm",
             "once per crank turn of the head that cut it", "3 waves per turn", "4 waves per turn"]  # fmt: skip
    assert [(w.name, w.harmonic) for w in found.waves] == list(zip(names, HARMONICS, strict=True))
    for i, wave in enumerate(found.waves):
        at = 8 + 2 * i
        assert (wave.a / ARCSEC, wave.b / ARCSEC) == pytest.approx((values[at], values[at + 1]), abs=1e-9)
        wanted = [covariance[at, at], covariance[at, at + 1], covariance[at + 1, at + 1]]
        assert [c / ARCSEC**2 for c in wave.covariance] == pytest.approx(wanted, rel=1e-6, abs=1e-9)
        assert (wave.nu, wave.also) == (nu, 0.0)
        assert wave.length.value == pytest.approx(math.hypot(wave.a, wave.b))
    t = stats.t.ppf(0.975, nu)
    for interval, at in ((found.drift, 3), (found.reversal, 4)):
        assert interval is not None
        assert interval.value / ARCSEC == pytest.approx(values[at], abs=1e-9)
        assert (interval.high - interval.value) / ARCSEC == pytest.approx(t * math.sqrt(covariance[at, at]), rel=1e-6)
        assert (interval.value - interval.low) / ARCSEC == pytest.approx(t * math.sqrt(covariance[at, at]), rel=1e-6)
    assert (found.scatter / ARCSEC, found.nu) == pytest.approx((math.sqrt(repeats), repeat_nu))
    assert found.stations_scatter / ARCSEC == pytest.approx(own)
    assert found.no_reversal == ""


def test_both_flanks_and_what_is_taken_apart_by_them(data: Rows, found: Reduced) -> None:
    """Own part of the teeth: the difference (c, d) is 2 tan 20 (-b, a) of it, so it is (d, -c) / 2 tan 20."""
    matrix = data.matrix()
    values = np.linalg.lstsq(matrix, data.y, rcond=None)[0]
    c, d, a, b = values[6:10]
    assert found.flanks is not None and found.apart is not None and found.eccentric is not None
    assert [x / ARCSEC for x in found.flanks.vector] == pytest.approx([a, b, c, d], abs=1e-9)
    square = float(((data.y - matrix @ values) ** 2).sum())
    used, nu, *_ = scatter(data, square, data.n - matrix.shape[1])
    at = [8, 9, 6, 7]
    covariance = np.linalg.inv(matrix.T @ matrix)[np.ix_(at, at)] * used
    assert np.array(found.flanks.covariance) / ARCSEC**2 == pytest.approx(covariance, rel=1e-6, abs=1e-9)
    twice = 2.0 * math.tan(math.radians(20.0))
    own = complex(d, -c) / twice
    assert found.apart.amount == pytest.approx(50.0 * abs(own) * ARCSEC)
    # (a, b) = e / r (sin phi, -cos phi): phi is a quarter turn on from the wave
    phi = (np.angle(own) + math.pi / 2.0) % math.tau
    assert found.apart.direction == pytest.approx(phi)
    assert found.apart.divided == pytest.approx(abs(complex(a, b) - own) * ARCSEC)
    assert found.apart.highest == pytest.approx(np.angle(complex(a, b) - own) % math.tau)
    widest = math.sqrt(max(covariance[2, 2], covariance[3, 3]))
    assert found.apart.within == pytest.approx(50.0 * stats.t.ppf(0.975, nu) * widest / twice * ARCSEC)
    off = found.eccentric
    assert (off.flanks, off.side, off.looks, off.open) == ("both", 0, "neither", "")
    assert off.amount.value == pytest.approx(50.0 * abs(complex(a, b)) * ARCSEC)
    assert off.direction == pytest.approx((np.angle(complex(a, b)) + math.pi / 2.0) % math.tau)
    # 72 teeth of 5 deg, the first gap at zero, so tooth n stands at 5 (n - 1/2) deg
    assert off.tooth == math.floor(math.degrees(off.direction) / 5.0) + 1


def test_means_ranges_and_closure_by_plain_sums(data: Rows, found: Reduced) -> None:
    matrix = data.matrix()
    values = np.linalg.lstsq(matrix, data.y, rcond=None)[0]
    shared = [0, 1, 2, 3, 5]  # zeros, drift and bend come off; the reversal stays between both ways
    rest = data.y - matrix[:, shared] @ values[shared]
    bare = rest - matrix[:, 6:10] @ values[6:10]

    def mean(of: Reals, way: int, j: int) -> float:
        return float(of[(data.way == way) & (data.station == j)].mean())

    told = {(m.direction, round(math.degrees(m.theta))): m for m in found.means}
    assert len(found.means) == len(told) == 2 * STATIONS
    for (way, degrees), one in told.items():
        assert one.value / ARCSEC == pytest.approx(mean(rest, way, degrees // 15), abs=1e-9)
        assert one.readings == RUNS
    for of, said in ((rest, found.range), (bare, found.range_without_first)):
        each = [[mean(of, way, j) for j in range(STATIONS)] for way in (1, -1)]
        assert said is not None
        assert said / ARCSEC == pytest.approx(max(max(e) - min(e) for e in each), abs=1e-9)
    # station 0 of the first run is read first and last of that run: there forward, back in reverse
    assert found.closure is not None
    assert found.closure / ARCSEC == pytest.approx(data.y[2 * STATIONS - 1] - data.y[0], abs=1e-6)
    assert (found.rows, found.stations, found.runs, found.per_mean) == (144, 24, 3, 3)
    assert found.places == 24  # stations 15 deg apart are three pitches of 5 deg
    assert (found.repaired, found.against, found.whole, found.steps, found.flags) == (False, False, (), (), ())
    assert isinstance(found.repeatability, object) and not isinstance(found.repeatability, str)
    up = [data.y[(data.way == 1) & (data.station == j)] for j in range(STATIONS)]
    down = [data.y[(data.way == -1) & (data.station == j)] for j in range(STATIONS)]
    back = [u.mean() - d.mean() for u, d in zip(up, down, strict=True)]
    assert found.repeatability.mean_B / ARCSEC == pytest.approx(float(np.mean(back)), abs=1e-9)
    wide = [max(2 * u.std(ddof=1) + 2 * d.std(ddof=1) + abs(b), 4 * u.std(ddof=1), 4 * d.std(ddof=1))
            for u, d, b in zip(up, down, back, strict=True)]  # fmt: skip
    assert found.repeatability.R / ARCSEC == pytest.approx(max(wide))


def test_a_wave_that_another_may_stand_for_is_no_answer(found: Reduced) -> None:
    """Sixteen waves at 24 stations are read as 8 the other way round: cos 16 x = cos 8 x, sin 16 x = -sin 8 x."""
    (unseen,) = found.unseen
    assert (unseen.harmonic, unseen.why, unseen.taken_for) == (16.0, "folded", ("once per turn of the worm",))
    assert found.worm is not None and found.worm.harmonic == 8.0
    assert found.worm.open == "these stations cannot tell it from twice per turn of the worm"
    assert [w.open for w in found.waves if w.harmonic != 8.0] == [""] * 5
    assert found.warnings == (
        "twice per turn of the worm (16 waves): at these stations it looks like once per turn of the worm, and neither is "
        "an answer",
    )
    assert (found.verdict, found.reasons) == ("told", ())


def test_places_that_were_turned_past_are_the_other_way_round(data: Rows, found: Reduced, tmp_path: Path) -> None:
    """Turned by x, the place -x is read, and turned too far it shows that place too far back: a becomes -a, b stays."""
    file = data.file(tmp_path, "turned_deg")
    kept = {"count": 72, "worm_ratio": 8.0, "head_ratio": 5.0, "radius": 50.0, "pressure_angle": math.radians(20.0)}
    turned = reduce(read_test(file), **kept)  # type: ignore[arg-type]
    for plain, other in zip(found.waves, turned.waves, strict=True):
        assert (other.a, other.b) == pytest.approx((-plain.a, plain.b))
        one, both, two = plain.covariance
        assert other.covariance == pytest.approx((one, -both, two))
    assert found.flanks is not None and turned.flanks is not None
    sense = np.array([-1.0, 1.0, 1.0, -1.0])
    assert turned.flanks.vector == pytest.approx(tuple(np.array(found.flanks.vector) * sense))
    assert np.array(turned.flanks.covariance) == pytest.approx(
        np.array(found.flanks.covariance) * np.outer(sense, sense), abs=1e-20
    )
    ours = {(m.direction, round(math.degrees(m.theta)) % 360): m.value for m in found.means}
    theirs = {(m.direction, round(math.degrees(-m.theta)) % 360): -m.value for m in turned.means}
    assert theirs == pytest.approx(ours)
    also = reduce(read_test(data.file(tmp_path)), turns_with_work=True, **kept)  # type: ignore[arg-type]
    assert [(w.a, w.b) for w in also.waves] == [(w.a, w.b) for w in turned.waves]
