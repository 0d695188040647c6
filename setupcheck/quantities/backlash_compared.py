"""Backlash as read beside its plan: places, end float, mean, wave and tight place, and what to do. Lengths mm, angles rad."""

from __future__ import annotations

from setupcheck.division import backlash_wave as waves
from setupcheck.jobfile.backlash_read import BacklashRead
from setupcheck.jobfile.worm import Mesh
from setupcheck.quantities import backlash_read
from setupcheck.quantities.backlash import REFERENCE, Chain, chain, warmed
from setupcheck.quantities.backlash_read import PATH, AsRead
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.requirements import Stack, read_stack
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

HEARS = ("backlash", "backlash-swing")
"""Requirements that name the axis the plan of the readings is reckoned about, the first of them first."""
SHOWN = "the worm's own run-out stands in each of them, and gaps between them are not seen"
"""What places of a backlash cannot show. Source: only the pair of flanks at the worm is felt."""


def given(mesh: Mesh) -> BacklashRead | None:
    """Backlash as the planner read it; None where it was not. Source: the job file."""
    return mesh.backlash_read


def pair(floor: Floor, mesh: Mesh) -> Drive | Open | None:
    """Worm and wheel as numbers, where a backlash was read. Source: the job file."""
    return drive(floor) if mesh.backlash_read is not None else None


def places(given: BacklashRead, found: Drive) -> float | Open:
    """Places read round the wheel; open with fewer than four, or with a third of a turn left out.

    Source: three unknowns and one to spare, division.backlash_wave.
    """
    lacks = backlash_read.lacking(given, found.teeth)
    return Open((f"{PATH}.readings",), lacks) if lacks else float(len(given.readings))


def usual_places(found: Drive) -> float:
    """Places that are usually read, or every gap of a wheel of fewer. Source: common practice."""
    return float(min(waves.USUAL, found.teeth))


def end_float(floor: Floor, given: BacklashRead) -> float | Open | None:
    """End float of the worm that stands in each reading, along the reference circle [mm]; None where it was taken out.

    Open where nobody says whether it is in them, or how much it is.  Source: rack and wheel, geometry.
    """
    if given.end_float == "taken-out" or not given.readings:
        return None
    lost = tuple(path for path in backlash_read.missing(floor, given) if "end_float" in path)
    if lost:
        return Open(lost)
    return backlash_read.end_float_in(floor, given) or None


def smallest(floor: Floor, given: BacklashRead, found: Drive) -> float | None:
    """Smallest reading along the reference circle, as read [mm]. Source: the job file."""
    factor = backlash_read.factor_of(floor, given.along, found, f"{PATH}.along")
    return min((value / factor for value in given.by_gap.values()), default=None)


def as_read(floor: Floor, found: Drive) -> AsRead | Open | None:
    """The readings along the reference circle, with their wave. Source: quantities.backlash_read, least squares."""
    return backlash_read.as_read(floor, found)


def mean(read: AsRead) -> float:
    """Mean backlash of the turn along the reference circle [mm]. Source: least squares."""
    return read.wave.mean


def least(read: AsRead) -> float:
    """Smallest backlash read, end float taken out [mm]. Source: the job file."""
    return read.arcs[read.tightest]


def largest(read: AsRead) -> float:
    """Largest backlash read, end float taken out [mm]. Source: the job file."""
    return max(read.arcs.values())


def tightest(read: AsRead) -> float:
    """The gap that reads least. Source: the job file."""
    return float(read.tightest)


def uncertainty(read: AsRead) -> float:
    """Expanded uncertainty of one reading along the reference circle, k = 2 [mm]. Source: the job file."""
    return read.uncertainty


def swing(read: AsRead) -> float:
    """What the backlash swings over a turn: twice the amplitude of its wave, or the range where that is not all [mm].

    Source: least squares.
    """
    return read.swing[0]


def swing_uncertainty(read: AsRead) -> float:
    """Expanded uncertainty of that swing, k = 2 [mm]. Source: covariance of least squares, JCGM 100:2008 H.3."""
    return read.swing[1]


def off_wave(read: AsRead) -> float:
    """How far the reading farthest beside the wave stands off it [mm]. Source: least squares."""
    return read.off_wave


def eccentricity(read: AsRead) -> float:
    """Eccentricity of the ring of gaps that makes the wave, amplitude / (2 tan(alpha)) [mm]. Source: rack on the circle."""
    return read.wave.amplitude / read.slope


def high_spot(read: AsRead) -> float | None:
    """The gap where the teeth stand farthest out, by the wave; None where the wave is within its uncertainty.

    Source: least squares; tight is high, geometry.
    """
    return float(read.high_spot) if read.is_proved else None


