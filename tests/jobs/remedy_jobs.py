"""Two small jobs that ask for a witness and for another order, and what a printed remedy says, read back."""

from __future__ import annotations

import re
import shlex

from setupcheck.jobfile.changing import read_change
from setupcheck.jobfile.editing import Drop, Edit, Exchange
from setupcheck.shipped import shipped

_KEPT = "    keeps: 20 "
_HELD_AGAIN = """    looks_at_tool: +z
    hold:
      centre: {on: nose, by: soft-jaws, at: 20, runout: 25 um}
      square: {on: back, by: jaws, face_runout: 20 um, across: 120}
      stop:   {on: back, error: 30 um}
    #"""


def held_twice() -> str:
    """The coupling hub, taken out between roughing and finishing and held again as it was."""
    text = shipped("jobs/coupling-hub.yaml").read_text(encoding="utf-8")
    assert text.count(_KEPT) == 1
    return text.replace(_KEPT, _HELD_AGAIN)


COVERED_BORE = """
setupcheck: 1
title: Disc with a bush, its collar true to the bore under the bush
units: mm
parts:
  disc:
    material: C45
    surfaces:
      bar:     {kind: cylinder, diameter: 100, from: -40, to: 52, made: stock}
      outside: {kind: cylinder, diameter: 90, from: 0, to: 40}
      front:   {kind: face, at: 40, facing: +z, diameter: 90}
      back:    {kind: face, at: 0, facing: -z, diameter: 90}
      bore:    {kind: bore, diameter: 30 H7, from: 0, to: 40}
      collar:  {kind: cylinder, diameter: 60, from: 40, to: 50}
  bush:
    material: CuSn12-C
    surfaces:
      out:  {kind: cylinder, diameter: 30.040 ±0.004, from: 0, to: 40, hole: 20}
      hole: {kind: bore, diameter: 20, from: 0, to: 40}
      end:  {kind: face, at: 0, facing: +z, diameter: 40}
    given:
      - {of: hole, about: out, runout: 20 um}
      - {of: end, about: out, face_runout: 10 um, across: 36}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre:     {on: bar, by: three-jaw, at: -35, runout: 0.10 mm}
      and_centre: {on: bar, by: three-jaw, at: -5, runout: 0.10 mm}
    cut: {front: {error: 20 um}, outside: {}, collar: {leave_on_diameter: 1.0}}
  - op: 20
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {on: outside, by: soft-jaws, grip: {from: 20, to: 38}, runout: 20 um}
      square: {on: front, by: jaws, face_runout: 15 um, across: 80}
      stop:   {on: front, error: 20 um}
    cut: {back: {error: 20 um, removes: [bar]}, bore: {}}
  - op: 30
    join:
      outer: disc.bore
      inner: bush.out
      by: bond
      square: bore
      fit_error: 20 um
      stop: {on: disc.back, against: bush.end, error: 10 um}
  - op: 40
    machine: lathe-A
    part: disc
    looks_at_tool: +z
    hold:
      centre: {on: outside, by: soft-jaws, grip: {from: 5, to: 30}, runout: 20 um}
      square: {on: back, by: jaws, face_runout: 4 um, across: 80}
      stop:   {on: back, error: 10 um}
    cut: {collar: {}}
require:
  - {what: run-out, of: disc.collar, about: disc.bore, at_most: 30 um}
"""

WRONG_ORDER = """
setupcheck: 1
title: Ring bored on its rim before the rim is true
units: mm
parts:
  ring:
    material: C45
    surfaces:
      nose:  {kind: cylinder, diameter: 60, from: 30, to: 60}
      rim:   {kind: cylinder, diameter: 100, from: 0, to: 30}
      side:  {kind: face, at: 30, facing: +z, diameter: 100}
      back:  {kind: face, at: 0, facing: -z, diameter: 100}
      track: {kind: cylinder, diameter: 90, from: 10, to: 14}
      bore:  {kind: bore, diameter: 40, from: 0, to: 60}
      bar:   {kind: cylinder, diameter: 110, from: -40, to: 62, made: stock}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre:     {on: bar, by: three-jaw, at: -35, runout: 60 um}
      and_centre: {on: bar, by: three-jaw, at: -5, runout: 60 um}
    cut:
      nose: {}
      side: {error: 20 um}
      rim:  {leave_on_diameter: 1.0}
      bore: {leave_on_diameter: 1.0, state: rough}
      back: {leave: 0.3, removes: [bar], error: 50 um}
  - op: 20
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: four-jaw, at: 20, runout: 6 um}
      square: {on: back, by: parallels, face_runout: 5 um, across: 90}
      stop:   {on: back, error: 20 um}
    cut: {bore: {}}
  - op: 30
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {on: nose, by: soft-jaws, runout: 30 um}
      square: {on: side, by: jaws, face_runout: 10 um, across: 90}
      stop:   {on: side, error: 20 um}
    cut: {rim: {}, track: {}, back: {error: 20 um}}
require:
  - {what: run-out, of: ring.bore, about: ring.track, at_most: 40 um}
"""

