"""What a material brings to a joint, and which end of its range is safe for which question. MPa, 1/K, degC.

A property that scatters is kept as low and high. A question takes the end that makes its own answer worse, and says so.
"""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType
from typing import Literal

from setupcheck.physics.heating import REFERENCE_TEMPERATURE
from setupcheck.record import record

EVIDENCE = ("standard", "published", "shop record", "common practice", "screening choice", "from memory")
"""How good a number is, best first."""
CLASSES: Mapping[str, str] = MappingProxyType({
    "tin-bronze": "copper-alloy",
    "aluminium-bronze": "copper-alloy",
    "brass": "copper-alloy",
    "copper": "copper-alloy",
    "copper-nickel": "copper-alloy",
    "steel": "steel",
    "austenitic-stainless": "steel",
    "martensitic-stainless": "steel",
    "grey-iron": "cast-iron",
    "ductile-iron": "cast-iron",
    "aluminium-alloy": "aluminium",
})  # fmt: skip
"""Class of a material -> its family. `steel` is carbon and alloy steel; what a class usually has: rules/data/classes.yaml."""
FAMILIES = tuple(dict.fromkeys(CLASSES.values()))

LEAD_COUNTS = 0.1
"""Percent of lead from which dust and fume cautions apply. Our screening choice."""
BERYLLIUM_COUNTS = 0.1
"""Percent of beryllium from which they apply. Source: the scope of the OSHA beryllium rule (excerpt opened)."""
ZINC_COUNTS = 1.0
"""Percent of zinc from which overheating may smoke. Our screening choice."""
TEMPER_MARGIN = 50.0
"""Kelvin that fitting heat stays under the last temper. Source: DIN 7190 (from memory); trade rules say 25 to 30."""
COLD = -20.0
"""degC below which the colder table of expansions is taken; between it and 20 degC means differ little from those of heating.
Our screening choice."""
MEANS_END = 200.0
"""degC up to which the expansion means of heating are meant: most are stated from 20 to 100 or 200 degC (from memory)."""
HEATED_END = 400.0
"""degC up to which the low end of a mean serves for a hub that is heated: metals grow faster the hotter they are, until steel
changes its structure, from about 700. Our screening choice."""
COLD_END = -205.0
"""degC down to which the means of cooling are meant: stated to -196 (rules/data/materials.yaml), and the error of a bath with it.
Our screening choice."""

End = Literal["low", "high"]
Part = Literal["hub", "shaft"]
Question = Literal["holding", "strength", "joining", "growth", "closing"]
"""holding: least interference, pressure, torque, loosening. strength: largest interference and pressure, elastic limit,
press force. joining: largest hub temperature needed. growth: largest growth of the hub; closing: largest closing
of a hollow shaft's hole, by a given interference."""


@record
class Value:
    """One number in base units, how good it is (one of EVIDENCE) and what it means."""

    value: float
    kind: str
    note: str = ""


@record
class Range:
    """Lowest and highest of a number that scatters, how good they are and what they mean."""

    low: float
    high: float
    kind: str
    note: str = ""


@record
class Chosen:
    """The end of a range that was taken, for the working: value, which end, and why in words."""

    value: float
    end: End
    says: str
    kind: str


