"""Judging a whole job: instances, facts, absence, house limits, order, counts and verdict."""

from __future__ import annotations

import math
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest

from setupcheck.errors import HouseError, RuleBookError
from setupcheck.rulebook import (
    CautionLine,
    Evaluation,
    Finding,
    Unknown,
    evaluate,
    ordered,
    verdict,
)
from setupcheck.rulebook.house_file import load_house

from .bookshelf import QUANTITIES, RULE, load
from .fakebook import FakeBook, FakeScope, Has, Lacks, facts_from

UM = 0.001
HOLDS = [
    FakeScope("hold", "20/centre", "setups.20.hold.centre", 20, 31),
    FakeScope("hold", "10/centre", "setups.10.hold.centre", 10, 22),
]


def run(folder: Path, values: dict[Any, Any], *, rule: str = RULE, facts: dict[str, Any] | None = None,
        scopes: list[FakeScope] | None = None, **kwargs: Any) -> Evaluation:  # fmt: skip
    book = load(folder, hold=rule)
    fake = FakeBook(QUANTITIES, HOLDS if scopes is None else scopes, values)
    return evaluate(book, fake, facts_from(facts or {}), **kwargs)


def test_a_rule_runs_once_for_every_instance_of_its_quantity(tmp_path: Path) -> None:
    done = run(tmp_path, {("hold.runout", "10/centre"): Has(0.018), ("hold.runout", "20/centre"): Has(0.025)})
    assert [
        ("fail", "setups.20.hold.centre", 20, 31, "op 20: 20/centre runs out 25.0 um, 20.0 um allowed"),
        ("pass", "setups.10.hold.centre", 10, 22, "op 10: 10/centre runs out 18.0 um, 20.0 um allowed"),
    ] == [(f.verdict, f.at, f.op, f.line, f.message) for f in done.findings]


def test_a_finding_carries_numbers_in_base_units_and_how_to_show_them(tmp_path: Path) -> None:
    finding = run(tmp_path, {"hold.runout": Has(0.018, frozenset({"four-jaw"}))}).findings[0]
    assert (0.018, 0.020, "um", 1, ("four-jaw",)) == (
        finding.value, finding.limit, finding.unit, finding.digits, finding.rests_on,
    )  # fmt: skip
    assert finding.margin == pytest.approx(0.002, abs=1e-12)
    assert "from memory" == finding.evidence


def test_what_the_job_does_not_have_is_counted_and_not_judged(tmp_path: Path) -> None:
    done = run(tmp_path, {("hold.runout", "10/centre"): Has(0.018)})
    assert ["setups.10.hold.centre"] == [f.at for f in done.findings]
    assert {"HOLD-001": 1} == done.not_applicable


def test_a_rule_that_finds_no_instance_is_named_idle(tmp_path: Path) -> None:
    done = run(tmp_path, {}, scopes=[])
    assert ((), {}, ("HOLD-001",)) == (done.findings, done.not_applicable, done.idle)


def test_a_missing_number_is_open_and_never_a_pass(tmp_path: Path) -> None:
    finding = run(tmp_path, {"hold.runout": Lacks(("setups.10.hold.centre.runout",))}).findings[0]
    assert ("open", None, None, ("setups.10.hold.centre.runout",)) == (
        finding.verdict, finding.value, finding.margin, finding.missing,
    )  # fmt: skip


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf])
def test_a_number_that_is_not_finite_is_absence(tmp_path: Path, value: float) -> None:
    finding = run(tmp_path, {"hold.runout": Has(value)}).findings[0]
    assert ("open", "cannot tell: hold.runout has no finite value") == (finding.verdict, finding.message)


def test_a_limit_that_is_not_finite_is_absence_too(tmp_path: Path) -> None:
    rule = RULE.replace("20 um", "{quantity: hold.plan}")
    finding = run(tmp_path, {"hold.runout": Has(0.01), "hold.plan": Has(math.nan)}, rule=rule).findings[0]
    assert ("open", "cannot tell: hold.plan has no finite value") == (finding.verdict, finding.message)


def test_a_limit_the_job_lacks_altogether_makes_the_rule_not_applicable(tmp_path: Path) -> None:
    rule = RULE.replace("20 um", "{quantity: hold.plan}")
    done = run(tmp_path, {"hold.runout": Has(0.01)}, rule=rule)
    assert ((), {"HOLD-001": 2}) == (done.findings, done.not_applicable)


def test_a_limit_from_another_quantity_is_taken_times_its_factor(tmp_path: Path) -> None:
    rule = RULE.replace("20 um", "{quantity: hold.plan, times: 0.5}")
    values = {"hold.runout": Has(0.012), "hold.plan": Has(0.020, frozenset({"collet"}))}
    finding = run(tmp_path, values, rule=rule).findings[0]
    assert ("fail", 0.010, ("collet",)) == (finding.verdict, finding.limit, finding.rests_on)


