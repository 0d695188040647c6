"""Numbers of rules are never used again: tests/rules/ids.yaml keeps every number ever given out, and what it judges."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Mapping
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from .test_cases import case_files, shipped

REGISTER = Path(__file__).parent / "ids.yaml"
PROGRAM = Path(__file__).parents[2] / "setupcheck"


@cache
def register() -> Mapping[str, Any]:
    found: Mapping[str, Any] = yaml.safe_load(REGISTER.read_text(encoding="utf-8"))
    return found


def in_the_book() -> dict[str, str]:
    return {rule.id: rule.quantity for rule in shipped().rules}


def slips(book: Mapping[str, str], kept: Mapping[str, Any]) -> list[str]:
    """What is wrong between a book (id -> quantity) and a register, in words."""
    issued, retired = kept["issued"], kept["retired"]
    found = [f"{one} is retired and may not come back" for one in sorted(book.keys() & retired.keys())]
    for one in sorted(book.keys() - retired.keys()):
        if one not in issued:
            found.append(f"{one} is new: write '  {one}: {book[one]}' under issued")
        elif issued[one] != book[one]:
            found.append(f"{one} judged {issued[one]} and now judges {book[one]}: a new rule takes a new number")
    gone = sorted(issued.keys() - book.keys() - retired.keys())
    return [*found, *(f"{one} left the book: write it under retired, with the reason" for one in gone)]


def test_every_rule_keeps_the_number_it_was_given() -> None:
    assert [] == slips(in_the_book(), register())


@pytest.mark.parametrize(
    ("book", "says"),
    [
        ({"FIT-001": "fit.kind", "FIT-003": "fit.new"}, "FIT-003 is new: write '  FIT-003: fit.new' under issued"),
        ({"FIT-001": "fit.other"}, "FIT-001 judged fit.kind and now judges fit.other: a new rule takes a new number"),
        ({"FIT-001": "fit.kind", "FIT-002": "fit.old"}, "FIT-002 is retired and may not come back"),
        ({}, "FIT-001 left the book: write it under retired, with the reason"),
    ],
)
def test_a_number_used_again_is_found(book: Mapping[str, str], says: str) -> None:
    kept = {"issued": {"FIT-001": "fit.kind", "FIT-002": "fit.old"}, "retired": {"FIT-002": "no longer wanted"}}
    assert [says] == slips(book, kept)


def test_no_number_is_written_twice_or_left_out_between_two() -> None:
    lines = re.findall(r"^  ([A-Z]+-\d{3}): ", REGISTER.read_text(encoding="utf-8"), re.MULTILINE)
    twice = {one for one, times in Counter(lines).items() if times > 1}
    assert twice <= register()["retired"].keys()  # what was issued and then retired stands in both lists
    given = {*register()["issued"], *register()["retired"]}
    for family in {one.partition("-")[0] for one in given}:
        numbers = sorted(int(one.partition("-")[2]) for one in given if one.startswith(f"{family}-"))
        assert list(range(1, len(numbers) + 1)) == numbers, f"{family} leaves a number out: write it under retired"


def test_every_retired_number_has_a_reason_and_no_cases() -> None:
    retired = register()["retired"]
    assert "DIVIDE-017" in retired
    assert all(isinstance(why, str) and len(why) > 20 for why in retired.values())
    assert not retired.keys() & case_files().keys()


def test_what_the_program_finds_by_itself_has_numbers_of_its_own() -> None:
    own = set(register()["of_the_program"])
    assert not own & in_the_book().keys()
    written = {
        one
        for path in PROGRAM.rglob("*.py")
        for one in re.findall(r"\"([A-Z]{3,}-\d{3})\"", path.read_text(encoding="utf-8"))
    }
    assert own <= written and written <= own | in_the_book().keys()


def test_every_rule_breaks_in_one_case_and_keeps_quiet_in_another() -> None:
    for rule in shipped().rules:
        cases = case_files()[rule.id]
        verdicts = {cases["broken"]["verdict"], cases["pass"].get("verdict", "pass")}
        assert {"pass", rule.level} == verdicts, rule.id


def test_every_limit_of_a_rule_has_a_source_that_is_listed() -> None:
    listed = yaml.safe_load((Path(__file__).parents[2] / "rules" / "sources.yaml").read_text(encoding="utf-8"))
    for rule in shipped().rules:
        assert rule.sources, rule.id
        assert {source.ref for source in rule.sources} <= set(listed), rule.id
