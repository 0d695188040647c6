"""Holding in the simulation: centres, faces, planes, stops, clocks. Values by pen and paper."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from . import measure
from .bench import BOTH_WAYS, NANO, UM, machined, setup, with_existing
from .dial import radial, sweep
from .frames import line_through, turn
from .route import (
    Centre,
    CentredAndSquared,
    Clock,
    CutTeeth,
    Drill,
    Existing,
    FaceDial,
    Lean,
    NoClock,
    NoStop,
    Offset,
    PointStop,
    Pushed,
    RadialDial,
    RingStop,
    Square,
    Turn,
    TwoPlanes,
)

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


def test_a_face_is_not_a_reference_axis() -> None:
    with pytest.raises(TypeError, match="is a face and has no axis"):
        measure.offset(machined(), "wheel.rim", "wheel.front")
