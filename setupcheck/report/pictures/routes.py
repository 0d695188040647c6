"""The route as a graph of datums: which operation made each surface, and which surfaces it hangs on. No paper here."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterator
from dataclasses import field

from setupcheck.flow import Review
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Hold, Setup
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record

Node = tuple[str, str, int]
"""A surface as one operation left it: part, name, row."""

STEPS = ("centre", "and_centre", "square", "stop", "clock")
AXIAL = ("square", "stop", "clock")
"""Steps of a hold that say nothing of where the axis stands."""

ALONE = ("allowance", "chord", "pitch-circle", "contact-length", "contact-area")
"""Figures of one surface that are about no axis."""


@record(frozen=False)
class Row:
    """One row of the graph: what is bought or stock (op 0), or one operation.

    made    surfaces it leaves;  held  datum -> what it rules ("centre", "square", …), in the order of the hold
    keeps   the operation whose holding was never opened;  join  two parts put together
    """

    op: int
    what: str
    made: list[Node] = field(default_factory=list)
    held: dict[Node, list[str]] = field(default_factory=dict)
    keeps: int | None = None
    join: bool = False


@record(frozen=False)
class Route:
    """All rows, the numbers of the requirements that speak of a surface, and how each surface that no setup cuts came.

    parts  their names in the order of the job
    """

    rows: list[Row]
    asked: dict[Node, list[int]] = field(default_factory=dict)
    about: dict[Node, list[int]] = field(default_factory=dict)
    came: dict[Node, str] = field(default_factory=dict)
    parts: tuple[str, ...] = ()

    def last(self, ref: Ref) -> Node | None:
        """A surface as it is at the end, or as its `@op` left it."""
        found = [n for row in self.rows for n in row.made if n[:2] == (ref.part, ref.surface)]
        if ref.op is not None:
            found = [n for n in found if self.rows[n[2]].op == ref.op]
        return found[-1] if found else None


def route_of(found: Review) -> Route:
    """The graph of a job; datums that are never made stand in the first row, said to be missing."""
    loaded, job = found.loaded, found.loaded.job
    cut = _cut(found)
    first = Row(0, "")
    route = Route([first], parts=tuple(job.parts))
    for part, node in job.parts.items():
        given = {loaded.ref(name, part).surface for r in node.given for name in (r.of, r.about, r.from_) if name}
        for name, surface in node.surfaces.items():
            if surface.made is not None or name in given or not any(p == part for p, _ in cut):
                _bring(route, (part, name, 0), "stock" if surface.made is not None else "bought")
    for at, setup in enumerate(job.setups, start=1):
        route.rows.append(_row(found, route, setup, at))
    _requirements(found, route)
    return route


def _cut(found: Review) -> set[tuple[str, str]]:
    refs = (found.loaded.ref(name, setup.part) for setup in found.loaded.job.setups for name in setup.cut)
    return {(ref.part, ref.surface) for ref in refs}


def _bring(route: Route, node: Node, how: str) -> None:
    if node not in route.came:
        route.came[node] = how
        route.rows[0].made.append(node)


def _row(found: Review, route: Route, setup: Setup, at: int) -> Row:
    loaded = found.loaded
    if setup.join is not None:
        row = Row(setup.op, setup.join.by, join=True)
        pairs = [(setup.join.outer, "outer"), (setup.join.inner, "inner")]
        if setup.join.stop is not None:
            pairs += [(setup.join.stop.on, "stop")]
            pairs += [(setup.join.stop.against, "stop")] if setup.join.stop.against else []
        if setup.join.trued is not None:
            pairs += [(setup.join.trued.on, "trued"), (setup.join.trued.about, "trued")]
        for name, role in pairs:
            _hang(route, row, loaded.ref(name), role)
        return row
    first = next(iter(setup.cut))
    part = found.floor.part_of.get(setup.op) or setup.part or loaded.ref(first, setup.part).part
    row = Row(setup.op, setup.machine or "", keeps=setup.keeps)
    for on, step in _datums(setup.hold):
        _hang(route, row, loaded.ref(on, part), step)
    row.made = [(ref.part, ref.surface, at) for ref in (loaded.ref(name, part) for name in setup.cut)]
    return row


def _datums(hold: Hold | None) -> Iterator[tuple[str, str]]:
    """(surface, step) of each datum of a hold."""
    for step in STEPS:
        entry = getattr(hold, step) if hold is not None else None
        if entry is not None:
            yield entry.on, step


def _hang(route: Route, row: Row, ref: Ref, role: str) -> None:
    node = route.last(ref) or route.last(Ref(ref.part, ref.surface))
    if node is None:
        node = (ref.part, ref.surface, 0)
        _bring(route, node, "not made")
    roles = row.held.setdefault(node, [])
    if role not in roles:
        roles.append(role)


def _requirements(found: Review, route: Route) -> None:
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if stack.require.what == "torque":
            continue
        alone = stack.require.what in ALONE
        for text, into in ((stack.of, route.asked), ("" if alone else stack.about, route.about)):
            node = route.last(found.loaded.ref(text)) if text else None
            if node is not None:
                into.setdefault(node, []).append(stack.index + 1)


# -- the way between two surfaces ------------------------------------------------------------------------------------


def ends(found: Review, route: Route) -> tuple[Node, Node] | None:
    """The teeth (or holes) and the bore they are for; else the two surfaces of the first requirement that has two."""
    loaded, job = found.loaded, found.loaded.job
    made = [n for row in route.rows for n in row.made]
    kinds = {n: job.parts[n[0]].surfaces[n[1]].kind for n in made}
    teeth = [n for n in made if kinds[n] == "teeth"] or [n for n in made if kinds[n] == "holes"]
    if job.mesh is not None:
        named = route.last(loaded.ref(job.mesh.wheel))
        teeth = [named] if named is not None else teeth
    if teeth:
        bores = [n for n in made if n[0] == teeth[-1][0] and kinds[n] == "bore"]
        outer = [loaded.ref(s.join.outer) for s in job.setups if s.join is not None]
        best = [n for n in bores if any(n[:2] == (ref.part, ref.surface) for ref in outer)] or bores
        if best:
            return teeth[-1], best[-1]
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if stack.of and stack.about and stack.require.what not in ("torque", "allowance"):
            one, other = route.last(loaded.ref(stack.of)), route.last(loaded.ref(stack.about))
            if one is not None and other is not None and one != other:
                return one, other
    return None


def way(route: Route, start: Node, goal: Node) -> list[Node | int] | None:
    """The shortest chain of surfaces and rows between two surfaces' axes, both of them in it; None where none is known.

    A surface hangs on the holding that cut it, a holding on what it is centred on; a joining ties what it joins. From one datum
    of a holding to another there is no way. An operation that keeps a holding is that holding. A bought part is one
    holding too, its number below zero.  Source: derived here.
    """
    seen: dict[tuple[Node | int, bool], tuple[Node | int, bool] | None] = {(start, False): None}
    queue: deque[tuple[Node | int, bool]] = deque([(start, False)])
    while queue:
        here = queue.popleft()
        if here[0] == goal:
            return _back(seen, here)
        for there in _next(route, *here):
            if there not in seen:
                seen[there] = here
                queue.append(there)
    return None


def _back(
    seen: dict[tuple[Node | int, bool], tuple[Node | int, bool] | None], end: tuple[Node | int, bool]
) -> list[Node | int]:
    found: list[Node | int] = []
    at: tuple[Node | int, bool] | None = end
    while at is not None:
        found.append(at[0])
        at = seen[at]
    return found[::-1]


def _next(route: Route, here: Node | int, as_datum: bool) -> Iterator[tuple[Node | int, bool]]:
    """What hangs together with a surface or a row; `as_datum` marks a row that was reached from one of its datums."""
    if isinstance(here, tuple):
        if here[2] > 0:
            yield holding(route, here[2]), False
        elif route.came.get(here) == "bought":
            yield -1 - route.parts.index(here[0]), False
        yield from ((at, True) for at, row in enumerate(route.rows) if here in _axis(row))
        return
    if here < 0:
        part = route.parts[-1 - here]
        yield from ((n, False) for n, how in route.came.items() if how == "bought" and n[0] == part)
        return
    row = route.rows[here]
    if row.join or not as_datum:
        yield from ((node, False) for node in _axis(row))
    for at, other in enumerate(route.rows):
        if at and holding(route, at) == here:
            yield from ((node, False) for node in other.made)


def transfers(route: Route, chain: list[Node | int]) -> list[int]:
    """The operations of a chain that hand an axis on; two surfaces cut in one holding need none."""
    found = []
    for before, at, after in zip(chain, chain[1:], chain[2:], strict=False):
        if isinstance(at, int) and at >= 0:
            datums = _axis(route.rows[at])
            if before in datums or after in datums:
                found.append(route.rows[at].op)
    return found


def holding(route: Route, at: int) -> int:
    """The row whose holding a row works in: its own, or the one it keeps."""
    keeps = route.rows[at].keeps
    if keeps is None:
        return at
    return next((i for i, row in enumerate(route.rows) if row.op == keeps and i < at), at)


def _axis(row: Row) -> list[Node]:
    """The surfaces that say where a row's axis stands."""
    if row.join:
        trued = [node for node, roles in row.held.items() if "trued" in roles]
        return trued or [node for node, roles in row.held.items() if "outer" in roles or "inner" in roles]
    return [node for node, roles in row.held.items() if any(role not in AXIAL for role in roles)]
