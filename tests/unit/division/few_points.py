"""Points and readings that a test writes out in a line, and the fit of a few waves to them."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import numpy as np

from setupcheck.division.design import Term, sums_of
from setupcheck.division.fit import Fit, fitted
from setupcheck.division.points import Points, Reals
from setupcheck.division.readings import Readings, read_test


def points(
    degrees: Sequence[float],
    y: Sequence[float] | Reals | None = None,
    *,
    run: Sequence[int] | None = None,
    direction: Sequence[int] | None = None,
) -> Points:
    """Stations in the order of time, y [rad] or nothing; one run and no direction where none is told."""
    n = len(degrees)
    return Points(
        np.radians(degrees), np.zeros(n) if y is None else np.array(y, float), np.linspace(0.0, 1.0, n),
        np.array(run or [0] * n, np.int32), np.array(direction or [0] * n, np.int8), np.arange(n, dtype=np.int32) + 2,
    )  # fmt: skip


def round_the_circle(stations: int, times: int) -> list[float]:
    """Even stations [deg], so many times round."""
    return [360.0 * j / stations for _ in range(times) for j in range(stations)]


def written(folder: Path, *lines: str) -> Readings:
    """The readings of a file of these lines."""
    made = folder / "test.csv"
    made.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return read_test(made)


def by_terms(data: Points, *terms: Term) -> Fit:
    """The fit of these terms alone."""
    return fitted(data, sums_of(data, terms), terms)
