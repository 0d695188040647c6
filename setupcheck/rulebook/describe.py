"""The rule book as text: the table of rules, one rule in full, and the page rules/README.md."""

from __future__ import annotations

import textwrap
from collections.abc import Iterable

from setupcheck.errors import RuleBookError
from setupcheck.notation import nearest
from setupcheck.rulebook.engine import ENGINE_RULES
from setupcheck.rulebook.records import (
    FAMILIES,
    Caution,
    Condition,
    Limit,
    Number,
    Requirement,
    Rule,
    RuleBook,
    Source,
)

WIDTH = 80


def describe(rulebook: RuleBook, id: str | None = None) -> str:
    """The table of rules (id, title, level, weakest evidence), or one rule or caution in full.

    Raises: RuleBookError for an id that the book does not have; the nearest one is offered.
    """
    if id is None:
        return _table(rulebook)
    rule = rulebook.rule(id)
    if rule is not None:
        return _rule_in_full(rule, rulebook)
    caution = next((caution for caution in rulebook.cautions if caution.id == id), None)
    if caution is not None:
        return _caution_in_full(caution, rulebook)
    engine = next((own for own in ENGINE_RULES if own.id == id), None)
    if engine is not None:
        head = f"{engine.id}  {engine.title}"
        return "\n".join([head, *_field("gives", engine.gives), *_field("why", engine.why)]) + "\n"
    known = [r.id for r in rulebook.rules] + [c.id for c in rulebook.cautions] + [own.id for own in ENGINE_RULES]
    near = nearest(id, known)
    hint = f"Did you mean {near}?" if near else "Ask without an id."
    if id.startswith("SHOP-"):
        hint = "A shop's own rule stands in its house file: name it with --house FILE."
    raise RuleBookError("rules", 0, f"there is no rule {id}", hint)


def requirement_text(require: Requirement) -> str:
    """A requirement in words.

    >>> requirement_text(Requirement("at_most", high=Number(0.02, "20 um")))
    'at most 20 um'
    """
    match require.shape:
        case "at_most":
            return f"at most {_limit(require.high)}"
        case "at_least":
            return f"at least {_limit(require.low)}"
        case "between":
            return f"from {_limit(require.low)} to {_limit(require.high)}"
        case "one_of":
            return f"one of {', '.join(require.allowed)}"


def page(rulebook: RuleBook) -> str:
    """The text of rules/README.md. It is generated; a test holds the file against it."""
    lines = [
        "# Rules",
        "",
        "Generated from the rule files by `python -m tests.rules.write_page`; do not edit by hand.",
        "",
        f"Rule book {rulebook.version}: {len(rulebook.rules)} rules, {len(rulebook.cautions)} cautions.",
        "`level` is what a broken rule gives. `evidence` is the weakest of its sources.",
        "A file holds one family; an id is never used again. `setupcheck rules ID` prints a rule in full.",
        "",
        "| rule | what has to hold | quantity | requirement | level | house may change | evidence |",
        "|---|---|---|---|---|---|---|",
    ]
    for rule in rulebook.rules:
        span = rule.house_may_change
        house = f"{span.low.text} to {span.high.text}" if span else ""
        cells = (
            rule.id,
            rule.title,
            f"`{rule.quantity}`",
            requirement_text(rule.require),
            rule.level,
            house,
            rule.evidence,
        )
        lines.append(_row(cells))
    lines += [
        "",
        "## Checks of the engine itself",
        "",
        "| rule | what has to hold | gives | why |",
        "|---|---|---|---|",
    ]
    lines += [_row((own.id, own.title, own.gives, own.why)) for own in ENGINE_RULES]
    lines += [
        "",
        "## Cautions",
        "",
        "Printed when the operation triggers them, whatever the findings say. They cannot be waived or changed;",
        "`stop-and-check` has to be answered under `checked:` in the job, or the verdict stays at least open.",
        "",
        "| caution | severity | for each | when | text |",
        "|---|---|---|---|---|",
    ]
    lines += [_row((c.id, c.severity, c.trigger.per, _trigger(c), c.text)) for c in rulebook.cautions]
    lines += ["", rulebook.closing_line, ""]
    return "\n".join(lines)


def _row(cells: Iterable[str]) -> str:
    return "| " + " | ".join(cell.replace("|", "\\|") for cell in cells) + " |"


