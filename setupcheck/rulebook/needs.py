"""What the rule engine needs from outside: a book of numbers, its instances, and facts. It knows no job file.

The shapes are protocols, so a test can hand in a book of a dozen lines and the engine never learns where numbers
come from.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Collection, Mapping, Sequence
from numbers import Real
from typing import Protocol, TypeGuard, TypeVar

from setupcheck.record import record

BY_INSTANCE = "stack"
"""Unit of a quantity whose unit belongs to the instance: one stack counts in um, the next in arcsec."""

KINDS = ("job", "place", "surface", "setup", "hold", "cut", "cutter", "join", "stack")
"""Kinds of instance that a caution may be set off by."""

NAME_FACT = "instance.name"
SURFACE_FACT = "instance.surface"
"""Two facts that messages need: how the instance is called, and the surface it is about. Without an answer the key
of the instance stands in."""


class Scope(Protocol):
    """One thing of the job that owns numbers: a hold, a cut, a stack, the job itself."""

    @property
    def kind(self) -> str: ...  # "hold", "stack", "job"
    @property
    def key(self) -> str: ...  # "30/centre"; empty for the job itself
    @property
    def path(self) -> str: ...  # where the planner finds it: "setups.30.hold.centre"
    @property
    def op(self) -> int | None: ...  # number of the setup it belongs to
    @property
    def line(self) -> int: ...  # line of the job file, 0 when it has none


class Known(Protocol):
    """A number or a word that is there, and the typical values it rests on."""

    @property
    def value(self) -> object: ...
    @property
    def rests_on(self) -> Collection[str]: ...


class Open(Protocol):
    """The thing is there, its number is not: job paths to fill, or a reason."""

    @property
    def missing(self) -> Sequence[str]: ...
    @property
    def because(self) -> str: ...


class Quantity(Protocol):
    """A named number: what kind of instance has it, and how it is shown."""

    @property
    def name(self) -> str: ...
    @property
    def per(self) -> str: ...
    @property
    def unit(self) -> str: ...  # display unit, "" for counts and words, BY_INSTANCE where each has its own
    @property
    def digits(self) -> int: ...


S = TypeVar("S", bound=Scope)


class Book(Protocol[S]):
    """All numbers of one job. Values are in base units (mm, rad, degC, N, MPa, s), shares are fractions."""

    @property
    def quantities(self) -> Mapping[str, Quantity]: ...
    def instances(self, kind: str, /) -> Sequence[S]: ...
    def get(self, name: str, at: S, /) -> Known | Open | None: ...
    def unit(self, name: str, at: S, /) -> str: ...
    def digits(self, name: str, at: S, /) -> int: ...


@record
class Unknown:
    """A fact that the job could state but does not; `path` is the key to fill.

    of     what is stated there and does not tell the fact, as a material with a name that is not in the list
    never  values that it cannot have, whatever is filled in
    """

    path: str
    of: str = ""
    never: tuple[str, ...] = ()

    @property
    def doubt(self) -> str:
        """What a caution says of it."""
        return f"not known of {self.of}: {self.path}" if self.of else f"not stated: {self.path}"


Fact = str | int | float | bool | Unknown | None
"""None: this kind of thing has no such fact, so a rule that asks for it does not apply."""

Facts = Callable[[S, str], Fact]
"""facts(scope, name): the answer for one instance, looked up outward by whoever supplies it."""


@record
class Found:
    """A value ready to judge, number or word."""

    value: float | str
    rests_on: tuple[str, ...]


@record
class Missing:
    """Why there is nothing to judge."""

    missing: tuple[str, ...]
    because: str = ""


def read(book: Book[S], name: str, at: S) -> Found | Missing | None:
    """Take a quantity from the book; a number that is not finite is absence, not a value.

    Returns None when the job has no such thing.
    Raises: TypeError for anything but a number or a word, which is a fault of the book.
    """
    got = book.get(name, at)
    if got is None:
        return None
    if _is_open(got):
        return Missing(tuple(got.missing), got.because)
    if not _is_known(got):
        raise TypeError(f"{name} at {at.key!r} is neither known nor open: {got!r}")
    value = got.value
    if isinstance(value, str):
        return Found(value, tuple(sorted(got.rests_on)) if got.rests_on else ())
    if isinstance(value, Real) and not isinstance(value, bool):
        number = float(value)
        if not math.isfinite(number):
            return Missing((), f"{name} has no finite value")
        return Found(number, tuple(sorted(got.rests_on)) if got.rests_on else ())
    raise TypeError(f"{name} at {at.key!r} is neither a number nor a word: {value!r}")


def identity(at: Scope) -> str:
    """How a finding and a waiver name the instance: its path in the job, else its key, else its kind."""
    return at.path or at.key or at.kind


def _is_open(got: Known | Open) -> TypeGuard[Open]:
    return hasattr(got, "missing")


def _is_known(got: Known | Open) -> TypeGuard[Known]:
    return hasattr(got, "value")
