"""What a job states of its materials: is it usual for their class, and are they solid at all? MPa, 1/K, W/mK."""

from __future__ import annotations

from setupcheck.jobfile.models import Part
from setupcheck.jobfile.setups import Join
from setupcheck.notation import plain
from setupcheck.physics.materials import Range
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.contents import material_class, material_family
from setupcheck.quantities.material_classes import usual_for
from setupcheck.quantities.pairing import FITTED
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import porous
from setupcheck.record import record

USUAL = "usual"
_SLACK = 1e-9  # relative: a value typed exactly at an end is inside, whatever its binary digits


@record
class _Shown:
    """How one property is told: its words, what its base unit is multiplied with, and the unit."""

    words: str
    times: float
    unit: str

    def of(self, value: float) -> str:
        return plain(round(value * self.times, 6))

    def with_unit(self, value: float) -> str:
        return f"{self.of(value)} {self.unit}".strip()


_JUDGED = {
    "modulus": _Shown("modulus", 1e-3, "GPa"),
    "poisson": _Shown("Poisson's ratio", 1.0, ""),
    "expansion": _Shown("expansion", 1e6, "um/m/K"),
    "density": _Shown("density", 1.0, "kg/m3"),
    "specific_heat": _Shown("specific heat", 1.0, "J/kgK"),
    "conductivity": _Shown("conductivity", 1.0, "W/mK"),
}


def odd_properties(part: Part, name: str) -> str | None:
    """`usual`, or each stated property that lies outside what its class usually has; None where none is stated.

    A part with pores, and one whose material tells no class and no family, is held against any metal.
    Source: rules/data/classes.yaml.
    """
    stated = part.properties
    if stated is None:
        return None
    said = {key: getattr(stated, key) for key in _JUDGED if getattr(stated, key) is not None}
    if not said:
        return None
    called = part.material or ""
    has_pores = porous(part) is True
    usual = usual_for("", "other") if has_pores else usual_for(material_class(called), material_family(called))
    odd = [
        f"{_JUDGED[key].words} of {name} {_JUDGED[key].with_unit(value)} is outside {_ends(getattr(usual, key), _JUDGED[key])} "
        f"usual for {usual.called}"
        for key, value in said.items()
        if not _inside(value, getattr(usual, key))
    ]
    return "; ".join(odd) or USUAL


def elastic_kind(floor: Floor, join: Join) -> str | Open | None:
    """`solid`, or `porous` where hub or shaft is sintered with pores; None for a joint that holds by other means.

    Source: the job file; words for sintered materials in quantities.contents.
    """
    if join.by not in FITTED:
        return None
    names = [floor.loaded.ref(text).part for text in (join.outer, join.inner)]
    found = {name: porous(floor.loaded.job.parts[name]) for name in names}
    if True in found.values():
        return "porous"
    missing = tuple(f"parts.{name}.material" for name, one in found.items() if one is None)
    return Open(missing) if missing else "solid"


def _inside(value: float, usual: Range) -> bool:
    return usual.low * (1.0 - _SLACK) <= value <= usual.high * (1.0 + _SLACK)


def _ends(usual: Range, shown: _Shown) -> str:
    return f"{shown.of(usual.low)} to {shown.of(usual.high)}"


STATED = (
    Quantity(
        "fit.odd_properties",
        "part",
        "",
        0,
        odd_properties,
        {"part": ":", "name": "@key"},
        "whether what is stated of a material is usual for its class",
    ),
    Quantity(
        "fit.elastic_kind",
        "join",
        "",
        0,
        elastic_kind,
        {"floor": "route.floor", "join": ":"},
        "whether hub and shaft are solid metal or have pores",
    ),
)
