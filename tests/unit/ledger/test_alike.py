"""Which causes and patterns are drawn alike, and that what is handed over is what would be drawn. Invented values. mm, rad."""

from __future__ import annotations

import numpy as np
import pytest

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws, _alike, _divided_alike
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.route import (
    Pattern,
    Periodic,
    Scatter,
    Shaped,
)


def test_causes_are_alike_in_all_that_is_drawn() -> None:
    plain = Cause("a", "clearance-disc", high=2.0, low=1.0, spread=0.5, mean=1j, pair="p")
    assert _alike(
        plain, Cause("a", "clearance-disc", 10, high=2.0, low=1.0, spread=0.5, mean=1j, pair="p", rests_on="x")
    )
    for other in (
        Cause("b", "clearance-disc", high=2.0, low=1.0, spread=0.5, mean=1j, pair="p"),
        Cause("a", "clearance-ring", high=2.0, low=1.0, spread=0.5, mean=1j, pair="p"),
        Cause("a", "clearance-disc", high=2.1, low=1.0, spread=0.5, mean=1j, pair="p"),
        Cause("a", "clearance-disc", high=2.0, low=1.1, spread=0.5, mean=1j, pair="p"),
        Cause("a", "clearance-disc", high=2.0, low=1.0, spread=0.6, mean=1j, pair="p"),
        Cause("a", "clearance-disc", high=2.0, low=1.0, spread=0.5, mean=2j, pair="p"),
        Cause("a", "clearance-disc", high=2.0, low=1.0, spread=0.5, mean=1j, pair="q"),
    ):
        assert not _alike(plain, other)
    point = Cause("h", "high-point", of=Account.of(plain))
    assert not _alike(point, point)


def test_patterns_are_alike_in_all_that_dividing_does() -> None:
    wave, drift, own = Cause("w", "disc", high=1.0), Cause("d", "length", high=1.0), Cause("s", "length", high=1.0)

    def ring(**more: object) -> Pattern:
        kept: dict[str, object] = {
            "count": 4, "radius": 9.0, "periodic": (Periodic(wave, 3),), "shaped": (Shaped(drift, (0.0, 1.0, 2.0, 3.0)),),
            "scatter": (Scatter(own, "angle", 1.0),),
        }  # fmt: skip
        return Pattern(**{**kept, **more})  # type: ignore[arg-type]

    assert _divided_alike(ring(), ring(pressure_angle=0.3))
    for more in (
        {"count": 5}, {"radius": 9.1}, {"turn": -1}, {"start": 0.1}, {"rounding": (1.0,) * 4}, {"outwards": (1.0,) * 4},
        {"periodic": (Periodic(wave, 2),)}, {"periodic": (Periodic(drift, 3),)}, {"periodic": ()},
        {"shaped": (Shaped(drift, (0.0, 1.0, 2.0, 3.1)),)}, {"shaped": ()},
        {"scatter": (Scatter(own, "radial", 1.0),)}, {"scatter": (Scatter(own, "angle", 1.1),)},
        {"scatter": (Scatter(own, "angle", 1.0, around=(1.0,) * 4),)},
        {"scatter": (Scatter(own, "angle", 1.0, outward=(1.0,) * 4),)},
        {"scatter": (Scatter(own, "angle", 1.0, either=True),)},
        {"scatter": (Scatter(own, "angle", 1.0, groups=(0, 0, 1, 1)),)},
        {"scatter": (Scatter(own, "angle", 1.0),) * 2},
    ):  # fmt: skip
        assert not _divided_alike(ring(), ring(**more)), more


def test_what_is_handed_over_is_what_would_be_drawn() -> None:
    own = Scatter(Cause("s", "length", high=0.1), "coordinate", 0.1, around=(1.0,) * 4, outward=(0.5,) * 4)
    a, b = (Tooth(Account.of(Cause("e", "disc", high=h)), Pattern(4, 9.0, scatter=(own,)), flank=False, stepwise=False)
            for h in (1.0, 2.0))  # fmt: skip
    source = Draws(10)
    source.arcs(b.pattern)
    source.radials(b.pattern)
    source.account(b.offset)
    mine = Draws(10)
    mine.take_over(source, a, b)
    assert mine.arcs(a.pattern) is source.arcs(b.pattern)
    assert mine.radials(a.pattern) is source.radials(b.pattern)
    assert np.abs(mine.account(a.offset)) == pytest.approx(np.abs(source.account(b.offset)) / 2.0)
    same = Draws(10)
    same.take_over(source, b, b)
    (cause,) = b.offset.terms
    assert same.cause(cause) is source.cause(cause)
    source.forget()
    assert not source._causes and not source._arcs and not source._radials and not source.memo
    other = Tooth(a.offset, Pattern(4, 9.5, scatter=(own,)), flank=False, stepwise=False)
    anew = Draws(10)
    source.arcs(b.pattern)
    anew.take_over(source, other, b)
    assert anew.arcs(other.pattern) is not source.arcs(b.pattern)
