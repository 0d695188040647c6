"""Random routes with a third part: a bought ring goes on the wheel, before or after the wheel goes on its spindle. mm, rad."""

from __future__ import annotations

import cmath
import dataclasses

import numpy as np

from ..rigidbody.random_routes import any_route
from ..rigidbody.route import (
    BoreSquares,
    Existing,
    FaceSquares,
    Join,
    Part,
    Question,
    Route,
    Seat,
    Setup,
    bore,
    cylinder,
    face,
)
from .sayable import Sayable, sayable

Rng = np.random.Generator


def three_part_route(rng: Rng) -> Sayable:
    """A sayable route of wheel, spindle and ring, each mounting said."""
    while True:
        found = sayable(any_route(rng), rng)
        if not any(isinstance(s, Join) for s in found.route.steps):
            continue
        longer = _with_ring(found.route, rng)
        if longer is not None:
            return dataclasses.replace(found, route=longer, mounting_said=True)


def _ring(rng: Rng, hole: float) -> Part:
    def off() -> complex:
        return cmath.rect(float(rng.uniform(0.001, 0.02)), float(rng.uniform(-3, 3)))

    def lean() -> complex:
        return cmath.rect(float(rng.uniform(1e-5, 1e-4)), float(rng.uniform(-3, 3)))

    tilt = lean()
    surfaces = (
        cylinder("outside", 200.0, 0.0, 20.0),
        bore("hole", hole, 0.0, 20.0),
        face("top", 20.0, +1, 180.0),
        face("bottom", 0.0, -1, 180.0),
    )
    there = (
        Existing("outside", offset=off(), lean=tilt),
        Existing("hole", offset=off(), lean=tilt),
        Existing("top", lean=lean(), axial=0.01),
        Existing("bottom", lean=lean(), axial=-0.006),
    )
    return Part("ring", surfaces, there)


def _with_ring(route: Route, rng: Rng) -> Route | None:
    """The ring put on a cylinder of the wheel, against a face of it, just before or just after the wheel is joined."""
    at = next(i for i, s in enumerate(route.steps) if isinstance(s, Join))
    before = [c.surface for s in route.steps[:at] if isinstance(s, Setup) for c in s.cuts]
    seats = [n for n in before if n.startswith("wheel.") and route.surface(n).kind == "cylinder"]
    walls = [n for n in before if n.startswith("wheel.") and route.surface(n).kind == "face"]
    if not seats or not walls:
        return None
    inner, against = str(rng.choice(seats)), str(rng.choice(walls))
    on = "ring.bottom" if rng.random() < 0.5 else "ring.top"
    ring = _ring(rng, route.surface(inner).diameter)
    looks = next(s.facing for s in ring.surfaces if f"ring.{s.name}" == on)
    way = -looks * route.surface(against).facing
    wall, cylinder_mid = route.surface(against), route.surface(inner).mid
    spacer = wall.facing * (cylinder_mid - wall.mid) - 10.0  # the hole's middle comes over the middle of the cylinder
    if spacer < 0.0:
        return None
    squares = bool(rng.random() < 0.5)
    radius = 0.5 * min(180.0, wall.diameter)
    seat = Seat(on, against, spacer, 0.004) if squares else Seat(on, against, spacer, 0.004, "ring", radius)
    join = Join(
        op=0,
        outer="ring.hole",
        inner=inner,
        way=way,
        insertion=float(rng.uniform(-3, 3)),
        square=FaceSquares(on, against) if squares else BoreSquares(),
        seat=seat,
        offset=cmath.rect(0.008, float(rng.uniform(-3, 3))),
    )
    after = at + int(rng.integers(2))
    join = dataclasses.replace(join, op=max(s.op for s in route.steps[:after]) + 5)
    steps = (*route.steps[:after], join, *route.steps[after:])
    asked = [
        Question(kind, of, about)
        for kind, of, about in (
            ("offset", "ring.outside", "spindle.bearings"),
            ("lean", "ring.outside", "spindle.journal"),
            ("offset", "ring.hole", inner),
            ("lean", "spindle.shoulder", "ring.hole"),
            ("run-out", "spindle.bearings", "ring.outside"),
            ("face run-out", "ring.top", "spindle.bearings"),
        )
    ]
    asked.append(Question("length", "ring.top", "spindle.bearings", "spindle.shoulder"))
    asked.append(Question("length", "ring.top", inner, against))
    return Route((*route.parts, ring), steps, (*route.questions, *asked))
