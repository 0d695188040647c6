"""Trials: the job with an edit, walked again and held against every limit. Lengths mm, angles rad."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import field

from setupcheck.errors import JobError
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Edit, edited
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.gates import worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.requirements import Stack, read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build
from setupcheck.quantities.typed_entry import shown, typed_change
from setupcheck.quantities.typical import typical
from setupcheck.record import record

MOST_WALKS = 300
"""Changed routes that are walked in one run. Source: our screening choice, some seconds on a small computer."""
GOOD_DATUM = ("made", "stock")
Gives = Callable[[str, str], tuple[float, bool] | None]
"""From a device and what is asked of it (`four-jaw`, `runout`) to the value in force [mm, rad or K], and whether that is the
shop's own figure; None where nobody says."""


def _typical(device: str, what: str) -> tuple[float, bool] | None:
    row = typical(device, what)
    return (row.value, False) if row is not None else None


@record(eq=False)
class Tried:
    """A changed job, its route, and every stack there: by its key what it is, its figure, its worst share.

    shares  margin over the scale of the limit, negative outside;  figures  of the same stacks
    """

    loaded: LoadedJob
    floor: Floor
    figures: Mapping[str, Figure]
    stacks: Mapping[str, Stack]
    shares: Mapping[str, float]


@record(eq=False, frozen=False)
class Bench:
    """What trials are held against: the job as it stands.

    again    puts the shop's own record back into a changed job, where one is used
    gives    what a device that the job does not name yet is taken to give, by the shop's own figures where it has any
    results  its stacks by instance;  walks  changed routes walked so far;  met  the most was met
    """

    loaded: LoadedJob
    floor: Floor
    results: Mapping[str, Result]
    again: Callable[[LoadedJob], LoadedJob] = lambda loaded: loaded
    gives: Gives = _typical
    most: int = MOST_WALKS
    walks: int = 0
    met: bool = False
    _typed: dict[tuple[str, str], Change | None] = field(default_factory=dict)
    _walked: dict[tuple[Edit, ...], Floor | None] = field(default_factory=dict)

    def typed(self, path: str, value: float, unit: str) -> Change | None:
        """What to type so that an entry says a value; None where one number cannot say it. Read back once for each value."""
        key = path, shown(value, unit, inches=self.loaded.job.units == "in")
        if key not in self._typed:
            self._typed[key] = typed_change(self.loaded, path, value, unit)
        return self._typed[key]

    def changed(self, edits: Sequence[Edit]) -> Floor | None:
        """The route with an edit; None where the reader or the walk refuses it. Walked once for each edit."""
        key = tuple(edits)
        if key not in self._walked:
            try:
                self._walked[key] = walk(self.again(edited(self.loaded, key)))
            except (JobError, OutOfRange):
                self._walked[key] = None
        return self._walked[key]

    def figure(self, edits: Sequence[Edit], index: int) -> Figure | None:
        """One requirement of the changed job; None where it cannot be told."""
        floor = self.changed(edits)
        return _figure(floor, index)[1] if floor is not None else None

    def tried(self, edits: Sequence[Edit]) -> Tried | None:
        """The changed job; None where it cannot be, where a datum is worse found, or a stack can no longer be told.

        None as well when the most walks were made, which `met` then says.
        """
        if self.walks >= self.most:
            self.met = True
            return None
        self.walks += 1
        floor = self.changed(edits)
        if floor is None or not _stands(self.floor, floor):
            return None
        figures, stacks, shares = {}, {}, {}
        for key, result in self.results.items():
            if result.margin is None:
                continue
            stack, figure = _figure(floor, result.stack.index)
            if stack is None or figure is None:
                return None
            figures[key], stacks[key] = figure, stack
            shares[key] = share_of(figure, result)
        return Tried(floor.loaded, floor, figures, stacks, shares)


def share_of(figure: Figure, result: Result) -> float:
    """Margin of a figure against the limits of a requirement, over their scale; negative outside. Source: arithmetic."""
    stack = result.stack
    return -worst_excess(figure, stack.low, stack.high) / (result.scale or 1.0)


def _figure(floor: Floor, index: int) -> tuple[Stack | None, Figure | None]:
    try:
        stack = read_stack(floor, index)
        made = build(floor, stack)
    except (JobError, OutOfRange):
        return None, None
    return (stack, made.figure) if not isinstance(made, Open) else (stack, None)


def _stands(before: Floor, after: Floor) -> bool:
    """Whether every hold finds its datum, as well as it did before."""
    for where, datum in after.datums.items():
        old = before.datums.get(where)
        if datum.state not in GOOD_DATUM and (old is None or old.state != datum.state):
            return False
    return True
