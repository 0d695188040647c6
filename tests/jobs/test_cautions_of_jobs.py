"""Cautions in real jobs: each is set off by a piece of a job, is quiet without it, and speaks up where the job is silent."""

from __future__ import annotations

import re
from collections.abc import Mapping

import pytest

from setupcheck.flow import rules
from setupcheck.report.text import as_text
from tests.unit.report.sample import GEAR, WHEEL, changed, flat, reviewed
from tests.unit.report.sample import PLATE as INDEX_PLATE

Changes = tuple[tuple[str, str], ...]

TURNED = """
setupcheck: 1
title: Hub for a shaft, invented
units: mm
parts:
  hub:
    material: S355J2
    surfaces:
      bar:   {kind: cylinder, diameter: 60, from: -40, to: 40, made: stock}
      front: {kind: face, at: 30, facing: +z, diameter: 58}
      rim:   {kind: cylinder, diameter: 58, from: 0, to: 30}
      bore:  {kind: bore, diameter: 20 H7, from: 0, to: 30}
      back:  {kind: face, at: 0, facing: -z, diameter: 58}
  shaft:
    material: S355J2
    surfaces:
      journal: {kind: cylinder, diameter: 20.030 ±0.003, from: 0, to: 30}
cutters:
  tool: {kind: single-point}
machines:
  shop: {kind: lathe, axis_runout: 2 um}
setups:
  - op: 10
    machine: shop
    looks_at_tool: +z
    hold:
      centre:     {on: bar, by: three-jaw, at: -20, runout: 0.1 mm}
      and_centre: {on: bar, by: three-jaw, at: -5, runout: 0.1 mm}
    cut: {front: {}, rim: {cutter: tool}, bore: {}, back: {removes: [bar]}}
  - op: 20
    join: {outer: hub.bore, inner: shaft.journal, by: shrink, joint: oiled, heat: {hub: 150 degC, by: oven}}
"""
BRONZE, LEADED, BERYLLIUM = (("material: S355J2\n    surfaces:\n      bar", f"material: {name}\n    surfaces:\n      bar")
                             for name in ("C95400", "C93200", "C17200"))  # fmt: skip
UNKNOWN = (BRONZE[0], BRONZE[1].replace("C95400", "bronze"))
IRON, RING = ((BRONZE[0], BRONZE[1].replace("C95400", name)) for name in ("EN-GJL-250", "100Cr6"))
SINTERED = (BRONZE[0], BRONZE[1].replace("C95400", "sintered iron"))
HARDENED_SHAFT = ("material: S355J2\n    surfaces:\n      journal", "material: 16MnCr5\n    surfaces:\n      journal")
BRONZE_SHAFT = ("material: S355J2\n    surfaces:\n      journal", "material: C95400\n    surfaces:\n      journal")
FLAME, PLATE, COIL, OIL = (("by: oven", f"by: {way}") for way in ("flame", "hot-plate", "induction", "oil-bath"))
DEGREASED = ("joint: oiled", "joint: degreased")
NO_JOINT = ("joint: oiled, ", "")
PRESSED = ("by: shrink, joint: oiled, heat: {hub: 150 degC, by: oven}", "by: press, joint: oiled")
GLUED, SCREWED = ((PRESSED[0], f"by: {way}") for way in ("bond", "screw"))
GRINDER, HEAD, MILL = (("{kind: lathe,", f"{{kind: {kind},") for kind in ("grinder", "dividing-head", "mill"))
WHEEL_TOOL, BROACH = (("{kind: single-point}", f"{{kind: {kind}}}") for kind in ("grinding-wheel", "broach"))
NO_FACES = (
    "cut: {front: {}, rim: {cutter: tool}, bore: {}, back: {removes: [bar]}}",
    "cut: {rim: {cutter: tool}, bore: {}}",
)
INSERT = ("{kind: single-point}", "{kind: single-point, insert: envelope}")
BLIND = (
    "bore:  {kind: bore, diameter: 20 H7, from: 0, to: 30}",
    "bore:  {kind: bore, diameter: 20 H7, from: 0, to: 25}",
)
HOLLOW = ("diameter: 20.030 ±0.003, from: 0, to: 30", "diameter: 20.030 ±0.003, hole: 8, from: 0, to: 30")
STOPPED = (
    ("to: 30}\ncutters", "to: 30}\n      shoulder: {kind: face, at: 0, facing: +z, diameter: 30}\ncutters"),
    ("by: shrink, joint", "by: shrink, stop: {on: hub.back, against: shaft.shoulder, error: 5 um}, joint"),
)
STOP_PRESSED = (*STOPPED, ("by: shrink, stop", "by: press, stop"), (", heat: {hub: 150 degC, by: oven}}", "}"))
NEXT = (
    "by: oven}}\n",
    "by: oven}}\n  - op: 30\n    part: hub\n    machine: shop\n    looks_at_tool: +z\n"
    "    hold: {centre: {on: rim, by: four-jaw, at: 10, runout: 5 um}, square: {on: back, by: jaws, face_runout: 5 um, "
    "across: 50}, stop: {on: back, error: 5 um}}\n    cut: {front: {cutter: tool}}\n",
)
TAPPED = ("      back:", "      taps:  {kind: holes, count: 4, on_circle: 40, at: 30, diameter: 5}\n      back:")


