"""Gauge and probe, flame, warm shaft, oil bath, gas in the room: each by its rule, at its limit, and open where it must."""

from __future__ import annotations

import pytest

from setupcheck.quantities.book import Open
from setupcheck.report.heating_plan import heating_plans
from setupcheck.rulebook import Finding
from tests.unit.report.sample import PLATE, flat

from .joint_text import answer, changed, finding, number, reviewed

HEAT = "heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}"
RING = "    material: CuSn12-C\n"


def heat(said: str, *more: tuple[str, str]) -> str:
    return changed((HEAT, f"heat: {{{said}}}"), *more)


def hot(said: str, *more: tuple[str, str]) -> str:
    return heat(f"hub: 190 degC, oven_error: 5 degC, carry: 10 s, {said}", *more)


def made_of(name: str) -> tuple[str, str]:
    return RING, f"    material: {name}\n"


def found(text: str, rule: str) -> Finding | None:
    return next((f for f in reviewed(text).evaluation.findings if f.rule == rule), None)


# -- gauge and probe


@pytest.mark.parametrize(
    ("gauge", "verdict"),
    [
        ("60.120", "pass"),  # 60.060 journal, 0.060 play
        ("60.119", "fail"),
        ("60.060", "fail"),  # made to the journal
        ("60.050", "fail"),  # 157 um of growth divided by pi
    ],
)
def test_a_gauge_shows_something_only_from_journal_and_play_on(gauge: str, verdict: str) -> None:
    text = hot(f"gauge: {gauge}")
    assert verdict == finding(text, "HEAT-007").verdict
    assert "pass" == finding(text, "HEAT-008").verdict


def test_the_printed_size_of_the_gauge_is_one_that_does() -> None:
    for room in (13.0, 17.7, 20.0, 26.3):
        text = changed(("room: 20 degC", f"room: {room} degC"))
        shown = f"{number(text, 'heat.go_gauge'):.3f}"
        again = changed(("room: 20 degC", f"room: {room} degC"), (HEAT, HEAT.replace("}", f", gauge: {shown}}}")))
        assert "pass" == finding(again, "HEAT-007").verdict


@pytest.mark.parametrize(
    ("said", "verdict", "message"),
    [
        ("read_by: contact-probe", "pass", "a reading by contact probe"),
        ("read_by: crayon", "pass", "a reading by crayon"),
        ("read_by: infrared", "warn", "an infrared reading alone"),
        ("read_by: infrared, gauge: 60.13", "pass", "a gauge tried in its bore"),
        ("by: oven", "warn", "no gauge and no reading"),
    ],
)
def test_a_hot_hub_is_proved_by_gauge_probe_or_crayon(said: str, verdict: str, message: str) -> None:
    one = finding(hot(said), "HEAT-008")
    assert (verdict, f"the hot hub of op 10 is lifted with {message}") == (one.verdict, one.message)


def test_no_gauge_is_no_gauge_that_is_too_small() -> None:
    assert found(changed(), "HEAT-007") is None


def test_a_gauge_that_the_smallest_bore_does_not_take_fails_and_the_printed_one_does() -> None:
    assert found(changed(), "HEAT-018") is None
    one = finding(hot("gauge: 60.2"), "HEAT-018")
    assert "fail" == one.verdict
    # 60.000 bore; 185 degC less the way, the low end of tin bronze's expansion
    at = number(hot("gauge: 60.2"), "heat.at_shaft")
    grown = number(hot("gauge: 60.2"), "heat.opens_by_heat")
    assert 180.0 < at < 185.0
    assert one.limit == pytest.approx(60.0 + grown, abs=0.001)
    shown = f"{one.limit:.3f}"
    assert f"takes up to {shown} mm" in one.remedy
    assert "pass" == finding(hot(f"gauge: {shown}"), "HEAT-018").verdict
    assert "fail" == finding(hot(f"gauge: {one.limit + 0.001:.3f}"), "HEAT-018").verdict


def test_a_heat_that_is_too_low_is_no_fault_of_the_gauge() -> None:
    text = heat("hub: 120 degC, oven_error: 5 degC, carry: 10 s, gauge: 60.12")
    assert "fail" == finding(text, "HEAT-001").verdict
    assert found(text, "HEAT-018") is None


