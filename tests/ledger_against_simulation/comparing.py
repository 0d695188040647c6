"""One route, walked and simulated: every asked figure from both, side by side. Lengths mm, angles as arcs on 100 or 50 mm."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import combinations
from unittest.mock import patch

import numpy as np
from numpy.typing import NDArray

from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.route import Pattern, State
from setupcheck.quantities import relations
from setupcheck.quantities.book import Open
from setupcheck.quantities.requirements import Stack, read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import Built, build

from ..rigidbody import measure
from ..rigidbody.machining import run
from ..rigidbody.random_routes import SHARP
from ..rigidbody.route import Question, Route, Setup
from .as_job import AsJob, as_job
from .sayable import HOLES, Sayable, displaced
from .told import Told, value

Values = NDArray[np.float64] | NDArray[np.complex128]
LEAN_ARM, ANGLE_ARM = 100.0, 50.0  # mm
MATTERS = 2e-5  # mm: a figure that changes by more with what nobody stated is not determined


class Bench:
    """A simulated world, and what has been measured on its teeth."""

    def __init__(self, route: Route) -> None:
        self.world = run(route)
        self._arcs: dict[tuple[str, str, str, str], NDArray[np.float64]] = {}

    def arcs(self, kind: str, of: str, about: str, frame: str) -> NDArray[np.float64]:
        """Arcs of every gap (`gaps`, `flank ccw`, ...), its axial place (`wobble`), or arcs of the angle on a worm."""
        if (kind, of, about, frame) not in self._arcs:
            self._measure(kind, of, about, frame)
        return self._arcs[kind, of, about, frame]

    def middles(self, of: str, about: str, frame: str) -> NDArray[np.float64]:
        """Arcs of the gaps (holes) at their own middles: an oblique gap is clocked there, wherever its mid-plane lies."""
        drawn, gaps = self.world.made(of).drawn, self.arcs("gaps", of, about, frame)
        if drawn.kind == "holes":
            return gaps
        return gaps + np.tan(drawn.lead_angle) * self.arcs("wobble", of, about, frame)

    def _measure(self, kind: str, of: str, about: str, frame: str) -> None:
        drawn = self.world.made(of).drawn
        if drawn.kind == "holes":
            found = {"gaps": measure.holes(self.world, of, about, seen_from=frame).sideways}
        elif kind.startswith("index"):
            side = 1 if kind == "index ccw" else -1
            found = {kind: -drawn.radius * measure.index(self.world, of, about, side=side, seen_from=frame)}
        else:
            got = measure.teeth(self.world, of, about, seen_from=frame)
            found = {"gaps": got.gap_centre, "flank ccw": got.flank_ccw, "flank cw": got.flank_cw, "wobble": got.axial}
        for one, values in found.items():
            self._arcs[one, of, about, frame] = values


def unbounded(floor: Floor, stack: Stack) -> Built | Open:
    """As the package builds it, without its range of small displacements: a route states far more than its true errors are."""
    with patch.object(relations, "LARGEST_ECCENTRICITY", math.inf), patch.object(relations, "LARGEST_LEAN", math.inf):
        return build(floor, stack)


@dataclass(frozen=True, eq=False, slots=True)
class Asked:
    """A figure: its name, the package's answer (None: open), and how to measure it in the simulation."""

    name: str
    kind: str
    predicted: Values | None
    measured: Callable[[Bench], Values]


@dataclass(frozen=True, eq=False, slots=True)
class Compared:
    """measured: as simulated; sharp: simulated with errors times SHARP and divided by it; elsewhere: likewise, with what
    nobody stated displaced."""

    asked: Asked
    measured: Values
    sharp: Values
    elsewhere: Values

    @property
    def undetermined(self) -> bool:
        return largest(self.sharp - self.elsewhere) > MATTERS


def largest(values: Values) -> float:
    return float(np.max(np.abs(values)))


