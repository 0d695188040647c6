"""Sampling: an error that comes N times a turn, seen at P equal places, shows |N mod P| waves, or P less that.

Aliasing is textbook (Nyquist, Shannon); the tables were worked out here. 0: every place sees the same error, so nothing
shows. Through job files: the head's error once per crank turn comes N times a turn of the work on an N : 1 head.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.teeth import folded, gains
from setupcheck.quantities.book import Known

from .bench import ARCSEC, UM, findings, reviewed, sampled, stack

SINGLE_PRECISION = 1e-6
"""The places of a toothing are drawn in single precision."""
STATIONS = (4, 5, 6, 7, 8, 9, 10, 12, 24, 36)
TABLE = {
    40: (0, 0, 2, 2, 0, 4, 0, 4, 8, 4),
    60: (0, 0, 0, 3, 4, 3, 0, 0, 12, 12),
    72: (0, 2, 0, 2, 0, 0, 2, 0, 0, 0),
    80: (0, 0, 2, 3, 0, 1, 0, 4, 8, 8),
    90: (2, 0, 0, 1, 2, 0, 0, 6, 6, 18),
    120: (0, 0, 0, 1, 0, 3, 0, 0, 0, 12),
}
IMPRINTS = [
    # ratio, teeth: waves round the work
    *((40, z, k) for z, k in ((39, 1), (41, 1), (40, 0), (80, 40), (90, 40), (91, 40), (100, 40), (120, 40))),
    *((90, z, k) for z, k in ((89, 1), (91, 1), (88, 2), (92, 2), (90, 0))),
]


def indexed(
    ratio: int, teeth: int, *, wheel: str = '0"', crank: str = '6"', setting: str = '0"', circle: int = 0
) -> str:
    """A disc gashed on a dividing head that is true but for what is stated (invented part)."""
    by = f"by: hole-circle, circle: {circle}" if circle else "by: readout"
    return f"""
setupcheck: 1
title: A disc divided on a head
units: mm
machines: {{head-A: {{kind: dividing-head, worm_ratio: {ratio}, axis_runout: 0 um}}}}
parts:
  disc:
    surfaces:
      bore:  {{kind: bore, diameter: 40, from: 0, to: 10, made: stock}}
      face:  {{kind: face, at: 0, facing: -z, diameter: 150, made: stock}}
      teeth: {{kind: teeth, count: {teeth}, on_circle: 180, at: 5, pressure_angle: 20 deg}}
setups:
  - op: 10
    machine: head-A
    looks_at_tool: +z
    hold:
      centre: {{on: bore, by: expanding-mandrel, runout: 0 um}}
      square: {{on: face, by: flange, face_runout: 0 um, across: 100}}
      stop:   {{on: face, error: 0 um}}
    divide: {{{by}, wheel: {{once_per_turn: ±{wheel}}}, worm: {{once_per_crank: ±{crank}}}, setting: {setting}}}
    cut: {{teeth: {{error: 0 um}}}}
