"""Holds against what is usual: run-outs too good to be true, chucks known elsewhere, one plane, needless openings, what turns."""

from __future__ import annotations

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.text import as_text
from setupcheck.rulebook import Finding
from setupcheck.shipped import example
from tests.jobs.remedy_jobs import held_twice

DISC = """
setupcheck: 1
title: Disc bored in two holdings
units: mm
confidence: 95 %
machines: {lathe-A: {kind: lathe, axis_runout: 3 um}}
parts:
  disc:
    surfaces:
      rim:   {kind: cylinder, diameter: 100, from: 0, to: 60, made: stock}
      face:  {kind: face, at: 0, facing: -z, diameter: 100, made: stock}
      front: {kind: face, at: 60, facing: +z, diameter: 100}
      neck:  {kind: cylinder, diameter: 80, from: 40, to: 60}
      bore:  {kind: bore, diameter: 32, from: 0, to: 60}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: four-jaw, at: 10, runout: 10 um, grip: {from: 5, to: 35}}
      square: {on: face, by: jaws, face_runout: 15 um, across: 90}
    cut: {front: {error: 0.1 mm}, neck: {}}
  - op: 20
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: soft-jaws, at: 20, runout: 20 um, grip: {from: 5, to: 35}}
      square: {on: face, by: jaws, face_runout: 15 um, across: 90}
    cut: {bore: {}}
require:
  - {what: run-out, of: disc.bore, about: disc.rim, at: 20, at_most: 100 um}
"""
FOUR_JAW = "by: four-jaw, at: 10, runout: 10 um"
SOFT = "by: soft-jaws, at: 20, runout: 20 um"
SQUARE = "      square: {on: face, by: jaws, face_runout: 15 um, across: 90}\n    cut: {front"


def reviewed(*changes: tuple[str, str], text: str = DISC) -> Review:
    for old, new in changes:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return review(read_job_text(text, "disc.yaml"))


def found(rule: str, seen: Review) -> list[Finding]:
    return [f for f in seen.evaluation.findings if f.rule == rule]


def said(seen: Review) -> list[tuple[str, str]]:
    """Every finding that is no pass."""
    return [(f.rule, f.verdict) for f in seen.evaluation.findings if f.verdict != "pass"]


def test_the_disc_is_a_good_job() -> None:
    assert [] == said(reviewed())


# -- HOLD-011, HOLD-015


@pytest.mark.parametrize(
    ("runout", "expected"),
    [
        ("5 um", []),
        ("4.9 um", [("HOLD-011", "warn")]),
        ("{at_most: 4 um, measured: 2 um, uncertainty: 1 um}", []),
        ("{at_most: 4 um, indicator: 1 um}", []),
        ("{at_most: 4 um, indicator: 10 um}", [("MEASURE-007", "warn")]),
        ("0 um", [("HOLD-011", "warn")]),
        ("{at_most: 4 um, device: four-jaw-A}", [("HOLD-011", "warn")]),
    ],
)
def test_a_planned_run_out_below_the_best_of_its_device_is_told_once(
    runout: str, expected: list[tuple[str, str]]
) -> None:
    assert expected == said(reviewed((FOUR_JAW, f"by: four-jaw, at: 10, runout: {runout}")))


def test_the_remedy_says_that_run_out_is_the_full_movement() -> None:
    (one,) = [
        f for f in found("HOLD-011", reviewed((FOUR_JAW, "by: four-jaw, at: 10, runout: 4 um"))) if f.verdict == "warn"
    ]
    assert 10 == one.op and "plans 4.0 um on rim, and 5.0 um is the best that is usual" in one.message
    assert "if this is the eccentricity, write 8.0 um" in one.remedy
    assert "Usual of four-jaw: 5.0 um to 25.0 um" in one.remedy


def test_a_face_and_a_spindle_are_held_against_what_is_usual_too() -> None:
    face = reviewed((SQUARE, SQUARE.replace("15 um", "9 um")))
    assert [("HOLD-011", "warn")] == said(face)
    axis = reviewed(("axis_runout: 3 um", "axis_runout: 1.5 um"))
    assert [("HOLD-015", "warn")] == said(axis)  # one machine in two operations: one line
    (one,) = [f for f in found("HOLD-015", axis) if f.verdict == "warn"]
    assert "write 3.0 um" in one.remedy and "2.0 um to 15.0 um" in one.remedy
    read = reviewed(("axis_runout: 3 um", "axis_runout: {measured: 1.5 um, uncertainty: 1 um}"))
    assert [] == said(read)


