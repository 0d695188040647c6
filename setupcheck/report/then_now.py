"""Then and now: each requirement that a measured value reaches, as planned and as it stands; what to measure next."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.book import Known, Scope
from setupcheck.quantities.judged import Result
from setupcheck.record import record
from setupcheck.report.causes import cause_in_words
from setupcheck.report.wording import clean, finer, in_unit, title_of, unit_of, wrap

if TYPE_CHECKING:
    from setupcheck.quantities.then_now import Next, Plan

LINES_SHOWN = 4
"""Requirements told one by one on each side without --all; the others in one line. Source: our screening choice."""


@record(eq=False)
class Moved:
    """One requirement then and now. `change` of its margin [base unit], None where it is open now or has no limit."""

    scope: Scope
    then: Result
    now: Result | None
    change: float | None

    @property
    def weight(self) -> float:
        """Change over the limit, so that micrometres and seconds of arc stand in one order."""
        return abs(self.change or 0.0) / (self.then.scale or 1.0)


def then_of(found: Review, scope: Scope) -> Result | None:
    """A requirement as planned, where a measured value reaches it."""
    answer = found.book.get("then.combined", scope)
    return answer.value if isinstance(answer, Known) and isinstance(answer.value, Result) else None


def then_now(found: Review, everything: bool = False) -> Iterator[str]:
    """The block of the report; nothing where no measured value has a plan beside it."""
    plan = _plan(found)
    if plan is None:
        return
    yield "THEN AND NOW, worst as planned and as measured so far; both stay in the file"
    moved = [m for scope in found.book.instances("stack") if (m := _moved(found, scope)) is not None]
    moved.sort(key=lambda m: -m.weight)
    lost = [m for m in moved if m.change is not None and _digits(found, m, m.change) < 0.0]
    grown = [m for m in moved if m.change is not None and _digits(found, m, m.change) > 0.0]
    still = [m for m in moved if m not in lost and m not in grown]
    for head, those in (("shrank", lost), ("grew", grown)):
        yield from _side(found, head, those, None if everything else LINES_SHOWN)
    for one in still:
        if one.now is None:
            yield from wrap(
                f"{title_of(one.scope)}: {_worst(found, one, one.then)} then, open now", first="  ", rest="      "
            )
    same = [title_of(m.scope) for m in still if m.now is not None]
    if same:
        yield from wrap(f"margin as it was: {'; '.join(same)}", first="  ", rest="      ")
    if not moved:
        yield from wrap("no requirement hears of what was measured", first="  ", rest="      ")
    if plan.in_both:
        alone = ", ".join(clean(name) for _, name in plan.in_both)
        yield from wrap(f"measured with no plan beside it, so known in both: {alone}", first="  ", rest="      ")
    yield from _next(found)


def _plan(found: Review) -> Plan | None:
    answer = found.book.get("then.plan", found.book.instances("job")[0])
    return answer.value if isinstance(answer, Known) else None  # type: ignore[return-value]


def _moved(found: Review, scope: Scope) -> Moved | None:
    then = then_of(found, scope)
    if then is None:
        return None
    now = found.results.get(scope.key)
    change = (
        now.margin - then.margin if now is not None and now.margin is not None and then.margin is not None else None
    )
    return Moved(scope, then, now, change)


def _digits(found: Review, one: Moved, value: float) -> float:
    """A change as it is printed: what rounds to nothing is none."""
    unit, digits = finer(unit_of(found.book, one.scope)[0], inches=found.book.inches)
    return float(in_unit(value, unit, digits).replace("%", ""))


def _side(found: Review, head: str, those: Sequence[Moved], most: int | None) -> Iterator[str]:
    for one in those[:most]:
        unit, digits = unit_of(found.book, one.scope)
        fine, more = finer(unit, inches=found.book.inches)
        assert one.now is not None and one.change is not None
        yield from wrap(
            f"{title_of(one.scope)} {_worst(found, one, one.then)} then, {_worst(found, one, one.now)} now; margin {head} by "
            f"{show(abs(one.change), fine, more)} to {show(one.now.margin or 0.0, fine, more)}; likely "
            f"{_likely(one.then, unit, digits)} then, {_likely(one.now, unit, digits)} now",
            first="  ",
            rest="      ",
        )
    rest = those[len(those) if most is None else most :]
    if rest:
        told = []
        for one in rest:
            fine, more = finer(unit_of(found.book, one.scope)[0], inches=found.book.inches)
            told.append(f"{title_of(one.scope)} {show(abs(one.change or 0.0), fine, more)}")
        yield from wrap(f"margin {head} less: {'; '.join(told)}", first="  ", rest="      ")


def _worst(found: Review, one: Moved, result: Result) -> str:
    """The end of the worst case that its limit looks at; both where there are two limits."""
    unit, digits = unit_of(found.book, one.scope)
    worst, stack = result.combined.worst, result.stack
    if stack.low is not None and stack.high is not None:
        return f"{in_unit(worst.low, unit, digits)} to {show(worst.high, unit, digits)}"
    return show(worst.low if stack.low is not None else worst.high, unit, digits)


def _likely(result: Result, unit: str, digits: int) -> str:
    c, stack = result.combined, result.stack
    if stack.low is not None and stack.high is not None:
        return f"{in_unit(c.likely.low, unit, digits)} to {show(c.likely.high, unit, digits)}"
    return show(c.likely.low if c.end == "low" else c.likely.high, unit, digits)


def _next(found: Review) -> Iterator[str]:
    answer = found.book.get("then.next", found.book.instances("job")[0])
    ones: tuple[Next, ...] = answer.value if isinstance(answer, Known) else ()  # type: ignore[assignment]
    titles = {id(scope.node): title_of(scope) for scope in found.book.instances("stack")}
    told = []
    for one in ones:
        unit, digits = finer(one.stack.unit, inches=found.book.inches)
        what = titles.get(id(one.stack), one.stack.name)
        told.append(f"{cause_in_words(one.cause.key)}, up to {show(one.size, unit, digits)} of {what}")
    if told:
        yield from wrap(f"not measured yet, where it pays most: {'; '.join(told)}", first="  ", rest="      ")
