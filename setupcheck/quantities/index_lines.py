"""The lines of an index table as they are set: circles that fit, moves added up, coordinates, gauge blocks. mm, rad."""

from __future__ import annotations

from fractions import Fraction

from setupcheck.division import tables
from setupcheck.division.methods import circles_that_fit
from setupcheck.division.tables import Coordinate
from setupcheck.division.tables import Setting as Setting  # the report's lines
from setupcheck.quantities.index_table import IndexTable
from setupcheck.record import record

FINE_MM, FINE_INCH = 0.001, 0.0001 * 25.4
"""What coordinates and gauge blocks are rounded to where the job states no step [mm]. Source: common practice."""


def fitting_steps(table: IndexTable) -> list[tuple[int, int, int]]:
    """(circle, whole turns, holes) from place to place on every circle that fits. Source: exact fractions."""
    if table.kind != "holes" or table.worm_ratio is None:
        return []
    fits = circles_that_fit(table.worm_ratio, table.count, table.circles)
    steps = ((circle, tables.step_on(table.worm_ratio, table.count, circle)) for circle in fits)
    return [(circle, *step) for circle, step in steps if step is not None]


def total_moved(table: IndexTable) -> tuple[int, Fraction]:
    """(steps, turns of the work) that all moves come to, added one by one. Source: counting."""
    total = sum(line.moved for line in table.lines)
    return total, Fraction(total) / (table.per_turn or table.count)


def linear_step(table: IndexTable, *, inches: bool) -> float:
    """What coordinates or blocks are rounded to [mm]: the readout's step, else what is usual in the job's units."""
    return table.linear_step or (FINE_INCH if inches else FINE_MM)


def coordinate(table: IndexTable, line: Setting, *, inches: bool) -> Coordinate:
    """One place by coordinates, X along the part's mark. Source: geometry."""
    return tables.coordinate(line.angle, radius=table.radius, start=table.start, step=linear_step(table, inches=inches))


def direction(table: IndexTable, line: Setting) -> Fraction:
    """Direction of a place from the part's mark, share of a turn from 0 to 1. Source: the first place's direction."""
    return (tables.exact_share(table.start) + line.angle) % 1


@record
class SineLine:
    """One place by sine bar: quarter (1 for 90 deg), angle from it [share of a turn], blocks [mm], left over [rad]."""

    quarter: int
    away: Fraction
    blocks: float
    off: float


def sine_line(table: IndexTable, line: Setting, *, inches: bool) -> SineLine:
    """One place by sine bar, from the nearest quarter. Source: sine of the angle times the bar (textbook)."""
    assert table.bar is not None
    return SineLine(*tables.sine_setting(line.angle, table.bar, linear_step(table, inches=inches)))
