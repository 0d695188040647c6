"""What is usual for a class of materials: the shipped table, its reader, and what of a job's own values is told."""

from __future__ import annotations

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.models import Part
from setupcheck.physics.materials import CLASSES, EVIDENCE, FAMILIES, Material, Range
from setupcheck.quantities.contents import material_class, material_family
from setupcheck.quantities.material_classes import ANY_METAL, FILE, Usual, classes, read_classes, usual_for
from setupcheck.quantities.material_data import materials
from setupcheck.quantities.stated import USUAL, odd_properties
from setupcheck.shipped import shipped

from .joint_text import WHOLE, changed, finding, reviewed
from .test_stuff import ring_of

TEXT = shipped(FILE).read_text("utf-8")
UNITS = {  # how a planner writes one property: what its base unit is multiplied with, and the unit
    "modulus": (1e-3, "GPa"),
    "poisson": (1.0, ""),
    "expansion": (1e6, "um/m/K"),
    "density": (1.0, ""),
    "specific_heat": (1.0, ""),
    "conductivity": (1.0, "W/mK"),
}
ONE_OF = {  # an unlisted material of each class
    "tin-bronze": "CuSn10-C",
    "aluminium-bronze": "CuAl10Ni5Fe4",
    "brass": "CuZn39Pb3",
    "copper": "CuCr1Zr",
    "copper-nickel": "CuNi10Fe1Mn",
    "steel": "34CrNiMo6",
    "austenitic-stainless": "316L",
    "martensitic-stainless": "440C",
    "grey-iron": "EN-GJL-300",
    "ductile-iron": "EN-GJS-600-3",
    "aluminium-alloy": "7075-T6",
    ANY_METAL: "TiAl6V4",
}
CASES = [(name, key) for name in classes() for key in UNITS]


def told(material: str | None, **properties: object) -> str | None:
    """What is said of a part called wheel that states these properties."""
    surfaces = {"bore": {"kind": "bore", "diameter": 32, "from": 0, "to": 20}}
    given = {"material": material, "properties": properties or None, "surfaces": surfaces}
    return odd_properties(Part.model_validate(given), "wheel")


def typed(key: str, value: float) -> str:
    """A value as a planner types it, to ten figures."""
    times, unit = UNITS[key]
    return f"{value * times:.10g} {unit}".strip()


# -- the table --------------------------------------------------------------------------------------------------------


def test_every_class_and_any_metal_stand_in_the_table_and_each_has_an_example_here() -> None:
    assert {*CLASSES, ANY_METAL} == set(classes()) == set(ONE_OF)
    for name, one in ONE_OF.items():
        assert ("" if name == ANY_METAL else name) == material_class(one)


@pytest.mark.parametrize("each", materials().values(), ids=lambda m: m.name)
def test_no_material_of_the_list_lies_outside_what_is_usual_for_its_class(each: Material) -> None:
    usual = classes()[each.of_class]
    assert each.conductivity is not None
    for low, high, at in (
        (each.modulus.low, each.modulus.high, usual.modulus),
        (each.heating.low, each.heating.high, usual.expansion),
        (each.poisson.value, each.poisson.value, usual.poisson),
        (each.density.value, each.density.value, usual.density),
        (each.specific_heat.value, each.specific_heat.value, usual.specific_heat),
        (each.conductivity.value, each.conductivity.value, usual.conductivity),
    ):
        assert at.low * (1 - 1e-12) <= low <= high <= at.high * (1 + 1e-12)


@pytest.mark.parametrize("name", CLASSES)
def test_any_metal_holds_what_every_class_holds(name: str) -> None:
    for key in UNITS:
        inner, outer = getattr(classes()[name], key), getattr(classes()[ANY_METAL], key)
        assert outer.low <= inner.low < inner.high <= outer.high


