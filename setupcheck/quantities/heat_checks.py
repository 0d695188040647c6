"""What else a plan of heat and cold is asked: the carry, the gauge, the flame, the oil, the gas in the room. degC, K, s, mm."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.physics.cold_gas import carbon_dioxide, dry_ice_at_most, litres_at_most, oxygen_left
from setupcheck.quantities.advice import WAY_TOO_LONG
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.contents import LOW_TEMPER, breaks
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.joint_heat import GAUGE_STEP
from setupcheck.quantities.material_data import UnknownMaterial, material
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import cap_of, material_of

LEAST_OXYGEN = 0.195
"""Share of oxygen below which air counts as deficient. Source: OSHA letter (excerpt opened)."""
LONG_CARBON_DIOXIDE, SHORT_CARBON_DIOXIDE = 0.005, 0.03
"""Shares of carbon dioxide for eight hours and for 15 minutes. Source: NIOSH pocket guide with OSHA's limit (excerpt opened)."""
LEAST_FLASH_MARGIN = 40.0
"""Kelvin under the flash point that HEAT-011 asks for. Source: the rule book."""
WITH_FILLING = 1.1
"""Liquid nitrogen that boils off over what is stated: a tenth goes as warm vessels are filled. Source: our screening choice,
as a sheet on liquid nitrogen has it (from memory)."""
_TENTH = 0.1  # of a litre or kilogram, as the advice is told
LITRE = 1e-3
"""m3. The file's amounts of liquid are kept in m3."""
PROVED = {
    "gauge": "a gauge tried in its bore",
    "contact-probe": "a reading by contact probe",
    "crayon": "a reading by crayon",
    "infrared": "an infrared reading alone",
    "nothing": "no gauge and no reading",
}
"""What a hub is lifted with, in words."""
_SPOILT = {"copper-alloy": "a copper alloy", "cast-iron": "cast iron", "aluminium": "aluminium"}


def carry(join: Join, op: int) -> float | Open | None:
    """Time from oven or cold to the joint, as stated [s]. Source: the job file."""
    if join.by != "shrink":
        return None
    if join.heat is None or join.heat.carry is None:
        return Open((f"setups.{op}.join.heat.carry",))
    return join.heat.carry


def gauge(join: Join) -> float | None:
    """Size of the gauge that is tried in the hot bore, as stated [mm]. Source: the job file."""
    return join.heat.gauge if join.by == "shrink" and join.heat is not None else None


def proved(floor: Floor, join: Join, op: int) -> str | Open | None:
    """What a hot hub is lifted with, one of PROVED; None where nothing heats it. A gauge counts for more than a reading.

    Source: the job file.
    """
    heat = join.heat
    if join.by != "shrink" or (heat is not None and heat.by_cold_alone(floor.loaded.job.room)):
        return None
    if heat is None or heat.hub is None:
        return Open((f"setups.{op}.join.heat.hub",))
    return PROVED["gauge" if heat.gauge is not None else heat.read_by or "nothing"]


def under_the_flame(floor: Floor, join: Join) -> str | Open | None:
    """What a flame heats: plain steel, hardened steel, cast iron, a copper alloy, …; None where no flame does.

    Hardened: steel that splinters or stands no more than 150 degC in one heating (quantities.contents).
    Source: the job file, rules/data/materials.yaml.
    """
    if join.by != "shrink" or join.heat is None or join.heat.by != "flame":
        return None
    part = floor.loaded.ref(join.outer).part
    called = floor.loaded.job.parts[part].material
    if called is None:
        return Open((f"parts.{part}.material",))
    found = material(called)
    if isinstance(found, UnknownMaterial):
        return "of a material that is not in the list"
    stated = material_of(floor, part)
    if found.family == "steel" and not isinstance(stated, Open):
        hardened = breaks(stated) or cap_of(floor, part, stated) <= LOW_TEMPER
        return "hardened steel" if hardened else "plain steel"
    return _SPOILT.get(found.family, "of no plain steel")


def flame_evens(flame: str) -> str | None:
    """How evenly a flame heats plain steel: from one side; None for what no flame should touch. Source: trade practice."""
    return "from one side" if flame == "plain steel" else None


def stated_shaft(join: Join) -> float | None:
    """Temperature of the shaft as stated [degC]. Source: the job file."""
    return join.heat.shaft if join.by == "shrink" and join.heat is not None else None


def room(floor: Floor, join: Join) -> float | None:
    """Temperature of the room, which parts have that nothing heats or chills [degC]. Source: the job file, else 20."""
    return floor.loaded.job.room if join.by == "shrink" else None


def flash_margin(join: Join, op: int, planned: float) -> float | Open | None:
    """How far the hottest of an oil bath stays under its oil's flash point [K]; None for other sources of heat.

    Flash point - planned heat - its error: two temperatures, so the answer is a difference and not a temperature.
    Source: the job file; arithmetic.
    """
    if join.heat is None or join.heat.by != "oil-bath":
        return None
    if join.heat.flash_point is None:
        return Open((f"setups.{op}.join.heat.flash_point",))
    return join.heat.flash_point - planned


