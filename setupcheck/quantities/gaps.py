"""Gaps cut by a cutter that stands still: how far beside the axis, and how they run off it; the figures of both. mm, rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Toothing
from setupcheck.jobfile.setups import Cut, Setup
from setupcheck.ledger import gaps
from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.book import Open
from setupcheck.quantities.causes import Entry, length_error
from setupcheck.quantities.relations import Built, pair, second_order
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import head_uncertainty
from setupcheck.record import record


@record
class Askew:
    """How every gap of one cut lies to the axis it is indexed about: see `ledger.route.Pattern`.

    clock  what `aside` turns the places by [rad], where the job states it
    """

    aside: Account
    off_sideways: Account
    off_deep: Account
    clock: Account


def askew(setup: Setup, cut: Cut, name: str, node: object, *, radius: float, table_y: Account | None) -> Askew:
    """What the cutter's place and the work's travel do to gaps: nothing stated leaves the figures of gaps open.

    table_y  error of the spindle across the axis of a rotary table, which is how a slot comes to stand beside it; None: no table
    The cutter is taken to be centred at the middle of the gaps.  Source: geometry, derived here.
    """
    op = setup.op
    path = f"setups.{op}.cut.{name}.off_centre"
    clock = Account()
    if cut.off_centre is not None:
        words = f"op {op}, {name}: cutter beside the axis"
        aside = length_error(cut.off_centre, Entry(words, op, path, "")).along(1)
        clock = aside * (1.0 / radius)
    elif table_y is not None:
        aside = table_y
    else:
        aside = _unknown(f"op {op}, {name}: where the cutter stands", op, path)
    return Askew(aside, _travel(setup, name, "beside"), _deep(setup, name, node), clock)


def _unknown(words: str, op: int, missing: str) -> Account:
    return Account.of(Cause(words, "undetermined", op, missing=missing)).along(1)


def _travel(setup: Setup, name: str, key: str) -> Account:
    """Angle of the work's axis to the cutter's travel, one way of it [rad]: reading over length."""
    op, travel = setup.op, setup.travel
    path = f"setups.{op}.travel.{key}"
    ways = {"beside": "work beside the cutter's travel", "nearer": "work nearer to the cutter at one end"}
    words = f"op {op}, {name}: {ways[key]}"
    stated = getattr(travel, key) if travel is not None else None
    if travel is None or stated is None:
        return _unknown(words, op, path)
    return length_error(stated, Entry(words, op, path, "")).along(1) * (1.0 / travel.over)


def _deep(setup: Setup, name: str, node: object) -> Account:
    """Angle of the gaps' bottom to what the drawing has [rad]: of a cone the head's, else that of the travel."""
    cone = node.cone if isinstance(node, Toothing) else None
    if cone is None:
        return _travel(setup, name, "nearer")
    op, head = setup.op, setup.head
    words, path = f"op {op}, {name}: head set to the root cone", f"setups.{op}.head.uncertainty"
    if head is None:
        return _unknown(words, op, f"setups.{op}.head.tilt")
    found = head_uncertainty(head)
    if found is None:
        return _unknown(words, op, path)
    size, typical = found
    cause = Cause(
        words, "length", op, high=size, paths=(path,), mode="typical" if typical else "planned", rests_on=typical
    )
    total = real(abs(head.tilt) - cone) + Account.of(cause).along(1)
    if setup.travel is not None and setup.travel.nearer is not None:
        total += _travel(setup, name, "nearer")
    return total


def figure(floor: Floor, stack: Stack) -> Built | Open:
    """symmetry, flank-run-off and depth-run-off of teeth or slots.

    Raises: JobError for a surface without gaps, or without a length.
    """
    what, key = stack.require.what, f"require[{stack.index + 1}].of"
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    if g.pattern is None or g.kind == "holes":
        raise floor.problem(
            key, f"{g.ref} has no gaps, which {what} is asked of", "Write the name of teeth or of a slot"
        )
    node = floor.loaded.job.parts[g.part].surfaces[g.name]
    cone = (node.cone or 0.0) if isinstance(node, Toothing) else 0.0
    lean = g.lean - r.lean
    left_out = second_order(lean=lean, lever=max(g.high - g.low, abs(g.z - r.z)))
    if isinstance(node, Toothing) and node.width is None:
        return Open((f"parts.{g.part}.surfaces.{g.name}.width",))
    if what == "symmetry":
        ends = (g.low, g.high) if g.high > g.low else (g.z,)
        offsets = tuple(g.axis_at(z) - r.axis_at(z) for z in ends)
        # a slot has no length of its own, so what runs off along it cannot count
        runs = g.pattern.off_sideways if len(ends) == 2 else Account()
        half = node.width / 2.0 if isinstance(node, Toothing) and node.width is not None else 0.0
        return Built(gaps.GapSymmetry(offsets, half, g.pattern.aside, runs, g.pattern), left_out)
    if not isinstance(node, Toothing) or node.width is None:
        raise floor.problem(
            key, f"{g.ref} is a {g.kind}, which has no length along the part", "Write it as kind: teeth, with its width"
        )
    deep = what == "depth-run-off"
    straight = g.pattern.off_deep if deep else g.pattern.off_sideways
    return Built(gaps.RunOff(lean, straight, node.width, cone, deep, g.pattern), left_out)
