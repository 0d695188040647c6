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
_FORMAT = 3
_KEYS = ("value", "kind", "note")
_RANGE = "range"
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
SHOWN: Mapping[str, str] = {
    **dict.fromkeys(("runout", "face_runout", "axis", "reading", "touch", "position"), "um"),
    **dict.fromkeys(("once_per_turn", "once_per_crank", "setting"), "arcsec"),
    "tilt": "arcmin",
    "temperature_error": "K",
}
"""The unit each is shown in."""


@record
class Typical:
    """One typical value [mm, rad or K by what it is of], how good it is, and what is usual: `best` to `worst`.

    Only `value` stands in sums; the range says what a measurement may find.
    """

    device: str
    what: str
    value: float
    kind: str
    note: str
    best: float
    worst: float

    @property
    def name(self) -> str:
        """As findings name it: `four-jaw runout`."""
        return f"{self.device} {self.what.replace('_', ' ')}"


@cache
def table() -> Mapping[tuple[str, str], Typical]:
    """The shipped typical values by (device, what)."""
    return read_table(read_text(shipped(FILE)), FILE)


def read_table(text: str, file: str) -> dict[tuple[str, str], Typical]:
    """Typical values of a YAML text: what -> device -> value, range, kind, note.

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
    texts = isinstance(row, dict) and all(isinstance(row.get(key), str) for key in _KEYS)
    if not isinstance(row, dict) or not texts or set(row) - {*_KEYS, _RANGE}:
        raise _wrong(tree, at, f"needs {', '.join(_KEYS)}, each a text, and {_RANGE}, and nothing else")
    value, kind, note = (str(row[key]) for key in _KEYS)
    if kind not in EVIDENCE:
        raise _wrong(tree, (*at, "kind"), f"is none of {', '.join(EVIDENCE)}")
    read = _value(tree, (*at, "value"), what, value)
    best, worst = _ends(tree, (*at, _RANGE), what, row.get(_RANGE))
    if not best <= read <= worst:
        raise _wrong(
            tree, (*at, _RANGE), f"does not hold the value {value}. Write what is usual, best and worst, round it"
        )
    return Typical(device, what, read, kind, note, best, worst)


def _value(tree: Tree, at: tuple[str | int, ...], what: str, text: str) -> float:
    """One figure in the unit of what it is of."""
    try:
        return WHATS[what](text)
    except NotationError as why:
        raise _wrong(tree, at, f"is no value: {why}") from None


def _ends(tree: Tree, at: tuple[str | int, ...], what: str, given: Data) -> tuple[float, float]:
    """Best and worst of what is usual, both above zero, the better one first."""
    if not isinstance(given, list) or len(given) != 2 or not all(isinstance(one, str) for one in given):
        raise _wrong(tree, at, "is no pair. Write the best and the worst that is usual, as in [5 um, 25 um]")
    best, worst = (_value(tree, at, what, str(one)) for one in given)
    if not 0.0 < best < worst:
        raise _wrong(tree, at, "has to run from a best above zero to a worst. Write the smaller one first")
    return best, worst


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
