"""Does the head lean by the right angle, and to the right side? For setups that cut the worm's wheel. Angles rad."""

from __future__ import annotations

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.book import Known, Open, Quantity, in_range
from setupcheck.quantities.cones import bevel_of
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import head_uncertainty


def cuts_the_wheel(loaded: LoadedJob, setup: Setup) -> bool:
    """True for a setup that cuts the worm's wheel gap by gap (a hob swivels by its own angle)."""
    job = loaded.job
    if job.mesh is None or job.worm is None:
        return False
    wheel = loaded.ref(job.mesh.wheel)
    for name, cut in setup.cut.items():
        ref = loaded.ref(name, setup.part)
        if (ref.part, ref.surface) == (wheel.part, wheel.surface):
            return cut.cutter is None or job.cutters[cut.cutter].kind in (
                "single-point",
                "form-cutter",
                "grinding-wheel",
            )
    return False


def set_angle(floor: Floor, setup: Setup) -> float | Open | None:
    """Angle the head is set to [rad], without its sense; None where no worm wheel is cut. Source: the job file."""
    if not cuts_the_wheel(floor.loaded, setup):
        return None
    return abs(setup.head.tilt) if setup.head is not None else Open((f"setups.{setup.op}.head.tilt",))


def needed_angle(floor: Floor, setup: Setup) -> float | Open | None:
    """Lead angle of the worm at its reference diameter [rad]: tan g = z1 m / d1, without profile shift.

    Source: ISO 1122-2 quantities (from memory); the pitch point rules the tilt, never the tip.
    """
    from setupcheck.quantities.worm_sizes import axial_lead_angle

    if floor.loaded.job.worm is None or not cuts_the_wheel(floor.loaded, setup):
        return None
    return axial_lead_angle(floor)


def error(set_angle: float, needed_angle: float) -> float:
    """Difference of the set angle and the lead angle [rad]. Source: arithmetic."""
    return abs(set_angle - needed_angle)


def allowed(floor: Floor, setup: Setup) -> Known | Open | None:
    """How finely the head can be set [rad]: a planned angle may miss the lead angle, or the root cone, by no more.

    Source: the job file; where it names only the way of setting (`by`), the typical value of that way.
    """
    if not cuts_the_wheel(floor.loaded, setup) and bevel_of(floor.loaded, setup) is None:
        return None
    found = head_uncertainty(setup.head) if setup.head is not None else None
    if found is None:
        return Open((f"setups.{setup.op}.head.uncertainty",))
    own = floor.loaded.owned(f"setups.{setup.op}.head.uncertainty")
    return Known(found[0], frozenset({found[1]} - {""}) | own)


def kind_of_uncertainty(setup: Setup, allowed: float) -> str:
    """stated or typical, of an uncertainty that is not missing (a missing one has its own finding). Source: the job file."""
    return "stated" if setup.head is not None and setup.head.uncertainty is not None else "typical"


def belongs_to(floor: Floor, set_angle: float, allowed: float) -> str | None:
    """Diameter of the worm whose lead angle was set: reference, tip or root; none of them. None for a straight head.

    Source: lead angle at each diameter, ISO 1122-2 (from memory); root = reference - 2.4 m, common practice.
    """
    from setupcheck.quantities.worm_sizes import settled
    from setupcheck.worm.geometry import whose_lead_angle

    worm, found = floor.loaded.job.worm, settled(floor, "starts", "axial_module", "reference_diameter")
    if worm is None or set_angle == 0.0 or isinstance(found, Open):
        return None
    starts, module, reference = found
    diameters = {"reference": reference, "root": reference - 2.4 * module}
    if worm.tip_diameter is not None:
        diameters["tip"] = worm.tip_diameter
    with in_range:
        return (
            whose_lead_angle(set_angle, diameters, starts=round(starts), axial_module=module, within=max(allowed, 3e-4))
            or "none"
        )


def _places(floor: Floor, setup: Setup) -> tuple[str, str, str] | Open:
    """(hand, where the nose points, where the cutter stands), or what is missing of them."""
    name, machine = machine_of(floor.loaded, setup)
    worm = floor.loaded.job.worm
    hand = worm.hand if worm is not None else None
    nose = machine.nose_points if machine is not None else None
    cutter = machine.cutter_stands if machine is not None else None
    missing = tuple(
        path
        for path, value in (
            ("worm.hand", hand),
            (f"machines.{name}.nose_points", nose),
            (f"machines.{name}.cutter_stands", cutter),
        )
        if value is None
    )
    if hand is None or nose is None or cutter is None:
        return Open(missing)
    return hand, nose, cutter


