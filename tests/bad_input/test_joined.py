"""Bought parts and joinings that cannot be; holdings that were opened after all. What only looks odd is accepted."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from tests.bad_input.ring import JOINED, refused, spoilt

JOIN = "setups.30.join"
GIVEN = "parts.spindle.given"


def said(text: str) -> list[str]:
    """Path and sentence of every problem of a text."""
    return [f"{p.path} | {p.problem}. {p.hint}" for p in refused(text).problems]


def test_the_joined_job_itself_is_accepted() -> None:
    assert read_job_text(JOINED, "job.yaml").job.setups[-1].join is not None


TRAPS: dict[str, tuple[str, str, str]] = {
    "a bought face read on a circle larger than itself": (
        "across: 56",
        "across: 62",
        f"{GIVEN}[2].across | the indicator cannot run on 62 mm, shoulder is 60 mm. Write the circle it ran on",
    ),
    "a bought part's direction by a tooth": (
        "bearings, runout: 2 um",
        "bearings, runout: {measured: 2 um, high_at: tooth 3}",
        f"{GIVEN}[1].runout.high_at | 'tooth 3' means nothing here. Write mark, or an angle from it, as in 90 deg",
    ),
    "a joint's direction by a jaw": (
        "square: bore\n",
        "square: bore\n      fit_error: {measured: 2 um, high_at: jaw 1}\n",
        f"{JOIN}.fit_error.high_at | 'jaw 1' means nothing here. Write mark, or an angle from it, as in 90 deg",
    ),
    "a run-out said twice": (
        "{of: journal, about: bearings, runout: 2 um}",
        "{of: journal, about: bearings, runout: 2 um}\n      - {of: journal, about: shoulder, runout: 3 um}",
        f"{GIVEN}[2].runout | the run-out of journal stands in given[1] already. Keep one of them",
    ),
    "a distance said twice": (
        "{of: journal, about: bearings, runout: 2 um}",
        "{of: shoulder, from: bearings, length: 10 \u00b10.02}\n"
        "      - {of: spindle.shoulder, from: journal, length: 0 \u00b10.02}",
        f"{GIVEN}[2].length | the distance of shoulder stands in given[1] already. Keep one of them",
    ),
    "a part joined with itself": (
        "inner: spindle.journal",
        "inner: ring.hub",
        f"{JOIN}.inner | ring.bore and ring.hub are surfaces of the same part. Write a surface of the part that goes in",
    ),
    "outer and inner swapped": (
        "outer: ring.bore\n      inner: spindle.journal",
        "outer: spindle.journal\n      inner: ring.bore",
        f"{JOIN}.outer | spindle.journal is a cylinder and ring.bore is a bore. Swap outer and inner",
    ),
    "a cylinder that should take something in": (
        "outer: ring.bore",
        "outer: ring.rim",
        f"{JOIN}.outer | ring.rim is a cylinder, which takes nothing in. Write a bore, a taper or a thread",
    ),
    "a face that should go in": (
        "inner: spindle.journal",
        "inner: spindle.shoulder",
        f"{JOIN}.inner | spindle.shoulder is a face, which goes into nothing. Write a cylinder, a taper or a thread",
    ),
    "a journal of another size": (
        "diameter: 32 p6",
        "diameter: 32.7",
        f"{JOIN}.inner | ring.bore is 32 mm and spindle.journal is 32.7 mm. Write two surfaces that fit each other",
    ),
    "faces on the wrong parts": (
        "on: ring.back, against: spindle.shoulder",
        "on: spindle.shoulder, against: ring.back",
        f"{JOIN}.stop.on | spindle.shoulder belongs to the inner part. Swap on and against",
    ),
    "a face of the inner part alone": (
        "on: ring.back, against: spindle.shoulder",
        "on: spindle.shoulder",
        f"{JOIN}.stop.on | spindle.shoulder belongs to the inner part. Swap on and against",
    ),
    "both faces on the inner part": (
        "on: ring.back",
        "on: spindle.shoulder",
        f"{JOIN}.stop.on | spindle.shoulder belongs to the inner part. Write a face of ring",
    ),
    "both faces on the outer part": (
        "against: spindle.shoulder",
        "against: ring.front",
        f"{JOIN}.stop.against | ring.front belongs to the outer part. Write a face of spindle",
    ),
}


@pytest.mark.parametrize("trap", TRAPS)
def test_a_joining_that_cannot_be_is_told_at_its_place(trap: str) -> None:
    old, new, message = TRAPS[trap]
    assert [message] == said(spoilt(old, new, JOINED))


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("diameter: 32 p6", "diameter: 32.6"),
        ("journal: {kind: cylinder, diameter: 32 p6", "journal: {kind: taper, diameter: 36"),
        ("square: bore", "square: bore\n      clearance: [0.5 mm, 0.8 mm]"),
        ("bore: {}", "bore: {leave_on_diameter: 0.7}"),
        ("bearings, runout: 2 um", "bearings, runout: {measured: 2 um, high_at: -20 deg}"),
        ("bearings, runout: 2 um", "bearings, runout: {measured: 2 um, high_at: mark}"),
        ("about: bearings, runout: 2 um}", "about: bearings, runout: 2 um, face_runout: 3 um, across: 30}"),
    ],
    ids=["within-2-percent", "taper", "wide-clearance", "unfinished-bore", "angle", "mark", "two-figures-in-one"],
)
def test_a_joining_that_looks_odd_is_accepted(old: str, new: str) -> None:
    text = spoilt(old, new, JOINED)
    if "clearance: [0.5" in new or "leave_on_diameter" in new:  # 0.7 mm apart, and something says why
        text = spoilt("diameter: 32 p6", "diameter: 31.3", text)
    assert read_job_text(text, "job.yaml")


BACK = "cut: {teeth: {error: 20 um}, back: {error: 15 um}}\n"
KEPT = """\
  - op: 25
    machine: lathe-A
    {between}
  - op: 27
    machine: lathe-A
    keeps: 20
    cut: {{back: {{error: 10 um}}}}
