"""House limits: a shop's own limits, inside the span a rule allows, each with who, why and when."""

from __future__ import annotations

import hashlib
from collections.abc import Mapping
from pathlib import Path

from setupcheck.record import record
from setupcheck.rulebook.entries import Entry, list_of, open_file
from setupcheck.rulebook.judging import outside
from setupcheck.rulebook.needs import Quantity
from setupcheck.rulebook.records import Place, RuleBook
from setupcheck.rulebook.units import read_number
from setupcheck.rulebook.waivers import is_date


@record
class HouseLimit:
    """One limit of the shop, in base units and as written; when is an ISO date."""

    rule: str
    value: float
    text: str
    who: str
    why: str
    when: str
    place: Place

    def said(self, house: str) -> str:
        """How a finding shows it.

        >>> HouseLimit("HOLD-004", 0.3, "30 %", "K. Lind", "worn hubs", "2027-01-15", Place("h.yaml", 3)).said("Bay 2")
        'house limit 30 % of Bay 2 (K. Lind, 2027-01-15: worn hubs)'
        """
        return f"house limit {self.text} of {house} ({self.who}, {self.when}: {self.why})"


@record
class House:
    """A house file: the shop's name, its limits, and the sha256 of the file."""

    name: str
    limits: tuple[HouseLimit, ...]
    sha256: str

    def limit_for(self, rule_id: str) -> HouseLimit | None:
        """The shop's own limit for a rule, or None."""
        return next((limit for limit in self.limits if limit.rule == rule_id), None)


def load_house(path: Path, rulebook: RuleBook, *, quantities: Mapping[str, Quantity]) -> House:
    """Read a house file `{house: name, limits: [{rule:, limit:, who:, why:, when:}]}`.

    Raises: RuleBookError for an unknown rule, a rule the house may not change, a limit outside the allowed span or in
    the wrong unit, a rule named twice, and a missing who, why or when.
    """
    root, data = open_file(path)
    root.only("house", "limits")
    limits: list[HouseLimit] = []
    for entry in list_of(root.need("limits")):
        limit = _limit(entry, rulebook, quantities)
        if any(limit.rule == other.rule for other in limits):
            raise entry.wrong(f"{limit.rule} has two house limits", "Keep one of them")
        limits.append(limit)
    return House(root.text("house"), tuple(limits), hashlib.sha256(data).hexdigest())


def _limit(entry: Entry, rulebook: RuleBook, quantities: Mapping[str, Quantity]) -> HouseLimit:
    entry.only("rule", "limit", "who", "why", "when")
    rule_id = entry.text("rule")
    rule = rulebook.rule(rule_id)
    if rule is None:
        raise entry.need("rule").unknown("rule", [r.id for r in rulebook.rules])
    span = rule.house_may_change
    if span is None:
        raise entry.need("rule").wrong(f"{rule_id} has no limit that a house may change", "Take the entry out")
    number = read_number(entry.need("limit"), quantities[rule.quantity].unit)
    if outside(number.value, low=span.low.value, high=span.high.value):
        raise entry.need("limit").wrong(
            f"{rule_id} may be set from {span.low.text} to {span.high.text}, not to {number.text}",
            "Write a limit inside that span",
        )
    when = entry.text("when")
    if not is_date(when):
        raise entry.need("when").wrong(f"'{when}' is not a date", "Write year-month-day, as in 2027-01-15")
    return HouseLimit(rule_id, number.value, number.text, entry.text("who"), entry.text("why"), when, entry.place())
