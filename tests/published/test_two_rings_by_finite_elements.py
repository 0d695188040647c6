"""The closed forms of a joint against two rings of one length by finite elements (scikit-fem), axisymmetric, ends free.

Lamé's stresses have the same radial plus hoop stress everywhere, so rings of one length with free ends and no friction stand in
plane stress exactly, however long they are: the elements must come out at the closed form, and do. 16 columns of elements in
each part and 3 rows; measured against the closed form, largest of the four joints: pressure 2e-7 of it (scatter along the joint
8e-6), growth 5e-8 at the outside and 2e-7 at the bore, closing of the hole 2e-6, hoop stress at the bore 1e-3 (a derivative,
hence coarser; 8 columns give four times as much). Ends that are held give 9.2 to 9.4 % more. How the joint is loaded: see
finite_elements.
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np
import pytest

from setupcheck.physics import interference as fits

from .finite_elements import Material, Pressed, body

BRONZE, STEEL = Material(103.4e3, 0.34), Material(206e3, 0.29)
"""C90700 and plain steel. Source: data sheets as the material table quotes them; here only two sets of constants."""
JOINTS = {
    # joint, outside, hole, metal of the hub; the shaft is steel
    "bronze on solid steel": (100.0, 140.0, 0.0, BRONZE),
    "bronze on hollow steel": (100.0, 140.0, 40.0, BRONZE),
    "steel on solid steel": (40.0, 80.0, 0.0, STEEL),
    "steel on hollow steel": (40.0, 60.0, 25.0, STEEL),
}
COLUMNS, ROWS, LENGTH = 16, 3, 30.0


def closed_form(name: str) -> fits.Joint:
    diameter, outside, hole, metal = JOINTS[name]
    return fits.Joint(
        diameter=diameter,
        hub_outside=outside,
        shaft_hole=hole,
        hub_modulus=metal.modulus,
        hub_poisson=metal.poisson,
        shaft_modulus=STEEL.modulus,
        shaft_poisson=STEEL.poisson,
    )


@cache
def elements(name: str, *, flat: bool = False, columns: int = COLUMNS) -> Pressed:
    """The joint with a thousandth of its diameter as interference."""
    diameter, outside, hole, metal = JOINTS[name]
    rows = np.linspace(0.0, LENGTH, ROWS + 1)
    hub = body(np.linspace(diameter / 2.0, outside / 2.0, columns + 1), rows, metal)
    shaft = body(np.linspace(hole / 2.0, diameter / 2.0, columns + 1), rows, STEEL)
    return Pressed(hub, shaft, diameter / 2.0, 0.0, LENGTH, 0.001 * diameter, flat)


@pytest.mark.parametrize("name", JOINTS)
def test_pressure_along_the_joint(name: str) -> None:
    joint, found = closed_form(name), elements(name)
    pressure = fits.joint_pressure(joint, interference=found.interference)
    area = math.pi * joint.diameter * LENGTH
    assert found.normal_force / area == pytest.approx(pressure, rel=1e-5)
    assert found.pressure[1] == pytest.approx(np.full(2 * ROWS + 1, pressure), rel=1e-4)
    held = fits.axial_capacity(pressure, friction=0.12, diameter=joint.diameter, length=LENGTH, slip_factor=1.0)
    assert 0.12 * found.normal_force == pytest.approx(held, rel=1e-5)


@pytest.mark.parametrize("name", JOINTS)
def test_hoop_stress_at_the_bore_of_the_hub(name: str) -> None:
    joint, found = closed_form(name), elements(name)
    pressure = fits.joint_pressure(joint, interference=found.interference)
    _, hoop, mises = found.bore_stresses
    told = fits.stresses(joint, pressure=pressure)
    assert hoop == pytest.approx(np.full_like(hoop, told.hub_bore_tangential), rel=2e-3)
    t, r = told.hub_bore_tangential, told.radial
    assert mises == pytest.approx(np.full_like(mises, math.sqrt(t * t - t * r + r * r)), rel=2e-3)


@pytest.mark.parametrize("name", JOINTS)
def test_growth_of_the_hub_through_its_wall_and_closing_of_the_hole(name: str) -> None:
    joint, found = closed_form(name), elements(name)
    pressure = fits.joint_pressure(joint, interference=found.interference)
    for share in (0.0, 0.25, 0.5, 1.0):  # columns of the mesh
        at = joint.diameter + share * (joint.hub_outside - joint.diameter)
        assert found.growth(at / 2.0) == pytest.approx(
            fits.hub_growth(joint, pressure=pressure, at_diameter=at), rel=1e-5
        )
    if joint.shaft_hole:
        assert found.closing(joint.shaft_hole / 2.0) == pytest.approx(
            fits.hole_closing(joint, pressure=pressure), rel=1e-5
        )


def test_twice_as_many_columns_leave_a_quarter_of_the_error_of_the_hoop_stress_or_less() -> None:
    joint = closed_form("steel on solid steel")
    told = fits.stresses(joint, pressure=fits.joint_pressure(joint, interference=0.04)).hub_bore_tangential
    coarse, fine = (
        abs(float(elements("steel on solid steel", columns=n).bore_stresses[1].mean()) - told) for n in (8, 16)
    )
    assert fine < 0.3 * coarse


@pytest.mark.parametrize("name", JOINTS)
def test_a_joint_that_cannot_change_its_length_has_8_to_10_percent_more_pressure(name: str) -> None:
    """Plane strain, as some sources reckon: E / (1 - nu^2) and nu / (1 - nu) in the same formulas (textbook)."""
    joint, found = closed_form(name), elements(name, flat=True)
    strain = 0.0
    for ratio, modulus, poisson, sign in (
        (joint.hub_ratio, joint.hub_modulus, joint.hub_poisson, 1.0),
        (joint.shaft_ratio, joint.shaft_modulus, joint.shaft_poisson, -1.0),
    ):
        shape = (1.0 + ratio**2) / (1.0 - ratio**2)
        strain += (1.0 - poisson**2) / modulus * (shape + sign * poisson / (1.0 - poisson))
    deep = found.normal_force / (math.pi * joint.diameter * LENGTH)
    assert deep == pytest.approx(found.interference / joint.diameter / strain, rel=1e-5)
    assert 1.08 < deep / fits.joint_pressure(joint, interference=found.interference) < 1.10
