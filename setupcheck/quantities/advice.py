"""What would do, in the numbers of this job: words that a rule prints as its remedy. Lengths mm, angles rad, degC."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Join
from setupcheck.notation import show, show_angle
from setupcheck.physics.heating import planned_heat
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.joining import heat_error
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.strength import force_held

SPARE = 20.0
"""Kelvin above the least that HEAT-003 asks for. Source: the rule book."""
BEST = (1.4, 2.0)
"""Cutter circles that mark best, over the worm's tip radius. Source: own simulation (from memory)."""


def oven(join: Join, needed: float, cap: float, loss: float) -> str | None:
    """Settings of the oven that meet the need and keep the cap, or that heat alone does not do it. Source: physics.heating."""
    error = heat_error(join.heat) if join.heat is not None else None
    if error is None:
        return None
    band = planned_heat(needed=needed, cap=cap, oven_error=error[0], carry_loss=loss)
    low, high = math.ceil(band.low), math.floor(band.high)
    if low > high:
        return (
            f"Heat alone does not do it: it takes {low} degC, and {high} degC is the most this hub may be set to. "
            "Chill the shaft, or take less interference."
        )
    better = min(math.ceil(band.low + SPARE), high)
    return (
        f"Set the heat to {better} degC ({low} degC is the least, {high} degC the most this material and oven allow)."
    )


def lead(needed: float) -> str:
    """The lead angle in all spellings. Source: tilt.needed."""
    return (
        f"Set {show_angle(needed, 'dms', 0)} ({show_angle(needed, 'deg', 4)}, {show_angle(needed, 'gon', 4)}), the lead angle "
        "at the reference diameter."
    )


def circle(cut: WheelCut, smallest: float, floor: Floor) -> str:
    """Cutter circles that will do and that mark best. Source: worm.cutter; own simulation."""
    tip = cut.drive.tip_diameter / 2.0
    unit, digits = ("in", 3) if floor.loaded.job.units == "in" else ("mm", 1)
    step = 25.4 / 1000.0 if unit == "in" else 0.1

    def up(radius: float) -> str:
        return show(math.ceil(radius / step - 1e-9) * step, unit, digits)

    return (
        f"Set the tip radius above {up(smallest)}; {up(BEST[0] * tip)} to {up(BEST[1] * tip)} marks best on most wheels. "
        "Round up, never down."
    )


def grip(pair: Pair, asked: float, grip: float, friction: float, least: float) -> str | None:
    """Least interference at 20 degC that carries the load; None where it does already.

    Source: quantities.strength, straight in the interference.
    """
    wanted = asked / force_held(pair, 1.0, friction)  # in service; what is there may be a clearance
    if grip >= wanted:
        return None
    needed = least + wanted - grip
    return (
        f"Bring the least interference from {show(least, 'um', 1)} to {show(_up(needed), 'um', 1)} (closer limits, a larger "
        "journal, smoother seats), lengthen the seat, or add a key or pins."
    )


def slack(most: float, reached: float, elastic: float) -> str | None:
    """Largest interference at 20 degC that keeps all elastic; None where it is kept already.

    Source: quantities.strength, straight in the interference.
    """
    if reached <= elastic:
        return None
    allowed = most - (reached - elastic)
    if allowed <= 0.0:
        return (
            "No interference is small enough for this wall at the coldest: take a thicker wall or a stronger material."
        )
    return (
        f"Bring the largest interference from {show(most, 'um', 1)} down to {show(math.floor(allowed * 1e4) / 1e4, 'um', 1)} "
        "(closer limits, a smaller journal), or take a thicker wall or a stronger material."
    )


def _up(value: float) -> float:
    """Rounded up to a tenth of a micrometre, so that the printed value does it."""
    return math.ceil(value * 1e4 - 1e-6) / 1e4


ADVICE = (
    Quantity(
        "heat.advice",
        "join",
        "",
        0,
        oven,
        {"join": ":", "needed": "heat.needed", "cap": "heat.cap", "loss": "heat.carry_loss"},
        "settings of the oven that do",
    ),
    Quantity("tilt.advice", "setup", "", 0, lead, {"needed": "tilt.needed"}, "the lead angle in all spellings"),
    Quantity(
        "cutter.advice",
        "cut",
        "",
        0,
        circle,
        {"cut": "cutter.wheel_cut", "smallest": "cutter.smallest_radius", "floor": "route.floor"},
        "cutter circles that do",
    ),
    Quantity(
        "fit.advice_grip",
        "join",
        "",
        0,
        grip,
        {
            "pair": "fit.pair",
            "asked": "fit.force_asked",
            "grip": "fit.grip_least",
            "friction": "fit.friction",
            "least": "fit.interference_least",
        },
        "least interference that carries the load",
    ),
    Quantity(
        "fit.advice_slack",
        "join",
        "",
        0,
        slack,
        {"most": "fit.interference_most", "reached": "fit.grip_most", "elastic": "fit.elastic"},
        "largest interference that stays elastic",
    ),
)
