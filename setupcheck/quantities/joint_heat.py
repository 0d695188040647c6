"""What the hub still has at the shaft, how long it may take to seat, and the gap it may leave at the shoulder. mm, degC, s."""

from __future__ import annotations

import math
from dataclasses import replace

from setupcheck.jobfile.asked import Require
from setupcheck.jobfile.setups import Join
from setupcheck.physics.carrying import time_to_close
from setupcheck.physics.heating import (
    BRIGHT,
    DULL,
    LARGEST_HEATED,
    REFERENCE_TEMPERATURE,
    Ring,
    cooled_temperature,
    joining_play,
    lowest_hub_temperature,
    shoulder_gap,
)
from setupcheck.physics.materials import COLD_END
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.chilling import contraction, out_of_the_cold, seat_of
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_of
from setupcheck.quantities.through import BIOT_DIGITS, one_temperature
from setupcheck.record import record

SOAK_PER_MM = 180.0
"""Seconds in an oven for each mm of wall. Source: a coupling maker's instruction (excerpt opened); still air, no fan."""
SOAK_IN_OIL_PER_MM = 1800.0 / 25.4
"""Seconds in a stirred oil bath for each mm of wall: 30 min an inch, the upper end of 20 to 30. Source: shop advice for bearings
(excerpt opened)."""
GAUGE_STEP = {"mm": 0.001, "in": 0.0001 * 25.4}
"""What a gauge's size is rounded up to [mm], by the units of the file. Our choice."""
LEFT_WHEN_IT_GRIPS = 0.3
"""Share of the joining play below which a hub may bite. Source: our screening choice."""


def ring_of(pair: Pair, emissivity: float = DULL) -> Ring:
    """The hub over the joint as one ring of the same volume. Raises: OutOfRange for sizes that are no ring.

    Source: lumped capacity; dull metal, which loses more, where nothing else is said (physics.heating).
    """
    thinnest = min(s.outside for s in pair.sections)
    if thinnest <= pair.diameter:  # its volume would be negative, and the mean below would hide it
        raise OutOfRange(f"an outside of {thinnest:g} mm is no hub on a joint of {pair.diameter:g} mm")
    if thinnest > LARGEST_HEATED:
        raise OutOfRange(f"a hub of {thinnest:g} mm: how fast still air cools it is known up to {LARGEST_HEATED:g} mm")
    length = math.fsum(s.length for s in pair.sections)
    squares = math.fsum(s.length * s.outside**2 for s in pair.sections) / length
    with in_range:
        return Ring(
            bore=pair.diameter,
            outside=math.sqrt(squares),
            length=length,
            density=pair.hub.density.value,
            specific_heat=pair.hub.specific_heat.value,
            emissivity=emissivity,
        )


def biot(floor: Floor, join: Join, pair: Pair, planned: float) -> float | None:
    """How much harder heat gets to the surface of the hub than away from there, in still air [1]: h (V/A) / k.

    h of convection and radiation, of dull metal at the planned heat. From 0.1 on the hub is not of one temperature: open.
    Source: lumped capacity criterion, textbooks; physics.heating; conductivity from materials.yaml or classes.yaml.
    """
    if join.by != "shrink":
        return None
    return one_temperature("hub", "cools", ring_of(pair), pair.hub, at=planned, room=floor.loaded.job.room)


def carry_loss(
    floor: Floor, join: Join, pair: Pair, planned: float, op: int, biot: float | None = None
) -> float | Open | None:
    """Heat lost between oven and shaft, in still air [K]: the hub's capacity against convection and radiation.

    Dull metal.  `biot` is asked for so that a hub which is not of one temperature throughout has no such loss.
    A draught, tongs and a cold bench take more.  Source: physics.heating (Churchill and Chu, Stefan-Boltzmann).
    """
    return _loss(floor, join, pair, planned, op, DULL)


def carry_loss_bright(
    floor: Floor, join: Join, pair: Pair, planned: float, op: int, biot: float | None = None
) -> float | Open | None:
    """As `carry_loss`, of bright machined metal, which radiates less [K]: between the two lies what is lost.

    `biot`: as there.  Source: physics.heating.
    """
    return _loss(floor, join, pair, planned, op, BRIGHT)


def _loss(floor: Floor, join: Join, pair: Pair, planned: float, op: int, emissivity: float) -> float | Open | None:
    if join.by != "shrink":
        return None
    if join.heat is None or join.heat.carry is None:
        return Open((f"setups.{op}.join.heat.carry",))
    room = floor.loaded.job.room
    cooled = cooled_temperature(ring_of(pair, emissivity), start=planned, seconds=join.heat.carry, air=room)
    return max(planned - cooled, 0.0)


