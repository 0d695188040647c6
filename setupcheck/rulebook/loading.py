"""Loading the rule book: rule files by family name, sources and cautions, each entry checked by hand.

Every mistake is a RuleBookError with file, line and what to write. Nothing in a rule file is ever evaluated.
"""

from __future__ import annotations

import hashlib
import re
from collections.abc import Callable, Collection, Iterator, Mapping
from functools import partial
from pathlib import Path
from types import MappingProxyType
from typing import TypeVar

from setupcheck.errors import RuleBookError
from setupcheck.record import record
from setupcheck.rulebook.entries import Entry, list_of, open_file
from setupcheck.rulebook.facts import FACTS
from setupcheck.rulebook.messages import wrong_fields
from setupcheck.rulebook.needs import KINDS, Quantity
from setupcheck.rulebook.records import (
    EVIDENCE,
    FAMILIES,
    GENERIC_FIELDS,
    Caution,
    Condition,
    HouseSpan,
    Level,
    Limit,
    Number,
    OfQuantity,
    Reference,
    Requirement,
    Rule,
    RuleBook,
    Severity,
    Softening,
    Source,
    Trigger,
)
from setupcheck.rulebook.units import dimension_of, read_number, read_share

T = TypeVar("T")

LEVELS: Mapping[str, Level] = {"warn": "warn", "fail": "fail", "open": "open"}
SEVERITIES: Mapping[str, Severity] = {"caution": "caution", "stop-and-check": "stop-and-check"}
SHAPES = ("at_most", "at_least", "between", "one_of")

_RULE_KEYS = (
    "id", "title", "applies_when", "quantity", "require", "only_warn_if", "uncertainty", "house_may_change", "level",
    "warn_within", "asks_for", "message", "message_when_met", "remedy", "remedy_from", "why", "sources", "cautions",
)  # fmt: skip
_RULE_ID = re.compile(r"([A-Z]+)-([0-9]{3})")
_CAUTION_ID = re.compile(r"[a-z]+(-[a-z]+)*")


@record
class Names:
    """Every name that a rule may use."""

    quantities: Mapping[str, Quantity]
    facts: Collection[str]
    references: Mapping[str, Reference]
    cautions: Collection[str] = ()


def load_rulebook(
    folder: Path, *, quantities: Mapping[str, Quantity], known_facts: Collection[str] = FACTS
) -> RuleBook:
    """Read `book.yaml`, `sources.yaml`, `cautions.yaml` and the families' files; a family without a file has no rules yet.

    quantities   what the Book offers: names, kinds of instance, display units
    known_facts  the closed list of facts that `applies_when` may ask for
    The sha256 covers name and bytes of every file read, in that fixed order.
    Raises: RuleBookError.
    """
    digest = hashlib.sha256()

    def opened(name: str) -> Entry:
        root, data = open_file(folder / name, shown_as=f"{folder.name}/{name}")
        digest.update(f"{name}\0{len(data)}\0".encode() + data)
        return root

    head = opened("book.yaml")
    head.only("version")
    version = head.text("version")
    references = _references(opened("sources.yaml"))
    names = Names(quantities, known_facts, references)
    safety = opened("cautions.yaml")
    safety.only("closing_line", "cautions")
    cautions = tuple(_caution(entry, names) for entry in list_of(safety.need("cautions")))
    _no_twins(list_of(safety.need("cautions")), [caution.id for caution in cautions])

    names = Names(quantities, known_facts, references, [caution.id for caution in cautions])
    rules: list[Rule] = []
    for family in FAMILIES:
        name = f"{family.lower()}.yaml"
        if not (folder / name).is_file():
            continue
        entries = list_of(opened(name))
        found = [read_rule(entry, family, names) for entry in entries]
        _no_twins(entries, [rule.id for rule in found])
        rules += sorted(found, key=lambda rule: rule.id)
    return RuleBook(
        version=version,
        sha256=digest.hexdigest(),
        rules=tuple(rules),
        references=MappingProxyType(references),
        cautions=cautions,
        closing_line=safety.text("closing_line"),
    )


def _references(root: Entry) -> dict[str, Reference]:
    found: dict[str, Reference] = {}
    for key, entry in root.items():
        entry.only("title", "note")
        found[key] = Reference(key, entry.text("title"), entry.text_or("note", ""))
    return found


