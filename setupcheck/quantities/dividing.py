"""From a `divide` entry to the errors of each tooth or hole. Angles rad, lengths mm."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import field, replace

from setupcheck.division import ways
from setupcheck.division.methods import rounded_settings
from setupcheck.jobfile.dividing import Divide, Waves
from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.setups import Cut
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped
from setupcheck.quantities.causes import Entry, size_error
from setupcheck.quantities.typical import Typical, typical
from setupcheck.record import record

OWN_ERRORS = ("wheel", "setting", "positions_error", "sides_error", "sighting", "blocks", "x", "y")
"""Keys that state an error of the device itself: one of them, and no typical value is taken."""


@record(frozen=False)
class _Errors:
    """The errors of one division as they are gathered: what a pattern has of them, and the typical values they rest on."""

    head: str
    path: str
    op: int
    pattern: Pattern
    taken: dict[str, Typical] = field(default_factory=dict)
    periodic: list[Periodic] = field(default_factory=list)
    scatter: list[Scatter] = field(default_factory=list)
    shaped: list[Shaped] = field(default_factory=list)
    rounding: tuple[float, ...] = ()
    outwards: tuple[float, ...] = ()

    def cause(self, what: str, law: str, bound: float, key: str) -> Cause:
        cause = Cause(f"{self.head}: {what}", law, self.op, high=bound, paths=(f"{self.path}.{key}",))  # type: ignore[arg-type]
        row = self.taken.get(key)
        return cause if row is None else replace(cause, mode="typical", rests_on=row.name)

    def wave(self, what: str, amplitude: float | None, harmonic: int, key: str) -> None:
        """An error that comes so many times per turn of the work, its phase unknown."""
        if amplitude:
            self.periodic.append(Periodic(self.cause(what, "disc", amplitude, key), harmonic))

    def each(self, what: str, bound: float | None, key: str, *, either: bool = False) -> None:
        """An error that each place draws for itself [rad]."""
        if bound:
            self.scatter.append(Scatter(self.cause(what, "length", bound, key), "angle", bound, either=either))

    def shape(self, what: str, bound: float | None, key: str, shape: tuple[float, ...]) -> None:
        """An error of one value with a known share at each place [rad]."""
        if bound:
            self.shaped.append(Shaped(self.cause(what, "length", bound, key), shape))

    def unknown(self, what: str, missing: str, along: str = "angle") -> None:
        """An error that nobody states; along a coordinate it leaves the figures open that reach outward, too."""
        if self.pattern.count > 1 or along == "coordinate":  # a single place is set by its coordinates, too
            cause = Cause(f"{self.head}{what}", "undetermined", self.op, missing=missing)
            self.scatter.append(Scatter(cause, along, 0.0))


def divided(
    pattern: Pattern,
    divide: Divide | None,
    cut: Cut,
    *,
    op: int,
    name: str,
    worm_ratio: int | None,
    ratio_at: str,
    turn: int,
    on_table: bool = False,
    holes: bool = True,
) -> Pattern:
    """The pattern with the errors of the dividing method and of the single places.

    No `divide` entry: the division is undetermined, unless there is only one place. An entry without any error of the
    device takes the typical ones of its way of dividing.
    ratio_at  the key that states `worm_ratio`, or would
    on_table  holes or slots under the spindle of a rotary table, which stands somewhere over its axis
    holes     holes or slots, which coordinates can set; teeth by x-y are undetermined
    """
    found = _Errors(f"op {op}, dividing {name}", f"setups.{op}.divide", op, replace(pattern, turn=turn))
    if divide is None:
        found.unknown(": how the circle is divided", found.path)
    else:
        if pattern.count > 1:
            found.taken = typical_errors(divide)
            divide = _filled(divide, found.taken)
            if not has_own_errors(divide) and (holes or divide.by != "x-y"):
                key = "x" if divide.by == "x-y" else "wheel" if divide.by in HAS_WHEEL else "setting"
                found.unknown(": error of the device", f"{found.path}.{key}")
        _of_the_device(found, divide, worm_ratio, ratio_at)
        _of_the_sight(found, divide)
        _of_the_bar(found, divide)
        if divide.by == "x-y" and holes:
            _of_coordinates(found, divide)
        elif divide.by == "x-y":
            found.unknown(": coordinates set holes, not teeth", f"{found.path}.by")
        found.shape("drift over the turn", divide.drift, "drift", ways.drift_shape(pattern.count, divide.order))
    return replace(
        found.pattern,
        periodic=tuple(found.periodic),
        scatter=(*found.scatter, *_single_places(cut, op, name)),
        rounding=found.rounding,
        outwards=found.outwards,
        shaped=tuple(found.shaped),
        radial=_table_offset(cut, op, name, pattern.radius, on_table=on_table)[0],
    )


HAS_WHEEL = ("hole-circle", "rotary-table", "direct", "vernier", "readout", "theodolite")
"""Ways that turn or read a divided wheel, plate or circle, whose error comes round with the work."""


def has_own_errors(divide: Divide) -> bool:
    """Whether the entry states an error of the device itself."""
    return any(getattr(divide, key) is not None for key in OWN_ERRORS)


def _of_the_device(found: _Errors, divide: Divide, worm_ratio: int | None, ratio_at: str) -> None:
    """Wheel, worm, setting, clamp, step; notches, teeth or sides, each off for itself.

    A theodolite's circle: read on both faces its once per turn cancels, the two readings being opposite; on mixed faces it
    comes with either sign, on the place's own face.  A tilted polygon errs twice per turn.
    """
    for what, amplitude, waves, key in _systematic(divide, worm_ratio):
        if divide.by == "theodolite" and waves == 1 and divide.faces == "two":
            continue
        if divide.by == "theodolite" and waves == 1 and divide.faces == "mixed":
            found.each(f"{what} on either face", amplitude, key, either=True)
        elif waves is None:
            found.unknown(f": {what}", ratio_at)
        else:
            found.wave(what, amplitude, waves, key)
    found.each("setting", divide.setting, "setting")
    found.each("clamping shift", divide.clamp, "clamp")
    found.each("error of the positions", divide.positions_error, "positions_error")
    found.each("error of the sides", divide.sides_error, "sides_error")
    found.each("sighting", divide.sighting, "sighting")
    if divide.polygon_tilt:
        found.wave("tilt of the polygon", ways.tilted_axis_wave(divide.polygon_tilt), 2, "polygon_tilt")
    step = divide.step
    if divide.by == "hole-circle" and divide.circle and worm_ratio:
        step = math.tau / (worm_ratio * divide.circle)  # of the work, from hole to hole; all zero where the circle fits
    if step and divide.by != "x-y":
        rounding = rounded_settings(found.pattern.count, step)
        found.rounding = rounding if any(rounding) else ()


def _of_the_sight(found: _Errors, divide: Divide) -> None:
    """A theodolite off the axis, out of plumb, out of square. Collimation and trunnion count on mixed faces only.

    On one face both are alike at every setting of one target; averaged over two they are gone (`ways.collimation_error`).
    """
    if divide.centring and divide.target is not None:
        found.wave(
            "parallax of the instrument off the axis", ways.parallax(divide.centring, divide.target), 1, "centring"
        )
    if divide.elevation is None:
        return
    if divide.plumb:
        found.wave("instrument out of plumb", ways.plumb_wave(divide.plumb, divide.elevation), 1, "plumb")
    if divide.faces == "mixed":
        for key, error in sight_errors(divide).items():
            found.each(f"{key} on either face", error, key, either=True)


def sight_errors(divide: Divide) -> dict[str, float]:
    """What collimation and trunnion do to a direction on one face [rad], those that are stated. Source: `division.ways`."""
    if divide.elevation is None:
        return {}
    return {
        key: error(stated, divide.elevation)
        for key, stated, error in (
            ("collimation", divide.collimation, ways.collimation_error),
            ("trunnion", divide.trunnion, ways.trunnion_error),
        )
        if stated
    }


def _of_the_bar(found: _Errors, divide: Divide) -> None:
    """A sine bar's blocks at every setting; the quarter turn it starts from shifts all places set from it alike."""
    if divide.by != "sine-bar":
        return
    count = found.pattern.count
    if divide.blocks and divide.sine_bar is not None:
        each = ways.sine_bar_errors(count, divide.sine_bar, divide.blocks)
        if worst := max(each):
            cause = found.cause("blocks under the sine bar", "length", worst, "blocks")
            found.scatter.append(Scatter(cause, "angle", worst, around=tuple(e / worst for e in each)))
    if divide.quarters:
        starts = tuple(ways.quarter_of(place, count)[0] for place in range(count))
        cause = found.cause("quarter turns the bar starts from", "length", divide.quarters, "quarters")
        found.scatter.append(Scatter(cause, "angle", divide.quarters, groups=starts))