def test_the_plan_speaks_of_the_stated_gauge_where_it_does() -> None:
    plan = flat("\n".join(heating_plans(reviewed(hot("gauge: 60.13")))))
    assert "Try the gauge of 60.130 mm (at least 60.120 mm) in the hot bore" in plan
    for said in ("gauge: 60.2", "gauge: 60.1", "read_by: crayon"):
        assert "Try a gauge of 60.120 mm in the hot bore" in flat("\n".join(heating_plans(reviewed(hot(said)))))


@pytest.mark.parametrize("part", ["CuSn12-C", "42CrMo4"])
def test_no_heat_is_planned_for_a_joint_with_pores(part: str) -> None:
    assert list(heating_plans(reviewed(hot("by: oven"))))
    porous = f"material: {part}\n    properties: {{porous: true}}"
    assert [] == list(heating_plans(reviewed(hot("by: oven", (f"material: {part}", porous)))))


# -- what to fill


@pytest.mark.parametrize(
    ("said", "missing"),
    [
        ("heat: {hub: 190 degC, carry: 10 s}", {"by"}),
        ("heat: {hub: 190 degC, carry: 10 s, by: flame}", {"oven_error"}),  # of no typical error
        ("heat: {carry: 10 s}", {"hub", "by"}),
        ("heat: {hub: 190 degC, carry: 10 s, by: oven}", set()),
        ("heat: {hub: 190 degC, carry: 10 s, read_by: crayon}", set()),
        ("grips_first: anywhere", {"hub", "by"}),  # no heat at all
    ],
)
def test_a_heat_of_no_source_asks_for_its_source(said: str, missing: set[str]) -> None:
    found = answer(changed((HEAT, said)), "heat.at_shaft")
    asked = set(found.missing) if isinstance(found, Open) else set()
    assert {f"setups.10.join.heat.{key}" for key in missing} == asked


# -- what the way takes


def test_where_the_way_spoils_it_the_advice_names_the_way_and_typed_back_it_does() -> None:
    low = heat("hub: 120 degC, oven_error: 5 degC, carry: 30 min")
    assert found(low, "HEAT-006") is None  # too cold from the start
    remedy = finding(low, "HEAT-001").remedy
    assert remedy.startswith("The way to the shaft is too long: in 1800 s it takes ")
    setting, seconds = remedy.split("set to ")[1].split(" degC")[0], remedy.split("within ")[1].split(" s")[0]
    again = heat(f"hub: {setting} degC, oven_error: 5 degC, carry: {seconds} s")
    assert {"pass"} == {finding(again, rule).verdict for rule in ("HEAT-001", "HEAT-002", "HEAT-003", "HEAT-006")}
    assert (
        "pass"
        != finding(heat(f"hub: {setting} degC, oven_error: 5 degC, carry: {float(seconds) + 3} s"), "HEAT-003").verdict
    )


def test_with_a_heat_that_was_enough_at_first_the_carry_rule_says_it_once() -> None:
    remedy = finding(heat("hub: 190 degC, oven_error: 5 degC, carry: 30 min"), "HEAT-006").remedy
    assert remedy.startswith("Bring hub and shaft together within ")
    assert "way" not in remedy


def test_a_second_sentence_of_the_carry_rule_goes_on_in_small_letters() -> None:
    remedy = finding(heat("hub: 150 degC, oven_error: 5 degC, carry: 180 s"), "HEAT-006").remedy
    assert ". With the way as it is: set the heat to " in remedy


def test_sizes_that_do_not_belong_together_are_called_so() -> None:
    # 0.62 mm over 60 mm and the fit
    text = changed(("seat: {kind: cylinder, diameter: 60 r6", "seat: {kind: cylinder, diameter: 60.6 ±0.02"))
    assert finding(text, "HEAT-001").remedy == (
        "The sizes do not belong together: 0.620 mm of interference is more than a hundredth of the diameter. "
        "Check the sizes and limits of ring.bore and shaft.seat."
    )


# -- flame


@pytest.mark.parametrize(
    ("material", "said"),
    [
        ("C93200", "a copper alloy"),
        ("CuSn12-C", "a copper alloy"),
        ("EN-GJL-250", "cast iron"),
        ("100Cr6", "hardened steel"),
        ("16MnCr5", "hardened steel"),
        ("unobtainium", "of a material that is not in the list"),
        ("bearing bronze", "of a material that is not in the list"),
    ],
)
def test_a_flame_spoils_most_materials(material: str, said: str) -> None:
    text = hot("by: flame", made_of(material))
    one = finding(text, "HEAT-009")
    assert ("fail", f"the hub of op 10 is {said}, and a flame heats it") == (one.verdict, one.message)
    assert found(text, "HEAT-016") is None


