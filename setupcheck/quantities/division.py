"""Numbers of the dividing of one setup: count, ratio, circle, and what they leave over. Angles rad."""

from __future__ import annotations

from setupcheck.division.methods import circles_that_fit, holes_left_over, rounded_settings
from setupcheck.jobfile.dividing import Divide
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.teeth import folded
from setupcheck.quantities.book import Known, Open, Quantity, in_range
from setupcheck.quantities.dividing import typical_errors
from setupcheck.quantities.route import machine_of, ratio_at
from setupcheck.quantities.shop import Floor


def count(floor: Floor, setup: Setup) -> int | None:
    """Teeth or holes that a setup divides the circle into; None where it divides nothing. Source: the job file."""
    for name in setup.cut:
        ref = floor.loaded.ref(name, setup.part)
        places = getattr(floor.loaded.job.parts[ref.part].surfaces[ref.surface], "count", 1)
        if places > 1:
            return int(places)
    return None


def worm_ratio(floor: Floor, setup: Setup) -> int | Open | None:
    """Turns of the crank for one turn of the spindle; None where nothing is divided. Source: the job file's record."""
    if count(floor, setup) is None:
        return None
    called, machine = machine_of(floor.loaded, setup)
    if machine is None or machine.worm_ratio is None:
        return Open((ratio_at(setup.op, called, machine),))
    return machine.worm_ratio


def circle(setup: Setup) -> int | Open | None:
    """Holes of the chosen circle; None where the circle is not divided by one. Source: the job file."""
    if setup.divide is None or setup.divide.by != "hole-circle":
        return None
    return setup.divide.circle if setup.divide.circle is not None else Open((f"setups.{setup.op}.divide.circle",))


def circle_there(floor: Floor, setup: Setup, circle: int) -> str | None:
    """there or not-there: whether the head has the chosen circle; None where its circles are not listed. Source: the job file."""
    _, machine = machine_of(floor.loaded, setup)
    own = machine.hole_circles if machine is not None else ()
    return ("there" if circle in own else "not-there") if own else None


def left_over(worm_ratio: int, count: int, circle: int) -> float:
    """Part of a hole left over by one step, 0 where the circle closes: distance of ratio / count x circle to a whole number.

    Source: exact fractions.
    """
    return holes_left_over(worm_ratio, count, circle)


def circles(floor: Floor, setup: Setup, worm_ratio: int, count: int) -> str | None:
    """Hole circles on which the count closes: those the denominator of ratio / count divides; the machine's own, else 15 to 66.

    Source: exact fractions.
    """
    if setup.divide is None or setup.divide.by != "hole-circle":
        return None
    _, machine = machine_of(floor.loaded, setup)
    own = machine.hole_circles if machine is not None else ()
    return (
        ", ".join(
            str(c) for c in (circles_that_fit(worm_ratio, count, own) if own else circles_that_fit(worm_ratio, count))
        )
        or "none"
    )


def crank_error(floor: Floor, setup: Setup) -> float | Known | None:
    """Amplitude of the error that comes once per turn of the crank [rad]. Source: the job file, else the typical one."""
    if setup.divide is None:
        return None
    if setup.divide.worm is not None:
        size = setup.divide.worm.once_per_crank or setup.divide.worm.once_per_turn or None
        own = floor.loaded.owned(f"setups.{setup.op}.divide.worm.once_per_crank")
        return Known(size, own) if size is not None else None
    return _typical(setup.divide, "worm.once_per_crank")


def _typical(divide: Divide, key: str) -> Known | None:
    row = typical_errors(divide).get(key)
    return Known(row.value, frozenset({row.name})) if row is not None else None


def folded_harmonic(crank_error: float, worm_ratio: int, count: int) -> float | None:
    """min(N mod z, z - N mod z): waves round the work left by an error that comes once per crank turn.

    None where it comes alike at every tooth (0 waves).  Source: aliasing, derived here; N = 40, z = 39 or 41 gives 1.
    """
    waves = folded(worm_ratio, count)
    return float(waves) if waves and crank_error > 0.0 else None


def step(setup: Setup) -> float | None:
    """Smallest step of the readout [rad]; None where coordinates are read, whose step is a length. Source: the job file."""
    return setup.divide.step if setup.divide is not None and setup.divide.by != "x-y" else None


def step_error(count: int, step: float) -> float:
    """Largest error of an absolute setting rounded to the step [rad]; nothing adds up round the turn. Source: arithmetic."""
    with in_range:
        return max(abs(error) for error in rounded_settings(count, step))


def setting_error(floor: Floor, setup: Setup) -> float | Known | None:
    """Error of one setting [rad]. Source: the job file, else the typical one."""
    if setup.divide is None:
        return None
    if setup.divide.setting is None:
        return _typical(setup.divide, "setting")
    return Known(setup.divide.setting, floor.loaded.owned(f"setups.{setup.op}.divide.setting"))


def known_kind(stated: str) -> str:
    """stated or typical, of errors that are not missing (missing ones have their own finding). Source: the job file."""
    return stated


_HERE = {"floor": "route.floor", "setup": ":"}
RATIO, COUNT = {"worm_ratio": "divide.worm_ratio"}, {"count": "divide.count"}

DIVIDE = (
    Quantity("divide.count", "setup", "1", 0, count, {"floor": "route.floor", "setup": ":"}, "teeth or holes divided"),
    Quantity(
        "divide.worm_ratio", "setup", "1", 0, worm_ratio, {"floor": "route.floor", "setup": ":"}, "ratio of the head"
    ),
    Quantity("divide.circle", "setup", "1", 0, circle, {"setup": ":"}, "holes of the chosen circle"),
    Quantity(
        "divide.circles",
        "setup",
        "",
        0,
        circles,
        {"floor": "route.floor", "setup": ":", **RATIO, **COUNT},
        "hole circles on which the count closes",
    ),
    Quantity(
        "divide.left_over",
        "setup",
        "1",
        3,
        left_over,
        {**RATIO, **COUNT, "circle": "divide.circle"},
        "part of a hole that one step leaves over",
    ),
    Quantity("divide.crank_error", "setup", "arcsec", 1, crank_error, _HERE, "error once per crank turn"),
    Quantity(
        "divide.folded_harmonic",
        "setup",
        "1",
        0,
        folded_harmonic,
        {"crank_error": "divide.crank_error", **RATIO, **COUNT},
        "waves round the work that the head's once-per-crank error leaves",
    ),
    Quantity("divide.step", "setup", "arcsec", 2, step, {"setup": ":"}, "step of the readout"),
    Quantity(
        "divide.step_error",
        "setup",
        "arcsec",
        2,
        step_error,
        {**COUNT, "step": "divide.step"},
        "largest error of a setting rounded to the readout's step",
    ),
    Quantity("divide.setting_error", "setup", "arcsec", 2, setting_error, _HERE, "error of one setting"),
    Quantity(
        "divide.circle_there",
        "setup",
        "",
        0,
        circle_there,
        {"floor": "route.floor", "setup": ":", "circle": "divide.circle"},
        "whether the head has the chosen circle",
    ),
    Quantity(
        "divide.error_kind",
        "setup",
        "",
        0,
        known_kind,
        {"stated": "settled divide.error_stated"},
        "how good the dividing method's errors are known, where they are known at all",
    ),
)
