"""What a hot hub may bring to parts that stay in place beside it: an upper bound of the shaft's heat. mm, degC."""

from __future__ import annotations

from setupcheck.physics.heating import Ring

NEXT_TO = 5.0
"""Distance from the seat within which a part may get what the hub itself has [mm]. Source: our screening choice: in sections
worked out in two directions (tests/published) the skin of the shaft is below the mixed heat from 4 mm on."""


def mixed_temperature(hub: Ring, shaft: Ring, *, hub_temperature: float, shaft_temperature: float) -> float:
    """Temperature of hub and the stretch of shaft under it once they have one [degC], nothing lost: the most the shaft has then.

    T = (C_A T_A + C_I T_I) / (C_A + C_I);  C  heat capacities
    The shaft under the hub comes up to it from below; the rest of the shaft, and the air, only take away from it.
    Validity: the hub is no longer than the stretch, and nothing goes on heating it.  Source: heat balance, derived here.

    >>> ring = Ring(bore=76, outside=90, length=25, density=7850, specific_heat=465, emissivity=0.6)
    >>> seat = Ring(bore=26, outside=76, length=25, density=7850, specific_heat=465, emissivity=0.6)
    >>> round(mixed_temperature(ring, seat, hub_temperature=165, shaft_temperature=20), 1)
    65.4
    """
    hot, cold = hub.heat_capacity, shaft.heat_capacity
    return (hot * hub_temperature + cold * shaft_temperature) / (hot + cold)


def warmest_beside(mixed: float, *, hub_temperature: float, away: float) -> float:
    """Most that a part on the shaft may come to, so far from the seat [degC]: the mixed heat, next to the seat the hub's own.

    Nothing gets hotter than the hottest; the shaft's skin at the edge of the seat is, for seconds, hotter than hub and shaft
    are once they are even.  Validity: as `mixed_temperature`.  Source: heat conduction has no maximum inside, derived here.

    >>> warmest_beside(65.4, hub_temperature=165, away=20), warmest_beside(65.4, hub_temperature=165, away=2)
    (65.4, 165)
    """
    return mixed if away >= NEXT_TO else hub_temperature
