"""A surface that nothing makes is open, with what to do; one that the blank brings, or of a part nobody machines, is not."""

from __future__ import annotations

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.sheet import as_sheet
from setupcheck.report.text import as_text
from setupcheck.shipped import example

TEXT = example("index-plate").read_text(encoding="utf-8")
SLOT = "slot:    {kind: slot, on_circle: 5.5, at: 0.625, width: 0.25}"
RULE = "ENTRY-002"


def without_the_slot(**changed: str) -> str:
    """The plate whose last operation, the one that cuts the slot, was never written; and what was asked of the slot."""
    head, _, rest = TEXT.partition("  - op: 40 ")
    kept = "\n".join(line for line in rest.splitlines() if "plate.slot" not in line)
    assert SLOT in head
    return head.replace(SLOT, changed.get("slot", SLOT)) + "\n" + kept[kept.index("require:") :]


def said(text: str) -> tuple[Review, list[tuple[str, str, str]]]:
    found = review(read_job_text(text, "plate.yaml"))
    return found, [(f.key, f.verdict, f.message) for f in found.evaluation.findings if f.rule == RULE]


def test_a_slot_without_an_operation_is_open_and_report_and_sheet_say_what_to_do() -> None:
    found, told = said(without_the_slot())
    assert told == [("plate", "open", "no operation makes slot of plate, and its blank is not said to bring that")]
    assert found.verdict == "open"
    flat = " ".join(as_text(found).split())
    assert "Do: Write it under cut of an operation, or made: stock where the blank brings it" in flat
    assert "Write it under cut of an operation" in as_sheet(found)


def test_a_slot_that_the_blank_brings_passes() -> None:
    _, told = said(without_the_slot(slot=SLOT.replace("}", ", made: stock}")))
    assert [verdict for _, verdict, _ in told] == ["pass"]


def test_the_route_as_shipped_makes_all_of_it() -> None:
    assert said(TEXT)[1] == [("plate", "pass", "all of plate is cut, or brought by the blank")]


def test_a_bought_part_that_nobody_machines_is_not_asked_for_its_operations() -> None:
    bought = "  nut:\n    material: C45\n    surfaces:\n      face: {kind: face, at: 0, facing: +z, diameter: 2}\n\n"
    _, told = said(TEXT.replace("\nmachines:", f"\n{bought}machines:", 1))
    assert [(key, verdict) for key, verdict, _ in told] == [("plate", "pass")]
