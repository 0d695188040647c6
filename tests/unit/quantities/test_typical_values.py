"""A typical value of a device is told by everything that rests on it: stacks and stock, and nothing else."""

from __future__ import annotations

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text

JOB = """
setupcheck: 1
title: Roughed and finished
units: mm
machines: {lathe-A: {kind: lathe, axis_runout: 2 um}}
parts:
  disc:
    surfaces:
      rim:  {kind: cylinder, diameter: 100, from: 0, to: 20, made: stock}
      face: {kind: face, at: 0, facing: -z, diameter: 100, made: stock}
      bore: {kind: bore, diameter: 32, from: 0, to: 20}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: soft-jaws, at: 10, runout: ROUGH}
      square: {on: face, by: parallels, face_runout: 5 um, across: 90}
    cut: {bore: {leave_on_diameter: 0.6}}
  - op: 20
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: rim, by: four-jaw, at: 10, runout: FINE}
      square: {on: face, by: parallels, face_runout: 5 um, across: 90}
    cut: {bore: {}}
require:
  - {what: run-out, of: disc.bore, about: disc.rim, at: 10, at_most: 200 um}
  - {what: allowance, of: disc.bore@20, at_least: 0.1 mm}
"""


def rests(rough: str, fine: str) -> dict[str, tuple[str, ...]]:
    """What the findings on the finished run-out and on the stock of op 20 rest on."""
    found: Review = review(read_job_text(JOB.replace("ROUGH", rough).replace("FINE", fine), "disc.yaml"))
    run_out = [f.rests_on for f in found.evaluation.findings if f.rule == "STACK-001"]
    stock = [f.rests_on for f in found.evaluation.findings if f.rule == "ALLOW-001" and "20" in f.at]
    assert (1, 1) == (len(run_out), len(stock))
    return {"run-out": run_out[0], "stock": stock[0]}


@pytest.mark.parametrize(
    ("rough", "fine", "expected"),
    [
        ("20 um", "8 um", {"run-out": (), "stock": ()}),
        # the roughed bore is gone, so what it rested on no longer matters for the finished one, but for its stock
        ("{device: soft-jaws}", "8 um", {"run-out": (), "stock": ("soft-jaws runout",)}),
        (
            "{device: soft-jaws}",
            "{device: four-jaw}",
            {"run-out": ("four-jaw runout",), "stock": ("four-jaw runout", "soft-jaws runout")},
        ),
    ],
)
def test_findings_name_the_typical_values_among_their_causes(
    rough: str, fine: str, expected: dict[str, tuple[str, ...]]
) -> None:
    assert expected == rests(rough, fine)
