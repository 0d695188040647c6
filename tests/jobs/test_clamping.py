"""Grip, overhang, thin rings and their lobes in whole jobs. Invented parts, invented figures."""

from __future__ import annotations

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known, Open
from setupcheck.rulebook import Finding

RING = """\
setupcheck: 1
title: Bearing seat ring
units: mm
parts:
  ring:
    material: CuSn12-C
    surfaces:
      tube:    {kind: cylinder, diameter: 186, from: -2, to: 22, made: stock}
      cored:   {kind: bore, diameter: 144, from: -2, to: 22, made: stock}
      outside: {kind: cylinder, diameter: 180, from: 0, to: 20}
      bore:    {kind: bore, diameter: 150 H7, from: 0, to: 20}
      front:   {kind: face, at: 20, facing: +z, diameter: 180}
      back:    {kind: face, at: 0, facing: -z, diameter: 180}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {on: cored, by: expanding-mandrel, runout: 50 um, grip: {from: 2, to: 18}}
    cut: {outside: {}, front: {}}
  - op: 20
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {on: outside, by: three-jaw, runout: 20 um, grip: {from: 5, to: 20}, grip_force: 1 kN}
      square: {on: front, by: jaws, face_runout: 10 um, across: 170}
      stop:   {on: front, error: 20 um}
    cut: {bore: {}, back: {error: 20 um, removes: [tube, cored]}}
require:
  - {what: run-out, of: ring.bore, about: ring.outside, at_most: 40 um}
"""

BAR = """\
setupcheck: 1
title: Long stud
units: mm
parts:
  stud:
    material: 42CrMo4
    surfaces:
      bar:    {kind: cylinder, diameter: 30, from: 0, to: 160, made: stock}
      neck:   {kind: cylinder, diameter: 25 h6, from: 60, to: 100}
      front:  {kind: face, at: 160, facing: +z, diameter: 30}
machines:
  lathe-A: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre:     {on: bar, by: three-jaw, at: 10, grip: {from: 0, to: 32}, runout: 50 um}
      and_centre: {on: bar, by: indicator, at: 110, runout: 50 um}
    cut: {neck: {}}
  - op: 20
    machine: lathe-A
    keeps: 10
    cut: {front: {error: 50 um}}
require:
  - {what: run-out, of: stud.neck, about: stud.bar, at_most: 200 um}
"""


def changed(text: str, *pairs: tuple[str, str]) -> str:
    for old, new in pairs:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return text


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def findings(text: str, rule: str) -> list[Finding]:
    return [f for f in judged(text).evaluation.findings if f.rule == rule]


def said(text: str, rule: str) -> list[tuple[str, str]]:
    return [(f.verdict, f.message) for f in findings(text, rule)]


def number(text: str, name: str, key: str) -> float:
    found = judged(text)
    scope = next(s for s in found.book.instances(found.book.quantities[name].per) if s.key == key)
    answer = found.book.get(name, scope)
    assert isinstance(answer, Known), answer
    assert isinstance(answer.value, float)
    return answer.value


def test_a_cut_far_out_of_the_jaws_is_named_and_one_near_is_not() -> None:
    # neck to 100: 68 mm out of jaws that end at 32, on a bar of 30; front at 160: 128 mm
    assert [f.verdict for f in findings(BAR, "CLAMP-002")] == ["warn", "pass"]
    assert ("warn", "op 20 cuts front 4.27 diameters out of the jaws with nothing to carry the end, over 3.00") in said(
        BAR, "CLAMP-002"
    )
    assert 68.0 / 30.0 == pytest.approx(number(BAR, "clamp.overhang", "10/neck"))
    assert 128.0 / 30.0 == pytest.approx(number(BAR, "clamp.overhang", "20/front"))


@pytest.mark.parametrize("support", ["centres", "steady"])
def test_a_centre_or_a_steady_carries_the_end(support: str) -> None:
    carried = changed(BAR, ("by: indicator, at: 110", f"by: {support}, at: 110"))
    assert said(carried, "CLAMP-002") == []
    short = changed(carried, ("grip: {from: 0, to: 32}", "grip: {from: 0, to: 12}"))
    assert [("pass", "the jaws of op 10 hold 12.0 mm of bar, 10.0 mm wanted")] == said(short, "CLAMP-001")


