"""Worst cases of single gaps by hand, and draws that never pass them. mm, rad."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Figure, alternatives
from setupcheck.ledger.gaps import GapSymmetry, RunOff
from setupcheck.ledger.route import Pattern, Scatter

SIX = Pattern(6, 14.0)
OFF = Account.of(Cause("off", "disc", high=0.004))
FAR = Account.of(Cause("off", "disc", high=0.004)) + Account.of(Cause("far end", "disc", high=0.003))
LEAN = Account.of(Cause("lean", "disc", high=1e-4))
ASIDE = Account.of(Cause("aside", "length", high=0.010)).along(1)
ASKEW = Account.of(Cause("askew", "length", high=5e-5)).along(1)


def worst(figure: Figure) -> float:
    return figure.base() + sum(p.up for p in figure.pushes())


def symmetry(pattern: Pattern = SIX) -> GapSymmetry:
    return GapSymmetry((OFF, FAR), 50.0, ASIDE, ASKEW, pattern)


def test_symmetry_is_twice_the_sum_of_all_at_the_worse_end() -> None:
    assert worst(symmetry()) == pytest.approx(2.0 * (0.004 + 0.003 + 0.010 + 50.0 * 5e-5))


def test_each_end_is_a_place_of_its_own() -> None:
    assert [worst(one) for one in alternatives(symmetry())] == pytest.approx([2 * 0.0165, 2 * 0.0195])


def test_a_shift_of_single_gaps_counts_and_a_turn_of_them_does_not() -> None:
    aside = Scatter(Cause("each", "length", high=0.002), "tangential", 0.002)
    turned = Scatter(Cause("setting", "length", high=1e-3), "angle", 1e-3)
    ring = Pattern(6, 14.0, scatter=(aside, turned))
    assert worst(symmetry(ring)) - worst(symmetry()) == pytest.approx(2.0 * 0.002)


def test_sideways_and_deep_are_over_the_length_and_the_cone_takes_its_cosine_of_a_lean_sideways() -> None:
    cone = math.radians(60.0)
    deep, side = (RunOff(LEAN, ASKEW, 13.0, cone, way, SIX) for way in (True, False))
    assert worst(deep) == pytest.approx(13.0 * (1e-4 + 5e-5))
    assert worst(side) == pytest.approx(13.0 * (0.5e-4 + 5e-5))


def test_a_known_error_of_the_head_is_in_the_base() -> None:
    five_minutes = math.radians(5.0 / 60.0)
    figure = RunOff(Account(), real(-five_minutes) + ASKEW, 13.0, math.radians(23.4), True, SIX)
    assert figure.base() == pytest.approx(0.0189, abs=5e-5)
    assert worst(figure) == pytest.approx(13.0 * (five_minutes + 5e-5))


@pytest.mark.parametrize("count", [1, 2, 5, 6, 20])
@pytest.mark.parametrize("turn", [1, -1])
def test_no_draw_passes_the_worst_case_and_some_come_near_where_gaps_stand_all_round(count: int, turn: int) -> None:
    each = Scatter(Cause("each", "length", high=0.002), "tangential", 0.002)
    ring = Pattern(count, 14.0, turn=turn, scatter=(each,))
    figures = (symmetry(ring), *(RunOff(LEAN, ASKEW, 100.0, 0.4, deep, ring) for deep in (True, False)))
    for figure in figures:
        values = np.asarray(figure.sample(Draws(4000)))
        assert values.min() >= 0.0
        assert values.max() <= worst(figure) * (1.0 + 1e-5)
        if count >= 6:
            assert values.max() > 0.75 * worst(figure)


def test_what_nobody_states_is_named_once() -> None:
    unknown = Account.of(Cause("?", "undetermined", missing="setups.50.travel.beside")).along(1)
    assert GapSymmetry((OFF, FAR), 50.0, ASIDE, unknown, SIX).undetermined() == ("setups.50.travel.beside",)
    assert RunOff(LEAN, unknown, 50.0, 0.0, False, SIX).undetermined() == ("setups.50.travel.beside",)