def read_rule(entry: Entry, family: str, names: Names) -> Rule:
    """One rule of a family; without one any id will do. Raises: RuleBookError for the first thing that is wrong with it."""
    entry.only(*_RULE_KEYS)
    rule_id = entry.text("id")
    matched = _RULE_ID.fullmatch(rule_id)
    if family and (matched is None or matched[1] != family):
        raise entry.need("id").wrong(f"'{rule_id}' is no id of this file", f"Write {family}-NNN with three digits")
    quantity = _quantity(entry.need("quantity"), names)
    require = _requirement(entry.need("require"), quantity, names)
    level = _one_of(entry.need("level"), LEVELS, "level")
    message = _message(entry.need("message"))
    met = entry.get("message_when_met")
    within, softening, uncertainty = entry.get("warn_within"), entry.get("only_warn_if"), entry.get("uncertainty")
    if uncertainty is not None and (within is not None or softening is not None):
        raise uncertainty.wrong(
            "a measured value has its guard band and nothing else", "Take warn_within and only_warn_if out"
        )
    if require.shape == "one_of":
        for extra in (within, softening, uncertainty):
            if extra is not None:
                raise extra.wrong("words have no distance to a limit", "Take this key out")
    asks_for = entry.text_or("asks_for", "")
    if asks_for and level != "open":
        hint = "Take asks_for out, or use level: open"
        raise entry.need("asks_for").wrong(f"a rule of level {level} asks for nothing", hint)
    return Rule(
        id=rule_id,
        family=family,
        title=entry.text("title"),
        quantity=quantity.name,
        require=require,
        level=level,
        message=message,
        remedy=entry.text("remedy"),
        why=entry.text("why"),
        sources=_sources(entry.need("sources"), names),
        stands=entry.place,
        applies_when=_conditions(entry.get("applies_when"), names),
        message_when_met=_message(met) if met is not None else "",
        house_may_change=_house_span(entry.get("house_may_change"), require, quantity),
        warn_within=read_share(within) if within is not None else 0.0,
        only_warn_if=_softening(softening, names) if softening is not None else None,
        uncertainty=_uncertainty(uncertainty, quantity, names) if uncertainty is not None else "",
        asks_for=asks_for,
        remedy_from=_words(entry.get("remedy_from"), names),
        cautions=_caution_ids(entry.get("cautions"), names),
    )


def mistakes_of_rule(entry: Entry, names: Names) -> Iterator[RuleBookError]:
    """Everything that is wrong with the entries of a rule, each looked at for itself; its id is left to others.

    Nothing is told as missing beside a key that nobody knows: it may be that one, misspelt.
    """
    unknown = False
    try:
        entry.only(*_RULE_KEYS)
    except RuleBookError as why:
        unknown = True
        yield why
    if not entry.is_map:
        return
    readers: tuple[Callable[[], object], ...] = (
        *(partial(entry.text, key) for key in ("title", "remedy", "why")),
        lambda: _quantity(entry.need("quantity"), names),
        lambda: _one_of(entry.need("level"), LEVELS, "level"),
        lambda: _message(entry.need("message")),
        lambda: _sources(entry.need("sources"), names),
        lambda: _conditions(entry.get("applies_when"), names),
        lambda: _caution_ids(entry.get("cautions"), names),
        lambda: read_rule(entry, "", names),
    )
    for read in readers:
        try:
            read()
        except RuleBookError as why:
            if not (unknown and why.problem.endswith("is missing")):
                yield why


def _requirement(entry: Entry, quantity: Quantity, names: Names) -> Requirement:
    entry.only(*SHAPES)
    shapes = [shape for shape in SHAPES if entry.get(shape) is not None]
    if len(shapes) != 1:
        raise entry.wrong("a requirement has exactly one shape", f"Write one of {', '.join(SHAPES)}")
    limit = entry.need(shapes[0])
    match shapes[0]:
        case "at_most":
            return Requirement("at_most", high=_limit(limit, quantity, names))
        case "at_least":
            return Requirement("at_least", low=_limit(limit, quantity, names))
        case "between":
            ends = list_of(limit)
            if len(ends) != 2:
                raise limit.wrong("between needs two limits", "Write both: [20 um, 80 um]")
            low, high = (_limit(end, quantity, names) for end in ends)
            if isinstance(low, Number) and isinstance(high, Number) and low.value > high.value:
                raise limit.wrong(f"{low.text} lies above {high.text}", "Write the smaller end first")
            return Requirement("between", low=low, high=high)
        case _:
            words = tuple(word.scalar_text() for word in list_of(limit))
            if not words:
                raise limit.wrong("no word is allowed", "List the words that are allowed")
            return Requirement("one_of", allowed=words)


def _limit(entry: Entry, quantity: Quantity, names: Names) -> Limit:
    """A number with its unit, or `{quantity: name, times: factor}`; its unit fits the quantity it limits."""
    if not entry.is_map:
        return read_number(entry, quantity.unit)
    entry.only("quantity", "times")
    other = _quantity(entry.need("quantity"), names)
    if dimension_of(other.unit) != dimension_of(quantity.unit):
        one, two = (q.unit if q.unit not in ("", "1") else "plain numbers" for q in (other, quantity))
        says = f"{other.name} counts in {one}, {quantity.name} in {two}"
        raise entry.need("quantity").wrong(says, "A limit needs the unit of what it limits")
    times = entry.get("times")
    factor = read_number(times, "").value if times is not None else 1.0
    if times is not None and factor <= 0.0:
        raise times.wrong(f"times {factor:g} turns the limit round", "Write a factor above zero")
    return OfQuantity(other.name, factor)


def _words(entry: Entry | None, names: Names) -> str:
    """A quantity whose value is words."""
    if entry is None:
        return ""
    quantity = _quantity(entry, names)
    if quantity.unit != "":
        raise entry.wrong(f"{quantity.name} counts in {quantity.unit}", "Name a quantity of words")
    return quantity.name


