"""What would do about a contact, in the numbers of the job: words that a rule prints as its remedy. Lengths mm, angles rad."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from setupcheck.notation import show, show_angle
from setupcheck.quantities.book import Quantity, in_range
from setupcheck.quantities.contact import Drill, Made, Points, bench_of, best_of, radius_step, run
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.exact_gap import row
from setupcheck.quantities.shop import Floor

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.plunge_gap import Cut

SAME = math.radians(0.5 / 60.0)
"""Half a minute of arc: a tilt nearer than that to the lead angle is not what a remedy speaks of. Our screening choice."""


MINUTES = math.radians(0.1 / 60.0)
"""Step in which a tilt is told [rad]. Our choice."""


def _ground_to(cut: WheelCut, made: Made) -> str:
    """What to do with an insert that is not the envelope, and where that is written."""
    if isinstance(made, Points):
        return f"Grind the insert again, to the envelope, and measure it ({cut.cutter_path}.profile)"
    return f"Grind the insert to the envelope ({cut.cutter_path}.insert: envelope)"


def for_radius(cut: WheelCut, radius: float, share: float, floor: Floor) -> str:
    """The recommended radius and what it marks. Source: worm.best_cutter."""
    return (
        f"Set the tip radius to {floor.size(radius, 1)} ({cut.cutter_path}.tip_radius): the ends stay clear and "
        f"{show(share, '%', 0)} of a flank is marked. Round up, never down."
    )


@in_range
def for_error(
    drill: Drill,
    made_for: Cut,
    setting: Cut,
    made: Made,
    budget: float,
    error: float,
    cut: WheelCut,
    floor: Floor,
    radius: float | None,
) -> str | None:
    """What brings the transmission error of the cut into the budget. Source: exact map of each change."""
    ground = _ground_to(cut, made)
    true, at = run(drill, cut.radius, "envelope", made_for, 1), run(drill, cut.radius, "envelope", setting, 1)
    if made != "envelope" and at.transmission_error <= budget:
        return f"{ground}: the error falls from {floor.fine(error)} to {floor.fine(at.transmission_error)}."
    grind = f" and {ground[0].lower()}{ground[1:]}" if made != "envelope" else ""
    if abs(setting.tilt - made_for.tilt) > SAME and true.transmission_error <= budget:
        lead = show_angle(made_for.tilt, "dms", 0)
        return (
            f"Set {lead} (setups.{cut.op}.head.tilt){grind}: the error falls from {floor.fine(error)} to "
            f"{floor.fine(true.transmission_error)}."
        )
    if radius is not None and cut.radius < radius:
        best = run(drill, radius, "envelope", bench_of(drill).cut(radius), 1)
        if best.transmission_error <= budget:
            return (
                f"Set the tip radius to {floor.size(radius, 1)} ({cut.cutter_path}.tip_radius){grind}: the error falls from "
                f"{floor.fine(error)} to {floor.fine(best.transmission_error)}."
            )
    return None


@in_range
def for_ends(
    drill: Drill, made_for: Cut, setting: Cut, made: Made, cut: WheelCut, floor: Floor, radius: float, share: float
) -> str | None:
    """What keeps the ends of the face clear: the radius, the insert or the tilt. Source: exact map of each change."""
    from setupcheck.worm.best_cutter import CLEAR

    if cut.radius < radius:
        return for_radius(cut, radius, share, floor)
    if made != "envelope" and run(drill, cut.radius, "envelope", setting, 1).ends <= CLEAR:
        return f"{_ground_to(cut, made)}; the radius would do."
    if abs(setting.tilt - made_for.tilt) > SAME:
        lead = show_angle(made_for.tilt, "dms", 0)
        return f"Set {lead} (setups.{cut.op}.head.tilt); the radius would do."
    return None


def _forgiving(drill: Drill, name: str, needed: float, budget: float, cut: WheelCut, floor: Floor) -> str | None:
    """A larger radius with an envelope insert that forgives an error of the setting, in words."""
    from setupcheck.worm.best_cutter import radius_that_forgives

    bench, step = bench_of(drill), radius_step(floor)
    least = best_of(drill, step).radius
    if least is None:
        return None
    above = max(cut.radius, least - step)  # a radius below would not keep the ends clear
    found = radius_that_forgives(bench, name, needed, budget=budget, radius=above, step=step)
    if found is None:
        return None
    share = run(drill, found[0], "envelope", bench.cut(found[0]), 1).share
    shown = show(found[1], "arcmin", 1) if name in ("tilt", "turned") else floor.fine(found[1], 0)
    return (
        f"set the tip radius to {floor.size(found[0], 1)} ({cut.cutter_path}.tip_radius), which forgives {shown} and marks "
        f"{show(share, '%', 0)} of a flank"
    )


def _or(first: str, second: str | None) -> str:
    return f"{first}, or {second}." if second else f"{first}."


@in_range
def for_tilt(drill: Drill, allowed: float, worst: float, budget: float, cut: WheelCut, floor: Floor) -> str:
    """What the tilt has to keep, or the radius that forgives it. Source: worm.best_cutter."""
    return _or(
        f"Bring head, shaft angle and wobble within {show(_down(allowed, MINUTES), 'arcmin', 1)} together "
        f"(setups.{cut.op}.head.uncertainty, mesh.shaft_angle_error)",
        _forgiving(drill, "tilt", worst, budget, cut, floor),
    )


@in_range
def for_mid_plane(drill: Drill, allowed: float, worst: float, budget: float, cut: WheelCut, floor: Floor) -> str:
    """What the mid-plane has to keep, or the radius that forgives it. Source: worm.best_cutter."""
    return _or(
        f"Bring the mid-plane within {_fine_down(floor, allowed)} of the worm's axis "
        f"(setups.{cut.op}.head.mid_plane.error, place.worm_axis)",
        _forgiving(drill, "offset", worst, budget, cut, floor),
    )


def for_depth(allowed: float, cut: WheelCut, floor: Floor) -> str:
    """What the depth has to keep. Source: worm.best_cutter."""
    return (
        f"Bring feed and touch within {_fine_down(floor, allowed)} on the radius ({cut.path}.depth_error; half of "
        f"{cut.path}.depth_from.at_most counts), or cut a trial gap and measure it."
    )


@in_range
def for_turned(drill: Drill, allowed: float, worst: float, budget: float, cut: WheelCut, floor: Floor) -> str:
    """What the turn of the insert has to keep, or the radius that forgives it. Source: worm.best_cutter."""
    return _or(
        f"Bring the insert within {show(_down(allowed, MINUTES), 'arcmin', 1)} in its bar, the stop it was ground against "
        f"included ({cut.cutter_path}.turned)",
        _forgiving(drill, "turned", worst, budget, cut, floor),
    )


def _fine_down(floor: Floor, allowed: float) -> str:
    return floor.fine(_down(allowed, floor.fine_step(0)), 0)


def _down(value: float, step: float) -> float:
    """Rounded down to what is printed, so that the printed value does it."""
    return math.floor(value / step + 1e-6) * step


_FLOOR = {"cut": "cutter.wheel_cut", "floor": "route.floor"}
_SET = {
    "drill": "contact.drill",
    "made_for": "contact.made_for",
    "setting": "contact.setting",
    "made": "contact.made",
    **_FLOOR,
}
_BEST = {"radius": "contact.radius", "share": "contact.radius_share"}
_TOLD = {"drill": "contact.drill", "budget": "contact.budget", **_FLOOR}

CONTACT_ADVICE: tuple[Quantity, ...] = (
    row("advice_radius", "", 0, for_radius, {**_FLOOR, **_BEST}, "cutter radius that keeps the ends clear"),
    row("advice_ends", "", 0, for_ends, {**_SET, **_BEST}, "what keeps the ends of the face clear"),
    Quantity(
        "contact.advice_error",
        "cut",
        "",
        0,
        for_error,
        {**_SET, "budget": "contact.budget", "error": "contact.error", "radius": "settled contact.radius"},
        "what brings the transmission error into its budget",
        {"radius": None},
    ),
    row(
        "advice_tilt",
        "",
        0,
        for_tilt,
        {**_TOLD, "allowed": "contact.tilt", "worst": "contact.tilt_error"},
        "what brings the tilt into its tolerance",
    ),
    row(
        "advice_mid_plane",
        "",
        0,
        for_mid_plane,
        {**_TOLD, "allowed": "contact.mid_plane", "worst": "contact.mid_plane_error"},
        "what brings the mid-plane into its tolerance",
    ),
    row(
        "advice_turned",
        "",
        0,
        for_turned,
        {**_TOLD, "allowed": "contact.turned", "worst": "contact.turned_error"},
        "what brings the turn of the insert into its tolerance",
    ),
    row(
        "advice_depth",
        "",
        0,
        for_depth,
        {**_FLOOR, "allowed": "contact.depth"},
        "what brings the depth into its tolerance",
    ),
)