def flash_advice(join: Join, margin: float) -> str | None:
    """On which side of its flash point the hottest bath is, and the flash point that would do. Source: `flash_margin`."""
    if join.heat is None or join.heat.flash_point is None or margin >= LEAST_FLASH_MARGIN:
        return None
    side = "below" if margin > 0.0 else "above" if margin < 0.0 else "at"
    by = f"{show(abs(margin), 'K', 0)} " if margin else ""
    least = math.ceil(join.heat.flash_point + LEAST_FLASH_MARGIN - margin - 1e-9)
    return (
        f"At its hottest the bath is {by}{side} the flash point of {show(join.heat.flash_point, 'degC', 0)}. Take an oil that "
        f"flashes at {least} degC or more by its safety data sheet, heat it less and chill the shaft, or use an oven."
    )


def out_of_oil(join: Join, op: int) -> str | Open | None:
    """State of a joint whose hub is lifted out of an oil bath, as stated: oil runs into its bore. None for other heat.

    Source: the job file.
    """
    if join.by != "shrink" or join.heat is None or join.heat.by != "oil-bath":
        return None
    return join.joint if join.joint is not None else Open((f"setups.{op}.join.joint",))


def oxygen(join: Join, op: int) -> float | Open | None:
    """Share of oxygen left once all the liquid nitrogen, and a tenth for filling, is gas in the closed room; None without.

    Source: physics.cold_gas; WITH_FILLING.
    """
    found = _boils(join, op, "liquid-nitrogen")
    return found if not isinstance(found, tuple) else oxygen_left(found[0], litres=WITH_FILLING * found[1] / LITRE)


def dry_ice_gas(join: Join, op: int) -> float | Open | None:
    """Share of carbon dioxide once all the dry ice is gas in the closed room; None where none is used.

    Source: physics.cold_gas.
    """
    found = _boils(join, op, "dry-ice")
    return found if not isinstance(found, tuple) else carbon_dioxide(found[0], mass=found[1])


def dry_ice_gas_long(share: float | None) -> float | None:
    """The same share where it stays within the limit of 15 minutes; None beyond, where HEAT-013 speaks.

    Source: physics.cold_gas.
    """
    return share if share is not None and share <= SHORT_CARBON_DIOXIDE else None


def _boils(join: Join, op: int, what: str) -> tuple[float, float] | Open | None:
    """Room [m3] and what boils off in it [m3 or kg], in any joint that is chilled so."""
    heat, path = join.heat, f"setups.{op}.join.heat"
    if heat is None or heat.cold_by != what:
        return None
    if heat.room_volume is None or heat.coolant is None:
        keys = (("room_volume", heat.room_volume), ("coolant", heat.coolant))
        return Open(tuple(f"{path}.{key}" for key, given in keys if given is None))
    return heat.room_volume, heat.coolant.value


def gas_advice(join: Join, op: int) -> str | None:
    """How much may boil off in this room, and the room that all of it needs. Source: physics.cold_gas, turned round."""
    heat, path = join.heat, f"setups.{op}.join.heat.coolant"
    if heat is None or heat.room_volume is None or heat.coolant is None:
        return None
    volume, amount = heat.room_volume, heat.coolant.value
    if heat.cold_by == "liquid-nitrogen":
        most, amount, unit, stay = (litres_at_most(volume, oxygen=LEAST_OXYGEN) / WITH_FILLING, amount / LITRE, "l", "")
    else:
        most, unit = dry_ice_at_most(volume, share=LONG_CARBON_DIOXIDE), "kg"
        brief = dry_ice_at_most(volume, share=SHORT_CARBON_DIOXIDE)
        stay = f" for a shift, {_down(brief)} kg for a quarter of an hour"
    elsewhere = (
        f"work in the open, or in a room of {math.ceil(volume * amount / most)} m3 or more, with an alarm for the gas"
    )
    if most < _TENTH:
        return f"{elsewhere[:1].upper()}{elsewhere[1:]}."
    return f"Bring no more than {_down(most)} {unit} into this room{stay} ({path}), or {elsewhere}."


def _down(amount: float) -> str:
    """An amount rounded down to a tenth, so that the printed one keeps the limit."""
    return f"{math.floor(amount / _TENTH + 1e-9) * _TENTH:.1f}"


def carry_advice(join: Join, op: int, allowed: float, spare: float | None, oven: str | None) -> str | None:
    """In how many seconds the hub has to be at the shaft, or how much hotter to set it. Source: quantities.opening."""
    path = f"setups.{op}.join.heat.carry"
    most = show(math.floor(allowed), "s", 0)
    first = f"Bring hub and shaft together within {most} ({path})"
    if spare is not None and math.floor(spare) >= 1:
        first = (
            f"Bring hub and shaft together within {show(math.floor(spare), 's', 0)} ({path}; {most} at the very most)"
        )
    if oven is None or oven.startswith(WAY_TOO_LONG):  # the first sentence has said it
        return f"{first}."
    return f"{first}. With the way as it is: {oven[:1].lower()}{oven[1:]}"


