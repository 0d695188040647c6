"""Prove-out gaps: which to cut, what the dial over a ball says about the blank, and what to move. Base units mm, rad."""

from __future__ import annotations

import math

from setupcheck.division import prove_out as fit
from setupcheck.jobfile.models import Toothing
from setupcheck.jobfile.prove_out import ProveOut
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.account import Account
from setupcheck.ledger.route import State
from setupcheck.notation import show_angle
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.judged import Result
from setupcheck.quantities.relations import beside_its_axis, too_far_off
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.scopes import CutEntry
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

OF_THE_RING = (
    "run-out", "coaxial", "cumulative-pitch", "single-pitch", "gap-centre-pitch", "index-range", "index-within",
    "on-workpiece", "backlash-swing",
)  # fmt: skip
"""Figures that an eccentric ring of gaps makes worse."""
SIGHT = (
    "It reads how far out each gap stands: it does not see errors of the division, a lean of the blank (it is read in one "
    "plane), an oval ring (four gaps show that as a misfit at most), nor depth and width common to all gaps."
)
"""What such a reading cannot show. Source: a ball touches both flanks, so that only its distance from the axis is read."""


@record(eq=False)
class Proof:
    """Prove-out gaps of one cut. `path` of the entry; `teeth` as that operation leaves them; `angle` of their flanks [rad]."""

    path: str
    given: ProveOut
    op: int
    part: str
    count: int
    depth: float | None
    teeth: State | None
    angle: float | None


def _setup(floor: Floor, key: str) -> Setup:
    op = int(key.partition("/")[0])
    return next(s for s in floor.loaded.job.setups if s.op == op)


def count_of_gaps(floor: Floor, key: str, entry: CutEntry) -> float | None:
    """Gaps of a toothing that this cut makes; None of anything else. Source: the job file."""
    ref = floor.loaded.ref(entry.name, _setup(floor, key).part)
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    return float(node.count) if isinstance(node, Toothing) else None


def gaps(count: float) -> str:
    """Which gaps to cut for a prove-out: as near to quarter turns as the count has them. Source: division.prove_out."""
    chosen = fit.gaps_to_cut(int(count))
    if len(chosen) < fit.FEWEST:
        return f"no prove-out with {int(count)} gaps, an eccentricity needs three"
    listed = f"gaps {', '.join(map(str, chosen[:-1]))} and {chosen[-1]} of {int(count)}"
    off = fit.off_the_quarters(int(count))
    if len(chosen) == fit.FEWEST:
        return listed
    return listed + (
        ", at quarter turns" if off < 1e-9 else f", up to {show_angle(off, 'deg', 2)} off the quarter turns"
    )


def proof(floor: Floor, key: str, entry: CutEntry, count: float) -> Proof | None:
    """The prove-out gaps that the planner states; None where there are none. Source: the job file."""
    given = entry.cut.prove_out
    if given is None:
        return None
    setup = _setup(floor, key)
    ref = floor.loaded.ref(entry.name, setup.part)
    states = floor.body(ref.part).states.get((ref.part, ref.surface), [])
    teeth = next((s for s in states if s.op == setup.op), None)
    angle = teeth.pattern.pressure_angle if teeth is not None and teeth.pattern is not None else None
    path = f"setups.{setup.op}.cut.{entry.name}.prove_out"
    return Proof(path, given, setup.op, ref.part, int(count), entry.cut.depth, teeth, angle)


def enough(proof: Proof) -> str | Open:
    """enough, or what to read: three gaps at the least, about a surface that is named. Source: three unknowns."""
    given = proof.given
    lacks = (
        *((f"{proof.path}.about",) if given.about is None else ()),
        *((f"{proof.path}.readings",) if _few(given) else ()),
    )
    return Open(lacks) if lacks else "enough"


def _few(given: ProveOut) -> bool:
    return len(given.readings) < fit.FEWEST


def ring(proof: Proof) -> fit.Ring | Open | None:
    """Mean and eccentricity by least squares of the readings at the exact angles of their gaps.

    Open where they tell no direction, and where the ring they show is too far off its axis.  Source: division.prove_out.
    """
    if _few(proof.given):
        return None
    try:
        found = fit.reduce(proof.given.by_gap, proof.count)
    except ValueError as why:
        return Open((f"{proof.path}.readings",), str(why))
    pattern = proof.teeth.pattern if proof.teeth is not None else None
    beside = too_far_off(found.eccentricity, pattern.radius) if pattern is not None else ""
    return Open((f"{proof.path}.readings",), beside) if beside else found


def eccentricity(ring: fit.Ring) -> float:
    """How far the ring of gaps is off the axis of the reading: half the run-out it shows [mm]. Source: least squares."""
    return ring.eccentricity


def uncertainty(proof: Proof, ring: fit.Ring) -> float | Open:
    """Expanded uncertainty of the eccentricity, k = 2 [mm]: that of a reading times sqrt(the inverse normal matrix along it).

    U sqrt(2 / n) for n gaps evenly round the turn.  Source: covariance of least squares, JCGM 100:2008 H.3.
    """
    stated = proof.given.uncertainty
    return stated * ring.along if stated is not None else Open((f"{proof.path}.uncertainty",))


