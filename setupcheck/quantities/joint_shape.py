"""The joint along its length: where bore and journal overlap, what stands outside there, what hole goes through. Sizes mm."""

from __future__ import annotations

import itertools
from collections.abc import Iterator

from setupcheck.jobfile.models import Flat, Round, Surface, Throat, Toothing
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Cut, Join
from setupcheck.quantities.book import Open
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import settled
from setupcheck.record import record

DEDENDUM = 1.25
"""Depth of a gap below its pitch circle, in modules, where no cut says it. Source: ISO 53 (from memory)."""


@record
class Section:
    """A stretch of the joint with constant section: its length, what carries hoop stress, the hole in the shaft [mm].

    toothed  teeth stand on `outside`, which is their root circle
    """

    length: float
    outside: float
    hole: float
    toothed: bool


def sections(floor: Floor, join: Join) -> tuple[Section, ...] | Open | None:
    """Stretches of constant section where bore and journal overlap; None where they are no plain round surfaces.

    Teeth count as finished, whenever they are cut: in service they carry no hoop stress. A stretch that no outside surface
    covers takes the smaller of its neighbours and the faces that end it.  Source: drawing; DIN 7190's steps (from memory).
    """
    outer, inner = floor.loaded.ref(join.outer), floor.loaded.ref(join.inner)
    bore, journal = (_node(floor, ref) for ref in (outer, inner))
    if (
        not isinstance(bore, Round)
        or not isinstance(journal, Round)
        or (bore.kind, journal.kind) != ("bore", "cylinder")
    ):
        return None
    low, high = _overlap(floor, (outer.part, bore), (inner.part, journal))
    if high <= low:
        return Open((f"parts.{inner.part}.surfaces.{inner.surface}",), "bore and journal do not meet")
    outsides = list(_outsides(floor, outer.part))
    missing = tuple(m for each in outsides if isinstance(each.outside, Open) for m in each.outside.missing)
    if missing:
        return Open(missing)
    holes = [_Stretch(*_span(floor, inner.part, s), s.diameter.value) for s in _bores(floor, inner.part)]
    if journal.hole:
        holes.append(_Stretch(low, high, journal.hole))
    ends = sorted({low, high, *(z for s in (*outsides, *holes) for z in (s.low, s.high) if low < z < high)})
    raw = [_raw(outsides, holes, (a, b), journal.diameter.value) for a, b in itertools.pairwise(ends)]
    filled = _filled(raw, _faces(floor, outer.part), ends, bore.diameter.value)
    if filled is None:
        return Open((f"parts.{outer.part}.surfaces",), f"no outside surface of {outer.part} stands over the joint")
    return filled


def over_the_joint(floor: Floor, join: Join, ref: Ref) -> bool:
    """Whether a round surface of either part stands anywhere over the length that bore and journal share.

    Source: the drawing.
    """
    outer, inner = floor.loaded.ref(join.outer), floor.loaded.ref(join.inner)
    bore, journal, node = (_node(floor, r) for r in (outer, inner, ref))
    if not isinstance(bore, Round) or not isinstance(journal, Round) or not isinstance(node, Round):
        return False
    low, high = _overlap(floor, (outer.part, bore), (inner.part, journal))
    from_, to = _span(floor, ref.part, node)
    return from_ < high and to > low


def _overlap(floor: Floor, *both: tuple[str, Round]) -> tuple[float, float]:
    """Ends of the stretch that both surfaces share [mm]; the second below the first where they do not meet."""
    spans = [_span(floor, part, node) for part, node in both]
    return max(low for low, _ in spans), min(high for _, high in spans)


@record
class _Stretch:
    low: float
    high: float
    outside: float | Open
    toothed: bool = False

    def over(self, low: float, high: float) -> bool:
        return self.low <= (low + high) / 2.0 <= self.high


def _node(floor: Floor, ref: Ref) -> Surface:
    return floor.loaded.job.parts[ref.part].surfaces[ref.surface]


def _span(floor: Floor, part: str, surface: Round) -> tuple[float, float]:
    a, b = floor.z(part, surface.low), floor.z(part, surface.high)
    return min(a, b), max(a, b)


def _bores(floor: Floor, part: str) -> Iterator[Round]:
    for surface in floor.loaded.job.parts[part].surfaces.values():
        if isinstance(surface, Round) and surface.kind == "bore":
            yield surface


def _outsides(floor: Floor, part: str) -> Iterator[_Stretch]:
    """Outside cylinders of the finished part and the root circles of its teeth."""
    for name, surface in floor.loaded.job.parts[part].surfaces.items():
        if (part, name) in floor.removed:
            continue
        if isinstance(surface, Round) and surface.kind == "cylinder" and surface.made != "stock":
            yield _Stretch(*_span(floor, part, surface), surface.diameter.value)
        if isinstance(surface, Toothing):
            root = root_diameter(floor, part, name)
            path = f"parts.{part}.surfaces.{name}"
            if surface.width is None:
                yield _Stretch(0.0, 0.0, Open((f"{path}.width",)), True)
            else:
                ends = sorted(floor.z(part, surface.at + way * surface.width / 2.0) for way in (-1.0, 1.0))
                yield _Stretch(ends[0], ends[1], root, True)


