"""Each figure's base, pushes and what it leaves open by hand. Invented values. mm, rad."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import (
    FaceStock,
    Figure,
    Length,
    MidPlane,
    OverATurn,
    Push,
    Stock,
    Tooth,
    ToothRunOut,
    Vector,
    alternatives,
    merged,
    real_pushes,
    taken_away,
    vector_pushes,
)
from setupcheck.ledger.holes import HoleChord, HolePosition, PitchCircle
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped

from .small_causes import disc, length, near, one_sided, open_one, told, unknown

ALPHA = math.radians(20.0)


# -- pushes ----------------------------------------------------------------------------------------------------------


def test_pushes_of_a_vector_stand_along_the_sum_of_what_is_known() -> None:
    """Known 0.03 along x twice as 2 X, and 0.01 against it; a constant of 0.02: sum 0.06 - 0.01 + 0.02 = 0.07, along x.
    Factor 2: the constant gives the base 0.04, knowns 0.12 and -0.02, bounds 2 x 0.005 x 2 and 0.004 x 2."""
    account = disc("a", 0.005, 0.03 + 0j) * 2.0 + disc("b", 0.004, -0.01 + 0j) + disc("c", 0.001)
    base, pushes = vector_pushes(account.plus_constant(0.02), 2.0)
    assert base == pytest.approx(0.04)
    found = told(pushes)
    assert found["a"] == near(0.0, 0.02 + 0.12, 0.12)
    assert found["b"] == near(0.012, 0.008 - 0.02, -0.02)
    assert found["c"] == near(0.0, 0.002, 0.0)
    # mirrored and turned by a quarter everything is the same
    turned = account.plus_constant(0.02).mirrored() * 1j
    base, pushes = vector_pushes(turned, 2.0)
    assert base == pytest.approx(0.04)
    assert told(pushes) == {k: near(*v) for k, v in found.items()}


def test_knowns_that_cancel_have_no_direction() -> None:
    base, pushes = vector_pushes(disc("a", 0.005, 0.03 + 0j) + disc("b", 0.004, -0.03 + 0j), 1.0)
    assert base == 0.0
    assert told(pushes) == {"a": near(0.0, 0.005, 0.0), "b": near(0.0, 0.004, 0.0)}


def test_pushes_of_a_length_go_both_ways_or_one() -> None:
    """A length within 0.02 taken -3 times; a high point 0 .. 0.01 taken up and down; a disc of 0.004 along x, 2 Re X."""
    account = (
        real(5.0) + length("l", 0.02, 0.1) * -3.0 + one_sided("up", 0.01) + one_sided("down", 0.01) * -2.0
        + disc("v", 0.004, 0.001 + 0.5j).along(2 + 0j)
    )  # fmt: skip
    base, pushes = real_pushes(account)
    assert base == pytest.approx(5.0 - 0.3 + 2.0 * 0.001)
    assert told(pushes) == {"l": near(0.06, 0.06, 0.0), "up": near(0.0, 0.01, 0.0), "down": near(0.02, 0.0, 0.0),
                            "v": near(0.008, 0.008, 0.0)}  # fmt: skip
    base, pushes = real_pushes(account, -2.0)
    assert base == pytest.approx(-2.0 * (4.7 + 0.002))
    assert told(pushes)["up"] == near(0.02, 0.0, 0.0)
    assert told(pushes)["down"] == near(0.0, 0.04, 0.0)
    assert told(pushes)["l"] == near(0.12, 0.12, 0.0)


def test_pushes_of_one_cause_add_up_and_turn_round() -> None:
    a, b = Cause("a", "length", high=1.0), Cause("b", "length", high=1.0)
    found = merged([Push(a, 1.0, 2.0, 0.5), Push(b, 3.0, 0.0)], [Push(a, 4.0, 8.0, -2.0)])
    assert [p.cause.key for p in found] == ["a", "b"]
    assert told(found) == {"a": (5.0, 10.0, -1.5), "b": (3.0, 0.0, 0.0)}
    assert told(taken_away(found)) == {"a": (10.0, 0.0, 1.5), "b": (0.0, 0.0, 0.0)}
    assert [p.size for p in found] == [10.0, 3.0]


# -- figures -----------------------------------------------------------------------------------------------------------


def test_the_worse_of_two_ends_is_the_one_that_reaches_farther() -> None:
    near_end, far_end = disc("a", 0.01), disc("a", 0.01) * 0.5 + disc("b", 0.02)
    figure = Vector((near_end, far_end), 2.0)
    assert figure.base() == 0.0
    assert told(figure.pushes()) == {"a": near(0.0, 0.01, 0.0), "b": near(0.0, 0.04, 0.0)}
    assert [told(f.pushes()) for f in alternatives(figure)] == [{"a": near(0.0, 0.02, 0.0)}, told(figure.pushes())]
    assert alternatives(Vector((near_end,), 2.0))[0].pushes()
    draws = Draws(50)
    values = [np.abs(draws.account(end)) for end in (near_end, far_end)]
    assert figure.sample(draws) == pytest.approx(2.0 * np.maximum(*values))
    assert Vector((open_one("x"), open_one("y") + open_one("x")), 1.0).undetermined() == ("path.x", "path.y")
    assert Length(open_one("x") + open_one("y")).undetermined() == ("path.x", "path.y")


def test_only_figures_with_two_ends_are_signed() -> None:
    one, ring = disc("e", 0.01), Pattern(6, 20.0, pressure_angle=ALPHA)
    starting_at_zero: list[Figure] = [
        Vector((one,), 2.0), MidPlane(one.along(1), one, ring), Tooth(one, ring, flank=True, stepwise=False),
        ToothRunOut(one, ring, 1.0), HolePosition(one, ring, None), HoleChord(ring),
    ]  # fmt: skip
    two_ends: list[Figure] = [
        Length(one.along(1)), OverATurn(one.along(1), one, 1.0), Stock(0.5, (one,)), FaceStock(one.along(1), one, 10.0),
        PitchCircle(ring),
    ]  # fmt: skip
    assert [f.signed for f in starting_at_zero] == [False] * 6
    assert [f.signed for f in two_ends] == [True] * 5


def test_a_length_that_swings_adds_its_swing_to_both_ends() -> None:
    """Length 8 within 0.01; eccentric by 0.02 at most and 0.03 known: factor 0.7 on both; gaps 0.005 deeper or shallower."""
    deep = Scatter(Cause("depth", "length", high=0.005), "radial", 0.005)
    turned = Scatter(Cause("turned", "length", high=0.1), "angle", 0.1)
    ring = Pattern(8, 30.0, scatter=(deep, turned))
    offset = disc("e", 0.02, 0.03 + 0j)
    figure = OverATurn(real(8.0) + length("l", 0.01), offset, 0.7, ring)
    assert figure.base() == 8.0
    e = 0.7 * 0.05
    assert told(figure.pushes()) == {
        "l": near(0.01, 0.01, 0.0),
        "e": near(e, e, 0.0),
        "depth": near(0.0035, 0.0035, 0.0),
    }
    bare = OverATurn(real(8.0) + length("l", 0.01), offset, 0.7)
    assert told(bare.pushes()) == {"l": near(0.01, 0.01, 0.0), "e": near(e, e, 0.0)}
    low, high = bare.sample(Draws(20))
    draws = Draws(20)
    middle, swing = draws.real(bare.account), 0.7 * np.abs(draws.account(offset))
    assert low == pytest.approx(middle - swing) and high == pytest.approx(middle + swing)
    low, high = figure.sample(Draws(20))
    draws = Draws(20)
    each = teeth.waves(draws.account(offset), teeth.angles(ring)) + draws.radials(ring)
    assert low == pytest.approx(draws.real(bare.account) + 0.7 * each.min(axis=1))
    assert high == pytest.approx(draws.real(bare.account) + 0.7 * each.max(axis=1))
    lost = Pattern(8, 30.0, scatter=(Scatter(unknown("d"), "radial", 0.1), Scatter(unknown("t"), "angle", 0.1)))
    assert OverATurn(open_one("a"), open_one("b"), 1.0, lost).undetermined() == ("path.a", "path.b", "path.d")
    assert OverATurn(open_one("a"), open_one("a"), 1.0).undetermined() == ("path.a",)


def test_stock_and_face_stock_lose_what_the_vector_reaches() -> None:
    stock = Stock(0.5, (disc("a", 0.1, 0.05 + 0j), disc("a", 0.1, 0.05 + 0j) * 2.0))
    assert stock.base() == 0.5
    assert told(stock.pushes()) == {"a": near(0.3, 0.0, -0.1)}
    assert [told(f.pushes()) for f in alternatives(stock)] == [
        {"a": near(0.15, 0.0, -0.05)},
        {"a": near(0.3, 0.0, -0.1)},
    ]
    assert [f.base() for f in alternatives(stock)] == [0.5, 0.5]
    face = FaceStock(real(0.4) + length("l", 0.03), disc("t", 0.001, 0.002 + 0j).plus_constant(0.003), 50.0)
    assert face.base() == pytest.approx(0.4 - 0.15)
    assert told(face.pushes()) == {"l": near(0.03, 0.03, 0.0), "t": near(0.15, 0.0, -0.1)}
    draws = Draws(10)
    values = face.sample(draws)
    assert values == pytest.approx(draws.real(face.axial) - 50.0 * np.abs(draws.account(face.lean)))
    assert FaceStock(open_one("a"), open_one("b") + open_one("a"), 1.0).undetermined() == ("path.a", "path.b")


@pytest.mark.parametrize(("middle", "both", "up", "pushed"), [
    (0.01, 0.02, 0.0, 0.02),  # -0.01 .. 0.03
    (-0.01, 0.02, 0.0, 0.02),  # -0.03 .. 0.01
    (0.0, 0.02, 0.0, 0.02),
    (0.01, 0.0, 0.05, 0.05),  # 0.01 .. 0.06
    (-0.01, 0.0, 0.05, 0.05),  # -0.01 .. 0.04: the middle counts outwards, so the larger side does too
    (0.01, 0.0, -0.05, 0.05),  # -0.04 .. 0.01: likewise
    (-0.03, 0.0, 0.02, 0.0),  # -0.03 .. -0.01: it only comes nearer
    (0.03, 0.0, -0.02, 0.0),  # 0.01 .. 0.03
    (-0.03, 0.01, 0.02, 0.01),  # -0.04 .. 0.0
    (0.25, 0.25, -0.5, 0.25),  # -0.5 .. 0.5: as far either way, nothing more
])  # fmt: skip
def test_a_mid_plane_stands_off_by_its_middle_and_what_pushes_it_outwards(
    middle: float, both: float, up: float, pushed: float
) -> None:
    axial = real(middle) + length("both", both) + one_sided("up", abs(up)) * (1.0 if up > 0 else -1.0)
    figure = MidPlane(axial, disc("t", 2e-4, 1e-4 + 0j).plus_constant(3e-4), Pattern(6, 40.0))
    assert figure.base() == pytest.approx(abs(middle) + 40.0 * 3e-4)
    found = told(figure.pushes())
    assert found["both"][1] + found["up"][1] == pytest.approx(pushed)
    assert all(down == 0.0 for down, _, _ in found.values())
    assert found["t"] == near(0.0, 40.0 * 3e-4, 40.0 * 1e-4)
    low, high = axial.span()
    assert abs(middle) + pushed >= max(abs(low), abs(high)) - 1e-12
    worst = figure.base() + sum(p.up for p in figure.pushes())
    assert figure.sample(Draws(500)).max() <= worst + 1e-7


def test_what_is_not_stated_of_a_mid_plane_is_named() -> None:
    assert MidPlane(open_one("a"), open_one("b") + open_one("a"), Pattern(6, 40.0)).undetermined() == (
        "path.a",
        "path.b",
    )


def test_pushes_of_a_ring_of_teeth_by_their_gains() -> None:
    """Twelve places on 30 mm, factor 0.5. Range: twice each amplitude; step: 2 sin(pi k/12) of k waves.
    Wave of 14 on 12 is one of 2; of 12 none. Scatter: each of two places its own; drift 0 .. 1 over the turn."""
    wave, still = Cause("wave", "disc", high=1e-4, mean=2e-4j), Cause("still", "disc", high=1e-3)
    own = Scatter(Cause("own", "length", high=5e-5), "angle", 5e-5)
    drift = Shaped(Cause("drift", "length", high=3e-4), tuple(j / 11 for j in range(12)))
    ring = Pattern(12, 30.0, pressure_angle=ALPHA, periodic=(Periodic(wave, 14), Periodic(still, 12)), scatter=(own,),
                   shaped=(drift,))  # fmt: skip
    offset = disc("e", 0.02)
    for stepwise in (False, True):
        gain = {k: 2.0 * math.sin(math.pi * k / 12) if stepwise else 2.0 for k in (1, 2)}
        figure = Tooth(offset, ring, flank=True, stepwise=stepwise, factor=0.5)
        assert figure.base() == 0.0
        assert told(figure.pushes()) == {
            "e": near(0.0, 0.5 * gain[1] * 0.02 / math.cos(ALPHA), 0.0),
            "wave": near(0.0, 0.5 * 30.0 * gain[2] * 3e-4, 0.0),
            "own": near(0.0, 0.5 * 2.0 * 30.0 * 5e-5, 0.0),
            "drift": near(0.0, 0.5 * 30.0 * 3e-4, 0.0),  # range 1; its one large step is the closing one
        }
        middle = Tooth(offset, ring, flank=False, stepwise=stepwise, factor=0.5)
        assert told(middle.pushes())["e"] == near(0.0, 0.5 * gain[1] * 0.02, 0.0)
    assert Tooth(offset, Pattern(1, 30.0), flank=False, stepwise=False).pushes()[0].up == 0.0


def test_what_is_not_stated_of_a_ring_of_teeth_is_named_where_it_counts() -> None:
    def lost(count: int, harmonic: int = 5) -> tuple[str, ...]:
        ring = Pattern(
            count, 30.0, periodic=(Periodic(unknown("w"), harmonic),), scatter=(Scatter(unknown("s"), "angle", 1.0),)
        )
        return Tooth(open_one("e"), ring, flank=False, stepwise=False, oblique=open_one("o")).undetermined()

    assert lost(12) == ("path.e", "path.o", "path.w", "path.s")
    assert lost(12, 24) == ("path.e", "path.o", "path.s")  # it folds to nothing
    assert lost(1) == ("path.e", "path.o")
    ring = Pattern(4, 20.0, scatter=(Scatter(unknown("r"), "radial", 1.0), Scatter(unknown("a"), "angle", 1.0)))
    assert ToothRunOut(open_one("e"), ring, 1.0).undetermined() == ("path.e", "path.r")
    holes = Pattern(
        4,
        20.0,
        scatter=ring.scatter,
        radial=open_one("size"),
        periodic=(Periodic(unknown("w"), 5), Periodic(unknown("v"), 8)),
    )
    assert HolePosition(open_one("e"), holes, None).undetermined() == (
        "path.e", "path.size", "path.w", "path.v", "path.r", "path.a"
    )  # fmt: skip
    assert HolePosition(open_one("e"), holes, open_one("turn")).undetermined() == (
        "path.e", "path.size", "path.turn", "path.w", "path.v", "path.r", "path.a"
    )  # fmt: skip
    assert HoleChord(holes).undetermined() == ("path.size", "path.r", "path.a", "path.w")
    assert PitchCircle(holes).undetermined() == ("path.size", "path.r")


def test_run_out_of_gaps_by_hand() -> None:
    ring = Pattern(
        4,
        20.0,
        scatter=(
            Scatter(Cause("r", "length", high=0.004), "radial", 0.004),
            Scatter(Cause("a", "length", high=0.1), "angle", 0.1),
        ),
        outwards=(0.01, -0.02, 0.0, 0.005),
    )
    figure = ToothRunOut(disc("e", 0.01, 0.003 + 0j).plus_constant(0.001), ring, 1.5)
    assert figure.base() == pytest.approx(1.5 * (0.03 + 2.0 * 0.001))
    assert told(figure.pushes()) == {"e": near(0.0, 3.0 * 0.013, 3.0 * 0.003), "r": near(0.0, 3.0 * 0.004, 0.0)}
    draws = Draws(10)
    each = teeth.waves(draws.account(figure.offset), teeth.angles(ring)) + draws.radials(ring)
    assert figure.sample(Draws(10)) == pytest.approx(1.5 * (each.max(axis=1) - each.min(axis=1)), rel=1e-5)


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_a_middle_that_counts_outwards_takes_the_larger_side_of_each_cause(sign: float) -> None:
    """Middle 0.01, up by 0.01 at most and down by 0.05: -0.04 .. 0.02, farther below, while the middle stands above."""
    axial = real(0.01 * sign) + one_sided("up", 0.01) * sign - one_sided("down", 0.05) * sign
    figure = MidPlane(axial, Account(), Pattern(6, 40.0))
    assert {p.cause.key: p.up for p in figure.pushes()} == pytest.approx({"up": 0.01, "down": 0.05})
    # up by 0.05 and down by 0.03: -0.02 .. 0.06, farther on the middle's own side, where the one downwards adds nothing
    above = MidPlane(
        real(0.01 * sign) + one_sided("up", 0.05) * sign - one_sided("down", 0.03) * sign, Account(), Pattern(6, 40.0)
    )
    assert {p.cause.key: p.up for p in above.pushes()} == pytest.approx({"up": 0.05, "down": 0.0})
    below = MidPlane(
        real(-0.01 * sign) + axial - real(0.01 * sign), Account(), Pattern(6, 40.0)
    )  # middle on the far side
    assert {p.cause.key: p.up for p in below.pushes()} == pytest.approx({"up": 0.0, "down": 0.05})


def test_gaps_of_no_known_depth_have_no_base_but_their_offset() -> None:
    assert ToothRunOut(disc("e", 0.01), Pattern(4, 20.0), 1.5).base() == 0.0
    assert ToothRunOut(real(0.002), Pattern(4, 20.0), 1.5).base() == pytest.approx(1.5 * 2.0 * 0.002)
    assert PitchCircle(Pattern(4, 20.0)).base() == 0.0
    assert HoleChord(Pattern(4, 20.0)).base() == 0.0