"""
HOLD = "hold: {centre: {on: bore, by: spigot, runout: 3 um}, square: {on: front, face_runout: 4 um, across: 44}}"


def kept(between: str, text: str = JOINED) -> str:
    """The joined job with op 27 keeping the holding of op 20, and a setup in between."""
    return spoilt(BACK, BACK + KEPT.format(between=between), text)


def test_a_holding_that_another_setup_has_opened_is_not_kept() -> None:
    again = kept(f"looks_at_tool: -z\n    {HOLD}\n    cut: {{back: {{error: 12 um}}}}")
    assert ["setups.27.keeps | operation 25 opened that holding. Write a hold of its own"] == said(again)


def test_a_holding_is_kept_over_one_that_kept_it_too() -> None:
    assert read_job_text(kept("keeps: 20\n    cut: {back: {error: 12 um}}"), "job.yaml")


def test_a_holding_is_kept_while_another_part_is_held_elsewhere() -> None:
    other = "looks_at_tool: +z\n    hold: {centre: {on: bearings, by: collet, at: -40, runout: 3 um}}"
    assert read_job_text(kept(f"{other}\n    cut: {{spindle.journal: {{}}}}"), "job.yaml")


def test_a_holding_is_kept_over_a_joining_but_not_over_a_hold_of_the_part_joined() -> None:
    join = JOINED[JOINED.index("  - op: 30\n") : JOINED.index("require:\n")]
    once = JOINED.replace(join, "")
    joined_at_25 = kept("X", once).replace(
        "  - op: 25\n    machine: lathe-A\n    X\n", join.replace("op: 30", "op: 25")
    )
    assert read_job_text(joined_at_25, "job.yaml")
    held = (
        "  - op: 26\n    machine: lathe-A\n    looks_at_tool: +z\n"
        "    hold: {centre: {on: bearings, by: collet, at: -40, runout: 3 um}}\n    cut: {spindle.shoulder: {}}\n"
    )
    opened = spoilt("  - op: 27\n", held + "  - op: 27\n", joined_at_25)
    assert ["setups.27.keeps | operation 26 opened that holding. Write a hold of its own"] == said(opened)
