"""Heat and cold of a joint written wrongly: the line, what is wrong, and what would be right."""

from __future__ import annotations

import pytest

from setupcheck.errors import JobError
from setupcheck.jobfile.reading import read_job_text
from tests.unit.report.sample import WHEEL, line_of

HEAT = "heat: {hub: 175 degC, by: oven, oven_error: 10 degC, carry: 12 s, gauge: 32.07}"


def told(text: str) -> list[str]:
    """Every message of a file that is refused, with its line and path."""
    with pytest.raises(JobError) as caught:
        read_job_text(text, "job.yaml")
    return [f"{p.line} {p.path} | {p.problem}. {p.hint}" for p in caught.value.problems]


def heat(said: str) -> list[str]:
    assert WHEEL.count(HEAT) == 1
    line = line_of(WHEEL, HEAT)
    prefix = f"{line} setups.70.join.heat"
    found = told(WHEEL.replace(HEAT, f"heat: {{{said}}}"))
    assert all(one.startswith(prefix) for one in found), found
    return [one.removeprefix(prefix) for one in found]


COLD = "is below absolute zero. Check the number and its unit"


@pytest.mark.parametrize(
    ("said", "message"),
    [
        ("hub: -300 degC", f".hub | '-300 degC' {COLD}"),
        ("hub: -500 degF", f".hub | '-500 degF' {COLD}"),
        ("shaft: -1 K", f".shaft | '-1 K' {COLD}"),
        ("flash_point: -274 degC", f".flash_point | '-274 degC' {COLD}"),
        ("flash_point: 200", ".flash_point | 200 has no unit, so it is not a temperature. Write 200 degC"),
        ("oven_error: -3 K", ".oven_error | '-3 K' is below zero. Write 0 or more, without a minus sign"),
        ("cold_error: -3 K", ".cold_error | '-3 K' is below zero. Write 0 or more, without a minus sign"),
        ("cold_error: 3", ".cold_error | 3 has no unit, so it is not a temperature difference. Write 3 K"),
        ("cold_eror: 3 K", ".cold_eror | 'cold_eror' is not a key of this entry. Did you mean cold_error?"),
        ("gauge: 0", ".gauge | 0 is not a size. Write a length above zero"),
        ("gauge: 100 degC", ".gauge | '100 degC' is a temperature, not a length. Write a length, as in 2.5 um"),
        ("room_volume: 40", ".room_volume | 40 has no unit, so it is not a volume. Write its unit too: m3, l or ft3"),
        ("room_volume: 0 m3", " | a room of nothing holds nobody. Write its volume, as in room_volume: 40 m3"),
        (
            "coolant: 5",
            ".coolant | 5 is no amount of a coolant. Write litres of nitrogen or kilograms of dry ice, as in 5 l or 2 kg",
        ),
        (
            "coolant: a bottle",
            ".coolant | 'a bottle' is not a number. Write litres of nitrogen or kilograms of dry ice, as in 5 l or 2 kg",
        ),
        (
            "cold_by: liquid-nitrogen, coolant: 5 kg",
            " | liquid-nitrogen is counted in litres. Write coolant: 5 l",
        ),
        ("cold_by: dry-ice, coolant: 5 l", " | dry-ice is counted in kilograms. Write coolant: 2 kg"),
        (
            "cold_by: dry-ice, coolant: 0 kg",
            " | a coolant of nothing chills nothing. Write all that may boil off, as in 2 kg",
        ),
        (
            "cold_by: freezer, coolant: 5 kg",
            " | coolant is what boils off, and nothing here does. Drop it, or write cold_by: liquid-nitrogen or dry-ice",
        ),
        (
            "shaft: -90 degC, cold_by: dry-ice",
            " | dry-ice makes nothing colder than -78.5 degC. Write shaft: -78.5 degC",
        ),
        (
            "shaft: -220 degC, cold_by: liquid-nitrogen",
            " | liquid-nitrogen makes nothing colder than -196 degC. Write shaft: -196 degC",
        ),
        (
            "hub: -200 degC, by: oven",
            ".hub | oven makes nothing colder than the room with its 20 degC, and hub is -200 degC. "
            "Write the heat it is set to, as in hub: 150 degC, or drop by",
        ),
        (
            "hub: 150 degC, by: oven, shaft: 60 degC, cold_by: freezer",
            ".shaft | freezer makes nothing warmer than the room with its 20 degC, and shaft is 60 degC. "
            "Write its cold, as in shaft: -18 degC, or drop cold_by",
        ),
        (
            "by: oven, flash_point: 220 degC",
            " | an oil has a flash_point, and oven has none. Drop it, or write by: oil-bath",
        ),
    ],
)
def test_a_wrong_entry_of_heat_is_told_at_its_line(said: str, message: str) -> None:
    assert [message] == heat(said)


def test_the_rounded_temperatures_of_dry_ice_and_nitrogen_are_read() -> None:
    for said, cold in (("-80 degC, cold_by: dry-ice", -80.0), ("77 K, cold_by: liquid-nitrogen", -196.15)):
        job = read_job_text(WHEEL.replace(HEAT, f"heat: {{hub: 100 degC, shaft: {said}}}"), "job.yaml").job
        (heat_read,) = (s.join.heat for s in job.setups if s.join is not None)
        assert heat_read is not None
        assert heat_read.shaft == pytest.approx(cold)


def test_a_service_or_a_room_below_absolute_zero_is_told_at_its_line() -> None:
    served = "serves_at: [5 degC, 45 degC]"
    line = line_of(WHEEL, f"      {served}")
    text = WHEEL.replace(f"      {served}", "      serves_at: [-300 degC, 45 degC]")
    assert [f"{line} setups.70.join.serves_at | '-300 degC' {COLD}"] == told(text)
    text = WHEEL.replace("room: 20 degC", "room: -300 degC")
    assert [f"{line_of(text, 'room: -300')} room | '-300 degC' {COLD}"] == told(text)


@pytest.mark.parametrize("room", ["200 degC", "-40.1 degC", "141 degF"])
def test_a_room_that_nobody_works_in_is_refused(room: str) -> None:
    text = WHEEL.replace("\nroom: 20 degC", f"\nroom: {room}")
    says = f"room | a room of {room} is none to work in. Write room: 20 degC or what it has, from -40 to 60 degC"
    assert [f"{line_of(text, f'room: {room}')} {says}"] == told(text)


@pytest.mark.parametrize(
    "said", ["hub: 20 degC, by: oven", "hub: -30 degC", "shaft: 60 degC", "shaft: 20 degC, cold_by: freezer"]
)
def test_heat_and_cold_at_the_room_and_parts_that_nothing_heats_or_chills_are_read(said: str) -> None:
    job = read_job_text(WHEEL.replace(HEAT, f"heat: {{{said}}}"), "job.yaml").job
    (read,) = (s.join.heat for s in job.setups if s.join is not None)
    assert read is not None
    assert float(said.split()[1]) in (read.hub, read.shaft)
