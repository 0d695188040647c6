"""Shipped jobs spoilt at random: a review either returns or says in words what is wrong; nothing else comes out."""

from __future__ import annotations

import contextlib
import re

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from setupcheck.errors import SetupcheckError
from setupcheck.flow import prepare, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.working import as_working
from setupcheck.shipped import shipped
from tests.bad_input.ring import JOINED, RING

JOBS = [RING, JOINED, *(path.read_text("utf-8") for path in sorted(shipped("jobs").glob("*.yaml")))]
NUMBER = re.compile(r"\d+(?:\.\d+)?")
PAIR = re.compile(r"(?P<key>[A-Za-z_]+):[ ]*(?P<value>\{[^{}]*\}|\[[^\[\]]*\]|[^,{}\[\]\n#]+)")
JUNK = (
    "", "0", "-1", "1", "1e+9", "-0.001", "0 um", "900 mm", "2,5 um", "nan", ".inf", "15:30", "no", "010", "abc", "''",
    "[]", "{}", "[1, 2]", "[0 um, 0 um]", "{a: 1}", "null", "true", "1 deg", "50 %", "40 N m", "32 H6", "bore", "teeth",
    "tooth 14", "90 deg", "jaw 2", "mark", "10", "{measured: 3 um}", "{measured: 3 um, high_at: tooth 1}", "slot",
    "{device: D, mark: kept}", "chord", "position", "allowance", "edge-finder", "free", "'@'", "a.b.c", "x" * 300,
    "\x1b[31m", "'\u043a\u043b\u044e\u0447'",
)  # fmt: skip


def mutated(text: str, kind: str, draw: st.DrawFn) -> str:
    """The text with one place spoilt."""
    lines = text.split("\n")
    if kind == "cut short" and len(text) > 1:
        return text[: draw(st.integers(1, len(text) - 1))]
    if kind in ("line twice", "line lost"):
        at = draw(st.integers(0, len(lines) - 1))
        return "\n".join(lines[:at] + [lines[at]] * (2 if kind == "line twice" else 0) + lines[at + 1 :])
    pairs = list(PAIR.finditer(text))
    if not pairs:
        return text
    pair = draw(st.sampled_from(pairs))
    if kind == "key lost":
        end = pair.end() + (2 if text[pair.end() : pair.end() + 2] == ", " else 0)
        return text[: pair.start()] + text[end:]
    if kind == "another value of the same key":
        same = [other["value"] for other in pairs if other["key"] == pair["key"]]
        return text[: pair.start("value")] + draw(st.sampled_from(same)) + text[pair.end("value") :]
    if kind == "another number" and (number := NUMBER.search(pair["value"])):
        at = pair.start("value")
        new = draw(st.sampled_from(("0", f"-{number[0]}", f"{number[0]}000", f"0.00000{number[0].replace('.', '')}")))
        return text[: at + number.start()] + new + text[at + number.end() :]
    return text[: pair.start("value")] + draw(st.sampled_from(JUNK)) + text[pair.end("value") :]


KINDS = (
    "cut short", "line twice", "line lost", "key lost", "key lost", "another value of the same key", "junk", "junk",
    "another number", "another number",
)  # fmt: skip


@st.composite
def spoilt_jobs(draw: st.DrawFn) -> str:
    text = draw(st.sampled_from(JOBS))
    for kind in draw(st.lists(st.sampled_from(KINDS), min_size=1, max_size=3)):
        text = mutated(text, kind, draw)
    return text


def goes_through(text: str) -> None:
    """A review of the text, or a refusal in words; anything else is our bug and comes out of here."""
    try:
        said = as_text(review(read_job_text(text, "job.yaml")), everything=True)
    except SetupcheckError as wrong:
        said = str(wrong)
    assert said
    assert "\x1b" not in said


@settings(derandomize=True, max_examples=60, deadline=None, database=None, suppress_health_check=[HealthCheck.too_slow])
@given(spoilt_jobs())
def test_a_spoilt_job_is_reviewed_or_refused_in_words(text: str) -> None:
    goes_through(text)


WHEEL = next(text for text in JOBS if "axial_module" in text)
LAST = (
    "twist",
    "shift_height",
    "holds_to",
    "backlash",
    "worst_error",
    "fewest_teeth",
    "grip_least",
    "closing",
    "window",
    "insert_gap",
)
"""Ends of names of quantities whose working is shown for each spoilt worm wheel."""


