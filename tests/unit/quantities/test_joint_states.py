"""A joint in its states: hub and shaft apart, what a state changes, stresses, other criteria, both smoothing factors."""

from __future__ import annotations

import math
import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.jobfile.setups import Join
from setupcheck.physics import interference as fits
from setupcheck.quantities.book import Open
from setupcheck.quantities.pairing import Pair, service
from setupcheck.report.heating_plan import heating_plans
from setupcheck.report.joint import joints
from setupcheck.report.text import as_text
from tests.unit.report.sample import flat

from .joint_text import changed, number, reviewed, value

SERVICE = "[10 degC, 25 degC]"


def apart(cold: str, warm: str) -> str:
    return changed((SERVICE, f"[{cold}, {warm}]"))


def test_a_service_is_asked_of_what_interference_holds_and_taken_of_any_joint() -> None:
    warmth = ((10.0, 10.0), (25.0, 25.0))
    for by in ("shrink", "press"):
        assert service(Join.model_construct(by=by, serves_at=None), 50) == Open(("setups.50.join.serves_at",))
    assert service(Join.model_construct(by="screw", serves_at=None), 50) is None
    assert service(Join.model_construct(by="screw", serves_at=warmth), 50) == warmth


def test_hub_and_shaft_apart_with_one_temperature_are_the_joint_as_a_whole() -> None:
    both = apart("{hub: 10 degC, shaft: 10 degC}", "{hub: 25 degC, shaft: 25 degC}")
    for name in ("fit.grip_least", "fit.grip_most", "fit.torque_held", "fit.warm_torque", "fit.cold_hoop"):
        assert number(changed(), name) == pytest.approx(number(both, name))


def test_a_hub_that_is_warmer_than_its_shaft_loses_grip_by_its_own_growth() -> None:
    # CuSn12 18.5e-6 at most, 60 mm: 40 K more in the hub alone take 44.4 um
    even, hot = apart("20 degC", "20 degC"), apart("20 degC", "{hub: 60 degC, shaft: 20 degC}")
    assert 60.0 * 18.5e-6 * 40.0 == pytest.approx(number(even, "fit.grip_least") - number(hot, "fit.grip_least"))
    assert number(even, "fit.grip_most") == pytest.approx(number(hot, "fit.grip_most"))  # still put together at 20
    # 42CrMo4 of the shaft 12.7e-6 at most: a shaft 40 K warmer than its hub tightens the joint
    running = apart("20 degC", "{hub: 20 degC, shaft: 60 degC}")
    pair = value(running, "fit.pair")
    assert isinstance(pair, Pair)
    added = number(running, "fit.grip_most") - number(even, "fit.grip_most")
    assert 60.0 * pair.shaft.heating.high * 40.0 == pytest.approx(added)


def test_the_extremes_are_the_worst_of_the_three_states() -> None:
    text = apart("-10 degC", "{hub: 70 degC, shaft: 50 degC}")
    states = ("cold", "bench", "warm")
    assert number(text, "fit.grip_least") == pytest.approx(min(number(text, f"fit.{s}_least") for s in states))
    assert number(text, "fit.grip_most") == pytest.approx(max(number(text, f"fit.{s}_most") for s in states))
    assert number(text, "fit.torque_held") == pytest.approx(min(number(text, f"fit.{s}_torque") for s in states))
    assert number(text, "fit.hoop") == pytest.approx(max(number(text, f"fit.{s}_hoop") for s in states))


@pytest.mark.parametrize(
    ("written", "said"),
    [
        ("[10 degC]", "[10 degC] is not a span of temperatures"),
        ("[45 degC, 5 degC]", "[45 degC, 5 degC] runs from warm to cold"),
        ("[5 degC, {hub: 75 degC}]", "a state of service has the temperatures of hub and shaft, both"),
        ("[5 degC, {hub: 75 degC, rim: 60 degC}]", "a state of service has the temperatures of hub and shaft, both"),
        ("[-300 degC, 45 degC]", "absolute zero"),
        ("[5 degC, true]", "true is no temperature"),
    ],
)
def test_a_wrong_state_of_service_is_told_with_its_line(written: str, said: str) -> None:
    with pytest.raises(JobError) as wrong:
        read_job_text(changed((SERVICE, written)), "ring.yaml")
    assert said in str(wrong.value)
    assert "ring.yaml:28" in str(wrong.value)


