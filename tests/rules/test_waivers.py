"""Waivers: what is accepted, what is refused, and that neither ever goes unseen."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from setupcheck.errors import RuleBookError
from setupcheck.rulebook import Finding, Waiver, evaluate, verdict

from .bookshelf import QUANTITIES, load
from .fakebook import FakeBook, FakeScope, Has, Lacks, facts_from

PLACE = "setups.10.hold.centre"
TOO_MUCH = Has(0.025)
GOOD = Waiver("HOLD-001", PLACE, "trial cut watched", "2027-03-31", "waive.0", 88)


def run(folder: Path, *waivers: Waiver, value: Any = TOO_MUCH, on: str | None = "2027-03-31") -> tuple[Finding, ...]:
    fake = FakeBook(QUANTITIES, [FakeScope("hold", "10/centre", PLACE, 10, 22)], {"hold.runout": value})
    return evaluate(load(folder), fake, facts_from({}), waivers=waivers, on=on).findings


def about(findings: tuple[Finding, ...]) -> list[tuple[str, str, str, str]]:
    return [(f.rule, f.verdict, f.message, f.remedy) for f in findings if f.rule.startswith("WAIVE")]


def test_a_waived_finding_keeps_its_numbers_and_shows_the_reason(tmp_path: Path) -> None:
    (finding,) = run(tmp_path, GOOD)
    assert ("waived", "trial cut watched (until 2027-03-31)", 0.025) == (finding.verdict, finding.waiver, finding.value)
    assert "pass" == verdict([finding])


def test_the_last_day_of_a_waiver_still_counts_and_the_next_does_not(tmp_path: Path) -> None:
    assert ["waived"] == [f.verdict for f in run(tmp_path, GOOD, on="2027-03-31")]
    findings = run(tmp_path, GOOD, on="2027-04-01")
    assert [("HOLD-001", "fail"), ("WAIVE-003", "warn")] == sorted((f.rule, f.verdict) for f in findings)


def test_an_instance_may_be_named_by_its_key_as_well_as_by_its_path(tmp_path: Path) -> None:
    assert ["waived"] == [f.verdict for f in run(tmp_path, Waiver("HOLD-001", "10/centre", "watched"))]


def test_an_open_finding_can_be_waived(tmp_path: Path) -> None:
    assert ["waived"] == [f.verdict for f in run(tmp_path, GOOD, value=Lacks((f"{PLACE}.runout",)))]


def test_without_a_day_of_judging_an_end_cannot_be_judged_and_nothing_is_waived(tmp_path: Path) -> None:
    findings = run(tmp_path, GOOD, on=None)
    assert ["fail"] == [f.verdict for f in findings if f.rule == "HOLD-001"]
    message = (
        "cannot tell: the waiver of HOLD-001 at setups.10.hold.centre ends on 2027-03-31 and no day of judging is given"
    )
    assert [("WAIVE-003", "open", message, "Give the day with --on.")] == about(findings)
    assert ("--on",) == next(f.missing for f in findings if f.rule == "WAIVE-003")


def test_a_waiver_without_an_end_needs_no_day(tmp_path: Path) -> None:
    assert ["waived"] == [f.verdict for f in run(tmp_path, Waiver("HOLD-001", PLACE, "watched"), on=None)]


def test_a_waiver_of_a_finding_that_passes_is_told(tmp_path: Path) -> None:
    findings = run(tmp_path, GOOD, value=Has(0.01))
    message = "HOLD-001 at setups.10.hold.centre passes, so its waiver waives nothing"
    assert [("WAIVE-002", "warn", message, "Take the waiver out.")] == about(findings)
    assert ["pass"] == [f.verdict for f in findings if f.rule == "HOLD-001"]


def test_a_second_waiver_of_the_same_finding_is_told(tmp_path: Path) -> None:
    message = "HOLD-001 at setups.10.hold.centre is waived twice"
    assert [("WAIVE-002", "warn", message, "Take the waiver out.")] == about(run(tmp_path, GOOD, GOOD))


@pytest.mark.parametrize(
    ("waiver", "message", "remedy"),
    [
        (Waiver("HOLD-002", PLACE, "x"), "there is no rule HOLD-002 to waive", "Did you mean HOLD-001?"),
        (Waiver("X", PLACE, "x"), "there is no rule X to waive", "`setupcheck rules` lists them."),
        (Waiver("HOLD-001", "setups.10.hold.center", "x"),
         "HOLD-001 has no finding at 'setups.10.hold.center' to waive", "Did you mean setups.10.hold.centre?"),
        (Waiver("HOLD-001", "", "x"),
         "HOLD-001 has no finding at '' to waive", "It has a finding at: setups.10.hold.centre."),
        (Waiver("HOLD-001", PLACE, "  "), "the waiver of HOLD-001 at setups.10.hold.centre gives no reason",
         "Write why it is accepted."),
        (Waiver("press-force", PLACE, "x"), "press-force is a caution, and cautions are never waived",
         "Take the waiver out and answer the caution under checked."),
        (Waiver("WAIVE-003", "waive.0", "x"), "there is no rule WAIVE-003 to waive", "`setupcheck rules` lists them."),
    ],
)  # fmt: skip
def test_a_waiver_that_names_nothing_fails_and_waives_nothing(
    tmp_path: Path, waiver: Waiver, message: str, remedy: str
) -> None:
    findings = run(tmp_path, waiver)
    assert [("WAIVE-001", "fail", message, remedy)] == about(findings)
    assert ["fail"] == [f.verdict for f in findings if f.rule == "HOLD-001"]


def test_an_end_that_is_no_date_fails(tmp_path: Path) -> None:
    message = "the waiver of HOLD-001 at setups.10.hold.centre ends on '31.3.2027', which is no date"
    remedy = "Write year-month-day, as in 2027-03-31."
    assert [("WAIVE-003", "warn", message, remedy)] == about(run(tmp_path, Waiver("HOLD-001", PLACE, "x", "31.3.2027")))


def test_a_finding_about_a_waiver_stands_at_the_waiver(tmp_path: Path) -> None:
    finding = next(f for f in run(tmp_path, GOOD, on="2028-01-01") if f.rule == "WAIVE-003")
    assert ("waive.0", 88, None) == (finding.at, finding.line, finding.op)


def test_a_day_of_judging_that_is_no_date_is_refused(tmp_path: Path) -> None:
    with pytest.raises(RuleBookError, match=r"^--on: 'today' is not a date. Write year-month-day, as in 2027-03-31$"):
        run(tmp_path, GOOD, on="today")
