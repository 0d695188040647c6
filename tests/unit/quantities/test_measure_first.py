"""Which typical value to measure first: the share is what the job itself gives when both ends of the range are typed in."""

from __future__ import annotations

import json

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.measure_first import First
from setupcheck.report.json import as_json
from setupcheck.report.rests import first_of, usual
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped

HUB = shipped("jobs/coupling-hub.yaml").read_text(encoding="utf-8")
PARALLELS = "face_runout: 8 um, across: 150"
INDICATOR = "by: indicator, at: 60, runout: 15 um"
DIAL = "back: {error: 15 um}"
TAKEN = {
    PARALLELS: "face_runout: {device: parallels}, across: 150",
    INDICATOR: "by: indicator, at: 60, runout: {device: indicator}",
    DIAL: "back: {error: {device: dial-10um}}",
}
ENDS = {
    PARALLELS: "face_runout: END, across: 150",
    INDICATOR: "by: indicator, at: 60, runout: END",
    DIAL: "back: {error: END}",
}


def reviewed() -> Review:
    return review(read_job_text(_with(TAKEN), "hub.yaml"))


def _with(changes: dict[str, str]) -> str:
    text = HUB
    for old, new in changes.items():
        assert old in text, old
        text = text.replace(old, new)
    return text


def _firsts(found: Review) -> dict[str, First]:
    return {one.row.name: one for one in first_of(found)}


@pytest.mark.parametrize(
    ("name", "entry"),
    [("parallels face runout", PARALLELS), ("dial-10um reading", DIAL)],
)
def test_the_share_is_the_worst_case_at_both_ends_of_the_range(name: str, entry: str) -> None:
    one = _firsts(reviewed())[name]
    worst = []
    for end in (one.row.worst, one.row.best):
        job = _with({**TAKEN, entry: ENDS[entry].replace("END", f"{end * 1000:g} um")})
        found = review(read_job_text(job, "hub.yaml"))
        same = next(r for r in found.results.values() if r.stack.name == one.stack.name)
        worst.append(same.combined.worst.high)
    scale = next(r.scale for r in reviewed().results.values() if r.stack.name == one.stack.name)
    assert worst[0] - worst[1] == pytest.approx(one.moves, rel=1e-9)
    assert one.moves / scale == pytest.approx(one.share)


def test_the_largest_share_stands_first_and_each_stands_on_the_tightest_requirement_it_reaches() -> None:
    found = reviewed()
    ones = first_of(found)
    assert [one.share for one in ones] == sorted((one.share for one in ones), reverse=True)
    assert "parallels face runout" == ones[0].row.name
    for one in ones:
        reached = [
            r
            for r in found.results.values()
            if r.margin_share is not None
            and any(s.cause.rests_on == one.row.name and s.worst > 0 for s in r.combined.shares)
        ]
        mine = next(r for r in reached if r.stack.name == one.stack.name)
        assert min(r.margin_share or 0.0 for r in reached) == mine.margin_share


def test_the_review_says_it_in_one_block_and_json_too() -> None:
    found = reviewed()
    text = " ".join(as_text(found).split())
    assert "MEASURE FIRST, typical values by what their usual range moves of the tightest requirement" in text
    assert "parallels face runout (op 40), usually 3 um to 20 um: 38 % of the limit of squareness" in text
    told = json.loads(as_json(found))["measure_first"]
    assert ("parallels face runout", [40], 3.0, 20.0, "um") == tuple(
        told[0][key] for key in ("typical", "ops", "best", "worst", "unit")
    )


def test_a_job_of_its_own_figures_has_no_such_block() -> None:
    found = review(read_job_text(HUB, "hub.yaml"))
    assert () == first_of(found)
    assert "MEASURE FIRST" not in as_text(found)


def test_a_range_reads_in_the_units_of_the_job() -> None:
    row = _firsts(reviewed())["parallels face runout"].row
    assert "3 um to 20 um" == usual(row)
    assert "0.12 thou to 0.79 thou" == usual(row, inches=True)
