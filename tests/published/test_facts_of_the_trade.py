"""Facts of the trade, common practice: what every dividing-head table and every gauge room knows. Worked out here.

A wheel of 40 teeth steps 10 gon (a full circle is 400 gon). One turn of the crank of a 40 : 1 head is 9 degrees.
60 teeth on 40 : 1 take 2/3 of a turn: 12 holes on the circle of 18. 1.5 minutes of arc are under 30 um on a workpiece of
130 mm (28.4 um at its rim). 1" at a radius of 100 mm is 0.485 um. A small bronze wheel goes on its spindle with some 15 um,
hot; warmth loosens bronze on steel; teeth cut before fitting grow with the hub and eat backlash. Soft shims nobody measured
cost some 100 um of run-out; what a scroll chuck shows holds for the diameter it was read on.
"""

from __future__ import annotations

import math
from dataclasses import replace
from fractions import Fraction

import pytest

from setupcheck.division.methods import circles_that_fit, holes_left_over, turns_per_place
from setupcheck.notation import angle
from setupcheck.quantities.book import Known
from setupcheck.quantities.typical import typical
from setupcheck.shipped import shipped

from .bench import ARCSEC, UM, findings, reviewed, stack
from .joint_jobs import FitJob, Metal
from .test_folded_harmonics import indexed

COMMON_PLATES = (15, 16, 17, 18, 19, 20, 21, 23, 27, 29, 31, 33, 37, 39, 41, 43, 47, 49)
"""Hole circles of the usual set of three plates. Source: common practice."""


def test_a_wheel_of_40_teeth_steps_10_gon() -> None:
    pattern = stack(indexed(40, 40)).figure.pattern
    assert angle("10 gon") == pytest.approx(pattern.angle(2) - pattern.angle(1))
    assert angle("400 gon") == pytest.approx(pattern.angle(41) - pattern.angle(1))
    assert angle("10 gon") == pytest.approx(float(turns_per_place(40, 40)) * angle("9 deg"))


def test_one_crank_turn_of_a_40_to_1_head_is_9_degrees() -> None:
    assert Fraction(1) == turns_per_place(40, 40)
    pattern = stack(indexed(40, 72)).figure.pattern
    step = pattern.angle(2) - pattern.angle(1)
    assert angle("9 deg") == pytest.approx(step / float(turns_per_place(40, 72)))
    assert angle("360 deg") == pytest.approx(40 * angle("9 deg"))


def test_60_teeth_take_two_thirds_of_a_turn_12_holes_of_18() -> None:
    assert Fraction(2, 3) == turns_per_place(40, 60)
    assert 12 == turns_per_place(40, 60) * 18
    assert (15, 18, 21, 27, 33, 39) == circles_that_fit(40, 60, COMMON_PLATES)
    assert 0.0 == holes_left_over(40, 60, 18)


@pytest.mark.parametrize(("circle", "left", "verdict"), [(18, 0.0, "pass"), (39, 0.0, "pass"), (20, 1 / 3, "fail")])
def test_a_job_that_divides_60_is_held_to_a_circle_that_closes(circle: int, left: float, verdict: str) -> None:
    # 2/3 of 18 holes is 12, of 39 is 26, of 20 is 13 1/3
    job = indexed(40, 60, circle=circle)
    found = reviewed(job)
    answer = found.book.get("divide.left_over", found.book.instances("setup")[0])
    assert isinstance(answer, Known)
    assert left == pytest.approx(answer.value)
    assert [verdict] == [f.verdict for f in findings(job, "DIVIDE-001")]


@pytest.mark.parametrize(
    ("teeth", "turns", "circle"),
    [(72, Fraction(5, 9), 18), (36, Fraction(10, 9), 27), (65, Fraction(8, 13), 39), (7, Fraction(40, 7), 49)],
)
def test_rows_of_the_index_table_of_a_40_to_1_head(teeth: int, turns: Fraction, circle: int) -> None:
    # common practice: 72 = 10 holes of 18; 36 = 1 turn and 3 of 27; 65 = 24 of 39; 7 = 5 turns and 35 of 49
    assert turns == turns_per_place(40, teeth)
    assert circle in circles_that_fit(40, teeth, COMMON_PLATES)


@pytest.mark.parametrize("teeth", [51, 53, 57, 61, 63, 67, 69, 71, 73, 127])
def test_counts_that_need_differential_indexing_fit_no_common_circle(teeth: int) -> None:
    # common practice: these counts cannot be divided plainly with the usual three plates
    assert () == circles_that_fit(40, teeth, COMMON_PLATES)


def test_minutes_and_a_half_of_arc_stay_under_30_um_on_a_workpiece_of_130_mm() -> None:
    # a wheel error of +-45" is a range of 1.5' ; 1.5' x 65 mm = 28.36 um
    job = indexed(40, 80, wheel='45"', crank='0"')
    c = stack(job, 3).combined
    assert angle("1.5 arcmin") * 65.0 == pytest.approx(c.worst.high)
    assert 28.36 == pytest.approx(c.worst.high / UM, abs=0.005)
    assert ["pass"] == [f.verdict for f in findings(job, "STACK-001") if f.at == "require[4]"]
    assert 45.0 == pytest.approx(stack(job, 2).combined.worst.high / ARCSEC)


