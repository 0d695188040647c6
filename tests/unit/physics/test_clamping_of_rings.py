"""Lobes of a squeezed ring against a ring of beam elements and a Fourier series, which share nothing with the formula."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.physics.clamping import THICKEST, THINNEST, grip_wanted, lobing_left

RING = {"mean_radius": 82.5, "wall": 15.0, "width": 20.0, "modulus": 105_000.0}


def ring_of_beams(
    force: float,
    *,
    jaws: int,
    mean_radius: float,
    wall: float,
    width: float,
    modulus: float,
    shear: bool,
    elements: int = 240,
) -> np.ndarray:
    """Radial displacement [mm], outward, of the nodes of a ring of straight beam elements under equal inward forces.

    Plane frame elements with stretch, bending and, where asked, shear (factor 5/6, Poisson 0.3); the rigid motions,
    which no force works on, are left out by the least-squares solution.
    """
    nodes = [mean_radius * np.array([math.cos(a), math.sin(a)]) for a in np.arange(elements) * math.tau / elements]
    area, inertia = width * wall, width * wall**3 / 12.0
    whole = np.zeros((3 * elements, 3 * elements))
    for i in range(elements):
        j = (i + 1) % elements
        along = nodes[j] - nodes[i]
        length = float(np.hypot(*along))
        c, s = along / length
        ratio = 12.0 * modulus * inertia / (modulus / 2.6 * 5.0 / 6.0 * area * length**2) if shear else 0.0
        bend = modulus * inertia / (length**3 * (1.0 + ratio))
        pull, half, square = modulus * area / length, 6.0 * length * bend, length**2 * bend
        same, other = (4.0 + ratio) * square, (2.0 - ratio) * square
        local = np.array([
            [pull, 0, 0, -pull, 0, 0],
            [0, 12 * bend, half, 0, -12 * bend, half],
            [0, half, same, 0, -half, other],
            [-pull, 0, 0, pull, 0, 0],
            [0, -12 * bend, -half, 0, 12 * bend, -half],
            [0, half, other, 0, -half, same],
        ])  # fmt: skip
        turn = np.kron(np.eye(2), np.array([[c, s, 0], [-s, c, 0], [0, 0, 1]]))
        at = [3 * i, 3 * i + 1, 3 * i + 2, 3 * j, 3 * j + 1, 3 * j + 2]
        whole[np.ix_(at, at)] += turn.T @ local @ turn
    load = np.zeros(3 * elements)
    for k in range(jaws):
        node = k * elements // jaws
        load[3 * node : 3 * node + 2] = -force * nodes[node] / mean_radius
    moved = np.linalg.lstsq(whole, load, rcond=1e-13)[0].reshape(-1, 3)[:, :2]
    return np.array([float(m @ n) / mean_radius for m, n in zip(moved, nodes, strict=True)])


@pytest.mark.parametrize("jaws", [2, 3, 4, 6])
def test_the_lobes_are_those_of_a_ring_of_beam_elements(jaws: int) -> None:
    thin = {**RING, "wall": 3.0}
    moved = ring_of_beams(100.0, jaws=jaws, shear=False, **thin)
    assert float(np.ptp(moved)) == pytest.approx(lobing_left(100.0, jaws=jaws, **thin), rel=3e-3)
    assert int(np.argmin(moved)) % (240 // jaws) == 0  # deepest under a jaw


@pytest.mark.parametrize("jaws", [2, 3, 4, 6])
def test_the_lobes_are_those_of_the_fourier_series(jaws: int) -> None:
    # inward at angle f from a jaw: n W R^3/(pi E I) sum cos(j n f)/((j n)^2 - 1)^2; jaw less midway leaves the odd terms
    inertia = RING["width"] * RING["wall"] ** 3 / 12.0
    series = 2.0 * sum(1.0 / ((j * jaws) ** 2 - 1.0) ** 2 for j in range(1, 4001, 2))
    scale = jaws * 1000.0 * RING["mean_radius"] ** 3 / (math.pi * RING["modulus"] * inertia)
    assert lobing_left(1000.0, jaws=jaws, **RING) == pytest.approx(scale * series, rel=1e-9)


def test_a_bronze_ring_of_180_by_150_leaves_29_um_for_a_kilonewton() -> None:
    assert 28.7 == pytest.approx(1000.0 * lobing_left(1000.0, jaws=3, **RING), abs=0.05)


@pytest.mark.parametrize(("jaws", "more"), [(2, 1.05), (3, 1.11), (4, 1.20)])
def test_what_shear_adds_at_the_thickest_wall_that_is_taken(jaws: int, more: float) -> None:
    thick = {**RING, "wall": THICKEST * RING["mean_radius"]}
    moved = ring_of_beams(1000.0, jaws=jaws, shear=True, **thick)
    assert more == pytest.approx(float(np.ptp(moved)) / lobing_left(1000.0, jaws=jaws, **thick), abs=0.005)


@pytest.mark.parametrize("wall", [0.0199, 0.2001])
def test_a_wall_outside_the_range_is_refused(wall: float) -> None:
    with pytest.raises(ValueError, match=r"the thin ring is taken from 0\.02 to 0\.2"):
        lobing_left(100.0, jaws=3, mean_radius=1.0, wall=wall, width=1.0, modulus=1e5)


def test_the_ends_of_the_range_are_taken() -> None:
    for wall in (THINNEST, THICKEST):
        assert lobing_left(100.0, jaws=3, mean_radius=1.0, wall=wall, width=1.0, modulus=1e5) > 0.0


@pytest.mark.parametrize(
    "wrong", [{"jaws": 1}, {"width": 0.0}, {"modulus": -1.0}, {"force": -5.0}, {"mean_radius": 0.0}]
)
def test_what_cannot_be_a_ring_is_refused(wrong: dict[str, float]) -> None:
    with pytest.raises(ValueError):
        lobing_left(**{"force": 100.0, "jaws": 3, **RING, **wrong})  # type: ignore[arg-type]


@given(st.floats(10.0, 1e4), st.integers(2, 6), st.floats(0.02, 0.2))
def test_more_jaws_and_a_thicker_wall_leave_less(force: float, jaws: int, slender: float) -> None:
    ring = {"mean_radius": 50.0, "width": 12.0, "modulus": 1e5}
    here = lobing_left(force, jaws=jaws, wall=50.0 * slender, **ring)
    assert lobing_left(force, jaws=jaws + 1, wall=50.0 * slender, **ring) < here
    assert lobing_left(2.0 * force, jaws=jaws, wall=50.0 * slender, **ring) == pytest.approx(2.0 * here)


@pytest.mark.parametrize(
    ("diameter", "length", "supported", "wanted"),
    [
        (90.0, 80.0, False, 30.0),  # a disc: a third of the diameter
        (24.0, 22.0, False, 10.0),  # a small disc: ten millimetres
        (40.0, 120.0, False, 40.0),  # a bar: one diameter
        (40.0, 120.0, True, 40.0 / 3.0),  # a centre holds the far end
        (120.0, 26.0, False, 13.0),  # never more than half of the part
    ],
)
def test_the_grip_wanted(diameter: float, length: float, supported: bool, wanted: float) -> None:
    assert wanted == pytest.approx(grip_wanted(diameter, length, supported=supported))


def test_a_part_without_a_size_has_no_grip() -> None:
    with pytest.raises(ValueError, match="cannot be gripped"):
        grip_wanted(0.0, 10.0)