@pytest.mark.parametrize(("end", "verdict"), [("32", "pass"), ("30", "pass"), ("29.9", "warn")])
def test_a_bar_wants_one_diameter_in_the_jaws(end: str, verdict: str) -> None:
    assert [verdict] == [f.verdict for f in findings(changed(BAR, ("to: 32}", f"to: {end}}}")), "CLAMP-001")]


def test_where_no_grip_is_stated_nothing_is_said_of_grip_and_overhang() -> None:
    without = changed(BAR, ("grip: {from: 0, to: 32}, ", ""))
    assert said(without, "CLAMP-001") == said(without, "CLAMP-002") == []


def test_a_thin_ring_between_jaws_is_named() -> None:
    assert [
        (
            "warn",
            "op 20 finishes a ring held on outside whose wall is 8.3 % of its diameter, under 10.0 %; a few jaws squeeze "
            "it out of round",
        )
    ] == said(RING, "CLAMP-003")
    assert 15.0 / 180.0 == pytest.approx(number(RING, "clamp.wall_share", "20/centre"))


@pytest.mark.parametrize(
    "change",
    [
        pytest.param(("by: three-jaw, runout: 20 um, grip: {from: 5, to: 20}, grip_force: 1 kN", "by: pot-chuck, runout: 20 um"), id="pot chuck"),
        pytest.param(("bore: {}, back", "bore: {state: rough}, back"), id="only roughed"),
        pytest.param(("bore: {}, back", "bore: {leave_on_diameter: 0.5}, back"), id="stock left"),
    ],
)  # fmt: skip
def test_a_ring_that_is_not_squeezed_while_finished_is_not_named(change: tuple[str, str]) -> None:
    assert said(changed(RING, change), "CLAMP-003") == []


def test_a_thick_ring_passes_and_its_force_needs_no_lobes() -> None:
    thick = changed(RING, ("diameter: 150 H7", "diameter: 140 H7"), ("diameter: 144", "diameter: 130"))
    assert ["pass"] == [f.verdict for f in findings(thick, "CLAMP-003")]
    assert said(thick, "CLAMP-004") == []


def test_the_wall_is_that_of_the_bore_over_the_grip_and_not_of_another_place() -> None:
    # the wide recess ends at 4, the jaws begin at 5
    recess = "recess:  {kind: bore, diameter: 170, from: 0, to: 4}\n      front:   {kind"
    job = changed(RING, ("front:   {kind", recess), ("cut: {bore: {}", "cut: {recess: {}, bore: {}"))
    assert 15.0 / 180.0 == pytest.approx(number(job, "clamp.wall_share", "20/centre"))
    under = changed(job, ("grip: {from: 5, to: 20}", "grip: {from: 2, to: 20}"))
    assert 5.0 / 180.0 == pytest.approx(number(under, "clamp.wall_share", "20/centre"))


def test_the_lobes_of_the_ring_are_the_sum_on_paper() -> None:
    # R 82.5, t 15, b 20, E 90 GPa (low end of CuSn12-C): I 5625; F R^3/(E I) = 1.1092 mm; three jaws 0.030195
    assert 0.0335 == pytest.approx(number(RING, "clamp.lobing", "20/centre"), abs=5e-5)


def test_lobes_are_held_against_the_run_out_limit_of_what_is_finished() -> None:
    passing = "the jaws of op 20 leave lobes of 33.5 um on the ring held on outside, 40.0 um allowed"
    assert [("pass", passing)] == said(RING, "CLAMP-004")
    tight = changed(RING, ("at_most: 40 um", "at_most: 25 um"))
    broken = (
        "the jaws of op 20 leave lobes of 33.5 um on the ring held on outside, 25.0 um is allowed for what is "
        "finished there"
    )
    assert [("fail", broken)] == said(tight, "CLAMP-004")


def test_without_a_run_out_limit_they_are_held_against_the_size_tolerance() -> None:
    other = changed(RING, ("of: ring.bore, about: ring.outside", "of: ring.outside, about: ring.bore"))
    assert 0.040 == pytest.approx(number(other, "clamp.lobing_allowed", "20/centre"))  # 150 H7
    six = changed(other, ("150 H7", "150 H6"))
    assert ["fail"] == [f.verdict for f in findings(six, "CLAMP-004")]  # 25 um


def test_without_any_limit_the_lobes_are_computed_and_not_judged() -> None:
    free = changed(
        RING, ("of: ring.bore, about: ring.outside", "of: ring.outside, about: ring.bore"), ("150 H7", "150")
    )
    assert said(free, "CLAMP-004") == []
    assert number(free, "clamp.lobing", "20/centre") > 0.0


