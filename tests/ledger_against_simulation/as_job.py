"""A sayable route as the text of a job file. Lengths mm, angles rad inside; the file says um and deg.

What has a direction is said as `measured` with `high_at` (an angle of the part, or a jaw of a device whose mark is
kept). What the file can only bound (a push into a clearance, a machine's own axis, the waves of a dividing head, a
device that comes back) is said as a bound, and `told` holds its true value, found by the path of its entry.
"""

from __future__ import annotations

import cmath
import math
import re
from dataclasses import dataclass, field
from typing import TypeVar

import numpy as np
import yaml
from numpy.typing import NDArray

from ..rigidbody.route import (
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
    NoStop,
    Part,
    PointStop,
    Pushed,
    RadialDial,
    Setup,
    Surface,
    Turn,
)
from .sayable import JAWS, Sayable

Node = dict[str, object]
T = TypeVar("T")
DUMPER = getattr(yaml, "CSafeDumper", yaml.SafeDumper)
BOUND = "400 um"  # of what is told instead


@dataclass(slots=True)
class Truth:
    """True values of causes that the file only bounds, by the path of their entry and a word of their name.

    The word tells the causes of one entry apart (the cuts of one machine); it may be empty.  Values of the single
    places of a pattern are arrays.
    """

    values: dict[tuple[str, str], complex] = field(default_factory=dict)
    places: dict[tuple[str, str], NDArray[np.float64]] = field(default_factory=dict)

    def value(self, paths: tuple[str, ...], name: str) -> complex | None:
        return _found(self.values, paths, name)

    def at_places(self, paths: tuple[str, ...], name: str) -> NDArray[np.float64] | None:
        return _found(self.places, paths, name)


def _found(kept: dict[tuple[str, str], T], paths: tuple[str, ...], name: str) -> T | None:
    for path in paths or ("",):
        for (where, word), value in kept.items():
            if where == path and re.search(rf"\b{word}\b", name):
                return value
    return None


@dataclass(frozen=True, slots=True)
class AsJob:
    """Text of a job file, and what it leaves open."""

    text: str
    truth: Truth


def um(value: float) -> str:
    return f"{value * 1e3:.12f} um"


def deg(value: float) -> str:
    return f"{math.degrees(math.remainder(value, math.tau)):.13f} deg"


def reading(vector: complex, *, sign: float, per: float) -> Node:
    """An indicator reading for a vector: `sign` +1 where it points to the high spot; |vector| = reading x per."""
    return {"measured": um(abs(vector) / per), "high_at": deg(cmath.phase(sign * vector) if vector else 0.0)}


def outward(surface: Surface) -> float:
    return -1.0 if surface.kind == "bore" else 1.0


