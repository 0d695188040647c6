"""Errors planted in the exact model, cut or mounted, and read back from where both flanks are marked.

The chart is made from flank +1 alone by the half-turn; here flank -1 is cut and run by itself, on a finer grid.
"""

from __future__ import annotations

import math
from functools import cache

import pytest

from setupcheck.worm import marks
from setupcheck.worm.conjugate import Pair
from setupcheck.worm.ease_off import ease_off
from setupcheck.worm.gap_insert import envelope_insert, sections
from setupcheck.worm.helicoid import Thread
from setupcheck.worm.meshing import AS_CUT, Mounting, contact
from setupcheck.worm.plunge_gap import Cut, Insert
from setupcheck.worm.wheel_flank import Blank, Flank, wheel_flank

MINUTE = math.radians(1.0 / 60.0)
FILM = 0.006

WHEELS = {
    "right-hand, 72 teeth": (
        Pair(
            thread=Thread(
                profile="ZA",
                starts=1,
                axial_module=1.5,
                reference_diameter=24.0,
                tip_diameter=27.0,
                pressure_angle=math.radians(20.0),
                thickness=2.310,
            ),
            teeth=72,
            centre_distance=66.0,
        ),
        Blank(face_width=15.0, throat_diameter=111.0, throat_radius=10.5, outside_diameter=114.0),
        20.0,
        0.3,
    ),
    "left-hand, 60 teeth": (
        Pair(
            thread=Thread(
                profile="ZA",
                starts=1,
                axial_module=2.0,
                reference_diameter=36.0,
                tip_diameter=40.0,
                pressure_angle=math.radians(20.0),
                thickness=3.080,
                hand="left",
            ),
            teeth=60,
            centre_distance=78.0,
        ),
        Blank(face_width=20.0, throat_diameter=124.0, throat_radius=16.0, outside_diameter=128.0),
        28.0,
        0.4,
    ),
}


@cache
def made(name: str) -> tuple[Flank, Flank, Insert, Cut, marks.Chart]:
    pair, blank, radius, clearance = WHEELS[name]
    tilt = math.atan(pair.thread.lead / (pair.centre_distance - pair.rolling))
    cut = Cut(radius=radius, tilt=tilt, clearance=clearance)
    insert = envelope_insert(sections(pair, blank), cut)
    coarse = wheel_flank(pair, blank, rows=32, columns=65)
    right, left = wheel_flank(pair, blank, side=1), wheel_flank(pair, blank, side=-1)
    return right, left, insert, cut, marks.chart(coarse, insert, cut, film=FILM)


def seen(name: str, cut: Cut, mounting: Mounting = AS_CUT) -> tuple[marks.Seen, marks.Seen]:
    """What blue shows on both flanks, as it would be written: to a tenth of a millimetre."""
    right, left, insert, _, chart = made(name)
    shown = []
    for flank in (right, left):
        found = contact(flank, ease_off(flank, insert, cut).angle, film=FILM, mounting=mounting)
        shown.append(marks.Seen(round(found.centre, 1), chart.word(found.height)))
    return shown[0], shown[1]


def read(name: str, cut: Cut, mounting: Mounting = AS_CUT) -> marks.Reading:
    return marks.read(*seen(name, cut, mounting), made(name)[-1])


@pytest.mark.parametrize("name", WHEELS)
@pytest.mark.parametrize("minutes", [-30, -20, -10, 20, 30])
def test_a_tilt_is_read_back_with_its_sign_within_a_factor_of_two(name: str, minutes: int) -> None:
    found = read(name, marks.with_error(made(name)[3], tilt=minutes * MINUTE))
    assert found.cause == "tilt"
    assert 0.5 < found.tilt / (minutes * MINUTE) < 2.0


@pytest.mark.parametrize("name", WHEELS)
@pytest.mark.parametrize("offset", [-0.3, -0.15, -0.1, 0.1, 0.15, 0.3])
def test_a_cutter_off_the_mid_plane_is_read_back_with_its_sign_within_a_factor_of_two(name: str, offset: float) -> None:
    found = read(name, marks.with_error(made(name)[3], offset=offset))
    assert found.cause == "offset"
    assert 0.5 < found.offset / offset < 2.0


@pytest.mark.parametrize("name", WHEELS)
@pytest.mark.parametrize("axial", [-0.15, -0.1, 0.1, 0.15])
def test_a_wheel_put_off_the_worm_s_middle_marks_like_one_cut_off_it(name: str, axial: float) -> None:
    found = read(name, made(name)[3], Mounting(axial=axial))
    assert found.cause == "offset"
    assert 0.5 < found.offset / axial < 2.0