def test_a_word_where_a_number_belongs_is_our_bug_and_keeps_its_traceback(tmp_path: Path) -> None:
    with pytest.raises(TypeError, match="is a word, rule HOLD-001 compares numbers"):
        run(tmp_path, {"hold.runout": Has("small")})


def test_a_truth_value_is_no_number(tmp_path: Path) -> None:
    with pytest.raises(TypeError, match="neither a number nor a word: True"):
        run(tmp_path, {"hold.runout": Has(True)})


WHEN = RULE + "  applies_when: {hold.by: [spigot, collet], setup.machine_kind: lathe}\n"


@pytest.mark.parametrize(
    ("facts", "count"),
    [
        ({"hold.by": "collet", "setup.machine_kind": "lathe"}, 2),
        ({"hold.by": "four-jaw", "setup.machine_kind": "lathe"}, 0),
        ({"hold.by": "collet", "setup.machine_kind": "mill"}, 0),
        ({"hold.by": "collet"}, 0),  # this kind of thing has no such fact
        ({"hold.by": Unknown("setups.10.hold.centre.by"), "setup.machine_kind": "mill"}, 0),  # one clear no decides
    ],
)
def test_fields_are_joined_by_and_values_by_or(tmp_path: Path, facts: dict[str, Any], count: int) -> None:
    done = run(tmp_path, {"hold.runout": Has(0.01)}, rule=WHEN, facts=facts)
    assert count == len(done.findings)
    assert 2 - count == done.not_applicable.get("HOLD-001", 0)


def test_a_fact_left_out_of_the_job_is_open_with_its_key(tmp_path: Path) -> None:
    facts = {"hold.by": Unknown("setups.10.hold.centre.by"), "setup.machine_kind": "lathe"}
    finding = run(tmp_path, {"hold.runout": Has(0.01)}, rule=WHEN, facts=facts).findings[0]
    assert ("open", "cannot tell: fill setups.10.hold.centre.by", ("setups.10.hold.centre.by",)) == (
        finding.verdict, finding.message, finding.missing,
    )  # fmt: skip


def test_yes_is_not_the_number_one(tmp_path: Path) -> None:
    rule = RULE + "  applies_when: {head.tilted: true}\n"
    assert 2 == len(run(tmp_path, {"hold.runout": Has(0.01)}, rule=rule, facts={"head.tilted": True}).findings)
    assert 0 == len(run(tmp_path, {"hold.runout": Has(0.01)}, rule=rule, facts={"head.tilted": 1}).findings)


def test_braces_in_a_name_of_the_job_stay_as_they_are(tmp_path: Path) -> None:
    finding = run(tmp_path, {"hold.runout": Has(0.01)}, facts={"instance.name": "{limit}{x}"}).findings[0]
    assert "op 10: {limit}{x} runs out 10.0 um, 20.0 um allowed" == finding.message


@pytest.mark.parametrize(("path", "filled"), [("setups.10", "setups.10.hold.square"), ("", "hold.square")])
def test_a_rule_that_asks_for_an_entry_names_it_at_the_instance(tmp_path: Path, path: str, filled: str) -> None:
    rule = RULE.replace("level: fail", "level: open") + "  asks_for: .hold.square\n"
    scope = FakeScope("hold", "10", path, 10)
    finding = run(tmp_path, {"hold.runout": Has(0.025)}, rule=rule, scopes=[scope]).findings[0]
    assert ("open", (filled,)) == (finding.verdict, finding.missing)


# -- house limits


HOUSE = """\
house: Bay 2
limits:
  - {rule: HOLD-001, limit: 30 um, who: K. Lind, why: worn hubs, when: 2027-01-15}
"""
CHANGEABLE = RULE + "  house_may_change: {from: 10 um, to: 40 um}\n"


def house(folder: Path, text: str) -> Any:
    path = folder / "house.yaml"
    path.write_text(text, encoding="utf-8")
    return load_house(path, load(folder, hold=CHANGEABLE), quantities=QUANTITIES)


def test_a_house_limit_takes_the_place_of_the_books_own_and_says_so(tmp_path: Path) -> None:
    own = house(tmp_path, HOUSE)
    finding = run(tmp_path, {"hold.runout": Has(0.025)}, rule=CHANGEABLE, house=own).findings[0]
    assert ("pass", 0.030) == (finding.verdict, finding.limit)
    assert "house limit 30 um of Bay 2 (K. Lind, 2027-01-15: worn hubs)" == finding.house
    assert "" == run(tmp_path, {"hold.runout": Has(0.025)}, rule=CHANGEABLE).findings[0].house


def test_a_house_limit_works_from_below_too(tmp_path: Path) -> None:
    rule = CHANGEABLE.replace("at_most", "at_least")
    own = house(tmp_path, HOUSE)
    done = run(tmp_path, {"hold.runout": Has(0.025)}, rule=rule, house=own)
    assert ["fail", "fail"] == [f.verdict for f in done.findings]


