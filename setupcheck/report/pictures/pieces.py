"""The surfaces of a job as pieces to be drawn: as the drawing has them, or as they are after an operation. mm."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import replace

from setupcheck.flow import Review
from setupcheck.jobfile.models import Dimension, Flat, Pattern, Round, Surface, Throat, Toothing
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.route import State
from setupcheck.quantities.shop import outline
from setupcheck.record import record
from setupcheck.report.pictures.marks import pattern_size, plain, stated_size
from setupcheck.report.pictures.shape import Piece

DEDENDUM = 1.25
"""Depth of a tooth below its pitch circle in modules. Source: ISO 53 (from memory)."""


@record
class Way:
    """From one part's own heights to those of the part that is drawn: sense z + shift [mm]."""

    sense: int = 1
    shift: float = 0.0

    def of(self, piece: Piece) -> Piece:
        ends = sorted((self.sense * piece.low + self.shift, self.sense * piece.high + self.shift))
        sides = _other_way(piece.ends) if self.sense < 0 else piece.ends
        return replace(piece, low=ends[0], high=ends[1], facing=self.sense * piece.facing, ends=sides)


def _other_way(ends: tuple[float, float] | None) -> tuple[float, float] | None:
    return (ends[1], ends[0]) if ends is not None else None


def finished(found: Review, part: str) -> list[Piece]:
    """A part as its drawing has it; stock that some operation removes is not there any more."""
    pieces = []
    for name, surface in found.loaded.job.parts[part].surfaces.items():
        if (part, name) not in found.floor.removed:
            states = found.floor.bodies[part].states.get((part, name), [])
            op = states[-1].op if states else None
            pieces.append(_piece(found, part, name, surface, op))
    return pieces


def as_of(found: Review, part: str, op: int, keep: Collection[tuple[str, str]] = ()) -> list[Piece]:
    """A part as an operation leaves it, in its own heights.

    keep  surfaces that are shown though this operation takes them away, as it holds on them
    """
    when = _order(found)
    pieces = []
    for name, surface in found.loaded.job.parts[part].surfaces.items():
        gone = found.floor.removed.get((part, name))
        states = [s for s in found.floor.bodies[part].states.get((part, name), []) if _by_then(s, op, when)]
        if states and (gone is None or when[gone] > when[op] or (gone == op and (part, name) in keep)):
            pieces.append(_left(found, _piece(found, part, name, surface, states[-1].op), states[-1]))
    return pieces


def together(found: Review, part: str, op: int) -> list[str]:
    """Parts that are one piece with this one when the operation begins, itself first; a joining counts its own."""
    groups = {name: [name] for name in found.loaded.job.parts}
    for setup in found.loaded.job.setups:
        if setup.join is not None:
            outer, inner = (found.loaded.ref(text).part for text in (setup.join.outer, setup.join.inner))
            both = groups[outer] + [n for n in groups[inner] if n not in groups[outer]]
            groups |= dict.fromkeys(both, both)
        if setup.op == op:
            break
    return [part, *(name for name in groups[part] if name != part)]


def way(found: Review, *, of: str, to: str) -> Way:
    """How heights of one part stand in those of another that is one piece with it by the end of the route."""
    (s1, t1), (s2, t2) = (found.floor.frames.get(name, (1, 0.0)) for name in (of, to))
    return Way(s1 * s2, s2 * (t1 - t2))


def holding(found: Review, setup: Setup) -> Setup:
    """The setup whose holding this one works in: its own, or the one it keeps."""
    setups = {one.op: one for one in found.loaded.job.setups}
    seen: set[int] = set()
    while setup.keeps is not None and setup.keeps in setups and setup.keeps not in seen:
        seen.add(setup.keeps)
        setup = setups[setup.keeps]
    return setup


def size_left(found: Review, piece: Piece) -> str:
    """Size or place of a surface as an operation left it, in the units of the file: `Ø48.6`, `Ø48 h6`, `at 20.4`.

    A pattern has its count and circle, which no operation changes: `72 on Ø108`.
    """
    if piece.kind in ("face", "centre"):
        return f"at {plain(found, piece.low)}"
    if piece.kind in ("teeth", "holes", "slot", "lines"):
        return pattern_size(found, piece.part, piece.name)
    stated = getattr(found.loaded.job.parts[piece.part].surfaces[piece.name], "diameter", None)
    drawn_at = stated.value if isinstance(stated, Dimension) else stated
    size = 2.0 * (piece.radius or 0.0)
    as_drawn = drawn_at is not None and abs(size - drawn_at) < 1e-9
    return f"Ø{stated_size(found, piece.part, piece.name) if as_drawn else plain(found, size)}"


