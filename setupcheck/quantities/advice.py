"""What would do, in the numbers of this job: words that a rule prints as its remedy. Lengths mm, angles rad, degC."""

from __future__ import annotations

import math

from setupcheck.division.methods import circles_that_fit
from setupcheck.jobfile.setups import Join, Setup
from setupcheck.jobfile.worm import Mesh
from setupcheck.notation import show, show_angle
from setupcheck.physics.heating import carry_time, planned_heat
from setupcheck.physics.materials import expansion_for
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.drive import WheelCut, middle
from setupcheck.quantities.joining import heat_error
from setupcheck.quantities.joint_heat import carry_loss, ring_of, unheated
from setupcheck.quantities.opening import SPARE, hub_expansion
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.strength import force_held
from setupcheck.quantities.worm_sizes import settled, toothing

BEST = (1.4, 2.0)
"""Cutter circles that mark best, over the worm's tip radius. Source: own simulation (from memory)."""
SETTLED = 8
"""Rounds until setting and loss agree; each leaves a few hundredths of the error. Source: our choice."""
CLEARANCE = 0.2
"""Usual clearance under the worm's tip, in modules. Source: common practice; CUTTER-005 takes a little on both sides."""
ABSURD = 0.01
"""Interference over the diameter beyond which bore and journal are no pair. Source: our screening choice, some three times the
tightest fits of ISO 286."""
WAY_TOO_LONG = "The way to the shaft is too long"
"""How advice begins that names the carry."""
LARGEST_SHIFT = 1.0
"""Profile shift [modules] beyond which a miss is rather a wrong number. Source: our screening choice."""


def oven(floor: Floor, join: Join, pair: Pair, most: float, needed: float, cap: float) -> str | None:
    """Settings of the oven that meet the need and keep the cap, or what else does it. Source: physics.heating.

    What the carry takes is worked out for each setting: a hotter hub loses more.
    """
    heat = join.heat
    if most > ABSURD * pair.diameter:
        return (
            f"The sizes do not belong together: {floor.size(most)} of interference is more than a hundredth of the "
            f"diameter. Check the sizes and limits of {join.outer} and {join.inner}."
        )
    if heat is not None and heat.by_cold_alone(floor.loaded.job.room):
        return _beside_cold(pair, unheated(join, floor.loaded.job.room), most, needed, cap)
    error = heat_error(heat) if heat is not None else None
    if heat is None or error is None or heat.carry is None:
        return None

    def for_need(need: float, setting: float) -> float:
        """Setting that leaves `need` at the shaft, with what a hub of `setting` loses on the way [degC]."""
        loss = carry_loss(floor, join, pair, setting - error[0], 0)
        return planned_heat(
            needed=need, cap=cap, oven_error=error[0], carry_loss=loss if isinstance(loss, float) else 0.0
        ).low

    least, wanted = needed, needed + SPARE
    for _ in range(SETTLED):
        least, wanted = for_need(needed, least), for_need(needed + SPARE, wanted)
    highest = cap - error[0]
    if wanted <= floor.loaded.job.room:  # the cold of the shaft does it
        return None
    low, high = math.ceil(least), math.floor(highest)
    asked = wanted if wanted <= high else for_need(needed + SPARE, float(high))
    expansion = expansion_for("joining", "hub", pair.hub, temperature=100.0).value
    fewer = _up((asked - high) * expansion * pair.diameter)
    chill = "chill the shaft further" if heat.chills(floor.loaded.job.room) else "chill the shaft"
    less = f"{chill}, or take {show(fewer, 'um', 1)} less interference"
    if fewer >= most:  # nothing would be left of it
        less = f"{chill}, or carry the hub faster"
    if low > high:
        way = _too_long(floor, join, pair, needed, error[0], float(high))
        if way is not None:
            return way
        return (
            f"Heat alone does not do it: it takes {low} degC, and {high} degC is the most this hub may be set to. "
            f"{less[:1].upper()}{less[1:]}."
        )
    if asked <= high:
        return (
            f"Set the heat to {math.ceil(asked)} degC ({low} degC is the least, {high} degC the most this material and oven "
            "allow)."
        )
    if heat.hub is not None and high <= heat.hub <= highest:
        return f"The heat stands at its most: {less}."
    return f"Set the heat to {high} degC, the most this material and oven allow, and {less}."


