"""Which cutter radius to take: contact over the radius, the smallest that keeps the ends clear, what the setting may be off.

A larger cutter forgives more errors of setting and marks less of the flank, so the curve is part of the answer. mm, rad.
"""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Pair
from setupcheck.worm.cutter import smallest_radius
from setupcheck.worm.ease_off import ease_off
from setupcheck.worm.gap_insert import Sections, envelope_insert, mid_plane_insert, sections
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.meshing import Contact, contact
from setupcheck.worm.plunge_gap import Cut, Insert
from setupcheck.worm.wheel_flank import Blank, Flank, wheel_flank

ROWS, COLUMNS, PLANES = 32, 65, 49
"""Grid of the scan: shares within 1 % of one twice as fine (tests/unit/worm). Chosen here."""

CLEAR = 0.0125
"""Marked share of both end columns up to which the ends count as clear: one tooth corner, 2.5 % of the flank high, which
deburring takes away. An envelope touches the corner that stands out farthest. Our screening choice."""

LARGEST = 3.0
"""Largest radius looked at, in worm tip radii: beyond it contact only shrinks, by a few per cent. Chosen here."""

STEPS = {"tilt": math.radians(1.0 / 60.0), "offset": 0.005, "clearance": 0.002, "turned": math.radians(1.0 / 60.0)}
"""First errors tried [rad, mm], doubled from there: small against what moves the marking off the flank. Chosen here."""

SPANS = {"tilt": math.radians(2.0), "offset": 2.0, "clearance": 0.5, "turned": math.radians(2.0)}
"""Errors beyond which none is looked for: a tolerance that large is no tolerance. Chosen here."""


@record
class Candidate:
    """A cutter radius and what it gives, one flank, setting without errors.

    radius    [mm];  share  of the flank that is marked, envelope insert;  ends  share of the end columns that is marked
    envelope  transmission error with the envelope insert [mm];  mid_plane  with one copied from the mid-plane section [mm]
    """

    radius: float
    share: float
    ends: float
    envelope: float
    mid_plane: float


@record
class Tolerance:
    """How far one setting may be off either way before the transmission error exceeds the budget: mm, or rad.

    below, above  both positive; infinite where nothing within the span of `SPANS` exceeds it; 0 where it is exceeded anyway
    """

    below: float
    above: float

    @property
    def either(self) -> float:
        """The smaller of both: what holds for both flanks, whichever way the error lies."""
        return min(self.below, self.above)


@record
class Recommendation:
    """Cutter recommended for a worm, a wheel's face and a film.

    floor     radius without crowning, R0 [mm]: below it the ends ride
    radius    smallest that keeps the ends of the face clear, rounded up to the step [mm]; None where no radius does
    chosen    what it gives;  curve  what others give, by rising radius
    tilt, offset, clearance, turned   what the setting may be off at that radius, with the envelope insert made for it
    """

    floor: float
    radius: float | None
    chosen: Candidate | None
    curve: tuple[Candidate, ...]
    tilt: Tolerance | None
    offset: Tolerance | None
    clearance: Tolerance | None
    turned: Tolerance | None


@record(eq=False)
class Workbench:
    """What does not depend on the cutter, computed once: grid of the flank and sections of the gap; tilt, clearance, film."""

    flank: Flank
    gap: Sections
    tilt: float
    clearance: float
    film: float

    def cut(self, radius: float) -> Cut:
        return Cut(radius=radius, tilt=self.tilt, clearance=self.clearance)

    def run(self, insert: Insert, cut: Cut) -> Contact:
        return contact(self.flank, ease_off(self.flank, insert, cut).angle, film=self.film)


def workbench(pair: Pair, blank: Blank, *, clearance: float, film: float, tilt: float | None = None) -> Workbench:
    """Grid and sections for a pair; tilt  None: the lead angle at the pitch point.

    Raises: ValueError for a film not above zero, or a pair and blank that do not go together.
    """
    above_zero(film=film)
    if tilt is None:
        tilt = math.atan(pair.thread.lead / (pair.centre_distance - pair.rolling))
    flank = wheel_flank(pair, blank, rows=ROWS, columns=COLUMNS)
    return Workbench(flank, sections(pair, blank, planes=PLANES), tilt, clearance, film)


def candidate(bench: Workbench, radius: float) -> Candidate:
    """What one cutter radius gives [mm].

    Raises: ValueError for a cutter smaller than the worm.  Source: `contact`, right flank; the left is alike.
    """
    cut = bench.cut(radius)
    best = bench.run(envelope_insert(bench.gap, cut), cut)
    copied = bench.run(mid_plane_insert(bench.gap, cut), cut)
    return Candidate(radius, best.share, best.ends, best.transmission_error, copied.transmission_error)


