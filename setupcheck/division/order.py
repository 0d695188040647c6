"""The order in which the places of a circle are cut. Places are numbered from 1; pure functions of whole numbers."""

from __future__ import annotations

from typing import Literal

Order = Literal["in-turn", "spread"]
FIRST_GROUPS = (3, 4, 5, 2)
"""Places of the first round of a spread order, the first that divides the count (3 where none does). Source: our choice."""


def cutting_order(count: int, how: Order) -> tuple[int, ...]:
    """Numbers of the places, 1 .. count, in the order they are cut; place 1 is always the first.

    in-turn  one after the other round the circle
    spread   first a few places as far apart as can be, then those midway between them, and midway again, until all are
             there; a count that does not halve takes the place before the exact middle
    Raises: ValueError for a count below 1 or another word.
    Source: cutting a master wheel in an order that spreads heat (three places, then the three midway, and so on) is old
    shop practice (J. Rose, Modern Machine-Shop Practice, 19th century, from memory); digits reversed, derived here.

    >>> cutting_order(12, "spread")
    (1, 5, 9, 3, 7, 11, 2, 6, 10, 4, 8, 12)
    >>> cutting_order(8, "spread"), cutting_order(4, "in-turn")
    ((1, 3, 5, 7, 2, 4, 6, 8), (1, 2, 3, 4))
    """
    if count < 1:
        raise ValueError("a circle has at least one place")
    if how == "in-turn":
        return tuple(range(1, count + 1))
    if how != "spread":
        raise ValueError(f"{how!r} is no order of cutting; write in-turn or spread")
    first = next((g for g in FIRST_GROUPS if count % g == 0), 3)
    halvings = 0
    while first << halvings < count:
        halvings += 1
    fine = first << halvings  # at least as many marks as places, so that rounding down meets every place
    marks = (_mark(i, first, halvings) for i in range(fine))
    return tuple(dict.fromkeys(m * count // fine + 1 for m in marks))


def _mark(step: int, first: int, halvings: int) -> int:
    """The mark, 0 .. first 2^halvings - 1, met at `step`: the digits of the step, least first, read as halves of halves."""
    step, group = divmod(step, first)
    mark = group
    for _ in range(halvings):
        step, half = divmod(step, 2)
        mark = 2 * mark + half
    return mark


def ranks(count: int, how: Order) -> tuple[int, ...]:
    """When each place is cut: 0 for the first, count - 1 for the last; place n stands at index n - 1. Source: `cutting_order`.

    >>> ranks(6, "spread")
    (0, 3, 1, 4, 2, 5)
    """
    found = [0] * count
    for rank, number in enumerate(cutting_order(count, how)):
        found[number - 1] = rank
    return tuple(found)
