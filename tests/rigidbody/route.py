"""Neutral description of a machining route: what another program and this simulation both can run.

Plain frozen records; each carries a `kind` text.  Lengths mm, angles rad, transverse vectors complex (x + iy).
Names of surfaces are `part.surface`; in measurements `part.surface@op` picks an earlier state.
Fields marked as errors (`_error()`) are the exact actual deviations; `Route.scaled(f)` multiplies just these, so that
a caller can see second-order terms.  Everything else is nominal geometry.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, Literal, TypeVar

_T = TypeVar("_T")
_MARK = {"error": True}


def _error(default: Any = dataclasses.MISSING) -> Any:
    return dataclasses.field(default=default, metadata=_MARK)


# ---------------------------------------------------------------- parts


@dataclass(frozen=True, slots=True)
class Surface:
    """A surface as drawn, in its part's frame.  `facing` (+1, -1) for faces; count, pressure angle for teeth."""

    name: str
    kind: Literal["cylinder", "bore", "face", "teeth", "holes"]
    z_from: float
    z_to: float
    diameter: float  # of the cylinder, bore or face; pitch circle of teeth; circle of the hole centres
    facing: int = 0
    count: int = 0
    pressure_angle: float = 0.0
    form: Literal["involute", "straight"] = "involute"
    lead_angle: float = 0.0  # the gap runs obliquely: + = counter-clockwise on the way to +z

    @property
    def mid(self) -> float:
        return 0.5 * (self.z_from + self.z_to)

    @property
    def radius(self) -> float:
        return 0.5 * self.diameter


def cylinder(name: str, diameter: float, z_from: float, z_to: float) -> Surface:
    return Surface(name, "cylinder", z_from, z_to, diameter)


def bore(name: str, diameter: float, z_from: float, z_to: float) -> Surface:
    return Surface(name, "bore", z_from, z_to, diameter)


def face(name: str, z: float, facing: int, diameter: float = 80.0) -> Surface:
    return Surface(name, "face", z, z, diameter, facing)


def teeth(
    name: str,
    count: int,
    pitch_radius: float,
    *,
    pressure_angle: float,
    z: float,
    form: Literal["involute", "straight"] = "involute",
    lead_angle: float = 0.0,
) -> Surface:
    return Surface(name, "teeth", z, z, 2.0 * pitch_radius, 0, count, pressure_angle, form, lead_angle)


def holes(name: str, count: int, circle_radius: float, *, z: float) -> Surface:
    return Surface(name, "holes", z, z, 2.0 * circle_radius, 0, count)


@dataclass(frozen=True, slots=True)
class Existing:
    """A surface that is there before the first setup (stock or bought): where it really is, in the part's frame.

    offset: of its axis at its own mid z; lean: its slope; axial: a face's (or tooth mid-plane's) shift on the z axis;
    turned: angle of a tooth or hole pattern; division: of its gaps, counter-clockwise in the part's frame.
    """

    surface: str  # name within the part
    offset: complex = _error(0j)
    lean: complex = _error(0j)
    axial: float = _error(0.0)
    turned: float = _error(0.0)
    division: tuple[float, ...] = _error(())
    kind: Literal["existing"] = "existing"


@dataclass(frozen=True, slots=True)
class Part:
    name: str
    surfaces: tuple[Surface, ...]
    existing: tuple[Existing, ...]
    kind: Literal["part"] = "part"


# ---------------------------------------------------------------- how a part is held


@dataclass(frozen=True, slots=True)
class Offset:
    """The datum's axis stands at this vector from the machine axis (machine frame)."""

    vector: complex = _error()
    kind: Literal["offset"] = "offset"


@dataclass(frozen=True, slots=True)
class RadialDial:
    """An indicator on the datum, radially at the centring plane, reads this FIM, high at this direction of the part."""

    fim: float = _error()
    high_at: float = 0.0
    kind: Literal["radial dial"] = "radial dial"


@dataclass(frozen=True, slots=True)
class Pushed:
    """The datum has this diametral clearance in the register; the part is pushed home in a machine direction."""

    clearance: float = _error()
    towards: float = 0.0
    kind: Literal["pushed"] = "pushed"


@dataclass(frozen=True, slots=True)
class Centre:
    """One centring plane: at height z of the setup's part, on an outside or inside cylinder (or on a tooth system)."""

    on: str
    z: float
    by: Offset | RadialDial | Pushed
    kind: Literal["centre"] = "centre"


