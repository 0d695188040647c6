"""What a joint holds, where it yields and how teeth grow: brittle hubs, roughness, service, growth that nobody counts."""

from __future__ import annotations

import math

import pytest

from setupcheck.jobfile.service import Warmth
from setupcheck.physics import interference as fits
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.friction import Friction
from setupcheck.quantities.loosening import _as_far_as_known, yields_below
from setupcheck.quantities.pairing import RZ_PER_RA, Pair
from setupcheck.quantities.strength import (
    ON_BREAKING,
    STRENGTH,
    force_held,
    friction_in_words,
    friction_low,
    length_ratio,
    slip_safety,
    torque_held,
)

from .joint_text import answer, changed, finding, number, reviewed, value

IRON = ("CuSn12-C", "EN-GJL-250")
STRAIGHT = ("[10 degC, 25 degC]", "[20 degC, 20 degC]")


def test_a_brittle_hub_is_judged_by_its_tensile_strength_and_says_so() -> None:
    iron, bronze = changed(IRON), changed()
    assert value(iron, "fit.weaker") == f"hub, by {fits.BRITTLE}"
    assert value(bronze, "fit.weaker") == f"hub, by {fits.DUCTILE}"
    pair = value(iron, "fit.pair")
    assert isinstance(pair, Pair)
    assert pair.hub.brittle
    tensile = pair.hub.tensile_strength
    assert tensile is not None
    # at the elastic limit the hoop stress of the worse section is the allowed one
    hoops = [
        fits.stresses(j, pressure=fits.joint_pressure(j, interference=number(iron, "fit.elastic"))).hub_bore_tangential
        for j in pair.joints("strength")
    ]
    assert tensile.value / ON_BREAKING == pytest.approx(max(hoops))


def test_a_weak_shaft_is_named() -> None:
    thin = changed(("hole: 20", "hole: 56"))
    assert str(value(thin, "fit.weaker")).startswith("shaft, by ")


def test_Ra_counts_as_its_larger_Rz() -> None:
    assert 0.8 * 6.5e-3 == pytest.approx(number(changed(), "fit.smoothing"))
    ra = changed(("Rz 4 um", "Ra 0.8 um"))
    assert 0.8 * (RZ_PER_RA * 0.8 + 2.5) * 1e-3 == pytest.approx(number(ra, "fit.smoothing"))


def test_a_stated_share_of_smoothing_is_taken() -> None:
    none = changed(("joint: degreased", "joint: degreased\n      smoothing: 0.0"))
    assert 0.0 == number(none, "fit.smoothing")
    assert number(none, "fit.torque_held") > number(changed(), "fit.torque_held")
    half = changed(("joint: degreased", "joint: degreased\n      smoothing: 0.4"))
    assert 0.4 * 6.5e-3 == pytest.approx(number(half, "fit.smoothing"))


def test_service_takes_grip_warm_and_adds_it_cold_but_never_gives_any() -> None:
    at_20 = changed(STRAIGHT)
    least, most = (number(at_20, f"fit.grip_{end}") for end in ("least", "most"))
    assert number(at_20, "fit.interference_least") - 0.8 * 6.5e-3 == pytest.approx(least)
    assert number(at_20, "fit.interference_most") == pytest.approx(most)
    warm = changed(("[10 degC, 25 degC]", "[30 degC, 60 degC]"))
    # bronze on steel: the loosest counts at 60, the tightest still at 20, as it is put together there
    assert 60.0 * (18.5e-6 - 11.0e-6) * 40.0 == pytest.approx(least - number(warm, "fit.grip_least"), rel=0.02)
    assert most == pytest.approx(number(warm, "fit.grip_most"))
    cold = changed(("[10 degC, 25 degC]", "[-20 degC, 10 degC]"))
    assert least == pytest.approx(number(cold, "fit.grip_least"))
    assert number(cold, "fit.grip_most") > most + 0.01


def test_a_joint_that_is_loose_warm_holds_nothing_and_fails() -> None:
    hot = changed(("[10 degC, 25 degC]", "[10 degC, 150 degC]"))
    assert number(hot, "fit.grip_least") < 0.0
    assert 0.0 == number(hot, "fit.force_held") == number(hot, "fit.pressure_least") == number(hot, "fit.growth_least")
    assert "fail" == finding(hot, "FIT-003").verdict


