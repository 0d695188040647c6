"""What a dial may show beyond its gate if its high spot lies near a mark: other known run-outs take from it. mm, rad."""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable, Iterator, Mapping
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.figures import Figure
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.entries import deviation
from setupcheck.quantities.gates import Behind, Gate, origins, stacks_behind, worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.mixing import CORNERS, mixer
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.trial import figure_on, floor_with
from setupcheck.record import record

WITHIN = (20.0, 45.0, 80.0)
"""Widths that are looked at, either way of the best direction [deg]. Source: our screening choice."""
APART = 5.0
"""Directions that are tried stand so far apart [deg]. Source: our choice."""
COARSE = 15.0
"""The same in the first round, which finds the best one [deg]. Source: our choice."""
SAME = 1.0 - 1e-4
"""Readings that differ by less are the same. Source: our choice."""
TRIAL = 0.01
"""The reading that the route is walked with [mm]. Source: our choice; everything known goes straight through it."""
LARGEST = 4.0
"""Readings up to so many times the larger of gate and plan are looked at. Source: our screening choice."""
STEPS, ENOUGH = 60, 1e-12
"""Most steps of a search, and where it is close enough [mm, or the figure's unit]. Source: our choice."""
WORTH = 1.02
"""A band that allows less than this beyond the gate is not told. Source: our screening choice."""


@record
class Band:
    """A reading that passes only if its high spot lies within so many degrees of a direction.

    reading  full indicator movement [mm], exact;  within  either way [deg]
    high_at  the direction as `high_at` takes it: a tooth, or an angle from the part's mark
    """

    reading: float
    within: float
    high_at: str


def bands(floor: Floor, results: Mapping[str, Result], gate: Gate) -> tuple[Band, ...]:
    """The widest first, each allowing more than the one before; none where nothing else has a known direction.

    The route is walked with the reading high at three directions, which gives what any other does to every figure. Between
    two directions tried, the smaller reading times the cosine of half their distance holds, as what passes is convex.
    Source: convexity of a norm; derived here.
    """
    if len(gate.paths) != 1 or gate.step not in ("centre", "and_centre", "square") or not gate.reading:
        return ()
    path = gate.paths[0]
    behind = [one for one in stacks_behind(list(results.items())) if one.causes(path)]
    if not any(_known_beside(one, path) for one in behind):
        return ()
    most = LARGEST * max(gate.reading, gate.planned)
    given = deviation(floor.loaded, path)
    most_anywhere = math.inf if gate.high_at else most + (given.u if given is not None else 0.0)
    tight = [one.by for one in gate.limits if one.high < most_anywhere]  # the others hold wherever the high spot lies
    tried = _tried(floor, path, sorted((o for o in behind if o.key in tight), key=lambda o: tight.index(o.key)))
    if tried is None:
        return ()

    def reading_at(angle: float) -> float:
        least = most
        for one in tried:
            least = min(least, _largest(one, angle, least))
        return least

    round_it = {degrees: reading_at(math.radians(degrees)) for degrees in _circle()}
    name, best = _named(floor, path, _middle_of_best(round_it))

    def reading_off(off: float) -> float:
        known = round_it.get((best + off) % 360.0)
        return known if known is not None else reading_at(math.radians(best + off))

    return tuple(_widening(gate, name, reading_off))


def _circle() -> list[float]:
    return [COARSE * n for n in range(round(360.0 / COARSE))]


def _middle_of_best(round_it: Mapping[float, float]) -> float:
    """The direction that allows most; the middle of all that allow the same, on a direction tried [deg]."""
    most = max(round_it.values()) * SAME
    towards = sum(cmath.exp(1j * math.radians(at)) for at, reading in round_it.items() if reading >= most)
    if abs(towards) < 1e-6:
        return max(round_it, key=lambda at: round_it[at])
    return round(math.degrees(cmath.phase(towards)) / APART) * APART % 360.0


def _widening(gate: Gate, name: str, reading_off: Callable[[float], float]) -> Iterator[Band]:
    """The bands round the best direction, the widest first."""
    assert gate.reading is not None
    tried = {off: reading_off(off) for off in _offsets(max(WITHIN))}
    told = gate.reading
    for within in sorted(WITHIN, reverse=True):
        inside = [tried[off] for off in _offsets(within)]
        least = min(inside) * math.cos(math.radians(APART / 2.0))
        if least > told * WORTH:
            told = least
            yield Band(least, within, name)


def _offsets(within: float) -> list[float]:
    steps = round(within / APART)
    return [APART * n for n in range(-steps, steps + 1)]


