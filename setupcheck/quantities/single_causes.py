"""What each entry of the job file would have to become, by itself, to bring one stack inside. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence

from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.entries import Stated, row_of, stated
from setupcheck.quantities.finished import finished
from setupcheck.quantities.gates import origins, reaches, scaled, worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.remedies import twins
from setupcheck.quantities.trials import Bench
from setupcheck.quantities.typed_entry import step_of
from setupcheck.record import record

IN_HAND = 0.1
"""Share of its limit that a stack should keep in hand; below it a stack is called tight. Source: our screening choice."""
LITTLE = 0.1
"""Share of what is over below which taking a cause away altogether is called no help. Source: our screening choice."""
MOST_STEPS = 12
"""Steps of the last decimal by which a value is moved to the one that just does, as typed in. Source: our choice."""

HALF = 0.5
"""Share of an entry that is typed in to see whether its causes act as they are added up. Source: our choice."""
AGREES = 1e-6
"""Share by which both may differ: the noise of sums. Source: our choice."""


@record
class Entry:
    """One entry of the job file and every cause that rests on it, in one figure.

    paths    where its numbers stand;  also  entries that speak of the same kept device and change with it
    says     what each path says now
    typical  name of the typical value, or of the shop's own record, that stands in for it, or ""
    """

    paths: tuple[str, ...]
    causes: tuple[Cause, ...]
    says: tuple[Stated, ...]
    also: tuple[str, ...] = ()
    typical: str = ""

    @property
    def path(self) -> str:
        return self.paths[0]

    @property
    def of_the_job(self) -> bool:
        """Whether a setup or machine of this job makes it, not a bought part or the housing."""
        return self.causes[0].op is not None and not self.path.startswith(("parts.", "mesh", "place", "worm"))


@record
class Row:
    """One entry against one stack.

    takes    by how much the worst case falls if it were nothing [base unit of the stack]
    still    how far outside the stack then still is [base unit]; 0 or less where it is inside
    needed   what each path may say at most for the stack to be inside [mm or rad]; empty where it does not do it alone
    typed    how that is typed into the file; empty where one number cannot say it
    """

    entry: Entry
    takes: float
    still: float
    needed: tuple[float, ...] = ()
    typed: tuple[Change, ...] = ()


@record
class Spread:
    """Every entry of setups still to come, made smaller alike.

    factor  what is left of each; None where not even nothing of them all is enough
    still   how far outside the stack is without any of them [base unit]
    typed   how that is typed into the file; empty where one of them cannot be
    """

    entries: tuple[Entry, ...]
    factor: float | None
    still: float
    typed: tuple[Change, ...] = ()


@record
class Table:
    """One stack outside its limit, or close to it.

    over     how far outside it is, or by how much it misses the tenth in hand [base unit];  tight  it is inside
    rows     entries that can still be changed, those first that take most;  done  entries of operations that are done
    unsaid   causes whose entry is not one number
    """

    key: str
    result: Result
    over: float
    tight: bool
    rows: tuple[Row, ...]
    spread: Spread
    done: tuple[Row, ...] = ()
    unsaid: tuple[Cause, ...] = ()

    @property
    def enough(self) -> tuple[Row, ...]:
        """Rows whose entry alone does it."""
        return tuple(row for row in self.rows if row.needed)

    @property
    def some(self) -> tuple[Row, ...]:
        """Rows that do not do it alone, and are no small matter."""
        return tuple(row for row in self.rows if not row.needed and row.takes >= LITTLE * self.over)

    @property
    def no_help(self) -> tuple[Row, ...]:
        """Rows that could vanish without changing anything that counts."""
        return tuple(row for row in self.rows if not row.needed and row.takes < LITTLE * self.over)


def entries(loaded: LoadedJob, causes: Sequence[Cause]) -> Iterator[Entry | Cause]:
    """The entries behind some causes, each once; a cause by itself where no single number says it."""
    grouped: dict[tuple[str, ...], list[Cause]] = {}
    for cause in causes:
        if cause.mode != "derived":
            grouped.setdefault(cause.paths or (cause.identity,), []).append(cause)
    for paths, group in grouped.items():
        first = group[0]
        says = [stated(loaded, path, first) for path in paths] if first.paths else []
        known = tuple(one for one in says if one is not None and one.now > 0.0)
        row = row_of(first)
        if row is not None and not known:  # the typical values of a division, which come from its way of dividing
            unit = "arcsec" if ".divide." in paths[0] else "um"
            known = tuple(Stated(row.value, unit) for _ in paths)
        if not known or len(known) != len(paths):
            yield from group
            continue
        also = tuple(twins(loaded, paths[0])) if first.shared else ()
        rests_on = first.rests_on or next(iter(sorted(loaded.owned(*paths))), "")
        yield Entry(paths, tuple(group), known, also, rests_on)


def tables(bench: Bench, *, of: str | None = None) -> tuple[Table, ...]:
    """A table for every stack outside its limit, and for every tight one; for `of` (`require[2]`) in any case.

    Source: the ledger's worst case, each printed value typed into a copy of the job and walked again.
    """
    found = []
    for key, result in bench.results.items():
        share, asked = result.margin_share, of == f"require[{result.stack.index + 1}]"
        if share is None or (of is not None and not asked):
            continue
        if share < IN_HAND or asked:
            found.append(_table(bench, key, result))
    return tuple(sorted(found, key=lambda one: (one.tight, one.result.margin_share or 0.0)))


def _table(bench: Bench, key: str, result: Result) -> Table:
    stack, figure = result.stack, result.figure
    margin = result.margin
    assert margin is not None
    tight = margin >= 0.0
    spare = IN_HAND * result.scale if tight else 0.0
    low = stack.low + spare if stack.low is not None else None
    high = stack.high - spare if stack.high is not None else None
    limits = _Limits(bench, stack.index, low, high)
    over = worst_excess(figure, low, high)
    gone = finished(bench.loaded.job)
    rows, done, unsaid, sharing = [], [], [], []
    for one in entries(bench.loaded, origins(reaches(figure))):
        if isinstance(one, Cause):
            unsaid.append(one)
        elif any(cause.op in gone for cause in one.causes):
            still = limits.excess(at(figure, one, 0.0))
            done.append(Row(one, over - still, still))
        else:
            rows.append(_row(limits, figure, one, over))
            sharing += [one] if one.of_the_job else []
    rows.sort(key=lambda row: (not row.entry.of_the_job and bool(row.needed), -row.takes))
    return Table(
        key, result, over, tight, tuple(rows), _spread(limits, figure, sharing, over), tuple(done), tuple(unsaid)
    )


@record(eq=False)
class _Limits:
    """One requirement's limits, with the bench on which a change is tried [base unit]."""

    bench: Bench
    index: int
    low: float | None
    high: float | None

    def excess(self, figure: Figure) -> float:
        return worst_excess(figure, self.low, self.high)

    def of(self, figure: Figure, entry: Entry) -> Callable[[float], float]:
        """How far outside the stack is with an entry so many times as large.

        From the causes of the figure; where half of it typed in gives another answer (a cause that also acts in another
        way), from the job itself, at no less than one step of the last decimal.
        """

        def on_paper(factor: float) -> float:
            return self.excess(at(figure, entry, factor))

        def in_the_file(factor: float) -> float:
            step = step_of(entry.says[0].unit, inches=self.bench.loaded.job.units == "in")
            return self.typed_in(typed(self.bench, entry, max(factor, step / entry.says[0].now)))

        half = typed(self.bench, entry, HALF)
        if not half:
            return on_paper
        share = stated_share(self.bench, entry, half)
        told = self.typed_in(half)
        return on_paper if abs(told - on_paper(share)) <= AGREES * max(abs(told), abs(on_paper(1.0))) else in_the_file

    def typed_in(self, changes: Sequence[Change]) -> float:
        """How far outside the stack is once the changes are typed in."""
        figure = self.bench.figure(changes, self.index)
        return self.excess(figure) if figure is not None else math.inf


