"""Random routes that a job file can say: the simulation's own, with the rest replaced. Lengths mm, angles rad.

Taken out: wedges in a joint, a stop of a joint that touches at one point, changes of gap width, a first gap of a
toothing away from the mark. A bought journal is parallel to its bearings (a reading with a direction is the same at
both ends).
"""

from __future__ import annotations

import cmath
import dataclasses
import math

import numpy as np

from ..rigidbody.route import (
    BoreSquares,
    Centre,
    CentredAndSquared,
    Clock,
    CutTeeth,
    Drill,
    Existing,
    FaceDial,
    FaceSquares,
    Join,
    Lean,
    NoClock,
    NoStop,
    Offset,
    Part,
    Pushed,
    RadialDial,
    Route,
    Setup,
    Surface,
    TwoPlanes,
)

Rng = np.random.Generator
HOLES = ("wheel.holes", "spindle.flange")
JAWS = 4
WORM_RATIO = 40


@dataclasses.dataclass(frozen=True, slots=True)
class Division:
    """How one cut divides: waves once per turn of the wheel and of the crank, a scatter, a step of the readout [rad]."""

    wheel: complex = 0j
    crank: complex = 0j
    setting: tuple[float, ...] = ()
    step: float = 0.0

    def errors(self, count: int) -> tuple[float, ...]:
        """Index error of each place, counter-clockwise at the machine; counted from the first place."""
        at = np.arange(count) * (2.0 * math.pi / count)
        total = np.real(self.wheel * np.exp(-1j * at)) + np.real(self.crank * np.exp(-1j * WORM_RATIO * at))
        if self.setting:
            total = total + np.array(self.setting)
        if self.step:
            total = total + np.rint(at / self.step) * self.step - at
        return tuple(float(t) for t in total)


@dataclasses.dataclass(frozen=True, slots=True)
class Sayable:
    """A route, how its cuts divide (by op and surface), the worm (lead angle, hand), and whether the mounting is said."""

    route: Route
    divisions: dict[tuple[int, str], Division]
    lead_angle: float
    mounting_said: bool


def sayable(route: Route, rng: Rng) -> Sayable:
    """The route with everything replaced that a job file cannot say."""
    lead = float(rng.uniform(0.01, 0.12)) * (1.0 if rng.random() < 0.5 else -1.0) if rng.random() < 0.4 else 0.0
    first = {name: float(rng.uniform(-3.0, 3.0)) if rng.random() < 0.5 else 0.0 for name in HOLES}
    parts = tuple(_part(p, lead) for p in route.parts)
    drawn = {f"{p.name}.{s.name}": s for p in parts for s in p.surfaces}
    device = cmath.rect(0.02, float(rng.uniform(-3, 3)))
    divisions: dict[tuple[int, str], Division] = {}
    steps: list[Setup | Join] = []
    joined = next((i for i, step in enumerate(route.steps) if isinstance(step, Join)), len(route.steps))
    # without the mounting angle nothing can be said about a direction of the inner part afterwards
    said = any(_on_spindle(step) for step in route.steps[joined:]) or bool(rng.random() < 0.7)
    for i, step in enumerate(route.steps):
        if isinstance(step, Join):
            steps.append(_join(step, drawn))
            continue
        if not said and i < joined and _on_spindle(step):
            step = dataclasses.replace(step, hold=_read_by_a_dial(step.hold, rng))
        cuts = tuple(
            _cut(cut, step.op, drawn[cut.surface], first, divisions, rng) if isinstance(cut, CutTeeth | Drill) else cut
            for cut in step.cuts
        )
        steps.append(dataclasses.replace(step, hold=_hold(step.hold, drawn, device, rng), cuts=cuts))
    return Sayable(dataclasses.replace(route, parts=parts, steps=tuple(steps)), divisions, lead, said)


def _part(part: Part, lead: float) -> Part:
    surfaces = tuple(dataclasses.replace(s, lead_angle=lead) if s.kind == "teeth" else s for s in part.surfaces)
    if part.name != "spindle":
        return dataclasses.replace(part, surfaces=surfaces)
    bearings = next(e for e in part.existing if e.surface == "bearings")
    straight = tuple(dataclasses.replace(e, lean=bearings.lean) if e.surface == "journal" else e for e in part.existing)
    return Part(part.name, surfaces, straight)


def _on_spindle(step: Setup | Join) -> bool:
    return isinstance(step, Setup) and step.part == "spindle"


