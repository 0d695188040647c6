"""The working of one quantity: formula, inputs with their lines in the job file, source and evidence."""

from __future__ import annotations

import inspect
import re
from collections.abc import Iterator, Sequence
from typing import Protocol, runtime_checkable

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import Share, combine
from setupcheck.ledger.draws import Draws
from setupcheck.notation import show
from setupcheck.quantities.book import Answer, Book, Known, Open, Quantity, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.relations import Built
from setupcheck.quantities.scopes import stack_of
from setupcheck.quantities.validity import range_in_words
from setupcheck.report.asked import find
from setupcheck.report.causes import cause_in_words
from setupcheck.report.formulas import FORMULAS, OF_A_STACK, formula_of
from setupcheck.report.rests import rests_in_words
from setupcheck.report.wording import WIDTH, clean, finer, title_of, wrap
from setupcheck.report.written import written

LAWS = {
    "disc": "anywhere within its bound",
    "ring": "this size, direction unknown",
    "blur": "direction known",
    "clearance-disc": "anywhere in the play",
    "clearance-ring": "against the wall of the play",
    "rectangle": "within ± on two axes",
    "length": "anywhere within ±",
    "gauss": "Gaussian, cut at 3 standard deviations",
    "one-sided": "one way only",
    "high-point": "one way, follows what is under it",
    "undetermined": "not known",
}

COUNTED = {
    "worm.starts": "starts",
    "mesh.teeth": "teeth",
    "mesh.fewest_teeth": "teeth",
    "divide.count": "places",
    "divide.worm_ratio": "crank turns for one of the spindle",
    "divide.circle": "holes",
    "divide.left_over": "of a hole",
    "divide.positions": "positions",
    "divide.off_position": "of a position",
    "divide.folded_harmonic": "waves round the work",
    "hold.reach": "times the distance of the planes",
    "prove.count": "gaps",
    "prove.gap_out": "by the order of cutting",
    "read.places": "places",
    "read.usual_places": "places",
    "read.tightest": "by the order of cutting",
    "read.high_spot": "by the order of cutting",
    "progress.done": "is the last operation done",
    "hold.tilt_datums": "(1 wanted)",
}
"""What a number without a unit counts."""

RECORD = "(no single number)"
_NAMED = re.compile(r"`([a-z_]+)`")


def as_working(loaded: LoadedJob, book: Book, asked: str) -> str:
    """The working of every instance asked for, as text of 80 columns.

    Raises: SetupcheckError for an unknown quantity or instance.
    """
    found = find(book, asked)
    applying = [(q, s) for q, s in found if book.get(q.name, s) is not None] or found[:1]
    lines: list[str] = []
    for number, (quantity, scope) in enumerate(applying):
        lines += [*_working(loaded, book, quantity, scope)]
        if scope not in [s for _, s in applying[number + 1 :]]:  # both ends of one stack have the same causes
            lines += _made_of(loaded, book, scope)
        lines.append("")
    return "\n".join(lines).rstrip() + "\n"


def _answer(book: Book, name: str, scope: Scope, answer: Answer) -> str:
    if answer is None:
        return "does not apply here"
    if isinstance(answer, Open):
        return "cannot tell: " + (answer.because or "fill " + ", ".join(answer.missing))
    if isinstance(answer.value, float | int) and not isinstance(answer.value, bool):
        number = show(float(answer.value), book.unit(name, scope) or "1", book.digits(name, scope))
        return f"{number} {COUNTED.get(name, '')}".rstrip()
    if isinstance(answer.value, str):
        return clean(answer.value)
    told = [each.told() for each in _parts(answer.value) if isinstance(each, Told)]
    return clean("; ".join(told)) if told else RECORD


@runtime_checkable
class Told(Protocol):
    """A record that says itself what a formula takes from it, in words and with units."""

    def told(self) -> str: ...


BROKEN = 85
"""Characters of a docstring's line from which its end may be that of the page and not of what it says. Source: our choice."""


def _parts(value: object) -> tuple[object, ...]:
    return value if isinstance(value, tuple) else (value,)


def _working(loaded: LoadedJob, book: Book, quantity: Quantity, scope: Scope) -> Iterator[str]:
    answer = book.get(quantity.name, scope)
    where = f"@{scope.key}" if scope.key else ""
    yield from wrap(f"{quantity.name}{where} = {_answer(book, quantity.name, scope, answer)}", rest="  ")
    asked = f"; asked in line {scope.line}" if scope.line > 1 else ""
    says = f"{title_of(scope)}, {quantity.says}" if scope.kind == "stack" else quantity.says
    yield from wrap(f"{says}{asked}", first="  ", rest="  ")
    if quantity.name in OF_A_STACK:
        yield from _formula(OF_A_STACK[quantity.name])
    else:
        yield from _stated(book, quantity.of)
    if quantity.unit:
        what = stack_of(scope).require.what if scope.kind == "stack" else ""
        yield from wrap(range_in_words(quantity.name, what), first="  ", rest="    ")
    for argument, name in quantity.inputs.items():
        yield from _input(loaded, book, scope, argument, name)
    if quantity.name == "stack.chance":
        yield from _strayed(book, scope)
    if isinstance(answer, Known):
        for told in rests_in_words(sorted(answer.rests_on)):
            yield from wrap(told[:1].lower() + told[1:], first="  ", rest="    ")


