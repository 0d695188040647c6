"""Every shipped rule against its cases: passing, broken, exactly at the limit, input missing; the whole message expected."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from setupcheck.rulebook import NAME_FACT, SURFACE_FACT, Finding, RuleBook, evaluate, load_rulebook

from .fakebook import QUANTITIES, FakeBook, FakeScope, Has, Lacks, facts_from, value_of

HERE = Path(__file__).parent
RULES = HERE.parents[1] / "rules"


@cache
def shipped() -> RuleBook:
    return load_rulebook(RULES, quantities=QUANTITIES)


@dataclass(frozen=True)
class Case:
    rule: str
    label: str
    at: Mapping[str, Any]
    given: Mapping[str, Any]
    verdict: str
    message: str
    fills: str = ""
    facts: Mapping[str, Any] | None = None


@cache
def case_files() -> dict[str, dict[str, Any]]:
    found: dict[str, dict[str, Any]] = {}
    for path in sorted((HERE / "cases").glob("*.yaml")):
        for rule, cases in yaml.safe_load(path.read_text(encoding="utf-8")).items():
            assert rule not in found, f"{rule} has cases twice"
            found[rule] = cases
    return found


def all_cases() -> Iterator[Case]:
    for rule, cases in case_files().items():
        kinds = {"pass": "pass", "missing": "open"}
        for label in ("pass", "broken", "at_limit", "missing"):
            if label in cases:
                case = {"verdict": kinds.get(label, ""), **cases[label]}
                yield Case(rule, label, cases["at"], **case)
        for number, case in enumerate(cases.get("more", ())):
            yield Case(rule, f"more-{number + 1}", cases["at"], **case)


def judged(case: Case) -> Finding:
    """The one finding of the case's rule."""
    book, at = shipped(), case.at
    rule = book.rule(case.rule)
    assert rule is not None, f"there is no rule {case.rule}"
    scope = FakeScope(QUANTITIES[rule.quantity].per, at["key"], at["path"], at.get("op"), at.get("line", 0))
    values: dict[str | tuple[str, str], Has | Lacks] = {
        name: value_of(text, QUANTITIES[name].unit) for name, text in case.given.items()
    }
    facts = {NAME_FACT: at.get("name"), SURFACE_FACT: at.get("surface"), **(case.facts or {})}
    fake = FakeBook(QUANTITIES, [scope], values, {scope.key: (at.get("unit", ""), at.get("digits", 0))})
    found = [f for f in evaluate(book, fake, facts_from(facts)).findings if f.rule == case.rule]
    assert len(found) == 1, f"{case.rule} gave {len(found)} findings"
    return found[0]


@pytest.mark.parametrize("case", list(all_cases()), ids=lambda case: f"{case.rule}-{case.label}")
def test_a_case_gets_its_verdict_and_its_whole_message(case: Case) -> None:
    finding = judged(case)
    assert (case.verdict, case.message) == (finding.verdict, finding.message)
    if case.fills:
        assert (case.fills,) == finding.missing


@pytest.mark.parametrize("rule", shipped().rules, ids=lambda rule: rule.id)
def test_every_rule_shows_all_its_cases(rule: Any) -> None:
    cases = case_files()[rule.id]
    wanted = {"at", "pass", "broken", "missing"} | (set() if rule.require.shape == "one_of" else {"at_limit"})
    assert wanted <= set(cases)
    assert rule.level == cases["broken"]["verdict"]


@pytest.mark.parametrize("rule", [r for r in shipped().rules if r.require.shape != "one_of"], ids=lambda rule: rule.id)
def test_the_case_at_the_limit_stands_exactly_there(rule: Any) -> None:
    at, case = case_files()[rule.id]["at"], case_files()[rule.id]["at_limit"]
    finding = judged(Case(rule.id, "at_limit", at, **case))
    assert finding.margin == pytest.approx(0.0, abs=1e-12)


@pytest.mark.parametrize("rule", shipped().rules, ids=lambda rule: rule.id)
def test_a_missing_input_names_a_key_to_fill(rule: Any) -> None:
    at, case = case_files()[rule.id]["at"], case_files()[rule.id]["missing"]
    finding = judged(Case(rule.id, "missing", at, verdict="open", **case))
    assert finding.missing
    assert finding.missing[0] in finding.message


def test_no_case_is_left_over_from_a_rule_that_is_gone() -> None:
    assert {rule.id for rule in shipped().rules} == set(case_files())
