"""The insert as it is to be ground: its sizes, the grinding wheel, the points, what a stop out of square does. mm, rad.

Only for jobs with the exact gap (`mesh: {contact: exact}`), whose profile the insert follows. Both of its flanks are alike.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from setupcheck.jobfile.grinding import Grinding
from setupcheck.quantities.book import Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.drive import WheelCut, middle
from setupcheck.record import record

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.conjugate import Pair
    from setupcheck.worm.gap_insert import Sections
    from setupcheck.worm.grinding import Coordinates
    from setupcheck.worm.grinding_stop import OffStop
    from setupcheck.worm.insert_profile import Hollow
    from setupcheck.worm.plunge_gap import Cut, Insert

CLOSE = 1e-5
"""How near the width of the profile must come to the stated one [mm]. Chosen here: a hundredth of what is ever measured."""

MOST_ROWS = 10
"""Rows of the table of sizes, but for the named heights. Our choice."""

ROW_STEPS = (0.1, 0.2, 0.25, 0.5, 1.0, 2.0, 5.0, 10.0)
"""Distances between the rows of the table of sizes [mm]. Our choice."""

WAYS = {"swung": "swung", "turned-over": "turned over"}


@record
class Drawn:
    """The profile as plain numbers: heights above the tip and half widths of either flank [mm]."""

    heights: tuple[float, ...]
    half_widths: tuple[float, ...]


@in_range
def wide_gap(gap: Sections, made_for: Cut, kind: str, cut: WheelCut) -> Sections | Open:
    """The exact gap, widened until its insert has the width the job states; as it is where the job states none.

    Both flanks are turned about the wheel's axis, so the gap stays conjugate and its play is backlash.
    Source: worm.gap_insert.
    """
    from setupcheck.worm.gap_insert import widened

    if cut.cutter.width is None:
        return gap
    wanted, height = middle(cut.cutter.width), cut.width_height
    by, made = 0.0, profile(gap, made_for, kind)
    if not 0.0 <= height <= made.heights[-1]:
        return Open((f"{cut.cutter_path}.width_at",), f"the profile ends {made.heights[-1]:.3f} mm above the tip")
    for _ in range(8):  # two are enough, as a width grows as fast as the gap
        off = wanted - made.width(height)
        if abs(off) <= CLOSE:
            return widened(gap, by)
        by += off / math.cos(made_for.tilt)
        made = profile(widened(gap, by), made_for, kind)
    raise OutOfRange(f"no gap of this worm gives an insert of {wanted:.4g} mm width")


@in_range
def profile(gap: Sections, made_for: Cut, kind: str) -> Insert:
    """Profile of the insert at the width the job states; where it states none, it fits the thread without backlash.

    Source: worm.gap_insert.
    """
    from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert

    return (envelope_insert if kind == "envelope" else mid_plane_insert)(gap, made_for)


def tip_width(profile: Insert) -> float:
    """Full width at the tip [mm]. Source: the profile."""
    return profile.width(0.0)


def pitch_height(cut: WheelCut, profile: Insert) -> float:
    """Height of the rolling circle above the insert's tip [mm]. Source: geometry."""
    return cut.pitch_height


@in_range
def pitch_width(profile: Insert, cut: WheelCut) -> float:
    """Full width at pitch height [mm]. Source: the profile."""
    from setupcheck.worm.insert_profile import width_at

    return width_at(profile, cut.pitch_height)


@in_range
def angle(profile: Insert, cut: WheelCut) -> float:
    """Angle between the tangents of both flanks at pitch height [rad]; at another height it is another one.

    Source: worm.insert_profile.
    """
    from setupcheck.worm.insert_profile import included_angle

    return included_angle(profile, cut.pitch_height)


@in_range
def corner(profile: Insert, cut: WheelCut) -> float:
    """Largest radius of the tip's corners that ends below the worm's tip, where nothing touches [mm]: c/(1 - sin psi).

    Source: worm.insert_profile.
    """
    from setupcheck.worm.insert_profile import largest_corner

    return largest_corner(profile, cut.clearance)


@in_range
def works_from(pair: Pair, made_for: Cut) -> float:
    """Height above the tip at which the flank begins to cut what the worm touches [mm]. Source: worm.insert_profile."""
    from setupcheck.worm.insert_profile import contact_begins

    return contact_begins(pair, made_for)


@in_range
def works_to(gap: Sections, made_for: Cut, kind: str, profile: Insert) -> float:
    """Height above the tip up to which the flank has no bend of an end of the face or of the tooth's tip [mm].

    Source: worm.gap_insert; for an insert copied from the mid-plane the whole profile.
    """
    from setupcheck.worm.gap_insert import end_takes_over

    return end_takes_over(gap, made_for) if kind == "envelope" else float(profile.heights[-1])