def most(eccentricity: float, uncertainty: float) -> float:
    """The eccentricity with its uncertainty on top [mm]. Source: guard band on the side that is judged."""
    return eccentricity + uncertainty


def gap_out(proof: Proof, ring: fit.Ring) -> float:
    """Which gap stands farthest out, with decimals between two. Source: least squares."""
    return fit.gap_at(ring.direction, proof.count)


def direction_uncertainty(proof: Proof, ring: fit.Ring, uncertainty: float) -> float | None:
    """Expanded uncertainty of that direction, k = 2 [rad]; None where the eccentricity is not above its own uncertainty.

    uncertainty across / e.  Source: covariance of least squares, first order.
    """
    if ring.eccentricity <= uncertainty or proof.given.uncertainty is None:
        return None
    return proof.given.uncertainty * ring.across / ring.eccentricity


def misfit(ring: fit.Ring) -> float | None:
    """What the readings leave beside a circle, root mean square by their freedoms [mm]: half |r1 - r2 + r3 - r4| for quarters.

    None of three readings, which always lie on one.  Source: least squares.
    """
    return ring.misfit


def reading_uncertainty(proof: Proof) -> float | Open:
    """Expanded uncertainty of one reading [mm]. Source: the job file."""
    return proof.given.uncertainty if proof.given.uncertainty is not None else Open((f"{proof.path}.uncertainty",))


def _about(floor: Floor, proof: Proof) -> State | Open | None:
    """The surface the part turned about, as it was when the gaps were read."""
    if proof.given.about is None or proof.teeth is None:
        return None
    ref = floor.loaded.ref(proof.given.about, proof.part)
    states = floor.body(ref.part).states.get((ref.part, ref.surface), []) if ref.part in floor.bodies else []
    there = [s for s in states if (s.op or 0) <= proof.op]
    if not there or floor.body(ref.part) is not floor.body(proof.part):
        return Open((f"{proof.path}.about",), f"{ref} is not there yet when op {proof.op} cuts the gaps")
    return there[-1]


def off_axis(floor: Floor, proof: Proof) -> Account | Open | None:
    """Where the plan has the ring of gaps, seen from the axis it is read about: all causes between them.

    Raises: OutOfRange for a ring too far off that axis.  Source: the ledger.
    """
    about = _about(floor, proof)
    if about is None or isinstance(about, Open):
        return about
    assert proof.teeth is not None
    account = proof.teeth.offset - about.axis_at(proof.teeth.z)
    missing = account.undetermined()
    if missing or proof.teeth.pattern is None:
        return Open(missing) if missing else account
    return beside_its_axis(account, proof.teeth.pattern.radius)


def planned(off_axis: Account) -> float:
    """Largest eccentricity the plan expects there [mm]. Source: straight sum of the causes, the ledger."""
    return off_axis.largest()


def allowed(floor: Floor, proof: Proof, off_axis: Account, results: tuple[Result, ...]) -> float | None:
    """Largest eccentricity of the gaps with which every requirement on these teeth is still met, all else as planned [mm].

    |known| + bounds of the causes both share - bounds of those only the reading sees + margin / (push per mm of the shared
    ones), the least over the requirements.  None where none speaks of these teeth.  Source: worst case is linear, derived here.
    """
    least = math.inf
    for result in results:
        require, high = result.stack.require, result.stack.high
        if require.what not in OF_THE_RING or high is None or not result.stack.of:
            continue
        ref = floor.loaded.ref(result.stack.of)
        if proof.teeth is None or (ref.part, ref.surface) != (proof.teeth.part, proof.teeth.name):
            continue
        pushes = {p.cause: p.up - p.known for p in result.figure.pushes()}
        shared = sum(off_axis.reach(c) * c.bound for c in off_axis.terms if pushes.get(c, 0.0) > 0.0)
        push = sum(pushes.get(c, 0.0) for c in off_axis.terms)
        if shared <= 0.0 or push <= 0.0:
            continue
        only = off_axis.largest() - abs(off_axis.known()) - shared
        margin = high - result.combined.worst.high
        least = min(least, abs(off_axis.known()) + shared - only + margin * shared / push)
    return max(least, 0.0) if least < math.inf else None


def shift(proof: Proof, most: float) -> float | Open:
    """Metal that moving the blank may ask of one flank, along the circle [mm]: (e + U) / cos(alpha). Source: geometry."""
    if proof.angle is None:
        return Open((f"parts.{proof.part}.surfaces.{proof.teeth.name if proof.teeth else ''}.pressure_angle",))
    return fit.flank_shift(most, proof.angle)


def stock(proof: Proof) -> float | Open:
    """Metal on one flank that the depth still to come takes, along the circle [mm]: (depth - prove-out depth) tan(alpha).

    Source: straight-sided gap, geometry.
    """
    if proof.depth is None:
        return Open((proof.path.removesuffix("prove_out") + "depth",))
    if proof.angle is None:
        return Open((f"parts.{proof.part}.surfaces.{proof.teeth.name if proof.teeth else ''}.pressure_angle",))
    rest = proof.depth - proof.given.depth
    if rest <= 0.0:
        raise OutOfRange("the prove-out gaps are as deep as the cut")
    return fit.flank_stock(rest, proof.angle)


