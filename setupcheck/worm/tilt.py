"""Tilt of the head for the teeth of a worm wheel: which way, how far, how well, what it shifts, how it is set. mm, rad.

Directions are the operator's: right, left, up, front (towards him), back, with the head standing on the machine's table.
"""

from __future__ import annotations

import math
from typing import Literal

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero, not_below_zero, steep_enough

Hand = Literal["right", "left"]
Lean = Literal["nose-up", "nose-down", "left", "right", "front", "back"]
"""Where the nose of the head goes when it is leaned: up, down, or swung aside."""

LARGEST_ERROR = math.radians(10.0)
"""Error of the tilt [rad] beyond which it is a wrong setting. Our screening choice; heads are set within minutes of arc."""

Vector = tuple[int, int, int]

VECTORS: dict[str, Vector] = {
    "right": (1, 0, 0),
    "left": (-1, 0, 0),
    "back": (0, 1, 0),
    "front": (0, -1, 0),
    "up": (0, 0, 1),
    "above": (0, 0, 1),
    "down": (0, 0, -1),
}
"""Right-handed frame: x to the operator's right, y away from him, z up."""

_LEANS: dict[Vector, Lean] = {
    (0, 0, 1): "nose-up",
    (0, 0, -1): "nose-down",
    (1, 0, 0): "right",
    (-1, 0, 0): "left",
    (0, 1, 0): "back",
    (0, -1, 0): "front",
}

SINE_BAR_LIMIT = math.pi / 4.0
"""Largest angle set on a sine bar [rad]: above it the angle grows too fast with the stack. Common practice."""


def _cross(a: Vector, b: Vector) -> Vector:
    return (a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0])


def _frame(hand: str, nose_points: str, cutter_stands: str) -> tuple[Vector, Vector]:
    """Unit vectors of the nose and from the wheel to the cutter. Raises: ValueError for words or places that do not go."""
    if hand not in ("right", "left"):
        raise ValueError(f"the hand is right or left, not {hand}")
    for word in (nose_points, cutter_stands):
        if word not in VECTORS:
            raise ValueError(f"{word} is no direction; write left, right, up, down, above, front or back")
    nose, cutter = VECTORS[nose_points], VECTORS[cutter_stands]
    if not any(_cross(nose, cutter)):
        raise ValueError(
            f"with the nose pointing {nose_points} the cutter cannot stand {cutter_stands}: beside the axis"
        )
    return nose, cutter


def needed_lean(*, hand: str, nose_points: str, cutter_stands: str) -> Lean:
    """Where the nose must go so that the gaps come to lie square to the cutter's spindle.

    A right-hand gap runs along  n cos g + (n x c) sin g,  n the nose, c from the wheel to the cutter, so the nose goes
    towards -(n x c); for a left-hand wheel towards +(n x c). The head is leaned, the cutter's spindle stays upright
    (square to n and c); leaning the spindle instead takes the same angle the other way.

    hand           of the wheel, which is the hand of the worm
    nose_points    left, right, up, down, front, back
    cutter_stands  on which side of the wheel: front, back, above, left, right, down (below)
    Raises: ValueError for an unknown word, or a cutter in line with the nose.
    Source: derived: a worm's far thread falls to the right where its near thread, a right-hand screw, rises to the right.

    >>> needed_lean(hand="right", nose_points="left", cutter_stands="front")
    'nose-down'
    """
    nose, cutter = _frame(hand, nose_points, cutter_stands)
    x, y, z = _cross(nose, cutter)
    sign = -1 if hand == "right" else 1
    return _LEANS[(sign * x, sign * y, sign * z)]


def lean_towards(cutter_stands: str, *, away: bool = False) -> Lean:
    """The word for a nose that goes towards where the cutter stands, or away from it. Raises: KeyError for another word.

    Source: the operator's directions, as above.

    >>> lean_towards("above"), lean_towards("front", away=True)
    ('nose-up', 'back')
    """
    x, y, z = VECTORS[cutter_stands]
    return _LEANS[(-x, -y, -z) if away else (x, y, z)]


