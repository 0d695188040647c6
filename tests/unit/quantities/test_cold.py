"""A chilled shaft: its error and its gain, cold alone and cold beside heat, what each opens, how long it lasts."""

from __future__ import annotations

import pytest

from setupcheck.physics.carrying import Body, time_open
from setupcheck.physics.heating import DULL, Ring, cooled_temperature, joining_play
from setupcheck.quantities.book import Known, Open

from .joint_text import RING, answer, changed, finding, number, reviewed, value

HEAT = "heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}"
SEAT = Ring(bore=20.0, outside=60.0, length=30.0, density=7830.0, specific_heat=468.0, emissivity=DULL)
JOURNAL = "seat: {kind: cylinder, diameter: 60 r6,"
EASY = (JOURNAL, "seat: {kind: cylinder, diameter: {nominal: 60, lower: 0.018, upper: 0.022},")
"""Little enough interference for nitrogen alone: 22 um and 60 um of play, 8.5e-6 /K x 60 mm x 216 K give 110 um."""


def heat(said: str, *more: tuple[str, str]) -> str:
    return changed((HEAT, f"heat: {{{said}}}"), *more)


COLD_ALONE = (
    "shaft: -196 degC, cold_by: liquid-nitrogen, cold_error: 3 K, carry: 10 s, room_volume: 60 m3, coolant: 4 l"
)


# -- the error of the cold and what the shaft gains


def test_the_shaft_is_taken_as_warm_as_it_may_be() -> None:
    text = heat("hub: 150 degC, oven_error: 5 degC, carry: 30 s, shaft: -35 degC, cold_by: freezer, cold_error: 3 K")
    ends = cooled_temperature(SEAT, start=-32.0, seconds=30.0, air=20.0)
    assert ends == pytest.approx(number(text, "heat.shaft_at"))
    assert ends + 32.0 == pytest.approx(number(text, "heat.shaft_gain"))
    assert 0.5 < ends + 32.0 < 1.5


def test_what_is_needed_of_the_hub_counts_both() -> None:
    """20 + [60 + 60 um - 8.5e-6/K x 60 mm x (20 - T)] / (17.0e-6/K x 60 mm), T with its error and its gain."""
    text = heat("hub: 150 degC, oven_error: 5 degC, carry: 30 s, shaft: -35 degC, cold_by: freezer, cold_error: 3 K")
    at = number(text, "heat.shaft_at")
    by_hand = 20.0 + (0.060 + 0.060 - 8.5e-6 * 60.0 * (20.0 - at)) / (17.0e-6 * 60.0)
    assert by_hand == pytest.approx(number(text, "heat.needed"))
    exact = heat("hub: 150 degC, oven_error: 5 degC, carry: 0 s, shaft: -35 degC, cold_by: freezer, cold_error: 0 K")
    assert -35.0 == number(exact, "heat.shaft_at")
    assert number(exact, "heat.needed") < number(text, "heat.needed")


@pytest.mark.parametrize(("by", "error"), [("freezer", 5.0), ("dry-ice", 10.0), ("liquid-nitrogen", 5.0)])
def test_a_cold_without_its_error_takes_a_typical_one_and_warns(by: str, error: float) -> None:
    text = heat(f"hub: 150 degC, oven_error: 5 degC, carry: 0 s, shaft: -40 degC, cold_by: {by}")
    found = answer(text, "heat.shaft_at")
    assert isinstance(found, Known)
    assert -40.0 + error == pytest.approx(found.value)
    assert f"{by} temperature error" in found.rests_on
    assert "warn" == finding(text, "HEAT-015").verdict
    assert f"{by} temperature error" in finding(text, "HEAT-001").rests_on
    stated = heat(f"hub: 150 degC, oven_error: 5 degC, carry: 0 s, shaft: -40 degC, cold_by: {by}, cold_error: 2 K")
    assert "pass" == finding(stated, "HEAT-015").verdict