class Comparison:
    """A route as a job, walked, with the questions of the route and the requirements that follow from them."""

    def __init__(self, given: Sayable) -> None:
        self.given, self.route = given, given.route
        self.bench = Bench(given.route)
        self.require = list(_requirements(given.route))
        self.place = self._place()
        self.job: AsJob = as_job(given, self.require, self.place)
        self.loaded = read_job_text(self.job.text, "random.yaml")
        self.floor: Floor = walk(self.loaded)
        self.told = Told(self.job.truth)

    def state(self, name: str) -> State:
        part, _, surface = name.partition(".")
        state = self.floor.now(Ref(part, surface))
        assert state is not None, name
        return state

    def frame(self, name: str) -> str:
        return self.floor.body(name.partition(".")[0]).frame

    def value(self, account: Account) -> complex | None:
        return None if account.undetermined() else value(account, self.job.truth)

    def asked(self) -> Iterator[Asked]:
        for question in self.route.questions:
            if self._loses_its_phase(question.of):
                continue
            found = self._account(question)
            if found is not None:
                yield found
            elif question.kind not in ("run-out", "face run-out"):
                yield self._teeth(question)
        for index, require in enumerate(self.require):
            if not self._loses_its_phase(str(require["of"])):
                yield self._required(index, require)
        yield from self._clocks()

    def _place(self) -> dict[str, dict[str, object]] | None:
        """A worm axis just where the teeth are drawn, given from some face of the same body."""
        world, faces = self.bench.world, [q.of for q in self.route.questions if q.kind == "face run-out"]
        teeth_made = [q for q in self.route.questions if q.of == "wheel.teeth"]
        face = next((f for f in faces if world.together[f.partition(".")[0]] == world.together["wheel"]), None)
        if not teeth_made or face is None:
            return None
        frame, drawn = face.partition(".")[0], self.route.surface(face)
        away = drawn.facing * measure.drawn_length(world, "wheel.teeth", face, seen_from=frame)
        for about in dict.fromkeys(q.about for q in teeth_made):
            self.require.append({"what": "mid-plane", "of": "wheel.teeth", "about": about, "at_most": "5 mm"})
        return {"worm_axis": {"from": face, "length": {"measured": f"{away:.15f} mm"}}}

    def _loses_its_phase(self, of: str) -> bool:
        """Where a mounting angle is not said, errors of the inner part are told as turned by it; its holes, and the
        stock of cuts before the joint, are not turned."""
        return not self.given.mounting_said and (of == "spindle.flange" or (of.startswith("spindle.") and "@" in of))

    def _account(self, q: Question) -> Asked | None:
        if q.kind not in ("offset", "lean", "length"):
            return None
        g, r, frame = self.state(q.of), self.state(q.about), self.frame(q.of)
        measured: Callable[[Bench], Values]
        if q.kind == "offset":
            found = self.value(g.offset - r.axis_at(g.z))
            measured = lambda b: np.array([measure.offset(b.world, q.of, q.about, seen_from=frame)])  # noqa: E731
        elif q.kind == "lean":
            found = self.value((g.lean - r.lean) * LEAN_ARM)
            measured = lambda b: LEAN_ARM * np.array([measure.lean(b.world, q.of, q.about, seen_from=frame)])  # noqa: E731
        else:
            found = self.value(g.axial - self.state(q.against).axial)

            def measured(b: Bench) -> Values:
                got = measure.length(b.world, q.of, q.against, q.about, seen_from=frame)
                return np.array([got - measure.drawn_length(b.world, q.of, q.against, seen_from=frame)])

        return Asked(f"{q}", q.kind, None if found is None else np.array([found]), measured)

    def _teeth(self, q: Question) -> Asked:
        """Arcs of all places, less their mean: the angle of a whole pattern is asked of pairs of patterns."""
        g, r, frame = self.state(q.of), self.state(q.about), self.frame(q.of)
        assert g.pattern is not None
        predicted = self._arcs(q, g, r, g.pattern)
        if predicted is not None:
            predicted = predicted - np.mean(predicted)

        def measured(b: Bench) -> Values:
            got = b.arcs(q.kind, q.of, q.about, frame)
            return got - np.mean(got)

        return Asked(f"{q}", q.kind, predicted, measured)

    def _arcs(self, q: Question, g: State, r: State, pattern: Pattern) -> NDArray[np.float64] | None:
        """The package's arcs of one flank (or the axial places) of all gaps, None where they are open."""
        at = np.exp(-1j * np.asarray(teeth.angles(pattern)))
        if q.kind == "wobble":
            lean = self.value(g.lean - r.lean)
            return None if lean is None else -pattern.radius * np.real(lean * at)
        figure = self._tooth_figure(q)
        if figure is None:
            return None
        side = 0 if q.kind == "gaps" else 1 if q.kind.endswith(" ccw") else -1
        driven = q.kind.startswith("index")
        wave = figure.offset * teeth.flank_turn(pattern, side=side, driven=driven)
        wave += figure.oblique * teeth.oblique_turn(pattern, side=side, driven=driven)
        return np.imag(value(wave, self.job.truth) * at) + np.asarray(self.told.arcs(pattern)[0], dtype=float)

    def _tooth_figure(self, q: Question) -> Tooth | None:
        """The figure the package builds for the gap centres, None where it is open."""
        wanted = ("gap-centre-pitch", q.of, q.about)
        index = next(i for i, r in enumerate(self.require) if (r["what"], r["of"], r.get("about")) == wanted)
        found = unbounded(self.floor, read_stack(self.floor, index))
        return found.figure if isinstance(found, Built) and isinstance(found.figure, Tooth) else None

    def _required(self, index: int, require: dict[str, object]) -> Asked:
        built = unbounded(self.floor, read_stack(self.floor, index))
        predicted = None if isinstance(built, Open) else np.asarray(built.figure.sample(self.told), dtype=float)
        what, of, about = str(require["what"]), str(require["of"]), str(require.get("about"))
        frame = self.frame(of)
        drawn = self.route.surface(of)
        scale = ANGLE_ARM if what == "index-range" else 1.0
        also = str(require.get("clock", ""))
        axis = next(q.about for q in self.route.questions if self.frame(q.about) == frame)
        if what == "allowance":
            about, also = axis, f"{of.partition('@')[0]}@{_cut_again(self.route)[of.partition('@')[0]][-2]}"
        if what == "mid-plane":
            assert self.place is not None
            also = str(self.place["worm_axis"]["from"])
        if what == "length":
            predicted = None if predicted is None else predicted - abs(self.state(of).z - self.state(about).z)
            about, also = axis, about
        measured = _FIGURES[what](of, about, also, frame, drawn.radius)
        return Asked(
            f"require {what} of {of} about {about} {require.get('clock', '')}",
            what,
            None if predicted is None else predicted * scale,
            measured,
        )

    def _clocks(self) -> Iterator[Asked]:
        """Angle from one pattern to another of one body, as an arc on 50 mm: both as cut, each over its own mean."""
        made = [n for n in ("wheel.teeth", *HOLES) if n in self.bench.world.states]
        for names in combinations(made, 2):
            if self.frame(names[0]) == self.frame(names[1]):
                yield self._clock(names)

    def _clock(self, names: tuple[str, str]) -> Asked:
        axis = next(q.about for q in self.route.questions if self.frame(q.about) == self.frame(names[0]))
        states = [self.state(n) for n in names]
        found = self.value((states[0].clock - states[1].clock) * ANGLE_ARM)
        frame = self.frame(names[0])
        parts = [self._mean_division(s) for s in states]

        def measured(b: Bench) -> Values:
            means = [
                float(np.mean(b.middles(n, axis, frame))) / s.pattern.radius
                for n, s in zip(names, states, strict=True)
                if s.pattern is not None
            ]
            return np.array([(means[0] - means[1]) * ANGLE_ARM])

        if found is not None:
            found += (parts[0] - parts[1]) * ANGLE_ARM
        return Asked(
            f"angle from {names[1]} to {names[0]}", "angle", None if found is None else np.array([found.real]), measured
        )

    def _mean_division(self, state: State) -> float:
        assert state.pattern is not None
        return float(np.mean(self.told.arcs(state.pattern))) / state.pattern.radius

    def results(self, rng: np.random.Generator) -> list[Compared]:
        asked = list(self.asked())
        small, elsewhere = self.route.scaled(SHARP), displaced(self.route, rng).scaled(SHARP)
        benches = (self.bench, Bench(small), Bench(elsewhere))
        found = []
        for one in asked:
            whole, sharp, other = (one.measured(b) for b in benches)
            found.append(Compared(one, whole, sharp / SHARP, other / SHARP))
        return found


