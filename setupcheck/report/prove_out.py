"""Prove-out gaps in the report: which to cut, what they read, what to move, what they cannot see."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.book import Known, Scope
from setupcheck.quantities.prove_out import SIGHT
from setupcheck.quantities.scopes import CutEntry
from setupcheck.report.wording import clean, wrap
from setupcheck.report.worked_out import filled


def prove_outs(found: Review) -> Iterator[str]:
    """One block for each cut with prove-out gaps."""
    for scope in found.book.instances("cut"):
        entry = scope.node
        if isinstance(entry, CutEntry) and entry.cut.prove_out is not None:
            yield from _block(found, scope, entry)


def _block(found: Review, scope: Scope, entry: CutEntry) -> Iterator[str]:
    given = entry.cut.prove_out
    assert given is not None
    inches = found.book.inches
    unit, digits = ("in", 4) if inches else ("mm", 3)
    yield f"PROVE-OUT, op {scope.op}: shallow gaps before {clean(entry.name)}"
    ball = f", over a ball of {show(given.ball, unit, digits)}" if given.ball is not None else ""
    about = f" as the part turns about {clean(given.about)}" if given.about is not None else ""
    gaps = filled(found, scope, "{prove.gaps}")
    deep = show(given.depth, unit, digits)
    yield from _line(f"cut {deep} deep: {gaps}; cutter stopped and clear, read a dial in each{ball}{about}")
    for sentence in (
        "eccentric by {prove.eccentricity} ± {prove.uncertainty}, gap {prove.gap_out} stands farthest out",
        "that direction is known to ± {prove.direction_uncertainty}",
        "the plan has up to {prove.planned}, the requirements on these teeth allow {prove.allowed}",
        "{prove.move}",
        "moved, it asks up to {prove.shift} of a flank, where the depth to come takes {prove.stock}",
        "the readings are off a circle by {prove.misfit}, one is known to ± {prove.reading_uncertainty}",
    ):
        said = filled(found, scope, sentence)
        if said:
            yield from _line(said)
    if isinstance(found.book.get("prove.ring", scope), Known):
        yield from _line(SIGHT)


def _line(text: str) -> list[str]:
    return wrap(text, first="  - ", rest="    ")