def at_shaft(floor: Floor, join: Join, planned: float | None, loss: float | None) -> float | None:
    """Least heat the hub may still have as it goes over the shaft [degC]: planned - oven error - loss. Source: arithmetic.

    Where nothing heats the hub it has the room's temperature, or what is stated if that is colder.
    Raises: OutOfRange for one colder than expansions are known.
    """
    if join.by != "shrink":
        return None
    if planned is None:
        return refuse_too_cold(unheated(join, floor.loaded.job.room))
    return None if loss is None else lowest_hub_temperature(planned, oven_error=0.0, carry_loss=loss)


def spare(at_shaft: float, needed: float) -> float | None:
    """What the hub has above its need as it goes over the shaft [K]; None where it has not enough. Source: arithmetic."""
    return at_shaft - needed if at_shaft >= needed else None


def unheated(join: Join, room: float) -> float:
    """Temperature of a hub that nothing heats [degC]: the room's, or as stated where it is colder. Source: the job file."""
    return min(join.heat.hub, room) if join.heat is not None and join.heat.hub is not None else room


def refuse_too_cold(hub: float) -> float:
    """The temperature of a hub that nothing heats [degC]. Raises: OutOfRange below COLD_END.  Source: physics.materials."""
    if hub < COLD_END:
        raise OutOfRange(f"a hub of {hub:.0f} degC: how far it has shrunk is known down to {COLD_END:g} degC alone")
    return hub


def _cold_alone(floor: Floor, join: Join) -> bool:
    return join.heat is not None and join.heat.by_cold_alone(floor.loaded.job.room)


def window(
    floor: Floor, join: Join, pair: Pair, sizes: JointSizes, at_shaft: float, needed: float, shaft_at: float, op: int
) -> float | Open | None:
    """Time over the shaft until the hub may bite, nothing touching [s]; None where it is too cold to go on at all.

    Until three tenths of the play are left, while hub and shaft exchange heat.  The shaft is as cold as it can be.
    Source: conduction through the gap, physics.carrying; the share ours.
    """
    if at_shaft <= needed:
        return None
    found = over(floor, join, pair, sizes, shaft_at, op)
    if found is None or isinstance(found, Open):
        return found
    grows = pair.hub.heating.high  # what the bore closes for each kelvin, at most
    return time_to_close(
        found.hub,
        found.shaft,
        closes=(1.0 - LEFT_WHEN_IT_GRIPS) * joining_play(sizes.nominal) + grows * pair.diameter * (at_shaft - needed),
        apart=at_shaft - found.coldest,
        gap=found.gap,
        expansions=(grows, contraction(floor, join, found.coldest)),
    )


@record
class Over:
    """Hub and shaft over each other before they touch: rings, the shaft as cold as it can be [degC], gap on the radius [mm]."""

    hub: Ring
    shaft: Ring
    coldest: float
    gap: float


def over(floor: Floor, join: Join, pair: Pair, sizes: JointSizes, shaft_at: float, op: int) -> Over | Open | None:
    """Hub and shaft as the hub goes over it; None where the seat is no plain round surface. Source: as `window`."""
    seat = seat_of(floor, join, DULL)
    if seat is None or isinstance(seat, Open):
        return seat
    coldest = shaft_at
    if join.heat is not None and join.heat.chills(floor.loaded.job.room):
        start = out_of_the_cold(join, op, -1.0)
        if isinstance(start, Open):
            return start
        coldest, _ = start
    hub = ring_of(pair)
    return Over(hub, replace(seat, length=hub.length), coldest, joining_play(sizes.nominal) / 2.0)


def bites_at(floor: Floor, join: Join, needed: float, sizes: JointSizes) -> float | None:
    """Temperature of the hub at which the tightest pair has no play left [degC]: what is needed less what the play takes.

    T = needed - play/(alpha_A D), hub expansion high, so that it is told early.  None where the hub cannot come to it, as
    the room is warmer; what a chilled shaft gains meanwhile is in `heat.carry_until_bite`.  Source: physics.heating.
    """
    if _cold_alone(floor, join):
        return None
    hub = material_of(floor, floor.loaded.ref(join.outer).part)
    assert not isinstance(hub, Open)  # `needed` has asked for it
    bites = needed - joining_play(sizes.nominal) / (hub.heating.high * sizes.nominal)
    return bites if bites > floor.loaded.job.room else None


def go_gauge(floor: Floor, join: Join, sizes: JointSizes, needed: float, shaft_at: float) -> float | None:
    """Gauge that has to enter the hot bore before the hub is lifted [mm]: largest journal, as warm as it is, and the play.

    Rounded up to a micrometre (a tenth of a thou), so that the printed size does it.
    `needed` is asked for so that only a joint that is shrunk has one; None where nothing heats the hub.
    Source: shop practice of trying a preset gauge.
    """
    if _cold_alone(floor, join):
        return None
    grown = contraction(floor, join, shaft_at) * sizes.nominal * (shaft_at - REFERENCE_TEMPERATURE)
    step = GAUGE_STEP[floor.loaded.job.units]
    return math.ceil((sizes.journal_high + grown + joining_play(sizes.nominal)) / step - 1e-6) * step


