"""The wheel, and the setups, that the tests of the simulation share."""

from __future__ import annotations

import dataclasses
import math

import pytest

from .machining import run
from .made import World
from .route import (
    Centre,
    CentredAndSquared,
    Clock,
    CutTeeth,
    Drill,
    Existing,
    Join,
    Lean,
    NoClock,
    NoStop,
    Offset,
    Part,
    PointStop,
    RingStop,
    Route,
    Setup,
    Square,
    Turn,
    TwoPlanes,
    bore,
    cylinder,
    face,
    holes,
    teeth,
)

UM = 1e-3
NANO = 1e-6  # mm: what the sweeps and Newton are asked to settle to
BOTH_WAYS = pytest.mark.parametrize("way", [1, -1])
ALPHA = math.radians(20.0)

WHEEL = Part(
    "wheel",
    (
        cylinder("rim", 120.0, 0.0, 40.0),
        bore("hole", 30.0, 0.0, 40.0),
        bore("pocket", 60.0, 20.0, 40.0),
        face("front", 40.0, +1, 80.0),
        face("back", 0.0, -1, 80.0),
        face("shelf", 25.0, +1, 80.0),
        teeth("teeth", 24, 60.0, pressure_angle=ALPHA, z=30.0),
        holes("ring", 6, 45.0, z=40.0),
    ),
    (Existing("rim"), Existing("hole"), Existing("front"), Existing("back")),
)
TRUE = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0j)), Square("wheel.front", Lean(0j)))
AT_THE_FRONT = PointStop("wheel.front")
NOT_TURNED = NoClock(0.0)


def setup(
    hold: CentredAndSquared | TwoPlanes = TRUE,
    *,
    cuts: tuple[Turn | CutTeeth | Drill, ...],
    way: int = 1,
    insertion: float = 0.0,
    stop: PointStop | RingStop | NoStop = AT_THE_FRONT,
    clock: Clock | NoClock = NOT_TURNED,
    op: int = 10,
) -> Setup:
    return Setup(op, "wheel", way, insertion, hold, stop, clock, cuts)


def machined(*steps: Setup | Join, parts: tuple[Part, ...] = (WHEEL,)) -> World:
    return run(Route(parts, steps))


def with_existing(*given: Existing, part: Part = WHEEL) -> Part:
    replaced = {g.surface: g for g in given}
    rest = tuple(e for e in part.existing if e.surface not in replaced)
    return dataclasses.replace(part, existing=rest + given)
