"""Backlash read on the finished wheel: what then rules, what stays, what it is held against, what leaves it open."""

from __future__ import annotations

import json
import math
import re

import numpy as np
import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.figures import OverATurn
from setupcheck.quantities.book import Open
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import uncomputed
from tests.jobs.backlash_jobs import (
    ASKED,
    ROTATOR,
    SLOPE,
    TAKEN,
    TYPED,
    answer,
    block,
    combined,
    ends,
    job,
    judged,
    remedy,
    um,
    verdict,
    wave,
)

# -- what rules ----------------------------------------------------------------------------------------------------------


def test_what_was_read_takes_the_place_of_all_but_the_temperature() -> None:
    text = job(TYPED, "uncertainty: 0 um, end_float: taken-out")
    low, high = ends(text)
    causes = {share.cause.key: 1e3 * share.worst for share in combined(text).shares}
    warm = sum(value for key, value in causes.items() if "service" in key)
    assert set(causes) == {
        "wheel, its backlash as read",
        "wheel, its backlash as read, over the turn",
        "drive, its temperature in service",
        "mesh, pitch of the wheel in service",
    }
    assert causes["wheel, its backlash as read"] == 0.0
    assert high - low == pytest.approx(2.0 * warm + 62.0 - um(text, "read.mean") + 7.7, abs=0.35)
    assert 0.0 < low < 47.0 < 62.0 < high


def test_service_at_the_temperature_of_the_room_leaves_the_readings_alone() -> None:
    text = job(wave(55.0, 6.0), TAKEN, ("housing: grey-iron", "housing: grey-iron, serves_at: [20 degC, 20 degC]"))
    guard = 1.5 * 2.0  # k = 2 is two standard deviations, and the worst case takes three of them
    assert ends(text) == pytest.approx((49.0 - guard, 61.0 + guard), abs=1e-6)


def test_a_warm_room_counts_the_service_from_there() -> None:
    still = ("housing: grey-iron", "housing: grey-iron, serves_at: [26 degC, 26 degC]")
    text = job(wave(55.0, 6.0), TAKEN, still, ("room: 20 degC", "room: 26 degC"))
    assert ends(text) == pytest.approx((46.0, 64.0), abs=1e-6)
    assert um(text, "read.allowed") > um(job(wave(55.0, 6.0)), "read.allowed")


def test_the_wave_between_the_places_counts_where_it_reaches_farther() -> None:
    cold = ("housing: grey-iron", "housing: grey-iron, serves_at: [20 degC, 20 degC]")
    text = job(wave(55.0, 6.0, loose=5, gaps=(1, 19, 37, 55)), "uncertainty: 0 um, end_float: taken-out", cold)
    low, high = ends(text)
    assert (low, high) == pytest.approx((49.0, 61.0), abs=1e-6)
    assert 1e3 * min(answer(text, "read.as_read").arcs.values()) > low + 0.3  # type: ignore[union-attr]


def test_the_swing_is_twice_the_amplitude_with_its_uncertainty() -> None:
    text = job(wave(55.0, 6.0))
    share = math.sqrt(2.0 / 8.0)
    assert um(text, "read.swing") == pytest.approx(12.0, abs=1e-9)
    assert um(text, "read.swing_uncertainty") == pytest.approx(2.0 * share * 2.0)
    assert ends(text, "backlash-swing.")[1] == pytest.approx(12.0 + 1.5 * 2.0 * share * 2.0)
    assert um(text, "read.eccentricity") == pytest.approx(6.0 / SLOPE)


@pytest.mark.parametrize("places", range(4, 17))
def test_planted_rings_come_back_as_numpy_has_them(places: int) -> None:
    """Unevenly spread places, a scatter of one micrometre: mean, swing and tight place against numpy's least squares."""
    rng = np.random.default_rng(places)
    gaps = tuple(int(1 + 72 * (k + rng.uniform(0.0, 0.3)) / places) for k in range(places))
    mean, e, way = rng.uniform(45.0, 80.0), rng.uniform(6.0, 16.0), rng.uniform(0.0, math.tau)
    at = np.array([math.tau * (gap - 1) / 72 for gap in gaps])
    read = mean + SLOPE * e * np.cos(at - way) + rng.standard_normal(places)
    text = job(dict(zip(gaps, np.round(read, 3).tolist(), strict=True)))
    (m, x, y), *_ = np.linalg.lstsq(
        np.column_stack([np.ones(places), np.cos(at), np.sin(at)]), np.round(read, 3), rcond=None
    )
    assert um(text, "read.mean") == pytest.approx(m, abs=1e-9)
    assert um(text, "read.eccentricity") == pytest.approx(math.hypot(x, y) / SLOPE, abs=1e-9)
    assert um(text, "read.eccentricity") == pytest.approx(e, abs=2.5 * 2.0 / SLOPE * math.sqrt(2.0 / places))
    high = (math.atan2(y, x) + math.pi) % math.tau / math.tau * 72 + 1
    assert min(abs(float(str(answer(text, "read.high_spot"))) - high - turn) for turn in (-72, 0, 72)) <= 0.5