def _strayed(book: Book, scope: Scope) -> Iterator[str]:
    """How far drawing alone may have moved a chance: its standard error."""
    result, draws = book.get("stack.combined", scope), book.get("route.draws", scope)
    if not (isinstance(result, Known) and isinstance(result.value, Result)):
        return
    if not (isinstance(draws, Known) and isinstance(draws.value, Draws)):
        return
    error = result.value.combined.chance_error
    if error:
        yield from wrap(
            f"of {draws.value.trials} jobs drawn: standard error {error * 100.0:.2f} %, falling with the root of their number",
            first="  ",
            rest="    ",
        )
    elif error is not None:
        yield "  no draw is needed: even the worst case meets the limits"


def _formula(told: tuple[str, str], first: str = "  ") -> Iterator[str]:
    formula, source = told
    yield from wrap(formula + (f". Source: {source}." if source else ""), first=first, rest=f"{first}  ")


def _stated(book: Book, of: object) -> Iterator[str]:
    """Formula and source as the function itself states them; another function it names is told by its quantity."""
    of_function = {getattr(q.of, "__name__", ""): name for name, q in reversed(book.quantities.items())}
    text = re.sub(r"\bNone\b", "no answer", (inspect.getdoc(of) or "").partition(">>>")[0])
    text = _NAMED.sub(lambda found: f"`{of_function.get(found[1], found[1])}`", text)
    for paragraph in _paragraphs(text):
        yield from wrap(paragraph, first="  ", rest="    ")


def _paragraphs(text: str) -> list[str]:
    """The lines of a docstring; one that was broken for its width alone is put together with the next."""
    found: list[str] = []
    broken = False
    for line in filter(None, map(str.strip, text.splitlines())):
        if broken:
            found[-1] += f" {line}"
        else:
            found.append(line)
        broken = len(line) > BROKEN and not line.endswith((".", ":"))
    return found


def _input(loaded: LoadedJob, book: Book, scope: Scope, argument: str, name: str) -> Iterator[str]:
    """One input: its value, and where the job file says it."""
    if name.startswith("@") or name == "route.floor":
        return
    if name.startswith(("each ", "known ")):
        yield from wrap(f"{argument}: {name}", first="    ", rest="      ")
        return
    answer = book.get(name, scope)
    name = name.removeprefix("settled ")
    if name.startswith(":"):
        line = loaded.line(".".join(x for x in (scope.path, name[1:]) if x))
        if line > 1:
            text = clean(loaded.tree.lines[line - 1])
            shown = f"    line {line} | {text}"
            yield shown if len(shown) <= WIDTH else shown[: WIDTH - 2] + " …"
        return
    home = book.home(name, scope)
    shown = _answer(book, name, home if home is not None else scope, answer)
    if shown != RECORD:
        line = home.line if home is not None and home.kind != "job" else 0
        shown += f" (line {line})" if line else ""
        yield from wrap(f"{argument}: {name} = {shown}", first="    ", rest="      ")


def _made_of(loaded: LoadedJob, book: Book, scope: Scope) -> Iterator[str]:
    """The figure behind a stack or behind the stock of a cut: its formula and all its causes."""
    if scope.kind == "stack":
        stack, result = stack_of(scope), book.get("stack.combined", scope)
        if isinstance(result, Known) and isinstance(result.value, Result):
            c = result.value.combined
            yield f"  {stack.require.what}:"
            mesh = loaded.job.mesh
            exact = mesh is not None and mesh.contact is not None
            yield from _formula(formula_of(stack.require.what, exact=exact), "    ")
            yield from _causes(loaded, book, c.shares, c.base, stack.unit)
    elif scope.kind == "cut":
        built, draws = book.get("allow.built", scope), book.get("route.draws", scope)
        if (
            isinstance(built, Known)
            and isinstance(draws, Known)
            and isinstance(built.value, Built)
            and isinstance(draws.value, Draws)
        ):
            found = combine(built.value.figure, draws.value, low=0.0, high=None, confidence=loaded.job.confidence)
            yield from _formula(FORMULAS["allowance"])
            yield from _causes(loaded, book, found.shares, found.base, "mm")


def _causes(loaded: LoadedJob, book: Book, shares: Sequence[Share], base: float, unit: str) -> Iterator[str]:
    """Every cause with what it does to the figure, what is stated of it, and the line where."""
    fine, digits = finer(unit, inches=book.inches)
    none = "it follows from the sizes alone" if base else "both surfaces share all their errors"
    yield "  causes, biggest first:" if shares else f"  no cause reaches it: {none}"
    for share in shares:
        yield from wrap(
            f"{cause_in_words(share.cause.key)}: gives {show(share.worst, fine, digits)}, {share.share * 100:.0f} % of "
            f"all; {LAWS[share.cause.law]}, {share.cause.mode}{_where(loaded, share.cause)}",
            first="    ",
            rest="      ",
        )
    if base:
        whole = ("in", 5) if book.inches else ("mm", 4)
        said = show(base, *whole) if unit in ("mm", "um") and abs(base) > 1.0 else show(base, fine, digits)
        yield from wrap(f"known part without any error: {said}", first="    ", rest="      ")


def _where(loaded: LoadedJob, cause: Cause) -> str:
    """`; 2 um, 8 um (line 94)`: what the job file states of a cause, and where."""
    if not cause.paths:
        return ""
    said = ", ".join(filter(None, (written(loaded, path) for path in cause.paths)))
    lines = ", ".join(str(n) for n in sorted({loaded.line(path) for path in cause.paths}))
    return f"; {said} (line {lines})" if said else f" (line {lines})"
