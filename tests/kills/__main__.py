"""Kills writing processes at random moments and tells what they left.

    python -m tests.kills [--kills 200] [--seed 0]

Half of them replace a file, half write a new one. Exit 1 where a file was neither the old one nor the new one.
"""

from __future__ import annotations

import argparse
import sys
import tempfile
from pathlib import Path

from tests.kills.killing import kills


def main(arguments: list[str]) -> int:
    """The runner. Returns its exit code."""
    asked = argparse.ArgumentParser(prog="python -m tests.kills")
    asked.add_argument("--kills", type=int, default=200)
    asked.add_argument("--seed", type=int, default=0)
    given = asked.parse_args(arguments)
    third = 0
    for how, count in (("whole", given.kills - given.kills // 2), ("new", given.kills // 2)):
        with tempfile.TemporaryDirectory() as folder:
            left = kills(Path(folder), count, given.seed, how)
        what = "replacing a file" if how == "whole" else "writing a new file (old: none there)"
        print(
            f"{what}: {count} kills, {left.old} old, {left.new} new, {left.third} a third, {left.parts} part files left"
        )
        third += left.third
    return 1 if third else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
