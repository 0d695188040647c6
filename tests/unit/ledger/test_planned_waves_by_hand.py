"""Waves that the plan expects, cause by cause, and a wheel that runs. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Tooth, Vector
from setupcheck.ledger.harmonic import planned_wave, towards
from setupcheck.ledger.heads import share_left
from setupcheck.ledger.route import (
    Pattern,
    Periodic,
    Scatter,
    Shaped,
)
from setupcheck.ledger.running import AsItRuns

ALPHA = math.radians(20.0)


def vector(value: complex) -> Account:
    return Account.of(Cause(f"v{value}", "disc", mean=value))


def value(account: Account) -> complex:
    return account.known()


def near(x: complex) -> object:
    return pytest.approx(x, abs=1e-12)


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("side", [1, -1])
def test_a_planned_wave_cause_by_cause(turn: int, side: int) -> None:
    """Each part from a Fourier sum over places of what that cause alone does to the arcs."""
    wave, drift = Cause("w", "disc", high=1e-4, mean=2e-4j), Cause("d", "length", high=3e-4, mean=1e-4 + 0j)
    scatter = Scatter(
        Cause("xy", "length", high=0.004),
        "coordinate",
        0.004,
        around=(1, 0, -1, 0, 1, 0, -1),
        outward=(0, 1) * 3 + (0,),
    )
    rounding, outwards = (
        (0.0, 3e-5, -2e-5, 5e-5, 1e-5, -4e-5, 2e-5),
        (0.004, -0.006, 0.001, 0.009, -0.002, 0.003, -0.008),
    )
    ring = Pattern(7, 31.0, turn=turn, start=0.4, pressure_angle=ALPHA,
                   periodic=(Periodic(wave, 8), Periodic(Cause("z", "disc", high=1.0), 2)),
                   shaped=(Shaped(drift, (0.0, 0.1, 0.3, 0.4, 0.6, 0.8, 1.0)),),
                   scatter=(scatter,), rounding=rounding,
                   outwards=outwards)  # fmt: skip
    figure = Tooth(Account.of(Cause("e", "disc", high=0.01, mean=0.02 + 0j)), ring, flank=True, stepwise=False)
    found = planned_wave(figure, 1, Draws(200), side=side)
    draws = Draws(200)
    at = np.array([ring.angle(j + 1) for j in range(7)])

    def fourier(arcs: np.ndarray) -> np.ndarray:
        return 2.0 / 7 * (arcs @ np.exp(1j * at))

    deeper = side * math.tan(ALPHA)
    parts = {p.cause.key: p for p in found.parts}
    assert list(parts) == ["e", "w", "d", "xy"]
    own = draws.scatter(scatter, ring) * turn + deeper * draws.scatter(scatter, ring, outward=True)
    assert parts["xy"].drawn == pytest.approx(fourier(own), abs=1e-8)
    drifted = 31.0 * turn * np.outer(draws.cause(drift), ring.shaped[0].shape)
    assert parts["d"].drawn == pytest.approx(fourier(drifted), abs=1e-7)
    e = draws.account(figure.offset)
    turned = e * cmath.exp(-1j * side * (ALPHA + math.pi / 14)) / math.cos(ALPHA)
    arcs = (turned[:, None] * np.exp(-1j * at)).imag
    assert parts["e"].drawn == pytest.approx(fourier(arcs), abs=1e-7)
    assert parts["e"].middle == pytest.approx(complex(parts["e"].drawn.mean()))
    both = np.cov(np.stack([parts["e"].drawn.real, parts["e"].drawn.imag]))
    assert parts["e"].covariance == pytest.approx(both)
    known = 31.0 * turn * np.array(rounding) + deeper * np.array(outwards)
    assert found.known == pytest.approx(complex(fourier(known)))
    assert found.drawn == pytest.approx(found.known + sum(p.drawn for p in found.parts))
    assert found.middle == pytest.approx(found.known + sum(p.middle for p in found.parts))
    two = planned_wave(figure, 2, Draws(200), side=side)
    assert "e" not in {p.cause.key for p in two.parts} and "z" in {p.cause.key for p in two.parts}
    for harmonic in (0, 4):
        with pytest.raises(ValueError, match="7 places cannot tell a wave of"):
            planned_wave(figure, harmonic, Draws(5))
    with pytest.raises(ValueError, match="6 places"):
        planned_wave(Tooth(Account(), Pattern(6, 31.0), flank=False, stepwise=False), 3, Draws(5))
    middle = planned_wave(Tooth(figure.offset, ring, flank=False, stepwise=False), 1, Draws(200), side=side)
    assert {p.cause.key: p for p in middle.parts}["e"].drawn == pytest.approx(-1j * e, abs=1e-7)
    assert towards(-1j, 3) == pytest.approx(math.radians(90.0)) and towards(1.0 + 1.0j, 1) == pytest.approx(math.pi / 4)


def test_a_wheel_that_runs_adds_what_its_gaps_add() -> None:
    ring = Tooth(Account.of(Cause("e", "disc", high=0.01)), Pattern(8, 40.0), flank=False, stepwise=False, factor=0.5)
    planned = Cause("planned", "length", mean=0.003 + 0j)
    off = Vector((Account.of(Cause("s", "disc", high=0.02, mean=0.01 + 0j)).plus_constant(0.005),), 2.0)
    none = Vector((Account.of(Cause("n", "undetermined", missing="there")),), 1.0)
    figure = AsItRuns(ring, planned, (off, none), (0.25, 0.0))
    assert figure.base() == pytest.approx(ring.base() + 0.25 * 0.5 * 0.01)
    assert figure.undetermined() == ("there",)
    pushes = {p.cause.key: (p.down, p.up, p.known) for p in figure.pushes()}
    assert pushes["e"] == pytest.approx((0.0, 0.5 * 2.0 * 0.01, 0.0))
    assert pushes["planned"] == pytest.approx((0.0, 0.0015, 0.0015))
    assert pushes["s"] == pytest.approx((0.0, 0.125 * 0.06, 0.125 * 0.02))
    assert "n" not in pushes and not figure.signed
    assert figure.within_a_pitch() == pytest.approx(0.125 * 0.01 + 0.0015 + 0.125 * 0.06)
    draws = Draws(20)
    wanted = ring.sample(draws) + 0.0015 + 0.125 * off.sample(draws)
    assert figure.sample(Draws(20)) == pytest.approx(wanted, rel=1e-5)


def test_heads_off_their_places() -> None:
    assert share_left(1, 0.3) == 1.0
    assert share_left(2, 0.0) == 0.0
    assert share_left(3, 0.4) == pytest.approx(2.0 * math.sin(0.2))
    assert share_left(2, math.pi / 3.0) == pytest.approx(1.0)
    assert share_left(2, 4.0) == share_left(2, 6.2) == 1.0
    for heads, off in ((0, 0.0), (2, -1e-9)):
        with pytest.raises(ValueError, match="at least one head"):
            share_left(heads, off)


def test_flank_factors_by_hand() -> None:
    ring = Pattern(9, 20.0, pressure_angle=ALPHA)
    for side in (1, -1):
        assert teeth.flank_turn(ring, side=side, driven=True) == near(cmath.exp(-1j * side * ALPHA) / math.cos(ALPHA))
        half = math.pi / 18
        assert teeth.flank_turn(ring, side=side, driven=False) == near(
            cmath.exp(-1j * side * (ALPHA + half)) / math.cos(ALPHA)
        )
    assert teeth.flank_turn(ring, side=0, driven=False) == teeth.oblique_turn(ring, side=0, driven=True) == 1.0
    bare = Pattern(9, 20.0)
    assert teeth.flank_turn(bare, side=1, driven=True) == near(1.0)
    assert teeth.oblique_turn(bare, side=-1, driven=False) == near(
        cmath.exp(1j * math.pi / 18) * math.cos(math.pi / 18)
    )
    assert teeth.backlash_swing(0.01, ALPHA) == pytest.approx(0.04 * math.tan(ALPHA))
    lean = teeth.oblique(vector(1e-3 + 2e-3j), ring, lead_angle=0.1, right_hand=False)
    assert value(lean) == near(-1j * math.tan(0.1) * 20.0 * (1e-3 + 2e-3j))
