"""Which quantities a rule can judge: those whose value is a number or a word. Asked for a house's own rules alone."""

from __future__ import annotations

from collections.abc import Mapping

from setupcheck.quantities.book import Quantity
from setupcheck.quantities.tables import TABLES

_BESIDE = {"None", "Known", "Open", "object"}
"""What a formula may return beside its value, or instead of saying what it is."""


def judgeable() -> tuple[Mapping[str, Quantity], frozenset[str]]:
    """The quantities by name whose value can be judged, and the names of those whose values are words.

    Read off what each formula says that it returns; one that does not say it is a number where it has a unit.

    >>> quantities, words = judgeable()
    >>> "hold.overhang" in quantities, "route.floor" in quantities, "hold.error_kind" in words
    (True, False, True)
    """
    found: dict[str, Quantity] = {}
    words: set[str] = set()
    for one in TABLES:
        returns = set(str(one.of.__annotations__.get("return", "object")).split(" | ")) - _BESIDE
        if returns == {"str"}:
            words.add(one.name)
        elif not (returns <= {"float", "int"} and (returns or one.unit not in ("", "1"))):
            continue
        found[one.name] = one
    return found, frozenset(words)
