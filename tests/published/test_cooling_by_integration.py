"""Cooling in the air and over the cold shaft against scipy's integrator. The physics is typed a second time, in SI and kelvin.

Churchill and Chu (1975) for a horizontal cylinder, through textbooks; Stefan-Boltzmann; air by the power fits the tool names
(checked against two textbooks' tables in test_heating); conduction through the gap. LSODA at 1e-10. Held: 0.01 K, 0.1 % of a
time. Measured, largest of all rings, starts and emissivities: 0.002 K and 0.003 %, all of it the tool's Stefan-Boltzmann constant
of four digits; with the same constant 1e-7 K and 1e-9.
"""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from scipy.integrate import solve_ivp

from setupcheck.physics.carrying import time_to_close
from setupcheck.physics.heating import (
    AIR_CONDUCTIVITY,
    BRIGHT,
    DULL,
    Ring,
    carry_time,
    cooled_temperature,
)

SIGMA = 5.670374e-8
"""[W/m2K4]. Source: CODATA 2018."""
RINGS = {
    # worm wheels of bronze, a steel gear, an aluminium pulley, a thin brass tyre, a coin: sizes invented
    "bronze 100/140 x 30": Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=1.0),
    "bronze 30/42 x 10": Ring(bore=30, outside=42, length=10, density=8770, specific_heat=377, emissivity=1.0),
    "steel 60/220 x 45": Ring(bore=60, outside=220, length=45, density=7850, specific_heat=465, emissivity=1.0),
    "aluminium 25/80 x 20": Ring(bore=25, outside=80, length=20, density=2700, specific_heat=896, emissivity=1.0),
    "brass 50/52 x 5": Ring(bore=50, outside=52, length=5, density=8500, specific_heat=380, emissivity=1.0),
    "disc 40 x 2": Ring(bore=0, outside=40, length=2, density=7850, specific_heat=465, emissivity=1.0),
}


def rate(ring: Ring, kelvin: float, air: float) -> float:
    """dT/dt [K/s] of a ring of one temperature; metres, kelvin."""
    film = (kelvin + air) / 2.0
    k = 0.0241 * (film / 273.15) ** 0.81
    mu = 1.716e-5 * (film / 273.15) ** 0.7
    rho, cp = 1.2922 * 273.15 / film, 1007.0
    alpha, nu = k / (rho * cp), mu / rho
    outer, inner, length = ring.outside * 1e-3, ring.bore * 1e-3, ring.length * 1e-3
    rayleigh = 9.81 / film * abs(kelvin - air) * outer**3 / (nu * alpha)
    shape = (1.0 + (0.559 * alpha / nu) ** 0.5625) ** (8.0 / 27.0)
    h = k / outer * (0.60 + 0.387 * rayleigh ** (1.0 / 6.0) / shape) ** 2
    faces = math.pi * (outer**2 - inner**2) / 4.0
    surface = math.pi * (outer + inner) * length + 2.0 * faces
    flow = surface * (h * (kelvin - air) + ring.emissivity * SIGMA * (kelvin**4 - air**4))
    return -flow / (faces * length * ring.density * ring.specific_heat)


def integrated(ring: Ring, start: float, seconds: float, air: float) -> float:
    """Temperature after a time, both in degC."""
    answer = solve_ivp(
        lambda _, y: [rate(ring, float(y[0]), air + 273.15)],
        (0.0, seconds),
        [start + 273.15],
        method="LSODA",
        rtol=1e-10,
        atol=1e-9,
    )
    assert answer.success
    return float(answer.y[0, -1]) - 273.15


@pytest.mark.parametrize("emissivity", [BRIGHT, DULL])
@pytest.mark.parametrize("name", RINGS)
@pytest.mark.parametrize(("start", "air"), [(120.0, 20.0), (250.0, 35.0), (-25.0, 20.0)])
def test_temperature_after_a_carry(name: str, emissivity: float, start: float, air: float) -> None:
    """Hot ones in a cool and in a warm room, and one out of the freezer."""
    ring = replace(RINGS[name], emissivity=emissivity)
    for seconds in (15.0, 120.0, 1800.0):
        found = cooled_temperature(ring, start=start, seconds=seconds, air=air)
        assert integrated(ring, start, seconds, air) == pytest.approx(found, abs=0.01)


@pytest.mark.parametrize("emissivity", [BRIGHT, DULL])
@pytest.mark.parametrize("name", RINGS)
@pytest.mark.parametrize(("start", "until"), [(150.0, 145.0), (250.0, 60.0)])
def test_time_until_a_temperature(name: str, emissivity: float, start: float, until: float) -> None:
    ring = replace(RINGS[name], emissivity=emissivity)
    answer = solve_ivp(
        lambda kelvin, _: [1.0 / rate(ring, float(kelvin), 293.15)],
        (start + 273.15, until + 273.15),
        [0.0],
        method="LSODA",
        rtol=1e-10,
        atol=1e-10,
    )
    assert float(answer.y[0, -1]) == pytest.approx(carry_time(ring, start=start, until=until, air=20), rel=1e-3)


@pytest.mark.parametrize("name", [name for name in RINGS if RINGS[name].bore])
@pytest.mark.parametrize(("hot", "until", "gap"), [(120.0, 115.0, 0.05), (200.0, 60.0, 0.015)])
def test_time_over_the_cold_shaft(name: str, hot: float, until: float, gap: float) -> None:
    """m c dT/dt = -k (pi D L / s) (T - T_shaft): conduction through air of thickness s, the shaft so heavy that it stays at 20
    degC. Both bodies moving stand in tests/unit/physics/test_carrying."""
    ring, grows = RINGS[name], 18e-6
    heavy = Ring(bore=0, outside=ring.bore, length=ring.length, density=1e16, specific_heat=465, emissivity=1.0)
    mass = math.pi / 4.0 * (ring.outside**2 - ring.bore**2) * ring.length * 1e-9 * ring.density
    through = AIR_CONDUCTIVITY * math.pi * ring.bore * 1e-3 * ring.length * 1e-3 / (gap * 1e-3)
    answer = solve_ivp(
        lambda _, y: -through * (y - 20.0) / (mass * ring.specific_heat),
        (0.0, 1e4),
        [hot],
        method="LSODA",
        rtol=1e-10,
        atol=1e-9,
        events=lambda _, y: y[0] - until,
    )
    closes = grows * ring.bore * (hot - until)
    told = time_to_close(ring, heavy, closes=closes, apart=hot - 20.0, gap=gap, expansions=(grows, 12e-6))
    assert answer.t_events[0][0] == pytest.approx(told, rel=1e-3)