def at(figure: Figure, entry: Entry, factor: float) -> Figure:
    """The figure with every cause of an entry so many times as large."""
    for cause in entry.causes:
        figure = scaled(figure, cause, factor)
    return figure


def _row(limits: _Limits, figure: Figure, entry: Entry, over: float) -> Row:
    excess = limits.of(figure, entry)
    still = excess(0.0)
    if still > 0.0 or over <= 0.0:
        return Row(entry, over - still, still)
    factor = _largest(excess)
    needed, changes = _just_enough(limits, entry, factor)
    return Row(entry, over - still, still if needed else max(still, 0.0), needed, changes)


def _largest(excess: Callable[[float], float]) -> float:
    """The largest factor in 0 .. 1 at which a convex excess is not above zero, which it is at 0.

    Chords from the inside end: each chord of a convex function meets zero at or before the function does.
    Source: regula falsi, textbook.
    """
    inside, outside = 0.0, 1.0
    low, high = excess(0.0), excess(1.0)
    if high <= 0.0:
        return 1.0
    for _ in range(40):
        chord = inside + (outside - inside) * (-low) / (high - low)
        value = excess(chord)
        if value <= 0.0:
            if chord - inside < 1e-9:
                break
            inside, low = chord, value
            half = (inside + outside) / 2.0
            value = excess(half)
            if value <= 0.0:
                inside, low = half, value
            else:
                outside, high = half, value
        else:  # not convex after all: the point itself is outside
            outside, high = chord, value
    return inside