def test_stresses_beside_the_bore_are_those_of_thick_rings() -> None:
    text = changed()
    pair = value(text, "fit.pair")
    assert isinstance(pair, Pair)
    grip = number(text, "fit.grip_most")
    each = [fits.stresses(j, pressure=fits.joint_pressure(j, interference=grip)) for j in pair.joints("strength")]
    assert number(text, "fit.hoop_outside") == pytest.approx(max(s.hub_outside_tangential for s in each))
    # equilibrium of half a ring: what both walls carry together is the pressure times the diameter, here at the bore
    for joint, s in zip(pair.joints("strength"), each, strict=True):
        mean = -s.radial * joint.diameter / (joint.hub_outside - joint.diameter)
        assert s.hub_outside_tangential < mean < s.hub_bore_tangential
    assert number(text, "fit.hole_stress") > number(text, "fit.seat_stress") > number(text, "fit.pressure_most")
    solid = changed((", hole: 20", ""))
    assert number(solid, "fit.seat_stress") == pytest.approx(number(solid, "fit.pressure_most"))


def test_tresca_allows_least_and_von_mises_less_than_the_judged_criterion() -> None:
    text = changed()
    judged, mises, tresca = (number(text, f"fit.elastic{which}") for which in ("", "_mises", "_tresca"))
    assert tresca < mises < judged
    assert mises > 0.93 * judged  # thin walls come nearest: sqrt(3)/sqrt(3 + Q^4) >= 0.866
    iron = changed(("CuSn12-C", "EN-GJL-250"))
    assert reviewed(iron).book.get("fit.elastic_mises", reviewed(iron).book.instances("join")[0]) is None


def test_both_published_smoothing_factors_stand_side_by_side() -> None:
    text = changed()
    assert 0.8 * 6.5e-3 == pytest.approx(number(text, "fit.smoothing_1988"))
    assert 0.4 * 6.5e-3 == pytest.approx(number(text, "fit.smoothing_2017"))
    assert number(text, "fit.torque_1988") == pytest.approx(number(text, "fit.torque_held"))
    half = changed(("joint: degreased", "joint: degreased\n      smoothing: 0.4"))
    assert number(half, "fit.torque_held") == pytest.approx(number(text, "fit.torque_2017"))


def test_slip_safety_is_what_the_friction_holds_over_what_it_must() -> None:
    text = changed()
    assert 1.2 * number(text, "fit.torque_held") / 50e3 == pytest.approx(number(text, "fit.slip_safety"))


def test_the_table_has_every_state_and_says_open_where_a_number_is_missing() -> None:
    table = list(joints(review(read_job_text(changed(), "ring.yaml"))))
    assert all(len(line) <= 80 for line in table)
    warm = next(line for line in table if line.startswith("  warmest 25 degC"))
    assert f"{number(changed(), 'fit.warm_torque') / 1000.0:.1f}" == warm.split()[-1]
    unsaid = changed(("      serves_at: [10 degC, 25 degC]\n", ""))
    rows = [line for line in joints(reviewed(unsaid)) if line.startswith(("  coldest", "  at 20", "  warmest"))]
    assert ["open"] * 6 == rows[0].split()[-6:] == rows[2].split()[-6:]
    assert "open" not in rows[1]
    assert math.isfinite(float(rows[1].split()[-1]))


def test_a_joint_with_play_has_no_table_no_heating_plan_and_says_the_play() -> None:
    loose = changed(("diameter: 60 r6", "diameter: 60 g6"))
    said = flat("\n".join((*joints(reviewed(loose)), *heating_plans(reviewed(loose)))))
    # 60 H6 0/+19, g6 -10/-29 (ISO 286)
    assert "play 10.0 um to 48.0 um at 20 degC, on diameter: no interference, so no pressure and nothing held" in said
    assert "tightest pair" not in said
    assert "HEATING PLAN" not in said


def test_a_torque_that_is_asked_of_a_loose_joint_is_nothing_and_not_less() -> None:
    loose = changed(("diameter: 60 r6", "diameter: 60 g6")) + "require: [{what: torque, of: 10, at_least: 50 N m}]\n"
    (found,) = (f for f in reviewed(loose).evaluation.findings if f.rule == "STACK-002")
    assert ("fail", 0.0) == (found.verdict, found.value)
    assert "may fall to 0.0 N m" in found.message


def test_rules_that_wait_for_one_number_at_one_place_are_told_together() -> None:
    text = as_text(reviewed(changed(("material: CuSn12-C", "material: CuSn13-C"))))
    assert 1 == flat(text).count("Nearest: CuSn12-C")
    assert re.search(r"open  FIT-003, FIT-004, FIT-\d+", text)
