"""Contact of a plunged worm wheel from the exact gap, where the job asks for it: marking, error, cutter radius.

Lengths mm, angles rad, shares of one. What takes long is kept for the next review of the same drive in the same run.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from typing import TYPE_CHECKING

from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.cutter_shape import USUAL_FILM
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.exact_gap import row
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.best_cutter import Candidate, Recommendation, Workbench
    from setupcheck.worm.conjugate import Pair, Side
    from setupcheck.worm.meshing import Contact
    from setupcheck.worm.plunge_gap import Cut, Insert
    from setupcheck.worm.wheel_flank import Blank

STEP, STEP_IN = 0.5, 0.508
"""What a recommended radius is rounded up to [mm]: half a millimetre, 20 thou in an inch file. Our screening choice."""

KEPT = 32
"""Drives whose maps one run keeps. Our choice."""


@record(eq=False)
class Maps:
    """Contact of both flanks; right is the one on the right seen from the +z face with the gap up."""

    right: Contact
    left: Contact

    @property
    def both(self) -> tuple[Contact, Contact]:
        return self.right, self.left


@record
class Drill:
    """What is worked out at: worm and wheel, blank, clearance and film of one cut. Equal ones are worked out once."""

    pair: Pair
    blank: Blank
    clearance: float
    film: float


@lru_cache(KEPT)
def bench_of(drill: Drill) -> Workbench:
    """Grid and sections of a cut, computed once. Raises: ValueError as worm.best_cutter.workbench."""
    from setupcheck.worm.best_cutter import workbench

    return workbench(drill.pair, drill.blank, clearance=drill.clearance, film=drill.film)


@record
class Points:
    """Measured profile of an insert [mm], from its tip upwards: heights and half widths, (n,), as plain numbers.

    right cuts the flank of the gap that is on the right seen from the wheel's +z face with the gap up.
    """

    heights: tuple[float, ...]
    right: tuple[float, ...]
    left: tuple[float, ...]

    @property
    def other_way(self) -> Points:
        """The same with its flanks exchanged: what it does to a right flank, the true one does to a left one."""
        return Points(self.heights, self.left, self.right)


Made = str | Points
"""What an insert is: `envelope` or `mid-plane` as planned, else its measured points."""


@lru_cache(KEPT)
def insert_of(drill: Drill, radius: float, made: Made) -> Insert:
    """Insert for the lead angle and a radius, or as measured.

    Raises: ValueError for a cutter smaller than the worm, or points that are no profile.
    """
    import numpy as np

    from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert
    from setupcheck.worm.plunge_gap import measured_insert

    if isinstance(made, Points):
        return measured_insert(*(np.array(v) for v in (made.heights, made.right, made.left)))
    bench = bench_of(drill)
    return (envelope_insert if made == "envelope" else mid_plane_insert)(bench.gap, bench.cut(radius))


@lru_cache(2 * KEPT)
def run(drill: Drill, made_for: float, made: Made, cut: Cut, side: Side) -> Contact:
    """Contact of one flank that an insert made for a radius leaves in a setting. Raises: ValueError as its parts."""
    from setupcheck.worm.best_cutter import COLUMNS, ROWS
    from setupcheck.worm.ease_off import ease_off
    from setupcheck.worm.meshing import contact
    from setupcheck.worm.wheel_flank import wheel_flank

    right = bench_of(drill).flank
    flank = right if side == 1 else wheel_flank(drill.pair, drill.blank, side=side, rows=ROWS, columns=COLUMNS)
    return contact(flank, ease_off(flank, insert_of(drill, made_for, made), cut).angle, film=drill.film)


@lru_cache(KEPT)
def best_of(drill: Drill, step: float) -> Recommendation:
    from setupcheck.worm.best_cutter import best_cutter

    return best_cutter(drill.pair, drill.blank, clearance=drill.clearance, film=drill.film, budget=None, step=step)


def film(asked: str, floor: Floor) -> float:
    """Marking film the contact is told for [mm]: what a requirement of contact says, else 6 um. Source: the job file."""
    said = (r.film for r in floor.loaded.job.require if r.what in ("contact-area", "contact-length"))
    return next((f for f in said if f is not None), USUAL_FILM)


def drill(pair: Pair, blank: Blank, made_for: Cut, film: float) -> Drill:
    """All that the contact of a cut rests on but the setting of its cutter. Source: the job file."""
    return Drill(pair, blank, made_for.clearance, film)


@in_range
def maps(drill: Drill, made_for: Cut, setting: Cut, made: Made) -> Maps:
    """Contact of both flanks for setting as planned and insert as planned or measured, without errors.

    Source: exact gap, derived in worm.meshing.
    """
    right, left = (run(drill, made_for.radius, made, setting, side) for side in (1, -1))
    return Maps(right, left)


def share(maps: Maps) -> float:
    """Share of a flank that the film marks, the smaller of both flanks. Source: worm.meshing."""
    return min(c.share for c in maps.both)


def along_face(maps: Maps) -> float:
    """Share of the face's width over which a flank is marked at any height, the smaller of both flanks. Source: worm.meshing."""
    return min(c.along_face for c in maps.both)


