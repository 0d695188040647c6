"""Is a hub of one temperature throughout while it is carried? The check behind the heat lost on the way to the shaft."""

from __future__ import annotations

from setupcheck.jobfile.setups import Join
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.chilling import BIOT_DIGITS, one_temperature
from setupcheck.quantities.joint_heat import ring_of
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor


def biot(floor: Floor, join: Join, pair: Pair, planned: float) -> float | None:
    """How much harder heat gets to the surface of the hub than away from there, in still air [1]: h (V/A) / k.

    h of convection and radiation, of dull metal at the planned heat. From 0.1 on the hub is not of one temperature: open.
    Source: lumped capacity criterion, textbooks; physics.heating; conductivity from materials.yaml or classes.yaml.
    """
    if join.by != "shrink":
        return None
    return one_temperature("hub", "cools", ring_of(pair), pair.hub, at=planned, room=floor.loaded.job.room)


THROUGH = (
    Quantity(
        "heat.biot",
        "join",
        "1",
        BIOT_DIGITS,
        biot,
        {"floor": "route.floor", "join": ":", "pair": "fit.pair", "planned": "heat.planned_low"},
        "whether the hub has one temperature throughout while it is carried",
    ),
)
