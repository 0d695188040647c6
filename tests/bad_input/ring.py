"""A small sound job, and the ways the tests of bad input spoil it. Invented part, invented figures."""

from __future__ import annotations

from setupcheck.errors import JobError, Problem
from setupcheck.jobfile.reading import read_job_text

RING = """\
setupcheck: 1
title: Ring gear blank
units: mm
confidence: 95 %
parts:
  ring:
    surfaces:
      bar: {kind: cylinder, diameter: 100, from: -30, to: 32, made: stock}
      rim: {kind: cylinder, diameter: 96, from: 0, to: 20}
      hub: {kind: cylinder, diameter: 50, from: 20, to: 30}
      bore: {kind: bore, diameter: 32 H7, from: 0, to: 30}
      front: {kind: face, at: 30, facing: +z, diameter: 50}
      back: {kind: face, at: 0, facing: -z, diameter: 96}
      teeth: {kind: teeth, count: 60, on_circle: 90, at: 10, width: 18, pressure_angle: 20 deg}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
  head-B: {kind: dividing-head, worm_ratio: 40, axis_runout: 2.5 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: bar, by: three-jaw, at: -20, runout: 100 um}
      and_centre: {on: bar, by: three-jaw, at: 10, runout: 90 um}
    cut: {rim: {}, hub: {}, bore: {}, front: {removes: [bar]}}
  - op: 20
    machine: head-B
    looks_at_tool: -z
    hold:
      centre: {on: bore, by: spigot, clearance: [1 um, 3 um], runout: 3 um}
      square: {on: front, by: flange, face_runout: 4 um, across: 44}
      stop: {on: front, error: 10 um}
    divide: {by: hole-circle, circle: 18, setting: 5"}
    cut: {teeth: {error: 20 um}, back: {error: 15 um}}
require:
  - {what: run-out, of: ring.teeth, about: ring.bore, at_most: 90 um}
  - {what: index-within, of: ring.teeth, about: ring.bore, at_most: 400"}
"""

_SPINDLE = """\
  spindle:
    surfaces:
      journal: {kind: cylinder, diameter: 32 p6, from: 0, to: 30}
      shoulder: {kind: face, at: 0, facing: +z, diameter: 60}
      bearings: {kind: cylinder, diameter: 40, from: -80, to: -10}
    given:
      - {of: journal, about: bearings, runout: 2 um}
      - {of: shoulder, about: bearings, face_runout: 4 um, across: 56}
"""
_JOIN = """\
  - op: 30
    join:
      outer: ring.bore
      inner: spindle.journal
      by: press
      square: bore
      stop: {on: ring.back, against: spindle.shoulder}
"""
JOINED = RING.replace("machines:\n", _SPINDLE + "machines:\n").replace("require:\n", _JOIN + "require:\n")
"""The ring pressed on a spindle."""


def spoilt(old: str, new: str, text: str = RING) -> str:
    """The job with one place changed; the place must be there exactly once."""
    assert text.count(old) == 1, f"{old!r} stands {text.count(old)} times in the job"
    return text.replace(old, new)


def refused(text: str) -> JobError:
    """The error that reading a text gives."""
    try:
        read_job_text(text, "job.yaml")
    except JobError as wrong:
        return wrong
    raise AssertionError("the job was accepted")


def told(problem: Problem) -> str:
    """A problem in one line: place, path, sentence."""
    return f"{problem.line}:{problem.column} {problem.path} | {problem.problem}. {problem.hint}"