def cold(by: str, shaft: str = "") -> tuple[str, str]:
    return "by: oven}", f"by: oven, cold_by: {by}{shaft}}}"


def bar(out: str) -> tuple[str, str]:
    return "{kind: single-point}", f"{{kind: boring-head, bar_diameter: 10, overhang: {out}}}"


def gripped(at: str) -> tuple[str, str]:
    return "{on: bar, by: three-jaw, at: -20,", f"{{on: bar, by: three-jaw{at},"


def turning(said: str) -> tuple[str, str]:
    return "    cut: {front", f"    turning: {{{said}}}\n    cut: {{front"


GRIPPED = ("at: -20, runout", "at: -20, grip_force: 2 kN, runout")


SET_OFF: Mapping[str, tuple[int, Changes, Changes]] = {
    "leaded-alloy-dust": (10, (LEADED,), (BRONZE,)),
    "beryllium-copper": (10, (BERYLLIUM, GRINDER), (BERYLLIUM,)),
    "beryllium-copper-cut": (10, (BERYLLIUM,), (BRONZE,)),
    "beryllium-copper-heat": (20, (BERYLLIUM,), (BERYLLIUM, PRESSED)),
    "bearing-ring-heat": (20, (RING, ("hub: 150 degC", "hub: 90 degC")), (RING, ("hub: 150 degC", "hub: 89 degC"))),
    "carbide-dust": (10, (INSERT,), ()),
    "insert-at-the-bench-wheel": (10, (INSERT,), ()),
    "grinding-wheel": (10, (WHEEL_TOOL,), ()),
    "grinding-dust-and-coolant": (10, (WHEEL_TOOL, MILL), (MILL,)),
    "grinding-wheel-in-a-lathe": (10, (WHEEL_TOOL, MILL), (WHEEL_TOOL, GRINDER)),
    "diamond-on-steel": (10, (INSERT,), ()),
    "coolant-mist": (10, (WHEEL_TOOL,), ()),
    "wheel-overspeed": (10, (GRINDER,), ()),
    "side-grinding": (10, (GRINDER,), (GRINDER, NO_FACES)),
    "broach-force": (10, (BROACH,), (WHEEL_TOOL,)),
    "head-lifting": (10, (HEAD,), ()),
    "boring-bar-overhang": (10, (bar("40"),), (bar("39"),)),
    "jaws-protrude": (10, (("at: -20,", "at: -20, jaws_stand_out: 8 mm,"),), (("at: -20,", "at: -20, jaws_stand_out: 0,"),)),
    "chuck-speed": (10, (turning("speed: 2500 rpm, chuck_speed: 2500 rpm"),), (turning("speed: 2499 rpm, chuck_speed: 2500 rpm"),)),
    "off-centre-mass": (10, (GRIPPED, turning("speed: 1910 rpm, chuck_speed: 2500 rpm, off_centre: 0.5 kg, off_by: 10 mm")),
                        (GRIPPED, turning("speed: 1909 rpm, chuck_speed: 2500 rpm, off_centre: 0.5 kg, off_by: 10 mm"))),
    "spindle-rear-bar": (10, (turning("speed: 500 rpm, chuck_speed: 2500 rpm, bar_behind: 300 mm"),),
                         (turning("speed: 499 rpm, chuck_speed: 2500 rpm, bar_behind: 900 mm"),)),
    "work-overhang": (10, (("from: -40, to: 40,", "from: -200, to: 40,"), gripped(", at: -140")), (gripped(", at: -30"),)),
    "open-flame-alloy": (20, (LEADED, FLAME), (BRONZE, FLAME)),
    "open-flame-fire": (20, (FLAME,), ()),
    "zinc-fume": (20, (LEADED, FLAME), (LEADED,)),
    "heat-above-cap": (20, (("hub: 150 degC", "hub: 345 degC"),), (("hub: 150 degC", "hub: 340 degC"),)),
    "heat-uneven": (20, (PLATE,), (OIL,)),
    "induction-implant": (20, (COIL,), (PLATE,)),
    "oil-bath-flash-point": (20, (OIL,), (PLATE,)),
    "oil-bath-water": (20, (OIL,), (PLATE,)),
    "solvent-before-heat": (20, (DEGREASED,), ()),
    "cast-iron-heat": (20, (IRON,), (IRON, PRESSED)),
    "sintered-oil-heat": (20, (SINTERED,), (SINTERED, PRESSED)),
    "sealed-cavity-heat": (20, (BLIND,), ()),
    "sealed-cavity-press": (20, (BLIND, PRESSED), (PRESSED,)),
    "sealed-cavity-cold": (20, (cold("dry-ice"), BLIND), (cold("dry-ice"),)),
    "chilled-hollow-shaft": (20, (cold("freezer"), HOLLOW), (cold("freezer"),)),
    "machined-while-hot": (30, (NEXT,), (NEXT, ("hub: 150 degC", "hub: 47 degC"))),
    "hub-held-while-cooling": (20, STOPPED, STOP_PRESSED),
    "liquid-air-and-oil": (20, (cold("liquid-nitrogen"),), (cold("dry-ice"),)),
    "dry-ice-room": (20, (cold("dry-ice"),), (cold("freezer"),)),
    "liquid-nitrogen-room": (20, (cold("liquid-nitrogen"),), (cold("dry-ice"),)),
    "nitrogen-bath-spits": (20, (cold("liquid-nitrogen"),), (cold("dry-ice"),)),
    "cold-part-and-frost": (20, (cold("freezer"),), ()),
    "cold-brittle-steel": (20, (cold("dry-ice"),), (cold("dry-ice"), BRONZE_SHAFT)),
    "hub-burst": (20, (IRON,), (HARDENED_SHAFT,)),
    "brittle-in-press": (20, (PRESSED, HARDENED_SHAFT), (PRESSED,)),
    "uncured-adhesive": (20, (GLUED,), (SCREWED,)),
    "adhesive-parted-by-heat": (20, (GLUED,), (SCREWED,)),
}  # fmt: skip
"""Caution: its operation, what sets it off, and a job as near to that as can be which does not."""

