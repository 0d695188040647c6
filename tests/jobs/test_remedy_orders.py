"""Other datums, witness surfaces and orders: each does what it says on a copy of the job and spoils nothing."""

from __future__ import annotations

from dataclasses import replace

import pytest

from setupcheck.flow import mend, review
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Exchange
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.proposals import worst_of
from setupcheck.quantities.rehold import reholds
from setupcheck.quantities.trials import Bench
from setupcheck.quantities.witness import witnesses
from setupcheck.report.remedy import as_text
from tests.jobs.remedy_cases import HIDDEN, job, judged, mended, outside, texts
from tests.jobs.remedy_jobs import (
    COVERED_BORE,
    edits_in,
    proposals_in,
)

# -- other datums and orders


PROPOSED = (
    HIDDEN,
    "datum-cut-away",
    "held twice",
    "an edge finder in a hurry",
    "a covered bore",
    "the wrong order",
    "squared on the wrong face",
    "stopped on the wrong face",
)


@pytest.mark.parametrize("name", PROPOSED)
def test_a_proposal_does_what_it_says_and_spoils_nothing(name: str) -> None:
    before, all_of_it = mended(name)
    text = as_text(before, all_of_it)
    printed = proposals_in(text)
    assert len(printed) == len(all_of_it.proposals) > 0
    for said, one in zip(printed, all_of_it.proposals, strict=True):
        edits = edits_in(said)
        assert tuple(edits) == one.edits
        after = judged(name, edits)
        share = after.results[one.key].margin_share
        assert share == pytest.approx(one.after, abs=1e-9)
        assert outside(before) - outside(after) == set(one.cures)
        assert len(outside(after)) == one.left
        assert outside(after) <= outside(before)
        counts, were = after.evaluation.counts, before.evaluation.counts
        assert counts["fail"] <= were["fail"] and counts["open"] <= were["open"]


def test_a_witness_is_offered_where_the_finished_bore_is_covered() -> None:
    text = as_text(*mended("a covered bore"))
    first = " ".join(proposals_in(text)[0].split())
    assert first.startswith(
        "1 Leave a 3 mm band on outside, turned with back and bore in op 20, and indicate it to 10 um in op 40 instead of "
        "outside. run-out at collar about bore 51.6 um -> 20.9 um, at most 30.0 um; no requirement stays outside."
    )
    assert "parts, disc, surfaces: band-20: {kind: cylinder, diameter: 89.5, from: 0, to: 3}" in first


def test_a_witness_is_not_turned_under_the_jaws() -> None:
    covered = COVERED_BORE.replace("grip: {from: 20, to: 38}", "grip: {from: 1, to: 38}")
    _, all_of_it = mend(read_job_text(covered, "job.yaml"))
    assert not [p for p in all_of_it.proposals if p.idea.kind == "witness"]


def test_a_witness_is_not_turned_on_a_surface_with_limits_or_under_teeth() -> None:
    for old, new in (
        ("outside: {kind: cylinder, diameter: 90,", "outside: {kind: cylinder, diameter: 90 h7,"),
        ("collar:  {", "gear: {kind: teeth, count: 60, on_circle: 86, at: 5, width: 12}\n      collar:  {"),
    ):
        _, all_of_it = mend(read_job_text(COVERED_BORE.replace(old, new), "job.yaml"))
        bands = [p for p in all_of_it.proposals if p.idea.kind == "witness" and p.idea.by]
        assert not bands, new


def test_the_better_order_is_found_and_reviews_better() -> None:
    _, all_of_it = mended("the wrong order")
    first = all_of_it.proposals[0]
    assert first.edits == (Exchange(20, 30),)
    after = judged("the wrong order", first.edits)
    assert [s.op for s in after.loaded.job.setups] == [10, 20, 30]
    assert not outside(after)
    assert first.cautions == ()


@pytest.mark.parametrize(
    ("name", "says", "key"),
    [
        (
            "squared on the wrong face",
            "Square op 40 on front, finished in op 20, instead of step, to 5.0 um.",
            "square",
        ),
        ("stopped on the wrong face", "Stop op 40 on front, finished in op 20, instead of step.", "stop"),
    ],
)
def test_the_face_that_was_made_with_the_datum_is_named(name: str, says: str, key: str) -> None:
    found, all_of_it = mended(name)
    one = next(p for p in all_of_it.proposals if p.idea.kind == key)
    assert [e.key for e in one.edits if isinstance(e, Change)] == [f"setups.40.hold.{key}"]
    assert says in " ".join(as_text(found, all_of_it).split())
    assert [p.idea.kind for p in all_of_it.proposals if p.idea.also is not None] == []  # it adds nothing to that


def test_a_dial_on_the_same_datum_is_named_where_none_trues_it() -> None:
    found, all_of_it = mended("an edge finder in a hurry")
    first = all_of_it.proposals[0]
    assert (first.idea.on, first.idea.was, first.idea.than) == ("bore", "bore", "edge-finder")
    text = " ".join(as_text(found, all_of_it).split())
    assert "True bore in op 30 by indicator to 0.30 thou; now it is found by edge finder." in text
    assert not outside(judged("an edge finder in a hurry", first.edits))


def test_the_most_routes_that_are_tried_are_kept_to_and_said() -> None:
    found = review(job("the wrong order"))
    bench = Bench(found.loaded, found.floor, found.results, most=2)
    key = worst_of(bench)
    assert key is not None
    tried = [*reholds(bench, key), *witnesses(bench, key)]
    assert bench.walks == 2 and bench.met
    assert len(tried) <= 2
    _, whole = mended("the wrong order")
    text = as_text(found, replace(whole, met=True, proposals=()))
    assert "The most routes that are tried in one run were tried; there may be better ones." in " ".join(text.split())


def test_an_order_that_needs_what_comes_later_is_not_offered() -> None:
    text = texts()["the wrong order"].replace("centre: {on: nose, by: soft-jaws, runout: 30 um}",
                                              "centre: {on: bore, by: expanding-mandrel, runout: 30 um}")  # fmt: skip
    _, all_of_it = mend(read_job_text(text.replace("state: rough}", "state: rough}  #"), "job.yaml"))
    assert not [p for p in all_of_it.proposals if p.idea.kind == "swap"]


def test_two_holdings_that_could_be_one_are_named() -> None:
    found, all_of_it = mended("held twice")
    (one,) = all_of_it.proposals
    after = judged("held twice", edits_in(proposals_in(as_text(found, all_of_it))[0]))
    assert one.saves == 1
    holds = [sum(s.hold is not None for s in r.loaded.job.setups) for r in (found, after)]
    assert holds[1] == holds[0] - 1
    assert ["HOLD-014"] == [f.rule for f in found.evaluation.findings if f.verdict != "pass"]
    assert after.verdict == "pass"
    for key, result in found.results.items():
        margin = after.results[key].margin
        assert margin is not None and result.margin is not None and margin >= result.margin - 1e-9
