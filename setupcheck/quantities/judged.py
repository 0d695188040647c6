"""Figures of stacks and of stock, combined and set against their limits. Base units mm, rad; shares are fractions."""

from __future__ import annotations

from dataclasses import replace

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.combine import Combined, Drawn, Ends, combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.relations import Built
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.scopes import CutEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build, stock_left
from setupcheck.record import record

THINNEST_CUT = 0.02
"""Radial stock a turning tool still cuts rather than rubs [mm]. Source: our screening choice; say `finishing_cut` at the cut."""


@record
class Result:
    """One stack, combined: what rules, gates and remedies look at.

    >>> from setupcheck import Result, example, review
    >>> one = review(example("rotator-worm-wheel")).results["mid-plane.wheel-teeth.spindle-bearings"]
    >>> isinstance(one, Result), one.stack.require.what, round(one.margin_share, 2)
    (True, 'mid-plane', 0.08)
    >>> one.combined.worst.high + one.margin <= one.stack.high + 1e-12  # mm, as the figure is
    True
    """

    stack: Stack
    combined: Combined
    figure: Figure

    @property
    def margin(self) -> float | None:
        """Distance of the worst case from the nearer limit, negative outside [base unit]; None without a limit."""
        c, s = self.combined, self.stack
        ends = [s.high - c.worst.high] if s.high is not None else []
        ends += [c.worst.low - s.low] if s.low is not None else []
        return min(ends, default=None)

    @property
    def scale(self) -> float:
        """What a margin is compared with: the limit, or half the span between two limits; 0 without one [base unit]."""
        s = self.stack
        if s.low is not None and s.high is not None:
            return (s.high - s.low) / 2.0
        return abs(s.high if s.high is not None else s.low or 0.0)

    @property
    def margin_share(self) -> float | None:
        """Margin over the limit; over half the span where there are two limits."""
        return self.margin / self.scale if self.margin is not None and self.scale > 0.0 else None


def floor(floor: Floor) -> Floor:
    """The walked route."""
    return floor


def draws() -> Draws:
    """Random values of all causes, one stream per cause. Source: JCGM 101:2008."""
    return Draws()


def requirements(floor: Floor) -> float:
    """Number of requirements. Source: our screening choice (a plan without an aim cannot pass)."""
    return float(len(floor.loaded.job.require))


def _known(built: Built | Open, loaded: LoadedJob) -> Known | Open:
    """A figure with the typical values, and the limits of the shop's record, that the causes behind it were made with."""
    if isinstance(built, Open):
        return built
    causes = [push.cause for push in built.figure.pushes()]
    first = [c for one in causes for c in (one.of.origins() if one.of else (one,))]
    rests_on = frozenset(c.rests_on for c in first) - {""}
    if loaded.own:
        rests_on |= loaded.owned(*(path for c in first for path in c.paths))
    return Known(built, rests_on)


def built(floor: Floor, stack: Stack) -> Known | Open:
    """The figure a requirement asks for, from the accounts of both surfaces; open with what is missing.

    relation of G about R = account of G - account of R at the same height.  Source: derived here (design of the ledger).
    """
    return _known(build(floor, stack), floor.loaded)


def combined(built: Built, stack: Stack, floor: Floor, draws: Draws) -> Result:
    """Worst case |sum of known vectors| + sum |coefficient| bound; rss; likely value and chance by Monte Carlo.

    Source: worst case and rss common practice; Monte Carlo JCGM 101:2008.
    """
    return combined_beside(built, stack, floor, draws, None)


def combined_beside(
    built: Built, stack: Stack, floor: Floor, draws: Draws, alike: tuple[Draws, Figure] | None
) -> Result:
    """The same beside a figure that is alike but for some causes: what was drawn for that one is not drawn again."""
    job = floor.loaded.job
    found = combine(built.figure, draws, low=stack.low, high=stack.high, confidence=job.confidence, alike=alike)
    return Result(stack, _not_negative(found) if stack.require.what == "torque" else found, built.figure)


def _not_negative(found: Combined) -> Combined:
    """A joint with play holds nothing, and not less than that, though its figure is straight in the interference."""

    def cut(ends: Ends) -> Ends:
        return Ends(max(ends.low, 0.0), max(ends.high, 0.0))

    def drawn() -> Drawn:
        return replace(found.drawn(), likely=cut(found.likely))

    return replace(found, worst=cut(found.worst), rss=cut(found.rss), drawn=drawn)


def worst(result: Result) -> float | None:
    """|vector sum of known means| + sum of |coefficient| times bound, upper end. Source: arithmetic stacking, common practice."""
    return result.combined.worst.high if result.stack.high is not None else None


def limit(stack: Stack) -> float | None:
    """Upper limit of the requirement. Source: the job file."""
    return stack.high


def lowest(result: Result) -> float | None:
    """Lower end of the worst case. Source: arithmetic stacking, common practice."""
    return result.combined.worst.low if result.stack.low is not None else None


def low_limit(stack: Stack, result: Result | None) -> float | None:
    """Lower limit of the requirement; None where the upper one already says that nothing can be told. Source: the job file."""
    return stack.low if result is not None or stack.high is None else None


def rss(result: Result) -> float:
    """Root of the summed squares of the same pushes. Source: common practice; a plain rms for eccentricities, never judged."""
    c = result.combined
    return c.rss.low if c.end == "low" else c.rss.high


def likely(result: Result) -> float:
    """Monte Carlo value that is not passed at the job's confidence. Source: JCGM 101:2008."""
    c = result.combined
    return c.likely.low if c.end == "low" else c.likely.high


def chance(result: Result) -> float | None:
    """Probability of meeting the limits. Source: JCGM 101:2008; sampling error sqrt(p (1 - p) / n)."""
    return result.combined.chance


def confidence(floor: Floor) -> float:
    """Confidence the job asks for. Source: the job file; 95 % where it says nothing (our screening choice)."""
    return floor.loaded.job.confidence


def margin_share(result: Result) -> float | None:
    """Margin of the worst case over the limit (half the span between two limits). Source: arithmetic."""
    return result.margin_share


def second_order(built: Built, stack: Stack) -> float | None:
    """L t^2 / 2 over the limit: what a first-order treatment leaves out. Source: cosine series, derived here."""
    scale = (stack.high - stack.low) if stack.high is not None and stack.low is not None else stack.high or stack.low
    if not scale or stack.unit in ("arcsec",):
        return None
    return built.second_order / scale


def stock_built(floor: Floor, key: str) -> Known | Open | None:
    """Stock a cut meets: half the difference of diameters (or the axial distance of faces) less the offset of old and new.

    leave/2 - e - |t| lever.  Source: geometry, derived here.
    """
    return _known(stock_left(floor, key), floor.loaded) if key in floor.stock else None


def least_stock(built: Built, entry: CutEntry) -> float:
    """Worst-case stock at the thinnest place, form error of the old surface taken off. Source: geometry, derived here."""
    return built.figure.base() - sum(p.down for p in built.figure.pushes()) - (entry.cut.form or 0.0)


def finishing_cut(entry: CutEntry) -> float:
    """Thinnest cut the tool still takes: as stated, else a screening value. Source: the job file or our screening choice."""
    return entry.cut.finishing_cut if entry.cut.finishing_cut is not None else THINNEST_CUT
