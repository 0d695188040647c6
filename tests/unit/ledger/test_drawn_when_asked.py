"""Draws are made when somebody asks, kept for the latest few, and the same again; results are compared and copied."""

from __future__ import annotations

import copy
import pickle

import numpy as np
import pytest

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import Combined, combine
from setupcheck.ledger.draws import DRAWS_KEPT, Draws
from setupcheck.ledger.figures import Vector


def run_out(high: float = 0.01, name: str = "chuck") -> Vector:
    return Vector(
        (Account.of(Cause(name, "disc", high=high)) + Account.of(Cause("turned over", "disc", high=0.004)),), 2.0
    )


def combined(draws: Draws, figure: Vector | None = None, *, high: float = 0.020) -> Combined:
    return combine(figure or run_out(), draws, low=None, high=high, confidence=0.95)


def test_nothing_is_drawn_before_a_likely_value_or_a_chance_is_asked_for() -> None:
    draws = Draws(500)
    found = combined(draws)
    assert found.worst.high > 0.0 and found.shares and found.base == 0.0
    assert not draws._causes
    assert found.chance is not None and 0.0 < found.chance < 1.0
    assert draws._causes


def test_equal_figures_are_equal_and_hash_alike_and_another_limit_is_another_figure() -> None:
    one, same, other = combined(Draws(500)), combined(Draws(500)), combined(Draws(500), high=0.015)
    assert one == same and hash(one) == hash(same)
    assert one.worst == other.worst and one != other
    assert one != one.worst


@pytest.mark.parametrize("copied", [lambda one: pickle.loads(pickle.dumps(one)), copy.copy, copy.deepcopy])
def test_a_copy_says_the_same(copied) -> None:  # type: ignore[no-untyped-def]
    one = combined(Draws(500))
    again = copied(one)
    assert again == one and (again.likely, again.chance, again.chance_error) == (
        one.likely,
        one.chance,
        one.chance_error,
    )


def test_the_values_of_the_latest_few_are_kept_and_let_go_ones_are_the_same_again() -> None:
    first = Draws(500)
    before = run_out().sample(first).copy()
    others = [Draws(500) for _ in range(DRAWS_KEPT)]
    for n, one in enumerate(others):
        assert first._causes, n
        run_out().sample(one)
    assert not first._causes
    assert np.array_equal(run_out().sample(first), before)
    assert not others[0]._causes and others[1]._causes


def test_a_plan_takes_what_was_drawn_by_the_time_it_is_asked_and_is_let_go_too() -> None:
    now, plan = Draws(500), Draws(500)
    measured, planned = run_out(0.006), run_out(0.01)
    then = combine(planned, plan, low=None, high=0.020, confidence=0.95, alike=(now, measured))
    combined(now, measured).drawn()
    assert then.likely == combined(Draws(500), planned).likely
    (turned,) = (cause for cause in plan._causes if cause.key == "turned over")
    assert plan.cause(turned) is now.cause(turned)
    given = Draws(500)
    given.take_over(now, measured, measured)
    others = [Draws(500) for _ in range(DRAWS_KEPT)]
    for one in others:
        assert given._causes
        run_out().sample(one)
    assert not given._causes