def says(read: AsRead) -> str:
    """Where it is tight and what that tells, as a sentence without its end. Source: least squares."""
    tight = f"tightest at gap {read.tightest} as read"
    if not read.is_proved:
        if max(read.arcs.values()) - min(read.arcs.values()) <= read.uncertainty:
            return "no tight place is proved: the readings differ by no more than one is known to"
        return f"{tight}; no wave is proved, its size is within its uncertainty"
    return f"{tight}, by the wave near gap {read.high_spot}: there the teeth stand farthest out"


def binds(read: AsRead) -> str | None:
    """Places where the dial did not travel, as a sentence without its end; None where it did. Source: the job file."""
    still = [gap for gap, value in sorted(read.given.by_gap.items()) if value == 0.0]
    named = ", ".join(f"gap {gap}" for gap in still)
    return f"no play at {named}: whether it only touches there or binds cannot be read" if still else None


def sight(read: AsRead) -> str:
    """What so many places cannot show, as a sentence without its end. Source: sampling of waves."""
    most = (len(read.arcs) - 1) // 2
    seen = "one wave a turn, an oval ring looks like scatter" if most < 2 else f"waves of up to {most} a turn at best"
    return f"{len(read.arcs)} places tell {seen}; {SHOWN}"


# -- against the plan ----------------------------------------------------------------------------------------------------


@record(eq=False)
class Planned:
    """What the plan gives where it was read, in the room and along the reference circle [mm].

    low, high  worst ends of the mean of a turn;  eccentricity  largest of the ring of gaps, with what single gaps scatter
    """

    low: float
    high: float
    eccentricity: float


def planned(floor: Floor, read: AsRead) -> Planned | Open | None:
    """The plan of what was read; None where no requirement names its axis, and for a wheel that no single point cuts.

    A room that is not at 20 degC adds what it may move the backlash by.  Source: quantities.backlash, worst case.
    """
    stack = _asked(floor)
    if stack is None:
        return None
    made = chain(floor, stack)
    if isinstance(made, Open):
        return made if made.missing else None
    missing = tuple(dict.fromkeys((*made.cold.undetermined(), *made.offset.undetermined())))
    if missing:
        return Open(missing)
    room, mean = floor.loaded.job.room, made.cold
    if room != REFERENCE:
        warm = warmed(floor, made.found, (room,))
        if isinstance(warm, Open):
            return warm
        mean += warm.moved
    low, high = mean.span()
    return Planned(low, high, made.offset.largest() + _scatter(made))


def _asked(floor: Floor) -> Stack | None:
    """The requirement whose axis the readings speak of."""
    asked = floor.loaded.job.require
    order = [i for what in HEARS for i, one in enumerate(asked) if one.what == what]
    each = (read_stack(floor, i) for i in order)
    return next((s for s in each if s.about and backlash_read.ruling(floor, s) is not None), None)


def _scatter(made: Chain) -> float:
    pattern = made.teeth.pattern
    return max((s.bound for s in pattern.scatter if s.goes_outward), default=0.0) if pattern is not None else 0.0


def miss(read: AsRead, of: Planned) -> float:
    """How far the mean as read is off the middle of the plan, either way [mm]. Source: quantities.backlash."""
    return abs(read.wave.mean - (of.low + of.high) / 2.0)


def allowed(read: AsRead, of: Planned) -> float:
    """What the errors of the plan and the uncertainty of a reading may move the mean by [mm]. Source: worst case."""
    return (of.high - of.low) / 2.0 + read.uncertainty


def planned_eccentricity(of: Planned) -> float:
    """Largest eccentricity of the ring of gaps that the plan has [mm]. Source: straight sum of the causes, the ledger."""
    return of.eccentricity


def swing_allowed(read: AsRead, of: Planned) -> float:
    """What the plan's eccentricity and the uncertainty of the wave may swing the backlash by [mm]: 4 e tan(alpha) + U.

    Source: worst case of the ledger.
    """
    return 2.0 * read.slope * of.eccentricity + read.swing[1]


def advice(floor: Floor, read: AsRead, of: Planned) -> str | None:
    """What to do about a mean off its plan, in this job's numbers; None where it is not. Source: rack on the circle."""
    off = read.wave.mean - (of.low + of.high) / 2.0
    if abs(off) <= allowed(read, of):
        return None
    more, axes = floor.fine(abs(off)), floor.fine(abs(off) / read.slope, 0)
    again = f"Read it again, the worm held to one stop; {more} {'more' if off > 0.0 else 'less'} than planned"
    if off > 0.0:
        return (
            f"{again} is as if the axes stood {axes} too far apart. If it stays, measure end float, thread, insert and centre "
            "distance before any gap is blamed."
        )
    return (
        f"{again} is as if the axes stood {axes} too close together. If it stays, look for burrs, measure thread, insert and "
        "centre distance; deeper gaps are the last resort."
    )


def swing_advice(floor: Floor, read: AsRead, of: Planned) -> str | None:
    """What takes away a swing beyond the plan; None where it swings no more than planned. Source: geometry."""
    return truing(floor, read) if read.swing[0] > swing_allowed(read, of) else None


