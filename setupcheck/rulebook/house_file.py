"""Reading a house file: everything wrong with it in one run, each with its line, and what would be right."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import field, replace
from pathlib import Path
from types import MappingProxyType
from typing import TypeVar

from setupcheck.errors import HouseError, JobError, RuleBookError
from setupcheck.notation import NotationError, nearest
from setupcheck.record import record
from setupcheck.rulebook.entries import Entry, list_of, open_file
from setupcheck.rulebook.house import FAMILY, House, HouseLevel, HouseLimit, HouseValue, HouseWaiver
from setupcheck.rulebook.house_rules import REFERENCE, own_rules
from setupcheck.rulebook.judging import outside
from setupcheck.rulebook.loading import LEVELS
from setupcheck.rulebook.needs import Quantity
from setupcheck.rulebook.records import Reference, Rule, RuleBook
from setupcheck.rulebook.units import read_number
from setupcheck.rulebook.waivers import is_date

T = TypeVar("T", HouseLimit, HouseLevel, HouseWaiver)

LONGEST_NAME = 60
"""Characters of a house's name, which stands in every finding it acts on. Source: our choice."""
FAR_OFF = 10.0
"""A house value this many times the worst that is usual, or as far below the best, is told. Source: our screening choice."""
KEYS = ("house", "limits", "levels", "rules", "typical", "record", "waive")


@record(eq=False)
class Devices:
    """What is known of devices outside the rule book: readers of values by what they are of, and the shipped values.

    usual        best and worst that is usual, beside the shipped value
    read_record  reads a shop's record of its devices; its JobError becomes errors of the house file
    """

    readers: Mapping[str, Callable[[str], float]] = field(default_factory=dict)
    shipped: Mapping[tuple[str, str], float] = field(default_factory=dict)
    read_record: Callable[[Path], object] | None = None
    usual: Mapping[tuple[str, str], tuple[float, float]] = field(default_factory=dict)


def load_house(
    path: Path,
    rulebook: RuleBook,
    *,
    quantities: Mapping[str, Quantity],
    words: frozenset[str] = frozenset(),
    devices: Devices | None = None,
    on: str | None = None,
) -> House:
    """Read a house file.

    quantities  those that an own rule may judge;  words  the names of those whose values are words
    on          day on which it is checked (ISO date): a waiver that has ended by then is an error
    Raises: HouseError with everything that is wrong. The rule book given is not changed.
    """
    reading = _Reading(path, rulebook, quantities, words, devices or Devices(), on)
    with reading.held():
        return reading.house()
    raise HouseError(reading.wrong)


