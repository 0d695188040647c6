"""The chilled shaft of a shrink fit: its error, what it gains on the way, how warm it may be when it meets the hub. degC, K."""

from __future__ import annotations

from setupcheck.jobfile.heating import Heat
from setupcheck.jobfile.models import Round
from setupcheck.jobfile.setups import Join
from setupcheck.physics.heating import DULL, LARGEST_CHILLED, Ring, cooled_temperature
from setupcheck.physics.materials import expansion_for
from setupcheck.quantities.book import Known, Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_of
from setupcheck.quantities.through import one_temperature
from setupcheck.quantities.typical import typical


def cold_error(heat: Heat) -> tuple[float, str] | None:
    """Error of the shaft's cold [K] and the typical value it rests on ("" where it is stated); None where neither is known.

    Source: the job file; rules/data/typical.yaml.
    """
    if heat.cold_error is not None:
        return heat.cold_error, ""
    row = typical(heat.cold_by, "temperature_error") if heat.cold_by is not None else None
    return (row.value, row.name) if row is not None else None


def out_of_the_cold(join: Join, op: int, way: float = +1.0) -> tuple[float, frozenset[str]] | Open:
    """What a chilled shaft may have as it leaves the cold [degC], and the typical values that rests on.

    As stated, and its error one way: +1 the warmest.

    Source: the job file; a typical error of the means where none is stated.
    """
    path, heat = f"setups.{op}.join.heat", join.heat if join.heat is not None else Heat()
    error = cold_error(heat)
    if heat.shaft is None or error is None:
        return Open((f"{path}.shaft",) * (heat.shaft is None) + (f"{path}.cold_error",) * (error is None))
    return heat.shaft + way * error[0], frozenset({error[1]} - {""})


def seat_of(floor: Floor, join: Join, emissivity: float) -> Ring | Open | None:
    """The seat as a cylinder with bare ends, its hole open; None where it is no plain round surface.

    Raises: OutOfRange above LARGEST_CHILLED.
    Source: lumped capacity (physics.heating). The rest of the shaft is as cold and only helps.
    """
    ref = floor.loaded.ref(join.inner)
    seat = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    if not isinstance(seat, Round) or seat.kind != "cylinder":
        return None
    found = material_of(floor, ref.part)
    if isinstance(found, Open):
        return found
    if seat.diameter.value > LARGEST_CHILLED:
        raise OutOfRange(
            f"a shaft of {seat.diameter.value:g} mm: how fast still air warms it is known up to {LARGEST_CHILLED:g} mm"
        )
    with in_range:
        return Ring(
            bore=seat.hole or 0.0,
            outside=seat.diameter.value,
            length=seat.high - seat.low,
            density=found.density.value,
            specific_heat=found.specific_heat.value,
            emissivity=emissivity,
        )


def shaft_gain(floor: Floor, join: Join, op: int) -> float | Open | None:
    """What a chilled shaft gains on its way to the hub, in still air [K]: convection and radiation onto its seat.

    Frost, gloves and the bench warm it more.  None where nothing chills it.
    Raises: OutOfRange for a shaft that is not of one temperature throughout.
    Source: physics.heating (Churchill and Chu, Stefan-Boltzmann).
    """
    room = floor.loaded.job.room
    if join.by != "shrink" or join.heat is None or not join.heat.chills(room):
        return None
    start, seat = out_of_the_cold(join, op), seat_of(floor, join, DULL)
    missing = [m for x in (start, seat) if isinstance(x, Open) for m in x.missing]
    missing += [f"setups.{op}.join.heat.carry"] if join.heat.carry is None else []
    if missing or isinstance(start, Open) or isinstance(seat, Open) or join.heat.carry is None:
        return Open(tuple(missing), seat.because if isinstance(seat, Open) else "")
    if seat is None:
        return None
    one_temperature(
        "shaft", "warms", seat, material_of(floor, floor.loaded.ref(join.inner).part), at=start[0], room=room
    )
    return max(cooled_temperature(seat, start=start[0], seconds=join.heat.carry, air=room) - start[0], 0.0)


def shaft_at(floor: Floor, join: Join, op: int, gain: float) -> float | Known | Open | None:
    """Warmest the shaft may be when it meets the hub [degC]: as stated, its error and what it gains; else the room's.

    Source: the job file; `shaft_gain`.
    """
    if join.by != "shrink":
        return None
    room = floor.loaded.job.room
    if join.heat is None or not join.heat.chills(room):
        return join.heat.shaft if join.heat is not None and join.heat.shaft is not None else room
    start = out_of_the_cold(join, op)
    own = floor.loaded.owned(f"setups.{op}.join.heat.cold_error")
    return start if isinstance(start, Open) else Known(start[0] + gain, start[1] | own)


def kind_of_cold_error(floor: Floor, join: Join, at: float) -> str | None:
    """stated or typical, of the error of a chilled shaft that is not missing; None where nothing chills it.

    Source: the job file.
    """
    if join.heat is None or not join.heat.chills(floor.loaded.job.room):
        return None
    return "stated" if join.heat.cold_error is not None else "typical"


def contraction(floor: Floor, join: Join, at: float) -> float:
    """Mean expansion of the shaft between 20 degC and a temperature, the end that is safe for joining [1/K].

    Raises: OutOfRange where no expansion is known.  Source: physics.materials.
    """
    found = material_of(floor, floor.loaded.ref(join.inner).part)
    assert not isinstance(found, Open)  # `heat.needed` has asked for it
    with in_range:
        return expansion_for("joining", "shaft", found, temperature=at).value


_HERE = {"floor": "route.floor", "join": ":"}

CHILLING = (
    Quantity(
        "heat.shaft_gain",
        "join",
        "K",
        1,
        shaft_gain,
        {**_HERE, "op": "@op"},
        "heat that the chilled shaft gains on its way",
    ),
    Quantity(
        "heat.shaft_at",
        "join",
        "degC",
        0,
        shaft_at,
        {**_HERE, "op": "@op", "gain": "heat.shaft_gain"},
        "warmest the shaft may be when it meets the hub",
        {"gain": 0.0},
    ),
    Quantity(
        "heat.cold_error_kind",
        "join",
        "",
        0,
        kind_of_cold_error,
        {**_HERE, "at": "settled heat.shaft_at"},
        "how good the error of the cold is known, where it is known at all",
    ),
)