def _too_long(floor: Floor, join: Join, pair: Pair, needed: float, error: float, high: float) -> str | None:
    """In how many seconds a hub that is set to the most it may have would do; None where no way is short enough.

    Down to HEAT-003's kelvin in hand where they are there, else to the bare need; a chilled shaft as warm as it comes now.
    Source: physics.heating.
    """
    assert join.heat is not None and join.heat.carry is not None
    ring, room = ring_of(pair), floor.loaded.job.room
    for until in (needed + SPARE, needed):
        lasts = carry_time(ring, start=high - error, until=until, air=room)
        if 1.0 <= lasts < join.heat.carry:
            loss = carry_loss(floor, join, pair, high - error, 0)
            takes = f"{show(loss, 'K', 0)}" if isinstance(loss, float) else "too much"
            return (
                f"{WAY_TOO_LONG}: in {show(join.heat.carry, 's', 0)} it takes {takes} of a hub set to {high:.0f} degC, the "
                f"most this material and oven allow. Set that and bring hub and shaft together within "
                f"{show(math.floor(lasts), 's', 0)} (carry)."
            )
    return None


def _beside_cold(pair: Pair, hub_at: float, most: float, needed: float, cap: float) -> str | None:
    """What to do beside chilling the shaft; None where it is cold enough. Source: arithmetic on heat.needed."""
    wanted = math.ceil(needed + SPARE)
    if hub_at >= needed + SPARE:
        return None
    fewer = _up((needed + SPARE - hub_at) * hub_expansion(pair, needed) * pair.diameter)
    ways = [f"warm the hub until {wanted} degC are left at the shaft"] if wanted <= cap else []
    ways += [f"take {show(fewer, 'um', 1)} less interference"] if fewer < most else []
    ways = ways or ["make the interference smaller and the hub warmer"]
    said = ", or ".join(ways)
    return f"Cold alone does not do it: {said}." if hub_at < needed else f"{said[:1].upper()}{said[1:]}."


def lead(needed: float) -> str:
    """The lead angle in all spellings. Source: tilt.needed."""
    return (
        f"Set {show_angle(needed, 'dms', 0)} ({show_angle(needed, 'deg', 4)}, {show_angle(needed, 'gon', 4)}), the lead angle "
        "at the reference diameter."
    )


def circle(cut: WheelCut, smallest: float, floor: Floor) -> str:
    """Cutter circles that will do and that mark best. Source: worm.cutter; own simulation."""
    tip = cut.drive.tip_diameter / 2.0
    step = 25.4 / 1000.0 if floor.loaded.job.units == "in" else 0.1

    def up(radius: float) -> str:
        return floor.size(math.ceil(radius / step - 1e-9) * step, 1)

    return (
        f"Set the tip radius above {up(smallest)}; {up(BEST[0] * tip)} to {up(BEST[1] * tip)} marks best on most wheels. "
        "Round up, never down."
    )


def least_needed(pair: Pair, asked: float, grip: float, friction: float, least: float) -> float | None:
    """Least interference at 20 degC that carries the load at its warmest [mm].

    least + asked / unit - grip_least, which may be below zero.  Source: quantities.strength, straight in the interference.
    """
    unit = force_held(pair, 1.0, friction)
    return least + asked / unit - grip if unit > 0.0 else None


def most_allowed(most: float, reached: float, elastic: float) -> float:
    """Largest interference at 20 degC that keeps all elastic at its coldest [mm]; at or below zero there is none.

    Source: quantities.strength, straight in the interference.
    """
    return most - (reached - elastic)


def grip(
    pair: Pair, asked: float, grip: float, friction: float, least: float, allowed: float = math.inf, most: float = 0.0
) -> str | None:
    """Least interference at 20 degC that carries the load; None where it does already.

    grip  least interference in service;  allowed  what FIT-004 allows of the largest one, `most` [mm]
    Source: `least_needed`.
    """
    needed = least_needed(pair, asked, grip, friction, least)
    if needed is None or needed <= least:
        return None
    first = f"Bring the least interference from {show(least, 'um', 1)} to {show(_up(needed), 'um', 1)}"
    if needed >= allowed:
        return f"{first}, but FIT-004 allows {_at_most(allowed)}: lengthen the seat, thicken the wall, or add a key or pins."
    beside = f"; FIT-004 allows {_at_most(allowed)}" if most > allowed else ""
    return (
        f"{first} (closer limits, a larger journal, smoother seats), lengthen the seat, or add a key or pins{beside}."
    )


def slack(most: float, allowed: float, needed: float = -math.inf, least: float = 0.0) -> str | None:
    """Largest interference at 20 degC that keeps all elastic; None where it is kept already.

    needed  what FIT-003 asks of the least one, `least` [mm].  Source: `most_allowed`.
    """
    if most <= allowed:
        return None
    if allowed <= 0.0:
        return (
            "No interference is small enough for this wall at the coldest: take a thicker wall or a stronger material."
        )
    first = f"Bring the largest interference from {show(most, 'um', 1)} down to {show(_down(allowed), 'um', 1)}"
    if needed >= allowed:
        return (
            f"{first}, but FIT-003 asks for at least {show(_up(needed), 'um', 1)}: lengthen the seat, thicken the wall, or "
            "add a key or pins."
        )
    beside = f"; FIT-003 asks for at least {show(_up(needed), 'um', 1)}" if needed > least else ""
    return f"{first} (closer limits, a smaller journal), or take a thicker wall or a stronger material{beside}."


