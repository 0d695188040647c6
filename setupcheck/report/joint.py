"""The table of a joint that holds by interference: its tightest and its loosest pair, coldest, at 20 degC and warmest."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.quantities.pairing import FITTED
from setupcheck.report.wording import wrap
from setupcheck.report.worked_out import filled

if TYPE_CHECKING:
    from setupcheck.report.review_blocks import JointData

LABEL, CELL = 24, 9
"""Widths of the table's columns; all of them make 78."""
STATES = (("cold", "coldest"), ("bench", "at"), ("warm", "warmest"))
COLUMNS = ("most", "pressure", "hoop", "least", "least_pressure", "torque")
HEADS = ("grip", "pressure", "hoop", "grip", "pressure", "torque")
BENEATH: tuple[tuple[str, ...], ...] = (
    ("{fit.said}, on diameter; friction {fit.rubs}",),
    ("elastic up to {fit.elastic}: {fit.weaker}",),
    (
        "at its tightest {fit.hoop_outside} round the hub's outside, and in compression {fit.seat_stress} round the seat, "
        "{fit.hole_stress} round the shaft's hole",
        "at its tightest {fit.hoop_outside} round the hub's outside, and {fit.seat_stress} of compression in the shaft",
    ),
    (
        "peaks lose {fit.smoothing}; the loosest holds {fit.torque_1988} by the factor 0.8 (DIN 7190:2001), {fit.torque_2017} by "
        "0.4 (said of 2017)",
    ),
    ("the loosest holds {fit.slip_safety} times what it must in service; the torques above are that over 1.2",),
    (
        "with hub and shaft equally warm it holds what it must up to {fit.holds_to} and is loose at {fit.loosens_at}",
        "with hub and shaft equally warm it holds what it must up to {fit.holds_to} and is not loose up to {fit.tight_to}, as "
        "far as expansions are known",
        "with hub and shaft equally warm it is loose at {fit.loosens_at}",
        "with hub and shaft equally warm it is not loose up to {fit.tight_to}, as far as expansions are known",
    ),
    ("the tightest pair yields below {fit.yields_below}",),
    (
        "pressing in takes up to {fit.press_force}, off again cold up to {fit.press_off}; the press may be asked for "
        "{fit.press_allowed}",
        "pressing in takes up to {fit.press_force}, off again cold up to {fit.press_off}",
        "pulling it off cold takes up to {fit.press_off}",
    ),
    ("the hub grows on {fit.growth_told}",),
    (
        "its finished teeth ride out by {fit.growth_least} to {fit.growth_most} on diameter, as if the mate stood up to "
        "{fit.growth_as_distance} nearer",
    ),
    ("the shaft's hole closes by up to {fit.hole_closing}",),
    ("{fit.suits}",),
    ("measured pairs, {fit.pairs}; {fit.pairs_told}",),
)
"""Lines under the table, each with its shorter forms: the first of them whose numbers are all known is said."""
PLAY = "{fit.said}, on diameter: no interference, so no pressure and nothing held"
FITTING = {"shrink": "{0} shrunk on {1}", "press": "{1} pressed into {0}"}


def fitted(found: Review) -> Iterator[tuple[Scope, Join]]:
    """Joints of a bore on a cylinder that hold by interference, in the order of the job."""
    for scope in found.book.instances("join"):
        join = scope.node
        if isinstance(join, Join) and join.by in FITTED and found.book.get("fit.interference_most", scope) is not None:
            yield scope, join


def has_play(found: Review, scope: Scope) -> bool:
    """Whether bore and journal have play over all their limits: there is no interference, hence no pressure and no heat."""
    most = found.book.get("fit.interference_most", scope)
    return isinstance(most, Known) and float(most.value) <= 0.0  # type: ignore[arg-type]


def joints(found: Review) -> Iterator[str]:
    """One table for each joint; nothing for joints that hold in another way."""
    for number, (scope, join) in enumerate(fitted(found)):
        yield from [""] * (number > 0)
        yield from _table(found, scope, join)


def joints_as_data(found: Review) -> list[JointData]:
    """The lines under each table, by operation; the numbers of the table itself then stand among the quantities."""
    for scope, _ in fitted(found):
        for state, _ in STATES:
            for column in ("at", *COLUMNS):
                found.book.get(f"fit.{state}_{column}", scope)
    return [{"op": scope.op, "says": in_words(found, scope, BENEATH)} for scope, _ in fitted(found)]


def _table(found: Review, scope: Scope, join: Join) -> Iterator[str]:
    outer, inner = found.loaded.ref(join.outer).part, found.loaded.ref(join.inner).part
    yield from wrap(
        f"JOINT, op {scope.op}: {FITTING[join.by].format(outer, inner)}; grip on diameter, thick rings in plane stress",
        rest="  ",
    )
    if has_play(found, scope):
        yield from wrap(filled(found, scope, PLAY), first="  - ", rest="    ")
        return
    yield " " * LABEL + "tightest pair".rjust(3 * CELL) + "loosest, smoothed".rjust(3 * CELL) + ""
    yield " " * LABEL + "".join(word.rjust(CELL) for word in HEADS)
    yield " " * LABEL + "".join(_unit(found, scope, column).rjust(CELL) for column in COLUMNS)
    for state, name in STATES:
        at = found.book.get(f"fit.{state}_at", scope)
        label = f"{name} {at.value}" if isinstance(at, Known) else f"{name} {'open' if state != 'bench' else '20 degC'}"
        if len(label) > LABEL - 3:  # hub and shaft apart: the label takes a line of its own
            yield f"  {label}"
            label = ""
        yield f"  {label}".ljust(LABEL) + "".join(_cell(found, scope, f"fit.{state}_{c}") for c in COLUMNS)
    limits = {"most": "fit.elastic", "least": "fit.grip_needed"}
    row = "".join(_cell(found, scope, limits[c]) if c in limits else " " * CELL for c in COLUMNS)
    yield "  allowed, needed".ljust(LABEL) + row.rstrip()
    for said in in_words(found, scope, BENEATH):
        yield from wrap(said, first="  - ", rest="    ")


def in_words(found: Review, scope: Scope, lines: Sequence[tuple[str, ...]]) -> list[str]:
    """Each line in the first of its forms whose numbers are all known; a line with none is left out."""
    said = (next(filter(None, (filled(found, scope, form) for form in forms)), "") for forms in lines)
    return [line for line in said if line]


def _unit(found: Review, scope: Scope, column: str) -> str:
    return found.book.unit(f"fit.bench_{column}", scope).replace("*", " ")


def _cell(found: Review, scope: Scope, name: str) -> str:
    """The bare number, as its column says the unit; `open` where something is missing."""
    answer = found.book.get(name, scope)
    if not isinstance(answer, Known):
        return ("open" if isinstance(answer, Open) else "-").rjust(CELL)
    unit, digits = found.book.unit(name, scope), found.book.digits(name, scope)
    return show(float(answer.value), unit, digits).removesuffix(unit.replace("*", " ")).strip().rjust(CELL)  # type: ignore[arg-type]
