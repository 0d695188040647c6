"""What a joint carries, as a figure that a requirement can limit. N mm."""

from __future__ import annotations

from setupcheck.jobfile.models import Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join
from setupcheck.ledger import figures
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause, Mode
from setupcheck.quantities import pairing, strength, within
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.friction import Friction
from setupcheck.quantities.joining import JointSizes, interference_most, limits_of, sizes
from setupcheck.quantities.relations import Built
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor


def torque(floor: Floor, stack: Stack) -> Built | Open:
    """Torque that a joint holds in service over the limits of its sizes, lowest friction, with the slip factor.

    T = unit (U - smoothing + what the temperature takes), straight in bore and journal.
    Validity: all pairs elastic, so open where the tightest yields.  Source: quantities.strength.
    """
    found = _join(floor, stack)
    if isinstance(found, Open):
        return found
    join, op = found
    limits = sizes(floor, join)
    if not isinstance(limits, JointSizes):
        return limits or Open(because=f"the joint of op {op} is no bore on a cylinder, which has no computed torque")
    pair = pairing.pair(floor, join, limits)
    if pair is None:
        return Open(because=f"the joint of op {op} does not hold by interference")
    if isinstance(pair, Open):
        return pair
    parts = (pairing.smoothed(floor, join, pair), pairing.rubbing(floor, join, pair, op), pairing.service(join, op))
    lost, rubbing, served = parts
    opened = [x for x in parts if isinstance(x, Open)]
    if opened or not isinstance(lost, float) or not isinstance(rubbing, Friction) or not isinstance(served, tuple):
        return Open(tuple(m for x in opened for m in x.missing), "; ".join(x.because for x in opened if x.because))
    try:
        within.tight(strength.grip_most(pair, interference_most(limits), served), None, within.limit(floor, pair))
        unit = strength.torque_held(pair, strength.force_held(pair, 1.0, rubbing.low))
        taken = min(pair.at(0.0, "holding", t) for t in (*served, pairing.BENCH))
    except OutOfRange as why:
        return Open(because=str(why))
    bore, journal = (_size(floor, floor.loaded.ref(text)) for text in (join.outer, join.inner))
    account = (journal - bore) * unit
    return Built(figures.Length(account.plus_constant(unit * (taken - lost))), 0.0)


def _join(floor: Floor, stack: Stack) -> tuple[Join, int] | Open:
    """The joint that `of` names by its operation; the only one where nothing is named."""
    joins = [(s.join, s.op) for s in floor.loaded.job.setups if s.join is not None]
    named = [(join, op) for join, op in joins if str(op) == stack.of]
    if named:
        return named[0]
    if not stack.of and len(joins) == 1:
        return joins[0]
    if not stack.of:
        return Open((f"require[{stack.index + 1}].of",), "" if joins else "no operation joins anything")
    raise floor.problem(
        f"require[{stack.index + 1}].of",
        f"'{stack.of}' is no operation that joins two parts",
        f"Write {' or '.join(str(op) for _, op in joins)}" if joins else "Write the joining as a setup of its own",
    )


def _size(floor: Floor, ref: Ref) -> Account:
    """A size of the joint as its middle and half its limits."""
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    path = f"parts.{ref.part}.surfaces.{ref.surface}.diameter"
    assert isinstance(node, Round)
    limits = limits_of(node.diameter, path, floor)
    assert isinstance(limits, tuple)
    low, high = limits
    mode: Mode = "measured" if node.diameter.measured is not None else "planned"
    cause = Cause(
        f"{ref.surface} of {ref.part}, within its limits", "length", high=(high - low) / 2.0, mode=mode, paths=(path,)
    )
    return Account.of(cause).plus_constant((low + high) / 2.0)
