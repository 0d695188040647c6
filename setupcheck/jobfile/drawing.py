"""The parts as drawn, beside the raw entries that speak of them: what the checks of the reader look things up in. Sizes mm."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import field

from setupcheck import notation
from setupcheck.jobfile.models import Flat, Pattern, Round, Surface, Toothing
from setupcheck.jobfile.names import Ref, find_surface, surfaces_of
from setupcheck.jobfile.nodes import list_of, map_of, name_of, number_of
from setupcheck.jobfile.types import size_shown
from setupcheck.notation import NotationError, Units
from setupcheck.record import record

TOUCH = 1e-6  # mm; two lengths that differ by less are the same: far below every size, far above rounding; our choice

_SPOKEN = {"teeth": "a toothing", "holes": "a hole pattern", "lines": "a graduation", "centre": "a centre hole"}


@record
class Drawing:
    """A job file before it is a job. Made by `drawing_of`; everything is looked up once, so that long files stay quick.

    data      the raw file;  units  of the file
    parts     surfaces by part, those that could be read;  names  those that the file has
    setups    entries of the setups;  position  number of an operation in the file (from 0)
    last_cut  number of the last setup that cuts a surface, by part and surface
    """

    data: Mapping[str, object]
    units: Units
    parts: Mapping[str, Mapping[str, Surface]]
    names: Mapping[str, tuple[str, ...]]
    setups: tuple[Mapping[str, object], ...]
    position: Mapping[int, int]
    last_cut: dict[tuple[str, str], int] = field(default_factory=dict)
    _found: dict[tuple[str, str | None], Ref | None] = field(default_factory=dict)

    def ref(self, text: object, own: str | None = None) -> Ref | None:
        """The surface that an entry names; None where it names none, which is told elsewhere."""
        name = name_of(text)
        if name is None:
            return None
        if (name, own) not in self._found:
            found = find_surface(name, self.names, own)
            self._found[name, own] = found if isinstance(found, Ref) else None
        return self._found[name, own]

    def surface(self, ref: Ref | None) -> Surface | None:
        """The surface as drawn; None where it could not be read."""
        return self.parts.get(ref.part, {}).get(ref.surface) if ref is not None else None

    def held_part(self, setup: Mapping[str, object]) -> str | None:
        """The part that a setup holds: the one it names, else that of its first cut."""
        own = name_of(setup.get("part"))
        first = next(iter(map_of(setup.get("cut"))), None)
        ref = self.ref(first) if own is None else None
        return own if own is not None else ref.part if ref is not None else None

    def cut_by(self, setup: Mapping[str, object]) -> Iterator[tuple[str, Ref, Mapping[str, object]]]:
        """Name as written, surface and entry of everything that a setup cuts."""
        for name, entry in map_of(setup.get("cut")).items():
            if (ref := self.ref(name, name_of(setup.get("part")))) is not None:
                yield str(name), ref, map_of(entry)

    def length(self, node: object) -> float | None:
        """A length that can be read [mm]; None where it is missing or wrong, which is told elsewhere."""
        if isinstance(node, bool) or not isinstance(node, str | int | float):
            return None
        try:
            return notation.length(node, units=self.units)
        except NotationError:
            return None

    def shown(self, mm: float) -> str:
        """A size as a message shows it."""
        return size_shown(mm, self.units)


def drawing_of(data: Mapping[str, object], parts: Mapping[str, Mapping[str, Surface]], units: Units) -> Drawing:
    """What the checks look things up in: `data` the raw file, `parts` its surfaces that could be read."""
    setups = tuple(map_of(node) for node in list_of(data.get("setups")))
    ops = [number_of(setup.get("op")) for setup in setups]
    position = {op: i for i, op in reversed(list(enumerate(ops))) if op is not None}
    drawing = Drawing(data, units, parts, surfaces_of(data), setups, position)
    for i, setup in enumerate(setups):
        for _, ref, _ in drawing.cut_by(setup):
            drawing.last_cut[ref.part, ref.surface] = i
    return drawing


def count_of(surface: Surface | None) -> int | None:
    """How many teeth or holes a surface has; None where it has no places to count."""
    return surface.count if isinstance(surface, Toothing | Pattern) else None


def spoken(surface: Surface) -> str:
    """What a surface is, with its article."""
    return _SPOKEN.get(surface.kind, f"a {surface.kind}")


def widest(drawing: Drawing, ref: Ref, since: int) -> tuple[str, float] | None:
    """What bounds a face when setup number `since` begins: name and diameter [mm]; None where nothing is known.

    The face's own diameter, unless the cylinder that ends at its edge is still to be cut: then the stock there.
    """
    surfaces = drawing.parts.get(ref.part, {})
    face = surfaces.get(ref.surface)
    if not isinstance(face, Flat) or face.kind != "face" or face.diameter is None:
        return None
    there = {
        name: s
        for name, s in surfaces.items()
        if isinstance(s, Round) and s.kind != "bore" and s.low - TOUCH <= face.at <= s.high + TOUCH
    }
    edges = [n for n, s in there.items() if s.made is None and s.diameter.value >= face.diameter - TOUCH]
    if not any(drawing.last_cut.get((ref.part, name), -1) >= since for name in edges):
        return ref.surface, face.diameter
    stock = [(s.diameter.value, name) for name, s in there.items() if s.made == "stock"]
    return (max(stock)[1], max(stock)[0]) if stock else None
