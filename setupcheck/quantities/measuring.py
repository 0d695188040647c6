"""Can what was measured prove what it has to? Uncertainty, warmth, shims, thread and indicator. Lengths mm, degC."""

from __future__ import annotations

from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.setups import Centre, Setup
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.readings import Reading
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.sized import at_reference, tolerance
from setupcheck.quantities.tilting import cuts_the_wheel

_IDLE = ("worm.runout", ".head.blocks", ".mid_plane.pivot")
"""Entries that no figure of this version rests on."""


def uncertainty_stated(reading: Reading) -> str | Open | None:
    """stated, or Open with the key; None where another rule asks for it, or where no figure rests on the value.

    Other rules: a hold's error measured against its plan (HOLD-007), the sizes of a joint (FIT-001, FIT-002); other
    diameters are the drawing.  Source: the job file.
    """
    record = reading.record
    planned = isinstance(record, Deviation) and record.at_most is not None and ".hold." in reading.path
    through = ".through[" in reading.path
    diameter = reading.path.startswith("parts.") and reading.path.endswith(".diameter")
    if (planned and not through) or diameter or reading.path.endswith(_IDLE):
        return None
    stated = record.uncertainty is not None or (
        isinstance(record, Deviation) and record.standard_uncertainty is not None
    )
    return "stated" if stated else Open((f"{reading.path}.uncertainty",))


def tolerance_of(reading: Reading) -> float | None:
    """Width of the tolerance that a measured size has to prove [mm]. Source: the job file; ISO 286 tables in rules/data."""
    return tolerance(reading.record) if isinstance(reading.record, Dimension) else None


def share(reading: Reading) -> float | None:
    """Expanded uncertainty of a reading over the bound it has to prove, ± against ±: planned bound, or half a tolerance.

    None where no bound or no uncertainty is stated.  Source: four to one, common practice.
    """
    from setupcheck.physics.measuring import share_of_bound

    record = reading.record
    if isinstance(record, Deviation):
        if record.at_most is None or (record.uncertainty is None and record.standard_uncertainty is None):
            return None
        return share_of_bound(2.0 * record.u, bound=record.at_most)
    width = tolerance(record)
    return share_of_bound(record.uncertainty, bound=width / 2.0) if width and record.uncertainty is not None else None


def warm_by(floor: Floor, reading: Reading) -> float | Open | None:
    """How far a size measured warm or cold reads off its size at 20 degC, the larger end of the expansion [mm].

    D - D / (1 + alpha (T - 20)), the gauge at 20 degC.  None where `at_temperature` is not stated.
    Source: physics.measuring; expansions rules/data/materials.yaml.
    """
    record = reading.record
    if not isinstance(record, Dimension) or record.at_temperature is None or record.measured is None:
        return None
    ends = at_reference(record, reading.path, floor)
    return ends if isinstance(ends, Open) else max(abs(record.measured - end) for end in ends)


def shims(entry: HoldEntry) -> str | None:
    """measured or not-measured, of a hold in jaws over shims; None elsewhere and where nothing is said of its error.

    Source: the job file.
    """
    centre = entry.entry
    if not isinstance(centre, Centre) or centre.by != "shimmed-jaws" or entry.error is None:
        return None
    return "measured" if entry.error.measured is not None else "not-measured"


def thread(floor: Floor, setup: Setup) -> str | Open | None:
    """measured or nominal: how the thread is known that a wheel is cut for gap by gap. Source: the job file."""
    worm = floor.loaded.job.worm
    if worm is None or not cuts_the_wheel(floor.loaded, setup):
        return None
    if worm.thread_thickness is None and worm.over_wires is None:
        return Open(("worm.thread_thickness",))
    stated = (worm.thread_thickness, worm.over_wires)
    return "measured" if any(x is not None and x.measured is not None for x in stated) else "nominal"


def end_float(floor: Floor, stack: Stack) -> str | None:
    """stated or not-stated, where a backlash is asked of a worm's wheel. Source: the job file."""
    worm = floor.loaded.job.worm
    if stack.require.what != "backlash" or worm is None:
        return None
    return "stated" if worm.end_float is not None else "not-stated"


def planned_reading(entry: HoldEntry) -> float | None:
    """Planned bound of a hold whose indicator is named [mm]. Source: the job file."""
    given = entry.error
    return given.at_most if given is not None and given.indicator is not None else None


def half_division(entry: HoldEntry) -> float | None:
    """Half a division of the indicator [mm]: finer than this nobody reads it. Source: common practice."""
    given = entry.error
    return given.indicator / 2.0 if given is not None and given.indicator is not None else None


_READING, _ENTRY = {"reading": ":"}, {"entry": ":"}

MEASURE = (
    Quantity(
        "measure.uncertainty_stated", "reading", "", 0, uncertainty_stated, _READING, "whether it has an uncertainty"
    ),
    Quantity("measure.share", "reading", "%", 0, share, _READING, "uncertainty over the bound it has to prove"),
    Quantity("measure.tolerance", "reading", "um", 1, tolerance_of, _READING, "width of the tolerance of the size"),
    Quantity(
        "measure.warm_by",
        "reading",
        "um",
        1,
        warm_by,
        {"floor": "route.floor", **_READING},
        "how far the size as measured is off that at 20 degC",
    ),
    Quantity("measure.shims", "hold", "", 0, shims, _ENTRY, "whether a hold over shims was measured"),
    Quantity(
        "measure.thread",
        "setup",
        "",
        0,
        thread,
        {"floor": "route.floor", "setup": ":"},
        "how the thickness of the worm's thread is known",
    ),
    Quantity(
        "measure.end_float",
        "stack",
        "",
        0,
        end_float,
        {"floor": "route.floor", "stack": ":"},
        "whether the worm's end float is stated beside a backlash",
    ),
    Quantity(
        "measure.planned", "hold", "um", 1, planned_reading, _ENTRY, "planned bound that the indicator has to show"
    ),
    Quantity("measure.half_division", "hold", "um", 1, half_division, _ENTRY, "half a division of the indicator"),
)
