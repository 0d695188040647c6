"""Thickness of the worm's thread at the reference diameter: drawn, measured at a diameter, or over wires. Lengths mm."""

from __future__ import annotations

import math

from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.worm import Worm
from setupcheck.ledger.account import Account
from setupcheck.notation import show
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.causes import Entry, size_error
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import departure, settled, usual_root
from setupcheck.record import record
from setupcheck.worm import wires

STRAIGHT = 0.005
"""How far a flank may stand off a straight line and still be computed as one [mm]. Source: our screening choice, below what
a worn worm can be measured to."""
ROUNDED = 0.002
"""Difference of two measured thicknesses that is rounding alone [mm]. Source: our screening choice."""
STEP = 1e-3
"""Step of the size over wires for its derivative [mm]. Source: our choice; the curve is nearly straight."""


@record
class Thread:
    """The thread at the reference diameter along the axis: middle of its thickness [mm], its error, key and how it is known."""

    middle: float
    error: Account
    path: str
    measured: bool
    expanded: float


@record
class WormThread:
    """What the wires need of the worm."""

    starts: int
    module: float
    reference_diameter: float
    pressure_angle: float

    def thickness(self, size: float, wire: float) -> float:
        """Thickness for a size over wires [mm]. Raises: ValueError for a size no thread gives.  Source: worm.wires."""
        return wires.thickness_over_wires(
            size=size,
            starts=self.starts,
            axial_module=self.module,
            reference_diameter=self.reference_diameter,
            pressure_angle=self.pressure_angle,
            wire=wire,
        )


def thread(floor: Floor) -> Thread | Open | None:
    """The thread as it is best known: of what is measured the closer, else as drawn; None where the job has no worm.

    Source: the job file; worm.wires.
    """
    worm = floor.loaded.job.worm
    if worm is None:
        return None
    if worm.thread_thickness is None and worm.over_wires is None:
        return Open(("worm.thread_thickness",))
    found = [x for x in (of_thickness(floor, worm), of_wires(floor, worm)) if x is not None]
    known = [x for x in found if isinstance(x, Thread)]
    if not known:
        missing = tuple(dict.fromkeys(m for x in found if isinstance(x, Open) for m in x.missing))
        return Open(missing, "; ".join(x.because for x in found if isinstance(x, Open) and x.because))
    return min(known, key=lambda x: (not x.measured, x.expanded))


def of_thickness(floor: Floor, worm: Worm) -> Thread | Open | None:
    """From `thread_thickness`: where it is measured at another diameter, s(d1) = s + (d - d1) tan(alpha).

    None where it is not stated.  Source: straight flanks (ZA), geometry.
    """
    given = worm.thread_thickness
    if given is None:
        return None
    middle, error = size_error(given, Entry("worm, thickness of its thread", None, "worm.thread_thickness", ""))
    if given.at is not None:
        found = settled(floor, "reference_diameter")
        if isinstance(found, Open):
            return found
        if worm.pressure_angle is None:
            return Open(("worm.pressure_angle",))
        middle += (given.at - found[0]) * math.tan(worm.pressure_angle)
    return Thread(middle, error, "worm.thread_thickness", given.measured is not None, _expanded(given))


def of_wires(floor: Floor, worm: Worm) -> Thread | Open | None:
    """From `over_wires`, exact for straight axial flanks; its uncertainty times ds/dM, about tan(alpha).

    None where it is not stated.  Raises nothing; a size that no thread gives is open.  Source: worm.wires.
    """
    given = worm.over_wires
    if given is None:
        return None
    of = worm_thread(floor, worm)
    if isinstance(of, Open):
        return of
    size, error = size_error(given, Entry("worm, size over wires", None, "worm.over_wires", ""))
    try:
        middle = of.thickness(size, given.wire)
        rate = (of.thickness(size + STEP, given.wire) - of.thickness(size - STEP, given.wire)) / (2.0 * STEP)
    except ValueError as why:
        return Open(("worm.over_wires",), str(why))
    return Thread(middle, error * rate, "worm.over_wires", given.measured is not None, _expanded(given) * abs(rate))


def _expanded(given: Dimension) -> float:
    """Expanded uncertainty of a measured size [mm]; endless where none is stated."""
    return given.uncertainty if given.uncertainty is not None else math.inf


def worm_thread(floor: Floor, worm: Worm) -> WormThread | Open:
    """Worm for the wires, or what is missing; only flanks that are straight in the axial section, or nearly."""
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    if isinstance(found, Open) or worm.pressure_angle is None or worm.profile is None:
        missing = tuple(f"worm.{key}" for key in ("pressure_angle", "profile") if getattr(worm, key) is None)
        return Open((*(found.missing if isinstance(found, Open) else ()), *missing))
    bent = not_straight(floor, worm)
    if bent is not None:
        return bent
    return WormThread(round(found[0]), found[1], found[2], worm.pressure_angle)


def not_straight(floor: Floor, worm: Worm) -> Open | None:
    """Why this worm's flanks cannot be taken for straight ones; None where they can. Source: worm.profiles; `STRAIGHT`."""
    if worm.profile in (None, "ZA"):
        return None
    try:
        low = usual_root(floor)
        off = low if isinstance(low, Open) else departure(floor, worm, low)
    except OutOfRange as why:
        return Open(because=str(why))
    if isinstance(off, Open):
        return off
    if off is None or off <= STRAIGHT:
        return None
    return Open(
        because=f"the flank of this {worm.profile} worm stands up to {show(off, 'um', 0)} off a straight line, and only "
        f"flanks within {show(STRAIGHT, 'um', 0)} of one are computed"
    )


