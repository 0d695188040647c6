"""Limits: what a requirement asks at one instance, after the book's own quantities and the house have been asked."""

from __future__ import annotations

from setupcheck.record import record
from setupcheck.rulebook.needs import Book, Missing, S, read
from setupcheck.rulebook.records import Limit, Number, Requirement


@record
class LimitValue:
    """A limit in base units, and the typical values it rests on."""

    value: float
    rests_on: tuple[str, ...] = ()


@record
class Limits:
    """Lower and upper limit of one instance, None where there is none."""

    low: float | None
    high: float | None
    rests_on: tuple[str, ...] = ()


def limit_of(limit: Limit, book: Book[S], at: S) -> LimitValue | Missing | None:
    """The limit at an instance: a number as it stands, or a quantity looked up from there outward, times its factor.

    None: the job has no such quantity, so there is nothing to hold the value against.
    """
    if isinstance(limit, Number):
        return LimitValue(limit.value)
    got = read(book, limit.quantity, at)
    if got is None or isinstance(got, Missing):
        return got
    if isinstance(got.value, str):
        raise TypeError(f"{limit.quantity} at {at.key!r} is a word, a limit has to be a number")
    return LimitValue(got.value * limit.times, got.rests_on)


def limits_of(require: Requirement, book: Book[S], at: S) -> Limits | Missing | None:
    """Both limits of a requirement at an instance; the first one that is missing or that the job lacks decides."""
    values: list[float | None] = []
    rests_on: set[str] = set()
    for limit in (require.low, require.high):
        if limit is None:
            values.append(None)
            continue
        got = limit_of(limit, book, at)
        if got is None or isinstance(got, Missing):
            return got
        values.append(got.value)
        rests_on.update(got.rests_on)
    return Limits(values[0], values[1], tuple(sorted(rests_on)))
