"""Combination: worst case, rss, likely value and chance of one figure, side by side, and who causes it. mm, rad.

Sources: worst case and root-sum-square stacking, common practice; Monte Carlo propagation of distributions, JCGM 101:2008.
The rss of a few eccentricities is a plain rms that is exceeded some 40 % of the time (random walk in the plane), so it is
shown and never judged.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from functools import cache, partial

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Figure, Push
from setupcheck.record import record

Reals = NDArray[np.floating]
Complexes = NDArray[np.complexfloating]


@record
class Ends:
    """A figure's two ends; figures that start at zero have `low` = 0."""

    low: float
    high: float

    def within(self, value: float) -> float:
        """The value, or the end that it passes: draws are rounded to single precision, ends are not."""
        return min(max(value, self.low), self.high)


@record
class Share:
    """One cause's part in a figure: the most it can move it towards the nearer limit, and that as a share of all."""

    cause: Cause
    worst: float
    share: float


@record
class Drawn:
    """What the draws say of a figure, in its base unit; `chance` is None where no limit is stated."""

    likely: Ends
    chance: float | None
    chance_error: float | None


@record(eq=False)
class Combined:
    """One figure, combined. All in the figure's base unit.

    base   the figure with every cause at its known value
    drawn  what the draws say, made when it is first asked for: they take longer than all the rest
    Equal where all figures are, those of the draws too; a copy for another process takes them along.
    """

    worst: Ends
    rss: Ends
    base: float
    shares: tuple[Share, ...]
    end: str
    drawn: Callable[[], Drawn]

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Combined) and self._figures() == other._figures()

    def __hash__(self) -> int:
        return hash((self.worst, self.rss, self.base))

    def __reduce__(self) -> tuple[object, ...]:
        return _at_hand, self._figures()

    def _figures(self) -> tuple[object, ...]:
        return self.worst, self.rss, self.base, self.shares, self.end, self.drawn()

    @property
    def likely(self) -> Ends:
        """Value not passed with the probability asked for."""
        return self.drawn().likely

    @property
    def chance(self) -> float | None:
        """Probability of meeting the limits; None where none is stated."""
        return self.drawn().chance

    @property
    def chance_error(self) -> float | None:
        """Standard sampling error of the chance."""
        return self.drawn().chance_error


def _at_hand(worst: Ends, rss: Ends, base: float, shares: tuple[Share, ...], end: str, drawn: Drawn) -> Combined:
    """A figure whose draws were made in another process."""
    return Combined(worst, rss, base, shares, end, partial(_itself, drawn))


def _itself(drawn: Drawn) -> Drawn:
    return drawn


def combine(
    figure: Figure,
    draws: Draws,
    *,
    low: float | None,
    high: float | None,
    confidence: float,
    alike: tuple[Draws, Figure] | None = None,
) -> Combined:
    """Worst case, rss, likely value and chance of a figure.

    low, high   limits in the figure's unit, either may be None
    alike       draws for the same figure with some causes changed: what they hold by then is not drawn again
    confidence  probability of the likely value, 0 .. 1: the value not passed with that probability; with both limits
                the interval that leaves out equal shares on both sides
    Undetermined causes must have been asked for before (figure.undetermined()).
    Source: JCGM 101:2008 (Monte Carlo), ends of a probabilistically symmetric interval; worst and rss common practice.
    """
    base, pushes = figure.base(), figure.pushes()
    down, up = sum(p.down for p in pushes), sum(p.up for p in pushes)
    worst = Ends(base - down if figure.signed else 0.0, base + up)
    towards_high = _nearer_end(worst, low, high) == "high"
    known = base + sum(p.known for p in pushes)
    above = math.sqrt(sum((p.up - p.known) ** 2 for p in pushes))
    below = math.sqrt(sum((p.down + p.known) ** 2 for p in pushes))
    rss = Ends(0.0, math.hypot(known, above))
    if figure.signed:  # known swings that cancel leave less than the root of their squares
        rss = Ends(max(known - below, worst.low), min(known + above, worst.high))
    total = sum(_towards(p, towards_high) for p in pushes) or 1.0
    shares = sorted(
        (Share(p.cause, _towards(p, towards_high), _towards(p, towards_high) / total) for p in pushes),
        key=lambda s: (-s.worst, s.cause.key),
    )
    drawn = cache(partial(_drawn, figure, draws, worst, low=low, high=high, confidence=confidence, alike=alike))
    return Combined(worst, rss, base, tuple(shares), "high" if towards_high else "low", drawn)


def _drawn(
    figure: Figure,
    draws: Draws,
    worst: Ends,
    *,
    low: float | None,
    high: float | None,
    confidence: float,
    alike: tuple[Draws, Figure] | None,
) -> Drawn:
    if alike is not None:
        draws.take_over(alike[0], figure, alike[1])
    values = np.atleast_2d(figure.sample(draws))  # one row, or the least and the largest of a turn
    least, most = values[0], values[-1]
    beyond = 1.0 - confidence
    if figure.signed and (low is None) == (high is None):
        beyond /= 2.0
    ordered = np.sort(values, axis=1)
    low_end, high_end = _quantile(ordered[0], beyond), _quantile(ordered[-1], 1.0 - beyond)
    likely = Ends(worst.within(low_end) if figure.signed else 0.0, worst.within(high_end))
    return Drawn(likely, *_chance(least, most, worst, low, high))


def _quantile(ordered: Reals, share: float) -> float:
    """Value not passed with this probability, linear between neighbours as numpy.quantile has it, at a tenth of its time."""
    place = share * (len(ordered) - 1)
    below = math.floor(place)
    low, high = float(ordered[below]), float(ordered[min(below + 1, len(ordered) - 1)])
    return low + (high - low) * (place - below)


def _towards(push: Push, high: bool) -> float:
    return push.up if high else push.down


def _nearer_end(worst: Ends, low: float | None, high: float | None) -> str:
    """Which end comes nearer to (or further past) its limit."""
    if low is None or high is None:
        return "low" if high is None and low is not None else "high"
    return "low" if worst.low - low < high - worst.high else "high"


def _chance(
    least: Reals, most: Reals, worst: Ends, low: float | None, high: float | None
) -> tuple[float | None, float | None]:
    """(probability of meeting the limits, its standard sampling error); 1 and 0 where even the worst case meets them."""
    if low is None and high is None:
        return None, None
    if (low is None or worst.low >= low) and (high is None or worst.high <= high):
        return 1.0, 0.0
    met = np.ones(len(least), dtype=bool)
    if low is not None:
        met &= least >= low
    if high is not None:
        met &= most <= high
    p, n = float(met.mean()), len(least)
    return p, math.sqrt(max(p * (1.0 - p), 1.0 / n) / n)
