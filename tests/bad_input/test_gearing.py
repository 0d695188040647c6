"""A radius written for a diameter, or the other way round, at a worm, its wheel and the cutter of the wheel."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped
from tests.bad_input.ring import refused, spoilt

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
THICKNESS = "{measured: 2.310 mm, uncertainty: 4 um}"


def changed(*pairs: tuple[str, str]) -> str:
    text = WHEEL
    for old, new in pairs:
        text = spoilt(old, new, text)
    return text


def says(text: str) -> list[str]:
    return [f"{p.path} | {p.problem}. {p.hint}" for p in refused(text).problems]


@pytest.mark.parametrize(
    ("old", "new", "expected"),
    [
        (
            "tip_diameter: 27",
            "tip_diameter: 14",
            "worm.tip_diameter | tip_diameter 14 mm is not above reference_diameter 24 mm. "
            "Is it the radius? Write the diameter",
        ),
        (
            THICKNESS,
            "31",  # pi x 1.5 mm = 4.712 mm
            "worm.thread_thickness | a thread of 31 mm does not fit a pitch of 4.71 mm. "
            "Write its thickness along the axis, near 2.36 mm",
        ),
        (
            "throat, diameter: 111",
            "throat, diameter: 55.5",
            "parts.wheel.surfaces.throat.diameter | a throat of 55.5 mm lies below the roots of teeth "
            "on a circle of 108 mm. Is it the radius? Write the diameter",
        ),
        (
            "tip_radius: 20.0",
            "tip_radius: 20 in",
            "cutters.fly.tip_radius | a tip_radius of 508 mm is more than 8 times the worm's, 13.5 mm. "
            "Check the number and its unit",
        ),
        (
            "teeth, count: 72,",
            "teeth, count: 72, module: 2,",
            "parts.wheel.surfaces.teeth.module | module 2 mm is not the worm's axial_module, 1.5 mm. "
            "Write one module for both, or leave it away here",
        ),
    ],
)
def test_a_size_that_contradicts_the_others_is_told_at_its_key(old: str, new: str, expected: str) -> None:
    assert [expected] == says(changed((old, new)))


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("tip_diameter: 27", "tip_diameter: 24.1"),
        (THICKNESS, "0.95"),  # 0.2 x 4.712 mm = 0.942 mm
        (THICKNESS, "3.76"),  # 0.8 x 4.712 mm = 3.770 mm
        (THICKNESS, "0.09 in"),
        ("throat, diameter: 111", "throat, diameter: 103.5"),  # 108 mm - 3 x 1.5 mm
        ("tip_radius: 20.0", "tip_radius: 108"),  # 8 x 13.5 mm
        ("teeth, count: 72,", "teeth, count: 72, module: 1.5,"),
    ],
)
def test_a_size_just_within_its_bound_is_accepted(old: str, new: str) -> None:
    assert read_job_text(changed((old, new)), "job.yaml")


@pytest.mark.parametrize(
    ("old", "new"),
    [
        (THICKNESS, "0.94"),
        (THICKNESS, "3.78"),
        ("throat, diameter: 111", "throat, diameter: 103.4"),
        ("tip_diameter: 27", "tip_diameter: 24"),
        ("tip_radius: 20.0", "tip_radius: 108.1"),
        ("teeth, count: 72,", "teeth, count: 72, module: 1.502,"),
    ],
)
def test_a_size_just_beyond_its_bound_is_refused(old: str, new: str) -> None:
    assert 1 == len(says(changed((old, new))))


def test_what_is_wrong_in_itself_is_told_once() -> None:
    (problem,) = refused(changed(("tip_diameter: 27", "tip_diameter: thick"))).problems
    assert "'thick' is not a length" == problem.problem
