"""Typical values: how the table is read, where one stands in for what a job leaves out, and that it is always told."""

from __future__ import annotations

import math

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.typical import EVIDENCE, WHATS, read_table, table, typical
from setupcheck.report.text import as_text
from tests.unit.report.sample import PLATE, WHEEL, changed, flat, reviewed

SECOND = math.pi / 648_000.0
DIVIDE = (
    'divide: {by: hole-circle, circle: 18, wheel: {once_per_turn: ±10"}, '
    'worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}'
)
OVEN = ("by: oven, oven_error: 10 degC", "by: hot-plate")
TILT = ("uncertainty: 2', leans", "by: readout, leans")


def row(
    what: str = "runout",
    value: str = "80 um",
    kind: str = "from memory",
    more: str = "",
    ends: str = "[10 um, 150 um]",
) -> str:
    told = f"value: '{value}', range: {ends}, kind: {kind}, note: worn{more}"
    return f"format: 3\nvalues:\n  {what}:\n    three-jaw: {{{told}}}\n"


def rests(found: Review, rule: str, op: int | None = None) -> set[str]:
    """Typical values that the findings of a rule say they rest on."""
    return {r for f in found.evaluation.findings if f.rule == rule and (op is None or f.op == op) for r in f.rests_on}


def answer(found: Review, name: str, key: str) -> object:
    scope = next(s for s in found.book.instances(found.book.quantities[name].per) if s.key == key)
    return found.book.get(name, scope)


# -- the table


def test_every_row_says_how_good_it_is_and_what_it_holds_for() -> None:
    assert len(table()) >= 45
    for one in table().values():
        assert one.kind in EVIDENCE and one.note and one.value > 0.0, one.name
        assert 0.0 < one.best <= one.value <= one.worst and one.best < one.worst, one.name
    assert {what for _, what in table()} == set(WHATS)


def test_a_row_is_read_in_the_unit_of_what_it_is_of() -> None:
    assert 0.005 == typical("dial-10um", "reading").value  # type: ignore[union-attr]
    assert 60.0 == pytest.approx(typical("hole-circle", "once_per_turn").value / SECOND)  # type: ignore[union-attr]
    assert 10.0 == typical("oven", "temperature_error").value  # type: ignore[union-attr]


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (row(what="run_out"), "t.yaml:3  values.run_out is nothing with a typical value. Nearest: runout"),
        (
            row(kind="guess"),
            "t.yaml:4  values.runout.three-jaw.kind is none of published, common practice, from memory",
        ),
        (row(value="80"), "t.yaml:4  values.runout.three-jaw.value is no value"),
        (row(what="tilt", value="80 um"), "t.yaml:4  values.tilt.three-jaw.value is no value"),
        (row(ends="[90 um, 150 um]"), "t.yaml:4  values.runout.three-jaw.range does not hold the value 80 um"),
        (row(ends="[150 um, 10 um]"), "t.yaml:4  values.runout.three-jaw.range has to run from a best above zero"),
        (row(ends="[0 um, 150 um]"), "t.yaml:4  values.runout.three-jaw.range has to run from a best above zero"),
        (row(ends="[10, 150 um]"), "t.yaml:4  values.runout.three-jaw.range is no"),
        (row(ends="[10 K, 150 um]"), "t.yaml:4  values.runout.three-jaw.range is no value"),
        (row(ends="[10 um]"), "t.yaml:4  values.runout.three-jaw.range is no pair"),
        (row(ends="10 um to 150 um"), "t.yaml:4  values.runout.three-jaw.range is no pair"),
        (
            row(more=", by: me"),
            "t.yaml:4  values.runout.three-jaw needs value, kind, note, each a text, and range, and",
        ),
        ("format: 2\nvalues: {}\n", "t.yaml: 'format: 3' and a map 'values' are needed"),
    ],
)
def test_a_wrong_row_is_told_with_its_line(text: str, said: str) -> None:
    with pytest.raises(SetupcheckError) as why:
        read_table(text, "t.yaml")
    assert str(why.value).startswith(said)


# -- dividing


