"""Ease-off, transmission error and marking against distances between clouds of points, at three sizes of their grid."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.worm.conjugate import conjugate_gap
from setupcheck.worm.plunge_gap import cut_gap

from .clouds import FAR, Worm, body, run
from .wheels import FILM, MICRON, Wheel, blank_of, cut_of, pair_of

PHASES = 24
WORM = Worm(starts=1, module=2.5, diameter=30.0, pressure_angle=math.radians(20.0), turns=14.0)
PLACES = np.arange(-45, 46) * (2.0 * math.pi / PHASES)
WHEEL = Wheel(pair_of(), blank_of(), rows=80, columns=161)


class Flank:
    """The flank as the cutter's cloud gives it, cut to the wheel's blank: points, their areas, radius, plane, angle."""

    def __init__(self, radius: float, kind: str, rows: int) -> None:
        self.cut = cut_of(radius=radius)
        self.insert = WHEEL.insert(self.cut, kind)
        heights = np.linspace(0.9, 6.2, rows)
        widths = np.array([self.insert.width(h) / 2.0 for h in heights])
        grid = body(heights, widths, radius, tilt=self.cut.tilt, axis=self.cut.axis(WHEEL.pair), half=0.42)
        area = np.linalg.norm(np.cross(np.gradient(grid, axis=0), np.gradient(grid, axis=1)), axis=-1)
        r, z = np.hypot(grid[..., 0], grid[..., 1]), grid[..., 2]
        in_blank = (np.abs(z) <= 8.0) & (r <= WHEEL.blank.top(z))
        touched = r > 65.0 - np.sqrt(17.5**2 - np.minimum(np.abs(z), 17.0) ** 2) + 0.05
        keep = in_blank & touched
        self.points, self.area, self.r, self.z = grid[keep], area[keep], r[keep], z[keep]
        self.angle = np.arctan2(self.points[:, 0], self.points[:, 1])


@pytest.mark.parametrize(("radius", "kind"), [(29.75, "envelope"), (40.0, "mid-plane")])
def test_the_cut_flank_is_the_cutters_cloud(radius: float, kind: str) -> None:
    flank = Flank(radius, kind, 40)
    start = conjugate_gap(WHEEL.pair, flank.r, flank.z).angle
    ours = cut_gap(WHEEL.pair, flank.cut, flank.insert, flank.r, flank.z, side=1, start=start)
    assert flank.r * ours == pytest.approx(flank.r * flank.angle, abs=2e-6)


@pytest.mark.parametrize(("radius", "kind"), [(29.75, "envelope"), (40.0, "mid-plane")])
def test_ease_off_is_the_smallest_distance_to_the_turning_worm(
    radius: float, kind: str, capsys: pytest.CaptureFixture[str]
) -> None:
    flank = Flank(radius, kind, 40)
    gap, d = conjugate_gap(WHEEL.pair, flank.r, flank.z), 1e-5
    lean = [
        flank.r * (conjugate_gap(WHEEL.pair, flank.r + a, flank.z + b).angle - gap.angle) / d
        for a, b in ((d, 0.0), (0.0, d))
    ]
    ours = flank.r * (flank.angle - gap.angle) / np.sqrt(1.0 + lean[0] ** 2 + lean[1] ** 2)
    worst = []
    for step in (0.4, 0.2, 0.1):
        far = run(flank.points, WORM, centre=65.0, teeth=40, step=step, places=PLACES).distance
        at, n = np.clip(far.argmin(axis=0), 1, len(far) - 2), np.arange(far.shape[1])
        before, least, after = far[at - 1, n], far[at, n], far[at + 1, n]
        bend = before - 2.0 * least + after
        theirs = least - (before - after) ** 2 / (8.0 * np.where(bend > 0.0, bend, np.inf))
        near = gap.inside & (np.maximum(before, after) < FAR / 2.0) & (np.abs(ours) < 0.06)
        worst.append(float(np.abs(theirs - ours)[near].max()) / MICRON)
        assert near.sum() > 500
    with capsys.disabled():
        print(
            f"\n  {kind} R {radius}: worst difference of ease-off {', '.join(f'{w:.3f}' for w in worst)} um at 0.4, 0.2, 0.1 mm"
        )
    assert worst[0] < 0.8 and worst[1] < 0.2 and worst[2] < 0.05  # a quarter for half the step


@pytest.mark.parametrize(("radius", "kind", "error"), [(29.75, "envelope", 0.0), (40.0, "mid-plane", 21.3)])
def test_transmission_error_and_marking_are_those_of_the_clouds(radius: float, kind: str, error: float) -> None:
    flank = Flank(radius, kind, 96)
    out = run(flank.points, WORM, centre=65.0, teeth=40, step=0.15, places=PLACES)
    free = np.where(out.distance < FAR / 2.0, out.distance / out.arm, FAR)  # how far the wheel may turn back [rad]
    phase = np.round(PLACES / (2.0 * math.pi / PHASES)).astype(int) % PHASES
    lag = np.full(PHASES, FAR)
    np.minimum.at(lag, phase, free.min(axis=1))
    nearest = (out.distance - lag[phase][:, np.newaxis] * out.arm).min(axis=0)
    ours = WHEEL.run(flank.cut, flank.insert)
    assert np.ptp(lag) * 50.0 == pytest.approx(ours.transmission_error, abs=0.4 * MICRON)
    assert np.ptp(lag) * 50.0 == pytest.approx(error * MICRON, abs=0.4 * MICRON)
    # a worm turned on goes the other way along its axis: the same phases backwards; the cloud ends up to a row below the tip
    assert lag[(-np.arange(PHASES)) % PHASES] * 50.0 == pytest.approx(ours.lag, abs=1.5 * MICRON)
    marked = float(flank.area[nearest <= FILM].sum())
    assert marked == pytest.approx(ours.share * float(WHEEL.flank.area.sum()), rel=0.03)
