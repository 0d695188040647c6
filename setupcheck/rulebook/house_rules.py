"""A house's own rules: the same closed shape as the book's, ids SHOP-001 to SHOP-999, the shop as their source."""

from __future__ import annotations

import re
from collections.abc import Callable, Collection, Iterator, Mapping

from setupcheck.errors import RuleBookError
from setupcheck.rulebook.entries import Entry, list_of
from setupcheck.rulebook.facts import FACTS
from setupcheck.rulebook.house import FAMILY
from setupcheck.rulebook.loading import Names, mistakes_of_rule, read_rule
from setupcheck.rulebook.needs import Quantity
from setupcheck.rulebook.records import Reference, Rule, RuleBook

REFERENCE = "house"
"""What the sources of an own rule cite: the shop itself."""
KINDS = ("shop record", "common practice", "screening choice")
"""Evidence that a shop can have for a rule of its own."""
_ID = re.compile(rf"{FAMILY}-(?!000)[0-9]{{3}}")


def own_rules(
    given: Entry, book: RuleBook, *, quantities: Mapping[str, Quantity], words: Collection[str]
) -> tuple[tuple[Rule, ...], list[RuleBookError]]:
    """The rules that can be read, and everything that is wrong with the others, each error once.

    words  names of quantities whose values are words
    """
    references = {REFERENCE: Reference(REFERENCE, "the house")}
    names = Names(quantities, FACTS, references, [caution.id for caution in book.cautions])
    rules: list[Rule] = []
    wrong: list[RuleBookError] = []
    try:
        entries = list_of(given)
    except RuleBookError as why:
        return (), [why]
    seen: set[str] = set()
    for entry in entries:
        found = list(_mistakes(entry, book, names, words, seen))
        if found:
            wrong += {(one.line, one.problem): one for one in found}.values()
            continue
        rules.append(read_rule(entry, FAMILY, names))
    return tuple(sorted(rules, key=lambda rule: rule.id)), wrong


def _mistakes(
    entry: Entry, book: RuleBook, names: Names, words: Collection[str], seen: set[str]
) -> Iterator[RuleBookError]:
    checks: tuple[Callable[[], None], ...] = (
        lambda: _check_id(entry, book, seen),
        lambda: _check_house_keys(entry),
        lambda: _check_evidence(entry),
        lambda: _check_words(entry, names, words),
    )
    for check in checks:
        try:
            check()
        except RuleBookError as why:
            yield why
    yield from mistakes_of_rule(entry, names)


def _check_id(entry: Entry, book: RuleBook, seen: set[str]) -> None:
    rule_id = entry.text("id")
    stands = entry.need("id")
    if book.rule(rule_id) is not None:
        raise stands.wrong(
            f"{rule_id} is a rule of the book, which stays as it is",
            f"Write {FAMILY}-001 to {FAMILY}-999, or change the book's rule under limits or levels",
        )
    if not _ID.fullmatch(rule_id):
        raise stands.wrong(f"'{rule_id}' is no id of an own rule", f"Write {FAMILY}-001 to {FAMILY}-999")
    if rule_id in seen:
        raise stands.wrong(f"the id {rule_id} is there twice", "An id is never used again: take the next")
    seen.add(rule_id)


def _check_house_keys(entry: Entry) -> None:
    span = entry.get("house_may_change")
    if span is not None:
        raise span.wrong("an own rule is the house's already", "Take house_may_change out")


def _check_evidence(entry: Entry) -> None:
    for source in list_of(entry.need("sources")):
        kind = source.need("kind")
        if kind.scalar_text() not in KINDS:
            raise kind.wrong(
                f"'{kind.scalar_text()}' is no evidence of an own rule", f"Write one of {', '.join(KINDS)}"
            )


def _check_words(entry: Entry, names: Names, words: Collection[str]) -> None:
    """Words are compared with words, numbers with numbers."""
    quantity, require = entry.text("quantity"), entry.need("require")
    if quantity not in names.quantities:
        return  # told already
    by_word = require.get("one_of") is not None
    if by_word and quantity not in words:
        raise require.wrong(f"{quantity} is a number", "Write at_most, at_least or between, with a limit")
    if not by_word and quantity in words:
        raise require.wrong(f"{quantity} is a word", "Write one_of: with the words that are allowed")
    others = [require.get(shape) for shape in ("at_most", "at_least")] + _ends(require)
    softening = entry.get("only_warn_if")
    others += [softening, softening.get("at_least")] if softening is not None else []
    named = [other.get("quantity") for other in others if other is not None and other.is_map]
    for one in (*named, entry.get("uncertainty")):
        if one is not None and one.scalar_text() in words:
            raise one.wrong(f"{one.scalar_text()} is a word", "Name a quantity that is a number")
    remedy = entry.get("remedy_from")
    if remedy is not None and remedy.scalar_text() in names.quantities and remedy.scalar_text() not in words:
        raise remedy.wrong(f"{remedy.scalar_text()} is a number", "Name a quantity of words")


def _ends(require: Entry) -> list[Entry | None]:
    given = require.get("between")
    return [*list_of(given)] if given is not None and given.is_list else []
