"""The written first-order equations, for the self-tests: do they agree with the exact simulation?

An own transcription, setup by setup, of the equations a ledger uses (offset c at the surface's mid, lean t, axial a,
clock k, all in the part's frame; sg = looks_at_tool).  Shares nothing with the simulation but the route.

    one plane and a face   t_s = t_S - eta,  C_s(z) = axis_D(z_D) - eps + t_s (z - z_D)
    two planes             C_s through axis_1(z1) - eps1 and axis_2(z2) - eps2
    stop                   a_s = a_F - Re(conj(t_F - t_s) q) - sg stop;  ring: a_s = a_F + facing rho |t_F - t_s| - sg stop
    clock                  k_s = k_F + Im((axis_F - C_s)(z_F) e^{-i theta_F})/rho_F + division - sg error
    cut                    c = C_s(z) + machine error,  t = t_s,  a = a_s + sg dial,  k = k_s
    machine to part        sg = +1: e^{-i psi} v;  sg = -1: e^{i psi} conj(v);  leans also times sg
"""

from __future__ import annotations

import cmath
import dataclasses
import math
from dataclasses import dataclass

import numpy as np

from .frames import Array, ComplexArray
from .route import (
    BoreSquares,
    Centre,
    CentredAndSquared,
    Clock,
    CutTeeth,
    Drill,
    Existing,
    Join,
    Lean,
    NoStop,
    Offset,
    PointStop,
    Pushed,
    Question,
    Route,
    Setup,
    Square,
    Surface,
    Turn,
)

NONE = np.zeros(0)


@dataclass(frozen=True, eq=False, slots=True)
class State:
    part: str
    drawn: Surface
    c: complex  # axis at height z (its own mid)
    t: complex
    a: float
    k: float
    theta: Array = dataclasses.field(default_factory=lambda: NONE)  # where the gaps belong
    side: Array = dataclasses.field(default_factory=lambda: NONE)  # arc of the single gaps, counter-clockwise
    width: Array = dataclasses.field(default_factory=lambda: NONE)
    z: float = 0.0
    facing: int = 0

    def axis(self, z: float) -> complex:
        return self.c + self.t * (z - self.z)


@dataclass(frozen=True, slots=True)
class Standing:
    """A frame seen from another: way round, insertion, and the small misplacement, all in the seen part's frame."""

    sg: int
    psi: float
    shift: float  # other z = shift + sg z
    c0: complex  # the machine axis at z = 0 of the part
    t: complex
    a: float
    k: float

    def axis(self, z: float) -> complex:
        return self.c0 + self.t * z

    def to_part(self, v: complex) -> complex:
        return cmath.exp(-1j * self.psi) * v if self.sg > 0 else cmath.exp(1j * self.psi) * v.conjugate()

    def from_part(self, v: complex) -> complex:
        turned = cmath.exp(1j * self.psi)
        return turned * v if self.sg > 0 else turned * v.conjugate()

    def angles_from_part(self, theta: Array) -> Array:
        return self.psi + self.sg * theta

    def angles_to_part(self, theta: Array) -> Array:
        return self.sg * (theta - self.psi)


