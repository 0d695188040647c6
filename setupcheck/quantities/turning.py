"""What turns with the spindle: jaws that stand out, speed of the chuck, mass off the axis, a bar behind. mm, kg, N, rev/min."""

from __future__ import annotations

import math

from setupcheck.jobfile.holders import CHUCKED, JAWS
from setupcheck.jobfile.setups import Centre, Setup
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.clamping import taken_by
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor

WHIPS_FROM = 500.0
"""Speed [rev/min] from which a long bar behind the spindle whips. Source: our screening choice."""
MOST_OF_GRIP = 0.1
"""Share of one jaw's grip that a mass off the axis may pull with. Source: our screening choice."""
_WITH_A_SPEED = (*dict.fromkeys((*CHUCKED, *JAWS)), "faceplate")
"""Devices with a highest speed of their own marked on them. Source: common practice."""


def jaws_out(entry: HoldEntry) -> float | None:
    """How far the jaws reach beyond the chuck body [mm]; None where the job does not say. Source: the job file."""
    centre = entry.entry
    return centre.jaws_stand_out if entry.step == "centre" and isinstance(centre, Centre) else None


def _holder(floor: Floor, setup: Setup) -> Centre | None:
    hold = taken_by(floor, setup).hold
    return hold.centre if hold is not None else None


def speed(setup: Setup) -> float | Open | None:
    """Speed of the spindle that carries the work; Open where the job says of something that it turns, and not how fast.

    Source: the job file.
    """
    turning = setup.turning
    if turning is None:
        return None
    return turning.speed if turning.speed is not None else Open((f"setups.{setup.op}.turning.speed",))


def chuck_speed(floor: Floor, setup: Setup) -> float | Open | None:
    """Highest speed marked on what holds the work; Open where a speed is stated and that is not.

    None between centres and on mandrels.  Source: the job file.
    """
    turning, centre = setup.turning, _holder(floor, setup)
    if turning is None or (turning.chuck_speed is None and (centre is None or centre.by not in _WITH_A_SPEED)):
        return None
    return turning.chuck_speed if turning.chuck_speed is not None else Open((f"setups.{setup.op}.turning.chuck_speed",))


def throw(setup: Setup, turns: float) -> float | None:
    """Pull of a mass off the axis [N]: m e (2 pi n / 60)^2, m in kg, e in metres.

    For steady turning.  Source: textbook, force on a circle; 0.5 kg at 10 mm and 500 rev/min pull with 13.7 N.
    """
    turning = setup.turning
    if turning is None or turning.off_centre is None or turning.off_by is None:
        return None
    return turning.off_centre * turning.off_by / 1000.0 * (2.0 * math.pi * turns / 60.0) ** 2


def throw_allowed(floor: Floor, setup: Setup) -> float | Open | None:
    """A tenth of one jaw's grip [N]; Open where the grip is not stated, or where no jaw holds.

    Source: our screening choice; lathe manuals only ask for low speed with work off the centre.
    """
    turning, centre = setup.turning, _holder(floor, setup)
    if turning is None or turning.off_centre is None or centre is None:
        return None
    if centre.by not in JAWS:
        return Open((), f"{centre.by} has no jaws whose grip is known")
    if centre.grip_force is None:
        return Open((f"setups.{taken_by(floor, setup).op}.hold.centre.grip_force",))
    return MOST_OF_GRIP * centre.grip_force


def throw_advice(setup: Setup, turns: float, pull: float, allowed: float) -> str | None:
    """Speed that keeps the pull, and what weighs against it. Source: the pull goes with the square of the speed."""
    turning = setup.turning
    if turning is None or turning.off_centre is None or turning.off_by is None or not pull > allowed:
        return None
    slower = math.floor(turns * math.sqrt(allowed / pull) / 5.0) * 5.0
    against = turning.off_centre * turning.off_by / 50.0
    return (
        f"Turn no faster than {show(slower, 'rpm', 0)}, or weigh it against: what {show(turning.off_centre, 'kg', 2)} do at "
        f"{show(turning.off_by, 'mm', 1)}, {show(against, 'kg', 2)} do 50 mm from the axis on the other side, held fast."
    )


def bar_behind(setup: Setup, turns: float) -> float | None:
    """How far a bar sticks out behind the spindle [mm], where it turns fast enough to whip. Source: the job file."""
    turning = setup.turning
    return turning.bar_behind if turning is not None and turns >= WHIPS_FROM else None


_HERE = {"floor": "route.floor", "setup": ":"}
_TURNS = {"setup": ":", "turns": "turn.speed"}

TURNING = (
    Quantity(
        "clamp.jaws_out", "hold", "mm", 1, jaws_out, {"entry": ":"}, "how far the jaws reach beyond the chuck body"
    ),
    Quantity("turn.speed", "setup", "rpm", 0, speed, {"setup": ":"}, "speed of the spindle that carries the work"),
    Quantity("turn.chuck_speed", "setup", "rpm", 0, chuck_speed, _HERE, "highest speed marked on the chuck"),
    Quantity("turn.throw", "setup", "N", 1, throw, _TURNS, "pull of what stands off the axis"),
    Quantity("turn.throw_allowed", "setup", "N", 1, throw_allowed, _HERE, "a tenth of one jaw's grip"),
    Quantity(
        "turn.throw_advice",
        "setup",
        "",
        0,
        throw_advice,
        {**_TURNS, "pull": "turn.throw", "allowed": "turn.throw_allowed"},
        "speed that keeps the pull, and what weighs against it",
    ),
    Quantity("turn.bar_behind", "setup", "mm", 0, bar_behind, _TURNS, "bar behind the spindle, where it turns fast"),
)
