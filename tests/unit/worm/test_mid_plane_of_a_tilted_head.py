"""A mid-plane carried over by calculation, and the tilt's error budget, against exact rotations with numpy."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.flow import prepare
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.account import Account
from setupcheck.quantities.book import Known
from setupcheck.quantities.carried_over import mid_plane_before_tilt
from setupcheck.shipped import shipped

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
FOUND = "mid_plane: {found: after-tilt, error: 15 um}"
BEFORE = 'mid_plane: {found: before-tilt, error: 15 um, pivot: "120.00 ±0.50"}'


def job(tilt: str = "3deg 34' 35\"", uncertainty: str = "2'") -> str:
    text = WHEEL.replace(FOUND, BEFORE)
    return text.replace("tilt: 3deg 34' 35\"", f"tilt: {tilt}").replace(
        "uncertainty: 2', leans", f"uncertainty: {uncertainty}, leans"
    )


def carried(text: str) -> tuple[Account, float]:
    loaded = read_job_text(text, "job.yaml")
    setup = next(s for s in loaded.job.setups if s.op == 40)
    assert setup.head is not None
    return mid_plane_before_tilt(setup.head, 40, "teeth"), abs(setup.head.tilt)


def off_the_middle(
    tilt: float, length: float, *, tilt_error: float, length_error: float, height_dialled: bool
) -> float:
    """Exact: where the cutter stands along the wheel's own axis from the wheel's middle [mm].

    The middle was found with the head straight, the cutter then moved by the shift calculated for `tilt` and `length`;
    in truth pivot and angle are off. The height is calculated too, or dialled on the leaned wheel.
    """
    true_length, true_tilt = length + length_error, tilt + tilt_error

    def along(angle: float) -> np.ndarray:
        turn = np.array([[math.cos(angle), -math.sin(angle)], [math.sin(angle), math.cos(angle)]])
        return turn @ np.array([1.0, 0.0])

    middle = true_length * along(true_tilt)
    cutter = np.array([true_length, 0.0]) + length * (along(tilt) - np.array([1.0, 0.0]))
    if height_dialled:
        cutter[1] = middle[1]
    return float((cutter - middle) @ along(true_tilt))


@pytest.mark.parametrize("tilt", ["3deg 34' 35\"", "5 deg", "12 deg"])
@pytest.mark.parametrize("height_dialled", [True, False])
def test_the_account_covers_every_corner_of_pivot_and_angle(tilt: str, height_dialled: bool) -> None:
    account, angle = carried(job(tilt))
    told = account.largest() - 0.015  # without the error of finding it
    arcmin = math.radians(1.0 / 60.0)
    worst = max(
        abs(off_the_middle(angle, 120.0, tilt_error=t, length_error=p, height_dialled=height_dialled))
        for t in (-2.0 * arcmin, 0.0, 2.0 * arcmin)
        for p in (-0.5, 0.0, 0.5)
    )
    second = 120.0 * (2.0 * arcmin) ** 2 / 2.0 + 0.5 * 2.0 * arcmin  # L t^2/2 and dL t: 0.02 and up to 0.3 um at 90 deg
    assert worst <= told + second * math.sin(angle) + 3e-5
    if height_dialled:  # what is told is what happens, but for the cosine of the lean
        assert worst == pytest.approx(told * math.cos(angle), rel=2e-3, abs=1e-4)
    else:  # a calculated height takes the error of the angle back: told is on the careful side
        assert worst == pytest.approx(0.5 * (1.0 - math.cos(angle)), rel=1e-2, abs=1e-4)


def test_each_coefficient_is_the_derivative_of_the_exact_rotation() -> None:
    account, angle = carried(job("12 deg"))
    of = {c.key: (a + b).real for c, (a, b) in account.terms.items()}
    step = 1e-5
    by_pivot = off_the_middle(angle, 120.0, tilt_error=0.0, length_error=step, height_dialled=True) / step
    by_angle = off_the_middle(angle, 120.0, tilt_error=step, length_error=0.0, height_dialled=True) / step
    pivot = next(v for k, v in of.items() if "distance of the head's pivot" in k)
    turned = next(v for k, v in of.items() if "tilt of the head about its pivot" in k)
    assert abs(by_pivot) == pytest.approx(pivot * math.cos(angle), rel=1e-4)
    assert abs(by_angle) == pytest.approx(turned * math.cos(angle), rel=1e-4)


def test_a_head_that_stands_straight_carries_nothing_over() -> None:
    account, _ = carried(job("0 deg"))
    assert account.largest() == pytest.approx(0.015)


@pytest.mark.parametrize(
    ("gone", "missing"),
    [
        (', pivot: "120.00 ±0.50"', "setups.40.head.mid_plane.pivot"),
        ("uncertainty: 2', leans", "setups.40.head.uncertainty"),
    ],
)
def test_without_pivot_or_uncertainty_the_mid_plane_is_not_known(gone: str, missing: str) -> None:
    account, _ = carried(job().replace(gone, "leans" if gone.endswith("leans") else ""))
    assert account.undetermined() == (missing,)


@pytest.mark.parametrize("lean_at", np.linspace(0.0, math.tau, 9))
def test_the_worst_tilt_covers_head_housing_and_wobble_turned_together_exactly(lean_at: float) -> None:
    floor, book = prepare(read_job_text(WHEEL, "job.yaml"))
    scope = next(s for s in book.instances("setup") if s.op == 40)
    worst, needed = book.get("tilt.worst_error", scope), book.get("tilt.needed", scope)
    assert isinstance(worst, Known)
    assert isinstance(needed, Known)
    teeth, axis = floor.now(floor.loaded.ref("wheel.teeth")), floor.now(floor.loaded.ref("spindle.bearings"))
    assert teeth is not None
    assert axis is not None
    wobble = (teeth.lean - axis.lean).largest()
    setup = next(s for s in floor.loaded.job.setups if s.op == 40)
    assert setup.head is not None
    arcmin = math.radians(1.0 / 60.0)

    def turn(angle: float, about: int) -> np.ndarray:
        c, s = math.cos(angle), math.sin(angle)
        i, j = [k for k in range(3) if k != about]
        out = np.eye(3)
        out[i, i], out[i, j], out[j, i], out[j, j] = c, -s, s, c
        return out

    # the gap's direction in the wheel: the axis (z) leaned by the head about the line of centres (y), wheel wobbling at work
    cut = turn(-(abs(setup.head.tilt) + 2.0 * arcmin), 1) @ np.array([0.0, 0.0, 1.0])
    wheel = turn(wobble * math.sin(lean_at), 1) @ turn(wobble * math.cos(lean_at), 0)
    gap = wheel @ cut
    thread = turn(-(float(needed.value) - 1.0 * arcmin), 1) @ np.array([0.0, 0.0, 1.0])
    seen = math.atan2(gap[0], gap[2]) - math.atan2(thread[0], thread[2])
    assert abs(seen) <= float(worst.value) * 1.001
    if abs(math.sin(lean_at)) > 0.99 and abs(seen) > 3.0 * arcmin:
        assert abs(seen) == pytest.approx(float(worst.value), rel=0.05)
