"""Then and now: the plan as it was, measured values set aside, beside the job with what was measured. Base units mm, rad."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import field, replace

from pydantic import BaseModel

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Cutter, Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Job
from setupcheck.jobfile.touched import Touched
from setupcheck.jobfile.worm import Mesh
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.gates import reaches
from setupcheck.quantities.judged import Result, combined_beside
from setupcheck.quantities.readings import readings
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build
from setupcheck.record import record

MOST_NEXT = 3
"""Causes named as those whose measurement would pay most. Source: our screening choice."""
WORTH_IT = 0.02
"""Share of a limit below which measuring a cause is not worth naming. Source: our screening choice."""
_TAKEN_OUT: Mapping[str, None] = dict.fromkeys(("measured", "uncertainty", "standard_uncertainty", "high_at"))
_OF_THE_WHEEL = ("over_balls", "backlash_read")
"""Keys of the mesh that are read on the cut wheel, and that insert, depth and route plan."""
_SIZE_OUT: Mapping[str, None] = dict.fromkeys(("measured", "uncertainty", "at_temperature"))


@record(eq=False)
class Plan:
    """The job as planned: its route, which values were set aside for it, and which stand in both because no plan does.

    aside  paths of measured values with a plan beside them;  in_both  (path, name) of those without one
    """

    floor: Floor
    aside: tuple[str, ...]
    in_both: tuple[tuple[str, str], ...] = ()
    draws: Draws = field(default_factory=Draws)


def _without(node: object, path: str, aside: list[str]) -> object:
    """A record of the job with every measured value taken out that a plan stands beside; their paths go into `aside`.

    A bound is a plan of an error, a size with its limits one of a size, insert and depth one of the wheel's size over
    balls, the kind of insert one of its profile.  A size without limits plans nothing.
    """
    if isinstance(node, Deviation):
        if node.measured is None or node.at_most is None:
            return node
        aside.append(path)
        return node.model_copy(update=dict(_TAKEN_OUT))
    if isinstance(node, Dimension):
        limited = node.lower is not None or node.upper is not None or node.fit is not None
        if node.measured is None or node.nominal is None or not limited:
            return node
        aside.append(path)
        return node.model_copy(update=dict(_SIZE_OUT))
    if isinstance(node, Touched) and node.measured is not None and node.at_most is not None:
        aside.append(path)
        return node.model_copy(update={"measured": None, "uncertainty": None})
    if isinstance(node, BaseModel):
        return _record_without(node, path, aside)
    if isinstance(node, Mapping):
        entries = {name: _without(entry, f"{path}.{name}".lstrip("."), aside) for name, entry in node.items()}
        return entries if any(entries[name] is not entry for name, entry in node.items()) else node
    if isinstance(node, tuple):
        each = tuple(_without(entry, _place(path, entry, i), aside) for i, entry in enumerate(node, 1))
        return each if any(new is not old for new, old in zip(each, node, strict=True)) else node
    return node


def _place(path: str, entry: object, number: int) -> str:
    """Path of an entry of a list: a setup by its operation, any other by its number."""
    return f"{path}.{getattr(entry, 'op', '')}" if path == "setups" else f"{path}[{number}]"


def _record_without(node: BaseModel, path: str, aside: list[str]) -> BaseModel:
    changed: dict[str, object] = {}
    for name in type(node).model_fields:
        if name not in node.model_fields_set:
            continue
        mine = getattr(node, name)
        where = f"{path}.{type(node).model_fields[name].alias or name}".lstrip(".")
        planned_otherwise = isinstance(node, Cutter) and name == "profile" and node.insert is not None
        if mine is not None and (planned_otherwise or (isinstance(node, Mesh) and name in _OF_THE_WHEEL)):
            aside.append(where)
            changed[name] = None
            continue
        other = _without(mine, where, aside)
        if other is not mine:
            changed[name] = other
    return node.model_copy(update=changed) if changed else node


def as_planned(loaded: LoadedJob) -> tuple[LoadedJob, tuple[str, ...]]:
    """The job with every measured value set aside that has a plan beside it, and the paths of those values."""
    aside: list[str] = []
    job = _record_without(loaded.job, "", aside)
    assert isinstance(job, Job)
    return (replace(loaded, job=job) if aside else loaded), tuple(aside)


def plan(floor: Floor) -> Plan | None:
    """The plan's own route; None where the job has no measured value with a plan beside it. Source: the job file."""
    planned, aside = as_planned(floor.loaded)
    if not aside:
        return None
    try:
        walked = walk(planned)
    except JobError:  # a plan that stood only with what was measured is none
        return None
    alone = tuple((r.path, r.name) for r in readings(floor.loaded.job) if r.path not in aside)
    return Plan(walked, aside, alone)


