"""Gates: the dial reading to accept at each hold. Lengths mm, angles rad."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, alternatives
from setupcheck.quantities.book import Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import HoldEntry

STEP = 0.001
"""Gates are rounded down to whole micrometres [mm]. Source: our screening choice."""


@dataclass(frozen=True, slots=True)
class Gate:
    """The largest dial reading a hold may show so that every requirement is still met at its worst.

    reading  full indicator movement [mm], 0 where no reading will do; None where no requirement depends on it
    planned  what the job file plans or has measured [mm];  by  name of the requirement that sets it
    """

    key: str
    op: int
    step: str
    on: str
    reading: float | None
    planned: float
    by: str


def room(figure: Figure, cause: Cause, *, low: float | None, high: float | None) -> float | None:
    """Factor by which one cause may grow (or must shrink) until the figure's worst case meets its limit.

    1 + margin / push, over the places the figure is the worst of.  None where the cause does not reach the figure.
    Source: the worst case is linear in each bound, derived here.
    """
    found: list[float] = []
    for one in alternatives(figure):
        base, pushes = one.base(), one.pushes()
        mine = next((p for p in pushes if p.cause == cause), None)
        if mine is None:
            continue
        if high is not None and mine.up > 0.0:
            found.append(1.0 + (high - base - sum(p.up for p in pushes)) / mine.up)
        if low is not None and mine.down > 0.0:
            found.append(1.0 + (base - sum(p.down for p in pushes) - low) / mine.down)
    return min(found, default=None)


def gates(scopes: Sequence[Scope], results: Sequence[Result]) -> list[Gate]:
    """One gate for each hold entry whose error is a dial reading.

    FIM = (limit - what all others need) / (figure per FIM), the smallest over the requirements.
    """
    found: list[Gate] = []
    for scope in scopes:
        entry = scope.node
        if not isinstance(entry, HoldEntry) or entry.key == "error" or entry.error is None or scope.op is None:
            continue
        given = entry.error
        planned = given.measured if given.measured is not None else given.at_most
        if planned is None or planned == 0.0:
            continue
        path = f"{scope.path}.{entry.key}"
        best: tuple[float, str] | None = None
        for result in results:
            for cause in (s.cause for s in result.combined.shares if path in s.cause.paths):
                grow = room(result.figure, cause, low=result.stack.low, high=result.stack.high)
                if grow is not None and (best is None or grow < best[0]):
                    best = (grow, result.stack.name)
        reading = None
        if best is not None:
            reading = max(0.0, math.floor(best[0] * planned / STEP + 1e-6) * STEP)
        found.append(Gate(scope.key, scope.op, entry.step, entry.entry.on, reading, planned, best[1] if best else ""))
    return found
