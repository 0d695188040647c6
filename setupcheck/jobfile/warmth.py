"""Temperatures that say something else than what makes them: a hub heated below its room, a shaft chilled above it. degC."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck import notation
from setupcheck.jobfile.drawing import Drawing
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import map_of, name_of
from setupcheck.notation import NotationError

ROOMS = (-40.0, 60.0)
"""degC: coldest and warmest room that work is done in, and rather a slip beyond. Source: our screening choice."""
REFERENCE = 20.0
"""degC of a room that is not stated, as in the job file. Source: ISO 1."""


def unlikely(drawing: Drawing) -> Iterator[Miss]:
    """A room that nobody works in, and heat and cold on the wrong side of it."""
    stated = drawing.data.get("room")
    room = REFERENCE if stated is None else _temperature(stated)
    if room is None:
        return
    if not ROOMS[0] <= room <= ROOMS[1]:
        says = f"a room of {stated} is none to work in"
        yield Miss(("room",), f"{says}. Write room: 20 degC or what it has, from -40 to 60 degC")
        return
    for i, setup in enumerate(drawing.setups):
        heat = map_of(map_of(setup.get("join")).get("heat"))
        here = ("setups", i, "join", "heat")
        hub, by = _temperature(heat.get("hub")), name_of(heat.get("by"))
        if hub is not None and by is not None and hub < room:
            says = f"{by} makes nothing colder than the room with its {room:g} degC, and hub is {heat.get('hub')}"
            yield Miss((*here, "hub"), f"{says}. Write the heat it is set to, as in hub: 150 degC, or drop by")
        shaft, cold_by = _temperature(heat.get("shaft")), name_of(heat.get("cold_by"))
        if shaft is not None and cold_by is not None and shaft > room:
            says = (
                f"{cold_by} makes nothing warmer than the room with its {room:g} degC, and shaft is {heat.get('shaft')}"
            )
            yield Miss((*here, "shaft"), f"{says}. Write its cold, as in shaft: -18 degC, or drop cold_by")


def _temperature(node: object) -> float | None:
    """A temperature that can be read [degC]; None where it is missing or wrong, which is told elsewhere."""
    if isinstance(node, bool) or not isinstance(node, str | int | float):
        return None
    try:
        return notation.temperature(node)
    except NotationError:
        return None
