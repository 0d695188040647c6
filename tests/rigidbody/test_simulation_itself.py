"""Does the simulation itself tell the truth?  Pen-and-paper values, then the written first-order equations."""

from __future__ import annotations

import cmath
import dataclasses
import math
from pathlib import Path

import numpy as np
import pytest

from . import measure
from .dial import radial, sweep
from .first_order import Account
from .frames import line_through, turn
from .machining import run
from .made import World
from .random_routes import LEVER, any_route, random_route, second_order
from .route import (
    BoreSquares,
    Centre,
    CentredAndSquared,
    Clock,
    CutTeeth,
    Drill,
    Existing,
    FaceDial,
    FaceSquares,
    Join,
    Lean,
    NoClock,
    NoStop,
    Offset,
    Part,
    PointStop,
    Pushed,
    RadialDial,
    RingStop,
    Route,
    Seat,
    Setup,
    Square,
    Turn,
    TwoPlanes,
    bore,
    cylinder,
    face,
    holes,
    teeth,
)

UM = 1e-3
NANO = 1e-6  # mm: what the sweeps and Newton are asked to settle to
BOTH_WAYS = pytest.mark.parametrize("way", [1, -1])
ALPHA = math.radians(20.0)

WHEEL = Part(
    "wheel",
    (
        cylinder("rim", 120.0, 0.0, 40.0),
        bore("hole", 30.0, 0.0, 40.0),
        bore("pocket", 60.0, 20.0, 40.0),
        face("front", 40.0, +1, 80.0),
        face("back", 0.0, -1, 80.0),
        face("shelf", 25.0, +1, 80.0),
        teeth("teeth", 24, 60.0, pressure_angle=ALPHA, z=30.0),
        holes("ring", 6, 45.0, z=40.0),
    ),
    (Existing("rim"), Existing("hole"), Existing("front"), Existing("back")),
)
TRUE = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0j)), Square("wheel.front", Lean(0j)))
AT_THE_FRONT = PointStop("wheel.front")
NOT_TURNED = NoClock(0.0)


def setup(
    hold: CentredAndSquared | TwoPlanes = TRUE,
    *,
    cuts: tuple[Turn | CutTeeth | Drill, ...],
    way: int = 1,
    insertion: float = 0.0,
    stop: PointStop | RingStop | NoStop = AT_THE_FRONT,
    clock: Clock | NoClock = NOT_TURNED,
    op: int = 10,
) -> Setup:
    return Setup(op, "wheel", way, insertion, hold, stop, clock, cuts)


def machined(*steps: Setup | Join, parts: tuple[Part, ...] = (WHEEL,)) -> World:
    return run(Route(parts, steps))


def with_existing(*given: Existing, part: Part = WHEEL) -> Part:
    replaced = {g.surface: g for g in given}
    rest = tuple(e for e in part.existing if e.surface not in replaced)
    return dataclasses.replace(part, existing=rest + given)


# ---------------------------------------------------------------- tools


def test_a_small_turn_moves_a_point_as_the_torsor_says() -> None:
    # 10 - 50 urad * 80 mm = 6 um and -4 - 100 urad * 80 mm = -12 um
    moved = turn(100e-6, -50e-6, 0.0) @ np.array([0.0, 0.0, 80.0, 1.0])
    assert (moved[0] + 10 * UM, moved[1] - 4 * UM) == pytest.approx((6 * UM, -12 * UM), abs=NANO)


@pytest.mark.parametrize(("inside", "high"), [(False, 0.7), (True, 0.7 - math.pi)])
def test_a_dial_reads_twice_the_eccentricity(inside: bool, high: float) -> None:
    off_centre = line_through(cmath.rect(25 * UM, 0.7), 0.0, 0j)
    got = sweep(radial(off_centre, 40.0, inside=inside, z=12.0))
    assert got.fim == pytest.approx(50 * UM, abs=1e-9)
    assert cmath.phase(cmath.exp(1j * (got.high_at - high))) == pytest.approx(0.0, abs=1e-6)


def test_a_leaned_shaft_is_an_ellipse_to_the_dial() -> None:
    # no eccentricity at z = 0; the section of a cylinder leaned by t has axes R and R/cos t: FIM = R t^2/2
    got = sweep(radial(line_through(0j, 0.0, 0.01 + 0j), 50.0, inside=False, z=0.0))
    assert got.fim == pytest.approx(50.0 * (1.0 / math.cos(math.atan(0.01)) - 1.0), abs=1e-9)