def test_on_plain_steel_a_flame_warns_for_its_uneven_heat_only() -> None:
    text = hot("by: flame", made_of("S355J2"))
    assert "pass" == finding(text, "HEAT-009").verdict
    assert "warn" == finding(text, "HEAT-016").verdict


def test_a_steel_tempered_low_by_its_certificate_is_hardened() -> None:
    low = hot("by: flame", (RING, "    material: 42CrMo4\n    properties: {last_temper: 180 degC}\n"))
    high = hot("by: flame", (RING, "    material: 42CrMo4\n    properties: {last_temper: 560 degC}\n"))
    assert ("fail", "pass") == (finding(low, "HEAT-009").verdict, finding(high, "HEAT-009").verdict)


def test_a_hub_of_no_named_material_under_a_flame_is_open_and_an_oven_asks_nothing() -> None:
    one = finding(hot("by: flame", (RING, "")), "HEAT-009")
    assert ("open", ("parts.ring.material",)) == (one.verdict, one.missing)
    assert found(hot("by: oven"), "HEAT-009") is None


# -- the inner part stays cold


@pytest.mark.parametrize(("shaft", "verdict"), [("20 degC", "pass"), ("20.5 degC", "warn"), ("60 degC", "warn")])
def test_a_shaft_warmer_than_the_room_warns(shaft: str, verdict: str) -> None:
    assert verdict == finding(hot(f"shaft: {shaft}"), "HEAT-010").verdict


# -- oil


@pytest.mark.parametrize(("flash", "verdict"), [("235 degC", "pass"), ("234 degC", "fail"), ("195 degC", "fail")])
def test_the_bath_stays_forty_kelvin_under_its_flash_point_at_its_hottest(flash: str, verdict: str) -> None:
    assert verdict == finding(hot(f"by: oil-bath, flash_point: {flash}"), "HEAT-011").verdict


@pytest.mark.parametrize(
    ("flash", "said"),
    [("234 degC", "39 K below the flash point of 234 degC"), ("195 degC", "at the flash point of 195 degC"),
     ("185 degC", "10 K above the flash point of 185 degC")],
)  # fmt: skip
def test_a_bath_above_its_flash_point_is_said_in_words_with_the_oil_that_does(flash: str, said: str) -> None:
    remedy = finding(hot(f"by: oil-bath, flash_point: {flash}"), "HEAT-011").remedy
    assert remedy.startswith(f"At its hottest the bath is {said}. Take an oil that flashes at 235 degC or more ")


@pytest.mark.parametrize(
    ("flash", "verdict"),
    [
        ("455 degF", "pass"),  # 374 + 9 degF at its hottest, 72 degF above that
        ("454 degF", "fail"),
        ("480 degF", "pass"),  # 97 degF above: a margin read as the temperature 40 degC would ask for 104
    ],
)
def test_the_margin_is_a_difference_in_fahrenheit_too(flash: str, verdict: str) -> None:
    text = heat(f"hub: 374 degF, oven_error: 9 degF, carry: 10 s, by: oil-bath, flash_point: {flash}")
    one = finding(text, "HEAT-011")
    assert verdict == one.verdict
    assert one.limit == 40.0
    assert one.unit == "K"


def test_an_oil_without_its_flash_point_is_open() -> None:
    one = finding(hot("by: oil-bath"), "HEAT-011")
    assert ("open", ("setups.10.join.heat.flash_point",)) == (one.verdict, one.missing)
    assert found(hot("by: oven"), "HEAT-011") is None


def test_an_oil_bath_soaks_faster_than_an_oven_and_an_inch_of_wall_takes_half_an_hour() -> None:
    assert number(hot("by: oil-bath"), "heat.soak") == pytest.approx(1800.0 * 27.5 / 25.4)  # 115 over 60
    assert number(hot("by: oven"), "heat.soak") == pytest.approx(180.0 * 27.5)
    assert answer(hot("by: hot-plate"), "heat.soak") is None


