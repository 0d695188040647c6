"""What is usual for a class of materials, from the shipped table: to tell what is not. Units as in physics.materials."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import cache
from types import MappingProxyType

from setupcheck.errors import SetupcheckError
from setupcheck.physics.materials import CLASSES, EVIDENCE, FAMILIES, Range
from setupcheck.quantities.data_rows import Row, rows
from setupcheck.quantities.material_data import PER_MILLION
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import read_text

FILE = "rules/data/classes.yaml"
ANY_METAL = "any-metal"
_FORMAT = 1
_KEYS = ("called", "modulus", "poisson", "expansion", "density", "specific_heat", "conductivity")
_FAMILY_CALLED = {
    "copper-alloy": "copper alloys",
    "steel": "steels",
    "cast-iron": "cast irons",
    "aluminium": "aluminium alloys",
}
_OF_A_FAMILY = "any of its classes"


@record(kw_only=True)
class Usual:
    """Lowest and highest that a class of materials has, and how messages call the class.

    modulus [MPa], poisson, expansion [1/K], density [kg/m3], specific_heat [J/kgK], conductivity [W/mK]
    """

    called: str
    modulus: Range
    poisson: Range
    expansion: Range
    density: Range
    specific_heat: Range
    conductivity: Range


def usual_for(of_class: str, family: str) -> Usual:
    """What is usual for a class; of a family whose class is not known everything it may be; else for any metal.

    Source: rules/data/classes.yaml.

    >>> usual_for("tin-bronze", "copper-alloy").called, usual_for("", "steel").called, usual_for("", "other").called
    ('tin bronzes', 'steels', 'any metal')
    """
    if of_class:
        return classes()[of_class]
    if family not in FAMILIES:
        return classes()[ANY_METAL]
    return _together(_FAMILY_CALLED[family], [classes()[one] for one, of in CLASSES.items() if of == family])


@cache
def classes() -> Mapping[str, Usual]:
    """All classes by name, and any metal.

    Raises: SetupcheckError with the line of the first wrong entry.
    """
    return MappingProxyType(read_classes(read_text(shipped(FILE)), FILE))


def read_classes(text: str, file: str) -> dict[str, Usual]:
    """Classes of a YAML text: every one of physics.materials, and any metal.

    Raises: JobError for broken YAML, SetupcheckError for an entry that is wrong or missing, with its line.
    """
    found = {name: _usual(row) for name, row in rows(text, file, section="classes", format=_FORMAT).items()}
    missing = [name for name in (*CLASSES, ANY_METAL) if name not in found]
    if missing:
        raise SetupcheckError(f"{file}: there is no class {', '.join(missing)}")
    return found


def _usual(row: Row) -> Usual:
    row.has_only(_KEYS, "class")
    if row.name not in (*CLASSES, ANY_METAL):
        raise row.wrong("", f"is none of {', '.join((*CLASSES, ANY_METAL))}")
    return Usual(
        called=row.text("called"),
        modulus=row.range("modulus"),
        poisson=row.range("poisson"),
        expansion=row.range("expansion", unit=PER_MILLION),
        density=row.range("density"),
        specific_heat=row.range("specific_heat"),
        conductivity=row.range("conductivity"),
    )


def _together(called: str, of: Sequence[Usual]) -> Usual:
    def whole(ranges: Sequence[Range]) -> Range:
        weakest = max((r.kind for r in ranges), key=EVIDENCE.index)
        return Range(min(r.low for r in ranges), max(r.high for r in ranges), weakest, _OF_A_FAMILY)

    return Usual(
        called=called,
        modulus=whole([u.modulus for u in of]),
        poisson=whole([u.poisson for u in of]),
        expansion=whole([u.expansion for u in of]),
        density=whole([u.density for u in of]),
        specific_heat=whole([u.specific_heat for u in of]),
        conductivity=whole([u.conductivity for u in of]),
    )
