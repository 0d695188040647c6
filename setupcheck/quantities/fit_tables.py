"""The shipped tables of ISO 286, read once, and the limits of a size looked up in them. Lengths mm."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache

from setupcheck.errors import SetupcheckError
from setupcheck.physics import iso_286
from setupcheck.physics.iso_286 import Cell, Limits, Tables
from setupcheck.quantities.book import in_range
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse_plain, read_text

FILE = "rules/data/iso_286.yaml"


@cache
def tables() -> Tables:
    """The tables as shipped.

    Raises: SetupcheckError if the file is missing or damaged.
    """
    data = parse_plain(read_text(shipped(FILE)), FILE).data
    try:
        if not isinstance(data, dict) or data.get("format") != 1:
            raise ValueError("it is not in format 1")
        return iso_286.read_tables(
            {str(row["name"]): str(row["text"]) for row in _rows(data, "sources")},
            _rows(data, "grades"),
            shafts=_rows(data, "shafts"),
            exceptions=_rows(data, "exceptions"),
        )
    except (KeyError, ValueError) as why:
        raise SetupcheckError(f"{FILE} cannot be used: {why}. Install setupcheck again") from None


def limits(nominal: float, tolerance_class: str) -> Limits:
    """Limits of a size with a class [mm], from the shipped tables.

    Raises: OutOfRange for a size, letter or grade that is not in them.

    >>> limits(32.0, "H6")
    Limits(lower=0.0, upper=0.016)
    """
    with in_range:
        return iso_286.limits(tables(), nominal, tolerance_class)


def basis(nominal: float, tolerance_class: str) -> tuple[Cell, ...]:
    """The cells of the shipped tables that those limits rest on.  Raises: OutOfRange as `limits`.

    >>> [(cell.column, cell.microns, cell.source) for cell in basis(32.0, "H6")]
    [('IT6', 16, 'GB/T 1800.3-1998, table of standard tolerances; same in a tool catalogue, p.1052')]
    """
    with in_range:
        return iso_286.basis(tables(), nominal, tolerance_class)


def _rows(data: Mapping[str, object], name: str) -> list[Mapping[str, object]]:
    rows = data.get(name)
    if not isinstance(rows, list) or not all(isinstance(row, dict) for row in rows):
        raise ValueError(f"{name} is no list of rows")
    return rows
