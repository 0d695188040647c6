"""Parts joined in the simulation. Values by pen and paper."""

from __future__ import annotations

import cmath
import math

import pytest

from . import measure
from .bench import BOTH_WAYS, NANO, WHEEL, machined, with_existing
from .made import World
from .route import (
    BoreSquares,
    Centre,
    CutTeeth,
    Existing,
    FaceSquares,
    Join,
    NoClock,
    Offset,
    Part,
    PointStop,
    Seat,
    Setup,
    TwoPlanes,
    cylinder,
    face,
)

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


def test_a_seat_that_does_not_face_the_shoulder_is_refused() -> None:
    with pytest.raises(ValueError, match="do not look at each other"):
        joined(way=1, seat=Seat("wheel.front", "spindle.shoulder"))
