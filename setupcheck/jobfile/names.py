"""Names of the job file: which surface, cutter, machine or operation a text means, and the nearest one if it means none."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

from setupcheck.jobfile.nodes import list_of, map_of, name_of
from setupcheck.notation import nearest, quoted
from setupcheck.record import record

MACHINE_KINDS = ("lathe", "dividing-head", "rotary-table", "mill", "grinder", "drill-press", "jig-borer", "press")
"""A machine that needs no record of its own may be called by its kind."""


BLANKS = ("bar", "blank", "billet", "casting", "forging", "stock")
A_BLANK = "What the part is made from is a surface too: {name}: {{kind: cylinder, diameter: 95, from: -5, to: 25, made: stock}}"
"""What a newcomer calls the piece before the first cut, and how it is written; the sizes are an example."""

LONGEST_OP = 6
"""Digits of an operation number; the models allow 1 to 100,000."""


@record
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
    name, at, state = text.partition("@")
    if at and not (state.isascii() and state.isdigit() and len(state) <= LONGEST_OP):
        return f"{quoted(text)} names no state. Write the operation after the @, as in {name}@30"
    op = int(state) if at else None
    if "." in name:
        owner, _, surface = name.partition(".")
        if owner not in surfaces:
            return f"there is no part {quoted(owner)}. {_offer(owner, surfaces, '')}"
        if surface not in surfaces[owner]:
            return f"part {quoted(owner)} has no surface {quoted(surface)}. {_offer(surface, surfaces[owner], owner + '.')}"
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
        blank = f". {A_BLANK.format(name=name)}" if name in BLANKS else ""
        return f"no surface is called {quoted(name)}. {_offer(name, inside, '')}{blank}"
    both = " or ".join(f"{p}.{name}" for p in owners)
    return f"{quoted(name)} is a surface of {len(owners)} parts. Write {both}"


def _offer(word: str, choices: Sequence[str] | Mapping[str, object], prefix: str) -> str:
    near = nearest(word, list(choices))
    if near is not None:
        return f"Did you mean {prefix}{near}?"
    listed = ", ".join(list(choices)[:12])
    return f"There is: {listed}" if listed else "Nothing of the kind is in the file"


@record
class Miss:
    """A name that means nothing: where (path in the file) and the whole message; `key` where the key itself is wrong."""

    path: tuple[str | int, ...]
    message: str
    key: bool = False


@record
class Uses:
    """What the setups of a file do with its surfaces, each as (part, surface).

    cut      surfaces that some operation cuts;  removed  those that some cut takes away
    held     (path in the file, part, surface) of each datum of a hold
    """

    cut: frozenset[tuple[str, str]]
    removed: frozenset[tuple[str, str]]
    held: tuple[tuple[tuple[str | int, ...], str, str], ...]


HOLDS = ("centre", "and_centre", "square", "stop", "clock")


def uses(data: Mapping[str, object]) -> Uses:
    """What the setups of the raw file do with its surfaces; names that mean nothing are passed over."""
    surfaces = surfaces_of(data)
    cut: set[tuple[str, str]] = set()
    removed: set[tuple[str, str]] = set()
    held: list[tuple[tuple[str | int, ...], str, str]] = []
    for i, node in enumerate(list_of(data.get("setups"))):
        setup = map_of(node)
        own = name_of(setup.get("part"))
        for name, entry in map_of(setup.get("cut")).items():
            if isinstance(found := find_surface(str(name), surfaces, own), Ref):
                cut.add((found.part, found.surface))
            for gone in list_of(map_of(entry).get("removes")):
                if isinstance(found := find_surface(str(gone), surfaces, own), Ref):
                    removed.add((found.part, found.surface))
        for step in HOLDS:
            on = name_of(map_of(map_of(setup.get("hold")).get(step)).get("on"))
            if on is not None and isinstance(found := find_surface(on, surfaces, own), Ref):
                held.append((("setups", i, "hold", step, "on"), found.part, found.surface))
    return Uses(frozenset(cut), frozenset(removed), tuple(held))


def surfaces_of(data: Mapping[str, object]) -> dict[str, tuple[str, ...]]:
    """Surface names by part, in the raw file."""
    return {str(p): tuple(map_of(map_of(node).get("surfaces"))) for p, node in map_of(data.get("parts")).items()}


def misses(data: Mapping[str, object]) -> Iterator[Miss]:
    """All names in the raw file that mean nothing. Works on the tree, so it finds them even where values are wrong too."""
    surfaces = surfaces_of(data)
    yield from _unnameable(data, surfaces)
    for part, node in map_of(data.get("parts")).items():
        for i, relation in enumerate(list_of(map_of(node).get("given"))):
            for key in ("of", "about", "from"):
                yield from _surface(map_of(relation).get(key), ("parts", part, "given", i, key), surfaces, str(part))
    seen: list[int] = []
    for i, setup in enumerate(list_of(data.get("setups"))):
        yield from _setup_misses(map_of(setup), ("setups", i), data, surfaces, seen)
        op = map_of(setup).get("op")
        if isinstance(op, int) and not isinstance(op, bool):
            if op in seen:
                yield Miss(("setups", i, "op"), f"operation {op} is there twice. Write the next free number")
            elif seen and 1 <= op < max(seen):
                yield Miss(
                    ("setups", i, "op"),
                    f"operation {op} stands after {max(seen)}. Write the setups in the order they are done",
                )
            seen.append(op)
    for i, wanted in enumerate(list_of(data.get("require"))):
        if map_of(wanted).get("what") != "torque":
            for key in ("of", "about", "clock"):
                yield from _surface(map_of(wanted).get(key), ("require", i, key), surfaces, None)
        elif map_of(wanted).get("of") is not None and not _is_join(data, map_of(wanted).get("of")):
            yield Miss(
                ("require", i, "of"), f"operation {map_of(wanted).get('of')} joins nothing. Write the op of the joining"
            )
    done = data.get("done")
    if isinstance(done, int) and not isinstance(done, bool) and done not in seen:
        known = f"Write one of {', '.join(map(str, seen))}" if seen else "Leave it away until there is one"
        yield Miss(("done",), f"there is no operation {done}. {known}")
    place = map_of(data.get("place"))
    yield from _surface(place.get("axis"), ("place", "axis"), surfaces, None)
    yield from _surface(map_of(place.get("worm_axis")).get("from"), ("place", "worm_axis", "from"), surfaces, None)
    yield from _mesh(map_of(data.get("mesh")), surfaces)


def _mesh(mesh: Mapping[str, object], surfaces: Mapping[str, Sequence[str]]) -> Iterator[Miss]:
    """The wheel, and the faces that tell its mark of blue; those may leave the wheel's name away."""
    yield from _surface(mesh.get("wheel"), ("mesh", "wheel"), surfaces, None)
    wheel = name_of(mesh.get("wheel"))
    found = find_surface(wheel, surfaces, None) if wheel is not None else None
    own, mark = found.part if isinstance(found, Ref) else None, map_of(mesh.get("mark"))
    yield from _surface(mark.get("seen_from"), ("mesh", "mark", "seen_from"), surfaces, own)
    for side in ("right", "left"):
        yield from _surface(map_of(mark.get(side)).get("towards"), ("mesh", "mark", side, "towards"), surfaces, own)