@pytest.mark.parametrize("name", WHEELS)
@pytest.mark.parametrize("minutes", [-30, 30])
def test_shafts_out_of_square_look_like_a_tilt(name: str, minutes: int) -> None:
    hand = made(name)[0].pair.thread.sense
    found = read(name, made(name)[3], Mounting(crossing=minutes * MINUTE))
    assert found.cause == "tilt"
    assert 0.5 < found.tilt / (hand * minutes * MINUTE) < 2.0


@pytest.mark.parametrize("name", WHEELS)
def test_depth_is_of_the_class_of_tilt_and_a_turned_insert_of_that_of_the_mid_plane(name: str) -> None:
    cut, plain = made(name)[3], made(name)[-1].right.centre

    def parts(other: Cut) -> tuple[float, float]:
        """What both flanks moved the same after a half-turn, and what they moved the opposite way [mm]."""
        right, left = seen(name, other)
        return (right.centre - left.centre) / 2.0 - plain, (right.centre + left.centre) / 2.0

    deeper = parts(Cut(radius=cut.radius, tilt=cut.tilt, clearance=cut.clearance + 0.05))
    tilted = parts(marks.with_error(cut, tilt=10.0 * MINUTE))
    assert abs(deeper[1]) <= 0.05 < abs(deeper[0])
    assert deeper[0] * tilted[0] > 0.0  # too deep looks like too far leaned
    turned = parts(Cut(radius=cut.radius, tilt=cut.tilt, clearance=cut.clearance, turned=10.0 * MINUTE))
    assert abs(turned[1]) > 2.0 * abs(turned[0])


@pytest.mark.parametrize(("minutes", "offset"), [(25, 0.2), (25, -0.2), (10, 0.1)])
def test_tilt_and_mid_plane_together_are_taken_apart_where_neither_alone_will_do(minutes: int, offset: float) -> None:
    name = "right-hand, 72 teeth"
    found = read(name, marks.with_error(made(name)[3], tilt=minutes * MINUTE, offset=offset))
    assert found.cause == "tilt and offset"
    assert 0.5 < found.tilt / (minutes * MINUTE) < 2.0
    assert 0.5 < found.offset / offset < 2.0


@pytest.mark.parametrize("name", WHEELS)
def test_a_wheel_without_errors_or_with_little_ones_is_left_alone(name: str) -> None:
    cut = made(name)[3]
    assert read(name, cut).cause == "none"
    assert read(name, cut, Mounting(distance=0.05)).cause == "none"  # the centre distance is forgiving
    assert read(name, marks.with_error(cut, tilt=2.0 * MINUTE)).cause == "none"
    assert marks.read(marks.Seen(0.0), marks.Seen(0.0), made(name)[-1]).cause == "none"


@pytest.mark.parametrize("name", WHEELS)
def test_heights_that_do_not_belong_to_their_places_are_said_and_not_guessed_at(name: str) -> None:
    chart = made(name)[-1]
    right, left = seen(name, marks.with_error(made(name)[3], tilt=-20.0 * MINUTE))
    assert (right.height, left.height) == ("tip", "tip")
    found = marks.read(marks.Seen(right.centre, "root"), marks.Seen(left.centre, "root"), chart)
    assert found.cause == "unexplained"
    assert found.why == "the heights on both flanks are not those that belong to the places along the face"
    assert marks.read(right, marks.Seen(left.centre, "root"), chart).why.startswith("the heights on one flank")


def test_places_that_no_cause_gives_are_said_too() -> None:
    chart = made("right-hand, 72 teeth")[-1]
    found = marks.read(marks.Seen(6.0), marks.Seen(6.0), chart)
    assert (found.cause, found.why) == ("unexplained", "no error of tilt or mid-plane puts both marks there")
    with pytest.raises(ValueError, match="a mark 8 mm from the middle lies beyond a face of 15 mm"):
        marks.read(marks.Seen(8.0), marks.Seen(0.0), chart)


def test_so_near_the_ends_an_amount_is_told_as_the_least() -> None:
    name = "left-hand, 60 teeth"
    assert read(name, marks.with_error(made(name)[3], tilt=-20.0 * MINUTE)).least
    assert not read(name, marks.with_error(made(name)[3], tilt=20.0 * MINUTE)).least
