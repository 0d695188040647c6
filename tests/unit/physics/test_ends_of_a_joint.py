"""Which end of each range a question takes: the least and the largest over all corners, by trying every one."""

from __future__ import annotations

from itertools import product

import pytest

from setupcheck.jobfile.service import Warmth
from setupcheck.physics import interference as fits
from setupcheck.physics.materials import COLD, Material
from setupcheck.quantities import growing, strength
from setupcheck.quantities.joint_shape import Section
from setupcheck.quantities.material_data import material
from setupcheck.quantities.pairing import Pair

SECTIONS = (Section(15.0, 104.4, 12.0, True), Section(6.0, 48.0, 12.0, False), Section(5.0, 96.0, 0.0, True))


def of(name: str) -> Material:
    found = material(name)
    assert isinstance(found, Material)
    return found


PAIRS = [
    Pair(of("CuSn12-C"), of("42CrMo4"), "wheel", "spindle", 32.0, SECTIONS),
    Pair(of("42CrMo4"), of("CuSn12-C"), "wheel", "spindle", 32.0, SECTIONS),
    Pair(of("grey-iron"), of("16MnCr5"), "wheel", "spindle", 32.0, SECTIONS),
]


def corners(pair: Pair) -> list[fits.Joint]:
    ends = product(
        (pair.hub.modulus.low, pair.hub.modulus.high), (pair.shaft.modulus.low, pair.shaft.modulus.high), pair.sections
    )
    return [
        fits.Joint(
            diameter=pair.diameter,
            hub_outside=s.outside,
            shaft_hole=s.hole,
            hub_modulus=hub,
            hub_poisson=pair.hub.poisson.value,
            shaft_modulus=shaft,
            shaft_poisson=pair.shaft.poisson.value,
        )
        for hub, shaft, s in ends
    ]


def grown(joint: fits.Joint, grip: float) -> float:
    return fits.hub_growth(joint, pressure=fits.joint_pressure(joint, interference=grip), at_diameter=joint.hub_outside)


@pytest.mark.parametrize("pair", PAIRS, ids=lambda p: f"{p.hub.name} on {p.shaft.name}")
def test_growth_pressure_stress_and_closing_are_the_ends_over_every_corner(pair: Pair) -> None:
    grip = 0.03
    each = corners(pair)
    toothed = [j for j in each if j.hub_outside != 48.0]
    assert growing.growth_most(pair, grip) == pytest.approx(max(grown(j, grip) for j in toothed))
    assert growing.growth_least(pair, grip) == pytest.approx(min(grown(j, grip) for j in toothed))
    pressures = [fits.joint_pressure(j, interference=grip) for j in each]
    assert strength.pressure_most(pair, grip) == pytest.approx(max(pressures))
    assert strength.pressure_least(pair, grip) == pytest.approx(min(pressures))
    hoops = [fits.stresses(j, pressure=p).hub_bore_tangential for j, p in zip(each, pressures, strict=True)]
    assert strength.hoop_most(pair, grip) == pytest.approx(max(hoops))
    closings = [c for j, p in zip(each, pressures, strict=True) if (c := fits.hole_closing(j, pressure=p)) is not None]
    assert growing.hole_closing(pair, grip) == pytest.approx(max(closings))


@pytest.mark.parametrize("pair", PAIRS, ids=lambda p: f"{p.hub.name} on {p.shaft.name}")
@pytest.mark.parametrize("service", [(5.0, 45.0), (-20.0, 80.0), (20.0, 20.0)])
def test_grip_is_the_least_and_the_largest_over_every_expansion_and_temperature(
    pair: Pair, service: tuple[float, float]
) -> None:
    found = [0.03]
    for t in service:
        table = "cooling" if t < COLD else "heating"
        hub, shaft = getattr(pair.hub, table), getattr(pair.shaft, table)
        for a, i in product((hub.low, hub.high), (shaft.low, shaft.high)):
            found.append(0.03 + 32.0 * (i - a) * (t - 20.0))
    states = (Warmth(service[0], service[0]), Warmth(service[1], service[1]))
    assert strength.grip_least(pair, 0.03, 0.0, states) == pytest.approx(min(found))
    assert strength.grip_least(pair, 0.03, 0.004, states) == pytest.approx(min(found) - 0.004)
    assert strength.grip_most(pair, 0.03, states) == pytest.approx(max(found))
