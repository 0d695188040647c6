"""What slices of constant section leave out of a stepped joint, and of a shaft that goes on beyond its hub, by finite elements.

The tool cuts a stepped joint into slices that know nothing of each other. In one piece they hold each other up; the
elements tell by how much. Steel shaft of 40, solid or hollow, interference 0.04; ends free, no friction, no pull anywhere in
the joint. Elements of about 1 mm: half of that moves the sums by 0.02 %, the other figures by under 1 %, those at an edge (*)
by more. "Alone" is what a slice has for itself.

hub (lengths x outsides), shaft                   force: slices      in each slice, against alone
                                                  against elements   mean pressure        most hoop / most von Mises at the bore
bronze 10 x 60, 20 x 100; solid, same length          -0.4 %         1.11  0.97           1.02/1.01  1.10/1.00
steel 10 x 60, 20 x 100; solid, same length           -0.5 %         1.10  0.97           1.02/1.00  1.13/1.02
steel 12 x 50, 8 x 110, 12 x 50; hole 15, same        -4.2 %         1.16  0.89  1.16     1.02/1.00  1.33/1.13  1.02/1.00
bronze 30 x 100; solid, 20 longer on both sides       -1.9 %         1.02                 1.12*/1.33*
bronze 30 x 100; hole 20, 20 longer on both sides     -4.2 %         1.04                 1.18*/1.49*
bronze 10 x 60, 20 x 100; solid, 20 longer            -2.0 %         1.14  0.98           1.07*/1.13*  1.12/1.35*

At the step of the bronze hub the pressure is 17 % *below* that of the stiffest slice and 31 % above that of the weak one: it
goes over smoothly, as the corner lies a wall away. It is highest, 6 % above the stiffest slice, at the far end of the thick
part, which the thin part bends. What a collar carries for its neighbours it pays with hoop stress. Where the shaft goes on
beyond the hub, the hub's edge is singular: its pressure has no limit as the elements shrink (2.1 times alone with 1 mm, 2.4
with 0.5), so no figure of an edge is held here.

The slices carry less whatever the shape: cutting takes bonds away, the pieces find displacements of no more energy for the same
interference, and that energy is the contact force times U/4 (derived here; for joints without friction and without a gap).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cache
from itertools import pairwise

import numpy as np
import pytest

from setupcheck.physics import interference as fits

from .finite_elements import Array, Material, Pressed, body

BRONZE, STEEL = Material(103.4e3, 0.34), Material(206e3, 0.29)
JOINT, INTERFERENCE = 40.0, 0.04
Steps = tuple[tuple[float, float, float], ...]


@dataclass(frozen=True)
class Stepped:
    """A hub of steps (from, to, outside) on a steel shaft that goes on `beyond` it on both sides [mm]."""

    metal: Material
    steps: Steps
    hole: float = 0.0
    beyond: float = 0.0

    def slices(self) -> list[fits.Slice]:
        return [
            fits.Slice(
                fits.Joint(
                    diameter=JOINT,
                    hub_outside=outside,
                    shaft_hole=self.hole,
                    hub_modulus=self.metal.modulus,
                    hub_poisson=self.metal.poisson,
                    shaft_modulus=STEEL.modulus,
                    shaft_poisson=STEEL.poisson,
                ),
                high - low,
            )
            for low, high, outside in self.steps
        ]

    def alone(self) -> list[float]:
        """Pressure of each slice for itself [MPa]."""
        return [fits.joint_pressure(part.joint, interference=INTERFERENCE) for part in self.slices()]

    def told(self) -> float:
        """Sum of the contact force as the tool reckons it [N]: the axial force at a friction of 1."""
        return fits.sliced_axial_capacity(self.slices(), interference=INTERFERENCE, friction=1.0, slip_factor=1.0)


def points(*ends: float, cell: float) -> Array:
    """Coordinates through all ends, about a cell apart."""
    runs = [np.linspace(a, b, max(round((b - a) / cell), 1) + 1)[:-1] for a, b in pairwise(ends)]
    return np.append(np.concatenate(runs), ends[-1])


@cache
def solved(shape: Stepped, cell: float = 1.0) -> Pressed:
    ends = [shape.steps[0][0], *(high for _, high, _ in shape.steps)]
    radii = sorted({JOINT / 2.0, *(outside / 2.0 for *_, outside in shape.steps)})
    rows = points(*ends, cell=cell)
    outside = tuple((low, high, wide / 2.0) for low, high, wide in shape.steps)
    hub = body(points(*radii, cell=cell), rows, shape.metal, outside=outside)
    more = points(0.0, shape.beyond, cell=2.0 * cell)[1:] if shape.beyond else np.empty(0)
    along = np.concatenate([ends[0] - more[::-1], rows, ends[-1] + more])
    shaft = body(points(shape.hole / 2.0, JOINT / 2.0, cell=cell), along, STEEL)
    return Pressed(hub, shaft, JOINT / 2.0, ends[0], ends[-1], INTERFERENCE)


STEP: Steps = ((0.0, 10.0, 60.0), (10.0, 30.0, 100.0))
PLAIN: Steps = ((0.0, 30.0, 100.0),)
COLLAR: Steps = ((0.0, 12.0, 50.0), (12.0, 20.0, 110.0), (20.0, 32.0, 50.0))
SHAPES = {
    "bronze, one step": Stepped(BRONZE, STEP),
    "steel, one step": Stepped(STEEL, STEP),
    "steel with a collar on a hollow shaft": Stepped(STEEL, COLLAR, hole=15.0),
    "bronze, longer shaft": Stepped(BRONZE, PLAIN, beyond=20.0),
    "bronze, longer hollow shaft": Stepped(BRONZE, PLAIN, hole=20.0, beyond=20.0),
    "bronze, one step, longer shaft": Stepped(BRONZE, STEP, beyond=20.0),
}


@pytest.mark.parametrize(
    ("name", "less", "shares"),
    [
        ("bronze, one step", 0.0039, (1.105, 0.972)),
        ("steel, one step", 0.0053, (1.100, 0.974)),
        ("steel with a collar on a hollow shaft", 0.0419, (1.160, 0.888, 1.160)),
        ("bronze, longer shaft", 0.0188, (1.019,)),
        ("bronze, longer hollow shaft", 0.0421, (1.044,)),
        ("bronze, one step, longer shaft", 0.0199, (1.138, 0.983)),
    ],
)
def test_slices_carry_a_little_less_than_the_joint_in_one_piece(
    name: str, less: float, shares: tuple[float, ...]
) -> None:
    shape, found = SHAPES[name], solved(SHAPES[name])
    assert found.pressure[1].min() > 0.0  # else the joint would gape, and the figures stand for nothing
    assert less == pytest.approx(1.0 - shape.told() / found.normal_force, abs=5e-4)
    means = [found.mean_pressure(low, high) for low, high, _ in shape.steps]
    assert shares == pytest.approx([mean / alone for mean, alone in zip(means, shape.alone(), strict=True)], abs=5e-3)
    whole = math.fsum(
        mean * math.pi * JOINT * (high - low) for mean, (low, high, _) in zip(means, shape.steps, strict=True)
    )
    assert found.normal_force == pytest.approx(whole, rel=1e-9)


@pytest.mark.parametrize("name", SHAPES)
def test_no_shape_carries_less_than_its_slices_on_any_mesh(name: str) -> None:
    """A bound, not an accident: elements make the one piece stiffer still, so coarse ones may only lie higher."""
    shape = SHAPES[name]
    coarse, fine = (solved(shape, cell).normal_force for cell in (2.0, 1.0))
    assert shape.told() < fine < coarse
    assert coarse == pytest.approx(fine, rel=1e-3)


@pytest.mark.parametrize(
    ("name", "hoop", "mises"),
    [
        ("bronze, one step", (1.020, 1.102), (1.013, 1.005)),
        ("steel, one step", (1.019, 1.132), (1.000, 1.017)),
        ("steel with a collar on a hollow shaft", (1.018, 1.332, 1.018), (0.999, 1.131, 0.999)),
    ],
)
def test_stress_at_the_bore_passes_that_of_a_slice_most_in_a_collar(
    name: str, hoop: tuple[float, ...], mises: tuple[float, ...]
) -> None:
    shape = SHAPES[name]
    z, hoops, equivalents = solved(shape).bore_stresses
    found = []
    for (low, high, _), part, alone in zip(shape.steps, shape.slices(), shape.alone(), strict=True):
        told = fits.stresses(part.joint, pressure=alone).hub_bore_tangential
        here = (low < z) & (z < high)
        found.append((hoops[here].max() / told, equivalents[here].max() / math.sqrt(told**2 + told * alone + alone**2)))
    assert hoop == pytest.approx([h for h, _ in found], abs=0.01)
    assert mises == pytest.approx([m for _, m in found], abs=0.01)


def test_at_the_step_the_pressure_lies_between_those_of_its_slices() -> None:
    shape = SHAPES["bronze, one step"]
    weak, stiff = shape.alone()
    z, pressure = solved(shape).pressure
    at_step = float(np.interp(10.0, z, pressure))
    assert weak < at_step < stiff
    assert (1.315, 0.828) == pytest.approx((at_step / weak, at_step / stiff), abs=0.01)
    assert 30.0 == pytest.approx(z[pressure.argmax()])
    assert 1.06 == pytest.approx(pressure.max() / stiff, abs=0.01)


def test_only_the_edge_feels_that_the_shaft_goes_on() -> None:
    shape = SHAPES["bronze, longer shaft"]
    (alone,) = shape.alone()
    z, pressure = solved(shape).pressure
    assert 0.967 == pytest.approx(float(np.interp(15.0, z, pressure)) / alone, abs=0.005)
    edge, coarse_edge = pressure[0] / alone, solved(shape, 2.0).pressure[1][0] / alone
    assert 1.5 < coarse_edge < edge
