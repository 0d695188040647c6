"""Is a stated run-out one that its device reaches, and known where it is used? Lengths mm."""

from __future__ import annotations

from setupcheck.jobfile.holders import CHUCKED
from setupcheck.jobfile.models import Deviation
from setupcheck.jobfile.setups import Centre, Setup
from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.clamping import gripped
from setupcheck.quantities.devices import DIALLED
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import Typical, typical

FINEST = 0.001
"""Division of the finest dial that usually stands at a machine [mm]. Source: common practice."""
_RUN_OUTS = ("runout", "face_runout")


def _plain(given: Deviation | None, floor: Floor, path: str) -> float | None:
    """A bound that the planner wrote with nothing behind it: not measured, not of a shop's record, no dial named [mm]."""
    if given is None or given.measured is not None or given.indicator is not None or floor.loaded.owned(path):
        return None
    return given.at_most


def _row(entry: HoldEntry) -> Typical | None:
    """The typical value of what holds: of the device the entry names, else of the hold's own."""
    given, by = entry.error, str(getattr(entry.entry, "by", None) or "")
    named = given.device if given is not None else None
    found = typical(named, entry.key) if named else None
    return found if found is not None else typical(by, entry.key)


def stated(entry: HoldEntry, floor: Floor, path: str) -> float | None:
    """Run-out of a hold as planned, a full indicator movement [mm], where nothing but the plan says it.

    None where it is measured, stands in the shop's record, or names the dial it is read with (MEASURE-007 looks at that);
    jaws over shims that nobody measured are MEASURE-003's.
    Source: the job file.
    """
    over_shims = getattr(entry.entry, "by", None) == "shimmed-jaws"
    if entry.key not in _RUN_OUTS or over_shims or _row(entry) is None:
        return None
    return _plain(entry.error, floor, f"{path}.{entry.key}")


def best(entry: HoldEntry) -> float | None:
    """Best that is usual of the device [mm]. Source: rules/data/typical.yaml, lower end of the range."""
    row = _row(entry) if entry.key in _RUN_OUTS else None
    return row.best if row is not None else None


def advice(entry: HoldEntry, floor: Floor, planned: float) -> str | None:
    """What to write instead. Source: full indicator movement is twice the eccentricity; typical range of the device."""
    row = _row(entry)
    if row is None:
        return None
    double = floor.fine(2.0 * planned)
    if planned <= 0.0:  # nothing is not half of anything
        return f"No device runs without error. Usual of {row.device}: {_range(row, floor)}; write what yours showed."
    told = f"usual of {row.device}: {_range(row, floor)} ({row.note})"
    if entry.key == "face_runout":
        half = f"Run-out is the full movement of the dial over one turn; if this is half of it, write {double}"
    else:
        half = f"Run-out is the full movement of the dial, twice the eccentricity; if this is the eccentricity, write {double}"
    fine = "0.05 thou" if floor.loaded.job.units == "in" else "1 um"
    dial = f" or name the dial that shows it (indicator: {fine})" if getattr(entry.entry, "by", "") in DIALLED else ""
    return f"{half}. {told[:1].upper()}{told[1:]}. If it was read so true, write measured with its uncertainty{dial}."


def _range(row: Typical, floor: Floor) -> str:
    return f"{floor.fine(row.best)} to {floor.fine(row.worst)}"


def _first_with(floor: Floor, setup: Setup, name: str | None) -> bool:
    """Whether this is the first operation on a machine, so that one entry is told once."""
    ops = [s.op for s in floor.loaded.job.setups if s.join is None and machine_of(floor.loaded, s)[0] == name]
    return ops[:1] == [setup.op]


def axis_stated(floor: Floor, setup: Setup) -> float | None:
    """Run-out of the machine's own axis as written [mm], told at its first operation; None where it is measured.

    Source: the job file.
    """
    if setup.join is not None:
        return None
    name, machine = machine_of(floor.loaded, setup)
    if machine is None or typical(machine.kind, "axis") is None or not _first_with(floor, setup, name):
        return None
    return _plain(machine.axis_runout, floor, f"machines.{name}.axis_runout")


def axis_best(floor: Floor, setup: Setup) -> float | None:
    """Best that is usual of a machine of its kind [mm]. Source: rules/data/typical.yaml, lower end of the range."""
    if setup.join is not None:
        return None
    _, machine = machine_of(floor.loaded, setup)
    row = typical(machine.kind, "axis") if machine is not None else None
    return row.best if row is not None else None


