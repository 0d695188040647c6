"""What each way of dividing has to meet: positions, faces, parallax, lean of a standard, drift. Angles rad, lengths mm."""

from __future__ import annotations

import math

from setupcheck.division import ways
from setupcheck.jobfile.dividing import Divide, Waves
from setupcheck.jobfile.setups import Setup
from setupcheck.notation import show
from setupcheck.quantities.book import Known, Open, Quantity
from setupcheck.quantities.dividing import HAS_WHEEL, has_own_errors, sight_errors, typical_errors
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import is_own

HAS_WORM = ("hole-circle", "rotary-table")
"""Ways of dividing that turn a crank, so that wheel, worm and setting each have an error."""
SINGLE = ("setting", "sighting", "sides_error", "positions_error")
"""Keys of errors that every setting has for itself."""
LONGEST_SIGHT = 200_000.0
"""Farthest target that is worth advice [mm]. Source: our choice."""


def own_error(floor: Floor, setup: Setup, count: int) -> str | Known | Open:
    """stated or typical, of the dividing device's own error; open with the key to fill, for teeth by coordinates with the way.

    What the shop's record says of the head is stated, unless a typical value has to stand beside it.
    Source: the job file; where it states no error, the typical ones of the way of dividing.
    """
    divide = setup.divide
    if divide is None:
        return Open((f"setups.{setup.op}.divide",))
    assert count > 1
    if divide.by == "x-y" and _cuts_teeth(floor, setup):
        return Open((f"setups.{setup.op}.divide.by",), "coordinates set holes, not teeth")
    if has_own_errors(divide):
        path = f"setups.{setup.op}.divide."
        own = floor.loaded.owned(*(p for p in floor.loaded.own if p.startswith(path)))
        return Known("stated" if all(map(is_own, own)) else "typical", own)
    keys = ("x", "y") if divide.by == "x-y" else ("wheel",)
    return "typical" if typical_errors(divide) else Open(tuple(f"setups.{setup.op}.divide.{key}" for key in keys))


def _cuts_teeth(floor: Floor, setup: Setup) -> bool:
    refs = (floor.loaded.ref(name, setup.part) for name in setup.cut)
    return any(floor.loaded.job.parts[ref.part].surfaces[ref.surface].kind == "teeth" for ref in refs)


def left_out(setup: Setup, count: int) -> str | Open | None:
    """nothing, or the keys to fill: which error of a stated division nobody says; None where none or a typical one is taken.

    An instrument over the axis is set up anew every time: no typical value covers how far off it stands.
    Source: what each way of dividing is made of; a part without an error is written as ±0".
    """
    divide = setup.divide
    assert count > 1
    if divide is None:
        return None
    needed = {"centring": divide.by == "theodolite" and divide.centring is None}
    if has_own_errors(divide):
        needed |= _own_parts(divide)
    elif not needed["centring"]:
        return None
    missing = tuple(f"setups.{setup.op}.divide.{key}" for key, gone in needed.items() if gone)
    return Open(missing) if missing else "nothing"


def _own_parts(divide: Divide) -> dict[str, bool]:
    """Key -> whether a division that states some error of its own leaves this one out."""
    by, set_otherwise = divide.by, divide.by in ("sine-bar", "x-y")
    sighted, placed = by == "theodolite", by in ("direct", "face-teeth")
    averaged, mixed = sighted and divide.faces == "two", sighted and divide.faces == "mixed"
    return {
        "wheel": by in HAS_WHEEL and not averaged and not _any_wave(divide.wheel),
        "worm": by in HAS_WORM and not _any_wave(divide.worm),
        "setting": divide.setting is None
        and not set_otherwise
        and not (by == "polygon" and divide.sighting is not None),
        "positions_error": placed and divide.positions_error is None,
        "plumb": sighted and divide.plumb is None,
        "elevation": sighted and divide.plumb is None and divide.elevation is None,
        "collimation": mixed and divide.collimation is None,
        "trunnion": mixed and divide.trunnion is None,
        "polygon_tilt": by == "polygon" and divide.polygon_tilt is None,
        "sides_error": by == "polygon" and divide.sides_error is None,
        "blocks": by == "sine-bar" and divide.blocks is None and divide.setting is None,
        "quarters": divide.blocks is not None and divide.quarters is None,
        "x": by == "x-y" and divide.x is None,
        "y": by == "x-y" and divide.y is None,
    }


def _any_wave(waves: Waves | None) -> bool:
    return waves is not None and any(getattr(waves, key) is not None for key in Waves.model_fields)


