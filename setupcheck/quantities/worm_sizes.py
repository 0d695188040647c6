"""The worm's sizes from whatever the job states of it: what settles what, what disagrees, what it may be. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping
from functools import lru_cache

from setupcheck.jobfile.models import Dimension, Toothing
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.worm import Worm
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.shop import Floor
from setupcheck.worm import candidates as usual
from setupcheck.worm import geometry
from setupcheck.worm.closing import Closed, Disagreement, closed
from setupcheck.worm.profiles import off_straight

SAME = 1e-3
"""Relative; two figures for one size that differ by more were not rounded apart. Source: our screening choice, as in gearing."""
STATED = ("starts", "axial_module", "diametral_pitch", "normal_module", "quotient", "reference_diameter")
"""Sizes of a worm that are plain numbers of the job file."""
PITCHES = ("axial_module", "diametral_pitch", "normal_module")
"""Those of them that say the pitch."""
TRAVELS = ("axial_pitch", "lead")
"""Sizes of a worm that may be drawn or measured."""
PATHS = {
    "centre_distance": "mesh.centre_distance",
    "wheel_diameter": "mesh.wheel",
    "teeth": "mesh.wheel",
    "shift": "mesh.shift",
}
"""What to fill for a size that is no key of the worm itself."""
KEYS_OF_WHEEL = {"teeth": "the wheel's count", "wheel_diameter": "the wheel's on_circle"}
"""How a message calls a size that is a key of the wheel."""
MOST_STARTS = 12
"""Starts that the job file takes."""


def toothing(floor: Floor) -> Toothing | None:
    """The teeth of the mesh's wheel; None where there are none."""
    return _teeth(floor.loaded)


def _teeth(loaded: LoadedJob) -> Toothing | None:
    mesh = loaded.job.mesh
    if mesh is None:
        return None
    ref = loaded.ref(mesh.wheel)
    node = loaded.job.parts[ref.part].surfaces[ref.surface]
    return node if isinstance(node, Toothing) else None


def sizes(floor: Floor) -> Closed | None:
    """All sizes that the job settles; None where it has no worm.

    What is drawn of the worm comes first, then the wheel's circle, then a measured pitch or lead, then the centre distance.
    Source: worm.closing.
    """
    return _closed(floor.loaded)


@lru_cache(maxsize=4)  # a job is asked some forty times, and never changes
def _closed(loaded: LoadedJob) -> Closed | None:
    worm, mesh, wheel = loaded.job.worm, loaded.job.mesh, _teeth(loaded)
    if worm is None:
        return None
    drawn = {name: float(getattr(worm, name)) for name in STATED if getattr(worm, name) is not None}
    measured: dict[str, float] = {}
    for name, given in _travels(worm):
        (drawn if given.measured is None else measured)[name] = given.value
    of_wheel: dict[str, float] = {}
    housing: dict[str, float] = {}
    if wheel is not None and mesh is not None:
        drawn["teeth"] = float(wheel.count)
        if "shift" in mesh.model_fields_set:
            drawn["shift"] = mesh.shift
        if wheel.module is not None:
            of_wheel["axial_module"] = wheel.module
        of_wheel["wheel_diameter"] = wheel.on_circle
        if mesh.centre_distance is not None:
            housing["centre_distance"] = _middle(mesh.centre_distance)
    bands = {name: _band(given) for name, given in _travels(worm)}
    return closed(drawn, of_wheel, measured, housing, within=SAME, bands=bands)


def _travels(worm: Worm) -> Iterator[tuple[str, Dimension]]:
    for name in TRAVELS:
        given = getattr(worm, name)
        if given is not None:
            yield name, given


def _middle(given: Dimension) -> float:
    return given.value + (0.0 if given.measured is not None else ((given.lower or 0.0) + (given.upper or 0.0)) / 2.0)


def _band(given: Dimension) -> float:
    """What a drawn or measured travel leaves open, relative."""
    half = given.uncertainty if given.uncertainty is not None else ((given.upper or 0.0) - (given.lower or 0.0)) / 2.0
    return half / given.value


def settled(floor: Floor, *names: str) -> tuple[float, ...] | Open:
    """Sizes by name, or the keys that would settle those that are missing."""
    found = sizes(floor)
    values: Mapping[str, float] = found.values if found is not None else {}
    missing = tuple(PATHS.get(name, f"worm.{name}") for name in names if name not in values)
    return Open(missing) if missing else tuple(values[name] for name in names)


