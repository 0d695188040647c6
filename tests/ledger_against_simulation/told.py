"""Figures of the package where every error has one exact value: two ways, its own sampling and plain arithmetic. mm, rad."""

from __future__ import annotations

import re

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.route import Pattern, Scatter

from .as_job import Truth


class Told(Draws):
    """One trial in which each cause takes its known value, or the true one."""

    def __init__(self, truth: Truth) -> None:
        super().__init__(trials=1)
        self.truth = truth

    def cause(self, cause: Cause) -> NDArray[np.complex128]:
        return np.array([value_of(cause, self.truth)])

    def scatter(self, scatter: Scatter, pattern: Pattern, *, outward: bool = False) -> NDArray[np.float64]:
        arm = pattern.radius if scatter.along == "angle" else 1.0
        values = self.truth.at_places(scatter.cause.paths, scatter.cause.key)
        if values is None:
            raise LookupError(f"nobody told the values of '{scatter.cause.key}'")
        return arm * np.atleast_2d(values)


def value_of(cause: Cause, truth: Truth) -> complex:
    """X of a cause: the true one, the size of the vector under it, or its known value if nothing is left open around it."""
    found = truth.value(cause.paths, cause.key)
    places = truth.at_places(cause.paths, cause.key)
    place = re.search(r", place (\d+)$", cause.key)
    if places is not None and place is not None:
        found = complex(places[int(place[1]) - 1])
    if found is not None:
        return found
    if cause.law == "high-point":
        assert cause.of is not None
        return complex(abs(value(cause.of, truth)))
    if cause.bound > 0.0:
        raise LookupError(f"nobody told the value of '{cause.key}' ({cause.law}, bound {cause.bound})")
    return cause.mean


def value(account: Account, truth: Truth) -> complex:
    """constant + sum (a X + b conj X)."""
    total = account.constant
    for cause, (a, b) in account.terms.items():
        x = value_of(cause, truth)
        total += a * x + b * x.conjugate()
    return total
