"""Ends, chances and likely values by counting, and the laws of the draws by their moments. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account, face_reading_to_lean, fim_to_eccentricity
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.combine import Ends, _chance, _nearer_end, _quantile, combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import (
    OverATurn,
    Stock,
    Vector,
)
from setupcheck.ledger.route import Pattern, Scatter

from .small_causes import disc, length, unknown

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
