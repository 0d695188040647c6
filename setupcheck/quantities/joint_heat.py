"""What the hub still has at the shaft, how long it may take to seat, and the gap it may leave at the shoulder. mm, degC, s."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Join
from setupcheck.physics.heating import (
    DULL,
    Ring,
    cooled_temperature,
    joining_play,
    lowest_hub_temperature,
    seating_time,
    shoulder_gap,
)
from setupcheck.physics.materials import expansion_for
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_of

SOAK_PER_MM = 180.0
"""Seconds in an oven for each mm of wall. Source: a coupling maker's instruction (excerpt opened); still air, no fan."""
LEFT_WHEN_IT_GRIPS = 0.3
"""Share of the joining play below which a hub may bite. Source: our screening choice."""


def ring_of(pair: Pair) -> Ring:
    """The hub over the joint as one dull ring of the same volume. Raises: OutOfRange for sizes that are no ring.

    Source: lumped capacity; emissivity of dull metal, which loses more (physics.heating).
    """
    thinnest = min(s.outside for s in pair.sections)
    if thinnest <= pair.diameter:  # its volume would be negative, and the mean below would hide it
        raise OutOfRange(f"an outside of {thinnest:g} mm is no hub on a joint of {pair.diameter:g} mm")
    length = math.fsum(s.length for s in pair.sections)
    squares = math.fsum(s.length * s.outside**2 for s in pair.sections) / length
    try:
        return Ring(
            bore=pair.diameter,
            outside=math.sqrt(squares),
            length=length,
            density=pair.hub.density.value,
            specific_heat=pair.hub.specific_heat.value,
            emissivity=DULL,
        )
    except ValueError as why:
        raise OutOfRange(str(why)) from None


def carry_loss(
    floor: Floor, join: Join, pair: Pair, planned: float, op: int, biot: float | None = None
) -> float | Open | None:
    """Heat lost between oven and shaft, in still air [K]: the hub's capacity against convection and radiation.

    `biot` is asked for so that a hub which is not of one temperature throughout has no such loss.
    A draught, tongs and a cold bench take more.  Source: physics.heating (Churchill and Chu, Stefan-Boltzmann).
    """
    if join.by != "shrink":
        return None
    if join.heat is None or join.heat.carry is None:
        return Open((f"setups.{op}.join.heat.carry",))
    room = floor.loaded.job.room
    cooled = cooled_temperature(ring_of(pair), start=planned, seconds=join.heat.carry, air=room)
    return max(planned - cooled, 0.0)


def at_shaft(planned: float, loss: float) -> float:
    """Least heat the hub may still have as it goes over the shaft [degC]: planned - oven error - loss. Source: arithmetic."""
    return lowest_hub_temperature(planned, oven_error=0.0, carry_loss=loss)


def spare(at_shaft: float, needed: float) -> float | None:
    """What the hub has above its need as it goes over the shaft [K]; None where it has not enough. Source: arithmetic."""
    return at_shaft - needed if at_shaft >= needed else None


def window(floor: Floor, join: Join, pair: Pair, sizes: JointSizes, at_shaft: float, needed: float) -> float | None:
    """Time over the shaft until the hub may bite, nothing touching [s]; None where it is too cold to go on at all.

    Until three tenths of the play are left.  Source: conduction through the gap, physics.heating; the share ours.
    """
    if at_shaft <= needed:
        return None
    play = joining_play(sizes.nominal)
    closes = pair.hub.heating.high * pair.diameter  # what the bore closes for each kelvin, at most
    bites = needed - (1.0 - LEFT_WHEN_IT_GRIPS) * play / closes
    shaft = join.heat.shaft if join.heat is not None and join.heat.shaft is not None else floor.loaded.job.room
    length = math.fsum(s.length for s in pair.sections)
    return seating_time(
        ring_of(pair), hub_temperature=at_shaft, shaft_temperature=shaft, until=bites, gap=play / 2.0, length=length
    )