def test_a_way_of_dividing_without_errors_takes_its_typical_ones_and_every_finding_says_so() -> None:
    found = reviewed(changed(WHEEL, (DIVIDE, "divide: {by: hole-circle, circle: 18}")))
    named = {"hole-circle once per turn", "hole-circle once per crank", "hole-circle setting"}
    assert "typical" == answer(found, "divide.error_stated", "40").value  # type: ignore[attr-defined]
    assert [("DIVIDE-004", "warn")] == [
        (f.rule, f.verdict) for f in found.evaluation.findings if f.rule[:6] == "DIVIDE" and f.verdict != "pass"
    ]
    pitch = [f for f in found.evaluation.findings if f.key.startswith(("cumulative-pitch", "single-pitch"))]
    assert pitch and all(named <= set(f.rests_on) for f in pitch)
    assert {"hole-circle once per crank"} == rests(found, "DIVIDE-002", 40)
    assert "Rests on typical values: hole-circle once per crank, hole-circle once per turn" in flat(as_text(found))


def test_a_typical_division_counts_as_much_as_the_same_figures_stated() -> None:
    same = (
        'divide: {by: hole-circle, circle: 18, wheel: {once_per_turn: 60"}, '
        'worm: {once_per_crank: 15"}, setting: 5", clamp: 0"}'
    )
    stated = reviewed(changed(WHEEL, (DIVIDE, same)))
    taken = reviewed(changed(WHEEL, (DIVIDE, "divide: {by: hole-circle, circle: 18}")))
    for key, one in stated.results.items():
        assert one.combined.worst.high == pytest.approx(taken.results[key].combined.worst.high), key
    assert all(not f.rests_on for f in stated.evaluation.findings)


@pytest.mark.parametrize("by", ["x-y"])
def test_a_way_of_dividing_that_is_not_in_the_table_stays_open(by: str) -> None:
    found = reviewed(changed(WHEEL, (DIVIDE, f"divide: {{by: {by}}}")))
    assert [("DIVIDE-003", "open", ("setups.40.divide.by",))] == [  # teeth: no coordinates set them
        (f.rule, f.verdict, f.missing) for f in found.evaluation.findings if f.rule == "DIVIDE-003" and f.op == 40
    ]
    assert "open" == found.verdict


def test_one_stated_error_is_the_heads_record_and_nothing_is_added_to_it() -> None:
    found = reviewed(changed(WHEEL, (DIVIDE, 'divide: {by: hole-circle, circle: 18, setting: 2", clamp: 0"}')))
    assert "stated" == answer(found, "divide.error_stated", "40").value  # type: ignore[attr-defined]
    assert all(not f.rests_on for f in found.evaluation.findings)


def test_a_stated_worm_keeps_its_figures_beside_a_typical_wheel() -> None:
    found = reviewed(changed(WHEEL, (DIVIDE, 'divide: {by: hole-circle, circle: 18, worm: {once_per_crank: 4"}}')))
    assert set() == rests(found, "DIVIDE-002", 40)
    pitch = [f for f in found.evaluation.findings if f.key.startswith("single-pitch")]
    assert {("hole-circle once per turn", "hole-circle setting")} == {f.rests_on for f in pitch}


def test_the_rounding_of_a_readout_is_held_against_its_typical_setting() -> None:
    stated = 'wheel: {once_per_turn: ±8"}, worm: {once_per_crank: ±2"}, setting: 2", clamp: 1"'
    found = reviewed(changed(PLATE, (f"by: rotary-table, {stated}", 'by: readout, step: 41"')))
    rounding = [f for f in found.evaluation.findings if f.rule == "DIVIDE-005" and f.op == 30]
    assert [("warn", ("readout setting",))] == [(f.verdict, f.rests_on) for f in rounding]


# -- the lean of a head, the heat of a hub, a length by a device


def test_a_head_set_by_a_readout_takes_its_typical_setting_and_says_so() -> None:
    found = reviewed(changed(WHEEL, TILT))
    allowed = answer(found, "tilt.allowed", "40")
    assert isinstance(allowed, Known) and {"readout tilt"} == allowed.rests_on
    assert 60.0 == pytest.approx(float(allowed.value) / SECOND)  # type: ignore[arg-type]
    assert {"readout tilt"} == rests(found, "TILT-001")
    assert [(40, "warn")] == [(f.op, f.verdict) for f in found.evaluation.findings if f.rule == "TILT-008"]
    assert "warn" == found.verdict