def best_cutter(
    pair: Pair,
    blank: Blank,
    *,
    clearance: float,
    film: float,
    budget: float | None,
    step: float = 0.5,
    tilt: float | None = None,
    curve_points: int = 12,
) -> Recommendation:
    """Cutter radius for a pair, with its curve and the tolerances of its setting.

    clearance  of the cutter's tip below the worm's tip [mm];  film  of marking blue [mm];  step  to round the radius up to [mm]
    budget     transmission error that an error of setting may cause, along the rolling circle, end to end [mm]; None: no
               tolerances are looked for
    tilt       None: the lead angle at the pitch point [rad]
    Default is the smallest radius that keeps the ends of the face clear; rounded up, never down, as a cutter too small rides
    on the ends and one too large only marks less.
    Raises: ValueError for sizes not above zero, or a pair, blank and clearance that do not go together.
    Source: exact map at every radius and for every error of setting tried. Derived here; no outside source.
    """
    above_zero(radius_step=step, **({} if budget is None else {"budget": budget}))
    if curve_points < 2:
        raise ValueError("a curve of radii wants two points or more")
    bench = workbench(pair, blank, clearance=clearance, film=film, tilt=tilt)
    floor = _floor(pair, clearance)
    first = max(floor, pair.thread.tip + clearance)
    last = LARGEST * pair.thread.tip
    if last <= first:
        last = 1.5 * first
    radii = first * (last / first) ** (np.arange(curve_points) / (curve_points - 1))
    curve = tuple(candidate(bench, float(radius)) for radius in radii)
    radius = _smallest_clear(bench, curve, step)
    if radius is None:
        return Recommendation(floor, None, None, curve, None, None, None, None)
    limits: dict[str, Tolerance | None] = dict.fromkeys(STEPS)
    if budget is not None:
        limits.update(tolerances(bench, radius, budget=budget))
    return Recommendation(floor, radius, candidate(bench, radius), curve, **limits)


def _floor(pair: Pair, clearance: float) -> float:
    thread, pitch_radius = pair.thread, pair.centre_distance - pair.rolling
    return smallest_radius(
        pitch_diameter=2.0 * pitch_radius,
        worm_tip_diameter=thread.tip_diameter,
        wheel_diameter=2.0 * pair.rolling,
        pressure_angle=thread.pressure_angle,
        lead_angle=math.atan(thread.lead / pitch_radius),
        gap_arc=pair.gap_arc,
        clearance=clearance,
    )


def _smallest_clear(bench: Workbench, curve: tuple[Candidate, ...], step: float) -> float | None:
    """Smallest multiple of the step at which the ends of the face stay clear, by halving between two of the curve."""
    clear = next((i for i, c in enumerate(curve) if c.ends < CLEAR), None)
    if clear is None:
        return None
    high = math.ceil(curve[clear].radius / step - 1e-9)
    low = math.ceil(curve[clear - 1].radius / step - 1e-9) if clear else high

    def ends(number: int) -> float:
        cut = bench.cut(number * step)
        return bench.run(envelope_insert(bench.gap, cut), cut).ends

    while low < high:
        middle = (low + high) // 2
        if ends(middle) < CLEAR:
            high = middle
        else:
            low = middle + 1
    return high * step


def tolerances(bench: Workbench, radius: float, *, budget: float, insert: Insert | None = None) -> dict[str, Tolerance]:
    """What tilt, offset, clearance and turn of the insert may be off, each alone [rad, mm].

    budget  transmission error, along the rolling circle, end to end [mm];  insert  None: the envelope for that radius
    Every error tried is cut and run anew; a setting that cannot be cut at all counts as beyond the budget.
    Raises: ValueError for a cutter smaller than the worm.  Source: derived here.
    """
    above_zero(budget=budget)
    cut = bench.cut(radius)
    made = insert if insert is not None else envelope_insert(bench.gap, cut)
    return {name: _tolerance(bench, made, cut, name, budget) for name in STEPS}


def radius_that_forgives(
    bench: Workbench, name: str, needed: float, *, budget: float, radius: float, step: float
) -> tuple[float, float] | None:
    """Larger radius at which a setting may be off by `needed`, and what it may be off there; None up to the largest.

    name    tilt, offset, clearance or turned;  needed  [rad, mm];  radius  to begin above, in steps of 4 % and more [mm]
    Envelope insert made for each radius.  Source: derived here.
    """
    above_zero(budget=budget, radius_step=step)
    last = max(LARGEST * bench.flank.pair.thread.tip, 1.5 * radius)
    number = math.floor(radius / step + 1e-9)
    while (number := max(number + 1, math.ceil(1.04 * number))) * step <= last:
        cut = bench.cut(number * step)
        found = _tolerance(bench, envelope_insert(bench.gap, cut), cut, name, budget).either
        if found >= needed:
            return number * step, min(found, SPANS[name])
    return None


def _tolerance(bench: Workbench, insert: Insert, cut: Cut, name: str, budget: float) -> Tolerance:
    kept = {key: getattr(cut, key) for key in ("radius", "tilt", "clearance", "offset", "turned")}

    def error_of(error: float) -> float:
        try:
            return bench.run(insert, Cut(**{**kept, name: kept[name] + error})).transmission_error
        except ValueError:
            return math.inf

    return Tolerance(
        below=_largest(lambda size: error_of(-size), budget, STEPS[name], SPANS[name]),
        above=_largest(error_of, budget, STEPS[name], SPANS[name]),
    )


def _largest(error_of: Callable[[float], float], budget: float, start: float, span: float) -> float:
    """Largest size whose error stays within the budget, to 3 %: doubling, then halving in the logarithm."""
    if error_of(0.0) > budget:
        return 0.0
    low, high = 0.0, start
    while error_of(high) <= budget:
        low, high = high, 2.0 * high
        if low > span:
            return math.inf
    for _ in range(8):
        middle = (low + high) / 2.0
        low, high = (middle, high) if error_of(middle) <= budget else (low, middle)
        if high - low < 0.03 * high:
            break
    return low
