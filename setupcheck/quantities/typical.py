"""Typical errors of devices, for entries that name a device and no value. Lengths mm."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

from setupcheck.notation import length
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse, read_text


@dataclass(frozen=True, slots=True)
class Typical:
    """One typical value [mm] and how good it is."""

    name: str
    value: float
    kind: str
    note: str


@cache
def table() -> dict[tuple[str, str], Typical]:
    """All typical values by (device, what)."""
    file = shipped("rules/data/typical.yaml")
    rows = parse(read_text(file), "rules/data/typical.yaml").data["values"]
    return {(row["device"], row["what"]): Typical(
        f"{row['device']} {row['what'].replace('_', ' ')}", length(row["value"], units="mm", unit_needed=True),
        row["kind"], row["note"]) for row in rows}


def typical(device: str, what: str) -> Typical | None:
    """The typical value for a device, or for a shop's own name that starts with its kind (`four-jaw-A`)."""
    found = [row for (kind, asked), row in table().items()
             if asked == what and (device == kind or device.startswith(kind + "-"))]
    return max(found, key=lambda row: len(row.name), default=None)