def move(floor: Floor, proof: Proof, ring: fit.Ring, uncertainty: float, planned: float | None = None) -> str:
    """How far to move the blank and which way; nothing where the readings cannot prove that it is off.

    The gaps lie round the machine's axis, e out from the axis of the reading towards the gap that stands out: the blank moves
    by e that way, and its own surface then runs true.  Source: geometry.
    """
    e, about = ring.eccentricity, proof.given.about
    if e <= uncertainty:
        return f"Not proved: {floor.fine(e)} is within the uncertainty of {floor.fine(uncertainty)}. Leave the blank where it is."
    told = about or "the surface it was read about"
    gap = fit.gap_at(ring.direction, proof.count)
    across = fit.gap_at(ring.direction + math.pi, proof.count)
    name, _ = machine_of(floor.loaded, next(s for s in floor.loaded.job.setups if s.op == proof.op))
    first = "Within the plan; to better it, move" if planned is not None and e + uncertainty <= planned else "Move"
    return (
        f"{first} the blank {floor.fine(e)} on {name or 'the machine'} in the direction of gap {_gap(gap, proof.count)}: a "
        f"dial on {told} shows {floor.fine(2.0 * e)} there, high at gap {_gap(across, proof.count)}; bring it to nothing "
        "before the finishing pass."
    )


def _gap(place: float, count: int) -> str:
    """The nearest gap of a place between two."""
    return str((round(place) - 1) % count + 1)


_PROOF, _RING = {"proof": "prove.out"}, {"ring": "prove.ring"}
_FLOOR = {"floor": "route.floor"}

PROVE = (
    Quantity(
        "prove.count", "cut", "1", 0, count_of_gaps, {**_FLOOR, "key": "@key", "entry": ":"}, "gaps of the toothing"
    ),
    Quantity("prove.gaps", "cut", "", 0, gaps, {"count": "prove.count"}, "gaps to cut shallow for a prove-out"),
    Quantity(
        "prove.out",
        "cut",
        "",
        0,
        proof,
        {**_FLOOR, "key": "@key", "entry": ":", "count": "prove.count"},
        "prove-out gaps as stated",
    ),
    Quantity(
        "prove.enough", "cut", "", 0, enough, _PROOF, "whether enough gaps were read, about a surface that is named"
    ),
    Quantity("prove.ring", "cut", "", 0, ring, _PROOF, "mean and eccentricity of the readings"),
    Quantity("prove.eccentricity", "cut", "um", 1, eccentricity, _RING, "eccentricity of the ring of gaps as read"),
    Quantity("prove.uncertainty", "cut", "um", 1, uncertainty, {**_PROOF, **_RING}, "its expanded uncertainty, k = 2"),
    Quantity(
        "prove.most",
        "cut",
        "um",
        1,
        most,
        {"eccentricity": "prove.eccentricity", "uncertainty": "prove.uncertainty"},
        "the eccentricity with its uncertainty on top",
    ),
    Quantity("prove.gap_out", "cut", "1", 1, gap_out, {**_PROOF, **_RING}, "gap that stands farthest out"),
    Quantity(
        "prove.direction_uncertainty",
        "cut",
        "deg",
        0,
        direction_uncertainty,
        {**_PROOF, **_RING, "uncertainty": "prove.uncertainty"},
        "expanded uncertainty of that direction",
    ),
    Quantity("prove.misfit", "cut", "um", 1, misfit, _RING, "what the readings leave beside a circle"),
    Quantity("prove.reading_uncertainty", "cut", "um", 1, reading_uncertainty, _PROOF, "uncertainty of one reading"),
    Quantity(
        "prove.off_axis", "cut", "", 0, off_axis, {**_FLOOR, **_PROOF}, "the ring of gaps as the plan has it there"
    ),
    Quantity(
        "prove.planned", "cut", "um", 1, planned, {"off_axis": "prove.off_axis"}, "largest eccentricity planned there"
    ),
    Quantity(
        "prove.allowed",
        "cut",
        "um",
        1,
        allowed,
        {**_FLOOR, **_PROOF, "off_axis": "prove.off_axis", "results": "known stack.combined"},
        "eccentricity with which every requirement on these teeth is still met",
    ),
    Quantity("prove.shift", "cut", "um", 1, shift, {**_PROOF, "most": "prove.most"}, "metal the move asks of a flank"),
    Quantity("prove.stock", "cut", "um", 0, stock, _PROOF, "metal still on a flank"),
    Quantity(
        "prove.move",
        "cut",
        "",
        0,
        move,
        {**_FLOOR, **_PROOF, **_RING, "uncertainty": "prove.uncertainty", "planned": "settled prove.planned"},
        "how far to move the blank, and which way",
        {"planned": None},
    ),
)