@pytest.mark.parametrize(
    ("said", "keys"),
    [
        ("carry: 5 s, shaft: -40 degC", ("cold_error",)),
        ("carry: 5 s, cold_by: dry-ice, room_volume: 300 m3, coolant: 2 kg", ("shaft",)),
        ("shaft: -40 degC, cold_by: freezer", ("carry",)),
    ],
)
def test_a_cold_that_is_half_stated_is_open_with_the_key(said: str, keys: tuple[str, ...]) -> None:
    found = finding(heat(f"hub: 150 degC, by: oven, oven_error: 5 degC, {said}"), "HEAT-001")
    assert "open" == found.verdict
    assert tuple(f"setups.10.join.heat.{key}" for key in keys) == found.missing


def test_a_shaft_that_nothing_chills_has_the_rooms_temperature_and_gains_nothing() -> None:
    text = changed(("room: 20 degC", "room: 27 degC"))
    assert 27.0 == number(text, "heat.shaft_at")
    assert answer(text, "heat.shaft_gain") is None
    assert answer(text, "heat.cold_error_kind") is None
    warm = heat("hub: 190 degC, oven_error: 5 degC, carry: 10 s, shaft: 35 degC")
    assert 35.0 == number(warm, "heat.shaft_at")


# -- cold alone


def test_by_cold_alone_nothing_asks_for_an_oven() -> None:
    text = heat(COLD_ALONE, EASY)
    rules = {f.rule: f.verdict for f in reviewed(text).evaluation.findings if f.rule.startswith("HEAT")}
    assert {"HEAT-001", "HEAT-003", "HEAT-004", "HEAT-006", "HEAT-010", "HEAT-012", "HEAT-015"} == set(rules)
    assert "open" not in rules.values()
    assert "pass" == rules["HEAT-001"]
    for name in ("planned_low", "planned_high", "carry_loss", "error_kind", "go_gauge", "proved", "bites_at", "soak"):
        assert answer(text, f"heat.{name}") is None, name
    assert 20.0 == number(text, "heat.at_shaft")


@pytest.mark.parametrize("hub", ["hub: 20 degC, ", "hub: 8 degC, "])
def test_a_hub_no_warmer_than_the_room_is_cold_alone(hub: str) -> None:
    text = heat(hub + COLD_ALONE, EASY)
    assert answer(text, "heat.planned_low") is None
    assert min(20.0, float(hub.split()[1])) == number(text, "heat.at_shaft")


@pytest.mark.parametrize("hot", ["by: oven, ", "oven_error: 5 K, ", "read_by: crayon, "])
def test_a_hub_whose_source_of_heat_is_stated_is_meant_to_be_hot(hot: str) -> None:
    found = finding(heat(hot + COLD_ALONE, EASY), "HEAT-001")
    assert "open" == found.verdict
    assert "setups.10.join.heat.hub" in found.missing


def test_without_any_heat_or_cold_the_hubs_heat_is_asked_for() -> None:
    found = finding(heat("carry: 10 s"), "HEAT-001")
    assert "setups.10.join.heat.hub" in found.missing


def test_too_little_cold_fails_and_the_advice_typed_in_clears_it() -> None:
    text = heat(COLD_ALONE, (JOURNAL, JOURNAL.replace("60 r6", "{nominal: 60, lower: 0.030, upper: 0.034}")))
    short = finding(text, "HEAT-003")
    assert "warn" == short.verdict
    less = float(short.remedy.split("take ")[1].split(" um")[0])
    for share, clears in ((1.0, True), (0.9, False)):
        upper = 0.034 - less / 1000.0 * share
        smaller = f"{{nominal: 60, lower: {upper - 0.004:.5f}, upper: {upper:.5f}}}"
        again = heat(COLD_ALONE, (JOURNAL, JOURNAL.replace("60 r6", smaller)))
        assert (finding(again, "HEAT-003").verdict == "pass") is clears


