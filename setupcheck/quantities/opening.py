"""How far heat and cold open a joint against what it needs, and how long that lasts in still air. mm, degC, s."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Join
from setupcheck.physics.carrying import Body, opened, time_open
from setupcheck.physics.heating import BRIGHT, DULL, REFERENCE_TEMPERATURE, joining_play
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.chilling import contraction, out_of_the_cold, seat_of
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.joint_heat import ring_of, unheated
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_of
from setupcheck.quantities.through import one_temperature
from setupcheck.record import record

SPARE = 20.0
"""Kelvin above the least that HEAT-003 asks for. Source: the rule book."""


def must_open(most: float, sizes: JointSizes, needed: float) -> float:
    """What heat and cold together have to open, on diameter [mm]: the largest interference and the usual play.

    `needed` is asked for so that only a joint that is shrunk has one.  Source: DIN 7190 practice (from memory).
    """
    return most + joining_play(sizes.nominal)


def hub_expansion(pair: Pair, needed: float) -> float:
    """Expansion that `heat.needed` was worked out with [1/K]: the low end, the high one where that lies below 20 degC.

    Source: physics.materials.
    """
    return pair.hub.heating.low if needed >= REFERENCE_TEMPERATURE else pair.hub.heating.high


def opens_by_heat(pair: Pair, sizes: JointSizes, needed: float, at_shaft: float) -> float:
    """What the bore has grown as it comes over the shaft, on diameter [mm]: alpha_A D (T - 20); below zero of a cold hub.

    Source: physics.carrying.
    """
    return hub_expansion(pair, needed) * sizes.nominal * (at_shaft - REFERENCE_TEMPERATURE)


def opens_by_cold(floor: Floor, join: Join, sizes: JointSizes, needed: float, shaft_at: float) -> float:
    """What the shaft has shrunk as it meets the hub, on diameter [mm]: alpha_I D (20 - T); below zero of a warm one.

    Contraction at its low end, expansion at its high one. `needed` is asked for so that only a shrunk joint has it.
    Source: physics.carrying.
    """
    return contraction(floor, join, shaft_at) * sizes.nominal * (REFERENCE_TEMPERATURE - shaft_at)


@record
class Way:
    """Hub and shaft as they leave oven and cold, and how far they must stand open on the way [mm on diameter]."""

    hub: Body
    shaft: Body
    diameter: float
    air: float

    def lasts(self, needed: float) -> float:
        return time_open(self.hub, self.shaft, needed=needed, diameter=self.diameter, air=self.air)


def way(
    floor: Floor,
    join: Join,
    pair: Pair,
    op: int,
    *,
    planned: float | None,
    shaft_at: float,
    expansion: float,
    eps: float,
) -> Way | Open:
    """The bodies of a joint on their way. planned: least heat of the source [degC], None where nothing heats the hub.

    eps  emissivity;  expansion  of the hub [1/K].
    Raises: OutOfRange for a hub or a shaft that is not of one temperature throughout.
    Source: lumped capacity, physics.carrying.
    """
    room, heat = floor.loaded.job.room, join.heat
    hub = Body(ring=None, start=unheated(join, room), expansion=expansion)
    if planned is not None:
        hub = Body(ring=ring_of(pair, eps), start=planned, expansion=expansion)
        one_temperature("hub", "cools", ring_of(pair), pair.hub, at=planned, room=room)
    shrinks = contraction(floor, join, shaft_at)
    shaft = Body(ring=None, start=shaft_at, expansion=shrinks)
    if heat is not None and heat.chills(room):
        start, seat = out_of_the_cold(join, op), seat_of(floor, join, eps)
        if isinstance(start, Open):
            return start
        if isinstance(seat, Open):
            return seat
        if seat is not None:
            one_temperature("shaft", "warms", seat, material_of(floor, pair.shaft_part), at=start[0], room=room)
        shaft = Body(ring=seat, start=start[0], expansion=shrinks)
    return Way(hub, shaft, pair.diameter, room)


def _lasts(
    floor: Floor,
    join: Join,
    pair: Pair,
    needed: float,
    shaft_at: float,
    op: int,
    planned: float | None,
    *,
    eps: float,
    until_bite: bool = False,
    spare: float = 0.0,
) -> float | Open | None:
    """Time in still air until the play is down to the wanted one, or (`until_bite`) to nothing, or `spare` K are left."""
    expansion = pair.hub.heating.high if until_bite else hub_expansion(pair, needed)
    found = way(floor, join, pair, op, planned=planned, shaft_at=shaft_at, expansion=expansion, eps=eps)
    if isinstance(found, Open):
        return found
    there = Body(ring=None, start=needed + spare, expansion=expansion)
    cold = Body(ring=None, start=shaft_at, expansion=found.shaft.expansion)
    target = opened(there, cold, diameter=pair.diameter, seconds=0.0, air=found.air)
    lasts = found.lasts(target - (joining_play(pair.diameter) if until_bite else 0.0))
    return lasts if 0.0 < lasts < math.inf else None


def carry_allowed(
    floor: Floor, join: Join, pair: Pair, needed: float, shaft_at: float, op: int, planned: float | None
) -> float | Open | None:
    """Time in still air until hub and shaft just keep the wanted play [s], dull metal; None where it is never reached.

    None as well where the heat is too low from the start: then HEAT-001 speaks.  Source: physics.carrying.
    """
    return _lasts(floor, join, pair, needed, shaft_at, op, planned, eps=DULL)


def carry_allowed_bright(
    floor: Floor, join: Join, pair: Pair, needed: float, shaft_at: float, op: int, planned: float | None
) -> float | Open | None:
    """As `carry_allowed`, of bright metal, which keeps its heat longer [s]. Source: physics.carrying."""
    return _lasts(floor, join, pair, needed, shaft_at, op, planned, eps=BRIGHT)


def carry_with_spare(
    floor: Floor, join: Join, pair: Pair, needed: float, shaft_at: float, op: int, planned: float | None
) -> float | Open | None:
    """Time in still air that leaves what HEAT-003 asks above the need [s], dull metal. Source: physics.carrying."""
    return _lasts(floor, join, pair, needed, shaft_at, op, planned, eps=DULL, spare=SPARE)


def carry_until_bite(
    floor: Floor, join: Join, pair: Pair, needed: float, shaft_at: float, op: int, planned: float | None
) -> float | Open | None:
    """Time in still air until the tightest pair has no play left [s], dull metal. Source: physics.carrying."""
    return _lasts(floor, join, pair, needed, shaft_at, op, planned, eps=DULL, until_bite=True)


def carry_until_bite_bright(
    floor: Floor, join: Join, pair: Pair, needed: float, shaft_at: float, op: int, planned: float | None
) -> float | Open | None:
    """As `carry_until_bite`, of bright metal [s]. Source: physics.carrying."""
    return _lasts(floor, join, pair, needed, shaft_at, op, planned, eps=BRIGHT, until_bite=True)


_HERE = {"floor": "route.floor", "join": ":"}
_NEEDED = {"needed": "heat.needed"}
_SHAFT = {"shaft_at": "heat.shaft_at"}
_WAY = {**_HERE, "pair": "fit.pair", **_NEEDED, **_SHAFT, "op": "@op", "planned": "heat.planned_low"}
_COLD_ALONE = {"planned": None}

OPENING = (
    Quantity(
        "heat.must_open",
        "join",
        "um",
        1,
        must_open,
        {"most": "fit.interference_most", "sizes": "fit.sizes", **_NEEDED},
        "largest interference and play, which heat and cold have to open",
    ),
    Quantity(
        "heat.opens_by_heat",
        "join",
        "um",
        1,
        opens_by_heat,
        {"pair": "fit.pair", "sizes": "fit.sizes", **_NEEDED, "at_shaft": "heat.at_shaft"},
        "what the hub's heat opens",
    ),
    Quantity(
        "heat.opens_by_cold",
        "join",
        "um",
        1,
        opens_by_cold,
        {**_HERE, "sizes": "fit.sizes", **_NEEDED, **_SHAFT},
        "what the shaft's cold opens",
    ),
    Quantity(
        "heat.carry_allowed",
        "join",
        "s",
        0,
        carry_allowed,
        _WAY,
        "time in still air until the wanted play is used up, dull metal",
        _COLD_ALONE,
    ),
    Quantity(
        "heat.carry_allowed_bright",
        "join",
        "s",
        0,
        carry_allowed_bright,
        _WAY,
        "time in still air until the wanted play is used up, bright metal",
        _COLD_ALONE,
    ),
    Quantity(
        "heat.carry_with_spare",
        "join",
        "s",
        0,
        carry_with_spare,
        _WAY,
        "time in still air that leaves 20 K in hand, dull metal",
        _COLD_ALONE,
    ),
    Quantity(
        "heat.carry_until_bite",
        "join",
        "s",
        0,
        carry_until_bite,
        _WAY,
        "time in still air until the tightest pair bites, dull metal",
        _COLD_ALONE,
    ),
    Quantity(
        "heat.carry_until_bite_bright",
        "join",
        "s",
        0,
        carry_until_bite_bright,
        _WAY,
        "time in still air until the tightest pair bites, bright metal",
        _COLD_ALONE,
    ),
)