def one(name: str, formula: str) -> Callable[[Floor], float | Open]:
    """The function of a row that shows one settled size."""

    def size(floor: Floor) -> float | Open:
        found = settled(floor, name)
        return found if isinstance(found, Open) else found[0]

    size.__doc__ = f"As stated, or as the other sizes settle it: {formula}. Source: worm.closing."
    return size


def diametral_pitch(floor: Floor, worm: Worm) -> float | Open | None:
    """Diametral pitch of the axial section [1/in]: 25.4 mm over the axial module; None in a metric job that states none.

    Source: by definition.
    """
    if floor.loaded.job.units != "in" and worm.diametral_pitch is None:
        return None
    found = settled(floor, "diametral_pitch")
    return found if isinstance(found, Open) else found[0]


def axial_lead_angle(floor: Floor) -> float | Open:
    """Lead angle at the reference diameter [rad]: tan g = z1 m/d1.

    Raises: OutOfRange for a thread at 45 deg or steeper.  Source: ISO 1122-2 quantities (from memory).
    """
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    return found if isinstance(found, Open) else _angle(found, found[2])


def tip_angle(floor: Floor, worm: Worm) -> float | Open:
    """Lead angle at the tip [rad], flatter than at the reference diameter: for telling one from the other.

    Source: worm.geometry.lead_angle.
    """
    found = settled(floor, "starts", "axial_module")
    if isinstance(found, Open):
        return found
    return _angle(found, worm.tip_diameter) if worm.tip_diameter is not None else Open(("worm.tip_diameter",))


def _angle(found: tuple[float, ...], diameter: float) -> float:
    with in_range:
        return geometry.lead_angle(starts=round(found[0]), axial_module=found[1], diameter=diameter)


def normal_angle(worm: Worm, lead_angle: float) -> float | Open:
    """Pressure angle in the normal section [rad]: tan alpha_n = tan alpha cos g. Source: Mott, Machine Elements, eq. 8-39."""
    if worm.pressure_angle is None:
        return Open(("worm.pressure_angle",))
    with in_range:
        return geometry.normal_pressure_angle(worm.pressure_angle, lead_angle)


def usual_tip(floor: Floor) -> float | Open:
    """Usual tip diameter [mm]: d1 + 2 m. Source: worm.geometry.worm_sizes."""
    found = settled(floor, "reference_diameter", "axial_module")
    return found if isinstance(found, Open) else found[0] + 2.0 * found[1]


def usual_root(floor: Floor) -> float | Open:
    """Usual root diameter [mm]: d1 - 2.4 m, clearance 0.2 m. Source: worm.geometry.worm_sizes."""
    found = settled(floor, "reference_diameter", "axial_module")
    if isinstance(found, Open):
        return found
    with in_range:
        return geometry.worm_sizes(axial_module=found[1], reference_diameter=found[0]).root_diameter


def departure(floor: Floor, worm: Worm, low: float) -> float | Open | None:
    """How far the flank stands off a straight axial line between root and tip, along the axis [mm]; 0 for ZA.

    None where no profile is stated.  Raises: OutOfRange for a profile that is not computed.  Source: worm.profiles.
    """
    if worm.profile is None:
        return None
    if worm.profile == "ZA":
        return 0.0
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    missing = tuple(f"worm.{key}" for key in ("tip_diameter", "pressure_angle") if getattr(worm, key) is None)
    if isinstance(found, Open):
        return Open((*found.missing, *missing))
    if missing or worm.tip_diameter is None or worm.pressure_angle is None:
        return Open(missing)
    with in_range:
        return off_straight(
            worm.profile,
            starts=round(found[0]),
            axial_module=found[1],
            reference_diameter=found[2],
            pressure_angle=worm.pressure_angle,
            groove=math.pi * found[1] / 2.0,
            low=low,
            high=worm.tip_diameter,
        )


def told(floor: Floor, name: str, value: float) -> str:
    """A size by its key with its unit, as messages write it: `axial_module 1.5 mm`, `quotient 16`, `the wheel's count 72`."""
    return f"{KEYS_OF_WHEEL.get(name, name)} {_shown(floor, name, value)}"


def _shown(floor: Floor, name: str, value: float) -> str:
    if name in ("starts", "teeth", "quotient", "diametral_pitch", "shift"):
        return f"{value:.3f}".rstrip("0").rstrip(".")
    return floor.size(value)


