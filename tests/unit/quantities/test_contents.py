"""What the name of a material settles about lead, zinc, beryllium and splinters, and where it settles nothing."""

from __future__ import annotations

import pytest

from setupcheck.quantities import contents
from setupcheck.quantities.contents import Content, breaks, holds, is_porous, material_class, material_family
from setupcheck.quantities.material_data import UnknownMaterial, materials


@pytest.mark.parametrize(
    ("name", "lead", "zinc", "beryllium"),
    [
        # in the list: by the most its specification allows
        ("CuSn12-C", True, False, False),
        ("C95400", False, False, False),
        ("C93200", True, True, False),
        ("sae 660", True, True, False),
        ("CuBe2", False, False, True),
        ("C36000", True, True, False),
        ("42CrMo4", False, False, False),
        # not in the list: by symbols and numbers
        ("CuZn39Pb3", True, True, False),
        ("cuzn39pb3", True, True, False),
        ("CuSn14", None, False, False),
        ("CuCo2Be", None, False, True),
        ("C17510", None, None, True),
        ("CW104C", None, None, True),
        ("C83600", None, None, False),
        ("11SMnPb30", True, False, False),
        ("12L14", True, False, False),
        ("C35E", False, False, False),
        ("S250GD+Z", False, True, False),
        ("2011", True, False, False),
        ("7075-T6", False, True, False),
        ("EN-GJL-300", False, False, False),
        # names that say nothing
        ("bronze", None, None, None),
        ("bearing bronze", None, None, None),
        ("brass", None, True, None),
        ("Beryl 4", None, None, None),
        ("sintered iron", None, False, False),
        ("porous iron", None, False, False),
        ("sintered bronze", None, None, None),
        ("unobtainium", None, None, None),
    ],
)
def test_a_name_settles_what_it_carries_and_nothing_else(
    name: str, lead: bool | None, zinc: bool | None, beryllium: bool | None
) -> None:
    wanted: dict[Content, bool | None] = {"lead": lead, "zinc": zinc, "beryllium": beryllium}
    assert wanted == {content: holds(name, content) for content in wanted}


@pytest.mark.parametrize(
    ("name", "splinters"),
    [
        ("EN-GJL-250", True),
        ("EN-GJS-400-15", False),
        ("100Cr6", True),
        ("20MnCr5", True),
        ("C45", False),
        ("EN AW-6082-T6", False),  # stands no more than 150 degC either, but is no steel
    ],
)
def test_what_splinters_is_grey_iron_and_steel_with_a_low_temper(name: str, splinters: bool) -> None:
    assert splinters is breaks(materials()[name])


@pytest.mark.parametrize(
    ("family", "of_class", "names"),
    [
        ("copper-alloy", "tin-bronze", "CC483K CuSn8 CuSn10-C C83600 C51000 gunmetal 2.1052 GZ-CuSn12 RG7 SAE_660"),
        ("copper-alloy", "aluminium-bronze", "CuAl10Ni5Fe4 C63000 CC333G AB2 aluminum_bronze"),
        ("copper-alloy", "brass", "CW614N CuZn39Pb3 Ms58 C38500 C86300 brass"),
        ("copper-alloy", "copper", "CuCr1Zr Cu-ETP E-Cu CuNi2Si C17510 copper"),
        ("copper-alloy", "copper-nickel", "CuNi10Fe1Mn CuNi12Zn24 nickel_silver C70600"),
        ("copper-alloy", "", "bronze bearing_bronze C65500"),
        (
            "steel",
            "austenitic-stainless",
            "X2CrNiMo17-12-2 X5CrNi1810 1.4571 316L AISI_316Ti SUS304 S31603 V2A austenitic_stainless_steel",
        ),
        (
            "steel",
            "martensitic-stainless",
            "X17CrNi16-2 X46Cr13 X3CrNiMo13-4 X5CrNiCuNb16-4 1.4057 440C 17-4PH S17400 martensitic_stainless_steel",
        ),
        ("steel", "steel", "C35E 8620 AISI_8620 SAE_4340 34CrNiMo6 S275JR EN24 1.2379 D2 mild_steel W.-Nr._1.6582"),
        ("steel", "", "1.4462 X2CrNiMoN22-5-3 S31803 2205 X120Mn12 1.3912 stainless_steel"),
        ("cast-iron", "grey-iron", "GJL-300 GG-20 0.6020 5.1300 FC200 gray_cast_iron"),
        ("cast-iron", "ductile-iron", "GJS-600-3 GGG60 0.7060 5.3201 nodular_iron"),
        ("cast-iron", "", "GJV-400 GJSA-XNiCr20-2 cast_iron"),
        ("aluminium", "aluminium-alloy", "7075-T6 AlSi12 EN_AC-42100 3.4365 6061 aluminium"),
        ("other", "", "PEEK TiAl6V4 3.7165 2.4668 AZ91"),
    ],
)
def test_a_material_has_the_family_and_class_of_its_name(family: str, of_class: str, names: str) -> None:
    said = [name.replace("_", " ") for name in names.split()]
    assert dict.fromkeys(said, (family, of_class)) == {
        name: (material_family(name), material_class(name)) for name in said
    }


@pytest.mark.parametrize("name", sorted({n for m in materials().values() for n in (m.name, *m.also)}))
def test_a_name_in_the_list_tells_its_family_and_class_without_the_list(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    listed = material_family(name), material_class(name)
    monkeypatch.setattr(contents, "material", lambda name: UnknownMaterial(name, None))
    assert listed == (material_family(name), material_class(name))


@pytest.mark.parametrize(
    ("name", "porous"),
    [
        ("sintered bronze", True),
        ("Sinterbronze", True),
        ("porous iron", True),
        ("SINT-B50", True),
        ("SAE 841", True),
        ("powder metal", True),
        ("CuSn12-C", False),
        ("SAE 65", False),
        ("non-porous bronze", False),
        ("nonporous bronze", False),
    ],
)
def test_a_name_may_say_that_it_has_pores(name: str, porous: bool) -> None:
    assert porous is is_porous(name)