def held_part(found: Review, setup: Setup) -> str:
    """The part a setup holds, as the walk found it."""
    return found.floor.part_of[setup.op]


def refs_cut(found: Review, setup: Setup) -> list[Ref]:
    part = held_part(found, setup)
    return [found.loaded.ref(name, setup.part or _owner(found, name, part)) for name in setup.cut]


def ref_held(found: Review, setup: Setup, text: str) -> Ref:
    """A surface that a holding names, looked for on the held part first."""
    return found.loaded.ref(text, _owner(found, text, held_part(found, setup)))


def _owner(found: Review, text: str, part: str) -> str | None:
    return part if text.partition("@")[0] in found.loaded.job.parts[part].surfaces else None


def _order(found: Review) -> dict[int, int]:
    return {setup.op: i for i, setup in enumerate(found.loaded.job.setups)}


def _by_then(state: State, op: int, when: dict[int, int]) -> bool:
    return state.op is None or when[state.op] <= when[op]


def _piece(found: Review, part: str, name: str, surface: Surface, op: int | None) -> Piece:
    shape = outline(surface)
    piece = Piece(
        part,
        name,
        shape.kind,
        shape.low,
        shape.high,
        shape.diameter / 2.0 if shape.diameter else None,
        shape.facing,
        surface.made == "stock",
        trims=isinstance(surface, Flat) and op is not None and _towards_tool(found, part, op) == shape.facing,
    )
    if isinstance(surface, Round) and surface.to_diameter is not None:
        piece = replace(piece, ends=(surface.diameter.value / 2.0, surface.to_diameter / 2.0))
    if isinstance(surface, Round | Flat) and surface.hole:
        return replace(piece, hole=surface.hole / 2.0)
    if isinstance(surface, Throat):
        return replace(piece, hollow=surface.radius)
    if isinstance(surface, Toothing):  # the root of a cone is not drawn: its depth is stated at one end alone
        cone = surface.cone is not None
        return replace(piece, cone=cone, root=None if cone else _root(found, part, name, surface, op))
    if isinstance(surface, Pattern):
        return replace(piece, size=surface.diameter or surface.width)
    return piece


def _left(found: Review, piece: Piece, state: State) -> Piece:
    """The piece as an operation left it: its size and place then, in the part's own heights."""
    if state.op is None or piece.kind in ("teeth", "holes", "slot", "lines"):
        return piece
    sense, shift = found.floor.frames.get(piece.part, (1, 0.0))
    ends = sorted((sense * (state.low - shift), sense * (state.high - shift)))
    radius = state.diameter / 2.0 if state.diameter and state.diameter > 0.0 else piece.radius
    left = (radius or 0.0) - (piece.radius or 0.0)  # stock on a taper lies on all of it
    sides = (piece.ends[0] + left, piece.ends[1] + left) if piece.ends is not None else None
    return replace(piece, low=ends[0], high=ends[1], radius=radius, ends=sides)


def _towards_tool(found: Review, part: str, op: int) -> int:
    """Which way of a part's own heights the tool stands in an operation."""
    setup = next(one for one in found.loaded.job.setups if one.op == op)
    looks = holding(found, setup).looks_at_tool or 1
    held = found.floor.part_of.get(op)
    return looks * (way(found, of=part, to=held).sense if held is not None else 1)


def _root(found: Review, part: str, name: str, teeth: Toothing, op: int | None) -> float | None:
    """Radius at the root: the depth as it is cut, else the usual one of the module."""
    surfaces = found.loaded.job.parts[part].surfaces
    for setup in found.loaded.job.setups:
        for called, cut in setup.cut.items():
            ref = found.loaded.ref(called, setup.part)
            if (ref.part, ref.surface, setup.op) != (part, name, op) or cut.depth is None or cut.depth_from is None:
                continue
            touched = found.loaded.ref(cut.depth_from.surface, part)
            size = outline(found.loaded.job.parts[touched.part].surfaces[touched.surface]).diameter
            if size and size / 2.0 > cut.depth:
                return size / 2.0 - cut.depth
    root = teeth.on_circle / 2.0 - DEDENDUM * teeth.module if teeth.module else None
    return root if root is not None and root > 0.0 and surfaces else None


def extent(pieces: Sequence[Piece]) -> tuple[float, float]:
    """Lowest and highest place of any piece [mm]."""
    return min(p.low for p in pieces), max(p.high for p in pieces)
