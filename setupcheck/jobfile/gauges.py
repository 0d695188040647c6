"""Keys of a measurement that stand where no figure reads them: an indicator's division, the warmth of a part."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

from setupcheck.jobfile.drawing import Drawing
from setupcheck.jobfile.names import Miss

Path = tuple[str | int, ...]

_INDICATED = {"centre": "runout", "and_centre": "runout", "square": "face_runout", "stop": "error", "clock": "error"}

_SIZE = {"nominal", "measured"}
"""An entry with one of these keys is a size, and `at_temperature` in it no name."""
_ERROR = {"at_most", "measured", "device"}
"""An entry with one of these keys is an error entry, and `indicator` in it no name."""


def misplaced(drawing: Drawing) -> Iterator[Miss]:
    """Every `indicator` and `known_at` away from a hold, every `at_temperature` away from the diameter of a surface."""
    yield from _within(drawing.data, ())


def _within(node: object, path: Path) -> Iterator[Miss]:
    if isinstance(node, Mapping):
        if "at_temperature" in node and node.keys() & _SIZE:
            if not _is_diameter(path):
                says = (
                    "only the diameter of a surface is brought back to 20 degC. Correct this size by hand, and drop it"
                )
                yield Miss((*path, "at_temperature"), says)
            elif "measured" not in node:
                says = "at_temperature says how warm a measured size was. Write measured: beside it, or drop it"
                yield Miss((*path, "at_temperature"), says)
        if not _is_error_of_a_hold(path) and "indicator" in node and node.keys() & _ERROR:
            yield Miss(
                (*path, "indicator"),
                "an indicator is read at the error of a hold only. Drop it, or name it at the hold",
            )
        of_a_chuck = _is_error_of_a_hold(path) and path[4] == "runout"
        if "known_at" in node and node.keys() & _ERROR and not of_a_chuck:
            yield Miss(
                (*path, "known_at"),
                "known_at is the diameter a chuck was tested on. Drop it, or write it at the run-out of a hold",
            )
        for key, entry in node.items():
            yield from _within(entry, (*path, key))
    elif isinstance(node, Sequence) and not isinstance(node, str):
        for number, entry in enumerate(node):
            yield from _within(entry, (*path, number))


def _is_diameter(path: Path) -> bool:
    return len(path) == 5 and path[0] == "parts" and path[2] == "surfaces" and path[4] == "diameter"


def _is_error_of_a_hold(path: Path) -> bool:
    if len(path) != 5 or path[0] != "setups":
        return False
    return path[2:] == ("join", "trued", "runout") or (path[2] == "hold" and _INDICATED.get(str(path[3])) == path[4])
