"""Heat of a shrink joint: what the carry takes, what is left, how long it may take, what gap it leaves."""

from __future__ import annotations

import pytest

from setupcheck.physics.carrying import time_to_close
from setupcheck.physics.heating import DULL, Ring, carry_time, cooled_temperature, joining_play
from setupcheck.quantities.book import Open

from .joint_text import RING, answer, changed, finding, number, reviewed

CARRY = "carry: 10 s"


@pytest.mark.parametrize("seconds", [1, 10, 60, 300])
def test_the_carry_loses_what_the_leaf_says_starting_at_the_least_of_the_oven(seconds: int) -> None:
    text = changed((CARRY, f"carry: {seconds} s"))
    lost = 185.0 - cooled_temperature(RING, start=185.0, seconds=seconds, air=20.0)
    assert lost == pytest.approx(number(text, "heat.carry_loss"))
    assert 185.0 - lost == pytest.approx(number(text, "heat.at_shaft"))


def test_a_longer_carry_a_colder_room_and_a_hotter_hub_lose_more() -> None:
    losses = [number(changed((CARRY, f"carry: {s} s")), "heat.carry_loss") for s in (1, 5, 10, 30, 120)]
    assert losses == sorted(losses)
    assert losses[0] > 0.0
    cold = changed(("room: 20 degC", "room: 0 degC"))
    assert number(cold, "heat.carry_loss") > number(changed(), "heat.carry_loss")
    hot = changed(("hub: 190 degC", "hub: 198 degC"))
    assert number(hot, "heat.carry_loss") > number(changed(), "heat.carry_loss")


def test_the_rule_turns_where_the_carry_has_used_up_the_spare_heat() -> None:
    needed = number(changed(), "heat.needed")
    limit = carry_time(RING, start=185.0, until=needed, air=20.0)
    for seconds, verdict in ((limit - 1.0, "pass"), (limit + 1.0, "fail")):
        assert verdict == finding(changed((CARRY, f"carry: {seconds!r} s")), "HEAT-001").verdict


def test_the_spare_is_what_is_left_over_the_need() -> None:
    text = changed()
    assert number(text, "heat.at_shaft") - number(text, "heat.needed") == pytest.approx(number(text, "heat.spare"))


def test_the_window_ends_where_three_tenths_of_the_play_are_left() -> None:
    text = changed()
    at_shaft, needed = number(text, "heat.at_shaft"), number(text, "heat.needed")
    play = joining_play(60.0)
    ours = time_to_close(
        RING,
        Ring(bore=20.0, outside=60.0, length=30.0, density=7830.0, specific_heat=468.0, emissivity=DULL),
        closes=0.7 * play + 18.5e-6 * 60.0 * (at_shaft - needed),
        apart=at_shaft - 20.0,
        gap=play / 2.0,
        expansions=(18.5e-6, 12.7e-6),
    )
    assert ours == pytest.approx(number(text, "heat.window"))
    # a hub that cannot go on at all has no window
    assert answer(changed(("hub: 190 degC", "hub: 100 degC")), "heat.window") is None
    # a chilled shaft needs less heat and takes it sooner away
    chilled = changed(("hub: 190 degC", "hub: 190 degC, shaft: -70 degC, cold_error: 5 K"))
    assert number(chilled, "heat.needed") < needed


def test_a_pressed_hub_has_no_heat_to_judge() -> None:
    pressed = changed(
        ("by: shrink", "by: press"), ("      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}\n", "")
    )
    for name in ("needed", "planned_low", "cap", "carry_loss", "at_shaft", "spare", "window", "shoulder_gap"):
        assert answer(pressed, f"heat.{name}") is None, name


def test_without_its_carry_only_what_rests_on_it_is_open() -> None:
    text = changed((", carry: 10 s", ""))
    for name in ("carry_loss", "at_shaft", "spare", "window"):
        found = answer(text, f"heat.{name}")
        assert isinstance(found, Open)
        assert ("setups.10.join.heat.carry",) == found.missing
    assert number(text, "heat.needed") > 20.0
    assert 200.0 == number(text, "heat.cap")


def test_the_gap_at_the_shoulder() -> None:
    stop = "      square: bore\n      stop: {on: ring.back, against: shaft.shoulder, error: 0 um}\n"
    faces = ("      hub: {", "      back: {kind: face, at: 0, facing: -z, diameter: 85}\n      hub: {")
    text = changed(faces, ("      square: bore\n", stop))
    assert 0.060 * 30.0 / 60.0 == pytest.approx(number(text, "heat.shoulder_gap"))  # U L / D
    held = changed(faces, ("      square: bore\n", stop + "      grips_first: shoulder-end\n"))
    assert 0.0 == number(held, "heat.shoulder_gap")
    assert answer(changed(), "heat.shoulder_gap") is None  # no stop


@pytest.mark.parametrize(("outside", "trapped"), [("from: 0, to: 30", False), ("from: 0, to: 40", True)])
@pytest.mark.parametrize("bore", ["", "made: stock, "], ids=["bored here", "bored as bought"])
@pytest.mark.parametrize("hub", ["", ", made: stock"], ids=["turned here", "turned as bought"])
def test_a_hub_may_trap_air_however_much_of_it_is_bought(outside: str, trapped: bool, bore: str, hub: str) -> None:
    text = changed(("from: 0, to: 10}", f"{outside}{hub}}}"), ("bore: {kind: bore, ", f"bore: {{kind: bore, {bore}"))
    said = {c.id for c in reviewed(text).evaluation.cautions}
    assert trapped == ("sealed-cavity-heat" in said)
