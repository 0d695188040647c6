"""From points to places, means, ranges and positioning: each step on few readings, by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.division.design import Term, columns
from setupcheck.division.fit import Fit
from setupcheck.division.repeatability import figures, repeatability, sighting
from setupcheck.division.stations import closure, means_of, per_mean, places_read, range_of
from tests.unit.division.few_points import by_terms, points

# -- stations --------------------------------------------------------------------------------------------------------


def test_places_are_whole_pitches_from_the_first() -> None:
    """72 teeth: 5 deg. 0, 5, 10 and 360 are two more and the first again; 7 is none; 0.04 deg are 0.008 of a pitch."""
    assert places_read(points([0, 5, 10, 360, 7, 5.04, 355], [0] * 7), 72) == 4
    assert places_read(points([3, 8, 5], [0] * 3), 72) == 2
    assert places_read(points([0, 5.0525, -5], [0] * 3), 72) == 2


def test_a_mean_rests_on_the_readings_of_its_station_in_its_direction() -> None:
    degrees = [0, 90, 180, 0, 90, 360, 90, 180]
    assert per_mean(points(degrees, [0] * 8, direction=[1, 1, 1, -1, -1, 1, 1, 1])) == 1
    assert per_mean(points(degrees[:3] * 2 + [360.0], [0] * 7)) == 2


@pytest.mark.parametrize(
    ("degrees", "run", "direction", "wanted"),
    [
        ([0, 90, 0], None, None, 2.0),
        ([0, 90, 180], None, None, None),
        ([0, 90, 360, 0], None, None, 3.0),  # the last of them
        ([10, 90, 10, 90, 10], None, [1, 1, 1, -1, -1], 2.0),  # in the first one's direction
        ([10, 90, 90, 10], None, [1, 1, -1, -1], 3.0),  # else in any
        ([10, 90, 10, 10], [0, 0, 0, 1], None, 2.0),  # of its own run
        ([10, 90, 10], [0, 0, 1], None, None),
        ([350, 90, 10, 350], None, None, 3.0),
    ],
)
def test_closure_is_the_last_less_the_first_of_the_station_that_begins(
    degrees: list[float], run: list[int] | None, direction: list[int] | None, wanted: float | None
) -> None:
    """Readings 5, 6, 7, …: what is found is how many rows on the station comes again."""
    data = points(degrees, [5.0 + j for j in range(len(degrees))], run=run, direction=direction)
    assert closure(data, whole=True) == wanted
    if degrees[-1] == 0 and 360 in degrees:
        assert closure(data, whole=False) == 3.0


def test_means_and_their_range_by_hand() -> None:
    """Two runs of zeros 10 and 20, no drift: stations 0, 120, 240 stand 0, 1, 5 and 0, 3, 5 off them."""
    y = [10.0, 11.0, 15.0, 20.0, 23.0, 25.0]
    data = points([0, 120, 240] * 2, y, run=[0] * 3 + [1] * 3)
    fit = Fit((Term("zero", 0.0), Term("zero", 1.0)), np.array([10.0, 20.0]), np.eye(2), np.zeros(6), 0.0, 4)
    assert range_of(data, fit) == pytest.approx(5.0)
    means = means_of(data, fit, turned=False)
    assert [(round(math.degrees(m.theta)), m.value, m.readings, m.direction) for m in means] == [
        (0, 0.0, 2, 0), (120, 2.0, 2, 0), (240, 5.0, 2, 0)
    ]  # fmt: skip
    back = means_of(data, fit, turned=True)
    assert [(round(math.degrees(m.theta)), m.value) for m in back] == [(0, 0.0), (-120, -2.0), (-240, -5.0)]
    # without the first wave: what numpy leaves of it
    waves = by_terms(data, Term("zero", 0.0), Term("zero", 1.0), Term("wave", 1.0))
    matrix = np.column_stack([c for t in waves.terms for c in columns(t, data, slice(None))])
    rest = data.y - matrix @ waves.values
    each = (rest[:3] + rest[3:]) / 2.0
    assert range_of(data, waves, centred=True) == pytest.approx(each.max() - each.min(), abs=1e-12)
    assert range_of(data, waves) > range_of(data, waves, centred=True) + 1.0


def test_the_range_is_that_of_the_worse_direction() -> None:
    data = points([0, 90, 0, 90], [0.0, 2.0, 1.0, 8.0], direction=[1, 1, -1, -1])
    fit = Fit((Term("zero", 0.0),), np.zeros(1), np.eye(1), np.zeros(4), 0.0, 3)
    assert range_of(data, fit) == 7.0
    assert {m.direction: m.value for m in means_of(data, fit, turned=False) if m.theta == 0.0} == {1: 0.0, -1: 1.0}


# -- positioning -----------------------------------------------------------------------------------------------------


def test_only_stations_read_twice_each_way_count() -> None:
    """Stations 0 and 1 twice each way, station 2 twice up and once down: it has no part in any figure."""
    rows = [(0, 1, 0.0, 1.0), (0, 1, 1.0, 2.0), (0, 1, 2.0, 50.0), (0, -1, 0.0, 0.0), (0, -1, 1.0, 0.0), (0, -1, 2.0, -50.0),
            (1, 1, 0.0, 1.0), (1, 1, 1.0, 2.0), (1, 1, 2.0, 50.0), (1, -1, 0.0, 0.0), (1, -1, 1.0, 0.0)]  # fmt: skip
    run, direction, theta, y = (list(c) for c in zip(*rows, strict=True))
    found = repeatability(points(list(np.degrees(theta)), y, run=run, direction=direction))  # type: ignore[arg-type]
    assert not isinstance(found, str)
    assert (found.stations, found.runs, found.E, found.B, found.mean_B, found.M) == (2, 2, 2.0, 2.0, 1.5, 0.5)
    one = [r for r in rows if r[2] != 1.0]
    run, direction, theta, y = (list(c) for c in zip(*one, strict=True))
    assert "2 runs each way" in str(repeatability(points(list(np.degrees(theta)), y, run=run, direction=direction)))  # type: ignore[arg-type]


def test_sets_of_sights_need_two_runs_with_two_stations_in_common() -> None:
    def found(rows: list[tuple[int, int, float, float]]) -> tuple[float, int] | None:
        run, direction, theta, y = (list(c) for c in zip(*rows, strict=True))
        return sighting(points(theta, y, run=run, direction=direction))

    # rows 1 3 and 2 6: off their targets' means -.5 -1.5, .5 1.5; off their own -+ .5; s^2 = 4 x .25 / 1
    two = [(0, 1, 0.0, 1.0), (0, 1, 90.0, 3.0), (0, 1, 180.0, 9.0), (1, 1, 0.0, 2.0), (1, 1, 90.0, 6.0)]
    assert found(two) == (pytest.approx(1.0), 1)
    assert found([*two, (1, 1, 90.0, 77.0)]) == (pytest.approx(1.0), 1)  # the first of a station counts
    assert found(two[:4]) is None
    assert found(two[:3]) is None
    assert found([(r, -1, t, y) for r, _, t, y in two]) == (pytest.approx(1.0), 1)
    # forward is asked first
    mixed = [*two, *((r, -1, t, 10.0 * y) for r, _, t, y in two)]
    assert found(mixed) == (pytest.approx(1.0), 1)


def test_the_lowest_of_both_directions_counts_whichever_it_is() -> None:
    up, down = (np.array([1.0, 9.0]), np.array([2.0, 0.5])), (np.array([5.0, 4.0]), np.array([0.5, 1.0]))
    found = figures(up, down, 2)
    assert found.A == 10.0 - (1.0 - 4.0)  # 9 + 1 and 1 - 4, both forward
    assert (figures(down, up, 2).A, found.up, found.down) == (13.0, (13.0, 8.0, 8.0), (6.0 - 2.0, 4.0, 1.0))
    assert (found.R, found.E, found.B, found.mean_B, found.M) == (9.0, 8.0, 5.0, 0.5, 3.5)
