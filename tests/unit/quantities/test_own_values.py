"""A shop's record in a review: where its limits stand in for typical values, where they do not, and that it is told."""

from __future__ import annotations

import json
import math
from pathlib import Path

import pytest

from setupcheck.flow import Review, review
from setupcheck.quantities.book import Known
from setupcheck.quantities.device_record import read_record
from setupcheck.quantities.own_values import HouseRows, with_own
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from tests.unit.quantities.test_typical import DIVIDE, OVEN, TILT, answer, rests
from tests.unit.report.sample import PLATE as PLATE_JOB
from tests.unit.report.sample import WHEEL, changed, flat, loaded, reviewed

SECOND = math.pi / 648_000.0
MEASURED = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
NAMED = (MEASURED, "runout: {device: four-jaw-A}")
CHUCK = ("four-jaw-A", "runout", "um", (6, 7, 5, 8, 6))
HEAD = ("dividing-head-B", "tilt", "arcsec", (40, -30, 25, -35, 20))
WHEEL_OF_HEAD = ("dividing-head-B", "once_per_turn", "arcsec", (18, 19, 17, 20, 18))
CRANK = ("dividing-head-B", "once_per_crank", "arcsec", (4, 5, 4, 6, 5))
SETTING = ("dividing-head-B", "setting", "arcsec", (2, -1, 1, -2, 1))
LATHE = ("lathe-A", "axis", "um", (2, 2.5, 2, 3, 2))
PLATE = ("hot-plate", "temperature_error", "K", (9, -8, 12, 7, -11))
SHORT = "divide: {by: hole-circle, circle: 18}"

Rows = tuple[str, str, str, tuple[float, ...]]


@pytest.fixture
def shop(tmp_path: Path) -> Path:
    return tmp_path / "shop.csv"


def write(file: Path, *kept: Rows) -> Path:
    rows = [
        f"{device}, {what}, 2026-01-{1 + i:02d}, {value} {unit}"
        for device, what, unit, values in kept
        for i, value in enumerate(values)
    ]
    file.write_text("\n".join(["device, what, date, value", *rows]) + "\n", encoding="utf-8")
    return file


def limit(file: Path, rows: Rows) -> float:
    found = read_record(file).series[rows[0], rows[1]].limit
    assert found is not None
    return found


def judged(text: str, file: Path) -> Review:
    return review(loaded(text), devices=file)


def verdicts(found: Review, rule: str) -> set[str]:
    return {f.verdict for f in found.evaluation.findings if f.rule == rule}


def same_worst(one: Review, other: Review) -> None:
    assert one.results.keys() == other.results.keys()
    for key, result in one.results.items():
        assert result.combined.worst.high == pytest.approx(other.results[key].combined.worst.high, rel=1e-12), key


# -- taken


def test_a_device_takes_the_limit_of_its_record_and_every_finding_says_so(shop: Path) -> None:
    found = judged(changed(WHEEL, NAMED), write(shop, CHUCK))
    name = "four-jaw-A runout (shop record, 5 entries)"
    assert answer(found, "hold.error_stated", "50/centre") == Known("stated", frozenset({name}))
    assert answer(found, "hold.planned", "50/centre").value == pytest.approx(limit(shop, CHUCK))  # type: ignore[attr-defined]
    assert {name} <= rests(found, "HOLD-003", 50) and {name} <= rests(found, "HOLD-004", 50)
    assert {name} <= rests(found, "STACK-001")
    assert verdicts(found, "HOLD-004") == {"pass"}
    told = flat(as_text(found, everything=True))
    assert f"Rests on: {name}." in told
    assert "run-out of hub in four-jaw chuck 9.1 um by record" in told
    assert "- four-jaw-A runout: 9.1 um, 5 entries (setups.50.hold.centre.runout)" in told


def test_a_limit_counts_as_much_as_the_same_figure_stated(shop: Path) -> None:
    found = judged(changed(WHEEL, NAMED), write(shop, CHUCK))
    same_worst(found, reviewed(changed(WHEEL, (MEASURED, f"runout: {limit(shop, CHUCK)!r} mm"))))