@in_range
def found_hollow(profile: Insert, works_from: float, works_to: float) -> Hollow:
    """Smallest concave radius between the two heights, and where. Source: worm.insert_profile."""
    from setupcheck.worm.insert_profile import smallest_hollow

    return smallest_hollow(profile, side=1, live_from=works_from, live_to=works_to)


def hollow(found: Hollow) -> float | None:
    """Smallest concave radius of the flank where it works [mm]; None for a straight one. Source: worm.insert_profile."""
    return found.radius if math.isfinite(found.radius) else None


def sizes(profile: Insert, cut: WheelCut) -> tuple[tuple[float, float], ...]:
    """Heights above the tip in even steps, pitch height and the top among them, and full widths there [mm].

    Source: the profile.
    """
    tall = float(profile.heights[-1])
    step = next((s for s in ROW_STEPS if tall / s <= MOST_ROWS), ROW_STEPS[-1])
    even = [i * step for i in range(int(tall / step) + 1)]
    rows = sorted({*even, tall, *([cut.pitch_height] if 0.0 < cut.pitch_height < tall else [])})
    rows = [h for i, h in enumerate(rows) if i == 0 or h - rows[i - 1] > 1e-6]
    return tuple((h, profile.width(h)) for h in rows)


def drawn(profile: Insert) -> Drawn:
    """The profile for a drawing. Source: the profile."""
    return Drawn(tuple(map(float, profile.heights)), tuple(map(float, profile.right)))


# -- grinding ----------------------------------------------------------------------------------------------------------


def ground(asked: str, cut: WheelCut) -> Grinding | None:
    """How the job says that the insert is ground; None where it says nothing of it. Source: the job file.

    A form error alone plans no grinding: a measured insert is held against it.
    """
    told = cut.cutter.grinding
    return None if told is None or told.model_fields_set == {"form_error"} else told


def form_error(asked: str, cut: WheelCut) -> float | Open | None:
    """Form error that a flank may have, square to it [mm]. Source: the job file."""
    told = cut.cutter.grinding
    if told is None:
        return None
    return told.form_error if told.form_error is not None else Open((f"{cut.cutter_path}.grinding.form_error",))


def _stated(key: str, says: str) -> object:
    """A function that hands over one entry of `grinding`; what is left out is open with its path."""

    def of(ground: Grinding, cut: WheelCut) -> object:
        value = getattr(ground, key)
        return value if value is not None else Open((f"{cut.cutter_path}.grinding.{key}",))

    of.__doc__ = f"{says} Source: the job file."
    return of


wheel_radius = _stated("wheel_radius", "Radius of the grinding wheel's edge [mm].")
step = _stated("step", "Step of the grinder's readings [mm].")
stop_error = _stated("stop_error", "How far the stop may be out of square, either way [rad].")
way = _stated("way", "How the second flank is come by.")
shank_side = _stated("shank_side", "Side of the shank that is touched, from its middle line [mm].")
touched_at = _stated("touched_at", "Height above the tip at which the side of the shank is touched [mm].")


@in_range
def largest_wheel(ground: Grinding, profile: Insert) -> float | None:
    """Largest radius of a wheel's edge that leaves no more than 2 um in the hollow [mm]; None where any wheel does.

    Source: worm.wheel_edge; 2 um our screening choice.
    """
    from setupcheck.worm.wheel_edge import largest_wheel

    found = largest_wheel(profile, side=1)
    return found if math.isfinite(found) else None


@in_range
def rounding(step: float, profile: Insert) -> float:
    """Most that rounded readings move a flank, square to it [mm]: step/2 (cos psi + sin psi). Source: worm.grinding."""
    from setupcheck.worm.grinding import rounding_bound

    return rounding_bound(profile, step=step, side=1)


@in_range
def points(profile: Insert, form_error: float, wheel_radius: float, step: float) -> int:
    """Points on each flank that keep it within the form error, rounding counted at its worst.

    n - 1 = (integral of sqrt(1/r - 1/rho) ds)/sqrt(8 e).  Source: worm.grinding.
    """
    from setupcheck.worm.grinding import points_for

    return points_for(profile, form_error=form_error, wheel_radius=wheel_radius, step=step, side=1)


