"""The jobs whose remedies are tried: shipped ones, their mistakes, single slips, and small jobs made for it."""

from __future__ import annotations

from functools import cache

from setupcheck.flow import Review, mend, review
from setupcheck.jobfile.editing import edited
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.mending import Mended
from setupcheck.shipped import shipped
from tests.jobs.remedy_jobs import (
    COVERED_BORE,
    DEPTH,
    SQUARENESS,
    WRONG_FACE,
    WRONG_ORDER,
    held_twice,
)
from tests.jobs.test_typed_back import SPOILT

GOOD = sorted(shipped("jobs").glob("*.yaml"))
MISTAKES = sorted((shipped("jobs") / "mistakes").glob("*.yaml"))
HIDDEN = "hidden-chuck-run-out"
SLIPS = (
    "a measured hold gone bad, high spot known",
    "a head with a poor wheel",
    "an insert badly measured",
    "a worn mandrel",
    "an edge finder in a hurry",
    "a reamer that wanders",
)
"""Jobs with one entry spoilt, of those whose remedies are typed back elsewhere."""


@cache
def texts() -> dict[str, str]:
    """Every job that is tried here."""
    found = {path.stem: path.read_text("utf-8") for path in (*GOOD, *MISTAKES)}
    for name in SLIPS:
        stem, good, bad = SPOILT[name]
        found[name] = found[stem].replace(good, bad)
    return {
        **found,
        "a covered bore": COVERED_BORE,
        "held twice": held_twice(),
        "the wrong order": WRONG_ORDER,
        "squared on the wrong face": WRONG_FACE.replace("LENGTH", SQUARENESS),
        "stopped on the wrong face": WRONG_FACE.replace("LENGTH", DEPTH),
    }


def job(name: str) -> LoadedJob:
    return read_job_text(texts()[name], "job.yaml")


@cache
def mended(name: str) -> tuple[Review, Mended]:
    return mend(job(name))


FAILING = [HIDDEN, "datum-cut-away", "angle-of-the-tip", "shim-on-the-wrong-side", *SLIPS]


def outside(found: Review) -> set[str]:
    return {key for key, r in found.results.items() if r.margin is not None and r.margin < 0.0}


def judged(name: str, edits: object) -> Review:
    return review(edited(job(name), edits))  # type: ignore[arg-type]