def axis_advice(floor: Floor, setup: Setup, planned: float) -> str | None:
    """What to write instead. Source: full indicator movement is twice the radial error; typical range of the machine."""
    name, machine = machine_of(floor.loaded, setup)
    row = typical(machine.kind, "axis") if machine is not None else None
    if row is None:
        return None
    if planned <= 0.0:
        return f"No axis runs without error. Usual of a {row.device}: {_range(row, floor)}; write what yours showed."
    return (
        f"Run-out is the full movement of the dial; if half of it was meant, write {floor.fine(2.0 * planned)}. "
        f"Usual of a {row.device}: {_range(row, floor)} ({row.note}). If {name} was tested so true, write axis_runout: "
        "measured with its uncertainty."
    )


def size_off(floor: Floor, entry: HoldEntry, op: int) -> float | None:
    """How far the diameter held is from the one the chuck was tested on, as a share of that.

    |D held / D tested - 1|; for chucks and collets that bring an error of their own.  None where the job does not say
    at which diameter it is known.  Source: arithmetic on the job file.
    """
    tested, held = _diameters(floor, entry, op)
    return abs(held / tested - 1.0) if tested is not None and held is not None else None


def _diameters(floor: Floor, entry: HoldEntry, op: int) -> tuple[float | None, float | None]:
    centre, given = entry.entry, entry.error
    if not isinstance(centre, Centre) or centre.by not in CHUCKED or given is None or given.known_at is None:
        return None, None
    state = gripped(floor, op, centre)
    return given.known_at, state.diameter if state is not None else None


def size_advice(floor: Floor, entry: HoldEntry, op: int, off: float) -> str | None:
    """Which bar to test the chuck with, and what one chuck gave. Source: the job file; the figures are those of one user."""
    tested, held = _diameters(floor, entry, op)
    if tested is None or held is None or not off:
        return None
    row = typical(str(getattr(entry.entry, "by", "")), "runout")
    kind = f"; usual of its kind: {_range(row, floor)}" if row is not None else ""
    return (
        f"Put a bar of {_mm(floor, held)} into it, read it, and write known_at: {_mm(floor, held)} beside the reading. What "
        f"was read at {_mm(floor, tested)} says little here: one scroll chuck read {floor.fine(0.010)} on "
        f"{_mm(floor, 19.0)}, {floor.fine(0.020)} on {_mm(floor, 12.7)} and {floor.fine(0.050)} on {_mm(floor, 25.4)}{kind}."
    )


def _mm(floor: Floor, length: float) -> str:
    """A diameter in the units of the job."""
    inches = floor.loaded.job.units == "in"
    unit = "in" if inches else "mm"
    shown = f"{length * FACTOR[unit]:.4g}"
    return show(length, "in" if inches else "mm", len(shown.partition(".")[2]))


def reading_u(entry: HoldEntry) -> float | None:
    """Expanded uncertainty of a reading at a hold [mm], where one is stated. Source: the job file, k = 2."""
    given = entry.error
    if given is None or given.measured is None or (given.uncertainty is None and given.standard_uncertainty is None):
        return None
    return 2.0 * given.u


def tenth_division(entry: HoldEntry) -> float | None:
    """A tenth of a division of the dial that is named, else of FINEST [mm]. Source: our screening choice."""
    given = entry.error
    return (given.indicator or FINEST) / 10.0 if given is not None else None


_AT = {"entry": ":", "floor": "route.floor"}
_SETUP = {"floor": "route.floor", "setup": ":"}
_HERE = {"floor": "route.floor", "entry": ":", "op": "@op"}

USUAL = (
    Quantity(
        "hold.as_planned", "hold", "um", 1, stated, {**_AT, "path": "@path"}, "run-out of the hold as only planned"
    ),
    Quantity("hold.best_usual", "hold", "um", 1, best, {"entry": ":"}, "best run-out that is usual of the device"),
    Quantity(
        "hold.usual_advice",
        "hold",
        "",
        0,
        advice,
        {**_AT, "planned": "hold.as_planned"},
        "what to write where a run-out is better than its device gives",
    ),
    Quantity(
        "machine.as_planned", "setup", "um", 1, axis_stated, _SETUP, "run-out of the machine's axis as only written"
    ),
    Quantity("machine.best_usual", "setup", "um", 1, axis_best, _SETUP, "best that is usual of a machine of its kind"),
    Quantity(
        "machine.usual_advice",
        "setup",
        "",
        0,
        axis_advice,
        {**_SETUP, "planned": "machine.as_planned"},
        "what to write where an axis is better than its kind of machine gives",
    ),
    Quantity("hold.reading_u", "hold", "um", 2, reading_u, {"entry": ":"}, "expanded uncertainty of the reading"),
    Quantity(
        "hold.tenth_division", "hold", "um", 2, tenth_division, {"entry": ":"}, "a tenth of a division of its dial"
    ),
    Quantity("hold.size_off", "hold", "%", 0, size_off, _HERE, "diameter held, off the one the chuck was tested on"),
    Quantity(
        "hold.size_advice",
        "hold",
        "",
        0,
        size_advice,
        {**_HERE, "off": "hold.size_off"},
        "bar to test a chuck with",
    ),
)
