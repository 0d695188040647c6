"""Slips with heat and cold, each planted in two jobs with different routes: the right rule, at the right operation."""

from __future__ import annotations

from collections.abc import Mapping

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped

ROTATOR, SPINDLE, COUPLING, RING = "rotator-worm-wheel", "wheel-on-spindle", "coupling-hub", "bearing-ring-seat"
OPERATION = {ROTATOR: 70, SPINDLE: 30, COUPLING: 50, RING: 30}
HEAT = {
    ROTATOR: "heat: {hub: 175 degC, by: oven, oven_error: 10 degC, carry: 12 s, gauge: 32.07}",
    SPINDLE: "heat: {hub: 185 degC, by: oven, oven_error: 5 degC, carry: 10 s, gauge: 40.095}",
    COUPLING: "heat: {hub: 260 degC, by: oven, oven_error: 10 degC, carry: 15 s, gauge: 80.16}",
    RING: "{hub: 117 degC, by: oven, oven_error: 3 degC, read_by: contact-probe, carry: 5 s,\n"
    "         shaft: -40 degC, cold_by: freezer, cold_error: 2 K}",
}
NITROGEN = "shaft: -190 degC, cold_by: liquid-nitrogen, cold_error: 5 K, room_volume: 30 m3, coolant: 10 l"
DRY_ICE = "shaft: -75 degC, cold_by: dry-ice, cold_error: 3 K, room_volume: 30 m3, coolant: 5 kg"
LEADED = ("material: CuSn12-C", "material: C93200")

Change = tuple[str, str]
SLIPS: Mapping[str, tuple[str, set[str], Mapping[str, tuple[Change, ...]]]] = {
    # the rule, those that speak with it in one job or the other, and what is changed in each
    "oil bath near its flash point": (
        "HEAT-011",
        {"HEAT-017"},  # the joints are planned degreased
        {
            ROTATOR: (("by: oven,", "by: oil-bath, flash_point: 215 degC,"),),  # 185 at its hottest: 30 K
            RING: (("by: oven,", "by: oil-bath, flash_point: 150 degC,"),),  # 120 at its hottest
        },
    ),
    "degreased joint out of an oil bath": (
        "HEAT-017",
        set(),
        {
            ROTATOR: (("by: oven,", "by: oil-bath, flash_point: 260 degC,"),),
            SPINDLE: (("by: oven,", "by: oil-bath, flash_point: 260 degC,"),),
        },
    ),
    "nitrogen in a small store room": (
        "HEAT-012",
        set(),
        {
            ROTATOR: (("carry: 12 s,", f"carry: 12 s, {NITROGEN},"),),
            RING: (("shaft: -40 degC, cold_by: freezer, cold_error: 2 K", NITROGEN),),
        },
    ),
    "dry ice in the same": (
        "HEAT-013",
        set(),
        {
            SPINDLE: (("carry: 10 s,", f"carry: 10 s, {DRY_ICE},"),),
            COUPLING: (("carry: 15 s,", f"carry: 15 s, {DRY_ICE},"),),
        },
    ),
    "flame on leaded bronze": (
        "HEAT-009",
        {"FIT-004"},  # the leaded bronze is weaker as well
        {ROTATOR: (LEADED, ("by: oven,", "by: flame,")), SPINDLE: (("material: CuSn12Ni2-C", "material: C93200"), ("by: oven,", "by: flame,"))},
    ),
    "flame on a hardened ring and on a hub that is none": (
        "HEAT-009",
        set(),
        {RING: (("by: oven,", "by: flame,"),), SPINDLE: (("by: oven,", "by: flame,"),)},
    ),
    "gauge made to the journal": (
        "HEAT-007",
        set(),
        {ROTATOR: (("gauge: 32.07", "gauge: 32.033"),), COUPLING: (("gauge: 80.16", "gauge: 80.078"),)},
    ),
    "gauge larger than the hot bore": (
        "HEAT-018",
        set(),
        {ROTATOR: (("gauge: 32.07", "gauge: 32.12"),), COUPLING: (("gauge: 80.16", "gauge: 80.4"),)},
    ),
    "carried for minutes": (
        "HEAT-006",
        {"HEAT-001"},
        {SPINDLE: (("carry: 10 s", "carry: 10 min"),), RING: (("carry: 5 s", "carry: 5 min"),)},
    ),
    "cold that the freezer does not have": (
        "HEAT-001",
        set(),
        {
            RING: (("shaft: -40 degC, cold_by: freezer, cold_error: 2 K", "shaft: 20 degC"),),
            ROTATOR: (("hub: 175 degC,", "hub: 120 degC,"), ("carry: 12 s,", "carry: 12 s, shaft: -18 degC, cold_by: freezer, cold_error: 5 K,")),
        },
    ),
}  # fmt: skip
WARNED: Mapping[str, tuple[str, Mapping[str, tuple[Change, ...]]]] = {
    "infrared on bright bronze": (
        "HEAT-008",
        {
            ROTATOR: (("gauge: 32.07", "read_by: infrared"),),
            SPINDLE: (("gauge: 40.095", "read_by: infrared"),),
        },
    ),
    "the freezer's display believed": (
        "HEAT-015",
        {
            RING: ((", cold_error: 2 K", ""),),
            ROTATOR: (("carry: 12 s,", "carry: 12 s, shaft: -18 degC, cold_by: freezer,"),),
        },
    ),
    "flame on plain steel": (
        "HEAT-016",
        {
            COUPLING: (("by: oven,", "by: flame,"),),
            SPINDLE: (
                ("material: CuSn12Ni2-C", "material: S355J2"),
                ("by: oven,", "by: flame,"),
                ("hub: 185", "hub: 250"),
            ),
        },
    ),
}


