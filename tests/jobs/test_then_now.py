"""Then and now: the plan beside what was measured, against two job files reviewed one by one. Invented part and figures."""

from __future__ import annotations

import json
import re

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.quantities.judged import Result
from setupcheck.quantities.then_now import as_planned
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped
from tests.jobs.test_measuring import changed

HELD = "centre: {on: hub, by: spigot, at: 23, clearance: [2 um, 8 um], rests: pushed, runout: 3 um}"
BOTH = HELD.replace("runout: 3 um", "runout: {at_most: 3 um, measured: 7 um, uncertainty: 1 um, high_at: 90 deg}")
ONLY = HELD.replace("runout: 3 um", "runout: {measured: 7 um, uncertainty: 1 um, high_at: 90 deg}")
TRUED = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
SHIM = "length: 1.500 ±0.003"
SHIM_BOTH = "length: {nominal: 1.500, lower: -0.003, upper: 0.003, measured: 1.5015 mm, uncertainty: 1 um}"
SHIM_ONLY = "length: {measured: 1.5015 mm, uncertainty: 1 um}"
ASKED = "  - {what: run-out, of: wheel.teeth, at_most: 30 um}\n"
MORE = ASKED + (
    "  - {what: squareness, of: wheel.back, about: spindle.shoulder, across: 90, at_most: 60 um}\n"
    "  - {what: mid-plane, at_most: 80 um}\n"
    "  - {what: length, of: wheel.back, about: spindle.shoulder, between: [1.4 mm, 1.6 mm]}\n"
)

AS_MEASURED = changed((HELD, BOTH), (ASKED, MORE), (SHIM, SHIM_BOTH))
PLAN_ONLY = changed((ASKED, MORE), (TRUED, "runout: 6 um"))
"""Written by hand: what the planner had before anything was measured, the thread apart, which no plan stands beside."""
MEASURED_ONLY = changed(
    (HELD, ONLY), (ASKED, MORE), (SHIM, SHIM_ONLY), (TRUED, "runout: {measured: 4 um, uncertainty: 1 um}")
)


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def numbers(result: Result) -> tuple[float, ...]:
    c = result.combined
    return (c.worst.low, c.worst.high, c.rss.high, c.likely.low, c.likely.high)


def then_of(found: Review) -> dict[str, Result]:
    told = {s.key: found.book.get("then.combined", s) for s in found.book.instances("stack")}
    return {key: a.value for key, a in told.items() if isinstance(a, Known) and isinstance(a.value, Result)}


def block(text: str) -> str:
    printed = as_text(judged(text))
    assert max(map(len, printed.splitlines())) <= 80
    cut = re.search(r"^THEN AND NOW.*?(?=\n\n)", printed, re.S | re.M)
    return re.sub(r"\s+", " ", cut[0]) if cut else ""


def test_then_is_the_plan_alone_and_now_is_the_measured_values_alone() -> None:
    both, plan, measured = (judged(text) for text in (AS_MEASURED, PLAN_ONLY, MEASURED_ONLY))
    then = then_of(both)
    assert "run-out.wheel-teeth.spindle-bearings" in then
    for key, result in then.items():
        assert numbers(result) == pytest.approx(numbers(plan.results[key]), rel=1e-9)
    for key, now in both.results.items():
        assert numbers(now) == pytest.approx(numbers(measured.results[key]), rel=1e-9)


def test_requirements_that_no_measured_value_reaches_are_left_alone() -> None:
    both, plan = judged(AS_MEASURED), judged(PLAN_ONLY)
    for key in set(both.results) - set(then_of(both)):
        assert numbers(both.results[key]) == pytest.approx(numbers(plan.results[key]), rel=1e-9)


def test_the_change_of_a_margin_is_the_difference_of_both_and_of_the_right_sign() -> None:
    found = judged(AS_MEASURED)
    key = "run-out.wheel-teeth.spindle-bearings"
    scope = next(s for s in found.book.instances("stack") if s.key == key)
    change = found.book.get("then.change", scope)
    then, now = then_of(found)[key], found.results[key]
    assert isinstance(change, Known)
    assert change.value == pytest.approx(then.combined.worst.high - now.combined.worst.high)
    assert change.value != 0.0


def test_the_report_says_then_now_and_which_way_the_margin_went() -> None:
    worse = block(changed((HELD, BOTH.replace("measured: 7 um", "measured: 9 um"))))
    assert "margin shrank by" in worse
    assert "both stay in the file" in worse
    assert "measured with no plan beside it, so known in both: thread thickness of the worm" in worse
    assert "not measured yet, where it pays most:" in worse
    better = block(changed((TRUED, TRUED.replace("measured: 4 um", "measured: 1 um"))))
    assert "margin grew by" in better
    assert "shrank" not in better


def test_a_job_without_a_measured_value_beside_a_plan_has_no_such_block_and_no_plan_is_walked() -> None:
    text = changed((TRUED, "runout: 6 um"))
    assert block(text) == ""
    loaded = read_job_text(text, "job.yaml")
    assert as_planned(loaded) == (loaded, ())
    found = judged(text)
    assert found.book.get("then.plan", found.book.instances("job")[0]) is None


def test_the_job_itself_keeps_its_measured_values() -> None:
    loaded = read_job_text(AS_MEASURED, "job.yaml")
    before = loaded.job.model_copy(deep=True)
    planned, aside = as_planned(loaded)
    assert loaded.job == before
    assert aside == (
        "setups.40.hold.centre.runout",
        "setups.50.hold.centre.runout",
        "setups.70.join.stop.spacers[1].length",
    )
    assert (
        planned.job
        == read_job_text(
            PLAN_ONLY.replace(SHIM, "length: {nominal: 1.500, lower: -0.003, upper: 0.003}"), "job.yaml"
        ).job
    )


def test_json_has_then_beside_each_stack() -> None:
    data = json.loads(as_json(judged(AS_MEASURED)))
    by_name = {s["name"]: s for s in data["stacks"]}
    told = by_name["run-out.wheel-teeth.spindle-bearings"]
    assert set(told["then"]) == {
        "worst", "rss", "likely", "chance", "chance_error", "causes", "margin", "margin_now"
    }  # fmt: skip
    assert told["then"]["margin_now"] == pytest.approx(30.0 - told["worst"])
    assert told["then"]["margin"] == pytest.approx(30.0 - told["then"]["worst"])
    plain = json.loads(as_json(judged(changed((TRUED, "runout: 6 um")))))
    assert all(s["then"] is None for s in plain["stacks"])


def test_what_is_measured_is_not_named_as_what_to_measure_next() -> None:
    said = block(AS_MEASURED).partition("where it pays most:")[2]
    assert "run-out of hub in four-jaw chuck" not in said
    assert "clearance of hub in spigot" in said


def test_what_was_drawn_for_now_and_taken_over_for_then_is_what_then_draws_by_itself() -> None:
    text = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
    dial = "{at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
    assert text.count(dial) == 1
    then, plan = then_of(judged(text)), judged(text.replace(dial, "6 um"))
    assert {"cumulative-pitch", "index-within", "run-out", "backlash"} <= {key.partition(".")[0] for key in then}
    for key, result in then.items():
        assert numbers(result) == numbers(plan.results[key]), key
