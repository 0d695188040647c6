"""`working`: every name a planner has for a requirement, the formulas of the trade, causes with what is stated of them."""

from __future__ import annotations

from typing import get_args

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.flow import prepare
from setupcheck.jobfile.asked import What
from setupcheck.report.formulas import FORMULAS
from setupcheck.report.working import as_working
from tests.unit.report.sample import GEAR, PLATE, WHEEL, changed, flat, line_of, loaded

MID_PLANE = "stack.worst@mid-plane.wheel-teeth.spindle-bearings = "


def working(asked: str, text: str = WHEEL) -> str:
    job = loaded(text)
    return flat(as_working(job, prepare(job)[1], asked))


def refused(asked: str, text: str = WHEEL) -> str:
    with pytest.raises(SetupcheckError) as wrong:
        working(asked, text)
    return str(wrong.value)


@pytest.mark.parametrize(
    "name",
    [
        "require[7]",
        "mid-plane",
        "mid-plane.wheel-teeth.spindle-bearings",
        "mid-plane at teeth about bearings",
        "stack.worst@require[7]",
        "stack.worst@mid-plane",
    ],
)
def test_a_requirement_has_many_names_and_each_means_its_worst_case(name: str) -> None:
    assert working(name).startswith(MID_PLANE)


def test_the_operation_in_the_name_of_a_requirement_is_no_instance() -> None:
    assert working("allowance.wheel-bore@50.spindle-bearings").startswith("stack.lowest@allowance.wheel-bore@50")


def test_a_requirement_with_a_name_of_its_own_is_found_by_it() -> None:
    assert working("slot to the holes", PLATE).startswith("stack.worst@slot to the holes = ")


def test_a_figure_that_is_required_more_than_once_shows_all() -> None:
    assert 3 == working("run-out", GEAR).count("stack.worst@run-out.")


def test_a_lower_limit_shows_the_lower_end_and_two_limits_show_both() -> None:
    assert working("require[9]").startswith("stack.lowest@allowance")
    both = working("pitch-circle", PLATE)
    assert "stack.worst@pitch-circle.plate-holes = 0.80 thou" in both
    assert "stack.lowest@pitch-circle.plate-holes = -0.80 thou" in both
    assert 1 == both.count("causes, biggest first:")


def test_a_number_the_job_does_not_have_says_how_many_there_are() -> None:
    assert "there is no require[99]. The job has require[1] to require[12]" == refused("require[99]")
    assert "there is no require[0]. The job has require[1] to require[12]" == refused("require[0]")


def test_a_figure_the_job_does_not_require_says_what_it_requires() -> None:
    said = refused("chord")
    assert said.startswith("there is no quantity or requirement 'chord'. The job does not require it. It requires: ")
    assert "mid-plane" in said


@pytest.mark.parametrize(
    ("asked", "near"),
    [
        ("mid-plain", "mid-plane"),
        ("run-out.wheel-teeth.spindle-bearing", "run-out.wheel-teeth.spindle-bearings"),
        ("divide.cirkles", "divide.circles"),
        ("stack.worst@mid-plain.wheel-teeth.spindle-bearings", "stack.worst@mid-plane.wheel-teeth.spindle-bearings"),
    ],
)
def test_an_unknown_name_offers_the_nearest(asked: str, near: str) -> None:
    assert refused(asked).endswith(f"Did you mean {near}?")


def test_every_figure_has_a_formula_in_words_and_a_source_unless_it_is_not_computed() -> None:
    assert set(get_args(What)) == set(FORMULAS)
    for what, (formula, source) in FORMULAS.items():
        assert source, what
        assert not [sign for sign in ("|", "account", "Re(", "conj", "[mm]") if sign in formula], what


def test_a_stack_shows_the_formula_of_the_trade_and_its_source() -> None:
    found = working("run-out")
    assert "FIM = 2 x distance of the axes at the worse end of the surface" in found
    assert "Source: geometry of the dial indicator, derived here." in found
    assert "account" not in found
    assert "F_p = 2 e / cos(pressure angle) + what dividing adds over the turn" in working("cumulative-pitch")


def test_a_cause_shows_what_is_stated_of_it_with_its_unit_and_line() -> None:
    spigot, house = line_of(WHEEL, "by: spigot"), line_of(WHEEL, "worm_axis:")
    told = working("run-out").partition("op 40, clearance of hub in spigot: ")[2]
    assert told.startswith(
        f"gives 8.0 um, 32 % of all; against the wall of the play, planned; 2 um, 8 um (line {spigot})"
    )
    told = working("mid-plane").partition("housing, distance of the worm axis: ")[2]
    assert told.startswith(f"gives 20.0 um, 27 % of all; anywhere within ±, planned; 13.500 ±0.020 mm (line {house})")


def test_the_stock_of_a_cut_lists_its_causes_too() -> None:
    found = working("allow.least_stock@50/bore")
    assert found.startswith("allow.least_stock@50/bore = 0.274 mm")
    rim = line_of(WHEEL, "{on: rim, by: soft-jaws, at: 12")
    assert (
        f"op 20, run-out of rim in soft jaws: gives 10.0 um, 38 % of all; anywhere within its bound, planned; 20 um (line {rim})"
        in found
    )
    assert "known part without any error: 300.0 um" in found


def test_the_causes_of_the_stock_add_up_to_what_is_taken_from_the_known_part() -> None:
    import re

    found = working("allow.least_stock@50/bore")
    given = sum(float(um) for um in re.findall(r"gives ([0-9.]+) um", found))
    known = float(re.findall(r"known part without any error: ([0-9.]+) um", found)[0])
    least = float(re.findall(r"= ([0-9.]+) mm", found)[0]) * 1000.0
    assert least == pytest.approx(known - given, abs=0.6)  # each of nine causes is shown to 0.1 um, the stock to 1 um


def test_a_number_without_a_unit_says_what_it_counts() -> None:
    found = working("divide.left_over@40")
    assert found.startswith("divide.left_over@40 = 0.000 of a hole")
    assert "worm_ratio: divide.worm_ratio = 40 crank turns for one of the spindle" in found
    assert "count: divide.count = 72 places" in found
    assert "circle: divide.circle = 18 holes" in found


def test_surfaces_that_share_all_errors_say_so() -> None:
    assert "no cause reaches it: both surfaces share all their errors" in working("require[6]", GEAR)


def test_what_is_missing_is_named_by_its_key() -> None:
    job = changed(WHEEL, ("rests: pushed, runout: 3 um}", "rests: pushed}"))
    assert "cannot tell: fill setups.40.hold.centre.runout" in working("run-out", job)


def test_a_reading_with_its_high_spot_is_shown_whole() -> None:
    reading = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um"
    found = working("run-out", changed(WHEEL, (reading, f"{reading}, high_at: tooth 14")))
    assert "direction known, measured; at most 6 um, measured 4 um, uncertainty 1 um, high at tooth 14 (line" in found


def test_a_group_shows_its_numbers_and_an_unknown_word_the_groups() -> None:
    for asked in ("divide", "divide."):
        assert "Of divide there are divide.advice, divide.circle, " in refused(asked)
        assert "tilt." not in refused(asked)
    said = refused("zzz")
    assert "Known are require[1] to require[12], and numbers of allow, clamp, " in said
    assert "divide.circle" not in said


def test_a_number_that_may_be_missing_is_told_without_the_language_it_is_written_in() -> None:
    assert "no answer where" in working("divide.step")
    assert "None" not in working("divide.step")
