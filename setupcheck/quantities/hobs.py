"""The hob of a worm wheel against its worm: never smaller, and how much larger. Lengths mm, angles rad."""

from __future__ import annotations

import math

from setupcheck.notation import show_angle
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.joint_shape import cut_of
from setupcheck.quantities.scopes import CutEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import settled

LEAST_CLEARANCE = 0.1
USUAL_CLEARANCE = 0.2
"""Clearance under the worm's tip, in modules: the least that CUTTER-005 takes, and the usual one. Source: common practice."""
LARGEST_OVERSIZE = 0.06
"""Usual end of the oversize of a new hob, of the worm's reference diameter. Source: common practice, from memory (2 to 6 %)."""


def diameter(floor: Floor, entry: CutEntry) -> float | Open | None:
    """Outside diameter of the hob that cuts the mesh's wheel in this cut [mm]; None for every other cut. Source: the job file."""
    job = floor.loaded.job
    if job.mesh is None or job.worm is None or entry.cut.cutter is None:
        return None
    wheel = floor.loaded.ref(job.mesh.wheel)
    hob = job.cutters[entry.cut.cutter]
    if hob.kind != "hob" or cut_of(floor, wheel.part, wheel.surface) is not entry.cut:
        return None
    return hob.diameter if hob.diameter is not None else Open((f"cutters.{entry.cut.cutter}.diameter",))


def least(floor: Floor, diameter: float) -> float | Open:
    """Smallest hob that cuts clear of the worm's tip all round [mm]: d_a1 + 2 x 0.1 m. Source: LEAST_CLEARANCE, derived."""
    found = _tip_and_module(floor)
    return found if isinstance(found, Open) else found[0] + 2.0 * LEAST_CLEARANCE * found[1]


def _tip_and_module(floor: Floor) -> tuple[float, float] | Open:
    worm = floor.loaded.job.worm
    module = settled(floor, "axial_module")
    missing = ("worm.tip_diameter",) if worm is None or worm.tip_diameter is None else ()
    if isinstance(module, Open) or missing or worm is None or worm.tip_diameter is None:
        return Open((*missing, *(module.missing if isinstance(module, Open) else ())))
    return worm.tip_diameter, module[0]


def oversize(floor: Floor, diameter: float) -> float | Open:
    """How much larger than the worm the hob is, of the worm's reference diameter [1]: (D - d_a1 - 0.4 m)/d1.

    Source: derived; the usual clearance is no oversize.
    """
    found, reference = _tip_and_module(floor), settled(floor, "reference_diameter")
    if isinstance(found, Open) or isinstance(reference, Open):
        return Open(tuple(key for one in (found, reference) if isinstance(one, Open) for key in one.missing))
    return (diameter - found[0] - 2.0 * USUAL_CLEARANCE * found[1]) / reference[0]


@in_range
def lead_angle(floor: Floor, oversize: float) -> float | Open:
    """The hob's own lead angle [rad]: sin g_h = z1 m_n / d_h with d_h = d1 (1 + oversize), normal modules alike.

    Source: derived, ISO 1122-2 quantities (from memory).
    """
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    if isinstance(found, Open):
        return found
    starts, module, reference = found
    normal = module * math.cos(math.atan(starts * module / reference))
    sine = starts * normal / (reference * (1.0 + oversize)) if oversize > -1.0 else 1.0
    if not sine < 1.0:
        raise OutOfRange("the hob is too small to have a thread of this lead")
    return math.asin(sine)


def advice(floor: Floor, oversize: float, lead_angle: float, least: float) -> str | Open:
    """What hob to take, and by how much this one is swivelled against the worm, in words. Source: lead_angle."""
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    if isinstance(found, Open):
        return found
    starts, module, reference = found
    off = math.atan(starts * module / reference) - lead_angle
    if oversize < 0.0:
        return f"Take a hob of {floor.size(least)} at the least, or cut the wheel with a single point."
    most = least + 2.0 * (USUAL_CLEARANCE - LEAST_CLEARANCE) * module + LARGEST_OVERSIZE * reference
    own, apart = (show_angle(angle, "dms", 0) for angle in (lead_angle, abs(off)))
    return (
        f"Take a hob of {floor.size(least)} to {floor.size(most)}. This one's own lead angle is {own}, {apart} from the worm's: "
        f"swivel it by that."
    )


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"cutter.hob_{name}", "cut", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_FLOOR = {"floor": "route.floor"}
_DIAMETER = {**_FLOOR, "diameter": "cutter.hob_diameter"}
_OVER = {**_FLOOR, "oversize": "cutter.hob_oversize"}

HOBS = (
    _row("diameter", "mm", 3, diameter, {**_FLOOR, "entry": ":"}, "outside diameter of the worm wheel's hob"),
    _row("least", "mm", 3, least, _DIAMETER, "smallest hob that clears the worm's tip"),
    _row("oversize", "%", 1, oversize, _DIAMETER, "how much larger than the worm the hob is"),
    _row("lead_angle", "deg", 4, lead_angle, _OVER, "lead angle of the hob"),
    _row(
        "advice",
        "",
        0,
        advice,
        {**_OVER, "lead_angle": "cutter.hob_lead_angle", "least": "cutter.hob_least"},
        "what hob to take, in words",
    ),
)
