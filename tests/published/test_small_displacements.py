"""Encyclopaedia Britannica, 11th ed. (1911), Mechanics, equations (6) to (9): the small displacement of a rigid body.

dx = lambda + eta z - zeta y, and cyclic: the displacement of any point from that of the origin and a small rotation.
Later the small displacement torsor of set-up planning (Ballot and Bourdet; Legoff, Villeneuve and Geiskopf).
The numbers were worked out here.

D_O = (10, -4, 0) um, rotation (100, -50, 0) urad, point 80 mm along the axis: D_M = (6, -12, 0) um.
As one complex number the slope of the axis is (rotation about y) - i (rotation about x).
"""

from __future__ import annotations

import cmath
import math

import pytest

from .bench import ARCSEC, UM, sampled, stack

D_O = 10.0 - 4.0j
D_M = 6.0 - 12.0j
ROTATION = (100.0, -50.0)
LEVER = 80.0
SLOPE = (ROTATION[1] - 1j * ROTATION[0]) * 1e-3
"""um for each mm along z: (rotation about y, - rotation about x)."""


def deg(direction: complex) -> str:
    return f"{math.degrees(cmath.phase(direction)) % 360.0:.12f} deg"


def polar(vector: complex, factor: float) -> str:
    return f"{factor * abs(vector):.12f} um"


def bought(offset: complex, slope: complex, *, at: float, facing: str = "+z") -> str:
    """A ring seat inspected on its bore: run-out at its middle and face run-out, both with their high points (invented).

    The high point of an outside surface lies towards its offset; a face that looks to +z is high where it slopes to:
    against its normal's lean. slope in um a mm; the indicator ran on a circle of 100 mm.
    """
    towards = -slope if facing == "+z" else slope
    return f"""
setupcheck: 1
title: A seat inspected on its bore
units: mm
parts:
  seat:
    surfaces:
      bore: {{kind: bore, diameter: 30, from: -20, to: 20}}
      face: {{kind: face, at: 0, facing: {facing}, diameter: 110}}
    given:
      - {{of: face, about: bore, runout: {{measured: {polar(offset, 2.0)}, high_at: {deg(offset)}}},
         face_runout: {{measured: {polar(slope, 100.0)}, high_at: {deg(towards)}}}, across: 100}}
require:
  - {{what: run-out, of: seat.face, about: seat.bore, at: {at}, at_most: 100 um}}
  - {{what: coaxial, of: seat.face, about: seat.bore, at: {at}, at_most: 100 um}}
  - {{what: squareness, of: seat.face, about: seat.bore, at_most: 200"}}
"""


def held(offset: complex, slope: complex, *, at: float, facing: str = "+z", looks: str = "+z") -> str:
    """The same displacement as a re-holding: what is turned at height `at` afterwards stands off by it (invented part).

    The datum is high by `offset` and leans by `slope` against the machine, so the new surface is off by minus that.
    """
    towards = -slope if facing == "+z" else slope
    return f"""
setupcheck: 1
title: A flange held again for its far land
units: mm
machines: {{lathe-A: {{kind: lathe, axis_runout: 0 um}}}}
parts:
  flange:
    surfaces:
      bar:  {{kind: cylinder, diameter: 130, from: -90, to: -10, made: stock}}
      rim:  {{kind: cylinder, diameter: 120, from: -5, to: 5}}
      face: {{kind: face, at: 5, facing: {facing}, diameter: 120}}
      land: {{kind: cylinder, diameter: 50, from: {at - 5}, to: {at + 5}}}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre:     {{on: bar, by: three-jaw, at: -80, runout: 50 um}}
      and_centre: {{on: bar, by: three-jaw, at: -20, runout: 50 um}}
    cut: {{rim: {{}}, face: {{}}}}
  - op: 20
    machine: lathe-A
    looks_at_tool: {looks}
    hold:
      centre: {{on: rim, by: indicator, at: 0, runout: {{measured: {polar(offset, 2.0)}, high_at: {deg(offset)}}}}}
      square: {{on: face, by: faceplate, face_runout: {{measured: {polar(slope, 100.0)}, high_at: {deg(towards)}}}, across: 100}}
      stop:   {{on: face, error: 0 um}}
    cut: {{land: {{}}}}
require:
  - {{what: run-out, of: flange.land, about: flange.rim, at: {at}, at_most: 100 um}}
"""


def test_the_displacement_of_a_point_is_translation_plus_rotation_times_lever() -> None:
    # (6, -12, 0) um: dx = 10 + (-50e-6)(80,000), dy = -4 - (100e-6)(80,000)
    assert D_M == pytest.approx(D_O + SLOPE * LEVER)


@pytest.mark.parametrize("facing", ["+z", "-z"])
def test_a_bought_part_shows_the_displacement_80_mm_along_its_axis(facing: str) -> None:
    job = bought(D_O, SLOPE, at=LEVER, facing=facing)
    for index in (0, 1):  # run-out and coaxial are both twice the distance of the axes at that height
        c = stack(job, index).combined
        assert 2.0 * abs(D_M) * UM == pytest.approx(c.worst.high)
        assert 2.0 * abs(D_M) * UM == pytest.approx(c.likely.high)
    account = stack(job).figure.accounts[0]
    assert D_M * UM == pytest.approx(account.known())


def test_at_the_origin_only_the_translation_is_left() -> None:
    account = stack(bought(D_O, SLOPE, at=0.0)).figure.accounts[0]
    assert D_O * UM == pytest.approx(account.known())


