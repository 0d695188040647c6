"""What is known of a bought part, said twice: one surface has one place about an axis and one distance from a face."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.drawing import Drawing
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import list_of, map_of

_STATES = (
    ("about", "runout", "run-out"),
    ("about", "face_runout", "face run-out"),
    ("about", "division", "division"),
    ("from", "length", "distance"),
)
"""Reference, key and name of what a relation states."""


def repeated(drawing: Drawing) -> Iterator[Miss]:
    """Relations that state of a surface what an earlier one states already."""
    for part, node in map_of(drawing.data.get("parts")).items():
        first: dict[tuple[str, str], int] = {}
        for i, relation in enumerate(map_of(entry) for entry in list_of(map_of(node).get("given"))):
            of = drawing.ref(relation.get("of"), str(part))
            for reference, key, called in _STATES:
                if of is None or relation.get(key) is None or relation.get(reference) is None:
                    continue
                earlier = first.setdefault((of.surface, key), i)
                if earlier != i:
                    says = f"the {called} of {of.surface} stands in given[{earlier + 1}] already"
                    yield Miss(("parts", part, "given", i, key), f"{says}. Keep one of them")