SILENT: Mapping[str, tuple[Changes, str]] = {
    "leaded-alloy-dust": ((UNKNOWN,), "parts.hub.material"),
    "beryllium-copper": ((UNKNOWN, GRINDER), "parts.hub.material"),
    "beryllium-copper-cut": ((UNKNOWN,), "parts.hub.material"),
    "beryllium-copper-heat": ((UNKNOWN,), "parts.hub.material"),
    "bearing-ring-heat": ((RING, ("hub: 150 degC, ", "")), "setups.20.join.heat.hub"),
    "grinding-wheel": ((("    machine: shop\n", ""),), "setups.10.machine"),
    "grinding-wheel-in-a-lathe": ((WHEEL_TOOL, ("    machine: shop\n", "")), "setups.10.machine"),
    "wheel-overspeed": ((("    machine: shop\n", ""),), "setups.10.machine"),
    "boring-bar-overhang": ((("{kind: single-point}", "{kind: boring-head, bar_diameter: 10}"),), "cutters.tool.overhang"),
    "chuck-speed": ((turning("speed: 600 rpm"),), "setups.10.turning.chuck_speed"),
    "off-centre-mass": ((turning("speed: 600 rpm, chuck_speed: 2500 rpm, off_centre: 0.5 kg, off_by: 10 mm"),),
                        "setups.10.hold.centre.grip_force"),
    "spindle-rear-bar": ((turning("bar_behind: 300 mm"),), "setups.10.turning.speed"),
    "open-flame-alloy": ((UNKNOWN, FLAME), "parts.hub.material"),
    "zinc-fume": ((UNKNOWN, FLAME), "parts.hub.material"),
    "heat-above-cap": ((FLAME,), "setups.20.join.heat.oven_error"),
    "heat-uneven": (((", by: oven", ""),), "setups.20.join.heat.by"),
    "oil-bath-flash-point": (((", by: oven", ""),), "setups.20.join.heat.by"),
    "solvent-before-heat": ((NO_JOINT,), "setups.20.join.joint"),
    "sintered-oil-heat": (((BRONZE[0], "surfaces:\n      bar"),), "parts.hub.material"),
    "sealed-cavity-heat": ((BLIND, ("hub: 150 degC, ", "")), "setups.20.join.heat.hub"),
    "machined-while-hot": ((NEXT, ("hub: 150 degC, ", "")), "setups.20.join.heat.hub"),
    "cold-brittle-steel": ((cold("freezer"),), "setups.20.join.heat.shaft"),
    "cold-part-and-frost": ((("by: oven}", "by: oven, shaft: -30 degC}"),), "setups.20.join.heat.cold_by"),
    "hub-burst": ((UNKNOWN,), "parts.hub.material"),
    "brittle-in-press": ((PRESSED, ("shaft:\n    material: S355J2\n", "shaft:\n")), "parts.shaft.material"),
}  # fmt: skip
"""Caution: a job that leaves out what would settle it, and the key to fill."""
OF_THE_CUT = ("leaded-alloy-dust", "beryllium-copper", "beryllium-copper-cut", "boring-bar-overhang")
"""Those of op 10 whose key is not one of the setup."""