# ---------------------------------------------------------------- holding on a centre and a face


@BOTH_WAYS
def test_a_bore_of_a_second_chucking_runs_out_by_the_dial_reading_of_the_datum(way: int) -> None:
    hold = CentredAndSquared(Centre("wheel.rim", 20.0, RadialDial(0.05, 1.1)), Square("wheel.front", Lean(0j)))
    world = machined(setup(hold, cuts=(Turn("wheel.hole"),), way=way, insertion=0.4))
    assert measure.run_out(world, "wheel.hole", "wheel.rim") == pytest.approx(0.05, abs=NANO)


def test_surfaces_of_one_holding_owe_nothing_to_it() -> None:
    hold = CentredAndSquared(
        Centre("wheel.rim", 20.0, RadialDial(0.05, 1.1)), Square("wheel.front", FaceDial(0.02, 80.0, 2.0))
    )
    world = machined(setup(hold, cuts=(Turn("wheel.hole"), Turn("wheel.pocket"), Turn("wheel.shelf"))))
    assert measure.run_out(world, "wheel.pocket", "wheel.hole") == pytest.approx(0.0, abs=1e-9)
    assert measure.face_run_out(world, "wheel.shelf", "wheel.hole") == pytest.approx(0.0, abs=1e-9)


@BOTH_WAYS
@pytest.mark.parametrize(("datum", "sign"), [("wheel.rim", 1.0), ("wheel.hole", -1.0)])
def test_the_new_axis_lies_on_the_far_side_of_a_high_shaft_and_the_near_side_of_a_high_bore(
    datum: str, sign: float, way: int
) -> None:
    # datum minus machine axis: + (FIM/2) e^{i phi} outside, - in a bore, and the part's own direction either way round
    hold = CentredAndSquared(Centre(datum, 20.0, RadialDial(0.04, 0.5)), Square("wheel.front", Lean(0j)))
    world = machined(setup(hold, cuts=(Turn("wheel.pocket"),), way=way, insertion=2.2))
    assert -sign * cmath.rect(0.02, 0.5) == pytest.approx(
        measure.offset(world, "wheel.pocket", datum, at=20.0), abs=NANO
    )


@BOTH_WAYS
@pytest.mark.parametrize(("datum", "sign"), [("wheel.front", -1.0), ("wheel.back", 1.0)])
def test_a_face_leans_away_from_its_high_spot_when_it_looks_to_plus_z_and_towards_it_when_to_minus_z(
    datum: str, sign: float, way: int
) -> None:
    # 0.020 at diameter 80 is 0.250 mrad
    hold = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0j)), Square(datum, FaceDial(0.020, 80.0, 0.9)))
    world = machined(setup(hold, cuts=(Turn("wheel.pocket"),), way=way, insertion=-1.3))
    # datum minus machine axis, seen the other way about: the datum's lean against the axis just cut
    assert measure.lean(world, datum, "wheel.pocket") == pytest.approx(sign * cmath.rect(0.25e-3, 0.9), abs=1e-9)
    assert measure.face_run_out(world, datum, "wheel.pocket") == pytest.approx(0.020, abs=NANO)


def test_a_leaned_hold_costs_offset_with_the_distance_from_the_centring_plane() -> None:
    # 0.250 mrad, 30 mm from the centring plane: 7.5 um
    hold = CentredAndSquared(Centre("wheel.rim", 10.0, Offset(0j)), Square("wheel.front", FaceDial(0.020, 80.0, 0.0)))
    world = machined(setup(hold, cuts=(Turn("wheel.hole"),)))
    assert abs(measure.offset(world, "wheel.hole", "wheel.rim", at=40.0)) == pytest.approx(7.5 * UM, abs=NANO)
    assert abs(measure.offset(world, "wheel.hole", "wheel.rim", at=10.0)) == pytest.approx(0.0, abs=NANO)


@pytest.mark.parametrize(("phase", "total"), [(0.0, 19.5), (90.0, 14.15), (180.0, 4.5)])
def test_centre_offset_and_lean_add_as_vectors(phase: float, total: float) -> None:
    # 12 um at the centring plane and 0.250 mrad * 30 mm = 7.5 um; sqrt(12^2 + 7.5^2) = 14.15
    # made axis = datum - eps - eta (z - z_D)
    hold = CentredAndSquared(
        Centre("wheel.rim", 10.0, Offset(12 * UM + 0j)),
        Square("wheel.front", Lean(cmath.rect(0.25e-3, math.radians(phase)))),
    )
    world = machined(setup(hold, cuts=(Turn("wheel.hole"),)))
    assert abs(measure.offset(world, "wheel.hole", "wheel.rim", at=40.0)) == pytest.approx(total * UM, abs=0.005 * UM)


