"""Do worm, wheel and housing close on paper, and what stands beside the backlash? Lengths mm."""

from __future__ import annotations

import math

from setupcheck.jobfile.worm import Mesh
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.cutter_shape import USUAL_FILM
from setupcheck.quantities.drive import middle
from setupcheck.quantities.judged import Result
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import settled, sizes, toothing

CONTACTS = ("contact-area", "contact-length")
"""Requirements that are judged by blue."""


def circle_miss(floor: Floor) -> float | Open | None:
    """How far the drawn pitch circle is from count times axial module [mm]; None where the module comes from that circle.

    Source: the wheel rolls on d2 = z2 m, derived.
    """
    found, wheel = sizes(floor), toothing(floor)
    if found is None or wheel is None:
        return None
    if "wheel_diameter" in found.origins.get("axial_module", ()):  # the worm states none: there is nothing to compare
        return None
    module = found.values["axial_module"]
    return abs(wheel.on_circle - wheel.count * module)


def distance_miss(floor: Floor, mesh: Mesh) -> float | Open | None:
    """How far the centre distance is from (d1 + d2)/2 + x m [mm].

    Source: ISO 1122-2 quantities (from memory), worm.geometry.
    """
    wheel = toothing(floor)
    if floor.loaded.job.worm is None or wheel is None:
        return None
    found = settled(floor, "axial_module", "reference_diameter")
    if isinstance(found, Open) or mesh.centre_distance is None:
        missing = found.missing if isinstance(found, Open) else ()
        return Open((*missing, *(("mesh.centre_distance",) if mesh.centre_distance is None else ())))
    module, diameter = found
    return abs(middle(mesh.centre_distance) - ((diameter + wheel.count * module) / 2.0 + mesh.shift * module))


def end_float(floor: Floor) -> float | None:
    """End float of the worm [mm], which reads as lost motion at the wheel; None where it is not stated. Source: the job file."""
    worm = floor.loaded.job.worm
    return worm.end_float if worm is not None else None


def backlash_asked(floor: Floor, mesh: Mesh) -> str | None:
    """asked, one-sided or not-asked: whether a requirement limits the backlash at both ends; None without a worm.

    Source: the job file.
    """
    if floor.loaded.job.worm is None:
        return None
    asked = [r for r in floor.loaded.job.require if r.what == "backlash"]
    if any(r.between is not None for r in asked):
        return "asked"
    return "one-sided" if asked else "not-asked"


def least_backlash(result: Result | None) -> float | None:
    """Lowest backlash of the worst case [mm]; None for every other figure. Below zero the worm binds. Source: stack.combined."""
    if result is None or result.stack.require.what != "backlash":
        return None
    return result.combined.worst.low


def film(floor: Floor, mesh: Mesh) -> float | None:
    """Thickest film of blue that a mark or a requirement of contact is told under [mm]; None where none is stated.

    Source: the job file.
    """
    asked = (r.film for r in floor.loaded.job.require if r.what in CONTACTS)
    told = (mesh.mark.film if mesh.mark is not None else None, *asked)
    return max((f for f in told if f is not None), default=None)


def film_advice(film: float) -> str:
    """How much wider the job's film marks than the usual one, in words. Source: share of a flank as the root of the film."""
    wider = math.sqrt(film / USUAL_FILM)
    return (
        f"Wipe the blue out to a haze of some {show(USUAL_FILM, 'um', 0)} and write that film: {show(film, 'um', 1)} marks "
        f"about {wider:.1f} times as wide on any flank, so a share asked under it is to be divided by that."
    )


_HERE = {"floor": "route.floor", "mesh": ":"}

MESHING = (
    Quantity(
        "mesh.circle_miss",
        "mesh",
        "um",
        1,
        circle_miss,
        {"floor": "route.floor"},
        "pitch circle against count x module",
    ),
    Quantity("mesh.distance_miss", "mesh", "um", 1, distance_miss, _HERE, "centre distance against worm and wheel"),
    Quantity("mesh.end_float", "mesh", "um", 1, end_float, {"floor": "route.floor"}, "end float of the worm"),
    Quantity(
        "mesh.least_backlash",
        "stack",
        "mm",
        4,
        least_backlash,
        {"result": "settled stack.combined"},
        "lowest backlash of the worst case",
        {"result": None},
    ),
    Quantity("mesh.film", "mesh", "um", 1, film, _HERE, "film of blue that contact is judged under"),
    Quantity(
        "mesh.film_advice",
        "mesh",
        "",
        0,
        film_advice,
        {"film": "mesh.film"},
        "what the film widens, in words",
    ),
    Quantity("mesh.backlash_asked", "mesh", "", 0, backlash_asked, _HERE, "whether a backlash is required"),
)
