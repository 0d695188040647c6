"""Each figure's base, pushes and what it leaves open by hand, and the gains of teeth. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import Draws
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


# -- holes -------------------------------------------------------------------------------------------------------------


def test_position_of_holes_by_hand() -> None:
    """Four holes on 25 mm. Settings rounded to 0, 4e-4, 0, -2e-4 rad are 0, 10, 0, -5 um round the circle; free to turn, their
    middle of 2.5 um comes off: 7.5 um at the worst. Twice that, and twice each bound."""
    rounding = (0.0, 4e-4, 0.0, -2e-4)
    holes = Pattern(4, 25.0, rounding=rounding)
    assert HolePosition(Account(), holes, None).base() == pytest.approx(2.0 * 0.0075)
    assert HolePosition(Account(), holes, Account()).base() == pytest.approx(2.0 * 0.010)
    # turned about a clocking feature by 3e-4 rad: 7.5 um on all, so 17.5 um on the second
    assert HolePosition(Account(), holes, real(3e-4)).base() == pytest.approx(2.0 * 0.0175)
    assert HolePosition(Account(), holes, real(-3e-4)).base() == pytest.approx(2.0 * 0.0125)
    out = Pattern(4, 25.0, outwards=(0.002, -0.006, 0.004, 0.0))
    assert HolePosition(Account(), out, None).base() == pytest.approx(2.0 * 0.006)
    assert HolePosition(real(0.003), out, None).base() == pytest.approx(2.0 * math.hypot(0.006, 0.003))
    both = Pattern(4, 25.0, rounding=rounding, outwards=(0.0, 0.01, 0.0, 0.0))
    assert HolePosition(Account(), both, Account()).base() == pytest.approx(2.0 * math.hypot(0.01, 0.01))


def test_pushes_on_the_position_of_holes_by_hand() -> None:
    wave, drift = Cause("wave", "disc", high=1e-4), Cause("drift", "length", high=2e-4)
    scatters = (
        Scatter(Cause("angle", "length", high=3e-5), "angle", 3e-5),
        Scatter(Cause("some", "length", high=3e-5), "angle", 3e-5, around=(0.1, -0.6, 0.2, 0.3)),
        Scatter(Cause("xy", "length", high=0.004), "coordinate", 0.004, around=(0, 1, 0, 1), outward=(1, 0, 1, 0)),
        Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
    )
    holes = Pattern(4, 25.0, periodic=(Periodic(wave, 4),), scatter=scatters, shaped=(Shaped(drift, (0.0, 0.2, -0.7, 0.5)),),
                    radial=length("size", 0.006))  # fmt: skip
    figure = HolePosition(disc("e", 0.01), holes, length("turn", 1e-3))
    assert told(figure.pushes()) == {
        "e": near(0.0, 0.02, 0.0),
        "size": near(0.0, 0.012, 0.0),
        "turn": near(0.0, 2.0 * 25.0 * 1e-3, 0.0),
        "wave": near(0.0, 2.0 * 25.0 * 1e-4, 0.0),
        "angle": near(0.0, 2.0 * 25.0 * 3e-5, 0.0),
        "some": near(0.0, 2.0 * 25.0 * 3e-5 * 0.6, 0.0),
        "xy": near(0.0, 2.0 * 0.004, 0.0),
        "deep": near(0.0, 2.0 * 0.002, 0.0),
        "drift": near(0.0, 2.0 * 25.0 * 2e-4 * 0.7, 0.0),
    }
    worst = figure.base() + sum(p.up for p in figure.pushes())
    values = figure.sample(Draws(300))
    assert values.max() <= worst
    draws = Draws(7)
    vectors = figure.vectors(draws)
    there = np.exp(1j * teeth.angles(holes))
    arcs = draws.arcs(holes) + 25.0 * draws.real(length("turn", 1e-3))[:, None]
    out = draws.radials(holes) + draws.real(length("size", 0.006))[:, None]
    assert vectors == pytest.approx(draws.account(figure.offset)[:, None] + (out + 1j * arcs) * there, rel=1e-5)
    assert figure.sample(Draws(7)) == pytest.approx(2.0 * np.abs(vectors).max(axis=1))


def test_chords_and_circle_of_holes_by_hand() -> None:
    """Six holes on 30 mm: a step counts cos 30, errors outwards of two sin 30 each; 0.01 on the radius is 0.01 on a chord."""
    cos, sin = math.cos(math.pi / 6), 0.5
    size = real(0.01) + length("size", 0.004)
    plain = HoleChord(Pattern(6, 30.0, radial=size))
    assert plain.base() == pytest.approx(0.01)
    assert told(plain.pushes()) == {"size": near(0.0, 0.004, 0.0)}
    rounding, out = (0.0, 1e-4, 3e-4, 0.0, 0.0, 0.0), (0.0, 0.002, 0.006, 0.0, -0.03, 0.0)
    assert HoleChord(Pattern(6, 30.0, rounding=rounding)).base() == pytest.approx(cos * 30.0 * 3e-4)
    arcs = [30.0 * r for r in rounding]
    steps = [abs(sin * (out[j] + out[j - 1]) + cos * (arcs[j] - arcs[j - 1]) + 0.001) for j in range(6)]
    known = Pattern(6, 30.0, rounding=rounding, outwards=out, radial=real(0.001))
    assert HoleChord(known).base() == pytest.approx(max(steps))
    assert HoleChord(Pattern(6, 30.0, rounding=rounding, radial=real(-0.01))).base() == pytest.approx(
        0.01 + cos * 0.009
    )
    assert float(HoleChord(known).sample(Draws(3))[0]) == pytest.approx(max(steps), rel=1e-4)
    wave, drift = Cause("wave", "disc", high=1e-4), Cause("drift", "length", high=2e-4)
    loose = Pattern(6, 30.0, periodic=(Periodic(wave, 8), Periodic(Cause("none", "disc", high=1.0), 6)),
                    shaped=(Shaped(drift, (0.0, 0.1, 0.2, 0.3, 0.4, 0.5)),),
                    scatter=(Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
                             Scatter(Cause("own", "length", high=1e-5), "angle", 1e-5)))  # fmt: skip
    assert told(HoleChord(loose).pushes()) == {
        "wave": near(0.0, cos * 30.0 * 2.0 * math.sin(math.pi / 3) * 1e-4, 0.0),
        "deep": near(0.0, 0.002, 0.0),
        "own": near(0.0, cos * 2.0 * 30.0 * 1e-5, 0.0),
        "drift": near(0.0, cos * 30.0 * 0.5 * 2e-4, 0.0),
    }
    circle = PitchCircle(
        Pattern(
            6,
            30.0,
            radial=size,
            outwards=out,
            scatter=(
                Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
                Scatter(Cause("own", "length", high=1e-5), "angle", 1e-5),
                Scatter(
                    Cause("xy", "length", high=0.003),
                    "coordinate",
                    0.003,
                    around=(0.0,) * 6,
                    outward=(1, -0.5, 0, 0.5, -1, 0),
                ),
            ),
        )
    )
    assert circle.base() == pytest.approx(2.0 * (0.01 + sum(out) / 6.0))
    assert told(circle.pushes()) == {
        "size": near(0.008, 0.008, 0.0), "deep": near(0.004, 0.004, 0.0), "xy": near(0.003, 0.003, 0.0)
    }  # fmt: skip
    draws = Draws(5)
    assert circle.sample(Draws(5)) == pytest.approx(
        2.0 * (draws.radials(circle.pattern).mean(axis=1) + draws.real(size))
    )


# -- teeth -------------------------------------------------------------------------------------------------------------


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


def test_holes_on_a_larger_circle_stand_off_with_their_shift() -> None:
    """Circle 0.01 larger, shifted by 0.003 to 0 deg: hole 1 stands 0.013 out, hole 3 only 0.007."""
    holes = Pattern(4, 25.0, radial=real(0.01))
    assert HolePosition(real(0.003), holes, None).base() == pytest.approx(2.0 * 0.013)
    one = HolePosition(real(0.003), Pattern(3, 25.0, radial=real(0.01)), None)
    assert one.base() == pytest.approx(2.0 * 0.013)
    assert HolePosition(real(-0.003), Pattern(3, 25.0, radial=real(0.01)), None).base() == pytest.approx(
        2.0 * abs(0.01 * cmath.exp(2j * math.pi / 3) - 0.003)
    )
    assert float(one.sample(Draws(2))[0]) == pytest.approx(0.026, rel=1e-5)


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_the_chord_that_is_most_off_takes_steps_and_depths_with_their_own_share(sign: float) -> None:
    """Five holes on 30 mm: settings step by 9 um, both holes 4 um deeper together, the circle 2 um larger: one sum a chord."""
    rounding, out = (0.0, sign * 3e-4, 0.0, 0.0, 0.0), (0.001, 0.003, -0.002, 0.0, 0.0)
    cos, sin = math.cos(math.pi / 5), math.sin(math.pi / 5)
    steps = [sign * 0.009, -sign * 0.009, 0.0, 0.0, 0.0]  # from each hole to the next
    both = [0.004, 0.001, -0.002, 0.0, 0.001]
    wanted = max(abs(2.0 * sin * 0.001 + sin * b + cos * s) for b, s in zip(both, steps, strict=True))
    ring = Pattern(5, 30.0, rounding=rounding, outwards=out, radial=real(0.001))
    assert HoleChord(ring).base() == pytest.approx(wanted)
    assert float(HoleChord(ring).sample(Draws(2))[0]) == pytest.approx(wanted, rel=1e-5)


def test_gaps_of_no_known_depth_have_no_base_but_their_offset() -> None:
    assert ToothRunOut(disc("e", 0.01), Pattern(4, 20.0), 1.5).base() == 0.0
    assert ToothRunOut(real(0.002), Pattern(4, 20.0), 1.5).base() == pytest.approx(1.5 * 2.0 * 0.002)
    assert PitchCircle(Pattern(4, 20.0)).base() == 0.0
    assert HoleChord(Pattern(4, 20.0)).base() == 0.0
