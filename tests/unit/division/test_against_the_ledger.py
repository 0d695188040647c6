"""Signs of a division test against the ledger's own teeth: the eccentricity that the ledger puts in comes back out."""

from __future__ import annotations

import cmath
import math
from pathlib import Path

import numpy as np
import pytest

from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.teeth import angles, flank_turn

ARCSEC = math.pi / 648_000.0
ALPHA = math.radians(20.0)


def ledger_arcs(pattern: Pattern, offset: complex, side: int) -> np.ndarray:
    """Wheel angle at every place [arcsec] as the ledger has it: Im(f X exp(-i theta)) / r."""
    wave = flank_turn(pattern, side=side, driven=True) * offset
    return np.asarray((wave * np.exp(-1j * angles(pattern))).imag / pattern.radius / ARCSEC)


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("towards", [20.0, 96.0, 250.0])
@pytest.mark.parametrize("how", ["both", "forward", "reverse"])
@pytest.mark.parametrize("rides", [False, True])
def test_the_ledgers_eccentricity_comes_back(turn: int, towards: float, how: str, rides: bool, tmp_path: Path) -> None:
    pattern = Pattern(24, 54.0, turn=turn, start=0.3, pressure_angle=ALPHA)
    offset = 0.010 * cmath.exp(1j * math.radians(towards))
    theta = angles(pattern)
    lines = [("turned_deg" if rides else "angle_deg") + ",deviation_arcsec,direction"]
    rng = np.random.default_rng(1)
    for direction in {"both": (1, -1), "forward": (1,), "reverse": (-1,)}[how]:
        # turned forward the work goes counter-clockwise: the worm pushes on that wall of the gap; places pass the other way
        side = direction if rides else -direction
        arcs = ledger_arcs(pattern, offset, side) + rng.normal(scale=0.01, size=24)
        told = sorted(
            zip(-theta if rides else theta, -arcs if rides else arcs, strict=True), key=lambda x: direction * x[0]
        )
        lines += [f"{math.degrees(t):.9f},{d:.6f},{'forward' if direction > 0 else 'reverse'}" for t, d in told]
    file = tmp_path / "test.csv"
    file.write_text("\n".join(lines))
    found = reduce(read_test(file), count=24, radius=54.0, pressure_angle=ALPHA, start=0.3, turn=turn).eccentric
    assert found is not None
    assert found.amount.value == pytest.approx(0.010, rel=0.01)
    assert math.degrees(found.direction) == pytest.approx(towards, abs=1.0)
    assert found.flanks == ("both" if how == "both" else "one")
    # tooth n stands half a pitch on from gap n
    assert (
        abs((pattern.angle(found.tooth + 0.5) - found.direction + math.pi) % math.tau - math.pi) <= math.pi / 24 + 1e-9
    )
    if how == "both":
        assert found.looks == "eccentric"


def test_a_flank_nobody_names_leaves_the_pressure_angle_open(tmp_path: Path) -> None:
    pattern = Pattern(24, 54.0, pressure_angle=ALPHA)
    rng = np.random.default_rng(1)
    arcs = ledger_arcs(pattern, 0.010 + 0j, 1) + rng.normal(scale=0.01, size=24)
    lines = [f"{n},{d:.6f}" for n, d in enumerate(arcs, 1)]
    file = tmp_path / "test.csv"
    file.write_text("\n".join(["tooth,deviation_arcsec", *lines]))
    found = reduce(read_test(file), count=24, radius=54.0, pressure_angle=ALPHA).eccentric
    assert found is not None
    assert found.flanks == "unknown"
    assert found.within is not None
    assert found.within >= ALPHA


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("how", ["both", "forward", "reverse"])
def test_forward_along_numbered_teeth_is_the_way_their_numbers_grow(turn: int, how: str, tmp_path: Path) -> None:
    pattern = Pattern(24, 54.0, turn=turn, pressure_angle=ALPHA)
    offset = 0.010 * cmath.exp(1j * math.radians(96.0))
    wanted = pattern.start + turn * math.tau * (np.arange(1, 25) - 0.5) / 24
    rng = np.random.default_rng(1)
    lines = ["tooth,deviation_arcsec,direction"]
    for direction in {"both": (1, -1), "forward": (1,), "reverse": (-1,)}[how]:
        # teeth that pass with growing angles turn the work clockwise, against the clockwise wall
        wave = flank_turn(pattern, side=-direction * turn, driven=True) * offset
        arcs = (wave * np.exp(-1j * wanted)).imag / pattern.radius / ARCSEC + rng.normal(scale=0.01, size=24)
        told = sorted(enumerate(arcs, 1), key=lambda x: direction * x[0])
        lines += [f"{n},{d:.6f},{'forward' if direction > 0 else 'reverse'}" for n, d in told]
    file = tmp_path / "test.csv"
    file.write_text("\n".join(lines))
    test = reduce(read_test(file), count=24, radius=54.0, pressure_angle=ALPHA, turn=turn)
    found = test.eccentric
    assert found is not None
    assert found.amount.value == pytest.approx(0.010, rel=0.01)
    assert math.degrees(found.direction) == pytest.approx(96.0, abs=1.0)
    if how == "both":
        assert found.looks == "eccentric"
        assert test.flanks is not None
        a, b, c, d = test.flanks.vector  # forward less reverse is 2 tan(alpha) (-b, a), as on places that grow
        assert [c, d] == pytest.approx([-2.0 * math.tan(ALPHA) * b, 2.0 * math.tan(ALPHA) * a], abs=0.2 * ARCSEC)


def test_a_station_a_turn_back_is_the_same_station(tmp_path: Path) -> None:
    """-400 gon comes to a hair below a full turn in doubles; its reading goes into the mean of station 0."""
    lines = ["angle_gon,deviation_arcsec"]
    for turn, zero in ((-400, 4.0), (0, -4.0)):
        lines += [f"{turn + 25 * k},{zero if k == 0 else (-1.0) ** k:.1f}" for k in range(16)]
    file = tmp_path / "test.csv"
    file.write_text("\n".join(lines))
    found = reduce(read_test(file), count=16, radius=54.0, pressure_angle=ALPHA)
    assert found.stations == 16
    assert found.range / ARCSEC == pytest.approx(2.0, abs=0.6)
