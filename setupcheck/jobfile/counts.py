"""How many entries of a kind one job may have: what is computed grows with their products, and nobody plans beyond them."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.drawing import Drawing
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import list_of, map_of

MOST_PARTS = 20
MOST_SURFACES = 200
"""Surfaces of all parts together."""
MOST_SETUPS = 40
MOST_REQUIREMENTS = 60
MOST_SPACERS = 20
"""Spacers of one stop. All five are our screening choice: a long job has 2 parts, 25 surfaces, 8 setups, 14 requirements."""


def beyond(drawing: Drawing) -> Iterator[Miss]:
    """Lists and maps of a job that are longer than what is computed."""
    setups = list_of(drawing.data.get("setups"))
    for path, many, most, what in (
        (("parts",), len(map_of(drawing.data.get("parts"))), MOST_PARTS, "parts"),
        (("parts",), sum(map(len, drawing.names.values())), MOST_SURFACES, "surfaces"),
        (("setups",), len(setups), MOST_SETUPS, "setups"),
        (("require",), len(list_of(drawing.data.get("require"))), MOST_REQUIREMENTS, "requirements"),
    ):
        if many > most:
            yield Miss(
                path, f"the job has {many} {what}, more than {most}. Split it where a holding begins anew", key=True
            )
    for i, setup in enumerate(drawing.setups):
        for entry in ("hold", "join"):
            many = len(list_of(map_of(map_of(setup.get(entry)).get("stop")).get("spacers")))
            if many > MOST_SPACERS:
                says = f"the stop has {many} spacers, more than {MOST_SPACERS}. Write those that always lie together as one"
                yield Miss(("setups", i, entry, "stop", "spacers"), says, key=True)
