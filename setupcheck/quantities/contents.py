"""What the name of a material settles: family, class, lead, zinc, beryllium, pores, and whether it breaks. Percent by mass."""

from __future__ import annotations

import re
from typing import Literal

from setupcheck.physics.materials import CLASSES as OF_FAMILY
from setupcheck.physics.materials import Material
from setupcheck.quantities.material_data import material

FAMILIES = (
    (
        "copper-alloy",
        r"(cu|g[cz]?-?z?-?cu|(e|of)-?cu\b|c[cw]\d|c[1-9]\d{4}|cda ?\d|rg ?\d|sae ?(6|84)\d|snbz|ms ?\d\d"
        r"|pb\d|lg\d|lb\d|ab\d|2\.[01]\d{3})|.*(bronze|brass|gunmetal|copper|nickel.silver)",
    ),
    (
        "cast-iron",
        r"gg|gj|jl|jm|js|fcd?\d{3}|0\.[678]\d{3}|5\.[1-5]\d{3}"
        r"|.*(cast.?iron|gr[ea]y.?iron|ductile.?iron|nodular.?iron|meehanite)",
    ),
    (
        "aluminium",
        r"al(?!loy)|aw|ac-?\d|.*alumini?um|[2-7]\d{3}-[oth]\d*|a9[1-8]\d{3}|3\.[0-4]\d{3}"
        r"|(2007|2011|2014|2017|2024|5083|5754|6012|6026|6060|6061|6063|6082|7020|7075)$",
    ),
    (
        "steel",
        r"(?![0235]\.)\d|.*(steel|stainless|inox|(sinter|porous|powder.?metal)[a-z]*.?iron)"
        r"|c[fk]?\d\d?[er]?\b|s\d{3}|g\d{5}|r?st ?\d\d|s\d\dc\b|scm\d|suj\d|sus ?\d"
        r"|x\d|v[24]a\b|o1\b|d2\b|h13\b|a2\b|hss\b",
    ),
)
"""How names of materials begin or what word they hold, first match wins: EN, UNS, AISI, old national and trade names. A bare
number of four digits is steel (4140, 8620) unless it is one of the usual aluminium alloys. Source: common designations, from
memory."""

