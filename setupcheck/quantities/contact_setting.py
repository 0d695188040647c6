"""What the setting of a plunged cutter may be off, and what it is off at the worst, where the job asks for the exact gap.

Lengths mm, angles rad.
"""

from __future__ import annotations

import math
from functools import lru_cache
from typing import TYPE_CHECKING

from setupcheck.ledger.account import Account
from setupcheck.quantities.backlash import depth_of_cut
from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.contact import (
    ASKED,
    BEST,
    CUT,
    FLOOR,
    KEPT,
    MADE,
    SET,
    Drill,
    Made,
    Points,
    bench_of,
    insert_of,
)
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.exact_gap import row
from setupcheck.quantities.head_setting import where_it_works
from setupcheck.quantities.mid_plane import in_its_housing
from setupcheck.quantities.running import insert_turned
from setupcheck.quantities.shop import Floor

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.best_cutter import Recommendation, Tolerance
    from setupcheck.worm.plunge_gap import Cut
    from setupcheck.worm.wander import Wander


@lru_cache(KEPT)
def _tolerances(drill: Drill, radius: float, made: Made, budget: float) -> dict[str, Tolerance]:
    """Of both flanks together; a left flank is a right one of an insert with its flanks exchanged (half a turn)."""
    from setupcheck.worm.best_cutter import Tolerance
    from setupcheck.worm.best_cutter import tolerances as found

    right = found(bench_of(drill), radius, budget=budget, insert=insert_of(drill, radius, made))
    if not isinstance(made, Points) or made.right == made.left:
        return right
    left = found(bench_of(drill), radius, budget=budget, insert=insert_of(drill, radius, made.other_way))
    return {
        name: Tolerance(min(one.below, left[name].below), min(one.above, left[name].above))
        for name, one in right.items()
    }


def budget(asked: str, floor: Floor) -> float | Open:
    """Transmission error that the cut may leave, along the rolling circle, end to end [mm]. Source: the job file."""
    mesh = floor.loaded.job.mesh
    assert mesh is not None
    return mesh.error_budget if mesh.error_budget is not None else Open(("mesh.error_budget",))


@in_range
def tolerances(
    drill: Drill, made_for: Cut, made: Made, budget: float, best: Recommendation, error: float
) -> dict[str, Tolerance] | None:
    """What tilt, mid-plane, depth and turn of the insert may each be off alone, everything else as made for.

    None below zero crowning, which CUTTER-003 judges, and where the error exceeds the budget as planned, which CUTTER-012
    judges.  Source: worm.best_cutter.
    """
    if made_for.radius < best.floor or error > budget:
        return None
    return _tolerances(drill, made_for.radius, made, budget)


def _capped(size: float, name: str) -> float:
    """A tolerance up to as far as errors were tried."""
    from setupcheck.worm.best_cutter import SPANS

    return min(size, SPANS[name])


def tilt(found: dict[str, Tolerance]) -> float:
    """What the tilt may be off the lead angle, whichever way [rad]. Source: worm.best_cutter."""
    return _capped(found["tilt"].either, "tilt")


def tilt_less(found: dict[str, Tolerance]) -> float:
    """How much less than the lead angle the tilt may be [rad]; 2 deg is as far as is looked. Source: worm.best_cutter."""
    return _capped(found["tilt"].below, "tilt")


def tilt_more(found: dict[str, Tolerance]) -> float:
    """How much more than the lead angle the tilt may be [rad]; 2 deg is as far as is looked. Source: worm.best_cutter."""
    return _capped(found["tilt"].above, "tilt")


def mid_plane_off(found: dict[str, Tolerance]) -> float:
    """What the cutter's plane may be off the worm's axis, for both flanks [mm]. Source: worm.best_cutter."""
    return _capped(found["offset"].either, "offset")


def depth(found: dict[str, Tolerance]) -> float:
    """What the depth may be off, whichever way [mm]. Source: worm.best_cutter."""
    return _capped(found["clearance"].either, "clearance")


def turned(found: dict[str, Tolerance]) -> float:
    """What the insert may be turned in its face, for both flanks [rad]. Source: worm.best_cutter."""
    return _capped(found["turned"].either, "turned")


def tilt_error(asked: str, worst: float) -> float:
    """Largest error of the angle between gaps and thread [rad]: head, housing and wobble. Source: quantities.head_setting."""
    return worst


def mid_plane_error(asked: str, floor: Floor) -> float | Open:
    """Largest distance of the cutter's plane from the worm's axis, worst tooth [mm]: mid-plane as found, sizes, lean.

    What the requirement `mid-plane` computes, asked or not.  Source: the ledger, worst case.
    """
    figure = in_its_housing(floor)
    return figure if isinstance(figure, Open) else figure.base() + sum(push.up for push in figure.pushes())