def test_a_machine_vector_is_mirrored_in_a_part_turned_end_for_end() -> None:
    # +1: e^{-i psi} eps; -1: e^{i psi} conj(eps); made axis = datum - eps
    hold = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(10 * UM * 1j)), Square("wheel.front", Lean(0j)))
    for way, expected in ((1, -10j * UM * cmath.exp(-0.3j)), (-1, 10j * UM * cmath.exp(0.3j))):
        world = machined(setup(hold, cuts=(Turn("wheel.hole"),), way=way, insertion=0.3))
        assert measure.offset(world, "wheel.hole", "wheel.rim") == pytest.approx(expected, abs=NANO)


def test_a_machine_lean_changes_its_sign_as_well_in_a_part_turned_end_for_end() -> None:
    hold = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0j)), Square("wheel.front", Lean(1e-4j)))
    for way, expected in ((1, -1e-4j * cmath.exp(-0.3j)), (-1, -1e-4j * cmath.exp(0.3j))):
        world = machined(setup(hold, cuts=(Turn("wheel.hole"),), way=way, insertion=0.3))
        # made lean = face - eta; reversed eta = -e^{i psi} conj(eta_m) = + e^{i psi} 1e-4 i
        assert measure.lean(world, "wheel.hole", "wheel.rim") == pytest.approx(expected, abs=1e-9)


@BOTH_WAYS
def test_a_part_pushed_home_in_a_register_stands_off_by_half_the_diametral_clearance(way: int) -> None:
    hold = CentredAndSquared(Centre("wheel.hole", 20.0, Pushed(0.014, 0.0)), Square("wheel.front", Lean(0j)))
    world = machined(setup(hold, cuts=(Turn("wheel.pocket"),), way=way))
    assert measure.offset(world, "wheel.pocket", "wheel.hole") == pytest.approx(-0.007 + 0j, abs=NANO)


# ---------------------------------------------------------------- two planes


@BOTH_WAYS
def test_two_planes_carry_their_errors_to_a_third_by_the_lever(way: int) -> None:
    # +10 um at z = 5, -20 um at z = 35: the made axis is at -10, +20 there, +35 at z = 50, leaned by 1 mrad
    hold = TwoPlanes(
        Centre("wheel.rim", 5.0, RadialDial(0.020, 0.0)), Centre("wheel.rim", 35.0, RadialDial(0.040, math.pi))
    )
    world = machined(setup(hold, cuts=(Turn("wheel.hole"),), way=way, insertion=1.0))
    for z, place in ((5.0, -10.0), (35.0, 20.0), (50.0, 35.0)):
        assert measure.offset(world, "wheel.hole", "wheel.rim", at=z) == pytest.approx(place * UM, abs=0.02 * UM)
    assert measure.lean(world, "wheel.hole", "wheel.rim") == pytest.approx(1e-3, abs=1e-6)


def test_two_planes_on_two_surfaces_take_half_of_each_in_the_middle() -> None:
    part = with_existing(Existing("hole", offset=0.030 + 0j))
    hold = TwoPlanes(Centre("wheel.rim", 0.0, Offset(0j)), Centre("wheel.hole", 40.0, Offset(0j)))
    world = machined(setup(hold, cuts=(Turn("wheel.pocket"),)), parts=(part,))
    assert measure.offset(world, "wheel.pocket", "wheel.rim", at=20.0) == pytest.approx(0.015, abs=0.01 * UM)


# ---------------------------------------------------------------- length and angle


@BOTH_WAYS
def test_a_stop_that_stands_off_shifts_every_cut_the_same_way(way: int) -> None:
    stop = PointStop("wheel.back", 0.0, 0.0, 0.012)
    world = machined(setup(cuts=(Turn("wheel.shelf"), Turn("wheel.front", dial=0.003)), way=way, stop=stop))
    # the part lies 12 um further along the machine axis, the cuts stay: 12 um nearer to the stop, on the part's scale
    assert measure.length(world, "wheel.shelf", "wheel.back", "wheel.hole") == pytest.approx(
        25.0 - way * 0.012, abs=NANO
    )
    assert measure.length(world, "wheel.front", "wheel.shelf", "wheel.hole") == pytest.approx(
        15.0 + way * 0.003, abs=NANO
    )


