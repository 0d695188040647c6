"""The shipped list of materials, and one of them by the name a job writes. Units as in physics.materials."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from setupcheck.errors import SetupcheckError
from setupcheck.notation import nearest, quoted
from setupcheck.physics.materials import EVIDENCE, FAMILIES, Material, Range, Value
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import Data, Path, Tree, parse_plain, read_text

FILE = "rules/data/materials.yaml"
_FORMAT = 1
_PER_MILLION = 1e-6
_KEYS = frozenset({
    "also", "family", "brittle", "note", "modulus", "poisson", "heating", "cooling", "yield", "tensile", "density",
    "specific_heat", "heat_cap", "lead", "zinc", "beryllium",
})  # fmt: skip
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
    """The material that a job names: by its name or another one, without regard to case, spaces, hyphens, `EN`.

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
    tree = parse_plain(text, file)
    data = tree.data
    if not isinstance(data, dict) or data.get("format") != _FORMAT or not isinstance(data.get("materials"), dict):
        raise SetupcheckError(f"{file}: 'format: {_FORMAT}' and a map 'materials' are needed")
    listed = data["materials"]
    assert isinstance(listed, dict)
    found = {name: _Row(tree, name, row).material() for name, row in listed.items()}
    spelled: dict[str, str] = {}
    for name, each in found.items():
        for one in {_spelling(n) for n in (name, *each.also)}:
            if one in spelled:
                raise _wrong(tree, ("materials", name), f"shares a name with {spelled[one]}")
            spelled[one] = name
    return found


@cache
def _by_spelling() -> Mapping[str, Material]:
    return {_spelling(n): each for each in materials().values() for n in (each.name, *each.also)}


def _spelling(name: str) -> str:
    letters = "".join(c for c in name.casefold() if c not in " -_")
    return letters.removeprefix("en").removeprefix("aw")


def _wrong(tree: Tree, path: Path, problem: str) -> SetupcheckError:
    return SetupcheckError(f"{tree.file}:{tree.key_place(path).line}  {tree.dotted(path, missing=True)} {problem}")


@record
class _Row:
    """One entry while it is read."""

    tree: Tree
    name: str
    row: Data

    def material(self) -> Material:
        if not isinstance(self.row, dict):
            raise self.wrong("", "is no map of values")
        for key in self.row:
            if key not in _KEYS:
                raise self.wrong(key, f"is no value of a material. Nearest: {nearest(key, sorted(_KEYS)) or 'none'}")
        also, brittle = self.row.get("also", []), self.row.get("brittle", False)
        if not isinstance(also, list) or not isinstance(brittle, bool):
            raise self.wrong("also", "must be a list of names, and brittle true or false")
        family = self.text("family")
        if family not in FAMILIES:
            raise self.wrong("family", f"is none of {', '.join(FAMILIES)}")
        return Material(
            name=self.name,
            also=tuple(str(n) for n in also),
            family=family,
            brittle=brittle,
            note=self.text("note"),
            modulus=self.range("modulus"),
            poisson=self.value("poisson"),
            heating=self.range("heating", unit=_PER_MILLION),
            cooling=self.range("cooling", unit=_PER_MILLION),
            yield_strength=self.known("yield"),
            tensile_strength=self.known("tensile"),
            density=self.value("density"),
            specific_heat=self.value("specific_heat"),
            heat_cap=self.value("heat_cap"),
            lead=self.known("lead") or _NOT_IN_IT,
            zinc=self.known("zinc") or _NOT_IN_IT,
            beryllium=self.known("beryllium") or _NOT_IN_IT,
        )

    def wrong(self, key: str, problem: str) -> SetupcheckError:
        return _wrong(self.tree, ("materials", self.name, key) if key else ("materials", self.name), problem)

    def text(self, key: str) -> str:
        found = self.row.get(key) if isinstance(self.row, dict) else None
        if not isinstance(found, str):
            raise self.wrong(key, "is missing")
        return found

    def known(self, key: str) -> Value | None:
        """A value that may be left out."""
        return self.value(key) if isinstance(self.row, dict) and key in self.row else None

    def value(self, key: str) -> Value:
        (number,), kind, note = self.entry(key, numbers=1)
        return Value(number, kind, note)

    def range(self, key: str, *, unit: float = 1.0) -> Range:
        (low, high), kind, note = self.entry(key, numbers=2)
        if low > high:
            raise self.wrong(key, "has its low end above the high one")
        return Range(low * unit, high * unit, kind, note)

    def entry(self, key: str, *, numbers: int) -> tuple[list[float], str, str]:
        """Numbers, kind, note of `[number …, kind]` or `[number …, kind, note]`."""
        given = self.row.get(key) if isinstance(self.row, dict) else None
        if not isinstance(given, list) or not numbers + 1 <= len(given) <= numbers + 2:
            raise self.wrong(key, "must be [value, kind, note]" if numbers == 1 else "must be [low, high, kind, note]")
        found = [float(n) for n in given[:numbers] if isinstance(n, int | float) and not isinstance(n, bool) and n > 0]
        if len(found) != numbers:
            raise self.wrong(key, "needs numbers above 0")
        kind, note = given[numbers], given[numbers + 1] if len(given) > numbers + 1 else ""
        if kind not in EVIDENCE or not isinstance(kind, str) or not isinstance(note, str):
            raise self.wrong(key, f"needs one of {', '.join(EVIDENCE)} behind its numbers")
        return found, kind, note
