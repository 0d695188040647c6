"""The list of materials, its reader, and the end of a range that is safe for a question."""

from __future__ import annotations

import itertools

import pytest

from setupcheck.errors import JobError, SetupcheckError
from setupcheck.physics.heating import interference_at, joining_temperature
from setupcheck.physics.interference import Joint, hole_closing, hub_growth, joint_pressure
from setupcheck.physics.materials import CLASSES, Material, Part, Question, expansion_for, modulus_for, temper_cap
from setupcheck.quantities.material_data import UnknownMaterial, material, materials, read_materials

ALL = list(materials().values())


def known(name: str) -> Material:
    found = material(name)
    assert isinstance(found, Material)
    return found


BRONZE, STEEL = known("CuSn12-C"), known("42CrMo4")


def corners(hub: Material, shaft: Material) -> list[Joint]:
    """The joint 32 / 60 with a 12 hole, with every end of both moduli."""
    ends = itertools.product((hub.modulus.low, hub.modulus.high), (shaft.modulus.low, shaft.modulus.high))
    return [
        Joint(
            diameter=32,
            hub_outside=60,
            shaft_hole=12,
            hub_modulus=a,
            hub_poisson=hub.poisson.value,
            shaft_modulus=i,
            shaft_poisson=shaft.poisson.value,
        )
        for a, i in ends
    ]


def safe_joint(question: Question) -> Joint:
    moduli = {part: modulus_for(question, part, each).value for part, each in PARTS}
    return next(
        j for j in corners(BRONZE, STEEL) if (j.hub_modulus, j.shaft_modulus) == (moduli["hub"], moduli["shaft"])
    )


PARTS: tuple[tuple[Part, Material], ...] = (("hub", BRONZE), ("shaft", STEEL))


def growth(joint: Joint) -> float:
    return hub_growth(joint, pressure=joint_pressure(joint, interference=0.04), at_diameter=60)


def closing(joint: Joint) -> float:
    found = hole_closing(joint, pressure=joint_pressure(joint, interference=0.04))
    assert found is not None
    return found


def test_each_question_takes_the_moduli_that_make_its_answer_worst() -> None:
    every = corners(BRONZE, STEEL)
    pressures = [joint_pressure(j, interference=0.04) for j in every]
    assert min(pressures) == joint_pressure(safe_joint("holding"), interference=0.04)
    assert max(pressures) == joint_pressure(safe_joint("strength"), interference=0.04)
    assert max(map(growth, every)) == growth(safe_joint("growth"))
    assert max(map(closing, every)) == closing(safe_joint("closing"))
    with pytest.raises(ValueError, match="no modulus in it"):
        modulus_for("joining", "hub", BRONZE)


@pytest.mark.parametrize("hot_or_cold", [-25.0, 20.0, 80.0])
def test_each_question_takes_the_expansions_that_make_its_answer_worst(hot_or_cold: float) -> None:
    def left(hub: float, shaft: float) -> float:
        return interference_at(
            0.04,
            diameter=32,
            hub_expansion=hub,
            hub_temperature=hot_or_cold,
            shaft_expansion=shaft,
            shaft_temperature=hot_or_cold,
        )

    def ends(each: Material) -> tuple[float, float]:
        bounds = each.cooling if hot_or_cold < 20 else each.heating
        return bounds.low, bounds.high

    every = [left(a, i) for a, i in itertools.product(ends(BRONZE), ends(STEEL))]
    chosen = {
        question: left(*(expansion_for(question, part, each, temperature=hot_or_cold).value for part, each in PARTS))
        for question in ("holding", "strength")
    }
    assert {"holding": min(every), "strength": max(every)} == chosen


@pytest.mark.parametrize("shaft_temperature", [-78.0, 20.0, 35.0])
def test_joining_takes_the_ends_that_ask_for_the_hottest_hub(shaft_temperature: float) -> None:
    def hub_needs(hub: float, shaft: float) -> float:
        return joining_temperature(
            0.04,
            play=0.03,
            diameter=32,
            hub_expansion=hub,
            shaft_expansion=shaft,
            shaft_temperature=shaft_temperature,
        )

    hub, shaft = BRONZE.heating, STEEL.cooling if shaft_temperature < 20 else STEEL.heating
    hottest = max(hub_needs(a, i) for a in (hub.low, hub.high) for i in (shaft.low, shaft.high))
    safe_hub = expansion_for("joining", "hub", BRONZE, temperature=150)
    safe_shaft = expansion_for("joining", "shaft", STEEL, temperature=shaft_temperature)
    assert hottest == hub_needs(safe_hub.value, safe_shaft.value)