def rim_over(floor: Floor, part: str, height: float) -> float | None:
    """Largest outside cylinder of the finished part over a height of it [mm]; None where none is drawn. Source: the drawing."""
    found = (
        surface.diameter.value
        for name, surface in floor.loaded.job.parts[part].surfaces.items()
        if isinstance(surface, Round)
        and surface.kind == "cylinder"
        and surface.made != "stock"
        and surface.low < height < surface.high
        and (part, name) not in floor.removed
    )
    return max(found, default=None)


def root_diameter(floor: Floor, part: str, name: str) -> float | Open:
    """Root circle of a toothing [mm]: the touched surface less twice the depth; else pitch circle - 2.5 modules.

    Source: geometry; dedendum ISO 53 (from memory).
    """
    node = floor.loaded.job.parts[part].surfaces[name]
    assert isinstance(node, Toothing)
    cut = cut_of(floor, part, name)
    if cut is not None and cut.depth is not None:
        touched = touched_diameter(floor, part, cut)
        if isinstance(touched, float):
            return touched - 2.0 * cut.depth
    module, mesh = node.module, floor.loaded.job.mesh
    if module is None and mesh is not None and floor.loaded.job.worm is not None:
        wheel, found = floor.loaded.ref(mesh.wheel), settled(floor, "axial_module")
        if (wheel.part, wheel.surface) == (part, name) and not isinstance(found, Open):
            module = found[0]
    if module is None:
        return Open((f"parts.{part}.surfaces.{name}.module",))
    return node.on_circle - 2.0 * DEDENDUM * module


def cut_of(floor: Floor, part: str, name: str) -> Cut | None:
    """The last cut of a surface in the route."""
    found = None
    for setup in floor.loaded.job.setups:
        for key, cut in setup.cut.items():
            ref = floor.loaded.ref(key, setup.part)
            if (ref.part, ref.surface) == (part, name):
                found = cut
    return found


def touched_diameter(floor: Floor, part: str, cut: Cut) -> float | Open | None:
    """Diameter of the surface that the depth is counted from [mm]: as measured, else as drawn; None where none is named."""
    if cut.depth_from is None:
        return None
    if cut.depth_from.measured is not None:
        return cut.depth_from.measured
    return drawn_diameter(floor, part, cut)


def drawn_diameter(floor: Floor, part: str, cut: Cut) -> float | Open | None:
    """The same as drawn, whatever was measured [mm]."""
    if cut.depth_from is None:
        return None
    ref = floor.loaded.ref(cut.depth_from.surface, part)
    node = _node(floor, ref)
    if isinstance(node, Round):
        return node.diameter.value
    return node.diameter if isinstance(node, Throat) else None


def _faces(floor: Floor, part: str) -> list[tuple[float, float]]:
    """(height, diameter) of the faces of a part that say how large they are."""
    return [
        (floor.z(part, s.at), s.diameter)
        for name, s in floor.loaded.job.parts[part].surfaces.items()
        if isinstance(s, Flat) and s.kind == "face" and s.diameter is not None and (part, name) not in floor.removed
    ]


@record
class _Raw:
    length: float
    outside: float | None
    hole: float
    toothed: bool


def _raw(outsides: list[_Stretch], holes: list[_Stretch], ends: tuple[float, float], journal: float) -> _Raw:
    """One stretch: the largest plain outside, or the root circle where teeth stand."""
    there = [s for s in outsides if s.over(*ends)]
    roots = [s.outside for s in there if s.toothed and isinstance(s.outside, float)]
    plain = [s.outside for s in there if not s.toothed and isinstance(s.outside, float)]
    hole = max((s.outside for s in holes if s.over(*ends) and isinstance(s.outside, float)), default=0.0)
    outside = min(roots) if roots else max(plain, default=None)
    return _Raw(ends[1] - ends[0], outside, hole if hole < journal else 0.0, bool(roots))


def _filled(
    raw: list[_Raw], faces: list[tuple[float, float]], ends: list[float], bore: float
) -> tuple[Section, ...] | None:
    """Stretches that nothing covers take the smallest of what stands beside them; None where nothing does."""
    found = []
    for i, one in enumerate(raw):
        outside = one.outside
        if outside is None:
            beside = [r.outside for r in (*raw[:i][-1:], *raw[i + 1 :][:1]) if r.outside is not None]
            beside += [d for z, d in faces if z in (ends[i], ends[i + 1]) and d > bore]
            if not beside:
                return None
            outside = min(beside)
        found.append(Section(one.length, outside, one.hole, one.toothed))
    return tuple(found)
