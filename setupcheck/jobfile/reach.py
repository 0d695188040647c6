"""Places that are not on their surface: a circle larger than its face, a height beyond its ends, a tooth beyond its count."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from setupcheck.jobfile.drawing import TOUCH, Drawing, count_of, widest
from setupcheck.jobfile.models import Round
from setupcheck.jobfile.names import Miss, Ref
from setupcheck.jobfile.nodes import list_of, map_of, name_of, number_of

Path = tuple[str | int, ...]


def beyond(drawing: Drawing) -> Iterator[Miss]:
    """All places of the holds, of bought parts and of the requirements that their surface does not have."""
    for i, setup in enumerate(drawing.setups):
        yield from _hold(drawing, i, setup)
    for part, node in map_of(drawing.data.get("parts")).items():
        for i, relation in enumerate(list_of(map_of(node).get("given"))):
            of = drawing.ref(map_of(relation).get("of"), str(part))
            at: Path = ("parts", part, "given", i, "across")
            yield from _circle(drawing, at, map_of(relation).get("across"), of, since=0)
    for i, wanted in enumerate(list_of(drawing.data.get("require"))):
        asked = map_of(wanted)
        of = drawing.ref(asked.get("of"))
        if asked.get("what") == "face-run-out":  # a squareness may be stated over any length
            yield from _circle(drawing, ("require", i, "across"), asked.get("across"), of, since=_after(drawing, of))
        yield from _height(drawing, ("require", i, "at"), asked.get("at"), of)


def _after(drawing: Drawing, of: Ref | None) -> int:
    """Number of the setup before which a state is looked at: that behind its operation, or behind the whole route."""
    made = drawing.position.get(of.op) if of is not None and of.op is not None else None
    return made + 1 if made is not None else len(drawing.setups)


def _hold(drawing: Drawing, i: int, setup: Mapping[str, object]) -> Iterator[Miss]:
    own = name_of(setup.get("part"))
    hold = map_of(setup.get("hold"))
    for step in ("centre", "and_centre"):
        plane, at = map_of(hold.get(step)), ("setups", i, "hold", step)
        on = drawing.ref(plane.get("on"), own)
        yield from _height(drawing, (*at, "at"), plane.get("at"), on)
        for end in ("from", "to"):
            yield from _height(drawing, (*at, "grip", end), map_of(plane.get("grip")).get(end), on)
    square, clock = map_of(hold.get("square")), map_of(hold.get("clock"))
    face = drawing.ref(square.get("on"), own)
    yield from _circle(drawing, ("setups", i, "hold", "square", "across"), square.get("across"), face, since=i)
    yield from _number(drawing, ("setups", i, "hold", "clock", "number"), clock, own)


def _circle(drawing: Drawing, path: Path, node: object, on: Ref | None, *, since: int) -> Iterator[Miss]:
    across, bound = drawing.length(node), widest(drawing, on, since) if on is not None else None
    if across is not None and bound is not None and across > bound[1] + TOUCH:
        says = f"the indicator cannot run on {drawing.shown(across)}, {bound[0]} is {drawing.shown(bound[1])}"
        yield Miss(path, f"{says}. Write the circle {'it is read on' if path[0] == 'require' else 'it ran on'}")


def _height(drawing: Drawing, path: Path, node: object, on: Ref | None) -> Iterator[Miss]:
    """Compared with the drawn ends: an earlier state may have been shorter, which is not known here."""
    height, surface = drawing.length(node), drawing.surface(on)
    if height is None or on is None or not isinstance(surface, Round):
        return
    if not surface.low - TOUCH <= height <= surface.high + TOUCH:
        low, high = drawing.shown(surface.low), drawing.shown(surface.high)
        yield Miss(path, f"{drawing.shown(height)} is not on {on.surface}. Write a place from {low} to {high}")


def _number(drawing: Drawing, path: Path, clock: Mapping[str, object], own: str | None) -> Iterator[Miss]:
    on, number = drawing.ref(clock.get("on"), own), number_of(clock.get("number"))
    count = count_of(drawing.surface(on))
    if on is None or number is None or count is None or number <= count:
        return
    if count == 1:
        yield Miss(path, f"{on.surface} is a single one, and has no number {number}. Write number: 1, or leave it away")
    else:
        yield Miss(path, f"{on.surface} has {count} places, not {number}. Write a number from 1 to {count}")