def test_an_inch_job_is_told_in_thou() -> None:
    inches = DISC.replace("units: mm", "units: in")
    for old, new in (("100", "4"), ("60", "2.4"), ("40", "1.6"), ("80", "3.1"), ("32", "1.25"), ("35", "1.4")):
        inches = inches.replace(f": {old}", f": {new}")
    inches = inches.replace("at: 10", "at: 0.4").replace("at: 20", "at: 0.8").replace("from: 5", "from: 0.2")
    inches = inches.replace("across: 90", "across: 3.5").replace("at_most: 4 um", "at_most: 100 um")
    seen = reviewed(("runout: 10 um", "runout: 0.1 thou"), text=inches)
    (one,) = [f for f in found("HOLD-011", seen) if f.verdict == "warn"]
    assert "0.20 thou" in one.remedy and "um" not in one.remedy


def test_jaws_over_shims_are_left_to_their_own_rule() -> None:
    seen = reviewed((SOFT, "by: shimmed-jaws, at: 20, runout: 10 um"))
    assert [("MEASURE-003", "warn")] == said(seen)


# -- HOLD-016


@pytest.mark.parametrize(
    ("reading", "expected"),
    [
        ("measured: 4 um, uncertainty: 1 um, indicator: 10 um", []),
        ("measured: 4 um, uncertainty: 0.9 um, indicator: 10 um", [("HOLD-016", "warn")]),
        ("measured: 4 um, standard_uncertainty: 0.5 um, indicator: 10 um", []),
        ("measured: 4 um, uncertainty: 0.1 um", []),
        ("measured: 4 um, uncertainty: 0 um", [("HOLD-016", "warn")]),
        ("measured: 4 um, uncertainty: 0 um, indicator: 10 um", [("HOLD-016", "warn")]),
    ],
)
def test_a_reading_surer_than_its_dial(reading: str, expected: list[tuple[str, str]]) -> None:
    seen = reviewed((FOUR_JAW, f"by: four-jaw, at: 10, runout: {{at_most: 10 um, {reading}}}"))
    assert expected == said(seen)


# -- HOLD-012


@pytest.mark.parametrize(
    ("known_at", "expected"),
    [
        ("100 mm", []),
        ("83.4 mm", []),
        ("83.3 mm", [("HOLD-012", "warn")]),
        ("125 mm", []),
        ("126 mm", [("HOLD-012", "warn")]),
    ],
)
def test_a_chuck_known_on_another_diameter(known_at: str, expected: list[tuple[str, str]]) -> None:
    seen = reviewed((SOFT, f"by: soft-jaws, at: 20, runout: {{at_most: 20 um, known_at: {known_at}}}"))
    assert expected == said(seen)


def test_the_remedy_names_the_bar_and_what_one_chuck_gave() -> None:
    seen = reviewed((SOFT, "by: soft-jaws, at: 20, runout: {at_most: 20 um, known_at: 25 mm}"))
    (one,) = [f for f in found("HOLD-012", seen) if f.verdict == "warn"]
    assert "Put a bar of 100 mm into it, read it, and write known_at: 100 mm" in one.remedy
    assert "read 10.0 um on 19 mm, 20.0 um on 12.7 mm and 50.0 um on 25.4 mm" in one.remedy


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        (
            FOUR_JAW,
            "by: four-jaw, at: 10, runout: {at_most: 10 um, known_at: 25 mm}",
            "known_at is the bar a chuck was",
        ),
        (
            "error: 0.1 mm",
            "error: {at_most: 0.1 mm, known_at: 25 mm}",
            "known_at is the diameter a chuck was tested on",
        ),
        ("axis_runout: 3 um", "axis_runout: {at_most: 3 um, known_at: 25 mm}", "known_at is the diameter a chuck was"),
        (SOFT, "by: soft-jaws, at: 20, runout: {at_most: 20 um, known_at: 0}", "is not a size"),
        (SOFT, f"{SOFT}, jaws_stand_out: -2", "jaws that end inside the chuck stand out by 0"),
        (SOFT, "by: collet, at: 20, runout: 20 um, jaws_stand_out: 2", "collet has none"),
    ],
)
def test_a_key_of_a_chuck_elsewhere_is_refused(old: str, new: str, says: str) -> None:
    with pytest.raises(SetupcheckError, match=says):
        reviewed((old, new))


# -- HOLD-013


