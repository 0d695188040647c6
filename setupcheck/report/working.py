"""The working of one quantity: formula, inputs with their lines in the job file, source and evidence."""

from __future__ import annotations

import inspect
from collections.abc import Iterator

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.notation import nearest, show
from setupcheck.quantities.book import Answer, Book, Known, Open, Quantity, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.wording import WIDTH, clean, finer, wrap

LAWS = {
    "disc": "anywhere within its bound",
    "ring": "this size, direction unknown",
    "blur": "measured, direction known",
    "clearance-disc": "anywhere in the play",
    "clearance-ring": "against the wall of the play",
    "rectangle": "within ± on two axes",
    "length": "anywhere within ±",
    "gauss": "Gaussian, cut at 3 standard deviations",
    "one-sided": "one way only",
    "high-point": "follows the lean",
    "undetermined": "not known",
}


RECORD = "(no single number)"


def find(book: Book, asked: str) -> tuple[Quantity, list[Scope]]:
    """The quantity and the instances that `name[@instance]` means.

    Raises: SetupcheckError with the nearest names.
    """
    name, _, instance = asked.partition("@")
    quantity = book.quantities.get(name)
    if quantity is None:
        near = nearest(name, list(book.quantities))
        offer = f"Did you mean {near}?" if near else "Known: " + ", ".join(sorted(book.quantities))
        raise SetupcheckError(f"there is no quantity '{name}'. {offer}")
    scopes = book.instances(quantity.per)
    found = [s for s in scopes if s.key == instance or s.path == instance] if instance else list(scopes)
    if not found and instance:
        found = [s for s in scopes if s.key.startswith(instance)]
    if not found:
        keys = [s.key for s in scopes]
        near = nearest(instance, keys)
        offer = f"Did you mean {name}@{near}?" if near else f"It has: {', '.join(keys) or 'none in this job'}"
        raise SetupcheckError(f"{name} has no instance '{instance}'. {offer}")
    return quantity, found


def as_working(loaded: LoadedJob, book: Book, asked: str) -> str:
    """The working of every instance asked for, as text of 80 columns.

    Raises: SetupcheckError for an unknown quantity or instance.
    """
    quantity, scopes = find(book, asked)
    applying = [s for s in scopes if book.get(quantity.name, s) is not None] or scopes[:1]
    lines: list[str] = []
    for scope in applying:
        lines += [*_working(loaded, book, quantity, scope), ""]
    return "\n".join(lines).rstrip() + "\n"


def _answer(book: Book, name: str, scope: Scope, answer: Answer) -> str:
    if answer is None:
        return "does not apply here"
    if isinstance(answer, Open):
        return "cannot tell: " + (answer.because or "fill " + ", ".join(answer.missing))
    if isinstance(answer.value, float | int) and not isinstance(answer.value, bool):
        return show(float(answer.value), book.unit(name, scope) or "1", book.digits(name, scope))
    return clean(str(answer.value)) if isinstance(answer.value, str) else RECORD


def _working(loaded: LoadedJob, book: Book, quantity: Quantity, scope: Scope) -> Iterator[str]:
    answer = book.get(quantity.name, scope)
    where = f"@{scope.key}" if scope.key else ""
    yield from wrap(f"{quantity.name}{where} = {_answer(book, quantity.name, scope, answer)}")
    yield from wrap(
        f"{quantity.says}" + (f"; asked in line {scope.line}" if scope.line > 1 else ""), first="  ", rest="  "
    )
    yield from _formula(quantity.of)
    for argument, name in quantity.inputs.items():
        yield from _input(loaded, book, scope, argument, name)
    if isinstance(answer, Known) and answer.rests_on:
        yield from wrap("rests on typical values: " + ", ".join(sorted(answer.rests_on)), first="  ", rest="    ")
    result = book.get("stack.combined", scope) if scope.kind == "stack" else None
    if isinstance(result, Known) and isinstance(result.value, Result):
        yield from _causes(loaded, book, result.value, scope)


def _formula(of: object) -> Iterator[str]:
    """Formula and source as the function itself states them."""
    text = (inspect.getdoc(of) or "").partition(">>>")[0]
    for paragraph in filter(None, (line.strip() for line in text.splitlines())):
        yield from wrap(paragraph, first="  ", rest="    ")


def _input(loaded: LoadedJob, book: Book, scope: Scope, argument: str, name: str) -> Iterator[str]:
    """One input: its value, and where the job file says it."""
    if name.startswith("@") or name == "route.floor":
        return
    if name.startswith(("each ", "known ")):
        yield from wrap(f"{argument}: {name}", first="    ", rest="      ")
        return
    answer = book.get(name, scope)
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


def _causes(loaded: LoadedJob, book: Book, result: Result, scope: Scope) -> Iterator[str]:
    """Every cause with its bound, what it does to the figure, and the line it was stated in."""
    stack = stack_of(scope)
    yield f"  {stack.require.what}:"
    for line in _formula(type(result.figure)):
        yield f"  {line}"
    unit, digits = finer(stack.unit, inches=book.inches)
    yield "  causes, biggest first:"
    for share in result.combined.shares:
        lines = sorted({loaded.line(path) for path in share.cause.paths})
        stated = f" (line {', '.join(str(n) for n in lines)})" if lines else ""
        yield from wrap(
            f"{share.cause.key}: gives {show(share.worst, unit, digits)}, {share.share * 100:.0f} % of all; "
            f"{_law(share.cause)}, {share.cause.mode}{stated}",
            first="    ",
            rest="      ",
        )
    base = result.combined.base
    if base:
        yield from wrap(f"known part without any error: {show(base, unit, digits)}", first="    ", rest="      ")


def _law(cause: Cause) -> str:
    return LAWS[cause.law] + (
        f", known part {abs(cause.mean) * 1000:.2f} um" if cause.mean and not cause.is_real else ""
    )