def test_the_plan_stays_and_stands_beside_what_was_read() -> None:
    text = re.sub(r"\s+", " ", as_text(judged(job(TYPED))))
    assert re.search(r"backlash at teeth about bearings 0\.0107 to 0\.1167 mm then, 0\.0330 to 0\.0722 mm now", text)
    assert re.search(r"backlash-swing at teeth about bearings 18\.8 um then, 18\.4 um now", text)


@pytest.mark.parametrize(
    ("along", "factor"),
    [
        ("circular", 1.0),
        ("at 54 mm", 1.0),
        ("at 108 mm", 2.0),
        ("at 27", 0.5),
        (
            "normal",
            math.cos(math.atan(math.tan(math.radians(20.0)) * math.cos(math.atan(1.5 / 24.0)))) * 24.0 / 24.0468,
        ),
    ],
)
def test_a_dial_at_another_radius_or_square_to_the_flank_is_brought_to_the_reference_circle(
    along: str, factor: float
) -> None:
    text = job({gap: value * factor for gap, value in wave(55.0, 6.0).items()}, f"along: {along}, {TAKEN}")
    assert um(text, "read.mean") == pytest.approx(55.0, rel=2e-5)
    assert um(text, "read.uncertainty") == pytest.approx(2.0 / factor, rel=2e-5)


# -- end float -----------------------------------------------------------------------------------------------------------


def test_end_float_is_read_as_backlash_one_to_one_and_is_taken_out() -> None:
    """The trade reads lost motion at the rim and takes the worm's float off before the gap is blamed; rack and wheel."""
    included = job({gap: value + 10.0 for gap, value in TYPED.items()}, "uncertainty: 2 um, end_float: included")
    assert ends(included) == pytest.approx(ends(job(TYPED)), abs=1e-9)
    assert um(included, "read.end_float") == pytest.approx(10.0)
    assert verdict(included, "MEASURE-009") == "pass"
    assert "the worm's end float of 10.0 um is taken out of each" in block(included)
    assert answer(job(TYPED), "read.end_float") is None
    assert verdict(job(TYPED), "MEASURE-009") == ""


def test_an_end_float_of_a_dial_far_out_is_taken_out_on_the_reference_circle() -> None:
    far = {gap: 2.0 * (value + 10.0) for gap, value in TYPED.items()}
    text = job(far, "along: at 108 mm, uncertainty: 4 um, end_float: included")
    assert ends(text) == pytest.approx(ends(job(TYPED)), abs=1e-9)


def test_readings_smaller_than_the_end_float_said_to_be_in_them_fail() -> None:
    text = job(wave(10.0, 5.0), "uncertainty: 2 um, end_float: included")
    assert verdict(text, "MEASURE-009") == "fail"
    found = answer(text, "read.as_read")
    assert isinstance(found, Open)
    assert "gap 37 reads 5.0 um along the reference circle, less than the worm's end float of 10.0 um" in found.because
    assert "it cannot be in it" in block(text)


@pytest.mark.parametrize(
    ("more", "change", "missing"),
    [
        ("uncertainty: 2 um", None, "mesh.backlash_read.end_float"),
        ("end_float: taken-out", None, "mesh.backlash_read.uncertainty"),
        ("uncertainty: 2 um, end_float: included", ("  end_float: 10 um\n", ""), "worm.end_float"),
    ],
)
def test_readings_of_which_nobody_says_enough_leave_it_open(
    more: str, change: tuple[str, str] | None, missing: str
) -> None:
    text = job(TYPED, more, *([change] if change else []))
    opened = {f.rule for f in judged(text).evaluation.findings if missing in f.missing}
    assert opened >= {"STACK-001", "MESH-014", "MESH-015", "MESH-016"}
    assert judged(text).verdict == "open"
    assert f"fill {missing}" in block(text)