def test_a_second_of_arc_at_100_mm_is_half_a_micrometre() -> None:
    # 1" x 100 mm = 0.485 um; +-30" at a radius of 90 mm leave 26 um of cumulative pitch
    assert 0.485 == pytest.approx(angle('1"') * 100.0 / UM, abs=0.0005)
    assert 26.2 == pytest.approx(stack(indexed(40, 80, wheel='30"', crank='0"')).combined.worst.high / UM, abs=0.05)


def test_eccentricity_is_half_of_the_run_out() -> None:
    # scale rule of encoder makers: error in seconds (peak to peak) = 412.5 x offset in um / diameter in mm
    assert 412.5 == pytest.approx(2.0 * UM / ARCSEC, abs=0.1)
    assert 206_264.8 == pytest.approx(1.0 / ARCSEC, abs=0.05)
    assert math.tau == pytest.approx(1_296_000 * ARCSEC)


# -- holding ---------------------------------------------------------------------------------------------------------


def rechucked(by: str, runout: str) -> str:
    """A disc bored in a chuck that grips its finished rim (invented part)."""
    return f"""
setupcheck: 1
title: A disc bored again
units: mm
machines: {{lathe-A: {{kind: lathe, axis_runout: 0 um}}}}
parts:
  disc:
    surfaces:
      rim:  {{kind: cylinder, diameter: 100, from: 0, to: 20, made: stock}}
      face: {{kind: face, at: 0, facing: -z, diameter: 100, made: stock}}
      bore: {{kind: bore, diameter: 32, from: 0, to: 20}}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {{on: rim, by: {by}, at: 10, runout: {runout}}}
      square: {{on: face, by: parallels, face_runout: 0 um, across: 90}}
    cut: {{bore: {{}}}}
require:
  - {{what: run-out, of: disc.bore, about: disc.rim, at: 10, at_most: 200 um}}
"""


def offset_over_shims(shims: tuple[float, float, float]) -> float:
    """How far the middle of a disc stands from that of a scroll chuck over three shims: jaws close alike, so each point of
    contact moves by what its shim is over the mean, and the middle by 2/3 of the sum of these, taken as vectors."""
    return (
        2.0
        / 3.0
        * abs(sum(t * complex(math.cos(k * math.tau / 3), math.sin(k * math.tau / 3)) for k, t in enumerate(shims)))
    )


def test_shims_that_nobody_measured_leave_some_100_um_of_run_out() -> None:
    """One shim thicker by t moves the middle by 2t/3, so 75 um of spread, a crease in a strip of 0.1 mm, show 100 um."""
    assert 0.100 == pytest.approx(2.0 * offset_over_shims((0.175, 0.100, 0.100)))
    assert 0.0067 == pytest.approx(2.0 * offset_over_shims((0.105, 0.100, 0.100)), abs=1e-4)  # strips from one can
    assert 0.0 == pytest.approx(offset_over_shims((0.1, 0.1, 0.1)), abs=1e-12)
    job = rechucked("shimmed-jaws", "{device: shimmed-jaws}")
    assert 100.0 == pytest.approx(stack(job).combined.worst.high / UM, abs=0.5)
    (found,) = findings(job, "STACK-001")
    assert ("shimmed-jaws runout",) == found.rests_on
    # measured shims are their own knowledge and rest on nothing typical
    measured = rechucked("shimmed-jaws", "7 um")
    assert 7.0 == pytest.approx(stack(measured).combined.worst.high / UM, abs=0.05)
    assert [()] == [tuple(f.rests_on) for f in findings(measured, "STACK-001")]


def test_the_run_out_of_a_scroll_chuck_is_typical_only_and_of_one_diameter() -> None:
    """One and the same chuck was read 10, 20 and 50 um at 19, 12.7 and 25 mm: no figure of a chuck goes to another size."""
    row = typical("three-jaw", "runout")
    assert row is not None
    assert "one diameter only" in row.note
    assert row.value >= 0.050
    (found,) = findings(rechucked("three-jaw", "{device: three-jaw}"), "STACK-001")
    assert ("three-jaw runout",) == found.rests_on


# -- joining ---------------------------------------------------------------------------------------------------------

HEATED = "joint: degreased, heat: {hub: 140 degC, by: oven, oven_error: 10 degC, carry: 10 s}"


def small_wheel(interference_um: float, *, served: str = "[20 degC, 20 degC]") -> str:
    """The shipped worm wheel of 72 teeth with its joint as measured and nothing else changed."""
    text = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
    for old, new in (
        ("diameter: 32 H5", "diameter: {measured: 32.000, uncertainty: 0 um}"),
        ("diameter: 32.030 ±0.003", f"diameter: {{measured: {32.0 + interference_um / 1000.0!r}, uncertainty: 0 um}}"),
        ("serves_at: [5 degC, 45 degC]", f"serves_at: {served}"),
    ):
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return text