# -- requirements and how a metrologist measures them --------------------------------------------------------------------


def _requirements(route: Route) -> Iterator[dict[str, object]]:
    limit = {"at_most": "5 mm"}
    for name, ops in _cut_again(route).items():
        yield {"what": "allowance", "of": f"{name}@{ops[-1]}", "at_least": "-1 mm"}
    for q in route.questions:
        if q.kind == "run-out":
            yield {"what": "run-out", "of": q.of, "about": q.about, "at": route.surface(q.of).mid, **limit}
            yield {"what": "coaxial", "of": q.of, "about": q.about, **limit}
        elif q.kind == "face run-out":
            yield {"what": "face-run-out", "of": q.of, "about": q.about, **limit}
        elif q.kind == "length":
            yield {"what": "length", "of": q.of, "about": q.against, "at_most": "900 mm"}
        elif q.kind == "gaps" and q.of == "wheel.teeth":
            for what in ("cumulative-pitch", "single-pitch", "gap-centre-pitch"):
                yield {"what": what, "of": q.of, "about": q.about, **limit}
            yield {"what": "index-range", "of": q.of, "about": q.about, "at_most": "1 deg"}
        elif q.kind == "gaps":
            for what in ("gap-centre-pitch", "position"):
                yield {"what": what, "of": q.of, "about": q.about, **limit}
            if any(o.of == "wheel.teeth" for o in route.questions):
                yield {"what": "position", "of": q.of, "about": q.about, "clock": "wheel.teeth", **limit}
            yield {"what": "chord", "of": q.of, "about": q.about, **limit}
            yield {"what": "pitch-circle", "of": q.of, "about": q.about, **limit}


