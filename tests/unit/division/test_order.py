"""The order of cutting: every place once, first ones far apart, and what a drift makes of it."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.division.order import cutting_order, ranks


@given(st.integers(1, 2000))
def test_every_place_is_cut_once_and_the_first_place_first(count):
    order = cutting_order(count, "spread")
    assert sorted(order) == list(range(1, count + 1))
    assert order[0] == 1


@given(st.integers(3, 2000))
def test_no_two_cuts_of_the_first_rounds_are_neighbours(count):
    """While less than a sixth of the places are cut, none of them lies beside another."""
    early = sorted(cutting_order(count, "spread")[: max(1, count // 6)])
    gaps = [b - a for a, b in zip(early, [*early[1:], early[0] + count], strict=True)]
    assert min(gaps) > 1


@given(st.integers(1, 400), st.integers(1, 400))
def test_after_any_number_of_cuts_no_stretch_is_more_than_twice_as_far_from_one_to_the_next(count, cuts):
    """Halving makes stretches of two lengths, one twice the other; rounding to whole places adds one place at each end."""
    done = sorted(cutting_order(count, "spread")[: min(cuts, count)])
    if len(done) < 5:
        return
    gaps = [b - a for a, b in zip(done, [*done[1:], done[0] + count], strict=True)]
    assert max(gaps) <= 2 * (min(gaps) + 1) + 1


def test_seventy_two_teeth_begin_with_three_thirds_and_their_middles():
    assert cutting_order(72, "spread")[:12] == (1, 25, 49, 13, 37, 61, 7, 31, 55, 19, 43, 67)


def test_a_prime_count_is_spread_as_well():
    assert cutting_order(7, "spread") == (1, 3, 5, 2, 4, 6, 7)


def test_ranks_are_the_order_read_the_other_way():
    assert ranks(4, "in-turn") == (0, 1, 2, 3)
    for count in (1, 2, 5, 24, 97):
        order = cutting_order(count, "spread")
        assert [ranks(count, "spread")[n - 1] for n in order] == list(range(count))


@pytest.mark.parametrize("bad", [(0, "spread"), (8, "random")])
def test_what_is_no_order_is_said(bad):
    with pytest.raises(ValueError, match=r"at least one place|in-turn or spread"):
        cutting_order(*bad)