def _at_most(allowed: float) -> str:
    return f"at most {show(_down(allowed), 'um', 1)}" if allowed > 0.0 else "none at all"


def depth(cut: WheelCut, floor: Floor) -> str | None:
    """Depth from the touched surface that leaves the usual clearance. Source: touched/2 - (a - ra1 - 0.2 m), geometry."""
    d = cut.drive
    fed = cut.root + (cut.cut.depth or 0.0) - (d.centre_distance - d.tip_diameter / 2.0 - CLEARANCE * d.module)
    if fed <= 0.0:
        return None
    passes = f"; the passes must add up to it ({cut.path}.passes)" if cut.cut.passes else ""
    return f"Feed {floor.size(fed)} from that surface ({cut.path}.depth){passes}."


def shift(floor: Floor, mesh: Mesh) -> str | None:
    """The profile shift that closes the centre distance, or that none does. Source: a = (d1 + d2)/2 + x m (from memory)."""
    found, node = settled(floor, "axial_module", "reference_diameter"), toothing(floor)
    if isinstance(found, Open) or node is None or mesh.centre_distance is None:
        return None
    module, diameter = found
    plain = (diameter + node.count * module) / 2.0
    closing = (middle(mesh.centre_distance) - plain) / module
    if abs(closing) > LARGEST_SHIFT:
        return f"Measure again: (d1 + d2)/2 is {floor.size(plain)}, and no usual shift makes up for the rest."
    return f"Write shift: {closing:.3f} under mesh (in modules), or measure again: (d1 + d2)/2 is {floor.size(plain)}."


def dividing_circle(setup: Setup, circles: str, worm_ratio: int, count: int) -> str:
    """Hole circles that close, on this head or on another plate. Source: exact fractions."""
    path = f"setups.{setup.op}.divide.circle"
    if circles != "none":
        return f"Take a circle of {circles.replace(', ', ' or ')} holes ({path})."
    others = ", ".join(str(c) for c in circles_that_fit(worm_ratio, count))
    if others:
        return (
            f"None of this head's circles closes: get a plate with a circle of {others} holes, or divide another way."
        )
    return "No usual circle closes: divide another way, by an encoder or a plate made for this count."


def _up(value: float) -> float:
    """Rounded up to a tenth of a micrometre, so that the printed value does it."""
    return math.ceil(value * 1e4 - 1e-6) / 1e4


def _down(value: float) -> float:
    """Rounded down to a tenth of a micrometre, likewise."""
    return math.floor(value * 1e4 + 1e-6) / 1e4


_HELD = {
    "pair": "fit.pair",
    "asked": "fit.force_asked",
    "grip": "fit.grip_least",
    "friction": "fit.friction",
    "least": "fit.interference_least",
}
_MOST = {"most": "fit.interference_most"}

ADVICE = (
    Quantity(
        "heat.advice",
        "join",
        "",
        0,
        oven,
        {
            "floor": "route.floor",
            "join": ":",
            "pair": "fit.pair",
            "most": "fit.interference_most",
            "needed": "heat.needed",
            "cap": "heat.cap",
        },
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
        "fit.least_needed",
        "join",
        "um",
        1,
        least_needed,
        _HELD,
        "least interference that carries the load",
    ),
    Quantity(
        "fit.most_allowed",
        "join",
        "um",
        1,
        most_allowed,
        {**_MOST, "reached": "fit.grip_most", "elastic": "fit.elastic"},
        "largest interference that stays elastic",
    ),
    Quantity(
        "fit.advice_grip",
        "join",
        "",
        0,
        grip,
        {**_HELD, "allowed": "settled fit.most_allowed", **_MOST},
        "how to come to the interference that carries the load",
        {"allowed": math.inf},
    ),
    Quantity(
        "fit.advice_slack",
        "join",
        "",
        0,
        slack,
        {
            **_MOST,
            "allowed": "fit.most_allowed",
            "needed": "settled fit.least_needed",
            "least": "fit.interference_least",
        },
        "how to come to the interference that stays elastic",
        {"needed": -math.inf},
    ),
    Quantity(
        "cutter.advice_depth",
        "cut",
        "",
        0,
        depth,
        {"cut": "cutter.wheel_cut", "floor": "route.floor"},
        "depth that leaves the usual clearance",
    ),
    Quantity(
        "mesh.advice",
        "mesh",
        "",
        0,
        shift,
        {"floor": "route.floor", "mesh": ":"},
        "profile shift that closes the centre distance",
    ),
    Quantity(
        "divide.advice",
        "setup",
        "",
        0,
        dividing_circle,
        {"setup": ":", "circles": "divide.circles", "worm_ratio": "divide.worm_ratio", "count": "divide.count"},
        "hole circles that close, as advice",
    ),
)
