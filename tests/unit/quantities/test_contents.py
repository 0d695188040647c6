"""What the name of a material settles about lead, zinc, beryllium and splinters, and where it settles nothing."""

from __future__ import annotations

import pytest

from setupcheck.quantities.contents import Content, breaks, holds, material_family
from setupcheck.quantities.material_data import materials


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
    ("name", "family"), [("CW614N", "copper-alloy"), ("CC483K", "copper-alloy"), ("PEEK", "other")]
)
def test_a_material_has_the_family_of_its_name(name: str, family: str) -> None:
    assert family == material_family(name)
