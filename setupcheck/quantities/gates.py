"""Gates and remedies: the dial reading to accept at each hold, and the smallest change that brings a stack inside. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, alternatives
from setupcheck.quantities.book import Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import HoldEntry

LEAST_KEPT = 0.2
"""Share of a bound that better work leaves when one change is not enough. Source: our screening choice."""

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


@dataclass(frozen=True, slots=True)
class Change:
    """One entry of the job file and the value that would do.

    unit "um" or "arcsec"; values in base units
    """

    cause: Cause
    path: str
    now: float
    needed: float
    unit: str


def stated(loaded: LoadedJob, path: str) -> tuple[float, str] | None:
    """(value in base unit, display unit) of the entry a cause rests on; None where it is not one number."""
    node: object = loaded.job
    for step in loaded.loc(path):
        if isinstance(node, dict):
            node = node.get(step)
        elif isinstance(node, tuple) and isinstance(step, int):
            node = node[step] if step < len(node) else None
        else:
            node = getattr(node, {"from": "low", "to": "high"}.get(str(step), str(step)), None)
    if isinstance(node, Deviation):
        value = node.measured if node.measured is not None else node.at_most
        return (value, "um") if value is not None else None
    if isinstance(node, Dimension):
        return ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0, "um"
    if isinstance(node, tuple) and len(node) == 2:
        return float(node[1]), "um"
    if isinstance(node, float):
        angular = any(word in path for word in (".divide.", ".tilt", "shaft_angle"))
        return node, "arcsec" if angular else "um"
    return None


def remedy(loaded: LoadedJob, result: Result) -> list[Change]:
    """The smallest change that brings a stack inside its limit: the biggest cause cut back, then the next, until it fits.

    Empty where the stack is inside, or where its causes cannot be cut back far enough.
    """
    changes: list[Change] = []
    margin = result.margin
    if margin is None or margin >= 0.0:
        return []
    over = -margin
    for share in result.combined.shares:
        path = share.cause.paths[0] if share.cause.paths else ""
        found = stated(loaded, path) if path else None
        if found is None or share.worst <= 0.0:
            continue
        now, unit = found
        keep = 1.0 - over / share.worst
        if keep <= LEAST_KEPT:  # this one alone will not do: cut it back as far as care goes, and look at the next
            keep = LEAST_KEPT if over > share.worst else max(keep, 0.0)
        changes.append(Change(share.cause, path, now, now * keep, unit))
        over -= share.worst * (1.0 - keep)
        if over <= 1e-12:
            return changes
    return []