@BOTH_WAYS
@pytest.mark.parametrize(
    ("stopped", "squares", "distance"),
    [("wheel.back", "wheel.front", 25.0 - 0.008), ("wheel.front", "wheel.back", -15.0 + 0.008)],
)
def test_a_leaned_face_meets_a_ring_with_its_highest_spot(
    stopped: str, squares: str, distance: float, way: int
) -> None:
    # leaned 0.2 mrad against the holding: on a ring of 40 mm its high spot stands 8 um proud of its middle, so the
    # middle stays 8 um clear of the ring and the shelf is cut 8 um nearer to it
    part = with_existing(Existing(stopped.partition(".")[2], lean=0.2e-3 + 0j))
    hold = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0j)), Square(squares, Lean(0j)))
    stop = RingStop(stopped, 40.0)
    world = machined(setup(hold, cuts=(Turn("wheel.shelf"),), way=way, stop=stop), parts=(part,))
    assert measure.length(world, "wheel.shelf", stopped, "wheel.hole") == pytest.approx(distance, abs=NANO)


@BOTH_WAYS
def test_a_leaned_face_meets_a_point_where_the_point_is(way: int) -> None:
    # z = -Re(conj(0.2 mrad) p): at machine angle psi the part's mark, so p = +40 and the face is 8 um low there
    part = with_existing(Existing("back", lean=0.2e-3 + 0j))
    stop = PointStop("wheel.back", 40.0, 0.8)
    world = machined(setup(cuts=(Turn("wheel.shelf"),), way=way, insertion=0.8, stop=stop), parts=(part,))
    assert measure.length(world, "wheel.shelf", "wheel.back", "wheel.hole") == pytest.approx(25.0 - 0.008, abs=NANO)


def test_without_a_stop_cuts_of_one_holding_keep_their_distance_and_the_others_do_not() -> None:
    world = machined(setup(cuts=(Turn("wheel.shelf"), Turn("wheel.front")), stop=NoStop(0.2)))
    assert measure.length(world, "wheel.front", "wheel.shelf", "wheel.hole") == pytest.approx(15.0, abs=1e-9)
    assert measure.length(world, "wheel.shelf", "wheel.back", "wheel.hole") == pytest.approx(24.8, abs=1e-9)