class Account:
    """Runs a route in first order; `answer` gives the same figures as measure.answer."""

    def __init__(self, route: Route) -> None:
        self.route = route
        self.states: dict[str, State] = {}
        self.joined: dict[tuple[str, str], tuple[Standing, State]] = {}  # (outer, inner) -> standing, journal
        for part in route.parts:
            for given in part.existing:
                name = f"{part.name}.{given.surface}"
                self.states[name] = _existing(part.name, route.surface(name), given)
        for step in route.steps:
            if isinstance(step, Join):
                self._join(step)
            else:
                self._setup(step)

    # ------------------------------------------------------------ one part in the frame of the other

    def seen(self, state: State, frame: str) -> State:
        if state.part == frame:
            return state
        if (frame, state.part) in self.joined:  # an inner surface in the outer's frame
            s, journal = self.joined[frame, state.part]
            z = s.sg * (state.z - s.shift)
            return dataclasses.replace(
                state,
                part=frame,
                z=z,
                c=s.axis(z) + s.to_part(state.c - journal.axis(state.z)),
                t=s.t + s.sg * s.to_part(state.t - journal.t),
                a=s.a + s.sg * state.a,
                k=s.k + s.sg * state.k,
                theta=s.angles_to_part(state.theta),
                side=s.sg * state.side,
                facing=s.sg * state.facing,
            )
        s, journal = self.joined[state.part, frame]
        z = s.shift + s.sg * state.z
        return dataclasses.replace(
            state,
            part=frame,
            z=z,
            c=journal.axis(z) + s.from_part(state.c - s.axis(state.z)),
            t=journal.t + s.sg * s.from_part(state.t - s.t),
            a=s.sg * (state.a - s.a),
            k=s.sg * (state.k - s.k),
            theta=s.angles_from_part(state.theta),
            side=s.sg * state.side,
            facing=s.sg * state.facing,
        )

    def named(self, name: str, frame: str) -> State:
        return self.seen(self.states[name], frame)

    # ------------------------------------------------------------ a holding

    def _setup(self, setup: Setup) -> None:
        sg, psi, part = setup.looks_at_tool, setup.insertion, setup.part
        bare = Standing(sg, psi, 0.0, 0j, 0j, 0.0, 0.0)
        hold = setup.hold
        if isinstance(hold, CentredAndSquared):
            face = self.named(hold.square.on, part)
            t = face.t - _eta(hold.square, bare, face)
            datum = self.named(hold.centre.on, part)
            c0 = datum.axis(hold.centre.z) - _eps(hold.centre, bare, datum) - t * hold.centre.z
        else:
            places = []
            for plane in (hold.first, hold.second):
                datum = self.named(plane.on, part)
                places.append(datum.axis(plane.z) - _eps(plane, bare, datum))
            t = (places[1] - places[0]) / (hold.second.z - hold.first.z)
            c0 = places[0] - t * hold.first.z
        stop = setup.stop
        if isinstance(stop, NoStop):
            a = -sg * stop.axial
        else:
            face = self.named(stop.on, part)
            if isinstance(stop, PointStop):
                q = bare.to_part(cmath.rect(stop.radius, stop.angle))
                a = face.a - ((face.t - t).conjugate() * q).real - sg * stop.stands_off
            else:
                a = face.a + face.facing * stop.radius * abs(face.t - t) - sg * stop.stands_off
        clock = setup.clock
        if isinstance(clock, Clock):
            f = self.named(clock.on, part)
            j = clock.number - 1
            sideways = ((f.c - c0 - t * f.z) * cmath.exp(-1j * f.theta[j])).imag
            k = f.k + (sideways + f.side[j]) / f.drawn.radius - sg * clock.error
        else:
            k = -sg * clock.turned
        standing = Standing(sg, psi, 0.0, c0, t, a, k)
        fresh = {cut.surface: self._cut(cut, standing, part) for cut in setup.cuts}
        self.states.update(fresh)

    def _cut(self, cut: Turn | CutTeeth | Drill, s: Standing, part: str) -> State:
        owner = cut.surface.partition(".")[0]
        drawn = self.route.surface(cut.surface)
        empty = State(owner, drawn, 0j, 0j, 0.0, 0.0, z=drawn.mid, facing=drawn.facing)
        if isinstance(cut, CutTeeth | Drill):
            steps = np.arange(drawn.count) * (2.0 * math.pi / drawn.count)
            # direction of counting: counter-clockwise at the machine, so against the owner's count when it is reversed
            way = s.sg
            for (outer, inner), (joint, _) in self.joined.items():
                if owner != part and {owner, part} == {outer, inner}:
                    way *= joint.sg
            empty = dataclasses.replace(empty, theta=cut.first_at + way * steps)
        here = self.seen(empty, part)
        m = s.to_part(cut.machine_error)
        made = dataclasses.replace(here, c=s.axis(here.z) + m, t=s.t, a=s.a, k=s.k)
        if not isinstance(cut, Drill):
            made = dataclasses.replace(made, a=s.a + s.sg * cut.dial)
        if isinstance(cut, CutTeeth | Drill):
            side = drawn.radius * np.array(cut.division or (0.0,) * drawn.count)
            width = np.zeros(drawn.count)
            if isinstance(cut, Drill):
                side = side + (cut.spindle_to_axis + np.array(cut.scatter or (0j,) * drawn.count)).imag
            elif cut.width_change:
                width = np.array(cut.width_change)
            made = dataclasses.replace(made, side=s.sg * side, width=width)
        return self.seen(made, owner)

    def _join(self, join: Join) -> None:
        outer, inner = join.outer.partition(".")[0], join.inner.partition(".")[0]
        bore, journal = self.states[join.outer], self.states[join.inner]
        face, shoulder = self.states[join.seat.on], self.states[join.seat.against]
        looks = shoulder.drawn.facing
        shift = shoulder.drawn.mid + looks * join.seat.spacer - join.way * face.drawn.mid
        bare = Standing(join.way, join.insertion, shift, 0j, 0j, 0.0, 0.0)
        if isinstance(join.square, BoreSquares):
            t = bore.t - join.way * bare.to_part(join.square.lean)
        else:
            squaring, against = self.states[join.square.on], self.states[join.square.against]
            t = squaring.t - join.way * bare.to_part(against.t - journal.t + join.square.wedge)
        c0 = bore.c - bare.to_part(join.offset) - t * bore.z
        # the stop leans with the shoulder: what counts at the touching point is the wedge between the two faces
        wedge = face.t - t - join.way * bare.to_part(shoulder.t - journal.t)
        stop = shoulder.a + looks * join.seat.spacer_error
        if join.seat.touch == "ring":
            a = face.a + face.facing * join.seat.radius * abs(wedge) - join.way * stop
        else:
            q = bare.to_part(cmath.rect(join.seat.radius, join.seat.angle))
            a = face.a - (wedge.conjugate() * q).real - join.way * stop
        standing = Standing(join.way, join.insertion, shift, c0, t, a, -join.way * join.turned)
        self.joined[outer, inner] = (standing, journal)

    # ------------------------------------------------------------ figures

    def answer(self, question: Question) -> Array | ComplexArray:
        frame = question.of.partition(".")[0]
        g, r = self.named(question.of, frame), self.named(question.about, frame)
        e, t = g.c - r.axis(g.z), g.t - r.t
        kind = question.kind
        if kind == "offset":
            return np.array([e])
        if kind == "lean":
            return np.array([t])
        if kind == "run-out":
            return np.array([2.0 * abs(e)])
        if kind == "face run-out":
            return np.array([abs(t) * g.drawn.diameter])
        if kind == "length":
            return np.array([g.a - self.named(question.against, frame).a])
        radius, alpha = g.drawn.radius, g.drawn.pressure_angle
        gaps = (e * np.exp(-1j * g.theta)).imag + radius * g.k + g.side
        if kind == "gaps":
            return np.asarray(gaps)
        if kind == "wobble":
            return np.asarray(g.a - radius * (t.conjugate() * np.exp(1j * g.theta)).real)
        side = 1.0 if kind.endswith(" ccw") else -1.0
        half = math.pi / (2 * g.drawn.count) if kind.startswith("flank") else 0.0
        wave = (e * np.exp(-1j * (g.theta + side * (alpha + half)))).imag / math.cos(alpha)
        flank = wave + radius * g.k + g.side + 0.5 * side * g.width
        return np.asarray(flank if kind.startswith("flank") else -flank / radius)


def _existing(part: str, drawn: Surface, given: Existing) -> State:
    return State(
        part,
        drawn,
        given.offset,
        given.lean,
        given.axial,
        given.turned,
        np.arange(drawn.count) * (2.0 * math.pi / max(drawn.count, 1)),
        drawn.radius * np.array(given.division or (0.0,) * drawn.count),
        np.zeros(drawn.count),
        drawn.mid,
        drawn.facing,
    )


def _eps(hold: Centre, s: Standing, datum: State) -> complex:
    if isinstance(hold.by, Offset):
        return s.to_part(hold.by.vector)
    if isinstance(hold.by, Pushed):
        return s.to_part(cmath.rect(0.5 * hold.by.clearance, hold.by.towards))
    sign = -1.0 if datum.drawn.kind == "bore" else 1.0
    return sign * cmath.rect(0.5 * hold.by.fim, hold.by.high_at)


def _eta(hold: Square, s: Standing, face: State) -> complex:
    if isinstance(hold.by, Lean):
        return s.sg * s.to_part(hold.by.slope)
    return -face.facing * cmath.rect(hold.by.fim / hold.by.across, hold.by.high_at)