def positions(setup: Setup, count: int) -> int | Open | None:
    """Notches, face-teeth or sides that a division takes; None for ways that have none. Source: the job file."""
    assert count > 1
    divide = setup.divide
    if divide is None or divide.by not in ("direct", "face-teeth", "polygon"):
        return None
    key = "sides" if divide.by == "polygon" else "positions"
    there = divide.sides if divide.by == "polygon" else divide.positions
    return there if there is not None else Open((f"setups.{setup.op}.divide.{key}",))


def off_position(positions: int, count: int) -> float:
    """Part of a position that one step leaves over, 0 where the count divides the positions. Source: exact fractions."""
    return float(ways.left_over(positions, count))


def count_advice(setup: Setup, positions: int, count: int) -> str:
    """Counts that the positions divide into, near the one asked for. Source: exact fractions."""
    near = " or ".join(str(n) for n in ways.counts_near(positions, count))
    kind = "sides" if setup.divide is not None and setup.divide.by == "polygon" else "positions"
    multiples = [n * count for n in (1, 2, 3)]
    other = f"take one of {multiples[0]}, {multiples[1]} or {multiples[2]} {kind}, or divide another way"
    return f"{positions} {kind} divide into {near}; for {count} {other}."


def face_errors(setup: Setup) -> str | Open | None:
    """averaged, alike, one-face or mixed-faces: what the faces that are read leave of a theodolite's errors.

    averaged: both faces are read; alike: what is stated comes alike at every setting. None where nothing is stated that
    the faces decide. Eccentricity of the circle needs both; collimation and trunnion only the same face throughout.
    Source: `division.ways`.
    """
    divide = setup.divide
    if divide is None or divide.by != "theodolite":
        return None
    off_centre = divide.wheel is not None and bool(divide.wheel.once_per_turn)
    if not off_centre and not sight_errors(divide):
        return None
    if divide.faces is None:
        return Open((f"setups.{setup.op}.divide.faces",))
    if divide.faces == "mixed":
        return "mixed-faces"
    return "averaged" if divide.faces == "two" else "one-face" if off_centre else "alike"


def parallax(setup: Setup) -> float | None:
    """Amplitude of the once-per-turn error of an instrument off the axis [rad]. Source: `division.ways.parallax`."""
    divide = setup.divide
    if divide is None or divide.centring is None or divide.target is None:
        return None
    return ways.parallax(divide.centring, divide.target)


def parallax_advice(floor: Floor, setup: Setup, single_error: float) -> str | None:
    """How far the target or how near the axis would do. Source: `division.ways.target_for`."""
    divide = setup.divide
    if divide is None or divide.centring is None or divide.target is None or single_error <= 0.0:
        return None
    least = math.floor(divide.target * math.sin(single_error) * 1e4) / 1e4
    nearer = f"bring the instrument within {floor.size(least)} of the axis (centring)" if least > 0.0 else ""
    far = ways.target_for(divide.centring, single_error)
    inches = floor.loaded.job.units == "in"
    distance = f"{math.ceil(far / 25.4)} in" if inches else f"{math.ceil(far / 100.0) / 10.0:g} m"
    farther = f"take a target {distance} away" if far <= LONGEST_SIGHT else ""
    said = ", or ".join(part for part in (nearer, farther) if part)
    if not said:
        return None
    return f"{said[:1].upper()}{said[1:]}; or sight a collimated target, which knows no parallax."


def standard_lean(setup: Setup) -> float | None:
    """Amplitude of the twice-per-turn error of a polygon that leans [rad]. Source: `division.ways.tilted_axis_wave`."""
    divide = setup.divide
    return (
        ways.tilted_axis_wave(divide.polygon_tilt) if divide is not None and divide.polygon_tilt is not None else None
    )


def lean_advice(single_error: float) -> str | None:
    """The lean at which the wave is as large as one setting's error. Source: tan^2(b/2) turned round."""
    if single_error <= 0.0:
        return None
    lean = math.floor(math.degrees(2.0 * math.atan(math.sqrt(single_error))) * 600.0) / 10.0
    return f"Bring the polygon's axis within {lean:g}' of the table's (polygon_tilt), by an indicator on its face."


def plumb_wave(setup: Setup) -> float | None:
    """Amplitude of the once-per-turn error of a theodolite out of plumb [rad]. Source: `division.ways.plumb_wave`."""
    divide = setup.divide
    if divide is None or divide.plumb is None or divide.elevation is None:
        return None
    return ways.plumb_wave(divide.plumb, divide.elevation)