def _softening(entry: Entry, names: Names) -> Softening:
    entry.only("quantity", "at_least")
    quantity = _quantity(entry.need("quantity"), names)
    return Softening(quantity.name, _limit(entry.need("at_least"), quantity, names))


def _uncertainty(entry: Entry, quantity: Quantity, names: Names) -> str:
    other = _quantity(entry, names)
    if dimension_of(other.unit) != dimension_of(quantity.unit):
        raise entry.wrong(f"{other.name} is no uncertainty of {quantity.name}: other unit", "Name one in its unit")
    return other.name


def _house_span(entry: Entry | None, require: Requirement, quantity: Quantity) -> HouseSpan | None:
    if entry is None:
        return None
    entry.only("from", "to")
    limit = require.high if require.shape == "at_most" else require.low
    if require.shape not in ("at_most", "at_least") or not isinstance(limit, Number):
        raise entry.wrong("only a limit that is one number can be changed by a house", "Take house_may_change out")
    low, high = (read_number(entry.need(end), quantity.unit) for end in ("from", "to"))
    if not low.value <= limit.value <= high.value:
        says = f"the book's own limit {limit.text} lies outside {low.text} to {high.text}"
        raise entry.wrong(says, "Widen the span, smaller end first")
    return HouseSpan(low, high)


def _conditions(entry: Entry | None, names: Names) -> tuple[Condition, ...]:
    if entry is None:
        return ()
    found: list[Condition] = []
    for fact, wanted in entry.items():
        if fact not in names.facts:
            raise wanted.unknown("fact", names.facts, word=fact)
        values = list_of(wanted) if wanted.is_list else [wanted]
        if not values:
            raise wanted.wrong(f"{fact} has no value to be", "List at least one")
        found.append(Condition(fact, tuple(value.scalar() for value in values)))
    return tuple(found)


def _caution(entry: Entry, names: Names) -> Caution:
    entry.only("id", "severity", "per", "when", "quantity", "at_least", "text", "sources")
    caution_id = entry.text("id")
    if not _CAUTION_ID.fullmatch(caution_id):
        raise entry.need("id").wrong(f"'{caution_id}' is no caution id", "Write small words with hyphens: hot-part")
    named, limit = entry.get("quantity"), entry.get("at_least")
    if (named is None) != (limit is None):
        raise entry.wrong("a caution's quantity and at_least go together", "Write both or neither")
    quantity = _quantity(named, names) if named is not None else None
    trigger = Trigger(
        per=_kind(entry.need("per")),
        when=_conditions(entry.get("when"), names),
        quantity=quantity.name if quantity is not None else "",
        at_least=_limit(limit, quantity, names) if limit is not None and quantity is not None else None,
    )
    return Caution(
        id=caution_id,
        severity=_one_of(entry.need("severity"), SEVERITIES, "severity"),
        text=entry.text("text"),
        trigger=trigger,
        sources=_sources(entry.need("sources"), names),
        stands=entry.place,
    )


def _sources(entry: Entry, names: Names) -> tuple[Source, ...]:
    found: list[Source] = []
    for one in list_of(entry):
        one.only("ref", "place", "kind")
        ref, kind = one.text("ref"), one.text("kind")
        if ref not in names.references:
            raise one.need("ref").unknown("source", names.references)
        if kind not in EVIDENCE:
            raise one.need("kind").unknown("kind of evidence", EVIDENCE)
        found.append(Source(ref, one.text_or("place", ""), kind))
    if not found:
        raise entry.wrong("every rule and caution has a source", "Write at least one, and how good it is")
    return tuple(found)


def _kind(entry: Entry) -> str:
    kind = entry.scalar_text()
    if kind not in KINDS:
        raise entry.unknown("kind of instance", KINDS)
    return kind


def _caution_ids(entry: Entry | None, names: Names) -> tuple[str, ...]:
    if entry is None:
        return ()
    for one in list_of(entry):
        if one.scalar_text() not in names.cautions:
            raise one.unknown("caution", names.cautions)
    return tuple(one.scalar_text() for one in list_of(entry))


def _quantity(entry: Entry, names: Names) -> Quantity:
    name = entry.scalar_text()
    if name not in names.quantities:
        raise entry.unknown("quantity", names.quantities)
    return names.quantities[name]


def _message(entry: Entry) -> str:
    text = entry.scalar_text()
    for wrong in wrong_fields(text):
        raise entry.wrong(
            f"a message has no field {wrong if wrong in ('{', '}') else '{' + wrong + '}'}",
            f"Write {', '.join('{' + field + '}' for field in GENERIC_FIELDS)}",
        )
    return text


def _one_of(entry: Entry, choices: Mapping[str, T], what: str) -> T:
    word = entry.scalar_text()
    if word not in choices:
        raise entry.unknown(what, choices)
    return choices[word]


def _no_twins(entries: list[Entry], ids: list[str]) -> None:
    for number, one in enumerate(ids):
        if one in ids[:number]:
            hint = "An id is never used again: take the next"
            raise entries[number].need("id").wrong(f"the id {one} is there twice", hint)
