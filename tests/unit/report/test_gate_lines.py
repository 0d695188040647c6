"""Lines on the dial reading to accept: what is planned, what is measured, what no requirement looks at."""

from __future__ import annotations

import json
from dataclasses import replace

import pytest

from setupcheck.quantities.gates import Gate
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.wording import as_stated, on_the_dial
from tests.unit.report.sample import GEAR, PLATE, WHEEL, flat, reviewed

RUN_OUT = "run-out.wheel-teeth.spindle-bearings"
GATE = Gate("40/centre", 40, "centre", "hub", 0.0053, 0.003, RUN_OUT)


def lines(*gates: Gate, text: str = WHEEL) -> str:
    shown = as_text(replace(reviewed(text), gates=gates))
    return flat(shown[shown.index("DIAL READING") : shown.index("\n\nCAUTIONS")]).partition("as planned ")[2]


def test_a_small_reading_is_shown_to_a_tenth_of_a_micrometre_and_its_requirement_in_words() -> None:
    assert "op 40, run-out on hub: up to 5.3 um (3 um planned), set by run-out at teeth about bearings" == lines(GATE)


def test_a_reading_is_never_rounded_up() -> None:
    assert ("9.9 um", "10 um", "12 um") == tuple(on_the_dial(v, inches=False) for v in (0.00999, 0.0100, 0.01299))
    assert ("0.39 thou", "0.9 thou") == (on_the_dial(0.00999, inches=True), on_the_dial(0.0250, inches=True))


def test_the_least_reading_is_never_rounded_down() -> None:
    assert "4.1 um" == on_the_dial(0.00401, inches=False, up=True)
    assert "13 um" == on_the_dial(0.01201, inches=False, up=True)


def test_a_sum_that_misses_a_step_by_its_last_bit_stands_on_it() -> None:
    assert "5.3 um" == on_the_dial(0.0053 - 1e-15, inches=False)


def test_a_planned_reading_has_no_more_decimals_than_it_needs() -> None:
    assert ("3 um", "12.5 um") == (as_stated(0.003, inches=False), as_stated(0.0125, inches=False))
    assert "0.25 thou" == as_stated(0.25 * 0.0254, inches=True)


def test_a_measured_reading_is_called_measured() -> None:
    assert "up to 5.3 um (4 um measured)" in lines(replace(GATE, planned=0.004, measured=True))
    wheel = flat(as_text(reviewed(WHEEL)))
    assert "op 50, run-out on hub: up to" in wheel
    assert "(4 um measured)" in wheel


def test_a_device_that_serves_two_operations_has_one_line() -> None:
    assert lines(replace(GATE, also=(60,))).startswith("op 40 and 60, run-out on hub: up to 5.3 um")
    assert "op 30 and 40, run-out on bore: up to" in flat(as_text(reviewed(GEAR)))


def test_a_high_spot_that_takes_away_from_another_has_a_least_reading_and_a_place() -> None:
    said = lines(replace(GATE, least=0.00201, high_at="tooth 14", measured=True))
    assert (
        "op 40, run-out on hub: at least 2.1 um and up to 5.3 um, high at tooth 14 (3 um measured), set by run-out at teeth "
        "about bearings; this high spot takes away from another" == said
    )


def test_readings_far_from_any_limit_share_one_line_without_numbers() -> None:
    far = replace(GATE, op=20, on="rim", reading=0.031)
    face = replace(far, step="square", on="seat", reading=None)
    assert lines(GATE, far, face).endswith("not critical: op 20, run-out on rim; op 20, face run-out on seat")


def test_ten_times_the_plan_is_still_worth_a_number() -> None:
    assert "op 20, run-out on hub: up to 30 um (3 um planned)" in lines(replace(GATE, op=20, reading=0.030))


def test_a_far_reading_with_a_least_one_keeps_its_line() -> None:
    assert "op 40, run-out on hub: at least 2.0 um, high at mark" in lines(
        replace(GATE, reading=None, least=0.002, high_at="mark")
    )


def test_where_no_reading_will_do_one_line_a_requirement_says_so() -> None:
    lost = replace(GATE, step="and_centre", reading=0.0)
    assert (
        "no reading alone brings run-out at teeth about bearings inside: op 40, run-out in the second plane on hub; op 50, "
        "run-out on rim" == lines(lost, replace(GATE, op=50, on="rim", reading=0.0))
    )


def test_an_inch_file_reads_its_dial_in_thou() -> None:
    position = "position.plate-holes.plate-bore"
    assert "up to 0.20 thou (0.15 thou planned), set by position at holes about bore" in lines(
        replace(GATE, reading=0.2 * 0.0254, planned=0.15 * 0.0254, by=position), text=PLATE
    )


@pytest.mark.parametrize(("least", "shown"), [(0.0, None), (0.002, 2.0)])
def test_json_has_all_of_a_gate(least: float, shown: float | None) -> None:
    gate = replace(GATE, least=least, high_at="tooth 14", also=(60,), measured=True)
    (found,) = json.loads(as_json(replace(reviewed(WHEEL), gates=(gate,))))["gates"]
    assert (True, [60], shown, "tooth 14") == (found["measured"], found["also"], found["least"], found["high_at"])