def planted(name: str, changes: tuple[Change, ...]) -> Review:
    text = shipped(f"jobs/{name}.yaml").read_text("utf-8")
    assert text.count(HEAT[name]) == 1
    for old, new in changes:
        if old in HEAT[name]:
            now = text.index(HEAT[name][:7])  # the line of heat, perhaps changed already
            start = text.index(old, now)
        else:
            assert text.count(old) == 1, old
            start = text.index(old)
        text = text[:start] + new + text[start + len(old) :]
    return review(read_job_text(text, f"{name}.yaml"))


FAILING = [
    pytest.param(name, rule, also, job, changes, id=f"{name}-{job}")
    for name, (rule, also, jobs) in SLIPS.items()
    for job, changes in jobs.items()
]


@pytest.mark.parametrize(("name", "rule", "also", "job", "changes"), FAILING)
def test_a_slip_with_heat_or_cold_fails_its_rule_at_its_operation(
    name: str, rule: str, also: set[str], job: str, changes: tuple[Change, ...]
) -> None:
    found = planted(job, changes)
    failed = {f.rule: f for f in found.evaluation.findings if f.verdict == "fail"}
    assert rule in failed, (name, failed)
    assert set(failed) <= {rule, *also}
    assert OPERATION[job] == failed[rule].op
    assert failed[rule].remedy
    assert found.verdict == "fail"


@pytest.mark.parametrize(
    ("rule", "job", "changes"),
    [
        pytest.param(rule, job, changes, id=f"{name}-{job}")
        for name, (rule, jobs) in WARNED.items()
        for job, changes in jobs.items()
    ],
)
def test_a_habit_with_heat_or_cold_warns_by_its_rule(rule: str, job: str, changes: tuple[Change, ...]) -> None:
    found = planted(job, changes)
    warned = {f.rule: f for f in found.evaluation.findings if f.verdict == "warn"}
    assert rule in warned
    assert OPERATION[job] == warned[rule].op


def test_each_slip_stands_in_two_jobs_whose_routes_differ() -> None:
    for jobs in (*(jobs for _, _, jobs in SLIPS.values()), *(jobs for _, jobs in WARNED.values())):
        assert len(jobs) == 2


@pytest.mark.parametrize("job", HEAT)
def test_the_good_jobs_have_nothing_open_or_warned_of_heat(job: str) -> None:
    found = review(read_job_text(shipped(f"jobs/{job}.yaml").read_text("utf-8"), job))
    rules = {f.rule: f.verdict for f in found.evaluation.findings if f.rule.startswith("HEAT")}
    assert set(rules.values()) == {"pass"}
    assert {"HEAT-001", "HEAT-006", "HEAT-008"} <= set(rules)