def test_a_worm_that_is_not_known_leaves_the_readings_open_and_is_asked_for() -> None:
    text = job(TYPED, TAKEN, ("  pressure_angle: 20 deg\n", ""))
    opened = [f for f in judged(text).evaluation.findings if f.at == "require[10]" and f.verdict == "open"]
    assert opened and all("worm.pressure_angle" in f.missing for f in opened)
    assert "fill worm.pressure_angle" in block(text) and "goes on to count" not in block(text)


def test_a_worm_without_end_float_needs_no_word_about_it() -> None:
    text = job(TYPED, "uncertainty: 2 um", ("  end_float: 10 um\n", "  end_float: 0 um\n"))
    assert ends(text) == pytest.approx(ends(job(TYPED)))


# -- how many places -----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("gaps", "says"),
    [
        ((), "no place is read yet"),
        ((1,), "read at 1 place, and"),
        ((1, 25, 49), "read at 3 places, and"),
        ((1, 10, 19, 28), "no backlash is read between gap 28 and gap 1"),
        ((1, 19, 37, 47), "no backlash is read between gap 47 and gap 1"),
    ],
)
def test_too_few_places_are_open_and_the_plan_goes_on_to_count(gaps: tuple[int, ...], says: str) -> None:
    text = job(wave(55.0, 6.0, gaps=gaps))
    assert verdict(text, "MESH-013") == "open"
    assert says in block(text)
    assert "the plan's own backlash goes on to count" in block(text)
    assert ends(text) == pytest.approx(ends(ROTATOR))
    assert judged(text).verdict == "open"


def test_four_places_do_and_warn_and_eight_are_enough() -> None:
    four = job(wave(55.0, 6.0, gaps=(1, 19, 37, 55)))
    assert verdict(four, "MESH-013") == "warn"
    assert "4 places tell one wave a turn, an oval ring looks like scatter" in block(four)
    assert verdict(job(TYPED), "MESH-013") == "pass"
    assert "waves of up to 3 a turn at best" in block(job(TYPED))
    assert ends(four) != pytest.approx(ends(ROTATOR))


# -- against the plan ----------------------------------------------------------------------------------------------------


def test_a_mean_off_its_plan_warns_in_numbers_of_the_axes() -> None:
    loose, tight = job(wave(115.0, 4.0)), job(wave(22.0, 4.0))
    assert [verdict(one, "MESH-014") for one in (loose, tight, job(TYPED))] == ["warn", "warn", "pass"]
    for text, way in ((loose, "too far apart"), (tight, "too close together")):
        off = um(text, "read.miss")
        said = remedy(text, "MESH-014")
        assert way in said and f"as if the axes stood {off / SLOPE:.0f} um" in said
    assert um(job(TYPED), "read.allowed") == pytest.approx(35.8 + 2.0, abs=0.1)


def test_a_swing_beyond_the_plan_names_the_move_and_the_gap_across() -> None:
    text = job(wave(60.0, 25.0, loose=10))
    assert verdict(text, "MESH-015") == "warn"
    e = 25.0 / SLOPE
    said = remedy(text, "MESH-015")
    assert f"The ring of teeth is {e:.1f} um off its axis towards gap 46." in said
    assert "by that much towards gap 10" in said and "opposite that of the shaft" in said
    assert remedy(text, "STACK-001", "require[6]") == said
    assert "tightest at gap 46 as read, by the wave near gap 46: there the teeth stand farthest out" in block(text)


def test_the_plan_of_the_swing_is_that_of_its_requirement() -> None:
    text = job(TYPED)
    plan = ends(ROTATOR, "backlash-swing.")[1]
    assert um(text, "read.swing_allowed") == pytest.approx(plan + um(text, "read.swing_uncertainty"), rel=1e-6)
    assert 2.0 * SLOPE * um(text, "read.planned_eccentricity") == pytest.approx(plan, rel=1e-6)


def test_one_reading_off_the_wave_is_named_and_the_range_counts() -> None:
    text = job({**TYPED, 19: 72.0})
    assert verdict(text, "MESH-016") == "warn"
    assert "Gap 19 reads 12.1 um more than the wave" in remedy(text, "MESH-016")
    assert um(text, "read.swing") == pytest.approx(25.0)
    assert "truing alone will not do it" in remedy(text, "STACK-001", "require[6]")
    assert "a burr" in remedy(job({**TYPED, 19: 32.0}), "MESH-016")


