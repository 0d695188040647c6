"""The material of a part: from the shipped list, with what the job's certificate says in its place. MPa, 1/K, degC."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from functools import cache

from setupcheck.jobfile.models import Part
from setupcheck.jobfile.properties import Properties
from setupcheck.physics.materials import Material, Range, Value, temper_cap
from setupcheck.quantities.book import Open
from setupcheck.quantities.contents import is_porous, material_class, material_family
from setupcheck.quantities.material_data import UnknownMaterial, material
from setupcheck.quantities.shop import Floor

STATED = "shop record"
"""Evidence of a value that stands in the job file."""
ALL_OF_IT = ("modulus", "poisson", "expansion", "density", "specific_heat", "heat_cap")
"""What has to be said of a material that is not in the list; strength and conductivity only where a question needs them."""


def material_of(floor: Floor, part: str) -> Material | Open:
    """The material of a part with its stated properties, or what is missing of it. Source: job file, else materials.yaml."""
    given = floor.loaded.job.parts[part]
    path = f"parts.{part}"
    if given.material is None and given.properties is None:
        return Open((f"{path}.material",))
    found = material(given.material) if given.material is not None else None
    stated = given.properties or Properties()
    if isinstance(found, Material):
        return _with(found, stated)
    missing = tuple(f"{path}.properties.{key}" for key in ALL_OF_IT if getattr(stated, key) is None)
    if missing:
        because = found.because if isinstance(found, UnknownMaterial) else ""
        return Open((f"{path}.material",) if given.properties is None else missing, because)
    return _only_stated(given, stated)


def material_named(name: str, path: str) -> Material | Open:
    """The material of a worm or a housing, of which the job states the name alone. Source: materials.yaml."""
    found = material(name)
    return found if isinstance(found, Material) else Open((path,), found.because)


def porous(part: Part) -> bool | None:
    """Whether a part has pores, by `porous: true` or by the name of its material; None where nothing is said of it."""
    if part.properties is not None and part.properties.porous:
        return True
    if part.material is None:
        return None if part.properties is None else False
    return is_porous(part.material)


def strength_of(floor: Floor, part: str, found: Material) -> float | Open:
    """Yield, or tensile strength of a brittle material [MPa], or the key to fill. Source: job file, else materials.yaml."""
    if found.strength is not None:
        return found.strength.value
    key = "tensile_strength" if found.brittle else "yield_strength"
    return Open((f"parts.{part}.properties.{key}",))


def cap_of(floor: Floor, part: str, found: Material) -> float:
    """Highest temperature of one heating [degC], the last temper counted in. Source: materials.yaml, physics.materials."""
    stated = floor.loaded.job.parts[part].properties
    return temper_cap(found.heat_cap.value, last_temper=stated.last_temper if stated is not None else None)


@cache
def _value(number: float) -> Value:
    return Value(number, STATED, "stated in the job file")


@cache
def _range(number: float) -> Range:
    return Range(number, number, STATED, "stated in the job file")


def _with(found: Material, stated: Properties) -> Material:
    """The listed material with the stated values in place of its own."""
    said: dict[str, object] = {}
    places: tuple[tuple[str, tuple[str, ...], Callable[[float], object]], ...] = (
        ("modulus", ("modulus",), _range),
        ("poisson", ("poisson",), _value),
        ("expansion", ("heating", "cooling"), _range),
        ("yield_strength", ("yield_strength",), _value),
        ("tensile_strength", ("tensile_strength",), _value),
        ("density", ("density",), _value),
        ("specific_heat", ("specific_heat",), _value),
        ("conductivity", ("conductivity",), _value),
        ("heat_cap", ("heat_cap",), _value),
    )
    for key, fields, made in places:
        number = getattr(stated, key)
        if number is not None:
            said |= {field: made(number) for field in fields}
    if stated.brittle:
        said["brittle"] = True
    return replace(found, **said) if said else found  # type: ignore[arg-type]


def _only_stated(given: Part, stated: Properties) -> Material:
    """A material that is not in the list, made of what the job says; nothing is known of lead, zinc and beryllium."""
    assert stated.modulus is not None and stated.poisson is not None and stated.expansion is not None
    assert stated.density is not None and stated.specific_heat is not None and stated.heat_cap is not None
    nothing = Value(0.0, STATED, "not stated")
    return Material(
        name=given.material or "as stated",
        also=(),
        of_class=material_class(given.material or ""),
        family=material_family(given.material or ""),
        brittle=stated.brittle,
        note="stated in the job file",
        modulus=_range(stated.modulus),
        poisson=_value(stated.poisson),
        heating=_range(stated.expansion),
        cooling=_range(stated.expansion),
        yield_strength=_value(stated.yield_strength) if stated.yield_strength is not None else None,
        tensile_strength=_value(stated.tensile_strength) if stated.tensile_strength is not None else None,
        density=_value(stated.density),
        specific_heat=_value(stated.specific_heat),
        conductivity=_value(stated.conductivity) if stated.conductivity is not None else None,
        heat_cap=_value(stated.heat_cap),
        lead=nothing,
        zinc=nothing,
        beryllium=nothing,
    )