def test_one_slip_of_the_lean_gives_one_finding() -> None:
    alone = reviewed((SQUARE, "    cut: {front"))
    assert [("HOLD-013", "warn")] == said(alone)
    (one,) = [f for f in found("HOLD-013", alone) if f.verdict == "warn"]
    assert "over 100.0 mm a lean of up to 2.8' (80 um in 100 mm)" in one.remedy
    unread = reviewed((SQUARE, SQUARE.replace(", face_runout: 15 um", "")))
    assert [("HOLD-003", "open")] == [pair for pair in said(unread) if pair[0].startswith("HOLD")]
    typical = reviewed((SQUARE, SQUARE.replace("15 um", "{device: jaws}")))
    assert [("HOLD-004", "warn")] == said(typical)
    (one,) = [f for f in found("HOLD-004", typical) if f.verdict == "warn"]
    assert "nobody read the lean: usual of jaws is 10 um to 80 um, over 90.0 mm up to 3.1'" in one.remedy


@pytest.mark.parametrize(
    ("face_runout", "verdicts"), [(", face_runout: 15 um", ["pass"]), ("", []), (", face_runout: {device: jaws}", [])]
)
def test_a_face_nobody_read_is_never_told_as_read(face_runout: str, verdicts: list[str]) -> None:
    seen = reviewed((SQUARE, SQUARE.replace(", face_runout: 15 um", face_runout)))
    assert verdicts == [f.verdict for f in found("HOLD-013", seen)]


def test_nothing_at_all_is_left_to_the_rule_of_the_lean() -> None:
    seen = reviewed((SQUARE, "    cut: {front"), (f"{FOUR_JAW}, grip: {{from: 5, to: 35}}", FOUR_JAW))
    assert [("HOLD-001", "open")] == said(seen)


# -- HOLD-014


def test_a_part_held_again_as_before_is_told() -> None:
    seen = review(read_job_text(held_twice(), "hub.yaml"))
    assert [("HOLD-014", "warn")] == said(seen)
    (one,) = [f for f in found("HOLD-014", seen) if f.verdict == "warn"]
    assert 30 == one.op and "Cut op 20 and op 30 in one holding: in op 30 write keeps: 20" in one.remedy


AGAIN = (SOFT, "by: four-jaw, at: 10, runout: 10 um")


@pytest.mark.parametrize(
    ("more", "told"),
    [
        ((AGAIN,), True),
        (((SOFT, "by: four-jaw, at: 10, runout: 25 um"),), True),
        (((SOFT, "by: four-jaw, at: 10, runout: 6 um"),), False),  # trued finer than before
        ((), False),  # another device
        ((AGAIN, ("cut: {bore: {}}", "cut: {bore: {}, rim: {to: 99}}")), False),  # it cuts what the jaws hold
    ],
)
def test_what_forces_a_part_out_of_its_holding(more: tuple[tuple[str, str], ...], told: bool) -> None:
    assert told == ("HOLD-014" in {rule for rule, _ in said(reviewed(*more))})


def test_the_other_end_or_another_machine_forces_it() -> None:
    other = reviewed(AGAIN, ("  - op: 20\n    machine: lathe-A", "  - op: 20\n    machine: lathe"))
    assert "HOLD-014" not in {rule for rule, _ in said(other)}
    head, _, tail = DISC.partition("  - op: 20")
    turned = head + "  - op: 20" + tail.replace("looks_at_tool: +z", "looks_at_tool: -z")
    assert "HOLD-014" not in {rule for rule, _ in said(reviewed(AGAIN, text=turned))}


def test_a_part_held_on_what_the_holding_before_cut_could_have_stayed() -> None:
    on_neck = ("{on: rim, by: soft-jaws, at: 20, runout: 20 um, grip: {from: 5, to: 35}}\n"
               "      square: {on: face, by: jaws,", "{on: neck, by: soft-jaws, at: 50, runout: 20 um}\n"
               "      square: {on: front, by: jaws,")  # fmt: skip
    seen = reviewed(on_neck)
    assert [("HOLD-014", "warn")] == [pair for pair in said(seen) if pair[0] == "HOLD-014"]


def test_a_setup_that_is_done_is_not_told() -> None:
    seen = reviewed(AGAIN, ("machines:", "done: 20\nmachines:"))
    assert "HOLD-014" not in {rule for rule, _ in said(seen)}


# -- CLAMP-006 to CLAMP-008


def turning(keys: str) -> tuple[str, str]:
    return "    cut: {bore", f"    turning: {{{keys}}}\n    cut: {{bore"


@pytest.mark.parametrize(
    ("change", "expected"),
    [
        ((SOFT, f"{SOFT}, jaws_stand_out: 0"), []),
        ((SOFT, f"{SOFT}, jaws_stand_out: 8 mm"), [("CLAMP-006", "warn")]),
        (turning("speed: 600 rpm, chuck_speed: 2500 rpm"), []),
        (turning("speed: 2501 rpm, chuck_speed: 2500 rpm"), [("CLAMP-007", "fail")]),
        (turning("speed: 600 rpm"), [("CLAMP-007", "open")]),
        (turning("chuck_speed: 2500 rpm"), [("CLAMP-007", "open")]),
    ],
)
def test_jaws_and_speed_of_a_chuck(change: tuple[str, str], expected: list[tuple[str, str]]) -> None:
    assert expected == said(reviewed(change))


