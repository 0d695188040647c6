"""Each figure's base, pushes and what it leaves open by hand; laws of the draws by their moments. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account, face_reading_to_lean, fim_to_eccentricity, real
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.combine import Draws, Ends, _chance, _nearer_end, _quantile, combine
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

ALPHA = math.radians(20.0)


def disc(name: str, high: float, mean: complex = 0j) -> Account:
    return Account.of(Cause(name, "disc", high=high, mean=mean))


def length(name: str, high: float, mean: float = 0.0) -> Account:
    return Account.of(Cause(name, "length", high=high, mean=mean + 0j))


def one_sided(name: str, high: float) -> Account:
    return Account.of(Cause(name, "one-sided", high=high))


def open_one(name: str) -> Account:
    return Account.of(Cause(name, "undetermined", missing=f"path.{name}"))


def unknown(name: str) -> Cause:
    return Cause(name, "undetermined", missing=f"path.{name}")


def told(pushes: list[Push]) -> dict[str, tuple[float, float, float]]:
    return {p.cause.key: (p.down, p.up, p.known) for p in pushes}


def near(*values: float) -> object:
    return pytest.approx(values, abs=1e-12)


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


# -- combination -----------------------------------------------------------------------------------------------------


def test_root_sum_squares_of_a_vector_stands_about_what_is_known() -> None:
    """Known 3 along x, bounds 4 and 12 (factor 1): rss is hypot(3, 4, 12) = 13, worst 19."""
    figure = Vector((disc("a", 4.0, 3.0 + 0j) + disc("b", 12.0),), 1.0)
    found = combine(figure, Draws(100), low=None, high=20.0, confidence=0.95)
    assert (found.worst.low, found.worst.high) == (0.0, pytest.approx(19.0))
    assert (found.rss.low, found.rss.high) == (0.0, pytest.approx(13.0))
    assert (found.base, found.end, found.chance, found.chance_error) == (0.0, "high", 1.0, 0.0)
    assert [(s.cause.key, s.worst, s.share) for s in found.shares] == [
        ("b", pytest.approx(12.0), pytest.approx(12 / 19)), ("a", pytest.approx(7.0), pytest.approx(7 / 19))
    ]  # fmt: skip
    # stock of 50 less that vector: known 47, below it the root of the squares, above it as far as nothing at all
    stock = combine(Stock(50.0, figure.accounts), Draws(100), low=0.0, high=None, confidence=0.95)
    assert (stock.worst.low, stock.worst.high) == pytest.approx((31.0, 50.0))
    assert stock.rss.low == pytest.approx(47.0 - math.hypot(4.0, 12.0))
    assert stock.rss.high == pytest.approx(50.0)
    assert stock.end == "low"


def test_the_end_that_counts_is_the_nearer_to_its_limit() -> None:
    worst = Ends(2.0, 8.0)
    wanted = {(0.0, 9.0): "high", (1.5, 9.0): "low", (1.0, 9.0): "high", (None, 9.0): "high", (0.0, None): "low",
              (None, None): "high", (3.0, 8.5): "low", (3.0, 6.0): "high"}  # fmt: skip
    assert {limits: _nearer_end(worst, *limits) for limits in wanted} == wanted
    assert (worst.within(1.0), worst.within(5.0), worst.within(9.0)) == (2.0, 5.0, 8.0)


def test_chances_of_limits_by_counting() -> None:
    """Trials 1 .. 10 of a figure of one value: limits themselves are met."""
    values = np.arange(1.0, 11.0)
    wide = Ends(0.0, 11.0)
    assert _chance(values, values, wide, None, None) == (None, None)
    for low, high, p in ((None, 7.0, 0.7), (4.0, None, 0.7), (4.0, 7.0, 0.4), (None, 6.5, 0.6)):
        assert _chance(values, values, wide, low, high) == (p, pytest.approx(math.sqrt(p * (1.0 - p) / 10.0)))
    assert _chance(values, values + 2.0, wide, 4.0, 9.0)[0] == pytest.approx(0.4)  # 4 .. 7 whose largest is 6 .. 9
    assert _chance(values, values, wide, None, 10.5) == (1.0, pytest.approx(0.1))  # one trial of ten
    assert _chance(values, values, wide, None, 0.5) == (0.0, pytest.approx(0.1))
    for low, high in ((None, 11.0), (0.0, None), (0.0, 11.0)):
        assert _chance(values, values, wide, low, high) == (1.0, 0.0)
    for low, high in ((None, 10.99), (0.01, None), (0.01, 11.0), (0.0, 10.99)):
        assert _chance(values, values, wide, low, high)[1] != 0.0


def test_a_quantile_lies_between_its_neighbours() -> None:
    assert [_quantile(np.array([1.0, 2.0, 4.0]), q) for q in (0.0, 0.25, 0.5, 0.75, 1.0)] == [1.0, 1.5, 2.0, 3.0, 4.0]
    assert _quantile(np.array([7.0]), 0.4) == 7.0


def test_both_rows_of_a_turn_have_their_own_end() -> None:
    figure = OverATurn(length("l", 1.0), disc("e", 0.5), 1.0)
    found = combine(figure, Draws(2000), low=-1.2, high=1.2, confidence=0.9)
    low, high = figure.sample(Draws(2000))
    assert (found.likely.low, found.likely.high) == pytest.approx((np.quantile(low, 0.05), np.quantile(high, 0.95)))
    assert found.chance == pytest.approx(float(((low >= -1.2) & (high <= 1.2)).mean()))
    one = combine(figure, Draws(2000), low=None, high=1.2, confidence=0.9)
    assert one.likely.high == pytest.approx(np.quantile(high, 0.9))
    assert one.chance == pytest.approx(float((high <= 1.2).mean()))


# -- laws ------------------------------------------------------------------------------------------------------------

MANY = Draws(20_000)
BEYOND = 0.0027
"""Share of a two-dimensional Gaussian that is cut off: E r^2 up to c is 2 - q c^2 / (1 - q) with q = exp(-c^2 / 2)."""


@pytest.mark.parametrize(
    ("cause", "square", "most"),
    [
        (Cause("1", "disc", high=2.0), 2.0, 2.0),  # half of r^2
        (Cause("2", "ring", high=3.0), 9.0, 3.0),
        (Cause("3", "clearance-disc", low=2.0, high=2.0), 0.5, 1.0),
        (Cause("4", "clearance-ring", low=2.0, high=4.0), (8.0 - 1.0) / 3.0, 2.0),  # mean of w^2 over 1 .. 2
        (Cause("5", "rectangle", low=1.0, high=3.0), 1.0 / 3.0 + 9.0 / 3.0, math.hypot(1.0, 3.0)),
        (Cause("6", "length", high=3.0), 3.0, 3.0),
        (Cause("7", "gauss", spread=2.0), 4.0 * 0.9733, 6.0),  # cut at three: 1 - 6 phi(3) / 0.9973
        (Cause("8", "one-sided", high=3.0), 3.0, 3.0),
        (
            Cause("9", "blur", spread=1.0),
            2.0 - BEYOND * TRUNCATION_2D**2 / (1.0 - BEYOND),
            TRUNCATION_2D,
        ),
        (Cause("10", "ring", high=3.0, spread=0.5), 9.0 + 0.25 * 0.9733, 3.0 + TRUNCATION * 0.5),
    ],
    ids=lambda x: x.law if isinstance(x, Cause) else "",
)
def test_draws_have_the_mean_square_and_the_bound_of_their_law(cause: Cause, square: float, most: float) -> None:
    x = MANY.cause(cause)
    size = np.abs(x)
    assert float((size.astype(float) ** 2).mean()) == pytest.approx(square, rel=0.03)
    assert cause.bound == pytest.approx(most)
    assert size.max() <= most * (1.0 + 1e-6)
    if not cause.is_one_sided:
        assert abs(complex(x.mean())) <= 4.0 * math.sqrt(square / 20_000)
    if cause.law == "rectangle":
        assert np.abs(x.real).max() <= 1.0 < np.abs(x.imag).max() <= 3.0


def test_a_mean_is_added_to_what_is_drawn_and_planes_share_their_play() -> None:
    plain, moved = Cause("m", "disc", high=1.0), Cause("m", "disc", high=1.0, mean=2.0 - 3.0j)
    assert Draws(9).cause(moved) - Draws(9).cause(plain) == pytest.approx(np.full(9, 2.0 - 3.0j), abs=1e-6)
    level, lifted = Cause("n", "length", high=1.0), Cause("n", "length", high=1.0, mean=5.0 + 0j)
    assert Draws(9).cause(lifted) - Draws(9).cause(level) == pytest.approx(np.full(9, 5.0), abs=1e-6)
    one, other = (Cause(n, "clearance-ring", low=0.1, high=0.9, pair="fit") for n in ("near", "far"))
    draws = Draws(40)
    assert np.abs(draws.cause(one)) == pytest.approx(np.abs(draws.cause(other)), rel=1e-5)
    assert np.abs(draws.cause(Cause("alone", "clearance-ring", low=0.1, high=0.9))) != pytest.approx(
        np.abs(draws.cause(one)), rel=1e-3
    )
    lone = Cause("point", "high-point", of=disc("under", 0.3))
    assert draws.cause(lone) == pytest.approx(np.abs(draws.account(disc("under", 0.3))))
    with pytest.raises(ValueError, match="undetermined and has no value"):
        draws.cause(unknown("u"))


def test_accounts_are_drawn_as_they_are_written() -> None:
    """a X + b conj(X) + constant; its real part for a length."""
    v, real_one = Cause("v", "disc", high=1.0, mean=0.2j), Cause("l", "length", high=1.0)
    account = Account(3.0 + 4.0j, {v: (2.0 + 1.0j, 0.5 - 3.0j), real_one: (1.0 + 2.0j, 0.5j)})
    draws = Draws(30)
    x, y = draws.cause(v).astype(complex), draws.cause(real_one).astype(float)
    wanted = 3.0 + 4.0j + (2.0 + 1.0j) * x + (0.5 - 3.0j) * x.conj() + (1.0 + 2.5j) * y
    assert draws.account(account) == pytest.approx(wanted, abs=1e-5)
    assert draws.real(account) == pytest.approx(wanted.real, abs=1e-5)
    for only in ((2.0 + 1.0j, 0j), (0j, 0.5 - 3.0j)):
        alone = Account(0j, {v: only})
        assert draws.account(alone) == pytest.approx(only[0] * x + only[1] * x.conj(), abs=1e-6)


def test_each_place_draws_within_its_own_bound() -> None:
    ring = Pattern(4, 20.0)
    plain = Draws(4000).scatter(Scatter(Cause("s", "length", high=0.1), "angle", 0.1), ring)
    assert plain.shape == (4000, 4)
    assert np.abs(plain).max(axis=0) == pytest.approx([2.0] * 4, rel=0.01)
    assert (plain.astype(float) ** 2).mean(axis=0) == pytest.approx([4.0 / 3.0] * 4, rel=0.05)
    assert np.abs(plain.mean(axis=0)).max() < 0.1
    some = Draws(4000).scatter(
        Scatter(Cause("s", "length", high=0.1), "tangential", 0.1, around=(0.5, -1.0, 0.0, 2.0)), ring
    )
    assert np.abs(some).max(axis=0) == pytest.approx([0.05, 0.1, 0.0, 0.2], rel=0.01)
    assert some[:, 1] == pytest.approx(-plain[:, 1] / 20.0, rel=1e-5)
    shared = Draws(50).scatter(Scatter(Cause("s", "length", high=0.1), "tangential", 0.1, groups=(1, 0, 1, 0)), ring)
    assert list(shared[:, 0]) == list(shared[:, 2]) and list(shared[:, 1]) == list(shared[:, 3])
    assert list(shared[:, 0]) != list(shared[:, 1])
    either = Draws(2000).scatter(Scatter(Cause("s", "length", high=0.1), "tangential", 0.1, either=True), ring)
    assert np.unique(np.round(either, 6)) == pytest.approx([-0.1, 0.1])
    assert abs(either.mean()) < 0.01
    both = Scatter(Cause("c", "length", high=0.1), "coordinate", 0.1, around=(1.0,) * 4, outward=(0.5, -0.5, 1.0, 0.0))
    draws = Draws(20)
    round_, out = draws.scatter(both, ring), draws.scatter(both, ring, outward=True)
    assert out == pytest.approx(round_ * np.array([0.5, -0.5, 1.0, 0.0]), abs=1e-8)
    deep = Pattern(
        4, 20.0, scatter=(both, Scatter(Cause("r", "length", high=0.1), "radial", 0.1)), outwards=(1.0, 2.0, 3.0, 4.0)
    )
    rest = draws.radials(deep) - out - draws.scatter(deep.scatter[1], deep)
    assert rest == pytest.approx(np.tile([1.0, 2.0, 3.0, 4.0], (20, 1)), abs=1e-5)


def test_readings_of_an_indicator_by_hand() -> None:
    assert fim_to_eccentricity(0.03) == 0.015
    assert face_reading_to_lean(0.03, 60.0) == 0.0005
    for across in (0.0, -1.0, math.inf, math.nan):
        with pytest.raises(ValueError, match="has no size"):
            face_reading_to_lean(0.03, across)


def test_a_cause_knows_its_name_its_size_and_what_is_left_after_a_turn() -> None:
    cause = Cause("op 10, chuck", "ring", 10, high=0.2, low=0.1, spread=0.01, mean=0.3 + 0.1j, paths=("a.b", "c"))
    assert cause.identity == "op 10, chuck [a.b]"
    assert Cause("k", "disc", paths=("a.b",), shared=True).identity == Cause("k", "disc").identity == "k"
    bigger = cause.scaled(2.0)
    assert (bigger.high, bigger.low, bigger.spread, bigger.mean) == (0.4, 0.2, 0.01, 0.6 + 0.2j)
    angle = Cause("turn", "ring", 50, high=1.0)
    assert cause.turned_with(angle).key == "op 10, chuck (scatter)" and cause.turned_with(angle).mean == 0j
    kept = Cause("mark", "disc", high=0.1, mean=0.1j, shared=True).turned_with(angle)
    assert (kept.key, kept.mean, kept.high) == ("mark, as put on (op 50)", 0j, 0.1)
    still = Cause("still", "disc", high=0.1)
    assert still.turned_with(angle) is still
    assert (still.low, still.spread, still.mean, still.of, still.op) == (0.0, 0.0, 0j, None, None)
    account = Account.of(cause).turned_by_an_unknown_angle(angle)
    assert account.largest() == pytest.approx(abs(cause.mean) + 0.2 + 3.0 * 0.01)
    assert account.known() == 0j
    assert cmath.isclose(account.terms[angle][0], 0.3 + 0.1j)


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_a_middle_that_counts_outwards_takes_the_larger_side_of_each_cause(sign: float) -> None:
    """Middle 0.01, up by 0.01 at most and down by 0.05: -0.04 .. 0.02, farther below, while the middle stands above."""
    axial = real(0.01 * sign) + one_sided("up", 0.01) * sign - one_sided("down", 0.05) * sign
    figure = MidPlane(axial, Account(), Pattern(6, 40.0))
    assert {p.cause.key: p.up for p in figure.pushes()} == pytest.approx({"up": 0.01, "down": 0.05})
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
