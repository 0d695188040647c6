"""Published heat-transfer examples, recomputed with the code that cools a carried hub.

Incropera  Incropera et al., Fundamentals of Heat and Mass Transfer, examples 5.1, 5.3 and 9.4 (transcription opened)
Cengel     Heat and Mass Transfer, 3rd ed., examples 4.1 (transcription opened) and 9.1 (results from memory: the
           transcription divides integers and prints nonsense)
Bejan      Bejan and Kraus, Heat Transfer Handbook, eq. 3.286 (page opened)
The code knows rings; a long bar, a wide sheet and a sphere of the same volume per surface cool alike under a given film.
"""

from __future__ import annotations

import math
from itertools import pairwise

import pytest
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

from setupcheck.physics.heating import (
    KELVIN,
    STEFAN_BOLTZMANN,
    Ring,
    biot_number,
    carry_time,
    cooled_temperature,
    film_coefficient,
    heat_loss,
)

FAR = 1e6  # mm; makes the ends of a bar, or the edge of a sheet, count for less than one in ten thousand


def bar(diameter: float, *, density: float = 1.0, heat: float = 1.0, emissivity: float) -> Ring:
    """A long bar; its volume per surface is a quarter of the diameter."""
    return Ring(bore=0, outside=diameter, length=FAR, density=density, specific_heat=heat, emissivity=emissivity)


def sphere(diameter: float, *, density: float, heat: float) -> Ring:
    """A bar with the volume per surface of a sphere, a sixth of its diameter."""
    return bar(diameter * 4 / 6, density=density, heat=heat, emissivity=0.0)


def test_incropera_9_4_loss_of_a_hot_pipe_by_air_and_radiation() -> None:
    """D 0.1 m, 165 degC in 23, emissivity 0.85: 763 W/m; film 7.23 W/m2K with the book's properties of air."""
    assert 7.229 == pytest.approx(film_coefficient(surface=165, air=23, diameter=100), rel=2e-3)
    assert 763 == pytest.approx(heat_loss(bar(100, emissivity=0.85), temperature=165, air=23) / 1000, rel=2e-3)
    # the two parts with the book's properties, computed for this project with 0 degC = 273 K: 322.5 and 441.0
    convected = heat_loss(bar(100, emissivity=0.0), temperature=165, air=23) / 1000
    radiated = heat_loss(bar(100, emissivity=0.85), temperature=165, air=23, film=0.0) / 1000
    assert 322.5 == pytest.approx(convected, rel=2e-3)
    assert 441.0 == pytest.approx(radiated, rel=2e-3)


def test_cengel_9_1_convection_and_radiation_of_a_water_pipe() -> None:
    """D 80 mm, 6 m long, 70 degC in 20: 443 W by convection and 553 W by radiation with emissivity 1."""
    convected = heat_loss(bar(80, emissivity=0.0), temperature=70, air=20) / 1000 * 6
    everything = heat_loss(bar(80, emissivity=1.0), temperature=70, air=20) / 1000 * 6
    assert 443 == pytest.approx(convected, rel=1e-2)  # our fit of air, not the book's table
    assert 553 == pytest.approx(everything - convected, rel=2e-3)
    # with the book's properties of air, computed for this project; the transcription's integer division has 0.12
    assert 5.868 == pytest.approx(film_coefficient(surface=70, air=20, diameter=80), rel=1e-2)


def test_incropera_5_1_a_thermocouple_bead_follows_its_gas() -> None:
    """h 400, D 0.70588 mm, 8500 kg/m3, 400 J/kgK, so tau 1 s: 25 to 199 in gas of 200 degC takes 5.2 s."""
    bead = sphere(0.70588, density=8500, heat=400)
    assert 199.0 == pytest.approx(cooled_temperature(bead, start=25, seconds=5.165, air=200, film=400), abs=0.01)


def test_incropera_5_2_the_bead_sees_hotter_walls() -> None:
    """The same bead in gas of 200 degC, walls of 400, emissivity 0.9: it settles at 218.7 degC (from memory) and comes within
    1 K of it in 4.98 s. Gas and walls differ, so convection and radiation are taken from two calls; the bead starts at 25."""
    bare, black = (bar(0.70588 * 4 / 6, density=8500, heat=400, emissivity=e) for e in (0.0, 0.9))

    def gain(now: float) -> float:
        by_gas = heat_loss(bare, temperature=now, air=200, film=400)
        return -by_gas - heat_loss(black, temperature=now, air=400, film=0.0)

    settled = brentq(gain, 25, 400)
    assert 218.7 == pytest.approx(settled, abs=0.05)
    answer = solve_ivp(
        lambda _, y: [gain(float(y[0])) / bare.heat_capacity],
        (0, 10),
        [25.0],
        events=lambda _, y: y[0] - (settled - 1.0),
        rtol=1e-9,
    )
    assert 4.98 == pytest.approx(answer.t_events[0][0], abs=0.02)


