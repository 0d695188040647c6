"""Heat over time: the curves pass through the numbers that the review's heating plan prints."""

from __future__ import annotations

import pytest

from setupcheck.flow import Review
from setupcheck.jobfile.setups import Join
from setupcheck.quantities.book import Known, Scope
from setupcheck.report.pictures import heating
from setupcheck.report.text import as_text

from .sheets import JOBS, SHIPPED, WHEEL, is_a_clear_picture, judged, named, said

BEARING = JOBS / "bearing-ring-seat.yaml"
COLD = ("setups.30.join.heat", "{carry: 5 s, shaft: -150 degC, cold_by: liquid-nitrogen, cold_error: 5 K}")
PRESSED = ("setups.20.join.heat", "{carry: 5 s, shaft: -80 degC, cold_by: dry-ice}")
HEATED = {
    "bearing-ring-seat": ["heating-30"],
    "coupling-hub": ["heating-50"],
    "rotator-worm-wheel": ["heating-70"],
    "spindle-nose-ring": ["heating-30"],
    "wheel-on-spindle": ["heating-30"],
}


def joint(found: Review) -> tuple[Scope, Join]:
    scope = next(iter(found.book.instances("join")))
    assert isinstance(scope.node, Join)
    return scope, scope.node


def number(found: Review, name: str) -> float:
    answer = found.book.get(name, joint(found)[0])
    assert isinstance(answer, Known), name
    return float(answer.value)  # type: ignore[arg-type]


@pytest.mark.parametrize("job", SHIPPED, ids=lambda p: p.stem)
def test_each_shipped_joint_with_heat_has_a_clear_picture_and_no_other_has(job):  # type: ignore[no-untyped-def]
    found = judged(job)
    shown = named(found, "heating")
    assert HEATED.get(job.stem, []) == list(shown)
    for one in shown.values():
        is_a_clear_picture(one.draw())


@pytest.mark.parametrize("job", [j for j in SHIPPED if j.stem in HEATED], ids=lambda p: p.stem)
def test_the_curve_passes_through_the_numbers_of_the_plan(job):  # type: ignore[no-untyped-def]
    found = judged(job)
    scope, join = joint(found)
    made = heating.course(found, scope, join)
    assert made.hub is not None and made.shaft is not None and made.carry is not None
    assert number(found, "heat.at_shaft") == pytest.approx(made.hub.at(made.carry, made.air), abs=1e-9)
    assert number(found, "heat.shaft_at") == pytest.approx(made.shaft.at(made.carry, made.air), abs=1e-9)
    assert made.wanted == number(found, "heat.carry_allowed")
    if made.shaft.ring is None:  # a shaft that keeps its temperature: the hub alone closes the play
        assert number(found, "heat.needed") == pytest.approx(made.hub.at(made.wanted, made.air), abs=0.05)
        assert made.bite is not None
        assert number(found, "heat.bites_at") == pytest.approx(made.hub.at(made.bite, made.air), abs=0.05)


def test_over_the_shaft_the_curves_begin_where_the_way_ends_and_last_as_long_as_the_plan_says() -> None:
    found = judged(WHEEL)
    scope, join = joint(found)
    made = heating.course(found, scope, join)
    rows = heating.closing(found, scope, join, made)
    assert (made.carry, number(found, "heat.at_shaft"), 20.0) == pytest.approx(rows[0])
    assert rows[-1][0] - rows[0][0] == pytest.approx(number(found, "heat.window"))
    assert rows[-1][1] < rows[0][1] and rows[-1][2] > rows[0][2]


def test_the_words_are_those_of_the_printed_plan() -> None:
    found = judged(WHEEL)
    shown = said(is_a_clear_picture(named(found, "heating")["heating-70"].draw()))
    printed = " ".join(as_text(found).split())
    for told in ("139 degC", "165 degC", "185 degC", "200 degC", "164 degC", "319 s", "1457 s", "11 s", "85 degC"):
        assert told in shown and told in printed, told
    assert "Caution: The hub looks cold and burns in seconds" in shown


@pytest.mark.parametrize(
    ("job", "change", "says"),
    [
        (WHEEL, ("setups.70.join.heat", "{hub: 175 degC, by: oven}"), "open: fill setups.70.join.heat.carry"),
        (WHEEL, ("setups.70.join.heat", "{by: oven, carry: 10 s}"), "open: fill setups.70.join.heat.hub"),
        (WHEEL, ("parts.wheel.material", "unobtainium"), "open: fill parts.wheel.material"),
        (WHEEL, ("setups.70.join.heat", "{hub: 100 degC, by: oven, oven_error: 5 K, carry: 10 s}"), "TOO COLD"),
        (WHEEL, ("setups.70.join.heat.carry", "0 s"), "0 s: at the shaft"),
        (BEARING, COLD, "hub, not heated"),
        (JOBS / "pressed-bush.yaml", PRESSED, "-70 degC shaft at first"),
        (
            JOBS / "pressed-bush.yaml",
            ("setups.20.join.heat", "{cold_by: dry-ice}"),
            "open: fill setups.20.join.heat.shaft",
        ),
    ],
)
def test_what_is_missing_or_odd_is_said_on_a_clear_picture(job, change, says):  # type: ignore[no-untyped-def]
    (one,) = named(judged(job, change), "heating").values()
    assert says in said(is_a_clear_picture(one.draw()))


def test_a_joint_with_play_or_without_heat_has_no_picture() -> None:
    play = ("parts.spindle.surfaces.journal.diameter", "31.9 ±0.003")
    assert {} == named(judged(WHEEL, play), "heating")
    assert {} == named(judged(JOBS / "pressed-bush.yaml"), "heating")


def test_two_draws_give_the_same_bytes() -> None:
    first, second = (named(judged(BEARING), "heating")["heating-30"].draw() for _ in range(2))
    assert first == second
