"""Where a reading is high: words that name no direction of the part it is read on."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from typing import Literal

from setupcheck import notation
from setupcheck.jobfile.drawing import Drawing, count_of, spoken
from setupcheck.jobfile.names import LONGEST_OP, Miss
from setupcheck.jobfile.nodes import list_of, map_of, name_of
from setupcheck.notation import NotationError, quoted

Path = tuple[str | int, ...]

_PLACES: dict[str, Literal["teeth", "holes"]] = {"tooth": "teeth", "gap": "teeth", "hole": "holes"}
_IN_A_HOLD = "Write a tooth or hole already cut (tooth 14), an angle from the mark (90 deg), mark, or jaw 2"
_ALONE = "Write mark, or an angle from it, as in 90 deg"


def nowhere(drawing: Drawing) -> Iterator[Miss]:
    """All `high_at` that name no direction. Whether a tooth is cut by then is seen along the route, not here."""
    for path, entry in _alone(drawing):
        text = name_of(map_of(entry).get("high_at"))
        if text is not None and text != "mark" and (wrong := _no_angle(text)):
            yield Miss(
                (*path, "high_at"), wrong if text[:1].isdigit() else f"{quoted(text)} means nothing here. {_ALONE}"
            )
    most = _most(drawing)
    for path, entry, part in _of_holds(drawing):
        text = name_of(map_of(entry).get("high_at"))
        if text is not None and (message := _in_a_hold(drawing, text.strip(), part, most)):
            yield Miss((*path, "high_at"), message)


def _most(drawing: Drawing) -> Mapping[str, int] | None:
    """The largest count of teeth and of holes that a part has; None where some surface could not be read."""
    most: dict[str, int] = {}
    for part, names in drawing.names.items():
        surfaces = drawing.parts.get(part, {})
        if len(surfaces) != len(names):
            return None
        for surface in surfaces.values():
            most[surface.kind] = max(most.get(surface.kind, 0), count_of(surface) or 0)
    return most


def _alone(drawing: Drawing) -> Iterator[tuple[Path, object]]:
    """Readings of a machine, a bought part or a joint: nothing is there to count from but the mark."""
    for name, machine in map_of(drawing.data.get("machines")).items():
        yield ("machines", name, "axis_runout"), map_of(machine).get("axis_runout")
    for part, node in map_of(drawing.data.get("parts")).items():
        for i, relation in enumerate(list_of(map_of(node).get("given"))):
            for key in ("runout", "face_runout"):
                yield ("parts", part, "given", i, key), map_of(relation).get(key)
    for i, setup in enumerate(drawing.setups):
        join = map_of(setup.get("join"))
        yield ("setups", i, "join", "fit_error"), join.get("fit_error")
        yield ("setups", i, "join", "trued", "runout"), map_of(join.get("trued")).get("runout")


def _of_holds(drawing: Drawing) -> Iterator[tuple[Path, object, str | None]]:
    """Readings of the holds, with the part that is held."""
    for i, setup in enumerate(drawing.setups):
        hold, part = map_of(setup.get("hold")), drawing.held_part(setup)
        for step in ("centre", "and_centre"):
            plane, at = map_of(hold.get(step)), ("setups", i, "hold", step)
            yield (*at, "runout"), plane.get("runout"), part
            for n, below in enumerate(list_of(plane.get("through"))):
                yield (*at, "through", n, "runout"), map_of(below).get("runout"), part
        yield ("setups", i, "hold", "square", "face_runout"), map_of(hold.get("square")).get("face_runout"), part


def _no_angle(text: str) -> str:
    """What is wrong with a text as an angle; empty where it is one."""
    try:
        notation.angle(text)
    except NotationError as wrong:
        return str(wrong)
    return ""


def _in_a_hold(drawing: Drawing, text: str, part: str | None, most: Mapping[str, int] | None) -> str:
    """What is wrong with a direction in a hold; empty where nothing certainly is."""
    if text == "mark" or not (no_angle := _no_angle(text)):
        return ""
    if named := re.fullmatch(r"(tooth|gap|hole|jaw)\s+([0-9]+)", text):
        return _numbered(text, named[1], named[2], most)
    if text[:1].isdigit():
        return no_angle
    ref = drawing.ref(text, part)
    if ref is None:
        return f"{quoted(text)} names no direction. {_IN_A_HOLD}"
    surface = drawing.surface(ref)
    if surface is None or count_of(surface) is not None:
        return ""
    return f"{ref.surface} is {spoken(surface)}, which points nowhere. {_IN_A_HOLD}"


def _numbered(text: str, word: str, digits: str, most: Mapping[str, int] | None) -> str:
    """A tooth, gap, hole or jaw by its number: there is none of the kind, or none with this number, in the whole file."""
    if not digits.strip("0"):
        return f"{quoted(text)} names no direction. Write a number from 1 up, as in {word} 1"
    if word == "jaw" or most is None:
        return ""
    kind = _PLACES[word]
    count = most.get(kind, 0)
    if not count:
        return f"{quoted(text)} names no direction: no part has {kind}. Write an angle from the mark, as in 90 deg"
    if len(digits) > LONGEST_OP or int(digits) > count:
        number = quoted(digits).strip("'")
        return f"there is no {word} {number}, the count is {count}. Write a number from 1 to {count}"
    return ""
