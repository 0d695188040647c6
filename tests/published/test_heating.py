"""Published heat-transfer examples, recomputed with the code that cools a carried hub.

Incropera  Incropera et al., Fundamentals of Heat and Mass Transfer, examples 5.1, 5.3 and 9.4 (transcription opened)
Cengel     Heat and Mass Transfer, 3rd ed., examples 4.1 (transcription opened) and 9.1 (results from memory: the
           transcription divides integers and prints nonsense)
The code knows rings; a long bar, a wide sheet and a sphere of the same volume per surface cool alike under a given film.
"""

from __future__ import annotations

import pytest

from setupcheck.physics.heating import Ring, biot_number, carry_time, cooled_temperature, film_coefficient, heat_loss

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


def test_cengel_9_1_convection_and_radiation_of_a_water_pipe() -> None:
    """D 80 mm, 6 m long, 70 degC in 20: 443 W by convection and 553 W by radiation with emissivity 1."""
    convected = heat_loss(bar(80, emissivity=0.0), temperature=70, air=20) / 1000 * 6
    everything = heat_loss(bar(80, emissivity=1.0), temperature=70, air=20) / 1000 * 6
    assert 443 == pytest.approx(convected, rel=1e-2)  # our fit of air, not the book's table
    assert 553 == pytest.approx(everything - convected, rel=2e-3)


def test_incropera_5_1_a_thermocouple_bead_follows_its_gas() -> None:
    """h 400, D 0.70588 mm, 8500 kg/m3, 400 J/kgK, so tau 1 s: 25 to 199 in gas of 200 degC takes 5.2 s."""
    bead = sphere(0.70588, density=8500, heat=400)
    assert 199.0 == pytest.approx(cooled_temperature(bead, start=25, seconds=5.165, air=200, film=400), abs=0.01)


def test_incropera_5_3_a_coated_sheet_is_heated_and_then_cooled_with_radiation() -> None:
    """Sheet 3 mm, 2770 kg/m3, 875 J/kgK, emissivity 0.8. Oven 175 degC, h 40: 150 degC at 123 s. Held 300 s more; then
    air of 25 degC, h 10: 37 degC at 987 s. The book's 987 comes out as 986.3 with 0 degC = 273 K, 986.0 with 273.15."""
    sheet = Ring(bore=0, outside=FAR, length=3, density=2770, specific_heat=875, emissivity=0.8)
    assert 150.0 == pytest.approx(cooled_temperature(sheet, start=25, seconds=123.08, air=175, film=40), abs=0.05)
    out = cooled_temperature(sheet, start=25, seconds=423.08, air=175, film=40)
    assert 174.75 == pytest.approx(out, abs=0.05)
    assert 987 - 423 == pytest.approx(carry_time(sheet, start=out, until=37, air=25, film=10), abs=1.2)
    assert 37.0 == pytest.approx(cooled_temperature(sheet, start=out, seconds=563.25, air=25, film=10), abs=0.05)


def test_cengel_4_1_a_small_junction_takes_ten_seconds() -> None:
    """Sphere 1 mm, h 210, k 35, 8500 kg/m3, 320 J/kgK: Bi 0.001; 99 % of the difference is gone in 10 s (9.94)."""
    junction = sphere(1.0, density=8500, heat=320)
    assert 0.001 == pytest.approx(biot_number(210, depth=junction.depth, conductivity=35), rel=1e-3)
    assert 9.94 == pytest.approx(carry_time(junction, start=100, until=1, air=0, film=210), abs=0.01)