def pitch_of_the_wheel(loaded: LoadedJob) -> bool:
    """Whether the worm's pitch is known from its wheel alone: nothing is left then that could show a wrong pair.

    Source: worm.closing.
    """
    worm, found = loaded.job.worm, _closed(loaded)
    if worm is None or found is None or "axial_module" not in found.values:
        return False
    own = any(getattr(worm, name) is not None for name in (*PITCHES, *TRAVELS))
    return not own and (worm.quotient is None or worm.reference_diameter is None)


def contradictions(floor: Floor) -> tuple[Disagreement, ...]:
    """Where the worm's own sizes contradict each other. Wheel and housing have rules of their own, MESH-001 and MESH-002.

    A worm that states no module has it from the wheel's circle, where MESH-001 has nothing to compare: a pitch or a lead
    measured on that worm is held against the circle here.  Source: worm.closing.
    """
    found = sizes(floor)
    if found is None:
        return ()
    away = {"wheel_diameter", "centre_distance"}
    if "wheel_diameter" in found.origins.get("axial_module", ()):
        away = {"centre_distance"}
    return tuple(d for d in found.disagreements if not d.about & away)


def agree(floor: Floor, thickness_miss: str | None) -> str:
    """agree, or which sizes of the worm cannot be true together and by how much. Source: worm.closing."""
    words = [_against(floor, one) for one in contradictions(floor)]
    words += [said for said in (lead_miss(floor), thickness_miss) if said]
    return "; ".join(words) if words else "agree"


def lead_miss(floor: Floor) -> str | None:
    """A lead from which the starts would follow, but which is no whole multiple of the axial pitch, in words; else None.

    Allowed is what two sizes may differ by that were rounded apart, and what was measured on top of it, as for every other
    contradiction.  Source: p_z = z1 p_x; worm.closing.
    """
    found, worm = sizes(floor), floor.loaded.job.worm
    if found is None or worm is None or worm.lead is None or worm.starts is not None:
        return None
    rests_on = found.origins.get("axial_pitch", frozenset(("lead",)))
    if rests_on & {"lead", "starts"}:  # the pitch follows from the lead itself
        return None
    lead, pitch = worm.lead.value, found.values["axial_pitch"]
    whole = max(round(lead / pitch), 1)
    bands = {name: _band(given) for name, given in _travels(worm)}
    allowed = SAME + bands["lead"] + (bands.get("axial_pitch", 0.0) if "axial_pitch" in rests_on else 0.0)
    if abs(lead - whole * pitch) <= allowed * max(lead, whole * pitch):
        return None
    return (
        f"{told(floor, 'lead', lead)} is no whole multiple of the axial pitch {_shown(floor, 'axial_pitch', pitch)}, "
        f"{whole} of it would be {_shown(floor, 'lead', whole * pitch)}"
    )


def _against(floor: Floor, found: Disagreement) -> str:
    values = sizes(floor)
    assert values is not None
    others = ", ".join(told(floor, n, values.values[n]) for n in found.others)
    apart = _shown(floor, found.name, abs(found.value - found.stated))
    return f"{told(floor, found.name, found.stated)} is not {_shown(floor, found.name, found.value)} ({others}), {apart} apart"


def advice(floor: Floor) -> str | None:
    """What the first contradiction most likely comes from; None without one. Source: the usual slips, worm.closing."""
    first = next(iter(contradictions(floor)), None)
    found, worm = sizes(floor), floor.loaded.job.worm
    if first is None and lead_miss(floor):
        return "Measure the lead again, or count the threads at the worm's end, write starts and leave out the lead."
    if first is None or found is None or worm is None:
        return None
    if {"lead", "starts"} <= first.about and worm.starts is not None and worm.lead is not None:
        pitches = worm.lead.value / found.values["axial_pitch"]
        said = starts_of(pitches, worm.starts)
        if said:
            return said
    pitch, module = worm.diametral_pitch, worm.axial_module
    if pitch is not None and module is not None and abs(pitch - module) <= SAME * module:
        return f"The diametral_pitch reads like the module in mm. Leave it out: it would be {25.4 / module:.3f}."
    return f"Measure again, or leave one of them out: by the others {told(floor, first.name, first.value)}."


def starts_of(pitches: float, starts: int) -> str:
    """What to write for a thread that travels so many pitches in one turn; empty where that is no other whole number."""
    whole = round(pitches)
    if whole == starts or not 1 <= whole <= MOST_STARTS or abs(pitches - whole) > 0.02 * whole:
        return ""
    return (
        f"Write starts: {whole}, for the lead is {whole} pitches: lead is the travel in one turn, from one thread to its "
        "neighbour it is the axial_pitch. Count the threads at the worm's end."
    )


