"""What if: a job before and after a change, side by side, as text and as JSON."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from setupcheck.flow import Review, Varied
from setupcheck.jobfile.changing import Change, read_change
from setupcheck.jobfile.ranging import Range, read_range
from setupcheck.notation import FACTOR, fixed, show
from setupcheck.quantities.book import Book, Known, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record
from setupcheck.report.as_json import json_text
from setupcheck.report.json import DRAWN_DIGITS, FORMAT, METRIC, house_head, plain_number
from setupcheck.report.text import limits_in_words
from setupcheck.report.wording import clean, title_of, unit_of, wrap
from setupcheck.rulebook import VERDICTS, Finding

NUMBERS_SHOWN = 20
"""Numbers that moved, without --all. Source: our screening choice."""
STILL = 1e-9
"""Share of itself below which a number has not moved: the noise of sums in another order. Source: our choice."""
ASKED_ALREADY = ("stack.worst", "stack.lowest", "stack.limit", "stack.floor")
"""Quantities that the lines of the requirements say."""
COUNTED = ("pass", "warn", "fail", "open", "waived")


@record
class Turned:
    """A finding that appears, vanishes or changes its level; None where a review does not have it."""

    before: Finding | None
    after: Finding | None

    @property
    def said(self) -> Finding:
        """The finding as it is now, or as it was."""
        found = self.after or self.before
        assert found is not None
        return found


@record
class Moved:
    """A number before and after [base unit], how it is shown, and its instance."""

    name: str
    before: float
    after: float
    unit: str
    digits: int

    @property
    def relative(self) -> float:
        """The move over the larger of both sizes: 0 for none, 1 from or to zero, up to 2 across zero. Source: our choice."""
        return abs(self.after - self.before) / max(abs(self.before), abs(self.after))


@record(eq=False)
class Asked:
    """A requirement in both reviews; None where a review does not have it, or its figure."""

    key: str
    scope: Scope
    book: Book
    before: Result | None
    after: Result | None

    @property
    def relative(self) -> float:
        """The move of the worst case or of a limit, as `Moved` counts it; 2 where only one review has a figure."""
        if self.before is None or self.after is None:
            return 0.0 if self.before is self.after else 2.0
        return max((_apart(a, b) for a, b in zip(_ends(self.before), _ends(self.after), strict=True)), default=0.0)


def typed_changes(texts: Sequence[str]) -> tuple[list[Change], list[Range]]:
    """What `--set` asks for: single values, and ranges.

    Raises: SetupcheckError for a text that is not KEY=VALUE, and for a range that is none.
    """
    changes: list[Change] = []
    ranges: list[Range] = []
    for change in map(read_change, texts):
        span = read_range(change)
        if span is None:
            changes.append(change)
        else:
            ranges.append(span)
    return changes, ranges


def turned(found: Varied) -> list[Turned]:
    """Findings that are not the same before and after, the gravest first; those that only pass now or passed are left out."""
    before = {(f.rule, f.key): f for f in found.before.evaluation.findings}
    after = {(f.rule, f.key): f for f in found.after.evaluation.findings}
    both = [Turned(before.get(key), after.get(key)) for key in dict.fromkeys((*after, *before))]
    told = [one for one in both if _level(one.before) != _level(one.after)]
    return sorted(told, key=lambda one: (one.after is None, VERDICTS.index(one.said.verdict)))


def _level(finding: Finding | None) -> str:
    """A finding that passes and one that is not there are alike: neither asks for anything."""
    return finding.verdict if finding is not None else "pass"


def asked(found: Varied) -> list[Asked]:
    """Every requirement of either review, the biggest move first."""
    scopes = {
        scope.key: (scope, one.book)
        for one in (found.before, found.after)  # as it is now where both have it
        for scope in one.book.instances("stack")
    }
    both = [
        Asked(key, scope, book, found.before.results.get(key), found.after.results.get(key))
        for key, (scope, book) in scopes.items()
    ]
    return sorted(both, key=lambda one: -one.relative)


def moved(found: Varied) -> list[Moved]:
    """Every number of the Book that both reviews have, where it moved; the biggest relative move first."""
    before, after = _scopes(found.before), _scopes(found.after)
    wanted = {
        (name, scope.kind, scope.key)
        for name, quantity in found.after.book.quantities.items()
        if quantity.unit
        for scope in found.after.book.instances(quantity.per)
    }
    told = []
    for name, *at in sorted(wanted):
        was, now = before.get(tuple(at)), after.get(tuple(at))
        if was is None or now is None:
            continue
        old, new = _number(found.before, name, was), _number(found.after, name, now)
        if old is None or new is None or _apart(old, new) <= STILL:
            continue
        book = found.after.book
        shown = f"{name}@{now.key}" if now.key else name
        told.append(Moved(shown, old, new, book.unit(name, now), book.digits(name, now)))
    return sorted(told, key=lambda one: -one.relative)  # as they come where two moved alike: by name


def _scopes(found: Review) -> dict[tuple[str, ...], Scope]:
    return {(scope.kind, scope.key): scope for scope in found.book.scopes}


def _number(found: Review, name: str, scope: Scope) -> float | None:
    answer = found.book.get(name, scope)
    value = answer.value if isinstance(answer, Known) else None
    if isinstance(value, bool) or not isinstance(value, float | int) or not math.isfinite(value):
        return None
    return float(f"{value:.{DRAWN_DIGITS}g}") if name == "stack.likely" else float(value)


def _apart(a: float | None, b: float | None) -> float:
    if a is None or b is None:
        return 0.0 if a is b else 2.0
    return abs(a - b) / max(abs(a), abs(b)) if a != b else 0.0


def _ends(result: Result) -> tuple[float | None, ...]:
    """What a requirement's line says: the ends of the worst case that are asked for, and their limits."""
    worst, stack = result.combined.worst, result.stack
    high = worst.high if stack.high is not None or stack.low is None else None
    return high, worst.low if stack.low is not None else None, stack.high, stack.low