require:
  - {{what: cumulative-pitch, of: disc.teeth, about: disc.bore, at_most: 60 um}}
  - {{what: single-pitch, of: disc.teeth, about: disc.bore, at_most: 60 um}}
  - {{what: index-within, of: disc.teeth, about: disc.bore, at_most: 60"}}
  - {{what: on-workpiece, of: disc.teeth, about: disc.bore, on_diameter: 130, at_most: 30 um}}
"""


@pytest.mark.parametrize("ratio", TABLE)
def test_the_table_of_ratios_and_stations(ratio: int) -> None:
    assert TABLE[ratio] == tuple(folded(ratio, stations) for stations in STATIONS)


@pytest.mark.parametrize("ratio", TABLE)
def test_the_folded_wave_is_the_one_a_fourier_sum_of_the_samples_shows(ratio: int) -> None:
    for stations, waves in zip(STATIONS, TABLE[ratio], strict=True):
        samples = np.cos(ratio * 2.0 * np.pi * np.arange(stations) / stations + 0.3)
        assert waves == int(np.argmax(np.abs(np.fft.rfft(samples))))


@pytest.mark.parametrize(("ratio", "teeth", "waves"), IMPRINTS)
def test_a_job_names_the_waves_that_its_head_leaves_on_the_work(ratio: int, teeth: int, waves: int) -> None:
    found = reviewed(indexed(ratio, teeth))
    answer = found.book.get("divide.folded_harmonic", found.book.instances("setup")[0])
    if waves:
        assert isinstance(answer, Known)
        assert float(waves) == answer.value
    else:
        assert answer is None  # alike at every tooth: there is no wave to name


@pytest.mark.parametrize(("ratio", "teeth", "waves"), IMPRINTS)
def test_few_waves_are_warned_of_and_many_are_not(ratio: int, teeth: int, waves: int) -> None:
    # one to four waves are taken for eccentricity or for an oval wheel; no wave at all does not show in the teeth
    expected = {0: []}.get(waves, ["warn" if waves < 5 else "pass"])
    assert expected == [f.verdict for f in findings(indexed(ratio, teeth), "DIVIDE-002")]


def test_as_many_teeth_as_the_ratio_do_not_see_the_crank_error() -> None:
    # 40 teeth on 40:1: one whole crank turn a tooth, the same error at each
    for index in (0, 1):
        c = stack(indexed(40, 40), index).combined
        assert 0.0 == pytest.approx(c.worst.high, abs=1e-12)
        assert 0.0 == pytest.approx(c.likely.high, abs=1e-12)


def test_one_tooth_more_or_less_makes_the_crank_error_look_like_run_out() -> None:
    # +-6" at r = 90: amplitude 2.618 um, so a range of 5.24 um, spread over the whole turn in small steps
    amplitude = 90.0 * 6.0 * ARCSEC
    for teeth in (39, 41):
        job = indexed(40, teeth)
        assert 2.0 * amplitude == pytest.approx(stack(job).combined.worst.high)
        assert 2.0 * amplitude * np.sin(np.pi / teeth) == pytest.approx(stack(job, 1).combined.worst.high)
        assert stack(job).combined.likely.high <= 2.0 * amplitude
        # the same figures as an error once per turn of the head's wheel
        wheel = indexed(40, teeth, wheel='6"', crank='0"')
        assert stack(wheel).combined.worst.high == pytest.approx(stack(job).combined.worst.high)
        assert stack(wheel, 1).combined.worst.high == pytest.approx(stack(job, 1).combined.worst.high)


def test_80_teeth_on_40_to_1_see_the_crank_error_turn_about_from_tooth_to_tooth() -> None:
    # 40 waves on 80 teeth: neighbours are half a wave apart, so the step is as large as the range
    amplitude = 90.0 * 6.0 * ARCSEC
    cumulative, step = (stack(indexed(40, 80), i).combined.worst.high for i in (0, 1))
    assert 2.0 * amplitude == pytest.approx(cumulative)
    assert 2.0 * amplitude == pytest.approx(step)
    assert 5.24 == pytest.approx(cumulative / UM, abs=0.005)


@pytest.mark.parametrize(("ratio", "teeth", "waves"), IMPRINTS)
def test_the_worst_case_of_each_imprint_is_reached_and_never_passed(ratio: int, teeth: int, waves: int) -> None:
    # largest step of k waves on z teeth: 2 A sin(pi k / z). Only m = z / gcd(k, z) places differ; an odd m sees the
    # share cos(pi/2m) of twice the amplitude at its best, and the whole of the largest step. The
    # amplitude itself is anywhere up to its bound.
    places = teeth // math.gcd(waves, teeth)
    seen = math.cos(math.pi / (2 * places)) if places % 2 else 1.0
    for index, share in ((0, seen), (1, 1.0)):
        worst, values = stack(indexed(ratio, teeth), index).combined.worst.high, sampled(indexed(ratio, teeth), index)
        assert worst * share * (1.0 + SINGLE_PRECISION) >= values.max()
        if waves:
            assert values.max() > 0.98 * share * worst
    pattern = stack(indexed(ratio, teeth)).figure.pattern
    step = gains(pattern, stepwise=True, flank=True).wave[ratio]
    assert 2.0 * 90.0 * np.sin(np.pi * waves / teeth) == pytest.approx(step, abs=1e-9)
