"""A pitch or a lead of the worm against the wheel's circle, and a lead from which the starts would follow."""

from __future__ import annotations

import pytest

from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped

ROTATOR, SPINDLE = (
    shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8") for name in ("rotator-worm-wheel", "wheel-on-spindle")
)
MODULE, STARTS = "  axial_module: 1.5\n", "  starts: 1\n"


def agreed(text: str) -> list[str]:
    """What MESH-007 says with its remedy, where it does not pass."""
    found = review(read_job_text(text, "worm.yaml"))
    return [
        f"{f.message} | {f.remedy}" for f in found.evaluation.findings if f.rule == "MESH-007" and f.verdict == "fail"
    ]


def without_module(instead: str) -> str:
    assert ROTATOR.count(MODULE) == 1
    return ROTATOR.replace(MODULE, f"  {instead}\n")


def without_starts(instead: str) -> str:
    assert ROTATOR.count(STARTS) == 1
    return ROTATOR.replace(STARTS, "").replace(MODULE, instead)


BESIDE_THE_CIRCLE = [
    (  # pi x 108/72 = 4.712 mm
        without_module("axial_pitch: {measured: 6.0, uncertainty: 20 um}"),
        "axial_pitch 6.000 mm is not 4.712 mm (the wheel's count 72, the wheel's on_circle 108.000 mm), 1.288 mm apart | "
        "Measure again, or leave one of them out: by the others axial_pitch 4.712 mm.",
    ),
    (
        without_module("lead: {measured: 5.5, uncertainty: 20 um}"),
        "lead 5.500 mm is not 4.712 mm (starts 1, the wheel's count 72, the wheel's on_circle 108.000 mm), 0.788 mm apart",
    ),
    (  # pi x 120/60 = 6.283 mm
        SPINDLE.replace("  axial_module: 2\n", "  axial_pitch: {measured: 6.35, uncertainty: 20 um}\n"),
        "axial_pitch 6.350 mm is not 6.283 mm (the wheel's count 60, the wheel's on_circle 120.000 mm), 0.067 mm apart",
    ),
]


@pytest.mark.parametrize(("text", "says"), BESIDE_THE_CIRCLE)
def test_a_measured_travel_that_is_not_the_wheels_is_told_though_the_worm_states_no_module(
    text: str, says: str
) -> None:
    (message,) = agreed(text)
    assert says in message


@pytest.mark.parametrize(
    "instead",
    [
        "axial_pitch: {measured: 4.73, uncertainty: 20 um}",
        "axial_pitch: {measured: 6.0, uncertainty: 1.5 mm}",
        "lead: {measured: 4.70, uncertainty: 10 um}",
    ],
)
def test_a_measured_travel_within_its_uncertainty_of_the_wheels_is_not_held_against_it(instead: str) -> None:
    assert agreed(without_module(instead)) == []


NO_MULTIPLE = [
    (without_starts(MODULE + "  lead: 14\n"), "lead 14.000 mm", "4.712 mm, 3 of it would be 14.137 mm"),
    (without_starts(MODULE + "  lead: 13\n"), "lead 13.000 mm", "4.712 mm, 3 of it would be 14.137 mm"),
    (without_starts(MODULE + "  lead: 1\n"), "lead 1.000 mm", "4.712 mm, 1 of it would be 4.712 mm"),
    (without_starts("  lead: 4.75\n"), "lead 4.750 mm", "4.712 mm, 1 of it would be 4.712 mm"),
    (
        SPINDLE.replace("  starts: 1\n", "  lead: {measured: 12.50, uncertainty: 20 um}\n"),
        "lead 12.500 mm",
        "6.283 mm, 2 of it would be 12.566 mm",
    ),
]


@pytest.mark.parametrize(("text", "lead", "pitch"), NO_MULTIPLE)
def test_a_lead_that_is_no_whole_multiple_of_the_pitch_is_told(text: str, lead: str, pitch: str) -> None:
    (message,) = agreed(text)
    assert f"{lead} is no whole multiple of the axial pitch {pitch} | Measure the lead again" in message


@pytest.mark.parametrize(
    "instead",
    [MODULE + "  lead: 14.137\n", MODULE + "  lead: {measured: 14.0, uncertainty: 150 um}\n", "  lead: 4.712\n"],
)
def test_a_lead_that_is_a_whole_multiple_settles_the_starts_without_a_word(instead: str) -> None:
    assert agreed(without_starts(instead)) == []
