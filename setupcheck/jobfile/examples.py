"""How parts of a job file look, for messages to a planner who begins with an empty one. Invented figures."""

from __future__ import annotations

SKELETON = """\
setupcheck: 1
title: Hub, bored
units: mm
confidence: 95 %
parts:
  hub:
    material: C45
    surfaces:
      bar:  {kind: cylinder, diameter: 85, from: -30, to: 20, made: stock}
      sawn: {kind: face, at: -30, facing: -z, diameter: 85, made: stock}
      rim:  {kind: cylinder, diameter: 80, from: 0, to: 20}
      bore: {kind: bore, diameter: 32 H7, from: 0, to: 20}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: bar, by: three-jaw, at: -20, runout: 0.1 mm}
      square: {on: sawn, by: jaws, face_runout: 0.2 mm, across: 70}
    cut: {rim: {}, bore: {}}
require:
  - {what: run-out, of: hub.bore, about: hub.rim, at_most: 10 um}
"""
"""The shortest job that reads as one."""

TO_BEGIN = "Begin with one such as this:\n" + SKELETON.rstrip("\n")
"""What to write into a file that holds nothing."""

SHAPES = {
    "parts": "parts: {wheel: {material: C45, surfaces: {…}}}",
    "surfaces": "surfaces: {bore: {kind: bore, diameter: 32 H6, from: 0, to: 26}}",
    "setups": "setups: and under it `- op: 10`, with machine, looks_at_tool, hold and cut under op",
    "require": "require: and under it `- {what: run-out, of: wheel.bore, at_most: 20 um}`",
}
"""What to write for a section that is missing."""

ENTRIES = {
    "parts": ("part", "wheel: {material: C45, surfaces: {…}}"),
    "surfaces": ("surface", "bore: {kind: bore, diameter: 32 H6, from: 0, to: 26}"),
}
"""Sections that hold at least one entry: what an entry is, and one of them."""
