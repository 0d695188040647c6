"""Symmetry and run-off of gaps against exact planes cut into an exactly indexed part, from a job file. Lengths mm, angles rad.

The simulation takes the machine's axis as the line through two exact points, turns the cutter's plane about it gap by gap with
whole rotations, and measures distances of points from planes and angles between lines. Nothing of the package is in it.
"""

from __future__ import annotations

import cmath
import math
from dataclasses import dataclass

import numpy as np
import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.relations import Built
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.stacks import build

from ..rigidbody.frames import Array, frame_on, turn, turn_z
from .as_job import Truth
from .told import Told

MIDDLE, LENGTH, RADIUS, OVER = 60.0, 40.0, 15.0, 200.0
PLANES = (5.0, 150.0)


@dataclass(frozen=True, slots=True)
class Case:
    """One shaft: errors of both planes, of the cutter, of the travel and of the head, and of every gap sideways."""

    count: int
    ways: int
    at_planes: tuple[complex, complex]
    beside: float
    sideways: float
    deep: float
    cone: float
    each: tuple[float, ...]


def drawn(number: int, *, cone: float = 0.0, ways: int = 1, count: int = 6, size: float = 1.0) -> Case:
    rng = np.random.default_rng([number, count, ways > 0])
    vectors = tuple(complex(a, b) * 0.01 * size for a, b in rng.uniform(-1, 1, (2, 2)))
    lengths = rng.uniform(-0.02, 0.02, count + 1) * size
    angles = rng.uniform(-2e-4, 2e-4, 2) * size
    return Case(
        count,
        ways,
        (vectors[0], vectors[1]),
        float(lengths[0]),
        float(angles[0]),
        float(angles[1]),
        cone,
        tuple(lengths[1:]),
    )


# -- the job file --------------------------------------------------------------------------------------------------------


def reading(vector: complex) -> str:
    high = math.degrees(cmath.phase(vector))
    return f"{{measured: {2e3 * abs(vector):.12f} um, high_at: {high:.12f} deg}}"


def job(case: Case, what: str) -> str:
    cone = f", cone: {math.degrees(case.cone):.12f} deg" if case.cone else ""
    head = f"\n    head: {{tilt: {math.degrees(case.cone):.12f} deg, uncertainty: 1 deg}}" if case.cone else ""
    nearer = "" if case.cone else "nearer: 1 mm, "
    return f"""
setupcheck: 1
title: gaps
units: mm
parts:
  shaft:
    surfaces:
      seat:  {{kind: cylinder, diameter: 40, from: 0, to: 150, made: stock}}
      end:   {{kind: face, at: 0, facing: -z, diameter: 40, made: stock}}
      teeth: {{kind: teeth, count: {case.count}, on_circle: {2 * RADIUS}, at: {MIDDLE}, width: {LENGTH}{cone}}}
    given:
      - {{of: end, about: seat, face_runout: 0 um, across: 40}}
machines: {{head-A: {{kind: dividing-head, axis_runout: 0 um}}}}
setups:
  - op: 10
    machine: head-A
    looks_at_tool: {"+z" if case.ways > 0 else "-z"}
    hold:
      centre:     {{on: seat, by: indicator, at: {PLANES[0]}, runout: {reading(case.at_planes[0])}}}
      and_centre: {{on: seat, by: indicator, at: {PLANES[1]}, runout: {reading(case.at_planes[1])}}}
      stop:       {{on: end, error: 0 um}}
    travel: {{beside: 1 mm, {nearer}over: {OVER}}}{head}
    cut: {{teeth: {{error: 0 um, off_centre: 1 mm, each: {{tangential: 1 mm}}}}}}
require:
  - {{what: {what}, of: shaft.teeth, about: shaft.seat, at_most: 5 mm}}
"""


def predicted(case: Case, what: str) -> float:
    """The figure of the package with every error at its exact value."""
    truth = Truth()
    truth.values["setups.10.cut.teeth.off_centre", ""] = complex(case.beside)
    truth.values["setups.10.travel.beside", ""] = complex(case.sideways * OVER)
    truth.values["setups.10.travel.nearer", ""] = complex(case.deep * OVER)
    truth.values["setups.10.head.uncertainty", ""] = complex(case.deep)
    truth.places["setups.10.cut.teeth.each.tangential", ""] = np.array(case.each)
    floor = walk(read_job_text(job(case, what), "gaps.yaml"))
    found = build(floor, read_stack(floor, 0))
    assert isinstance(found, Built)
    return float(np.asarray(found.figure.sample(Told(truth)))[0])


