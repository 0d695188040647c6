"""How large a job may be: one beyond a count is refused in words, a large one ends with a review of finite numbers."""

from __future__ import annotations

import json

import pytest

from setupcheck.flow import review
from setupcheck.jobfile.counts import MOST_PARTS, MOST_REQUIREMENTS, MOST_SETUPS, MOST_SPACERS, MOST_SURFACES
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from tests.bad_input.ring import JOINED, RING, refused, spoilt, told
from tests.bench.largest import largest

SPACERS = ", ".join(f"{{name: shim{i}, length: 1 ±0.01}}" for i in range(MOST_SPACERS + 1))
BEYOND = {
    "parts": (
        RING.replace("machines:\n", "".join(f"  p{i}: {{surfaces: {{a: {{kind: bore, diameter: 9, from: 0, to: 1}}}}}}\n"
                                            for i in range(MOST_PARTS)) + "machines:\n"),
        f"the job has {MOST_PARTS + 1} parts, more than {MOST_PARTS}. Split it",
    ),
    "surfaces": (largest(10, MOST_SURFACES + 1, 10), f"the job has {MOST_SURFACES + 1} surfaces, more than {MOST_SURFACES}"),
    "setups": (largest(MOST_SETUPS + 1, 60, 10), f"the job has {MOST_SETUPS + 1} setups, more than {MOST_SETUPS}. Split it"),
    "requirements": (
        largest(10, 20, MOST_REQUIREMENTS + 1),
        f"the job has {MOST_REQUIREMENTS + 1} requirements, more than {MOST_REQUIREMENTS}. Split it",
    ),
    "spacers": (
        spoilt("against: spindle.shoulder}", f"against: spindle.shoulder, spacers: [{SPACERS}]}}", JOINED),
        f"the stop has {MOST_SPACERS + 1} spacers, more than {MOST_SPACERS}. Write those that always lie together as one",
    ),
}  # fmt: skip


@pytest.mark.parametrize("kind", BEYOND)
def test_one_entry_too_many_is_refused_with_its_place(kind: str) -> None:
    text, message = BEYOND[kind]
    said = [told(problem) for problem in refused(text).problems]
    assert any(message in one for one in said), said


def test_the_largest_job_is_read() -> None:
    job = read_job_text(largest(), "job.yaml").job
    counts = (len(job.setups), sum(len(part.surfaces) for part in job.parts.values()), len(job.require))
    assert (MOST_SETUPS, MOST_SURFACES, MOST_REQUIREMENTS) == counts


def test_a_large_job_ends_with_a_review_of_finite_numbers() -> None:
    found = review(read_job_text(largest(15, MOST_SURFACES, 15), "job.yaml"))
    assert found.results
    json.loads(as_json(found), parse_constant=lambda name: pytest.fail(name))
    assert "The largest job" in as_text(found)
