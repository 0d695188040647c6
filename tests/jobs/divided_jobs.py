"""A toothed disc that is true but for its division. Invented."""

from __future__ import annotations

RADIUS = 90.0
"""Of the teeth [mm]."""


def disc(divide: str, count: int) -> str:
    """A toothed disc, held and cut without any error but that of its division."""
    return f"""
setupcheck: 1
title: A disc divided in some way
units: mm
confidence: 95 %
machines: {{head-A: {{kind: dividing-head, worm_ratio: 40, axis_runout: 0 um}}}}
parts:
  disc:
    surfaces:
      bore:  {{kind: bore, diameter: 40, from: 0, to: 10, made: stock}}
      face:  {{kind: face, at: 0, facing: -z, diameter: 150, made: stock}}
      teeth: {{kind: teeth, count: {count}, on_circle: {2.0 * RADIUS:g}, at: 5, width: 10, pressure_angle: 20 deg}}
setups:
  - op: 10
    machine: head-A
    looks_at_tool: +z
    hold:
      centre: {{on: bore, by: expanding-mandrel, at: 5, runout: 0 um}}
      square: {{on: face, by: flange, face_runout: 0 um, across: 100}}
      stop:   {{on: face, error: 0 um}}
    divide: {divide}
    cut: {{teeth: {{error: 0 um}}}}
require:
  - {{what: cumulative-pitch, of: disc.teeth, about: disc.bore, at_most: 60 um}}
  - {{what: single-pitch, of: disc.teeth, about: disc.bore, at_most: 60 um}}
"""
