"""A pressed joint against its press: force of the tightest pair at the end, and what the press may be asked for. N."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Join
from setupcheck.physics import interference as fits
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.contents import material_class
from setupcheck.quantities.friction import Friction
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor

IN_HAND = 1.5
"""Rating of a press over the largest force asked of it. Source: our screening choice, as the caution has it."""


def press_force(pair: Pair, most: float, rubbing: Friction, join: Join) -> float | None:
    """Force at the end of pressing in [N], tightest pair, highest friction; None for a shrink fit. Source: Coulomb, Lamé."""
    return press_off_force(pair, most, rubbing) if join.by == "press" else None


def press_off_force(pair: Pair, most: float, rubbing: Friction) -> float:
    """Force that starts to press or pull the tightest pair off again, cold [N]: highest friction, nothing smoothed.

    Both parts warmed alike loosen a hub that outgrows its shaft; the loosest pair needs far less.  Source: Coulomb, Lamé.
    """
    return math.fsum(
        fits.press_force(
            fits.joint_pressure(j, interference=most), friction=rubbing.high, diameter=pair.diameter, length=s.length
        )
        for j, s in zip(pair.joints("strength"), pair.sections, strict=True)
    )


def lead_in(join: Join, pair: Pair, op: int) -> float | Open | None:
    """Length of the chamfer that leads a pressed part in [mm]; None for a joint that is not pressed. Source: the job file.

    Raises: OutOfRange for one that leaves less than half of the seat. It is no part of the seat as drawn.
    """
    if join.by != "press":
        return None
    if join.lead_in is None:
        return Open((f"setups.{op}.join.lead_in",))
    seat = math.fsum(s.length for s in pair.sections)
    if join.lead_in > seat / 2.0:
        raise OutOfRange(f"a lead-in of {join.lead_in:g} mm leaves less than half of a seat of {seat:g} mm")
    return join.lead_in


def press_allowed(floor: Floor, join: Join, op: int) -> float | Open | None:
    """Force that the press may be asked for [N]: its rating over 1.5; None for a joint that is not pressed.

    Source: the marking of the press, as the job states it; the factor our screening choice.
    """
    if join.by != "press":
        return None
    setup = next(s for s in floor.loaded.job.setups if s.op == op)
    machine = floor.loaded.job.machines.get(setup.machine or "")
    if machine is None:
        return Open((f"setups.{op}.machine",))
    if machine.rating is None:
        return Open((f"machines.{setup.machine}.rating",))
    return machine.rating / IN_HAND


GALLS = "austenitic-stainless"
"""Class of materials that gall on themselves. Source: common practice."""


def galls(floor: Floor, join: Join, op: int) -> str | Open | None:
    """yes or no: whether two austenitic stainless parts are pressed together dry; None for a joint that is not pressed.

    Source: the job file; classes of materials by their names.
    """
    if join.by != "press":
        return None
    names = [floor.loaded.ref(text).part for text in (join.outer, join.inner)]
    materials = [floor.loaded.job.parts[name].material for name in names]
    missing = tuple(f"parts.{name}.material" for name, one in zip(names, materials, strict=True) if one is None)
    if missing:
        return Open(missing)
    if any(material_class(one or "") != GALLS for one in materials):
        return "no"
    return Open((f"setups.{op}.join.joint",)) if join.joint is None else "yes" if join.joint == "degreased" else "no"


_HERE = {"floor": "route.floor", "join": ":"}
_PAIR = {"pair": "fit.pair"}

PRESSING = (
    Quantity("fit.galls", "join", "", 0, galls, {**_HERE, "op": "@op"}, "whether two stainless parts are pressed dry"),
    Quantity(
        "fit.press_off",
        "join",
        "kN",
        1,
        press_off_force,
        {**_PAIR, "most": "fit.interference_most_elastic", "rubbing": "fit.rubbing"},
        "force to press or pull the tightest pair off, cold",
    ),
    Quantity(
        "fit.lead_in",
        "join",
        "mm",
        1,
        lead_in,
        {"join": ":", **_PAIR, "op": "@op"},
        "chamfer that leads a pressed part in",
    ),
    Quantity(
        "fit.press_force",
        "join",
        "kN",
        1,
        press_force,
        {**_PAIR, "most": "fit.interference_most_elastic", "rubbing": "fit.rubbing", "join": ":"},
        "force at the end of pressing in",
    ),
    Quantity(
        "fit.press_allowed",
        "join",
        "kN",
        1,
        press_allowed,
        {**_HERE, "op": "@op"},
        "force that the press may be asked for",
    ),
)
