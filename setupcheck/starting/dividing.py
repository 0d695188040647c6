"""How a new plan divides its circle and takes its depth. Lengths mm."""

from __future__ import annotations

from setupcheck.division.methods import circles_that_fit
from setupcheck.division.tables import USUAL_CIRCLES, other_ratios
from setupcheck.notation import plain
from setupcheck.starting.layout import Measure

RATIO = 40
"""Turns of the crank for one of the work. Source: common practice, most heads."""
TABLE_RATIO = 90
"""Turns of the handwheel of a rotary table. Source: common practice."""
CLAMP, TABLE_CLAMP = '5"', '10"'
"""What locking the spindle of a head, or a table, turns it. Source: our screening choice, of the order of one setting."""


def division(count: int, name: str, extra: str = "") -> tuple[str, str]:
    """The machine's entry and the setup's `divide`: a hole circle on which the count closes, else a table read by its scale.

    extra  more keys of the machine

    >>> division(72, "head")[1]
    'divide: {by: hole-circle, circle: 18, clamp: 5"}    # 5/9 turn of the crank is 10 holes of 18; clamp is GUESS, rest typical'
    """
    ratio, fits = RATIO, circles_that_fit(RATIO, count, USUAL_CIRCLES)
    if not fits:
        others = other_ratios(RATIO, count, USUAL_CIRCLES)
        ratio, fits = others[0] if others else (TABLE_RATIO, ())
    if not fits:
        machine = f"{name}: {{kind: rotary-table, worm_ratio: {ratio}{extra}, axis_runout: {{device: rotary-table}}}}"
        return (
            machine,
            f"divide: {{by: rotary-table, clamp: {TABLE_CLAMP}}}    "
            f"# no usual hole circle closes on {count}: each angle is set by its scale; clamp is GUESS, rest typical",
        )
    circle = min(fits)
    turns = f"{ratio * circle // count} holes of {circle}"
    head = f"{name}: {{kind: dividing-head, worm_ratio: {ratio}{extra}, axis_runout: {{device: dividing-head}}}}"
    return head, (
        f"divide: {{by: hole-circle, circle: {circle}, clamp: {CLAMP}}}    "
        f"# {_turn(ratio, count)} turn of the crank is {turns}; clamp is GUESS, rest typical"
    )


def _turn(ratio: int, count: int) -> str:
    from fractions import Fraction

    return str(Fraction(ratio, count))


def passes(depth: float, measure: Measure) -> str:
    """Depth in passes that add up to it as written: two roughing, one fine.

    >>> passes(3.3, Measure("mm"))
    '[1.98, 1.02, 0.3]'
    """
    step = 0.001 if measure.units == "mm" else 0.00254
    whole, last = round(depth / step), round(min(0.3, 0.15 * depth) / step)
    first = round(0.6 * depth / step / 10.0) * 10
    parts = (first, whole - first - last, last)
    scale = step / measure.unit
    return f"[{', '.join(plain(round(part * scale, 4)) for part in parts)}]"
