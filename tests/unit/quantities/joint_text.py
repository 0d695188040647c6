"""A whole shrink joint as a job file (invented), to be changed line by line, and what comes of it."""

from __future__ import annotations

import math
from functools import cache

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.physics.heating import DULL, Ring
from setupcheck.quantities.book import Answer, Known
from setupcheck.rulebook import Finding

WHOLE = """
setupcheck: 1
title: A toothed ring on a hollow shaft
units: mm
room: 20 degC
parts:
  ring:
    material: CuSn12-C
    surfaces:
      bore: {kind: bore, diameter: 60 H6, from: 0, to: 30, roughness: Rz 4 um}
      teeth: {kind: teeth, count: 60, on_circle: 120, at: 20, width: 20, module: 2}
      hub: {kind: cylinder, diameter: 90, from: 0, to: 10}
  shaft:
    material: 42CrMo4
    surfaces:
      seat: {kind: cylinder, diameter: 60 r6, from: 0, to: 30, hole: 20, roughness: Rz 2.5 um}
      shoulder: {kind: face, at: 0, facing: +z, diameter: 80}
setups:
  - op: 10
    join:
      outer: ring.bore
      inner: shaft.seat
      by: shrink
      square: bore
      joint: degreased
      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}
      must_carry: {torque: 50 N m, axial_force: 0 N}
      serves_at: [10 degC, 25 degC]
"""

# slices 10 mm of 90 and 20 mm of 115, as one ring of the same volume
RING = Ring(
    bore=60.0,
    outside=math.sqrt((10.0 * 90.0**2 + 20.0 * 115.0**2) / 30.0),
    length=30.0,
    density=8700.0,
    specific_heat=373.0,
    emissivity=DULL,
)


def changed(*pairs: tuple[str, str], text: str = WHOLE) -> str:
    """The job with each old piece, which stands there once, in place of its new one."""
    for old, new in pairs:
        assert text.count(old) == 1, (old, text.count(old))
        text = text.replace(old, new)
    return text


@cache
def reviewed(text: str) -> Review:
    return review(read_job_text(text, "ring.yaml"))


def answer(text: str, name: str) -> Answer:
    """One quantity of the joint."""
    book = reviewed(text).book
    return book.get(name, book.instances("join")[0])


def value(text: str, name: str) -> object:
    """One known quantity of the joint; open or absent fails the test with what is said."""
    found = answer(text, name)
    assert isinstance(found, Known), (name, found)
    return found.value


def number(text: str, name: str) -> float:
    found = value(text, name)
    assert isinstance(found, float), (name, found)
    return found


def finding(text: str, rule: str) -> Finding:
    """The one finding of a rule on the joint."""
    (found,) = (f for f in reviewed(text).evaluation.findings if f.rule == rule)
    return found