def bites_at(floor: Floor, join: Join, needed: float, sizes: JointSizes) -> float:
    """Temperature of the hub at which the tightest pair has no play left [degC]: what is needed less what the play takes.

    T = needed - play/(alpha_A D), hub expansion high, so that it is told early.  Source: physics.heating.
    """
    hub = material_of(floor, floor.loaded.ref(join.outer).part)
    assert not isinstance(hub, Open)  # `needed` has asked for it
    return needed - joining_play(sizes.nominal) / (hub.heating.high * sizes.nominal)


def go_gauge(floor: Floor, join: Join, sizes: JointSizes, needed: float) -> float:
    """Gauge that has to enter the hot bore before the hub is lifted [mm]: largest journal, as warm as it is, and the play.

    `needed` is asked for so that only a hub that is heated has one.  Source: shop practice of trying a preset gauge.
    """
    shaft = material_of(floor, floor.loaded.ref(join.inner).part)
    assert not isinstance(shaft, Open)  # `needed` has asked for it
    at = join.heat.shaft if join.heat is not None and join.heat.shaft is not None else floor.loaded.job.room
    grown = expansion_for("joining", "shaft", shaft, temperature=at).value * sizes.nominal * (at - 20.0)
    return sizes.journal_high + grown + joining_play(sizes.nominal)


def soak(join: Join, pair: Pair) -> float | None:
    """Time in the oven until the hub is hot through [s]: three minutes for each mm of its thickest wall; None elsewhere.

    Source: instructions for heating coupling hubs in an oven (excerpt opened).
    """
    if join.heat is None or join.heat.by != "oven":
        return None
    return SOAK_PER_MM * max((s.outside - pair.diameter) / 2.0 for s in pair.sections)


def gap_at_shoulder(join: Join, pair: Pair, most: float) -> float | None:
    """Largest gap that may open at the shoulder as the hub cools [mm]: U L/D, one-sided; 0 where that end grips first.

    Source: physics.heating.
    """
    if join.by != "shrink" or join.stop is None:
        return None
    if join.grips_first == "shoulder-end":
        return 0.0
    length = math.fsum(s.length for s in pair.sections)
    return shoulder_gap(most, diameter=pair.diameter, grip_distance=length)


_HERE = {"floor": "route.floor", "join": ":"}
_PAIR = {"pair": "fit.pair"}

HEAT = (
    Quantity(
        "heat.carry_loss",
        "join",
        "K",
        1,
        carry_loss,
        {**_HERE, **_PAIR, "planned": "heat.planned_low", "op": "@op", "biot": "heat.biot"},
        "heat lost on the way to the shaft",
    ),
    Quantity(
        "heat.at_shaft",
        "join",
        "degC",
        0,
        at_shaft,
        {"planned": "heat.planned_low", "loss": "heat.carry_loss"},
        "least heat the hub still has at the shaft",
    ),
    Quantity(
        "heat.spare",
        "join",
        "K",
        0,
        spare,
        {"at_shaft": "heat.at_shaft", "needed": "heat.needed"},
        "heat above the need at the shaft",
    ),
    Quantity(
        "heat.window",
        "join",
        "s",
        0,
        window,
        {**_HERE, **_PAIR, "sizes": "fit.sizes", "at_shaft": "heat.at_shaft", "needed": "heat.needed"},
        "time over the shaft until the hub may bite",
    ),
    Quantity(
        "heat.bites_at",
        "join",
        "degC",
        0,
        bites_at,
        {**_HERE, "needed": "heat.needed", "sizes": "fit.sizes"},
        "temperature at which the tightest pair bites",
    ),
    Quantity(
        "heat.go_gauge",
        "join",
        "mm",
        3,
        go_gauge,
        {**_HERE, "sizes": "fit.sizes", "needed": "heat.needed"},
        "gauge that has to enter the hot bore",
    ),
    Quantity("heat.soak", "join", "min", 0, soak, {"join": ":", **_PAIR}, "time in the oven until it is hot through"),
    Quantity(
        "heat.shoulder_gap",
        "join",
        "um",
        1,
        gap_at_shoulder,
        {"join": ":", **_PAIR, "most": "fit.interference_most"},
        "largest gap at the shoulder after cooling",
    ),
)
