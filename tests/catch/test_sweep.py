"""A fixed sample of the sweep: a number taken out is never a pass, and most spoilt numbers are noticed."""

from __future__ import annotations

import re
from functools import cache

from tests.catch import sweep
from tests.catch.numbers import WAYS
from tests.catch.sweep import MOVES, NOTICED, SILENT, Spoilt
from tests.catch.table import good_jobs
from tests.jobs.test_missing_numbers import DEFAULTS

EACH = 24
"""Of all numbers in their order, one in so many is spoilt here; `python -m tests.catch` spoils them all."""

MORE_DEFAULTS = {  # outside the sections that test_missing_numbers.py goes through
    "room": "20 degC, the temperature of ISO 1",
    "confidence": "95 %, as is common in tables of uncertainties",
    "require[*].across": "a face is judged across its own diameter",
    "parts.*.properties.heat_cap": "the limit of its class, from the tables",
    "parts.*.surfaces.*.width": "teeth without a face width are judged at their middle; what needs the width is open",
    "worm.axial_module": "told by other sizes of the same worm",
    "setups.*.hold.*.runout.at_most": "what has been measured needs no plan",
    "setups.*.join.trued.runout.at_most": "what has been measured needs no plan",
    "setups.*.hold.*.runout.indicator": "a dial that is not named is not judged: no finding passes in its place",
    "setups.*.join.trued.runout.indicator": "a dial that is not named is not judged: no finding passes in its place",
    "setups.*.join.growth_at[*]": "one place fewer to tell the growth at: less is asked, not less is known",
}


@cache
def sample() -> tuple[Spoilt, ...]:
    """Every way of one number in EACH, so that `unused` has what it needs."""
    tries = sweep.every(good_jobs())
    chosen = set(list(dict.fromkeys(number for number, _ in tries))[::EACH])
    return tuple(sweep.spoil((number, way)) for number, way in tries if number in chosen)


def test_the_sample_reaches_every_way_and_many_jobs() -> None:
    assert {one.way for one in sample()} == set(WAYS)
    assert len({one.number.job for one in sample()}) >= 0.8 * len(good_jobs())


def known_default(path: str) -> bool:
    """Is a key one of those that may be left out, and what is taken then is written down?"""
    rows = (*DEFAULTS, *MORE_DEFAULTS)
    return any(re.fullmatch(re.escape(row).replace(r"\*", r"[^.]+"), path) for row in rows)


def test_a_number_taken_out_is_a_pass_only_where_a_default_is_told_or_written_down() -> None:
    passed = sweep.removed_in_silence(sample())
    assert [one.number.told() for one in passed if not known_default(one.number.path)] == []


def test_what_is_taken_out_and_has_no_default_would_be_told() -> None:
    number = next(one.number for one in sample() if one.number.path not in DEFAULTS and one.how == MOVES)
    silent = [Spoilt(number, "doubled", MOVES, True), Spoilt(number, "removed", SILENT, True)]
    assert [one.way for one in sweep.removed_in_silence(silent)] == ["removed"]


def test_a_number_of_the_wrong_sign_is_noticed() -> None:
    negated = [one for one in sample() if one.way == "negated"]
    assert sum(one.how in NOTICED for one in negated) >= 0.8 * len(negated)


def test_the_shares_are_told_in_lines_that_fit() -> None:
    lines = sweep.told(sample())
    assert len(lines) == 4 + len(WAYS) and all(len(line) <= 80 for line in lines)
