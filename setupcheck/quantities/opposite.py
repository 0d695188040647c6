"""Known run-outs set against each other: two parts of a joint, two devices in one chain. Base units mm, rad."""

from __future__ import annotations

import cmath
import math
from collections.abc import Mapping
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation
from setupcheck.jobfile.setups import Centre, Join, Setup
from setupcheck.ledger.figures import Figure
from setupcheck.notation import show_angle
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.gates import origins, reaches
from setupcheck.quantities.judged import Result
from setupcheck.quantities.readings import Reading, readings
from setupcheck.quantities.requirements import Stack, spoken
from setupcheck.quantities.route import walk
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build
from setupcheck.record import record

WORTH = 0.001
"""What setting two run-outs against each other has to save before it is said [mm]. Source: our screening choice."""
THIRDS = tuple(k * math.tau / 3.0 for k in range(3))


@record(eq=False)
class Opposite:
    """The best angle of mounting: what it saves in the tightest requirement that hears of it [mm].

    angle  to write as mounted_at, whole degrees [rad];  now, best  worst case as planned and there [mm]
    marks  the readings whose directions it rests on
    """

    op: int
    outer: str
    inner: str
    angle: float
    mounted_at: float | None
    stack: Stack
    now: float
    best: float
    marks: tuple[Reading, ...]

    @property
    def saves(self) -> float:
        return max(self.now - self.best, 0.0)


def _directed(floor: Floor) -> list[Reading]:
    """Measured run-outs that say where they are high."""
    return [r for r in readings(floor.loaded.job) if isinstance(r.record, Deviation) and r.record.high_at is not None]


def _mounted(floor: Floor, setup: Setup, join: Join, angle: float) -> Floor | None:
    """The route with this joint put together at an angle [rad]."""
    job = floor.loaded.job
    there = setup.model_copy(update={"join": join.model_copy(update={"mounted_at": angle})})
    setups = tuple(there if s is setup else s for s in job.setups)
    try:
        return walk(replace(floor.loaded, job=job.model_copy(update={"setups": setups})))
    except JobError:
        return None


def _figure(floor: Floor, stack: Stack) -> Figure | None:
    try:
        made = build(floor, stack)
    except (JobError, OutOfRange):
        return None
    return None if isinstance(made, Open) else made.figure


def _worst(figure: Figure) -> float:
    """Upper end of the worst case: the largest over the places the figure is the worst of. Source: the ledger."""
    return max(one.base + sum(p.up for p in one.pushes) for one in reaches(figure))


def _best_angle(thirds: Mapping[float, Floor], stack: Stack) -> float | None:
    """Angle at which the known vectors of both parts stand against each other [rad]; None where none does anything.

    known^2 = c + a cos(phi) + b sin(phi), from its values at three thirds of a turn.  Source: law of cosines.
    """
    wave, all_of_it = 0j, 0.0
    for angle, floor in thirds.items():
        figure = _figure(floor, stack)
        if figure is None:
            return None
        square = max(one.base + sum(p.known for p in one.pushes) for one in reaches(figure)) ** 2
        wave += square * cmath.exp(1j * angle)
        all_of_it += square
    if abs(wave) <= 1e-9 * all_of_it or all_of_it == 0.0:
        return None
    return math.radians(round(math.degrees((cmath.phase(wave) + math.pi) % math.tau))) % math.tau


def best(floor: Floor, join: Join, op: int, results: tuple[Result, ...]) -> Opposite | None:
    """The angle of mounting that helps the tightest requirement most; None where fewer than two directions are known.

    The route is walked again at that angle; an angle that takes another requirement outside its limits is none.
    Source: the ledger's joint; law of cosines.
    """
    directed = _directed(floor)
    if len(directed) < 2:
        return None
    setup = next(s for s in floor.loaded.job.setups if s.op == op)
    thirds = {angle: other for angle in THIRDS if (other := _mounted(floor, setup, join, angle)) is not None}
    if len(thirds) < len(THIRDS):
        return None
    lengths = [r for r in results if r.stack.unit == "um" and r.stack.high is not None and r.margin_share is not None]
    for result in sorted(lengths, key=lambda r: r.margin_share or 0.0):
        angle = _best_angle(thirds, result.stack)
        there = _mounted(floor, setup, join, angle) if angle is not None else None
        figure = _figure(there, result.stack) if there is not None else None
        if angle is None or there is None or figure is None or _spoils(there, results):
            continue
        paths = {p for c in origins(reaches(figure)) if c.mean for p in c.paths}
        marks = tuple(r for r in directed if r.path in paths)
        if len(marks) >= 2:
            outer, inner = (floor.loaded.ref(text).part for text in (join.outer, join.inner))
            now = result.combined.worst.high
            return Opposite(op, outer, inner, angle, join.mounted_at, result.stack, now, _worst(figure), marks)
    return None


def _spoils(there: Floor, results: tuple[Result, ...]) -> bool:
    """Whether a requirement that is met now would not be met at that angle."""
    for result in results:
        if result.stack.high is None or (result.margin or 0.0) < 0.0:
            continue
        figure = _figure(there, result.stack)
        if figure is None or _worst(figure) > result.stack.high:
            return True
    return False


