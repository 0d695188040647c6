"""Why an answer of a division test is open, and what bounds it: one file for each reason, its figures worked out beside it."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from setupcheck.division import reduction
from setupcheck.division.columns import ARCSEC
from setupcheck.division.design import Term
from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce, warnings
from setupcheck.division.results import Reduced, Unseen
from setupcheck.errors import SetupcheckError
from tests.unit.division.few_points import written


def plain(folder: Path, degrees: list[float], y: list[float], *, count: int = 72) -> Reduced:
    """Deviations [arcsec] in the order of time, nothing said of runs and directions."""
    rows = [f"{d},{v:.9f}" for d, v in zip(degrees, y, strict=True)]
    return reduce(written(folder, "angle_deg,deviation_arcsec", *rows), count=count)


def scattered(n: int, seed: int, size: float = 0.3) -> list[float]:
    return list(np.random.default_rng(seed).normal(0.0, size, n))


def test_waves_are_looked_for_in_the_order_of_their_weight() -> None:
    assert list(reduction._asked(72.0, 40.0).items()) == [
        (1.0, "once per turn"),
        (2.0, "twice per turn"),
        (72.0, "once per turn of the worm"),
        (40.0, "once per crank turn of the head that cut it"),
        (3.0, "3 waves per turn"),
        (4.0, "4 waves per turn"),
        (144.0, "twice per turn of the worm"),
    ]
    assert list(reduction._asked(None, None)) == [1.0, 2.0, 3.0, 4.0]
    assert reduction._asked(40.0, 40.0)[40.0] == "once per turn of the worm (own, or the head's)"
    assert reduction._asked(None, 40.0)[40.0] == "once per crank turn of the head that cut it"
    assert 0.5 not in reduction._asked(0.5, None)  # a worm that turns less than once is no wave of the wheel
    assert reduction._asked(1.0, None)[1.0] == "once per turn"


def test_teeth_do_not_turn_with_the_work(tmp_path: Path) -> None:
    data = written(tmp_path, "tooth,deviation_arcsec", *(f"{n},{n % 3}" for n in range(1, 13)))
    with pytest.raises(SetupcheckError, match=r"places of the work and do not turn with it.*write turned_deg"):
        reduce(data, count=12, turns_with_work=True)
    assert reduce(data, count=12).rows == 12


def test_a_single_pass_hides_a_bend_and_its_bound_lies_on_every_wave(tmp_path: Path) -> None:
    """Sixteen stations once and the first again: zero, drift and four waves. What a bend t^2 of the size of the drift would do is
    what least squares make of the column 4 t^2 in each wave, times the drift and its own interval."""
    n = 17
    degrees = [22.5 * (j % 16) for j in range(n)]
    t, theta = np.linspace(-0.5, 0.5, n), np.radians(degrees)
    y = 6.0 * t + 20.0 * np.cos(theta) + np.array(scattered(n, 3))
    found = plain(tmp_path, degrees, list(y))
    harmonics = [w.harmonic for w in found.waves]
    assert harmonics == [1.0, 2.0, 3.0, 4.0]
    matrix = np.column_stack([np.ones(n), t, *(f(h * theta) for h in harmonics for f in (np.cos, np.sin))])
    values = np.linalg.lstsq(matrix, y, rcond=None)[0]
    bend = np.linalg.lstsq(matrix, 4.0 * t * t, rcond=None)[0]
    assert found.drift is not None and found.drift.value / ARCSEC == pytest.approx(values[1])
    nu = found.waves[0].nu
    spread = found.waves[0].covariance[0] / np.linalg.inv(matrix.T @ matrix)[2, 2]
    half = stats.t.ppf(0.975, nu) * math.sqrt(spread * np.linalg.inv(matrix.T @ matrix)[1, 1])
    assert (found.drift.high - found.drift.low) / 2.0 == pytest.approx(half, rel=1e-5)
    sag = abs(found.drift.value) + half
    for i, wave in enumerate(found.waves):
        at = 2 + 2 * i
        assert wave.also == pytest.approx(sag * math.hypot(bend[at], bend[at + 1]), rel=1e-4)
        assert wave.also > 0.0
    assert found.reasons[0] == reduction.NO_SAG
    assert found.verdict == "open"
    assert all(w.open == reduction.NO_SAG for w in found.waves)
    assert "the intervals hold for a drift that bends by no more than it was in all" in found.limits
    assert found.repeatability == "needs forward and reverse runs (column direction)"
    assert found.no_reversal == "readings of one direction only, or none said (column direction)"
    assert found.reversal is None and found.flanks is None and found.sighting is None


def test_stations_read_once_leave_drift_and_division_one(tmp_path: Path) -> None:
    found = plain(tmp_path, [30.0 * j for j in range(12)], scattered(12, 4))
    assert reduction.DISCONNECTED in found.reasons
    assert reduction.NO_SAG not in found.reasons
    assert found.closure is None
    once = "no station was read twice in one direction: scatter of a reading and of the places cannot be told apart"
    assert once in found.limits


def test_readings_without_any_scatter_are_those_of_no_instrument(tmp_path: Path) -> None:
    degrees = [30.0 * (j % 12) for j in range(36)]
    found = plain(tmp_path, degrees, [20.0 * math.cos(math.radians(d)) for d in degrees])
    assert found.reasons == (reduction.NO_SCATTER,)
    assert all(w.open == reduction.NO_SCATTER for w in found.waves)
    some = plain(
        tmp_path,
        degrees,
        [20.0 * math.cos(math.radians(d)) + e for d, e in zip(degrees, scattered(36, 5, 0.1), strict=True)],
    )
    assert some.reasons == ()
    assert some.verdict == "told"


def test_as_many_readings_as_unknowns_have_nothing_to_spare(tmp_path: Path) -> None:
    """Three stations, none twice in time but the first: a zero, and nothing for a wave."""
    found = plain(tmp_path, [0.0, 120.0, 240.0], [1.0, 2.0, 3.0])
    assert found.waves == ()
    assert any(
        r.startswith("3 stations cannot tell eccentricity from drift and zero: read at 5 or more")
        for r in found.reasons
    )
    assert found.verdict == "open"
    assert reduction._many(1) == "1 station"
    assert reduction._many(2) == "2 stations"


def test_all_stations_in_half_a_turn_say_nothing_of_waves(tmp_path: Path) -> None:
    degrees = [15.0 * j for j in (*range(12), *range(11, -1, -1))]
    found = plain(tmp_path, degrees, [0.05 * d + e for d, e in zip(degrees, scattered(24, 6), strict=True)])
    assert found.waves == ()
    assert [u.why for u in found.unseen] == ["arc"] * 4
    assert [u.taken_for for u in found.unseen] == [()] * 4
    arc = "all stations lie within half a turn: waves of the wheel cannot be told, a straight slope stands for them"
    assert arc in found.limits
    assert not any("no station between" in one for one in found.limits)
    assert found.warnings == ()
    assert found.range_without_first is None


def test_a_stretch_without_stations_is_told(tmp_path: Path) -> None:
    """Every 30 deg but for 120 and 150: nothing between 90 and 180."""
    angles = [0.0, 30.0, 60.0, 90.0, 180.0, 210.0, 240.0, 270.0, 300.0, 330.0]
    found = plain(tmp_path, angles * 3, scattered(30, 7))
    assert "no station between 90 and 180 deg, elsewhere every 30 deg" in found.limits
    even = plain(tmp_path, [30.0 * j for j in range(12)] * 3, scattered(36, 7))
    assert not any("no station between" in one for one in even.limits)


@pytest.mark.parametrize(("off", "shows"), [(0.0, False), (8.0, True)])
def test_a_slip_makes_every_answer_open(tmp_path: Path, off: float, shows: bool) -> None:
    degrees = [30.0 * (j % 12) for j in range(48)]
    y = np.array(scattered(48, 8, 0.1))
    y[25:] += off
    found = plain(tmp_path, degrees, list(y))
    said = [r for r in found.reasons if r.startswith("from line 27 on all readings stand ")]
    assert bool(said) == shows
    if shows:
        size = float(said[0].removeprefix("from line 27 on all readings stand ").split('"')[0])
        assert size == pytest.approx(off, abs=0.3)
        assert said[0].endswith("off: something slipped or was counted wrong")
        assert found.waves[0].open == found.reasons[0]


def test_a_step_round_the_circle_is_told_with_its_station(tmp_path: Path) -> None:
    """24 stations three times; from 210 deg to the end of the circle everything stands 9 arc seconds further."""
    degrees = [15.0 * (j % 24) for j in range(72)]
    y = np.array(scattered(72, 9, 0.1)) + np.where(np.array(degrees) >= 210.0, 9.0, 0.0)
    found = plain(tmp_path, degrees, list(y))
    (said,) = [r for r in found.reasons if "round the circle everything stands" in r]
    assert said.startswith("from the station at 210.00 deg on")
    (step,) = found.steps
    assert (step.along, math.degrees(step.theta), step.line) == ("circle", pytest.approx(210.0), 16)
    assert step.size / ARCSEC == pytest.approx(9.0, abs=0.5)


def test_whole_pitches_are_a_reason_of_their_own(tmp_path: Path) -> None:
    degrees = [30.0 * (j % 12) for j in range(36)]
    y = np.array(scattered(36, 10, 0.1)) + 20.0 * np.cos(np.radians(degrees))
    clean = plain(tmp_path, degrees, list(y))
    y[5:8] += 5.0 * 3600.0  # 72 teeth: a pitch of 5 deg
    found = plain(tmp_path, degrees, list(y))
    assert found.reasons[0] == "some readings stand whole pitches off: a place was missed or counted twice (below)"
    assert found.repaired and not clean.repaired
    (whole,) = found.whole
    assert (whole.pitches, whole.first_line, whole.last_line, whole.rows) == (1, 7, 9, 3)
    assert (math.degrees(whole.theta), math.degrees(whole.theta_last)) == pytest.approx((150.0, 210.0))
    assert math.degrees(whole.pitch) == pytest.approx(5.0)
    for a, b in zip(clean.waves, found.waves, strict=True):
        assert (b.a, b.b) == pytest.approx((a.a, a.b), abs=1e-6 * ARCSEC)


def test_a_wild_reading_is_flagged_and_the_fit_told_without_it(tmp_path: Path) -> None:
    degrees = [30.0 * (j % 12) for j in range(48)]
    y = np.array(scattered(48, 11, 0.2)) + 15.0 * np.cos(np.radians(degrees))
    y[17] += 12.0
    found = plain(tmp_path, degrees, list(y))
    (flag,) = found.flags
    assert (flag.line, math.degrees(flag.theta)) == (19, pytest.approx(150.0))
    assert flag.off / ARCSEC == pytest.approx(12.0, abs=3.0)
    t, theta, keep = np.linspace(-0.5, 0.5, 48), np.radians(degrees), np.arange(48) != 17
    matrix = np.column_stack(
        [np.ones(48), t, *(f(h * theta) for h in (1, 2, 3, 4) for f in (np.cos, np.sin)), 4 * t * t]
    )
    values = np.linalg.lstsq(matrix[keep], y[keep], rcond=None)[0]
    assert [w.harmonic for w in found.without] == [1.0, 2.0, 3.0, 4.0]
    assert found.without[0].a / ARCSEC == pytest.approx(values[2], abs=0.02)
    assert found.waves[0].open == "readings that stand far off the others move it: settle them first (flagged below)"
    assert found.reasons == (found.waves[0].open,)


def test_runs_of_one_direction_each_have_no_reversal(tmp_path: Path) -> None:
    rows = [f"{30 * j},{e:.6f},{k},{'forward' if k % 2 else 'reverse'}"
            for k in range(4) for j, e in zip(range(12)[:: 1 if k % 2 else -1], scattered(12, 20 + k), strict=True)]  # fmt: skip
    found = reduce(written(tmp_path, "angle_deg,deviation_arcsec,run,direction", *rows), count=72)
    assert found.reversal is None
    assert found.no_reversal.startswith("forward and reverse are in different runs, and each run has a zero of its own")
    assert found.runs == 4


@pytest.mark.parametrize(
    ("harmonic", "why", "taken", "said"),
    [
        (72.0, "invisible", (), "worm (72 waves): every station sees it alike, so it cannot show here"),
        (3.0, "invisible", (), "worm: every station sees it alike, so it cannot show here"),
        (5.0, "invisible", (), "worm (5 waves): every station sees it alike, so it cannot show here"),
        (3.0, "folded", ("a", "b"), "worm: at these stations it looks like a and b, and neither is an answer"),
        (3.0, "folded", (), "worm: these stations cannot tell it from zero, drift and the other waves"),
        (3.0, "few", (), "worm: not looked for, too few stations for one more unknown"),
        (
            3.0,
            "few",
            ("a",),
            "worm: not looked for, too few stations for one more unknown; part of it would look like a",
        ),
        (3.0, "arc", (), None),
    ],
)
def test_what_stations_cannot_show_is_said(harmonic: float, why: str, taken: tuple[str, ...], said: str | None) -> None:
    assert warnings([Unseen("worm", harmonic, why, taken)]) == ([] if said is None else [said])


def test_readings_of_a_circle_scatter_about_the_zero_of_their_run(tmp_path: Path) -> None:
    """Three runs there and back, each set to another zero of the instrument: the figures of positioning do not see the zeros."""

    def figures(zeros: tuple[float, ...]) -> Reduced:
        rows = []
        for k, zero in enumerate(zeros):
            e = scattered(24, 30 + k, 1.0 / 3600.0)
            for i, j in enumerate([*range(12), *range(11, -1, -1)]):
                wave = 60.0 / 3600.0 * math.cos(math.radians(30.0 * j))  # many times what readings scatter by
                shown = (30.0 * j + zero + e[i] + wave) % 360.0
                rows.append(f"{30 * j},{shown:.9f},{k},{'forward' if i < 12 else 'reverse'}")
        return reduce(written(tmp_path, "angle_deg,reading_deg,run,direction", *rows), count=72)

    one, other = figures((0.0, 0.0, 0.0)), figures((10.0, 200.0, 359.0))
    assert not isinstance(one.repeatability, str) and not isinstance(other.repeatability, str)
    for name in ("A", "R", "E", "B", "mean_B", "M"):
        assert getattr(other.repeatability, name) == pytest.approx(getattr(one.repeatability, name), abs=1e-4 * ARCSEC)
    assert other.repeatability.R < 20.0 * ARCSEC
    assert not other.against
    assert one.collimation is None and one.sighting is None


def test_a_bend_is_told_where_it_stands_out(tmp_path: Path) -> None:
    degrees = [30.0 * (j % 12) for j in range(48)]
    t, e = np.linspace(-0.5, 0.5, 48), np.array(scattered(48, 12, 0.3))
    bent = plain(tmp_path, degrees, list(3.0 * 4.0 * t * t + e))
    straight = plain(tmp_path, degrees, list(e))
    said = "the drift was bent, not even: the bend is in the fit and in the intervals"
    assert said in bent.limits
    assert said not in straight.limits
    data = read_test(tmp_path / "test.csv")
    found = reduction._found(reduction.prepare(data, count=72, worm_ratio=None, start=0.0, turn=1).points, [1.0])
    at = found.fit.at(Term("bend", 2.0))[0]
    wanted = abs(found.fit.values[at]) / math.sqrt(found.spread * found.fit.inverse[at, at])
    assert reduction.doubts_of_bend(found) == pytest.approx(wanted)


def test_residuals_that_follow_each_other_are_told(tmp_path: Path) -> None:
    degrees = [30.0 * (j % 12) for j in range(72)]
    wave = 2.0 * np.sin(math.tau * 4.5 * np.linspace(0.0, 1.0, 72))
    found = plain(tmp_path, degrees, list(wave + np.array(scattered(72, 13, 0.1))))
    said = "residuals follow each other over time, as an uneven drift does: the intervals are widened for it"
    assert said in found.limits
    still = plain(tmp_path, degrees, scattered(72, 13, 0.1))
    assert said not in still.limits
