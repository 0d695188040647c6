"""Jobs drawn at random: one wheel through five setups and onto its spindle, every entry of every shape. For hypothesis.

The values are invented. Lengths in the file are mm and um.
"""

from __future__ import annotations

import copy
from collections.abc import Callable
from decimal import Decimal

import numpy as np
import yaml
from hypothesis import HealthCheck, settings
from hypothesis import strategies as st

from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Open
from setupcheck.quantities.requirements import Stack, read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import Built, build

Node = dict[str, object]
DUMPER = getattr(yaml, "CSafeDumper", yaml.SafeDumper)
few = settings(
    derandomize=True, deadline=None, max_examples=20, database=None, suppress_health_check=[HealthCheck.too_slow]
)
fewer = settings(few, max_examples=8)
"""Where every example is reviewed and printed whole, twice."""
TEETH = 24
PITCH = 360.0 / TEETH


@st.composite
def um(draw: st.DrawFn, low: int = 1, high: int = 60) -> str:
    return f"{draw(st.integers(low, high))} um"


@st.composite
def deg(draw: st.DrawFn) -> str:
    return f"{draw(st.integers(-180, 180))} deg"


@st.composite
def reading(draw: st.DrawFn, *, directions: bool = True) -> object:
    """A dial reading: a bound, or measured with or without its direction and uncertainty, or from a device."""
    shape = draw(st.sampled_from(["bound", "ring", "blurred ring", "vector", "blurred vector", "device"]))
    if shape == "bound" or (not directions and "vector" in shape):
        return draw(um())
    if shape == "device":
        return {"at_most": "20 um", "device": "chuck-A", "mark": "kept"}
    node: Node = {"measured": draw(um())}
    if "vector" in shape:
        node["high_at"] = draw(deg())
    if "blurred" in shape:
        node["uncertainty"] = draw(um(1, 6))
    return node


@st.composite
def length_error(draw: st.DrawFn) -> object:
    shape = draw(st.sampled_from(["bound", "measured", "blurred"]))
    if shape == "bound":
        return draw(um())
    node: Node = {"measured": f"{draw(st.integers(-40, 40))} um"}
    return node | ({"uncertainty": draw(um(1, 8))} if shape == "blurred" else {})


@st.composite
def centre(draw: st.DrawFn, on: str, at: float) -> Node:
    node: Node = {"on": on, "at": at, "turned": draw(deg())}
    how = draw(st.sampled_from(["jaws", "spigot", "edge-finder", "through", "jaw"]))
    if how == "edge-finder":
        return node | {"by": "edge-finder", "x": draw(um(1, 20)), "y": draw(um(1, 20))}
    node["runout"] = draw(reading())
    if how == "spigot":
        rests = draw(st.sampled_from(["free", "pushed", "hanging", "centred"]))
        return node | {"by": "spigot", "clearance": [draw(um(1, 4)), draw(um(5, 20))], "rests": rests}
    if how == "through":
        by = "taper-mandrel" if on == "bore" else "fixture"  # a mandrel on an outside is refused
        return node | {"by": by, "through": [{"by": "centres", "runout": draw(um(1, 9))}]}
    if how == "jaw":
        node["runout"] = {"measured": draw(um()), "high_at": "jaw 2", "device": "four-jaw-B", "mark": "kept"}
    return node | {"by": "four-jaw"}


@st.composite
def square(draw: st.DrawFn, on: str) -> Node:
    node: Node = {"on": on, "across": draw(st.integers(40, 100)), "face_runout": draw(reading())}
    return node | ({"chip": draw(um(1, 10))} if draw(st.booleans()) else {})


@st.composite
def stop(draw: st.DrawFn, on: str) -> Node:
    node: Node = {"on": on, "error": draw(length_error())}
    how = draw(st.sampled_from(["plain", "ring", "point"]))
    if how == "ring":
        node |= {"touches": "all-round", "radius": draw(st.integers(10, 50))}
    if how == "point":
        node |= {"touches": "point", "radius": draw(st.integers(10, 50)), "direction": draw(deg())}
    return node


