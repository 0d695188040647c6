"""What the look-up of a tolerance class refuses, how a play is worded, and which rows of a table are refused."""

from __future__ import annotations

import math

import pytest

from setupcheck.physics import iso_286
from setupcheck.physics.iso_286 import Limits, Play, fit, read_tables
from setupcheck.quantities import fit_tables
from setupcheck.quantities.book import OutOfRange

OURS = fit_tables.tables()
Row = dict[str, object]


def refusal(nominal: float, name: str) -> str:
    with pytest.raises(ValueError) as refused:
        iso_286.limits(OURS, nominal, name)
    return str(refused.value)


@pytest.mark.parametrize("nominal", [0.0, -5.0, 500.001, math.nan, math.inf])
def test_a_size_out_of_the_table_is_refused_and_the_table_named(nominal: float) -> None:
    assert f"{nominal:g} mm is outside the tables of ISO 286 here, over 0 to 500 mm" == refusal(nominal, "H7")


@pytest.mark.parametrize("name", ["c8", "ZC7", "Js6", "jS6", "j6", "x5", "cd8"])
def test_a_letter_that_is_not_ours_is_refused_and_ours_shown(name: str) -> None:
    assert (
        f"the letter {name[:-1]} of {name} is not in our tables, which have shafts d e f g h js k m n p r s t u "
        "and the same in capitals for holes" == refusal(32.0, name)
    )


@pytest.mark.parametrize(("name", "grade"), [("H12", "12"), ("h3", "3"), ("h06", "06"), ("H18", "18"), ("h0", "0")])
def test_a_grade_that_is_not_ours_is_refused_and_ours_shown(name: str, grade: str) -> None:
    assert f"grade {grade} of {name} is not in our tables, which have IT4 to IT11" == refusal(32.0, name)


@pytest.mark.parametrize("name", ["", "7", "H", "H 7", "H7/g6", "H7 ", "H7.5", "H٧", "hhh6"])
def test_what_is_no_class_is_refused(name: str) -> None:
    assert f"'{name}' is no tolerance class; H7 or s6 is one" == refusal(32.0, name)


@pytest.mark.parametrize(
    ("nominal", "name", "text"),
    [
        (24.0, "t6", "t6 is not tabulated at 24 mm, only over 24 mm"),
        (10.0, "T7", "T7 is not tabulated at 10 mm, only over 24 mm"),
        (32.0, "K4", "K4 needs grade 3, which is not in our tables"),
        (32.0, "K9", "ISO 286 does not make K9 at 32 mm"),
        (1.0, "N9", "ISO 286 does not make N9 at 1 mm"),
    ],
)
def test_a_class_that_does_not_exist_at_this_size_is_refused(nominal: float, name: str, text: str) -> None:
    assert text == refusal(nominal, name)


def test_the_shipped_tables_refuse_as_out_of_range() -> None:
    with pytest.raises(OutOfRange, match="520 mm is outside"):
        fit_tables.limits(520.0, "H7")
    with pytest.raises(OutOfRange, match="letter zc"):
        fit_tables.basis(32.0, "zc7")


def test_every_class_and_size_has_its_limits_or_a_reason() -> None:
    sizes = (0.5, 1.0, 3.0, 6.0, 20.0, 24.0, 30.0, 50.0, 120.0, 315.0, 500.0)
    refused = set()
    for letter in iso_286.SHAFTS + iso_286.HOLES:
        for grade in OURS.grades():
            for size in sizes:
                try:
                    found = iso_286.limits(OURS, size, f"{letter}{grade}")
                except ValueError:
                    refused.add(f"{letter}{grade}" if letter not in "tT" else letter)
                else:
                    width = next(c.microns for c in OURS.columns[f"IT{grade}"] if c.over < size <= c.up_to)
                    assert width / 1000 == pytest.approx(found.upper - found.lower, abs=1e-9)
                    assert iso_286.basis(OURS, size, f"{letter}{grade}")
    from_grade_3 = {f"{letter}4" for letter in "KMNPRSU"}
    assert from_grade_3 | {"K9", "K10", "K11", "N9", "N10", "N11", "t", "T"} == refused