# -- the simulation ------------------------------------------------------------------------------------------------------


def machine_in_part(case: Case) -> Array:
    """Frame of the machine's axis, its origin at the middle of the gaps, its x towards the part's mark."""
    ends = [np.array([-e.real, -e.imag, z]) for e, z in zip(case.at_planes, PLANES, strict=True)]
    along = ends[1] - ends[0]
    origin = ends[0] + along * ((MIDDLE - ends[0][2]) / along[2])
    return frame_on(origin, along, np.array([1.0, 0.0, 0.0]))


def gaps_cut(case: Case) -> list[tuple[Array, Array, Array, Array]]:
    """Of every gap: a point of its middle plane, the plane's normal, the direction of its bottom, and its drawn direction."""
    found, machine = [], machine_in_part(case)
    for j, own in enumerate(case.each):
        theta = case.ways * math.tau * j / case.count
        # leaned by the cone the head swings about the upright, which then is the normal of the cone and not of the axis
        leaned = turn_z(theta) @ turn(0.0, case.cone + case.deep, 0.0)
        cutter = leaned @ turn(-case.ways * case.sideways, 0.0, 0.0)
        placed = machine @ cutter
        out = machine @ turn_z(theta)
        point = machine[:3, 3] + out[:3, 1] * case.ways * (case.beside + own) + out[:3, 0] * RADIUS
        found.append((point, placed[:3, 1], placed[:3, 2], np.array([math.cos(theta), math.sin(theta), 0.0])))
    return found


def measured(case: Case, what: str) -> float:
    half = LENGTH / 2.0
    values = []
    for point, normal, bottom, out in gaps_cut(case):
        if what == "symmetry":
            for z in (MIDDLE - half, MIDDLE + half):
                values.append(2.0 * float(normal @ (np.array([0.0, 0.0, z]) - point)))
        elif what == "flank-run-off":
            aside = np.array([-out[1], out[0], 0.0])
            values.append(LENGTH * math.asin(float(bottom @ aside)))
        else:
            values.append(LENGTH * (math.atan2(float(bottom @ out), float(bottom[2])) - case.cone))
    return max(map(abs, values))


WHAT = ("symmetry", "flank-run-off", "depth-run-off")


@pytest.mark.parametrize("what", WHAT)
@pytest.mark.parametrize("count", [1, 3, 5, 6, 20])
def test_gaps_of_a_straight_shaft_lie_as_simulated(what: str, count: int) -> None:
    for number in range(12):
        case = drawn(number, count=count)
        assert predicted(case, what) == pytest.approx(measured(case, what), rel=2e-3, abs=2e-6), case


@pytest.mark.parametrize("what", WHAT)
def test_a_part_that_looks_the_other_way_has_the_same_gaps(what: str) -> None:
    for number in range(12):
        case = drawn(number, ways=-1)
        alike = Case(**{**{f: getattr(case, f) for f in case.__slots__}, "each": (case.each[0],) * case.count})
        assert predicted(alike, what) == pytest.approx(measured(alike, what), rel=2e-3, abs=2e-6), case


@pytest.mark.parametrize("what", ["flank-run-off", "depth-run-off"])
def test_the_bottom_of_a_cone_runs_off_as_simulated(what: str) -> None:
    for number in range(12):
        case = drawn(number, cone=math.radians(23.365), count=20)
        assert predicted(case, what) == pytest.approx(measured(case, what), rel=4e-3, abs=4e-6), case


def test_what_is_left_over_is_of_second_order() -> None:
    """Errors ten times as small leave a hundredth."""
    big, small = (drawn(3, size=size) for size in (40.0, 4.0))
    left = [abs(predicted(c, "symmetry") - measured(c, "symmetry")) for c in (big, small)]
    assert left[0] > 1e-5
    assert left[1] < left[0] / 50.0
