"""Lines on the dial reading to accept: what is planned, what is measured, what no requirement looks at."""

from __future__ import annotations

import json
from dataclasses import replace

import pytest

from setupcheck.quantities.gates import Gate
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.wording import as_stated, on_the_dial
from setupcheck.shipped import shipped
from tests.unit.report.sample import GEAR, PLATE, WHEEL, changed, flat, reviewed

RUN_OUT = "run-out.wheel-teeth.spindle-bearings"
GATE = Gate("40/centre", 40, "centre", "hub", 0.0053, 0.003, RUN_OUT)


def lines(*gates: Gate, text: str = WHEEL) -> str:
    shown = as_text(replace(reviewed(text), gates=gates))
    return flat(shown[shown.index("DIAL READING") :].partition("\n\n")[0]).partition("as planned ")[2]


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
    assert "op 40, run-out on hub: measured 4 um, up to 5.3 um would do, set by run-out" in lines(
        replace(GATE, planned=0.004, measured=True)
    )
    assert "op 50, run-out on hub: measured 4 um, up to 6.2 um would do" in flat(as_text(reviewed(WHEEL)))


def test_a_device_that_serves_two_operations_has_one_line() -> None:
    assert lines(replace(GATE, also=(60,))).startswith("op 40 and 60, run-out on hub: up to 5.3 um")
    assert "op 30 and 40, run-out on bore: up to" in flat(as_text(reviewed(GEAR)))


def test_a_high_spot_that_takes_away_from_another_has_a_least_reading_and_a_place() -> None:
    said = lines(replace(GATE, least=0.00201, high_at="tooth 14", measured=True))
    assert (
        "op 40, run-out on hub: measured 3 um, at least 2.1 um and up to 5.3 um would do, high at tooth 14, set by run-out "
        "at teeth about bearings; this high spot takes away from another" == said
    )


def test_readings_far_from_any_limit_share_one_line_without_numbers() -> None:
    far = replace(GATE, op=20, on="rim", reading=0.031)
    face = replace(far, step="square", on="seat", reading=None)
    assert lines(GATE, far, face).endswith("not critical: op 20, run-out on rim; op 20, face run-out on seat")


def test_ten_times_the_plan_is_still_worth_a_number() -> None:
    assert "op 20, run-out on hub: up to 30 um (3 um planned)" in lines(replace(GATE, op=20, reading=0.030))


CAREFUL = replace(GATE, planned=0.010, reading=0.0401, careful=True)


def test_a_reading_trued_with_care_that_may_be_four_times_its_plan_is_good_enough_already() -> None:
    said = "good enough already, do not indicate finer: op 40, run-out on hub (10 um planned, 40 um would do)"
    assert said == lines(CAREFUL)
    assert lines(replace(CAREFUL, reading=0.0400)).startswith("op 40, run-out on hub: up to 40 um (10 um planned)")
    assert lines(replace(CAREFUL, careful=False)).startswith("op 40, run-out on hub: up to 40 um (10 um planned)")
    assert "(10 um measured, 40 um would do)" in lines(replace(CAREFUL, measured=True))


def test_a_chuck_that_needs_no_truing_is_named_from_its_typical_run_out_on() -> None:
    assert "81 um would do: a three-jaw chuck as it comes)" in lines(replace(CAREFUL, reading=0.081))
    assert "79 um would do)" in lines(replace(CAREFUL, reading=0.079))
    assert "81 um would do)" in lines(replace(CAREFUL, reading=0.081, step="square"))


def test_good_enough_goes_before_not_critical_and_never_takes_away_a_least_reading() -> None:
    assert lines(replace(CAREFUL, reading=0.3)).endswith(
        "(10 um planned, 300 um would do: a three-jaw chuck as it comes)"
    )
    assert lines(replace(CAREFUL, reading=None)) == "not critical: op 40, run-out on hub"
    assert "at least 1.0 um" in lines(replace(CAREFUL, least=0.001))


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


@pytest.mark.parametrize(
    ("division", "shown"), [(0.001, "5 um"), (0.002, "4 um"), (0.0005, "5 um"), (0.00025, "5.25 um")]
)
def test_a_reading_stands_on_a_division_of_its_indicator(division: float, shown: str) -> None:
    assert f"up to {shown} (3 um planned)" in lines(replace(GATE, indicator=division))


