"""Teeth and hole circles in the simulation. Values by pen and paper."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from . import measure
from .bench import ALPHA, BOTH_WAYS, NANO, UM, machined, setup
from .made import World
from .route import (
    Centre,
    CentredAndSquared,
    CutTeeth,
    Drill,
    Existing,
    Lean,
    Offset,
    Part,
    RadialDial,
    Square,
    cylinder,
    teeth,
)

# ---------------------------------------------------------------- teeth


PERFECT = Existing("teeth")


def bought_teeth(
    count: int, radius: float, *, form: str = "involute", lead: float = 0.0, at: Existing = PERFECT
) -> World:
    drawn = teeth("teeth", count, radius, pressure_angle=ALPHA, z=0.0, form=form, lead_angle=lead)  # type: ignore[arg-type]
    part = Part("wheel", (cylinder("seat", 40.0, -10.0, 10.0), drawn), (Existing("seat"), at))
    return machined(parts=(part,))


def test_an_eccentric_involute_shows_two_e_over_cosine_alpha_on_one_flank_and_two_e_on_the_gaps() -> None:
    # 2 * 20 um / cos 20 deg = 42.567 um; the sampling of 90 teeth may miss the peak by a few hundredths
    world = bought_teeth(90, 90.0, at=Existing("teeth", offset=0.020))
    figures = measure.teeth(world, "wheel.teeth", "wheel.seat")
    for flank in (figures.flank_ccw, figures.flank_cw):
        assert 42.54 * UM <= measure.cumulative(flank) <= 42.57 * UM
        assert measure.single(flank) == pytest.approx(1.486 * UM, abs=0.001 * UM)  # 42.567 sin(pi/90)
    assert measure.cumulative(figures.gap_centre) == pytest.approx(40.0 * UM, abs=0.03 * UM)
    for side in (1, -1):
        index = 90.0 * measure.index(world, "wheel.teeth", "wheel.seat", side=side)
        assert 42.53 * UM <= measure.cumulative(index) <= 42.57 * UM


def test_the_play_of_an_eccentric_wheel_swings_by_four_e_tangent_alpha() -> None:
    # e = 20 um at 20 deg: 29.1 um; both flanks on the same worm
    world = bought_teeth(90, 90.0, at=Existing("teeth", offset=0.020))
    ccw, cw = (measure.index(world, "wheel.teeth", "wheel.seat", side=s) for s in (1, -1))
    assert measure.cumulative(90.0 * (ccw - cw)) == pytest.approx(29.1 * UM, abs=0.05 * UM)


@pytest.mark.parametrize("count", [8, 24, 72])
def test_each_flank_of_a_gap_stands_half_a_gap_from_its_middle(count: int) -> None:
    # at a fixed radius the flank's own place counts: (e/cos a) sin(phi - theta -+ (a + pi/2N));
    # driven by a worm the gap's middle counts: (e/cos a) sin(phi - theta -+ a), read with opposite sign
    world = bought_teeth(count, 90.0, at=Existing("teeth", offset=cmath.rect(0.020, 0.3)))
    figures = measure.teeth(world, "wheel.teeth", "wheel.seat")
    theta = figures.drawn_angle
    for side, flank in ((1, figures.flank_ccw), (-1, figures.flank_cw)):
        wave = 0.020 / math.cos(ALPHA) * np.sin(0.3 - theta - side * (ALPHA + math.pi / (2 * count)))
        assert flank == pytest.approx(wave, abs=0.01 * UM)
        driven = 0.020 / math.cos(ALPHA) * np.sin(0.3 - theta - side * ALPHA)
        assert -90.0 * measure.index(world, "wheel.teeth", "wheel.seat", side=side) == pytest.approx(
            driven, abs=0.005 * UM
        )


def test_straight_flanks_lean_less_against_the_radius_and_show_a_little_less() -> None:
    # the flank keeps alpha to the gap's middle, alpha - pi/2N to its own radius: (e/cos(a - pi/2N)) sin(phi - theta - a)
    world = bought_teeth(24, 60.0, form="straight", at=Existing("teeth", offset=0.020))
    figures = measure.teeth(world, "wheel.teeth", "wheel.seat")
    wave = 0.020 / math.cos(ALPHA - math.pi / 48) * np.sin(-figures.drawn_angle - ALPHA)
    assert figures.flank_ccw == pytest.approx(wave, abs=0.02 * UM)


def test_a_leaned_wheel_wobbles_by_the_face_run_out_at_its_pitch_circle() -> None:
    # 0.020 on 80 is 0.250 mrad: 45 um on a pitch circle of 180, high opposite to the lean; straight gaps hardly notice
    world = bought_teeth(90, 90.0, at=Existing("teeth", lean=0.25e-3))
    figures = measure.teeth(world, "wheel.teeth", "wheel.seat")
    assert measure.cumulative(figures.axial) == pytest.approx(45.0 * UM, abs=0.03 * UM)
    assert figures.axial == pytest.approx(-90.0 * 0.25e-3 * np.cos(figures.drawn_angle), abs=0.01 * UM)
    assert measure.cumulative(figures.flank_ccw) < 0.01 * UM


def test_oblique_gaps_turn_the_wobble_into_pitch_error_by_the_tangent_of_the_lead() -> None:
    # r t tan(gamma) = 54 * 0.25e-3 * tan(3.5764 deg) = 0.844 um, peak to peak 1.688 um
    lead = math.radians(3.5764)
    figures = measure.teeth(
        bought_teeth(72, 54.0, lead=lead, at=Existing("teeth", lean=0.25e-3)), "wheel.teeth", "wheel.seat"
    )
    assert measure.cumulative(figures.gap_centre) == pytest.approx(1.688 * UM, abs=0.005 * UM)


@BOTH_WAYS
def test_gaps_are_counted_counter_clockwise_at_the_machine(way: int) -> None:
    division = tuple(1e-4 * k for k in range(24))
    world = machined(setup(cuts=(CutTeeth("wheel.teeth", division, first_at=0.2),), way=way, insertion=1.0))
    figures = measure.teeth(world, "wheel.teeth", "wheel.rim")
    turned = np.angle(np.exp(1j * (figures.drawn_angle - 0.2 - way * np.arange(24) * 2.0 * math.pi / 24)))
    assert turned == pytest.approx(np.zeros(24), abs=1e-12)
    for got in (figures.gap_centre, figures.flank_ccw, figures.flank_cw):
        assert got == pytest.approx(60.0 * way * np.array(division), abs=1e-9)


def test_a_wider_gap_moves_its_flanks_apart() -> None:
    world = machined(setup(cuts=(CutTeeth("wheel.teeth", width_change=(0.006,) * 24),)))
    figures = measure.teeth(world, "wheel.teeth", "wheel.rim")
    assert figures.flank_ccw == pytest.approx(np.full(24, 0.003), abs=1e-9)
    assert figures.flank_cw == pytest.approx(np.full(24, -0.003), abs=1e-9)


def test_teeth_cut_off_centre_and_off_length_say_so() -> None:
    hold = CentredAndSquared(Centre("wheel.rim", 30.0, RadialDial(0.030, 0.4)), Square("wheel.front", Lean(0j)))
    world = machined(setup(hold, cuts=(CutTeeth("wheel.teeth", dial=0.011),)))
    figures = measure.teeth(world, "wheel.teeth", "wheel.rim")
    e = cmath.rect(0.015, 0.4 + math.pi)
    assert figures.gap_centre == pytest.approx((e * np.exp(-1j * figures.drawn_angle)).imag, abs=0.005 * UM)
    assert figures.outward == pytest.approx((e * np.exp(-1j * figures.drawn_angle)).real, abs=0.005 * UM)
    assert figures.axial == pytest.approx(np.full(24, 0.011), abs=NANO)


# ---------------------------------------------------------------- holes


def test_a_spindle_off_outwards_opens_the_circle_and_off_sideways_turns_the_pattern() -> None:
    world = machined(setup(cuts=(Drill("wheel.ring", spindle_to_axis=complex(0.010, 0.009)),)))
    ring = measure.holes(world, "wheel.ring", "wheel.rim")
    assert ring.fit_radius == pytest.approx(math.hypot(45.010, 0.009), abs=1e-9)
    assert abs(ring.fit_centre) == pytest.approx(0.0, abs=1e-9)
    assert ring.sideways == pytest.approx(np.full(6, 0.009), abs=1e-9)
    assert ring.chords == pytest.approx(np.full(6, math.hypot(45.010, 0.009)), abs=1e-9)  # hexagon: chord = radius


def test_a_ring_drilled_off_centre_has_its_circle_there_and_true_chords() -> None:
    hold = CentredAndSquared(Centre("wheel.rim", 40.0, Offset(0.020j)), Square("wheel.front", Lean(0j)))
    world = machined(setup(hold, cuts=(Drill("wheel.ring"),)))
    ring = measure.holes(world, "wheel.ring", "wheel.rim")
    assert ring.fit_centre == pytest.approx(-0.020j, abs=NANO)
    assert ring.chords == pytest.approx(np.full(6, 45.0), abs=1e-9)


def test_a_single_hole_that_scatters_opens_one_chord_and_closes_the_other() -> None:
    scatter = (0j, 0.010j, 0j, 0j, 0j, 0j)
    ring = measure.holes(machined(setup(cuts=(Drill("wheel.ring", scatter=scatter),))), "wheel.ring", "wheel.rim")
    # sideways 10 um, chord at 30 deg to the tangent: 10 cos 30 = 8.66 um
    assert ring.chords[:3] == pytest.approx([45.0 + 0.00866, 45.0 - 0.00866, 45.0], abs=0.01 * UM)
