"""The shim that would bring the wheel to the worm's mid-plane, and between which faces it belongs. Lengths mm."""

from __future__ import annotations

from setupcheck.jobfile.setups import Join, Setup
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.drive import middle
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

PLAIN = 0.0005
"""Offsets below this need no other shim [mm]. Source: our screening choice, half a micrometre."""


@record
class Shim:
    """A stop of a joint with its spacers as they are and as they should be [mm].

    op, path  the joint and its stop;  on, against  the two faces;  names  of the spacers there now
    """

    op: int
    path: str
    on: str
    against: str
    names: tuple[str, ...]
    now: float
    needed: float

    def entry(self, *, inches: bool) -> str:
        """Where to write it; what to type, where no spacer stands there yet. The limits are an example."""
        if self.names or self.needed < PLAIN:
            return self.path
        length = f"{show(self.needed, 'in', 5)[:-3]} ±0.0001" if inches else f"{show(self.needed, 'mm', 4)[:-3]} ±0.003"
        return f"{self.path}, spacers: [{{name: shim, length: {length}}}], with its own limits"

    def words(self, *, inches: bool) -> str:
        """What to do, as one sentence."""
        unit, digits = ("in", 5) if inches else ("mm", 4)
        between = f"between {self.on} and {self.against}"
        if self.needed < 0.0:
            gone = f"and take another {show(-self.needed, unit, digits)} off one of these faces" if self.now else ""
            first = f"Take the shim {between} out {gone}" if self.now else ""
            return first or f"No shim does it: take {show(-self.needed, unit, digits)} off {self.on} or {self.against}"
        if not self.now:
            return f"Put a shim of {show(self.needed, unit, digits)} {between}"
        name = f"the {self.names[0]}" if len(self.names) == 1 else "the shims"
        if self.needed < PLAIN:
            return f"Take {name} out from {between}"
        change = "thinner" if self.needed < self.now else "thicker"
        by = show(abs(self.needed - self.now), unit, digits)
        return f"Make {name} {between} {show(self.needed, unit, digits)} instead of {show(self.now, unit, digits)}, {by} {change}"


def shim_for(floor: Floor, offset: float) -> Shim | None:
    """The shim that moves the wheel by -offset along the axis; None where no joint with a stop lies between.

    offset  tooth mid-plane less worm axis, along the frame of the wheel's body [mm]
    A thicker spacer carries the inner part away the way the outer part's face looks.  Source: the ledger's joint.
    """
    found = _between(floor)
    if found is None:
        return None
    setup, join, wheel_is_outer = found
    assert join.stop is not None and join.stop.against is not None
    face = floor.now(floor.loaded.ref(join.stop.on))
    if face is None or not face.facing:
        return None
    now = sum(middle(spacer.length) for spacer in join.stop.spacers)
    change = offset * face.facing * (1.0 if wheel_is_outer else -1.0)
    return Shim(
        setup.op,
        f"setups.{setup.op}.join.stop",
        join.stop.on,
        join.stop.against,
        tuple(s.name for s in join.stop.spacers),
        now,
        now + change,
    )


def _between(floor: Floor) -> tuple[Setup, Join, bool] | None:
    """The joint between the wheel and the face the worm's axis is measured from, and whether the wheel is its outer part."""
    job = floor.loaded.job
    if job.mesh is None or job.place is None or job.place.worm_axis is None:
        return None
    wheel, face = floor.loaded.ref(job.mesh.wheel).part, floor.loaded.ref(job.place.worm_axis.from_).part
    for setup in reversed(job.setups):
        join = setup.join
        if join is None or join.stop is None or join.stop.against is None:
            continue
        outer, inner = floor.loaded.ref(join.outer).part, floor.loaded.ref(join.inner).part
        if (outer, inner) in ((wheel, face), (face, wheel)):
            return setup, join, outer == wheel
    return None


def nominal_offset(floor: Floor) -> float | Open | None:
    """Tooth mid-plane less worm axis along the axis, drawn sizes and middle shims only [mm].

    z_teeth - (z_face + facing L).  Source: arithmetic on the drawing.
    """
    job = floor.loaded.job
    if job.place is None or job.place.worm_axis is None or job.mesh is None:
        return None
    teeth, face = floor.now(floor.loaded.ref(job.mesh.wheel)), floor.now(floor.loaded.ref(job.place.worm_axis.from_))
    if teeth is None or face is None:
        return Open(("mesh.wheel" if teeth is None else "place.worm_axis.from",), "it is never made in this route")
    if floor.body(teeth.part) is not floor.body(face.part):
        return Open(("setups",), f"{teeth.ref} and {face.ref} are never joined in this route")
    return teeth.z - face.z - face.facing * middle(job.place.worm_axis.length)


def nominal_gap(offset: float) -> float:
    """How far the drawn sizes alone leave the tooth mid-plane from the worm's axis [mm]. Source: arithmetic."""
    return abs(offset)


def shim(floor: Floor, offset: float) -> str | None:
    """The shim that would zero the drawn sizes, and between which faces. Source: the ledger's joint."""
    found = shim_for(floor, offset)
    if found is None or abs(offset) < PLAIN:
        return None
    inches = floor.loaded.job.units == "in"
    return f"{found.words(inches=inches)} ({found.entry(inches=inches)})."


PLACE = (
    Quantity(
        "place.offset",
        "place",
        "um",
        1,
        nominal_offset,
        {"floor": "route.floor"},
        "drawn sizes alone: tooth mid-plane less worm axis",
    ),
    Quantity(
        "place.nominal_gap",
        "place",
        "um",
        1,
        nominal_gap,
        {"offset": "place.offset"},
        "how far the drawn sizes alone miss the worm's mid-plane",
    ),
    Quantity(
        "place.shim",
        "place",
        "",
        0,
        shim,
        {"floor": "route.floor", "offset": "place.offset"},
        "the shim that zeroes it",
    ),
)
