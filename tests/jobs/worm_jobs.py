"""Two worm wheels as job files for tests: two starts to the left, and ninety teeth of module 1.5. Invented, like the jobs."""

from __future__ import annotations

import math


def worm_job(
    *, starts: int, hand: str, module: float, worm: float, teeth: int, face: float, radius: float, budget: str
) -> str:
    """A wheel on its finished hub, cut gap by gap and measured to run on that hub; equal split of the pitch. Sizes mm."""
    lean = "nose-down" if hand == "right" else "nose-up"
    d2, lead = module * teeth, math.degrees(math.atan(starts * module / worm))
    return f"""
setupcheck: 1
title: Worm wheel of {teeth} teeth, {hand}-hand
units: mm
parts:
  wheel:
    material: CuSn12-C
    surfaces:
      bar:    {{kind: cylinder, diameter: {d2 + 4.0 * module!r}, from: -40, to: {face + 22.0!r}, made: stock}}
      hub:    {{kind: cylinder, diameter: {0.5 * d2!r}, from: {face!r}, to: {face + 20.0!r}}}
      rim:    {{kind: cylinder, diameter: {d2 + 3.0 * module!r}, from: 0, to: {face!r}}}
      seat:   {{kind: face, at: {face!r}, facing: +z, diameter: {0.9 * d2!r}}}
      throat: {{kind: throat, diameter: {d2 + 2.0 * module!r}, radius: {worm / 2.0 - module!r}, at: {face / 2.0!r}}}
      teeth:  {{kind: teeth, count: {teeth}, on_circle: {d2!r}, at: {face / 2.0!r}, width: {face!r}}}
worm:
  starts: {starts}
  hand: {hand}
  axial_module: {module!r}
  reference_diameter: {worm!r}
  tip_diameter: {worm + 2.0 * module!r}
  pressure_angle: 20 deg
  profile: ZA
  material: 16MnCr5
  thread_thickness: {{measured: {math.pi * module / 2.0!r} mm, uncertainty: 1 um}}
mesh: {{wheel: wheel.teeth, centre_distance: {(worm + d2) / 2.0!r} ±0.01, shaft_angle_error: 0.5', contact: exact, error_budget: {budget}}}
cutters:
  fly: {{kind: single-point, tip_radius: {radius!r}, insert: envelope, turned: 1'}}
machines:
  lathe: {{kind: lathe, axis_runout: 2 um}}
  head: {{kind: dividing-head, worm_ratio: 40, nose_points: left, cutter_stands: front, axis_runout: 2 um}}
setups:
  - op: 5
    machine: lathe
    looks_at_tool: +z
    hold:
      centre:     {{on: bar, by: three-jaw, at: -35, runout: 0.1 mm}}
      and_centre: {{on: bar, by: three-jaw, at: -5, runout: 0.1 mm}}
    cut: {{hub: {{}}, seat: {{error: 50 um}}, rim: {{}}, throat: {{error: 20 um}}}}
  - op: 10
    machine: head
    looks_at_tool: -z
    hold:
      centre: {{on: hub, by: collet, runout: 5 um}}
      square: {{on: seat, by: flange, face_runout: 3 um, across: {0.8 * d2!r}}}
      stop:   {{on: seat, error: 5 um}}
    head: {{tilt: {lead:.5f} deg, uncertainty: 0.5', leans: {lean}, mid_plane: {{found: after-tilt, error: 10 um}}}}
    divide: {{by: hole-circle, circle: 18, wheel: {{once_per_turn: ±12"}}, worm: {{once_per_crank: ±4"}}, setting: 2", clamp: 0"}}
    cut:
      teeth: {{cutter: fly, depth: {2.2 * module!r}, depth_from: {{surface: throat, at_most: 10 um, tool: standing}}, depth_error: 10 um}}
place:
  axis: wheel.hub
  worm_axis: {{from: wheel.seat, length: {-face / 2.0!r} ±0.010}}
require:
  - {{what: run-out, of: wheel.teeth, at_most: 30 um}}
  - {{what: mid-plane, at_most: 60 um}}
"""


TWO_STARTS = worm_job(starts=2, hand="left", module=3.0, worm=36.0, teeth=60, face=20.0, radius=40.0, budget="8 um")
NINETY = worm_job(starts=1, hand="right", module=1.5, worm=22.0, teeth=90, face=11.0, radius=18.5, budget="5 um")