@in_range
def table(profile: Insert, points: int, wheel_radius: float, step: float, shank_side: float) -> Coordinates:
    """Readings of the grinder for each point of a flank, both set to zero at touch-off. Source: worm.grinding."""
    from setupcheck.worm.grinding import Datum, coordinates, equal_errors

    heights = equal_errors(profile, points, wheel_radius=wheel_radius, side=1)
    datum = Datum(side=shank_side)
    return coordinates(profile, heights, wheel_radius=wheel_radius, datum=datum, step=step, side=1)


def residual(table: Coordinates) -> float:
    """Form error that these points leave, rounding included [mm]: the highest cusp or the deepest point.

    Source: worm.grinding, with a wheel and a machine free of error.
    """
    return table.form_error


def listed(table: Coordinates) -> tuple[tuple[float, float, float], ...]:
    """Height above the tip, reading across and reading along of each point, from tip to top [mm]. Source: worm.grinding."""
    columns = (table.heights, table.across, table.along)
    return tuple((float(h), float(x), float(y)) for h, x, y in zip(*columns, strict=True))


def coordinates(listed: tuple[tuple[float, float, float], ...], step: float) -> str:
    """The points of a flank in words: height above the tip, reading across, reading along [mm].

    Across is 0 with the wheel on the side of the shank and falls towards its middle; along is 0 with the wheel on the tip
    from outside and grows towards the shank. Both flanks have the same readings.
    Source: worm.grinding.
    """
    digits = decimals(step)
    told = [
        f"{i}: height {height:.3f}, across {across:+.{digits}f}, along {along:.{digits}f}"
        for i, (height, across, along) in enumerate(listed, 1)
    ]
    return f"{len(told)} points, mm: {'; '.join(told)}"


def decimals(step: float) -> int:
    """Decimals that show a step of the readings in mm: 3 for 1 um, 4 for 0.5 um."""
    return next((n for n in range(6) if abs(step * 10**n - round(step * 10**n)) < 1e-6 * step * 10**n), 6)


@in_range
def off_stop(profile: Insert, stop_error: float, way: str, shank_side: float, touched_at: float) -> OffStop:
    """The insert that a stop out of square leaves, by its whole error, the right flank coming out wider.

    Source: worm.grinding_stop.
    """
    from setupcheck.worm.grinding_stop import ground_against_stop

    return ground_against_stop(
        profile,
        angle=stop_error,
        way=WAYS[way],  # type: ignore[arg-type]
        side=shank_side,
        touched_at=touched_at,
    )


def change_at_tip(off_stop: OffStop) -> float:
    """Change of the full width at the tip by the stop, either way [mm]. Source: worm.grinding_stop."""
    return abs(off_stop.tip_width)


@in_range
def change_at_pitch(off_stop: OffStop, profile: Insert, cut: WheelCut) -> float:
    """Change of the full width at pitch height by the stop, either way [mm]; it becomes backlash.

    Source: worm.grinding_stop.
    """
    return abs(off_stop.insert.width(cut.pitch_height) - profile.width(cut.pitch_height))


def change_at_top(off_stop: OffStop) -> float:
    """Change of the full width at the top of the profile by the stop, either way [mm]. Source: worm.grinding_stop."""
    return abs(off_stop.top_width)


def taper(off_stop: OffStop) -> float:
    """How much farther than at its tip a flank stands out, or back, at its top by the stop, insert not leaning [mm].

    Source: worm.grinding_stop, half of what the full width changes from tip to top.
    """
    return 0.5 * abs(off_stop.top_width - off_stop.tip_width)


def lean(off_stop: OffStop) -> float:
    """Lean of the middle line between the flanks against the shank by the stop, either way [rad].

    Source: worm.grinding_stop.
    """
    return abs(off_stop.lean)


def width_tolerance(cut: WheelCut) -> float | Open | None:
    """How far the insert's width may be off either way by what the job states of it [mm]; None once it is measured.

    A measured width already holds what the stop did to it.  Source: the job file.
    """
    given, path = cut.cutter.width, f"{cut.cutter_path}.width"
    if given is not None and given.measured is not None:
        return None
    if given is None or given.lower is None or given.upper is None:
        return Open((path,), "" if given is None else f"{path} has no limits: write them, as in 3.185 ±0.004")
    return 0.5 * (given.upper - given.lower)


@in_range
def scale(form_error: float) -> str:
    """Smallest usual enlargement at which a drawing laid over shows the form error as two lines. Source: worm.overlay."""
    from setupcheck.worm.overlay import scale_for

    return f"{scale_for(form_error):g}:1"


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"insert.{name}", "cut", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_CUT = {"cut": "cutter.wheel_cut"}
_PROFILE = {"profile": "insert.profile"}
_MADE = {"gap": "insert.gap", "made_for": "contact.made_for", "kind": "cutter.insert"}
_GROUND = {"ground": "insert.ground", **_CUT}
_OFF = {"off_stop": "insert.off_stop"}