class _Reading:
    """One pass over a house file, what is wrong collected."""

    def __init__(
        self,
        path: Path,
        rulebook: RuleBook,
        quantities: Mapping[str, Quantity],
        words: frozenset[str],
        devices: Devices,
        on: str | None,
    ) -> None:
        self.path = path
        self.rulebook = rulebook
        self.quantities = quantities
        self.words = words
        self.devices = devices
        self.on = on
        self.wrong: list[RuleBookError] = []
        self.notes: list[str] = []

    @contextmanager
    def held(self) -> Iterator[None]:
        """What goes wrong inside is kept, and the reading goes on behind."""
        try:
            yield
        except HouseError as several:
            self.wrong += several.wrong
        except RuleBookError as one:
            self.wrong.append(one)

    def house(self) -> House:
        """The house. Raises HouseError when anything is wrong."""
        root, data = open_file(self.path)
        with self.held():
            root.only(*KEYS)
        name = "the house"
        with self.held():
            name = _name(root)
        limits = tuple(self._each(root, "limits", self._limit))
        levels = tuple(self._each(root, "levels", self._level))
        waivers = tuple(self._each(root, "waive", self._waiver, levels=levels))
        values = tuple(self._values(root))
        rules: tuple[Rule, ...] = ()
        given = None
        with self.held():
            given = root.get("rules")
        if given is not None:
            rules, wrong = own_rules(given, self.rulebook, quantities=self.quantities, words=self.words)
            self.wrong += wrong
        devices = None
        with self.held():
            devices = self._record(root)
        if not self.wrong and not (limits or levels or waivers or values or rules or devices is not None):
            raise root.wrong("the file changes nothing", f"Write one of {', '.join(KEYS[1:])}")
        if self.wrong:
            raise HouseError(())
        return House(
            name=name,
            file=self.path.name,
            sha256=hashlib.sha256(data).hexdigest(),
            rulebook=_in_force(self.rulebook, levels, rules, name, self.path.name),
            limits=limits,
            levels=levels,
            rules=rules,
            values=values,
            waivers=waivers,
            devices=devices,
            notes=tuple(self.notes),
        )

    def _each(self, root: Entry, key: str, read: Callable[..., T], **more: object) -> Iterator[T]:
        """The entries of a list that can be read, one for each rule."""
        seen: set[str] = set()
        entries: list[Entry] = []
        with self.held():
            given = root.get(key)
            entries = list_of(given) if given is not None else []
        for entry in entries:
            with self.held():
                rule_id = entry.text("rule")
                if rule_id in seen:
                    two = {"limits": "house limits", "levels": "house levels"}.get(key, "house waivers")
                    raise entry.wrong(f"{rule_id} has two {two}", "Keep one of them")
                seen.add(rule_id)
                yield read(entry, **more)

    def _rule(self, entry: Entry) -> Rule:
        rule_id = entry.text("rule")
        rule = self.rulebook.rule(rule_id)
        if rule is not None:
            return rule
        named = entry.need("rule")
        if rule_id.startswith(f"{FAMILY}-"):
            raise named.wrong(f"{rule_id} is the house's own rule", "Change it under rules")
        if any(caution.id == rule_id for caution in self.rulebook.cautions):
            raise named.wrong(f"{rule_id} is a caution, and no house changes or waives a caution", "Take the entry out")
        raise named.unknown("rule", [r.id for r in self.rulebook.rules])

    def _signed(self, entry: Entry, *keys: str) -> tuple[str, ...]:
        """The texts of the keys; `when` and `until` have to be days."""
        texts: list[str] = []
        for key in keys:
            with self.held():
                text = entry.text(key)
                if key in ("when", "until") and not is_date(text):
                    raise entry.need(key).wrong(f"'{text}' is not a date", "Write year-month-day, as in 2027-01-15")
                texts.append(text)
        if len(texts) < len(keys):
            raise HouseError(())  # all of it is told already
        return tuple(texts)

    def _limit(self, entry: Entry) -> HouseLimit:
        entry.only("rule", "limit", "who", "why", "when")
        rule = self._rule(entry)
        span = rule.house_may_change
        if span is None:
            raise entry.need("rule").wrong(f"{rule.id} has no limit that a house may change", "Take the entry out")
        number = None
        with self.held():
            number = read_number(entry.need("limit"), self.quantities[rule.quantity].unit)
            if outside(number.value, low=span.low.value, high=span.high.value):
                raise entry.need("limit").wrong(
                    f"{rule.id} may be set from {span.low.text} to {span.high.text}, not to {number.text}",
                    "Write a limit inside that span",
                )
        who, why, when = self._signed(entry, "who", "why", "when")
        if number is None:
            raise HouseError(())
        return HouseLimit(rule.id, number.value, number.text, who, why, when, entry.place())

    def _level(self, entry: Entry) -> HouseLevel:
        entry.only("rule", "level", "who", "why", "when")
        rule = self._rule(entry)
        with self.held():
            _check_level(entry, rule)
        who, why, when = self._signed(entry, "who", "why", "when")
        return HouseLevel(rule.id, "fail", who, why, when, entry.place())

    def _waiver(self, entry: Entry, *, levels: tuple[HouseLevel, ...]) -> HouseWaiver:
        entry.only("rule", "reason", "who", "until")
        rule = self._rule(entry)
        named = entry.need("rule")
        if rule.level != "warn":
            does = "fails where it is broken" if rule.level == "fail" else "is open where something is missing"
            raise named.wrong(
                f"{rule.id} {does}, and a house waives warnings alone",
                "Waive it in the job, at its place and for its own reason",
            )
        if any(level.rule == rule.id for level in levels):
            raise named.wrong(f"{rule.id} is made to fail under levels and waived here", "Keep one of them")
        with self.held():
            if not _said(entry, "reason"):
                raise entry.wrong(f"the waiver of {rule.id} gives no reason", "Write reason: why it is accepted")
        who, until = self._signed(entry, "who", "until")
        if self.on is not None and self.on > until:
            raise entry.need("until").wrong(
                f"the waiver of {rule.id} ended on {until}", "Take it out, or look at it again and set a new end"
            )
        reason = _said(entry, "reason")
        if not reason:
            raise HouseError(())
        return HouseWaiver(rule.id, reason, who, until, entry.place())

    def _values(self, root: Entry) -> Iterator[HouseValue]:
        groups: list[tuple[str, Entry]] = []
        with self.held():
            given = root.get("typical")
            groups = list(given.items()) if given is not None else []
        for what, group in groups:
            rows: list[tuple[str, Entry]] = []
            with self.held():
                if what not in self.devices.readers:
                    raise group.unknown("typical value", self.devices.readers, word=what)
                rows = list(group.items())
            for device, row in rows:
                with self.held():
                    yield self._value(device, what, row)

    def _value(self, device: str, what: str, row: Entry) -> HouseValue:
        kinds = [kind for kind, of in self.devices.shipped if of == what]
        mine = [kind for kind in kinds if device == kind or device.startswith(f"{kind}-")]
        if not mine:
            near = nearest(device, kinds)
            hint = f"Did you mean {near}?" if near else f"Write one of {', '.join(kinds)}, or a name that begins so"
            raise row.wrong(f"no typical {what} is known of a device '{device}'", hint)
        row.only("value", "note", "who", "when")
        value = None
        with self.held():
            value = _amount(row.need("value"), self.devices.readers[what])
        note, who, when = self._signed(row, "note", "who", "when")
        if value is None:
            raise HouseError(())
        text, kind = row.text("value"), max(mine, key=len)
        shipped = self.devices.shipped[kind, what]
        best, worst = self.devices.usual.get((kind, what), (shipped, shipped))
        found = HouseValue(device, what, value, text, shipped, note, who, when, row.place())
        if not best / FAR_OFF <= value <= worst * FAR_OFF:
            much = "above" if value > worst else "below"
            self.notes.append(
                f"{found.name}, line {found.place.line}: {text} lies more than {FAR_OFF:g} times {much} what is "
                "usual; see that its unit is right"
            )
        return found

    def _record(self, root: Entry) -> object | None:
        entry = root.get("record")
        if entry is None:
            return None
        file = self.path.parent / entry.scalar_text()
        if self.devices.read_record is None:
            return None
        if not file.is_file():
            raise entry.wrong(
                f"there is no record of devices '{entry.scalar_text()}' beside the house file",
                "Write the path of the CSV, from where the house file lies",
            )
        try:
            return self.devices.read_record(file)
        except JobError as why:
            raise HouseError([RuleBookError(why.file, p.line, p.problem, p.hint) for p in why.problems]) from None