def asked(text: str) -> dict[tuple[str, int | None], str]:
    """(caution, operation) -> why it is shown although nothing settles it, "" where it is certain."""
    return {(c.id, c.op): c.because for c in reviewed(text).evaluation.cautions}


@pytest.mark.parametrize("name", SET_OFF)
def test_a_caution_is_set_off_by_what_it_is_about_and_by_nothing_near_it(name: str) -> None:
    op, with_it, without = SET_OFF[name]
    assert "" == asked(changed(TURNED, *with_it))[name, op]
    assert (name, op) not in asked(changed(TURNED, *without))


@pytest.mark.parametrize("name", SILENT)
def test_a_caution_that_the_job_does_not_settle_is_printed_and_names_the_key(name: str) -> None:
    without, key = SILENT[name]
    op = 10 if "setups.10" in key or name in OF_THE_CUT else 30 if NEXT in without else 20
    how = "not known of bronze" if UNKNOWN in without else "not stated"
    assert f"{how}: {key}" == asked(changed(TURNED, *without))[name, op]


def test_sintered_iron_is_not_asked_about_beryllium_and_bronze() -> None:
    said = {name for name, _ in asked(changed(TURNED, SINTERED))}
    assert "sintered-oil-heat" in said
    assert not said & {"beryllium-copper-heat", "beryllium-copper-cut", "bronze-chips"}


