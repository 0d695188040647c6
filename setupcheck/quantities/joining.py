"""Does the hub go on hot, and is it an interference at all? Sizes and heat of each joint. Lengths mm, temperatures degC."""

from __future__ import annotations

from setupcheck.jobfile.heating import Heat
from setupcheck.jobfile.models import Dimension, Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Known, Open, OutOfRange, Quantity, in_range
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.sized import at_reference
from setupcheck.quantities.typical import typical
from setupcheck.record import record


@record
class JointSizes:
    """Smallest and largest diameters of both surfaces of a joint [mm], and the nominal one."""

    nominal: float
    bore_low: float
    bore_high: float
    journal_low: float
    journal_high: float

    def told(self) -> str:
        """`bore 32.0000 to 32.0110 mm, journal 32.0270 to 32.0330 mm`."""
        bore, journal = (self.bore_low, self.bore_high), (self.journal_low, self.journal_high)
        of = {"bore": bore, "journal": journal}
        return ", ".join(f"{name} {low:.4f} to {high:.4f} mm" for name, (low, high) in of.items())


def limits_of(given: Dimension, path: str, floor: Floor) -> tuple[float, float] | Open:
    """Smallest and largest size [mm]: as measured (brought back to 20 degC), by its limits, or by its ISO 286 class.

    Source: the job file; ISO 286 tables in rules/data (each row with its own source).
    """
    if given.measured is not None:
        if given.uncertainty is None:
            return Open((f"{path}.uncertainty",))
        cold = at_reference(given, path, floor)
        return cold if isinstance(cold, Open) else (cold[0] - given.uncertainty, cold[1] + given.uncertainty)
    assert given.nominal is not None
    if given.lower is not None or given.upper is not None:
        return given.nominal + (given.lower or 0.0), given.nominal + (given.upper or 0.0)
    if given.fit is None:
        return Open((path,), f"{path} has no limits: write them, as in 32.041 ±0.003, or a class, as in 32 H6")
    from setupcheck.quantities.fit_tables import limits

    found = limits(given.nominal, given.fit)
    return given.nominal + found.lower, given.nominal + found.upper


def sizes(floor: Floor, join: Join) -> JointSizes | Open | None:
    """Limits of bore and journal; None where one of them is no plain round surface. Source: the job file, ISO 286."""
    found: list[tuple[float, float]] = []
    opened: list[Open] = []
    nominal = 0.0
    for text in (join.outer, join.inner):
        ref = floor.loaded.ref(text)
        node = _round(floor, ref)
        if node is None:
            return None
        nominal = nominal or node.diameter.value
        limits = limits_of(node.diameter, f"parts.{ref.part}.surfaces.{ref.surface}.diameter", floor)
        if isinstance(limits, Open):
            opened.append(limits)
        else:
            found.append(limits)
    if opened:
        missing = tuple(m for one in opened for m in one.missing)
        return Open(missing, "; ".join(one.because for one in opened if one.because))
    (bore_low, bore_high), (journal_low, journal_high) = found
    return JointSizes(nominal, bore_low, bore_high, journal_low, journal_high)


def _round(floor: Floor, ref: Ref) -> Round | None:
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    return node if isinstance(node, Round) and node.kind in ("bore", "cylinder") else None


def interference_most(sizes: JointSizes) -> float:
    """Largest journal less smallest bore, on diameter [mm]; negative is a clearance. Source: ISO 286 (from memory)."""
    return sizes.journal_high - sizes.bore_low


def interference_least(sizes: JointSizes) -> float:
    """Smallest journal less largest bore, on diameter [mm]; negative is a clearance. Source: ISO 286 (from memory)."""
    return sizes.journal_low - sizes.bore_high


