"""A short, fixed share of the fuzzing, and every file that once was a finding."""

from __future__ import annotations

import random
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests.fuzz.drive import Drive
from tests.fuzz.material import KINDS, sound
from tests.fuzz.mutate import spoilt

FOUND = sorted((Path(__file__).parent / "found").iterdir())
EXAMPLES = {"job": 25, "house": 10, "rule": 10, "record": 15, "readings": 10}


@pytest.fixture(scope="module")
def drive() -> Iterator[Drive]:
    made = Drive()
    yield made
    made.close()


@pytest.mark.parametrize("path", FOUND, ids=lambda path: path.name)
def test_what_was_once_found_is_read_or_refused_in_words(path: Path, drive: Drive) -> None:
    kind = path.name.partition("-")[0]
    assert kind in KINDS
    assert drive.through(kind, path.read_bytes(), deep="-deep-" in path.name) is None


@pytest.mark.parametrize("kind", KINDS)
def test_spoilt_files_are_read_or_refused_in_words(kind: str, drive: Drive) -> None:
    rng = random.Random(f"{kind} of the ordinary suite")
    before = drive.refused
    for number in range(EXAMPLES[kind]):
        raw = spoilt(kind, rng)
        assert drive.through(kind, raw) is None, (number, raw)
    assert before < drive.refused, "nothing was spoilt enough to be refused"


@pytest.mark.parametrize("kind", [kind for kind in KINDS if kind not in ("job", "rule")])
def test_what_is_spoilt_was_sound_before(kind: str, drive: Drive) -> None:
    before = drive.refused
    for text in sound(kind):
        assert drive.through(kind, text.encode(), deep=True) is None
    assert before == drive.refused


@pytest.mark.parametrize(
    ("raised", "what"),
    [(ValueError("oops"), "ValueError"), (RecursionError(), "RecursionError"), (None, "a raw control")],
)
def test_the_runner_tells_what_is_a_finding(
    raised: Exception | None, what: str, drive: Drive, monkeypatch: pytest.MonkeyPatch
) -> None:
    def broken(raw: bytes, deep: bool) -> str:
        if raised is not None:
            raise raised
        return "a\x1b[31m"

    monkeypatch.setattr(drive, "_job", broken)
    found = drive.through("job", b"")
    assert found is not None
    assert found.what.startswith(what)
