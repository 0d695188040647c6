"""Mistakes of the route rather than of the file: they are findings, with their line, and the review goes on."""

from __future__ import annotations

import json

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.working import as_working
from tests.bad_input.ring import RING, spoilt


def reviewed(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


@pytest.mark.parametrize(
    ("old", "new", "finding"),
    [
        (
            "rim: {}, hub: {}, bore: {}",
            "rim: {}, hub: {}",
            ("DATUM-001", 30, "op 20 is set on bore, which no earlier setup has made"),
        ),
        (
            "front: {removes: [bar]}",
            "front: {removes: [bar, bore]}",
            ("DATUM-002", 30, "op 20 is set on bore, which an earlier setup has cut away"),
        ),
        (
            "hold:\n      centre: {on: bar, by: three-jaw, at: -20",
            "hold:\n      centre: {on: hub, by: three-jaw, at: 25",
            ("DATUM-004", 23, "op 10 is set on hub, which is first cut in that same holding"),
        ),
    ],
    ids=["never-made", "cut-away", "cut-in-the-same-holding"],
)
def test_a_datum_that_is_not_there_is_a_failure_of_the_route(old: str, new: str, finding: tuple[str, int, str]) -> None:
    found = reviewed(spoilt(old, new))
    failed = [
        (f.rule, f.line, f.message)
        for f in found.evaluation.findings
        if f.verdict == "fail" and f.rule.startswith("DATUM")
    ]
    assert [finding] == failed
    assert "fail" == found.verdict


ESCAPE = r"\e[31m\u202e\e]0;owned\a"
WRITTEN = {
    "title": ("title: Ring gear blank", f'title: "Ring gear blank{ESCAPE}"'),
    "job number": ("title: Ring gear blank", f'title: Ring gear blank\njob: "R-1{ESCAPE}"'),
    "device": ("by: flange", f'by: "flange{ESCAPE}"'),
    "requirement": ("at_most: 90 um", f'at_most: 90 um, name: "ring{ESCAPE}"'),
    "spacer": ("error: 10 um}", f'error: 10 um, spacers: [{{name: "shim{ESCAPE}", length: 1.5 \u00b10.005}}]}}'),
    "under a device": ("runout: 3 um}", f'runout: 3 um, through: [{{by: "centres{ESCAPE}", runout: 3 um}}]}}'),
    "marked device": ("runout: 3 um}", f'runout: {{at_most: 3 um, device: "arbor{ESCAPE}", mark: kept}}}}'),
    "waiver": ("require:\n", f'waive: [{{rule: HOLD-001, at: "setups.20{ESCAPE}", reason: "seen{ESCAPE}"}}]\nrequire:\n'),
    "answer": ("require:\n", f'checked: [{{caution: glove-heat-rating, op: 20, by: "me{ESCAPE}"}}]\nrequire:\n'),
}  # fmt: skip


@pytest.mark.parametrize("place", WRITTEN)
def test_what_a_terminal_would_obey_is_taken_out_of_every_text_of_a_job(place: str) -> None:
    found = reviewed(spoilt(*WRITTEN[place]))
    for text in (as_text(found, everything=True), as_working(found.loaded, found.book, "stack.worst")):
        assert [] == [line for line in text.split("\n") if not line.isprintable()]
    assert not set(as_json(found)) & {"\x1b", "\x07"}  # data keep what was written, as JSON escapes
    assert json.loads(as_json(found))["format"] == 1


def test_a_requirement_without_a_surface_is_open_and_names_the_key_to_fill() -> None:
    found = reviewed(RING + "  - {what: allowance, at_least: 0.1 mm}\n")
    opened = [f.missing for f in found.evaluation.findings if f.verdict == "open" and f.rule.startswith("STACK")]
    assert ("require[3].of",) in opened
    assert "open" == found.verdict