def test_torque_and_force_along_the_axis_add_at_right_angles() -> None:
    both = changed(("{torque: 50 N m, axial_force: 0 N}", "{torque: 90 N m, axial_force: 4 kN}"))
    assert 5000.0 == pytest.approx(number(both, "fit.force_asked"))  # 3000 N at the seat of 60, 4000 N along it
    axial = changed(("{torque: 50 N m, axial_force: 0 N}", "{axial_force: 4 kN}"))
    assert 4000.0 == pytest.approx(number(axial, "fit.force_asked"))


def test_at_the_temperature_it_holds_to_the_joint_holds_just_what_it_must() -> None:
    asked = ("{torque: 50 N m, axial_force: 0 N}", "{torque: 100 N m}")
    limit = number(changed(asked), "fit.holds_to")
    assert limit > 25.0
    for shift, verdict in ((-0.1, "pass"), (0.1, "fail")):
        text = changed(asked, ("[10 degC, 25 degC]", f"[20 degC, {limit + shift!r} degC]"))
        assert verdict == finding(text, "FIT-003").verdict
    freed = number(changed(asked), "fit.loosens_at")
    assert freed > limit
    loose = changed(asked, ("[10 degC, 25 degC]", f"[20 degC, {freed!r} degC]"))
    assert 0.0 == pytest.approx(number(loose, "fit.grip_least"), abs=1e-9)


CUT = """  - op: 5
    machine: head
    looks_at_tool: +z
    hold:
      centre: {on: hub, by: collet, runout: 5 um}
      square: {on: back, by: flange, face_runout: 4 um, across: 80}
    cut: {teeth: {}}
"""


def growth(*, teeth_cut: str, asked: bool = False) -> str:
    """The job with its teeth bought, or cut before or after the joint."""
    text = changed(("setups:\n", "machines: {head: {kind: dividing-head}}\nsetups:\n"))
    text = changed(
        ("      hub: {", "      back: {kind: face, at: 0, facing: -z, diameter: 85, made: stock}\n      hub: {"),
        text=text,
    )
    if teeth_cut == "before":
        text = changed(("setups:\n", "setups:\n" + CUT), text=text)
    if teeth_cut == "after":
        text += CUT.replace("op: 5", "op: 20\n    part: ring")
    if teeth_cut != "bought":
        text = changed(("from: 0, to: 10}", "from: 0, to: 10, made: stock}"), text=text)
        text = changed(("bore: {kind: bore, ", "bore: {kind: bore, made: stock, "), text=text)
    return text + "require: [{what: backlash, between: [10 um, 90 um]}]\n" * asked


@pytest.mark.parametrize("teeth_cut", ["before", "bought"])
def test_teeth_that_are_finished_grow_uncounted_where_no_backlash_is_asked(teeth_cut: str) -> None:
    text = growth(teeth_cut=teeth_cut)
    found = finding(text, "FIT-005")
    assert "warn" == found.verdict
    assert found.value == pytest.approx(number(text, "fit.growth_most"))


def test_teeth_cut_after_the_joint_do_not_grow() -> None:
    text = growth(teeth_cut="after")
    assert answer(text, "fit.growth_uncounted") is None
    assert [] == [f for f in reviewed(text).evaluation.findings if f.rule == "FIT-005"]


def test_a_required_backlash_counts_the_growth() -> None:
    assert 0.0 == value(growth(teeth_cut="before", asked=True), "fit.growth_uncounted")


def test_growth_takes_the_soft_end_of_the_hub_and_the_stiff_one_of_the_shaft() -> None:
    text = changed(STRAIGHT)
    pair = value(text, "fit.pair")
    assert isinstance(pair, Pair)
    modulus = pair.hub.modulus
    shaft = pair.shaft.modulus
    joint = fits.Joint(
        diameter=60.0,
        hub_outside=115.0,
        shaft_hole=20.0,
        hub_modulus=modulus.low,
        hub_poisson=pair.hub.poisson.value,
        shaft_modulus=shaft.high,
        shaft_poisson=pair.shaft.poisson.value,
    )
    pressure = fits.joint_pressure(joint, interference=0.060)
    assert fits.hub_growth(joint, pressure=pressure, at_diameter=115.0) == pytest.approx(
        number(text, "fit.growth_most")
    )
    assert math.isclose(0.5, number(text, "fit.length_ratio"))


