"""A planning example of our own notes: teeth cut on a clearance arbor, worked out by hand before the ledger existed.

Bore 25 H7 (+21/0) on an arbor g6 (-7/-20): clearance 7 to 41 um, offset up to 20.5 um. Arbor run-out 5, centre run-out
10 um, tilt times lever 2.5 um. Worst case 30.5 um; rms 21.39 um as rings, 15.74 um with the bore loose anywhere in its
play; 95 % 27.88 and 24.21 um. On r = 90 mm: 69.9" for gap centres, 74.4" for a flank of 20 degrees; F_p 61.0 and 64.9 um,
f_pt 2.27 um with 90 teeth. The H7/g6 limits are those of ISO 286-2 (from memory). Percentiles from a quadrature.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from .bench import ARCSEC, UM, sampled, share_error, stack
from .quadrature import Walk, disc, ring


def on_an_arbor(rests: str, clearance: str = "[41 um, 41 um]") -> str:
    """A wheel blank on a clearance arbor between centres; teeth cut 40 mm from the face that squares it (invented)."""
    return f"""
setupcheck: 1
title: Teeth on a clearance arbor
units: mm
confidence: 95 %
machines: {{head-A: {{kind: dividing-head, worm_ratio: 40, axis_runout: 0 um}}}}
parts:
  wheel:
    surfaces:
      bore:  {{kind: bore, diameter: 25 H7, from: 0, to: 20, made: stock}}
      face:  {{kind: face, at: 0, facing: -z, diameter: 150, made: stock}}
      teeth: {{kind: teeth, count: 90, on_circle: 180, at: 50, pressure_angle: 20 deg}}
    given:
      - {{of: face, about: bore, face_runout: 0 um, across: 100}}
setups:
  - op: 10
    machine: head-A
    looks_at_tool: +z
    hold:
      centre:
        on: bore
        by: plain-mandrel
        runout: {{measured: 5 um}}
        clearance: {clearance}
        rests: {rests}
        through: [{{by: centres, runout: {{measured: 10 um}}}}]
      square: {{on: face, by: flange, face_runout: {{measured: 6.25 um}}, across: 100}}
      stop:   {{on: face, error: 0 um}}
    divide: {{by: readout, wheel: {{once_per_turn: ±0"}}, setting: 0"}}
    cut: {{teeth: {{error: 0 um}}}}
require:
  - {{what: run-out, of: wheel.teeth, about: wheel.bore, at_most: 100 um}}
  - {{what: cumulative-pitch, of: wheel.teeth, about: wheel.bore, at_most: 100 um}}
  - {{what: gap-centre-pitch, of: wheel.teeth, about: wheel.bore, at_most: 100 um}}
  - {{what: single-pitch, of: wheel.teeth, about: wheel.bore, at_most: 100 um}}
  - {{what: index-within, of: wheel.teeth, about: wheel.bore, at_most: 100"}}
"""


OTHERS = (2.5, 5.0, 2.5)
PLAY = 20.5


@pytest.mark.parametrize(("index", "hand_made"), [(0, 61.0), (1, 64.9), (2, 61.0), (3, 2.27)])
def test_the_worst_case_by_hand(index: int, hand_made: float) -> None:
    for rests in ("pushed", "free"):
        worst = stack(on_an_arbor(rests), index).combined.worst.high / UM
        assert hand_made == pytest.approx(worst, abs=0.05 if hand_made > 10.0 else 0.005)


def test_the_angle_of_the_flank_by_hand() -> None:
    assert 74.4 == pytest.approx(stack(on_an_arbor("pushed"), 4).combined.worst.high / ARCSEC, abs=0.05)
    assert 69.9 == pytest.approx(74.39 * math.cos(math.radians(20.0)), abs=0.05)


def test_the_largest_clearance_rules_the_worst_case() -> None:
    for rests in ("pushed", "free"):
        fixed, range_ = (stack(on_an_arbor(rests, c)).combined for c in ("[41 um, 41 um]", "[7 um, 41 um]"))
        assert fixed.worst.high == pytest.approx(range_.worst.high)
        assert range_.likely.high < fixed.likely.high


@pytest.mark.parametrize(("rests", "rms", "at_95"), [("pushed", 21.39, 27.88), ("free", 15.74, 24.21)])
def test_rms_and_95_percent_of_ring_and_disc(rests: str, rms: float, at_95: float) -> None:
    radii = sampled(on_an_arbor(rests)) / (2.0 * UM)
    squares = radii**2
    error = 4.0 * float(squares.std()) / math.sqrt(len(squares)) / (2.0 * rms)
    assert rms == pytest.approx(math.sqrt(float(squares.mean())), abs=error + 0.005)
    assert 0.95 == pytest.approx(float(np.mean(radii <= at_95)), abs=share_error(0.95) + 0.002)
    law = ring if rests == "pushed" else disc
    walk = Walk([law(PLAY / 10.0), *(ring(e / 10.0) for e in OTHERS)], up_to=2000.0)
    likely = stack(on_an_arbor(rests)).combined.likely.high / (2.0 * UM)
    assert 0.95 == pytest.approx(walk.below(likely / 10.0), abs=share_error(0.95) + 0.0005)
    assert at_95 == pytest.approx(likely, abs=0.3)
