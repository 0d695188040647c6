"""Devices on the side of a part that they cannot hold: a mandrel on an outside, a collet in a bore."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from setupcheck.jobfile.drawing import Drawing, spoken
from setupcheck.jobfile.holders import IN_A_BORE, ROUND_AN_OUTSIDE
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import map_of, name_of

OUTSIDES = ("cylinder", "throat", "teeth")
"""Kinds of surface that are outside beyond doubt; a taper or thread may be inside, the job file does not say."""


def wrong(drawing: Drawing) -> Iterator[Miss]:
    """All holds whose device cannot be where the job file puts it."""
    for i, setup in enumerate(drawing.setups):
        hold, own = map_of(setup.get("hold")), name_of(setup.get("part"))
        first = map_of(hold.get("centre"))
        for step in ("centre", "and_centre"):
            plane = map_of(hold.get(step))
            by = name_of(plane.get("by", first.get("by")))
            if by is not None and (message := _cannot(drawing, plane, own, by)) is not None:
                yield Miss(("setups", i, "hold", step, "by" if "by" in plane else "on"), message)


def _cannot(drawing: Drawing, plane: Mapping[str, object], own: str | None, by: str) -> str | None:
    on = drawing.ref(plane.get("on"), own)
    surface = drawing.surface(on)
    if on is None or surface is None:
        return None
    held = f"{on.surface} is {spoken(surface)}"
    if by in IN_A_BORE and surface.kind in OUTSIDES:
        outside = "four-jaw, three-jaw or collet" if surface.kind == "cylinder" else "four-jaw or three-jaw"
        return f"a mandrel goes into a bore, and {held}. Write {outside} for this outside, or name a bore"
    if by in ROUND_AN_OUTSIDE and surface.kind == "bore":
        says = f"a {by} lies round an outside, and {held}"
        return f"{says}. Write expanding-mandrel, four-jaw or three-jaw for this bore, or name an outside"
    return None