@st.composite
def hold(draw: st.DrawFn, on: str, at: float, second: tuple[str, float], face: str, rest: str) -> Node:
    node: Node = {"centre": draw(centre(on, at))}
    if draw(st.booleans()):
        node["square"] = draw(square(face))
    else:
        node["and_centre"] = draw(centre(second[0], second[1]))
    return node | {"stop": draw(stop(rest))}


@st.composite
def divide(draw: st.DrawFn) -> Node:
    node: Node = {"by": "readout", "setting": f'{draw(st.integers(1, 9))}"'}
    if draw(st.booleans()):
        node["wheel"] = {"once_per_turn": f'{draw(st.integers(1, 20))}"', "twice_per_turn": '4"'}
        node["worm"] = {"once_per_crank": f'{draw(st.integers(1, 9))}"'}
    if draw(st.booleans()):
        node["drift"] = '6"'
    if draw(st.booleans()):
        node["step"] = '20"'
    return node


SURFACES: Node = {
    "bar": {"kind": "cylinder", "diameter": 120, "from": -40, "to": 30, "made": "stock"},
    "front": {"kind": "face", "at": 26, "facing": "+z", "diameter": 48},
    "hub": {"kind": "cylinder", "diameter": 48, "from": 20, "to": 26},
    "seat": {"kind": "face", "at": 20, "facing": "+z", "diameter": 110},
    "rim": {"kind": "cylinder", "diameter": 114, "from": 4, "to": 20},
    "groove": {"kind": "cylinder", "diameter": 100, "from": 12, "to": 14},
    "teeth": {"kind": "teeth", "count": TEETH, "on_circle": 108, "at": 12, "width": 16, "pressure_angle": "20 deg"},
    "ring": {"kind": "holes", "count": 6, "on_circle": 70, "at": 20, "angle": "10 deg"},
    "bore": {"kind": "bore", "diameter": 32, "from": 0, "to": 26},
    "back": {"kind": "face", "at": 0, "facing": "-z", "diameter": 100},
}
SPINDLE: Node = {
    "journal": {"kind": "cylinder", "diameter": 32.04, "from": 0, "to": 26},
    "shoulder": {"kind": "face", "at": 0, "facing": "+z", "diameter": 60},
    "bearings": {"kind": "cylinder", "diameter": 40, "from": -80, "to": -10},
}
REQUIRE: list[Node] = [
    {"what": "run-out", "of": "wheel.bore", "about": "wheel.rim", "at_most": "30 um"},
    {"what": "coaxial", "of": "wheel.rim", "about": "spindle.bearings", "at_most": "50 um"},
    {"what": "face-run-out", "of": "wheel.back", "about": "wheel.bore", "at_most": "20 um"},
    {"what": "squareness", "of": "wheel.seat", "about": "spindle.bearings", "at_most": "40 arcsec"},
    {"what": "length", "of": "wheel.seat", "about": "wheel.back", "between": ["19.9 mm", "20.1 mm"]},
    {"what": "length", "of": "wheel.seat", "about": "spindle.shoulder", "between": ["21.4 mm", "21.6 mm"]},
    {"what": "cumulative-pitch", "of": "wheel.teeth", "about": "spindle.bearings", "at_most": "40 um"},
    {"what": "single-pitch", "of": "wheel.teeth", "about": "wheel.bore", "at_most": "9 um"},
    {"what": "gap-centre-pitch", "of": "wheel.teeth", "about": "wheel.hub", "at_most": "30 um"},
    {"what": "index-within", "of": "wheel.teeth", "about": "spindle.bearings", "at_most": "90 arcsec"},
    {"what": "on-workpiece", "of": "wheel.teeth", "about": "wheel.bore", "on_diameter": 200, "at_most": "90 um"},
    {"what": "backlash-swing", "of": "wheel.teeth", "about": "wheel.bore", "at_most": "30 um"},
    {"what": "mid-plane", "of": "wheel.teeth", "about": "spindle.bearings", "at_most": "90 um"},
    {"what": "position", "of": "wheel.ring", "about": "wheel.bore", "at_most": "0.1 mm"},
    {"what": "position", "of": "wheel.ring", "about": "wheel.rim", "clock": "wheel.teeth", "at_most": "0.2 mm"},
    {"what": "chord", "of": "wheel.ring", "about": "wheel.bore", "at_most": "50 um"},
    {"what": "pitch-circle", "of": "wheel.ring", "about": "wheel.bore", "between": ["-50 um", "50 um"]},
    {"what": "symmetry", "of": "wheel.teeth", "about": "wheel.bore", "at_most": "0.2 mm"},
    {"what": "flank-run-off", "of": "wheel.teeth", "about": "spindle.bearings", "at_most": "50 um"},
    {"what": "depth-run-off", "of": "wheel.teeth", "about": "wheel.hub", "at_most": "50 um"},
    {"what": "allowance", "of": "wheel.back@40", "at_least": "0.1 mm"},
    {"what": "allowance", "of": "wheel.bore@40", "at_least": "0.1 mm"},
]


