"""A head that is tilted to the root cone of a bevel: the angle it needs, and how far it is off. Angles rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Round, Toothing
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.notation import show_angle
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.route import machine_of
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


def small_end(floor: Floor, setup: Setup) -> int | Open:
    """+1 or -1: whether the bevel narrows towards the +z or the -z end of its part, by the taper that stands over its teeth.

    Source: the drawing.
    """
    for name in setup.cut:
        ref = floor.loaded.ref(name, setup.part)
        surfaces = floor.loaded.job.parts[ref.part].surfaces
        teeth = surfaces[ref.surface]
        if not isinstance(teeth, Toothing) or teeth.cone is None:
            continue
        for over in surfaces.values():
            if isinstance(over, Round) and over.kind == "taper" and over.low <= teeth.at <= over.high:
                return _narrows(over, f"parts.{ref.part}.surfaces")
        return Open(
            (f"parts.{ref.part}.surfaces",), f"no taper stands over {name}, so nothing says which end is the small one"
        )
    raise AssertionError("asked only where a bevel is cut")


def _narrows(over: Round, path: str) -> int | Open:
    if over.to_diameter is None:
        return Open((path,), "the taper over the teeth has one diameter: write its to_diameter")
    return 1 if over.to_diameter < over.diameter.value else -1


def lean(floor: Floor, setup: Setup, cone: float) -> str | Open | None:
    """right or wrong: whether the head leans so that the bottom of the gap comes to lie along the travel on the cutter's side.

    With the small end away from the head its nose goes towards the cutter, with the large end away it goes away from it.
    Source: geometry, derived here: a cone lies level above when its axis rises towards the apex by its own angle.
    """
    if setup.head is None or setup.head.tilt == 0.0:
        return None
    way = way_needed(floor, setup, cone)
    if isinstance(way, Open):
        return way
    if setup.head.leans is None:
        return Open((f"setups.{setup.op}.head.leans",))
    return "right" if setup.head.leans == way else "wrong"


def way_needed(floor: Floor, setup: Setup, cone: float) -> str | Open:
    """Where the nose must go, as the job file would write it. Source: as `lean`."""
    from setupcheck.worm.tilt import lean_towards

    name, machine = machine_of(floor.loaded, setup)
    if machine is None or machine.cutter_stands is None:
        return Open((f"machines.{name}.cutter_stands",))
    if setup.looks_at_tool is None:
        return Open((f"setups.{setup.op}.looks_at_tool",))
    narrow = small_end(floor, setup)
    if isinstance(narrow, Open):
        return narrow
    return lean_towards(machine.cutter_stands, away=narrow != setup.looks_at_tool)


def lean_advice(floor: Floor, setup: Setup, cone: float) -> str | None:
    """The way to lean it, written as the job file has it. Source: tilt.cone_lean."""
    way = way_needed(floor, setup, cone)
    return (
        None
        if isinstance(way, Open)
        else f"Lean it {way}: the small end is the one that the bottom of the gap runs down to."
    )


_HERE = {"floor": "route.floor", "setup": ":"}
_CONE = {"cone": "tilt.cone"}

CONES = (
    Quantity(
        "tilt.cone",
        "setup",
        "deg",
        4,
        cone_needed,
        _HERE,
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
    Quantity(
        "tilt.cone_lean",
        "setup",
        "",
        0,
        lean,
        {**_HERE, **_CONE},
        "whether the head leans to the right side for a bevel",
    ),
    Quantity("tilt.cone_lean_advice", "setup", "", 0, lean_advice, {**_HERE, **_CONE}, "the way the head must lean"),
)
