"""What if, over a range: verdict and requirements at each value, and where they turn. Text and JSON."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace
from decimal import Decimal
from itertools import pairwise

from setupcheck.flow import Review, Varied
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.ranging import Range
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.judged import Result
from setupcheck.record import record
from setupcheck.report.as_json import json_text
from setupcheck.report.json import plain_number
from setupcheck.report.text import limits_in_words
from setupcheck.report.vary import STILL
from setupcheck.report.vary import as_data as pair_as_data
from setupcheck.report.wording import clean, title_of, unit_of, wrap
from setupcheck.rulebook.judging import reaches


@record
class Turn:
    """Two values one step apart, or as written, between which an answer changes."""

    low: Decimal
    high: Decimal
    before: str
    after: str


@record(eq=False)
class Swept:
    """A job over a range of one entry.

    before  the job as it stands;  found  one review for each value;  others  changes that hold for all of them
    turns   of the verdict;  kept  of each requirement by its name, `met` or `not met`
    """

    before: Review
    range: Range
    others: tuple[Change, ...]
    found: tuple[Varied, ...]
    turns: tuple[Turn, ...]
    kept: dict[str, tuple[Turn, ...]]


def sweep(before: Review, span: Range, others: Sequence[Change], again: Callable[[list[Change]], Varied]) -> Swept:
    """One review for each value of a range, and halving between two that differ, down to the step of the range.

    An answer that turns and turns back between two neighbouring values is not seen.
    Raises: JobError for a value that the job cannot have.
    """
    span = replace(span, paired=isinstance(node_at(before.loaded, span.key), tuple))
    made: dict[Decimal, Varied] = {}

    def at(number: Decimal) -> Varied:
        if number not in made:
            made[number] = again([*others, span.change(number)])
        return made[number]

    found = tuple(at(number) for number in span.numbers)
    names = [scope.key for scope in found[0].after.book.instances("stack")]
    turns = tuple(_turns(span, at, lambda one: one.after.verdict))

    def turns_of(name: str) -> tuple[Turn, ...]:
        return tuple(_turns(span, at, lambda one: _met(one.after, name)))

    kept = {name: turns_of(name) for name in names}
    return Swept(before, span, tuple(others), found, turns, kept)


def _turns(span: Range, at: Callable[[Decimal], Varied], says: Callable[[Varied], str]) -> Iterator[Turn]:
    for start, end in pairwise(span.numbers):
        first = says(at(start))
        while first != says(at(end)):  # fail, then warn, then pass: each turn by itself
            low, high = start, end
            while (middle := _between(low, high, span.step)) is not None:
                if says(at(middle)) == first:
                    low = middle
                else:
                    high = middle
            yield Turn(low, high, first, says(at(high)))
            start, first = high, says(at(high))


def _between(low: Decimal, high: Decimal, step: Decimal) -> Decimal | None:
    """A value on the grid of the step, near the middle and strictly inside; None where there is none."""
    middle = ((low + high) / 2 / step).to_integral_value() * step
    return middle if min(low, high) < middle < max(low, high) else None


def _met(found: Review, name: str) -> str:
    result = found.results.get(name)
    if result is None or result.margin is None:
        return "open"
    return "met" if reaches(result.margin, 0.0) else "not met"


def moving(swept: Swept) -> list[str]:
    """Names of the requirements that the range moves."""
    return [name for name in swept.kept if len({_said(one.after.results.get(name)) for one in swept.found}) > 1]


def _said(result: Result | None) -> object:
    """The worst case, rounded where sums in another order differ."""
    if result is None:
        return None
    worst = result.combined.worst
    return tuple(round(end / STILL) for end in (worst.low, worst.high))


def as_text(swept: Swept) -> str:
    """The whole table, 80 columns."""
    lines: list[str] = []
    for part in (_head(swept), _verdicts(swept), _requirements(swept)):
        lines += [*part, ""]
    lines += wrap(swept.before.rulebook.closing_line)
    return "\n".join(lines) + "\n"


def _head(swept: Swept) -> Iterator[str]:
    job, span = swept.before.loaded.job, swept.range
    yield from wrap(f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title))
    if swept.before.house is not None:
        from setupcheck.report.house import house_line  # few jobs have one

        yield from house_line(swept.before.house)
    first, last = (span.written(n) for n in (span.numbers[0], span.numbers[-1]))
    yield from wrap(f"what if {span.key} = {first} to {last}", rest="    ")
    if span.paired:
        yield from wrap("smallest and largest alike, as if it were known", first="    ")
    for change in swept.others:
        yield from wrap(f"and {change.key} = {change.value}", rest="    ")
    yield from wrap(f"as it stands: {swept.before.verdict.upper()}")


def _column(swept: Swept) -> int:
    return max(12, *(len(swept.range.written(n)) for n in swept.range.numbers))


def _verdicts(swept: Swept) -> Iterator[str]:
    wide = _column(swept)
    yield f"  {'value':>{wide}}  verdict  fail  open  warn"
    for number, one in zip(swept.range.numbers, swept.found, strict=True):
        counts = one.after.evaluation.counts
        told = "".join(f"{counts[v]:6d}" for v in ("fail", "open", "warn"))
        yield f"  {swept.range.written(number):>{wide}}  {one.after.verdict.upper():7}{told}"
    if not swept.turns:
        yield "The verdict is the same at each of them."
    for turn in swept.turns:
        yield from wrap(f"The verdict turns {_turn(swept, turn)}.", rest="    ")


def _turn(swept: Swept, turn: Turn) -> str:
    low, high = swept.range.written(turn.low), swept.range.written(turn.high)
    return f"from {turn.before} to {turn.after} between {low} and {high}"


def _requirements(swept: Swept) -> Iterator[str]:
    told = moving(swept)
    book = swept.found[0].after.book
    yield "WHAT WAS ASKED, at its worst" if told else "No requirement moves."
    wide = _column(swept)
    for scope in (scope for scope in book.instances("stack") if scope.key in told):
        yield from wrap(title_of(scope), first="  ", rest="      ")
        unit, digits = unit_of(book, scope)
        for number, one in zip(swept.range.numbers, swept.found, strict=True):
            result = one.after.results.get(scope.key)
            says = limits_in_words(result, unit, digits) if result is not None else "cannot be told"
            beyond = "  not met" if _met(one.after, scope.key) == "not met" else ""
            yield f"    {swept.range.written(number):>{wide}}  {says}{beyond}"
        for turn in swept.kept[scope.key]:
            yield from wrap(f"turns {_turn(swept, turn)}", first="    ", rest="      ")
    still = len(swept.kept) - len(told)
    if told and still:
        yield f"  {still} {'requirement does' if still == 1 else 'requirements do'} not move."


def as_json(swept: Swept) -> str:
    """The table as one JSON object, keys in a fixed order, ending in a newline."""
    return json_text(as_data(swept))


def as_data(swept: Swept) -> dict[str, object]:
    """The table as plain data: each value with its comparison but for the numbers, and every turn."""
    span = swept.range
    pairs = [pair_as_data(one) for one in swept.found]
    head = ("format", "setupcheck", "rule_book", "house", "job")
    return {
        **{key: pairs[0][key] for key in head},
        "range": {"key": clean(span.key), "step": plain_number(float(span.step)), "unit": clean(span.unit)},
        "set": [{"key": clean(one.key), "value": clean(one.value)} for one in swept.others],
        "before": pairs[0]["before"],
        "values": [
            {
                "value": plain_number(float(number)),
                "written": span.written(number),
                **{key: pair[key] for key in ("after", "findings", "requirements")},
            }
            for number, pair in zip(span.numbers, pairs, strict=True)
        ],
        "turns": [_turn_as_data(turn) for turn in swept.turns],
        "requirement_turns": {name: [_turn_as_data(turn) for turn in turns] for name, turns in swept.kept.items()},
    }


def _turn_as_data(turn: Turn) -> dict[str, object]:
    return {
        "between": [plain_number(float(turn.low)), plain_number(float(turn.high))],
        "from": turn.before,
        "to": turn.after,
    }