def _table(rulebook: RuleBook) -> str:
    rows: list[tuple[str, str, str, str]] = [
        (rule.id, rule.title, rule.level, rule.evidence) for rule in rulebook.rules
    ]
    rows += [(own.id, own.title, own.gives.split(",")[0], "screening choice") for own in ENGINE_RULES]
    id_width = max(len(row[0]) for row in rows)
    lines = [f"Rule book {rulebook.version}, sha256 {rulebook.sha256[:12]}", ""]
    for rule_id, title, level, evidence in rows:
        lines.append(f"{rule_id:<{id_width}}  {level:<4}  {title}")
        lines.append(f"{'':<{id_width}}        {evidence}")
    empty = [family for family in FAMILIES if not any(rule.family == family for rule in rulebook.rules)]
    if empty:
        lines += ["", *textwrap.wrap(f"No rules yet in: {', '.join(empty)}", WIDTH)]
    lines += ["", "Cautions (they cannot be waived):"]
    lines += [f"  {caution.severity:<14}  {caution.id}" for caution in rulebook.cautions]
    return "\n".join(lines) + "\n"


def _rule_in_full(rule: Rule, rulebook: RuleBook) -> str:
    lines = [f"{rule.id}  {rule.title}"]
    lines += _field("level", rule.level)
    lines += _field("judges", rule.quantity)
    lines += _field("requires", requirement_text(rule.require))
    if rule.applies_when:
        lines += _field("applies when", _conditions(rule.applies_when))
    if rule.uncertainty:
        lines += _field("guard band", f"1.65 times the standard uncertainty {rule.uncertainty}")
    if rule.only_warn_if:
        wanted = _limit(rule.only_warn_if.at_least)
        lines += _field("only warns", f"while {rule.only_warn_if.quantity} is at least {wanted}")
    if rule.warn_within:
        lines += _field("warns", f"within {rule.warn_within * 100:g} % of the limit")
    if rule.house_may_change:
        span = rule.house_may_change
        lines += _field("house limit", f"may be set from {span.low.text} to {span.high.text}")
    lines += _field("says", rule.message)
    if rule.message_when_met:
        lines += _field("if met", rule.message_when_met)
    lines += _field("remedy", rule.remedy)
    if rule.remedy_from:
        lines += _field("worked out", f"by {rule.remedy_from}, where the job gives enough")
    lines += _field("why", rule.why)
    for source in rule.sources:
        lines += _field("source", _source(source, rulebook))
    if rule.cautions:
        lines += _field("cautions", ", ".join(rule.cautions))
    lines += _field("stands in", f"{rule.place.file}, line {rule.place.line}")
    return "\n".join(lines) + "\n"


def _caution_in_full(caution: Caution, rulebook: RuleBook) -> str:
    lines = [f"{caution.id}  ({caution.severity})"]
    lines += _field("says", caution.text)
    lines += _field("for each", caution.trigger.per)
    lines += _field("when", _trigger(caution))
    for source in caution.sources:
        lines += _field("source", _source(source, rulebook))
    lines += _field("stands in", f"{caution.place.file}, line {caution.place.line}")
    return "\n".join(lines) + "\n"


def _field(name: str, text: str) -> list[str]:
    head = f"  {name:<13} "
    return textwrap.wrap(text, WIDTH, initial_indent=head, subsequent_indent=" " * len(head), break_long_words=False)


def _source(source: Source, rulebook: RuleBook) -> str:
    place = f", {source.place}" if source.place else ""
    reference = rulebook.references[source.ref]
    note = f" [{reference.note}]" if reference.note else ""
    return f"{reference.title}{place}: {source.kind}{note}"


def _limit(limit: Limit | None) -> str:
    assert limit is not None, "loading gives every shape its limits"
    if isinstance(limit, Number):
        return limit.text
    return limit.quantity if limit.times == 1.0 else f"{limit.times:g} times {limit.quantity}"


def _trigger(caution: Caution) -> str:
    parts = [_conditions(caution.trigger.when)] if caution.trigger.when else []
    if caution.trigger.quantity:
        parts.append(f"{caution.trigger.quantity} at least {_limit(caution.trigger.at_least)}")
    return "; ".join(parts) or "always"


def _conditions(conditions: Iterable[Condition]) -> str:
    return ", ".join(f"{c.fact} is {' or '.join(_plain(value) for value in c.values)}" for c in conditions)


def _plain(value: str | float | bool) -> str:
    return ("yes" if value else "no") if isinstance(value, bool) else value if isinstance(value, str) else f"{value:g}"
