"""Temperatures of hub and shaft over time: from oven and cold through still air, and over each other until they may touch.

Only the pictures need it; the plan of heat tells the same at its moments. degC, s.
"""

from __future__ import annotations

from setupcheck.jobfile.setups import Join
from setupcheck.physics.carrying import over_the_shaft
from setupcheck.physics.heating import BRIGHT, DULL, Ring, cooled_temperature
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.chilling import out_of_the_cold, seat_of
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.joint_heat import over, ring_of
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.record import record


@record(eq=False)
class Body:
    """One part on its way: where it starts [degC], its ring; None for one that keeps its temperature."""

    start: float
    ring: Ring | None

    def at(self, seconds: float, air: float) -> float:
        """Temperature [degC] by the function that the loss on the way is worked out with. Source: `cooled_temperature`."""
        if self.ring is None or seconds == 0.0:
            return self.start
        return cooled_temperature(self.ring, start=self.start, seconds=seconds, air=air)


def hub_body(pair: Pair, start: float, *, dull: bool) -> Body | None:
    """A heated hub; None for sizes that are no ring. Source: `joint_heat.ring_of`."""
    try:
        return Body(start, ring_of(pair, DULL if dull else BRIGHT))
    except OutOfRange:
        return None


def shaft_body(floor: Floor, join: Join, op: int) -> Body | Open:
    """The shaft as warm as it can be: out of the cold, or as warm as stated, or as the room. Source: quantities.chilling."""
    heat, room = join.heat, floor.loaded.job.room
    if heat is None or not heat.chills(room):
        return Body(heat.shaft if heat is not None and heat.shaft is not None else room, None)
    start = out_of_the_cold(join, op)
    try:
        seat = seat_of(floor, join, DULL)
    except OutOfRange:
        seat = None
    if isinstance(start, Open):
        return start
    if isinstance(seat, Open):
        return seat
    return Body(start[0], seat)


def over_each_other(
    floor: Floor,
    join: Join,
    pair: Pair,
    sizes: JointSizes,
    *,
    at_shaft: float,
    shaft_at: float,
    window: float,
    op: int,
    steps: int,
) -> list[tuple[float, float, float]]:
    """Seconds since they met, temperatures of hub and shaft, until the hub may bite; empty where nothing tells them.

    window  as `joint_heat.window` has it [s].  Source: physics.carrying.
    """
    between = over(floor, join, pair, sizes, shaft_at, op)
    if between is None or isinstance(between, Open):
        return []
    rows = []
    for i in range(steps + 1):
        seconds = window * i / steps
        lost, gained = over_the_shaft(
            between.hub, between.shaft, apart=at_shaft - between.coldest, gap=between.gap, seconds=seconds
        )
        rows.append((seconds, at_shaft - lost, between.coldest + gained))
    return rows
