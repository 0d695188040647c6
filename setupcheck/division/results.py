"""What a division test comes to, as plain records. Angles rad, lengths mm; waves in the frame of the work.

Frame of the work: theta counter-clockwise from its mark seen from +z, deviation positive where that place of the work stands
further counter-clockwise than it should: a cos(h theta) + b sin(h theta), as the ledger has it.
"""

from __future__ import annotations

from setupcheck.division.amplitude import Length
from setupcheck.division.doubts import Step
from setupcheck.division.faces import Collimation
from setupcheck.division.points import Whole
from setupcheck.division.repeatability import Repeatability
from setupcheck.record import record


@record
class Interval:
    """A value and its 95 % interval."""

    value: float
    low: float
    high: float


@record
class Wave:
    """One wave round the work.

    name, harmonic  what it is, and how often it comes in one turn
    a, b            its vector [rad];  covariance (aa, ab, bb) [rad2] from nu degrees of freedom, widened as the interval is
    also            bound added straight for what the readings cannot show [rad]
    length          amplitude [rad], its interval; direction of the vector: the wave is highest at direction / harmonic
    open            why it is no answer, empty where it is one
    """

    name: str
    harmonic: float
    a: float
    b: float
    covariance: tuple[float, float, float]
    nu: float
    also: float
    length: Length
    open: str = ""

    @property
    def highest(self) -> float:
        """Where it is highest first [rad], from the work's mark."""
        return self.length.direction / self.harmonic

    @property
    def within(self) -> float | None:
        """Half the interval of that [rad]; None where it has no direction."""
        return None if self.length.within is None else self.length.within / self.harmonic


@record
class Flanks:
    """Both flanks of the first wave: mean (a, b), and clockwise less other flank (a, b), in the frame of the work [rad].

    covariance  of these four, row by row [rad2].  Teeth off their axis have the difference 2 tan(alpha) (-b, a) of the mean.
    """

    vector: tuple[float, float, float, float]
    covariance: tuple[tuple[float, ...], ...]


@record
class Apart:
    """The first wave taken apart by both flanks, where it is neither an eccentric ring's alone nor dividing alone.

    amount, within   teeth off their axis, and the 95 % half interval [mm];  direction, tooth  towards which [rad]
    divided          amplitude of what dividing made [rad];  highest  where that is highest [rad]
    """

    amount: float
    within: float
    direction: float
    tooth: int
    divided: float
    highest: float


@record
class Unseen:
    """A wave that these stations cannot show: why, and which waves it is taken for."""

    name: str
    harmonic: float
    why: str
    taken_for: tuple[str, ...]


@record
class Eccentric:
    """Axis of the teeth off the axis of use [mm]: how far with its interval, towards which direction [rad] and tooth.

    within  half the interval of the direction [rad], None where there is none
    flanks  both, one (known which), or unknown: then the direction is out by up to the pressure angle besides
    side    flank that was read, +1 counter-clockwise, -1 the other; 0 for both or unknown
    looks   what both flanks say: eccentric, division or undecided; empty with one
    """

    amount: Interval
    direction: float
    within: float | None
    tooth: int
    flanks: str
    side: int
    looks: str
    open: str = ""


@record
class Mean:
    """What was read at one station in one direction, zeros and drift taken off: place, deviation [rad], frame of the work.

    readings  how many, both faces of one sight counted once;  direction  +1 forward, -1 reverse, 0 not said
    """

    theta: float
    value: float
    readings: int
    direction: int


@record
class Flag:
    """A reading that stands far off the others: line, station [rad], by how much [rad]."""

    line: int
    theta: float
    off: float


@record
class Reduced:
    """Everything a division test says.

    verdict     told, or open: some answer is none, and `reasons` says why
    warnings    what the stations cannot tell apart;  limits  what else bounds the answers
    rows        readings;  stations, runs  different ones
    scatter     standard deviation of one reading [rad], nu its degrees of freedom;  stations_scatter  of places themselves
    range       largest less smallest mean of a station, drift taken off [rad], the larger of both directions
    per_mean    fewest readings that such a mean rests on, both faces of one sight counted once
    range_without_first  the same with the first wave taken off as well, None where it is not fitted
    drift       over the whole test [rad];  closure  last less first reading of the first station, None where not repeated
    reversal    forward less reverse [rad], None with why in `no_reversal`
    flanks      both flanks of the first wave, None where one was read
    apart       the first wave taken apart by them, None where they show one thing alone
    places      stations that are whole pitches apart from the first
    worm        the wave of the own worm, None where it is not seen
    sighting    standard deviation of a direction sighted once in both faces [rad], degrees of freedom; None with one face
    without     the waves fitted without the flagged readings
    repaired    the numbers hold as if what `whole` and `steps` name were put right
    means       of all stations, direction by direction
    """

    verdict: str
    reasons: tuple[str, ...]
    warnings: tuple[str, ...]
    limits: tuple[str, ...]
    rows: int
    stations: int
    places: int
    runs: int
    waves: tuple[Wave, ...]
    unseen: tuple[Unseen, ...]
    eccentric: Eccentric | None
    flanks: Flanks | None
    apart: Apart | None
    worm: Wave | None
    scatter: float
    nu: int
    stations_scatter: float
    range: float
    per_mean: int
    range_without_first: float | None
    drift: Interval | None
    closure: float | None
    reversal: Interval | None
    no_reversal: str
    repeatability: Repeatability | str
    collimation: Collimation | None
    sighting: tuple[float, int] | None
    flags: tuple[Flag, ...]
    without: tuple[Wave, ...]
    whole: tuple[Whole, ...]
    steps: tuple[Step, ...]
    repaired: bool
    against: bool
    means: tuple[Mean, ...] = ()
