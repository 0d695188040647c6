"""The ledger adds small displacements: beyond its range a stack is open, with the reason, and never a pass."""

from __future__ import annotations

import math

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known, Open

ACROSS = 50.0
"""Circle the dial runs on [mm]; invented, as all sizes here."""


def reviewed(*, face: float, runout: float = 0.01, require: str) -> Review:
    """A disc turned, turned round with this face run-out and run-out [mm], its gaps cut."""
    return review(
        read_job_text(
            f"""
setupcheck: 1
title: A disc held askew
units: mm
machines:
  lathe-A: {{kind: lathe, axis_runout: 0 um}}
  head-B: {{kind: dividing-head, worm_ratio: 40, axis_runout: 0 um}}
parts:
  disc:
    surfaces:
      bar: {{kind: cylinder, diameter: 90, from: -40, to: 0, made: stock}}
      front: {{kind: face, at: 10, facing: +z, diameter: 80}}
      bore: {{kind: bore, diameter: 20, from: 0, to: 10}}
      back: {{kind: face, at: 0, facing: -z, diameter: 80}}
      teeth: {{kind: teeth, count: 24, on_circle: 80, at: 5, width: 8, pressure_angle: 20 deg}}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {{on: bar, by: three-jaw, at: -30, runout: 100 um}}
      and_centre: {{on: bar, by: three-jaw, at: -10, runout: 100 um}}
    cut: {{front: {{}}, bore: {{}}}}
  - op: 20
    machine: head-B
    looks_at_tool: -z
    hold:
      centre: {{on: bore, by: indicator, at: 5, runout: {runout} mm}}
      square: {{on: front, by: faceplate, face_runout: {face} mm, across: {ACROSS:g}}}
      stop: {{on: front, error: 0 um}}
    divide: {{by: readout, setting: 5"}}
    cut: {{back: {{}}, teeth: {{}}}}
require:
  - {require}
""",
            "askew.yaml",
        )
    )


def stack(found: Review) -> object:
    (scope,) = found.book.instances("stack")
    return found.book.get("stack.combined", scope)


FACE = "{what: face-run-out, of: disc.back, about: disc.bore, at_most: 20 mm}"
SQUARE = "{what: squareness, of: disc.back, about: disc.bore, at_most: 20 deg}"
PITCH = "{what: cumulative-pitch, of: disc.teeth, about: disc.bore, at_most: 20 mm}"


@pytest.mark.parametrize("require", [FACE, SQUARE])
def test_a_lean_beyond_the_range_opens_the_stack_though_its_limit_would_hold(require: str) -> None:
    found = reviewed(face=0.11 * ACROSS, require=require)
    answer = stack(found)
    assert isinstance(answer, Open)
    assert f"{math.degrees(0.11):.3g} deg" in answer.because
    assert found.verdict != "pass"


@pytest.mark.parametrize("require", [FACE, SQUARE])
def test_within_the_range_it_is_told(require: str) -> None:
    assert isinstance(stack(reviewed(face=0.09 * ACROSS, require=require)), Known)


def test_what_the_range_leaves_out_is_as_little_as_it_says() -> None:
    from setupcheck.quantities.relations import LARGEST_ECCENTRICITY, LARGEST_LEAN

    assert 1.0 - math.cos(LARGEST_LEAN) <= 0.005
    assert LARGEST_LEAN / math.sin(LARGEST_LEAN) - 1.0 <= 0.002
    # a place on a circle of radius 1 seen from a centre e beside it, a quarter turn from e and half way on: its angle is
    # off by atan2(e sin, 1 - e cos), of which e sin is counted (series: a textbook one)
    worst = 0.0
    for k in range(1, 180):
        turn, e = math.radians(k), LARGEST_ECCENTRICITY
        exact = math.atan2(e * math.sin(turn), 1.0 - e * math.cos(turn))
        worst = max(worst, abs(exact - e * math.sin(turn)))
    assert worst <= LARGEST_ECCENTRICITY**2 / 2.0 + LARGEST_ECCENTRICITY**3 / 3.0  # sum of e^k sin(k turn) / k


def test_teeth_far_off_their_axis_are_open_too_and_a_little_nearer_are_told() -> None:
    radius = 40.0
    far = stack(reviewed(face=0.0, runout=2.0 * 0.105 * radius, require=PITCH))
    assert isinstance(far, Open)
    assert "off its axis" in far.because
    assert isinstance(stack(reviewed(face=0.0, runout=2.0 * 0.095 * radius, require=PITCH)), Known)
