"""Meshing: what must come out whatever the figures, grids halved, wheels that run out, and the recommended cutter."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.worm.best_cutter import best_cutter, candidate, tolerances, workbench
from setupcheck.worm.gap_insert import sections
from setupcheck.worm.helicoid import flank as worm_flank
from setupcheck.worm.meshing import Contact, Mounting, _gap, contact
from setupcheck.worm.wander import RingError, round_the_wheel
from setupcheck.worm.wheel_flank import wheel_flank

from .wheels import ARCMIN, FILM, MICRON, Wheel, blank_of, cut_of, pair_of


def nominal(wheel: Wheel, case: int = 1, radius: float = 29.75, **kwargs: float) -> Contact:
    cut = cut_of(case, radius)
    return wheel.run(cut, wheel.insert(cut), **kwargs)  # type: ignore[arg-type]


def test_an_exact_flank_is_marked_everywhere_and_runs_true_whatever_its_backlash() -> None:
    flank = Wheel(pair_of(), blank_of()).flank
    for backlash in (0.0, 1e-3):
        out = contact(flank, flank.angle + backlash, film=FILM)
        assert out.share == pytest.approx(1.0, abs=1e-3)
        assert out.along_face == pytest.approx(1.0, abs=1e-9)
        assert out.ends > 0.9  # all but what the thread's flank does not touch there
        assert out.transmission_error < 0.1 * MICRON
        assert out.lag.mean() == pytest.approx(50.0 * backlash, abs=0.1 * MICRON)


def test_a_worm_far_off_the_wheel_is_refused() -> None:
    flank = Wheel(pair_of(), blank_of()).flank
    with pytest.raises(ValueError, match="misses this flank"):
        contact(flank, flank.angle, film=FILM, mounting=Mounting(distance=8.0))


def test_a_wide_gap_runs_as_a_tight_one() -> None:
    flank = Wheel(pair_of(), blank_of()).flank
    k = 1e-3 * flank.roll / 50.0
    tight, wide = (contact(flank, flank.angle + k + play, film=FILM) for play in (0.0, 0.01))
    assert wide.share == pytest.approx(tight.share, rel=1e-6)
    assert wide.lag - tight.lag == pytest.approx(np.full(24, 0.5), abs=1e-6)


def test_a_straight_lean_of_the_profile_is_the_transmission_error_of_one_pitch() -> None:
    """A flank that stands off by k of its roll: a sawtooth k p high of which 24 phases see 23/24; edges round it off."""
    flank = Wheel(pair_of(), blank_of()).flank
    share = [
        contact(flank, flank.angle + k * flank.roll / 50.0, film=FILM).transmission_error
        / (k * flank.pair.thread.pitch)
        for k in (1e-4, 1e-3, 3e-3)
    ]
    assert share[0] == pytest.approx(23.0 / 24.0, abs=0.06)
    assert share[0] > share[1] > share[2] > 0.6


@pytest.mark.parametrize(("case", "alpha", "radius"), [(1, 20.0, 29.75), (3, 20.0, 17.5), (3, 15.0, 19.4)])
def test_half_the_grid_changes_the_share_by_less_than_one_per_cent(case: int, alpha: float, radius: float) -> None:
    fine, usual, coarse = (
        nominal(Wheel(pair_of(case, alpha=alpha), blank_of(case), rows=rows, columns=columns), case, radius)
        for rows, columns in ((96, 193), (48, 97), (32, 65))
    )
    assert usual.share == pytest.approx(fine.share, rel=0.01)
    assert coarse.share == pytest.approx(fine.share, rel=0.012)
    assert usual.centre == pytest.approx(fine.centre, abs=0.01)
    assert max(fine.transmission_error, usual.transmission_error) < 0.4 * MICRON


def test_twice_the_phases_change_the_share_by_less_than_one_per_cent() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of()
    angle = wheel.map(cut, wheel.insert(cut)).angle
    usual, fine = (contact(wheel.flank, angle, film=FILM, phases=n) for n in (24, 48))
    assert usual.share == pytest.approx(fine.share, rel=0.01)


def test_the_marking_grows_as_the_root_of_the_film() -> None:
    wheel = Wheel(pair_of(), blank_of())
    thin, thick = (nominal(wheel, radius=50.0, film=film).share for film in (0.004, 0.008))
    assert thick / thin == pytest.approx(math.sqrt(2.0), rel=0.03)


def test_both_flanks_are_marked_alike_towards_opposite_ends() -> None:
    right, left = (nominal(Wheel(pair_of(), blank_of(), side=side)) for side in (1, -1))
    other_hand = nominal(Wheel(pair_of(hand="left"), blank_of()))
    for out in (left, other_hand):
        assert (out.share, out.centre) == pytest.approx((right.share, -right.centre), rel=1e-6)
        assert out.transmission_error == pytest.approx(right.transmission_error, abs=1e-7)


@pytest.mark.parametrize(
    ("errors", "same_end"),
    [
        ({"tilt": 10 * ARCMIN}, False),
        ({"clearance": 0.02}, False),
        ({"offset": 0.05}, True),
        ({"turned": 15 * ARCMIN}, True),
    ],
)
def test_errors_tell_themselves_by_the_ends_they_drive_the_marking_to(errors: dict[str, float], same_end: bool) -> None:
    """Tilt and depth: opposite ends, same height. Mid-plane and a turned insert: same end, opposite heights."""
    right, left = Wheel(pair_of(), blank_of()), Wheel(pair_of(), blank_of(), side=-1)
    insert = right.insert(cut_of())
    moves = []
    for wheel in (right, left):
        before, after = (wheel.run(cut, insert) for cut in (cut_of(), cut_of(**errors)))
        moves.append((after.centre - before.centre, after.height - before.height))
    (z1, h1), (z2, h2) = moves
    assert (z1 * z2 > 0.0) == same_end
    assert (h1 * h2 > 0.0) != same_end


def test_axes_that_cross_wrong_act_as_a_tilt_the_other_way() -> None:
    wheel, insert = Wheel(pair_of(), blank_of()), Wheel(pair_of(), blank_of()).insert(cut_of(radius=50.0))
    turned = wheel.run(cut_of(radius=50.0), insert, mounting=Mounting(crossing=-5 * ARCMIN))
    tilted = wheel.run(cut_of(radius=50.0, tilt=5 * ARCMIN), insert)
    plain = wheel.run(cut_of(radius=50.0), insert)
    assert turned.centre - plain.centre == pytest.approx(tilted.centre - plain.centre, rel=0.15)


def test_a_wheel_that_leans_carries_the_marking_to_and_fro_once_a_turn() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of(radius=50.0)
    angle = wheel.map(cut, wheel.insert(cut)).angle

    def walk(size: float, eccentric: float = 0.0) -> np.ndarray:
        errors = RingError(run_out=size, eccentricity=eccentric, run_out_at=0.5 * math.pi)
        return np.array(
            [c.centre for c in round_the_wheel(wheel.flank, angle, film=FILM, errors=errors, angles=8).contacts]
        )

    still, leaning = walk(0.0), walk(0.04)
    assert np.ptp(still) == 0.0
    assert np.ptp(leaning) > 0.1
    middle = leaning - leaning.mean()
    once = np.abs(np.fft.rfft(middle))
    assert once[1] > 3.0 * once[2:].max()  # once a turn, and not twice
    assert np.ptp(walk(0.08)) == pytest.approx(2.0 * np.ptp(leaning), rel=0.25)


def test_a_small_eccentricity_moves_the_marking_hardly_at_all() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of(radius=50.0)
    angle = wheel.map(cut, wheel.insert(cut)).angle
    out = round_the_wheel(wheel.flank, angle, film=FILM, errors=RingError(eccentricity=0.02), angles=4)
    assert 0.0 < out.along_face < 0.1
    assert 0.0 < out.up_flank < 0.1
    lags = [c.lag.mean() for c in out.contacts]  # backlash goes with the distance: e tan(alpha) either way on a flank
    assert np.ptp(lags) == pytest.approx(2.0 * 0.02 * math.tan(math.radians(20.0)), rel=0.02)


@pytest.mark.parametrize("at", [0.0, 0.9, 2.5])
def test_the_mounting_of_a_leaning_ring_is_its_turn_in_space(at: float) -> None:
    """Points of the ring turned as a whole by a small rotation, against what the mounting does to the gap."""
    flank = Wheel(pair_of(), blank_of(), rows=20, columns=21).flank
    rolling, run_out, phi = flank.pair.rolling, 0.04, 0.4
    z = np.broadcast_to(flank.z, flank.r.shape)
    x, y = flank.r * np.sin(flank.angle), flank.r * np.cos(flank.angle)
    # the lean that lifts the ring by (w/2) cos(at + th - phi) at the angle th from the line of centres
    about_x, about_y = (run_out / (2.0 * rolling) * f(at - phi) for f in (math.cos, math.sin))
    there = (x + about_y * z, y - about_x * z, z + about_x * y - about_y * x)
    h = flank.pair.centre_distance - there[1]
    rigid = there[0] - worm_flank(flank.pair.thread, h, there[2], side=1)
    mounting = RingError(run_out=run_out, run_out_at=phi).mounting(at, rolling, Mounting())
    ours = _gap(flank, x, y, 0.0, mounting)
    still = _gap(flank, x, y, 0.0, Mounting())
    seen = still < 1e3
    moved = np.abs(ours - still)[seen & (ours < 1e3)].max()
    assert np.abs(ours - rigid)[seen & (ours < 1e3)].max() < 0.02 * moved


def test_a_ring_mounted_half_a_turn_on_is_the_same_wheel_seen_half_a_turn_on() -> None:
    one, other = (
        RingError(eccentricity=0.02, run_out=0.03),
        RingError(eccentricity=0.02, run_out=0.03, eccentric_at=math.pi, run_out_at=math.pi),
    )
    for at in (0.0, 0.7):
        here, there = one.mounting(at, 50.0, Mounting()), other.mounting(at + math.pi, 50.0, Mounting())
        assert (here.distance, here.axial, here.crossing) == pytest.approx(
            (there.distance, there.axial, there.crossing)
        )


@pytest.mark.parametrize(
    ("case", "alpha", "best", "share"), [(1, 20.0, 29.75, 0.169), (3, 20.0, 17.5, 0.245), (3, 15.0, 19.4, 0.256)]
)
def test_the_recommended_radius_is_the_best_of_the_earlier_scan(
    case: int, alpha: float, best: float, share: float
) -> None:
    """Best radii and shares computed earlier for this project by an independent prototype, to 2.5 % of the radius."""
    pair = pair_of(case, alpha=alpha)
    out = best_cutter(pair, blank_of(case), clearance=0.2 * pair.thread.axial_module, film=FILM, budget=0.005, step=0.5)
    assert out.radius is not None and out.chosen is not None
    assert best * 0.975 <= out.radius <= best * 1.025 + 0.5
    assert out.radius / 0.5 == pytest.approx(round(out.radius / 0.5))
    assert out.chosen.share == pytest.approx(share, rel=0.03)
    assert out.chosen.ends < 0.0125
    assert out.chosen.envelope < 0.7 * MICRON < out.chosen.mid_plane
    bench = workbench(pair, blank_of(case), clearance=0.2 * pair.thread.axial_module, film=FILM)
    assert candidate(bench, out.radius - 0.5).ends > 0.0125  # one step smaller and the ends are marked
    assert out.floor < out.radius
    assert [c.radius for c in out.curve] == sorted(c.radius for c in out.curve)


@pytest.mark.parametrize(("face", "best"), [(10.0, 35.0), (8.0, 36.8)])
def test_a_narrower_face_needs_a_larger_cutter(face: float, best: float) -> None:
    """Best radii computed earlier for this project by an independent prototype."""
    out = best_cutter(pair_of(), blank_of(face=face), clearance=0.5, film=FILM, budget=0.005, curve_points=6)
    assert out.radius == pytest.approx(best, rel=0.03)


def test_the_tolerances_are_where_the_transmission_error_reaches_the_budget() -> None:
    bench = workbench(pair_of(), blank_of(), clearance=0.5, film=FILM)
    found = tolerances(bench, 30.0, budget=0.005)
    wheel, insert = Wheel(pair_of(), blank_of()), Wheel(pair_of(), blank_of()).insert(cut_of(radius=30.0))
    for name in ("tilt", "offset", "clearance", "turned"):  # on a grid half as coarse, hence 3 % and 0.3 um
        for way, size in ((-1.0, found[name].below), (1.0, found[name].above)):
            inside, outside = (
                wheel.run(cut_of(radius=30.0, **{name: way * k * size}), insert).transmission_error for k in (0.9, 1.12)
            )
            assert inside < 0.0053
            assert outside > 0.0047
    assert found["tilt"].either == min(found["tilt"].below, found["tilt"].above)


def test_a_larger_cutter_forgives_more_tilt_and_marks_less() -> None:
    bench = workbench(pair_of(), blank_of(), clearance=0.5, film=FILM)
    small, large = (tolerances(bench, radius, budget=0.005)["tilt"].either for radius in (30.0, 50.0))
    assert large > 1.5 * small
    assert candidate(bench, 50.0).share < candidate(bench, 30.0).share


def test_a_face_too_narrow_for_any_cutter_gets_a_curve_and_no_radius() -> None:
    out = best_cutter(pair_of(), blank_of(face=3.0), clearance=0.5, film=FILM, budget=0.005, curve_points=3)
    assert out.radius is None and out.chosen is None and out.tilt is None
    assert all(c.ends > 0.0125 for c in out.curve)


def test_a_budget_below_what_the_cutter_leaves_anyway_tolerates_nothing() -> None:
    bench = workbench(pair_of(), blank_of(), clearance=0.5, film=FILM)
    assert tolerances(bench, 24.0, budget=1e-5)["tilt"].either == 0.0


def test_grids_and_phases_too_coarse_to_show_anything_are_refused() -> None:
    wheel = Wheel(pair_of(), blank_of())
    with pytest.raises(ValueError, match="fewer than 8 rows or columns"):
        wheel_flank(wheel.pair, wheel.blank, rows=4)
    with pytest.raises(ValueError, match="fewer than 9 planes"):
        sections(wheel.pair, wheel.blank, planes=5)
    with pytest.raises(ValueError, match="fewer than 6 phases"):
        contact(wheel.flank, wheel.flank.angle, film=FILM, phases=3)
    with pytest.raises(ValueError, match="at least 3 places"):
        round_the_wheel(wheel.flank, wheel.flank.angle, film=FILM, errors=RingError(), angles=2)
    with pytest.raises(ValueError, match="two points or more"):
        best_cutter(wheel.pair, wheel.blank, clearance=0.5, film=FILM, budget=0.005, curve_points=1)


def test_a_ring_error_below_zero_is_refused() -> None:
    with pytest.raises(ValueError, match="eccentricity must not be below zero"):
        RingError(eccentricity=-0.01)


@pytest.mark.parametrize(
    ("wrong", "words"), [({"film": 0.0}, "film"), ({"budget": -1.0}, "budget"), ({"step": 0.0}, "radius step")]
)
def test_a_recommendation_wants_sizes_above_zero(wrong: dict[str, float], words: str) -> None:
    with pytest.raises(ValueError, match=f"{words} must be above zero"):
        best_cutter(pair_of(), blank_of(), **{"clearance": 0.5, "film": FILM, "budget": 0.005, **wrong})  # type: ignore[arg-type]
