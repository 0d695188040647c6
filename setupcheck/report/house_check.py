"""A house file looked over: what it changes of the shipped rule book and values. For `setupcheck rules --check` alone."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.notation import FACTOR, show
from setupcheck.quantities.device_record import DeviceRecord
from setupcheck.quantities.typical import SHOWN
from setupcheck.report.house import house_line
from setupcheck.report.wording import wrap
from setupcheck.rulebook.describe import requirement_text
from setupcheck.rulebook.house import House
from setupcheck.rulebook.records import Rule, RuleBook


def as_text(house: House, shipped: RuleBook, *, on: str | None) -> str:
    """All of it, 80 columns. shipped: the rule book without it;  on: the day of the check, None when none was given."""
    lines = [*house_line(house), "It can be used.", ""]
    for title, part in (
        ("LIMITS", _limits(house, shipped)),
        ("LEVELS", _levels(house, shipped)),
        ("OWN RULES", _rules(house)),
        ("TYPICAL VALUES", _values(house)),
        ("WARNINGS WAIVED", _waivers(house, on)),
        ("RECORD OF DEVICES", _record(house)),
        ("LOOK AT", (line for note in house.notes for line in _item(note))),
    ):
        block = list(part)
        if block:
            lines += [title, *block, ""]
    lines += wrap("Cautions, and everything that is not named here, stay as shipped.")
    return "\n".join(lines) + "\n"


def _item(text: str) -> list[str]:
    return wrap(text, first="  ", rest="      ")


def _of(shipped: RuleBook, rule_id: str) -> Rule:
    return next(rule for rule in shipped.rules if rule.id == rule_id)


def _limits(house: House, shipped: RuleBook) -> Iterator[str]:
    for limit in house.limits:
        rule = _of(shipped, limit.rule)
        was, span = requirement_text(rule.require), rule.house_may_change
        allowed = f" (may be set from {span.low.text} to {span.high.text})" if span is not None else ""
        signed = f"{limit.who}, {limit.when}: {limit.why}"
        yield from _item(f"{limit.rule}  {rule.title}: {was} -> {limit.text}{allowed}; {signed}")


def _levels(house: House, shipped: RuleBook) -> Iterator[str]:
    for level in house.levels:
        rule = _of(shipped, level.rule)
        signed = f"{level.who}, {level.when}: {level.why}"
        yield from _item(f"{level.rule}  {rule.title}: {rule.level} -> {level.level}; {signed}")


def _rules(house: House) -> Iterator[str]:
    for rule in house.rules:
        requires = f"{rule.quantity} {requirement_text(rule.require)}"
        yield from _item(f"{rule.id}  {rule.level}  {rule.title}: {requires} ({rule.evidence})")


def _values(house: House) -> Iterator[str]:
    for row in house.values:
        unit = SHOWN[row.what]
        was = show(row.shipped, unit, 0 if row.shipped * FACTOR[unit] >= 1.0 else 2)
        yield from _item(f"{row.name}: {was} -> {row.text}; {row.who}, {row.when}: {row.note}")


def _waivers(house: House, on: str | None) -> Iterator[str]:
    for waiver in house.waivers:
        yield from _item(f"{waiver.rule} until {waiver.until}; {waiver.who}: {waiver.reason}")
    if house.waivers and on is None:
        yield from _item("give the day with --on to see whether one has ended")


def _record(house: House) -> Iterator[str]:
    if isinstance(house.devices, DeviceRecord):
        entries = sum(len(one.entries) for one in house.devices.series.values())
        devices = len({device for device, _ in house.devices.series})
        yield from _item(f"{house.devices.file}: {entries} entries of {devices} devices")