def _of(*names: str) -> dict[str, str]:
    return {name: f"insert.{name}" for name in names}


INSERTS = (
    _row("gap", "", 0, wide_gap, {**_MADE, "gap": "contact.gap", **_CUT}, "exact gap as wide as the insert makes it"),
    _row("profile", "", 0, profile, _MADE, "profile of the insert at its stated width"),
    _row("tip_width", "mm", 4, tip_width, _PROFILE, "full width at the tip"),
    _row("pitch_height", "mm", 3, pitch_height, {**_PROFILE, **_CUT}, "pitch height above the tip"),
    _row("pitch_width", "mm", 4, pitch_width, {**_PROFILE, **_CUT}, "full width at pitch height"),
    _row("angle", "deg", 3, angle, {**_PROFILE, **_CUT}, "angle between the flanks at pitch height"),
    _row("corner", "mm", 3, corner, {**_PROFILE, **_CUT}, "largest radius of the tip's corners"),
    _row(
        "works_from",
        "mm",
        3,
        works_from,
        {"pair": "contact.pair", "made_for": "contact.made_for"},
        "height from which the flank works",
    ),
    _row("works_to", "mm", 3, works_to, {**_MADE, **_PROFILE}, "height up to which one hollow is told"),
    _row(
        "found_hollow", "", 0, found_hollow, _of("profile", "works_from", "works_to"), "smallest hollow and its place"
    ),
    _row("hollow", "mm", 2, hollow, {"found": "insert.found_hollow"}, "smallest hollow of the flank where it works"),
    _row("sizes", "", 0, sizes, {**_PROFILE, **_CUT}, "heights and full widths"),
    _row("drawn", "", 0, drawn, _PROFILE, "profile for a drawing"),
    _row("ground", "", 0, ground, {"asked": "contact.asked", **_CUT}, "how the insert is ground"),
    _row("wheel_radius", "mm", 2, wheel_radius, _GROUND, "edge radius of the grinding wheel"),
    _row("step", "um", 1, step, _GROUND, "step of the grinder's readings"),
    _row("form_error", "um", 1, form_error, {"asked": "contact.asked", **_CUT}, "form error that a flank may have"),
    _row("stop_error", "arcmin", 1, stop_error, _GROUND, "how far the stop may be out of square"),
    _row("way", "", 0, way, _GROUND, "how the second flank is come by"),
    _row("shank_side", "mm", 3, shank_side, _GROUND, "side of the shank that is touched"),
    _row("touched_at", "mm", 3, touched_at, _GROUND, "height at which the shank is touched"),
    _row("largest_wheel", "mm", 2, largest_wheel, _of("ground", "profile"), "largest edge radius that fits the hollow"),
    _row("rounding", "um", 2, rounding, _of("step", "profile"), "what rounded readings move a flank by"),
    _row("points", "1", 0, points, _of("profile", "form_error", "wheel_radius", "step"), "points on each flank"),
    _row(
        "table", "", 0, table, _of("profile", "points", "wheel_radius", "step", "shank_side"), "readings of the grinder"
    ),
    _row("residual", "um", 2, residual, _of("table"), "form error that is left"),
    _row("listed", "", 0, listed, _of("table"), "readings of the grinder, point by point"),
    _row("coordinates", "", 0, coordinates, _of("listed", "step"), "readings of the grinder in words"),
    _row(
        "off_stop",
        "",
        0,
        off_stop,
        _of("profile", "stop_error", "way", "shank_side", "touched_at"),
        "the insert as a stop out of square leaves it",
    ),
    _row("change_at_tip", "um", 1, change_at_tip, _OFF, "change of the width at the tip by the stop"),
    _row(
        "change_at_pitch", "um", 1, change_at_pitch, {**_OFF, **_PROFILE, **_CUT}, "change of the width at pitch height"
    ),
    _row("change_at_top", "um", 1, change_at_top, _OFF, "change of the width at the top by the stop"),
    _row("taper", "um", 1, taper, _OFF, "what the stop turns a flank by, tip to top"),
    _row("lean", "arcmin", 1, lean, _OFF, "lean of the insert by the stop"),
    _row("width_tolerance", "um", 1, width_tolerance, _CUT, "what the insert's width may be off"),
    _row("scale", "", 0, scale, _of("form_error"), "enlargement that shows the form error"),
)