@st.composite
def jobs(draw: st.DrawFn) -> Node:
    """A whole job as a tree; every requirement of it can be told."""
    given: list[Node] = [
        {"of": "journal", "about": "bearings", "runout": draw(reading())},
        {"of": "shoulder", "about": "bearings", "face_runout": draw(reading()), "across": 56},
    ]
    joint: Node = {
        "outer": "wheel.bore",
        "inner": "spindle.journal",
        "square": draw(st.sampled_from(["bore", "shoulder"])),
        "stop": {
            "on": "wheel.back",
            "against": "spindle.shoulder",
            "spacers": [{"name": "shim", "length": "1.500 ±0.005"}],
        },
    }
    if draw(st.booleans()):
        joint["mounted_at"] = draw(deg())
    how = draw(st.sampled_from(["shrink", "slide", "bond"]))
    joint |= {"by": how} | ({"clearance": [draw(um(1, 4)), draw(um(5, 20))]} if how == "slide" else {})
    joint |= {"fit_error": draw(um(1, 20))} if how == "bond" else {}
    joint |= {"grips_first": "shoulder-end"} if how == "shrink" else {}  # no gap at the shoulder
    ring: Node = {"each": {"radial": draw(um(1, 15)), "tangential": draw(um(1, 15))}}
    if draw(st.booleans()):
        ring["spindle_to_axis"] = {"x": "35.000 ±0.008", "y": "0 ±0.006"}
    setups: list[Node] = [
        {
            "op": 10,
            "machine": "lathe-A",
            "looks_at_tool": "+z",
            "hold": {"centre": draw(centre("bar", -30.0)), "and_centre": draw(centre("bar", 20.0))},
            "cut": {"front": {"error": draw(length_error())}, "hub": {}, "seat": {"error": "6 um"}, "rim": {}},
        },
        {
            "op": 20,
            "machine": "lathe-A",
            "looks_at_tool": "-z",
            "hold": draw(hold("rim", 12.0, ("rim", 5.0), "seat", "seat")),
            "cut": {"back": {"leave": 0.5, "error": draw(length_error())}, "bore": {"leave_on_diameter": 0.6}},
        },
        {
            "op": 30,
            "machine": "head-B",
            "looks_at_tool": "-z",
            "hold": draw(hold("hub", 23.0, ("rim", 6.0), "seat", "seat")),
            "divide": draw(divide()),
            "travel": {"beside": draw(length_error()), "nearer": draw(length_error()), "over": 100},
            "cut": {"teeth": {"error": draw(length_error()), "off_centre": draw(length_error())}},
        },
        {
            "op": 40,
            "machine": "lathe-A",
            "looks_at_tool": "-z",
            "hold": draw(hold("rim", 14.0, ("hub", 25.0), "seat", "seat")),
            "cut": {"back": {"error": draw(length_error())}, "bore": {}},
        },
        {
            "op": 50,
            "machine": "head-B",
            "looks_at_tool": "+z",
            "hold": draw(hold("bore", 3.0, ("rim", 18.0), "back", "back"))
            | {"clock": {"on": "teeth", "number": draw(st.integers(1, TEETH)), "error": draw(length_error())}},
            "divide": draw(divide()),
            "cut": {"ring": ring},
        },
        {"op": 60, "join": joint},
    ]
    return {
        "setupcheck": 1,
        "title": "A drawn job",
        "units": "mm",
        "parts": {
            "wheel": {"surfaces": copy.deepcopy(SURFACES)},
            "spindle": {"surfaces": copy.deepcopy(SPINDLE), "given": given},
        },
        "machines": {
            "lathe-A": {"kind": "lathe", "axis_runout": draw(um(1, 5))},
            "head-B": {"kind": "dividing-head", "worm_ratio": 40, "axis_runout": draw(um(1, 5))},
        },
        "setups": setups,
        "place": {"worm_axis": {"from": "spindle.shoulder", "length": "13.500 ±0.020"}},
        "require": copy.deepcopy(REQUIRE),
    }


