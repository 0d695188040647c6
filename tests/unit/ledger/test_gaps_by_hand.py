"""Single gaps, place by place: symmetry, run-off, what pushes them and what they leave open. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import alternatives
from setupcheck.ledger.gaps import GapSymmetry, RunOff
from setupcheck.ledger.route import (
    Pattern,
    Scatter,
)


def vector(value: complex) -> Account:
    return Account.of(Cause(f"v{value}", "disc", mean=value))


def value(account: Account) -> complex:
    return account.known()


@pytest.mark.parametrize("turn", [1, -1])
def test_symmetry_of_gaps_place_by_place(turn: int) -> None:
    """Both ends: Im(conj(u) d) of each gap, beside by what the cutter stands aside and askew, and by its own shift."""
    ring = Pattern(
        5, 20.0, turn=turn, start=0.2, scatter=(Scatter(Cause("s", "length", high=0.004), "tangential", 0.004),)
    )
    ends = (vector(0.01 + 0.02j), vector(-0.015 + 0.005j))
    figure = GapSymmetry(ends, 8.0, real(0.003), real(4e-4), ring)
    draws = Draws(6)
    own = draws.scatter(ring.scatter[0], ring)
    worst = np.zeros(6)
    for way, end in zip((-1.0, 1.0), ends, strict=True):
        for j in range(5):
            u = cmath.exp(1j * ring.angle(j + 1))
            beside = (u.conjugate() * value(end)).imag + turn * (0.003 + way * 8.0 * 4e-4 + own[:, j])
            worst = np.maximum(worst, np.abs(beside))
    assert figure.sample(Draws(6)) == pytest.approx(2.0 * worst, rel=1e-5)
    assert [p.offsets for p in figure.places()] == [(ends[0],), (ends[1],)]
    alone = figure.places()[1].sample(Draws(6))
    each = [(cmath.exp(-1j * ring.angle(j + 1)) * value(ends[1])).imag + turn * (0.003 + own[:, j]) for j in range(5)]
    assert alone == pytest.approx(2.0 * np.abs(each).max(axis=0), rel=1e-5)
    assert figure.base() == pytest.approx(2.0 * (0.003 + 8.0 * 4e-4))
    pushes = {p.cause.key: p.up for p in figure.pushes()}
    assert pushes["s"] == pytest.approx(0.008)
    assert sum(pushes.values()) == pytest.approx(0.008 + 2.0 * abs(value(ends[0])))
    assert [f.offsets for f in alternatives(figure)] == [(ends[0],), (ends[1],)]  # type: ignore[attr-defined]


@pytest.mark.parametrize("deep", [False, True])
@pytest.mark.parametrize("turn", [1, -1])
def test_run_off_of_gaps_place_by_place(deep: bool, turn: int) -> None:
    ring = Pattern(5, 20.0, turn=turn, start=0.2)
    figure = RunOff(vector(3e-4 - 1e-4j), real(2e-4), 30.0, 0.5, deep, ring)
    worst = 0.0
    for j in range(5):
        seen = cmath.exp(-1j * ring.angle(j + 1)) * (3e-4 - 1e-4j)
        worst = max(worst, abs(30.0 * (seen.real + 2e-4) if deep else 30.0 * (math.cos(0.5) * seen.imag + turn * 2e-4)))
    assert figure.sample(Draws(3)) == pytest.approx([worst] * 3, rel=1e-5)
    arm = 30.0 if deep else 30.0 * math.cos(0.5)
    assert figure.base() == pytest.approx(30.0 * 2e-4)
    (push,) = figure.pushes()
    assert (push.up, push.known) == pytest.approx((arm * abs(3e-4 - 1e-4j),) * 2)


def test_what_single_gaps_leave_open_is_named() -> None:
    lost = Cause("own", "undetermined", missing="path.own")
    stated = Cause("stated", "length", high=0.1, missing="path.stated")
    ring = Pattern(
        5,
        20.0,
        scatter=(Scatter(lost, "tangential", 0.1), Scatter(stated, "tangential", 0.1), Scatter(lost, "angle", 0.1)),
    )
    assert GapSymmetry((Account(),), 8.0, Account(), Account(), ring).undetermined() == ("path.own",)
    others = [Account.of(Cause(n, "undetermined", missing=n)) for n in ("a", "b", "c", "d")]
    figure = GapSymmetry((others[0], others[1]), 8.0, others[2], others[3], Pattern(5, 20.0))
    assert figure.undetermined() == ("a", "b", "c", "d")
    assert RunOff(others[0], others[1], 8.0, 0.0, False, ring).undetermined() == ("a", "b")


def test_what_pushes_single_gaps_by_hand() -> None:
    """Half a length of 8: askew by 1e-4 at most is 0.8 um at the ends, twice that; beside by 3 um and 1 um known, twice."""
    aside = Account.of(Cause("aside", "length", high=0.003)) + real(-0.001)
    askew = Account.of(Cause("askew", "length", high=1e-4)) + real(2e-4)
    some = Scatter(
        Cause("xy", "length", high=0.004), "coordinate", 0.004, around=(0.5, -0.75, 0.0, 0.1, 0.2), outward=(1.0,) * 5
    )
    ring = Pattern(5, 20.0, scatter=(some, Scatter(Cause("turn", "length", high=1.0), "angle", 1.0)))
    figure = GapSymmetry((Account.of(Cause("e", "disc", high=0.01)),), 8.0, aside, askew, ring)
    assert figure.base() == pytest.approx(2.0 * 0.001 + 2.0 * 8.0 * 2e-4)
    off_centre = GapSymmetry((real(0.002),), 8.0, real(0.001), Account(), Pattern(5, 20.0))
    assert off_centre.base() == pytest.approx(2.0 * (0.002 + 0.001))  # a number nobody named counts in full
    assert {p.cause.key: (p.down, p.up) for p in figure.pushes()} == {
        "e": pytest.approx((0.0, 0.02)), "aside": pytest.approx((0.0, 0.006)), "askew": pytest.approx((0.0, 16.0 * 1e-4)),
        "xy": pytest.approx((0.0, 2.0 * 0.004 * 0.75)),
    }  # fmt: skip
    run_off = RunOff(Account.of(Cause("t", "disc", high=1e-4)), askew, 30.0, 0.5, False, ring)
    assert {p.cause.key: (p.down, p.up) for p in run_off.pushes()} == {
        "t": pytest.approx((0.0, 30.0 * math.cos(0.5) * 1e-4)), "askew": pytest.approx((0.0, 30.0 * 1e-4))
    }  # fmt: skip
    assert not figure.signed and not run_off.signed
