"""Facts of the trade, common practice: what every dividing-head table and every gauge room knows. Worked out here.

A wheel of 40 teeth steps 10 gon (a full circle is 400 gon). One turn of the crank of a 40 : 1 head is 9 degrees.
60 teeth on 40 : 1 take 2/3 of a turn: 12 holes on the circle of 18. 1.5 minutes of arc are under 30 um on a workpiece of
130 mm (28.4 um at its rim). 1" at a radius of 100 mm is 0.485 um.
"""

from __future__ import annotations

import math
from fractions import Fraction

import pytest

from setupcheck.division.methods import circles_that_fit, holes_left_over, turns_per_place
from setupcheck.notation import angle
from setupcheck.quantities.book import Known

from .bench import ARCSEC, UM, findings, reviewed, stack
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
