"""Passes of a cut: do they add up to the depth, and is the last one thick enough to cut? Lengths mm."""

from __future__ import annotations

from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.scopes import CutEntry


def passes_left(entry: CutEntry, path: str) -> float | Open | None:
    """Depth that the listed passes leave, below zero where they go too deep [mm]; None where no pass is listed.

    depth - sum of the passes.  Source: arithmetic.
    """
    from setupcheck.worm.depth import left_by_passes

    if not entry.cut.passes:
        return None
    if entry.cut.depth is None:
        return Open((f"{path}.depth",))
    with in_range:
        return left_by_passes(entry.cut.depth, entry.cut.passes)


def last_pass(entry: CutEntry) -> float | None:
    """Thickness of the last pass [mm]; None where fewer than two are listed. Source: the job file."""
    return entry.cut.passes[-1] if len(entry.cut.passes) > 1 else None


CUTTING = (
    Quantity(
        "cutter.passes_left",
        "cut",
        "um",
        1,
        passes_left,
        {"entry": ":", "path": "@path"},
        "depth that the listed passes leave",
    ),
    Quantity("cutter.last_pass", "cut", "mm", 3, last_pass, {"entry": ":"}, "thickness of the last pass"),
)
