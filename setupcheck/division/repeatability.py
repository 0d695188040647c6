"""Figures of positioning in the manner of ISO 230-2: systematic deviation, repeatability, reversal, accuracy. Any unit."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.faces import spread_of_sets
from setupcheck.division.points import Points
from setupcheck.record import record

Reals = NDArray[np.floating]

EDITION = "ISO 230-2, edition 1997 onward (2 s), formulas from memory"


@record
class Repeatability:
    """Figures of both directions and of each, in the unit of the readings.

    A  accuracy: largest mean + 2 s less smallest mean - 2 s;  R  repeatability: widest of a station (4 s; with both
    directions 2 s + 2 s + |B| where that is more);  E  systematic: largest mean less smallest;  B  largest reversal,
    forward less reverse, with its sign lost;  mean_B  mean reversal;  M  range of the means of both directions
    up, down  (A, R, E) of one direction;  stations, runs  the smallest numbers they rest on
    """

    A: float
    R: float
    E: float
    B: float
    mean_B: float
    M: float
    up: tuple[float, float, float]
    down: tuple[float, float, float]
    stations: int
    runs: int


def figures(up: tuple[Reals, Reals], down: tuple[Reals, Reals], runs: int) -> Repeatability:
    """The figures from (mean, standard deviation) of every station in both directions, stations in the same order.

    x_i = mean, s_i = its scatter; B_i = up - down; R_i = max(2 s_up + 2 s_down + |B_i|, 4 s_up, 4 s_down).
    Source: ISO 230-2, edition 1997 onward, from memory.

    >>> still = np.zeros(2)
    >>> figures((np.array([5., 7.]), still), (np.array([1., 2.]), still), 2).B
    5.0
    """
    (mean_up, s_up), (mean_down, s_down) = up, down
    reversal = mean_up - mean_down
    both = (mean_up + mean_down) / 2.0

    def one(mean: Reals, s: Reals) -> tuple[float, float, float]:
        return (
            float((mean + 2.0 * s).max() - (mean - 2.0 * s).min()),
            float((4.0 * s).max()),
            float(mean.max() - mean.min()),
        )

    each = np.maximum(2.0 * s_up + 2.0 * s_down + np.abs(reversal), np.maximum(4.0 * s_up, 4.0 * s_down))
    highest = np.maximum(mean_up + 2.0 * s_up, mean_down + 2.0 * s_down).max()
    lowest = np.minimum(mean_up - 2.0 * s_up, mean_down - 2.0 * s_down).min()
    return Repeatability(
        A=float(highest - lowest),
        R=float(each.max()),
        E=float(max(mean_up.max(), mean_down.max()) - min(mean_up.min(), mean_down.min())),
        B=float(np.abs(reversal).max()),
        mean_B=float(reversal.mean()),
        M=float(both.max() - both.min()),
        up=one(mean_up, s_up),
        down=one(mean_down, s_down),
        stations=len(both),
        runs=runs,
    )


def repeatability(points: Points, zeros: Reals | None = None) -> Repeatability | str:
    """The figures of a test, from stations read at least twice each way; or why there are none.

    zeros  of each run, taken off where every run was set anew
    """
    if not ((points.direction > 0).any() and (points.direction < 0).any()):
        return "needs forward and reverse runs (column direction)"
    y = points.y if zeros is None else points.y - zeros[points.run]
    keys, station = np.unique(np.round(points.theta, 8), return_inverse=True)
    tables = []
    for direction in (1, -1):
        mine = points.direction == direction
        n = np.bincount(station[mine], minlength=len(keys))
        mean = np.bincount(station[mine], y[mine], len(keys)) / np.maximum(n, 1)
        square = np.bincount(station[mine], (y[mine] - mean[station[mine]]) ** 2, len(keys))
        tables.append((n, mean, np.sqrt(square / np.maximum(n - 1, 1))))
    (n_up, up, s_up), (n_down, down, s_down) = tables
    there = (n_up >= 2) & (n_down >= 2)
    if there.sum() < 2:
        return "needs at least 2 runs each way at the same stations"
    return figures(
        (up[there], s_up[there]), (down[there], s_down[there]), int(min(n_up[there].min(), n_down[there].min()))
    )


def sighting(points: Points) -> tuple[float, int] | None:
    """(standard deviation of a direction, degrees of freedom) from runs of one direction over the same stations.

    None where fewer than two runs have more than one station in common.  Source: as `spread_of_sets`.
    """
    for direction in np.unique(points.direction)[::-1]:
        mine = points.direction == direction
        table: dict[int, dict[float, float]] = {}
        for run, theta, y in zip(points.run[mine], np.round(points.theta[mine], 8), points.y[mine], strict=True):
            table.setdefault(int(run), {}).setdefault(float(theta), float(y))
        same = sorted(set.intersection(*(set(row) for row in table.values())))
        if len(table) > 1 and len(same) > 1:
            return spread_of_sets(np.array([[row[theta] for theta in same] for row in table.values()]))
    return None