def _cut_again(route: Route) -> dict[str, list[int]]:
    """Surfaces with an earlier state, and the operations that made them (0: bought)."""
    made: dict[str, list[int]] = {f"{p.name}.{e.surface}": [0] for p in route.parts for e in p.existing}
    for step in route.steps:
        for cut in step.cuts if isinstance(step, Setup) else ():
            made.setdefault(cut.surface, []).append(step.op)
    kinds = ("cylinder", "bore", "face")
    return {n: ops for n, ops in made.items() if len(ops) > 1 and route.surface(n).kind in kinds}


Measured = Callable[[Bench], Values]


def _run_out(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    return lambda b: np.array([measure.run_out(b.world, of, about)])


def _coaxial(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    def both(b: Bench) -> Values:
        drawn = b.world.made(of).drawn
        ends = np.array([[0.0, 0.0, z, 1.0] for z in (drawn.z_from, drawn.z_to)])
        # the heights of the ends in the frame in which the relation is asked
        heights = [float((b.world.drawn_between(b.world.made(of).part, frame) @ end)[2]) for end in ends]
        return np.array([2.0 * max(abs(measure.offset(b.world, of, about, at=h, seen_from=frame)) for h in heights)])

    return both


def _face_run_out(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    return lambda b: np.array([measure.face_run_out(b.world, of, about)])


def _length(of: str, about: str, other: str, frame: str, radius: float) -> Measured:
    """How much longer than drawn."""

    def longer(b: Bench) -> Values:
        drawn = measure.drawn_length(b.world, of, other, seen_from=frame)
        got = measure.length(b.world, of, other, about, seen_from=frame) - drawn
        return np.array([got if drawn >= 0.0 else -got])

    return longer


def _range(kind: tuple[str, ...], figure: Callable[[NDArray[np.float64]], float], scale: float) -> object:
    def by(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
        def worse(b: Bench) -> Values:
            arcs = [b.arcs(k, of, about, frame) for k in kind]
            return np.array([max(figure(a) for a in arcs) * (scale / radius if scale else 1.0)])

        return worse

    return by


def _position(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    def largest_vector(b: Bench) -> Values:
        got = measure.holes(b.world, of, about, seen_from=frame)
        e = measure.offset(b.world, of, about, seen_from=frame)
        own = got.sideways - np.imag(e * np.exp(-1j * np.angle(got.places - got.deviation)))
        turn = (np.max(own) + np.min(own)) / 2.0
        if clock:
            first = b.middles(clock, about, frame)[0]
            turn = first / b.world.made(clock).drawn.radius * radius
        return np.array([2.0 * np.max(np.hypot(got.outward, got.sideways - turn))])

    return largest_vector


def _chord(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    def worst(b: Bench) -> Values:
        chords = measure.holes(b.world, of, about, seen_from=frame).chords
        return np.array([np.max(np.abs(chords - 2.0 * radius * np.sin(np.pi / len(chords))))])

    return worst


def _pitch_circle(of: str, about: str, clock: str, frame: str, radius: float) -> Measured:
    return lambda b: np.array([2.0 * (measure.holes(b.world, of, about, seen_from=frame).fit_radius - radius)])


def _mid_plane(of: str, about: str, face: str, frame: str, radius: float) -> Measured:
    def worst(b: Bench) -> Values:
        away = b.arcs("wobble", of, about, frame) - measure.height(b.world, face, about, seen_from=frame)
        return np.array([np.max(np.abs(away))])

    return worst


def _allowance(of: str, about: str, before: str, frame: str, radius: float) -> Measured:
    """Stock between two states drawn alike: less than nothing by as much as they miss each other."""

    def on_face(b: Bench) -> Values:
        drawn = b.world.made(of).drawn
        ways = [measure.height(b.world, state, about) for state in (before, of)]
        leans = [measure.lean(b.world, state, about) for state in (before, of)]
        return np.array([drawn.facing * (ways[0] - ways[1]) - radius * abs(leans[0] - leans[1])])

    def least(b: Bench) -> Values:
        new, old = b.world.made(of), b.world.made(before)
        if new.drawn.kind == "face":
            return on_face(b)
        ends = np.array([[0.0, 0.0, z, 1.0] for z in (new.drawn.z_from, new.drawn.z_to)])
        heights = [float((b.world.drawn_between(old.part, frame) @ end)[2]) for end in ends]
        return np.array([-max(abs(measure.offset(b.world, of, before, at=h, seen_from=frame)) for h in heights)])

    return least


_FIGURES: dict[str, Callable[[str, str, str, str, float], Measured]] = {
    "run-out": _run_out,
    "coaxial": _coaxial,
    "face-run-out": _face_run_out,
    "cumulative-pitch": _range(("flank ccw", "flank cw"), measure.cumulative, 0.0),  # type: ignore[dict-item]
    "single-pitch": _range(("flank ccw", "flank cw"), measure.single, 0.0),  # type: ignore[dict-item]
    "gap-centre-pitch": _range(("gaps",), measure.cumulative, 0.0),  # type: ignore[dict-item]
    "index-range": _range(("index ccw", "index cw"), measure.cumulative, ANGLE_ARM),  # type: ignore[dict-item]
    "position": _position,
    "chord": _chord,
    "pitch-circle": _pitch_circle,
    "mid-plane": _mid_plane,
    "allowance": _allowance,
    "length": _length,
}
