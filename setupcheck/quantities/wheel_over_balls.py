"""The finished wheel over balls: its size as planned and without backlash, and whether what was measured fits the plan. mm."""

from __future__ import annotations

import math

from setupcheck.jobfile.worm import Mesh
from setupcheck.ledger.account import Account
from setupcheck.notation import show
from setupcheck.quantities import gap_measured
from setupcheck.quantities.backlash import gap_as_made, gap_of_insert
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.drive import Drive, WheelCut, drive, middle, wheel_cut
from setupcheck.quantities.gap_measured import MeasuredGap
from setupcheck.quantities.shop import Floor
from setupcheck.record import record
from setupcheck.worm import over_balls


def pair(floor: Floor) -> Drive | Open | None:
    """Worm and wheel as numbers; None without a ball to measure over. Source: the job file."""
    mesh = floor.loaded.job.mesh
    return drive(floor) if mesh is not None and mesh.ball_used is not None else None


def best_ball(floor: Floor) -> float | Open | None:
    """Ball that touches near the reference circle [mm], whatever ball is stated. Source: worm.over_balls."""
    found = drive(floor)
    if not isinstance(found, Drive):
        return found
    with in_range:
        return over_balls.best_ball(
            wheel_diameter=found.wheel_diameter,
            pressure_angle=found.pressure_angle,
            lead_angle=found.lead_angle,
            gap=_tight(found),
        )


def _tight(found: Drive) -> float:
    """Gap at the reference circle that just takes the thread at this centre distance [mm]: s - 2 (a - r1 - r2) tan(alpha)."""
    apart = found.centre_distance - (found.reference_diameter + found.wheel_diameter) / 2.0
    return found.thread - 2.0 * apart * math.tan(found.pressure_angle)


def over_tight(mesh: Mesh, found: Drive) -> float:
    """Size over the balls of a wheel that has no backlash in its housing [mm]. Source: worm.over_balls."""
    return _over(mesh, found, _tight(found))


def over_planned(floor: Floor, mesh: Mesh, found: Drive) -> float | Open | None:
    """Size over the balls of a wheel cut by the insert as stated, at its planned depth [mm].

    None where no single point cuts it.  Source: worm.over_balls; worm.insert turned round.
    """
    cut = wheel_cut(floor, found)
    if not isinstance(cut, WheelCut):
        return cut
    if cut.cutter.width is None:
        return Open((f"{cut.cutter_path}.width",))
    return _over(mesh, found, gap_of_insert(floor, cut, middle(cut.cutter.width)))


def _over(mesh: Mesh, found: Drive, gap: float) -> float:
    assert mesh.ball_used is not None
    with in_range:
        seat = over_balls.over_balls(
            starts=found.starts,
            axial_module=found.module,
            teeth=found.teeth,
            pitch_diameter=found.pitch_diameter,
            pressure_angle=found.pressure_angle,
            gap=gap,
            ball=mesh.ball_used,
        )
    if abs(seat.contact_diameter - found.wheel_diameter) > 1.8 * found.module:
        raise OutOfRange(f"a ball of {show(mesh.ball_used, 'mm', 3)} touches beside the flanks")
    return seat.size


# -- measured against the plan ------------------------------------------------------------------------------------------


@record
class Compared:
    """The wheel as measured beside what insert, depth and growth make of it.

    gap, size  what they make, in the middle of their errors: arc at the reference circle, and over the balls
    miss       size measured less that size;  allowed  what their errors, the measurement and the scatter of gaps may add up to
    slope      of the gap over the depth, 2 tan(alpha)
    """

    measured: MeasuredGap
    gap: float
    size: float
    miss: float
    allowed: float
    slope: float

    def told(self) -> str:
        """Both sizes in words."""
        made, is_ = show(self.size, "mm", 4), show(self.measured.size, "mm", 4)
        return f"{made} over balls by insert, depth and growth, {is_} measured"

    @property
    def wider(self) -> float:
        """Gap measured less the gap that they make [mm]."""
        return self.measured.gap - self.gap


def measured(floor: Floor, found: Drive) -> MeasuredGap | Open | None:
    """The gap of the wheel as measured over balls; None where it is not. Source: quantities.gap_measured."""
    cut = wheel_cut(floor, found)
    return gap_measured.measured_gap(floor, found, cut if isinstance(cut, WheelCut) else None)


def gap(known: MeasuredGap) -> float:
    """Gap of the finished wheel at its reference circle, from its size over balls [mm]. Source: worm.over_balls turned round."""
    return known.gap


def gap_uncertainty(known: MeasuredGap) -> float:
    """Uncertainty of that gap, expanded [mm]: that of the size times ds2/dM. Source: worm.over_balls, its own derivative."""
    return known.uncertainty * abs(known.per_size)


