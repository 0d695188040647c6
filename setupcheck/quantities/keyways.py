"""Keyways of a joint: is it said at which angle they meet? Lengths mm."""

from __future__ import annotations

from setupcheck.jobfile.models import Pattern, Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.pairing import FITTED
from setupcheck.quantities.shop import Floor

BESIDE = 0.25
"""How far, of the seat's diameter, a slot's circle may lie from the seat to count as its keyway: keys are about a quarter of the
shaft wide and less high. Source: common practice, from memory."""


def aligned(floor: Floor, join: Join) -> str | None:
    """stated or not-stated: whether the angle of mounting is; None where not both parts have a keyway at the joint.

    Source: the job file.
    """
    if join.by not in FITTED or not all(_keyed(floor, floor.loaded.ref(text)) for text in (join.outer, join.inner)):
        return None
    return "stated" if join.mounted_at is not None else "not-stated"


def _keyed(floor: Floor, seat: Ref) -> bool:
    """Whether the part has a slot on the seat: near its diameter and somewhere along its length."""
    surfaces = floor.loaded.job.parts[seat.part].surfaces
    node = surfaces[seat.surface]
    if not isinstance(node, Round):
        return False
    size, low, high = node.diameter.value, node.low, node.high
    return any(
        isinstance(slot, Pattern)
        and slot.kind == "slot"
        and abs(slot.on_circle - size) <= BESIDE * size
        and low <= slot.at <= high
        for slot in surfaces.values()
    )


KEYWAYS = (
    Quantity(
        "fit.keyways",
        "join",
        "",
        0,
        aligned,
        {"floor": "route.floor", "join": ":"},
        "whether the angle is stated at which two keyways meet",
    ),
)