def gauge_enters(floor: Floor, gauge: float, sizes: JointSizes, opens: float, go: float) -> float | None:
    """Largest gauge that the smallest bore takes in at the least planned heat, the way taken off [mm], rounded down.

    None where that is less than the gauge which proves anything: then HEAT-001 speaks of the heat.
    gauge  is asked for so that only a joint with one has it.  Source: quantities.opening.
    """
    step = GAUGE_STEP[floor.loaded.job.units]
    enters = math.floor((sizes.bore_low + opens) / step + 1e-6) * step
    return enters if enters >= go - 1e-9 else None


def gauge_to_try(gauge: float, go: float, enters: float | None) -> float | None:
    """The stated gauge where it proves the bore and enters it [mm]; None where HEAT-007 or HEAT-018 has it made anew.

    Source: the job file.
    """
    return gauge if go - 1e-9 <= gauge and (enters is None or gauge <= enters + 1e-9) else None


def gauge_advice(floor: Floor, op: int, go: float, enters: float | None) -> str:
    """Size of the gauge for the hot bore, and the largest that the smallest bore takes in. Source: quantities.joint_heat."""
    made = f"Make the gauge {floor.size(go)}, the largest journal and the play (setups.{op}.join.heat.gauge)"
    if enters is None:
        return f"{made}."
    return f"{made}; as hot as planned, the smallest bore takes up to {floor.size(enters)}."


_JOIN, _OP = {"join": ":"}, {"op": "@op"}
_HERE = {"floor": "route.floor", **_JOIN}

HEAT_CHECKS = (
    Quantity("heat.carry", "join", "s", 0, carry, {**_JOIN, **_OP}, "time from oven or cold to the joint"),
    Quantity(
        "heat.carry_advice",
        "join",
        "",
        0,
        carry_advice,
        {
            **_JOIN,
            **_OP,
            "allowed": "heat.carry_allowed",
            "spare": "settled heat.carry_with_spare",
            "oven": "settled heat.advice",
        },
        "how soon the hub has to be at the shaft",
        {"spare": None, "oven": None},
    ),
    Quantity(
        "heat.gauge_enters",
        "join",
        "mm",
        3,
        gauge_enters,
        {
            "floor": "route.floor",
            "gauge": "heat.gauge",
            "sizes": "fit.sizes",
            "opens": "heat.opens_by_heat",
            "go": "heat.go_gauge",
        },
        "largest gauge that the smallest hot bore takes in",
    ),
    Quantity(
        "heat.gauge_to_try",
        "join",
        "mm",
        3,
        gauge_to_try,
        {"gauge": "heat.gauge", "go": "heat.go_gauge", "enters": "settled heat.gauge_enters"},
        "the stated gauge, where it proves the hot bore and enters it",
        {"enters": None},
    ),
    Quantity(
        "heat.gauge_advice",
        "join",
        "",
        0,
        gauge_advice,
        {"floor": "route.floor", **_OP, "go": "heat.go_gauge", "enters": "settled heat.gauge_enters"},
        "size of the gauge for the hot bore, in words",
        {"enters": None},
    ),
    Quantity("heat.gauge", "join", "mm", 3, gauge, _JOIN, "gauge that is tried in the hot bore"),
    Quantity("heat.proved", "join", "", 0, proved, {**_HERE, **_OP}, "how the hot hub is proved"),
    Quantity("heat.flame", "join", "", 0, under_the_flame, _HERE, "what a flame heats"),
    Quantity("heat.flame_evens", "join", "", 0, flame_evens, {"flame": "heat.flame"}, "how evenly a flame heats"),
    Quantity("heat.shaft", "join", "degC", 0, stated_shaft, _JOIN, "temperature of the shaft as stated"),
    Quantity("heat.room", "join", "degC", 0, room, _HERE, "temperature of the room"),
    Quantity(
        "heat.flash_margin",
        "join",
        "K",
        0,
        flash_margin,
        {**_JOIN, **_OP, "planned": "heat.planned_high"},
        "how far the oil bath stays under its flash point",
    ),
    Quantity(
        "heat.flash_advice",
        "join",
        "",
        0,
        flash_advice,
        {**_JOIN, "margin": "heat.flash_margin"},
        "flash point that an oil bath needs, in words",
    ),
    Quantity("heat.out_of_oil", "join", "", 0, out_of_oil, {**_JOIN, **_OP}, "state of a joint that comes out of oil"),
    Quantity("heat.oxygen", "join", "%", 1, oxygen, {**_JOIN, **_OP}, "oxygen left when the nitrogen is gas"),
    Quantity(
        "heat.carbon_dioxide", "join", "%", 2, dry_ice_gas, {**_JOIN, **_OP}, "carbon dioxide when the dry ice is gas"
    ),
    Quantity(
        "heat.carbon_dioxide_long",
        "join",
        "%",
        2,
        dry_ice_gas_long,
        {"share": "settled heat.carbon_dioxide"},
        "the same within the limit of 15 minutes",
    ),
    Quantity("heat.gas_advice", "join", "", 0, gas_advice, {**_JOIN, **_OP}, "how much may boil off in this room"),
)
