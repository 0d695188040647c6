"""A figure for any reading with any direction, mixed from three routes walked: everything known goes straight through. mm, rad.

An account is straight in what is known, also where a turn that nobody recorded makes a ring of it, so the accounts of one reading
high at 0, 90 and 180 degrees give those of every other.  Source: linearity of the ledger, derived here.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import fields, replace

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure

CORNERS = ("0 deg", "90 deg", "180 deg")
"""Directions of the three readings, in this order."""


Weights = tuple[float, float, float]
Mix = Callable[[Weights], object]


def mixer(figures: Sequence[Figure]) -> Callable[[float, float], Figure]:
    """The figure for a reading that is x times as high at 0 and y times at 90 degrees, both together, as a function of x, y.

    figures  of the same requirement, for one reading at each of CORNERS; what is alike in all three is taken once
    """
    made = _mix(list(figures))

    def at(x: float, y: float) -> Figure:
        weights = ((1.0 - y + x) / 2.0, y, (1.0 - y - x) / 2.0)
        return figures[0] if made is None else made(weights)  # type: ignore[return-value]

    return at


def _mix(values: list[object]) -> Mix | None:
    """How to mix the three; None where they are alike."""
    first = values[0]
    if isinstance(first, Account):
        return _of_accounts([one for one in values if isinstance(one, Account)])
    if isinstance(first, tuple):
        return _of_tuples([list(each) for each in zip(*values, strict=True)])
    return _of_figures(values) if hasattr(first, "pushes") else None


def _of_figures(values: list[object]) -> Mix | None:
    first = values[0]
    inside = {f.name: _mix([getattr(one, f.name) for one in values]) for f in fields(first)}  # type: ignore[arg-type]
    moving = {name: mix for name, mix in inside.items() if mix is not None}
    if not moving:
        return None
    return lambda w: replace(first, **{name: mix(w) for name, mix in moving.items()})  # type: ignore[type-var]


def _of_tuples(each: list[list[object]]) -> Mix | None:
    mixes = [_mix(values) for values in each]
    if all(mix is None for mix in mixes):
        return None
    return lambda w: tuple(v[0] if mix is None else mix(w) for v, mix in zip(each, mixes, strict=True))


def _of_accounts(accounts: list[Account]) -> Mix | None:
    first, constants = accounts[0], [one.constant for one in accounts]
    held = [{cause: cause for cause in one.terms} for one in accounts]
    still: dict[Cause, tuple[complex, complex]] = {}
    moving: list[tuple[list[Cause], list[tuple[complex, complex]]]] = []
    for cause in dict.fromkeys(cause for one in accounts for cause in one.terms):
        same = [there[cause] for there in held if cause in there]
        terms = [one.terms.get(cause, (0j, 0j)) for one in accounts]
        if all(ab == terms[0] for ab in terms) and _cause_mix(same) is None:
            still[cause] = terms[0]
        else:
            moving.append((same, terms))
    if not moving and all(constant == first.constant for constant in constants):
        return None
    causes = [(same[0], _cause_mix(same), terms) for same, terms in moving]

    def at(w: Weights) -> Account:
        terms = dict(still)
        for cause, mix, abs_ in causes:
            there = cause if mix is None else mix(w)
            assert isinstance(there, Cause)
            terms[there] = (_sum(w, [a for a, _ in abs_]), _sum(w, [b for _, b in abs_]))
        return Account(_sum(w, constants), terms)

    return at


def _cause_mix(same: list[Cause]) -> Mix | None:
    """How to mix what is known of one cause; None where it is alike, or where a route does not hold it."""
    first = same[0]
    if len(same) < len(CORNERS):
        return None
    if first.of is not None:
        below = _of_accounts([one.of for one in same if one.of is not None])
        return None if below is None else lambda w: replace(first, of=below(w))  # type: ignore[arg-type]
    means = [one.mean for one in same]
    return None if all(mean == means[0] for mean in means) else lambda w: replace(first, mean=_sum(w, means))


def _sum(weights: Weights, values: list[complex]) -> complex:
    return sum((w * value for w, value in zip(weights, values, strict=True)), 0j)
