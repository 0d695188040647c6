"""A job with one value changed, and what rules and requirements say of it."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace

from setupcheck.allowed.entries import Entry
from setupcheck.errors import JobError
from setupcheck.flow import Review, facts_on, prepare
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.gates import worst_excess
from setupcheck.quantities.stacks import build
from setupcheck.record import record
from setupcheck.rulebook import VERDICTS, Verdict, evaluate

STACK = "stack"
"""Stands for the rule where a requirement itself speaks; the place is then the key of its stack."""
OF_THE_EXACT_GAP, LIMITED_BY_IT = ("contact.", "insert."), ("tilt.",)
"""Quantities that rest on the exact gap of worm and wheel, or are held against it, where the job asks for it: it takes a second
for each value, so their rules are not asked; `setupcheck vary` tells what they say."""
SECANTS, BEYOND = 8, 1.02
"""Steps towards a place that does where the plan does not, and how much further each goes. Source: our choice."""
RANK = {verdict: rank for rank, verdict in enumerate(VERDICTS)}
"""Worse verdicts have lower numbers."""

Key = tuple[str, str]
"""A rule and where it speaks."""


@record
class Word:
    """What one rule says of one place, or a requirement at its worst: a verdict, what it rests on, and how far it is inside."""

    verdict: Verdict
    value: object
    margin: float | None = None


Said = Mapping[Key, Word]


def rank(said: Said, key: Key) -> int:
    """A rule that has nothing to say of a place is no worse than one that passes it."""
    return RANK[said[key].verdict if key in said else "pass"]


class Trial:
    """One entry of one job, asked value by value."""

    def __init__(self, found: Review, entry: Entry) -> None:
        self.found, self.entry = found, entry
        exact = found.loaded.job.mesh is not None and found.loaded.job.mesh.contact == "exact"
        slow = (*OF_THE_EXACT_GAP, *(() if ".head." in entry.path else LIMITED_BY_IT)) if exact else ()
        rules = tuple(r for r in found.rulebook.rules if not r.quantity.startswith(("stack.", *slow)))
        self.rules = replace(found.rulebook, rules=rules, cautions=())
        self.stacks = {
            key: r.stack
            for key, r in found.results.items()
            if r.margin is not None and not (exact and r.stack.require.what.startswith("contact-"))
        }
        self._said: dict[float, Said | None] = {}

    def narrow(self, keys: Iterable[Key]) -> None:
        """From now on only these are asked."""
        keys = list(keys)
        ids = {rule for rule, _ in keys}
        self.rules = replace(self.rules, rules=tuple(rule for rule in self.rules.rules if rule.id in ids))
        self.stacks = {key: self.stacks[key] for rule, key in keys if rule == STACK}

    def at(self, value: float) -> Said | None:
        """What is said with this value; None where the route of the job cannot be walked with it."""
        value = max(value, self.entry.least)
        if value not in self._said:
            self._said[value] = self._judged(self.entry.with_(value))
        return self._said[value]

    def towards(self, key: Key) -> Iterator[float]:
        """Values at which what fails as planned might not: steps of the secant on its margin, each a little beyond."""
        before, value = self.entry.planned + self.entry.stride, self.entry.planned
        for _ in range(SECANTS):
            there, here = self._margin(before, key), self._margin(value, key)
            if there is None or here is None or there == here:
                return
            before, value = value, value - BEYOND * (before - value) * here / (there - here)
            yield max(value, self.entry.least)

    def _margin(self, value: float, key: Key) -> float | None:
        said = self.at(value) or {}
        return said[key].margin if key in said else None

    def _judged(self, loaded: LoadedJob) -> Said | None:
        try:
            floor, book = prepare(loaded)
        except (JobError, OutOfRange, ValueError):
            return None
        judged = evaluate(self.rules, book, facts_on(floor), house=self.found.house, on=self.found.on)
        said = {(f.rule, f.key): Word(f.verdict, (f.value, f.limit), f.margin) for f in judged.findings}
        for key, stack in self.stacks.items():
            made = build(floor, stack)
            excess = math.nan if isinstance(made, Open) else worst_excess(made.figure, stack.low, stack.high)
            if math.isnan(excess):
                said[STACK, key] = Word("open", None)
            else:
                said[STACK, key] = Word("fail" if excess > 0.0 else "pass", round(excess, 9), -excess)
        return said
