"""A neighbour that stays in place while a hot hub goes on: seals, bearings, grease. degC, mm."""

from __future__ import annotations

from dataclasses import replace

from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.physics.beside import NEXT_TO, mixed_temperature, warmest_beside
from setupcheck.physics.heating import DULL
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.chilling import seat_of
from setupcheck.quantities.joint_heat import ring_of
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor


def comes_to(floor: Floor, join: Join, pair: Pair, planned: float, shaft_at: float, op: int) -> float | Open | None:
    """Most that a neighbour on the shaft may come to [degC]: hub at its hottest, nothing lost on the way.

    None where no neighbour is stated, or where the seat is no plain round surface.  Source: physics.beside.
    """
    near = join.heat.near if join.heat is not None else None
    if near is None:
        return None
    if near.away is None:
        return Open((f"setups.{op}.join.heat.near.away",))
    seat = seat_of(floor, join, DULL)
    if seat is None or isinstance(seat, Open):
        return seat
    hub = ring_of(pair)
    try:
        under = replace(seat, length=hub.length)
        mixed = mixed_temperature(hub, under, hub_temperature=planned, shaft_temperature=shaft_at)
    except ValueError as why:
        raise OutOfRange(str(why)) from None
    return warmest_beside(mixed, hub_temperature=planned, away=near.away)


def stands(join: Join, op: int) -> float | Open | None:
    """What that neighbour stands, as stated [degC]. Source: the job file."""
    near = join.heat.near if join.heat is not None else None
    if join.by != "shrink" or near is None:
        return None
    return near.stands if near.stands is not None else Open((f"setups.{op}.join.heat.near.stands",))


def advice(join: Join, found: float, stands: float) -> str | None:
    """Which neighbour it is, and what would keep it cool. Source: physics.beside."""
    near = join.heat.near if join.heat is not None else None
    if near is None or near.away is None or found <= stands:
        return None
    if near.away < NEXT_TO:
        return (
            f"So near the seat the {near.what} may get what the hub has. Take it off, or shield it and let a contact probe tell "
            "what it comes to."
        )
    return (
        f"Take the {near.what} off before the hub goes on, take less interference and so less heat, or a thinner hub; cool the "
        f"shaft between hub and {near.what} only where its maker says how. At most {show(stands, 'degC', 0)}."
    )


_HERE = {"join": ":", "op": "@op"}

BESIDE = (
    Quantity(
        "heat.beside",
        "join",
        "degC",
        0,
        comes_to,
        {
            "floor": "route.floor",
            **_HERE,
            "pair": "fit.pair",
            "planned": "heat.planned_high",
            "shaft_at": "heat.shaft_at",
        },
        "most that what stays in place beside the hub may come to",
    ),
    Quantity("heat.beside_stands", "join", "degC", 0, stands, _HERE, "what it stands"),
    Quantity(
        "heat.beside_advice",
        "join",
        "",
        0,
        advice,
        {"join": ":", "found": "heat.beside", "stands": "heat.beside_stands"},
        "which neighbour, and what would keep it cool",
    ),
)