@pytest.mark.parametrize(
    ("change", "says"),
    [
        (("HOLD-001", "HOLD-010"), "house.yaml:3  there is no rule 'HOLD-010'. Did you mean HOLD-001?"),
        (("30 um", "41 um"), "house.yaml:3  HOLD-001 may be set from 10 um to 40 um, not to 41 um. "
                             "Write a limit inside that span"),
        (("30 um", "5 um"), "house.yaml:3  HOLD-001 may be set from 10 um to 40 um, not to 5 um. "
                            "Write a limit inside that span"),
        (("30 um", "30 arcsec"), "house.yaml:3  '30 arcsec' is no length. Write the limit in um"),
        ((", why: worn hubs", ""), "house.yaml:3  'why' is missing. Write why: and its value"),
        (("worn hubs", "' '"), "house.yaml:3  'why' is blank. Write the text of why"),
        (("who: K. Lind, ", ""), "house.yaml:3  'who' is missing. Write who: and its value"),
        (("2027-01-15", "2027-02-30"), "house.yaml:3  '2027-02-30' is not a date. "
                                       "Write year-month-day, as in 2027-01-15"),
        (("why:", "wy:"), "house.yaml:3  there is no key 'wy'. Did you mean why?"),
    ],
)  # fmt: skip
def test_a_house_file_is_held_to_the_rule_book(tmp_path: Path, change: tuple[str, str], says: str) -> None:
    with pytest.raises(RuleBookError) as refused:
        house(tmp_path, HOUSE.replace(*change))
    assert [f"{tmp_path}/{says}", HouseError.HOLDS] == str(refused.value).splitlines()


def test_a_rule_that_opens_nothing_to_houses_cannot_be_changed(tmp_path: Path) -> None:
    path = tmp_path / "house.yaml"
    path.write_text(HOUSE, encoding="utf-8")
    with pytest.raises(RuleBookError, match="HOLD-001 has no limit that a house may change"):
        load_house(path, load(tmp_path), quantities=QUANTITIES)


def test_a_rule_named_twice_in_a_house_file_is_refused(tmp_path: Path) -> None:
    twice = HOUSE + HOUSE.splitlines()[2].replace("30 um", "25 um") + "\n"
    with pytest.raises(RuleBookError, match="HOLD-001 has two house limits"):
        house(tmp_path, twice)


# -- order, counts, verdict


def made(verdict_: Any, op: int | None, rule: str, at: str = "x") -> Finding:
    return Finding(rule, "", at, at, op, 0, verdict_, "", None, None, None, "", 0, (), "", "", "", (), "")


def test_findings_stand_by_level_then_operation_then_rule_then_instance() -> None:
    mixed = [
        made("pass", 10, "A-001"), made("warn", None, "B-001"), made("fail", 30, "A-001"), made("waived", 10, "A-001"),
        made("fail", 10, "B-001", "first"), made("fail", 10, "B-001", "second"), made("fail", 10, "A-002"),
        made("open", 20, "A-001"), made("warn", 10, "A-001"),
    ]  # fmt: skip
    assert [
        ("fail", 10, "A-002", "x"), ("fail", 10, "B-001", "first"), ("fail", 10, "B-001", "second"),
        ("fail", 30, "A-001", "x"), ("open", 20, "A-001", "x"), ("warn", None, "B-001", "x"), ("warn", 10, "A-001", "x"),
        ("waived", 10, "A-001", "x"), ("pass", 10, "A-001", "x"),
    ] == [(f.verdict, f.op, f.rule, f.at) for f in ordered(mixed)]  # fmt: skip


def test_every_verdict_is_counted_even_when_it_did_not_occur(tmp_path: Path) -> None:
    done = run(tmp_path, {("hold.runout", "10/centre"): Has(0.018), ("hold.runout", "20/centre"): Has(0.025)})
    assert {"pass": 1, "warn": 0, "fail": 1, "open": 0, "waived": 0} == done.counts


@pytest.mark.parametrize(
    ("found", "expected"),
    [
        (["pass", "warn", "open", "fail"], "fail"),
        (["pass", "warn", "open", "waived"], "open"),
        (["pass", "warn", "waived"], "warn"),
        (["pass", "waived"], "pass"),
        ([], "open"),
    ],
)
def test_the_worst_finding_decides_and_nothing_judged_is_not_a_pass(found: list[Any], expected: str) -> None:
    assert expected == verdict([made(v, 10, "A-001") for v in found])


def test_an_unanswered_stop_and_check_keeps_the_verdict_open() -> None:
    line = CautionLine("press", 50, "stop-and-check", "to check", "", "")
    passing = [made("pass", 10, "A-001")]
    assert "open" == verdict(passing, [line])
    assert "open" == verdict([*passing, made("warn", 10, "A-002")], [line])
    assert "fail" == verdict([*passing, made("fail", 10, "A-002")], [line])
    assert "pass" == verdict(passing, [replace(line, state="checked by KL")])
    assert "pass" == verdict(passing, [replace(line, severity="caution", state="to mind")])