@pytest.mark.parametrize("family", FAMILIES)
def test_a_family_whose_class_is_not_known_may_be_all_that_its_classes_are(family: str) -> None:
    whole = usual_for("", family)
    for key in UNITS:
        ranges: list[Range] = [getattr(classes()[c], key) for c, of in CLASSES.items() if of == family]
        found: Range = getattr(whole, key)
        assert (min(r.low for r in ranges), max(r.high for r in ranges)) == (found.low, found.high)
        assert all(EVIDENCE.index(found.kind) >= EVIDENCE.index(r.kind) for r in ranges)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("[70000, 125000,", "[125000, 70000,", "classes.tin-bronze.modulus has its low end above the high one"),
        ("[0.31, 0.37,", "[0, 0.37,", "classes.tin-bronze.poisson needs numbers above 0"),
        ("[8500, 9300, from memory]", "[8500, from memory]", "classes.tin-bronze.density must be [low, high, kind, note]"),
        ("[340, 410, from memory]", "[340, 410, hearsay]", "classes.tin-bronze.specific_heat needs one of "),
        ("    called: tin bronzes\n", "", "classes.tin-bronze.called is missing"),
        ("  conductivity: [35, 95,", "  conductance: [35, 95,",
         "classes.tin-bronze.conductance is no value of a class. Nearest: conductivity"),
    ],
)  # fmt: skip
def test_a_wrong_entry_is_refused_with_its_line(old: str, new: str, message: str) -> None:
    assert 1 == TEXT.count(old)
    spoilt = TEXT.replace(old, new)
    line = next(i for i, row in enumerate(spoilt.splitlines(), 1) if (new or "tin-bronze:") in row + "\n")
    with pytest.raises(SetupcheckError) as refused:
        read_classes(spoilt, "own.yaml")
    assert str(refused.value).startswith(f"own.yaml:{line}  {message}")


def test_a_table_without_a_class_with_a_strange_one_or_of_another_format_is_refused() -> None:
    for old, new, message in (
        ("format: 1", "format: 2", "own.yaml: 'format: 1' and a map 'classes' are needed"),
        (TEXT[TEXT.index("  any-metal:") :], "", "own.yaml: there is no class any-metal"),
    ):
        with pytest.raises(SetupcheckError) as refused:
            read_classes(TEXT.replace(old, new), "own.yaml")
        assert message == str(refused.value)
    line = next(i for i, row in enumerate(TEXT.splitlines(), 1) if row.startswith("  brass:"))
    with pytest.raises(SetupcheckError, match=rf"own.yaml:{line}  classes.bras is none of tin-bronze, "):
        read_classes(TEXT.replace("  brass:", "  bras:"), "own.yaml")


# -- what a job states ------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("name", "key"), CASES)
def test_a_value_at_either_end_is_usual_and_one_beyond_it_is_told(name: str, key: str) -> None:
    usual: Usual = classes()[name]
    ends: Range = getattr(usual, key)
    words = {"poisson": "Poisson's ratio", "specific_heat": "specific heat"}.get(key, key)
    for value in (ends.low, ends.high):
        assert USUAL == told(ONE_OF[name], **{key: typed(key, value)})
    for value in (ends.low * 0.99, ends.high * 1.01):
        said = told(ONE_OF[name], **{key: typed(key, value)})
        assert said is not None
        assert said.startswith(f"{words} of wheel ") and said.endswith(f" usual for {usual.called}")
        assert " is outside " in said and ";" not in said


def test_the_value_and_its_range_are_said_in_the_units_of_the_job_file() -> None:
    assert "expansion of wheel 25 um/m/K is outside 14.5 to 22 usual for copper alloys" == told(
        "bronze", expansion="25 um/m/K"
    )
    assert "modulus of wheel 15 GPa is outside 70 to 125 usual for tin bronzes" == told("CuSn12-C", modulus="15 GPa")
    assert "Poisson's ratio of wheel 0.03 is outside 0.27 to 0.31 usual for carbon and alloy steels" == told(
        "C45", poisson=0.03
    )
    assert "density of wheel 785 kg/m3 is outside 1300 to 22700 usual for any metal" == told(None, density=785)
    assert "conductivity of wheel 400 W/mK is outside 85 to 240 usual for aluminium alloys" == told(
        "6061-T6", conductivity="400 W/mK"
    )


@pytest.mark.parametrize(
    ("material", "key", "per_fahrenheit"),
    [("CuSn12-C", "expansion", 10.2), ("C45", "expansion", 6.5), ("6061-T6", "expansion", 13.1), ("304", "expansion", 9.6)],
)  # fmt: skip
def test_an_expansion_per_degree_fahrenheit_is_seen_through(material: str, key: str, per_fahrenheit: float) -> None:
    assert USUAL != told(material, **{key: f"{per_fahrenheit} um/m/K"})
    assert USUAL == told(material, **{key: f"{per_fahrenheit * 1.8:.2f} um/m/K"})


