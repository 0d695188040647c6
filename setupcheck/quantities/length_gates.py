"""Lengths to accept: stops, dials, depths, spacers and touched diameters, each with the range that still meets all. mm."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import replace
from functools import partial

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Deviation, Dimension, Distance, Relation
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Clock, Cut, MidPlane, Spacer, Stop
from setupcheck.jobfile.touched import Touched
from setupcheck.jobfile.travel import Travel
from setupcheck.jobfile.types import size_shown
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.book import OutOfRange
from setupcheck.quantities.convex import convex_span
from setupcheck.quantities.drive import middle
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.finished import op_of
from setupcheck.quantities.gates import NEAR, Behind, Limit, stacks_behind, with_cause, worst_excess
from setupcheck.quantities.joint_shape import touched_diameter
from setupcheck.quantities.judged import Result
from setupcheck.quantities.typical import typical_length
from setupcheck.record import record

FARTHEST = 50.0
"""A length may be out by so much and no requirement minds: it is not limited [mm]. Source: our screening choice."""
STRIDES = (0.02, 0.08, 0.32)
"""How far from the drawing a touched diameter is tried, either way [mm]. Source: our screening choice."""
SAME = 1e-8
"""What the sum of a worst case may be off by rounding [mm]. Source: our choice."""
MOST_STEPS = 60
"""Of a search by halves. Source: our choice."""

_ERROR = re.compile(r"\.(error|depth_error|off_centre|beside|nearer)$")
_SIZE = re.compile(
    r"\.spacers\[\d+\]\.length$|^parts\..*\.given\[\d+\]\.length$|^place\.worm_axis\.length$"
    r"|^cutters\..*\.width$|^worm\.(thread_thickness|over_wires)$|^mesh\.centre_distance$"
)
"""Sizes whose measured value moves a figure as their error does. Source: the ledger (`size_error` in quantities)."""
_OF_THE_PAIR = {
    "worm.thread_thickness": "thickness of the worm's thread",
    "worm.over_wires": "worm over wires",
    "mesh.centre_distance": "centre distance",
}


@record
class LengthGate:
    """What the measured value of a length entry may be so that every requirement is still met at its worst.

    path, key   the entry in the job file;  what `vary --set` takes for its measured value
    is_size     the range is of the size itself, else of an error about the plan, positive as the job file counts it
    low, high   of the range [mm], infinite where nothing limits it;  both NaN where no value will do
    planned     bound of an error, or middle of a size, as planned [mm];  measured  as measured, None where it is not
    by_low, by_high  instance of the stack that sets each end
    bound       what the plan allows either way [mm];  words  what it is, as a machinist says it
    limits      what each requirement allows by itself;  indicator  one division of what reads it [mm], 0 where none is named
    """

    path: str
    op: int | None
    is_size: bool
    low: float
    high: float
    planned: float
    measured: float | None
    by_low: str
    by_high: str
    bound: float
    words: str
    limits: tuple[Limit, ...]
    indicator: float = 0.0

    @property
    def key(self) -> str:
        return f"{self.path}.measured"

    @property
    def about(self) -> float:
        """What the range lies about: the planned size, or no error."""
        return self.planned if self.is_size else 0.0

    @property
    def lost(self) -> bool:
        """No value of this entry alone brings every requirement inside."""
        return math.isnan(self.low)


def length_gates(loaded: LoadedJob, results: Mapping[str, Result]) -> list[LengthGate]:
    """One for each length entry that a requirement hears of, in the order of the route.

    The cause of the entry is given its measured value, with the uncertainty that the entry states, and the figure asked.
    """
    behind = stacks_behind(list(results.items()))
    paths = dict.fromkeys(name for one in behind for name in one.stated if _ERROR.search(name) or _SIZE.search(name))
    found = (_gate(loaded, path, behind) for path in sorted(paths, key=loaded.line))
    return [gate for gate in found if gate is not None]


def _gate(loaded: LoadedJob, path: str, behind: Sequence[Behind]) -> LengthGate | None:
    node = node_at(loaded, path)
    if isinstance(node, Deviation):
        row = typical_length(node.device) if node.device and node.at_most is None else None
        planned, zero, u = node.at_most if node.at_most is not None else row.value if row else 0.0, 0.0, node.u
    elif isinstance(node, Dimension) and not (".hold." in path and node.nominal is None):
        planned, zero = (
            middle(_as_planned(node)),
            middle(node),
        )  # at a stop only what is off its nominal size counts
        u = (node.uncertainty or 0.0) / 2.0 if node.measured is not None else 0.0
    else:
        return None
    limits = []
    for one in behind:
        causes = one.causes(path)
        if causes:
            low, high = _span(one, causes, zero=zero, u=u, now=node.measured)
            limits.append(Limit(one.key, low, high))
    if not limits:
        return None
    if path.startswith("cutters."):  # the gap follows the width over a hollow flank, not quite in proportion
        limits = [_polished(loaded, path, one, limit) for one in behind for limit in limits if limit.by == one.key]
    running = {one.key: one for one in behind if isinstance(one.result.figure, AsItRuns)}
    limits = [_as_it_runs(loaded, path, running[x.by], x, limits, zero) if x.by in running else x for x in limits]
    return _together(loaded, path, limits, node, planned)


def _as_planned(node: Dimension) -> Dimension:
    """The size as it was planned: without its measured value, where it has a nominal one."""
    return node.model_copy(update={"measured": None, "uncertainty": None}) if node.nominal is not None else node


def _together(
    loaded: LoadedJob, path: str, limits: Sequence[Limit], node: Deviation | Dimension | Touched, planned: float
) -> LengthGate:
    low, high = max(limits, key=lambda one: one.low), min(limits, key=lambda one: one.high)
    lost = low.low > high.high or any(one.low > one.high for one in limits)
    return LengthGate(
        path,
        op_of(path),
        not isinstance(node, Deviation),
        math.nan if lost else low.low,
        math.nan if lost else high.high,
        planned,
        node.measured,
        next(one.by for one in limits if one.low > one.high) if lost and low.low <= high.high else low.by,
        high.by,
        _bound(node, planned),
        _words(loaded, path),
        tuple(sorted(limits, key=lambda one: one.high - one.low)),
        indicator=getattr(node, "indicator", None) or 0.0,
    )


def _bound(node: Deviation | Dimension | Touched, planned: float) -> float:
    """What the plan allows either way [mm]; 0 where it says nothing of that."""
    if isinstance(node, Deviation):
        return planned
    if isinstance(node, Touched):
        return (node.at_most or node.uncertainty or 0.0) / 2.0
    return ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0 or node.uncertainty or 0.0


def _words(loaded: LoadedJob, path: str) -> str:
    """`op 40, stop on seat`, `op 70, shim`, `worm axis from spindle.shoulder`."""
    op, parent = op_of(path), node_at(loaded, path.rpartition(".")[0])
    where = f"op {op}, " if op is not None else ""
    name = path.split(".")[3] if ".cut." in path else ""
    if isinstance(parent, Spacer):
        return f"{where}{parent.name}{' at the stop' if '.hold.' in path else ''}"
    if isinstance(parent, Stop):
        return f"{where}{'seating of' if '.join.' in path else 'stop on'} {parent.on.rpartition('.')[2]}"
    if isinstance(parent, Clock):
        return f"{where}clocking on {parent.on}"
    if isinstance(parent, Relation):
        return f"{path.split('.')[1]}.{parent.of.rpartition('.')[2]} from {parent.from_} as bought"
    if isinstance(parent, Distance):
        return f"worm axis from {parent.from_}"
    if isinstance(parent, MidPlane):
        return f"{where}mid-plane found"
    if path.endswith(".depth_from") and isinstance(parent, Cut) and parent.depth_from is not None:
        return f"{where}{parent.depth_from.surface} as touched"
    if isinstance(parent, Travel):
        side = "sideways" if path.endswith(".beside") else "towards the cutter"
        return f"{where}work off the cutter's travel {side} over {size_shown(parent.over, loaded.job.units)}"
    if path in _OF_THE_PAIR:
        return _OF_THE_PAIR[path]
    if path.startswith("cutters."):
        return f"width of the insert of {path.split('.')[1]}"
    if path.endswith(".off_centre"):
        return f"{where}cutter of {name} beside the axis"
    return f"{where}{'depth' if path.endswith('.depth_error') else 'length'} of {name}"


def _span(one: Behind, causes: Sequence[Cause], *, zero: float, u: float, now: float | None) -> tuple[float, float]:
    """(least, largest) measured value at which one requirement is met; (inf, -inf) where none will do."""
    figure, stack = one.result.figure, one.result.stack

    def excess(value: float) -> float:
        other = figure
        for cause in causes:
            read = replace(cause, law="gauss", high=0.0, spread=u, mean=complex(value - zero), mode="measured")
            other = with_cause(other, cause, read)
        return worst_excess(other, stack.low, stack.high)

    return _about(excess, zero if now is None else now)


def _as_it_runs(loaded: LoadedJob, path: str, one: Behind, limit: Limit, limits: Sequence[Limit], zero: float) -> Limit:
    """The limit of an index figure that hears of the cutter's setting, tried on the route walked again where it may count.

    What a setting adds grows faster than it does, so the figure as it stands is too kind far off the plan: an end near the
    tightest of all is tried there, and drawn in where it does not hold.
    """
    from setupcheck.quantities.trial import figure_with

    if limit.low > limit.high:
        return limit
    stack, start = one.result.stack, min(max(zero, limit.low), limit.high)

    def excess(value: float) -> float:
        try:
            return worst_excess(figure_with(loaded, stack, (path,), measured=value), stack.low, stack.high)
        except (OutOfRange, ValueError):
            return math.inf

    def held(end: float, tightest: float) -> float:
        if abs(end - zero) >= NEAR * abs(tightest - zero) or excess(tightest) <= 0.0:
            return end
        return _halved(excess, start, tightest)

    low, high = max(x.low for x in limits), min(x.high for x in limits)
    return replace(limit, low=held(limit.low, low), high=held(limit.high, high))


def _polished(loaded: LoadedJob, path: str, one: Behind, limit: Limit) -> Limit:
    """Both ends of a limit by one step of the secant on the route walked again, taken where it does not leave the limit."""
    from setupcheck.quantities.trial import figure_with

    def excess(value: float) -> float:
        try:
            return worst_excess(figure_with(loaded, one.result.stack, (path,), measured=value), stack.low, stack.high)
        except (OutOfRange, ValueError):
            return math.inf

    def better(end: float, inwards: float) -> float:
        if not math.isfinite(end):
            return end
        there, within = excess(end), excess(end + inwards)
        slope = (within - there) / inwards
        guess = end - there / slope if math.isfinite(slope) and slope else end
        return guess if excess(guess) <= SAME else end

    stack, step = one.result.stack, (limit.high - limit.low) / 8.0
    if not 0.0 < step < math.inf:
        return limit
    return replace(limit, low=better(limit.low, step), high=better(limit.high, -step))


def _about(excess: Callable[[float], float], start: float) -> tuple[float, float]:
    """Where a convex function is not above zero, infinite where it never is so far out; (inf, -inf) where it is nowhere."""
    low, high = convex_span(excess, start, least=start - FARTHEST, most=start + FARTHEST)
    return (-math.inf if low <= start - FARTHEST else low), (math.inf if high >= start + FARTHEST else high)


def _halved(excess: Callable[[float], float], inside: float, outside: float) -> float:
    for _ in range(MOST_STEPS):
        if abs(outside - inside) < 1e-6:
            break
        half = (inside + outside) / 2.0
        inside, outside = (half, outside) if excess(half) <= 0.0 else (inside, half)
    return inside


def touched_gates(loaded: LoadedJob, results: Mapping[str, Result], floor: object) -> Iterator[LengthGate]:
    """The diameter that a depth is counted from, as measured: each value tried on the job itself, which takes its time.

    A requirement that is missed as it stands, or hears nothing of it, is left out.
    """
    from setupcheck.quantities.shop import Floor
    from setupcheck.quantities.stacks import build
    from setupcheck.quantities.trial import with_entry

    assert isinstance(floor, Floor)
    for setup in loaded.job.setups:
        for name, cut in setup.cut.items():
            if cut.depth_from is None:
                continue
            path = f"setups.{setup.op}.cut.{name}.depth_from"
            now = touched_diameter(floor, loaded.ref(name, setup.part).part, cut)
            if not isinstance(now, float):
                continue

            def excess(value: float, result: Result, path: str = path) -> float:
                other = replace(floor, loaded=with_entry(loaded, (path,), measured=value))
                try:
                    made = build(other, result.stack)
                    figure = getattr(made, "figure", None)
                except (JobError, OutOfRange, ValueError):
                    return math.inf
                return worst_excess(figure, result.stack.low, result.stack.high) if figure is not None else math.inf

            limits = []
            for key, result in results.items():
                here = excess(now, result)
                if here > 0.0 or abs(excess(now + 0.01, result) - here) < 1e-9 > abs(excess(now - 0.01, result) - here):
                    continue
                ends = [_walked_out(partial(excess, result=result), now, way) for way in (-1.0, 1.0)]
                limits.append(Limit(key, ends[0], ends[1]))
            limits = [one for one in limits if one.high - one.low < math.inf or abs(one.low) < math.inf]
            if limits:
                yield _together(loaded, path, limits, cut.depth_from, now)


def _walked_out(excess: Callable[[float], float], inside: float, way: float) -> float:
    """The first place outward where a requirement is no longer met, in STRIDES, then halved [mm]."""
    good = inside
    for step in STRIDES:
        if excess(inside + way * step) > 0.0:
            return _halved(excess, good, inside + way * step)
        good = inside + way * step
    return way * math.inf
