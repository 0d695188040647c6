"""What a part's material is and may hold that harms: family, lead, zinc, beryllium, and whether it breaks. Percent by mass."""

from __future__ import annotations

import re
from typing import Literal

from setupcheck.physics.materials import Material
from setupcheck.quantities.material_data import material

FAMILIES = (
    (
        "copper-alloy",
        r"(cu|c[cw]\d|c[1-9]\d{4}|rg\d|sae ?6\d|snbz|ms\d\d|pb\d|lg\d|lb\d|ab\d)|.*(bronze|brass|gunmetal|copper)",
    ),
    ("cast-iron", r"gg|gj|jl|jm|js|.*(cast.?iron|gr[ea]y.?iron|ductile.?iron|meehanite)"),
    (
        "aluminium",
        r"al(?!loy)|aw|.*alumini?um|[2-7]\d{3}-[oth]\d*"
        r"|(2007|2011|2014|2017|2024|5083|5754|6012|6026|6060|6061|6063|6082|7020|7075)$",
    ),
    ("steel", r"\d|.*steel|c[fk]?\d\d?[er]?\b|s\d{3}|st\d\d|x\d|o1\b|d2\b|h13\b|a2\b|hss\b"),
)
"""How names of materials begin or what word they hold, first match wins: EN, UNS, AISI, old national and trade names. A bare
number of four digits is steel (4140, 8620) unless it is one of the usual aluminium alloys. Source: common designations, from
memory."""

Content = Literal["lead", "zinc", "beryllium"]

_SYMBOLS: dict[Content, str] = {"lead": "Pb", "zinc": "Zn", "beryllium": "Be"}
_BY_NUMBER: dict[Content, str] = {
    "lead": r"(al)?(2007|2011|2030|6012|6262)|1[12]l\d\d",
    "zinc": r"7\d{3}|brass|.*\+za?\b",
    "beryllium": r"c(17|81|82)\d{3}|cw1(0[0-4]|10)c",
}
"""Names that carry no symbol: free-cutting aluminium and steel with lead; aluminium of the 7000 series, brass and
galvanized steel with zinc; UNS and EN numbers of coppers with beryllium. Source: common designations, from memory."""
LOW_TEMPER = 150.0
"""degC: a steel that stands no more than this in one heating is hardened and tempered low. Source: rules/data/materials.yaml."""


def material_family(name: str) -> str:
    """copper-alloy, steel, cast-iron, aluminium or other, from the name of a material.

    >>> [material_family(name) for name in ("CuSn12-C", "C93200", "CC483K", "42CrMo4", "C45", "EN-GJL-250", "6082-T6")]
    ['copper-alloy', 'copper-alloy', 'copper-alloy', 'steel', 'steel', 'cast-iron', 'aluminium']
    """
    found = material(name)
    if isinstance(found, Material):
        return found.family
    plain = _plain(name)
    return next((family for family, begins in FAMILIES if re.match(begins, plain)), "other")


def holds(name: str, content: Content) -> bool | None:
    """Whether a material may hold enough lead, zinc or beryllium to matter; None where its name does not say.

    By the most its specification allows, where the list has it. Otherwise by its name: an EN name carries the symbol of
    what was added (CuSn7Zn4Pb7), an impurity it does not, and tin bronze may hold lead as one.
    Source: thresholds of physics.materials; naming of EN 1412 and EN 10027, from memory.

    >>> [holds(name, "lead") for name in ("CuSn12-C", "C95400", "CuSn14", "bearing bronze", "42CrMo4", "11SMnPb30")]
    [True, False, None, None, False, True]
    >>> [holds(name, "beryllium") for name in ("CuBe2", "cuco2be", "CW101C", "C90300", "CW614N", "bronze 2")]
    [True, True, True, False, None, None]
    """
    found = material(name)
    if isinstance(found, Material):
        return {"lead": found.has_lead, "zinc": found.has_zinc, "beryllium": found.has_beryllium}[content]
    plain, family = _plain(name), material_family(name)
    if re.search(_SYMBOLS[content] + r"(?![a-z])", name) or re.match(_BY_NUMBER[content], plain):
        return True
    if family != "copper-alloy":
        return None if family == "other" else False
    if plain.startswith("cu"):  # symbols, perhaps typed small
        return True if _SYMBOLS[content].lower() in plain else None if content == "lead" else False
    return False if content == "beryllium" and re.match(r"c\d{5}", plain) else None


def breaks(found: Material) -> bool:
    """Whether a part of this material splinters instead of bending: grey iron, hardened steel.

    Source: the list of materials or the job file (`brittle`, and steels that stand no more than a low temper).
    """
    return found.brittle or (found.family == "steel" and found.heat_cap.value <= LOW_TEMPER)


def _plain(name: str) -> str:
    return re.sub(r"^en[- ]?", "", name.strip().lower())