def test_an_indicator_named_at_the_entry_rounds_its_own_gate_alone() -> None:
    text = changed(WHEEL, ("rests: pushed, runout: 3 um}", "rests: pushed, runout: {at_most: 3 um, indicator: 2 um}}"))
    told = flat(as_text(reviewed(text)))
    assert "op 40, run-out on hub: up to 4 um (3 um planned)" in told
    assert "op 50, run-out on hub: measured 4 um, up to 6.2 um would do" in told


def test_what_is_no_hold_is_called_what_it_is() -> None:
    told = flat(as_text(reviewed(WHEEL)) + as_text(reviewed(GEAR)))
    assert "spindle.journal, run-out as bought: up to 3.8 um (2 um planned)" in told
    assert "lathe-A, run-out of its axis: up to 4.2 um (2 um planned)" in told
    assert "op 40, run-out of centres under bore: up to 8.0 um (3 um planned)" in told
    fitted = shipped("jobs/coupling-hub.yaml").read_text(encoding="utf-8")
    assert "op 50, run-out of bore on its seat: up to 5.1 um (4 um planned)" in flat(as_text(reviewed(fitted)))


def lengths(text: str, *, everything: bool = False) -> str:
    told = as_text(reviewed(text), everything=everything)
    return flat(told[told.index("LENGTH TO ACCEPT") :].partition("\n\n")[0])


def test_a_length_has_two_ends_rounded_inwards_and_its_plan() -> None:
    told = lengths(WHEEL)
    assert (
        "op 40, stop on seat: -20 um to +16 um (\u00b110 um planned), set by mid-plane at teeth about bearings" in told
    )
    assert "op 70, shim: 1.487 mm to 1.509 mm (1.5 mm planned), set by mid-plane" in told
    assert "op 40, depth of teeth: -11 um to +16 um (\u00b15 um planned), set by backlash" in told


def test_a_measured_length_says_so_and_keeps_its_sign() -> None:
    text = changed(
        WHEEL, ("stop:   {on: seat, error: 5 um}", "stop: {on: seat, error: {at_most: 5 um, measured: -3 um}}")
    )
    assert "op 50, stop on seat: measured -3 um, -11 um to +15 um would do" in lengths(text)


def test_lengths_in_an_inch_file_are_in_thou_and_a_division_rounds_them() -> None:
    assert (
        "op 40, clocking on holes: -0.8 thou to +0.8 thou (\u00b10.3 thou planned), set by slot to the holes"
        in lengths(PLATE)
    )
    text = changed(
        WHEEL, ("stop:   {on: seat, error: 5 um}", "stop: {on: seat, error: {at_most: 5 um, indicator: 2 um}}")
    )
    assert "op 50, stop on seat: -10 um to +14 um (\u00b15 um planned)" in lengths(text)


def test_lengths_far_from_any_limit_share_one_line_and_lost_ones_another() -> None:
    far = changed(WHEEL, ("what: mid-plane, at_most: 80 um", "what: mid-plane, at_most: 8 mm"))
    assert "not critical: op 40, stop on seat; op 40, mid-plane found" in lengths(far)
    lost = changed(WHEEL, ("what: mid-plane, at_most: 80 um", "what: mid-plane, at_most: 8 um"))
    assert "no length alone brings mid-plane at teeth about bearings inside: op 40, stop on seat" in lengths(lost)


def test_all_tells_which_requirements_come_next() -> None:
    told = flat(as_text(reviewed(WHEEL), everything=True))
    assert (
        "up to 5.2 um (3 um planned), set by backlash-swing at teeth about bearings; next index-within at teeth" in told
    )


def test_json_has_the_key_the_step_and_each_requirement_of_a_gate_and_the_ends_of_a_length() -> None:
    data = json.loads(as_json(reviewed(WHEEL)))
    gate = next(g for g in data["gates"] if g["at"] == "50/centre")
    assert ("setups.50.hold.centre.runout.measured", 0.1, [], True) == (
        gate["key"],
        gate["step"],
        gate["band"],
        gate["measured"],
    )
    swing, index = (
        next(v for k, v in gate["requirements"].items() if k.startswith(w)) for w in ("backlash-sw", "index-w")
    )
    assert gate["reading"] == swing < index
    shim = next(g for g in data["lengths"] if "spacers" in g["key"])
    assert ("setups.70.join.stop.spacers[1].length.measured", "mm", 1.5, None) == (
        shim["key"],
        shim["unit"],
        shim["planned"],
        shim["measured"],
    )
    assert 1.48 < shim["low"] < 1.5 < shim["high"] < 1.52