def _just_enough(limits: _Limits, entry: Entry, factor: float) -> tuple[tuple[float, ...], tuple[Change, ...]]:
    """Values on the last printed decimal that just do, typed in and walked again; empty where no such value is left."""
    loaded = limits.bench.loaded
    inches = loaded.job.units == "in"
    step = step_of(entry.says[0].unit, inches=inches)
    now = entry.says[0].now
    count = math.floor(now * factor / step + 1e-6)
    least = max(one.least for one in entry.says)
    if count < 1 or count * step <= least:
        return (), ()
    if typed(limits.bench, entry, count * step / now) == ():
        return tuple(one.now * count * step / now for one in entry.says), ()
    for _ in range(MOST_STEPS):
        if limits.typed_in(typed(limits.bench, entry, count * step / now)) <= 0.0:
            break
        count -= 1
        if count < 1 or count * step <= least:
            return (), ()
    else:
        return (), ()
    for _ in range(MOST_STEPS):
        if (count + 1) * step >= now or limits.typed_in(typed(limits.bench, entry, (count + 1) * step / now)) > 0.0:
            break
        count += 1
    share = count * step / now
    return tuple(one.now * share for one in entry.says), typed(limits.bench, entry, share)


def typed(bench: Bench, entry: Entry, factor: float, *, up: bool = False) -> tuple[Change, ...]:
    """An entry, and all that go with it, so many times as large, to the last printed decimal; () where it cannot be said."""
    found = []
    inches = bench.loaded.job.units == "in"
    for path, said in (
        *zip(entry.paths, entry.says, strict=True),
        *((path, entry.says[0]) for path in entry.also),
    ):
        step = step_of(said.unit, inches=inches)
        count = said.now * factor / step
        value = (math.ceil(count - 1e-6) if up else math.floor(count + 1e-6)) * step
        change = bench.typed(path, value, said.unit) if value > 0.0 else None
        if change is None:
            return ()
        found.append(change)
    return tuple(found)


def stated_share(bench: Bench, entry: Entry, changes: Sequence[Change]) -> float:
    """What share of its value the first path of an entry has once the changes are typed in, rounding included."""
    floor = bench.changed(changes)
    said = stated(floor.loaded, entry.path) if floor is not None else None
    return said.now / entry.says[0].now if said is not None else math.nan


def _spread(limits: _Limits, figure: Figure, sharing: Sequence[Entry], over: float) -> Spread:
    def together_at(factor: float) -> float:
        one = figure
        for entry in sharing:
            one = at(one, entry, factor)
        return limits.excess(one)

    still = together_at(0.0) if sharing else over
    if still > 0.0 or over <= 0.0:
        return Spread(tuple(sharing), None, still)
    factor = _largest(together_at)
    for _ in range(MOST_STEPS):
        each = [typed(limits.bench, entry, factor) for entry in sharing]
        if not all(each):
            return Spread(tuple(sharing), factor, still)
        together = tuple(change for one in each for change in one)
        if limits.typed_in(together) <= 0.0:
            return Spread(tuple(sharing), factor, still, together)
        factor *= 0.99
    return Spread(tuple(sharing), None, still)