def candidates(worm: Worm, starts: float) -> str | Open | None:
    """Every usual worm whose pitch lies within the measured one and its uncertainty, nearest first, in words.

    None where neither axial pitch nor lead is measured.  Source: worm.candidates.
    """
    for name, per in (("axial_pitch", 1.0), ("lead", starts)):
        given = getattr(worm, name)
        if given is None or given.measured is None:
            continue
        if given.uncertainty is None:
            return Open((f"worm.{name}.uncertainty",))
        pitch, band = given.measured / per, given.uncertainty / per
        inside = usual.candidates(pitch, uncertainty=band)
        if not inside:
            near = usual.nearest(pitch)
            beside = f"nearest is {near.name} with {show(near.pitch, 'mm', 4)}"
            return f"no usual pitch lies within {show(band, 'um', 0)} of the measured one; {beside}"
        each = [f"{c.name} ({show(c.pitch, 'mm', 4)}, off by {show(abs(c.pitch - pitch), 'um', 0)})" for c in inside]
        return "of usual worms it may be " + " or ".join(each)
    return None


def candidates_of(floor: Floor, worm: Worm) -> str | Open | None:
    """`candidates`; a measured lead needs the starts. Source: worm.candidates."""
    if worm.axial_pitch is not None and worm.axial_pitch.measured is not None:
        return candidates(worm, 1.0)
    if worm.lead is None or worm.lead.measured is None:
        return None
    return candidates(worm, float(worm.starts)) if worm.starts is not None else Open(("worm.starts",))


_FLOOR = {"floor": "route.floor"}
_WORM = {**_FLOOR, "worm": ":"}


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"worm.{name}", "worm", unit, digits, of, inputs, says)  # type: ignore[arg-type]


WORM = (
    _row(
        "axial_module",
        "mm",
        4,
        one("axial_module", "m = p_x/pi = 25.4/P = m_n/cos g = d1/q = d2/z2 [mm]"),
        _FLOOR,
        "axial module",
    ),
    _row("diametral_pitch", "1", 3, diametral_pitch, _WORM, "diametral pitch of the axial section"),
    _row(
        "axial_pitch",
        "mm",
        4,
        one("axial_pitch", "p_x = pi m = p_z/z1 [mm]"),
        _FLOOR,
        "axial pitch, from thread to thread",
    ),
    _row("starts", "1", 0, one("starts", "z1 = p_z/p_x"), _FLOOR, "starts"),
    _row("lead", "mm", 4, one("lead", "p_z = z1 p_x [mm]"), _FLOOR, "lead, the travel in one turn"),
    _row("normal_module", "mm", 4, one("normal_module", "m_n = m cos g [mm]"), _FLOOR, "normal module"),
    _row("quotient", "1", 3, one("quotient", "q = d1/m"), _FLOOR, "diameter quotient"),
    _row(
        "reference_diameter",
        "mm",
        3,
        one("reference_diameter", "d1 = q m = 2 (a - x m) - d2 [mm]"),
        _FLOOR,
        "reference diameter",
    ),
    _row("lead_angle", "deg", 4, axial_lead_angle, _FLOOR, "lead angle at the reference diameter"),
    _row("tip_angle", "deg", 4, tip_angle, _WORM, "lead angle at the tip"),
    _row(
        "normal_angle",
        "deg",
        4,
        normal_angle,
        {"worm": ":", "lead_angle": "worm.lead_angle"},
        "pressure angle in the normal section",
    ),
    _row("usual_tip", "mm", 3, usual_tip, _FLOOR, "usual tip diameter"),
    _row("usual_root", "mm", 3, usual_root, _FLOOR, "usual root diameter"),
    _row(
        "off_straight",
        "um",
        1,
        departure,
        {**_WORM, "low": "worm.usual_root"},
        "how far the flank stands off a straight line in the axial section",
    ),
    _row("candidates", "", 0, candidates_of, _WORM, "usual worms of the measured pitch"),
    Quantity(
        "worm.agree",
        "worm",
        "",
        0,
        agree,
        {**_FLOOR, "thickness_miss": "settled worm.thickness_miss"},
        "whether the sizes stated of the worm can be true together",
        {"thickness_miss": None},
    ),
    _row("advice", "", 0, advice, _FLOOR, "what a contradiction of the worm's sizes may come from"),
)