def test_plain_turning_of_steel_says_no_more_than_it_did() -> None:
    found = asked(TURNED)
    assert {"chuck-key-and-jaws", "gloves-near-spindle"} == {name for name, op in found if op == 10}
    assert {"glove-heat-rating", "hot-part", "shrink-seized-halfway"} == {name for name, op in found if op == 20}
    assert {""} == set(found.values())


def test_holes_without_a_cutter_may_be_drilled_and_are_never_broached() -> None:
    found = asked(changed(INDEX_PLATE, ("        cutter: reamer\n", "")))
    in_doubt = {name for (name, _), because in found.items() if because.endswith(".cut.holes.cutter")}
    assert in_doubt and "broach-force" not in in_doubt


def test_a_hub_with_tapped_holes_may_trap_as_well() -> None:
    assert ("sealed-cavity-heat", 20) in asked(changed(TURNED, TAPPED))


def test_a_bore_in_steps_that_goes_right_through_traps_nothing() -> None:
    steps = (BLIND[0], BLIND[1] + "\n      rest:  {kind: bore, diameter: 12, from: 25, to: 30}")
    assert ("sealed-cavity-heat", 20) not in asked(changed(TURNED, steps))


def test_a_hub_only_warmed_traps_nothing_that_matters() -> None:
    # 10 K of the oven on top: 47 + 10 stays under 58 degC, 48 + 10 does not
    assert ("sealed-cavity-heat", 20) not in asked(changed(TURNED, BLIND, ("hub: 150 degC", "hub: 47 degC")))
    assert ("sealed-cavity-heat", 20) in asked(changed(TURNED, BLIND, ("hub: 150 degC", "hub: 48 degC")))


def test_a_shaft_stated_no_colder_than_fifty_below_is_not_brittle() -> None:
    said = ", cold_error: 2 K, shaft: -4"
    assert ("cold-brittle-steel", 20) not in asked(changed(TURNED, cold("freezer", f"{said}8 degC")))
    assert "" == asked(changed(TURNED, cold("freezer", f"{said}9 degC")))["cold-brittle-steel", 20]  # it may have -51


def test_what_the_certificate_says_of_a_hub_counts_for_its_cautions() -> None:
    def with_properties(stated: str) -> tuple[str, str]:
        return BRONZE[0], BRONZE[0].replace("\n    surfaces", f"\n    properties: {{{stated}}}\n    surfaces")

    # 150 degC of the oven and its 10 K stay under a temper of 220 less 50, and pass one of 200 less 50
    assert ("heat-above-cap", 20) not in asked(changed(TURNED, with_properties("last_temper: 220 degC")))
    assert ("heat-above-cap", 20) in asked(changed(TURNED, with_properties("last_temper: 200 degC")))
    assert ("hub-burst", 20) in asked(changed(TURNED, with_properties("brittle: true")))


def test_a_press_fit_of_an_iron_hub_asks_for_hub_and_pads() -> None:
    found = asked(changed(TURNED, PRESSED, IRON))
    assert {("hub-burst", 20), ("brittle-in-press", 20), ("press-force", 20)} <= set(found)
    assert ("sealed-cavity-heat", 20) not in found and ("solvent-before-heat", 20) not in found


def test_teeth_are_sharp_and_a_mesh_nips_in_the_jobs_that_have_them() -> None:
    assert {("sharp-fresh-teeth", 40), ("nip-of-worm-and-wheel", None)} <= set(asked(WHEEL))
    gear = asked(GEAR)
    assert ("sharp-fresh-teeth", 40) in gear and ("nip-of-worm-and-wheel", None) not in gear
    assert ("sharp-fresh-teeth", 10) not in asked(TURNED)


