"""Which way the head leans, checked by turning vectors; budgets, shifts and sine bars by their laws."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.worm import tilt

WAYS = {
    "right": (1, 0, 0),
    "left": (-1, 0, 0),
    "back": (0, 1, 0),
    "front": (0, -1, 0),
    "up": (0, 0, 1),
    "above": (0, 0, 1),
    "nose-up": (0, 0, 1),
    "nose-down": (0, 0, -1),
}
PLACES = [
    (nose, cutter)
    for nose in ("left", "right", "up", "front", "back")
    for cutter in ("front", "back", "above", "left", "right")
    if np.cross(WAYS[nose], WAYS[cutter]).any()
]


def gap_after_leaning(hand: str, nose: str, cutter: str, lean: str, angle: float) -> float:
    """Angle [rad] between the leaned wheel's gap at the cutter and the plane square to the cutter's spindle.

    The gap is the tangent of the worm's thread at its far side: a helix written out point by point, no rule of hands.
    """
    n, c = np.array(WAYS[nose], float), np.array(WAYS[cutter], float)
    spindle = np.cross(n, c)  # the worm's axis, square to wheel axis and line of centres
    side = np.cross(spindle, c)  # c, side, spindle are right-handed
    turn = 1.0 if hand == "right" else -1.0

    def thread(t: float) -> np.ndarray:
        # right-hand screw: advances along its axis as it turns from c to side; the wheel lies at t = pi, against c
        return np.cos(t) * c + np.sin(t) * side + turn * math.tan(angle) * t * spindle

    along = thread(math.pi + 1e-6) - thread(math.pi - 1e-6)
    along /= np.linalg.norm(along)
    # leaning: rotation about c that carries the nose towards `lean`
    k = np.cross(n, np.array(WAYS[lean], float))
    turned = (
        along * math.cos(angle) + np.cross(k, along) * math.sin(angle) + k * np.dot(k, along) * (1 - math.cos(angle))
    )
    return math.asin(float(np.dot(turned, spindle)))


@pytest.mark.parametrize("hand", ["right", "left"])
@pytest.mark.parametrize(("nose", "cutter"), PLACES)
def test_the_needed_lean_lays_the_gap_square_to_the_spindle(hand: str, nose: str, cutter: str) -> None:
    angle = math.radians(4.0)
    lean = tilt.needed_lean(hand=hand, nose_points=nose, cutter_stands=cutter)
    assert 0.0 == pytest.approx(gap_after_leaning(hand, nose, cutter, lean, angle), abs=1e-9)
    other = tilt.needed_lean(hand="left" if hand == "right" else "right", nose_points=nose, cutter_stands=cutter)
    wrong = abs(gap_after_leaning(hand, nose, cutter, other, angle))
    assert 2.0 * angle == pytest.approx(wrong, abs=1e-9)


@pytest.mark.parametrize(
    ("hand", "nose", "cutter", "lean"),
    [
        # right-hand wheel, spindle vertical: raise the end of the axis on the right of whoever stands on the cutter's side
        ("right", "left", "front", "nose-down"),
        ("right", "right", "front", "nose-up"),
        ("right", "left", "back", "nose-up"),
        ("right", "right", "back", "nose-down"),
        ("left", "left", "front", "nose-up"),
        ("right", "left", "above", "front"),
    ],
)
def test_the_lean_at_the_machine(hand: str, nose: str, cutter: str, lean: str) -> None:
    assert lean == tilt.needed_lean(hand=hand, nose_points=nose, cutter_stands=cutter)
    assert tilt.lean_is_right(lean, hand=hand, nose_points=nose, cutter_stands=cutter)


@pytest.mark.parametrize("said", ["nose-up", "left", "right", "front", "back"])
def test_the_opposite_lean_and_a_lean_that_turns_no_gap_are_wrong(said: str) -> None:
    assert not tilt.lean_is_right(said, hand="right", nose_points="left", cutter_stands="front")


def test_the_words_name_the_side_the_fall_and_the_end_to_raise() -> None:
    assert (
        "Cutter spindle vertical, stand on the cutter's side (back): the gaps of a left-hand wheel fall to the left. "
        "Raise the left-hand end of the wheel's axis: the nose points left, so lean it nose-down."
    ) == tilt.lean_in_words(hand="left", nose_points="left", cutter_stands="back")
    assert (
        "Look at the wheel from the cutter's side (above), the cutter spindle upright in your view: the gaps of a "
        "right-hand wheel fall to the right. Raise the right-hand end of the wheel's axis: the nose points left, so swing "
        "it to the front."
    ) == tilt.lean_in_words(hand="right", nose_points="left", cutter_stands="above")


def test_places_and_words_that_do_not_go_are_refused() -> None:
    with pytest.raises(ValueError, match="nose pointing left the cutter cannot stand right"):
        tilt.needed_lean(hand="right", nose_points="left", cutter_stands="right")
    with pytest.raises(ValueError, match="hand is right or left, not RH"):
        tilt.needed_lean(hand="RH", nose_points="left", cutter_stands="front")
    with pytest.raises(ValueError, match="sideways is no direction"):
        tilt.needed_lean(hand="right", nose_points="sideways", cutter_stands="front")
    with pytest.raises(ValueError, match="up is no lean"):
        tilt.lean_is_right("up", hand="right", nose_points="left", cutter_stands="front")


def test_a_known_offset_of_the_tilt_is_not_spread() -> None:
    out = tilt.tilt_error(set_angle=0.070, needed_angle=0.0713, head=3e-4, shaft_angle=4e-4, wobble=0.0)
    assert (-0.0013, 0.0020, 0.0018) == pytest.approx((out.offset, out.worst, out.rss))


@pytest.mark.parametrize("angle", [-0.2, 0.0, 0.0713, 0.5])
def test_the_shift_is_a_rotation_about_the_pivot(angle: float) -> None:
    place = complex(100.0, 35.0)
    moved = place * complex(math.cos(angle), math.sin(angle)) - place
    shift = tilt.shift_after_tilt(angle, pivot_distance=100.0, axis_above_pivot=35.0)
    assert (moved.imag, -moved.real) == pytest.approx((shift.height, shift.length), abs=1e-12)


@pytest.mark.parametrize("angle", [0.0, 0.0713, 0.5, math.pi / 4.0])
def test_a_sine_bar_gives_back_the_angle_of_its_stack(angle: float) -> None:
    assert angle == pytest.approx(tilt.sine_bar_angle(tilt.sine_bar_stack(angle, bar=127.0), bar=127.0), abs=1e-9)


@pytest.mark.parametrize("bad", [-0.01, 0.8, math.nan])
def test_angles_off_a_sine_bar_are_refused(bad: float) -> None:
    with pytest.raises(ValueError, match="0 to 45 deg"):
        tilt.sine_bar_stack(bad, bar=100.0)


def test_sizes_outside_their_range_are_refused_in_words() -> None:
    with pytest.raises(ValueError, match="beyond 45 deg"):
        tilt.sine_bar_angle(90.0, bar=100.0)
    with pytest.raises(ValueError, match="pivot distance must not be below zero"):
        tilt.shift_after_tilt(0.1, pivot_distance=-5.0)
    with pytest.raises(ValueError, match="within 45 deg"):
        tilt.shift_after_tilt(math.nan, pivot_distance=5.0)
    with pytest.raises(ValueError, match="check hand and direction"):
        tilt.twist_over_face(0.3, face_width=20.0)
    with pytest.raises(ValueError, match="wobble must not be below zero"):
        tilt.tilt_error(set_angle=0.07, needed_angle=0.07, head=0.0, shaft_angle=0.0, wobble=math.nan)
