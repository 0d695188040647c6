"""The joint cut into stretches of constant section, from the drawing of both parts."""

from __future__ import annotations

import math

import pytest

from setupcheck.physics import interference as fits
from setupcheck.quantities.book import Open
from setupcheck.quantities.joint_shape import Section
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.strength import SLIP_FACTOR

from .joint_text import WHOLE, answer, changed, finding, number, value

TEETH = "{kind: teeth, count: 60, on_circle: 120, at: 20, width: 20, module: 2}"
HUB = "hub: {kind: cylinder, diameter: 90, from: 0, to: 10}"


def pair_of(text: str) -> Pair:
    found = value(text, "fit.pair")
    assert isinstance(found, Pair)
    return found


def sections(*pairs: tuple[str, str], text: str = WHOLE) -> tuple[Section, ...]:
    return pair_of(changed(*pairs, text=text)).sections


PLAIN = Section(10.0, 90.0, 20.0, False)
TOOTHED = Section(20.0, 115.0, 20.0, True)  # 120 - 2.5 x 2


def test_a_stepped_hub_is_cut_where_it_steps_and_teeth_count_by_their_root_circle() -> None:
    assert (PLAIN, TOOTHED) == sections()


def beside_hub(extra: str) -> tuple[str, str]:
    """One more surface of the ring."""
    return HUB, f"{HUB}\n      {extra}"


STRETCHES = {
    "three steps, in any order in the file": (
        [
            (TEETH, "{kind: cylinder, diameter: 110, from: 22, to: 30}"),
            beside_hub("rim: {kind: cylinder, diameter: 130, from: 10, to: 22}"),
        ],
        (PLAIN, Section(12.0, 130.0, 20.0, False), Section(8.0, 110.0, 20.0, False)),
    ),
    "what reaches past the joint counts only over it": (
        [("from: 0, to: 10", "from: -15, to: 10"), (", width: 20", ", width: 40")],
        (Section(10.0, 115.0, 20.0, True), TOOTHED),
    ),
    "teeth cut into a cylinder: roots carry the stress, not tips": (
        [beside_hub("rim: {kind: cylinder, diameter: 124, from: 10, to: 30}")],
        (PLAIN, TOOTHED),
    ),
    "the larger of two plain outsides stands there": (
        [beside_hub("ring: {kind: cylinder, diameter: 96, from: 0, to: 10}")],
        (Section(10.0, 96.0, 20.0, False), TOOTHED),
    ),
    "stock does not carry": (
        [beside_hub("bar: {kind: cylinder, diameter: 140, from: 0, to: 30, made: stock}")],
        (PLAIN, TOOTHED),
    ),
    "nothing drawn, a larger face: the neighbour": (
        [(HUB, "flank: {kind: face, at: 10, facing: -z, diameter: 125}")],
        (Section(10.0, 115.0, 20.0, False), TOOTHED),
    ),
    "nothing drawn, a smaller face: the face": (
        [(HUB, "flank: {kind: face, at: 0, facing: -z, diameter: 80}")],
        (Section(10.0, 80.0, 20.0, False), TOOTHED),
    ),
    "a face no larger than the bore says nothing": (
        [(HUB, "flank: {kind: face, at: 0, facing: -z, diameter: 60}")],
        (Section(10.0, 115.0, 20.0, False), TOOTHED),
    ),
    "a groove nobody drew takes the smaller of both sides": (
        [(TEETH, "{kind: cylinder, diameter: 110, from: 20, to: 30}")],
        (PLAIN, PLAIN, Section(10.0, 110.0, 20.0, False)),
    ),
}


@pytest.mark.parametrize(("pairs", "expected"), STRETCHES.values(), ids=STRETCHES)
def test_stretches(pairs: list[tuple[str, str]], expected: tuple[Section, ...]) -> None:
    assert expected == sections(*pairs)