def _unnameable(data: Mapping[str, object], surfaces: Mapping[str, Sequence[str]]) -> Iterator[Miss]:
    """Names with a character that parts a name from its part or its operation."""
    named: list[tuple[str, ...]] = [("parts", part) for part in surfaces]
    named += [("parts", part, "surfaces", name) for part in surfaces for name in surfaces[part]]
    named += [(kind, name) for kind in ("machines", "cutters") for name in map_of(data.get(kind))]
    for path in named:
        name = path[-1]
        if any(c in name for c in ".@/") or name != name.strip() or not name.isprintable():
            yield Miss(path, f"{quoted(name)} is no name. Write it without . @ / and spaces around it", key=True)


def _setup_misses(
    setup: Mapping[str, object],
    at: tuple[str | int, ...],
    data: Mapping[str, object],
    surfaces: Mapping[str, Sequence[str]],
    before: Sequence[int],
) -> Iterator[Miss]:
    own = name_of(setup.get("part"))
    if own is not None and own not in surfaces:
        yield Miss((*at, "part"), f"there is no part {quoted(own)}. {_offer(own, surfaces, '')}")
        own = None
    machine, machines = name_of(setup.get("machine")), map_of(data.get("machines"))
    if machine is not None and machine not in machines and machine not in MACHINE_KINDS:
        yield Miss(
            (*at, "machine"),
            f"there is no machine {quoted(machine)}. {_offer(machine, (*machines, *MACHINE_KINDS), '')}",
        )
    keeps = setup.get("keeps")
    if isinstance(keeps, int) and keeps not in before:
        yield Miss(
            (*at, "keeps"), f"no operation {keeps} comes before this one. Write the op whose holding was never opened"
        )
    for hold in HOLDS:
        entry = map_of(map_of(setup.get("hold")).get(hold))
        yield from _surface(entry.get("on"), (*at, "hold", hold, "on"), surfaces, own)
    cutters = map_of(data.get("cutters"))
    for name, cut in map_of(setup.get("cut")).items():
        found = find_surface(str(name), surfaces, own)
        if isinstance(found, str):
            yield Miss((*at, "cut", name), found, key=True)
        cutter = name_of(map_of(cut).get("cutter"))
        if cutter is not None and cutter not in cutters:
            yield Miss(
                (*at, "cut", name, "cutter"), f"there is no cutter {quoted(cutter)}. {_offer(cutter, cutters, '')}"
            )
        for i, gone in enumerate(list_of(map_of(cut).get("removes"))):
            yield from _surface(gone, (*at, "cut", name, "removes", i), surfaces, own)
        yield from _surface(map_of(cut).get("from_surface"), (*at, "cut", name, "from_surface"), surfaces, own)
        about = map_of(map_of(cut).get("prove_out")).get("about")
        yield from _surface(about, (*at, "cut", name, "prove_out", "about"), surfaces, own)
        depth = map_of(cut).get("depth_from")
        touched = depth.get("surface") if isinstance(depth, dict) else depth
        yield from _surface(touched, (*at, "cut", name, "depth_from"), surfaces, own)
    join = map_of(setup.get("join"))
    for key in ("outer", "inner"):
        yield from _surface(join.get(key), (*at, "join", key), surfaces, None)
    for key in ("on", "against"):
        yield from _surface(map_of(join.get("stop")).get(key), (*at, "join", "stop", key), surfaces, None)
    for key in ("on", "about"):
        yield from _surface(map_of(join.get("trued")).get(key), (*at, "join", "trued", key), surfaces, None)


def _surface(
    text: object, path: tuple[str | int, ...], surfaces: Mapping[str, Sequence[str]], part: str | None
) -> Iterator[Miss]:
    name = name_of(text)
    if name is not None:
        found = find_surface(name, surfaces, part)
        if isinstance(found, str):
            yield Miss(path, found)


def _is_join(data: Mapping[str, object], of: object) -> bool:
    return any(str(map_of(s).get("op")) == str(of) and map_of(s).get("join") for s in list_of(data.get("setups")))
