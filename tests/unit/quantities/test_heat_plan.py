"""What a shrink fit needs at the oven: gauge for the hot bore, soak, and where it bites again; by sums on paper."""

from __future__ import annotations

import pytest

from setupcheck.quantities.book import Answer, Known
from tests.unit.report.sample import WHEEL, changed, reviewed


def of(text: str, name: str) -> Answer:
    book = reviewed(text).book
    return book.get(name, book.instances("join")[0])


def value(text: str, name: str) -> float:
    answer = of(text, name)
    assert isinstance(answer, Known)
    return float(str(answer.value))


def test_the_gauge_is_the_largest_journal_and_the_play() -> None:
    assert value(WHEEL, "heat.go_gauge") == pytest.approx(32.033 + 0.032)  # room and shaft at 20 degC


def test_a_chilled_shaft_takes_a_smaller_gauge() -> None:
    cold = changed(WHEEL, ("carry: 12 s", "carry: 0 s, shaft: -12 degC, cold_error: 2 K"))
    # 42CrMo4, 30 K of mild cold, the low end of contraction that is safe for joining: 11.0e-6 /K x 32 mm = 10.56 um,
    # rounded up to a micrometre
    assert value(cold, "heat.go_gauge") == pytest.approx(32.065 - 0.010, abs=1e-6)


def test_the_gauge_follows_the_pair_in_hand() -> None:
    measured = changed(WHEEL, ("diameter: 32.030 ±0.003", "diameter: {measured: 32.026, uncertainty: 0.5 um}"))
    assert value(measured, "heat.go_gauge") == pytest.approx(32.059, abs=1e-6)  # 32.0265 + 0.032, rounded up
    assert value(measured, "heat.needed") < value(WHEEL, "heat.needed")


def test_it_bites_where_the_play_is_used_up() -> None:
    # 139.5 degC gives 32 um of play; 18.5e-6 /K x 32 mm takes 0.592 um for each kelvin
    assert value(WHEEL, "heat.bites_at") == pytest.approx(139.5 - 32.0 / 0.592, abs=0.2)


def test_an_oven_takes_three_minutes_for_each_mm_of_wall_and_induction_none() -> None:
    assert value(WHEEL, "heat.soak") == pytest.approx(3.0 * 60.0 * (114.0 - 32.0) / 2.0)
    assert of(changed(WHEEL, ("by: oven", "by: induction")), "heat.soak") is None


def test_a_pair_near_its_limit_yields_in_the_cold() -> None:
    tight = changed(WHEEL, ("diameter: 32.030 ±0.003", "diameter: 32.038 ±0.003"))
    at = value(tight, "fit.yields_below")
    assert 5.0 < at < 20.0
    colder = changed(tight, ("serves_at: [5 degC, 45 degC]", f"serves_at: [{at + 0.2:.1f} degC, 45 degC]"))
    assert value(colder, "fit.grip_most") <= value(colder, "fit.elastic")
    beyond = changed(tight, ("serves_at: [5 degC, 45 degC]", f"serves_at: [{at - 0.2:.1f} degC, 45 degC]"))
    assert value(beyond, "fit.grip_most") > value(beyond, "fit.elastic")


def test_where_no_usual_cold_does_it_there_is_no_such_temperature() -> None:
    assert of(WHEEL, "fit.yields_below") is None