def test_the_end_that_was_taken_is_said() -> None:
    assert "low expansion of the hub, for joining" == expansion_for("joining", "hub", BRONZE, temperature=150).says
    assert "low contraction of the shaft, for joining" == expansion_for("joining", "shaft", STEEL, temperature=-78).says
    assert "high modulus of the shaft, for strength" == modulus_for("strength", "shaft", STEEL).says
    assert "published" == expansion_for("holding", "hub", BRONZE, temperature=60).kind


@pytest.mark.parametrize("each", ALL, ids=lambda m: m.name)
def test_a_material_is_consistent_in_itself(each: Material) -> None:
    assert CLASSES[each.of_class] == each.family
    assert each.cooling.low < each.heating.low and each.cooling.high <= each.heating.high
    assert 120 <= each.heat_cap.value <= 350
    assert each.conductivity is not None
    if each.yield_strength and each.tensile_strength:
        assert each.yield_strength.value < each.tensile_strength.value


def test_bronze_grows_more_than_steel_even_at_the_worst_ends() -> None:
    assert min(m.heating.low for m in of("tin-bronze")) > max(m.heating.high for m in of("steel"))
    # austenitic steel overlaps with it: such a shaft holds a bronze hub warm, and such a hub works loose on plain steel
    assert max(m.heating.high for m in of("austenitic-stainless")) > min(m.heating.low for m in of("tin-bronze"))
    assert min(m.heating.low for m in of("austenitic-stainless")) > max(m.heating.high for m in of("steel"))


def of(name: str) -> list[Material]:
    return [m for m in ALL if m.of_class == name]


def test_the_list_has_every_kind_that_fits_are_made_of() -> None:
    """At least so many of each; steels of one class are told apart by how they are hardened."""
    assert len(of("tin-bronze")) >= 4 and len(of("aluminium-bronze")) >= 2 and of("brass")
    assert any(not m.has_lead or m.lead.value < 1.0 for m in of("tin-bronze")) and any(
        m.lead.value > 5 for m in of("tin-bronze")
    )
    assert of("grey-iron") and of("ductile-iron") and len(of("aluminium-alloy")) >= 2
    assert of("austenitic-stainless") and of("martensitic-stainless")
    steels = {m.name for m in of("steel")}
    assert {"C45", "42CrMo4", "16MnCr5", "20MnCr5"} <= steels  # plain carbon, alloy, case-hardening


def test_stainless_steels_are_what_their_kind_is_known_for() -> None:
    soft, hard = known("304"), known("420")
    assert soft.yield_strength is not None and hard.yield_strength is not None and soft.conductivity is not None
    assert soft.yield_strength.value < 200 < hard.yield_strength.value
    assert 16e-6 <= soft.heating.low < soft.heating.high <= 17.4e-6 and 15.0 == soft.conductivity.value
    assert hard.heating.high < 12e-6


def test_caps_of_heat_follow_the_stricter_note() -> None:
    caps = {
        n: known(n).heat_cap.value for n in ("CuSn12-C", "C93200", "16MnCr5", "100Cr6", "42CrMo4", "6061-T6", "S355J2")
    }
    assert {
        "CuSn12-C": 200, "C93200": 200, "16MnCr5": 150, "100Cr6": 120, "42CrMo4": 300, "6061-T6": 150, "S355J2": 350,
    } == caps  # fmt: skip
    assert 150 == temper_cap(300, last_temper=200)
    assert 300 == temper_cap(300, last_temper=560) == temper_cap(300, last_temper=None)


def test_lead_zinc_and_beryllium_are_flagged_from_the_specification() -> None:
    assert {"CuSn12-C", "CuSn12Ni2-C", "C90700", "C93200", "CuSn7Zn4Pb7-C", "CuSn10Pb10-C", "C36000"} == {
        m.name for m in ALL if m.has_lead
    }
    assert {"C93200", "CuSn7Zn4Pb7-C", "CuSn10Pb10-C", "C26000", "C36000"} == {m.name for m in ALL if m.has_zinc}
    assert {"C17200"} == {m.name for m in ALL if m.has_beryllium}


def test_grey_iron_is_judged_by_its_tensile_strength_and_a_condition_is_asked_for() -> None:
    iron = known("GG25")
    assert iron.brittle and iron.yield_strength is None and iron.strength is iron.tensile_strength
    assert ["EN-GJL-250"] == [m.name for m in ALL if m.brittle]
    assert ["C26000", "C36000", "C17200", "100Cr6"] == [m.name for m in ALL if m.strength is None]
    assert 140 == BRONZE.strength.value if BRONZE.strength else None


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("CuSn12-C", "CuSn12-C"),
        ("cusn12 c", "CuSn12-C"),
        ("CC483K", "CuSn12-C"),
        ("sae660", "C93200"),
        ("4140", "42CrMo4"),
        ("1.7225", "42CrMo4"),
        ("GJL-250", "EN-GJL-250"),
        ("6082-T6", "EN AW-6082-T6"),
        ("SAE 4140", "42CrMo4"),
        ("W.-Nr. 1.7225", "42CrMo4"),
        ("AISI 304", "X5CrNi18-10"),
        ("UNS S30400", "X5CrNi18-10"),
        ("1.4301", "X5CrNi18-10"),
        ("1.4021", "X20Cr13"),
        ("SAE 64", "CuSn10Pb10-C"),
        ("CDA 954", "C95400"),
        ("GGG-40", "EN-GJS-400-15"),
        ("0.6025", "EN-GJL-250"),
        ("St 37", "S235JR"),
    ],
)
def test_a_material_is_found_by_every_usual_spelling(written: str, meant: str) -> None:
    assert meant == known(written).name