def of_joint(text: str, name: str) -> float:
    book = reviewed(text).book
    found = book.get(name, book.instances("join")[0])
    assert isinstance(found, Known), found
    assert isinstance(found.value, float)
    return found.value


def test_a_small_wheel_goes_on_its_spindle_hot_with_some_15_um() -> None:
    """A bronze wheel on 32 mm: 15 um hold a usual torque cold, the hub goes over at 100 to 130 degC, an oven's work."""
    wheel = small_wheel(15.0)
    assert 100.0 < of_joint(wheel, "heat.needed") < 115.0
    assert of_joint(wheel, "heat.needed") + 15.0 < 130.0  # with the usual reserve
    assert of_joint(wheel, "fit.torque_held") > 40e3  # N mm
    assert of_joint(wheel, "fit.grip_most") < of_joint(wheel, "fit.elastic")
    # twice as much still stays elastic, and asks some 30 K more
    assert 15.0 / (17e-3 * 32.0) == pytest.approx(
        of_joint(small_wheel(30.0), "heat.needed") - of_joint(wheel, "heat.needed")
    )


def test_a_small_wheel_holds_less_warm_and_nothing_at_all_at_some_heat() -> None:
    cold, warm = (small_wheel(15.0, served=f"[20 degC, {t} degC]") for t in (20, 45))
    assert of_joint(warm, "fit.torque_held") < 0.6 * of_joint(cold, "fit.torque_held")
    assert 20.0 < of_joint(cold, "fit.holds_to") < of_joint(cold, "fit.loosens_at") < 80.0


def test_H7_r6_of_bronze_on_steel_can_be_loose_at_33_degC() -> None:
    """100 H7/r6, Rz 6.3 and 4: 16 um less 8.24 are gone 12 K up with the usual expansions, 10 K up with the safe ends."""
    usual = FitJob(
        diameter=100,
        outside=140,
        bore="100 H7",
        journal="100 r6",
        hub=Metal(gpa=103.4, poisson=0.34, expansion=18.4),
        shaft=Metal(gpa=206, poisson=0.29, expansion=12.0),
        by="shrink",
        extra=f"friction: 0.17, {HEATED}",
    ).text()
    assert 32.1 == pytest.approx(of_joint(usual, "fit.loosens_at"), abs=0.1)
    listed = usual
    for metal, name in (("modulus: 103.4 GPa", "CuSn12-C"), ("modulus: 206 GPa", "42CrMo4")):
        line = next(each for each in listed.splitlines() if metal in each)
        listed = listed.replace(line, f"    material: {name}")
    assert 29.0 < of_joint(listed, "fit.loosens_at") < 33.0


@pytest.mark.parametrize(("interference", "growth", "eaten"), [(30, 16, 6), (45, 25, 9), (60, 33, 12)])
def test_teeth_cut_before_pressing_grow_and_eat_backlash(interference: int, growth: int, eaten: int) -> None:
    """Shop figures for a bore of 60, bronze on a solid steel centre. They do not state the ring; the 34 MPa and 55 MPa of
    hoop stress told for 45 um are those of a ring of some 122 mm at the roots, which is assumed here: rough, to 5 %."""
    job = FitJob(
        diameter=60,
        outside=122,
        interference=interference / 1000.0,
        length=24,
        hub=Metal(gpa=103.4, poisson=0.34, expansion=18.0),
        shaft=Metal(gpa=206, poisson=0.29, expansion=12.0),
        toothed=True,
    )
    assert growth == pytest.approx(job.get("fit.growth_most") / UM, rel=0.05)
    assert eaten == pytest.approx(job.get("fit.growth_most") * math.tan(angle("20 deg")) / UM, rel=0.05)
    if interference == 45:
        assert 34 == pytest.approx(job.get("fit.pressure_most"), rel=0.05)
        assert 55 == pytest.approx(job.get("fit.hoop"), rel=0.05)
        # 23 kN at mu = 0.15; 40 K warm it loses 14 um
        hard = replace(job, extra="friction: 0.15, smoothing: 0.0")
        assert 23e3 == pytest.approx(hard.get("fit.press_force"), rel=0.05)
        warm = replace(job, serves_at="[20 degC, 60 degC]")
        assert 14 == pytest.approx((job.get("fit.grip_least") - warm.get("fit.grip_least")) / UM, abs=0.5)


def test_the_backlash_of_the_shipped_wheel_loses_what_its_teeth_grow_times_tan_alpha() -> None:
    less, more = small_wheel(20.0), small_wheel(32.0)
    index = next(i for i, s in enumerate(reviewed(less).book.instances("stack")) if s.key.startswith("backlash."))
    a, b = (stack(each, index).combined.worst for each in (less, more))
    slope = math.tan(angle("20 deg"))
    most, least = (of_joint(more, n) - of_joint(less, n) for n in ("fit.growth_most", "fit.growth_least"))
    assert most > 1.0 * UM
    # some 6 % less than growth times tan(alpha), as the pitch widens with the teeth; flanks of another pitch take their part
    assert most * slope == pytest.approx(a.low - b.low, rel=0.25)
    assert least * slope == pytest.approx(a.high - b.high, rel=0.25)