def compared(floor: Floor, mesh: Mesh, found: Drive, known: MeasuredGap) -> Compared | Open | None:
    """The wheel as measured beside its plan; None where no single point cuts it.

    Source: quantities.backlash for the gap and its worst case; worm.over_balls.
    """
    cut, teeth = wheel_cut(floor, found), floor.now(found.wheel)
    if not isinstance(cut, WheelCut):
        return cut
    if teeth is None:
        return Open((cut.path,))
    made = gap_as_made(floor, cut, teeth)
    if isinstance(made, Open):
        return made
    slope = 2.0 * math.tan(found.pressure_angle)
    beside = known.account(teeth.pattern, slope)
    missing = tuple(dict.fromkeys(made.undetermined() + beside.undetermined()))
    if missing:
        return Open(missing)
    low, high = made.span()
    planned = (low + high) / 2.0
    size, scatter = _over(mesh, found, planned), _half(beside) - _half(known.error)
    allowed = ((high - low) / 2.0 + scatter) / abs(known.per_size) + known.uncertainty
    return Compared(known, planned, size, known.size - size, allowed, slope)


def _half(account: Account) -> float:
    low, high = account.span()
    return (high - low) / 2.0


def planned_gap(of: Compared) -> float:
    """Gap that insert, depth and growth make, in the middle of their errors [mm]. Source: quantities.backlash."""
    return of.gap


def miss(of: Compared) -> float:
    """How far the size over balls is off the one that insert, depth and growth make, either way [mm]. Source: worm.over_balls."""
    return abs(of.miss)


def allowed(of: Compared) -> float:
    """What the errors of insert, depth and growth, and the measurement, may move the size over balls by [mm].

    Their worst case over |ds2/dM|, and the expanded uncertainty of the size.  Source: quantities.backlash, worst case.
    """
    return of.allowed


def advice(floor: Floor, of: Compared) -> str | None:
    """What to do about a wheel that is not what insert and depth make, in this job's numbers; None where it is.

    Depth still to be taken: what the gap lacks over 2 tan(alpha).  Source: rack rolling on the reference circle.
    """
    if abs(of.miss) <= of.allowed:
        return None
    again = f"Measure it again; {floor.size(of.size)} over balls of {floor.size(of.measured.ball)} is what they make."
    off, deep = floor.fine(abs(of.wider)), floor.fine(abs(of.wider) / of.slope, 0)
    if of.wider < 0.0:
        return (
            f"{again} If it stays, the gaps are {off} too narrow: cut {deep} deeper on the radius with the same insert, or "
            "measure the insert's width."
        )
    return (
        f"{again} If it stays, the gaps are {off} too wide, as if cut {deep} too deep: measure the insert's width before the "
        "next wheel. The backlash is that of the gaps as measured."
    )


_MESH = {"floor": "route.floor", "mesh": ":"}
_FOUND = {"found": "mesh.pair"}
_KNOWN = {"known": "mesh.measured"}
_OF = {"of": "mesh.compared"}


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"mesh.{name}", "mesh", unit, digits, of, inputs, says)  # type: ignore[arg-type]


OVER_BALLS = (
    _row("pair", "", 0, pair, {"floor": "route.floor"}, "worm and wheel as numbers, where a ball is stated"),
    _row("best_ball", "mm", 2, best_ball, {"floor": "route.floor"}, "ball that touches near the reference circle"),
    _row("over_balls", "mm", 4, over_planned, {**_MESH, **_FOUND}, "size over balls as planned"),
    _row("over_balls_tight", "mm", 4, over_tight, {"mesh": ":", **_FOUND}, "size over balls without backlash"),
    _row("measured", "", 0, measured, {"floor": "route.floor", **_FOUND}, "the wheel as measured over balls"),
    _row("measured_gap", "mm", 4, gap, _KNOWN, "gap of the wheel as measured"),
    _row("measured_gap_uncertainty", "um", 1, gap_uncertainty, _KNOWN, "uncertainty of the gap measured"),
    _row("compared", "", 0, compared, {**_MESH, **_FOUND, **_KNOWN}, "the wheel as measured beside its plan"),
    _row("planned_gap", "mm", 4, planned_gap, _OF, "gap that insert, depth and growth make"),
    _row("measured_miss", "um", 0, miss, _OF, "size over balls against what insert and depth make"),
    _row("measured_allowed", "um", 0, allowed, _OF, "what insert, depth and measurement may move it by"),
    _row("measured_advice", "", 0, advice, {"floor": "route.floor", **_OF}, "what to do about a wheel off its plan"),
)
