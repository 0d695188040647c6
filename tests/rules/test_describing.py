"""The rule book as text, the generated page, and the rules against the book of quantities they name."""

from __future__ import annotations

from pathlib import Path

import pytest

from setupcheck.errors import RuleBookError
from setupcheck.rulebook import EVIDENCE, load_rulebook
from setupcheck.rulebook.describe import describe, page
from setupcheck.rulebook.records import OfQuantity

from .bookshelf import RULE, load
from .fakebook import QUANTITIES

RULES = Path(__file__).parents[2] / "rules"
shipped = load_rulebook(RULES, quantities=QUANTITIES)


def test_the_page_of_rules_is_what_the_rule_files_say() -> None:
    assert page(shipped) == (RULES / "README.md").read_text(encoding="utf-8"), "run python -m tests.rules.write_page"


def test_the_table_names_every_rule_with_level_title_and_evidence() -> None:
    table = describe(shipped)
    width = max(len(rule.id) for rule in shipped.rules)
    for rule in shipped.rules:
        assert f"{rule.id:<{width}}  {rule.level:<4}  {rule.title}\n" in table
    assert "WAIVE-003" in table
    assert max(map(len, table.splitlines())) <= 80


def test_one_rule_is_shown_in_full(tmp_path: Path) -> None:
    text = RULE + "  house_may_change: {from: 10 um, to: 40 um}\n  warn_within: 10 %\n  cautions: [hot-part]\n"
    text += "  applies_when: {hold.by: [spigot, collet], head.tilted: true}\n"
    assert """\
HOLD-001  The run-out is small
  level         fail
  judges        hold.runout
  requires      at most 20 um
  applies when  hold.by is spigot or collet, head.tilted is yes
  warns         within 10 % of the limit
  house limit   may be set from 10 um to 40 um
  says          op {op}: {name} runs out {value}, {limit} allowed
  remedy        True it.
  why           It shows.
  source        our own choice, here: screening choice
  source        practice of the trade: from memory [no document]
  cautions      hot-part
  stands in     rules/hold.yaml, line 1
""" == describe(load(tmp_path, hold=text), "HOLD-001")


def test_a_caution_and_a_check_of_the_engine_can_be_looked_up_too(tmp_path: Path) -> None:
    book = load(tmp_path)
    assert describe(book, "hot-part").startswith("hot-part  (caution)\n  says          It burns.\n")
    assert "  when          join.heat at least 60 degC\n" in describe(book, "hot-part")
    assert describe(book, "WAIVE-002").startswith("WAIVE-002  A waiver has something to waive\n")


@pytest.mark.parametrize(
    ("asked", "says"),
    [
        ("HOLD-0001", "there is no rule HOLD-0001. Did you mean HOLD-001?"),
        ("?", "there is no rule ?. Ask without an id."),
    ],
)
def test_an_unknown_id_is_answered_with_the_nearest(tmp_path: Path, asked: str, says: str) -> None:
    with pytest.raises(RuleBookError) as refused:
        describe(load(tmp_path), asked)
    assert f"rules: {says}" == str(refused.value)


def test_every_shipped_rule_says_why_and_what_to_do_in_a_sentence() -> None:
    for rule in shipped.rules:
        for text in (rule.why, rule.remedy):
            assert text.endswith(".") and text[0].isupper(), rule.id
        assert not rule.message.endswith("."), rule.id
        assert all(source.kind in EVIDENCE for source in rule.sources)


def test_every_reference_is_cited_by_some_rule_or_caution() -> None:
    every = [*(rule.sources for rule in shipped.rules), *(caution.sources for caution in shipped.cautions)]
    cited = {source.ref for sources in every for source in sources}
    assert cited == set(shipped.references)


def test_the_quantities_that_rules_name_are_those_of_the_book() -> None:
    """Name, kind of instance, unit and digits, written down on both sides; messages depend on all four."""
    from setupcheck.quantities.tables import TABLES

    real = {q.name: (q.per, q.unit, q.digits) for q in TABLES}
    named = {rule.quantity for rule in shipped.rules} | {rule.uncertainty for rule in shipped.rules if rule.uncertainty}
    for rule in shipped.rules:
        named |= {limit.quantity for limit in (rule.require.low, rule.require.high) if isinstance(limit, OfQuantity)}
    ours = {q.name: (q.per, q.unit, q.digits) for q in QUANTITIES.values()}
    assert named <= set(ours)
    assert ours == {name: real.get(name) for name in ours}
