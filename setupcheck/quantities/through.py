"""Is a hub of one temperature throughout while it is carried? The check behind the heat lost on the way to the shaft."""

from __future__ import annotations

from setupcheck.jobfile.setups import Join
from setupcheck.notation import fixed
from setupcheck.physics.heating import LUMPED_BELOW, biot_number, heat_loss
from setupcheck.physics.materials import Material
from setupcheck.quantities.book import OutOfRange, Quantity
from setupcheck.quantities.joint_heat import ring_of
from setupcheck.quantities.material_classes import usual_for
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor

_DIGITS = 4
_LEAST_APART = 1.0
"""Kelvin between hub and room that the film is taken at where there are less. Source: our screening choice."""


def biot(floor: Floor, join: Join, pair: Pair, planned: float) -> float | None:
    """How much harder heat gets to the surface of the hub than away from there, in still air [1]: h (V/A) / k.

    h: convection and radiation of dull metal at the planned heat.  k: as stated or listed; of an unlisted material that
    does not state it, the least that its class, or any metal, has.
    Raises: OutOfRange from 0.1 on, where one temperature for the whole hub no longer holds.
    Source: lumped capacity criterion, textbooks; physics.heating; rules/data/materials.yaml, classes.yaml.
    """
    if join.by != "shrink":
        return None
    ring, room = ring_of(pair), floor.loaded.job.room
    hub = planned if abs(planned - room) >= _LEAST_APART else room + _LEAST_APART
    film = heat_loss(ring, temperature=hub, air=room) / (ring.surface * (hub - room))
    found = biot_number(film, depth=ring.depth, conductivity=_conductivity(pair.hub))
    if found >= LUMPED_BELOW:
        raise OutOfRange(
            f"the hub cools from the outside in (Biot number {fixed(found, _DIGITS)}): one temperature for all of it holds "
            f"below {LUMPED_BELOW:g} only, so the heat it loses is not known"
        )
    return found


def _conductivity(of: Material) -> float:
    """Of heat [W/mK]: the material's own, else the least of its class."""
    return of.conductivity.value if of.conductivity is not None else usual_for(of.of_class, of.family).conductivity.low


THROUGH = (
    Quantity(
        "heat.biot",
        "join",
        "1",
        _DIGITS,
        biot,
        {"floor": "route.floor", "join": ":", "pair": "fit.pair", "planned": "heat.planned_low"},
        "whether the hub has one temperature throughout while it is carried",
    ),
)
