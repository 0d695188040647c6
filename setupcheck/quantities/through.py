"""Is a hot hub or a cold shaft of one temperature throughout while it is carried? What it loses or gains rests on that."""

from __future__ import annotations

from setupcheck.notation import fixed
from setupcheck.physics.heating import LUMPED_BELOW, Ring, biot_number, heat_loss
from setupcheck.physics.materials import Material
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.material_classes import usual_for

BIOT_DIGITS = 4
_LEAST_APART = 1.0
"""Kelvin between part and room that the film is taken at where there are less. Source: our screening choice."""


def one_temperature(which: str, turns: str, ring: Ring, of: Material | Open, *, at: float, room: float) -> float:
    """Biot number of a part in still air [1]: h (V/A) / k, h of convection and radiation.

    which, turns  for the message: `hub`, `cools`;  at  the part as it comes out of oven or cold [degC]
    k: as stated or listed; of an unlisted material that does not state it, the least that its class, or any metal, has.
    Raises: OutOfRange from 0.1 on, where one temperature for the whole part no longer holds.
    Source: lumped capacity criterion, textbooks; physics.heating; rules/data/materials.yaml, classes.yaml.
    """
    assert not isinstance(of, Open)  # the ring has its density
    away = at if abs(at - room) >= _LEAST_APART else room + _LEAST_APART
    film = heat_loss(ring, temperature=away, air=room) / (ring.surface * (away - room))
    k = of.conductivity.value if of.conductivity is not None else usual_for(of.of_class, of.family).conductivity.low
    found = biot_number(film, depth=ring.depth, conductivity=k)
    if found >= LUMPED_BELOW:
        raise OutOfRange(
            f"the {which} {turns} from the outside in (Biot number {fixed(found, BIOT_DIGITS)}): one temperature for all of it "
            f"holds below {LUMPED_BELOW:g} only, so what it loses or gains on the way is not known"
        )
    return found
