"""What the planner takes to the machine stands in the report in words, in text and in JSON, and never half known."""

from __future__ import annotations

import json
import re

from setupcheck.report.heating_plan import heating_plans
from setupcheck.report.joint import joints
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.worked_out import worked_out
from tests.unit.report.sample import GEAR, PLATE, WHEEL, changed, flat, reviewed


def lines(text: str) -> str:
    return "\n".join(worked_out(reviewed(text)))


def joint(text: str) -> str:
    """Joint and heating plan as the report prints them, on one line."""
    found = reviewed(text)
    return flat("\n".join((*joints(found), *heating_plans(found))))


def test_the_wheel_says_angle_side_cutter_insert_fit_and_heat() -> None:
    said = lines(WHEEL)
    assert "op 40, head: lead angle 3deg 34' 35\" (3.5763 deg, 3.9737 gon)" in said  # atan(1.5/24)
    assert "so lean it nose-down" in said
    assert "op 40, cutter: tip radius 20.00 mm, the worm needs more than" in said
    assert "interference 16.0 um to 33.0 um at 20 degC" in joint(WHEEL)  # 32.030 ±0.003 less 32 H5 (0 to 11 um)
    assert "1 The tightest pair needs 139 degC as it goes over the shaft." in joint(WHEEL)


def test_jobs_with_nothing_to_work_out_have_no_such_part() -> None:
    for text in (GEAR, PLATE):
        undivided = re.sub(r"\n +divide: .*", "", text)
        assert [] == worked_out(reviewed(undivided))
        assert "WORKED OUT" not in as_text(reviewed(undivided))


def test_a_setup_that_divides_says_its_step_and_where_the_table_is() -> None:
    step = "1 turn, back into the same hole"
    assert [f"op 40, index: {step}; index table: setupcheck index JOB"] == worked_out(reviewed(GEAR))
    step = "24 places, 15.0000 deg from one to the next"
    assert [f"op 30, index: {step}; index table: setupcheck index JOB"] == worked_out(reviewed(PLATE))


def test_a_line_with_a_number_missing_is_left_out_whole() -> None:
    said = joint(changed(WHEEL, (", carry: 12 s", "")))
    assert "the hub still has" not in said
    assert "until it may bite" not in said
    assert "interference 16.0 um to 33.0 um" in said


def test_a_gap_at_the_shoulder_is_said_only_where_one_may_open() -> None:
    assert "at the shoulder" not in joint(WHEEL)
    anywhere = changed(WHEEL, ("grips_first: shoulder-end", "grips_first: anywhere"))
    assert "A gap of up to 25.3 um may open at the shoulder" in joint(anywhere)  # 33 um x 24.5 mm / 32 mm


def test_blocks_and_shifts_are_said_where_a_bar_or_a_pivot_is_used() -> None:
    said = lines(changed(WHEEL, ("uncertainty: 2', leans", "uncertainty: 2', by: sine-bar, sine_bar: 100, leans")))
    assert "gauge blocks 6.2379 mm" in said  # 100 mm x sin 3deg 34' 35"
    pivoted = changed(
        WHEEL, ("{found: after-tilt, error: 15 um}", "{found: before-tilt, pivot: 120 ±0.2, error: 15 um}")
    )
    assert "tilting carries the wheel's middle 7.486 mm up or down and 0.234 mm back" in lines(pivoted)


def test_the_shim_is_said_where_the_drawn_sizes_miss() -> None:
    assert "place:" not in lines(WHEEL)
    thin = lines(changed(WHEEL, ("length: 1.500 ±0.003", "length: 1.350 ±0.003")))
    assert "1.5000 mm instead of 1.3500 mm, 0.1500 mm thicker (setups.70.join.stop)" in thin


def test_text_and_json_say_the_same() -> None:
    found = reviewed(WHEEL)
    text, data = flat(as_text(found)), json.loads(as_json(found))
    assert worked_out(found) == data["worked_out"]
    assert all(" ".join(line.split()) in text for line in data["worked_out"])
    assert all(name in data["quantities"] for name in ("fit.holds_to@70", "fit.warm_torque@70", "fit.cold_hoop@70"))
    (shrunk,), (plan,) = data["joints"], data["heating_plans"]
    assert 70 == shrunk["op"] == plan["op"]
    assert all(" ".join(line.split()) in text for line in (*shrunk["says"], *plan["steps"]))


def test_a_fit_that_is_none_is_said_as_the_play_it_is() -> None:
    play = joint(changed(WHEEL, ("diameter: 32.030 ±0.003", "diameter: 31.990 ±0.003")))
    assert "play 7.0 um to 24.0 um at 20 degC" in play  # 32 H5 less 31.987 to 31.993
    both = joint(changed(WHEEL, ("diameter: 32.030 ±0.003", "diameter: 32.005 ±0.003")))
    assert "from 9.0 um of play to 8.0 um of interference at 20 degC" in both
