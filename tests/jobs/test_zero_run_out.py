"""A run-out of nothing: nobody is told to write twice that."""

from __future__ import annotations

from setupcheck.flow import review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import read_job
from setupcheck.shipped import shipped


def remedy_of(rule: str, key: str, value: str) -> str:
    job = changed(read_job(shipped("jobs/sprocket.yaml")), [Change(key, value)])
    found = review(job).evaluation.findings
    return next(one.remedy for one in found if one.rule == rule and one.verdict == "warn")


def test_a_device_without_error_is_answered_with_what_is_usual() -> None:
    told = remedy_of("HOLD-011", "setups.30.hold.centre.runout", "0 um")
    assert told.startswith("No device runs without error. Usual of expanding-mandrel: 5.0 um to 20.0 um;")
    assert "twice the eccentricity" in remedy_of("HOLD-011", "setups.30.hold.centre.runout", "1 um")


def test_an_axis_without_error_is_answered_with_what_is_usual() -> None:
    machine = next(iter(read_job(shipped("jobs/sprocket.yaml")).job.machines))
    told = remedy_of("HOLD-015", f"machines.{machine}.axis_runout", "0 um")
    assert told.startswith("No axis runs without error. Usual of a ")
