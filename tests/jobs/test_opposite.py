"""Known run-outs of two parts, or of two devices, set against each other. Invented part and figures."""

from __future__ import annotations

import re

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.report.text import as_text
from tests.jobs.test_measuring import changed

TRUED = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
HIGH = "runout: {at_most: 10 um, measured: 8 um, uncertainty: 1 um, high_at: 30 deg}"
JOURNAL = "{of: journal, about: bearings, runout: 2 um}"
JOURNAL_HIGH = (
    "{{of: journal, about: bearings, runout: {{measured: {size} um, uncertainty: 0.5 um, high_at: {at} deg}}}}"
)
BY = "      by: shrink\n"


def joined(size: float = 6.0, at: float = 75.0, mounted: str | None = None) -> str:
    angle = () if mounted is None else ((BY, f"{BY}      mounted_at: {mounted}\n"),)
    return changed((TRUED, HIGH), (JOURNAL, JOURNAL_HIGH.format(size=size, at=at)), *angle)


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def value(text: str, name: str, kind: str = "join") -> object:
    found = judged(text)
    told = [found.book.get(name, s) for s in found.book.instances(kind)]
    known = [a.value for a in told if isinstance(a, Known)]
    return known[0] if known else None


def worst(text: str) -> float:
    return judged(text).results["run-out.wheel-teeth.spindle-bearings"].combined.worst.high


def advised(text: str) -> str:
    said = str(value(text, "opposite.says"))
    found = re.search(r"with its mark at (\d+) deg", said)
    assert found, said
    return found[1]


@pytest.mark.parametrize(("size", "at"), [(6.0, 75.0), (3.0, 200.0), (9.0, -40.0)])
def test_the_angle_that_is_advised_is_the_best_of_all_and_saves_what_is_said(size: float, at: float) -> None:
    text = joined(size, at)
    angle = advised(text)
    there = worst(joined(size, at, f"{angle} deg"))
    others = [worst(joined(size, at, f"{turn} deg")) for turn in range(0, 360, 15)]
    assert there <= min(others) + 1e-9
    assert worst(text) == pytest.approx(max(others), rel=0.01)  # nobody recorded the angle: the worst of all counts
    assert value(text, "opposite.saves") == pytest.approx(worst(text) - there, abs=1e-9)
    # two vectors e1, e2 that may add up and then stand against each other: twice the smaller, read twice by a dial
    assert worst(text) - there == pytest.approx(2.0 * min(size, 8.0) * 1e-3, rel=0.03)


def test_an_angle_that_is_fixed_is_compared_with_the_best_and_the_best_is_left_alone() -> None:
    best = advised(joined())
    worse = joined(mounted=f"{(int(best) + 180) % 360} deg")
    assert f"with its mark at {best} deg from the mark of spindle instead of" in str(value(worse, "opposite.says"))
    assert value(joined(mounted=f"{best} deg"), "opposite.says") is None
    assert value(joined(mounted=f"{best} deg"), "opposite.saves") == pytest.approx(0.0, abs=1e-6)


def test_the_report_says_it_once_and_the_rule_warns() -> None:
    found = judged(joined())
    (one,) = (f for f in found.evaluation.findings if f.rule == "PLACE-002")
    assert one.verdict == "warn"
    report = re.sub(r"\s+", " ", as_text(found))
    assert "op 70, mounting: Put wheel on spindle with its mark at" in report
    assert "run-out of hub in op 50 (high at 30 deg)" in report
    assert "run-out of journal (high at 75.0 deg)" in report


def test_less_than_a_micrometre_is_not_worth_a_word() -> None:
    little = joined(size=0.4)
    assert value(little, "opposite.says") is None
    (one,) = (f for f in judged(little).evaluation.findings if f.rule == "PLACE-002")
    assert one.verdict == "pass"


def test_one_direction_alone_is_nothing_to_set_against() -> None:
    assert value(changed((TRUED, HIGH)), "opposite.best") is None
    assert not [f for f in judged(changed((TRUED, HIGH))).evaluation.findings if f.rule == "PLACE-002"]


HELD = "centre: {on: hub, by: spigot, at: 23, clearance: [2 um, 8 um], rests: pushed, runout: 3 um}"


def chained(arbor: str, nose: str) -> str:
    return changed(
        (HELD, f"centre: {{on: hub, by: spigot, at: 23, clearance: [2 um, 8 um], runout: {arbor}, through: [{{by: spindle, runout: {nose}}}]}}")
    )  # fmt: skip


def measured(um: float) -> str:
    return f"{{measured: {um} um, uncertainty: 1 um}}"


def test_two_devices_measured_are_turned_against_each_other_and_it_saves_what_the_ledger_says() -> None:
    text = chained(measured(6), measured(4))
    said = str(value(text, "opposite.chain_says", "hold"))
    assert "Turn spigot and spindle so that their high spots stand opposite" in said
    assert "shows 2.0 um instead of up to 10.0 um" in said
    both, apart = worst(text), worst(chained(measured(2), "{measured: 0 um, uncertainty: 1 um}"))
    assert value(text, "opposite.chain_saves", "hold") == pytest.approx(both - apart, rel=1e-6)
    assert "op 40, devices: Turn spigot and spindle" in re.sub(r"\s+", " ", as_text(judged(text)))


@pytest.mark.parametrize("nose", ["4 um", measured(0.4)])
def test_a_device_only_planned_or_nearly_true_is_not_turned(nose: str) -> None:
    assert value(chained(measured(6), nose), "opposite.chain_says", "hold") is None