def ends(maps: Maps) -> float:
    """Share of both end columns of the face that is marked, the larger of both flanks. Source: worm.meshing."""
    return max(c.ends for c in maps.both)


def error(maps: Maps) -> float:
    """Transmission error over one pitch, end to end, along the rolling circle [mm], the larger of both flanks.

    Rigid, no load; under 0.7 um it is what the grid leaves.  Source: worm.meshing.
    """
    return max(c.transmission_error for c in maps.both)


def error_angle(maps: Maps) -> float:
    """The same as an angle of the wheel [rad]. Source: worm.meshing."""
    return max(c.transmission_angle for c in maps.both)


def middle_right(maps: Maps) -> float:
    """Middle of the marking along the face, +z from the mid-plane [mm], right flank. Source: worm.meshing."""
    return maps.right.centre


def middle_left(maps: Maps) -> float:
    """The same of the left flank [mm]. Source: worm.meshing."""
    return maps.left.centre


def height_right(maps: Maps) -> float:
    """Middle of the marking over the wheel's rolling circle [mm], right flank. Source: worm.meshing."""
    return maps.right.height


def height_left(maps: Maps) -> float:
    """The same of the left flank [mm]. Source: worm.meshing."""
    return maps.left.height


@in_range
def with_envelope(drill: Drill, made_for: Cut) -> Contact:
    """Contact at this radius and the lead angle with an envelope insert. Source: worm.gap_insert, worm.meshing."""
    return run(drill, made_for.radius, "envelope", made_for, 1)


@in_range
def with_mid_plane(drill: Drill, made_for: Cut) -> Contact:
    """The same with an insert copied from the mid-plane section. Source: worm.gap_insert, worm.meshing."""
    return run(drill, made_for.radius, "mid-plane", made_for, 1)


def error_of(one: Contact) -> float:
    """Its transmission error, along the rolling circle [mm]. Source: worm.meshing."""
    return one.transmission_error


def share_of(one: Contact) -> float:
    """The share of a flank it marks. Source: worm.meshing."""
    return one.share


def radius_step(floor: Floor) -> float:
    """What a radius is rounded up to [mm]. Source: our screening choice."""
    return STEP_IN if floor.loaded.job.units == "in" else STEP


@in_range
def recommended(drill: Drill, floor: Floor) -> Recommendation:
    """Smallest cutter radius that keeps the ends of the face clear, and what other radii give. Source: worm.best_cutter."""
    return best_of(drill, radius_step(floor))


def radius(best: Recommendation) -> float | Open:
    """Recommended radius of the cutter's tip circle [mm], rounded up. Source: worm.best_cutter."""
    if best.radius is None:
        last = best.curve[-1].radius
        return Open(
            because=f"no cutter radius up to {last:.3g} mm keeps the ends of this face clear: a wider face is needed"
        )
    return best.radius


def planned_radius(best: Recommendation, cut: WheelCut) -> float | None:
    """Planned radius of the tip circle [mm]; None where it is below zero crowning, which CUTTER-003 judges.

    Source: the job file.
    """
    return cut.radius if cut.radius >= best.floor else None


def radius_share(best: Recommendation) -> float | None:
    """Share of a flank that the recommended radius marks. Source: worm.best_cutter."""
    return best.chosen.share if best.chosen is not None else None


