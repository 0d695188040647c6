"""Typical errors of devices, for entries that name a device or a way of working and no value. mm, rad, K."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import cache

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.setups import Head
from setupcheck.notation import NotationError, angle_bound, bound, nearest, temperature_difference
from setupcheck.record import record
from setupcheck.shipped import shipped
from setupcheck.yamlfile import Data, Tree, parse_plain, read_text

FILE = "rules/data/typical.yaml"
_FORMAT = 2
_KEYS = ("value", "kind", "note")
EVIDENCE = ("published", "common practice", "from memory")
"""How good a typical value is, best first."""


def _length(text: str) -> float:
    return bound(text, units="mm", unit_needed=True)


WHATS: Mapping[str, Callable[[str], float]] = {
    "runout": _length,
    "face_runout": _length,
    "axis": _length,
    "reading": _length,
    "touch": _length,
    "position": _length,
    "once_per_turn": angle_bound,
    "once_per_crank": angle_bound,
    "setting": angle_bound,
    "tilt": angle_bound,
    "temperature_error": temperature_difference,
}
"""What a typical value may be of, and how it is read: lengths mm, angles rad, differences of temperature K."""


@record
class Typical:
    """One typical value [mm, rad or K by what it is of] and how good it is."""

    device: str
    what: str
    value: float
    kind: str
    note: str

    @property
    def name(self) -> str:
        """As findings name it: `four-jaw runout`."""
        return f"{self.device} {self.what.replace('_', ' ')}"


@cache
def table() -> Mapping[tuple[str, str], Typical]:
    """The shipped typical values by (device, what)."""
    return read_table(read_text(shipped(FILE)), FILE)


def read_table(text: str, file: str) -> dict[tuple[str, str], Typical]:
    """Typical values of a YAML text: what -> device -> value, kind, note.

    Raises: JobError for broken YAML, SetupcheckError for an entry that is wrong or missing, with its line.
    """
    tree = parse_plain(text, file)
    data = tree.data
    groups = data.get("values") if isinstance(data, dict) and data.get("format") == _FORMAT else None
    if not isinstance(groups, dict):
        raise SetupcheckError(f"{file}: 'format: {_FORMAT}' and a map 'values' are needed")
    found: dict[tuple[str, str], Typical] = {}
    for what, devices in groups.items():
        if what not in WHATS:
            raise _wrong(tree, ("values", what), f"is nothing with a typical value. Nearest: {nearest(what, WHATS)}")
        if not isinstance(devices, dict):
            raise _wrong(tree, ("values", what), "is no map of devices")
        for device, row in devices.items():
            found[device, what] = _row(tree, device, what, row)
    return found


def _row(tree: Tree, device: str, what: str, row: Data) -> Typical:
    at = ("values", what, device)
    if not isinstance(row, dict) or any(not isinstance(row.get(key), str) for key in _KEYS) or set(row) - set(_KEYS):
        raise _wrong(tree, at, f"needs {', '.join(_KEYS)}, each a text, and nothing else")
    value, kind, note = (str(row[key]) for key in _KEYS)
    if kind not in EVIDENCE:
        raise _wrong(tree, (*at, "kind"), f"is none of {', '.join(EVIDENCE)}")
    try:
        read = WHATS[what](value)
    except NotationError as why:
        raise _wrong(tree, (*at, "value"), f"is no value: {why}") from None
    return Typical(device, what, read, kind, note)


def _wrong(tree: Tree, path: tuple[str | int, ...], problem: str) -> SetupcheckError:
    return SetupcheckError(f"{tree.file}:{tree.key_place(path).line}  {tree.dotted(path, missing=True)} {problem}")


def typical(device: str, what: str) -> Typical | None:
    """The typical value for a device, or for a shop's own name that starts with its kind (`four-jaw-A`)."""
    found = [
        row
        for (kind, asked), row in table().items()
        if asked == what and (device == kind or device.startswith(kind + "-"))
    ]
    return max(found, key=lambda row: len(row.name), default=None)


OWN = "shop record"


def own_name(series: str, entries: int) -> str:
    """As findings name a limit of the shop's own record in place of a typical value.

    >>> own_name("four-jaw-A runout", 7)
    'four-jaw-A runout (shop record, 7 entries)'
    """
    return f"{series} ({OWN}, {entries} entries)"


_OF_HOUSE = " (house value of "


def house_name(row: str, house: str) -> str:
    """As findings name a value of a house file in place of a typical one.

    >>> house_name("four-jaw runout", "Toolroom")
    'four-jaw runout (house value of Toolroom, shop record)'
    """
    return f"{row}{_OF_HOUSE}{house}, {OWN})"


def is_of_house(name: str) -> bool:
    """Whether a name of what a value rests on is that of a house file's value."""
    return _OF_HOUSE in name


def is_own(name: str) -> bool:
    """Whether a name of what a value rests on is the shop's own, by record or house file; no typical value's is such."""
    return f" ({OWN}, " in name or is_of_house(name)


def typical_length(device: str) -> Typical | None:
    """The typical error of a length set or read with a device: a position, a touch or a reading."""
    return next((row for what in ("position", "touch", "reading") if (row := typical(device, what)) is not None), None)


def head_uncertainty(head: Head) -> tuple[float, str] | None:
    """How finely a head can be set [rad] and the typical value that rests on ("" where it is stated); None: not known."""
    if head.uncertainty is not None:
        return head.uncertainty, ""
    row = typical(head.by, "tilt") if head.by is not None else None
    return (row.value, row.name) if row is not None else None