def _name(root: Entry) -> str:
    name = root.text("house")
    if len(name) > LONGEST_NAME or not name.isprintable():
        raise root.need("house").wrong(
            f"the name of the house has more than {LONGEST_NAME} characters, or some that cannot be printed",
            "Write a short name: Toolroom",
        )
    return name


def _said(entry: Entry, key: str) -> str:
    """The text of a key; empty where it is missing or blank."""
    given = entry.get(key)
    return "" if given is None or (isinstance(given.data, str) and not given.data.strip()) else given.scalar_text()


def _check_level(entry: Entry, rule: Rule) -> None:
    """A house may turn a warning into a failure and nothing else."""
    given = entry.need("level")
    wanted = given.scalar_text()
    if wanted not in LEVELS:
        raise given.unknown("level", LEVELS)
    if rule.level == "open" or wanted == "open":
        raise given.wrong(
            f"{rule.id} has level {rule.level} in the book, and a house changes nothing about what is open",
            "A house may make a rule that warns fail: level: fail",
        )
    if rule.level == wanted:
        raise given.wrong(f"{rule.id} has level {wanted} in the book already", "Take the entry out")
    if wanted == "warn":
        raise given.wrong(
            f"{rule.id} fails in the book, and a house makes a rule stricter, never softer",
            "Take the entry out; one finding is waived in the job, with its reason",
        )


def _amount(entry: Entry, read: Callable[[str], float]) -> float:
    text = entry.scalar_text()
    try:
        value = read(text)
    except NotationError as why:
        raise entry.wrong(why.problem, why.hint) from None
    if not value > 0.0:
        raise entry.wrong(f"'{text}' says that the device has no error", "Write what it gave at its worst")
    return value


def _in_force(
    book: RuleBook, levels: tuple[HouseLevel, ...], rules: tuple[Rule, ...], house: str, file: str
) -> RuleBook:
    """Another book: the shipped rules, some of them stricter, with the house's own behind."""
    raised = {level.rule: level.level for level in levels}
    kept = tuple(replace(rule, level=raised[rule.id]) if rule.id in raised else rule for rule in book.rules)
    references = {**book.references, REFERENCE: Reference(REFERENCE, f"house rules of {house}", file)}
    return replace(book, rules=kept + rules, references=MappingProxyType(references))
