"""A fixed sample of the sweep: a number taken out is never a pass, and most spoilt numbers are noticed."""

from __future__ import annotations

from functools import cache

from setupcheck.flow import review
from setupcheck.report.text import how_far
from tests.catch import sweep
from tests.catch.making import good, without
from tests.catch.numbers import WAYS
from tests.catch.sweep import MOVES, NOTICED, SILENT, Spoilt
from tests.catch.table import good_jobs

EACH = 24
"""Of all numbers in their order, one in so many is spoilt here; `python -m tests.catch` spoils them all."""

TOLD_ELSEWHERE = ("worm.axial_module",)
"""Entries that another one of the same file says again: taken out, nothing is missing. Here the worm's other sizes."""


@cache
def sample() -> tuple[Spoilt, ...]:
    """Every way of one number in EACH, so that `unused` has what it needs."""
    tries = sweep.every(good_jobs())
    chosen = set(list(dict.fromkeys(number for number, _ in tries))[::EACH])
    return tuple(sweep.spoil((number, way)) for number, way in tries if number in chosen)


def test_the_sample_reaches_every_way_and_many_jobs() -> None:
    assert {one.way for one in sample()} == set(WAYS)
    assert len({one.number.job for one in sample()}) >= 0.8 * len(good_jobs())


def test_a_number_taken_out_is_never_a_plain_pass() -> None:
    """Where the review still says pass, it says on how many defaults, and names this entry among them."""
    passed = sweep.removed_in_silence(sample())
    assert [one.number.told() for one in passed if one.number.path not in TOLD_ELSEWHERE] == []


def test_a_pass_with_something_taken_says_so_in_its_first_line() -> None:
    whole, without_room = good("bearing-ring-seat"), without(good("bearing-ring-seat"), ["room"])
    now, then = (how_far(review(job)) for job in (whole, without_room))
    assert (now, then) == ("on 2 defaults", "on 3 defaults")


def test_what_is_taken_out_and_has_no_default_would_be_told() -> None:
    number = next(one.number for one in sample() if one.how == MOVES)
    silent = [Spoilt(number, "doubled", MOVES, True), Spoilt(number, "removed", SILENT, True)]
    assert [one.way for one in sweep.removed_in_silence(silent)] == ["removed"]


def test_a_number_of_the_wrong_sign_is_noticed() -> None:
    negated = [one for one in sample() if one.way == "negated"]
    assert sum(one.how in NOTICED for one in negated) >= 0.8 * len(negated)


def test_the_shares_are_told_in_lines_that_fit() -> None:
    lines = sweep.told(sample())
    assert len(lines) == 4 + len(WAYS) and all(len(line) <= 80 for line in lines)