def _outline(figure: Figure) -> tuple[object, ...]:
    """All a worst case is made of, and how each cause is known: equal for figures that no measured value reaches."""
    return tuple(
        (one.base, tuple(sorted((p.cause.identity, p.cause.mode, p.down, p.up) for p in one.pushes)))
        for one in reaches(figure)
    )


def then(plan: Plan, stack: Stack, now: Result | None, draws: Draws) -> Result | None:
    """The requirement as the plan had it; None where no measured value reaches it, or where the plan could not tell it.

    Worst, rss and likely by the same rules as now.  Source: as quantities.judged.combined.
    """
    try:
        made = build(plan.floor, stack)
    except OutOfRange:
        return None
    if isinstance(made, Open) or (now is not None and _outline(made.figure) == _outline(now.figure)):
        return None
    alike = (draws, now.figure) if now is not None else None
    return combined_beside(made, stack, plan.floor, plan.draws, alike)


def then_margin(then: Result) -> float | None:
    """Margin of the worst case as planned. Source: the limit less the worst case."""
    return then.margin


def change(then: Result, now: Result) -> float | None:
    """Margin now less margin then: what the measured values gave or took. Source: arithmetic."""
    return now.margin - then.margin if now.margin is not None and then.margin is not None else None


@record
class Next:
    """One cause that is still only planned: the most it takes of a requirement, and of which.

    size    towards the nearer limit [base unit of the stack]
    weight  by which it is ranked: its part in what it and the margin are together; above 1 where the limit is passed
    """

    cause: Cause
    stack: Stack
    size: float
    weight: float


def next_to_measure(results: tuple[Result, ...]) -> tuple[Next, ...]:
    """Causes that nobody has measured yet, those first whose measurement may give back most; at most MOST_NEXT.

    size / (size + margin left), or 1 + size / limit where the limit is passed.  Bought parts count as well; what follows
    from other causes (a high point) is not measured by itself.  Source: the ledger's shares; the ranking is our choice.
    """
    found: dict[Cause, Next] = {}
    for result in results:
        margin, scale = result.margin, result.scale
        if margin is None or not scale:
            continue
        for one in result.combined.shares:
            if one.cause.mode not in ("planned", "typical") or one.worst < WORTH_IT * scale or not one.cause.paths:
                continue
            weight = one.worst / (one.worst + margin) if margin >= 0.0 else 1.0 + one.worst / scale
            if one.cause not in found or weight > found[one.cause].weight:
                found[one.cause] = Next(one.cause, result.stack, one.worst, weight)
    return tuple(sorted(found.values(), key=lambda n: (-n.weight, n.cause.identity))[:MOST_NEXT])


THEN_NOW = (
    Quantity("then.plan", "job", "", 0, plan, {"floor": "route.floor"}, "the route as planned, measured values aside"),
    Quantity(
        "then.combined",
        "stack",
        "",
        0,
        then,
        {"plan": "then.plan", "stack": ":", "now": "settled stack.combined", "draws": "route.draws"},
        "the requirement as planned, where a measured value reaches it",
        {"now": None},
    ),
    Quantity(
        "then.margin",
        "stack",
        "stack",
        1,
        then_margin,
        {"then": "then.combined"},
        "margin as planned, before measuring",
    ),
    Quantity(
        "then.change",
        "stack",
        "stack",
        1,
        change,
        {"then": "then.combined", "now": "stack.combined"},
        "what the measured values gave to the margin, or took from it",
    ),
    Quantity(
        "then.next",
        "job",
        "",
        0,
        next_to_measure,
        {"results": "known stack.combined"},
        "causes still only planned that take most",
    ),
)
