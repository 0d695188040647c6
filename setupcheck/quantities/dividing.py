"""From a `divide` entry to the errors of each tooth or hole. Angles rad, lengths mm."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from setupcheck.division.methods import rounded_settings
from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.setups import Cut, Divide, Waves
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern, Periodic, Scatter
from setupcheck.quantities.causes import Entry, size_error
from setupcheck.quantities.typical import Typical, typical


def divided(
    pattern: Pattern,
    divide: Divide | None,
    cut: Cut,
    *,
    op: int,
    name: str,
    worm_ratio: int | None,
    turn: int,
    on_table: bool = False,
) -> Pattern:
    """The pattern with the errors of the dividing method and of the single places.

    No `divide` entry: the division is undetermined, unless there is only one place. An entry without any error of the
    device takes the typical ones of its way of dividing.
    on_table  holes or slots under the spindle of a rotary table, which stands somewhere over its axis
    """
    path = f"setups.{op}.divide"
    head = f"op {op}, dividing {name}"
    periodic: list[Periodic] = []
    scatter: list[Scatter] = []
    drift: list[Cause] = []
    rounding: tuple[float, ...] = ()

    taken: dict[str, Typical] = {}

    def made(cause: Cause, key: str) -> Cause:
        row = taken.get(key)
        return cause if row is None else replace(cause, mode="typical", rests_on=row.name)

    def wave(what: str, bound: float, harmonic: int, key: str) -> None:
        cause = Cause(f"{head}: {what}", "disc", op, high=bound, paths=(f"{path}.{key}",))
        periodic.append(Periodic(made(cause, key), harmonic))

    if divide is None:
        if pattern.count > 1:
            scatter.append(
                Scatter(Cause(f"{head}: how the circle is divided", "undetermined", op, missing=path), "angle", 0.0)
            )
    else:
        if pattern.count > 1:
            taken = typical_errors(divide)
            divide = _filled(divide, taken)
        if divide.wheel is None and divide.setting is None and pattern.count > 1:
            scatter.append(
                Scatter(
                    Cause(f"{head}: error of the device", "undetermined", op, missing=f"{path}.wheel"), "angle", 0.0
                )
            )
        for what, amplitude, waves_per_turn, key in _systematic(divide, worm_ratio):
            if waves_per_turn is None:
                missing = Cause(f"{head}: {what}", "undetermined", op, missing=f"setups.{op}.machine")
                scatter.append(Scatter(missing, "angle", 0.0))
            else:
                wave(what, amplitude, waves_per_turn, key)
        for what, bound, key in (("setting", divide.setting, "setting"), ("clamping shift", divide.clamp, "clamp")):
            if bound:
                cause = Cause(f"{head}: {what}", "length", op, high=bound, paths=(f"{path}.{key}",))
                scatter.append(Scatter(made(cause, key), "angle", bound))
        if divide.drift:
            drift.append(
                Cause(f"{head}: drift over the turn", "length", op, high=divide.drift, paths=(f"{path}.drift",))
            )
        if divide.step:
            rounding = rounded_settings(pattern.count, divide.step)
    if cut.each is not None:
        each = f"setups.{op}.cut.{name}.each"
        words = f" by {cut.each.by}" if cut.each.by else ""
        for along, limit in (("radial", cut.each.radial), ("tangential", cut.each.tangential)):
            if limit:
                cause = Cause(
                    f"op {op}, {name}{words}: {along} scatter", "length", op, high=limit, paths=(f"{each}.{along}",)
                )
                scatter.append(Scatter(cause, along, limit))
    return Pattern(
        pattern.count,
        pattern.radius,
        turn,
        pattern.start,
        pattern.pressure_angle,
        tuple(periodic),
        tuple(scatter),
        rounding,
        tuple(drift),
        _table_offset(cut, op, name, pattern.radius, on_table=on_table)[0],
    )


def typical_errors(divide: Divide) -> dict[str, Typical]:
    """Typical errors of the way of dividing, by the keys they stand in for; empty where the job states the device's error.

    A worm that is stated keeps what is stated of it. A way that is not in the table (`x-y`) has none and stays open.
    """
    if divide.wheel is not None or divide.setting is not None:
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
