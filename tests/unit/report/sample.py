"""Jobs for the tests of the reports: the shipped ones with pieces exchanged."""

from __future__ import annotations

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.shipped import shipped

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
PLATE = shipped("jobs/index-plate.yaml").read_text(encoding="utf-8")
GEAR = shipped("jobs/spur-gear-on-mandrel.yaml").read_text(encoding="utf-8")


def changed(text: str, *changes: tuple[str, str]) -> str:
    """The text with pieces exchanged, each of which must be there."""
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    return text


def loaded(text: str) -> LoadedJob:
    return read_job_text(text, "job.yaml")


def reviewed(text: str) -> Review:
    return review(loaded(text))


def flat(text: str) -> str:
    """A report as one line, so that a test need not know where it was wrapped."""
    return " ".join(text.split())


def line_of(text: str, piece: str) -> int:
    """Line of the first line that holds a piece of text."""
    return next(number for number, line in enumerate(text.splitlines(), 1) if piece in line)
