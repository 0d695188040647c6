"""What a division test needs of the job: which teeth, their circle, the worm that drives them, the head that cut them."""

from __future__ import annotations

import math

from setupcheck.division.readings import Readings
from setupcheck.division.reduction import reduce
from setupcheck.division.results import Reduced
from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.models import Pattern, Toothing
from setupcheck.notation import nearest
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

CALLED = {
    "teeth": ("tooth", "teeth"),
    "holes": ("hole", "holes"),
    "lines": ("line", "lines"),
    "slot": ("slot", "slots"),
}
"""One of a ring and many, by the kind of its surface."""


@record
class TeethRead:
    """The teeth, holes or lines of a test.

    name  as in `of` of a requirement;  count, radius [mm], pressure_angle [rad], start [rad], turn  as the ledger has them
    worm_ratio  turns of their own worm for one of theirs, else None;  head_ratio  of the head that cut them, else None
    missing     keys of the job that would tell more;  holes  holes, slots or lines, which have no flanks
    one, many   what they are called
    Tooth n stands half a pitch on from gap n; start is set back so much for holes, whose number is that of the place itself.
    """

    name: str
    count: int
    radius: float
    pressure_angle: float | None
    worm_ratio: float | None
    head_ratio: float | None
    start: float
    turn: int
    missing: tuple[str, ...]
    holes: bool = False
    one: str = "tooth"
    many: str = "teeth"


def teeth_of(floor: Floor, of: str | None = None) -> TeethRead:
    """The teeth a test is of: those named, else the wheel of the mesh, else the only ones of the job.

    Raises: SetupcheckError where there are none, or more than one to choose from.
    """
    job, file = floor.loaded.job, floor.loaded.file
    known = {
        f"{part}.{name}": node
        for part, parts in job.parts.items()
        for name, node in parts.surfaces.items()
        if isinstance(node, Toothing | Pattern) and node.count > 1
    }
    wheel = floor.loaded.ref(job.mesh.wheel) if job.mesh is not None else None
    name = of or (f"{wheel.part}.{wheel.surface}" if wheel is not None else None)
    if name is None:
        if len(known) != 1:
            what = (
                f"has {', '.join(known)}. Write which one with --of"
                if known
                else "divides nothing: no teeth, holes or lines"
            )
            raise SetupcheckError(f"{file} {what}")
        name = next(iter(known))
    short = [full for full in known if full.partition(".")[2] == name]
    name = short[0] if len(short) == 1 else name
    if name not in known:
        near = nearest(name, known)
        raise SetupcheckError(f"{file} has no teeth, holes or lines '{name}'. " + (f"Did you mean {near}?" if near else
                              f"Write one of {', '.join(known)}"))  # fmt: skip
    part, _, surface = name.partition(".")
    states = floor.bodies[part].states.get((part, surface), [])
    pattern = states[-1].pattern if states else None
    if pattern is None:
        raise SetupcheckError(f"{file}: {name} is made nowhere, so nothing says where its first place stands")
    own = job.worm is not None and wheel is not None and (wheel.part, wheel.surface) == (part, surface)
    starts = job.worm.starts if own and job.worm is not None else None
    holes = not isinstance(known[name], Toothing)
    missing = ["worm.starts"] if own and starts is None else []
    if pattern.pressure_angle is None and not holes:
        missing.append("worm.pressure_angle" if own else f"parts.{part}.surfaces.{surface}.pressure_angle")
    return TeethRead(
        name,
        pattern.count,
        pattern.radius,
        0.0 if holes else pattern.pressure_angle,
        pattern.count / starts if starts else None,
        _head_ratio(floor, part, surface),
        pattern.start - (pattern.turn * math.pi / pattern.count if holes else 0.0),
        pattern.turn,
        tuple(missing),
        holes,
        *CALLED[known[name].kind],
    )


def _head_ratio(floor: Floor, part: str, surface: str) -> float | None:
    """Ratio of the head or table that divided them last."""
    for setup in reversed(floor.loaded.job.setups):
        for cut in setup.cut:
            ref = floor.loaded.ref(cut, setup.part)
            if (ref.part, ref.surface) == (part, surface):
                _, machine = machine_of(floor.loaded, setup)
                return float(machine.worm_ratio) if machine is not None and machine.worm_ratio else None
    return None


def reduced(readings: Readings, of: TeethRead, *, turns_with_work: bool = False) -> Reduced:
    """The readings reduced for these teeth.  Raises: SetupcheckError."""
    return reduce(
        readings,
        count=of.count,
        worm_ratio=of.worm_ratio,
        radius=of.radius,
        pressure_angle=of.pressure_angle,
        head_ratio=of.head_ratio,
        start=of.start,
        turn=of.turn,
        turns_with_work=turns_with_work,
    )