def test_the_machine_gives_tilt_division_and_axis_by_its_name(shop: Path) -> None:
    kept = (HEAD, WHEEL_OF_HEAD, CRANK, SETTING, LATHE)
    axis = ("{kind: lathe, axis_runout: 2 um}", "{kind: lathe}")
    found = judged(changed(WHEEL, (DIVIDE, SHORT), TILT, axis), write(shop, *kept))
    sizes = [limit(shop, rows) / SECOND for rows in (WHEEL_OF_HEAD, CRANK, SETTING)]
    stated = (
        'divide: {{by: hole-circle, circle: 18, wheel: {{once_per_turn: {!r}"}}, '
        'worm: {{once_per_crank: {!r}"}}, setting: {!r}"}}'
    )
    same = reviewed(
        changed(
            WHEEL,
            (DIVIDE, stated.format(*sizes)),
            ("uncertainty: 2', leans", f'uncertainty: {limit(shop, HEAD) / SECOND!r}", leans'),
            (axis[0], f"{{kind: lathe, axis_runout: {limit(shop, LATHE)!r} mm}}"),
        )
    )
    same_worst(found, same)
    for name in ("tilt.allowed", "divide.crank_error", "divide.setting_error"):
        at = "40"
        assert answer(found, name, at).value == pytest.approx(answer(same, name, at).value)  # type: ignore[attr-defined]
    for rule, rows in (("TILT-001", HEAD), ("TILT-008", HEAD), ("DIVIDE-002", CRANK), ("HOLD-010", LATHE)):
        assert {f"{rows[0]} {rows[1].replace('_', ' ')} (shop record, 5 entries)"} == rests(found, rule), rule
    for rule in ("TILT-008", "DIVIDE-004", "DIVIDE-006", "HOLD-010"):
        assert verdicts(found, rule) == {"pass"}, rule
    assert "typical" not in as_text(found)
    assert verdicts(reviewed(changed(WHEEL, axis)), "HOLD-010") == {"pass", "warn"}  # and without the record


def test_a_machine_called_by_its_kind_has_a_record_by_that_name(shop: Path) -> None:
    text = changed(WHEEL, ("machine: lathe-A", "machine: lathe"))
    found = judged(text, write(shop, ("lathe", *LATHE[1:])))
    assert {"lathe axis (shop record, 5 entries)"} == rests(found, "HOLD-009")
    assert verdicts(found, "HOLD-010") == {"pass"} and "warn" in verdicts(reviewed(text), "HOLD-010")


def test_what_heats_a_hub_has_its_record_by_its_own_word(shop: Path) -> None:
    found = judged(changed(WHEEL, OVEN), write(shop, PLATE))
    hub = found.loaded.job.setups[-1].join.heat.hub  # type: ignore[union-attr]
    name = "hot-plate temperature error (shop record, 5 entries)"
    assert hub is not None
    assert answer(found, "heat.planned_high", "70") == Known(hub + limit(shop, PLATE), frozenset({name}))
    assert {name} == rests(found, "HEAT-005") and verdicts(found, "HEAT-005") == {"pass"}


def test_a_chilled_shaft_as_well(shop: Path) -> None:
    cold = ("carry: 12 s", "carry: 12 s, shaft: -20 degC, cold_by: freezer")
    found = judged(changed(WHEEL, cold), write(shop, ("freezer", "temperature_error", "K", (2, 3, 2, 4, 1))))
    name = "freezer temperature error (shop record, 5 entries)"
    assert {name} == rests(found, "HEAT-015") and verdicts(found, "HEAT-015") == {"pass"}
    assert name in answer(found, "heat.shaft_at", "70").rests_on  # type: ignore[attr-defined]
    assert verdicts(reviewed(changed(WHEEL, cold)), "HEAT-015") == {"warn"}


def test_a_length_takes_what_its_device_gives(shop: Path) -> None:
    named = ("stop:   {on: seat, error: 5 um}", "stop:   {on: seat, error: {device: dial-7}}")
    kept = ("dial-7", "reading", "um", (3, -2, 4, -1, 2))
    found = judged(changed(WHEEL, named), write(shop, kept))
    same_worst(found, reviewed(changed(WHEEL, (named[0], f"stop:   {{on: seat, error: {limit(shop, kept)!r} mm}}"))))


