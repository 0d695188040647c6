"""A head that is tilted to the root cone of a bevel: the angle it needs, and how far it is off. Angles rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Toothing
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.notation import show_angle
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.shop import Floor


def bevel_of(loaded: LoadedJob, setup: Setup) -> Toothing | None:
    """The bevel teeth that a setup cuts, those with a root cone. Source: the job file."""
    for name in setup.cut:
        ref = loaded.ref(name, setup.part)
        node = loaded.job.parts[ref.part].surfaces[ref.surface]
        if isinstance(node, Toothing) and node.cone is not None:
            return node
    return None


def cone_needed(floor: Floor, setup: Setup) -> float | None:
    """Angle of the root cone to the axis [rad]: with the head set to it the bottom of the gap lies along the cutter's travel.

    None where no bevel is cut.  Source: the drawing, `cone` of the teeth; geometry.
    """
    teeth = bevel_of(floor.loaded, setup)
    return teeth.cone if teeth is not None else None


def cone_error(setup: Setup, cone: float) -> float | Open:
    """Difference of the set angle and the root cone [rad]. Source: arithmetic."""
    return abs(abs(setup.head.tilt) - cone) if setup.head is not None else Open((f"setups.{setup.op}.head.tilt",))


def cone_advice(cone: float) -> str:
    """The root cone in all spellings. Source: tilt.cone."""
    return (
        f"Set {show_angle(cone, 'dms', 0)} ({show_angle(cone, 'deg', 4)}, {show_angle(cone, 'gon', 4)}), the angle of the root "
        "cone; the pitch cone and the face cone of the same drawing are steeper."
    )


_CONE = {"cone": "tilt.cone"}

CONES = (
    Quantity(
        "tilt.cone",
        "setup",
        "deg",
        4,
        cone_needed,
        {"floor": "route.floor", "setup": ":"},
        "angle of the root cone of the bevel to its axis",
    ),
    Quantity(
        "tilt.cone_error",
        "setup",
        "arcmin",
        1,
        cone_error,
        {"setup": ":", **_CONE},
        "how far the set angle misses the root cone",
    ),
    Quantity("tilt.cone_advice", "setup", "", 0, cone_advice, _CONE, "the root cone in all spellings"),
)