def test_incropera_5_3_a_coated_sheet_is_heated_and_then_cooled_with_radiation() -> None:
    """Sheet 3 mm, 2770 kg/m3, 875 J/kgK, emissivity 0.8. Oven 175 degC, h 40: 150 degC at 123 s. Held 300 s more; then
    air of 25 degC, h 10: 37 degC at 987 s. The book's 987 comes out as 986.3 with 0 degC = 273 K, 986.0 with 273.15."""
    sheet = Ring(bore=0, outside=FAR, length=3, density=2770, specific_heat=875, emissivity=0.8)
    assert 150.0 == pytest.approx(cooled_temperature(sheet, start=25, seconds=123.08, air=175, film=40), abs=0.05)
    out = cooled_temperature(sheet, start=25, seconds=423.08, air=175, film=40)
    assert 174.75 == pytest.approx(out, abs=0.05)
    assert 987 - 423 == pytest.approx(carry_time(sheet, start=out, until=37, air=25, film=10), abs=1.2)
    assert 37.0 == pytest.approx(cooled_temperature(sheet, start=out, seconds=563.25, air=25, film=10), abs=0.05)
    # the two printed times, found and not put in
    heating = brentq(lambda t: cooled_temperature(sheet, start=25, seconds=t, air=175, film=40) - 150.0, 60, 240)
    assert 123 == pytest.approx(heating, abs=0.5)
    out = cooled_temperature(sheet, start=25, seconds=heating + 300, air=175, film=40)
    assert 987 == pytest.approx(heating + 300 + carry_time(sheet, start=out, until=37, air=25, film=10), abs=1.2)


def test_cengel_4_1_a_small_junction_takes_ten_seconds() -> None:
    """Sphere 1 mm, h 210, k 35, 8500 kg/m3, 320 J/kgK: Bi 0.001; 99 % of the difference is gone in 10 s (9.94)."""
    junction = sphere(1.0, density=8500, heat=320)
    assert 0.001 == pytest.approx(biot_number(210, depth=junction.depth, conductivity=35), rel=1e-3)
    assert 9.94 == pytest.approx(carry_time(junction, start=100, until=1, air=0, film=210), abs=0.01)
    # the rate is h A / m c = 0.4632 per second (computed for this project)
    assert 0.4632 == pytest.approx(
        heat_loss(junction, temperature=1, air=0, film=210) / junction.heat_capacity, abs=1e-4
    )


@pytest.mark.parametrize("power", [1 / 4, 1 / 3])
def test_bejan_a_film_that_falls_with_a_power_of_the_difference(power: float) -> None:
    """h = h0 (difference/first difference)^n: the share (1 + n x)^(-1/n) of it is left at x = h0 A t / m c; 0.4096 for n = 1/4 at
    x = 1. Our film is constant in a call, so the way down is cut into 100 short ones with the film of their middles."""
    ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.0)
    left, film = (1 + power) ** (-1 / power), 8.0
    if power == 1 / 4:
        assert 0.4096 == pytest.approx(left)
    ends = [left ** (i / 100) for i in range(101)]
    spent = math.fsum(
        carry_time(ring, start=20 + 130 * high, until=20 + 130 * low, air=20, film=film * ((high + low) / 2) ** power)
        for high, low in pairwise(ends)
    )
    assert ring.heat_capacity / (film * ring.surface) == pytest.approx(spent, rel=1e-5)


def test_bejan_with_a_constant_film_the_difference_falls_exponentially() -> None:
    """The limit n = 0 of the same formula: exp(-x)."""
    ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.0)
    constant = ring.heat_capacity / (8.0 * ring.surface)
    for x in (0.1, 1.0, 4.0):
        assert 20 + 130 * math.exp(-x) == pytest.approx(
            cooled_temperature(ring, start=150, seconds=x * constant, air=20, film=8.0), abs=1e-6
        )


def test_incropera_radiation_alone_has_a_closed_form() -> None:
    """m c/(4 e A s T0^3) {ln[(T0+T)/(T0-T)] - ln[(T0+T1)/(T0-T1)] + 2 [atan(T/T0) - atan(T1/T0)]}, kelvin, walls T0; and towards
    walls at absolute zero m c/(3 e A s) (1/T^3 - 1/T1^3) (equations 5.18 and 5.19, from memory)."""
    ring = Ring(bore=30, outside=42, length=10, density=8770, specific_heat=377, emissivity=0.6)
    scale = ring.heat_capacity / (0.6 * ring.surface * STEFAN_BOLTZMANN)
    first, last, walls = 300 + KELVIN, 120 + KELVIN, 20 + KELVIN

    def primitive(t: float) -> float:
        return math.log((t + walls) / (t - walls)) + 2 * math.atan(t / walls)

    towards_walls = scale / (4 * walls**3) * (primitive(last) - primitive(first))
    assert towards_walls == pytest.approx(carry_time(ring, start=300, until=120, air=20, film=0.0), rel=1e-8)
    towards_nothing = scale / 3 * (last**-3 - first**-3)
    assert towards_nothing == pytest.approx(carry_time(ring, start=300, until=120, air=-KELVIN, film=0.0), rel=1e-8)
    assert 120 == pytest.approx(cooled_temperature(ring, start=300, seconds=towards_walls, air=20, film=0.0), abs=1e-6)