def test_a_device_kept_with_its_mark_stays_one_cause_in_two_setups(shop: Path) -> None:
    """Two holds by one kept device share a cause, and its limit is one as well."""
    kept = "{device: four-jaw-A, mark: kept}"
    found = judged(changed(WHEEL, *twice(kept)), write(shop, CHUCK))
    stated = f"{{device: four-jaw-A, mark: kept, at_most: {limit(shop, CHUCK)!r} mm}}"
    same = reviewed(changed(WHEEL, *twice(stated)))
    same_worst(found, same)
    assert causes(found) == causes(same)
    assert 2 == len([use for use in found.devices.uses if use.taken])  # type: ignore[union-attr]


def twice(given: str) -> tuple[tuple[str, str], ...]:
    before = "rests: pushed, runout: "
    return (MEASURED, f"runout: {given}"), (f"{before}3 um", f"{before}{given}")


def causes(found: Review) -> set[str]:
    return {share.cause.key for result in found.results.values() for share in result.combined.shares}


# -- not taken


def test_a_thin_record_is_told_and_the_typical_value_stays_with_its_warning(shop: Path) -> None:
    found = judged(changed(WHEEL, NAMED), write(shop, (*CHUCK[:3], (6, 7, 5, 8))))
    same_worst(found, reviewed(changed(WHEEL, NAMED)))
    held = [f for f in found.evaluation.findings if f.at == "setups.50.hold.centre"]
    assert ["warn"] == [f.verdict for f in held if f.rule == "HOLD-004"]
    assert {"four-jaw runout"} <= rests(found, "STACK-001")
    told = flat(as_text(found))
    assert "four-jaw-A runout: thin record, 4 entries; nothing is taken from it (setups.50.hold.centre.runout)" in told


def test_a_record_all_alike_gives_nothing(shop: Path) -> None:
    found = judged(changed(WHEEL, NAMED), write(shop, (*CHUCK[:3], (5, 5, 5, 5, 5, 5))))
    assert "warn" in verdicts(found, "HOLD-004")
    assert "all entries are the same number" in flat(as_text(found))


def test_what_the_job_states_or_measured_stays(shop: Path) -> None:
    kept = (CHUCK, HEAD, WHEEL_OF_HEAD, CRANK, SETTING, LATHE, ("oven", *PLATE[1:]))
    measured = (MEASURED, "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um, device: four-jaw-A}")
    text = changed(WHEEL, measured)
    found = judged(text, write(shop, *kept))
    same_worst(found, reviewed(text))
    assert () == found.devices.uses  # type: ignore[union-attr]
    assert "nothing that this job leaves to a device stands in it" in flat(as_text(found))


def test_a_record_of_another_device_or_of_the_kind_changes_nothing(shop: Path) -> None:
    for other in ("four-jaw", "four-jaw-B", "Four-jaw-A"):
        found = judged(changed(WHEEL, NAMED), write(shop, (other, *CHUCK[1:])))
        assert () == found.devices.uses and "warn" in verdicts(found, "HOLD-004")  # type: ignore[union-attr]


def test_a_head_with_one_error_on_record_takes_the_others_as_typical_and_the_warning_stays(shop: Path) -> None:
    found = judged(changed(WHEEL, (DIVIDE, SHORT)), write(shop, WHEEL_OF_HEAD))
    own = "dividing-head-B once per turn (shop record, 5 entries)"
    typical = {"hole-circle once per crank", "hole-circle setting"}
    assert {own, *typical} == rests(found, "DIVIDE-004") and verdicts(found, "DIVIDE-004") == {"warn"}
    assert verdicts(found, "DIVIDE-006") <= {"pass"}
    size = limit(shop, WHEEL_OF_HEAD) / SECOND
    stated = (
        f'divide: {{by: hole-circle, circle: 18, wheel: {{once_per_turn: {size!r}"}}, '
        'worm: {once_per_crank: 15"}, setting: 5", clamp: 0"}'
    )
    same_worst(found, reviewed(changed(WHEEL, (DIVIDE, stated))))
    told = flat(as_text(found))
    assert "once per crank turn 7.7 um typical" in told
    assert "Rests on typical values: hole-circle once per crank, hole-circle setting." in told