def plumb_advice(setup: Setup, single_error: float) -> str | None:
    """The slope of the sight that would do. Source: v tan h turned round."""
    divide = setup.divide
    if divide is None or not divide.plumb or single_error <= 0.0:
        return None
    slope = math.floor(math.degrees(math.atan(single_error / divide.plumb)) * 10.0) / 10.0
    return f"Plumb the instrument better, or take a target less than {slope:g} deg above or below it (elevation)."


def drift_wave(setup: Setup, count: int) -> float | None:
    """Largest of the first four waves round the turn that a steady drift leaves in this order of cutting [rad].

    Source: `division.ways.slowest_waves`.
    """
    divide = setup.divide
    if divide is None or divide.drift is None:
        return None
    return divide.drift * ways.slowest_waves(ways.drift_shape(count, divide.order))


def drift_advice(setup: Setup, count: int, single_error: float) -> str | None:
    """Whether another order of cutting would do. Source: `division.ways.slowest_waves`."""
    divide = setup.divide
    if divide is None or divide.drift is None:
        return None
    spread = divide.drift * ways.slowest_waves(ways.drift_shape(count, "spread"))
    if divide.order == "spread" or spread > single_error:
        return "Let machine and part come to one temperature first, or cut in several rounds and let them cool between."
    return (
        f"Cut in a spread order (order: spread): {show(spread, 'arcsec', 1)} of slow wave are left. Range and largest step "
        "stay, as the first place cut still lies beside a late one."
    )


def single_error(setup: Setup) -> float | Known | None:
    """Largest error that every setting has for itself [rad]. Source: the job file, else the typical setting."""
    divide = setup.divide
    if divide is None:
        return None
    stated = [value for key in SINGLE if (value := getattr(divide, key)) is not None]
    if stated:
        return float(max(stated))
    row = typical_errors(divide).get("setting")
    return Known(row.value, frozenset({row.name})) if row is not None else None


_SETUP, _COUNT, _SINGLE = {"setup": ":"}, {"count": "divide.count"}, {"single_error": "divide.single_error"}
_FLOOR = {"floor": "route.floor"}
_POSITIONS = {"positions": "divide.positions", **_COUNT}


def _row(name: str, unit: str, digits: int, law: object, inputs: dict[str, str], about: str) -> Quantity:
    return Quantity(f"divide.{name}", "setup", unit, digits, law, inputs, about)  # type: ignore[arg-type]


WAYS = (
    _row(
        "error_stated",
        "",
        0,
        own_error,
        {"floor": "route.floor", **_SETUP, **_COUNT},
        "whether the dividing method's errors are stated",
    ),
    _row("left_out", "", 0, left_out, {**_SETUP, **_COUNT}, "errors of the division that nobody states"),
    _row("positions", "1", 0, positions, {**_SETUP, **_COUNT}, "notches, face-teeth or sides there are"),
    _row("off_position", "1", 3, off_position, _POSITIONS, "part of a position that one step leaves over"),
    _row("count_advice", "", 0, count_advice, {**_SETUP, **_POSITIONS}, "counts that close, as advice"),
    _row("single_error", "arcsec", 2, single_error, _SETUP, "largest error that every setting has for itself"),
    _row("face_errors", "", 0, face_errors, _SETUP, "what the faces read leave of a theodolite's errors"),
    _row("parallax", "arcsec", 2, parallax, _SETUP, "parallax of an instrument off the axis"),
    _row(
        "parallax_advice",
        "",
        0,
        parallax_advice,
        {"floor": "route.floor", **_SETUP, **_SINGLE},
        "target or centring that would do, as advice",
    ),
    _row("standard_lean", "arcsec", 2, standard_lean, _SETUP, "twice-per-turn error of a polygon that leans"),
    _row("lean_advice", "", 0, lean_advice, _SINGLE, "lean of the polygon that would do, as advice"),
    _row("plumb_wave", "arcsec", 2, plumb_wave, _SETUP, "once-per-turn error of an instrument out of plumb"),
    _row("plumb_advice", "", 0, plumb_advice, {**_SETUP, **_SINGLE}, "slope of the sight that would do, as advice"),
    _row("drift_wave", "arcsec", 2, drift_wave, {**_SETUP, **_COUNT}, "slow wave that a steady drift leaves"),
    _row("drift_advice", "", 0, drift_advice, {**_SETUP, **_COUNT, **_SINGLE}, "order of cutting, as advice"),
)
