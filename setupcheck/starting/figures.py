"""What a new plan takes from its own reviews: the fit of its joint, its heat, its insert, and limits it can keep. Lengths mm.

The first draft is written with guesses, reviewed, and written again with what the review told; after a few rounds every
figure stands. Source of every figure: the review's own quantities."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from setupcheck.quantities.book import Known, OutOfRange
from setupcheck.quantities.fit_tables import limits
from setupcheck.record import record
from setupcheck.starting.answers import Answers, deviations
from setupcheck.starting.layout import Measure, nice

if TYPE_CHECKING:
    from setupcheck.flow import Review

ROOM_IN_LIMITS = 1.15
"""What a limit leaves over the plan's worst case. Source: our choice, so that a first measured value need not fail at once."""
CLASSES = ("p5", "r5", "s5", "p6", "r6", "s6", "t6", "u6", "n5", "n6", "m5", "k5")
"""Shaft classes looked at for a joint. Source: usual interference fits of ISO 286; the choice is ours."""
HEAT_ERROR = 10.0
"""What an oven may be off [K]. Source: common practice, rules/data/typical.yaml."""
HEAT_SPARE = 25.0
"""Heat planned above what the joint needs and the oven may lack [K]. Source: our choice."""
LEAST_BACKLASH = 0.015
"""Backlash kept at the worst [mm]. Source: our choice, so that a first measured value does not make the pair bind at once."""
PAIRED = 0.002
"""Either way of a size that is to be measured and paired, until it is [mm]. Source: our choice, what a good micrometer tells."""
OWN_LIMITS = 0.002
"""Half of the tolerance of a journal with limits of its own, over the cube root of its size [mm]. Source: our choice, between
IT5 and IT6."""


@record
class Figures:
    """What was found so far; None where the next round has to.

    journal    dimension of the inner part, as written;  heat  of the hub [degC];  gauge  for the hot bore [mm]
    thicker    what the insert is to be wider than planned [mm];  rating  of the press [N]
    worst      by number of the requirement, its two ends at the worst in base units, and its unit
    """

    journal: str | None = None
    heat: float | None = None
    gauge: float | None = None
    thicker: float = 0.0
    rating: float | None = None
    worst: tuple[tuple[int, float, float, str], ...] = ()


def told(found: Review, name: str) -> float | None:
    """The first known number under a name, in the order of the job."""
    for scope in found.book.instances(found.book.quantities[name].per):
        answer = found.book.get(name, scope)
        if isinstance(answer, Known) and isinstance(answer.value, float | int):
            return float(answer.value)
    return None


def settled(found: Review, before: Figures, answers: Answers, *, bore: str | None) -> Figures:
    """What the review of a draft says of the next one.  bore  name of the answer that holds the outer part's bore"""
    worst = tuple(
        (one.stack.index, one.combined.worst.low, one.combined.worst.high, one.stack.unit)
        for one in found.results.values()
    )
    journal = before.journal
    if bore is not None and journal is None:
        journal = _journal(found, answers, bore)
    heat, gauge = before.heat, before.gauge
    if before.journal is not None:  # the heat of the joint as it now is
        heat = _heat(found) if heat is None else heat
        gauge = _gauge(found, answers.measure) if before.heat is not None and gauge is None else gauge
    force = told(found, "fit.press_force")
    rating = nice(1.6 * force, up=True) if force is not None else before.rating
    return Figures(journal, heat, gauge, before.thicker + _thicker(found), rating, worst)


def _journal(found: Review, answers: Answers, bore: str) -> str | None:
    """The class of ISO 286 whose interference suits the joint at both ends, else limits of its own in the middle of it."""
    low, high = told(found, "fit.window_low"), told(found, "fit.window_high")
    if low is None or high is None:
        return None
    nominal, outer = answers.number(bore), answers.size(bore)
    least, most = deviations(outer) if outer.fit or outer.lower is not None else (-PAIRED, PAIRED)
    smallest, largest = most + low * 1.08 + 0.0005, least + high * 0.94
    for name in CLASSES:
        try:
            shaft = limits(nominal, name)
        except OutOfRange:
            continue
        if shaft.lower >= smallest and shaft.upper <= largest:
            return f"{answers.measure.exact(nominal)} {name}"
    middle, half = (smallest + largest) / 2.0, max((largest - smallest) / 2.0, 0.001)
    half = min(0.6 * half, OWN_LIMITS * math.cbrt(nominal))
    return answers.measure.with_limits(nominal, middle - half, middle + half)


def _heat(found: Review) -> float | None:
    """Temperature of the hub to a step of 5 [degC]: what the tightest pair needs, the oven's error, the way to the shaft."""
    needed, loss, cap = told(found, "heat.needed"), told(found, "heat.carry_loss"), told(found, "heat.cap")
    if needed is None:
        return None
    asked = math.ceil((needed + HEAT_ERROR + HEAT_SPARE + (loss or 0.0)) / 5.0) * 5.0
    return min(asked, math.floor((cap - HEAT_ERROR) / 5.0) * 5.0) if cap is not None else asked


def _gauge(found: Review, measure: Measure) -> float | None:
    """A gauge between what must enter and what the hot bore takes [mm]."""
    go, enters = told(found, "heat.go_gauge"), told(found, "heat.gauge_enters")
    if go is None:
        return None
    step = 0.001 if measure.units == "mm" else 0.00254
    wanted = go if enters is None else go + 0.3 * max(enters - go, 0.0)
    return math.ceil(wanted / step - 1e-6) * step


def _thicker(found: Review) -> float:
    """What the insert lacks for some backlash at the worst [mm]."""
    lows = [one.combined.worst.low for one in found.results.values() if one.stack.require.what == "backlash"]
    return LEAST_BACKLASH - min(lows) if lows else 0.0
