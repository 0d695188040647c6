"""Shop paths: how findings, waivers and messages name an entry, and where it stands in the file."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from tests.bad_input.ring import JOINED, spoilt

TEXT = JOINED
for old, new in (
    ("runout: 3 um}", "runout: 3 um, through: [arbor,\n        {by: centres, runout: 3 um}]}"),
    (
        "against: spindle.shoulder}",
        "against: spindle.shoulder, spacers: [\n        {name: shim, length: 1.5 \u00b10.003}]}",
    ),
    ("require:\n", "waive: [{rule: HOLD-001, at: setups.20, reason: seen}]\nrequire:\n"),
):
    TEXT = spoilt(old, new, TEXT)
LINES = TEXT.splitlines()


@pytest.mark.parametrize(
    ("path", "stands"),
    [
        ("require[2]", "what: index-within"),
        ("require[2].at_most", "what: index-within"),
        ("parts.spindle.given[1].runout", "of: journal, about: bearings"),
        ("parts.spindle.given[2].face_runout", "of: shoulder, about: bearings"),
        ("setups.20.hold.centre.through[2].runout", "by: centres"),
        ("setups.20.hold.centre.through[1].runout", "through: [arbor,"),
        ("setups.30.join.stop.spacers[1].length", "name: shim"),
        ("setups.20.hold.square", "on: front, by: flange"),
        ("waive[1]", "rule: HOLD-001"),
        ("require.1", "what: index-within"),
        ("setups.20.cut.teeth.error", "teeth: {error: 20 um}"),
    ],
)
def test_a_path_leads_to_the_line_of_its_entry(path: str, stands: str) -> None:
    loaded = read_job_text(TEXT, "job.yaml")
    assert stands in LINES[loaded.line(path) - 1]


@pytest.mark.parametrize("path", ["require[0]", "require[99].at_most", "checked[1]", "title[1]", "setups.99.hold", ""])
def test_a_path_that_leads_nowhere_ends_at_the_nearest_entry_around_it(path: str) -> None:
    loaded = read_job_text(TEXT, "job.yaml")
    around = {"require": "run-out, of: ring.teeth", "setups": "op: 10", "title": "title:"}.get(
        path.split("[")[0].split(".")[0]
    )
    assert around is None or around in LINES[loaded.line(path) - 1]
    assert 1 <= loaded.line(path) <= len(LINES)


def test_a_name_with_points_or_brackets_is_one_step() -> None:
    text = spoilt("cut: {teeth: {error: 20 um}", "cut: {ring.teeth: {error: 20 um}", JOINED)
    assert ("setups", 1, "cut", "ring.teeth", "error") == read_job_text(text, "job.yaml").loc(
        "setups.20.cut.ring.teeth.error"
    )
    text = JOINED.replace("head-B", "head[2]")
    assert ("machines", "head[2]", "axis_runout") == read_job_text(text, "job.yaml").loc("machines.head[2].axis_runout")