@dataclass(frozen=True, slots=True)
class Lean:
    """The face's normal has this slope against the machine axis (machine frame)."""

    slope: complex = _error()
    kind: Literal["lean"] = "lean"


@dataclass(frozen=True, slots=True)
class FaceDial:
    """An indicator on the face, axially on a circle of diameter `across`, reads this FIM, high at this direction."""

    fim: float = _error()
    across: float = 0.0
    high_at: float = 0.0
    kind: Literal["face dial"] = "face dial"


@dataclass(frozen=True, slots=True)
class Square:
    on: str
    by: Lean | FaceDial
    kind: Literal["square"] = "square"


@dataclass(frozen=True, slots=True)
class CentredAndSquared:
    """One centring plane and one face that squares."""

    centre: Centre
    square: Square
    kind: Literal["centred and squared"] = "centred and squared"


@dataclass(frozen=True, slots=True)
class TwoPlanes:
    """Two centring planes, on the same surface or on two."""

    first: Centre
    second: Centre
    kind: Literal["two planes"] = "two planes"


@dataclass(frozen=True, slots=True)
class PointStop:
    """The face touches one point at a machine radius and angle; radius 0 = judged on the axis (a flush seat)."""

    on: str
    radius: float = 0.0
    angle: float = 0.0
    stands_off: float = _error(0.0)  # the stop is this far along machine +Z from its place
    kind: Literal["point stop"] = "point stop"


@dataclass(frozen=True, slots=True)
class RingStop:
    """The face touches a ring about the machine axis with its highest point."""

    on: str
    radius: float
    stands_off: float = _error(0.0)
    kind: Literal["ring stop"] = "ring stop"


@dataclass(frozen=True, slots=True)
class NoStop:
    """Nothing sets the length; the part's origin happens to stand at this machine Z."""

    axial: float = _error(0.0)
    kind: Literal["no stop"] = "no stop"


@dataclass(frozen=True, slots=True)
class Clock:
    """Gap or hole `number` (1 = first) of a pattern is brought to its machine angle, with an error (machine frame)."""

    on: str
    number: int
    error: float = _error(0.0)
    kind: Literal["clock"] = "clock"


@dataclass(frozen=True, slots=True)
class NoClock:
    """Nothing sets the angle; the part happens to stand turned by this angle beyond `insertion` (machine frame)."""

    turned: float = _error(0.0)
    kind: Literal["no clock"] = "no clock"


# ---------------------------------------------------------------- cuts


@dataclass(frozen=True, slots=True)
class Turn:
    """A cylinder or bore about the machine axis, or a face across it (facing comes with the surface)."""

    surface: str
    machine_error: complex = _error(0j)  # this cut's axis from the machine axis
    dial: float = _error(0.0)  # a face is cut this far along machine +Z from its place
    machine_lean: complex = _error(0j)  # only for surfaces made without rotation
    kind: Literal["turn"] = "turn"


@dataclass(frozen=True, slots=True)
class CutTeeth:
    """N gaps, each at its machine angle.  Gap 1 nominally at the part direction `first_at`."""

    surface: str
    division: tuple[float, ...] = _error(())  # machine frame, one a gap; empty = none
    machine_error: complex = _error(0j)
    dial: float = _error(0.0)  # mid-plane along machine +Z from its place
    width_change: tuple[float, ...] = _error(())  # arc at the pitch circle, one a gap
    first_at: float = 0.0
    kind: Literal["cut teeth"] = "cut teeth"


@dataclass(frozen=True, slots=True)
class Drill:
    """A ring of holes, the part indexed under a fixed spindle that stands off the table's axis.

    spindle_to_axis: error of the spindle's place, real = outwards (pitch circle), imaginary = sideways (pattern angle).
    scatter: of the single holes, real = outwards, imaginary = counter-clockwise (machine frame).
    """

    surface: str
    division: tuple[float, ...] = _error(())
    scatter: tuple[complex, ...] = _error(())
    spindle_to_axis: complex = _error(0j)
    machine_error: complex = _error(0j)
    first_at: float = 0.0
    kind: Literal["drill"] = "drill"


Cut = Turn | CutTeeth | Drill


@dataclass(frozen=True, slots=True)
class Setup:
    """One holding.  `part` gives the frame of `looks_at_tool`, `insertion` and of every z; it may be in an assembly."""

    op: int
    part: str
    looks_at_tool: int
    insertion: float
    hold: CentredAndSquared | TwoPlanes
    stop: PointStop | RingStop | NoStop
    clock: Clock | NoClock
    cuts: tuple[Cut, ...]
    kind: Literal["setup"] = "setup"


