"""Backlash read on the finished wheel: what then rules, what stays, what it is held against, what leaves it open."""

from __future__ import annotations

import json
import math
import re
from functools import cache

import numpy as np
import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import changed, read_change
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.combine import Combined
from setupcheck.ledger.figures import OverATurn
from setupcheck.quantities.backlash_read import AsRead
from setupcheck.quantities.book import Known, Open
from setupcheck.report.json import as_json
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import uncomputed
from setupcheck.report.working import as_working
from setupcheck.shipped import shipped
from tests.jobs.worm_jobs import worm_job

ROTATOR = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
MESH = "mesh: {wheel: wheel.teeth,"
GAPS = (1, 10, 19, 28, 37, 46, 55, 64)
TYPED = dict(zip(GAPS, (62.0, 58.0, 52.0, 48.0, 47.0, 50.0, 56.0, 61.0), strict=True))  # um
TAKEN = "uncertainty: 2 um, end_float: taken-out"
SLOPE = 2.0 * math.tan(math.radians(20.0))  # of the backlash over the distance of the axes
ASKED = "  - {what: backlash, between: [5 um, 125 um]}\n"


def job(read: dict[int, float], more: str = TAKEN, *changes: tuple[str, str]) -> str:
    """The rotator's wheel with backlash read [um]."""
    said = ", ".join(f"gap {gap}: {value!r} um" for gap, value in read.items())
    text = ROTATOR.replace(MESH, f"{MESH} backlash_read: {{readings: {{{said}}}{', ' if more else ''}{more}}},")
    for old, new in changes:
        assert old in text
        text = text.replace(old, new)
    return text


def wave(mean: float, amplitude: float, loose: int = 1, gaps: tuple[int, ...] = GAPS) -> dict[int, float]:
    return {gap: mean + amplitude * math.cos(math.tau * (gap - loose) / 72.0) for gap in gaps}


@cache
def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def answer(text: str, name: str) -> object:
    book = judged(text).book
    found = book.get(name, book.instances("mesh")[0])
    return found.value if isinstance(found, Known) else found


def um(text: str, name: str) -> float:
    return 1e3 * float(str(answer(text, name)))


def combined(text: str, what: str = "backlash.") -> Combined:
    (found,) = [result for key, result in judged(text).results.items() if key.startswith(what)]
    return found.combined


def ends(text: str, what: str = "backlash.") -> tuple[float, float]:
    worst = combined(text, what).worst
    return 1e3 * worst.low, 1e3 * worst.high


def verdict(text: str, rule: str) -> str:
    found = [f.verdict for f in judged(text).evaluation.findings if f.rule == rule]
    return ", ".join(sorted(set(found)))


def remedy(text: str, rule: str, at: str = "") -> str:
    (found,) = [f for f in judged(text).evaluation.findings if f.rule == rule and f.verdict != "pass" and at in f.at]
    return remedy_in_words(judged(text), found)


def block(text: str) -> str:
    report = as_text(judged(text))
    assert max(map(len, report.splitlines())) <= 80
    found = re.search(r"^BACKLASH AS READ.*?(?=\n\n)", report, re.S | re.M)
    return re.sub(r"\s+", " ", found[0]) if found else ""


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


# -- typed, printed ------------------------------------------------------------------------------------------------------


def test_eight_places_are_typed_back_one_by_one_into_a_job_that_says_nothing_of_them() -> None:
    keys = [f"mesh.backlash_read.readings.gap {gap}={value:g} um" for gap, value in TYPED.items()]
    keys += ["mesh.backlash_read.uncertainty=2 um", "mesh.backlash_read.end_float=taken-out"]
    loaded = changed(read_job_text(ROTATOR, "job.yaml"), [read_change(key) for key in keys])
    assert review(loaded).results["backlash.wheel-teeth.spindle-bearings"].combined == combined(job(TYPED))


def test_a_typo_on_the_way_is_still_refused() -> None:
    with pytest.raises(JobError, match="backlash_reed"):
        changed(read_job_text(ROTATOR, "job.yaml"), [read_change("mesh.backlash_reed.readings.gap 1=62 um")])


def test_json_has_places_wave_and_high_spot() -> None:
    told = json.loads(as_json(judged(job(TYPED))))["backlash_read"]
    assert [one["gap"] for one in told["places"]] == list(GAPS)
    assert (told["tightest_gap"], told["high_spot_gap"], told["unit"]) == (37, 34, "um")
    assert sum(one["off_wave"] for one in told["places"]) == pytest.approx(0.0, abs=1e-9)


