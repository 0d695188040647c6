"""Facts and numbers of holds, machines and the place, for the rules that look at the route itself. mm, rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Flat
from setupcheck.jobfile.setups import Centre, Setup, Square
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.judged import Result
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import typical, typical_length

HELD_AT_ONE_END = ("three-jaw", "four-jaw", "soft-jaws", "shimmed-jaws", "collet", "pot-chuck")
"""Devices that carry a part by one end. Source: common practice."""
LAID_ON = ("jaws", "shoulder", "parallels", "table", "collar", "flange", "faceplate", "magnetic-chuck")
"""What a part is laid against with a face, so that the face looks away from the tool. Source: common practice."""


def datum_state(floor: Floor, key: str) -> str | None:
    """stock, made, rough, not-yet-made, cut-away or same-holding. Source: the order of the route."""
    found = floor.datums.get(key)
    return found.state if found is not None else None


def laid_on(floor: Floor, key: str, entry: HoldEntry) -> str | None:
    """`away` or `the tool`: where the face looks with which a part is laid on something; None where it is only read.

    Source: geometry on the drawing.
    """
    square, op = entry.entry, int(key.partition("/")[0])
    looks = next(s for s in floor.loaded.job.setups if s.op == op).looks_at_tool
    if not isinstance(square, Square) or square.by not in LAID_ON or looks is None:
        return None
    held = floor.part_of[op]
    ref = floor.loaded.ref(square.on, held if square.on in floor.loaded.surfaces()[held] else None)
    face = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    if not isinstance(face, Flat):
        return None
    tool = looks * floor.sense(held)
    return "the tool" if face.facing * floor.sense(ref.part) == tool else "away"


def tilt_datums(floor: Floor, setup: Setup) -> float | None:
    """How many things rule the lean of the part in this hold. Source: a rigid body squares on one thing only."""
    count = floor.tilt_datums.get(setup.op)
    return float(count) if count is not None else None


def error_stated(entry: HoldEntry, key: str, floor: Floor) -> str | Known | Open:
    """measured, stated or typical; Open with the path where nothing is said, or where no typical value is known.

    What the shop's record says of a device is stated.  Source: the job file.
    """
    given = entry.error
    path = f"{key}.{entry.key}"
    if given is None:
        if entry.step in ("centre", "and_centre") and getattr(entry.entry, "x", None) is not None:
            return "stated"
        return Open((path,))
    if given.measured is not None:
        return "measured"
    if given.at_most is not None:
        return Known("stated", floor.loaded.owned(path))
    device = given.device or str(getattr(entry.entry, "by", ""))
    if (typical_length(device) if entry.key == "error" else typical(device, entry.key)) is None:
        return Open((f"{path}.at_most",), f"no typical value is known for {device}")
    return "typical"


def kind_of_error(stated: str) -> str:
    """measured, stated or typical, of an error that is not missing (a missing one has its own finding). Source: the job file."""
    return stated


def direction_known(floor: Floor, key: str, entry: HoldEntry) -> str | None:
    """known or no-mark for a reading that names its high spot; None where no direction is named. Source: the job file."""
    given = entry.error
    return floor.directions.get(key) if given is not None and given.high_at is not None else None


def measured(entry: HoldEntry) -> float | None:
    """Measured error, where a plan stands beside it. Source: the job file."""
    given = entry.error
    return (
        abs(given.measured) if given is not None and given.measured is not None and given.at_most is not None else None
    )


def planned(entry: HoldEntry) -> float | None:
    """Planned bound of the same error. Source: the job file."""
    return entry.error.at_most if entry.error is not None else None


def measured_u(entry: HoldEntry, path: str) -> float | Open | None:
    """Standard uncertainty of the measured error; Open where none is stated. Source: the job file; an expanded one is halved."""
    given = entry.error
    if given is None or given.measured is None:
        return None
    if given.uncertainty is None and given.standard_uncertainty is None:
        return Open((f"{path}.{entry.key}.uncertainty",))
    return given.u


def clearance_share(entry: HoldEntry, path: str, results: tuple[Result, ...]) -> float | None:
    """Largest part of a requirement's limit that a clearance of this hold takes by itself.

    push of the clearance / limit (half the span between two limits).  Source: derived from the ledger.
    """
    if getattr(entry.entry, "clearance", None) is None:
        return None
    mine = f"{path}.clearance"
    shares = [
        sum(s.worst for s in result.combined.shares if mine in s.cause.paths) / result.scale
        for result in results
        if result.scale
    ]
    return max(shares, default=None)


def reach(floor: Floor, key: str) -> float | None:
    """How far a cut lies outside its two centring planes, over their distance: the lever that magnifies their errors.

    max over both ends of the distance to the nearer plane / distance of the planes; 0 between them.
    None where the part is squared by a face.  Source: straight line through two points, derived here.
    """
    op, _, name = key.partition("/")
    planes = floor.planes.get(int(op))
    if planes is None:
        return None
    low, high = sorted(planes)
    for states in floor.bodies[floor.part_of[int(op)]].states.values():
        for state in states:
            if state.op == int(op) and state.name == name.rpartition(".")[2]:
                outside = max(low - state.low, state.high - high, 0.0)
                return outside / (high - low)
    return None


def overhang(floor: Floor, key: str, entry: HoldEntry) -> float | None:
    """How far a part held at one end stands out towards the tool, in diameters of the surface it is held on.

    From the end of the grip (or from `at`) to the farthest surface there by then; from the far end of the held surface
    where neither is stated.  None unless jaws or a collet hold it alone.  Source: geometry on the drawing.
    """
    op = int(key.partition("/")[0])
    setup = next(s for s in floor.loaded.job.setups if s.op == op)
    held, hold = entry.entry, setup.hold
    if entry.step != "centre" or not isinstance(held, Centre) or hold is None or held.by not in HELD_AT_ONE_END:
        return None
    second = hold.and_centre
    if held.through or (second is not None and second.by not in HELD_AT_ONE_END):
        return None
    ref = floor.loaded.ref(
        held.on, floor.part_of[op] if held.on in floor.loaded.surfaces()[floor.part_of[op]] else None
    )
    there = [
        s
        for place, states in floor.body(ref.part).states.items()
        for s in states
        if (s.op or 0) <= op and floor.removed.get(place, op) >= op
    ]
    datum = next((s for s in reversed(there) if (s.part, s.name) == (ref.part, ref.surface)), None)
    if datum is None or datum.diameter is None:
        return None
    way = (setup.looks_at_tool or 1) * floor.sense(ref.part)
    if held.grip is not None:
        grip = max(way * floor.z(ref.part, held.grip.low), way * floor.z(ref.part, held.grip.high))
    elif held.at is not None:
        grip = way * floor.z(ref.part, held.at)
    else:
        grip = min(way * datum.low, way * datum.high)
    farthest = max(max(way * s.low, way * s.high) for s in there)
    return max(farthest - grip, 0.0) / datum.diameter


def machine_error_stated(floor: Floor, setup: Setup) -> str | Known | Open | None:
    """stated or typical for the machine's own axis; Open where no machine is named. Source: the job file."""
    if setup.join is not None:
        return None
    name, machine = machine_of(floor.loaded, setup)
    if machine is None:
        return Open((f"setups.{setup.op}.machine",))
    given = machine.axis_runout
    if given is not None and (given.at_most is not None or given.measured is not None):
        return Known("stated", floor.loaded.owned(f"machines.{name}.axis_runout"))
    return "typical" if typical(machine.kind, "axis") is not None else Open((f"machines.{name}.axis_runout",))