def test_a_hole_is_said_at_the_seat_or_drawn_as_a_bore() -> None:
    assert (0.0, 0.0) == tuple(s.hole for s in sections((", hole: 20", "")))
    drawn = sections(
        (", hole: 20", ""),
        ("      shoulder:", "      through: {kind: bore, diameter: 24, from: -5, to: 60}\n      shoulder:"),
    )
    assert (24.0, 24.0) == tuple(s.hole for s in drawn)
    # a blind one makes one stretch hollow; where both are drawn the larger one counts
    blind = sections(
        (", hole: 20", ""),
        ("      shoulder:", "      blind: {kind: bore, diameter: 24, from: 18, to: 60}\n      shoulder:"),
    )
    assert [(10.0, 0.0), (8.0, 0.0), (12.0, 24.0)] == [(s.length, s.hole) for s in blind]
    both = sections(("      shoulder:", "      blind: {kind: bore, diameter: 24, from: 18, to: 60}\n      shoulder:"))
    assert [20.0, 20.0, 24.0] == [s.hole for s in both]


def test_only_what_bore_and_journal_have_in_common_counts() -> None:
    # no stop: both stand middle on middle, so a seat of 20 lies from 5 to 25 in the bore of 30
    short = sections(("diameter: 60 r6, from: 0, to: 30", "diameter: 60 r6, from: 0, to: 20"))
    assert [(5.0, 90.0), (15.0, 115.0)] == [(s.length, s.outside) for s in short]


def test_a_hub_put_on_the_other_way_round_meets_the_blind_hole_with_its_other_end() -> None:
    back = "      back: {kind: face, at: 0, facing: -z, diameter: 85}\n"
    faces = f"{back}      front: {{kind: face, at: 30, facing: +z, diameter: 110}}\n      hub:"
    blind = ("      shoulder:", "      blind: {kind: bore, diameter: 24, from: 18, to: 60}\n      shoulder:")
    seen = {}
    for end in ("back", "front"):
        stop = f"      square: bore\n      stop: {{on: ring.{end}, against: shaft.shoulder, error: 0 um}}\n"
        found = sections((", hole: 20", ""), blind, ("      hub:", faces), ("      square: bore\n", stop))
        seen[end] = [(s.length, s.outside, s.hole) for s in found]
    assert [(10.0, 90.0, 0.0), (8.0, 115.0, 0.0), (12.0, 115.0, 24.0)] == seen["back"]
    # turned round, the teeth come to the shoulder and the hub over the hole; heights may run either way
    turned = sorted(seen["front"])
    assert [(2.0, 115.0, 24.0), (10.0, 90.0, 24.0), (18.0, 115.0, 0.0)] == turned


def test_every_section_carries_by_itself_and_the_stiffest_one_rules_the_stress() -> None:
    text = changed()
    pair, grip, most = pair_of(text), number(text, "fit.grip_least"), number(text, "fit.grip_most")
    force = 0.0
    for joint, s in zip(pair.joints("holding"), pair.sections, strict=True):
        assert (60.0, s.outside, 20.0) == (joint.diameter, joint.hub_outside, joint.shaft_hole)
        force += 0.17 * fits.joint_pressure(joint, interference=grip) * math.pi * 60.0 * s.length
    assert force / SLIP_FACTOR == pytest.approx(number(text, "fit.force_held"))
    assert force / SLIP_FACTOR * 30.0 == pytest.approx(number(text, "fit.torque_held"))
    pressures = [fits.joint_pressure(j, interference=most) for j in pair.joints("strength")]
    assert pressures[1] > pressures[0]
    assert pressures[1] == pytest.approx(number(text, "fit.pressure_most"))
    least = [fits.joint_pressure(j, interference=grip) for j in pair.joints("holding")]
    assert min(least) == pytest.approx(number(text, "fit.pressure_least"))


def test_roots_below_the_bore_are_no_joint_and_nothing_passes() -> None:
    text = changed(("module: 2", "module: 26"))  # 120 - 65 = 55
    for name in ("fit.pressure_most", "fit.elastic", "heat.carry_loss"):
        found = answer(text, name)
        assert isinstance(found, Open), name
    for rule in ("FIT-003", "FIT-004", "HEAT-001"):
        assert "open" == finding(text, rule).verdict