def test_much_too_little_cold_is_told_to_warm_the_hub_too() -> None:
    found = finding(heat(COLD_ALONE), "HEAT-001")
    assert "fail" == found.verdict
    assert found.remedy.startswith("Cold alone does not do it: warm the hub until ")
    wanted = float(found.remedy.split("until ")[1].split(" degC")[0])
    warmed = heat(
        f"hub: {wanted + 6.0} degC, by: oven, oven_error: 5 degC, {COLD_ALONE}".replace("carry: 10 s", "carry: 1 s")
    )
    assert "pass" == finding(warmed, "HEAT-003").verdict


def test_the_cautions_of_heat_are_not_printed_where_nothing_is_hot() -> None:
    said = {c.id for c in reviewed(heat(COLD_ALONE, EASY)).evaluation.cautions}
    assert not said & {"hot-part", "glove-heat-rating", "solvent-before-heat", "heat-above-cap", "sealed-cavity-heat"}
    assert {"liquid-nitrogen-room", "cold-part-and-frost", "cold-brittle-steel", "shrink-seized-halfway"} <= said


# -- what each opens


@pytest.mark.parametrize(
    "said",
    [
        "hub: 190 degC, oven_error: 5 degC, carry: 10 s",
        "hub: 150 degC, oven_error: 5 degC, carry: 20 s, shaft: -35 degC, cold_by: freezer",
        "hub: 110 degC, oven_error: 5 degC, carry: 20 s, shaft: -75 degC, cold_by: dry-ice",
        COLD_ALONE,
        "hub: 190 degC, oven_error: 5 degC, carry: 10 s, shaft: 60 degC",
    ],
)
@pytest.mark.parametrize("room", [5.0, 20.0, 32.0])
def test_both_together_are_held_against_interference_and_play_and_heat_001_says_the_same(
    said: str, room: float
) -> None:
    for journal in (("room: 20 degC", f"room: {room} degC"),), (("room: 20 degC", f"room: {room} degC"), EASY):
        text = heat(said, *journal)
        opens = number(text, "heat.opens_by_heat") + number(text, "heat.opens_by_cold")
        must = number(text, "heat.must_open")
        assert must == pytest.approx(number(text, "fit.interference_most") + joining_play(60.0))
        assert (opens >= must) is (finding(text, "HEAT-001").verdict == "pass")


def test_each_part_opens_by_its_own_expansion() -> None:
    text = heat("hub: 150 degC, oven_error: 5 degC, carry: 20 s, shaft: -75 degC, cold_by: dry-ice, cold_error: 5 K")
    hub, shaft = number(text, "heat.at_shaft"), number(text, "heat.shaft_at")
    assert 17.0e-6 * 60.0 * (hub - 20.0) == pytest.approx(number(text, "heat.opens_by_heat"))
    assert 8.5e-6 * 60.0 * (20.0 - shaft) == pytest.approx(number(text, "heat.opens_by_cold"))
    warm = heat("hub: 190 degC, oven_error: 5 degC, carry: 10 s, shaft: 60 degC")
    assert -12.7e-6 * 60.0 * 40.0 == pytest.approx(number(warm, "heat.opens_by_cold"))


# -- how long it lasts


def test_bright_metal_keeps_its_heat_longer() -> None:
    text = changed()
    assert 0.0 < number(text, "heat.carry_loss_bright") < number(text, "heat.carry_loss")
    assert number(text, "heat.carry_allowed_bright") > number(text, "heat.carry_allowed") > 0.0
    assert number(text, "heat.carry_until_bite_bright") > number(text, "heat.carry_until_bite")
    assert (
        number(text, "heat.carry_until_bite")
        > number(text, "heat.carry_allowed")
        > number(text, "heat.carry_with_spare")
    )


@pytest.mark.parametrize(
    "said",
    [
        "hub: 190 degC, oven_error: 5 degC",
        "hub: 150 degC, oven_error: 5 degC, shaft: -75 degC, cold_by: dry-ice",
        "shaft: -196 degC, cold_by: liquid-nitrogen, cold_error: 3 K",
    ],
)
def test_the_way_may_take_so_long_and_no_longer(said: str) -> None:
    more = (EASY,) if said.startswith("shaft") else ()
    limit = number(heat(f"{said}, carry: 10 s", *more), "heat.carry_allowed")
    for seconds, verdict in ((limit - 1.0, "pass"), (limit + 1.0, "fail")):
        text = heat(f"{said}, carry: {seconds!r} s", *more)
        assert verdict == finding(text, "HEAT-006").verdict == finding(text, "HEAT-001").verdict