@record(eq=False)
class _Tried:
    """A figure with any reading typed in, x and y times TRIAL high at 0 and at 90 degrees, and its limits."""

    figure: Callable[[float, float], Figure]
    low: float | None
    high: float | None

    def excess(self, reading: float, angle: float) -> float:
        size = reading / TRIAL
        there = self.figure(size * math.cos(angle), size * math.sin(angle))
        return worst_excess(there, self.low, self.high)


def _known_beside(one: Behind, path: str) -> bool:
    """True where another error with a known direction reaches the same figure."""
    return any(c.mean and not c.is_real and path not in c.paths for c in origins(one.places))


def _tried(floor: Floor, path: str, behind: list[Behind]) -> list[_Tried] | None:
    """The figures with the reading typed in; None where the route does not take a direction there."""
    try:
        floors = [floor_with(floor.loaded, (path,), measured=TRIAL, high_at=words) for words in CORNERS]
        return [_of(one, floors) for one in behind]
    except (JobError, ValueError):
        return None


def _of(one: Behind, floors: list[Floor]) -> _Tried:
    """One requirement on these routes; what a setting adds to an index figure is taken as it stands.

    Raises: JobError, ValueError where it has no figure there.
    """
    stack, now = one.result.stack, one.result.figure
    figures = [figure_on(each, stack) for each in floors]
    if isinstance(now, AsItRuns):
        figures = [replace(each, rises=now.rises) if isinstance(each, AsItRuns) else each for each in figures]
    return _Tried(mixer(figures), stack.low, stack.high)


def _largest(one: _Tried, angle: float, most: float) -> float:
    """Largest reading up to `most`, high at that angle, at which the requirement is met; 0 where none is.

    Regula falsi on a convex function: each chord ends inside.  Source: textbook search.
    """
    above = one.excess(most, angle)
    if above <= 0.0:
        return most
    inside, below, outside = 0.0, one.excess(0.0, angle), most
    if below > 0.0:
        return 0.0
    for step in range(STEPS):
        if below > -ENOUGH or outside - inside < ENOUGH:
            break
        at = inside - below * (outside - inside) / (above - below) if step % 3 < 2 else (inside + outside) / 2.0
        there = one.excess(at, angle)
        if there <= 0.0:
            inside, below = at, there
        else:
            outside, above = at, there
    return inside


def _named(floor: Floor, path: str, degrees: float) -> tuple[str, float]:
    """The nearest tooth, where teeth are cut by then, else the angle: in words, and in degrees from the part's mark."""
    teeth = _teeth(floor.loaded, path)
    if teeth is None:
        whole = round(degrees / APART) * APART % 360.0
        return f"{whole:g} deg", whole
    count, first, second = teeth
    pitch = math.remainder(second - first, 360.0)
    number = round((degrees - first) / pitch) % count
    return f"tooth {number + 1}", first + number * pitch


def _teeth(loaded: LoadedJob, path: str) -> tuple[int, float, float] | None:
    """Count of the teeth that are cut when this hold is set up, with the directions of the first two [deg].

    None where there are none, or two rings.
    """
    counts = {
        surface.count
        for part in loaded.job.parts.values()
        for surface in part.surfaces.values()
        if surface.kind == "teeth" and surface.count > 2
    }
    for count in sorted(counts, reverse=True):
        try:
            at = [_direction(loaded, path, f"tooth {number}") for number in (1, 2, count)]
        except (JobError, LookupError):
            continue
        return count, at[0], at[1]
    return None


def _direction(loaded: LoadedJob, path: str, words: str) -> float:
    """Angle from the part's mark that a direction in words is [deg], as the route takes it.

    Raises: JobError where it names nothing there;  LookupError where the entry leaves no trace.
    """
    means = []
    for one in ("0 deg", "90 deg", words):
        state = floor_with(loaded, (path,), measured=1.0, high_at=one)
        placing = state.placings[int(path.split(".")[1])]
        account = placing.lean if ".square." in path else placing.axis_at(0.0)
        mine = [(a * c.mean + b * c.mean.conjugate()) for c, (a, b) in account.terms.items() if path in c.paths]
        if not mine:
            account = placing.axis_at(1.0)
            mine = [(a * c.mean + b * c.mean.conjugate()) for c, (a, b) in account.terms.items() if path in c.paths]
        means.append(mine[0] if mine else 0j)
    zero, right, there = means
    if not zero:
        raise LookupError(path)
    # there = zero cos + right sin, both of one length and at right angles
    across = (there * zero.conjugate()).real, (there * right.conjugate()).real
    return math.degrees(math.atan2(across[1], across[0]))
