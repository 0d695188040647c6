"""A part trued by dial in one plane alone: what then rules its lean, and how far it may lean. Lengths mm, angles rad."""

from __future__ import annotations

from setupcheck.jobfile.setups import Hold, Setup, Square
from setupcheck.notation import show
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.clamping import gripped
from setupcheck.quantities.devices import DIALLED
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import Typical, typical


def _hold(floor: Floor, op: int) -> Hold | None:
    return next(s.hold for s in floor.loaded.job.setups if s.op == op)


def lean_read(floor: Floor, setup: Setup) -> str | None:
    """read or jaws-alone: whether a part that is trued by dial has anything read of its lean.

    None where no dial trues it, and where another rule speaks: nothing rules the lean (HOLD-001), its error is missing
    (HOLD-003) or only typical (HOLD-004), so that a face nobody read never counts as read.  Source: the job file.
    """
    hold = setup.hold
    if hold is None or hold.centre is None or hold.centre.by not in DIALLED or floor.tilt_datums.get(setup.op) == 0:
        return None
    if hold.square is None and hold.and_centre is None:
        return "jaws-alone"
    given = (hold.square.face_runout if hold.square is not None else None, getattr(hold.and_centre, "runout", None))
    own = any(one is not None and (one.at_most is not None or one.measured is not None) for one in given)
    return "read" if own else None


def _by_jaws() -> Typical | None:
    return typical("jaws", "face_runout")


def lean_advice(floor: Floor, setup: Setup, read: str) -> str | None:
    """How far jaws alone may let it lean, and what to read. Source: worst usual of jaws (typical.yaml) over the diameter held."""
    row, hold = _by_jaws(), setup.hold
    if read != "jaws-alone" or row is None or hold is None or hold.centre is None:
        return None
    state = gripped(floor, setup.op, hold.centre)
    if state is None or not state.diameter:
        return None
    lean = row.worst / state.diameter
    return (
        f"Jaws alone usually leave {floor.fine(row.best, 0)} to {floor.fine(row.worst, 0)} of face run-out, over "
        f"{floor.size(state.diameter, 1)} a lean of up to {_angle(lean)} ({floor.fine(lean * 100.0, 0)} in "
        f"{floor.size(100.0, 0)}), and no dial in one plane sees it. Read a face (square with face_runout) or a second "
        "plane (and_centre with runout), and tap the part true there too."
    )


def typical_advice(floor: Floor, entry: HoldEntry, op: int) -> str | None:
    """The lean a face may have that nobody read, where the axis is trued by dial. Source: typical.yaml, over `across`."""
    hold, square = _hold(floor, op), entry.entry
    if not isinstance(square, Square) or hold is None or hold.centre is None or hold.centre.by not in DIALLED:
        return None
    given = square.face_runout
    if given is None or given.at_most is not None or given.measured is not None or not square.across:
        return None
    row = typical(given.device or square.by or "", "face_runout")
    if row is None:
        return None
    lean = row.worst / square.across
    return (
        f"The axis is trued by dial, and nobody read the lean: usual of {row.device} is {floor.fine(row.best, 0)} to "
        f"{floor.fine(row.worst, 0)}, over {floor.size(square.across, 1)} up to {_angle(lean)} "
        f"({floor.fine(lean * 100.0, 0)} in {floor.size(100.0, 0)}). Run the indicator on the face too, and write what it reads."
    )


def _angle(lean: float) -> str:
    """A small lean as people set it: minutes of arc, seconds below one."""
    return show(lean, "arcmin", 1) if lean > 2.9e-4 else show(lean, "arcsec", 0)


_HERE = {"floor": "route.floor", "setup": ":"}

LEAN = (
    Quantity(
        "hold.lean_read",
        "setup",
        "",
        0,
        lean_read,
        _HERE,
        "whether anything is read of the lean of a part trued by dial",
    ),
    Quantity(
        "hold.lean_advice",
        "setup",
        "",
        0,
        lean_advice,
        {**_HERE, "read": "hold.lean_read"},
        "how far jaws alone may let a part lean",
    ),
    Quantity(
        "hold.typical_advice",
        "hold",
        "",
        0,
        typical_advice,
        {"floor": "route.floor", "entry": ":", "op": "@op"},
        "how far a face may lean that nobody read",
    ),
)