def gap_after_cooling(floor: Floor, join: Join, *, op: int, length: float) -> Account:
    """What a shrunk hub may stand off its shoulder once it is cold, one way only, 0 to U L/D [mm].

    Nothing where the shoulder end grips first; undetermined where the sizes of the joint are not stated.
    length  of the joint [mm]
    Source: physics.heating.shoulder_gap.
    """
    from setupcheck.physics.heating import shoulder_gap

    if join.by != "shrink" or join.grips_first == "shoulder-end":
        return Account()
    found = sizes(floor, join)
    if found is None:
        return Account()
    name = f"op {op}: gap at the shoulder after cooling"
    if isinstance(found, Open):
        missing = found.missing[0] if found.missing else f"setups.{op}.join.grips_first"
        return Account.of(Cause(name, "undetermined", op, missing=missing)).along(1)
    gap = shoulder_gap(interference_most(found), diameter=found.nominal, grip_distance=length)
    if gap <= 0.0:
        return Account()
    return Account.of(Cause(name, "one-sided", op, high=gap, mode="derived", paths=(f"setups.{op}.join.grips_first",)))


def kind(most: float, least: float) -> str:
    """interference, clearance, or transition between both, over the limits of the sizes. Source: ISO 286 (from memory)."""
    if least > 0.0:
        return "interference"
    return "clearance" if most <= 0.0 else "transition"


def fit_in_words(floor: Floor, most: float, least: float) -> str:
    """Interference, play, or both, over the limits of the sizes: a negative interference is said as the play it is.

    Source: the limits of bore and journal.
    """
    low, high = floor.fine(abs(least)), floor.fine(abs(most))
    match kind(most, least):
        case "interference":
            return f"interference {low} to {high} at 20 degC"
        case "clearance":
            return f"play {high} to {low} at 20 degC"
        case _:
            return f"from {low} of play to {high} of interference at 20 degC"


def needed(floor: Floor, join: Join, most: float, sizes: JointSizes, shaft_at: float) -> float | Open | None:
    """Temperature the hub must have as it goes over the shaft [degC], for the tightest pair and the usual play.

    T = 20 + [U_max + play + alpha_I D (T_shaft - 20)] / (alpha_A D); sizes hold at 20 degC, whatever the room has. Below
    20 degC, where a well chilled shaft goes into a cold hub, the hub's expansion is taken at its high end.
    A need above 400 degC tells no more than that no heat which is known will do: what a plan gives beyond that is open.
    shaft_at  warmest the shaft may be when it meets the hub [degC]
    Source: derived in physics.heating, agrees with DIN 7190 (from memory); expansions from rules/data/materials.yaml.
    """
    from setupcheck.physics.heating import REFERENCE_TEMPERATURE, joining_play, joining_temperature
    from setupcheck.physics.materials import expansion_for
    from setupcheck.quantities.stuff import material_of

    if join.by != "shrink" or most <= 0.0:
        return None
    hub, shaft = (material_of(floor, floor.loaded.ref(text).part) for text in (join.outer, join.inner))
    opened = [x for x in (hub, shaft) if isinstance(x, Open)]
    if opened or isinstance(hub, Open) or isinstance(shaft, Open):
        return Open(tuple(m for x in opened for m in x.missing), "; ".join(x.because for x in opened if x.because))
    with in_range:
        shaft_expansion = expansion_for("joining", "shaft", shaft, temperature=shaft_at).value

    def at(hub_expansion: float) -> float:
        return joining_temperature(
            most,
            play=joining_play(sizes.nominal),
            diameter=sizes.nominal,
            hub_expansion=hub_expansion,
            shaft_expansion=shaft_expansion,
            shaft_temperature=shaft_at,
        )

    with in_range:
        warm = at(hub.heating.low)
        return warm if warm >= REFERENCE_TEMPERATURE else at(hub.heating.high)


def heat_error(heat: Heat) -> tuple[float, str] | None:
    """Error of the hub's heat [K] and the typical value it rests on ("" where it is stated); None where neither is known.

    A hub whose own heat is read has the error of what reads it, else that of its heat source.

    Source: the job file; rules/data/typical.yaml.
    """
    if heat.oven_error is not None:
        return heat.oven_error, ""
    by = heat.read_by if heat.read_by is not None else heat.by
    row = typical(by, "temperature_error") if by is not None else None
    return (row.value, row.name) if row is not None else None


def key_of_error(heat: Heat) -> str:
    """What to write where nothing tells the error of the heat: its source, which has a typical one, else the error itself.

    Source: the job file.
    """
    return "by" if heat.by is None and heat.read_by is None else "oven_error"


