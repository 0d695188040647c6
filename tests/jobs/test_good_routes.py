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
    "rotator-worm-wheel": {
        "op 40, hub in spigot: clearance": ("clearance: [2 um, 8 um]", "clearance: [4 um, 16 um]"),
        "op 50, hub in four-jaw chuck: run-out": ("measured: 4 um", "measured: 8 um"),
        "op 40, hub in spigot: run-out": ("rests: pushed, runout: 3 um", "rests: pushed, runout: 6 um"),
        "housing, face to worm axis": ("length: 13.500 ±0.020", "length: 13.500 ±0.040"),
        "op 40, teeth: mid-plane found after tilt": (
            "found: after-tilt, error: 15 um",
            "found: after-tilt, error: 30 um",
        ),
        "op 40, stop on seat": ("stop:   {on: seat, error: 10 um}", "stop:   {on: seat, error: 20 um}"),
    },
    "coupling-hub": {
        "shaft, shoulder as bought: face run-out": ("face_runout: 8 um, across: 92", "face_runout: 16 um, across: 92"),
        "op 40, front on parallels: face run-out": (
            "face_runout: 8 um, across: 150",
            "face_runout: 16 um, across: 150",
        ),
        "shaft, seat as bought: run-out at its high end": (
            "of: seat, about: bearings, runout: 6 um",
            "of: seat, about: bearings, runout: 12 um",
        ),
    },
    "wheel-on-spindle": {
        "housing, face to worm axis": ("length: 12.000 ±0.020", "length: 12.000 ±0.040"),
        "op 50, teeth: mid-plane found after tilt": (
            "found: after-tilt, error: 15 um",
            "found: after-tilt, error: 30 um",
        ),
        "op 50, stop on spindle.collar": (
            """at: -120, runout: 8 um}
      stop:       {on: spindle.collar, error: 10 um}""",
            """at: -120, runout: 8 um}
      stop:       {on: spindle.collar, error: 20 um}""",
        ),
    },
    "bearing-ring-seat": {
        "ring, back as bought: face run-out": (
            "back, about: bore, face_runout: 3 um",
            "back, about: bore, face_runout: 6 um",
        ),
        "op 30, bore on its seat: run-out at its high end": ("fit_error: 1 um", "fit_error: 2 um"),
        "op 30, bore on its seat: run-out at its low end": ("fit_error: 1 um", "fit_error: 2 um"),
    },
}
TIGHT = (
    ("rotator-worm-wheel", "mid-plane.wheel-teeth.spindle-bearings"),
    ("rotator-worm-wheel", "backlash-swing.wheel-teeth.spindle-bearings"),
    ("coupling-hub", "squareness.hub-back.shaft-shoulder"),
    ("wheel-on-spindle", "mid-plane.wheel-teeth.spindle-bearings"),
    ("bearing-ring-seat", "squareness.ring-back.spindle-shoulder"),
)


@pytest.mark.parametrize("name", ["coupling-hub", "wheel-on-spindle", "bearing-ring-seat"])
def test_the_tight_stack_of_a_joined_job_is_its_tightest(name: str) -> None:
    results = review(shipped(f"jobs/{name}.yaml")).results
    shares = {key: r.margin_share for key, r in results.items() if r.margin_share is not None}
    assert (name, min(shares, key=lambda key: shares[key])) in TIGHT


@pytest.mark.parametrize(("name", "stack"), TIGHT)
def test_doubling_any_of_the_three_biggest_causes_turns_the_finding_of_the_tight_stacks(name: str, stack: str) -> None:
    text = shipped(f"jobs/{name}.yaml").read_text("utf-8")
    biggest = [s.cause.key for s in reviewed(text).results[stack].combined.shares[:3]]
    for cause in biggest:
        plan, twice = DOUBLED[name][cause]
        assert text.count(plan) == 1
        found = reviewed(text.replace(plan, twice))
        turned = [f for f in found.evaluation.findings if f.rule == "STACK-001" and f.key == stack]
        assert [f.verdict for f in turned] in (["warn"], ["fail"]), (cause, turned)


def test_the_fit_of_a_joint_in_mid_route_reaches_nothing_that_is_cut_after_it() -> None:
    text = shipped("jobs/wheel-on-spindle.yaml").read_text("utf-8")
    assert text.count("fit_error: 6 um ") == 1
    tight, loose = reviewed(text), reviewed(text.replace("fit_error: 6 um ", "fit_error: 50 um "))
    moved = {key for key, r in tight.results.items() if r.combined.worst != loose.results[key].combined.worst}
    assert moved == {"allowance.wheel-rim@40.spindle-bearings"}
    kept = [s.cause.key for key, r in tight.results.items() if key not in moved for s in r.combined.shares]
    assert len(kept) > 40
    assert [cause for cause in kept if cause.startswith("op 30")] == []


TRY_IT = {  # what the head of each job says to try, and the rules that speak then
    "coupling-hub": ("heat: {hub: 260 degC", "heat: {hub: 200 degC", {"HEAT-001"}),
    "bearing-ring-seat": (",\n         shaft: -40 degC, cold_by: freezer, cold_error: 2 K", "", {"HEAT-001"}),
    "splined-shaft": ("beside: 10 um", "beside: 60 um", {"STACK-001"}),
    "bevel-pinion-blank": ("blocks: 79.319", "blocks: 79.600", {"TILT-007"}),
    "sprocket": ("front: {error: 40 um,", "front: {error: 0.1 mm,", {"STACK-001", "STACK-002"}),
    "rotator-worm-wheel": (
        "centre: {on: hub, by: spigot, at: 23,",
        "centre: {on: rim, by: spigot, at: 12,",
        {"MESH-006", "STACK-001", "STACK-002"},
    ),
}


@pytest.mark.parametrize("name", TRY_IT)
def test_what_a_job_says_to_try_does_what_it_says(name: str) -> None:
    plan, instead, rules = TRY_IT[name]
    text = shipped(f"jobs/{name}.yaml").read_text("utf-8")
    assert "Try it: " in text
    assert text.count(plan) == 1
    spoken = {f.rule for f in reviewed(text.replace(plan, instead)).evaluation.findings if f.verdict != "pass"}
    assert spoken == rules
