"""Which parts are one piece when: two parts that cannot be joined so, and a holding that was opened after all. Sizes mm."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import field

from setupcheck import notation
from setupcheck.jobfile.cuts import LEFT
from setupcheck.jobfile.drawing import Drawing, spoken
from setupcheck.jobfile.models import Round
from setupcheck.jobfile.names import Miss, Ref
from setupcheck.jobfile.nodes import list_of, map_of, number_of
from setupcheck.notation import NotationError
from setupcheck.record import record

FURTHEST_APART = 0.02
"""Share of the larger diameter by which a bore and the cylinder in it may differ. Source: our screening choice, far above
every fit of ISO 286 from 10 mm up."""

TAKES_IN = ("bore", "taper", "thread")
GOES_IN = ("cylinder", "taper", "thread")
"""A taper or thread may be inside or outside, the job file does not say."""


@record(frozen=False)
class _Floor:
    """What has happened so far: which parts are one piece, who was held and how each surface was last cut.

    of    parts that have been joined, each under the name of the piece it belongs to
    held  number of the last setup with a hold of its own, by part;  cut  last cut of a surface, by part and surface
    """

    of: dict[str, str] = field(default_factory=dict)
    held: dict[str, int] = field(default_factory=dict)
    cut: dict[tuple[str, str], Mapping[str, object]] = field(default_factory=dict)

    def piece(self, part: str) -> str:
        return self.of.get(part, part)

    def join(self, outer: str, inner: str) -> None:
        into, gone = self.piece(outer), self.piece(inner)
        self.of = {**{part: into if piece == gone else piece for part, piece in self.of.items()}, outer: into}
        self.of[inner] = into

    def as_drawn(self, ref: Ref) -> bool:
        """No cut has left the surface at another size than its drawing has, and no earlier state of it is meant."""
        cut = self.cut.get((ref.part, ref.surface), {})
        return ref.op is None and all(cut.get(key) is None for key in LEFT)


def misfits(drawing: Drawing) -> Iterator[Miss]:
    """Joinings that cannot be, and holdings said to be kept that another setup has opened."""
    floor = _Floor()
    for i, setup in enumerate(drawing.setups):
        yield from _kept(drawing, i, setup, floor)
        part = drawing.held_part(setup) if map_of(setup.get("hold")) else None
        if part is not None:
            floor.held[part] = i
        for _, ref, cut in drawing.cut_by(setup):
            floor.cut[ref.part, ref.surface] = cut
        join = map_of(setup.get("join"))
        outer, inner = drawing.ref(join.get("outer")), drawing.ref(join.get("inner"))
        if outer is None or inner is None:
            continue
        if outer.part == inner.part:
            says = f"{outer} and {inner} are surfaces of the same part"
            yield Miss(("setups", i, "join", "inner"), f"{says}. Write a surface of the part that goes in")
        elif floor.piece(outer.part) != floor.piece(inner.part):
            yield from _join(drawing, i, join, outer, inner, floor)
            floor.join(outer.part, inner.part)


def _kept(drawing: Drawing, i: int, setup: Mapping[str, object], floor: _Floor) -> Iterator[Miss]:
    """`keeps` over a setup that held the same part again; a joining or another part in between opens nothing."""
    first = drawing.position.get(number_of(setup.get("keeps")) or 0, i)
    part = drawing.held_part(drawing.setups[first])
    if setup.get("keeps") is not None and setup.get("looks_at_tool") is not None:
        says = "the part lies as the kept holding has it"
        yield Miss(("setups", i, "looks_at_tool"), f"{says}. Leave looks_at_tool away, or write a hold of its own")
    if part is None:
        return
    piece = floor.piece(part)
    again = [between for other, between in floor.held.items() if between > first and floor.piece(other) == piece]
    if again:
        op = number_of(drawing.setups[min(again)].get("op"))
        by = f"operation {op}" if op is not None else "another setup"
        yield Miss(("setups", i, "keeps"), f"{by} opened that holding. Write a hold of its own")


def _join(
    drawing: Drawing, i: int, join: Mapping[str, object], outer: Ref, inner: Ref, floor: _Floor
) -> Iterator[Miss]:
    hole, shaft = drawing.surface(outer), drawing.surface(inner)
    if hole is not None and shaft is not None and hole.kind == "cylinder" and shaft.kind == "bore":
        says = f"{outer} is {spoken(hole)} and {inner} is {spoken(shaft)}"
        yield Miss(("setups", i, "join", "outer"), f"{says}. Swap outer and inner")
        return
    fits = True
    if hole is not None and hole.kind not in TAKES_IN:
        fits = False
        says = f"{outer} is {spoken(hole)}, which takes nothing in"
        yield Miss(("setups", i, "join", "outer"), f"{says}. Write a bore, a taper or a thread")
    if shaft is not None and shaft.kind not in GOES_IN:
        fits = False
        says = f"{inner} is {spoken(shaft)}, which goes into nothing"
        yield Miss(("setups", i, "join", "inner"), f"{says}. Write a cylinder, a taper or a thread")
    if fits:
        yield from _diameters(drawing, i, join, outer, inner, floor)
    yield from _stop(drawing, i, join, (outer.part, inner.part), floor)


def _diameters(
    drawing: Drawing, i: int, join: Mapping[str, object], outer: Ref, inner: Ref, floor: _Floor
) -> Iterator[Miss]:
    """Bore and cylinder as drawn; where one of them is joined in an earlier state its size is not known here."""
    hole, shaft = drawing.surface(outer), drawing.surface(inner)
    if not isinstance(hole, Round) or not isinstance(shaft, Round) or (hole.kind, shaft.kind) != ("bore", "cylinder"):
        return
    if not floor.as_drawn(outer) or not floor.as_drawn(inner):
        return
    large, small = hole.diameter.value, shaft.diameter.value
    if abs(large - small) > max(FURTHEST_APART * max(large, small), _play(drawing, join)):
        says = f"{outer} is {drawing.shown(large)} and {inner} is {drawing.shown(small)}"
        yield Miss(("setups", i, "join", "inner"), f"{says}. Write two surfaces that fit each other")


def _play(drawing: Drawing, join: Mapping[str, object]) -> float:
    """Largest clearance that the joint states [mm]; 0 where it states none."""
    given = list_of(join.get("clearance"))
    try:
        return notation.length_range([str(end) for end in given], units=drawing.units)[1] if given else 0.0
    except NotationError:
        return 0.0


def _stop(
    drawing: Drawing, i: int, join: Mapping[str, object], parts: tuple[str, str], floor: _Floor
) -> Iterator[Miss]:
    """The two faces of a joint on the wrong parts."""
    stop = map_of(join.get("stop"))
    on, against = drawing.ref(stop.get("on")), drawing.ref(stop.get("against"))
    outer, inner = (floor.piece(part) for part in parts)
    on_inner = on is not None and floor.piece(on.part) == inner
    against_outer = against is not None and floor.piece(against.part) == outer
    path = ("setups", i, "join", "stop")
    if on_inner and (against_outer or against is None):
        yield Miss((*path, "on"), f"{on} belongs to the inner part. Swap on and against")
    elif on_inner:
        yield Miss((*path, "on"), f"{on} belongs to the inner part. Write a face of {parts[0]}")
    elif against_outer:
        yield Miss((*path, "against"), f"{against} belongs to the outer part. Write a face of {parts[1]}")