def test_an_inch_file_prints_thou_and_reads_bare_radii_in_inches() -> None:
    """The pair of another test in inches, with readings in thou at twice the reference circle."""
    inch = worm_job(starts=1, hand="right", module=0.06, worm=0.88, teeth=90, face=0.44, radius=0.6, budget="0.2 thou")
    for old, new in (
        ("units: mm", "units: in"),
        (" mm, uncertainty: 1 um", " in, uncertainty: 0.04 thou"),
        (" ±0.010}", " ±0.0004}"),
        (" ±0.01,", " ±0.0004,"),
        ("from: -40,", "from: -1.6,"),
        ("at: -35", "at: -1.4"),
        ("at: -5,", "at: -0.2,"),
        ("to: 20.44", "to: 1.24"),
        ("to: 22.44", "to: 1.3"),
        (" contact: exact,", ""),
    ):
        inch = inch.replace(old, new)
    said = ", ".join(f"gap {gap}: {4.0 + 0.4 * math.cos(math.tau * (gap - 1) / 90)!r} thou" for gap in range(1, 91, 10))
    more = "along: at 5.4, uncertainty: 0.2 thou, end_float: taken-out"
    told = block(inch.replace(MESH, f"{MESH} backlash_read: {{readings: {{{said}}}, {more}}},"))
    assert "gap 1 2.20 thou" in told and "mean 2.00 thou" in told and "± 0.10 thou" in told
    assert "read with a dial at 5.4, and brought to the reference circle" in told


def test_the_working_names_the_readings_and_how_the_swing_came_about() -> None:
    found = judged(job(TYPED))
    assert isinstance(answer(job(TYPED), "read.as_read"), AsRead)
    told = re.sub(r"\s+", " ", as_working(found.loaded, found.book, "require[10]"))
    assert "wheel, its backlash as read, over the turn: gives 7.7 um" in told and "gap 10 58.0 um" in told
    assert "twice the amplitude" in as_working(found.loaded, found.book, "read.swing").replace("\n", " ")
    assert "read square to the flank" in block(job(TYPED, f"along: normal, {TAKEN}"))
    assert "brought to" not in block(job(TYPED))


@pytest.mark.parametrize(
    ("said", "problem"),
    [
        ("readings: {gap 73: 5 um}", "teeth has 72 gaps, and none is number 73"),
        ("readings: {gap 1: 5 um, gap  1: 6 um}", "gap 1 is read twice"),
        ("readings: {tooth 1: 5 um}", "'tooth 1' names no gap"),
        ("readings: {gap 1: 20 arcsec}", "'20 arcsec' is an angle, and backlash is read as a length"),
        ("readings: {gap 1: 2'}", "is an angle, and backlash is read as a length"),
        ("readings: {gap 1: -5 um}", "'-5 um' is below zero, and a dial travels one way"),
        ("readings: {gap 1: 5}", "5 has no unit, so it is not a length"),
        ("readings: {gap 1: 5 mm}", "backlash of 5 mm is more than the pitch of the teeth, 4.71 mm"),
        ("readings: {gap 1: [5 um]}", "one value belongs here, not a list"),
        ("readings: {gap 1: 5 um}, end_float: 10 um", "'10 um' is not known here"),
        ("readings: {gap 1: 5 um}, uncertainty: 2", "2 has no unit, so it is not a length"),
        ("reading: {gap 1: 5 um}", "Did you mean readings?"),
    ],
)
def test_readings_that_cannot_be_are_refused_at_their_place(said: str, problem: str) -> None:
    with pytest.raises(JobError) as refused:
        read_job_text(ROTATOR.replace(MESH, f"{MESH} backlash_read: {{{said}}},"), "job.yaml")
    assert problem in " ".join(f"{p.problem}. {p.hint}" for p in refused.value.problems)
    assert all(p.path.startswith("mesh.backlash_read") for p in refused.value.problems)


@pytest.mark.parametrize("given", ["62 um", "[62 um, 58 um]", "true"])
def test_one_value_for_all_places_is_refused_with_how_to_write_it(given: str) -> None:
    with pytest.raises(JobError, match="backlash_read"):
        read_job_text(ROTATOR.replace(MESH, f"{MESH} backlash_read: {given},"), "job.yaml")


def test_a_way_of_stating_it_that_is_none_is_refused() -> None:
    with pytest.raises(JobError, match="Write circular, normal, or at and a radius"):
        judged(job(TYPED, f"along: sideways, {TAKEN}"))
