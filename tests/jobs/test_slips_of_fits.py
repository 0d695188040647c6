"""Slips at a fitted joint, each in two routes: the rule speaks at that joint, and is silent in the good job."""

from __future__ import annotations

from dataclasses import dataclass

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped

ROUTES = ("rotator-worm-wheel", "wheel-on-spindle", "coupling-hub")
TEXTS = {name: shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8") for name in ROUTES}
WHEEL, IN_PLACE, COUPLING = ROUTES


@dataclass(frozen=True)
class Slip:
    """Pieces of one job and what they become, and where the rule speaks."""

    route: str
    at: str
    changes: tuple[tuple[str, str], ...]


SLIPS: dict[tuple[str, str, str], tuple[Slip, ...]] = {
    ("FIT-003", "fail", "the rim of the wheel runs warmer than its shaft"): (
        Slip(WHEEL, "setups.70.join", (("[5 degC, 45 degC]", "[5 degC, {hub: 62 degC, shaft: 38 degC}]"),)),
        Slip(IN_PLACE, "setups.30.join", (("[10 degC, 40 degC]", "[10 degC, {hub: 62 degC, shaft: 38 degC}]"),)),
    ),
    ("FIT-003", "fail", "the interference of the handbook taken on the radius and put on the diameter"): (
        Slip(IN_PLACE, "setups.30.join", (("40.050 ±0.004", "40.025 ±0.004"),)),
        Slip(COUPLING, "setups.50.join", (("diameter: 80 s6", "diameter: 80 +0.039/+0.030"),)),
    ),
    ("FIT-009", "warn", "an expansion per degF of an American data sheet, taken as per kelvin"): (
        Slip(
            WHEEL,
            "parts.wheel",
            (("material: CuSn12-C", "material: CuSn12-C\n    properties: {expansion: 10.2 um/m/K}"),),
        ),
        Slip(
            IN_PLACE,
            "parts.wheel",
            (("material: CuSn12Ni2-C", "material: CuSn12Ni2-C\n    properties: {expansion: 10.0 um/m/K}"),),
        ),
    ),
    ("FIT-011", "warn", "a seat finished to its class before the hub is stretched, and used afterwards"): (
        Slip(COUPLING, "setups.50.join", (("diameter: 110, from: 66", "diameter: 110 h6, from: 66"),)),
        Slip(
            IN_PLACE,
            "setups.30.join",
            (
                ("diameter: 70, from: 22", "diameter: 70 h6, from: 22"),
                ("      hub:    {}\n", ""),
                ("require:\n", "require:\n  - {what: run-out, of: wheel.hub, at_most: 60 um}\n"),
            ),
        ),
    ),
    ("FIT-010", "fail", "a sintered blank, because it was on the shelf"): (
        Slip(WHEEL, "setups.70.join", (("material: CuSn12-C", "material: sintered bronze"),)),
        Slip(COUPLING, "setups.50.join", (("material: C45", "material: sintered steel"),)),
    ),
    ("FIT-013", "fail", "hubs and shafts from the rack, none of which go together"): (
        Slip(
            WHEEL,
            "setups.70.join",
            (
                (
                    "joint: degreased",
                    "joint: degreased\n      pairs: [{name: A, bore: 32.004, journal: 32.051, uncertainty: 1 um}, "
                    "{name: B, bore: 32.011, journal: 32.019, uncertainty: 1 um}]",
                ),
            ),
        ),
        Slip(
            COUPLING,
            "setups.50.join",
            (
                (
                    "joint: degreased",
                    "joint: degreased\n      pairs: [{name: A, bore: 80.008, journal: 80.031, uncertainty: 1 um}]",
                ),
            ),
        ),
    ),
}
GROUPS = list(SLIPS.items())
CASES = [pytest.param(rule, level, slip, id=f"{why}-{slip.route}") for (rule, level, why), s in GROUPS for slip in s]


def changed(slip: Slip) -> str:
    text = TEXTS[slip.route]
    for old, new in slip.changes:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


def judged(text: str) -> Review:
    return review(read_job_text(text, "slip.yaml"))


@pytest.mark.parametrize(("rule", "level", "slip"), CASES)
def test_a_slip_is_caught_at_its_joint_by_its_rule(rule: str, level: str, slip: Slip) -> None:
    said = [
        (f.at, f.verdict) for f in judged(changed(slip)).evaluation.findings if f.rule == rule and f.verdict != "pass"
    ]
    assert (slip.at, level) in said


@pytest.mark.parametrize(("rule", "level", "slip"), CASES)
def test_the_rule_is_silent_in_the_good_job(rule: str, level: str, slip: Slip) -> None:
    found = judged(TEXTS[slip.route]).evaluation.findings
    assert not [f for f in found if f.rule == rule and f.verdict != "pass"]


def test_every_slip_is_made_in_two_different_routes() -> None:
    assert len(SLIPS) >= 6
    assert all(len({slip.route for slip in slips}) == 2 for slips in SLIPS.values())
