"""An eccentric that carries the worm: what it closes and throws sideways where it stands, and what it has left. mm, rad.

The angle counts from the dead centre at which the worm is farthest from the wheel, either way; half a turn on it is nearest.
"""

from __future__ import annotations

import math

from setupcheck.jobfile.worm import Mesh
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.shop import Floor

CLOSING = 0.01
"""The change of centre distance that sideways throw is told for [mm]. Our choice: what a worm drive is set to."""


def throw(mesh: Mesh) -> float | Open | None:
    """Distance of the eccentric's two axes [mm]; None where the job tells of none. Source: the job file."""
    if mesh.eccentric is None:
        return Open(("mesh.eccentric",)) if mesh.eccentric_at is not None else None
    return mesh.eccentric


def at(mesh: Mesh, throw: float) -> float | Open:
    """Angle at which it stands, from its dead centre farthest out [rad]. Source: the job file."""
    return mesh.eccentric_at if mesh.eccentric_at is not None else Open(("mesh.eccentric_at",))


def closes(throw: float, at: float) -> float:
    """Change of centre distance for one degree of turning, to first order [mm]: e sin(t) pi/180.

    Source: a = a0 + e cos(t), derived.

    >>> round(closes(1.0, math.radians(90)), 5)
    0.01745
    """
    return throw * math.sin(at) * math.radians(1.0)


def sideways(throw: float, at: float) -> float:
    """What one degree of turning throws the worm along the wheel's axis, to first order [mm]: e |cos(t)| pi/180.

    Source: s = e sin(t), derived.

    >>> round(sideways(1.0, math.radians(60)), 5)
    0.00873
    """
    return throw * abs(math.cos(at)) * math.radians(1.0)


def thrown(throw: float, at: float) -> float | None:
    """Sideways throw while it closes the centre distance by 0.01 mm [mm]; None where it cannot close that much.

    e |sin(t1) - sin(t)| with e (cos(t) - cos(t1)) = 0.01 mm, exact.  Source: a = a0 + e cos(t), s = e sin(t), derived.

    >>> round(thrown(1.0, math.radians(45)), 4), thrown(1.0, math.radians(180))
    (0.0099, None)
    """
    reached = math.cos(at) - CLOSING / throw
    if reached < -1.0:
        return None
    return throw * abs(math.sqrt(1.0 - reached * reached) - math.sin(at))


def left(throw: float, at: float) -> float:
    """What it can still close [mm]: e (1 + cos(t)). Source: a = a0 + e cos(t), nearest at half a turn.

    >>> round(left(0.5, math.radians(90)), 6)
    0.5
    """
    return throw * (1.0 + math.cos(at))


def left_share(at: float) -> float:
    """The same, of its whole travel 2 e [1]: (1 + cos(t))/2. Source: as `left`.

    >>> round(left_share(math.radians(120)), 6)
    0.25
    """
    return (1.0 + math.cos(at)) / 2.0


def says(throw: float, at: float, floor: Floor) -> str:
    """Where it stands, in this job's numbers, and what to do about it. Source: the formulas above."""
    moved = thrown(throw, at)
    told = (
        f"Here a degree closes {floor.size(closes(throw, at), 4)} and throws the worm {floor.size(sideways(throw, at), 4)} "
        f"sideways; it can still close {floor.size(left(throw, at))} of {floor.size(2.0 * throw)}."
    )
    if moved is not None:
        told += f" Closing {floor.size(CLOSING, 3)} throws it {floor.size(moved, 4)}."
    shift = throw * math.cos(at)
    way = "farther apart" if shift < 0.0 else "closer"
    return (
        f"{told} Turned to 90 deg it would bring the axes {floor.size(abs(shift))} {way}: make that up by a shim or by the "
        f"depth of the next wheel, then find the worm's mid-plane again."
    )


_BOTH = {"throw": "mesh.eccentric", "at": "mesh.eccentric_at"}
_AT = {"at": "mesh.eccentric_at"}


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"mesh.{name}", "mesh", unit, digits, of, inputs, says)  # type: ignore[arg-type]


ECCENTRIC = (
    _row("eccentric", "mm", 3, throw, {"mesh": ":"}, "throw of the eccentric that carries the worm"),
    _row(
        "eccentric_at",
        "deg",
        1,
        at,
        {"mesh": ":", "throw": "mesh.eccentric"},
        "angle of the eccentric from its dead centre",
    ),
    _row("eccentric_closes", "um", 1, closes, _BOTH, "change of centre distance for one degree"),
    _row("eccentric_sideways", "um", 1, sideways, _BOTH, "sideways throw of the worm for one degree"),
    _row("eccentric_throws", "um", 1, thrown, _BOTH, "sideways throw while it closes 10 um"),
    _row("eccentric_left", "um", 0, left, _BOTH, "centre distance it can still close"),
    _row("eccentric_left_share", "%", 0, left_share, _AT, "of its travel still to close"),
    _row("eccentric_advice", "", 0, says, {**_BOTH, "floor": "route.floor"}, "where the eccentric stands, in words"),
)
