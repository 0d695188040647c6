"""Teeth are numbered in the order they were cut, which may be clockwise from +z: the flank that is read is then the other one."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest

from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce
from setupcheck.division.results import Reduced

ARCSEC = math.pi / 648_000.0
ALPHA = math.radians(20.0)
COUNT, RADIUS, OFF = 24, 54.0, 0.010


def turned_by_the_worm(place: float, towards: float, side: int) -> float:
    """How far the work turns too far as a straight flank of the worm at x > 0 drives the tooth at `place` [rad].

    The flank's normal towards the tooth is (-sin a, side cos a); an involute reaches r_b (turn) along it from its centre, so
    a centre that stands at c takes c . n / r_b of the turn away, to the side that the worm pushes.
    """
    at = towards - place
    centre = OFF * np.array([math.cos(at), math.sin(at)])
    return float(-centre @ (-math.sin(ALPHA), side * math.cos(ALPHA)) * side / (RADIUS * math.cos(ALPHA)))


def read_by_tooth(folder: Path, turn: int, towards: float, directions: tuple[int, ...]) -> Reduced:
    rng = np.random.default_rng(3)
    lines = ["tooth,deviation_arcsec,direction"]
    for direction in directions:
        side = -direction * turn  # numbers that grow counter-clockwise pass the worm as the work turns clockwise
        for tooth in range(1, COUNT + 1)[::direction]:
            place = 0.3 + turn * math.tau * (tooth - 0.5) / COUNT
            value = -turned_by_the_worm(place, towards, side) / ARCSEC + rng.normal(scale=0.01)
            lines.append(f"{tooth},{value:.6f},{'forward' if direction > 0 else 'reverse'}")
    file = folder / "test.csv"
    file.write_text("\n".join(lines))
    return reduce(read_test(file), count=COUNT, radius=RADIUS, pressure_angle=ALPHA, start=0.3, turn=turn)


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("directions", [(1, -1), (1,), (-1,)])
def test_an_eccentric_ring_stands_out_where_it_does(turn: int, directions: tuple[int, ...], tmp_path: Path) -> None:
    towards = math.radians(96.0)
    found = read_by_tooth(tmp_path, turn, towards, directions)
    off = found.eccentric
    assert off is not None
    assert (off.amount.value, off.direction) == (pytest.approx(OFF, rel=0.01), pytest.approx(towards, abs=0.02))
    assert off.side == (0 if len(directions) == 2 else -directions[0] * turn)
    if len(directions) == 2:
        assert off.looks == "eccentric"
        assert found.flanks is not None
        # clockwise flank less the other: 2 e tan(alpha) cos(phi - theta)
        swing = 2.0 * OFF / RADIUS * math.tan(ALPHA)
        assert found.flanks.vector[2:] == pytest.approx(
            (swing * math.cos(towards), swing * math.sin(towards)), rel=0.02
        )