def lean(floor: Floor, setup: Setup) -> str | Open | None:
    """right or wrong: whether the head leans to the side that the hand of the worm needs.

    Source: derived in worm.tilt; a right-hand gap falls to the right seen from the cutter's side.
    """
    from setupcheck.worm.tilt import lean_is_right

    if not cuts_the_wheel(floor.loaded, setup) or setup.head is None or setup.head.tilt == 0.0:
        return None
    if setup.head.leans is None:
        return Open((f"setups.{setup.op}.head.leans",))
    places = _places(floor, setup)
    if isinstance(places, Open):
        return places
    hand, nose, cutter = places
    with in_range:
        right = lean_is_right(setup.head.leans, hand=hand, nose_points=nose, cutter_stands=cutter)
    return "right" if right else "wrong"


def direction_at_machine(word: str) -> tuple[int, int, int]:
    """What a word of the job file points along: x to the operator's right, y away from him, z up; `nose-up` goes up.

    Source: derived in worm.tilt.
    """
    from setupcheck.worm.tilt import VECTORS

    return VECTORS[word.removeprefix("nose-")]


def way_needed(floor: Floor, setup: Setup) -> str | None:
    """Where the nose must go for the hand of the worm, as the job file would write it; None where a place is not stated.

    Source: derived in worm.tilt.
    """
    from setupcheck.worm.tilt import needed_lean

    places = _places(floor, setup) if cuts_the_wheel(floor.loaded, setup) else None
    if places is None or isinstance(places, Open):
        return None
    hand, nose, cutter = places
    with in_range:
        return needed_lean(hand=hand, nose_points=nose, cutter_stands=cutter)


def picture(floor: Floor, setup: Setup) -> str | Open | None:
    """Which way the gaps fall and which end of the wheel's axis goes up, in words from the cutter's side.

    Source: derived in worm.tilt.
    """
    from setupcheck.worm.tilt import lean_in_words

    if not cuts_the_wheel(floor.loaded, setup):
        return None
    places = _places(floor, setup)
    if isinstance(places, Open):
        return places
    hand, nose, cutter = places
    with in_range:
        return lean_in_words(hand=hand, nose_points=nose, cutter_stands=cutter)


def twist(floor: Floor, error: float, allowed: float) -> float | None:
    """How far a flank runs off over the face for the angle's error and the head's uncertainty [mm]: b tan(error).

    None where the width of the teeth is not stated.  Raises: OutOfRange for an error that is a wrong setting.
    Source: geometry.
    """
    from setupcheck.worm.tilt import twist_over_face

    job = floor.loaded.job
    if job.mesh is None:
        return None
    ref = floor.loaded.ref(job.mesh.wheel)
    width = getattr(job.parts[ref.part].surfaces[ref.surface], "width", None)
    with in_range:
        return twist_over_face(error + allowed, face_width=width) if width else None


_HERE = {"floor": "route.floor", "setup": ":"}

TILT = (
    Quantity("tilt.set", "setup", "deg", 4, set_angle, _HERE, "angle the head is set to"),
    Quantity("tilt.needed", "setup", "deg", 4, needed_angle, _HERE, "lead angle of the worm at its reference diameter"),
    Quantity(
        "tilt.error",
        "setup",
        "arcmin",
        1,
        error,
        {"set_angle": "tilt.set", "needed_angle": "tilt.needed"},
        "how far the set angle misses the lead angle",
    ),
    Quantity("tilt.allowed", "setup", "arcmin", 1, allowed, _HERE, "how finely the head can be set"),
    Quantity(
        "tilt.uncertainty_kind",
        "setup",
        "",
        0,
        kind_of_uncertainty,
        {"setup": ":", "allowed": "settled tilt.allowed"},
        "how good it is known how finely the head can be set, where it is known at all",
    ),
    Quantity(
        "tilt.belongs_to",
        "setup",
        "",
        0,
        belongs_to,
        {"floor": "route.floor", "set_angle": "tilt.set", "allowed": "tilt.allowed"},
        "diameter of the worm whose lead angle was set",
    ),
    Quantity("tilt.lean", "setup", "", 0, lean, _HERE, "whether the head leans to the right side"),
    Quantity("tilt.picture", "setup", "", 0, picture, _HERE, "the lean in words, from the cutter's side"),
    Quantity(
        "tilt.twist",
        "setup",
        "um",
        1,
        twist,
        {"floor": "route.floor", "error": "tilt.error", "allowed": "tilt.allowed"},
        "run-off of a flank over the face for the error of the tilt",
    ),
)
