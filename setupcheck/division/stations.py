"""The stations of a division test and what was read there: places, means, the range of these, closure. Angles rad."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.design import columns, places
from setupcheck.division.fit import Fit
from setupcheck.division.points import Points
from setupcheck.division.results import Mean


def places_read(points: Points, count: int) -> int:
    """Stations that are whole pitches apart from the first: different teeth, not places within a pitch."""
    pitches = (points.theta - points.theta[0]) * count / math.tau
    whole = np.round(pitches)
    return len(np.unique(np.remainder(whole[np.abs(pitches - whole) < 0.01], count)))


def per_mean(points: Points) -> int:
    """Fewest readings that the mean of a station in one direction rests on."""
    at = np.stack([places(points, whole=True), points.direction], axis=1)
    return int(np.unique(at, axis=0, return_counts=True)[1].min())


def range_of(points: Points, fit: Fit, *, centred: bool = False) -> float:
    """Largest less smallest mean of a station, zeros and drift off, the larger of both directions [rad].

    centred  the first wave taken off as well, of both flanks where both were read
    """
    rest, worst = _rest(points, fit, centred=centred), 0.0
    for mine, at in _each_way(points):
        means = np.bincount(at, rest[mine]) / np.bincount(at)
        worst = max(worst, float(means.max() - means.min()))
    return worst


def means_of(points: Points, fit: Fit, *, turned: bool) -> tuple[Mean, ...]:
    """Mean of every station in each direction, zeros and drift off, in the frame of the work: what `range_of` is the range of.

    turned  stations are turns of the work: delta(theta) = -d(-theta), as with the waves
    """
    rest, found = _rest(points, fit, centred=False), []
    sense = -1.0 if turned else 1.0
    for mine, at in _each_way(points):
        times = np.bincount(at)
        value = sense * np.bincount(at, rest[mine]) / times
        theta = np.empty(len(times))
        theta[at] = sense * points.theta[mine]
        direction = int(points.direction[mine][0])
        found += [Mean(*row, direction) for row in zip(theta.tolist(), value.tolist(), times.tolist(), strict=True)]
    return tuple(found)


def _rest(points: Points, fit: Fit, *, centred: bool) -> NDArray[np.floating]:
    """The readings with zeros, drift and, where `centred`, the first wave taken off."""
    rest = np.array(points.y)
    for term in fit.terms:
        first = term.kind in ("wave", "swing") and term.harmonic == 1.0
        if term.kind in ("zero", "drift", "bend") or (centred and first):
            rest -= np.asarray(fit.vector(term)) @ np.asarray(columns(term, points, slice(None)))
    return rest


def _each_way(points: Points) -> Iterator[tuple[NDArray[np.bool_], NDArray[np.intp]]]:
    """For each direction its readings, and of each of them the number of its station."""
    for direction in np.unique(points.direction):
        mine = points.direction == direction
        _, at = np.unique(places(points, whole=True)[mine], return_inverse=True)
        yield mine, at


def closure(points: Points, *, whole: bool) -> float | None:
    """Last less first reading of the station that begins, in one run and direction where it can be."""
    order = np.argsort(points.t, kind="stable")
    first = order[0]
    at = places(points, whole=whole)
    same = np.abs(at - at[first]) < 2e-8
    same &= points.run == points.run[first]
    for more in (points.direction == points.direction[first], np.ones(len(points), bool)):
        again = [i for i in order.tolist() if same[i] and more[i]]
        if len(again) > 1:
            return float(points.y[again[-1]] - points.y[first])
    return None