def test_no_elastic_figure_is_told_of_a_sintered_ring() -> None:
    text = changed(("material: CuSn12-C", "material: CuSn12-C\n    properties: {porous: true}"))
    for name in ("fit.force_held", "fit.elastic", "fit.growth_most", "fit.press_off", "fit.warm_torque"):
        found = answer(text, name)
        assert isinstance(found, Open)
        assert "sintered metal crushes" in found.because
    assert "fail" == finding(text, "FIT-010").verdict
    assert "open" == finding(text, "FIT-003").verdict == finding(text, "FIT-004").verdict


def test_a_pair_at_its_elastic_limit_already_has_no_colder_temperature_to_name() -> None:
    pair = value(changed(), "fit.pair")
    assert isinstance(pair, Pair)
    assert yields_below(pair, 0.04, (0.04, "hub")) is None
    just = yields_below(pair, 0.04 - 1e-6, (0.04, "hub"))
    assert just is None or just < 20.0
    # bronze on steel grips tighter by D (alpha_hub - alpha_shaft) for each kelvin: a room of 10 K of it is used up at 10 degC
    per_kelvin = pair.at(0.0, "strength", Warmth(19.0, 19.0))
    assert per_kelvin > 0.0
    assert yields_below(pair, 0.04 - 10.0 * per_kelvin, (0.04, "hub")) == pytest.approx(10.0)


def test_the_other_criteria_allow_less_of_a_ductile_joint_by_tresca_than_by_von_mises() -> None:
    """Tresca's hexagon lies within von Mises' ellipse (any text on strength), so it yields first."""
    assert 0.0 < number(changed(), "fit.elastic_tresca") <= number(changed(), "fit.elastic_mises")


def test_a_unit_is_shown_to_the_same_decimals_in_every_figure_of_a_joint() -> None:
    """Tenths of a micrometre, a MPa and a newton metre; whole degrees; two decimals of kilonewtons and plain numbers."""
    wanted = {"": 0, "um": 1, "MPa": 1, "N*m": 1, "degC": 0, "kN": 2, "1": 2}
    assert {(q.name, q.digits) for q in STRENGTH} == {(q.name, wanted[q.unit]) for q in STRENGTH}


def test_small_answers_of_a_joint_by_hand() -> None:
    assert friction_in_words(Friction(0.12, 0.2, "from memory", "dry")) == "0.12 to 0.2 (from memory; dry)"
    assert friction_in_words(Friction(0.12, 0.2, "shop record")) == "0.12 to 0.2 (shop record)"
    assert friction_low(Friction(0.12, 0.2, "shop record")) == 0.12
    pair = value(changed(), "fit.pair")
    assert isinstance(pair, Pair)
    assert length_ratio(pair) == pytest.approx(30.0 / 60.0)
    assert (_as_far_as_known(math.inf), _as_far_as_known(20.0), _as_far_as_known(55.5)) == (None, 20.0, 55.5)
    with pytest.raises(OutOfRange, match="does not hold even at 20 degC"):
        _as_far_as_known(19.999)
    assert torque_held(pair, 100.0) == pytest.approx(100.0 * 30.0)
    assert slip_safety(100.0, 60.0) == pytest.approx(2.0)  # the slip factor of 1.2 put back
    assert slip_safety(100.0, 0.0) is None
    assert fits.LOWER_SMOOTHING_FACTOR == fits.SMOOTHING_FACTOR / 2.0 == 0.4  # as the comment beside them has it
    # grips below nothing hold nothing, and pressure is straight in the grip
    assert force_held(pair, -0.01, 0.1) == 0.0
    assert force_held(pair, 0.04, 0.1) == pytest.approx(2.0 * force_held(pair, 0.02, 0.1))
    assert force_held(pair, 0.02, 0.2) == pytest.approx(2.0 * force_held(pair, 0.02, 0.1))