def as_text(found: Varied, *, everything: bool = False) -> str:
    """The whole comparison, 80 columns. everything: every number that moved, however many."""
    lines: list[str] = []
    for part in (_head(found), _findings(found), _asked(found), _moved(found, everything)):
        block = list(part)
        if block:
            lines += [*block, ""]
    lines += wrap(found.after.rulebook.closing_line)
    return "\n".join(lines) + "\n"


def _head(found: Varied) -> Iterator[str]:
    job = found.before.loaded.job
    yield from wrap(f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title))
    if found.before.house is not None:
        from setupcheck.report.house import house_line  # few jobs have one

        yield from house_line(found.before.house)
    yield from with_what(found)
    yield ""
    yield f"{'':12}{'before':>8}{'after':>8}"
    yield f"{'verdict':12}{found.before.verdict.upper():>8}{found.after.verdict.upper():>8}"
    was, now = found.before.evaluation.counts, found.after.evaluation.counts
    for verdict in (v for v in COUNTED if v in VERDICTS):
        yield f"{verdict:12}{was[verdict]:8d}{now[verdict]:8d}"


def with_what(found: Varied) -> Iterator[str]:
    """The changes, as they were typed."""
    for change in found.changes:
        yield from wrap(f"what if {change.key} = {change.value}", rest="    ")


def _findings(found: Varied) -> Iterator[str]:
    told = turned(found)
    yield "FINDINGS THAT CHANGE" if told else "No finding appears, vanishes or changes its level."
    for one in told:
        how = f"{_word(one.before)} -> {_word(one.after)}"
        yield from wrap(f"{how}  {one.said.rule}  {one.said.title}, {one.said.at}", first="  ", rest="      ")
        yield from wrap(f"{clean(one.said.message)}.", first="      ", rest="      ")


def _word(finding: Finding | None) -> str:
    return finding.verdict if finding is not None else "none"


def _asked(found: Varied) -> Iterator[str]:
    told = asked(found)
    if not told:
        return
    yield "WHAT WAS ASKED, at its worst, before -> after"
    still = [one for one in told if one.relative <= STILL]
    for one in told[: len(told) - len(still)]:
        unit, digits = unit_of(one.book, one.scope)
        was, now = (_in_words(r, unit, digits) for r in (one.before, one.after))
        yield from wrap(f"{title_of(one.scope)} {was} -> {now}", first="  ", rest="      ")
    if still:
        yield f"  {_many(len(still), 'requirement does', 'requirements do')} not move."


