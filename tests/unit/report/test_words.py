"""Titles of requirements, causes and remedies in the words of the shop."""

from __future__ import annotations

from dataclasses import replace

import pytest

from setupcheck.flow import prepare
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.causes import cause_in_words
from setupcheck.report.text import as_text
from setupcheck.report.wording import title_of
from tests.unit.report.sample import GEAR, PLATE, WHEEL, changed, flat, loaded, reviewed


@pytest.mark.parametrize(
    ("of", "about", "title"),
    [
        ("wheel.teeth", "spindle.bearings", "run-out at teeth about bearings"),
        ("hub.seat", "spindle.seat", "run-out at hub.seat about spindle.seat"),
        ("hub.seat@30", "hub.seat", "run-out at seat after op 30 about seat"),
        ("teeth", "", "run-out at teeth"),
    ],
)
def test_a_title_names_the_parts_where_both_surfaces_are_called_alike(of: str, about: str, title: str) -> None:
    job = loaded(WHEEL)
    scope = next(s for s in prepare(job)[1].instances("stack") if s.key.startswith("run-out"))
    assert title == title_of(replace(scope, node=replace(stack_of(scope), of=of, about=about)))


@pytest.mark.parametrize(
    ("key", "words"),
    [
        ("op 40, hub in spigot: clearance", "op 40, clearance of hub in spigot"),
        (
            "op 30, bore on taper mandrel: run-out, second plane",
            "op 30, run-out of bore on taper mandrel, second plane",
        ),
        (
            "op 30, bore found by edge finder: zero along x and y",
            "op 30, zero along x and y of bore found by edge finder",
        ),
        ("op 40, seat on flange: face run-out", "op 40, face run-out of seat on flange"),
        ("op 40, stop on seat", "op 40, stop on seat"),
        ("op 40, stop on seat: touches at the high point", "op 40, high point under the stop on seat"),
        (
            "op 40, dividing teeth: once per turn of its wheel",
            "op 40, dividing error of teeth, once per turn of the dividing wheel",
        ),
        (
            "op 40, dividing teeth: twice per turn of the worm",
            "op 40, dividing error of teeth, twice per turn of the dividing worm",
        ),
        ("op 40, dividing teeth: once per crank turn", "op 40, dividing error of teeth, once per crank turn"),
        ("op 40, dividing teeth: drift over the turn", "op 40, drift over the turn in dividing teeth"),
        ("op 40, teeth: axis of dividing-head-B", "op 40, own run-out of dividing-head-B in cutting teeth"),
        ("op 40, teeth: mid-plane found after tilt", "op 40, mid-plane error of teeth, found after tilt"),
        ("op 30, seat: length by dial", "op 30, dial error in the length of seat"),
        ("op 30, slot: spindle to table axis, x", "op 30, spindle over table axis for slot, along x"),
        ("op 30, holes by reamer: radial scatter", "op 30, radial scatter of holes by reamer"),
        ("op 40, clocked on holes", "op 40, clocking on holes"),
        ("spindle, journal as bought: run-out at its low end", "spindle as bought, run-out of journal at its low end"),
        ("spindle, shoulder as bought: face run-out", "spindle as bought, face run-out of shoulder"),
        ("mandrel-20, mark kept: run-out 4 um", "mandrel-20 with its mark kept, run-out"),
        (
            "mandrel-20, mark kept: run-out 4 um, as put on (op 70)",
            "mandrel-20 with its mark kept, run-out as put on in op 70",
        ),
        ("op 50, hub in four-jaw chuck: run-out (scatter)", "op 50, run-out of hub in four-jaw chuck, its scatter"),
        ("housing, face to worm axis", "housing, distance of the worm axis"),
        ("op 30: how the part leans", "op 30, how the part leans"),
        ("something new", "something new"),
    ],
)
def test_a_cause_reads_like_a_sentence_that_begins_with_its_operation(key: str, words: str) -> None:
    assert words == cause_in_words(key)


@pytest.mark.parametrize("text", [WHEEL, GEAR, PLATE], ids=["wheel", "gear", "plate"])
def test_no_cause_of_a_shipped_job_keeps_a_colon_or_a_bracket(text: str) -> None:
    keys = {s.cause.key for result in reviewed(text).results.values() for s in result.combined.shares}
    assert keys
    assert [] == [words for words in map(cause_in_words, keys) if ":" in words or "(" in words]


def test_a_remedy_names_the_operation_the_error_and_both_values_with_their_unit() -> None:
    loose = changed(WHEEL, ("clearance: [2 um, 8 um]", "clearance: [2 um, 16 um]"))
    report = flat(as_text(reviewed(loose)))
    assert "Do: Op 40: bring the clearance of hub in spigot from 16.0 um down to" in report
    assert "(setups.40.hold.centre.clearance)" in report


def test_a_wrong_hole_circle_is_told_by_how_far_a_step_misses_a_whole_hole() -> None:
    report = flat(as_text(reviewed(changed(WHEEL, ("circle: 18", "circle: 20")))))
    assert "each step comes out 0.111 of a hole off a whole hole" in report
    assert "Take a circle of 18 or" in report
