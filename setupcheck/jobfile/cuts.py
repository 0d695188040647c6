"""What a cut leaves, said twice, below zero, or on a surface that cannot have it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from setupcheck.jobfile.drawing import Drawing, spoken
from setupcheck.jobfile.models import Surface
from setupcheck.jobfile.names import Miss
from setupcheck.notation import quoted

STOCK_LEFT = ("leave", "leave_on_diameter", "leave_on_radius")
LEFT = ("to", *STOCK_LEFT)
"""Keys that each say by themselves what size a cut leaves."""


def misstated(drawing: Drawing) -> Iterator[Miss]:
    """All cuts that do not say soundly what they leave."""
    for i, setup in enumerate(drawing.setups):
        for name, ref, cut in drawing.cut_by(setup):
            for key, message in _one(drawing, cut, drawing.surface(ref), ref.surface):
                yield Miss(("setups", i, "cut", name, key), message)


def _one(drawing: Drawing, cut: Mapping[str, object], surface: Surface | None, name: str) -> Iterator[tuple[str, str]]:
    """(key, message) of what is wrong in one cut."""
    stated = [key for key in cut if key in LEFT and cut[key] is not None]
    if len(stated) > 1:
        said = f"{', '.join(stated[:-1])} and {stated[-1]} {'both' if len(stated) == 2 else 'all'}"
        yield stated[1], f"{said} say what this cut leaves. Keep one of them"
    for key in stated:
        left = drawing.length(cut[key])
        if key not in STOCK_LEFT or left is None or left == 0.0:
            continue
        if left < 0.0:
            yield key, "the stock left is never below zero. Write to: and the size that this cut leaves"
        elif surface is None:
            continue
        elif surface.kind == "face" and key != "leave":
            yield key, f"{name} is a face, which has no diameter. Write leave: {quoted(cut[key]).strip(chr(39))}"
        elif surface.kind in ("teeth", "holes", "slot", "lines"):
            yield key, f"{name} is {spoken(surface)}, on which no stock is counted. Write state: rough"
