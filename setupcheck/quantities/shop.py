"""The floor: what stands where while the route is walked. Bodies of parts, their surfaces, and what was noted on the way."""

from __future__ import annotations

import math
from dataclasses import field, replace

from setupcheck.errors import JobError, Problem
from setupcheck.jobfile.models import Flat, Pattern, Round, Surface, Throat, Toothing
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger import route
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Placing, State
from setupcheck.notation import show
from setupcheck.quantities.causes import Towards
from setupcheck.record import record


@record
class Datum:
    """How a hold's datum was found: stock, made, rough, not-yet-made, cut-away or same-holding; and by which op."""

    state: str
    made_at: int | None


@record(frozen=False)
class Body:
    """Parts that are one piece by now: every state of every surface, oldest first, in one frame."""

    frame: str
    states: dict[tuple[str, str], list[State]] = field(default_factory=dict)

    def now(self, ref: Ref) -> State | None:
        """The surface as it is now, or as its `@op` left it."""
        found = self.states.get((ref.part, ref.surface), [])
        if ref.op is not None:
            found = [s for s in found if s.op == ref.op]
        return found[-1] if found else None

    def add(self, state: State) -> None:
        self.states.setdefault((state.part, state.name), []).append(state)


@record(frozen=False)
class Floor:
    """Everything the walk along the route finds. Filled by `quantities.route`, read-only afterwards."""

    loaded: LoadedJob
    bodies: dict[str, Body] = field(default_factory=dict)
    placings: dict[int, Placing] = field(default_factory=dict)
    datums: dict[str, Datum] = field(default_factory=dict)
    directions: dict[str, str] = field(default_factory=dict)
    tilt_datums: dict[int, int] = field(default_factory=dict)
    planes: dict[int, tuple[float, float]] = field(default_factory=dict)
    part_of: dict[int, str] = field(default_factory=dict)
    stock: dict[str, tuple[State, State]] = field(default_factory=dict)
    removed: dict[tuple[str, str], int] = field(default_factory=dict)
    frames: dict[str, tuple[int, float]] = field(default_factory=dict)
    marks: dict[str, float | None] = field(default_factory=dict)
    truings: dict[int, Account] = field(default_factory=dict)

    def size(self, mm: float, digits: int = 3) -> str:
        """A size [mm] in the units of the file: so many decimals of a millimetre, of an inch one more and at least three."""
        return show(mm, "in", max(digits + 1, 3)) if self.loaded.job.units == "in" else show(mm, "mm", digits)

    def fine(self, mm: float, digits: int = 1) -> str:
        """A small length [mm] in um, or with one decimal more in thou."""
        return show(mm, "thou", digits + 1) if self.loaded.job.units == "in" else show(mm, "um", digits)

    def fine_step(self, digits: int = 1) -> float:
        """Step of the last decimal that `fine` shows [mm]: what a limit in words is rounded by, to the side that passes."""
        return 0.00254 * 10.0**-digits if self.loaded.job.units == "in" else 0.001 * 10.0**-digits

    def z(self, part: str, own: float) -> float:
        """A height in a part's own coordinates, in the frame of the body it belongs to by now [mm]."""
        sense, shift = self.frames.get(part, (1, 0.0))
        return sense * own + shift

    def sense(self, part: str) -> int:
        """+1 where a part's own +z is the +z of its body, -1 where it was joined the other way round."""
        return self.frames.get(part, (1, 0.0))[0]

    def mark(self, part: str) -> float | None:
        """Where a part's mark stands in its body's frame [rad]; None where nobody recorded how it was mounted."""
        return self.marks.get(part, 0.0)

    def in_body(self, part: str, towards: Towards) -> Towards:
        """A direction counted from a part's own mark, in the frame of its body; unknown where its mounting is not."""
        mark = self.mark(part)
        if towards.angle is None or mark is None:
            return Towards()
        return replace(towards, angle=self.sense(part) * towards.angle + mark)

    def body(self, part: str) -> Body:
        return self.bodies[part]

    def now(self, ref: Ref) -> State | None:
        return self.bodies[ref.part].now(ref)

    def problem(self, path: str, text: str, hint: str) -> JobError:
        """An error of the job file found while walking the route."""
        place = self.loaded.tree.place(self.loaded.loc(path))
        return JobError(
            self.loaded.tree.file,
            self.loaded.tree.lines,
            (Problem(path, place.line, place.column, place.length, text, hint),),
        )


@record
class Outline:
    """Nominal shape of a surface: axial extent, diameter, facing, kind."""

    kind: str
    low: float
    high: float
    diameter: float | None
    facing: int


def outline(surface: Surface) -> Outline:
    """Nominal shape as the drawing has it [mm]."""
    if isinstance(surface, Round):
        larger = max(surface.diameter.value, surface.to_diameter or 0.0)  # of a taper: what meets least stock outside
        return Outline(surface.kind, surface.low, surface.high, larger, 0)
    if isinstance(surface, Flat):
        return Outline(surface.kind, surface.at, surface.at, surface.diameter, surface.facing)
    if isinstance(surface, Throat):
        return Outline("throat", surface.at, surface.at, surface.diameter, 0)
    half = 0.0  # a slot's width lies round the part
    if isinstance(surface, Toothing):
        half = (surface.width or 0.0) / 2.0 * math.cos(surface.cone or 0.0)
    return Outline(surface.kind, surface.at - half, surface.at + half, surface.on_circle, 0)


def tooth_pattern(surface: Surface, pressure_angle: float | None) -> route.Pattern | None:
    """The places of a toothing or hole pattern before any error."""
    if isinstance(surface, Toothing):
        angle = surface.pressure_angle if surface.pressure_angle is not None else pressure_angle
        return route.Pattern(surface.count, surface.on_circle / 2.0, pressure_angle=angle)
    if isinstance(surface, Pattern):
        return route.Pattern(surface.count, surface.on_circle / 2.0, start=surface.angle)
    return None


def unknown_surface(part: str, name: str, surface: Surface, missing: str, pressure_angle: float | None) -> State:
    """A surface about which nothing is stated: four undetermined causes of its own, named after what would settle them."""
    shape = outline(surface)
    causes = tuple(
        Cause(f"{part}.{name}: {what}", "undetermined", missing=missing)
        for what in ("where its axis stands", "how it leans", "its length", "its angle")
    )
    assert len(causes) == 4
    return route.untouched(
        part,
        name,
        kind=shape.kind,
        low=shape.low,
        high=shape.high,
        diameter=shape.diameter,
        facing=shape.facing,
        causes=causes,
        pattern=tooth_pattern(surface, pressure_angle),
    )