def soak(join: Join, pair: Pair) -> float | None:
    """Time in oven or oil bath until the hub is hot through [s], by its thickest wall; None for other sources of heat.

    An oven takes three minutes for each mm, a bath of oil a good minute.
    Source: instructions for heating coupling hubs in an oven, shop advice for bearings in oil (excerpts opened).
    """
    per_mm = {"oven": SOAK_PER_MM, "oil-bath": SOAK_IN_OIL_PER_MM}.get(join.heat.by or "") if join.heat else None
    return per_mm * max((s.outside - pair.diameter) / 2.0 for s in pair.sections) if per_mm is not None else None


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


def gap_uncounted(floor: Floor, join: Join, gap: float) -> float | None:
    """The same gap where no requirement along the axis looks across the joint [mm]; None where one does and the sum has it.

    Such a requirement is a length from one of both parts to the other, or the mid-plane of the one against a worm that the other
    carries.  Source: the job file; the ledger counts the gap there, or lets it cancel.
    """
    both = {floor.loaded.ref(text).part for text in (join.outer, join.inner)}
    return None if any(_parts_along(floor, r) >= both for r in floor.loaded.job.require) else gap


def _parts_along(floor: Floor, require: Require) -> set[str]:
    """The parts between which a requirement counts along the axis; none for every other requirement."""
    job = floor.loaded.job
    if require.what == "length":
        ends: tuple[str | None, ...] = (require.of, require.about)
    elif require.what == "mid-plane":
        worm = job.place.worm_axis if job.place is not None else None
        ends = (
            require.of or (job.mesh.wheel if job.mesh is not None else None),
            worm.from_ if worm is not None else None,
        )
    else:
        return set()
    return {floor.loaded.ref(end).part for end in ends if end}


def gap_advice(floor: Floor, join: Join, gap: float, op: int) -> str:
    """What keeps the hub at its shoulder, with the entry to write. Source: joining.gap_after_cooling."""
    end = join.stop.against if join.stop is not None and join.stop.against is not None else "the shoulder"
    return (
        f"Cool the hub's end at {end} first, with air and never with water, held against it and followed up by a nut or clamp "
        f"until it bites; then write grips_first: shoulder-end (setups.{op}.join). Or face what counts after the joint, and "
        f"require the length or the mid-plane that the {floor.size(gap)} would move."
    )


_HERE = {"floor": "route.floor", "join": ":"}
_PAIR = {"pair": "fit.pair"}
_NEEDED, _SHAFT = {"needed": "heat.needed"}, {"shaft_at": "heat.shaft_at"}

HEAT = (
    Quantity(
        "heat.biot",
        "join",
        "1",
        BIOT_DIGITS,
        biot,
        {"floor": "route.floor", "join": ":", "pair": "fit.pair", "planned": "heat.planned_low"},
        "whether the hub has one temperature throughout while it is carried",
    ),
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
        "heat.carry_loss_bright",
        "join",
        "K",
        1,
        carry_loss_bright,
        {**_HERE, **_PAIR, "planned": "heat.planned_low", "op": "@op", "biot": "heat.biot"},
        "heat lost on the way to the shaft by bright metal",
    ),
    Quantity(
        "heat.at_shaft",
        "join",
        "degC",
        0,
        at_shaft,
        {**_HERE, "planned": "heat.planned_low", "loss": "heat.carry_loss"},
        "least heat the hub still has at the shaft",
        {"planned": None, "loss": None},
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
        {**_HERE, **_PAIR, "sizes": "fit.sizes", "at_shaft": "heat.at_shaft", **_NEEDED, **_SHAFT, "op": "@op"},
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
        {**_HERE, "sizes": "fit.sizes", **_NEEDED, **_SHAFT},
        "gauge that has to enter the hot bore",
    ),
    Quantity(
        "heat.soak", "join", "min", 0, soak, {"join": ":", **_PAIR}, "time in oven or oil until it is hot through"
    ),
    Quantity(
        "heat.shoulder_gap",
        "join",
        "um",
        1,
        gap_at_shoulder,
        {"join": ":", **_PAIR, "most": "fit.interference_most"},
        "largest gap at the shoulder after cooling",
    ),
    Quantity(
        "heat.gap_uncounted",
        "join",
        "um",
        1,
        gap_uncounted,
        {**_HERE, "gap": "heat.shoulder_gap"},
        "gap at the shoulder that no required length counts",
    ),
    Quantity(
        "heat.gap_advice",
        "join",
        "",
        0,
        gap_advice,
        {**_HERE, "gap": "heat.gap_uncounted", "op": "@op"},
        "what keeps the hub at its shoulder, in words",
    ),
)