def test_the_limits_say_what_they_rest_on() -> None:
    cells = fit_tables.basis(200.0, "r6")
    assert [("IT6", 29, False), ("r", 77, True)] == [(c.column, c.microns, c.doubtful) for c in cells]
    assert "ISO 286-1, from memory" == cells[1].source


@pytest.mark.parametrize(
    ("play", "words"),
    [
        (Play(-0.078, -0.029), "interference 29 to 78 um"),
        (Play(0.007, 0.041), "clearance 7 to 41 um"),
        (Play(-0.015, 0.019), "transition, interference 15 um to clearance 19 um"),
        (Play(0.0, 0.034), "clearance 0 to 34 um"),
        (Play(-0.034, 0.0), "interference 0 to 34 um"),
        (Play(-0.0105, 0.02), "transition, interference 10.5 um to clearance 20 um"),
    ],
)
def test_a_play_is_said_as_a_planner_says_it(play: Play, words: str) -> None:
    assert words == play.words()


def test_just_touching_is_not_made_a_transition_by_binary_fractions() -> None:
    # 0.1 + 0.2 is above 0.3 by 6e-17
    assert "clearance" == fit(Limits(0.3, 0.4), Limits(0.2, 0.1 + 0.2)).kind


def test_limits_upside_down_are_refused() -> None:
    with pytest.raises(ValueError, match=r"lower deviation 0\.02 mm is above the upper one, 0 mm"):
        Limits(0.02, 0.0)


GRADE: Row = {"over": 0, "up_to": 3, "IT6": 6, "evidence": "a"}
SHAFT: Row = {"over": 0, "up_to": 3, "s": 14, "evidence": "a"}


@pytest.mark.parametrize(
    ("grades", "shafts", "says"),
    [
        ([{**GRADE, "evidence": "b"}], [SHAFT], "no evidence"),
        ([{k: v for k, v in GRADE.items() if k != "evidence"}], [SHAFT], "no evidence"),
        ([{**GRADE, "IT6": 5.4}], [SHAFT], "not a whole number"),
        ([{**GRADE, "IT6": True}], [SHAFT], "not a whole number"),
        ([{**GRADE, "IT6": None}], [SHAFT], "not a whole number"),
        ([{**GRADE, "s": 14}], [SHAFT], "grades have no column s"),
        ([GRADE], [{**SHAFT, "IT6": 14}], "shafts have no column IT6"),
        ([GRADE], [{**SHAFT, "h": 0}], "shafts have no column h"),
        ([GRADE], [{**SHAFT, "doubtful": ["r"]}], "doubtful names r"),
        ([{**GRADE, "up_to": 0}], [SHAFT], "does not rise"),
        ([{**GRADE, "up_to": 630}], [SHAFT], "leaves the tables"),
        ([GRADE, {**GRADE, "over": 6, "up_to": 10}], [SHAFT], "6 mm does not follow on 3 mm"),
        ([GRADE, GRADE], [SHAFT], "0 mm does not follow on 3 mm"),
    ],
)
def test_a_damaged_row_is_refused(grades: list[Row], shafts: list[Row], says: str) -> None:
    read_tables({"a": "source"}, [GRADE], shafts=[SHAFT])
    with pytest.raises(ValueError, match=says):
        read_tables({"a": "source"}, grades, shafts=shafts)


@pytest.mark.parametrize("name", ["m6", "H7", "M", "ZC7"])
def test_only_tight_holes_may_be_exceptions(name: str) -> None:
    odd: Row = {"class": name, "over": 0, "up_to": 3, "upper": -9, "evidence": "a"}
    with pytest.raises(ValueError, match="cannot be an exception"):
        read_tables({"a": "source"}, [GRADE], shafts=[SHAFT], exceptions=[odd])