def test_an_unknown_name_is_no_material_and_the_nearest_is_offered() -> None:
    assert UnknownMaterial("CuSn13-C", "CuSn12-C") == material("CuSn13-C")
    nothing = material("oak")
    assert isinstance(nothing, UnknownMaterial)
    assert nothing.because.startswith("the material 'oak' is not in the list, which has CuSn12-C, ")
    bronze = material("bronze")
    assert isinstance(bronze, UnknownMaterial)
    assert "CuSn7Zn4Pb7-C" in bronze.because and "C45" not in bronze.because


GOOD = """format: 2
materials:
  pot-metal:
    class: tin-bronze
    note: invented
    modulus: [90000, 110000, from memory]
    poisson: [0.34, from memory]
    heating: [17, 18.5, from memory]
    cooling: [15, 18.5, from memory]
    density: [8700, from memory]
    specific_heat: [373, from memory]
    conductivity: [60, from memory, "invented"]
    heat_cap: [200, screening choice, "our choice"]
"""


def test_the_reader_brings_base_units_and_leaves_out_what_is_left_out() -> None:
    read = read_materials(GOOD, "pots.yaml")["pot-metal"]
    assert 18.5e-6 == read.heating.high and 0.0 == read.lead.value
    assert "copper-alloy" == read.family and read.conductivity is not None and 60 == read.conductivity.value
    assert read.yield_strength is None and "our choice" == read.heat_cap.note


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("[90000, 110000,", "[110000, 90000,", "pots.yaml:6  materials.pot-metal.modulus has its low end above the high one"),
        ("[8700, from", "[-1, from", "pots.yaml:10  materials.pot-metal.density needs numbers above 0"),
        ("[8700, from", "[heavy, from", "pots.yaml:10  materials.pot-metal.density needs numbers above 0"),
        ("[8700, from memory]", "8700", "pots.yaml:10  materials.pot-metal.density must be [value, kind, note]"),
        (
            "[15, 18.5, from memory]",
            "[15, from memory]",
            "pots.yaml:9  materials.pot-metal.cooling must be [low, high, kind, note]",
        ),
        (
            "[8700, from memory]",
            "[8700, hearsay]",
            "pots.yaml:10  materials.pot-metal.density needs one of standard, published, shop record, common practice, "
            "screening choice, from memory behind its numbers",
        ),
        ("density:", "densty:", "pots.yaml:10  materials.pot-metal.densty is no value of a material. Nearest: density"),
        ("    note: invented\n", "", "pots.yaml:3  materials.pot-metal.note is missing"),
        ("tin-bronze", "wood", f"pots.yaml:4  materials.pot-metal.class is none of {', '.join(CLASSES)}"),
        ("[60, from memory, \"invented\"]", "60", "pots.yaml:12  materials.pot-metal.conductivity must be [value, kind, note]"),
        ("[60, from", "[0, from", "pots.yaml:12  materials.pot-metal.conductivity needs numbers above 0"),
        (
            "    conductivity: [60, from memory, \"invented\"]\n",
            "",
            "pots.yaml:3  materials.pot-metal.conductivity must be [value, kind, note]",
        ),
        ("    note: invented\n", "    note: invented\n    also: false\n",
         "pots.yaml:6  materials.pot-metal.also must be a list of names, and brittle true or false"),
        ("format: 2", "format: 1", "pots.yaml: 'format: 2' and a map 'materials' are needed"),
    ],
)  # fmt: skip
def test_a_wrong_entry_is_refused_with_its_line(old: str, new: str, message: str) -> None:
    assert old in GOOD
    with pytest.raises(SetupcheckError) as refused:
        read_materials(GOOD.replace(old, new), "pots.yaml")
    assert message == str(refused.value)


def test_two_materials_with_one_name_are_refused() -> None:
    entry = GOOD.split("materials:\n")[1]
    with pytest.raises(SetupcheckError, match=r"pots.yaml:14  materials.Pot Metal shares a name with pot-metal"):
        read_materials(GOOD + entry.replace("pot-metal", "Pot Metal"), "pots.yaml")
    with pytest.raises(JobError, match="stands twice"):
        read_materials(GOOD + entry, "pots.yaml")
