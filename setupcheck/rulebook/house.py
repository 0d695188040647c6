"""What a shop's house file puts in force: limits, levels, own rules, typical values, waivers, a record of devices.

The shipped rule book is never changed: `House.rulebook` is another one, with the house's levels and rules in it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from setupcheck.record import record
from setupcheck.rulebook.engine import engine_finding
from setupcheck.rulebook.records import Finding, Level, Place, Rule, RuleBook

FAMILY = "SHOP"
"""Family of a house's own rules, SHOP-001 to SHOP-999. The book itself never has a rule of it."""


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

        >>> HouseLimit("HOLD-006", 0.3, "30 %", "K. Lind", "worn hubs", "2027-01-15", Place("h.yaml", 3)).said("Bay 2")
        'house limit 30 % of Bay 2 (K. Lind, 2027-01-15: worn hubs)'
        """
        return f"house limit {self.text} of {house} ({self.who}, {self.when}: {self.why})"


@record
class HouseLevel:
    """A rule of the book that the shop made stricter; when is an ISO date."""

    rule: str
    level: Level
    who: str
    why: str
    when: str
    place: Place

    def said(self, house: str) -> str:
        """How a finding shows it.

        >>> HouseLevel("HOLD-004", "fail", "K. Lind", "own bars", "2027-01-15", Place("h.yaml", 3)).said("Bay 2")
        'house level fail of Bay 2 (K. Lind, 2027-01-15: own bars)'
        """
        return f"house level {self.level} of {house} ({self.who}, {self.when}: {self.why})"


@record
class HouseValue:
    """A typical value of the shop's own [mm, rad or K by `what`], and the shipped one whose place it takes."""

    device: str
    what: str
    value: float
    text: str
    shipped: float
    note: str
    who: str
    when: str
    place: Place

    @property
    def name(self) -> str:
        """`four-jaw runout`, as findings name it."""
        return f"{self.device} {self.what.replace('_', ' ')}"


@record
class HouseWaiver:
    """A warning that the shop accepts at every place, for a reason, until a day (its last)."""

    rule: str
    reason: str
    who: str
    until: str
    place: Place

    def said(self, house: str) -> str:
        """How a waived finding shows it."""
        return f"{self.reason} (house waiver of {house}, {self.who}, until {self.until})"


@record(eq=False)
class House:
    """A house file: the shop's name, everything it puts in force, and the sha256 of the file.

    rulebook  the shipped book with the house's levels and rules;  file  base name
    devices   the shop's record of its devices, as whoever reads such records returns it;  notes  what looks odd, in words
    """

    name: str
    file: str
    sha256: str
    rulebook: RuleBook
    limits: tuple[HouseLimit, ...] = ()
    levels: tuple[HouseLevel, ...] = ()
    rules: tuple[Rule, ...] = ()
    values: tuple[HouseValue, ...] = ()
    waivers: tuple[HouseWaiver, ...] = ()
    devices: object | None = None
    notes: tuple[str, ...] = ()

    def limit_for(self, rule_id: str) -> HouseLimit | None:
        """The shop's own limit for a rule, or None."""
        return next((limit for limit in self.limits if limit.rule == rule_id), None)

    def said_of(self, rule: Rule) -> str:
        """What the house did to a rule, as its findings show it; empty where it did nothing."""
        if rule.family == FAMILY:
            return f"house rule of {self.name}"
        changes: tuple[HouseLimit | HouseLevel, ...] = (*self.limits, *self.levels)
        return "; ".join(change.said(self.name) for change in changes if change.rule == rule.id)

    def waive(self, findings: Iterable[Finding], *, on: str | None) -> list[Finding]:
        """The findings, warnings that the house accepts waived, and a finding for each waiver that cannot act.

        A waiver that has ended is told in every job; one whose end cannot be judged only where it would act.
        on  ISO date text of the day of judging, None when none was given
        """
        judged = list(findings)
        about: list[Finding] = []
        for number, waiver in enumerate(self.waivers, 1):
            places = [n for n, one in enumerate(judged) if one.rule == waiver.rule and one.verdict == "warn"]
            if on is not None and on <= waiver.until:
                for n in places:
                    judged[n] = replace(judged[n], verdict="waived", waiver=waiver.said(self.name))
            elif on is not None or places:
                about.append(self._idle(waiver, number, on))
        return judged + about

    def _idle(self, waiver: HouseWaiver, number: int, on: str | None) -> Finding:
        what = f"the waiver of {waiver.rule} in {self.file}, line {waiver.place.line},"
        at = f"house waive[{number}]"
        if on is None:
            text = f"cannot tell: {what} ends on {waiver.until} and no day of judging is given"
            remedy = "Give the day with --on."
            return engine_finding(
                "WAIVE-003", verdict="open", at=at, line=0, message=text, remedy=remedy, missing="--on"
            )
        return engine_finding(
            "WAIVE-003",
            verdict="warn",
            at=at,
            line=0,
            message=f"{what} ended on {waiver.until}",
            remedy="Mend the cause, or look at it again and set a new end in the house file.",
        )