def lean_is_right(said: str, *, hand: str, nose_points: str, cutter_stands: str) -> bool:
    """Whether the head leans the way the hand needs. False for the opposite way and for a lean that turns no gap.

    said  nose-up, nose-down, or where the nose is swung: left, right, front, back
    Raises: ValueError for an unknown word, or a cutter in line with the nose.  Source: `needed_lean`.

    >>> lean_is_right("nose-up", hand="right", nose_points="left", cutter_stands="front")
    False
    """
    if said not in _LEANS.values():
        raise ValueError(f"{said} is no lean; write nose-up, nose-down, left, right, front or back")
    return said == needed_lean(hand=hand, nose_points=nose_points, cutter_stands=cutter_stands)


def lean_in_words(*, hand: str, nose_points: str, cutter_stands: str) -> str:
    """The picture to check at the machine: which way the gaps fall and which end of the wheel's axis goes up.

    Raises: ValueError for an unknown word, or a cutter in line with the nose.  Source: `needed_lean`.

    >>> print(lean_in_words(hand="right", nose_points="left", cutter_stands="front"))
    Cutter spindle vertical, stand on the cutter's side (front): the gaps of a right-hand wheel fall to the right. \
Raise the right-hand end of the wheel's axis: the nose points left, so lean it nose-down.
    """
    lean = needed_lean(hand=hand, nose_points=nose_points, cutter_stands=cutter_stands)
    nose, cutter = _frame(hand, nose_points, cutter_stands)
    upright = _cross(nose, cutter)[2] != 0
    view = (
        f"Cutter spindle vertical, stand on the cutter's side ({cutter_stands})"
        if upright
        else f"Look at the wheel from the cutter's side ({cutter_stands}), the cutter spindle upright in your view"
    )
    do = f"lean it {lean}" if lean.startswith("nose") else f"swing it to the {lean}"
    return (
        f"{view}: the gaps of a {hand}-hand wheel fall to the {hand}. "
        f"Raise the {hand}-hand end of the wheel's axis: the nose points {nose_points}, so {do}."
    )


@record
class TiltError:
    """Error of the angle between the wheel's axis and the cutter's spindle, part by part [rad].

    offset  angle set less angle needed, signed: known, so it is not spread
    worst   |offset| + head + shaft angle + wobble
    rss     |offset| + root of the summed squares of the other three: shown, not judged
    """

    offset: float
    head: float
    shaft_angle: float
    wobble: float
    worst: float
    rss: float


def tilt_error(*, set_angle: float, needed_angle: float, head: float, shaft_angle: float, wobble: float) -> TiltError:
    """Error budget of the tilt: what was set wrong, and how far head, housing and wheel may be out.

    set_angle     angle the head is set to [rad], positive in the needed direction
    needed_angle  lead angle at the pitch point [rad]
    head          bound of the angle as set: scale, vernier or sine bar with its stack [rad]
    shaft_angle   bound of the error of the shafts' angle in the housing [rad]
    wobble        bound of the lean of the wheel's axis: run-out of the squared face over the circle it was read on [rad]
    Raises: ValueError for a bound below zero, or an angle beyond 45 deg.
    Source: derived: small angles in one plane add; wobble passes through that plane once a turn with its full size.

    >>> out = tilt_error(set_angle=0.0624, needed_angle=0.0624, head=6e-4, shaft_angle=3e-4, wobble=4e-5)
    >>> round(out.worst, 6), round(out.rss, 6)
    (0.00094, 0.000672)
    """
    not_below_zero(head=head, shaft_angle=shaft_angle, wobble=wobble)
    steep_enough(needed_angle=needed_angle)
    if not abs(set_angle) < math.pi / 4.0:
        raise ValueError(f"the angle set must lie within 45 deg either way, not {math.degrees(set_angle):g} deg")
    offset = set_angle - needed_angle
    return TiltError(
        offset=offset,
        head=head,
        shaft_angle=shaft_angle,
        wobble=wobble,
        worst=abs(offset) + head + shaft_angle + wobble,
        rss=abs(offset) + math.hypot(head, shaft_angle, wobble),
    )


