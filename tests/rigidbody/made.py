"""Surfaces as they really are, and the parts and assemblies that carry them.  Lengths mm, angles rad."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np

from .frames import Array, Line, Plane, inverse
from .route import Part, Route, Surface


@dataclass(frozen=True, eq=False, slots=True)
class Gaps:
    """The gaps of a tooth system, or a ring of holes.

    axis: about which they were cut.  frames (N, 4, 4): origin on the pitch circle in the mid-plane (hole: its centre),
    x outwards, z along the axis on the +z side of the part, so that y is counter-clockwise.
    width_change (N,): arc.  drawn_angle (N,): where each belongs in the part's frame.
    """

    axis: Line
    frames: Array
    width_change: Array
    drawn_angle: Array

    def moved(self, placed: Array) -> Gaps:
        return Gaps(self.axis.moved(placed), placed @ self.frames, self.width_change, self.drawn_angle)


Geometry = Line | Plane | Gaps


@dataclass(frozen=True, eq=False, slots=True)
class Made:
    """One state of a surface: its drawing and its real geometry in its own part's frame."""

    part: str
    drawn: Surface
    op: int
    geometry: Geometry


@dataclass(slots=True)
class World:
    """What there is at a moment: every surface state, and where each part lies in its assembly.

    place, nominal: part frame -> frame of its assembly (4x4), real and as drawn.  together: name of the assembly.
    """

    states: dict[str, list[Made]] = field(default_factory=dict)
    place: dict[str, Array] = field(default_factory=dict)
    nominal: dict[str, Array] = field(default_factory=dict)
    together: dict[str, str] = field(default_factory=dict)

    def made(self, name: str) -> Made:
        """`part.surface` is the latest state, `part.surface@op` the one made in that operation (0: existing)."""
        key, _, op = name.partition("@")
        if key not in self.states:
            raise LookupError(f"{key} is not made yet")
        if not op:
            return self.states[key][-1]
        return next(m for m in self.states[key] if m.op == int(op))

    def between(self, part: str, frame: str) -> Array:
        """Real placement of a part seen in the frame of another part of the same assembly."""
        if self.together[part] != self.together[frame]:
            raise LookupError(f"{part} and {frame} are not joined")
        return inverse(self.place[frame]) @ self.place[part]

    def drawn_between(self, part: str, frame: str) -> Array:
        return inverse(self.nominal[frame]) @ self.nominal[part]


def axis_of(made: Made, geometry: Geometry | None = None) -> Line:
    """The axis of a cylinder, a bore, or of a tooth system as cut."""
    geometry = made.geometry if geometry is None else geometry
    if isinstance(geometry, Line):
        return geometry
    if isinstance(geometry, Gaps):
        return geometry.axis
    raise TypeError(f"{made.part}.{made.drawn.name} is a face and has no axis")


def face_of(made: Made, geometry: Geometry | None = None) -> Plane:
    geometry = made.geometry if geometry is None else geometry
    if not isinstance(geometry, Plane):
        raise TypeError(f"{made.part}.{made.drawn.name} is not a face")
    return geometry


def gaps_of(made: Made, geometry: Geometry | None = None) -> Gaps:
    geometry = made.geometry if geometry is None else geometry
    if not isinstance(geometry, Gaps):
        raise TypeError(f"{made.part}.{made.drawn.name} has no gaps or holes")
    return geometry


def new_world(parts: Iterable[Part]) -> World:
    world = World()
    for part in parts:
        world.place[part.name] = np.eye(4)
        world.nominal[part.name] = np.eye(4)
        world.together[part.name] = part.name
    return world


def drawing(route: Route, name: str) -> tuple[str, Surface]:
    return name.partition(".")[0], route.surface(name)