@pytest.mark.parametrize("facing", ["+z", "-z"])
@pytest.mark.parametrize("looks", ["+z", "-z"])
def test_a_re_holding_hands_the_displacement_on(facing: str, looks: str) -> None:
    # what is turned next runs true to the machine, so against its datum it is off by minus the datum's displacement;
    # the directions are marks on the part, so it does not matter which end looks at the tool
    result = stack(held(D_O, SLOPE, at=LEVER, facing=facing, looks=looks))
    assert -D_M * UM == pytest.approx(result.figure.accounts[0].known())
    assert 2.0 * abs(D_M) * UM == pytest.approx(result.combined.worst.high)


@pytest.mark.parametrize(("phase", "total"), [(0.0, 19.5), (90.0, 14.15), (180.0, 4.5)])
def test_an_offset_and_a_tilt_add_up_by_their_phase(phase: float, total: float) -> None:
    # worked out here: face run-out 20 um at 80 mm is 0.25 mrad; over 30 mm 7.5 um; with 12 um 19.5, 14.15, 4.5 um
    slope = 0.25 * cmath.exp(1j * math.radians(phase))
    for job in (bought(12.0 + 0j, slope, at=30.0), held(12.0 + 0j, slope, at=30.0)):
        assert 2.0 * total * UM == pytest.approx(stack(job).combined.worst.high, abs=0.01 * UM)
        assert 2.0 * total * UM == pytest.approx(float(sampled(job)[0]), abs=0.01 * UM)


def test_20_um_across_80_mm_is_52_seconds_of_arc() -> None:
    # 0.020/80 = 0.250 mrad = 51.6"
    assert 51.6 * ARCSEC == pytest.approx(
        stack(bought(12.0 + 0j, 0.25 + 0j, at=30.0), 2).combined.worst.high, abs=0.05 * ARCSEC
    )


def test_a_leaning_wheel_wobbles_by_its_radius_times_the_tilt() -> None:
    # 20 um across 80 mm at r = 90 mm: 45 um from end to end, so the worst tooth stands 22.5 um from the middle
    job = """
setupcheck: 1
title: A wheel that leans on its bore
units: mm
parts:
  wheel:
    surfaces:
      bore:  {kind: bore, diameter: 40, from: 0, to: 24}
      face:  {kind: face, at: 0, facing: -z, diameter: 120}
      teeth: {kind: teeth, count: 72, on_circle: 180, at: 12, pressure_angle: 20 deg}
    given:
      - {of: teeth, from: face, length: 12 ±0.000}
      - {of: teeth, about: bore, runout: {measured: 0 um}, face_runout: {measured: 20 um, high_at: 0 deg}, across: 80}
mesh: {wheel: wheel.teeth}
place: {axis: wheel.bore, worm_axis: {from: wheel.face, length: -12 ±0.000}}
require:
  - {what: mid-plane, of: wheel.teeth, at_most: 60 um}
"""
    assert 22.5 * UM == pytest.approx(stack(job).combined.worst.high)
    assert 22.5 * UM == pytest.approx(float(sampled(job)[0]))


def three_holdings(how: tuple[str, str, str]) -> str:
    """A plug held three times on its shank, a land turned after each; the last about the first (invented part)."""
    lands = "".join(f"      land{i}: {{kind: cylinder, diameter: {60 - 5 * i}, from: 0, to: 10}}\n" for i in range(4))
    setups = "".join(
        f"""
  - op: {20 + 10 * i}
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {{on: land{i}, by: indicator, runout: {{measured: {how[i]}}}}}
      square: {{on: end, by: faceplate, face_runout: 0 um, across: 50}}
      stop:   {{on: end, error: 0 um}}
    cut: {{land{i + 1}: {{}}}}"""
        for i in range(3)
    )
    return f"""
setupcheck: 1
title: A plug held three times
units: mm
machines: {{lathe-A: {{kind: lathe, axis_runout: 0 um}}}}
parts:
  plug:
    surfaces:
      bar: {{kind: cylinder, diameter: 70, from: -60, to: 0, made: stock}}
      end: {{kind: face, at: 0, facing: -z, diameter: 60}}
{lands}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre:     {{on: bar, by: three-jaw, at: -50, runout: 100 um}}
      and_centre: {{on: bar, by: three-jaw, at: -20, runout: 100 um}}
    cut: {{end: {{}}, land0: {{}}}}
{setups}
require:
  - {{what: run-out, of: plug.land3, about: plug.land0, at_most: 100 um}}
"""


def test_known_directions_add_as_vectors_and_unknown_ones_as_a_walk() -> None:
    # worked out here: 20 um at 0 deg, 12 at 90, 8 at 200: 15.544 um at 36.58 deg, where the plain sum is 40
    known = stack(three_holdings(("40 um, high_at: 0 deg", "24 um, high_at: 90 deg", "16 um, high_at: 200 deg")))
    total = -known.figure.accounts[0].known() / UM
    assert 15.544 == pytest.approx(abs(total), abs=0.0005)
    assert 36.58 == pytest.approx(math.degrees(cmath.phase(total)), abs=0.005)
    assert 2.0 * 15.544 * UM == pytest.approx(known.combined.worst.high, abs=0.001 * UM)
    unknown = stack(three_holdings(("40 um", "24 um", "16 um"))).combined
    assert 80.0 * UM == pytest.approx(unknown.worst.high)
    assert 2.0 * math.sqrt(20.0**2 + 12.0**2 + 8.0**2) * UM == pytest.approx(unknown.rss.high)