@pytest.mark.parametrize(
    ("joint", "source", "verdict"),
    [("degreased", "oil-bath", "fail"), ("oiled", "oil-bath", "pass"), ("degreased", "oven", None)],
)
def test_a_hub_out_of_an_oil_bath_is_not_degreased(joint: str, source: str, verdict: str | None) -> None:
    one = found(hot(f"by: {source}", ("joint: degreased", f"joint: {joint}")), "HEAT-017")
    assert verdict == (one.verdict if one is not None else None)


def test_an_oil_bath_with_no_word_on_the_joint_is_open() -> None:
    one = finding(hot("by: oil-bath", ("      joint: degreased\n", "")), "HEAT-017")
    assert ("open", ("setups.10.join.joint",)) == (one.verdict, one.missing)


# -- gas

NITROGEN = "shaft: -196 degC, cold_by: liquid-nitrogen, cold_error: 3 K"
ICE = "shaft: -75 degC, cold_by: dry-ice, cold_error: 3 K"


@pytest.mark.parametrize(
    ("room", "litres", "verdict"), [("40 m3", "3.4 l", "pass"), ("40 m3", "3.5 l", "fail"), ("12 m3", "5 l", "fail"),
                                    ("1413 ft3", "3.4 l", "pass"), ("11.5 m3", "1 l", "pass"), ("11.4 m3", "1 l", "fail"),
                                    ("58 m3", "5 l", "pass"), ("57 m3", "5 l", "fail")],
)  # fmt: skip
def test_nitrogen_leaves_enough_oxygen_or_not(room: str, litres: str, verdict: str) -> None:
    assert verdict == finding(hot(f"{NITROGEN}, room_volume: {room}, coolant: {litres}"), "HEAT-012").verdict


def test_the_advice_on_nitrogen_clears_it_both_ways() -> None:
    remedy = finding(hot(f"{NITROGEN}, room_volume: 40 m3, coolant: 10 l"), "HEAT-012").remedy
    litres = remedy.split("more than ")[1].split(" l")[0]
    room = remedy.split("a room of ")[1].split(" m3")[0]
    assert "(setups.10.join.heat.coolant)" in remedy
    assert "pass" == finding(hot(f"{NITROGEN}, room_volume: 40 m3, coolant: {litres} l"), "HEAT-012").verdict
    assert "pass" == finding(hot(f"{NITROGEN}, room_volume: {room} m3, coolant: 10 l"), "HEAT-012").verdict


def test_a_room_in_which_nothing_may_boil_off_is_told_so() -> None:
    remedy = finding(hot(f"{NITROGEN}, room_volume: 1 m3, coolant: 10 l"), "HEAT-012").remedy
    assert remedy.startswith("Work in the open, or in a room of ")


@pytest.mark.parametrize(
    ("mass", "short", "long"), [("0.3 kg", "pass", "pass"), ("2 kg", "pass", "warn"), ("5 kg", "fail", None)]
)
def test_dry_ice_has_the_limits_of_its_own_gas(mass: str, short: str, long: str | None) -> None:
    text = hot(f"{ICE}, room_volume: 40 m3, coolant: {mass}")
    assert short == finding(text, "HEAT-013").verdict
    one = found(text, "HEAT-014")
    assert long == (one.verdict if one is not None else None)
    assert found(text, "HEAT-012") is None  # 5 kg leave 19.47 % of oxygen; that is not the point


@pytest.mark.parametrize(("said", "rule"), [(NITROGEN, "HEAT-012"), (ICE, "HEAT-013")])
def test_a_room_or_an_amount_that_is_not_stated_is_open(said: str, rule: str) -> None:
    one = finding(hot(said), rule)
    assert "open" == one.verdict
    assert ("setups.10.join.heat.room_volume", "setups.10.join.heat.coolant") == one.missing
    half = finding(hot(f"{said}, room_volume: 40 m3"), rule)
    assert ("setups.10.join.heat.coolant",) == half.missing


def test_a_freezer_fills_no_room() -> None:
    text = hot("shaft: -20 degC, cold_by: freezer, cold_error: 2 K")
    assert not {f.rule for f in reviewed(text).evaluation.findings} & {"HEAT-012", "HEAT-013", "HEAT-014"}


def test_nothing_of_it_is_asked_of_a_job_without_a_joint() -> None:
    from tests.unit.report.sample import reviewed as of

    assert not [f for f in of(PLATE).evaluation.findings if f.rule.startswith("HEAT")]