CLASSES = (
    ("aluminium-bronze", r"g?-?cual|c95\d{3}|c6[0-3]\d{3}|c64[0-2]\d\d|cda ?95\d|cc33\d|cw30\d|ab\d|2\.09\d\d|sae ?68"
     r"|.*alumini?um.?bronze"),
    ("copper", r"cu(be|cr|co|zr|ni[12]si|sp\b|tep|-?(etp|of|dhp|hcp))|(e|of)-?cu\b|c1\d{4}|c8[12]\d{3}|cw[01]\d\d|2\.(00|12)\d\d"
     r"|copper$|.*beryllium.copper"),
    ("copper-nickel", r"cuni\d|c7\d{4}|c9[67]\d{3}|cw(35|4[01])\d|2\.0(7|8[78])\d|.*(nickel.silver|cupro.?nickel|copper.nickel)"),
    ("brass", r"cuzn|c[234]\d{4}|c6[6-9]\d{3}|c8[56]\d{3}|cda ?[23]\d\d|cw[567]\d\d|cc7\d\d|ms ?\d\d|2\.0[2-5]\d\d"
     r"|.*(brass|manganese.bronze)"),
    ("tin-bronze", r"(g[cz]?-?z?-?)?cu(pb\d+)?sn|c9[0-4]\d{3}|c83\d{3}|c5[0-4]\d{3}|cda ?9[0-4]\d|cc4[89]\d|cw45\d|rg ?\d"
     r"|sae ?6[0-7]|snbz|pb\d|lg\d|lb\d|2\.1(0[1-9]|1[78])\d|.*(tin.bronze|phosphor.bronze|leaded.bronze|gunmetal)"),
    ("ductile-iron", r"ggg|gjs(?!a)|js\d|fcd\d|0\.70\d\d|5\.3[12]\d\d|.*(ductile|nodular)"),
    ("grey-iron", r"gg|gjl(?!a)|jl\d|fc\d|0\.60\d\d|5\.13\d\d|.*gr[ae]y"),
    ("aluminium-alloy", r".*"),
    ("austenitic-stainless", r"x\d+(crni[a-z]*(1[5-9]|2\d)-?([89]|[1-3]\d)|nicr)"
     r"|1\.4(30[1-9]|31[015-9]|32\d|37\d|40[146]|429|43[2-9]|449|529|539|541|547|550|567|57[01]|580|82\d|83\d|84\d|86\d|87\d)"
     r"|(sus ?)?3(0\d|1[0-79]|2[01]|4[78])(h|n|ln?|ti|se?|cu)?$|s3(0\d|1[0134-7]|2[01]|4[78])\d\d|s2[01]\d{3}"
     r"|.*austenitic|v[24]a\b|18[-/](8|10)$|a[24]-?[578]0$"),
    ("martensitic-stainless", r"x\d+cr((?!ni)[a-z]*(1[1-9]|2\d)(?!\d)|ni[a-z]*1[1-7]-?[1-6](?!\d))"
     r"|1\.4(0\d\d|1(?!62)\d\d|313|405|415|418|5(1\d|2[0-3]|32|42|45|48|68)|7\d\d)"
     r"|(sus ?)?4[0-4]\d(f|se|[a-c])?(j\d)?$|s4\d{4}|s1[3-7]\d{3}|1[3-7]-[4-8] ?ph|.*(martensitic|ferritic)"),
    ("steel", r"(?!.*(stainless|inox|duplex|manganese|hadfield)"
     r"|x\d+crni|x\d+mn|1\.4\d{3}|1\.3[489]\d\d|s[23]\d{4}|2[25]0[57]$).*"),
)  # fmt: skip
"""How names of a class begin or what word they hold, within their family, first match wins; duplex, manganese and low-expansion
steels and other alloys that have no class of their own match nothing. Source: common designations, from memory."""
_SYSTEM = re.compile(r"(en|aisi|uns|din|w\.?-?nr\.?|sae(?= ?\d{4}))[- ]?(?=.)")
"""Name of the system before a designation. Source: common designations, from memory."""
_PORES = re.compile(r"(?<!non)(?<!non[- ])porous|\bsint|sinter|powder.?metal|sae ?8[46]\d")
"""Words for parts pressed and sintered from powder. Source: common designations, from memory."""

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


def material_class(name: str) -> str:
    """Class of a material as rules/data/classes.yaml has them, from its name; "" where the name does not tell it.

    >>> [material_class(name) for name in ("CuSn14", "C63000", "CW614N", "316L", "1.4462", "bronze", "34CrNiMo6")]
    ['tin-bronze', 'aluminium-bronze', 'brass', 'austenitic-stainless', '', '', 'steel']
    """
    found = material(name)
    if isinstance(found, Material):
        return found.of_class
    plain, family = _plain(name), material_family(name)
    return next((one for one, begins in CLASSES if OF_FAMILY[one] == family and re.match(begins, plain)), "")


def is_porous(name: str) -> bool:
    """Whether the name of a material says that it is sintered, with pores in it.

    >>> [is_porous(name) for name in ("sintered bronze", "Sint-A50", "SAE 841", "CuSn12", "non-porous bronze")]
    [True, True, True, False, False]
    """
    return re.search(_PORES, name.lower()) is not None


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
        in_the_mix = content == "lead" and is_porous(name)  # which iron for bearings may have
        return None if family == "other" or in_the_mix else False
    if plain.startswith("cu"):  # symbols, perhaps typed small
        return True if _SYMBOLS[content].lower() in plain else None if content == "lead" else False
    return False if content == "beryllium" and re.match(r"c\d{5}", plain) else None


def breaks(found: Material) -> bool:
    """Whether a part of this material splinters instead of bending: grey iron, hardened steel.

    Source: the list of materials or the job file (`brittle`, and steels that stand no more than a low temper).
    """
    return found.brittle or (found.family == "steel" and found.heat_cap.value <= LOW_TEMPER)


def _plain(name: str) -> str:
    letters = name.strip().lower()
    found = _SYSTEM.match(letters)
    return letters[found.end() :] if found else letters
