"""Copies of good jobs with one planted mistake each, for people to try. Run this file to write them anew:

python -m tests.jobs.mistakes
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse, read_text

OVERLAYS = "tests/jobs/overlays.yaml"


@dataclass(frozen=True)
class Place:
    """One good job and the line of it that is changed: into the mistake, and into what clears it.

    typed  what the printed remedy says and the remedied line repeats; empty where the remedy has no figure
    """

    job: str
    op: int
    line: str
    becomes: str
    remedy: str
    typed: str = ""

    def good(self) -> str:
        return shipped(f"jobs/{self.job}.yaml").read_text("utf-8")

    def planted(self) -> str:
        """The job with the mistake in it."""
        return self._with(self.becomes)

    def remedied(self) -> str:
        """The job with the remedy typed in, in place of the mistake."""
        return self._with(self.remedy)

    def _with(self, instead: str) -> str:
        """The job with its line changed, looked for from its operation on, where the line says what it says."""
        text = self.good()
        start = text.index(f"- op: {self.op} ")
        at = text.index(self.line, start)
        following = text.find("\n  - op: ", start)
        assert following < 0 or at < following, f"{self.job}: op {self.op} has no line {self.line}"
        return text[:at] + instead + text[at + len(self.line) :]


@dataclass(frozen=True)
class Mistake:
    """A planted mistake: what the planner thought, the finding that catches it, and where it is planted."""

    name: str
    thought: str
    rule: str
    level: str
    with_it: tuple[str, ...]
    places: tuple[Place, ...]


def mistakes() -> tuple[Mistake, ...]:
    """All mistakes of the overlays."""
    data = parse(read_text(Path(__file__).with_name("overlays.yaml")), OVERLAYS).data
    assert isinstance(data, dict) and str(data["format"]) == "1"
    return tuple(_mistake(row) for row in _rows(data["mistakes"]))


def _rows(found: object) -> list[dict[str, object]]:
    assert isinstance(found, list)
    return [{str(k): v for k, v in row.items()} for row in found if isinstance(row, dict)]


def _mistake(row: dict[str, object]) -> Mistake:
    with_it = row["with_it"]
    assert isinstance(with_it, list)
    places = tuple(
        Place(**{key: int(str(value)) if key == "op" else str(value) for key, value in place.items()})  # type: ignore[arg-type]
        for place in _rows(row["places"])
    )
    name, thought, rule, level = (str(row[key]) for key in ("name", "thought", "rule", "level"))
    return Mistake(name, thought, rule, level, tuple(str(one) for one in with_it), places)


def copy_of(mistake: Mistake) -> str:
    """The copy to try: the first place of a mistake, with a head that does not say where it is."""
    place = mistake.places[0]
    modeline, planted = place.planted().split("\n", 1)
    assert "$schema=../rules/" in modeline
    return (
        f"{modeline.replace('../rules/', '../../rules/')}\n"
        f"# A copy of jobs/{place.job}.yaml with one planted mistake: one line, in one operation, is not as it should be.\n"
        f"# Find it by eye first, then let `setupcheck review jobs/mistakes/{mistake.name}.yaml` find it, change the line as\n"
        "# the report says, and review again. Comments and titles are those of the good job. The answer stands in\n"
        "# tests/jobs/overlays.yaml. Written by `python -m tests.jobs.mistakes`; changes made by hand are lost.\n"
        "#\n"
        f"{planted}"
    )


def copies() -> dict[Path, str]:
    """File -> text of every copy."""
    folder = shipped("jobs") / "mistakes"
    return {folder / f"{mistake.name}.yaml": copy_of(mistake) for mistake in mistakes()}


def write() -> None:
    """Write the copies anew."""
    for path, text in copies().items():
        path.write_text(text, encoding="utf-8")


if __name__ == "__main__":
    write()
