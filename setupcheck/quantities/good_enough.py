"""What is good enough already, and where the next measurement pays most. Lengths mm, angles rad."""

from __future__ import annotations

import math

from setupcheck.jobfile.changing import Change
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.finished import finished
from setupcheck.quantities.gates import origins, reaches, scaled, worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.single_causes import AGREES, Entry, at, entries, stated_share, typed
from setupcheck.quantities.trials import Bench, Tried, share_of
from setupcheck.record import record

ROOM = 2.0
"""Times as large an entry must be able to become to be called good enough. Source: our screening choice."""
PLENTY = 10.0
"""Times as large beyond which it is no longer told how much there is. Source: our screening choice."""
NO_GAIN = 0.01
"""Share of every margin below which indicating finer gains nothing worth it. Source: our screening choice."""
FOUND_AT = 0.5
"""Share of its bound at which a measured cause is taken to be found. Source: our screening choice."""
KNOWN_TO = 0.1
"""Share of its bound to which a measured cause is then known, expanded, k = 2. Source: our screening choice."""
MOST_NEXT = 3
"""Measurements that are named. Source: our screening choice."""
_TO_BE_TRUED = (
    "runout", "face_runout", "x", "y", "clearance", "error", "depth_error", "fit_error", "length", "off_centre", "beside",
    "nearer",
)  # fmt: skip
"""Keys of holds and lengths: what a setter can stop refining."""


@record
class Enough:
    """An entry of a hold or a length that need not be better.

    room   times as large it may become, everything else as it is, until some stack meets its limit; infinite where none
           hears of it
    gain   largest share of a margin that would be won if it were nothing
    by     key of the stack that ends its room
    typed  the entry `ROOM` times as large; empty where one number cannot say it
    """

    entry: Entry
    room: float
    gain: float
    by: str = ""
    typed: tuple[Change, ...] = ()

    @property
    def could_double(self) -> bool:
        return self.room >= ROOM

    @property
    def no_finer(self) -> bool:
        return self.gain < NO_GAIN


def good_enough(bench: Bench) -> tuple[Enough, ...]:
    """Holds and lengths still to come that could be twice as bad, or gain nothing by being better; none while a stack fails.

    Each doubled entry is typed into a copy of the job and every stack walked again.
    Source: the worst case is convex in each bound; the shares are our screening choices.
    """
    if any(result.margin is not None and result.margin < 0.0 for result in bench.results.values()):
        return ()
    found, gone = [], finished(bench.loaded.job)
    for entry in _all_entries(bench):
        if any(cause.op in gone for cause in entry.causes) or not _is_trued(entry):
            continue
        one = _enough(bench, entry)
        if one.could_double or one.no_finer:
            found.append(one)
    return tuple(sorted(found, key=lambda one: (_op(one.entry), one.entry.path)))


def _op(entry: Entry) -> int:
    return entry.causes[0].op or 0


def _is_trued(entry: Entry) -> bool:
    return entry.path.startswith("setups.") and entry.path.rpartition(".")[2].partition("[")[0] in _TO_BE_TRUED


def _all_entries(bench: Bench) -> list[Entry]:
    causes: dict[Cause, None] = {}
    for result in bench.results.values():
        if result.margin is not None:
            causes.update(dict.fromkeys(origins(reaches(result.figure))))
    return [one for one in entries(bench.loaded, tuple(causes)) if isinstance(one, Entry)]


def _enough(bench: Bench, entry: Entry) -> Enough:
    room, gain, by = math.inf, 0.0, ""
    for key, result in bench.results.items():
        if result.margin is None or not set(entry.causes) & set(origins(reaches(result.figure))):
            continue
        mine = _room(entry, result)
        if mine < room:
            room, by = mine, key
        won = -_excess(at(result.figure, entry, 0.0), result) - result.margin
        gain = max(gain, won / result.margin if result.margin > 0.0 else math.inf if won > 0.0 else 0.0)
    edits = typed(bench, entry, ROOM, up=True)
    tried = bench.tried(edits) if edits else None
    if tried is not None and not _as_on_paper(bench, entry, tried, stated_share(bench, entry, edits)):
        return Enough(entry, 1.0, math.inf, by, edits)
    return Enough(entry, room, gain, by, edits)


def _as_on_paper(bench: Bench, entry: Entry, tried: Tried, times: float) -> bool:
    """Whether the doubled entry does, typed in, what its causes say; else nothing is claimed of it."""
    return all(
        abs(tried.shares[key] - share_of(at(result.figure, entry, times), result)) <= AGREES
        for key, result in bench.results.items()
        if key in tried.shares
    )


def _excess(figure: Figure, result: Result) -> float:
    return worst_excess(figure, result.stack.low, result.stack.high)


def _room(entry: Entry, result: Result) -> float:
    """Times as large an entry may become until this stack meets its limit, at most PLENTY, else infinite."""
    inside, outside = 1.0, PLENTY
    if _excess(at(result.figure, entry, PLENTY), result) <= 0.0:
        return math.inf
    for _ in range(24):
        half = (inside + outside) / 2.0
        inside, outside = (half, outside) if _excess(at(result.figure, entry, half), result) <= 0.0 else (inside, half)
    return inside


@record
class Pays:
    """One entry that nobody has measured yet, and what measuring it is likely to give.

    gain     what the stack's margin grows by [base unit of the stack];  share  that over the scale of its limit
    margin   what its margin would then be [base unit]
    """

    entry: Entry
    key: str
    result: Result
    gain: float
    margin: float

    @property
    def share(self) -> float:
        return self.gain / (self.result.scale or 1.0)


def next_measured(bench: Bench, *, of: str | None = None) -> tuple[Pays, ...]:
    """The measurements that would give most to the stack with the least margin, at most MOST_NEXT.

    Each cause is taken to be found at FOUND_AT of its bound and then known to KNOWN_TO of it, so that
    FOUND_AT + 3 KNOWN_TO / 2 of it are left in the worst case, 3.44 for 3 where it has a direction.  Bought parts count.
    Source: truncation as in the ledger; both shares are our screening choices.
    """
    judged = {
        key: r
        for key, r in bench.results.items()
        if r.margin_share is not None and of in (None, f"require[{r.stack.index + 1}]")
    }
    if not judged:
        return ()
    key, result = min(judged.items(), key=lambda one: one[1].margin_share or 0.0)
    now = _excess(result.figure, result)
    found = []
    for entry in entries(bench.loaded, origins(reaches(result.figure))):
        if isinstance(entry, Entry) and all(c.mode in ("planned", "typical") for c in entry.causes):
            figure = result.figure
            for cause in entry.causes:
                figure = scaled(figure, cause, left_of(cause))
            gain = now - _excess(figure, result)
            if gain > 0.0:
                found.append(Pays(entry, key, result, gain, gain - now))
    return tuple(sorted(found, key=lambda one: (-one.gain, one.entry.path))[:MOST_NEXT])


def left_of(cause: Cause) -> float:
    """Share of a planned bound that a measurement leaves in the worst case, as assumed above.

    >>> from setupcheck.ledger.causes import Cause
    >>> round(left_of(Cause("stop", "length", high=0.01)), 3)
    0.65
    """
    return FOUND_AT + KNOWN_TO / 2.0 * (TRUNCATION if cause.is_real else TRUNCATION_2D)
