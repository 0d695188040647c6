"""`python -m tests.mutants`: small wrong changes to ledger, fits and division, and which of them the tests notice.

--of MODULE   only modules whose name holds this (ledger, physics, pairing, …); several may be given
--sample N    so many mutants, as many of each area; --seed S draws others

A survivor that stands in survivors.yaml with the reason `equivalent` is not counted: no test could notice it.
"""

from __future__ import annotations

import argparse
import json
import random
import tempfile
import time
from collections.abc import Sequence
from pathlib import Path

import yaml

from tests.mutants import making, running
from tests.mutants.against import AREAS, modules

SURVIVORS = Path(__file__).with_name("survivors.yaml")
SEED = 20_240
SAMPLE = 240


def area(name: str) -> str:
    """`ledger`, `division`, or `fits` for the rest."""
    second = name.split(".")[1]
    return second if second in AREAS else "fits"


def drawn(of: Sequence[str], sample: int, seed: int) -> list[tuple[str, int]]:
    """(module, number of the mutant), shuffled; as many of each area, as far as it has them, all of one area alike likely."""
    every: dict[str, list[tuple[str, int]]] = {}
    for name in modules():
        if not of or any(word in name for word in of):
            count = len(making.mutants(running.file_of(name).read_text(encoding="utf-8")))
            every.setdefault(area(name), []).extend((name, number) for number in range(count))
    found: list[tuple[str, int]] = []
    for here, mine in sorted(every.items()):
        found += random.Random(f"{seed} {here}").sample(mine, min(sample // len(every), len(mine)))
    random.Random(seed).shuffle(found)
    return found


def equivalent() -> set[tuple[str, str, str]]:
    """(module, what it says, its line or "" for any) of survivors that change nothing anybody could notice."""
    rows = yaml.safe_load(SURVIVORS.read_text(encoding="utf-8")) if SURVIVORS.exists() else None
    mine = [row for row in rows or [] if row["reason"].startswith("equivalent")]
    return {(row["module"], row["change"], row.get("stands_in", "")) for row in mine}


def excused(name: str, mutant: making.Mutant, source: str, same: set[tuple[str, str, str]]) -> bool:
    """Whether a mutant is one of those that nobody could notice; the same change of another line is not."""
    line = source.splitlines()[mutant.line - 1].strip()
    return any((name, mutant.says, at) in same for at in ("", line))


def main(words: Sequence[str] | None = None) -> int:
    """Runs the drawn mutants and prints the score. 0: more than four in five were noticed."""
    parser = argparse.ArgumentParser(prog="python -m tests.mutants", description=__doc__)
    parser.add_argument("--of", action="append", default=[])
    parser.add_argument("--sample", type=int, default=SAMPLE)
    parser.add_argument("--seed", type=int, default=SEED)
    parser.add_argument("--minutes", type=float, default=60.0, help="draw no further mutant after so many minutes")
    parser.add_argument("--budget", type=float, default=8.0, help="processor seconds of tests for one mutant")
    parser.add_argument("--only", default="", help="NUMBER,… of one module, as printed")
    asked = parser.parse_args(words)
    running.preload()
    wanted = drawn(asked.of, asked.sample, asked.seed)
    if asked.only:
        (name,) = (n for n in modules() if any(word in n for word in asked.of))
        wanted = [(name, int(n)) for n in asked.only.split(",")]
    same, limits = equivalent(), {}
    score: dict[str, list[int]] = {}
    until = time.monotonic() + 60.0 * asked.minutes
    for name, number in wanted:
        if time.monotonic() > until:
            print("time is up: the rest of the sample was not run")
            break
        tests = modules()[name]
        if tests not in limits:
            limits[tests] = _as_it_is(name, tests, asked.budget)
        few, seconds = limits[tests]
        source = running.file_of(name).read_text(encoding="utf-8")
        mutant = making.mutant(source, number)
        ended = running.run(name, mutant.tree, tests, few, seconds=seconds)
        told = score.setdefault(area(name), [0, 0, 0])
        told[0 if ended.killed else 2 if excused(name, mutant, source, same) else 1] += 1
        done = sum(map(sum, score.values()))
        if done % 20 == 0:
            print(f"{done} mutants", flush=True)
        if not ended.killed:
            print(f"SURVIVED {name} {number} line {mutant.line}: {mutant.says}  [{ended.seconds:.0f} s]", flush=True)
    return _told(score)


def _as_it_is(name: str, tests: tuple[str, ...], budget: float) -> tuple[running.Few, int]:
    """What a mutant has to pass, quickest test first, and the processor seconds that it gets for that.

    The sources as they are must pass them all; how long each test takes is kept outside the repository.
    """
    with tempfile.TemporaryDirectory() as room:
        path = str(Path(room) / "seconds.json")
        plain = running.run(name, None, tests, running.Few({}, path), seconds=600)
        if plain.killed:
            raise SystemExit(f"the tests of {name} fail without any mutant: {' '.join(tests)}")
        known = json.loads(Path(path).read_text(encoding="utf-8"))
    print(f"{len(known)} tests for {area(name)}, as it is: {plain.seconds:.0f} s", flush=True)
    return running.Few(known, budget=budget), int(3.0 * min(plain.seconds, budget)) + 15


def _told(score: dict[str, list[int]]) -> int:
    total = [sum(column) for column in zip(*score.values(), strict=True)] if score else [0, 0, 0]
    for here, (killed, survived, alike) in [*sorted(score.items()), ("all", tuple(total))]:
        share = 100.0 * killed / max(killed + survived, 1)
        print(f"{here:<12}{killed:>5} killed {survived:>4} survived {alike:>4} equivalent  {share:5.1f} %")
    return 0 if total[0] > 4 * total[1] else 1


if __name__ == "__main__":
    raise SystemExit(main())
