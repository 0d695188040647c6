"""What a planner means by a quantity: its name, a requirement by number, by figure, or by the name the report gives it."""

from __future__ import annotations

import re
from collections.abc import Iterator

from setupcheck.errors import SetupcheckError
from setupcheck.notation import nearest
from setupcheck.quantities.book import Book, Quantity, Scope
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.formulas import FORMULAS
from setupcheck.report.wording import title_of

_NUMBERED = re.compile(r"require\[(\d+)\]")


def find(book: Book, asked: str) -> list[tuple[Quantity, Scope]]:
    """The quantities with their instances that `name[@instance]` or the name of a requirement means.

    A requirement is named by `require[6]`, its figure (`mid-plane`), its instance (`run-out.hub.bearings`) or its title,
    and stands for its worst case.
    Raises: SetupcheckError with the nearest names.
    """
    stacks = _stacks(book, asked)
    if stacks:
        return [(quantity, scope) for scope in stacks for quantity in _worst(book, scope)]
    name, _, instance = asked.partition("@")
    quantity = book.quantities.get(name)
    if quantity is None:
        raise SetupcheckError(f"there is no quantity or requirement '{asked}'. {_offer(book, asked, name)}")
    scopes = book.instances(quantity.per)
    if not instance:
        return [(quantity, s) for s in scopes]
    found = [s for s in scopes if instance in (s.key, s.path)] or [s for s in scopes if s.key.startswith(instance)]
    if not found and quantity.per == "stack":
        found = _stacks(book, instance)
    if not found:
        keys = [s.key for s in scopes]
        near = nearest(instance, keys)
        offer = f"Did you mean {name}@{near}?" if near else f"It has: {', '.join(keys) or 'none in this job'}"
        raise SetupcheckError(f"{name} has no instance '{instance}'. {offer}")
    return [(quantity, s) for s in found]


def _stacks(book: Book, asked: str) -> list[Scope]:
    """The requirements a text names; several where it is a figure that is required more than once.

    Raises: SetupcheckError for a number that the job does not have.
    """
    scopes = book.instances("stack")
    if numbered := _NUMBERED.fullmatch(asked):
        number = int(numbered[1])
        if not 1 <= number <= len(scopes):
            has = f"The job has require[1] to require[{len(scopes)}]" if scopes else "The job requires nothing"
            raise SetupcheckError(f"there is no {asked}. {has}")
        return [scopes[number - 1]]
    one = [s for s in scopes if asked in (s.key, s.path, title_of(s))]
    return one or [s for s in scopes if asked == stack_of(s).require.what]


def _worst(book: Book, scope: Scope) -> Iterator[Quantity]:
    """The ends of the worst case that have a limit; the combined figure's upper end where it has none that is known."""
    stack = stack_of(scope)
    if stack.high is not None or stack.low is None:
        yield book.quantities["stack.worst"]
    if stack.low is not None:
        yield book.quantities["stack.lowest"]


def _offer(book: Book, asked: str, name: str) -> str:
    scopes = book.instances("stack")
    whole = [*(s.key for s in scopes), *(title_of(s) for s in scopes), *(stack_of(s).require.what for s in scopes)]
    if asked in FORMULAS:
        has = ", ".join(dict.fromkeys(stack_of(s).require.what for s in scopes)) or "nothing"
        return f"The job does not require it. It requires: {has}"
    groups = list(dict.fromkeys(quantity.partition(".")[0] for quantity in sorted(book.quantities)))
    group = name.rstrip(".")
    if group in groups:
        return f"Of {group} there are {', '.join(q for q in sorted(book.quantities) if q.startswith(f'{group}.'))}"
    near = nearest(name, list(book.quantities)) or nearest(asked, whole)
    if near is not None:
        return f"Did you mean {near}?"
    has = f"require[1] to require[{len(scopes)}], and numbers" if scopes else "numbers"
    return f"Known are {has} of {', '.join(groups)}; write one of these words, as in working JOB divide, to see its numbers"
