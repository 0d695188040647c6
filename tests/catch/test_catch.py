"""At least 97 of 100 slips are caught by the rule they deserve, and the good jobs set nothing off."""

from __future__ import annotations

from collections import Counter
from functools import cache
from pathlib import Path

import pytest

from setupcheck.jobfile.changing import Change
from tests.catch.__main__ import slips_told
from tests.catch.making import MISSED, OTHER, RIGHT, WAITS, Caught, false_alarms, judge
from tests.catch.table import Overlay, good_jobs, overlays

LEAST_RIGHT = 0.97


@cache
def caught() -> tuple[Caught, ...]:
    return tuple(judge(one) for one in overlays())


def test_the_slips_are_caught_by_the_rules_they_deserve() -> None:
    counts = Counter(one.how for one in caught())
    judged = len(caught()) - counts[WAITS]
    assert counts[RIGHT] >= LEAST_RIGHT * judged, [
        (one.overlay.told(), one.spoke) for one in caught() if one.how in (OTHER, MISSED)
    ]


def test_what_is_missed_altogether_is_rare() -> None:
    assert sum(one.how == MISSED for one in caught()) <= 0.01 * len(caught())


def test_the_readme_tells_the_figure_of_today() -> None:
    right, judged = sum(one.how == RIGHT for one in caught()), sum(one.how != WAITS for one in caught())
    readme = (Path(__file__).parents[2] / "README.md").read_text(encoding="utf-8")
    assert f"catches {right} of {judged}, with no false alarm" in readme


def test_the_good_jobs_set_nothing_off() -> None:
    assert false_alarms(good_jobs()) == ()


@pytest.mark.parametrize(
    ("key", "value", "rule", "at", "how"),
    [
        ("setups.30.hold.centre.runout", "2 thou", "STACK-001", "require[1]", RIGHT),
        ("setups.30.hold.centre.runout", "2 thou", "STACK-001", "require[7]", OTHER),
        ("setups.30.hold.centre.runout", "2 thou", "HOLD-003", "setups.30.hold.centre", OTHER),
        ("setups.30.hold.centre.runout", "0.2 thou", "STACK-001", "require[1]", MISSED),
        ("setups.30.hold.centre.runout", "0,2 thou", "STACK-001", "require[1]", OTHER),
        ("setups.30.hold.centre.runout", "2 thou", "to come: any", "require[1]", WAITS),
    ],
)
def test_the_count_tells_right_from_wrong(key: str, value: str, rule: str, at: str, how: str) -> None:
    overlay = Overlay("worse-than-planned", "index-plate", (Change(key, value),), (), rule, at, "")
    assert judge(overlay).how == how


def test_the_table_of_numbers_adds_up() -> None:
    lines = slips_told(list(caught()))
    assert str(len(overlays())) in lines[0]
    assert sum(int(line[30:].split()[0]) for line in lines[1:]) == len(overlays())
    assert all(len(line) <= 80 for line in lines)