def is_an_error(tilt: float) -> None:
    """Refuses an error of the tilt that is a wrong setting, beyond LARGEST_ERROR either way [rad]. Raises: ValueError."""
    if not abs(tilt) <= LARGEST_ERROR:
        raise ValueError(
            f"a tilt error of {math.degrees(tilt):g} deg is beyond {math.degrees(LARGEST_ERROR):g} deg: check hand and "
            f"direction first"
        )


def twist_over_face(error: float, *, face_width: float) -> float:
    """How far a flank runs off over the face for a tilt error [mm]: b tan(error), from one end to the other.

    error  of the tilt [rad], at most 10 deg either way (beyond that it is a wrong setting, not an error)
    Raises: ValueError for a face not above zero or a larger error.  Source: geometry.

    >>> round(1000.0 * twist_over_face(math.radians(5.0 / 60.0), face_width=20.0), 1)
    29.1
    """
    above_zero(face_width=face_width)
    is_an_error(error)
    return face_width * math.tan(abs(error))


@record
class Shift:
    """How far tilting carries the wheel's mid-plane [mm].

    height  in the direction the nose goes when the tilt is positive
    length  back along the untilted axis, towards the pivot
    """

    height: float
    length: float


def shift_after_tilt(tilt: float, *, pivot_distance: float, axis_above_pivot: float = 0.0) -> Shift:
    """Shift of the mid-plane when the head tilts about its pivot: L sin tau high, L (1 - cos tau) back.

    With the axis a height H above the pivot (a sine plate, a tilting table): L sin tau - H (1 - cos tau) and
    L (1 - cos tau) + H sin tau.

    tilt              [rad], positive nose-up; within 45 deg either way
    pivot_distance    L, along the axis from the pivot to the wheel's mid-plane [mm], >= 0
    axis_above_pivot  H, square to the axis [mm]; 0 where the axis runs through the pivot
    Raises: ValueError for a tilt beyond 45 deg or a distance below zero.  Source: rotation in a plane, derived here.

    >>> s = shift_after_tilt(math.atan(2.0 / 28.0), pivot_distance=100.0)
    >>> round(s.height, 2), round(s.length, 2)
    (7.12, 0.25)
    """
    not_below_zero(pivot_distance=pivot_distance)
    if not abs(tilt) < math.pi / 4.0 or not math.isfinite(axis_above_pivot):
        raise ValueError(f"the tilt must lie within 45 deg either way, not {math.degrees(tilt):g} deg")
    sine, drop = math.sin(tilt), 2.0 * math.sin(tilt / 2.0) ** 2
    return Shift(
        height=pivot_distance * sine - axis_above_pivot * drop,
        length=pivot_distance * drop + axis_above_pivot * sine,
    )


def sine_bar_stack(angle: float, *, bar: float) -> float:
    """Gauge-block stack that sets an angle on a sine bar [mm]: bar sin(angle).

    angle  [rad], 0 .. 45 deg;  bar  distance of the rollers [mm]
    Raises: ValueError outside.  Source: geometry.

    >>> round(sine_bar_stack(math.atan(2.0 / 28.0), bar=100.0), 4)
    7.1247
    """
    above_zero(bar=bar)
    if not 0.0 <= angle <= SINE_BAR_LIMIT:
        raise ValueError(f"a sine bar sets 0 to 45 deg, not {math.degrees(angle):g} deg")
    return bar * math.sin(angle)


def sine_bar_angle(stack: float, *, bar: float) -> float:
    """Angle that a gauge-block stack sets on a sine bar [rad]: arcsin(stack/bar).

    Raises: ValueError for a stack below zero or beyond 45 deg.  Source: geometry.

    >>> round(math.degrees(sine_bar_angle(7.125, bar=100.0)), 4)
    4.0858
    """
    above_zero(bar=bar)
    not_below_zero(stack=stack)
    if not stack <= bar * math.sin(SINE_BAR_LIMIT) * (1.0 + 1e-12):
        raise ValueError(f"a stack of {stack:g} mm leans a bar of {bar:g} mm beyond 45 deg")
    return math.asin(stack / bar)
