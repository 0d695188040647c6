"""Every rule of the shipped book has an overlay that expects it, or a written reason why none does."""

from __future__ import annotations

from collections.abc import Collection, Mapping

from setupcheck.flow import rules
from tests.catch.table import overlays, unreached


def forgotten(book: Collection[str], reached: Collection[str], reasons: Mapping[str, str]) -> dict[str, str]:
    """What is wrong with the list, rule by rule; empty where all is well."""
    no_reason = {rule for rule in book if rule not in reached and rule not in reasons}
    return {
        **dict.fromkeys(no_reason, "no overlay expects it: write one, or a reason into unreached.yaml"),
        **{rule: "has a reason and an overlay: take it out of unreached.yaml" for rule in reasons if rule in reached},
        **{rule: "is no rule of the book: take it out of unreached.yaml" for rule in reasons if rule not in book},
        **{rule: "says too little to be a reason" for rule, why in reasons.items() if len(why.split()) < 8},
    }


def test_every_rule_is_reached_by_an_overlay_or_has_its_reason() -> None:
    book = [rule.id for rule in rules().rules]
    assert forgotten(book, {o.rule for o in overlays()}, unreached()) == {}


def test_few_rules_are_out_of_reach() -> None:
    assert len(unreached()) <= 0.08 * len(rules().rules)


def test_a_rule_without_overlay_or_reason_is_told_and_so_is_a_reason_too_many() -> None:
    why = "the reader refuses such a job before any rule"
    assert forgotten(["A-1"], ["A-1"], {}) == forgotten(["A-1"], [], {"A-1": why}) == {}
    assert "write one" in forgotten(["A-1"], [], {})["A-1"]
    assert "overlay" in forgotten(["A-1"], ["A-1"], {"A-1": why})["A-1"]
    assert "no rule" in forgotten(["A-1"], ["A-1"], {"B-1": why})["B-1"]
    assert "too little" in forgotten(["A-1"], [], {"A-1": "never"})["A-1"]