def text_of(job: Node) -> str:
    return str(yaml.dump(job, Dumper=DUMPER, sort_keys=False, default_flow_style=None, width=160, allow_unicode=True))


def loaded(job: Node) -> LoadedJob:
    return read_job_text(text_of(job), "drawn.yaml")


def walked(job: Node) -> Floor:
    return walk(loaded(job))


def stacks(floor: Floor) -> list[Stack]:
    return [read_stack(floor, i) for i in range(len(floor.loaded.job.require))]


def built(floor: Floor) -> dict[str, Built]:
    """Every requirement's figure, by its place and what it asks; all of them can be told."""
    found: dict[str, Built] = {}
    for stack in stacks(floor):
        made = build(floor, stack)
        assert not isinstance(made, Open), (stack.name, made)
        found[f"{stack.index} {stack.name}"] = made
    return found


def setup(job: Node, op: int) -> Node:
    found = next(s for s in job["setups"] if s["op"] == op)  # type: ignore[attr-defined]
    assert isinstance(found, dict)
    return found


def causes_of(account: Account) -> dict[str, Cause]:
    """All causes of an account, those under a high point included, by their names."""
    found: dict[str, Cause] = {}
    for cause in account.terms:
        found[cause.key] = cause
        if cause.of is not None:
            found |= causes_of(cause.of)
    return found


def changed(tree: object, change: Callable[[tuple[str, ...], object], object], at: tuple[str, ...] = ()) -> object:
    """A copy of a tree with every scalar replaced by `change(path, value)`."""
    if isinstance(tree, dict):
        return {key: changed(value, change, (*at, str(key))) for key, value in tree.items()}
    if isinstance(tree, list):
        return [changed(value, change, (*at, str(i))) for i, value in enumerate(tree)]
    return change(at, tree)


def in_inches(job: Node) -> Node:
    """The same job in an inch file: every length as an exact decimal of an inch."""
    bare = {
        "at",
        "from",
        "to",
        "diameter",
        "on_circle",
        "across",
        "radius",
        "leave",
        "leave_on_diameter",
        "on_diameter",
        "width",
        "over",
    }

    def inch(value: str) -> str:
        return f"{Decimal(value) / Decimal('25.4'):.22f}"

    def one(path: tuple[str, ...], value: object) -> object:
        if path[-1] == "units":
            return "in"
        if isinstance(value, int | float) and path[-1] in bare:
            return f"{inch(str(value))} in"
        if not isinstance(value, str):
            return value
        if "±" in value and '"' not in value:
            middle, _, limit = value.partition("±")
            return f"{inch(middle.strip())} ±{inch(limit)}"
        number, _, unit = value.rpartition(" ")
        if unit == "um":
            return f"{inch(str(Decimal(number) / 1000))} in"
        return f"{inch(number)} in" if unit == "mm" else value

    made = changed(job, one)
    assert isinstance(made, dict)
    return made


def close(a: complex, b: complex) -> bool:
    return bool(np.isclose(a, b, rtol=1e-9, atol=1e-13))
