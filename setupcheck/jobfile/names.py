"""Names of the job file: which surface, cutter, machine or operation a text means, and the nearest one if it means none."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from setupcheck.notation import nearest

MACHINE_KINDS = ("lathe", "dividing-head", "rotary-table", "mill", "grinder", "drill-press", "jig-borer", "press")
"""A machine that needs no record of its own may be called by its kind."""


@dataclass(frozen=True, slots=True)
class Ref:
    """A surface of a part, perhaps as one operation left it (`wheel.rim@10`)."""

    part: str
    surface: str
    op: int | None = None

    def __str__(self) -> str:
        return f"{self.part}.{self.surface}" + (f"@{self.op}" if self.op is not None else "")


def find_surface(text: str, surfaces: Mapping[str, Sequence[str]], part: str | None = None) -> Ref | str:
    """The surface that `text` names, or one line that says why it names none.

    text      `rim`, `wheel.rim`, `wheel.rim@10`
    surfaces  surface names by part;  part  the part that a bare name belongs to, if stated
    """
    name, _, state = text.partition("@")
    if state and not state.isdigit():
        return f"'{text}' names no state. Write the operation after the @, as in {name}@30"
    op = int(state) if state else None
    if "." in name:
        owner, _, surface = name.partition(".")
        if owner not in surfaces:
            return f"there is no part '{owner}'. {_offer(owner, surfaces, '')}"
        if surface not in surfaces[owner]:
            return f"part '{owner}' has no surface '{surface}'. {_offer(surface, surfaces[owner], owner + '.')}"
        return Ref(owner, surface, op)
    owners = [p for p in surfaces if name in surfaces[p] and (part is None or p == part)]
    if len(owners) == 1:
        return Ref(owners[0], name, op)
    if not owners:
        inside = (
            surfaces.get(part, ())
            if part is not None
            else tuple(dict.fromkeys(s for p in surfaces for s in surfaces[p]))
        )
        return f"no surface is called '{name}'. {_offer(name, inside, '')}"
    both = " or ".join(f"{p}.{name}" for p in owners)
    return f"'{name}' is a surface of {len(owners)} parts. Write {both}"


def _offer(word: str, choices: Sequence[str] | Mapping[str, object], prefix: str) -> str:
    near = nearest(word, list(choices))
    if near is not None:
        return f"Did you mean {prefix}{near}?"
    listed = ", ".join(list(choices)[:12])
    return f"There is: {listed}" if listed else "Nothing of the kind is in the file"


@dataclass(frozen=True, slots=True)
class Miss:
    """A name that means nothing: where (path in the file) and the whole message; `key` where the key itself is wrong."""

    path: tuple[str | int, ...]
    message: str
    key: bool = False


def misses(data: Mapping[str, object]) -> Iterator[Miss]:
    """All names in the raw file that mean nothing. Works on the tree, so it finds them even where values are wrong too."""
    surfaces = {str(p): tuple(_map(_map(node).get("surfaces"))) for p, node in _map(data.get("parts")).items()}
    for part, node in _map(data.get("parts")).items():
        for i, relation in enumerate(_list(_map(node).get("given"))):
            for key in ("of", "about", "from"):
                yield from _surface(_map(relation).get(key), ("parts", part, "given", i, key), surfaces, str(part))
    seen: list[int] = []
    for i, setup in enumerate(_list(data.get("setups"))):
        yield from _setup_misses(_map(setup), ("setups", i), data, surfaces, seen)
        op = _map(setup).get("op")
        if isinstance(op, int) and not isinstance(op, bool):
            if op in seen:
                yield Miss(("setups", i, "op"), f"operation {op} is there twice. Write the next free number")
            elif seen and op < max(seen):
                yield Miss(
                    ("setups", i, "op"),
                    f"operation {op} stands after {max(seen)}. Write the setups in the order they are done",
                )
            seen.append(op)
    for i, wanted in enumerate(_list(data.get("require"))):
        if _map(wanted).get("what") != "torque":
            for key in ("of", "about", "clock"):
                yield from _surface(_map(wanted).get(key), ("require", i, key), surfaces, None)
        elif _map(wanted).get("of") is not None and not _is_join(data, _map(wanted).get("of")):
            yield Miss(
                ("require", i, "of"), f"operation {_map(wanted).get('of')} joins nothing. Write the op of the joining"
            )
    place = _map(data.get("place"))
    yield from _surface(place.get("axis"), ("place", "axis"), surfaces, None)
    yield from _surface(_map(place.get("worm_axis")).get("from"), ("place", "worm_axis", "from"), surfaces, None)
    yield from _surface(_map(data.get("mesh")).get("wheel"), ("mesh", "wheel"), surfaces, None)


def _setup_misses(
    setup: Mapping[str, object],
    at: tuple[str | int, ...],
    data: Mapping[str, object],
    surfaces: Mapping[str, Sequence[str]],
    before: Sequence[int],
) -> Iterator[Miss]:
    part = setup.get("part")
    own = part if isinstance(part, str) else None
    if own is not None and own not in surfaces:
        yield Miss((*at, "part"), f"there is no part '{own}'. {_offer(own, surfaces, '')}")
        own = None
    machine, machines = setup.get("machine"), _map(data.get("machines"))
    if isinstance(machine, str) and machine not in machines and machine not in MACHINE_KINDS:
        yield Miss(
            (*at, "machine"), f"there is no machine '{machine}'. {_offer(machine, (*machines, *MACHINE_KINDS), '')}"
        )
    keeps = setup.get("keeps")
    if isinstance(keeps, int) and keeps not in before:
        yield Miss(
            (*at, "keeps"), f"no operation {keeps} comes before this one. Write the op whose holding was never opened"
        )
    for hold in ("centre", "and_centre", "square", "stop", "clock"):
        entry = _map(_map(setup.get("hold")).get(hold))
        yield from _surface(entry.get("on"), (*at, "hold", hold, "on"), surfaces, own)
    cutters = _map(data.get("cutters"))
    for name, cut in _map(setup.get("cut")).items():
        found = find_surface(str(name), surfaces, own)
        if isinstance(found, str):
            yield Miss((*at, "cut", name), found, key=True)
        cutter = _map(cut).get("cutter")
        if isinstance(cutter, str) and cutter not in cutters:
            yield Miss((*at, "cut", name, "cutter"), f"there is no cutter '{cutter}'. {_offer(cutter, cutters, '')}")
        for i, gone in enumerate(_list(_map(cut).get("removes"))):
            yield from _surface(gone, (*at, "cut", name, "removes", i), surfaces, own)
        yield from _surface(_map(cut).get("from_surface"), (*at, "cut", name, "from_surface"), surfaces, own)
        depth = _map(cut).get("depth_from")
        touched = depth.get("surface") if isinstance(depth, dict) else depth
        yield from _surface(touched, (*at, "cut", name, "depth_from"), surfaces, own)
    join = _map(setup.get("join"))
    for key in ("outer", "inner"):
        yield from _surface(join.get(key), (*at, "join", key), surfaces, None)
    for key in ("on", "against"):
        yield from _surface(_map(join.get("stop")).get(key), (*at, "join", "stop", key), surfaces, None)


def _surface(
    text: object, path: tuple[str | int, ...], surfaces: Mapping[str, Sequence[str]], part: str | None
) -> Iterator[Miss]:
    if isinstance(text, str):
        found = find_surface(text, surfaces, part)
        if isinstance(found, str):
            yield Miss(path, found)


def _is_join(data: Mapping[str, object], of: object) -> bool:
    return any(str(_map(s).get("op")) == str(of) and _map(s).get("join") for s in _list(data.get("setups")))


def _map(node: object) -> Mapping[str, object]:
    return node if isinstance(node, dict) else {}


def _list(node: object) -> Sequence[object]:
    return node if isinstance(node, list) else ()