def _of_coordinates(found: _Errors, divide: Divide) -> None:
    """Holes by x and y: each coordinate off for itself, and both rounded to the step, which is known before.

    x lies along the drawing's zero of angles. A part turned end for end mirrors one axis, which no ± sees.
    """
    pattern, turn = found.pattern, found.pattern.turn
    angles = tuple(pattern.angle(number) for number in range(1, pattern.count + 1))
    cosines, sines = tuple(map(math.cos, angles)), tuple(map(math.sin, angles))
    for key, bound, around, outward in (
        ("x", divide.x, tuple(-turn * s for s in sines), cosines),
        ("y", divide.y, tuple(turn * c for c in cosines), sines),
    ):
        if bound is None:
            found.unknown(f": coordinate {key}", f"{found.path}.{key}", "coordinate")
        elif bound:
            cause = found.cause(f"coordinate {key}", "length", bound, key)
            found.scatter.append(Scatter(cause, "coordinate", bound, around, outward))
    if divide.step:
        known = ways.rounded_coordinates(angles, pattern.radius, divide.step)
        found.outwards = tuple(out for out, _ in known)
        found.rounding = tuple(turn * arc / pattern.radius for _, arc in known)


def _single_places(cut: Cut, op: int, name: str) -> Iterator[Scatter]:
    """What each gap or hole adds for itself, whatever divides."""
    if cut.each is None:
        return
    path = f"setups.{op}.cut.{name}.each"
    words = f" by {cut.each.by}" if cut.each.by else ""
    for along, limit in (("radial", cut.each.radial), ("tangential", cut.each.tangential)):
        if limit:
            what = f"op {op}, {name}{words}: {along} scatter"
            yield Scatter(Cause(what, "length", op, high=limit, paths=(f"{path}.{along}",)), along, limit)


