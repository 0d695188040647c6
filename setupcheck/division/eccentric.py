"""From waves to trade terms: how far the teeth are off their axis and towards which tooth. Angles rad, lengths mm.

Teeth whose axis is off by e towards phi, a worm at a fixed distance:   (as in the ledger, side +1 where the worm pushes on
the counter-clockwise wall of a gap, which turns the work counter-clockwise)

    one flank    r delta(theta) = (e / cos alpha) sin(phi - theta - side alpha)
    their mean   r delta(theta) = e sin(phi - theta)
    side +1 less side -1        = - 2 e tan(alpha) cos(phi - theta)

so the wave of one flank is highest at phi - 90 deg - side alpha, the mean at phi - 90 deg; a wave that comes from the
dividing alone is the same on both flanks.
Sources: geometry, derived here; signs held against ledger/teeth.py in the tests.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.amplitude import t_at
from setupcheck.division.angles import once_round
from setupcheck.division.design import Term
from setupcheck.division.fit import Fit
from setupcheck.division.points import Points
from setupcheck.division.results import Apart, Eccentric, Flanks, Interval, Wave
from setupcheck.physics.student_t import f_above
from setupcheck.record import record

Reals = NDArray[np.floating]


@record
class Wheel:
    """count teeth; radius where the worm meets them [mm], pressure_angle transverse [rad], None where not stated.

    start, turn  direction of the first gap [rad] and the sense in which gaps follow, as in the ledger
    """

    count: int
    radius: float | None = None
    pressure_angle: float | None = None
    start: float = 0.0
    turn: int = 1

    def tooth(self, direction: float) -> int:
        """The tooth that stands nearest to a direction: tooth n half a pitch on from gap n."""
        pitch = math.tau / self.count
        place = self.turn * (direction - self.start) / pitch + 0.5
        return (round(place) - 1) % self.count + 1


def eccentric(
    fit: Fit,
    spread: float,
    nu: float,
    waves: tuple[Wave, ...],
    wheel: Wheel,
    *,
    turned: bool,
    grows: int,
    points: Points,
) -> Eccentric | None:
    """Eccentricity of the teeth from the wave once per turn; None where that is not fitted or the radius is not stated.

    turned  stations are turns of the work;  grows  +1 where they grow counter-clockwise in a forward pass, -1 clockwise
    """
    wave = next((w for w in waves if w.harmonic == 1.0), None)
    if wave is None or wheel.radius is None:
        return None
    both = any(term.kind == "swing" for term in fit.terms)
    alpha = wheel.pressure_angle
    side = _side(points, turned=turned) * grows
    flanks = "both" if both else "one" if side else "unknown"
    lean = 0.0 if both or alpha is None else side * alpha
    slack = 0.0 if both or side else alpha or 0.0
    factor = wheel.radius * (1.0 if both or alpha is None else math.cos(alpha))
    direction = once_round(wave.length.direction + math.pi / 2.0 + lean)
    within = wave.length.within
    return Eccentric(
        Interval(factor * wave.length.value, factor * wave.length.low, factor * wave.length.high),
        direction,
        None if within is None else within + slack,
        wheel.tooth(direction),
        flanks,
        0 if both else side,
        _looks(fit, spread, nu, alpha, grows) if both and alpha else "",
        wave.open if alpha is not None or both else wave.open or "the pressure angle of the teeth is not stated",
    )


def apart(flanks: Flanks | None, off: Eccentric | None, wheel: Wheel, nu: float) -> Apart | None:
    """Teeth off their axis and dividing told apart, where both flanks look like neither alone.

    The difference of the flanks is 2 tan(alpha) (-b, a) of the eccentric part (a, b) of their mean; the rest of the mean is what
    dividing made, which both flanks see alike.  Source: the relations above.
    """
    if flanks is None or off is None or off.looks != "neither" or not wheel.pressure_angle or wheel.radius is None:
        return None
    a, b, c, d = flanks.vector
    spread = 2.0 * math.tan(wheel.pressure_angle)
    own = np.array([d, -c]) / spread
    variance = max(flanks.covariance[2][2], flanks.covariance[3][3]) / spread**2
    direction = once_round(math.atan2(own[0], -own[1]))
    rest = np.array([a, b]) - own
    return Apart(
        wheel.radius * float(np.hypot(*own)),
        wheel.radius * t_at(nu) * math.sqrt(variance),
        direction,
        wheel.tooth(direction),
        float(np.hypot(*rest)),
        once_round(math.atan2(rest[1], rest[0])),
    )


def _side(points: Points, *, turned: bool) -> int:
    """Wall of the gap the worm pushed on, where all readings were taken in one direction: +1, -1; 0 not known.

    Turned forward the work goes counter-clockwise. Places of the work pass a worm forward when it goes clockwise, where they
    are counted counter-clockwise.
    """
    found = np.unique(points.direction)
    if len(found) != 1 or found[0] == 0:
        return 0
    return int(found[0]) if turned else -int(found[0])


def _looks(fit: Fit, spread: float, nu: float, alpha: float, grows: int) -> str:
    """Whether both flanks differ as those of an eccentric ring do, or not at all, as those of a divided one.

    Forward less reverse is 2 tan(alpha) (-b, a) where (a, b) is the mean of both, in the frame of the file. Places of the
    work: forward is side -1, the mean (e/r) sin(phi - theta) has a = (e/r) sin phi, b = -(e/r) cos phi, and the difference is
    2 (e/r) tan(alpha) cos(phi - theta).  Turns of the work: forward is side +1 and d(Phi) = -delta(-Phi): the same again.
    Teeth numbered clockwise pass the other way (`grows` -1), and the difference changes its sign.
    """
    swing = Term("swing", 1.0)
    mean = fit.vector(Term("wave", 1.0))
    seen, covariance = fit.vector(swing), fit.covariance(swing) * spread
    base = grows * 2.0 * math.tan(alpha) * np.array([[0.0, -1.0], [1.0, 0.0]])
    expected = base @ mean
    own = base @ (fit.covariance(Term("wave", 1.0)) * spread) @ base.T
    far = [_chance(seen - expected, covariance + own, nu), _chance(seen, covariance, nu)]
    if far[0] > 0.01 >= far[1]:
        return "eccentric"
    if far[1] > 0.01 >= far[0]:
        return "division"
    return "neither" if max(far) <= 0.01 else "undecided"


def _chance(vector: Reals, covariance: Reals, nu: float) -> float:
    """Chance of a vector so long where there is none (Hotelling)."""
    if not np.linalg.det(covariance) > 0.0:
        return 1.0
    square = float(vector @ np.linalg.solve(covariance, vector))
    return f_above(square / 2.0, 2.0, min(max(nu, 1.0), 1e5))