def depth_error(asked: str, cut: WheelCut, floor: Floor, early: float) -> float | Open:
    """Largest error of the depth [mm]: feed, size of the touched surface, its run-out, and what an early touch takes off.

    Source: quantities.backlash, worst case.
    """
    teeth = floor.now(cut.drive.wheel)
    if teeth is None:
        return Open((cut.path,))
    account = depth_of_cut(floor, cut, teeth)
    if not isinstance(account, Account):
        return account
    missing = account.undetermined()
    return Open(missing) if missing else account.largest() + early


def turned_error(asked: str, cut: WheelCut, floor: Floor) -> float | Open:
    """Largest turn of the insert in its face [rad]: as it sits in the bar, and by the stop it was ground against.

    Source: the job file; worm.grinding_stop.
    """
    found = insert_turned(floor, cut)
    return found if isinstance(found, Open) else found.largest()


@in_range
def wander(drill: Drill, made_for: Cut, setting: Cut, made: Made, floor: Floor) -> tuple[Wander, ...] | Open:
    """Contact of a flank round the wheel: its ring at its worst eccentricity and lean, both high at one place.

    One for both flanks; of a measured insert the left flank too, as a right one of the insert with its flanks exchanged.

    Source: worm.wander; the ledger, worst case.
    """
    from setupcheck.worm.ease_off import ease_off
    from setupcheck.worm.wander import RingError, round_the_wheel

    found = where_it_works(floor)
    if isinstance(found, Open):
        return found
    teeth, axis = found
    offset, lean = teeth.offset - axis.axis_at(teeth.z), teeth.lean - axis.lean
    missing = tuple(dict.fromkeys(offset.undetermined() + lean.undetermined()))
    if missing:
        return Open(missing)
    flank = bench_of(drill).flank
    errors = RingError(eccentricity=offset.largest(), run_out=2.0 * drill.pair.rolling * math.tan(lean.largest()))
    unlike = isinstance(made, Points) and made.right != made.left
    inserts = [insert_of(drill, made_for.radius, one) for one in ([made, made.other_way] if unlike else [made])]  # type: ignore[union-attr]
    angles = [ease_off(flank, one, setting).angle for one in inserts]
    return tuple(round_the_wheel(flank, angle, film=drill.film, errors=errors) for angle in angles)


def wander_along(found: tuple[Wander, ...]) -> float:
    """How far the middle of the marking wanders along the face in a turn [mm]. Source: worm.wander."""
    return max(one.along_face for one in found)


def wander_up(found: tuple[Wander, ...]) -> float:
    """How far it wanders up and down the flank in a turn [mm]. Source: worm.wander."""
    return max(one.up_flank for one in found)


_FOUND = {"found": "contact.tolerances"}

CONTACT_SETTING: tuple[Quantity, ...] = (
    row("budget", "um", 1, budget, {**ASKED, **FLOOR}, "transmission error that the cut may leave"),
    row(
        "tolerances",
        "",
        0,
        tolerances,
        {**MADE, "made": "contact.made", "budget": "contact.budget", **BEST, "error": "contact.error"},
        "what the setting may be off at the planned radius",
    ),
    row("tilt", "arcmin", 1, tilt, _FOUND, "what the tilt may be off, whichever way"),
    row("tilt_less", "arcmin", 1, tilt_less, _FOUND, "how much less than the lead angle the tilt may be"),
    row("tilt_more", "arcmin", 1, tilt_more, _FOUND, "how much more than the lead angle the tilt may be"),
    row("mid_plane", "um", 0, mid_plane_off, _FOUND, "what the mid-plane may be off"),
    row("depth", "um", 0, depth, _FOUND, "what the depth may be off"),
    row("turned", "arcmin", 1, turned, _FOUND, "what the insert may be turned in its face"),
    row("tilt_error", "arcmin", 1, tilt_error, {**ASKED, "worst": "tilt.worst_error"}, "worst error of the tilt"),
    row("mid_plane_error", "um", 0, mid_plane_error, {**ASKED, **FLOOR}, "worst error of the mid-plane"),
    Quantity(
        "contact.depth_error",
        "cut",
        "um",
        0,
        depth_error,
        {**ASKED, **CUT, **FLOOR, "early": "cutter.early_touch"},
        "worst error of the depth",
        {"early": 0.0},
    ),
    row("turned_error", "arcmin", 1, turned_error, {**ASKED, **CUT, **FLOOR}, "worst turn of the insert"),
    row("wander", "", 0, wander, {**SET, **FLOOR}, "contact round the wheel"),
    row(
        "wander_along",
        "mm",
        1,
        wander_along,
        {"found": "contact.wander"},
        "wander of the marking along the face in a turn",
    ),
    row("wander_up", "mm", 1, wander_up, {"found": "contact.wander"}, "wander of the marking up the flank in a turn"),
)