class Writer:
    def __init__(self, given: Sayable) -> None:
        self.given, self.route = given, given.route
        self.truth = Truth()
        self.heights: dict[str, tuple[float, int]] = {}  # of the wheel in the spindle: height, way
        # where a part lies in its body: the body, its way round, the direction of its mark there
        self.lying = {part.name: (part.name, 1, 0.0) for part in given.route.parts}

    def text(self, require: list[Node], place: Node | None = None) -> str:
        job: Node = {"setupcheck": 1, "title": "random route", "units": "mm", "parts": self._parts()}
        if self.given.lead_angle:
            module = 20.0 * math.tan(abs(self.given.lead_angle))
            hand = "right" if self.given.lead_angle > 0.0 else "left"
            job["worm"] = {"hand": hand, "starts": 1, "axial_module": f"{module:.14f} mm", "reference_diameter": 20}
            job["mesh"] = {"wheel": "wheel.teeth"}
        job["machines"] = {
            f"lathe-{step.op}": {"kind": "lathe", "axis_runout": BOUND, "worm_ratio": 40}
            for step in self.route.steps
            if isinstance(step, Setup)
        }
        job["setups"] = [self._join(s) if isinstance(s, Join) else self._setup(s) for s in self.route.steps]
        if place is not None:
            job["place"] = place
        job["require"] = require
        return str(yaml.dump(job, Dumper=DUMPER, sort_keys=False, default_flow_style=None, width=200))

    # -- parts -----------------------------------------------------------------------------------------------------

    def _parts(self) -> Node:
        first = {
            cut.surface: cut.first_at
            for step in self.route.steps
            if isinstance(step, Setup)
            for cut in step.cuts
            if isinstance(cut, CutTeeth | Drill)
        }
        parts: Node = {}
        for part in self.route.parts:
            surfaces: Node = {}
            for s in part.surfaces:
                stock: Node = {"made": "stock"} if part.name == "wheel" and _existing(part, s.name) else {}
                surfaces[s.name] = {**_drawing(s, first.get(f"{part.name}.{s.name}", 0.0)), **stock}
            parts[part.name] = {"surfaces": surfaces, "given": _relations(part)}
        return parts

    # -- setups ----------------------------------------------------------------------------------------------------

    def _setup(self, setup: Setup) -> Node:
        hold: Node = {}
        if isinstance(setup.hold, CentredAndSquared):
            hold["centre"] = self._centre(setup, setup.hold.centre, "centre")
            hold["square"] = self._square(setup, setup.hold.square.on, setup.hold.square.by)
        else:
            hold["centre"] = self._centre(setup, setup.hold.first, "centre")
            hold["and_centre"] = self._centre(setup, setup.hold.second, "and_centre")
        if not isinstance(setup.stop, NoStop):
            stop: Node = {"on": setup.stop.on, "error": {"measured": um(setup.stop.stands_off)}}
            if isinstance(setup.stop, PointStop):
                if setup.stop.radius:
                    where = {"radius": setup.stop.radius, "direction": deg(setup.stop.angle)}
                    stop |= {"touches": "point", **where}
            else:
                stop |= {"touches": "all-round", "radius": setup.stop.radius}
            hold["stop"] = stop
        if isinstance(setup.clock, Clock):
            error = setup.clock.error * self.route.surface(setup.clock.on).radius
            hold["clock"] = {"on": setup.clock.on, "number": setup.clock.number, "error": {"measured": um(error)}}
        cuts: Node = {cut.surface: self._cut(setup, cut) for cut in setup.cuts}
        node: Node = {
            "op": setup.op,
            "part": setup.part,
            "machine": f"lathe-{setup.op}",
            "looks_at_tool": "+z" if setup.looks_at_tool > 0 else "-z",
            "hold": hold,
            "cut": cuts,
        }
        divided = [key for key in self.given.divisions if key[0] == setup.op]
        if divided:
            node["divide"] = self._divide(setup, [c for c in setup.cuts if isinstance(c, CutTeeth | Drill)])
        return node

    def _divide(self, setup: Setup, cuts: list[CutTeeth | Drill]) -> Node:
        """One way of dividing for all cuts of a setup; each cut has its own true values."""
        step = 0.0
        for cut in cuts:
            how, name = self.given.divisions[setup.op, cut.surface], cut.surface.partition(".")[2]
            path = f"setups.{setup.op}.divide"
            self.truth.values[f"{path}.wheel.once_per_turn", name] = how.wheel
            self.truth.values[f"{path}.worm.once_per_crank", name] = how.crank
            count = self.route.surface(cut.surface).count
            self.truth.places[f"{path}.setting", name] = np.array(how.setting or (0.0,) * count)
            step = how.step
        node: Node = {
            "by": "readout",
            "wheel": {"once_per_turn": "1 deg"},
            "worm": {"once_per_crank": "1 deg"},
            "setting": "1 deg",
        }
        return {**node, "step": f"{math.degrees(step):.15f} deg"} if step else node

    def _centre(self, setup: Setup, plane: Centre, step: str) -> Node:
        surface, by = self.route.surface(plane.on), plane.by
        node: Node = {"on": plane.on, "at": self._own_height(setup.part, plane.on, plane.z)}
        node["turned"] = deg(setup.insertion)
        if isinstance(by, RadialDial):
            return node | {"by": "indicator", "runout": {"measured": um(by.fim), "high_at": deg(by.high_at)}}
        path = f"setups.{setup.op}.hold.{step}"
        if isinstance(by, Pushed):
            play = um(by.clearance)
            wall = cmath.rect(by.clearance / 2.0, by.towards)
            self.truth.values[f"{path}.clearance", ""] = self._into_body(setup, wall)
            return node | {"by": "spigot", "runout": "0 um", "clearance": [play, play], "rests": "pushed"}
        at_jaw = cmath.phase(outward(surface) * by.vector) * JAWS / math.tau
        if by.vector and abs(at_jaw - round(at_jaw)) < 1e-9:
            jaw = f"jaw {round(at_jaw) % JAWS + 1}"
            device = {"device": "four-jaw-A", "mark": "kept"}
            return node | {"by": "four-jaw", "runout": {"measured": um(2.0 * abs(by.vector)), "high_at": jaw, **device}}
        # two holds with one vector are one device that comes back
        device_name = f"fixture {by.vector.real:.9f} {by.vector.imag:.9f}"
        self.truth.values[f"{path}.runout", ""] = by.vector
        return node | {"by": "fixture", "runout": {"at_most": BOUND, "device": device_name, "mark": "kept"}}

    def _square(self, setup: Setup, on: str, by: Lean | FaceDial) -> Node:
        if isinstance(by, FaceDial):
            return {
                "on": on,
                "across": by.across,
                "face_runout": {"measured": um(by.fim), "high_at": deg(by.high_at)},
            }
        device = f"plate {by.slope.real:.9f} {by.slope.imag:.9f}"
        self.truth.values[f"setups.{setup.op}.hold.square.face_runout", ""] = by.slope
        return {"on": on, "across": 10, "face_runout": {"at_most": BOUND, "device": device, "mark": "kept"}}

    def _cut(self, setup: Setup, cut: Turn | CutTeeth | Drill) -> Node:
        name = cut.surface.partition(".")[2]
        axis = (f"machines.lathe-{setup.op}.axis_runout", name)
        self.truth.values[axis] = self._into_body(setup, cut.machine_error)
        if not isinstance(cut, Drill):
            return {"error": {"measured": um(cut.dial)}}
        scatter = np.array(cut.scatter)
        each = f"setups.{setup.op}.cut.{cut.surface}.each"
        self.truth.places[f"{each}.radial", name] = scatter.real
        self.truth.places[f"{each}.tangential", name] = scatter.imag
        x = self.route.surface(cut.surface).radius + cut.spindle_to_axis.real
        table: Node = {
            "x": {"measured": f"{x:.15f} mm"},
            "y": {"measured": um(cut.spindle_to_axis.imag)},
        }
        return {"each": {"radial": BOUND, "tangential": BOUND}, "spindle_to_axis": table}

    # -- joints ----------------------------------------------------------------------------------------------------

    def _join(self, join: Join) -> Node:
        shoulder, face = self.route.surface(join.seat.against), self.route.surface(join.seat.on)
        inner = join.inner.partition(".")[0]
        outer = join.outer.partition(".")[0]
        # a play is read on the bore, in a direction of the part that has it
        play = _into_outer(join.way, join.insertion, join.offset)
        if outer == "wheel":
            height = shoulder.mid + shoulder.facing * join.seat.spacer - join.way * face.mid
            self.heights["spindle"] = (height, join.way)
        self._lies(outer, inner, join)
        told = {"mounted_at": deg(join.insertion)} if self.given.mounting_said else {}
        if not self.given.mounting_said:
            # direction 0 of the inner part in the outer's frame: a unit vector turned by the mounting
            self.truth.values["", "angle at which"] = _into_outer(join.way, join.insertion, 1 + 0j)
        spacers = [{"name": "shim", "length": f"{join.seat.spacer:.6f} ±0.400"}]
        node: Node = {
            "outer": join.outer,
            "inner": join.inner,
            "square": "shoulder" if isinstance(join.square, FaceSquares) else "bore",
            "stop": {"on": join.seat.on, "against": join.seat.against, "spacers": spacers},
            **told,
        }
        self.truth.values[f"setups.{join.op}.join.stop.spacers[1].length", ""] = complex(join.seat.spacer_error)
        if not join.offset:
            return {"op": join.op, "join": node | {"by": "shrink", "grips_first": "shoulder-end"}}
        node |= {"by": "bond", "fit_error": reading(play, sign=-1.0, per=0.5)}
        return {"op": join.op, "join": node}

    # -- frames ----------------------------------------------------------------------------------------------------

    def _own_height(self, frame: str, on: str, z: float) -> float:
        """A height of the setup's part as one of the part that carries the surface."""
        part = on.partition(".")[0]
        if part == frame:
            return z
        height, way = self.heights["spindle"]  # z of the spindle = height + way z of the wheel
        return (z - height) / way if part == "wheel" else height + way * z

    def _into_body(self, setup: Setup, vector: complex) -> complex:
        """A vector of the machine in the frame in which the surfaces are kept: the outer part's, once joined."""
        turned = cmath.exp(1j * setup.insertion)
        own = vector / turned if setup.looks_at_tool > 0 else turned * vector.conjugate()
        if not self.given.mounting_said and setup.part == "spindle":
            # the bound of an inner part is not turned with it, for any direction is as good: tell it turned
            join = next(s for s in self.route.steps if isinstance(s, Join))
            return own * cmath.exp(-1j * join.insertion)
        _, way, mark = self.lying[setup.part]
        return cmath.exp(1j * mark) * (own if way > 0 else own.conjugate())

    def _lies(self, outer: str, inner: str, join: Join) -> None:
        """After a joint all of the inner body lies in the outer's."""
        body, way, mark = self.lying[outer]
        left, inner_way, inner_mark = self.lying[inner]
        # direction d of the inner part is way_j (d - insertion) of the outer part, and way (that) + mark of its body
        for part, (there, own_way, own_mark) in list(self.lying.items()):
            if there == left:
                turned = inner_way * (own_mark - inner_mark)  # of the part's mark, in the inner part
                self.lying[part] = (
                    body,
                    way * join.way * inner_way * own_way,
                    way * join.way * (turned - join.insertion) + mark,
                )