def _in_words(result: Result | None, unit: str, digits: int) -> str:
    return limits_in_words(result, unit, digits) if result is not None else "cannot be told"


def _moved(found: Varied, everything: bool) -> Iterator[str]:
    told = [one for one in moved(found) if one.name.partition("@")[0] not in ASKED_ALREADY]
    seen = [one for one in told if _pair(one)[0] != _pair(one)[1]]
    if not told:
        yield "No other number moves."
        return
    yield "NUMBERS THAT MOVED, biggest relative move first, before -> after"
    shown = seen if everything else seen[:NUMBERS_SHOWN]
    for one in shown:
        was, now = _pair(one)
        yield from wrap(f"{one.name}  {was} -> {now}{_percent(one)}", first="  ", rest="      ")
    if len(seen) > len(shown):
        yield f"  and {len(seen) - len(shown)} more, which --all shows"
    if len(told) > len(seen):
        yield f"  {_many(len(told) - len(seen), 'number moves', 'numbers move')} by less than the last digit shown"


def _pair(one: Moved) -> tuple[str, str]:
    """Before and after as they are shown, the unit at the second."""
    unit = one.unit or "1"
    was, now = (show(value, unit, one.digits) for value in (one.before, one.after))
    return fixed(one.before * FACTOR[unit], one.digits) if was != now else now, now


def _percent(one: Moved) -> str:
    """The move over what it was, where that says something."""
    share = (one.after - one.before) / abs(one.before) * 100.0 if one.before else math.inf
    return f" ({share:+.0f} %)" if 0.5 <= abs(share) < 1000.0 else ""


def _many(n: int, one: str, more: str) -> str:
    return f"{n} {one if n == 1 else more}"


def as_json(found: Varied) -> str:
    """The comparison as one JSON object, keys in a fixed order, ending in a newline."""
    return json_text(as_data(found))


def as_data(found: Varied) -> dict[str, object]:
    """The comparison as plain data; lengths mm, deviations um, small angles arcsec."""
    from setupcheck import __version__

    loaded = found.before.loaded
    return {
        "format": FORMAT,
        "setupcheck": __version__,
        "rule_book": {"version": found.after.rulebook.version, "sha256": found.after.rulebook.sha256},
        "house": house_head(found.after.house),
        "job": {"title": clean(loaded.job.title), "file": loaded.file, "sha256": loaded.sha256},
        "set": [{"key": clean(one.key), "value": clean(one.value)} for one in found.changes],
        "before": _verdict(found.before),
        "after": _verdict(found.after),
        "findings": [
            {
                "rule": one.said.rule,
                "at": one.said.at,
                "before": one.before.verdict if one.before is not None else None,
                "after": one.after.verdict if one.after is not None else None,
                "message": clean(one.said.message),
            }
            for one in turned(found)
        ],
        "requirements": [_requirement(one) for one in asked(found)],
        "numbers": [
            {
                "name": one.name,
                "before": _shown(one.before, one.unit),
                "after": _shown(one.after, one.unit),
                "unit": METRIC.get(one.unit, one.unit),
                "relative": plain_number(one.relative),
            }
            for one in moved(found)
        ],
    }


def _verdict(found: Review) -> dict[str, object]:
    return {"verdict": found.verdict, "counts": {v: found.evaluation.counts[v] for v in COUNTED if v in VERDICTS}}


def _requirement(one: Asked) -> dict[str, object]:
    unit = stack_of(one.scope).unit

    def told(result: Result | None) -> dict[str, object] | None:
        if result is None:
            return None
        worst, stack = result.combined.worst, result.stack
        return {
            "worst": {"low": _shown(worst.low, unit), "high": _shown(worst.high, unit)},
            "limit": {"low": _shown(stack.low, unit), "high": _shown(stack.high, unit)},
            "margin": _shown(result.margin, unit),
        }

    return {
        "name": one.key,
        "unit": METRIC.get(unit, unit),
        "before": told(one.before),
        "after": told(one.after),
        "moved": one.relative > STILL,
    }


def _shown(value: float | None, unit: str) -> float | None:
    return plain_number(value * FACTOR.get(METRIC.get(unit, unit), 1.0)) if value is not None else None