def typical_errors(divide: Divide) -> dict[str, Typical]:
    """Typical errors of the way of dividing, by the keys they stand in for; empty where the job states the device's error.

    A worm that is stated keeps what is stated of it. A way that is not in the table (`x-y`) has none and stays open.
    """
    if has_own_errors(divide):
        return {}
    keys = {"wheel.once_per_turn": "once_per_turn", "setting": "setting"}
    if divide.worm is None:
        keys["worm.once_per_crank"] = "once_per_crank"
    rows = {key: typical(divide.by, what) for key, what in keys.items()}
    return {key: row for key, row in rows.items() if row is not None}


def _filled(divide: Divide, taken: dict[str, Typical]) -> Divide:
    """The entry with typical values put where it states none."""
    wheel, worm, setting = (taken.get(key) for key in ("wheel.once_per_turn", "worm.once_per_crank", "setting"))
    return divide.model_copy(
        update={
            **({"wheel": Waves.model_construct(once_per_turn=wheel.value)} if wheel is not None else {}),
            **({"worm": Waves.model_construct(once_per_crank=worm.value)} if worm is not None else {}),
            **({"setting": setting.value} if setting is not None else {}),
        }
    )


def _systematic(divide: Divide, worm_ratio: int | None) -> Iterator[tuple[str, float, int | None, str]]:
    """(name, amplitude, waves per turn of the work, key) of each systematic error; no number of waves without a ratio.

    The wheel of the head turns with the work, its worm once per turn of the crank: `worm_ratio` times as often.
    """
    for owner, key, turns in ((divide.wheel, "wheel", 1), (divide.worm, "worm", worm_ratio)):
        if owner is None:
            continue
        if owner.once_per_turn:
            yield f"once per turn of its {key}", owner.once_per_turn, turns, f"{key}.once_per_turn"
        if owner.twice_per_turn:
            yield (
                f"twice per turn of its {key}",
                owner.twice_per_turn,
                None if turns is None else 2 * turns,
                f"{key}.twice_per_turn",
            )
        if owner.once_per_crank:
            yield "once per crank turn", owner.once_per_crank, worm_ratio, f"{key}.once_per_crank"


def _table_offset(cut: Cut, op: int, name: str, radius: float, *, on_table: bool) -> tuple[Account, Account]:
    """(radial error, error across it) [mm] from the spindle's place over a rotary table; an axis not stated is open."""
    places = cut.spindle_to_axis or {}
    if not places and not on_table:
        return Account(), Account()
    path = f"setups.{op}.cut.{name}.spindle_to_axis"

    def off(axis: str, stated: Dimension | None, drawn: float) -> Account:
        entry = Entry(f"op {op}, {name}: spindle to table axis, {axis}", op, f"{path}.{axis}", "")
        if stated is None:
            return Account.of(entry.missing()).along(1)
        middle, error = size_error(stated, entry)
        return error.plus_constant(middle - drawn)

    return off("x", places.get("x"), radius), off("y", places.get("y"), 0.0)


def table_turn(cut: Cut, *, op: int, name: str, radius: float, on_table: bool = False) -> Account:
    """What the y setting of a spindle over a rotary table turns the whole pattern by [rad]. Source: geometry (arc / r)."""
    return _table_offset(cut, op, name, radius, on_table=on_table)[1] * (1.0 / radius)
