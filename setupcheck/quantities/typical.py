"""Typical errors of devices, for entries that name a device and no value. Lengths mm."""

from __future__ import annotations

from functools import cache

from setupcheck.errors import SetupcheckError
from setupcheck.notation import length
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse, read_text


@record
class Typical:
    """One typical value [mm] and how good it is."""

    name: str
    value: float
    kind: str
    note: str


@cache
def table() -> dict[tuple[str, str], Typical]:
    """All typical values by (device, what)."""
    data = parse(read_text(shipped("rules/data/typical.yaml")), "rules/data/typical.yaml").data
    rows = data.get("values") if isinstance(data, dict) else None
    found: dict[tuple[str, str], Typical] = {}
    for row in rows if isinstance(rows, list) else []:
        if not isinstance(row, dict):
            raise SetupcheckError("rules/data/typical.yaml has a value that is no map. Install setupcheck again")
        device, what = str(row["device"]), str(row["what"])
        value = length(str(row["value"]), units="mm", unit_needed=True)
        found[device, what] = Typical(f"{device} {what.replace('_', ' ')}", value, str(row["kind"]), str(row["note"]))
    return found


def typical(device: str, what: str) -> Typical | None:
    """The typical value for a device, or for a shop's own name that starts with its kind (`four-jaw-A`)."""
    found = [
        row
        for (kind, asked), row in table().items()
        if asked == what and (device == kind or device.startswith(kind + "-"))
    ]
    return max(found, key=lambda row: len(row.name), default=None)
