"""Friction of a fitted joint: the shipped table by the families of both parts, the way of joining and the state of the joint."""

from __future__ import annotations

from functools import cache

from setupcheck.errors import SetupcheckError
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse_plain, read_text

FILE = "rules/data/friction.yaml"


@record
class Friction:
    """Lowest friction that a joint may have when it slips, highest when it is pressed in; how good, and what it says."""

    low: float
    high: float
    kind: str
    note: str = ""

    def told(self) -> str:
        """`0.17 to 0.25 (from memory)`."""
        return f"{self.low:g} to {self.high:g} ({self.kind})"


@cache
def table() -> dict[tuple[str, str, str, str], Friction]:
    """All rows by (hub family, shaft family, way of joining, state of the joint).

    Raises: SetupcheckError if the file is damaged.
    """
    data = parse_plain(read_text(shipped(FILE)), FILE).data
    rows = data.get("values") if isinstance(data, dict) and data.get("format") == 1 else None
    found: dict[tuple[str, str, str, str], Friction] = {}
    try:
        for row in rows if isinstance(rows, list) else []:
            assert isinstance(row, dict)
            low, high = float(str(row["low"])), float(str(row["high"]))
            if not 0.0 < low <= high <= 1.0:
                raise ValueError(f"friction from {low} to {high}")
            key = (str(row["hub"]), str(row["shaft"]), str(row["by"]), str(row["joint"]))
            found[key] = Friction(low, high, str(row["kind"]), str(row["note"]))
    except (AssertionError, KeyError, ValueError) as why:
        raise SetupcheckError(f"{FILE} cannot be used: {why}. Install setupcheck again") from None
    if not found:
        raise SetupcheckError(f"{FILE} has no values in format 1. Install setupcheck again")
    return found


def friction(*, hub: str, shaft: str, by: str, joint: str) -> Friction | None:
    """The row for a pair, or for the same two materials the other way round; None where the table has neither.

    Two surfaces rub alike whichever of them is outside.  Source: rules/data/friction.yaml; the exchange is our choice.

    >>> friction(hub="copper-alloy", shaft="steel", by="shrink", joint="degreased").low
    0.17
    """
    rows = table()
    return rows.get((hub, shaft, by, joint)) or rows.get((shaft, hub, by, joint))
