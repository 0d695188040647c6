"""Writes small rule books into a folder, so that a test can spoil one entry and see what is said."""

from __future__ import annotations

from pathlib import Path

from setupcheck.rulebook import RuleBook, load_rulebook

from .fakebook import FakeQuantity

SOURCES = "ours: {title: our own choice}\ntrade: {title: practice of the trade, note: no document}\n"
CAUTIONS = """\
closing_line: Planning aid only.
cautions:
  - {id: hot-part, severity: caution, per: join, quantity: join.heat, at_least: 60 degC, text: It burns.,
     sources: [{ref: ours, kind: screening choice}]}
  - {id: press-force, severity: stop-and-check, per: join, when: {join.by: press}, text: Check the press.,
     sources: [{ref: ours, place: the press, kind: screening choice}]}
  - {id: gloves, severity: caution, per: hold, when: {setup.machine_kind: [lathe, mill]}, text: No gloves.,
     sources: [{ref: trade, kind: from memory}, {ref: ours, place: hands, kind: screening choice}]}
"""
RULE = """\
- id: HOLD-001
  title: The run-out is small
  quantity: hold.runout
  require: {at_most: 20 um}
  level: fail
  message: "op {op}: {name} runs out {value}, {limit} allowed"
  remedy: True it.
  why: It shows.
  sources: [{ref: ours, place: here, kind: screening choice}, {ref: trade, kind: from memory}]
"""
PLACE_OF_HOLD = "rules/hold.yaml"
QUANTITIES = {
    q.name: q
    for q in (
        FakeQuantity("hold.runout", "hold", "um", 1),
        FakeQuantity("hold.plan", "hold", "mm", 3),
        FakeQuantity("hold.u", "hold", "um", 2),
        FakeQuantity("hold.state", "hold", "", 0),
        FakeQuantity("hold.lean", "hold", "arcsec", 1),
        FakeQuantity("hold.chance", "hold", "%", 0),
        FakeQuantity("join.heat", "join", "degC", 0),
        FakeQuantity("stack.worst", "stack", "stack", 1),
        FakeQuantity("stack.limit", "stack", "stack", 1),
    )
}


def write(folder: Path, *, hold: str = RULE, cautions: str = CAUTIONS, sources: str = SOURCES, **others: str) -> Path:
    """The rule folder, made under `folder`; `others` are more family files by name."""
    rules = folder / "rules"
    rules.mkdir(exist_ok=True)
    files = {"book": 'version: "7"\n', "sources": sources, "cautions": cautions, "hold": hold, **others}
    for name, text in files.items():
        (rules / f"{name}.yaml").write_text(text, encoding="utf-8")
    return rules


def load(folder: Path, **files: str) -> RuleBook:
    return load_rulebook(write(folder, **files), quantities=QUANTITIES)