def _into_outer(way: int, insertion: float, vector: complex) -> complex:
    """A vector of the inner part's frame in the outer's, whose mark stands at `insertion`."""
    turned = cmath.exp(1j * insertion)
    return vector / turned if way > 0 else turned * vector.conjugate()


def _existing(part: Part, name: str) -> Existing | None:
    return next((e for e in part.existing if e.surface == name), None)


def _drawing(s: Surface, first: float) -> Node:
    if s.kind in ("cylinder", "bore"):
        return {"kind": s.kind, "diameter": s.diameter, "from": s.z_from, "to": s.z_to}
    if s.kind == "face":
        return {"kind": "face", "at": s.mid, "facing": "+z" if s.facing > 0 else "-z", "diameter": s.diameter}
    node: Node = {"kind": s.kind, "count": s.count, "on_circle": s.diameter, "at": s.mid}
    if s.kind == "teeth":
        return node | {"pressure_angle": deg(s.pressure_angle)}
    return node | {"angle": deg(first)}


def _relations(part: Part) -> list[Node]:
    """What is given of bought and sawn surfaces, each about the part's first existing axis."""
    by_name = {s.name: s for s in part.surfaces}
    root, found, first_face = part.existing[0], [], None
    drawn_root = by_name[root.surface]
    for given in part.existing[1:]:
        s = by_name[given.surface]
        if s.kind == "face":
            across = 0.5 * s.diameter
            lean = reading(given.lean - root.lean, sign=-float(s.facing), per=1.0 / across)
            found.append({"of": s.name, "about": root.surface, "face_runout": lean, "across": across})
            if first_face is None:
                first_face = (s, given)
            else:
                f, known = first_face
                length = abs(s.mid - f.mid) + math.copysign(1.0, s.mid - f.mid) * (given.axial - known.axial)
                found.append({"of": s.name, "from": f.name, "length": {"measured": f"{length:.15f} mm"}})
        else:
            off = given.offset - (root.offset + root.lean * (s.mid - drawn_root.mid))
            found.append({"of": s.name, "about": root.surface, "runout": reading(off, sign=outward(s), per=0.5)})
    return found


def as_job(given: Sayable, require: list[Node], place: Node | None = None) -> AsJob:
    """The route as a job file that asks for `require`."""
    writer = Writer(given)
    text = writer.text(require, place)
    return AsJob(text, writer.truth)