def thickness(found: Thread) -> float:
    """Thickness at the reference diameter, along the axis [mm]. Source: the job file; worm.wires."""
    return found.middle


def thickness_share(found: Thread | None, pitch: float | None) -> float | None:
    """Thickness at the reference diameter over the axial pitch, about a half; None while one of them is not known.

    Source: arithmetic.
    """
    return found.middle / pitch if found is not None and pitch is not None else None


def share_advice(floor: Floor, worm: Worm, found: Thread, pitch: float) -> str:
    """What a thread far from half the pitch most likely comes from, in this job's numbers. Source: the usual slips."""
    both = f"It comes out {floor.size(found.middle, 4)}, half the pitch is {floor.size(pitch / 2.0, 4)}."
    if found.path == "worm.over_wires" and worm.over_wires is not None:
        wire = floor.size(worm.over_wires.wire, 3)
        return f"{both} Measure the wires again ({wire} is written), and the size over them."
    at = worm.thread_thickness.at if worm.thread_thickness is not None else None
    if at is not None:
        return f"{both} Measure it again, and the diameter it was measured at ({floor.size(at, 3)} is written)."
    return f"{both} Measure it again, along the axis at the reference diameter, and check the pitch."


def thickness_miss(floor: Floor, worm: Worm) -> str | None:
    """Two measured thicknesses that contradict each other, in words; None where they agree or only one is known.

    Allowed are both expanded uncertainties and 2 um.  Source: our screening choice.
    """
    both = (of_thickness(floor, worm), of_wires(floor, worm))
    if not all(isinstance(x, Thread) and x.measured for x in both):
        return None
    flat, wired = (x for x in both if isinstance(x, Thread))
    apart = abs(flat.middle - wired.middle)
    allowed = sum(x.expanded for x in (flat, wired) if math.isfinite(x.expanded)) + ROUNDED
    if apart <= allowed:
        return None
    return (
        f"thread_thickness gives {floor.size(flat.middle, 4)} at the reference diameter, over_wires "
        f"{floor.size(wired.middle, 4)}, {show(apart, 'um', 0)} apart"
    )


def best_wire(floor: Floor, worm: Worm, found: Thread) -> float | Open:
    """Wire that touches this thread at the reference diameter [mm]. Source: worm.wires."""
    of = worm_thread(floor, worm)
    if isinstance(of, Open):
        return of
    with in_range:
        return wires.best_wire(
            starts=of.starts,
            axial_module=of.module,
            reference_diameter=of.reference_diameter,
            pressure_angle=of.pressure_angle,
            thread_thickness=found.middle,
        )


def wire(worm: Worm, best: float) -> float:
    """The wire as stated, else the best one rounded to 0.05 mm [mm]. Source: the job file."""
    return worm.over_wires.wire if worm.over_wires is not None else round(best / 0.05) * 0.05


def size_over_wires(floor: Floor, worm: Worm, found: Thread, wire: float) -> float | Open:
    """Size of this thread over such wires [mm]; the wire has to stand proud of the tip. Source: worm.wires, exact."""
    of = worm_thread(floor, worm)
    if isinstance(of, Open):
        return of
    if worm.tip_diameter is None:
        return Open(("worm.tip_diameter",))
    with in_range:
        return wires.over_wires(
            starts=of.starts,
            axial_module=of.module,
            reference_diameter=of.reference_diameter,
            pressure_angle=of.pressure_angle,
            thread_thickness=found.middle,
            wire=wire,
            tip_diameter=worm.tip_diameter,
        ).size


def which_groove(starts: float) -> str | None:
    """Where the third wire lies on a thread of several starts, in words; None for one start. Source: geometry of the helix.

    On the other side the groove of the same thread lies half a lead away, and its next turn a whole lead.
    """
    if round(starts) < 2:
        return None
    return (
        f"On {round(starts)} starts lay the two wires of one side {round(starts)} grooves apart and the third between them, "
        "in the groove of the same thread."
    )


_FLOOR = {"floor": "route.floor"}
_WORM = {**_FLOOR, "worm": ":"}
_FOUND = {**_WORM, "found": "worm.thread"}


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"worm.{name}", "worm", unit, digits, of, inputs, says)  # type: ignore[arg-type]


THREAD = (
    _row("thread", "", 0, thread, _FLOOR, "the thread as it is best known"),
    _row(
        "thickness", "mm", 4, thickness, {"found": "worm.thread"}, "thickness of the thread at the reference diameter"
    ),
    Quantity(
        "worm.thickness_share",
        "worm",
        "1",
        2,
        thickness_share,
        {"found": "settled worm.thread", "pitch": "settled worm.axial_pitch"},
        "thickness of the thread over the axial pitch",
        {"found": None, "pitch": None},
    ),
    _row(
        "share_advice",
        "",
        0,
        share_advice,
        {**_FOUND, "pitch": "worm.axial_pitch"},
        "what a thread far from half the pitch may come from",
    ),
    _row("thickness_miss", "", 0, thickness_miss, _WORM, "measured thicknesses that contradict each other"),
    _row("best_wire", "mm", 3, best_wire, _FOUND, "wire that touches at the reference diameter"),
    _row("wire", "mm", 3, wire, {"worm": ":", "best": "worm.best_wire"}, "wire that is measured over"),
    _row("over_wires", "mm", 4, size_over_wires, {**_FOUND, "wire": "worm.wire"}, "size of this thread over wires"),
    _row("which_groove", "", 0, which_groove, {"starts": "worm.starts"}, "where the third wire lies"),
)
