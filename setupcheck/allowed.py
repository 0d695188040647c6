"""What a value may be so that no rule says worse of it: each value tried on the job itself. Base units: mm, rad, degC, s.

A requirement's own gates are worked out from its figure (`quantities.gates`). What the other rules look at, a heat, a size of
a joint, an angle as set, is found here by typing values in: rules are steps, so an end is a place where a verdict turns.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.flow import Review, prepare
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Cut
from setupcheck.jobfile.touched import Touched
from setupcheck.jobfile.worm import OverBalls
from setupcheck.quantities.book import Open, OutOfRange, Scope
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.facts import UnknownFact, facts_of
from setupcheck.quantities.gates import worst_excess
from setupcheck.quantities.joint_shape import drawn_diameter
from setupcheck.quantities.sized import limits_of
from setupcheck.quantities.stacks import build
from setupcheck.quantities.trial import with_entry
from setupcheck.quantities.wheel_over_balls import over_planned
from setupcheck.record import record
from setupcheck.rulebook import VERDICTS, Fact, Unknown, Verdict, evaluate

STRIDES = (0.25, 0.5, 1.0, 2.0, 4.0, 8.0, 16.0, 32.0)
"""How far from its plan a value is tried, in what the plan allows of it. Source: our screening choice."""
FAR = STRIDES[-1]
"""Where it is seen whether anything hears of the value at all."""
SECANTS, BEYOND = 8, 1.02
"""Steps towards a place that does where the plan does not, and how much further each goes. Source: our choice."""
STRAIGHT = 3
"""How often a straight margin is tried before halves alone. Source: our choice."""
USUAL_BOUND, USUAL_ANGLE, USUAL_HEAT = 0.010, math.radians(0.05), 5.0
"""The first stride where the plan names no bound [mm, rad, K]. Source: our screening choice."""
USUAL_SHARE = 0.1
"""The first stride of a time, as a share of it. Source: our screening choice."""
FINEST = {"size": 5e-5, "error": 5e-5, "most": 5e-5, "angle": 5e-6, "heat": 0.2, "time": 0.1}
"""How close an end is found [mm, rad, degC, s]: finer than the box is filled in. Source: our choice."""


@record
class Entry:
    """A value that somebody types in: its path, of what kind it is, where it is planned, and the first stride from there.

    kind   size, error (about its plan), most (a bound, never below 0), angle, heat or time
    with_  the job with another value there;  least  it is never below
    """

    path: str
    kind: str
    planned: float
    stride: float
    with_: Callable[[float], LoadedJob]
    least: float = -math.inf


@record
class Allowed:
    """The range of one entry in which no rule says worse than at its plan, nor fails.

    low, high        infinite where no rule sets that end within the strides; both NaN where no value tried will do
    by_low, by_high  ids of the rules that set them;  planned  as the file has it;  kind  as of the entry
    heard            whether any rule's number moves with it at all
    """

    path: str
    kind: str
    planned: float
    low: float
    high: float
    by_low: tuple[str, ...] = ()
    by_high: tuple[str, ...] = ()
    heard: bool = True

    @property
    def lost(self) -> bool:
        return math.isnan(self.low)

    @property
    def free(self) -> bool:
        """No end of it is near."""
        return math.isinf(self.low) and math.isinf(self.high)


@record
class Word:
    """What one rule says of one place, or a requirement at its worst: a verdict, what it rests on, and how far it is inside."""

    verdict: Verdict
    value: object
    margin: float | None = None


Said = Mapping[tuple[str, str], Word]
STACK = "stack"
"""Stands for the rule where a requirement itself speaks; its key is that of the stack."""
KEEPS_TO_PLAN = "HOLD-007"
"""A reading above its plan is to be trued again. Where a requirement hears of it, the range says how far it may go even so."""
OF_THE_EXACT_GAP, LIMITED_BY_IT = ("contact.", "insert."), ("tilt.",)
"""Quantities that rest on the exact gap of worm and wheel, or are held against it, where the job asks for it: it takes a second
for each value, so their rules are not asked; `setupcheck vary` tells what they say."""


def entry_at(loaded: LoadedJob, path: str) -> Entry | None:
    """The value at a path of the job file; None where it is none that can be tried."""
    node = node_at(loaded, path)
    if isinstance(node, Dimension):
        return _size(loaded, path, node)
    if isinstance(node, Deviation):
        return _error(loaded, path, node)
    parent, _, name = path.rpartition(".")
    if isinstance(node, tuple) and len(node) == 2 and name == "clearance":
        least, most = float(node[0]), float(node[1])
        stride = most - least or USUAL_BOUND
        return Entry(
            path, "most", most, stride, lambda value: with_entry(loaded, (parent,), clearance=(least, value)), least
        )
    if not isinstance(node, float | int) or isinstance(node, bool):
        return None
    value = float(node)

    def with_(other: float) -> LoadedJob:
        return with_entry(loaded, (parent,), **{name: other})

    if name == "tilt":
        return Entry(path, "angle", value, USUAL_ANGLE, with_)
    if name in ("hub", "shaft"):
        return Entry(path, "heat", value, USUAL_HEAT, with_)
    if name == "carry":
        return Entry(path, "time", value, max(USUAL_SHARE * value, 0.5), with_, 0.0)
    return Entry(path, "most", value, value or USUAL_BOUND, with_, 0.0)


def touched_at(found: Review, path: str) -> Entry | None:
    """The diameter that a depth is counted from; None where nobody draws it."""
    node = node_at(found.loaded, path)
    cut = node_at(found.loaded, path.rpartition(".")[0])
    if not isinstance(node, Touched) or not isinstance(cut, Cut):
        return None
    op = int(path.split(".")[1])
    drawn = drawn_diameter(found.floor, found.floor.part_of[op], cut)
    if not isinstance(drawn, float):
        return None
    known = node.uncertainty or 0.0
    return Entry(
        path,
        "size",
        drawn,
        node.at_most or USUAL_BOUND,
        lambda value: with_entry(found.loaded, (path,), measured=value, uncertainty=known),
    )


def over_balls_at(found: Review, path: str) -> Entry | None:
    """The size over balls of the finished wheel, about what insert and depth make; None where no ball or insert is known."""
    mesh, pair = found.loaded.job.mesh, drive(found.floor)
    if mesh is None or mesh.ball_used is None or not isinstance(pair, Drive):
        return None
    planned = over_planned(found.floor, mesh, pair)
    if not isinstance(planned, float):
        return None
    known = mesh.over_balls.uncertainty if mesh.over_balls is not None else None

    def with_(value: float) -> LoadedJob:
        read = OverBalls.model_construct(measured=value, uncertainty=known or 0.0, ball=mesh.ball_used)
        return with_entry(found.loaded, ("mesh",), over_balls=read)

    return Entry(path, "size", planned, USUAL_BOUND, with_)


def _size(loaded: LoadedJob, path: str, node: Dimension) -> Entry:
    """A size, tried as measured with the uncertainty it states, about the middle of its limits."""
    limits = limits_of(node)
    planned, half = ((limits[0] + limits[1]) / 2.0, (limits[1] - limits[0]) / 2.0) if limits else (node.value, 0.0)
    known = node.uncertainty or 0.0
    return Entry(
        path,
        "size",
        planned,
        half or known or USUAL_BOUND,
        lambda value: with_entry(loaded, (path,), measured=value, uncertainty=known),
    )


def _error(loaded: LoadedJob, path: str, node: Deviation) -> Entry:
    """An error about its plan; a run-out is never below 0."""
    signed = not path.endswith(("runout", "fit_error"))
    unknown = node.uncertainty is None and node.standard_uncertainty is None
    keys: dict[str, object] = {"uncertainty": 0.0} if unknown else {}
    return Entry(
        path,
        "error" if signed else "most",
        0.0,
        node.at_most or USUAL_BOUND,
        lambda value: with_entry(loaded, (path,), measured=value, **keys),
        -math.inf if signed else 0.0,
    )


def allowed(found: Review, entry: Entry) -> Allowed:
    """Search outwards from the plan, then by halves. Source: every changed job, judged again."""
    trial = _Trial(found, entry)
    far = [trial.at(entry.planned + way * FAR * entry.stride) for way in (0.0, -1.0, 1.0)]
    moved = [
        key for key in dict.fromkeys(key for said in far for key in said) if len({said.get(key) for said in far}) > 1
    ]
    if any(rule == STACK for rule, _ in moved):
        moved = [key for key in moved if key[0] != KEEPS_TO_PLAN]
    free = Allowed(entry.path, entry.kind, entry.planned, -math.inf, math.inf, heard=bool(moved))
    start = far[0]
    failing = [key for key in moved if _rank(start, key) < RANK["warn"]]
    turning = [
        key for key in moved if len({said[key].verdict if key in said else None for said in far}) > 1 or key in failing
    ]
    if not turning:
        return free
    lost = [_name(key) for key in failing if not _curable(far, key)]
    if lost:
        return replace(free, low=math.nan, high=math.nan, by_low=tuple(lost))
    trial.narrow(turning)
    least = {key: max(_rank(start, key), RANK["warn"]) for key in turning}

    def bad(value: float) -> tuple[str, ...]:
        """What says worse of this value than it may."""
        said = trial.at(value)
        return tuple(dict.fromkeys(_name(key) for key in turning if _rank(said, key) < least[key]))

    inside = next((value for value in (*_outwards(entry), *trial.towards(failing)) if not bad(value)), None)
    if inside is None:
        return replace(free, low=math.nan, high=math.nan, by_low=bad(entry.planned))

    def turns(good: float, there: float) -> float | None:
        """About where the first that is bad would turn, were its margin straight."""
        for key in turning:
            if _rank(trial.at(there), key) < least[key]:
                ends = [said[key].margin if key in (said := trial.at(value)) else None for value in (good, there)]
                if ends[0] is not None and ends[1] is not None and ends[0] > 0.0 > ends[1]:
                    return good + (there - good) * ends[0] / (ends[0] - ends[1])
        return None

    low, by_low = _end(bad, turns, inside, entry, -1.0)
    high, by_high = _end(bad, turns, inside, entry, 1.0)
    return replace(free, low=low, high=high, by_low=by_low, by_high=by_high)


def _curable(far: Sequence[Said], key: tuple[str, str]) -> bool:
    """Whether what fails as planned might not between the far ends: a concave margin lies below its chords drawn on."""
    if any(_rank(said, key) >= RANK["warn"] for said in far):
        return True
    margins = [said[key].margin if key in said else None for said in far]
    at, low, high = margins
    if at is None or low is None or high is None:
        return False
    return max(at, low, high, 2.0 * at - low, 2.0 * at - high) > 0.0


def _outwards(entry: Entry) -> Iterator[float]:
    """The plan, then what lies about it, nearest first."""
    yield entry.planned
    for stride in STRIDES:
        for way in (-1.0, 1.0):
            yield max(entry.planned + way * stride * entry.stride, entry.least)


def _end(
    bad: Callable[[float], tuple[str, ...]],
    turns: Callable[[float, float], float | None],
    inside: float,
    entry: Entry,
    way: float,
) -> tuple[float, tuple[str, ...]]:
    """The last value that way of which nothing says worse, and what does so beyond it."""
    good = inside
    if inside == entry.planned and not bad(inside + way * FAR * entry.stride):
        return way * math.inf, ()
    for stride in STRIDES:
        there = inside + way * stride * entry.stride
        if there < entry.least:
            break
        if by := bad(there):
            return _closed_in(bad, turns, good, there, by, FINEST[entry.kind])
        good = there
    return way * math.inf, ()


def _closed_in(
    bad: Callable[[float], tuple[str, ...]],
    turns: Callable[[float, float], float | None],
    good: float,
    there: float,
    by: tuple[str, ...],
    close: float,
) -> tuple[float, tuple[str, ...]]:
    """Both sides of a turn drawn together: at first about where a straight margin would turn, then by halves."""
    straight = STRAIGHT
    while abs(there - good) > close:
        tried = [(good + there) / 2.0]
        if straight and (guess := turns(good, there)) is not None:
            inwards = math.copysign(0.4 * close, good - there)
            tried = [guess, guess + inwards, guess - inwards, *tried]
        straight -= straight > 0
        for value in tried:
            if not min(good, there) < value < max(good, there) or abs(there - good) <= close:
                continue
            if said := bad(value):
                there, by = value, said
            else:
                good = value
    return good, by


RANK = {verdict: rank for rank, verdict in enumerate(VERDICTS)}
"""Worse verdicts have lower numbers."""


def _rank(said: Said, key: tuple[str, str]) -> int:
    """A rule that has nothing to say of a place is no worse than one that passes it."""
    return RANK[said[key].verdict if key in said else "pass"]


def _name(key: tuple[str, str]) -> str:
    """The id of a rule, or the key of a requirement."""
    return key[1] if key[0] == STACK else key[0]


class _Trial:
    """The job with one value changed, judged by those rules and requirements that can hear of it."""

    def __init__(self, found: Review, entry: Entry) -> None:
        self.found, self.entry = found, entry
        exact = found.loaded.job.mesh is not None and found.loaded.job.mesh.contact == "exact"
        slow = (*OF_THE_EXACT_GAP, *(() if ".head." in entry.path else LIMITED_BY_IT)) if exact else ()
        rules = tuple(r for r in found.rulebook.rules if not r.quantity.startswith(("stack.", *slow)))
        self.rules = replace(found.rulebook, rules=rules, cautions=())
        self.stacks = {
            key: r.stack
            for key, r in found.results.items()
            if r.margin is not None and not (exact and r.stack.require.what.startswith("contact-"))
        }
        self._said: dict[float, Said] = {}

    def narrow(self, keys: Iterable[tuple[str, str]]) -> None:
        """From now on only these are asked."""
        keys = list(keys)
        ids = {rule for rule, _ in keys}
        self.rules = replace(self.rules, rules=tuple(rule for rule in self.rules.rules if rule.id in ids))
        self.stacks = {key: self.stacks[key] for rule, key in keys if rule == STACK}

    def at(self, value: float) -> Said:
        value = max(value, self.entry.least)
        if value not in self._said:
            self._said[value] = self._judged(self.entry.with_(value))
        return self._said[value]

    def towards(self, failing: Sequence[tuple[str, str]]) -> Iterator[float]:
        """Values at which the first that fails as planned might not: steps of the secant on its margin, a little beyond."""
        before, value = self.entry.planned + self.entry.stride, self.entry.planned
        for _ in range(SECANTS if failing else 0):
            ends = [
                said[failing[0]].margin if failing[0] in (said := self.at(one)) else None for one in (before, value)
            ]
            if ends[0] is None or ends[1] is None or ends[0] == ends[1]:
                return
            step = (before - value) * ends[1] / (ends[0] - ends[1])
            before, value = value, value - BEYOND * step
            yield max(value, self.entry.least)

    def _judged(self, loaded: LoadedJob) -> Said:
        """What is said of a changed job; where its route cannot be walked, every requirement is open."""
        try:
            floor, book = prepare(loaded)
        except (JobError, OutOfRange, ValueError):
            return {(STACK, key): Word("open", None) for key in self.stacks}

        def facts(scope: Scope, name: str) -> Fact:
            fact = facts_of(floor, scope, name)
            return Unknown(fact.path, fact.of, fact.never) if isinstance(fact, UnknownFact) else fact

        judged = evaluate(self.rules, book, facts, house=self.found.house, on=self.found.on)
        said = {(f.rule, f.key): Word(f.verdict, (f.value, f.limit), f.margin) for f in judged.findings}
        for key, stack in self.stacks.items():
            made = build(floor, stack)
            excess = math.nan if isinstance(made, Open) else worst_excess(made.figure, stack.low, stack.high)
            verdict: Verdict = "open" if math.isnan(excess) else "fail" if excess > 0.0 else "pass"
            said[STACK, key] = Word(verdict, None) if math.isnan(excess) else Word(verdict, round(excess, 9), -excess)
        return said
