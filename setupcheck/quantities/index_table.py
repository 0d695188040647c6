"""The index table of one setup: what the hand at the machine follows, place by place, and what its rounding costs. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Iterator
from fractions import Fraction

from setupcheck.division import tables
from setupcheck.division.methods import circles_that_fit, turns_per_place
from setupcheck.division.order import cutting_order
from setupcheck.division.tables import Setting
from setupcheck.jobfile.dividing import Divide
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.teeth import folded
from setupcheck.notation import show
from setupcheck.notation.shares import fixed_of
from setupcheck.quantities import division
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

CRANKED = ("hole-circle", "rotary-table")
"""Ways that turn a crank: with a hole circle, or by a dial on the crank."""
SLOW = 5
"""Waves round the work that do not look like run-out. Source: DIVIDE-002, our screening choice."""
ANGULAR = ("cumulative-pitch", "single-pitch", "gap-centre-pitch", "index-range", "index-within", "on-workpiece")
ALONG_THE_CIRCLE = ("position", "chord")
"""Requirements that a division enters one to one: as an angle, or as its arc."""


@record
class IndexTable:
    """What a setup divides, by what, and the lines of its table.

    kind      holes, positions, angles, x-y or sine-bar;  by, order  as the job says
    ref       the surface divided (`gear.teeth`);  what  teeth or holes
    circles   of the head, or the usual ones;  own  whether the head lists them
    per_turn  smallest steps of the device in a turn of the work, None where it shows any angle (no step is stated)
    radius    of the places [mm];  start  direction of place 1 seen from the end that points away from the spindle [rad]
    away      that end of the part, `+z` or `-z`;  bar  centre distance of the sine bar's rolls [mm]
    linear_step  of a readout for coordinates [mm], where it is stated
    """

    kind: str
    by: str
    ref: str
    what: str
    count: int
    worm_ratio: int | None
    circle: int | None
    circles: tuple[int, ...]
    own: bool
    per_turn: Fraction | None
    order: str
    radius: float
    start: float
    away: str
    bar: float | None
    linear_step: float | None
    lines: tuple[Setting, ...]

    def told(self) -> str:
        """`40 places in turn: …, the last line is the start again`."""
        return f"{self.count} places cut {self.order}, {len(self.lines)} lines; the last one is the start again"

    @property
    def exact(self) -> bool:
        """Whether no place is rounded."""
        return not any(line.off for line in self.lines[:-1])


def cut_pattern(floor: Floor, setup: Setup) -> tuple[str, str, Pattern] | None:
    """(surface, its kind, its places as cut) of what a setup divides; None where it divides nothing."""
    for name in setup.cut:
        ref = floor.loaded.ref(name, setup.part)
        body = floor.bodies.get(ref.part)
        for state in body.states.get((ref.part, ref.surface), ()) if body is not None else ():
            if state.op == setup.op and state.pattern is not None and state.pattern.count > 1:
                return f"{ref.part}.{ref.surface}", state.kind, state.pattern
    return None


def index_table(floor: Floor, setup: Setup, count: int, worm_ratio: int | None) -> IndexTable | Open | None:
    """Absolute settings of every place, each rounded for itself to the device's smallest step, and the start again.

    Place j stands (j - 1)/N of a turn from place 1. Exact fractions: steps = (j - 1)/N x ratio x holes of the circle.
    None without a `divide` entry.  Source: exact fractions; the order from the job file.
    """
    divide, found = setup.divide, cut_pattern(floor, setup)
    if divide is None or found is None:
        return None
    ref, what, pattern = found
    kind = _kind(divide)
    if kind == "holes" and worm_ratio is None:
        missing = division.worm_ratio(floor, setup)
        return missing if isinstance(missing, Open) else Open((f"setups.{setup.op}.machine",))
    needed = _needed(divide, kind)
    if needed and getattr(divide, needed) is None:
        return Open((f"setups.{setup.op}.divide.{needed}",))
    circles, own = head_circles(floor, setup)
    per_turn = _per_turn(divide, kind, worm_ratio)
    order = divide.order or "in-turn"
    own_sense = floor.sense(ref.partition(".")[0]) * pattern.turn
    return IndexTable(
        kind,
        divide.by,
        ref,
        what if what in ("teeth", "holes") else "places",
        count,
        worm_ratio if divide.by in CRANKED else None,
        divide.circle if kind == "holes" else None,
        circles,
        own,
        per_turn,
        order,
        pattern.radius,
        pattern.turn * pattern.start,
        "+z" if own_sense > 0 else "-z",
        divide.sine_bar,
        divide.step if kind == "x-y" else None,
        tables.settings(count, per_turn if per_turn is not None else count, _places(count, order)),
    )


def _kind(divide: Divide) -> str:
    if divide.by in ("x-y", "sine-bar"):
        return divide.by
    return {"hole-circle": "holes", "direct": "positions", "face-teeth": "positions", "polygon": "positions"}.get(
        divide.by, "angles"
    )


def _needed(divide: Divide, kind: str) -> str:
    """The key without which there is no table; empty where none is needed."""
    if kind == "positions":
        return "sides" if divide.by == "polygon" else "positions"
    return {"holes": "circle", "sine-bar": "sine_bar"}.get(kind, "")


def _per_turn(divide: Divide, kind: str, worm_ratio: int | None) -> Fraction | None:
    if kind == "holes":
        assert worm_ratio is not None
        assert divide.circle is not None
        return Fraction(worm_ratio * divide.circle)
    if kind == "positions":
        return Fraction(divide.positions or divide.sides or 1)
    return 1 / tables.exact_share(divide.step) if kind == "angles" and divide.step else None


def _places(count: int, order: str) -> tuple[int, ...]:
    return cutting_order(count, "spread") if order == "spread" else ()


def head_circles(floor: Floor, setup: Setup) -> tuple[tuple[int, ...], bool]:
    """(hole circles to look at, whether they are the head's own list)."""
    _, machine = machine_of(floor.loaded, setup)
    own = tuple(sorted(set(machine.hole_circles))) if machine is not None else ()
    return (own, True) if own else (tables.USUAL_CIRCLES, False)


def table_step(table: IndexTable) -> str:
    """From place to place in words, as it is done by hand. Source: exact fractions."""
    spread = ", cut in spread order" if table.order == "spread" else ""
    if table.kind != "holes":
        return f"{table.count} places, {fixed_of(Fraction(1, table.count), 360, 4)} deg from one to the next{spread}"
    assert table.worm_ratio is not None
    assert table.circle is not None
    turns = turns_per_place(table.worm_ratio, table.count)
    by_hand = tables.step_on(table.worm_ratio, table.count, table.circle)
    if by_hand is None:
        return f"{in_turns(turns)} is no whole number of holes on {table.circle}, so each place takes its nearest hole{spread}"
    whole, holes = by_hand
    if not holes:
        return f"{in_turns(turns)}, back into the same hole{spread}"
    also = f"{in_turns(Fraction(whole))} and " if whole else ""
    arms = spread or f" ({holes + 1} in the sector arms)"
    return f"{in_turns(turns)} = {also}{holes} holes of {table.circle}{arms}"


def in_turns(turns: Fraction) -> str:
    """`5/9 turn`, `1 turn`, `3 3/4 turns`."""
    whole, part = divmod(turns, 1)
    text = " ".join(filter(None, (str(whole) if whole else "", f"{part}" if part else ""))) or "0"
    return f"{text} turn{'s' if turns > 1 else ''}"


def table_off(table: IndexTable) -> float | None:
    """Largest error of a place from rounding, either way [rad]; None where every place comes out exactly.

    Absolute settings: nothing adds up round the turn.  Source: exact fractions.
    """
    return math.tau * float(tables.largest_off(table.lines)) if not table.exact else None


def table_range(table: IndexTable) -> float | None:
    """Range of what rounding leaves over all places [rad]; None where nothing is rounded. Source: exact fractions.

    None as well for notches, teeth and sides that the count does not divide: of them DIVIDE-008 speaks.

    It stands for each figure of the division, and is never less than what rounding does to that figure.
    """
    if table.exact or table.kind == "positions":
        return None
    return math.tau * float(tables.off_range(table.lines))


def table_limit(floor: Floor, table: IndexTable) -> float | None:
    """Tightest limit of a requirement that this division enters, as an angle [rad]: limit / radius. None without one.

    Source: geometry (arc over radius); the requirements of the job.
    """
    return min(_limits(floor, table), default=None)


def _limits(floor: Floor, table: IndexTable) -> Iterator[float]:
    """Limits of the requirements on this division, as angles [rad]."""
    for index, require in enumerate(floor.loaded.job.require):
        if require.what not in (*ANGULAR, *ALONG_THE_CIRCLE):
            continue
        stack = read_stack(floor, index)
        ref = floor.loaded.ref(stack.of)
        if not stack.high:
            continue
        if f"{ref.part}.{ref.surface}" != table.ref:
            continue
        on = require.on_diameter
        yield stack.high if stack.unit == "arcsec" else stack.high / (on / 2.0 if on else table.radius)


def table_open(table: IndexTable) -> float:
    """What is missing between the last line and the start, all moves added one by one [rad]; 0 where the table closes.

    A device whose steps do not divide the turn does not come back to its start.  Source: counting whole steps.
    """
    return math.tau * float(tables.left_open(table.lines, table.per_turn or table.count))


def table_shared(table: IndexTable) -> int:
    """Places that have the setting of another one, as the device has too few steps. Source: counting."""
    return tables.shared_settings(table.lines, table.per_turn or table.count)


def other_ways(floor: Floor, table: IndexTable) -> str | None:
    """What else there is where a circle does not fit: circles that do, nearest ones with their error, counts, ratios.

    Source: exact fractions; the error of the nearest hole is counted from the start, so it does not add up.
    """
    if table.kind != "holes" or table.exact:
        return None
    return " ".join(alternatives(floor, table))


def alternatives(floor: Floor, table: IndexTable) -> Iterator[str]:
    """The ways out, one sentence each, with what each costs."""
    assert table.worm_ratio is not None
    fits = circles_that_fit(table.worm_ratio, table.count, table.circles)
    owner = "this head" if table.own else "the usual plates"
    if fits:
        yield f"Exact on a circle of {' or '.join(map(str, fits))} holes."
        return
    near = tables.nearest_circles(table.worm_ratio, table.count, table.circles)
    told = "; ".join(f"{circle} holes {error_in_words(floor, table, error)}" for circle, error in near)
    yield f"No circle of {owner} fits. To the nearest hole, counted from the start, the worst place is off: {told}."
    if table.own:
        elsewhere = circles_that_fit(table.worm_ratio, table.count)
        if elsewhere:
            yield f"A plate with a circle of {' or '.join(map(str, elsewhere))} holes has no such error."
    ratios = tables.other_ratios(table.worm_ratio, table.count, table.circles)
    if ratios:
        said = "; ".join(f"{ratio}:1 on {' or '.join(map(str, circles[:3]))}" for ratio, circles in ratios)
        yield f"Nor has another ratio: {said}."
    counts = [n for n in tables.neighbouring_counts(table.worm_ratio, table.count, table.circles) if n is not None]
    if counts:
        yield f"Counts beside it that fit: {' and '.join(map(str, counts))}."


def error_in_words(floor: Floor, table: IndexTable, error: Fraction) -> str:
    """An error of a place [share of a turn] at the work and along the circle of the places."""
    angle = math.tau * float(error)
    return f"{show(angle, 'arcsec', 1)}, {floor.fine(angle * table.radius)} at the {table.what}"


def fold_advice(floor: Floor, setup: Setup, crank_error: float, worm_ratio: int, count: int) -> str | None:
    """What the head's crank error leaves on the teeth, and which other ratio would not leave it as a slow wave.

    Amplitude x radius; the waves of another ratio by the same folding, `folded_harmonic`.  Source: aliasing, derived here.
    """
    found, waves = cut_pattern(floor, setup), folded(worm_ratio, count)
    if found is None or not waves or not crank_error > 0.0:
        return None
    _, what, pattern = found
    better = [(ratio, folded(ratio, count)) for ratio in tables.USUAL_RATIOS if ratio != worm_ratio]
    better = [(ratio, w) for ratio, w in better if not 0 < w < SLOW]
    said = (
        f"Of ±{show(crank_error, 'arcsec', 1)} once a crank turn the {what} keep ±{floor.fine(crank_error * pattern.radius)}"
        f", {waves} {'wave' if waves == 1 else 'waves'} round the work. Calibrate the head over one crank turn and correct by"
        " the record"
    )
    if not better:
        return f"{said}."
    each = ", ".join(f"{ratio}:1 ({f'{w} waves' if w else 'alike at every place'})" for ratio, w in better)
    return f"{said}, or divide by another ratio: {each}; that head brings an error of its own."


TABLE = {"table": "divide.table"}
FLOOR = {"floor": "route.floor"}

INDEX_TABLE = (
    Quantity(
        "divide.table",
        "setup",
        "",
        0,
        index_table,
        {**FLOOR, "setup": ":", "count": "divide.count", "worm_ratio": "settled divide.worm_ratio"},
        "the index table, place by place; `setupcheck index JOB` prints it",
        {"worm_ratio": None},
    ),
    Quantity("divide.table_step", "setup", "", 0, table_step, TABLE, "from place to place, as it is done by hand"),
    Quantity(
        "divide.table_off", "setup", "arcsec", 2, table_off, TABLE, "largest error of a place from rounding, either way"
    ),
    Quantity(
        "divide.table_range", "setup", "arcsec", 1, table_range, TABLE, "range of what rounding leaves over all places"
    ),
    Quantity(
        "divide.table_limit",
        "setup",
        "arcsec",
        1,
        table_limit,
        {**FLOOR, **TABLE},
        "tightest limit of a requirement on this division, as an angle",
    ),
    Quantity(
        "divide.table_open", "setup", "arcsec", 2, table_open, TABLE, "what is missing from the last line to the start"
    ),
    Quantity("divide.table_shared", "setup", "1", 0, table_shared, TABLE, "places that share a setting with another"),
    Quantity(
        "divide.other_ways", "setup", "", 0, other_ways, {**FLOOR, **TABLE}, "ways out where a circle does not fit"
    ),
    Quantity(
        "divide.fold_advice",
        "setup",
        "",
        0,
        fold_advice,
        {
            **FLOOR,
            "setup": ":",
            "crank_error": "divide.crank_error",
            "worm_ratio": "divide.worm_ratio",
            "count": "divide.count",
        },
        "what the head's crank error leaves on the teeth, and ratios that would not leave it as a slow wave",
    ),
)