def test_every_value_that_is_outside_is_told() -> None:
    said = told("C45", expansion="115 um/m/K", density=785, modulus="206 GPa")
    assert said is not None
    both = [one.partition(" is outside")[0] for one in said.split("; ")]
    assert ["expansion of wheel 115 um/m/K", "density of wheel 785 kg/m3"] == both


def test_only_stated_values_are_judged() -> None:
    assert told("CuSn12-C") is None
    assert told("CuSn12-C", yield_strength="150 MPa", heat_cap="200 degC", last_temper="300 degC") is None
    assert told(None) is None


def test_a_porous_part_is_held_against_any_metal_for_its_pores_take_density_and_stiffness() -> None:
    loose = {"density": 6500, "modulus": "40 GPa", "conductivity": "25 W/mK"}
    assert USUAL != told("CuSn10-C", **loose)
    assert USUAL == told("CuSn10-C", porous=True, **loose) == told("sintered CuSn10", **loose)


def test_the_rule_judges_each_part_that_states_something() -> None:
    assert not [f for f in reviewed(WHOLE).evaluation.findings if "FIT-009" == f.rule]
    fine = finding(ring_of(expansion="18.2 um/m/K"), "FIT-009")
    assert ("pass", "parts.ring") == (fine.verdict, fine.at)
    assert "what is stated of the material of ring is usual for its class" == fine.message
    odd = finding(ring_of(expansion="25 um/m/K"), "FIT-009")
    assert ("warn", "parts.ring", 8) == (odd.verdict, odd.at, odd.line)
    assert odd.message == (
        "a stated value is not usual: expansion of ring 25 um/m/K is outside 16.5 to 19.5 usual for tin bronzes"
    )
    both = changed(
        ("    material: 42CrMo4\n", "    material: 42CrMo4\n    properties: {density: 785}\n"),
        text=ring_of(density="870"),
    )
    rules = [f for f in reviewed(both).evaluation.findings if "FIT-009" == f.rule]
    assert ["parts.ring", "parts.shaft"] == [f.at for f in rules]


def test_the_wheel_of_a_screwed_joint_is_judged_as_well() -> None:
    screwed = changed(("by: shrink", "by: screw"), text=ring_of(expansion="25 um/m/K"))
    assert "warn" == finding(screwed, "FIT-009").verdict


@pytest.mark.parametrize(
    ("of", "name", "properties", "verdict"),
    [
        ("ring", "sintered bronze", "", "fail"),
        ("ring", "CuSn12-C", "{porous: true}", "fail"),
        ("shaft", "42CrMo4", "{porous: true}", "fail"),
        ("shaft", "porous iron", "", "fail"),
        ("ring", "CuSn12-C", "{porous: false}", "pass"),
        ("ring", "unobtainium", "", "pass"),
        ("ring", "", "", "open"),
        ("ring", "", "{porous: true}", "fail"),
        ("ring", "", "{porous: false}", "pass"),
    ],
)
def test_a_porous_hub_or_shaft_breaks_the_rule_of_solid_metal(
    of: str, name: str, properties: str, verdict: str
) -> None:
    old = {"ring": "    material: CuSn12-C\n", "shaft": "    material: 42CrMo4\n"}[of]
    new = f"    material: {name}\n" if name else ""
    new += f"    properties: {properties}\n" if properties else ""
    for by in ("shrink", "press"):
        found = finding(changed((old, new), ("by: shrink", f"by: {by}")), "FIT-010")
        assert (verdict, ("parts.ring.material",) if verdict == "open" else ()) == (found.verdict, found.missing)


def test_a_joint_that_holds_by_other_means_may_have_pores() -> None:
    text = changed(("by: shrink", "by: bond"), ("    material: CuSn12-C\n", "    material: sintered bronze\n"))
    assert not [f for f in reviewed(text).evaluation.findings if "FIT-010" == f.rule]


def test_family_and_class_of_the_examples_agree() -> None:
    assert all(CLASSES.get(name, "other") == material_family(one) for name, one in ONE_OF.items())
