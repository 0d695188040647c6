"""A joint whose outer part is trued by a dial before it is fast: where that leaves it; has its play room for it? mm, rad."""

from __future__ import annotations

from collections.abc import Callable

from setupcheck.jobfile.setups import Join
from setupcheck.jobfile.truing import Trued
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.causes import Entry, Turned, run_out, stated_direction
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Body, Floor


def offset_of_a_trued_part(
    floor: Floor,
    op: int,
    join: Join,
    body: Body,
    other: Body,
    *,
    leaned: Callable[[State], State],
) -> Account:
    """Displacement of the inner part's axis that leaves `trued.on` run out about `trued.about` by the reading and the shift.

    offset = axis_on(z) - reading - shift - axis_about(z), at the height z where the dial stands: bore, journal and their
    play drop out, and what both surfaces inherited stays.
    leaned  a surface of the inner part as it leans against its shoulder, before it is moved
    Raises: JobError where a surface is not there.  Source: derived here (a circle centred on another).
    """
    assert join.trued is not None
    on, about = _surfaces(floor, op, join.trued, body, other)
    path, words = f"setups.{op}.join", f"op {op}, {on.part} trued on {on.name}"
    towards = floor.in_body(
        on.part, stated_direction(join.trued.runout.high_at if join.trued.runout is not None else None)
    )
    floor.directions[f"{op}/trued"] = towards.why
    reading = run_out(
        join.trued.runout,
        Entry(f"{words}: run-out", op, f"{path}.trued.runout", "indicator"),
        inside=on.kind == "bore",
        towards=towards,
        turned=Turned(),
    )
    moved = floor.in_body(on.part, stated_direction(join.fit_error.high_at if join.fit_error is not None else None))
    shift = run_out(
        join.fit_error,
        Entry(f"{words}: moved as the joint sets", op, f"{path}.fit_error", join.by),
        inside=False,
        towards=moved,
        turned=Turned(),
    )
    return on.offset - reading - shift - leaned(about).axis_at(on.z)


def _surfaces(floor: Floor, op: int, trued: Trued, body: Body, other: Body) -> tuple[State, State]:
    found = []
    for text, where, key, whose in (
        (trued.on, body, "on", "outer"),
        (trued.about, other, "about", "inner"),
    ):
        ref = floor.loaded.ref(text)
        state = where.now(ref) if floor.body(ref.part) is where else None
        if state is None or state.facing:
            raise floor.problem(
                f"setups.{op}.join.trued.{key}",
                f"{ref} is no round surface of the {whose} part that is there when operation {op} joins",
                f"Write a finished round surface of the {whose} part",
            )
        found.append(state)
    return found[0], found[1]


def need(floor: Floor, entry: HoldEntry, op: int) -> float | Open | None:
    """Play on diameter that truing may need [mm]: twice the most that bore and journal then stand apart, worst case.

    What the bore runs out about the trued surface, and the journal about what turns.  Source: the ledger, derived here.
    """
    apart = floor.truings.get(op) if isinstance(entry.entry, Trued) else None
    if apart is None:
        return None
    missing = apart.undetermined()
    return Open(missing) if missing else 2.0 * apart.largest()


def room(floor: Floor, entry: HoldEntry, op: int) -> float | Open | None:
    """Least play of the joint on diameter, as stated [mm]. Source: the job file."""
    if not isinstance(entry.entry, Trued):
        return None
    join = next(s.join for s in floor.loaded.job.setups if s.op == op)
    assert join is not None
    return join.clearance[0] if join.clearance is not None else Open((f"setups.{op}.join.clearance",))


def not_stopped(op: int) -> Account:
    """A joint of which nobody says where it is stopped."""
    return Account.of(
        Cause(f"op {op}: where the joint is stopped", "undetermined", op, missing=f"setups.{op}.join.stop")
    ).along(1)


_HERE = {"floor": "route.floor", "entry": ":", "op": "@op"}

TRUING = (
    Quantity("truing.need", "hold", "um", 1, need, _HERE, "play that truing the part may need, on diameter"),
    Quantity("truing.room", "hold", "um", 1, room, _HERE, "least play of the joint that is trued, on diameter"),
)
