"""The shipped jobs are good routes: nothing fails, warns or is open, and their margins are real."""

from __future__ import annotations

from pathlib import Path

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped

JOBS = sorted(shipped("jobs").glob("*.yaml"))
WHEEL = shipped("jobs/rotator-worm-wheel.yaml")


def reviewed(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_a_shipped_job_passes_with_nothing_open(job: Path) -> None:
    found = review(job)
    said = [f"{f.rule} {f.at}: {f.message}" for f in found.evaluation.findings if f.verdict != "pass"]
    assert said == []
    assert found.verdict == "pass"


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_a_shipped_job_states_at_least_six_requirements_and_all_are_computed(job: Path) -> None:
    found = review(job)
    assert len(found.loaded.job.require) >= 6
    assert len(found.results) == len(found.loaded.job.require)


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_the_tightest_margin_of_a_shipped_job_is_under_a_quarter_of_its_limit(job: Path) -> None:
    shares = [r.margin_share for r in review(job).results.values() if r.margin_share is not None]
    assert 0.0 <= min(shares) < 0.25


def test_the_wheel_goes_through_seven_steps_and_a_joining() -> None:
    setups = review(WHEEL).loaded.job.setups
    assert len(setups) >= 7
    assert any(s.join is not None for s in setups)


DOUBLED = {  # what the job file says for each cause, as text on its line
    "op 40, hub in spigot: clearance": ("clearance: [2 um, 8 um]", "clearance: [4 um, 16 um]"),
    "op 50, hub in four-jaw chuck: run-out": ("measured: 4 um", "measured: 8 um"),
    "op 40, hub in spigot: run-out": ("rests: pushed, runout: 3 um", "rests: pushed, runout: 6 um"),
    "housing, face to worm axis": ("length: 13.500 ±0.020", "length: 13.500 ±0.040"),
    "op 40, teeth: mid-plane found after tilt": ("found: after-tilt, error: 15 um", "found: after-tilt, error: 30 um"),
    "op 40, stop on seat": ("stop:   {on: seat, error: 10 um}", "stop:   {on: seat, error: 20 um}"),
}


@pytest.mark.parametrize(
    "stack", ["mid-plane.wheel-teeth.spindle-bearings", "backlash-swing.wheel-teeth.spindle-bearings"]
)
def test_doubling_any_of_the_three_biggest_causes_turns_the_finding_of_the_tight_stacks(stack: str) -> None:
    text = WHEEL.read_text()
    biggest = [s.cause.key for s in review(WHEEL).results[stack].combined.shares[:3]]
    for cause in biggest:
        plan, twice = DOUBLED[cause]
        assert text.count(plan) == 1
        found = reviewed(text.replace(plan, twice))
        turned = [f for f in found.evaluation.findings if f.rule == "STACK-001" and f.key == stack]
        assert [f.verdict for f in turned] in (["warn"], ["fail"]), (cause, turned)
