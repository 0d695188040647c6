"""Everything `setupcheck remedy` tells of one job: tables, what is good enough, what to measure, other orders. mm, rad."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from itertools import chain

from setupcheck.errors import JobError, SetupcheckError, printable
from setupcheck.jobfile.editing import Edit, Exchange
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.quantities.good_enough import Enough, Pays, good_enough, next_measured
from setupcheck.quantities.judged import Result
from setupcheck.quantities.orders import orders
from setupcheck.quantities.proposals import Proposal, best_of, worst_of
from setupcheck.quantities.rehold import reholds
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.single_causes import Table, tables
from setupcheck.quantities.trials import Bench, Gives
from setupcheck.quantities.witness import witnesses
from setupcheck.record import record


@record
class Judged:
    """What a review says in all: its verdict, findings by rule and level, its cautions (operation, name)."""

    verdict: str
    counts: Mapping[tuple[str, str], int]
    cautions: frozenset[tuple[int | None, str]]


@record(eq=False)
class Mended:
    """What was found for one job.

    tables     stacks outside their limit, then tight ones;  enough  what need not be better, of a job that passes
    pays       measurements that give most;  proposals  other datums and orders
    failing    whether any stack is outside;  worst  key of the stack the proposals are ranked by
    walks      changed routes that were tried;  met  whether that was the most that is tried
    """

    tables: tuple[Table, ...]
    enough: tuple[Enough, ...]
    pays: tuple[Pays, ...]
    proposals: tuple[Proposal, ...]
    failing: bool
    worst: str | None
    walks: int
    met: bool


def mended(
    loaded: LoadedJob,
    floor: Floor,
    results: Mapping[str, Result],
    now: Judged,
    judge: Callable[[Sequence[Edit]], Judged],
    again: Callable[[LoadedJob], LoadedJob],
    gives: Gives,
    *,
    of: str | None = None,
) -> Mended:
    """All of it.

    judge  the whole review of the job with an edit;  again  puts the shop's own record back into a changed job
    gives  what a device is taken to give, by the shop's own figures where it has any
    Raises: SetupcheckError for a requirement that is not there, or cannot be told.
    """
    bench = Bench(loaded, floor, results, again, gives)
    _asked(bench, of)
    found = tables(bench, of=of)
    key = worst_of(bench, of)
    failing = any(r.margin is not None and r.margin < 0.0 for r in results.values())
    proposals: tuple[Proposal, ...] = ()
    if key is not None:

        def stands(one: Proposal) -> Proposal | None:
            return _judged(one, now, judge)

        ideas = chain(orders(bench, key), reholds(bench, key), witnesses(bench, key)) if failing else orders(bench, key)
        proposals = best_of(ideas, stands, failing=failing)
    enough, pays = good_enough(bench), next_measured(bench, of=of)
    return Mended(found, enough, pays, proposals, failing, key, bench.walks, bench.met)


def _asked(bench: Bench, of: str | None) -> None:
    """Raises: SetupcheckError unless the requirement is there and can be told."""
    if of is None:
        return
    there = len(bench.loaded.job.require)
    known = {f"require[{r.stack.index + 1}]" for r in bench.results.values() if r.margin is not None}
    if of in known:
        return
    if of in {f"require[{i + 1}]" for i in range(there)}:
        raise SetupcheckError(
            f"{of} cannot be told yet, so nothing can be tried for it. Review the job and fill what is open"
        )
    says = f"it has require[1] to require[{there}]" if there else "it asks for nothing"
    raise SetupcheckError(
        f"--of {printable(of)[:60]!r} is no requirement of this job: {says}. Write it as in --of 'require[1]'"
    )


def _judged(one: Proposal, now: Judged, judge: Callable[[Sequence[Edit]], Judged]) -> Proposal | None:
    """The proposal with the cautions it brings; None where any rule finds more to say against the changed job."""
    try:
        after = judge(one.edits)
    except JobError:
        return None
    for rule in {rule for rule, _ in after.counts}:
        for levels in (("fail",), ("fail", "warn"), ("open",)):
            if sum(after.counts.get((rule, x), 0) for x in levels) > sum(now.counts.get((rule, x), 0) for x in levels):
                return None
    there = {edit.first: edit.second for edit in one.edits if isinstance(edit, Exchange)}
    there |= {second: first for first, second in there.items()}
    had = {(there.get(op, op) if op is not None else None, name) for op, name in now.cautions}
    return replace(one, cautions=tuple(sorted(after.cautions - had, key=lambda c: (c[0] or 0, c[1]))))
