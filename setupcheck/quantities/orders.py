"""Cheaper orders: neighbouring setups swapped, or cut in one holding. Each is tried on a copy of the job."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Drop, Edit, Exchange
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.finished import finished
from setupcheck.quantities.proposals import NO_LOSS, Editor, Idea, Proposal, offered
from setupcheck.quantities.sharing import bare, cut_in, may_share
from setupcheck.quantities.trials import Bench
from setupcheck.yamlfile import Data


def orders(bench: Bench, key: str) -> Iterator[Proposal]:
    """Merges and swaps of neighbouring setups still to come that spoil nothing."""
    job, gone = bench.loaded.job, finished(bench.loaded.job)
    for first, second in zip(job.setups, job.setups[1:], strict=False):
        if first.op in gone or second.op in gone:
            continue
        if may_share(bench.loaded, first, second):
            found = _merged(bench, key, first, second)
            if found is not None:
                yield found
        if _may_swap(bench.loaded, first, second):
            edits: tuple[Edit, ...] = (Exchange(first.op, second.op),)
            found = offered(bench, key, Idea("swap", second.op, first.op), always(edits))
            if found is not None:
                yield found


def always(edits: tuple[Edit, ...]) -> Editor:
    """An editor of an idea without a dial reading."""
    return lambda _: edits


def _merged(bench: Bench, key: str, first: Setup, second: Setup) -> Proposal | None:
    """The second setup cut in the holding of the first. It saves an opening of the chuck where no stack loses by it."""
    path = f"setups.{second.op}"
    holder = first.keeps if first.keeps is not None else first.op
    edits: tuple[Edit, ...] = (
        Drop(f"{path}.hold"),
        Drop(f"{path}.looks_at_tool"),
        Change(f"{path}.keeps", str(holder)),
    )
    idea = Idea("merge", second.op, holder, with_it=tuple(second.cut))
    found = offered(bench, key, idea, always(edits))
    if found is None:
        return None
    base = {k: r.margin_share or 0.0 for k, r in bench.results.items()}
    loses = any(share < base[k] - NO_LOSS for k, share in found.tried.shares.items())
    return found if loses else replace(found, saves=1)


def _may_swap(loaded: LoadedJob, first: Setup, second: Setup) -> bool:
    """Whether two setups can change places: neither joins or keeps a holding, nothing names them, neither needs the other's cut.

    Whether each datum still stands then is seen by walking the changed route.
    """
    if any(s.hold is None or not s.cut for s in (first, second)):
        return False
    if any(s.keeps in (first.op, second.op) for s in loaded.job.setups):
        return False
    marks = (f"@{first.op}", f"@{second.op}")
    if any(word.endswith(marks) for word in _texts(loaded.tree.data)):
        return False
    mine, theirs = cut_in(loaded, first), cut_in(loaded, second)
    needs = {
        bare(loaded, name, second)
        for cut in second.cut.values()
        for name in (cut.from_surface, cut.depth_from.surface if cut.depth_from is not None else None)
        if name is not None
    }
    gone = {bare(loaded, name, first) for cut in first.cut.values() for name in cut.removes}
    return not (mine & theirs) and not (needs & mine) and not (gone & (theirs | needs))


def _texts(data: Data) -> Iterator[str]:
    if isinstance(data, str):
        yield data
    elif isinstance(data, dict):
        for key, value in data.items():
            yield key
            yield from _texts(value)
    elif isinstance(data, list):
        for one in data:
            yield from _texts(one)
