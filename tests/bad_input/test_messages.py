"""What a spoilt job file says: the whole message of each trap, all errors of a file in one run, in the order of lines."""

from __future__ import annotations

import pickle
from pathlib import Path

import pytest
import yaml

from setupcheck.errors import JobError, Problem
from setupcheck.jobfile.reading import read_job_text
from tests.bad_input.ring import RING, refused, spoilt, told

TRAPS = yaml.safe_load((Path(__file__).parent / "traps.yaml").read_text("utf-8"))


@pytest.mark.parametrize("trap", TRAPS, ids=[t["trap"].replace(" ", "-") for t in TRAPS])
def test_a_spoilt_place_is_named_with_its_line_and_what_to_write(trap: dict[str, object]) -> None:
    wrong = refused(spoilt(str(trap["in place of"]), str(trap["write"])))
    assert trap["says"] == [told(problem) for problem in wrong.problems]


def test_the_sound_job_itself_is_accepted() -> None:
    assert read_job_text(RING, "job.yaml").job.title == "Ring gear blank"


def test_a_message_shows_the_line_and_points_at_the_text() -> None:
    expected = """\
job.yaml:30:20  setups.20.hold.centre.on
    30 |       centre: {on: boar, by: spigot, clearance: [1 um, 3 um], runout: 3 um}
       |                    ^^^^
  no surface is called 'boar'. Did you mean bar?"""
    assert expected == str(refused(spoilt("on: bore, by", "on: boar, by")))


def test_five_mistakes_in_different_places_are_told_in_one_run_and_in_the_order_of_lines() -> None:
    text = RING
    for old, new in (
        ('at_most: 400"', "at_most: 400 um"),  # a limit in the wrong kind of unit
        ("runout: 3 um", "runout: 2,5 um"),  # a decimal comma
        ("machine: head-B", "machine: head-C"),  # an unknown name
        ("worm_ratio: 40", "worm_ration: 40"),  # a mistyped key
        ("diameter: 32 H7", "diameter: 55 H7"),  # a bore larger than the hub
    ):
        text = spoilt(old, new, text)
    expected = [
        (11, "parts.ring.surfaces.bore.diameter"),
        (17, "machines.head-B.worm_ration"),
        (27, "setups.20.machine"),
        (30, "setups.20.hold.centre.runout"),
        (37, "require[2].at_most"),
    ]
    assert expected == [(p.line, p.path) for p in refused(text).problems]


def test_a_name_is_looked_up_even_where_values_of_the_same_entry_are_wrong() -> None:
    text = spoilt("on: bore, by", "on: boar, by", spoilt("runout: 3 um", "runout: 3"))
    assert [20, 71] == [p.column for p in refused(text).problems if p.line == 30]


def test_sizes_are_told_in_the_units_of_the_file() -> None:
    inches = spoilt("units: mm", "units: in", RING.replace('400"', "400 arcsec").replace("32 H7", "50"))
    assert [
        "a bore of 50 in leaves nothing of hub, which is 50 in from 20 in to 30 in",
    ] == [p.problem for p in refused(inches).problems]


def test_a_mistake_in_the_units_of_the_file_is_told_once_and_not_at_every_size() -> None:
    assert 1 == len(refused(spoilt("units: mm", "units: furlong")).problems)


def test_more_than_fifty_mistakes_are_counted_and_not_all_printed() -> None:
    setups = "".join(f"  - {{op: {op}, machine: nowhere-{op}}}\n" for op in range(30, 130))
    said = str(refused(RING.replace("require:\n", setups + "require:\n")))
    assert "and 151 more" == said.splitlines()[-1]


def test_an_error_survives_the_way_from_one_process_to_another() -> None:
    wrong = refused(spoilt("on: bore, by", "on: boar, by"))
    again = pickle.loads(pickle.dumps(wrong))
    assert isinstance(again, JobError)
    assert str(wrong) == str(again)


def test_a_long_text_is_quoted_short() -> None:
    wrong = refused(spoilt("machine: head-B", f"machine: {'x' * 5000}"))
    assert f"there is no machine '{'x' * 39}…'" == wrong.problems[0].problem
    assert max(len(line) for line in str(wrong).splitlines()) < 200


# -- in a terminal

COMMA = """\
    30 |       centre: {on: bore, by: spigot, clearance: [1 um, 3,5 um], runout: 3 um}
       |                                                        ^^^^^^
  '3,5 um' has a comma between two digits. Write a point for the decimal:
  3.5 um; or, in a list, a space after the comma: 3, 5 um"""


def test_a_terminal_gets_the_message_in_lines_of_eighty_columns_and_the_error_keeps_its_own_text() -> None:
    wrong = refused(spoilt("clearance: [1 um, 3 um]", "clearance: [1 um, 3,5 um]"))
    head, *rest = wrong.wrapped().splitlines()
    assert COMMA.splitlines() == rest and head.endswith("setups.20.hold.centre.clearance[2]")
    assert str(wrong).splitlines()[:3] == [head, *rest[:2]]
    assert str(wrong).splitlines()[3:] == [f"  {' '.join(line.strip() for line in rest[2:])}"]


@pytest.mark.parametrize("trap", TRAPS, ids=[t["trap"].replace(" ", "-") for t in TRAPS])
def test_folding_loses_no_word_and_leaves_quoted_lines_whole(trap: dict[str, object]) -> None:
    wrong = refused(spoilt(str(trap["in place of"]), str(trap["write"])))
    own, folded = str(wrong).splitlines(), wrong.wrapped().splitlines()
    assert " ".join(str(wrong).split()) == " ".join(wrong.wrapped().split())
    assert [line for line in own if " | " in line[:10]] == [line for line in folded if " | " in line[:10]]
    says = [line for line in folded if " | " not in line[:10] and not line.startswith("job.yaml")]
    assert max(map(len, says)) <= 80 and all(line.startswith("  ") for line in says)


def test_a_name_too_long_to_break_and_an_example_of_several_lines_stay_as_they_are() -> None:
    name = "a/" * 60 + "job.yaml"
    example = "Begin with:\n" + "setups: " + "[]" * 50
    wrong = JobError(name, (), [Problem("", 0, 0, 1, "there is " + "nothing " * 20, example)])
    told = wrong.wrapped().splitlines()
    assert name + ":" == told[0] and "    setups: " + "[]" * 50 == told[-1]
    assert len(told) > 4 and all(len(line) <= 80 and line[:3] == "  " + line.strip()[0] for line in told[1:-1])