@record(kw_only=True)
class Material:
    """One material as the shop names it. None: the condition decides, the job has to say.

    also              other names it is found by
    of_class, family  one of CLASSES and its family; "" and by its name where the job states all of it
    modulus           E [MPa], low and high
    heating, cooling  mean expansion from 20 degC up to about 200, and from 20 degC down to as low as -196 [1/K]
    yield_strength    R_e or R_p0.2, least of the usual makings [MPa]; None for a brittle material
    tensile_strength  R_m, least [MPa]
    density           [kg/m3];  specific_heat [J/kgK]
    conductivity      of heat [W/mK]; None where the job states all of a material but this
    heat_cap          highest temperature of one heating for a fit [degC]
    lead, zinc, beryllium   largest content the specification allows [percent]
    """

    name: str
    also: tuple[str, ...]
    of_class: str
    family: str
    brittle: bool
    note: str
    modulus: Range
    poisson: Value
    heating: Range
    cooling: Range
    yield_strength: Value | None
    tensile_strength: Value | None
    density: Value
    specific_heat: Value
    conductivity: Value | None
    heat_cap: Value
    lead: Value
    zinc: Value
    beryllium: Value

    @property
    def has_lead(self) -> bool:
        return self.lead.value >= LEAD_COUNTS

    @property
    def has_zinc(self) -> bool:
        return self.zinc.value >= ZINC_COUNTS

    @property
    def has_beryllium(self) -> bool:
        return self.beryllium.value >= BERYLLIUM_COUNTS

    @property
    def strength(self) -> Value | None:
        """What `hub_pressure_limit` takes: tensile strength of a brittle material, else yield."""
        return self.tensile_strength if self.brittle else self.yield_strength


def modulus_for(question: Question, part: Part, material: Material) -> Chosen:
    """The elastic modulus that is safe for a question [MPa].

    holding: low of both (less pressure). strength: high of both. growth: hub low, shaft high (the hub gives way).
    closing: hub high, shaft low (the shaft gives way). joining has no modulus.
    Raises: ValueError for joining.  Source: signs of Lamé's equations, derived here.
    """
    if question == "joining":
        raise ValueError("the joining temperature has no modulus in it")
    stiff = {"holding": (), "strength": ("hub", "shaft"), "growth": ("shaft",), "closing": ("hub",)}[question]
    end: End = "high" if part in stiff else "low"
    return _chosen(material.modulus, end, f"{end} modulus of the {part}, for {question}")


def expansion_for(question: Question, part: Part, material: Material, *, temperature: float) -> Chosen:
    """The mean expansion from 20 degC to a temperature that is safe for a question [1/K].

    holding:   hub as large, shaft as small as they can be at that temperature
    all others: hub as small, shaft as large
    Large is the high end above 20 degC and the low end below it; below COLD the colder table (`cooling`) is used.
    Validity: COLD_END to MEANS_END; above it true means are higher, which is safe for a hub at joining, up to HEATED_END.
    Raises: ValueError beyond.  Source: derived here.
    """
    end_of_means = HEATED_END if (question, part) == ("joining", "hub") else MEANS_END
    means = means_at(material, part, temperature, end=end_of_means)
    large = (part == "hub") == (question == "holding")
    cold = temperature < REFERENCE_TEMPERATURE
    end: End = "high" if large != cold else "low"
    way = "contraction" if cold else "expansion"
    return _chosen(means, end, f"{end} {way} of the {part}, for {question}")


def means_at(material: Material, what: str, temperature: float, *, end: float = MEANS_END) -> Range:
    """Least and largest mean expansion of a material from 20 degC to a temperature [degC], as far as it is known [1/K].

    what  for the message: hub, housing;  end  up to which the means of heating serve [degC]
    Validity: COLD_END to `end`; below COLD the colder table.  Raises: ValueError beyond.  Source: rules/data/materials.yaml.
    """
    if not COLD_END <= temperature <= end:
        raise ValueError(
            f"the {what} at {temperature:.0f} degC: how much it has grown or shrunk is known from {COLD_END:g} to "
            f"{end:g} degC alone"
        )
    return material.cooling if temperature < COLD else material.heating


def temper_cap(heat_cap: float, *, last_temper: float | None) -> float:
    """Highest temperature of one heating [degC] when the last temper is known: min(cap, temper - 50); unknown: the cap.

    Source: DIN 7190 (from memory).

    >>> temper_cap(300, last_temper=None), temper_cap(300, last_temper=180), temper_cap(150, last_temper=560)
    (300, 130.0, 150)
    """
    return heat_cap if last_temper is None else min(heat_cap, last_temper - TEMPER_MARGIN)


def _chosen(bounds: Range, end: End, says: str) -> Chosen:
    return Chosen(bounds.low if end == "low" else bounds.high, end, says, bounds.kind)