WRONG_FACE = """
setupcheck: 1
title: Flange whose pocket is squared and stopped on the wrong one of two faces
units: mm
parts:
  flange:
    material: C45
    surfaces:
      bar:    {kind: cylinder, diameter: 120, from: -5, to: 80, made: stock}
      rim:    {kind: cylinder, diameter: 110, from: 0, to: 20}
      nose:   {kind: cylinder, diameter: 70, from: 20, to: 40}
      back:   {kind: face, at: 0, facing: -z, diameter: 110}
      step:   {kind: face, at: 20, facing: +z, diameter: 110}
      front:  {kind: face, at: 40, facing: +z, diameter: 70}
      bore:   {kind: bore, diameter: 30 H7, from: 0, to: 40}
      pocket: {kind: face, at: 6, facing: -z, diameter: 60}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre:     {on: bar, by: three-jaw, at: 75, runout: 0.10 mm}
      and_centre: {on: bar, by: three-jaw, at: 45, runout: 0.10 mm}
    cut: {back: {error: 20 um}, rim: {}}
  - op: 20
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: soft-jaws, at: 8, runout: 20 um}
      square: {on: back, by: jaws, face_runout: 20 um, across: 100}
      stop:   {on: back, error: 20 um}
    cut: {front: {error: 10 um, removes: [bar]}, nose: {}, bore: {}}
  - op: 30
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: soft-jaws, at: 8, runout: 20 um}
      square: {on: back, by: jaws, face_runout: 20 um, across: 100}
      stop:   {on: back, error: 20 um}
    cut: {step: {error: 10 um}}
  - op: 40
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {on: bore, by: indicator, runout: 5 um}
      square: {on: step, by: parallels, face_runout: 5 um, across: 100}
      stop:   {on: step, error: 5 um}
    cut: {pocket: {error: 10 um}}
require:
  - {what: LENGTH}
"""
SQUARENESS = "squareness, of: flange.pocket, about: flange.bore, across: 60, at_most: 15 um"
DEPTH = "length, of: flange.pocket, about: flange.front, between: [33.95 mm, 34.05 mm]"


def statements(text: str) -> list[str]:
    """The lines of a printed remedy that are typed, each put together again where it runs over lines."""
    found: list[str] = []
    depth = -1
    for line in text.splitlines():
        at = len(line) - len(line.lstrip())
        if line.strip().startswith(("--set ", "take out ", "exchange ")):
            found.append(line.strip())
            depth = at
        elif depth >= 0 and line.strip() and at == depth + 4:
            found[-1] += f" {line.strip()}"
        else:
            depth = -1
    return found


def edits_in(text: str) -> list[Edit]:
    """What a piece of a printed remedy says to type."""
    found: list[Edit] = []
    for said in statements(text):
        if said.startswith("--set "):
            word = shlex.split(said)
            assert len(word) == 2, said
            found.append(read_change(word[1]))
        elif said.startswith("take out "):
            found.append(Drop(said.removeprefix("take out ")))
        else:
            both = re.match(r"exchange setups\.(\d+) and setups\.(\d+) ", said)
            assert both is not None, said
            found.append(Exchange(int(both[1]), int(both[2])))
    return found


def proposals_in(text: str) -> list[str]:
    """Each numbered proposal of a printed remedy."""
    begin = text.index("OTHER DATUMS AND ORDERS" if "OTHER DATUMS" in text else "FEWER HOLDINGS")
    block = text[begin:].split("\n\n")[0]
    return re.split(r"\n  (?=\d  )", block)[1:]
