"""Backlash of the finished wheel as read place by place: along the reference circle, its wave, what then rules. mm, rad.

Where enough places were read they take the place of the computed backlash: the least and the largest of a turn, with the
uncertainty of a reading, and what the temperatures of service add.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from setupcheck.division import backlash_wave as waves
from setupcheck.jobfile.backlash_read import BacklashRead
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.notation import NotationError, length, show
from setupcheck.quantities.book import Open
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.relations import too_far_off
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.record import record
from setupcheck.worm.geometry import normal_pressure_angle

PATH = "mesh.backlash_read"
NAME = "wheel, its backlash as read"


@record(eq=False)
class AsRead:
    """Backlash along the reference circle at some gaps.

    arcs         by gap, the end float taken out [mm];  uncertainty  of one, expanded [mm]
    end_float    that was taken out of each [mm];  slope  of the backlash over the distance of the axes, 2 tan(alpha)
    wave         mean and wave of one a turn
    """

    given: BacklashRead
    count: int
    arcs: Mapping[int, float]
    uncertainty: float
    end_float: float
    slope: float
    wave: waves.Wave

    @property
    def off_wave(self) -> float:
        """How far the reading farthest beside the wave stands off it [mm]."""
        return abs(self.wave.left[self.wave.farthest])

    @property
    def ends(self) -> tuple[float, float, float]:
        """Least and largest backlash of the turn, and the expanded uncertainty of both [mm].

        Each end is the reading or the wave between the readings, whichever reaches farther.  Source: least squares.
        """
        wave, u = self.wave, self.uncertainty
        low, high = wave.mean - wave.amplitude, wave.mean + wave.amplitude
        shares = (1.0, wave.spread_at(wave.loosest), wave.spread_at(wave.loosest + math.pi))
        return min(low, *self.arcs.values()), max(high, *self.arcs.values()), u * max(shares)

    @property
    def swing(self) -> tuple[float, float]:
        """What the backlash swings over a turn, and its expanded uncertainty [mm].

        Twice the amplitude; where a reading stands off the wave by more than its uncertainty, the range of the readings if
        that is larger, since the wave then is not all there is.  Source: least squares; the second is our choice.
        """
        wave, reach = self.wave, max(self.arcs.values()) - min(self.arcs.values())
        if self.off_wave > self.uncertainty and reach > 2.0 * wave.amplitude:
            return reach, math.sqrt(2.0) * self.uncertainty
        return 2.0 * wave.amplitude, 2.0 * wave.amplitude_spread * self.uncertainty

    @property
    def tightest(self) -> int:
        """The gap that reads least."""
        return min(self.arcs, key=lambda gap: (self.arcs[gap], gap))

    @property
    def is_proved(self) -> bool:
        """Whether the wave stands above its own uncertainty, so that its direction means something."""
        return self.wave.amplitude > self.wave.amplitude_spread * self.uncertainty

    @property
    def high_spot(self) -> int:
        """The gap where the teeth stand farthest out, by the wave."""
        return waves.nearest_gap(self.wave.loosest + math.pi, self.count)

    def told(self) -> str:
        """Mean and wave in words, as the working prints them."""
        mean, swing = show(self.wave.mean, "um", 1), show(2.0 * self.wave.amplitude, "um", 1)
        return f"{len(self.arcs)} places, mean {mean} along the reference circle, a wave of {swing} once a turn"


def factor_of(floor: Floor, said: str, found: Drive, path: str) -> float:
    """From the arc at the reference circle to what was said: circular, normal, or at a radius.

    Raises: JobError for a word that is none.  Source: j_n = j_t cos(alpha_n) cos(g), ISO 1122-2 quantities (from memory).
    """
    if said == "circular":
        return 1.0
    if said == "normal":
        return math.cos(normal_pressure_angle(found.pressure_angle, found.lead_angle)) * math.cos(found.lead_angle)
    try:
        radius = length(said.removeprefix("at").strip(), units=floor.loaded.job.units)
    except NotationError:
        radius = 0.0
    if not said.startswith("at") or radius <= 0.0:
        raise floor.problem(
            path,
            f"'{said}' is no way to state a backlash",
            "Write circular, normal, or at and a radius, as in at 50 mm",
        )
    return radius / (found.wheel_diameter / 2.0)


def lacking(given: BacklashRead, count: int) -> str:
    """Why these places cannot show one turn; empty where they can. Source: division.backlash_wave."""
    gaps = tuple(given.by_gap)
    if not gaps:
        return "no place is read yet: read eight round the wheel, four at the least"
    if len(gaps) < waves.FEWEST:
        return f"backlash is read at {_places(len(gaps))}, and a turn shows at four at the least, eight are usual"
    wide, one, other = waves.widest_stretch(gaps, count)
    if wide > waves.WIDEST + 1e-9:
        return f"no backlash is read between gap {one} and gap {other}, more than a third of a turn"
    return ""


def _places(number: int) -> str:
    return f"{number} place{'s' if number > 1 else ''}"


def missing(floor: Floor, given: BacklashRead) -> tuple[str, ...]:
    """Keys that the readings do not mean anything without: their uncertainty, and whether the worm's end float is in them."""
    worm = floor.loaded.job.worm
    known = worm.end_float if worm is not None else None
    return (
        *((f"{PATH}.uncertainty",) if given.uncertainty is None else ()),
        *((f"{PATH}.end_float",) if given.end_float is None and known != 0.0 else ()),
        *(("worm.end_float",) if given.end_float == "included" and known is None else ()),
    )


