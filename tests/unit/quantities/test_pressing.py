"""A pressed joint is held against its press: force of the tightest pair, dry or oiled, and half as much again in hand."""

from __future__ import annotations

from setupcheck.report.uncomputed import in_lines, uncomputed
from tests.unit.report.sample import WHEEL, changed, loaded, reviewed


def pressed(rating: str) -> str:
    text = changed(WHEEL, ("by: shrink", "by: press"), ("  - op: 70 ", "  - op: 70\n    machine: arbor #"))
    press = f"{{kind: press, rating: {rating}}}" if rating else "{kind: press}"
    return changed(text, ("  lathe-A:  ", f"  arbor: {press}\n  lathe-A:  "))


def verdict(text: str) -> tuple[str, tuple[str, ...]]:
    found = next(f for f in reviewed(text).evaluation.findings if f.rule == "FIT-008")
    return found.verdict, found.missing


def test_a_press_that_is_too_small_fails_and_a_large_one_does_not() -> None:
    assert verdict(pressed("10 kN")) == ("fail", ())
    assert verdict(pressed("200 kN")) == ("pass", ())


def test_a_press_without_a_rating_is_open_and_so_is_no_press() -> None:
    assert verdict(pressed("")) == ("open", ("machines.arbor.rating",))
    assert verdict(changed(WHEEL, ("by: shrink", "by: press"))) == ("open", ("setups.70.machine",))


def test_a_shrink_fit_asks_for_no_press() -> None:
    assert not [f for f in reviewed(WHEEL).evaluation.findings if f.rule == "FIT-008"]


def test_a_rating_that_nothing_is_pressed_with_is_told() -> None:
    idle = changed(pressed("60 kN"), ("by: press", "by: shrink"))
    assert any("rating 60 kN" in line for line in in_lines(uncomputed(loaded(idle))))
    assert not any("rating" in line for line in in_lines(uncomputed(loaded(pressed("60 kN")))))
