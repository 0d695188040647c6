"""What boils off while a part is chilled, against the air of the room. Volumes m3, litres of liquid, kg, shares of 1."""

from __future__ import annotations

import math

OXYGEN = 0.209
"""Share of oxygen in air. Source: common knowledge."""
NITROGEN_GAS = 0.70
"""Cubic metres of gas from a litre of liquid nitrogen. Source: university guide on liquid nitrogen, appendix (excerpt opened)."""
DRY_ICE_GAS = 0.547
"""Cubic metres of carbon dioxide from a kilogram of dry ice, 20 degC. Source: ideal gas, computed here: 8.314 x 293 K / (101.3
kPa x 44 g/mol); a university page has 5.4 for 10 kg (opened)."""


def oxygen_left(room: float, *, litres: float) -> float:
    """Share of oxygen in a closed room once all the liquid nitrogen in it has boiled off and mixed.

    O2 = 0.209 (V_room - V_gas) / V_room,  V_gas = 0.70 m3 a litre: the gas pushes its own volume of air out.
    room  volume [m3];  litres  of liquid, all of it
    Validity: perfect mixing, no ventilation; beside the vessel there is less, and what stands in the room makes it smaller.
    Raises: ValueError for a room not above 0 or an amount below 0.
    Source: university guide on liquid nitrogen, loss of the whole vessel (excerpt opened).

    >>> round(oxygen_left(40.0, litres=5.0), 4), oxygen_left(1.0, litres=10.0)
    (0.1907, 0.0)
    """
    _check(room, litres)
    return max(OXYGEN * (room - NITROGEN_GAS * litres) / room, 0.0)


def carbon_dioxide(room: float, *, mass: float) -> float:
    """Share of carbon dioxide in a closed room once all the dry ice in it is gas; the 0.04 % of plain air left out.

    CO2 = 0.547 m / V_room, at most 1.  mass  [kg];  room  volume [m3]
    Validity: as `oxygen_left`; the gas is heavy and lies deeper in pits and low rooms.
    Raises: ValueError for a room not above 0 or an amount below 0.  Source: ideal gas, computed here.

    >>> round(carbon_dioxide(109.4, mass=1.0), 4), round(carbon_dioxide(40.0, mass=5.0), 4)
    (0.005, 0.0684)
    """
    _check(room, mass)
    return min(DRY_ICE_GAS * mass / room, 1.0)


def litres_at_most(room: float, *, oxygen: float) -> float:
    """Liquid nitrogen that leaves a share of oxygen in a closed room [l]: `oxygen_left` turned round.

    Raises: ValueError for a room not above 0.

    >>> round(litres_at_most(40.0, oxygen=0.195), 2)
    3.83
    """
    _check(room, 0.0)
    return room * (1.0 - oxygen / OXYGEN) / NITROGEN_GAS


def dry_ice_at_most(room: float, *, share: float) -> float:
    """Dry ice that brings a closed room to a share of carbon dioxide [kg]: `carbon_dioxide` turned round.

    Raises: ValueError for a room not above 0.

    >>> round(dry_ice_at_most(109.4, share=0.005), 2)
    1.0
    """
    _check(room, 0.0)
    return share * room / DRY_ICE_GAS


def _check(room: float, amount: float) -> None:
    if not (room > 0.0 and math.isfinite(room)) or amount < 0.0:
        raise ValueError("the room must have a volume, and what boils off cannot be below 0")