def test_a_head_set_nobody_knows_how_stays_open() -> None:
    found = reviewed(changed(WHEEL, ("uncertainty: 2', leans", "leans")))
    assert answer(found, "tilt.allowed", "40") == Open(("setups.40.head.uncertainty",))
    assert "open" == next(f.verdict for f in found.evaluation.findings if f.rule == "TILT-001")
    assert [] == [f for f in found.evaluation.findings if f.rule == "TILT-008"]


def test_a_hub_on_a_hot_plate_takes_the_plates_typical_error_and_says_so() -> None:
    found = reviewed(changed(WHEEL, OVEN))
    hub = found.loaded.job.setups[-1].join.heat.hub  # type: ignore[union-attr]
    assert hub is not None
    assert answer(found, "heat.planned_low", "70") == Known(hub - 30.0, frozenset({"hot-plate temperature error"}))
    assert answer(found, "heat.planned_high", "70") == Known(hub + 30.0, frozenset({"hot-plate temperature error"}))
    assert {"hot-plate temperature error"} == rests(found, "HEAT-001") == rests(found, "HEAT-002")
    assert ["fail"] == [f.verdict for f in found.evaluation.findings if f.rule == "HEAT-002"]
    assert ["warn"] == [f.verdict for f in found.evaluation.findings if f.rule == "HEAT-005"]


@pytest.mark.parametrize(("by", "key"), [("by: flame, ", "oven_error"), ("", "by")])
def test_a_heat_source_without_a_typical_error_stays_open(by: str, key: str) -> None:
    found = reviewed(changed(WHEEL, ("by: oven, oven_error: 10 degC, ", by)))
    assert answer(found, "heat.planned_low", "70") == Open((f"setups.70.join.heat.{key}",))
    assert {"open"} == {f.verdict for f in found.evaluation.findings if f.rule in ("HEAT-001", "HEAT-002")}
    assert [] == [f for f in found.evaluation.findings if f.rule == "HEAT-005"]


def test_a_length_read_on_a_named_indicator_takes_its_typical_reading() -> None:
    old = "stop:   {on: seat, error: 5 um}"
    found = reviewed(changed(WHEEL, (old, "stop:   {on: seat, error: {device: dial-10um}}")))
    assert answer(found, "hold.error_stated", "50/stop") == Known("typical")
    assert {"dial-10um reading"} <= {r for f in found.evaluation.findings for r in f.rests_on}
    plain = reviewed(WHEEL)
    for key, one in plain.results.items():
        assert one.combined.worst.high == pytest.approx(found.results[key].combined.worst.high), key


def test_a_length_by_a_device_that_nobody_knows_stays_open() -> None:
    old = "stop:   {on: seat, error: 5 um}"
    found = reviewed(changed(WHEEL, (old, "stop:   {on: seat, error: {device: thumb}}")))
    told = answer(found, "hold.error_stated", "50/stop")
    assert isinstance(told, Open) and ("setups.50.hold.stop.error.at_most",) == told.missing


def test_a_stack_says_which_typical_run_outs_it_rests_on() -> None:
    found = reviewed(changed(WHEEL, ("rests: pushed, runout: 3 um", "rests: pushed, runout: {device: centres}")))
    runout = [f for f in found.evaluation.findings if f.key.startswith("run-out.") and f.rule == "STACK-001"]
    assert runout and all("centres runout" in f.rests_on for f in runout)
    assert "Rests on typical values: centres runout." in flat(as_text(found, everything=True))


def test_a_mid_plane_carried_over_the_tilt_takes_the_heads_typical_setting() -> None:
    before = ("found: after-tilt,", "found: before-tilt, pivot: 80.0 ±0.5,")
    stated = reviewed(changed(WHEEL, before, ("uncertainty: 2', leans", "uncertainty: 1', leans")))
    taken = reviewed(changed(WHEEL, before, TILT))
    for found, names in ((stated, ()), (taken, ("readout tilt",))):
        middle = [f for f in found.evaluation.findings if f.rule == "STACK-001" and f.key.startswith("mid-plane")]
        assert [names] == [f.rests_on for f in middle]
    key = next(k for k in stated.results if k.startswith("mid-plane"))
    assert stated.results[key].combined.worst.high == pytest.approx(taken.results[key].combined.worst.high)