def end_float_in(floor: Floor, given: BacklashRead) -> float:
    """End float of the worm that stands in each reading, as arc at the reference circle [mm].

    A worm that moves along its axis by x turns the wheel by x/r2, as a rack does, so it is read as x along the reference
    circle, the whole of it where the rocking pushes the worm from stop to stop.  Source: rack and wheel, geometry.
    """
    worm = floor.loaded.job.worm
    return (worm.end_float or 0.0) if worm is not None and given.end_float == "included" else 0.0


def as_read(floor: Floor, found: Drive) -> AsRead | Open | None:
    """The readings along the reference circle; None where there are none to speak of.

    Open as well where their wave is that of a ring too far off its axis.  Source: the job file, least squares.
    """
    mesh = floor.loaded.job.mesh
    given = mesh.backlash_read if mesh is not None else None
    if given is None:
        return None
    lacks = lacking(given, found.teeth)
    if lacks:
        return Open((f"{PATH}.readings",), lacks)
    lost = missing(floor, given)
    if lost or given.uncertainty is None:
        return Open(lost)
    factor, lost_motion = factor_of(floor, given.along, found, f"{PATH}.along"), end_float_in(floor, given)
    arcs = {gap: value / factor - lost_motion for gap, value in given.by_gap.items()}
    least = min(arcs, key=lambda gap: arcs[gap])
    if arcs[least] < 0.0 and lost_motion > 0.0:
        read, end = floor.fine(arcs[least] + lost_motion), floor.fine(lost_motion)
        return Open(
            (f"{PATH}.end_float",),
            f"gap {least} reads {read} along the reference circle, less than the worm's end float of {end}: it cannot be in it",
        )
    wave, slope = waves.fitted(arcs, found.teeth), 2.0 * math.tan(found.pressure_angle)
    if beside := too_far_off(wave.amplitude / slope, found.wheel_diameter / 2.0):
        return Open((f"{PATH}.readings",), beside)
    return AsRead(given, found.teeth, arcs, given.uncertainty / factor, lost_motion, slope, wave)


def ruling(floor: Floor, stack: Stack) -> AsRead | Open | None:
    """The readings where they take the place of the plan of this requirement: the mesh's finished wheel, about its own axis.

    None with too few of them, which is a finding of its own while the plan goes on to count.  Source: the job file.
    """
    mesh, place = floor.loaded.job.mesh, floor.loaded.job.place
    given = mesh.backlash_read if mesh is not None else None
    if given is None or mesh is None or not stack.of:
        return None
    ref, wheel = floor.loaded.ref(stack.of), floor.loaded.ref(mesh.wheel)
    if (ref.part, ref.surface, ref.op) != (wheel.part, wheel.surface, wheel.op):
        return None
    axis = place.axis if place is not None else None
    if axis is not None and stack.about and floor.loaded.ref(stack.about) != floor.loaded.ref(axis):
        return None
    found = drive(floor)
    if not isinstance(found, Drive):
        return found
    return None if lacking(given, found.teeth) else as_read(floor, found)


def apart(floor: Floor, farther: float) -> BacklashRead | None:
    """The readings as they would be with the axes so much farther apart [mm]; None where there are none.

    2 tan(alpha) along the reference circle for each of it.  Source: rack rolling on the wheel's reference circle.
    """
    mesh, found = floor.loaded.job.mesh, drive(floor)
    given = mesh.backlash_read if mesh is not None else None
    if given is None or not isinstance(found, Drive):
        return given
    more = farther * 2.0 * math.tan(found.pressure_angle) * factor_of(floor, given.along, found, f"{PATH}.along")
    return given.model_copy(update={"readings": {name: value + more for name, value in given.readings.items()}})


def over_a_turn(read: AsRead) -> tuple[Account, Account]:
    """(middle between the ends with the uncertainty of a reading, what swings about it as an eccentricity) [mm].

    Source: JCGM 100:2008, k = 2 is two standard deviations; the swing is known, only its direction is not asked for.
    """
    low, high, u = read.ends
    reading = Cause(NAME, "gauss", spread=u / 2.0, mode="measured", paths=(PATH,))
    middle = Account.of(reading).plus_constant((low + high) / 2.0)
    return middle, _turned(f"{NAME}, over the turn", (high - low) / 2.0 / read.slope, 0.0)


def swinging(read: AsRead) -> Account:
    """The eccentricity that would swing the backlash as much as it was read to [mm]: swing / (4 tan(alpha))."""
    swing, u = read.swing
    return _turned(f"{NAME}, its swing", swing / 2.0 / read.slope, u / 2.0 / read.slope / 2.0)


def _turned(name: str, radius: float, spread: float) -> Account:
    if radius <= 0.0 and spread <= 0.0:
        return Account()
    return Account.of(Cause(name, "ring", high=radius, spread=spread, mode="measured", paths=(PATH,)))