def test_every_caution_is_set_off_by_a_job_here_or_stands_among_the_first() -> None:
    here = {*SET_OFF, "sharp-fresh-teeth", "nip-of-worm-and-wheel"}
    first = {
        "chuck-key-and-jaws", "indicating-out-of-gear", "shims-held-captive", "between-centres", "fly-cutter-indexing",
        "fly-cutter-one-screw", "hands-while-indexing", "drill-and-reamer-chips", "gloves-near-spindle", "bronze-chips",
        "tilted-head-drops", "hot-part", "glove-heat-rating", "shrink-seized-halfway", "press-force", "press-stand-clear",
    }  # fmt: skip
    assert here | first == {c.id for c in rules().cautions}
    assert len(here | first) >= 34


@pytest.mark.parametrize("caution", rules().cautions, ids=lambda c: c.id)
def test_a_caution_is_at_most_three_short_sentences(caution: object) -> None:
    text = caution.text  # type: ignore[attr-defined]
    assert len(re.findall(r"[.!?](?:\s|$)", text)) <= 3, text
    assert len(text) <= 290


# -- how far a part stands out


def stands_out(text: str) -> float | None:
    found = reviewed(text)
    scope = next(s for s in found.book.instances("hold") if s.key == "10/centre")
    answer = found.book.get("hold.overhang", scope)
    return answer.value if answer is not None else None  # type: ignore[union-attr, return-value]


@pytest.mark.parametrize(
    ("at", "diameters"),
    [
        (", at: -20", 60.0 / 60.0),  # stock ends at 40
        (", grip: {from: -40, to: -10}", 50.0 / 60.0),
        ("", 80.0 / 60.0),  # not stated where on the bar: from its far end
    ],
)
def test_a_part_stands_out_from_its_grip_to_its_far_end(at: str, diameters: float) -> None:
    assert diameters == pytest.approx(stands_out(changed(TURNED, gripped(at))))


def test_a_part_turned_round_stands_out_the_other_way() -> None:
    # 20 above the stock's lower end at -40
    assert 20.0 / 60.0 == pytest.approx(stands_out(changed(TURNED, ("looks_at_tool: +z", "looks_at_tool: -z"))))


def test_a_part_with_a_centre_or_a_steady_at_its_other_end_does_not_stand_out() -> None:
    second = "and_centre: {on: bar, by: three-jaw, at: -5,"
    for support in ("centres", "steady"):
        assert stands_out(changed(TURNED, (second, second.replace("three-jaw", support)))) is None


# -- how they are printed


def test_the_same_question_at_two_operations_is_printed_once() -> None:
    text = flat(as_text(reviewed(changed(TURNED, ("    machine: shop\n", "")))))
    assert 1 == text.count("Hold the spindle's highest speed")
    again = changed(GEAR, ("machine: lathe-C\n", "\n"))
    assert "op 10, 20 and 30, wheel-overspeed [to check]: Hold the" in flat(as_text(reviewed(again)))
    assert "(not stated: setups.10.machine; not stated: setups.20.machine;" in flat(as_text(reviewed(again)))


def test_a_caution_in_doubt_says_why_and_one_that_is_not_printed_is_named() -> None:
    assert (
        "never dry-sand it. The limit in the air is 30 ug/m3 (EU; OSHA has 50). (not known of bronze: parts.hub.material)"
        in flat(as_text(reviewed(changed(TURNED, UNKNOWN))))
    )
    short, long = as_text(reviewed(WHEEL)), as_text(reviewed(WHEEL), everything=True)
    assert "more, printed with --all: sharp-fresh-teeth (op 40), head-lifting (op 40)" in flat(short)
    assert "printed with --all" not in long and "edges and burrs like knives" in flat(long)


def test_a_caution_of_the_whole_job_comes_last_and_belongs_to_no_operation() -> None:
    text = as_text(reviewed(WHEEL), everything=True)
    assert text.index("  op 70: If the hub stops") < text.index("  job: Worm and wheel draw fingers in")
    assert "op None" not in text


def test_what_is_certain_is_printed_before_what_is_in_doubt() -> None:
    text = flat(as_text(reviewed(changed(TURNED, LEADED, (", heat: {hub: 150 degC, by: oven}", "")))))
    assert "If the hub stops half way" in text and "more, printed with --all:" in text
