"""`python -m tests.catch`: what the rules catch of the slips of the table, and of every number spoilt in turn.

--list      also what was missed, caught by another rule or passed in silence
--no-sweep  the overlays only
"""

from __future__ import annotations

import argparse
from collections import Counter
from concurrent.futures import ProcessPoolExecutor
from multiprocessing import get_context

from tests.catch import sweep
from tests.catch.making import MISSED, OTHER, RIGHT, WAITS, Caught, false_alarms, judge
from tests.catch.table import good_jobs, overlays

WORKERS = 2


def pool() -> ProcessPoolExecutor:
    """Two workers, each with its own copies of the good jobs."""
    return ProcessPoolExecutor(WORKERS, mp_context=get_context("spawn"))


def slips_told(caught: list[Caught]) -> list[str]:
    """The overlays, counted."""
    counts = Counter(one.how for one in caught)
    judged = len(caught) - counts[WAITS]
    lines = [f"{len(caught)} slips made in {len({c.overlay.of for c in caught})} good jobs"]
    lines += [f"  {how:<28}{counts[how]:>5}{_share(counts[how], judged)}" for how in (RIGHT, OTHER, MISSED)]
    return [*lines, f"  {WAITS:<28}{counts[WAITS]:>5}"]


def _share(part: int, whole: int) -> str:
    return f"  {100.0 * part / whole:5.1f} %" if whole else ""


def listed(caught: list[Caught]) -> list[str]:
    """Every overlay that the right rule did not catch, and what spoke instead."""
    lines = []
    for one in caught:
        if one.how in (OTHER, MISSED):
            spoke = "; ".join(f"{r} {v} at {at}" if at else f"{r}: {v}" for r, at, v in one.spoke) or "nothing"
            lines.append(f"{one.how}: {one.overlay.told()}\n    wanted {one.overlay.rule}; spoke: {spoke}")
        elif one.how == WAITS:
            lines.append(f"waits: {one.overlay.told()}\n    for {one.overlay.rule}")
    return lines


def main() -> None:
    """Print the numbers."""
    say = argparse.ArgumentParser(prog="python -m tests.catch", description=__doc__.splitlines()[0])
    say.add_argument("--list", action="store_true", help="also what the right rule did not catch")
    say.add_argument("--no-sweep", action="store_true", help="the overlays only, not every number in turn")
    asked = say.parse_args()
    with pool() as workers:
        caught = list(workers.map(judge, overlays(), chunksize=8))
        print("\n".join(slips_told(caught)))
        alarms = false_alarms(good_jobs())
        print(f"  {'false alarms, good jobs':<28}{len(alarms):>5}")
        if asked.list:
            print("\n".join([*listed(caught), *(f"false alarm: {' '.join(one)}" for one in alarms)]))
        if not asked.no_sweep:
            found = list(workers.map(sweep.spoil, sweep.every(good_jobs()), chunksize=16))
            print("\n".join([*sweep.told(found), *(sweep.listed(found) if asked.list else [])]))


if __name__ == "__main__":
    main()
