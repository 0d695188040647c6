"""What dividing does to a ring of teeth by hand: gains, scatter, rounding, arcs. Invented values. mm, rad."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped

ALPHA = math.radians(20.0)


def test_gains_and_folding_by_hand() -> None:
    ring = Pattern(
        9, 20.0, pressure_angle=ALPHA, periodic=tuple(Periodic(Cause(f"{h}", "disc"), h) for h in (1, 4, 5, 9, 13))
    )
    assert [teeth.folded(h, 9) for h in (0, 1, 4, 5, 8, 9, 13, 18)] == [0, 1, 4, 4, 1, 0, 4, 0]
    whole = teeth.gains(ring, stepwise=False, flank=True)
    assert whole.offset == pytest.approx(2.0 / math.cos(ALPHA))
    assert whole.wave == pytest.approx({1: 40.0, 4: 40.0, 5: 40.0, 9: 0.0, 13: 40.0})
    step = teeth.gains(ring, stepwise=True, flank=False)
    assert step.offset == pytest.approx(2.0 * math.sin(math.pi / 9))
    four = 40.0 * math.sin(4.0 * math.pi / 9)
    assert step.wave == pytest.approx({1: 40.0 * math.sin(math.pi / 9), 4: four, 5: four, 9: 0.0, 13: four})
    assert teeth.gains(Pattern(1, 20.0), stepwise=False, flank=False).offset == 0.0


def test_scatter_of_places_by_hand() -> None:
    cause = Cause("s", "length", high=0.01)

    def gain(stepwise: bool, deeper: float = 0.0, count: int = 4, **more: object) -> float:
        return teeth.scatter_gain(
            Scatter(cause, bound=0.01, **more), Pattern(count, 20.0), stepwise=stepwise, deeper=deeper
        )  # type: ignore[arg-type]

    for stepwise in (False, True):
        assert gain(stepwise, along="angle") == pytest.approx(2.0 * 0.2)
        assert gain(stepwise, along="tangential") == pytest.approx(2.0 * 0.01)
        assert gain(stepwise, along="radial", deeper=0.4) == pytest.approx(2.0 * 0.004)
        assert gain(stepwise, along="angle", count=1) == 0.0
        assert gain(stepwise, along="angle", groups=(0, 0, 0, 0)) == 0.0
        assert gain(stepwise, along="angle", groups=(0, 0, 1, 1)) == pytest.approx(0.4)
    around, outward = (0.5, -1.0, 0.25, 2.0), (1.0, 0.0, -2.0, 0.5)
    # without depth 0.5 1 0.25 2: the two largest 3; neighbours 1.5 1.25 2.25 2.5 (the last with the first)
    assert gain(False, along="coordinate", around=around, outward=outward) == pytest.approx(0.03)
    assert gain(True, along="coordinate", around=around, outward=outward) == pytest.approx(0.025)
    assert gain(True, along="coordinate", around=around) == pytest.approx(0.025)
    # 0.4 of what lies outwards beside it: 0.9 1 1.05 2.2
    assert gain(False, 0.4, along="coordinate", around=around, outward=outward) == pytest.approx(0.0325)
    assert gain(True, 0.4, along="coordinate", around=around, outward=outward) == pytest.approx(0.0325)
    assert gain(False, 0.4, along="coordinate", around=around) == pytest.approx(0.03)
    assert gain(False, along="angle", around=around) == pytest.approx(20.0 * 0.03)


def test_rounded_settings_by_hand() -> None:
    """0, 3, -1, 1 (x 1e-4 rad x 20 mm): range 4, largest step 4; outwards 0, 0, 5, 0 um of which a flank takes 0.4 either way."""
    rounding, outwards = (0.0, 3e-4, -1e-4, 1e-4), (0.0, 0.0, 0.005, 0.0)

    def figure(stepwise: bool, deeper: float = 0.0, **more: object) -> float:
        return teeth.rounding_figure(Pattern(4, 20.0, **more), stepwise=stepwise, deeper=deeper)  # type: ignore[arg-type]

    assert figure(False) == 0.0
    assert figure(False, rounding=rounding) == pytest.approx(0.008)
    assert figure(True, rounding=rounding) == pytest.approx(0.008)
    assert figure(True, rounding=(0.0, 1e-4, 2e-4, 3e-4)) == pytest.approx(0.006)  # the closing step
    assert figure(False, rounding=rounding, outwards=outwards) == pytest.approx(0.008)
    assert figure(False, 0.4, rounding=rounding, outwards=outwards) == pytest.approx(0.008 + 0.002)
    assert figure(False, 0.4, rounding=rounding) == pytest.approx(0.008)
    # the other flank where what lies outwards has the other sign
    assert figure(False, 0.4, rounding=rounding, outwards=(0.0, 0.0, -0.005, 0.0)) == pytest.approx(0.008 + 0.002)
    assert figure(True, 0.4, rounding=rounding, outwards=(0.0, 0.005, 0.0, 0.0)) == pytest.approx(0.008 + 0.002)
    assert figure(True, 0.4, rounding=rounding, outwards=(0.0, -0.005, 0.0, 0.0)) == pytest.approx(0.008 + 0.002)


@pytest.mark.parametrize("turn", [1, -1])
def test_arcs_are_the_sum_of_all_that_dividing_does(turn: int) -> None:
    """Place by place: r times (Re(X e^(-i h j)) + X shape + rounding), and each scatter, all in the sense of the numbering."""
    wave, drift = Cause("w", "disc", high=1.0), Cause("d", "length", high=1.0)
    ring = Pattern(5, 20.0, turn=turn, periodic=(Periodic(wave, 2),), shaped=(Shaped(drift, (0.0, 0.1, 0.2, 0.4, 0.8)),),
                   rounding=(0.0, 1e-4, -2e-4, 0.0, 3e-4))  # fmt: skip
    x, d = np.array([1e-4 + 2e-4j, -3e-4j]), np.array([5e-5, -1e-4])
    scatters = [np.arange(10.0).reshape(2, 5).astype(np.float32) * 1e-3, np.ones((2, 5), np.float32) * 2e-3]
    wanted = np.zeros((2, 5))
    for j in range(5):
        angle = 2.0 * math.pi * j / 5
        own = (x * np.exp(-2j * angle)).real + d * ring.shaped[0].shape[j] + ring.rounding[j]
        wanted[:, j] = turn * (20.0 * own + scatters[0][:, j] + scatters[1][:, j])
    given = [s.copy() for s in scatters]
    assert teeth.division_arcs(ring, [x], [d], given, 2) == pytest.approx(wanted, rel=1e-5, abs=1e-8)
    bare = teeth.division_arcs(ring, [x], [d], [], 2)
    assert bare == pytest.approx(wanted - turn * (scatters[0] + scatters[1]), rel=1e-4, abs=1e-8)


def test_waves_and_their_ends_in_any_number_of_blocks(monkeypatch: pytest.MonkeyPatch) -> None:
    rng = np.random.default_rng(3)
    x, at = rng.normal(size=23) + 1j * rng.normal(size=23), rng.uniform(0, 7, 4)
    wanted = (x[:, None] * np.exp(-1j * at)[None, :]).real
    added = [rng.normal(size=(23, 4)).astype(np.float32) for _ in range(2)]
    for block in (100_000, 9, 1):
        monkeypatch.setattr(teeth, "BLOCK", block)
        assert teeth.waves(x, at) == pytest.approx(wanted, abs=1e-5)
        low, high = teeth.wave_ends(x, at)
        assert low == pytest.approx(wanted.min(axis=1), abs=1e-5)
        assert high == pytest.approx(wanted.max(axis=1), abs=1e-5)
        both = [wanted + added[0], 2.0 * wanted + added[1]]
        ranges = [b.max(axis=1) - b.min(axis=1) for b in both]
        assert teeth.figure_of(teeth.ranges, [x, 2.0 * x], at, added) == pytest.approx(np.maximum(*ranges), abs=1e-5)
        assert teeth.figure_of(teeth.ranges, [x], at, added[:1]) == pytest.approx(ranges[0], abs=1e-5)
    steps = np.array([[0.0, 1.0, 3.0, 2.0], [0.0, 1.0, 1.0, 5.0]])
    assert list(teeth.largest_steps(steps.copy())) == [2.0, 5.0]
    assert list(teeth.largest_steps(np.array([[4.0, 1.0]]))) == [3.0]
    assert list(teeth.largest_steps(np.array([[4.0]]))) == [0.0]
