"""From error entries of the job file to causes: what is stated, what is measured, what is missing. mm, rad."""

from __future__ import annotations

import cmath
import math
from dataclasses import replace

from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.ledger.account import Account, face_reading_to_lean, fim_to_eccentricity
from setupcheck.ledger.causes import Cause, Law
from setupcheck.ledger.route import part_vector
from setupcheck.notation import NotationError, angle, show
from setupcheck.quantities.typical import typical, typical_length
from setupcheck.record import record


@record
class Towards:
    """A direction, if one is known: `angle` [rad] in the part frame, or in the machine's (`of_machine`).

    why  "known", "unknown" (nothing stated), "no-mark" (a jaw named, but no mark ties part and jaw together)
    """

    angle: float | None = None
    of_machine: bool = False
    why: str = "unknown"


@record
class Turned:
    """How the part lies in the machine: sense and the angle of its mark from the machine's mark [rad]."""

    sg: int = 1
    inserted_at: float = 0.0

    def to_part(self, vector: Account) -> Account:
        return part_vector(vector, sg=self.sg, inserted_at=self.inserted_at)


@record
class Entry:
    """Where an error entry stands: its name in shop words, operation, path, and the device it falls back on.

    second  it speaks of the second centring plane
    """

    name: str
    op: int | None
    path: str
    device: str
    what: str = "runout"
    second: bool = False

    def missing(self) -> Cause:
        return Cause(self.name, "undetermined", self.op, missing=self.path)


def stated_direction(high_at: str | None) -> Towards:
    """Direction of a bought part's reading: an angle or its mark; other words need a machine and are not known here."""
    if high_at is None:
        return Towards()
    if high_at == "mark":
        return Towards(0.0, why="known")
    try:
        return Towards(math.remainder(angle(high_at), math.tau), why="known")
    except NotationError:
        return Towards()


def kept_key(given: Deviation, what: str, *, second: bool) -> str:
    """Name of the one cause that a kept device is, whichever setup speaks of it.

    Only equal statements are one cause: a second reading of the same device is another piece of knowledge, and its second
    plane another error than its first.
    """
    size = given.measured if given.measured is not None else given.at_most if given.at_most is not None else 0.0
    said = f"{what.replace('_', ' ').replace('runout', 'run-out')} {show(size, 'um', 3).replace('.000', '')}"
    return f"{given.device}, mark kept: {said}{', second plane' if second else ''}"


def vector_error(
    given: Deviation | None, entry: Entry, *, scale: float, towards: Towards, turned: Turned, lean: bool = False
) -> Account:
    """An eccentricity or lean from an indicator reading.

    given    the entry, None where the planner wrote none (undetermined)
    scale    from the reading to the error, signed: +1/2 (outside), -1/2 (bore), -+1/across (face to +z / -z)
    lean     the error is a slope: the same machine leans a part turned end for end the other way
    Laws: bound only: uniform over the disc; measured without direction: a ring; with direction: a vector.
    """
    if given is None:
        return Account.of(entry.missing())
    size = abs(scale)
    if given.measured is not None:
        length = size * given.measured
        spread = size * given.u
        if towards.angle is not None:
            mean = math.copysign(length, scale) * cmath.exp(1j * towards.angle)
            cause = Cause(entry.name, "blur", entry.op, spread=spread, mean=mean, mode="measured", paths=(entry.path,))
            account = Account.of(cause)
            return turned.to_part(account) if towards.of_machine else account
        cause = Cause(entry.name, "ring", entry.op, high=length, spread=spread, mode="measured", paths=(entry.path,))
    elif given.at_most is not None:
        cause = Cause(entry.name, "disc", entry.op, high=size * given.at_most, paths=(entry.path,))
    else:
        row = typical(given.device or entry.device, entry.what)
        if row is None:
            return Account.of(replace(entry.missing(), missing=f"{entry.path}.at_most"))
        cause = Cause(
            entry.name, "disc", entry.op, high=size * row.value, mode="typical", paths=(entry.path,), rests_on=row.name
        )
    if given.device and given.mark == "kept":
        shared = replace(cause, key=kept_key(given, entry.what, second=entry.second), shared=True)
        seen = turned.to_part(Account.of(shared))
        return seen * float(turned.sg) if lean else seen
    return Account.of(cause)