def shows_its_working(text: str) -> None:
    """JSON and the working of some quantities of a job that can be read: words, numbers, no traceback, nothing endless."""
    try:
        loaded = read_job_text(text, "job.yaml")
        said = as_json(review(loaded))
        _, book = prepare(loaded)
    except SetupcheckError as wrong:
        assert "job.yaml:" in str(wrong)
        return
    for name in book.quantities:
        if name.rpartition(".")[2] in LAST:
            with contextlib.suppress(SetupcheckError):  # there may be no instance of it left
                said += as_working(loaded, book, name)
    assert not re.search(r"\b(?:NaN|nan|Infinity|inf)\b", said)


@st.composite
def spoilt_wheels(draw: st.DrawFn) -> str:
    text = WHEEL
    for kind in draw(st.lists(st.sampled_from(("key lost", "another number", "line lost")), min_size=1, max_size=2)):
        text = mutated(text, kind, draw)
    return text


@settings(derandomize=True, max_examples=40, deadline=None, database=None, suppress_health_check=[HealthCheck.too_slow])
@given(spoilt_wheels())
def test_a_spoilt_worm_wheel_shows_its_working_and_its_numbers(text: str) -> None:
    goes_through(text)
    shows_its_working(text)


@pytest.mark.parametrize(
    ("good", "bad"),
    [
        ("pressure_angle: 20 deg", "pressure_angle: -20 deg"),
        ("pressure_angle: 20 deg", "pressure_angle: 80 deg"),
        ("tip_diameter: 27", "tip_diameter: 2700"),
        ("thread_thickness: {measured: 2.310 mm", "thread_thickness: {measured: 0.001 mm"),
        ("tip_radius: 20.0", "tip_radius: 0.1"),
        ("depth: 3.3", "depth: 60"),
        ("serves_at: [5 degC, 45 degC]", "serves_at: [5 degC, 4500 degC]"),
        ("on_circle: 108", "on_circle: 1"),
        ("hole: 12", "hole: 31.9"),
        ("reference_diameter: 24", "reference_diameter: 2.4"),
        ("mid_plane: {found: after-tilt", 'mid_plane: {pivot: "120 ±1", found: before-tilt'),
        ("joint: degreased", "joint: degreased\n      friction: 0"),
    ],
)
def test_a_worm_wheel_of_impossible_sizes_goes_through(good: str, bad: str) -> None:
    assert good in WHEEL
    goes_through(WHEEL.replace(good, bad))
    shows_its_working(WHEEL.replace(good, bad))


PLATE = next(text for text in JOBS if "Index plate" in text)
ONCE_BROKEN = {
    "an allowance of no surface": RING + "  - {what: allowance, at_least: 0.1 mm}\n",
    "a failing length that has no cause": RING
    + "  - {what: length, of: ring.back, about: ring.back@20, between: [1 mm, 2 mm]}\n",
    "a grade of no teeth": RING + "  - {what: single-pitch, grade: 6}\n",
    "a pitch figure of a single slot": PLATE.replace("gap-centre-pitch, of: plate.holes", "gap-centre-pitch, of: slot"),
    "a cutter named by a number": RING.replace("{teeth: {error: 20 um}", "{teeth: {error: 20 um, cutter: 30}"),
    "a surface named by a number": RING.replace("of: ring.teeth, about", "of: 50, about"),
    "a state in odd digits": RING.replace("{on: bore, by", "{on: bore@\u00b2, by"),
    "a state of five thousand digits": RING.replace("{on: bore, by", f"{{on: bore@{'9' * 5000}, by"),
    "an alias for a key": RING.replace("setupcheck: 1", "*setupcheck : 1"),
    "a deviation larger below than above": RING.replace("diameter: 32 H7", "diameter: {nominal: 32, lower: 1, upper: 0}"),
    "a measured machine error below zero": RING.replace("axis_runout: 2 um", "axis_runout: {measured: -2 um}"),
    "units of no kind": RING.replace("units: mm", "units: [mm]"),
    "units that are a map": RING.replace("units: mm", "units: {mm: 1}"),
}  # fmt: skip


@pytest.mark.parametrize("case", ONCE_BROKEN)
def test_a_text_that_once_broke_the_review_goes_through(case: str) -> None:
    assert ONCE_BROKEN[case] not in JOBS
    goes_through(ONCE_BROKEN[case])
