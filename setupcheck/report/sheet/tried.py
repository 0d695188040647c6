"""What may be accepted of a value that no gate is worked out for, found by trying: heats, sizes of joints, angles as set.

Base units inside: mm, rad, degC, s; on paper those of the file.
"""

from __future__ import annotations

import math

from setupcheck.allowed import NO_ROUTE, Allowed, allowed, entry_of
from setupcheck.flow import Review
from setupcheck.jobfile.models import Dimension
from setupcheck.notation import FACTOR, show, show_angle
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.sized import limits_of
from setupcheck.report.sheet.accepting import FREE, LOST, Accept, span
from setupcheck.report.sheet.showing import paper
from setupcheck.report.wording import FINE_BELOW, inwards, on_the_dial, title_of

UNHEARD, KEEP = Accept("no rule looks at it"), Accept("no rule looks at it: keep its limits")
COMPARED = Accept("the review holds it against the plan")
BEYOND = "beyond its own limits only if the planner agrees"
UNTOLD = "cannot be told"
SECOND = math.radians(1.0 / 3600.0)
LONGEST = 60


class Tried:
    """The values of one job; each is tried once."""

    def __init__(self, found: Review) -> None:
        self.found = found
        self._titles = {scope.key: paper(title_of(scope), LONGEST) for scope in found.book.instances("stack")}
        self.ranges: dict[str, Allowed] = {}
        self._known: dict[str, Accept] = {}

    def accept(self, path: str) -> Accept:
        """What to accept at a path of the job file."""
        if path not in self._known:
            entry = entry_of(self.found, path)
            if entry is not None:
                self.ranges[path] = allowed(self.found, entry)
            self._known[path] = self._told(self.ranges[path]) if entry is not None else COMPARED
        return self._known[path]

    def _told(self, one: Allowed) -> Accept:
        if one.untold:
            return Accept(UNTOLD, f"while this is open: {self._by(one.untold)}")
        if not one.heard:
            return KEEP if one.kind == "size" else UNHEARD
        if one.lost:
            return Accept(LOST.format(self._by(one.by_low)))
        low, high = self._end(one, one.low, up=True), self._end(one, one.high, up=False)
        if not low and not high:
            return FREE
        by = " and ".join(dict.fromkeys(name for name in (self._by(one.by_low), self._by(one.by_high)) if name))
        if self._beyond_the_drawing(one):
            by += f"; {BEYOND}"
        if one.kind in ("most", "time"):
            return Accept(f"up to {high}" if high else f"at least {low}", by)
        return Accept(span(low, high) if low and high else f"at least {low}" if low else f"at most {high}", by)

    def _beyond_the_drawing(self, one: Allowed) -> bool:
        """The rules would stand more than the drawing allows."""
        node = node_at(self.found.loaded, one.path)
        limits = limits_of(node) if isinstance(node, Dimension) else None
        return limits is not None and (one.low < limits[0] or one.high > limits[1])

    def _by(self, names: tuple[str, ...]) -> str:
        """The requirement that sets an end, or the rule with what it is about; the first of several."""
        for name in names:
            if name == NO_ROUTE:
                return "beyond it the route cannot be walked"
            rule = self.found.rulebook.rule(name)
            return f"{name} {paper(rule.title, LONGEST)}" if rule is not None else self._titles.get(name, name)
        return ""

    def _end(self, one: Allowed, value: float, *, up: bool) -> str:
        """An end rounded inwards to what is read; empty where there is none."""
        if not math.isfinite(value):
            return ""
        inches = self.found.book.inches
        if one.kind == "angle":
            return show_angle(inwards(value, 1.0 / SECOND, up=up), "dms", 0)
        if one.kind == "heat":
            return f"{inwards(value, 1.0, up=up):g} degC"
        if one.kind == "time":
            return f"{inwards(value, 1.0, up=up):g} s"
        if one.kind == "size":
            unit, digits = ("in", 4) if inches else ("mm", 3)
            digits += min(abs(end - one.planned) for end in (one.low, one.high)) < FINE_BELOW
            return show(inwards(value, FACTOR[unit] * 10**digits, up=up), unit, digits)
        small = on_the_dial(abs(value), inches=inches, up=up is (value > 0.0))
        if one.kind == "most" or not any(c in "123456789" for c in small):
            return small
        return f"{'-' if value < 0.0 else '+'}{small}"
