"""Other ways through the same job: each an edit of the file that was walked, ranked by what the worst stack gains. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

from setupcheck.jobfile.editing import Edit
from setupcheck.quantities.gates import origins, reaches, span
from setupcheck.quantities.trials import Bench, Tried
from setupcheck.quantities.typed_entry import shown, step_of
from setupcheck.record import record

FINEST = 0.002
"""Finest dial reading that a proposal asks for [mm]. Source: our screening choice, what a careful setter holds with a dial
of 1 um divisions."""
MOST_TOLD = 5
"""Proposals that are told. Source: our screening choice."""
WORTH = 0.02
"""Share of the worst stack's limit that a proposal has to gain to be told. Source: our screening choice."""
NO_LOSS = 1e-6
"""Share of its limit that a stack may lose where an order is to cost nothing: the noise of sums. Source: our choice."""
ALIKE = 1e-3
"""Share of a limit by which two gains may differ and still be alike. Source: our screening choice."""
STEP = 0.05
"""Step of a limit in which gains are ranked; within it the smaller change and the coarser reading come first. Source: our
screening choice."""
MOST_JUDGED = 12
"""Proposals that are put through every rule to find those that are told. Source: our screening choice."""


@record
class Idea:
    """A change of the route in the trade's words, before it is tried.

    kind     re-hold, square, stop, witness, swap or merge
    op       operation that is changed;  other  the one before it that comes into it (makes the datum, gives its holding)
    on, was  surface it is held on now and before;  by, than  the device now and before;  parent  surface a witness is turned on
    with_it  surfaces finished in that holding;  reading  to true it to [mm];  also  a second part of the same change
    wide     of a witness [mm];  at  its two ends, or where its face stands [mm]
    """

    kind: str
    op: int
    other: int | None = None
    on: str = ""
    was: str = ""
    by: str = ""
    than: str = ""
    parent: str = ""
    with_it: tuple[str, ...] = ()
    reading: float | None = None
    wide: float = 0.0
    also: Idea | None = None


@record(eq=False)
class Proposal:
    """An idea that was tried and does what it says.

    edits          of the job file;  key  of the stack it is ranked by
    before, after  worst case of that stack: how far inside (+) or outside (-) its limit, over the limit's scale
    cures          keys of stacks it brings inside;  left  how many stay outside
    saves          openings of the chuck it saves;  cautions  (operation, caution) that it brings into the job
    """

    idea: Idea
    edits: tuple[Edit, ...]
    key: str
    before: float
    after: float
    cures: tuple[str, ...]
    left: int
    tried: Tried
    saves: int = 0
    cautions: tuple[tuple[int | None, str], ...] = ()

    @property
    def gain(self) -> float:
        return self.after - self.before


Editor = Callable[[float | None], tuple[Edit, ...]]
"""The edits of an idea with a dial reading [mm], None where it has none."""


def worst_of(bench: Bench, of: str | None = None) -> str | None:
    """Key of the stack that is farthest outside, or nearest to its limit; of the one that is asked for."""
    judged = {
        key: r.margin_share
        for key, r in bench.results.items()
        if r.margin_share is not None and of in (None, f"require[{r.stack.index + 1}]")
    }
    return min(judged, key=lambda key: judged[key] or 0.0) if judged else None


def offered(bench: Bench, key: str, idea: Idea, editor: Editor, path: str = "") -> Proposal | None:
    """An idea tried with its reading, and with a finer one where only that is enough; None where it spoils anything.

    path  entry of the dial reading, "" where it has none
    """
    reading = idea.reading
    tried = bench.tried(editor(reading))
    if tried is None:
        return None
    finer = _finer(bench, tried, path, reading) if path and reading is not None else None
    if finer is not None:
        closer = bench.tried(editor(finer))
        if closer is not None:
            tried, reading = closer, finer
    base = {k: r.margin_share or 0.0 for k, r in bench.results.items() if k in tried.shares}
    if any(tried.shares[k] < min(base[k], 0.0) - NO_LOSS for k in base):
        return None  # another stack fails by it, or one that fails already fails by more
    cures = tuple(k for k in base if base[k] < 0.0 <= tried.shares[k])
    left = sum(share < 0.0 for share in tried.shares.values())
    return Proposal(
        replace(idea, reading=reading), editor(reading), key, base[key], tried.shares[key], cures, left, tried
    )


def _finer(bench: Bench, tried: Tried, path: str, reading: float) -> float | None:
    """The largest reading, finer than this one, that brings inside whatever a reading can; None where none is needed."""
    best = reading
    for key, figure in tried.figures.items():
        if tried.shares[key] >= 0.0:
            continue
        places, stack = reaches(figure), tried.stacks[key]
        mine = next((cause for cause in origins(places) if path in cause.paths), None)
        if mine is None:
            continue
        least, largest = span(figure, places, mine, reading, 0.0, low=stack.low, high=stack.high)
        if least == 0.0 and FINEST <= largest < best:
            best = largest
    if best >= reading:
        return None
    step = step_of("um", inches=bench.loaded.job.units == "in")
    best = math.floor(best / step + 1e-6) * step
    return best if best >= FINEST - 1e-9 else None


def dial(value: float, *, inches: bool) -> str:
    """A reading as it is typed."""
    return shown(value, "um", inches=inches)


def best_of(
    found: Iterable[Proposal], judge: Callable[[Proposal], Proposal | None], *, failing: bool
) -> tuple[Proposal, ...]:
    """The best few, each put through every rule first: those that bring most inside, then by gain, then the smaller change.

    For a job that passes, those that save openings of the chuck alone.
    """
    if failing:
        ranked = sorted((p for p in found if p.gain >= WORTH or p.cures), key=_rank)
        if ranked and ranked[0].left == 0:  # beside a whole remedy half of one is no help
            ranked = [p for p in ranked if p.left == 0]
    else:
        ranked = sorted((p for p in found if p.saves), key=lambda p: (-p.saves, p.idea.op))
    told: list[Proposal] = []
    for one in list(_unlike(ranked))[:MOST_JUDGED]:
        if len(told) == MOST_TOLD:
            break
        stands = judge(one)
        if stands is not None:
            told.append(stands)
    return tuple(told)


def _rank(one: Proposal) -> tuple[float, ...]:
    order = ("merge", "re-hold", "square", "stop", "swap", "witness").index(one.idea.kind)
    return one.left, -round(one.gain / STEP), len(one.edits), order, -(one.idea.reading or 0.0), one.idea.op


def _unlike(ranked: Iterable[Proposal]) -> Iterator[Proposal]:
    """One proposal for each thing that is done: a second band on the same operation for the same later one says nothing new,
    nor does another that only adds to one already told.
    """
    seen = set()
    told: list[Proposal] = []
    for one in ranked:
        if any(set(other.edits) < set(one.edits) and other.gain >= one.gain - ALIKE for other in told):
            continue  # what is told already gains as much with less
        told.append(one)
        what = (one.idea.kind, one.idea.op, one.idea.other if one.idea.kind == "witness" else one.idea.on)
        if what not in seen:
            seen.add(what)
            yield one
