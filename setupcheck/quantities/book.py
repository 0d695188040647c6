"""The Book: named numbers, their instances, what they rest on, and what is missing. Knows no physics.

Three absences never mix: None (the job has no such thing), Open (the thing is there, the number is not), and out of
its validity range (Open with the reason).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import ContextDecorator
from dataclasses import field

from setupcheck.record import record

SINGLE = frozenset({"job", "place", "worm", "mesh"})
"""Kinds of thing of which a job has at most one, so they are found from anywhere."""

BY_INSTANCE = "stack"
"""Unit of a quantity whose unit belongs to its instance: one stack counts in um, the next in arcsec. Its record says in
which, and with how many decimals, under `unit` and `digits`."""

INCH = {"um": "thou", "mm": "in"}
"""What an inch file shows instead; one decimal more goes with it."""


@record(eq=False)
class Scope:
    """One thing of the job that can own numbers.

    kind    job, place, setup, hold, cut, join, stack, …
    key     "30", "30/centre", "30/teeth", "cumulative-pitch.teeth.bearings"; empty for single things
    node    its record;  path  where the planner finds it: "setups.30.hold.centre"
    op      the operation it belongs to;  line  its line in the job file
    within  what it stands in, nearest first (a cut in its setup)
    """

    kind: str
    key: str
    node: object
    path: str
    op: int | None = None
    line: int = 0
    within: tuple[Scope, ...] = ()

    def outward(self) -> Iterator[Scope]:
        """Itself, then everything it stands in."""
        yield self
        for outer in self.within:
            yield from outer.outward()


@record
class Known:
    """A value, and the typical values it was made with."""

    value: object
    rests_on: frozenset[str] = frozenset()


@record
class Open:
    """No value: the job paths to fill, or the reason."""

    missing: tuple[str, ...] = ()
    because: str = ""


Answer = Known | Open | None


class OutOfRange(ValueError):
    """Raised by a formula outside its stated validity."""


class _InRange(ContextDecorator):
    """See `in_range`."""

    def __enter__(self) -> None:
        pass

    def __exit__(self, kind: type[BaseException] | None, why: BaseException | None, _: object) -> None:
        if isinstance(why, ValueError):
            raise OutOfRange(str(why)) from None


in_range = _InRange()
"""A leaf refuses sizes with a ValueError that says what is wrong with them: here that is why a quantity is open. Stands round
the calls of the leaf, or as a decorator round a formula that does nothing else."""


@record
class Quantity:
    """One row of a table of quantities.

    name     family.figure;  per  the kind of thing that owns one
    unit     display unit ("" for texts; "stack" where the instance says it);  digits  decimals shown
    of       pure function of the inputs; may return a value, Known, Open or None
    inputs   argument -> another quantity ("route.floor"); an entry of this thing (":circle", ":" for its record);
             its own name ("@key", "@path"); every instance ("each …"), or those that have a value ("known …");
             one that may be open without making this one open ("settled …": None then)
    says     one line for people
    if_none  value of an argument when the job has no such thing
    """

    name: str
    per: str
    unit: str
    digits: int
    of: Callable[..., object]
    inputs: Mapping[str, str]
    says: str
    if_none: Mapping[str, object] = field(default_factory=dict)


class Book:
    """All quantities of one job, computed on demand and once."""

    def __init__(self, quantities: Sequence[Quantity], scopes: Sequence[Scope], *, inches: bool = False) -> None:
        self.quantities: dict[str, Quantity] = {q.name: q for q in quantities}
        self.scopes = tuple(scopes)
        self.inches = inches
        self.made: dict[tuple[str, Scope], Answer] = {}
        self._of_kind: dict[str, list[Scope]] = {}
        for scope in self.scopes:
            self._of_kind.setdefault(scope.kind, []).append(scope)

    def instances(self, kind: str) -> Sequence[Scope]:
        """All things of one kind, in the order of the job."""
        return self._of_kind.get(kind, ())

    def home(self, name: str, at: Scope) -> Scope | None:
        """The instance of a quantity seen from `at`: outward only, never sideways."""
        kind = self.quantities[name].per
        for scope in at.outward():
            if scope.kind == kind:
                return scope
        return self._of_kind[kind][0] if kind in SINGLE and kind in self._of_kind else None

    def get(self, name: str, at: Scope) -> Answer:
        """The answer of one quantity or input, seen from `at`."""
        if name in self.quantities:
            home = self.home(name, at)
            if home is None:
                return None
            if (name, home) not in self.made:
                self.made[name, home] = self._make(self.quantities[name], home)
            return self.made[name, home]
        if name.startswith(":"):
            return _entry(at, name[1:])
        if name.startswith("@"):
            return Known(getattr(at, name[1:]))
        how, _, inner = name.partition(" ")
        if how == "settled":
            answer = self.get(inner, at)
            return answer if isinstance(answer, Known) else None
        if how not in ("each", "known"):
            raise KeyError(name)
        answers = [self.get(inner, s) for s in self.instances(self.quantities[inner].per)]
        return _together(answers if how == "each" else [a for a in answers if isinstance(a, Known)])

    def unit(self, name: str, at: Scope) -> str:
        """Display unit of a quantity at an instance."""
        unit = self.quantities[name].unit
        if unit == BY_INSTANCE:
            unit = getattr(at.node, "unit", unit)
        return INCH.get(unit, unit) if self.inches else unit

    def digits(self, name: str, at: Scope) -> int:
        """Decimals shown of a quantity at an instance."""
        quantity = self.quantities[name]
        digits = quantity.digits
        if quantity.unit == BY_INSTANCE:
            digits = getattr(at.node, "digits", digits)
        return digits + (self.inches and self.unit(name, at) in INCH.values())

    def _make(self, quantity: Quantity, home: Scope) -> Answer:
        values: dict[str, object] = {}
        opens: list[Open] = []
        rests_on: frozenset[str] = frozenset()
        for argument, name in quantity.inputs.items():
            answer = self.get(name, home)
            if answer is None:
                if argument not in quantity.if_none:
                    return None
                values[argument] = quantity.if_none[argument]
            elif isinstance(answer, Open):
                opens.append(answer)
            else:
                values[argument] = answer.value
                rests_on |= answer.rests_on
        if opens:
            return all_missing(*opens)
        try:
            made = quantity.of(**values)
        except OutOfRange as why:
            return Open(because=str(why))
        if made is None or isinstance(made, Open):
            return made
        if isinstance(made, Known):
            rests_on = rests_on | made.rests_on
            made = made.value
        if isinstance(made, float) and not math.isfinite(made):
            return Open(because=f"{quantity.name} has no finite value here")
        return Known(made, rests_on)


def _entry(at: Scope, path: str) -> Answer:
    """An entry of a thing's own record; what the planner left out is Open with its path."""
    if not path:
        return Known(at.node)
    node = at.node
    for step in path.split("."):
        node = getattr(node, step)
        if node is None:
            return Open((f"{at.path}.{path}".lstrip("."),))
    return Known(node)


def _together(parts: Sequence[Answer]) -> Known | Open:
    """All parts known: a tuple of their values; otherwise everything that is missing."""
    opens = [p for p in parts if isinstance(p, Open)]
    if opens:
        return all_missing(*opens)
    known = [p for p in parts if isinstance(p, Known)]
    return Known(tuple(p.value for p in known), frozenset().union(*(p.rests_on for p in known)))


def all_missing(*parts: object) -> Open:
    """What any of them lacks, each thing once; what is not open lacks nothing."""
    opens = [part for part in parts if isinstance(part, Open)]
    missing = tuple(dict.fromkeys(m for o in opens for m in o.missing))
    return Open(missing, "; ".join(dict.fromkeys(o.because for o in opens if o.because)))