def saves(best: Opposite) -> float:
    """What that angle takes off the worst case of the tightest requirement that hears of it [mm]. Source: both worst cases."""
    return best.saves


def _title(stack: Stack) -> str:
    return stack.require.name or f"{stack.require.what} at {spoken(stack)}"


def says(floor: Floor, best: Opposite) -> str | None:
    """Which mark goes where, from which readings, what it saves; None below WORTH. Source: opposite.best."""
    if best.saves < WORTH:
        return None
    marks = " and ".join(
        f"{r.name} (high at {r.record.high_at})" for r in best.marks if isinstance(r.record, Deviation)
    )
    angle = show_angle(best.angle, "deg", 0)
    was = f" instead of {show_angle(best.mounted_at, 'deg', 1)}" if best.mounted_at is not None else ""
    upto = "" if best.mounted_at is not None else "up to "
    return (
        f"Put {best.outer} on {best.inner} with its mark at {angle} from the mark of {best.inner}{was} "
        f"(setups.{best.op}.join.mounted_at), which sets {marks} against each other: {_title(best.stack)} is then "
        f"{floor.fine(best.best)} at its worst instead of {upto}{floor.fine(best.now)}, {floor.fine(best.saves)} saved."
    )


@record(eq=False)
class Chain:
    """Two devices of one hold, both measured: `first` and `second` with their dial readings [mm]; `saves` in `stack` [mm]."""

    path: str
    on: str
    first: tuple[str, float]
    second: tuple[str, float]
    stack: Stack
    saves: float


def chain(entry: HoldEntry, path: str, results: tuple[Result, ...]) -> Chain | None:
    """The two devices of a hold whose run-outs are worth setting against each other; None where fewer than two are measured.

    Turned so that the high spots stand opposite, e1 + e2 becomes |e1 - e2|: 2 min(e1, e2) times the push of one of them over
    its reading, in the tightest requirement that hears of both.  Source: vectors along one line.
    """
    centre = entry.entry
    if not isinstance(centre, Centre) or not centre.through:
        return None
    known: list[tuple[str, Deviation | None, str]] = [(centre.by, centre.runout, f"{path}.runout")]
    known += [(t.by, t.runout, f"{path}.through[{i}].runout") for i, t in enumerate(centre.through, 1)]
    read = sorted(
        ((by, given.measured, where) for by, given, where in known if given is not None and given.measured),
        key=lambda one: -one[1],
    )
    if len(read) < 2:
        return None
    (first, large, _), (second, small, where) = read[:2]
    lengths = [r for r in results if r.stack.unit == "um" and r.margin_share is not None]
    for result in sorted(lengths, key=lambda r: r.margin_share or 0.0):
        mine = next((p for p in result.figure.pushes() if where in p.cause.paths and p.cause.bound > 0.0), None)
        if mine is not None and mine.up > mine.known:
            scale = (
                (mine.up - mine.known) / mine.cause.bound / 2.0
            )  # per mm of the dial, which shows twice the eccentricity
            return Chain(path, centre.on, (first, large), (second, small), result.stack, 2.0 * small * scale)
    return None


def chain_saves(chain: Chain) -> float:
    """What turning the two devices against each other takes off the worst case [mm]. Source: opposite.chain."""
    return chain.saves


def chain_says(floor: Floor, chain: Chain) -> str | None:
    """Which device against which, what the dial then shows and what it saves; None below WORTH. Source: opposite.chain."""
    if chain.saves < WORTH:
        return None
    (first, large), (second, small) = chain.first, chain.second
    return (
        f"Turn {first} and {second} so that their high spots stand opposite: the dial on {chain.on} then shows "
        f"{floor.fine(large - small)} instead of up to {floor.fine(large + small)}, {floor.fine(chain.saves)} less in "
        f"{_title(chain.stack)}. Read it there and write that as runout, without through ({chain.path}.through)."
    )


OPPOSITE = (
    Quantity(
        "opposite.best",
        "join",
        "",
        0,
        best,
        {"floor": "route.floor", "join": ":", "op": "@op", "results": "known stack.combined"},
        "angle of mounting at which known run-outs stand against each other",
    ),
    Quantity("opposite.saves", "join", "um", 1, saves, {"best": "opposite.best"}, "what that angle saves at the worst"),
    Quantity(
        "opposite.says", "join", "", 0, says, {"floor": "route.floor", "best": "opposite.best"}, "which mark goes where"
    ),
    Quantity(
        "opposite.chain",
        "hold",
        "",
        0,
        chain,
        {"entry": ":", "path": "@path", "results": "known stack.combined"},
        "two measured devices in one chain",
    ),
    Quantity(
        "opposite.chain_saves", "hold", "um", 1, chain_saves, {"chain": "opposite.chain"}, "what turning them saves"
    ),
    Quantity(
        "opposite.chain_says",
        "hold",
        "",
        0,
        chain_says,
        {"floor": "route.floor", "chain": "opposite.chain"},
        "which device is turned against which",
    ),
)