def run_out(given: Deviation | None, entry: Entry, *, inside: bool, towards: Towards, turned: Turned) -> Account:
    """Eccentricity from a run-out: half the full indicator movement, towards the high spot (bore: away from it)."""
    sign = -1.0 if inside else 1.0
    return vector_error(given, entry, scale=sign * fim_to_eccentricity(1.0), towards=towards, turned=turned)


def face_lean(
    given: Deviation | None, entry: Entry, *, across: float, facing: int, towards: Towards, turned: Turned
) -> Account:
    """Lean of a face from its run-out read across a circle: -(FIM/across) to the high spot when it looks to +z."""
    scale = -facing * face_reading_to_lean(1.0, across)
    return vector_error(given, entry, scale=scale, towards=towards, turned=turned, lean=True)


def length_error(given: Deviation | None, entry: Entry) -> Account:
    """A length error: a bound is rectangular, a measured one its value with a Gaussian around it.

    A device alone takes its typical reading, touch or position, rectangular as well.
    """
    if given is None:
        return Account.of(entry.missing())
    if given.measured is not None:
        cause = Cause(
            entry.name,
            "gauss",
            entry.op,
            spread=given.u,
            mean=complex(given.measured),
            mode="measured",
            paths=(entry.path,),
        )
    elif given.at_most is not None:
        cause = Cause(entry.name, "length", entry.op, high=given.at_most, paths=(entry.path,))
    else:
        row = typical_length(given.device or entry.device)
        if row is None:
            return Account.of(replace(entry.missing(), missing=f"{entry.path}.at_most"))
        cause = Cause(
            entry.name, "length", entry.op, high=row.value, mode="typical", paths=(entry.path,), rests_on=row.name
        )
    return Account.of(cause)


BARE = ".uncertainty"
"""Key that a size without limits lacks. Written with the size it is ±: `66 ±0.01`."""


def size_error(given: Dimension, entry: Entry) -> tuple[float, Account]:
    """(middle of a length with its limits [mm], deviation from it).

    Limits are rectangular; `measured` with `uncertainty` is Gaussian; a bare nominal is undetermined.
    """
    if given.measured is not None:
        spread = (given.uncertainty or 0.0) / 2.0
        return given.measured, Account.of(
            Cause(entry.name, "gauss", entry.op, spread=spread, mode="measured", paths=(entry.path,))
        )
    assert given.nominal is not None
    if given.lower is None and given.upper is None:
        if given.uncertainty is not None:
            return given.nominal, Account.of(
                Cause(entry.name, "gauss", entry.op, spread=given.uncertainty / 2.0, paths=(entry.path,))
            )
        return given.nominal, Account.of(replace(entry.missing(), missing=f"{entry.path}{BARE}"))
    lower, upper = given.lower or 0.0, given.upper or 0.0
    half = (upper - lower) / 2.0
    return given.nominal + (upper + lower) / 2.0, Account.of(
        Cause(entry.name, "length", entry.op, high=half, paths=(entry.path,))
    )


def play(given: tuple[float, float] | None, entry: Entry, *, rests: str, pair: str = "") -> Account:
    """Where a part lies in its play: anywhere in the disc of half of it (`free`), or against the wall.

    given  smallest and largest diametral clearance [mm]; None: undetermined
    """
    if given is None:
        return Account.of(entry.missing())
    if rests == "centred":
        return Account()
    law: Law = "clearance-disc" if rests == "free" else "clearance-ring"
    return Account.of(Cause(entry.name, law, entry.op, low=given[0], high=given[1], paths=(entry.path,), pair=pair))
