"""Two surfaces of one piece and the relation between them: what every stack begins with. mm, rad."""

from __future__ import annotations

import math

from setupcheck.jobfile.names import Ref
from setupcheck.ledger.account import Account
from setupcheck.ledger.figures import Figure
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

LARGEST_LEAN = 0.1
"""Lean [rad] up to which angles are small: there a cosine leaves out 0.5 %, a sine 0.2 %. Source: series; our choice."""
LARGEST_ECCENTRICITY = 0.1
"""Eccentricity over radius up to which a ring is only shifted: at it pitch leaves out 5 %. Source: our screening choice."""


@record
class Built:
    """A stack's figure, with the levers its first-order treatment rests on.

    second_order  L t^2 / 2 with the worst lean and the longest lever [mm]
    """

    figure: Figure
    second_order: float


def state(floor: Floor, stack: Stack, text: str, key: str) -> State | Open:
    path = f"require[{stack.index + 1}].{key}"
    if not text:
        return Open((path,))
    ref = floor.loaded.ref(text)
    found = floor.now(ref)
    if found is None:
        made = floor.now(Ref(ref.part, ref.surface))
        if made is not None:
            raise floor.problem(
                path,
                f"operation {ref.op} does not cut {ref.part}.{ref.surface}",
                "Write the op that cuts it after the @",
            )
        return Open((path,), f"{ref.part}.{ref.surface} is never made in this route")
    return found


def pair(floor: Floor, stack: Stack) -> tuple[State, State] | Open:
    """The surface asked about and the one it refers to, both in one piece."""
    of, about = state(floor, stack, stack.of, "of"), state(floor, stack, stack.about, "about")
    for found in (of, about):
        if isinstance(found, Open):
            return found
    assert isinstance(of, State) and isinstance(about, State)
    if floor.body(of.part) is not floor.body(about.part):
        raise floor.problem(
            f"require[{stack.index + 1}]",
            f"{of.ref} and {about.ref} are never joined in this route",
            "Write the joining as a setup of its own",
        )
    return of, about


def second_order(*, lean: Account, lever: float) -> float:
    """L t^2 / 2 for the worst lean [mm]: what the first-order treatment leaves out. Source: cosine series.

    Validity: leans up to LARGEST_LEAN.  Raises: OutOfRange beyond it.
    """
    worst = lean.largest()
    if not math.isfinite(worst):  # something is missing, which is told first
        return 0.0
    if worst > LARGEST_LEAN:
        raise OutOfRange(
            f"the surfaces may lean by {math.degrees(worst):.3g} deg to each other: angles are taken as small, up to "
            f"{math.degrees(LARGEST_LEAN):.1f} deg. Look for a wrong reading or a short base"
        )
    return lever * worst**2 / 2.0


def beside_its_axis(offset: Account, radius: float) -> Account:
    """The eccentricity of a ring of teeth or holes, as it is, where it is small beside the ring.

    Validity: e up to LARGEST_ECCENTRICITY of the radius; pitch leaves e / 2 r of it out.  Raises: OutOfRange beyond it.
    Source: sine series of a place seen from a centre beside the ring, derived here.
    """
    worst = offset.largest()
    if math.isfinite(worst) and (beside := too_far_off(worst, radius)):
        raise OutOfRange(beside)
    return offset


def too_far_off(eccentricity: float, radius: float) -> str:
    """Why a ring of teeth or holes is too far off its axis to be only shifted; empty where it is not. Source: as above."""
    if eccentricity <= LARGEST_ECCENTRICITY * radius:
        return ""
    return (
        f"the ring may be {eccentricity:.4g} mm off its axis with a radius of {radius:.4g} mm: eccentricities are taken as "
        f"small, up to {LARGEST_ECCENTRICITY:g} of the radius. Look for a wrong reading"
    )
