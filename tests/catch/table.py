"""The table of slips and the overlays that make them, read and held against each other."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass
from fnmatch import fnmatchcase
from functools import cache
from pathlib import Path

from setupcheck.jobfile.changing import Change
from setupcheck.shipped import shipped
from setupcheck.yamlfile import Data, parse, read_text

HERE = Path(__file__).parent
READER = "reader"
"""The rule by which the reader of the job file refuses."""
TO_COME = "to come: "
"""How a rule begins that the book does not have yet."""
LEVELS = ("warn", "open", "fail")


@dataclass(frozen=True)
class Slip:
    """A row of the table; its keys are explained on top of slips.yaml."""

    id: str
    story: str
    source: str
    entry: str
    jobs: tuple[str, ...]
    rules: tuple[str, ...]
    level: str


@dataclass(frozen=True)
class Overlay:
    """One slip made in one job.

    sets, takes  entries that get another value, and entries that are taken out
    rule, at     the finding that has to speak: its rule, which is `reader` where the file is refused, and its instance
    says         words of the refusal
    """

    slip: str
    of: str
    sets: tuple[Change, ...]
    takes: tuple[str, ...]
    rule: str
    at: str
    says: str

    def told(self) -> str:
        """The slip, the job and what is changed, in a line."""
        changes = [c.told() for c in self.sets] + [f"{key} taken out" for key in self.takes]
        return f"{self.slip} in {self.of}: {'; '.join(changes)}"


def good_jobs() -> tuple[str, ...]:
    """Names of the shipped jobs."""
    return tuple(sorted(path.stem for path in shipped("jobs").glob("*.yaml")))


@cache
def slips() -> Mapping[str, Slip]:
    """The table by name of the slip."""
    rows = [_slip(row) for row in _rows(_read("slips.yaml"), "slips")]
    assert len({row.id for row in rows}) == len(rows), "a slip stands twice in the table"
    return {row.id: row for row in rows}


@cache
def overlays() -> tuple[Overlay, ...]:
    """Every overlay, job by job."""
    found = []
    for path in sorted((HERE / "overlays").glob("*.yaml")):
        data = _read(f"overlays/{path.name}")
        found += [_overlay(row, str(data["of"])) for row in _rows(data, "overlays")]
    return tuple(found)


@cache
def unreached() -> Mapping[str, str]:
    """Rules that no overlay expects, and why."""
    rows = _read("unreached.yaml")["unreached"]
    assert isinstance(rows, dict)
    return {rule: str(why) for rule, why in rows.items()}


def changes_where(patterns: str, key: str) -> bool:
    """Does a change of an entry, or of one around or inside it, fall under a path pattern of a slip?"""
    return any(_under(pattern, key) for pattern in patterns.split(" or "))


def _under(pattern: str, key: str) -> bool:
    mine, wanted = key.replace("[", ".").split("."), pattern.split(".")
    return fnmatchcase(key, pattern) or all(fnmatchcase(a, b) for a, b in zip(mine, wanted, strict=False))


def _slip(row: Mapping[str, Data]) -> Slip:
    words = {key: str(row[key]) for key in ("id", "story", "source", "entry", "level")}
    assert words["level"] in LEVELS, words
    return Slip(**words, jobs=_words(row["jobs"]), rules=_words(row["rules"]))


def _overlay(row: Mapping[str, Data], of: str) -> Overlay:
    unknown = row.keys() - {"slip", "change", "expect"}
    assert not unknown, (of, unknown)
    change, expect = row["change"], row["expect"]
    assert isinstance(change, dict) and isinstance(expect, dict)
    sets = tuple(Change(key, _value(value)) for key, value in change.items() if value != "taken out")
    takes = tuple(key for key, value in change.items() if value == "taken out")
    says = str(expect.get("refused", ""))
    rule = READER if says else str(expect.get("rule", ""))
    return Overlay(str(row["slip"]), of, sets, takes, rule, str(expect.get("at", "")), says)


def _value(value: Data) -> str:
    """In the notation of `--set`: a map or list in one line, which is YAML as well."""
    return json.dumps(value, ensure_ascii=False) if isinstance(value, dict | list) else str(value)


def _read(name: str) -> Mapping[str, Data]:
    data = parse(read_text(HERE / name), name).data
    assert isinstance(data, dict) and str(data["format"]) == "1", name
    return data


def _rows(data: Mapping[str, Data], key: str) -> list[dict[str, Data]]:
    rows = data[key]
    assert isinstance(rows, list)
    return [row for row in rows if isinstance(row, dict)]


def _words(found: Data) -> tuple[str, ...]:
    assert isinstance(found, list)
    return tuple(str(one) for one in found)
