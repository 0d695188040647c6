"""The shipped list of materials, and one of them by the name a job writes. Units as in physics.materials."""

from __future__ import annotations

import re
from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from setupcheck.notation import nearest, quoted
from setupcheck.physics.materials import CLASSES, Material, Value
from setupcheck.quantities.data_rows import Row, rows
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import read_text

FILE = "rules/data/materials.yaml"
_FORMAT = 2
PER_MILLION = 1e-6
"""Expansions stand in the tables as 1e-6/K."""
_KEYS = frozenset({
    "also", "class", "brittle", "note", "modulus", "poisson", "heating", "cooling", "yield", "tensile", "density",
    "specific_heat", "conductivity", "heat_cap", "lead", "zinc", "beryllium",
})  # fmt: skip
_SYSTEM = re.compile(r"(en(aw)?|aw|aisi|uns|din|w\.?nr\.?|sae(?=\d{4}))(?=.)")
"""Name of the system before a designation, spaces and hyphens taken out: EN, EN AW, AISI, UNS, DIN, W.-Nr., SAE of a steel.
Source: common designations, from memory."""
_NOT_IN_IT = Value(0.0, "from memory", "no addition of it")


@record
class UnknownMaterial:
    """A name that the list does not have; `nearest` is the known name it most likely means, or None."""

    name: str
    nearest: str | None

    @property
    def because(self) -> str:
        """
        >>> UnknownMaterial("CuSn13-C", "CuSn12-C").because
        "the material 'CuSn13-C' is not in the list. Nearest: CuSn12-C"
        """
        said = f"the material {quoted(self.name)} is not in the list"
        if self.nearest:
            return f"{said}. Nearest: {self.nearest}"
        from setupcheck.quantities.contents import material_family  # which asks this list first

        family = material_family(self.name)
        kin = [each.name for each in materials().values() if each.family == family] or list(materials())
        return f"{said}, which has {', '.join(kin)}"


def material(name: str) -> Material | UnknownMaterial:
    """The material that a job names: by its name or another one, without regard to case, spaces, hyphens, and the
    system before it (EN, AISI, UNS, W.-Nr.).

    >>> found = material("sae 65")
    >>> found.name if isinstance(found, Material) else found.because
    'C90700'
    """
    found = _by_spelling().get(_spelling(name))
    if found is not None:
        return found
    names = {n: each for each in materials().values() for n in (each.name, *each.also)}
    near = nearest(name, names)
    return UnknownMaterial(name, near)


@cache
def materials() -> Mapping[str, Material]:
    """All shipped materials by name, in the order of the file.

    Raises: SetupcheckError with the line of the first wrong entry.
    """
    return MappingProxyType(read_materials(read_text(shipped(FILE)), FILE))


def read_materials(text: str, file: str) -> dict[str, Material]:
    """Materials of a YAML text.

    Raises: JobError for broken YAML, SetupcheckError for an entry that is wrong or missing, with its line.
    """
    entries = rows(text, file, section="materials", format=_FORMAT)
    found = {name: _material(row) for name, row in entries.items()}
    spelled: dict[str, str] = {}
    for name, each in found.items():
        for one in {_spelling(n) for n in (name, *each.also)}:
            if one in spelled:
                raise entries[name].wrong("", f"shares a name with {spelled[one]}")
            spelled[one] = name
    return found


@cache
def _by_spelling() -> Mapping[str, Material]:
    return {_spelling(n): each for each in materials().values() for n in (each.name, *each.also)}


def _spelling(name: str) -> str:
    letters = "".join(c for c in name.casefold() if c not in " -_")
    found = _SYSTEM.match(letters)
    return letters[found.end() :] if found else letters


def _material(row: Row) -> Material:
    row.has_only(_KEYS, "material")
    also, brittle = row.at("also", []), row.at("brittle", False)
    if not isinstance(also, list) or not isinstance(brittle, bool):
        raise row.wrong("also", "must be a list of names, and brittle true or false")
    of_class = row.one_of("class", CLASSES)
    return Material(
        name=row.name,
        also=tuple(str(n) for n in also),
        of_class=of_class,
        family=CLASSES[of_class],
        brittle=brittle,
        note=row.text("note"),
        modulus=row.range("modulus"),
        poisson=row.value("poisson"),
        heating=row.range("heating", unit=PER_MILLION),
        cooling=row.range("cooling", unit=PER_MILLION),
        yield_strength=row.known("yield"),
        tensile_strength=row.known("tensile"),
        density=row.value("density"),
        specific_heat=row.value("specific_heat"),
        conductivity=row.value("conductivity"),
        heat_cap=row.value("heat_cap"),
        lead=row.known("lead") or _NOT_IN_IT,
        zinc=row.known("zinc") or _NOT_IN_IT,
        beryllium=row.known("beryllium") or _NOT_IN_IT,
    )
