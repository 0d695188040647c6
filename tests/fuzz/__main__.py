"""Spoilt files put through every reader for as long as asked, findings shrunk and kept.

    python -m tests.fuzz [--seconds N] [--seed S] [--kind job …] [--into FOLDER]

Prints how many files were put through, how many of them were refused in words, and each new finding with the file it is
kept in. Exit 1 where there was one. The same seed puts the same files through in the same order.
"""

from __future__ import annotations

import argparse
import hashlib
import random
import sys
import time
from collections import Counter
from pathlib import Path

from tests.fuzz.drive import Drive, Finding
from tests.fuzz.drive import smaller as shrunk
from tests.fuzz.material import KINDS, SUFFIX
from tests.fuzz.mutate import spoilt

FOUND = Path(__file__).parent / "found"
SHARE = {"job": 6, "house": 1, "rule": 1, "record": 1, "readings": 1}
"""How many of ten files are of a kind."""
DEEP = 10
"""One file in so many is put through everything that can be made of a review."""


def main(arguments: list[str]) -> int:
    """The runner. Returns its exit code."""
    asked = argparse.ArgumentParser(prog="python -m tests.fuzz")
    asked.add_argument("--seconds", type=float, default=60.0)
    asked.add_argument("--seed", type=int, default=0)
    asked.add_argument("--kind", action="append", choices=KINDS)
    asked.add_argument("--into", type=Path, default=FOUND)
    given = asked.parse_args(arguments)
    kinds = given.kind or [kind for kind in KINDS for _ in range(SHARE[kind])]
    rng, drive = random.Random(given.seed), Drive()
    done: Counter[str] = Counter()
    refused: Counter[str] = Counter()
    seen: Counter[tuple[str, str]] = Counter()
    until = time.monotonic() + given.seconds
    try:
        while time.monotonic() < until:
            kind = rng.choice(kinds)
            raw, deep = spoilt(kind, rng), rng.randrange(DEEP) == 0
            before = drive.refused
            finding = drive.through(kind, raw, deep=deep)
            done[kind] += 1
            refused[kind] += drive.refused > before
            if finding is not None:
                key = (finding.what, finding.where)
                seen[key] += 1
                if seen[key] == 1:
                    _keep(drive, kind, raw, finding, given.into, deep=deep)
    except KeyboardInterrupt:
        pass
    drive.close()
    for kind, count in done.items():
        print(f"{kind:<10} {count:>7} files, {refused[kind]} refused in words")
    print(f"{'all':<10} {done.total():>7} files, {len(seen)} findings, met {seen.total()} times; seed {given.seed}")
    return 1 if seen else 0


def _keep(drive: Drive, kind: str, raw: bytes, finding: Finding, into: Path, *, deep: bool) -> None:
    """Shrinks the file and writes it where an ordinary test reads it again."""

    def same(less: bytes) -> bool:
        found = drive.through(kind, less, deep=deep)
        return found is not None and (found.what, found.where) == (finding.what, finding.where)

    small = raw if finding.what == "a hang" else shrunk(raw, same)
    into.mkdir(parents=True, exist_ok=True)
    name = f"{kind}-{'deep-' if deep else ''}{hashlib.sha256(small).hexdigest()[:8]}{SUFFIX[kind]}"
    (into / name).write_bytes(small)
    print(f"{finding.what} at {finding.where}, kept as {into / name}\n{finding.story[-1500:]}\n", flush=True)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