def _planned(floor: Floor, join: Join, op: int, way: float) -> Known | Open | None:
    """Planned heat with the error of its source taken one way [degC]: -1 the least, +1 the most; None by cold alone."""
    path, heat = f"setups.{op}.join.heat", join.heat if join.heat is not None else Heat()
    if join.by != "shrink" or heat.by_cold_alone(floor.loaded.job.room):
        return None
    error = heat_error(heat)
    if heat.hub is None or error is None:
        return Open((f"{path}.hub",) * (heat.hub is None) + (f"{path}.{key_of_error(heat)}",) * (error is None))
    own = floor.loaded.owned(f"{path}.oven_error")
    return Known(heat.hub + way * error[0], frozenset({error[1]} - {""}) | own)


def planned_low(floor: Floor, join: Join, op: int) -> Known | Open | None:
    """Planned heat less the error of the oven [degC]; what is lost on the way is not taken off.

    Raises: OutOfRange above HEATED_END, as all that it opens is worked out with the hub's mean expansion.
    Source: the job file; a typical error of the heat source where none is stated.
    """
    from setupcheck.physics.materials import HEATED_END

    found = _planned(floor, join, op, -1.0)
    if isinstance(found, Known) and isinstance(found.value, float | int) and found.value > HEATED_END:
        raise OutOfRange(
            f"a hub of {found.value:.0f} degC: how far it has grown is known up to {HEATED_END:g} degC alone"
        )
    return found


def planned_high(floor: Floor, join: Join, op: int) -> Known | Open | None:
    """Planned heat and the error of the oven [degC].

    Source: the job file; a typical error of the heat source where none is stated.
    """
    return _planned(floor, join, op, +1.0)


def kind_of_error(join: Join, planned: float) -> str:
    """stated or typical, of a heat source's error that is not missing (a missing one has its own finding).

    Source: the job file.
    """
    return "stated" if join.heat is not None and join.heat.oven_error is not None else "typical"


def cap(floor: Floor, join: Join) -> float | Open | None:
    """Highest temperature the hub's material stands in one heating [degC]. Source: rules/data/materials.yaml."""
    from setupcheck.quantities.stuff import cap_of, material_of

    if join.by != "shrink":
        return None
    part = floor.loaded.ref(join.outer).part
    found = material_of(floor, part)
    return found if isinstance(found, Open) else cap_of(floor, part, found)


_MOST, _SIZES = {"most": "fit.interference_most"}, {"sizes": "fit.sizes"}
_HERE = {"floor": "route.floor", "join": ":"}

JOINING = (
    Quantity("fit.sizes", "join", "", 0, sizes, _HERE, "limits of bore and journal"),
    Quantity("fit.interference_most", "join", "um", 1, interference_most, _SIZES, "interference of the tightest pair"),
    Quantity("fit.interference_least", "join", "um", 1, interference_least, _SIZES, "interference of the loosest pair"),
    Quantity(
        "fit.said",
        "join",
        "",
        0,
        fit_in_words,
        {"floor": "route.floor", **_MOST, "least": "fit.interference_least"},
        "the fit over its limits, in words",
    ),
    Quantity("fit.kind", "join", "", 0, kind, {**_MOST, "least": "fit.interference_least"}, "kind of the fit"),
    Quantity(
        "heat.needed",
        "join",
        "degC",
        0,
        needed,
        {**_HERE, **_MOST, **_SIZES, "shaft_at": "heat.shaft_at"},
        "heat the hub needs to go on",
    ),
    Quantity("heat.planned_low", "join", "degC", 0, planned_low, {**_HERE, "op": "@op"}, "least heat the plan gives"),
    Quantity("heat.planned_high", "join", "degC", 0, planned_high, {**_HERE, "op": "@op"}, "most heat the plan gives"),
    Quantity(
        "heat.error_kind",
        "join",
        "",
        0,
        kind_of_error,
        {"join": ":", "planned": "settled heat.planned_low"},
        "how good the heat source's error is known, where it is known at all",
    ),
    Quantity("heat.cap", "join", "degC", 0, cap, _HERE, "heat the hub's material stands"),
)