def test_soft_jaws_warn_where_hard_jaws_fail() -> None:
    soft = changed(RING, ("at_most: 40 um", "at_most: 25 um"), ("by: three-jaw", "by: soft-jaws"))
    assert said(soft, "CLAMP-004") == []
    assert ["warn"] == [f.verdict for f in findings(soft, "CLAMP-005")]


def test_four_jaws_leave_less_than_three() -> None:
    four = number(changed(RING, ("by: three-jaw", "by: four-jaw")), "clamp.lobing", "20/centre")
    assert 0.011466 / 0.030195 == pytest.approx(four / number(RING, "clamp.lobing", "20/centre"), rel=1e-3)


@pytest.mark.parametrize(
    ("material", "because"), [("", "parts.ring.material"), ("    material: unobtainium\n", "list")]
)
def test_a_force_without_a_known_material_is_open(material: str, because: str) -> None:
    found = findings(changed(RING, ("    material: CuSn12-C\n", material)), "CLAMP-004")
    assert [("open", ("parts.ring.material",))] == [(f.verdict, f.missing) for f in found]
    assert because in found[0].message


def test_a_ring_outside_the_range_of_the_thin_ring_is_open_with_the_reason() -> None:
    foil = changed(RING, ("diameter: 150 H7", "diameter: 177 H7"))
    found = judged(foil)
    scope = next(s for s in found.book.instances("hold") if s.key == "20/centre")
    answer = found.book.get("clamp.lobing", scope)
    assert isinstance(answer, Open)
    assert "wall over mean radius is 0.017, the thin ring is taken from 0.02 to 0.2" in answer.because
    assert ["open"] == [f.verdict for f in findings(foil, "CLAMP-004")]


def test_a_ring_on_its_shaft_is_no_ring() -> None:
    shaft = (
        "  shaft:\n    surfaces:\n      journal: {kind: cylinder, diameter: 150 p6, from: 0, to: 20}\n"
        "      step: {kind: face, at: 0, facing: +z, diameter: 170}\n"
        "    given: [{of: step, about: journal, face_runout: 2 um, across: 160}]\n"
    )
    third = (
        "  - op: 30\n    join: {outer: ring.bore, inner: shaft.journal, by: press, square: bore, "
        "stop: {on: ring.back, against: shaft.step}}\n"
        "  - op: 40\n    machine: lathe-A\n    part: ring\n    looks_at_tool: +z\n    hold:\n"
        "      centre: {on: outside, by: three-jaw, runout: 20 um, grip: {from: 0, to: 10}, grip_force: 1 kN}\n"
        "      square: {on: back, by: jaws, face_runout: 10 um, across: 170}\n"
        "    cut: {lip: {}}\n"
    )
    lip = "lip:     {kind: cylinder, diameter: 176, from: 12, to: 20}\n      front:   {kind"
    job = changed(
        RING, ("machines:\n", shaft + "machines:\n"), ("require:\n", third + "require:\n"), ("front:   {kind", lip)
    )
    assert [20] == [f.op for f in findings(job, "CLAMP-003")]


@pytest.mark.parametrize(("cored", "verdict"), [("144", "pass"), ("146", "warn")])
def test_a_ring_held_from_inside_counts_with_the_outside_as_it_is_turned(cored: str, verdict: str) -> None:
    inside = changed(RING, ("by: expanding-mandrel", "by: three-jaw"), ("diameter: 144", f"diameter: {cored}"))
    found = [f for f in findings(inside, "CLAMP-003") if f.op == 10]
    assert [verdict] == [f.verdict for f in found]
    assert (180.0 - float(cored)) / 360.0 == pytest.approx(number(inside, "clamp.wall_share", "10/centre"))


def test_a_holding_that_is_kept_counts_with_what_is_finished_later_in_it() -> None:
    later = "cut: {bore: {state: rough, to: 149}, back: {error: 20 um, removes: [tube, cored]}}\n"
    kept = "  - op: 30\n    machine: lathe-A\n    keeps: 20\n    cut: {bore: {}}\n"
    job = changed(RING, ("cut: {bore: {}, back: {error: 20 um, removes: [tube, cored]}}\n", later + kept))
    assert [20] == [f.op for f in findings(job, "CLAMP-003")]
    assert 15.0 / 180.0 == pytest.approx(number(job, "clamp.wall_share", "20/centre"))
