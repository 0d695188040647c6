"""Which typical value to measure first: by what share of the tightest requirement each one's usual range moves."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.judged import Result
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import Typical, table
from setupcheck.record import record


@record
class First:
    """One typical value that requirements rest on.

    row    the value with its range;  ops  the operations it stands in, in their order
    stack  the tightest requirement that hears of it;  moves  its worst case at the range's upper end less that at its lower
    end [base unit of the stack];  share  of that requirement's limit
    """

    row: Typical
    ops: tuple[int, ...]
    stack: Stack
    moves: float
    share: float


def measure_first(floor: Floor, results: tuple[Result, ...]) -> tuple[First, ...]:
    """Every typical value that a requirement with a limit rests on, the one whose range moves most first.

    moves = push of all its causes x (worst usual - best usual) / value, for a worst case is straight in each bound.
    All causes of one typical value count together: one measurement of the device answers for them.
    Source: the ledger's shares; ranges rules/data/typical.yaml; to rank by the tightest requirement is our choice.
    """
    found: dict[str, First] = {}
    ops: dict[str, set[int]] = {}
    rows = {row.name: row for row in table().values()}
    tightest_first = sorted(
        (r for r in results if r.margin_share is not None), key=lambda r: (r.margin_share or 0.0, r.stack.name)
    )
    for result in tightest_first:
        pushes: dict[str, float] = {}
        for share in result.combined.shares:
            for cause, part in _direct(share.cause, share.worst):
                for name in _rests(cause, floor.loaded, rows):
                    pushes[name] = pushes.get(name, 0.0) + part
                    ops.setdefault(name, set()).update({cause.op} if cause.op is not None else ())
        for name, push in pushes.items():
            row = rows[name]
            moves = push * (row.worst - row.best) / row.value
            if moves > 0.0 and name not in found:
                found[name] = First(row, (), result.stack, moves, moves / result.scale)
    ranked = sorted(found.items(), key=lambda item: (-item[1].share, item[0]))
    return tuple(replace(one, ops=tuple(sorted(ops[name]))) for name, one in ranked)


def _rests(cause: Cause, loaded: LoadedJob, rows: Mapping[str, Typical]) -> tuple[str, ...]:
    """The typical values of one cause: its own, or one that stands beside a shop's record."""
    names = (cause.rests_on,) if cause.rests_on else loaded.owned(*cause.paths)
    return tuple(name for name in names if name in rows)


def _direct(cause: Cause, size: float) -> Iterator[tuple[Cause, float]]:
    """A push on what it comes from: a high point is the sum of what leans or stands off behind it, each by its part."""
    if cause.of is None:
        yield cause, size
        return
    whole = cause.of.largest()
    if whole <= 0.0:
        return
    for one in cause.of.terms:
        yield from _direct(one, size * cause.of.reach(one) * one.bound / whole)


MEASURE_FIRST = (
    Quantity(
        "typical.first",
        "job",
        "",
        0,
        measure_first,
        {"floor": "route.floor", "results": "known stack.combined"},
        "typical values that requirements rest on, the one to measure first in front",
    ),
)
