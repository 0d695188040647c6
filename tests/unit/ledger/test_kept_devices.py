"""Run-out and face run-out of one device whose mark is kept are two causes, also of a bought part. mm, rad."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.route import walk

JOB = """
setupcheck: 1
title: bought spindle
units: mm
parts:
  spindle:
    surfaces:
      journal:  {kind: cylinder, diameter: 32, from: 0, to: 26}
      shoulder: {kind: face, at: 0, facing: +z, diameter: 60}
      bearings: {kind: cylinder, diameter: 40, from: -80, to: -10}
    given:
      - {of: journal, about: bearings, runout: {at_most: 20 um, device: chuck-A, mark: kept}}
      - {of: shoulder, about: bearings, face_runout: {at_most: 20 um, device: chuck-A, mark: kept}, across: 56}
"""


def test_a_bought_part_read_twice_with_one_kept_device_has_an_offset_and_a_lean() -> None:
    floor = walk(read_job_text(JOB, "job.yaml"))
    axis, journal, face = (floor.now(Ref("spindle", name)) for name in ("bearings", "journal", "shoulder"))
    assert axis is not None and journal is not None and face is not None
    offset, lean = journal.axis_at(26.0) - axis.axis_at(26.0), face.lean - axis.lean
    assert offset.largest() == pytest.approx(0.010)
    assert lean.largest() == pytest.approx(0.020 / 56.0)
    assert not set(offset.terms) & set(lean.terms)
