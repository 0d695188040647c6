"""Selective fitting: the window of a joint, what a measured half wants of the other, and which measured pair suits."""

from __future__ import annotations

import re

import pytest

from .joint_text import answer, changed, finding, number, value

AT_20 = ("[10 degC, 25 degC]", "[20 degC, 20 degC]")
BORE = "diameter: 60 H6, from: 0, to: 30, roughness: Rz 4 um"


def pair(name: str, bore: float, journal: float, uncertainty: str = ", uncertainty: 0.5 um") -> str:
    return f"{{name: {name}, bore: {bore}, journal: {journal}{uncertainty}}}"


def listing(*pairs: str) -> str:
    return changed(AT_20, ("joint: degreased", f"joint: degreased\n      pairs: [{', '.join(pairs)}]"))


def test_at_the_ends_of_the_window_the_judged_limits_are_just_met() -> None:
    text = changed()
    low, high = number(text, "fit.window_low"), number(text, "fit.window_high")
    for journal, rule, verdict in (
        (60.0 + low + 2e-4, "FIT-003", "pass"),
        (60.0 + low - 2e-4, "FIT-003", "fail"),
        (60.0 + high - 2e-4, "FIT-004", "pass"),
        (60.0 + high + 2e-4, "FIT-004", "fail"),
    ):
        exact = changed(
            ("diameter: 60 H6", "diameter: {nominal: 60, measured: 60.0, uncertainty: 0 um}"),
            ("diameter: 60 r6", f"diameter: {{nominal: 60, measured: {journal!r}, uncertainty: 0 um}}"),
        )
        assert verdict == finding(exact, rule).verdict, (journal, rule)


def test_a_measured_bore_names_the_journals_it_takes_and_the_other_way_round() -> None:
    text = changed(("diameter: 60 H6", "diameter: {nominal: 60, measured: 60.012, uncertainty: 1 um}"))
    said = str(value(text, "fit.suits"))
    low, high = map(float, re.findall(r"(\d+\.\d+) mm", said))
    assert said.startswith("the bore as measured suits journals of")
    assert 60.013 + number(text, "fit.window_low") == pytest.approx(low, abs=1e-4)
    assert 60.011 + number(text, "fit.window_high") == pytest.approx(high, abs=1e-4)
    other = changed(("diameter: 60 r6", "diameter: {nominal: 60, measured: 60.055, uncertainty: 1 um}"))
    assert str(value(other, "fit.suits")).startswith("the journal as measured suits bores of")
    assert "any pair with" in str(value(changed(), "fit.suits"))


def test_the_pair_nearest_to_the_middle_of_the_window_is_named() -> None:
    low, high = (1000.0 * number(changed(AT_20), f"fit.window_{end}") for end in ("low", "high"))
    middle = 60.0 + (low + high) / 2000.0
    text = listing(
        pair("A1", 60.0, 60.0 + low / 1000.0 + 0.003),
        pair("A2", 60.0, round(middle, 4)),
        pair("A3", 60.0, 60.0 + high / 1000.0 + 0.004),
        pair("A4", 60.0, 60.001),
    )
    assert str(value(text, "fit.pairs")).startswith("one of them suits: A2, whose sizes now belong under diameter")
    told = str(value(text, "fit.pairs_told"))
    assert re.search(r"A1 [\d.]+ um \(suits\)", told)
    assert re.search(r"A3 [\d.]+ um \(too tight\)", told)
    assert "A4 1.0 um (too loose)" in told
    assert "pass" == finding(text, "FIT-013").verdict


def test_no_pair_inside_the_window_fails_and_lists_them() -> None:
    found = finding(listing(pair("A4", 60.0, 60.001)), "FIT-013")
    assert "fail" == found.verdict
    assert "A4 1.0 um (too loose)" in found.remedy


def test_the_readings_uncertainty_can_rule_a_pair_out_and_its_absence_is_open() -> None:
    low = number(changed(AT_20), "fit.window_low")
    close = 60.0 + low + 0.0012
    assert "pass" == finding(listing(pair("A1", 60.0, close)), "FIT-013").verdict  # 2 x 0.5 um leaves it just inside
    rough = listing(pair("A1", 60.0, close, ", uncertainty: 2 um"))
    assert "fail" == finding(rough, "FIT-013").verdict
    unsaid = finding(listing(pair("A1", 60.0, close, "")), "FIT-013")
    assert "open" == unsaid.verdict
    assert "setups.10.join.pairs[1].uncertainty" in unsaid.message


def test_without_measured_pairs_nothing_is_said_of_them() -> None:
    assert answer(changed(), "fit.pairs") is None
    assert answer(changed(), "fit.pairs_told") is None


def test_a_wide_window_is_closed_by_the_heat_that_the_hub_stands() -> None:
    # a strong hub that stands little heat: what the oven opens is the upper end
    tempered = changed(
        ("material: CuSn12-C", "material: 42CrMo4\n    properties: {yield_strength: 900 MPa, heat_cap: 150 degC}")
    )
    joined, elastic = number(tempered, "fit.most_joined"), number(tempered, "fit.most_allowed")
    assert joined < elastic
    assert number(tempered, "fit.window_high") == pytest.approx(joined)