def test_what_stands_off_the_axis_pulls_with_the_square_of_the_speed() -> None:
    heavy = "chuck_speed: 3000 rpm, off_centre: 0.5 kg, off_by: 10 mm"
    gripped = (SOFT, f"{SOFT}, grip_force: 500 N")
    slow = reviewed(gripped, turning(f"speed: 500 rpm, {heavy}"))
    (one,) = found("CLAMP-008", slow)
    assert 13.7 == pytest.approx(float(one.value), abs=0.05)  # type: ignore[arg-type]
    assert ["pass"] == [one.verdict]
    fast = reviewed(gripped, turning(f"speed: 1000 rpm, {heavy}"))
    (one,) = found("CLAMP-008", fast)
    assert 54.8 == pytest.approx(float(one.value), abs=0.05)  # type: ignore[arg-type]
    assert "warn" == one.verdict
    assert "Turn no faster than 950 rpm" in one.remedy and "0.10 kg do 50 mm from the axis" in one.remedy
    again = reviewed(gripped, turning(f"speed: 950 rpm, {heavy}"))
    assert ["pass"] == [f.verdict for f in found("CLAMP-008", again)]
    unknown = reviewed(turning(f"speed: 500 rpm, {heavy}"))
    assert ["open"] == [f.verdict for f in found("CLAMP-008", unknown)]


@pytest.mark.parametrize(
    ("keys", "says"),
    [
        ("off_centre: 0.5 kg", "off_centre and off_by belong together"),
        ("speed: 0 rpm", "Drop that key, or write its value"),
        ("speed: 600", "600"),
        ("bar_behind: 0", "is not a size"),
        ("rpm: 600", "rpm"),
    ],
)
def test_what_turns_is_said_whole_or_refused(keys: str, says: str) -> None:
    with pytest.raises(SetupcheckError, match=says):
        reviewed(turning(keys))


def test_nothing_of_it_says_a_promise() -> None:
    text = as_text(reviewed((SOFT, f"{SOFT}, jaws_stand_out: 8 mm"), turning("speed: 3000 rpm, chuck_speed: 2500 rpm")))
    assert "jaws-protrude" in text or "Jaws that stand out beyond the chuck" in text
    assert "op 20, chuck-speed [to check]" in text


# -- HOLD-004


@pytest.mark.parametrize(
    ("was", "becomes", "called"),
    [
        (FOUR_JAW, "by: four-jaw, at: 10, runout: {device: four-jaw}", "rim in four-jaw chuck"),
        (FOUR_JAW, "by: four-jaw, at: 10, runout: {device: four-jaw-A}", "rim in four-jaw chuck (four-jaw-A)"),
        (SQUARE, SQUARE.replace("15 um", "{device: jaws}"), "face on jaws"),
        (SQUARE, SQUARE.replace("by: jaws, face_runout: 15 um", "face_runout: {device: table}"), "face (table)"),
        (
            SQUARE,
            "      and_centre: {on: rim, by: four-jaw, at: 30, runout: {device: four-jaw}}\n    cut: {front",
            "rim in four-jaw chuck, second plane",
        ),
        (
            SQUARE,
            SQUARE.replace("    cut: {", "      stop: {on: face, error: {device: lever-2um}}\n    cut: {"),
            "the stop on face (lever-2um)",
        ),
    ],
)
def test_a_typical_error_is_told_with_what_is_held_and_what_holds_it(was: str, becomes: str, called: str) -> None:
    told = [f.message for f in found("HOLD-004", reviewed((was, becomes))) if f.verdict == "warn"]
    assert [f"op 10 rests on a typical error for {called}, not on a figure of this shop"] == told


def test_a_joint_trued_by_a_dial_is_told_with_its_dial() -> None:
    text = example("encoder-disc-mount").read_text(encoding="utf-8")
    trued = "runout: {at_most: 2 um, measured: 1.2 um, uncertainty: 0.4 um, indicator: 0.5 um}"
    seen = reviewed((trued, "runout: {device: indicator}"), text=text)
    told = [f.message for f in found("HOLD-004", seen) if f.verdict == "warn"]
    assert ["op 40 rests on a typical error for disc.track trued by indicator, not on a figure of this shop"] == told