def test_no_tight_place_is_named_where_the_readings_do_not_differ() -> None:
    assert "no tight place is proved" in block(job(wave(60.0, 0.3)))
    assert answer(job(wave(60.0, 0.3)), "read.high_spot") is None


def test_a_place_without_play_is_told_and_fails() -> None:
    text = job(wave(8.0, 8.0))
    assert "no play at gap 37: whether it only touches there or binds cannot be read" in block(text)
    assert verdict(text, "MESH-006") == "fail"


# -- what to do ----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("mean", [12.0, 118.0])
def test_axes_moved_by_the_remedy_bring_the_backlash_inside(mean: float) -> None:
    text = job(wave(mean, 4.0))
    said = remedy(text, "STACK-002" if mean < 60.0 else "STACK-001", "require[10]")
    moved = re.match(r"Bring the axes (\d+) um (farther apart|closer together)", said)
    assert moved, said
    sign = 1.0 if moved[2] == "farther apart" else -1.0
    again = job(wave(mean + sign * float(moved[1]) * SLOPE, 4.0))
    assert {f.verdict for f in judged(again).evaluation.findings if f.at == "require[10]"} == {"pass"}


def test_a_swing_that_only_its_uncertainty_puts_outside_is_read_closer() -> None:
    text = job(wave(60.0, 8.5), "uncertainty: 5 um, end_float: taken-out")
    assert "Read it closer or at more places: the swing itself, 17.0 um, is inside." in remedy(text, "STACK-001")


def test_the_eccentric_of_the_housing_still_moves_what_was_read() -> None:
    text = job(
        wave(12.0, 4.0),
        TAKEN,
        ("confidence: 95 %", "confidence: 95 %\ndone: 70"),
        ("housing: grey-iron", "housing: grey-iron, eccentric: 0.5 mm"),
    )
    report = re.sub(r"\s+", " ", as_text(judged(text)))
    assert "backlash at teeth about bearings may fail: the eccentric of the housing, by 0.500 mm" in report


def test_the_figure_keeps_its_slope_so_that_remedies_in_depth_stay_right() -> None:
    (found,) = [r.figure for key, r in judged(job(TYPED)).results.items() if key.startswith("backlash.")]
    assert isinstance(found, OverATurn)
    assert found.factor == pytest.approx(SLOPE)


# -- where it does not rule ----------------------------------------------------------------------------------------------


def test_a_backlash_about_another_axis_keeps_its_plan() -> None:
    other = (ASKED, "  - {what: backlash, about: wheel.hub, between: [5 um, 125 um]}\n")
    assert ends(job(TYPED, TAKEN, other)) == pytest.approx(ends(ROTATOR.replace(*other)))


def test_a_wheel_that_is_hobbed_is_judged_by_what_was_read_though_nothing_plans_it() -> None:
    fly = re.search(r"  fly: \{.*\}\n", ROTATOR)
    assert fly
    hob = (fly[0], "  fly: {kind: hob}\n")
    text = job(TYPED, TAKEN, hob)
    assert ends(text) == pytest.approx(ends(job(TYPED)), abs=0.3)
    assert answer(text, "read.plan") is None
    assert verdict(text, "MESH-014") == ""


def test_readings_of_no_worm_are_told_as_not_looked_at() -> None:
    worm = re.search(r"^worm:\n(?:  .*\n)+", ROTATOR, re.M)
    assert worm
    said = [one.at for one in uncomputed(read_job_text(job(TYPED, TAKEN, (worm[0], "")), "job.yaml"))]
    assert "mesh.backlash_read" in said
    assert "mesh.backlash_read" not in [one.at for one in uncomputed(read_job_text(job(TYPED), "job.yaml"))]


def test_a_job_without_readings_has_none_of_it() -> None:
    assert answer(ROTATOR, "read.as_read") is None
    assert block(ROTATOR) == ""
    assert json.loads(as_json(judged(ROTATOR)))["backlash_read"] is None
    rules = {f.rule for f in judged(ROTATOR).evaluation.findings}
    assert not rules & {"MESH-013", "MESH-014", "MESH-015", "MESH-016", "MEASURE-009"}