def test_the_times_are_those_of_the_leaf() -> None:
    text = heat("hub: 150 degC, oven_error: 5 degC, carry: 10 s, shaft: -75 degC, cold_by: dry-ice, cold_error: 5 K")
    hub, shaft = Body(ring=RING, start=145.0, expansion=17.0e-6), Body(ring=SEAT, start=-70.0, expansion=8.5e-6)
    ours = time_open(hub, shaft, needed=0.060 + 0.060, diameter=60.0, air=20.0)
    assert ours == pytest.approx(number(text, "heat.carry_allowed"), rel=1e-6)


def test_a_heat_too_low_from_the_start_is_not_the_fault_of_the_way() -> None:
    text = changed(("hub: 190 degC", "hub: 120 degC"))
    assert "fail" == finding(text, "HEAT-001").verdict
    assert answer(text, "heat.carry_allowed") is None
    assert not [f for f in reviewed(text).evaluation.findings if f.rule == "HEAT-006"]


def test_the_seconds_that_are_told_clear_the_way() -> None:
    remedy = finding(changed(("carry: 10 s", "carry: 15 min")), "HEAT-006").remedy
    assert remedy.startswith("Bring hub and shaft together within ")
    assert "(setups.10.join.heat.carry; " in remedy
    seconds = remedy.split("within ")[1].split(" s")[0]
    better = changed(("carry: 10 s", f"carry: {seconds} s"))
    assert all("pass" == finding(better, rule).verdict for rule in ("HEAT-001", "HEAT-003", "HEAT-006"))
    most = remedy.split("carry; ")[1].split(" s")[0]
    assert "pass" == finding(changed(("carry: 10 s", f"carry: {most} s")), "HEAT-006").verdict
    assert "fail" == finding(changed(("carry: 10 s", f"carry: {int(most) + 1} s")), "HEAT-006").verdict


def test_a_way_that_is_not_stated_is_open() -> None:
    found = finding(changed((", carry: 10 s", "")), "HEAT-006")
    assert ("open", ("setups.10.join.heat.carry",)) == (found.verdict, found.missing)
    assert number(changed((", carry: 10 s", "")), "heat.carry_allowed") > 100.0


def test_a_chilled_shaft_warms_the_sooner_the_thinner_it_is() -> None:
    solid = changed((", hole: 20", ""))
    thin = changed((", hole: 20", ", hole: 52"))
    assert number(thin, "heat.window") < number(solid, "heat.window")


def test_the_window_of_a_chilled_pair_counts_the_coldest_shaft() -> None:
    said = "hub: 150 degC, oven_error: 5 degC, carry: 0 s, shaft: -75 degC, cold_by: dry-ice"
    exact, spread = (heat(f"{said}, cold_error: {e} K") for e in (0, 10))
    # needed rises with the error as well, so the spare heat falls: hold that apart by the same interference at the shaft
    assert number(spread, "heat.window") < number(exact, "heat.window")


def test_a_joint_that_is_no_shrink_fit_has_none_of_it() -> None:
    pressed = changed(("by: shrink", "by: press"), (f"      {HEAT}\n", ""))
    for name in (
        "shaft_at",
        "shaft_gain",
        "must_open",
        "opens_by_heat",
        "opens_by_cold",
        "carry",
        "carry_allowed",
        "room",
    ):
        assert answer(pressed, f"heat.{name}") is None, name


def test_cold_that_the_material_of_the_shaft_does_not_settle_is_open() -> None:
    text = heat(COLD_ALONE, ("    material: 42CrMo4\n", ""))
    found = answer(text, "heat.shaft_gain")
    assert isinstance(found, Open)
    assert "parts.shaft.material" in found.missing
    assert value(heat(COLD_ALONE), "heat.cold_error_kind") == "stated"
