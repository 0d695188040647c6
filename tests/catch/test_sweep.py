"""A fixed sample of the sweep: a number taken out is never a pass, and most spoilt numbers are noticed."""

from __future__ import annotations

from functools import cache

from setupcheck.flow import review
from tests.catch import sweep
from tests.catch.making import good, without
from tests.catch.numbers import WAYS
from tests.catch.sweep import MOVES, NOTICED, SILENT, Spoilt
from tests.catch.table import good_jobs

EACH = 24
"""Of all numbers in their order, one in so many is spoilt here; `python -m tests.catch` spoils them all."""


@cache
def sample() -> tuple[Spoilt, ...]:
    """Every way of one number in EACH, so that `unused` has what it needs."""
    tries = sweep.every(good_jobs())
    chosen = set(list(dict.fromkeys(number for number, _ in tries))[::EACH])
    return tuple(sweep.spoil((number, way)) for number, way in tries if number in chosen)


def test_the_sample_reaches_every_way_and_many_jobs() -> None:
    assert {one.way for one in sample()} == set(WAYS)
    assert len({one.number.job for one in sample()}) >= 0.8 * len(good_jobs())


def test_a_number_taken_out_is_never_a_pass() -> None:
    assert [one.number.told() for one in sweep.removed_and_passed(sample())] == []


def test_an_entry_that_is_left_out_is_open_and_names_what_stands_in_for_it() -> None:
    found = review(without(good("bearing-ring-seat"), ["room"]))
    told = [(f.rule, f.at, f.verdict, f.message) for f in found.evaluation.findings if f.rule == "ENTRY-001"]
    assert told == [("ENTRY-001", "room", "open", "not written; taken instead: the shop at 20 degC")]
    assert found.verdict == "open"


def test_what_is_taken_out_and_passes_would_be_told() -> None:
    number = next(one.number for one in sample() if one.how == MOVES)
    passed = [Spoilt(number, "doubled", MOVES, True), Spoilt(number, "removed", SILENT, True)]
    assert [one.way for one in sweep.removed_and_passed(passed)] == ["removed"]
    assert sweep.listed(passed) == [f"removed, passes: {number.told()} ({SILENT})"]


def test_a_number_of_the_wrong_sign_is_noticed() -> None:
    negated = [one for one in sample() if one.way == "negated"]
    assert sum(one.how in NOTICED for one in negated) >= 0.8 * len(negated)


def test_the_shares_are_told_in_lines_that_fit() -> None:
    lines = sweep.told(sample())
    assert len(lines) == 4 + len(WAYS) and all(len(line) <= 80 for line in lines)