# ---------------------------------------------------------------- joining


@dataclass(frozen=True, slots=True)
class BoreSquares:
    """The bore takes the journal's direction (plus a lean, in the inner part's frame)."""

    lean: complex = _error(0j)
    kind: Literal["bore squares"] = "bore squares"


@dataclass(frozen=True, slots=True)
class FaceSquares:
    """The outer's face lies parallel to the inner's shoulder (plus a wedge of what lies between, inner's frame)."""

    on: str
    against: str
    wedge: complex = _error(0j)
    kind: Literal["face squares"] = "face squares"


@dataclass(frozen=True, slots=True)
class Seat:
    """The outer's face stands before the inner's shoulder by the spacers.

    touch `ring`: the nearest points of face and shoulder on a ring about the journal's axis carry;
    touch `point`: the point at (radius, angle) about the journal's axis carries (radius 0: judged on the axis).
    """

    on: str
    against: str
    spacer: float = 0.0
    spacer_error: float = _error(0.0)  # + = longer
    touch: Literal["ring", "point"] = "point"
    radius: float = 0.0
    angle: float = 0.0
    kind: Literal["seat"] = "seat"


@dataclass(frozen=True, slots=True)
class Join:
    """The outer part's bore on the inner part's journal.  Afterwards both live in one assembly.

    way: +1 same way round, -1 reversed; insertion: where the outer's mark stands in the inner's frame.
    offset: bore axis minus journal axis at the bore's mid plane (inner's frame); zero = no play.
    """

    op: int
    outer: str
    inner: str
    way: int
    insertion: float
    square: BoreSquares | FaceSquares
    seat: Seat
    offset: complex = _error(0j)
    turned: float = _error(0.0)
    kind: Literal["join"] = "join"


# ---------------------------------------------------------------- questions and the whole


Figure = Literal[
    "offset",
    "lean",
    "length",
    "gaps",
    "flank ccw",
    "flank cw",
    "index ccw",
    "index cw",
    "wobble",
    "run-out",
    "face run-out",
]


@dataclass(frozen=True, slots=True)
class Question:
    """A figure to compare.

    offset      axis of `of` minus axis `about` at of's mid                                complex mm
    lean        slope of `of` against axis `about`                                         complex rad
    length      actual minus drawn distance of faces of - against, on the axis `about`     mm
    gaps        arc deviation of every gap centre (holes: sideways) about `about`          mm, one a gap
    flank ccw / flank cw   arc deviation of every flank at the pitch radius                mm, one a gap
    index ccw / index cw   angle to turn counter-clockwise onto a fixed worm flank         rad, one a gap
    wobble      axial place of every gap's middle along `about`, from its height           mm, one a gap
    run-out, face run-out  FIM of a sweep (face: on its own diameter)                      mm
    Complex answers are in the frame of the part that `of` belongs to.
    """

    kind: Figure
    of: str
    about: str
    against: str = ""


@dataclass(frozen=True, slots=True)
class Route:
    parts: tuple[Part, ...]
    steps: tuple[Setup | Join, ...]
    questions: tuple[Question, ...] = ()
    kind: Literal["route"] = "route"

    def scaled(self, factor: float) -> Route:
        """The same route with every error multiplied."""
        return _each_error(self, lambda value: value * factor)

    def surface(self, name: str) -> Surface:
        """The drawing of `part.surface` (an `@op` is ignored)."""
        part, _, rest = name.partition(".")
        wanted = rest.partition("@")[0]
        for found in next(p for p in self.parts if p.name == part).surfaces:
            if found.name == wanted:
                return found
        raise KeyError(name)


def _each_error(record: _T, change: Callable[[Any], Any]) -> _T:
    if isinstance(record, tuple):
        return tuple(_each_error(item, change) for item in record)  # type: ignore[return-value]
    if not dataclasses.is_dataclass(record):
        return record
    changed: dict[str, Any] = {}
    for field in dataclasses.fields(record):
        value = getattr(record, field.name)
        if field.metadata.get("error"):
            changed[field.name] = tuple(change(v) for v in value) if isinstance(value, tuple) else change(value)
        else:
            changed[field.name] = _each_error(value, change)
    return dataclasses.replace(record, **changed)  # type: ignore[type-var]
