"""A backlash read round the wheel: typed back, printed, and what of it is refused."""

from __future__ import annotations

import json
import math
import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import review
from setupcheck.jobfile.changing import changed, read_change
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.backlash_read import AsRead
from setupcheck.report.json import as_json
from setupcheck.report.working import as_working
from tests.jobs.backlash_jobs import (
    GAPS,
    MESH,
    ROTATOR,
    TAKEN,
    TYPED,
    answer,
    block,
    combined,
    job,
    judged,
)
from tests.jobs.worm_jobs import worm_job

# -- typed, printed ------------------------------------------------------------------------------------------------------


def test_eight_places_are_typed_back_one_by_one_into_a_job_that_says_nothing_of_them() -> None:
    keys = [f"mesh.backlash_read.readings.gap {gap}={value:g} um" for gap, value in TYPED.items()]
    keys += ["mesh.backlash_read.uncertainty=2 um", "mesh.backlash_read.end_float=taken-out"]
    loaded = changed(read_job_text(ROTATOR, "job.yaml"), [read_change(key) for key in keys])
    assert review(loaded).results["backlash.wheel-teeth.spindle-bearings"].combined == combined(job(TYPED))


def test_a_typo_on_the_way_is_still_refused() -> None:
    with pytest.raises(JobError, match="backlash_reed"):
        changed(read_job_text(ROTATOR, "job.yaml"), [read_change("mesh.backlash_reed.readings.gap 1=62 um")])


def test_json_has_places_wave_and_high_spot() -> None:
    told = json.loads(as_json(judged(job(TYPED))))["backlash_read"]
    assert [one["gap"] for one in told["places"]] == list(GAPS)
    assert (told["tightest_gap"], told["high_spot_gap"], told["unit"]) == (37, 34, "um")
    assert sum(one["off_wave"] for one in told["places"]) == pytest.approx(0.0, abs=1e-9)


def test_an_inch_file_prints_thou_and_reads_bare_radii_in_inches() -> None:
    """The pair of another test in inches, with readings in thou at twice the reference circle."""
    inch = worm_job(starts=1, hand="right", module=0.06, worm=0.88, teeth=90, face=0.44, radius=0.6, budget="0.2 thou")
    for old, new in (
        ("units: mm", "units: in"),
        (" mm, uncertainty: 1 um", " in, uncertainty: 0.04 thou"),
        (" ±0.010}", " ±0.0004}"),
        (" ±0.01,", " ±0.0004,"),
        ("from: -40,", "from: -1.6,"),
        ("at: -35", "at: -1.4"),
        ("at: -5,", "at: -0.2,"),
        ("to: 20.44", "to: 1.24"),
        ("to: 22.44", "to: 1.3"),
        (" contact: exact,", ""),
    ):
        inch = inch.replace(old, new)
    said = ", ".join(f"gap {gap}: {4.0 + 0.4 * math.cos(math.tau * (gap - 1) / 90)!r} thou" for gap in range(1, 91, 10))
    more = "along: at 5.4, uncertainty: 0.2 thou, end_float: taken-out"
    told = block(inch.replace(MESH, f"{MESH} backlash_read: {{readings: {{{said}}}, {more}}},"))
    assert "gap 1 2.20 thou" in told and "mean 2.00 thou" in told and "± 0.10 thou" in told
    assert "read with a dial at 5.4, and brought to the reference circle" in told


def test_the_working_names_the_readings_and_how_the_swing_came_about() -> None:
    found = judged(job(TYPED))
    assert isinstance(answer(job(TYPED), "read.as_read"), AsRead)
    told = re.sub(r"\s+", " ", as_working(found.loaded, found.book, "require[10]"))
    assert "wheel, its backlash as read, over the turn: gives 7.7 um" in told and "gap 10 58.0 um" in told
    assert "twice the amplitude" in as_working(found.loaded, found.book, "read.swing").replace("\n", " ")
    assert "read square to the flank" in block(job(TYPED, f"along: normal, {TAKEN}"))
    assert "brought to" not in block(job(TYPED))


@pytest.mark.parametrize(
    ("said", "problem"),
    [
        ("readings: {gap 73: 5 um}", "teeth has 72 gaps, and none is number 73"),
        ("readings: {gap 1: 5 um, gap  1: 6 um}", "gap 1 is read twice"),
        ("readings: {tooth 1: 5 um}", "'tooth 1' names no gap"),
        ("readings: {gap 1: 20 arcsec}", "'20 arcsec' is an angle, and backlash is read as a length"),
        ("readings: {gap 1: 2'}", "is an angle, and backlash is read as a length"),
        ("readings: {gap 1: -5 um}", "'-5 um' is below zero, and a dial travels one way"),
        ("readings: {gap 1: 5}", "5 has no unit, so it is not a length"),
        ("readings: {gap 1: 5 mm}", "backlash of 5 mm is more than the pitch of the teeth, 4.71 mm"),
        ("readings: {gap 1: [5 um]}", "one value belongs here, not a list"),
        ("readings: {gap 1: 5 um}, end_float: 10 um", "'10 um' is not known here"),
        ("readings: {gap 1: 5 um}, uncertainty: 2", "2 has no unit, so it is not a length"),
        ("reading: {gap 1: 5 um}", "Did you mean readings?"),
    ],
)
def test_readings_that_cannot_be_are_refused_at_their_place(said: str, problem: str) -> None:
    with pytest.raises(JobError) as refused:
        read_job_text(ROTATOR.replace(MESH, f"{MESH} backlash_read: {{{said}}},"), "job.yaml")
    assert problem in " ".join(f"{p.problem}. {p.hint}" for p in refused.value.problems)
    assert all(p.path.startswith("mesh.backlash_read") for p in refused.value.problems)


@pytest.mark.parametrize("given", ["62 um", "[62 um, 58 um]", "true"])
def test_one_value_for_all_places_is_refused_with_how_to_write_it(given: str) -> None:
    with pytest.raises(JobError, match="backlash_read"):
        read_job_text(ROTATOR.replace(MESH, f"{MESH} backlash_read: {given},"), "job.yaml")


def test_a_way_of_stating_it_that_is_none_is_refused() -> None:
    with pytest.raises(JobError, match="Write circular, normal, or at and a radius"):
        judged(job(TYPED, f"along: sideways, {TAKEN}"))