def curve(best: Recommendation, floor: Floor) -> str:
    """Share, ends and transmission error over the radius, in words. Source: worm.best_cutter."""
    inches = floor.loaded.job.units == "in"
    unit, digits, factor = ("in", 3, 1.0 / 25.4) if inches else ("mm", 1, 1.0)
    told = best.curve[1::2]
    if not told:
        raise OutOfRange("too few radii were looked at for a curve")
    return (
        f"tip radius {_listed(c.radius * factor for c in told)[digits]} {unit} marks "
        f"{_listed(100.0 * c.share for c in told)[0]} % of a flank and {_listed(100.0 * c.ends for c in told)[0]} % of its "
        f"ends; an insert copied from the mid-plane errs by {_errors(told, inches)}"
    )


def _listed(values: object) -> Sequence[str]:
    """Numbers with a stroke between, by decimals 0 to 3."""
    numbers = list(values)  # type: ignore[call-overload]
    return ["/".join(f"{n:.{digits}f}" for n in numbers) for digits in range(4)]


def _errors(told: Sequence[Candidate], inches: bool) -> str:
    unit, factor = ("thou", 1.0 / 0.0254) if inches else ("um", 1e3)
    return f"{_listed(c.mid_plane * factor for c in told)[1 if inches else 0]} {unit}"


ASKED = {"asked": "contact.asked"}
FLOOR = {"floor": "route.floor"}
CUT = {"cut": "cutter.wheel_cut"}
DRILL = {"drill": "contact.drill"}
MADE = {**DRILL, "made_for": "contact.made_for"}
SET = {**MADE, "setting": "contact.setting", "made": "contact.made"}
_MAPS = {"maps": "contact.maps"}
BEST = {"best": "contact.recommended"}
_PAIR = {"pair": "contact.pair", "blank": "contact.blank", "made_for": "contact.made_for", "film": "contact.film"}

CONTACT: tuple[Quantity, ...] = (
    row("film", "um", 1, film, {**ASKED, **FLOOR}, "marking film the contact is told for"),
    row("drill", "", 0, drill, _PAIR, "worm, wheel, clearance and film the contact is worked out for"),
    row("maps", "", 0, maps, SET, "contact of both flanks as planned"),
    row("share", "%", 1, share, _MAPS, "share of a flank that is marked"),
    row("along_face", "%", 1, along_face, _MAPS, "share of the face's width that is marked"),
    row("ends", "%", 2, ends, _MAPS, "share of the ends of the face that is marked"),
    row("error", "um", 1, error, _MAPS, "transmission error of the cut as planned, along the reference circle"),
    row("error_angle", "arcsec", 1, error_angle, _MAPS, "transmission error of the cut as planned, at the wheel"),
    row("middle_right", "mm", 1, middle_right, _MAPS, "middle of the marking along the face, right flank"),
    row("middle_left", "mm", 1, middle_left, _MAPS, "middle of the marking along the face, left flank"),
    row("height_right", "mm", 1, height_right, _MAPS, "middle of the marking over the reference circle, right flank"),
    row("height_left", "mm", 1, height_left, _MAPS, "middle of the marking over the reference circle, left flank"),
    row("with_envelope", "", 0, with_envelope, MADE, "contact with an envelope insert at this radius"),
    row("with_mid_plane", "", 0, with_mid_plane, MADE, "contact with a mid-plane insert at this radius"),
    row("envelope_error", "um", 1, error_of, {"one": "contact.with_envelope"}, "transmission error with an envelope"),
    row("envelope_share", "%", 1, share_of, {"one": "contact.with_envelope"}, "share marked with an envelope"),
    row(
        "copied_error",
        "um",
        1,
        error_of,
        {"one": "contact.with_mid_plane"},
        "transmission error with a mid-plane insert",
    ),
    row("copied_share", "%", 1, share_of, {"one": "contact.with_mid_plane"}, "share marked with a mid-plane insert"),
    row("recommended", "", 0, recommended, {**DRILL, **FLOOR}, "recommended cutter with its curve"),
    row("radius", "mm", 2, radius, BEST, "smallest tip radius that keeps the ends clear"),
    row("planned_radius", "mm", 2, planned_radius, {**BEST, **CUT}, "tip radius as planned"),
    row("radius_share", "%", 1, radius_share, BEST, "share of a flank that the recommended radius marks"),
    row("curve", "", 0, curve, {**BEST, **FLOOR}, "contact over the cutter's radius"),
)