def _read_by_a_dial(hold: CentredAndSquared | TwoPlanes, rng: Rng) -> CentredAndSquared | TwoPlanes:
    """Vectors of the machine become readings in a direction of the part."""

    def centre(plane: Centre) -> Centre:
        if isinstance(plane.by, RadialDial):
            return plane
        fim = plane.by.clearance if isinstance(plane.by, Pushed) else 2.0 * abs(plane.by.vector)
        return dataclasses.replace(plane, by=RadialDial(fim, float(rng.uniform(-3, 3))))

    if isinstance(hold, TwoPlanes):
        return TwoPlanes(centre(hold.first), centre(hold.second))
    square = hold.square
    if isinstance(square.by, Lean):
        by = FaceDial(20.0 * abs(square.by.slope), 20.0, float(rng.uniform(-3, 3)))  # a circle that lies on every face
        square = dataclasses.replace(square, by=by)
    return CentredAndSquared(centre(hold.centre), square)


def _hold(
    hold: CentredAndSquared | TwoPlanes, drawn: dict[str, Surface], device: complex, rng: Rng
) -> CentredAndSquared | TwoPlanes:
    """Some of the machine's own vectors point at a jaw, or belong to a device that comes back."""

    def centre(plane: Centre) -> Centre:
        if not isinstance(plane.by, Offset):
            return plane
        choice, vector = float(rng.random()), plane.by.vector
        if choice < 0.4:
            jaw = int(rng.integers(JAWS))
            sign = -1.0 if drawn[plane.on].kind == "bore" else 1.0
            vector = sign * cmath.rect(abs(vector), 2.0 * math.pi * jaw / JAWS)
        elif choice < 0.8 and isinstance(hold, CentredAndSquared):
            vector = device
        return dataclasses.replace(plane, by=Offset(vector))

    if isinstance(hold, CentredAndSquared):
        return dataclasses.replace(hold, centre=centre(hold.centre))
    return TwoPlanes(centre(hold.first), centre(hold.second))


def _cut(
    cut: CutTeeth | Drill,
    op: int,
    drawn: Surface,
    first: dict[str, float],
    divisions: dict[tuple[int, str], Division],
    rng: Rng,
) -> CutTeeth | Drill:
    n = drawn.count
    same_setup = [how.step for (other, _), how in divisions.items() if other == op]  # one way of dividing a setup
    how = Division(
        wheel=cmath.rect(float(rng.uniform(0, 6e-5)), float(rng.uniform(-3, 3))) if rng.random() < 0.6 else 0j,
        crank=cmath.rect(float(rng.uniform(0, 3e-5)), float(rng.uniform(-3, 3))) if rng.random() < 0.6 else 0j,
        setting=tuple(float(x) for x in rng.uniform(-3e-5, 3e-5, size=n)) if rng.random() < 0.6 else (),
        step=same_setup[0] if same_setup else float(rng.uniform(1e-4, 3e-4)) if rng.random() < 0.2 else 0.0,
    )
    divisions[op, cut.surface] = how
    if isinstance(cut, CutTeeth):
        return dataclasses.replace(cut, division=how.errors(n), width_change=(), first_at=0.0)
    return dataclasses.replace(cut, division=how.errors(n), first_at=first[cut.surface])


def _join(join: Join, drawn: dict[str, Surface]) -> Join:
    square, seat = join.square, join.seat
    if isinstance(square, FaceSquares):
        square, seat = dataclasses.replace(square, wedge=0j), dataclasses.replace(seat, touch="point", radius=0.0)
    else:
        square = BoreSquares()
        radius = min(drawn[seat.on].radius, drawn[seat.against].radius)
        seat = dataclasses.replace(seat, touch="ring", radius=radius)
    return dataclasses.replace(join, square=square, seat=seat, turned=0.0)


def displaced(route: Route, rng: Rng) -> Route:
    """The same route with everything elsewhere that nothing in the job file says: stock, bought parts, unset stops."""

    def some() -> tuple[complex, complex, float, float]:
        return (
            cmath.rect(0.03, float(rng.uniform(-3, 3))),
            cmath.rect(1e-4, float(rng.uniform(-3, 3))),
            float(rng.uniform(0.02, 0.05)),
            float(rng.uniform(2e-4, 4e-4)),
        )

    def part(one: Part) -> Part:
        shift, lean, along, turned = some()
        moved = []
        for given in one.existing:
            surface = next(s for s in one.surfaces if s.name == given.surface)
            moved.append(
                Existing(
                    given.surface,
                    given.offset + shift + lean * surface.mid,
                    given.lean + lean,
                    given.axial + along,
                    given.turned + turned,
                )
            )
        return dataclasses.replace(one, existing=tuple(moved))

    def step(one: Setup | Join) -> Setup | Join:
        if isinstance(one, Join):
            return one
        _, _, along, turned = some()
        stop = NoStop(one.stop.axial + along) if isinstance(one.stop, NoStop) else one.stop
        clock: Clock | NoClock = one.clock
        if isinstance(clock, NoClock):
            clock = NoClock(clock.turned + turned)
        return dataclasses.replace(one, stop=stop, clock=clock)

    return dataclasses.replace(route, parts=tuple(map(part, route.parts)), steps=tuple(map(step, route.steps)))
