"""From the mark of blue on both flanks back to what was set wrong. Lengths mm, angles rad.

Turned by half a turn about the line of centres a worm drive is the same again, with right and left flank exchanged. What
survives that turn (tilt, depth, cutter radius, an insert alike on both sides) moves the marks of the two flanks to opposite
ends and to the same height; what turns over (mid-plane, an insert turned in its face) moves both to the same end, to the
tip on one flank and the root on the other. Even a wheel without errors marks a little towards opposite ends.

A flank is called by its side: +1 the one towards +x where the worm lies towards +y and z runs along the wheel's axis.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Literal

import numpy as np

from setupcheck.record import record
from setupcheck.worm.ease_off import ease_off
from setupcheck.worm.helicoid import Array
from setupcheck.worm.meshing import contact
from setupcheck.worm.plunge_gap import Cut, Insert
from setupcheck.worm.wheel_flank import Flank

Height = Literal["tip", "middle", "root"]
Cause = Literal["none", "tilt", "offset", "tilt and offset", "unexplained"]

EYE = 0.04
"""How well the middle of a mark is seen, as a share of the face: about half a millimetre. Source: our screening choice."""

TILTS = tuple(math.radians(minutes / 60.0) for minutes in (2.0, 4.0, 6.0, 9.0, 13.0, 20.0, 30.0, 48.0))
"""Errors of the tilt for which the mark is worked out, either way [rad]. Chosen here: beyond it the worm rides on corners."""

OFFSETS = (0.01, 0.02, 0.035, 0.05, 0.07, 0.1, 0.15, 0.25)
"""Errors of the mid-plane for which the mark is worked out, either way [modules]. Chosen here, likewise."""

FINE = 1201
"""Amounts tried between them. Chosen here."""

GRAIN = 0.25
"""What a written place may be off, as a share of the eye: places are written to a tenth or two of a millimetre. Chosen here."""

SATURATED = 2.0
"""An amount is told as `at least` where one this many times as large would be written alike. Chosen here."""


@record
class Spot:
    """A mark: its middle along the face, +z [mm], over the rolling circle [mm], its share of the flank."""

    centre: float
    height: float
    share: float


@record
class Seen:
    """What was seen on one flank: middle of the mark from the middle of the face, +z [mm]; the height, None where unsaid."""

    centre: float
    height: Height | None = None


@record(eq=False)
class Marks:
    """Marks of flank +1 over errors of one kind: amounts rising [rad or mm], (n,); flank -1 follows by the half-turn."""

    amounts: Array
    centre: Array
    height: Array
    share: Array

    def at(self, amount: float) -> Spot:
        """The mark at an amount, straight between those worked out."""
        return Spot(*(float(np.interp(amount, self.amounts, v)) for v in (self.centre, self.height, self.share)))


@record(eq=False)
class Chart:
    """All marks that the reading is held against, of one drive, insert and film.

    tilt, offset  marks over errors of the tilt and of the mid-plane;  face  width of the teeth [mm]
    lower, upper  heights over the rolling circle that part root from middle, and middle from tip [mm]
    """

    tilt: Marks
    offset: Marks
    face: float
    lower: float
    upper: float

    @property
    def eye(self) -> float:
        """How well the middle of a mark is seen [mm]."""
        return EYE * self.face

    @property
    def right(self) -> Spot:
        """Mark of flank +1 without errors; that of flank -1 stands at -centre."""
        return self.tilt.at(0.0)

    def word(self, height: float) -> Height:
        """Third of the flank that a height lies in."""
        return "tip" if height > self.upper else "root" if height < self.lower else "middle"


@record
class Reading:
    """What the marks tell.

    tilt    how much the tilt was too large [rad];  offset  gaps from the worm's mid-plane, +z [mm]
    least   the marks stand so near the ends that the amount may be several times larger
    why     where no cause explains the marks: what contradicts what
    """

    cause: Cause
    tilt: float = 0.0
    offset: float = 0.0
    least: bool = False
    why: str = ""


def chart(flank: Flank, insert: Insert, cut: Cut, *, film: float) -> Chart:
    """Marks of one drive over errors of tilt and mid-plane.

    flank   side +1;  cut  the setting without errors that the insert is made for;  film  of blue [mm]
    Raises: ValueError for a film not above zero, or sizes that do not go together.
    Source: exact gap and run of worm.meshing for each error; derived here. An error too large to cut ends the chart.
    """
    pitch, half = flank.pair.rolling, len(flank.z) // 2
    column = flank.r[:, half][flank.inside[:, half]]
    low, high = float(column[0]) - pitch, float(column[-1]) - pitch
    module = flank.pair.thread.axial_module
    plain = _spot(flank, insert, cut, film)
    return Chart(
        _marks(flank, insert, cut, film, "tilt", TILTS, plain),
        _marks(flank, insert, cut, film, "offset", tuple(module * o for o in OFFSETS), plain),
        flank.blank.face_width,
        low + (high - low) / 3.0,
        high - (high - low) / 3.0,
    )


def with_error(cut: Cut, *, tilt: float = 0.0, offset: float = 0.0) -> Cut:
    """A setting with that much more tilt [rad] and the cutter that much farther along +z [mm].

    >>> cut = with_error(Cut(radius=20.0, tilt=0.0625, clearance=0.3), tilt=0.001, offset=-0.1)
    >>> round(cut.tilt, 4), cut.offset
    (0.0635, -0.1)
    """
    return Cut(radius=cut.radius, tilt=cut.tilt + tilt, clearance=cut.clearance, offset=cut.offset + offset)


def _spot(flank: Flank, insert: Insert, cut: Cut, film: float) -> Spot:
    found = contact(flank, ease_off(flank, insert, cut).angle, film=film)
    return Spot(found.centre, found.height, found.share)


def _marks(
    flank: Flank, insert: Insert, cut: Cut, film: float, kind: str, sizes: tuple[float, ...], plain: Spot
) -> Marks:
    found: Mapping[float, Spot] = {0.0: plain}
    for sign in (1.0, -1.0):
        for size in sizes:
            try:
                spot = _spot(flank, insert, with_error(cut, **{kind: sign * size}), film)
            except ValueError:
                break
            if not math.isfinite(spot.centre):
                break
            found = {**found, sign * size: spot}
    amounts = sorted(found)
    columns = [np.array([getattr(found[a], key) for a in amounts]) for key in ("centre", "height", "share")]
    return Marks(np.array(amounts), *columns)


def read(right: Seen, left: Seen, chart: Chart) -> Reading:
    """What set wrong makes these marks: nothing, the tilt, the mid-plane, both, or nothing that is known here.

    right, left  flanks +1 and -1, centres along +z
    One cause alone is taken where it puts both marks where they were seen, to within what the eye sees; else both together.
    Depth or cutter radius look like tilt, and an insert turned in its face like the mid-plane: within a class the marks
    differ in amount only.
    Raises: ValueError for a mark beyond the ends of the face.  Source: half-turn symmetry, exact; derived here.
    """
    for seen in (right, left):
        if not abs(seen.centre) <= chart.face / 2.0:
            raise ValueError(
                f"a mark {abs(seen.centre):g} mm from the middle lies beyond a face of {chart.face:g} mm: measure it again"
            )
    u, v = right.centre, -left.centre  # the left flank turned over
    plain = chart.right.centre
    if max(abs(u - plain), abs(v - plain)) <= chart.eye:
        return _with_heights(Reading("none"), right, left, chart)
    if max(abs(u), abs(v)) <= chart.eye:
        return Reading("none")  # both in the middle, which is as good
    tilt, offset = _alone(chart.tilt, u, v, +1.0, chart.eye), _alone(chart.offset, u, v, -1.0, chart.eye)
    if min(tilt.miss, offset.miss) > chart.eye:
        return _with_heights(_both(chart, u, v), right, left, chart)
    if tilt.miss <= offset.miss:
        return _with_heights(Reading("tilt", tilt=tilt.amount, least=tilt.least), right, left, chart)
    return _with_heights(Reading("offset", offset=offset.amount, least=offset.least), right, left, chart)


@record
class _Fit:
    amount: float
    miss: float
    least: bool


def _alone(marks: Marks, u: float, v: float, turned: float, eye: float) -> _Fit:
    """The amount of one error that comes nearest to both marks; turned -1: flank -1 sees it with the other sign.

    Where several times as much would look the same, the least of those.
    """
    amounts = np.linspace(marks.amounts[0], marks.amounts[-1], FINE)
    first = np.interp(amounts, marks.amounts, marks.centre) - u
    second = np.interp(turned * amounts, marks.amounts, marks.centre) - v
    miss = np.maximum(np.abs(first), np.abs(second))
    best = int(np.argmin(miss))
    alike = np.abs(amounts[(miss <= miss[best] + GRAIN * eye) & (amounts * amounts[best] > 0.0)])
    fewest, most = float(alike.min(initial=math.inf)), float(alike.max(initial=0.0))
    if most >= SATURATED * fewest:
        return _Fit(math.copysign(fewest, float(amounts[best])), float(miss[best]), True)
    return _Fit(float(amounts[best]), float(miss[best]), False)


def _both(chart: Chart, u: float, v: float) -> Reading:
    """Tilt and mid-plane together: each flank alone is read as a tilt; their mean is one, half their difference the other.

    Source: to first order an offset is a tilt of the one sign on flank +1 and of the other on flank -1; derived here.
    """
    tilts = np.linspace(chart.tilt.amounts[0], chart.tilt.amounts[-1], FINE)
    centres = np.interp(tilts, chart.tilt.amounts, chart.tilt.centre)

    def as_tilt(centre: float) -> tuple[float, bool]:
        at = int(np.argmin(np.abs(centres - centre)))
        return float(tilts[at]), abs(float(centres[at]) - centre) <= chart.eye

    (first, found), (second, also) = as_tilt(u), as_tilt(v)
    if not (found and also):
        return Reading("unexplained", why="no error of tilt or mid-plane puts both marks there")
    offsets = np.linspace(chart.offset.amounts[0], chart.offset.amounts[-1], FINE // 8)
    halves = []
    for offset in offsets:
        one, other = (as_tilt(chart.offset.at(sign * float(offset)).centre)[0] for sign in (1.0, -1.0))
        halves.append((one - other) / 2.0)
    at = int(np.argmin(np.abs(np.array(halves) - (first - second) / 2.0)))
    return Reading("tilt and offset", tilt=(first + second) / 2.0, offset=float(offsets[at]))


def marks_of(chart: Chart, reading: Reading) -> tuple[Spot, Spot]:
    """Marks that one cause of a reading gives on flanks +1 and -1, centres along +z; both causes: by the tilt alone."""
    if reading.cause == "offset":
        first, second = chart.offset.at(reading.offset), chart.offset.at(-reading.offset)
    else:
        first, second = chart.tilt.at(reading.tilt), chart.tilt.at(reading.tilt)
    return first, Spot(-second.centre, second.height, second.share)


def _with_heights(reading: Reading, right: Seen, left: Seen, chart: Chart) -> Reading:
    """The reading, unless tip was seen where the cause marks the root, or root where it marks the tip."""
    if reading.cause in ("unexplained", "tilt and offset"):
        return reading
    expected = [chart.word(spot.height) for spot in marks_of(chart, reading)]
    seen = [right.height, left.height]
    wrong = [{e, s} == {"tip", "root"} for e, s in zip(expected, seen, strict=True)]
    if not any(wrong):
        return reading
    said = "both flanks" if all(wrong) else "one flank"
    return Reading("unexplained", why=f"the heights on {said} are not those that belong to the places along the face")
