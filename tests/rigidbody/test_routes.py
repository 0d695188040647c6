"""Whole random routes: the simulation against the written first-order equations; it knows nothing of the package."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from . import measure
from .bench import UM
from .first_order import Account
from .machining import run
from .random_routes import LEVER, any_route, random_route, second_order
from .route import (
    CentredAndSquared,
    Join,
    Setup,
)


def test_random_routes_repeat_and_vary() -> None:
    same = [any_route(np.random.default_rng(7)) for _ in range(2)]
    assert same[0] == same[1]
    seen: set[str] = set()
    rng = np.random.default_rng(11)
    for _ in range(60):
        route = any_route(rng)
        made = {f"{p.name}.{e.surface}" for p in route.parts for e in p.existing}
        assert 2 <= len([s for s in route.steps if isinstance(s, Setup)]) <= 6
        for step in route.steps:
            seen.add(step.kind)
            if isinstance(step, Join):
                assert {step.outer, step.inner, step.seat.on, step.seat.against} <= made
                seen |= {step.square.kind, f"seat {step.seat.touch}", f"way {step.way}"}
                continue
            hold = step.hold
            squares = {hold.square.on} if isinstance(hold, CentredAndSquared) else set()
            centres = [hold.centre] if isinstance(hold, CentredAndSquared) else [hold.first, hold.second]
            held = squares | {c.on for c in centres}
            held |= {place.on for place in (step.stop, step.clock) if hasattr(place, "on")}
            cut = {c.surface for c in step.cuts}
            assert held <= made
            assert not held & cut
            made |= cut
            seen |= {hold.kind, step.stop.kind, step.clock.kind, f"looks {step.looks_at_tool}"}
            seen |= {c.by.kind for c in centres} | {c.kind for c in step.cuts}
            seen |= {hold.square.by.kind} if isinstance(hold, CentredAndSquared) else set()
    assert seen == {
        "setup", "join", "bore squares", "face squares", "seat ring", "seat point", "way 1", "way -1",
        "centred and squared", "two planes", "point stop", "ring stop", "no stop", "clock", "no clock",
        "looks 1", "looks -1", "offset", "radial dial", "pushed", "lean", "face dial", "turn", "cut teeth", "drill",
    }  # fmt: skip


def test_scaling_a_route_multiplies_its_errors_and_nothing_else() -> None:
    route = any_route(np.random.default_rng(3))
    nothing = run(route.scaled(0.0))
    for question, answer in measure.answers(nothing, route.scaled(0.0)).items():
        assert answer == pytest.approx(np.zeros_like(answer), abs=1e-9), question


def test_the_written_first_order_equations_agree_with_the_simulation() -> None:
    rng = np.random.default_rng(2024)
    for number in range(25):
        route = random_route(rng)
        allowed = 1.2 * second_order(route) + 1e-8  # mm
        account = Account(route)
        for question, exact in measure.answers(run(route), route).items():
            lever = LEVER.get(question.kind, 1.0)
            wrong = float(np.max(np.abs(account.answer(question) - exact))) * lever
            assert wrong <= allowed, f"route {number}, {question}: {wrong / UM:.4f} um, allowed {allowed / UM:.4f} um"


def test_nothing_here_knows_the_package_under_test() -> None:
    forbidden = "setup" + "check"
    for source in Path(__file__).parent.glob("*.py"):
        assert forbidden not in source.read_text(encoding="utf-8"), source.name
