"""The heating plan of a shrink fit as steps to take to the oven, each with its number: what to set, try, carry and hold."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.quantities.book import Known, Scope
from setupcheck.report.joint import fitted, has_play, in_words
from setupcheck.report.wording import wrap

if TYPE_CHECKING:
    from setupcheck.report.review_blocks import HeatingPlanData

STEPS: tuple[tuple[str, ...], ...] = (
    (
        "The tightest pair needs {heat.needed} as it goes over the shaft. The plan gives {heat.planned_low} to "
        "{heat.planned_high}; the hub's material stands {heat.cap}.",
        "The tightest pair needs {heat.needed} as it goes over the shaft; the hub's material stands {heat.cap}.",
        "The tightest pair needs {heat.needed} as it goes over the shaft.",
    ),
    (
        "Heat opens {heat.opens_by_heat} and cold {heat.opens_by_cold}, {heat.must_open} are needed; the shaft gains "
        "{heat.shaft_gain} on its way and comes at {heat.shaft_at}.",
    ),
    ("Let it soak for {heat.soak}, so that it is hot through.",),
    (
        "Try the gauge of {heat.gauge_to_try} (at least {heat.go_gauge}) in the hot bore; lift the hub only when it enters.",
        "Try a gauge of {heat.go_gauge} in the hot bore; lift the hub only when it enters.",
    ),
    (
        "Carried as planned, the hub still has {heat.at_shaft} at the shaft. In still air the wanted play lasts "
        "{heat.carry_allowed}, and after {heat.carry_until_bite} the tightest pair has none.",
        "Carried as planned, the hub still has {heat.at_shaft} at the shaft.",
    ),
    (
        "Over the shaft there are {heat.window} until it may bite, while nothing touches; it bites at {heat.bites_at}.",
        "Over the shaft there are {heat.window} until it may bite, while nothing touches.",
        "The tightest pair bites at {heat.bites_at}.",
    ),
    ("What stays in place beside the hub comes to {heat.beside} at the most; it stands {heat.beside_stands}.",),
    (
        "A gap of up to {heat.shoulder_gap} may open at the shoulder as it cools: let that end grip first, or face it after.",
    ),
)
"""The steps in their order, each with shorter forms; one with an unknown number is left out, its finding says what to fill."""


def heating_plans(found: Review) -> Iterator[str]:
    """One numbered plan for each shrink fit."""
    for number, (scope, steps) in enumerate(_plans(found)):
        yield from [""] * (number > 0)
        yield f"HEATING PLAN, op {scope.op}"
        for step, said in enumerate(steps, 1):
            yield from wrap(said, first=f"  {step} ", rest="    ")


def heating_plans_as_data(found: Review) -> list[HeatingPlanData]:
    """The steps of each plan, by operation."""
    return [{"op": scope.op, "steps": steps} for scope, steps in _plans(found)]


def _plans(found: Review) -> Iterator[tuple[Scope, list[str]]]:
    for scope, join in fitted(found):
        planned = join.by == "shrink" and not has_play(found, scope) and not _porous(found, scope)
        steps = in_words(found, scope, STEPS) if planned else []
        if steps:
            yield scope, steps


def _porous(found: Review, scope: Scope) -> bool:
    """Whether hub or shaft has pores: oil soaks it, no figure of its grip holds, and no plan of heat makes that good."""
    kind = found.book.get("fit.elastic_kind", scope)
    return isinstance(kind, Known) and kind.value == "porous"