@BOTH_WAYS
def test_holes_clocked_to_a_gap_follow_it_and_its_error(way: int) -> None:
    first = setup(cuts=(CutTeeth("wheel.teeth"),), clock=NoClock(0.004))
    second = setup(cuts=(Drill("wheel.ring"),), way=way, insertion=0.9, clock=Clock("wheel.teeth", 7, 3e-4), op=20)
    world = machined(first, second)
    # the teeth stood 4 mrad on, so they lie 4 mrad back on the part; the gap stood 0.3 mrad on, so the holes lie back
    turned = -0.004 - way * 3e-4
    assert 45.0 * turned == pytest.approx(
        float(np.mean(measure.holes(world, "wheel.ring", "wheel.rim").sideways)), abs=NANO
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


# ---------------------------------------------------------------- joining

SPINDLE = Part(
    "spindle",
    (
        cylinder("journal", 30.0, 0.0, 40.0),
        face("shoulder", 0.0, +1, 60.0),
        cylinder("bearings", 40.0, -80.0, -10.0),
        face("end", 60.0, +1, 30.0),
    ),
    (Existing("journal"), Existing("shoulder"), Existing("bearings")),
)


BY_THE_BORE = BoreSquares()


def joined(
    *,
    wheel: Part = WHEEL,
    spindle: Part = SPINDLE,
    way: int = 1,
    insertion: float = 0.0,
    square: BoreSquares | FaceSquares = BY_THE_BORE,
    offset: complex = 0j,
    seat: Seat | None = None,
    after: tuple[Setup, ...] = (),
) -> World:
    on = "wheel.back" if way > 0 else "wheel.front"
    seat = seat or Seat(on, "spindle.shoulder", 1.5)
    join = Join(50, "wheel.hole", "spindle.journal", way, insertion, square, seat, offset)
    return machined(join, *after, parts=(wheel, spindle))


@BOTH_WAYS
def test_a_wheel_without_play_takes_the_error_of_its_journal(way: int) -> None:
    spindle = with_existing(Existing("journal", offset=0.003j), part=SPINDLE)
    world = joined(way=way, insertion=0.7, spindle=spindle)
    # seen from the spindle; seen from the wheel the direction is turned back, and mirrored when reversed
    rim = measure.offset(world, "wheel.rim", "spindle.bearings", seen_from="spindle")
    assert rim == pytest.approx(0.003j, abs=NANO)
    expected = cmath.exp(-0.7j) * 0.003j if way > 0 else cmath.exp(0.7j) * -0.003j
    assert measure.offset(world, "wheel.rim", "spindle.bearings") == pytest.approx(expected, abs=NANO)


@BOTH_WAYS
def test_spacers_carry_the_wheel_off_the_shoulder(way: int) -> None:
    on, far = ("wheel.back", "wheel.front") if way > 0 else ("wheel.front", "wheel.back")
    world = joined(way=way, seat=Seat(on, "spindle.shoulder", 1.5, 0.004))
    got = measure.length(world, far, "spindle.shoulder", "spindle.bearings", seen_from="spindle")
    assert got == pytest.approx(41.504, abs=1e-9)
    assert measure.drawn_length(world, far, "spindle.shoulder", seen_from="spindle") == pytest.approx(41.5, abs=1e-12)


def test_squared_by_the_bore_or_by_the_shoulder_differ_by_what_they_disagree() -> None:
    spindle = with_existing(Existing("shoulder", lean=0.1e-3 + 0j), part=SPINDLE)
    by_bore = joined(spindle=spindle)
    by_face = joined(spindle=spindle, square=FaceSquares("wheel.back", "spindle.shoulder"))
    assert measure.lean(by_bore, "wheel.rim", "spindle.bearings") == pytest.approx(0.0, abs=1e-12)
    assert measure.lean(by_face, "wheel.rim", "spindle.bearings") == pytest.approx(0.1e-3, abs=1e-9)
    # the bore still fits in its middle (z = 20 of the wheel); 20 mm on it is 2 um off
    assert measure.offset(by_face, "wheel.rim", "spindle.bearings", at=40.0) == pytest.approx(0.002, abs=NANO)


@pytest.mark.parametrize(("touch", "proud"), [("ring", 0.0025), ("point", 0.0025 * math.cos(0.5 - math.pi))])
def test_a_leaned_shoulder_carries_a_wheel_squared_by_its_bore_at_one_spot(touch: str, proud: float) -> None:
    # shoulder leaned 0.1 mrad: on a radius of 25 mm it stands 2.5 um proud opposite to its lean.  The wedge between
    # face and shoulder counts, not the face's lean alone: that is nil here.
    spindle = with_existing(Existing("shoulder", lean=0.1e-3 + 0j), part=SPINDLE)
    seat = Seat("wheel.back", "spindle.shoulder", touch=touch, radius=25.0, angle=0.5)  # type: ignore[arg-type]
    world = joined(spindle=spindle, seat=seat)
    got = measure.length(world, "wheel.back", "spindle.shoulder", "spindle.bearings", seen_from="spindle")
    assert got == pytest.approx(proud, abs=NANO)


def test_teeth_cut_on_the_fitted_spindle_are_true_to_the_held_bearings_whatever_the_fit_did() -> None:
    spindle = with_existing(Existing("journal", offset=0.02j, lean=1e-4 + 0j), part=SPINDLE)
    hold = TwoPlanes(Centre("spindle.bearings", -75.0, Offset(0j)), Centre("spindle.bearings", -15.0, Offset(0j)))
    after = Setup(60, "spindle", -1, 0.3, hold, PointStop("spindle.shoulder"), NoClock(0.0), (CutTeeth("wheel.teeth"),))
    world = joined(way=-1, insertion=0.7, offset=0.007 + 0j, spindle=spindle, after=(after,))
    assert measure.offset(world, "wheel.teeth", "spindle.bearings") == pytest.approx(0.0, abs=1e-9)
    figures = measure.teeth(world, "wheel.teeth", "spindle.bearings")
    assert measure.cumulative(figures.gap_centre) == pytest.approx(0.0, abs=1e-9)
    # the fit shows on the wheel's own rim instead: journal 20 um off, 7 um of play across, and the wheel's middle sits a
    # spacer (1.5 mm) past the journal's middle, 0.15 um along its lean
    rim = measure.offset(world, "wheel.rim", "spindle.bearings", seen_from="spindle")
    assert rim == pytest.approx(0.02j + 0.00715, abs=NANO)


# ---------------------------------------------------------------- history, refusals


def test_a_datum_is_the_state_of_its_time_and_earlier_states_stay() -> None:
    off = CentredAndSquared(Centre("wheel.rim", 20.0, Offset(0.01 + 0j)), Square("wheel.front", Lean(0j)))
    on_hole = CentredAndSquared(Centre("wheel.hole", 20.0, Offset(0j)), Square("wheel.front", Lean(0j)))
    world = machined(
        setup(off, cuts=(Turn("wheel.hole"),)),
        setup(on_hole, cuts=(Turn("wheel.pocket"), Turn("wheel.rim")), op=20),
    )
    assert measure.offset(world, "wheel.pocket", "wheel.rim@0") == pytest.approx(-0.01, abs=NANO)
    assert measure.offset(world, "wheel.pocket", "wheel.rim") == pytest.approx(0.0, abs=NANO)


def test_a_datum_that_is_not_made_yet_is_refused() -> None:
    hold = CentredAndSquared(Centre("wheel.pocket", 30.0, Offset(0j)), Square("wheel.front", Lean(0j)))
    with pytest.raises(LookupError, match=r"wheel\.pocket is not made yet"):
        machined(setup(hold, cuts=(Turn("wheel.hole"),)))


def test_a_seat_that_does_not_face_the_shoulder_is_refused() -> None:
    with pytest.raises(ValueError, match="do not look at each other"):
        joined(way=1, seat=Seat("wheel.front", "spindle.shoulder"))


def test_a_face_is_not_a_reference_axis() -> None:
    with pytest.raises(TypeError, match="is a face and has no axis"):
        measure.offset(machined(), "wheel.rim", "wheel.front")


# ---------------------------------------------------------------- random routes


def test_random_routes_repeat_and_vary() -> None:
    same = [any_route(np.random.default_rng(7)) for _ in range(2)]
    assert same[0] == same[1]
    seen: set[str] = set()
    rng = np.random.default_rng(11)
    for _ in range(60):
        route = any_route(rng)
        made = {f"{p.name}.{e.surface}" for p in route.parts for e in p.existing}
        assert 2 <= len([s for s in route.steps if isinstance(s, Setup)]) <= 6
        for step in route.steps:
            seen.add(step.kind)
            if isinstance(step, Join):
                assert {step.outer, step.inner, step.seat.on, step.seat.against} <= made
                seen |= {step.square.kind, f"seat {step.seat.touch}", f"way {step.way}"}
                continue
            hold = step.hold
            squares = {hold.square.on} if isinstance(hold, CentredAndSquared) else set()
            centres = [hold.centre] if isinstance(hold, CentredAndSquared) else [hold.first, hold.second]
            held = squares | {c.on for c in centres}
            held |= {place.on for place in (step.stop, step.clock) if hasattr(place, "on")}
            cut = {c.surface for c in step.cuts}
            assert held <= made
            assert not held & cut
            made |= cut
            seen |= {hold.kind, step.stop.kind, step.clock.kind, f"looks {step.looks_at_tool}"}
            seen |= {c.by.kind for c in centres} | {c.kind for c in step.cuts}
            seen |= {hold.square.by.kind} if isinstance(hold, CentredAndSquared) else set()
    assert seen == {
        "setup", "join", "bore squares", "face squares", "seat ring", "seat point", "way 1", "way -1",
        "centred and squared", "two planes", "point stop", "ring stop", "no stop", "clock", "no clock",
        "looks 1", "looks -1", "offset", "radial dial", "pushed", "lean", "face dial", "turn", "cut teeth", "drill",
    }  # fmt: skip


def test_scaling_a_route_multiplies_its_errors_and_nothing_else() -> None:
    route = any_route(np.random.default_rng(3))
    nothing = run(route.scaled(0.0))
    for question, answer in measure.answers(nothing, route.scaled(0.0)).items():
        assert answer == pytest.approx(np.zeros_like(answer), abs=1e-9), question


def test_the_written_first_order_equations_agree_with_the_simulation() -> None:
    rng = np.random.default_rng(2024)
    for number in range(25):
        route = random_route(rng)
        allowed = 1.2 * second_order(route) + 1e-8  # mm
        account = Account(route)
        for question, exact in measure.answers(run(route), route).items():
            lever = LEVER.get(question.kind, 1.0)
            wrong = float(np.max(np.abs(account.answer(question) - exact))) * lever
            assert wrong <= allowed, f"route {number}, {question}: {wrong / UM:.4f} um, allowed {allowed / UM:.4f} um"


def test_nothing_here_knows_the_package_under_test() -> None:
    forbidden = "setup" + "check"
    for source in Path(__file__).parent.glob("*.py"):
        assert forbidden not in source.read_text(encoding="utf-8"), source.name