def truing(floor: Floor, read: AsRead) -> str:
    """What takes the swing away, in this job's numbers: teeth that stand out at one gap are moved to the one across, by e.

    Source: geometry, least squares.
    """
    if not read.is_proved or read.swing[0] > 2.0 * read.wave.amplitude:
        return "Read the places that stand off again: one wave a turn is not all there is, and truing alone will not do it."
    e, across = floor.fine(read.wave.amplitude / read.slope), waves.nearest_gap(read.wave.loosest, read.count)
    return (
        f"The ring of teeth is {e} off its axis towards gap {read.high_spot}. True the wheel on its seat by that much towards "
        f"gap {across}, or mount it so that its high spot lies opposite that of the shaft; leave the axes where the tight place "
        "still turns freely."
    )


def off_wave_advice(floor: Floor, read: AsRead) -> str | None:
    """Which reading stands off the wave, and what may do that; None where none does. Source: least squares."""
    if read.off_wave <= read.uncertainty:
        return None
    gap = read.wave.farthest
    off = read.wave.left[gap]
    way = "more" if off > 0.0 else "less"
    return (
        f"Gap {gap} reads {floor.fine(abs(off))} {way} than the wave. Read it again at the same place of the worm; if it stays, "
        f"look for {'a gap cut too deep' if off > 0.0 else 'a burr or a gap cut too shallow'}, an oval ring, run-out of the worm."
    )


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"read.{name}", "mesh", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_FLOOR, _GIVEN, _FOUND = {"floor": "route.floor"}, {"given": "read.given"}, {"found": "read.pair"}
_READ = {"read": "read.as_read"}
_BOTH = {**_READ, "of": "read.plan"}

AS_READ = (
    _row("given", "", 0, given, {"mesh": ":"}, "backlash as the planner read it"),
    _row("pair", "", 0, pair, {**_FLOOR, "mesh": ":"}, "worm and wheel as numbers, where backlash was read"),
    _row("places", "1", 0, places, {**_GIVEN, **_FOUND}, "places round the wheel that were read"),
    _row("usual_places", "1", 0, usual_places, _FOUND, "places that are usually read"),
    _row("end_float", "um", 1, end_float, {**_FLOOR, **_GIVEN}, "end float of the worm in each reading"),
    _row("smallest", "um", 1, smallest, {**_FLOOR, **_GIVEN, **_FOUND}, "smallest reading, end float and all"),
    _row("as_read", "", 0, as_read, {**_FLOOR, **_FOUND}, "the readings along the reference circle, with their wave"),
    _row("mean", "um", 1, mean, _READ, "mean backlash as read"),
    _row("least", "um", 1, least, _READ, "smallest backlash as read"),
    _row("largest", "um", 1, largest, _READ, "largest backlash as read"),
    _row("tightest", "1", 0, tightest, _READ, "gap that reads least"),
    _row("uncertainty", "um", 1, uncertainty, _READ, "uncertainty of one reading, k = 2"),
    _row("swing", "um", 1, swing, _READ, "swing of the backlash over a turn as read"),
    _row("swing_uncertainty", "um", 1, swing_uncertainty, _READ, "its expanded uncertainty, k = 2"),
    _row("off_wave", "um", 1, off_wave, _READ, "reading farthest beside the wave"),
    _row("eccentricity", "um", 1, eccentricity, _READ, "eccentricity of the gaps that makes the wave"),
    _row("high_spot", "1", 0, high_spot, _READ, "gap where the teeth stand farthest out"),
    _row("says", "", 0, says, _READ, "where it is tight, in words"),
    _row("binds", "", 0, binds, _READ, "places without any play"),
    _row("sight", "", 0, sight, _READ, "what so many places cannot show"),
    _row("plan", "", 0, planned, {**_FLOOR, **_READ}, "the plan of what was read"),
    _row("miss", "um", 1, miss, _BOTH, "mean as read against the middle of the plan"),
    _row("allowed", "um", 1, allowed, _BOTH, "what plan and reading may move the mean by"),
    _row("planned_eccentricity", "um", 1, planned_eccentricity, {"of": "read.plan"}, "eccentricity that the plan has"),
    _row("swing_allowed", "um", 1, swing_allowed, _BOTH, "what plan and reading may swing it by"),
    _row("advice", "", 0, advice, {**_FLOOR, **_BOTH}, "what to do about a mean off its plan"),
    _row("swing_advice", "", 0, swing_advice, {**_FLOOR, **_BOTH}, "what to do about a swing beyond the plan"),
    _row("truing", "", 0, truing, {**_FLOOR, **_READ}, "what takes the swing away"),
    _row("off_wave_advice", "", 0, off_wave_advice, {**_FLOOR, **_READ}, "what to do about a reading off the wave"),
)