@pytest.mark.parametrize("by", ["direct", "polygon", "theodolite", "face-teeth", "sine-bar"])
def test_a_way_past_the_heads_wheel_and_worm_takes_nothing_of_the_heads_record(by: str, shop: Path) -> None:
    text = changed(WHEEL, (DIVIDE, f"divide: {{by: {by}}}"))
    found = judged(text, write(shop, WHEEL_OF_HEAD, CRANK, SETTING))
    assert () == found.devices.uses  # type: ignore[union-attr]
    own = judged(text, write(shop, (by, *SETTING[1:]), (by, *CRANK[1:])))
    assert ["setups.40.divide.setting"] == [use.path for use in own.devices.uses]  # type: ignore[union-attr]


def test_coordinates_have_no_setting_of_an_angle_and_a_stated_part_of_a_way_is_its_record(shop: Path) -> None:
    for way in ("by: x-y", 'by: polygon, sighting: 1"'):
        text = changed(WHEEL, (DIVIDE, f"divide: {{{way}}}"))
        found = judged(text, write(shop, ("x-y", *SETTING[1:]), ("polygon", *SETTING[1:])))
        assert () == found.devices.uses  # type: ignore[union-attr]


def test_a_readout_has_no_worm_to_take_from_the_head(shop: Path) -> None:
    text = changed(WHEEL, (DIVIDE, "divide: {by: readout}"))
    found = judged(text, write(shop, WHEEL_OF_HEAD, CRANK, SETTING))
    assert {"setups.40.divide.wheel.once_per_turn", "setups.40.divide.setting"} == set(found.loaded.own)


def test_a_sine_bar_sets_a_tilt_past_the_heads_scale(shop: Path) -> None:
    text = changed(WHEEL, (TILT[0], "by: sine-bar, leans"))
    assert () == judged(text, write(shop, HEAD)).devices.uses  # type: ignore[union-attr]
    found = judged(text, write(shop, ("sine-bar", *HEAD[1:])))
    assert {"sine-bar tilt (shop record, 5 entries)"} == rests(found, "TILT-008")


def test_a_device_that_wears_is_told_beside_its_limit(shop: Path) -> None:
    found = judged(changed(WHEEL, NAMED), write(shop, (*CHUCK[:3], (5, 6, 5, 6, 5, 12, 13))))
    assert "the last 2 values lie above the limit of the 5 before: the device wears" in flat(as_text(found))


# -- how it is handed on


def test_json_holds_the_files_sha256_and_what_was_taken(shop: Path) -> None:
    data = json.loads(as_json(judged(changed(WHEEL, NAMED), write(shop, CHUCK))))
    assert read_record(shop).sha256 == data["record"]["sha256"]
    assert [("setups.50.hold.centre.runout", "four-jaw-A", "runout", 5, True)] == [
        (u["at"], u["device"], u["what"], u["entries"], u["taken"]) for u in data["record"]["used"]
    ]
    assert data["record"]["used"][0]["limit"] == pytest.approx(1000.0 * limit(shop, CHUCK), abs=1e-6)
    assert json.loads(as_json(reviewed(WHEEL)))["record"] is None


def test_the_job_itself_is_not_changed_and_knows_what_its_file_wrote(shop: Path) -> None:
    before = loaded(changed(WHEEL, NAMED, TILT))
    after, _, _ = with_own(before, read_record(write(shop, CHUCK, HEAD)), HouseRows("", ()))
    assert before.job.setups[4].hold.centre.runout.at_most is None  # type: ignore[union-attr]
    assert after.job.setups[4].hold.centre.runout.at_most is not None  # type: ignore[union-attr]
    assert after.job.setups[3].head.model_fields_set == before.job.setups[3].head.model_fields_set  # type: ignore[union-attr]
    assert before.own == {} and set(after.own) == {"setups.50.hold.centre.runout", "setups.40.head.uncertainty"}
    assert before.sha256 == after.sha256


def test_an_inch_job_is_told_its_limits_in_thou(shop: Path) -> None:
    named = ("by: indicator, at: 0.3125, runout: 0.2 thou", "by: indicator, at: 0.3125, runout: {device: M-3}")
    found = judged(changed(PLATE_JOB, named), write(shop, ("M-3", "runout", "um", (5, 6, 5, 6, 5))))
    assert "M-3 runout: 0.26 thou" in flat(as_text(found))
