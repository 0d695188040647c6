"""Ratios of this command against what it cannot do without, measured side by side in one run. Not a test.

    python tests/bench/ratios.py

Prints each ratio with its aim. Whole processes are timed alternately and the medians compared, so that a busy machine
slows both sides alike. Both sides keep their bytecode, as a package that was installed and used once does.
"""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
JOB = ROOT / "jobs" / "rotator-worm-wheel.yaml"
FIVE = "import numpy, pydantic, yaml, rich.console, typer"
RUNS = 15
DRAWER = 200


BYTECODE = tempfile.TemporaryDirectory()
ENVIRONMENT = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"} | {
    "PYTHONPATH": str(ROOT),
    "PYTHONPYCACHEPREFIX": BYTECODE.name,
    "OPENBLAS_NUM_THREADS": "1",  # on a busy machine the start of a second thread doubles the time of the imports
}
sys.path.insert(0, str(ROOT))


def process(*arguments: str) -> Callable[[], float]:
    """Wall time of one whole process."""

    def run() -> float:
        start = time.perf_counter()
        subprocess.run([sys.executable, *arguments], cwd=ROOT, env=ENVIRONMENT, stdout=subprocess.DEVNULL, check=False)
        return time.perf_counter() - start

    return run


def timed(work: Callable[[], object]) -> Callable[[], float]:
    """Wall time of one call."""

    def run() -> float:
        start = time.perf_counter()
        work()
        return time.perf_counter() - start

    return run


def ratio(name: str, ours: Callable[[], float], theirs: Callable[[], float], aim: str, runs: int = RUNS) -> None:
    """Median of ours over median of theirs, taken alternately."""
    ours(), theirs()
    pairs = [(ours(), theirs()) for _ in range(runs)]
    a, b = (statistics.median(times) for times in zip(*pairs, strict=True))
    print(f"{name:<58} {a * 1000:8.1f} / {b * 1000:8.1f} ms = {a / b:5.2f}   aim {aim}")


def random_numbers() -> None:
    """Only the random numbers that the review of the worm wheel draws, in numpy, nothing made of them."""
    import numpy as np

    from setupcheck.flow import load_job, prepare, stack_results
    from setupcheck.ledger.draws import TRIALS, Draws

    loaded = load_job(JOB)

    def fresh() -> tuple[object, set[object]]:
        _, book = prepare(loaded)
        results = stack_results(book)
        causes = {s.cause for r in results.values() for s in r.combined.shares}
        return book, causes

    _, causes = fresh()
    figures = [r.figure for r in stack_results(prepare(loaded)[1]).values()]
    patterns = {id(p): p for f in figures if (p := getattr(f, "pattern", None)) is not None}
    scatters = {s.cause.key: (s, p.count) for p in patterns.values() for s in p.scatter}

    def draw() -> None:
        for cause in causes:
            if cause.law != "high-point" and cause.key not in scatters:  # type: ignore[attr-defined]
                rng = Draws.stream(cause.key)  # type: ignore[attr-defined]
                for _ in range(1 if cause.is_real else 3 if cause.law.startswith("clearance") else 2):  # type: ignore[attr-defined]
                    rng.random(TRIALS)
        for scatter, count in scatters.values():
            Draws.stream(scatter.cause.key).random((TRIALS, count), dtype=np.float32)

    def carlo() -> None:
        from setupcheck.ledger.combine import combine

        draws = Draws()
        for figure in figures:
            combine(figure, draws, low=None, high=1.0, confidence=0.95).drawn()

    ratio("Monte Carlo of all stacks / drawing its random numbers", timed(carlo), timed(draw), "under 2")


def many_jobs() -> None:
    """200 jobs in one call, their reviews kept, against 200 times one whose review is let go; taken alternately, ten of each."""
    from setupcheck.flow import review

    kept: list[object] = []
    one = timed(lambda: review(JOB))
    ten = timed(lambda: kept.extend(review(JOB) for _ in range(10)))
    one()
    pairs = [(ten(), sum(one() for _ in range(10))) for _ in range(20)]
    many, single = (sum(times) for times in zip(*pairs, strict=True))
    print(f"{'200 jobs in one call / 200 x one job':<58} {many * 1000:8.1f} / {single * 1000:8.1f} ms", end="")
    print(f" = {many / single:5.2f}   aim about 1")


def throughput() -> None:
    """A drawer of jobs reviewed by the command with two workers and with one, whole processes with their start."""
    with tempfile.TemporaryDirectory() as folder:
        for number in range(DRAWER):
            Path(folder, f"{number:03}.yaml").write_bytes(JOB.read_bytes())
        two, one = (process("-m", "setupcheck", "review", "--workers", n, folder) for n in ("2", "1"))
        aim = f"0.5 to 0.6 on two processors, here {os.cpu_count()}"
        ratio(f"a drawer of {DRAWER} jobs, two workers / one", two, one, aim, runs=3)


def whole_rule_book() -> None:
    """All rules over one job: read from their files, evaluated with the route and figures they ask for, with the figures at hand.

    Each beside a process that only makes the five imports, so that what a larger book costs is seen.
    """
    from setupcheck.flow import load_job, prepare, rules
    from setupcheck.quantities.facts import UnknownFact, facts_of
    from setupcheck.rulebook import Unknown, evaluate, load_rulebook
    from setupcheck.shipped import shipped

    loaded, book_of_rules = load_job(JOB), rules()
    at_hand = prepare(loaded)

    def over(floor: object, book: object) -> None:
        def facts(at: object, name: str) -> object:
            found = facts_of(floor, at, name)  # type: ignore[arg-type]
            return Unknown(found.path, found.of, found.never) if isinstance(found, UnknownFact) else found

        evaluate(book_of_rules, book, facts)  # type: ignore[arg-type]

    def read() -> None:
        load_rulebook(shipped("rules"), quantities=at_hand[1].quantities)

    imports = process("-c", FIVE)
    ratio(f"reading the {len(book_of_rules.rules)} rules / the five imports", timed(read), imports, "under 0.3", runs=5)
    ratio(
        "evaluating them, with the figures / the five imports",
        timed(lambda: over(*prepare(loaded))),
        imports,
        "under 0.5",
        runs=5,
    )
    over(*at_hand)
    ratio(
        "evaluating them, figures at hand / the five imports",
        timed(lambda: over(*at_hand)),
        imports,
        "under 0.1",
        runs=5,
    )


def worm_contact() -> None:
    """Contact of a worm wheel and the recommended cutter, in multiples of 10 million square roots and arc tangents of numpy.

    The multiples say how much arithmetic a map costs whatever the machine; four times the points should cost four times.
    """
    import math

    import numpy as np

    from setupcheck.worm.best_cutter import best_cutter
    from setupcheck.worm.conjugate import Pair
    from setupcheck.worm.ease_off import ease_off
    from setupcheck.worm.gap_insert import envelope_insert, sections
    from setupcheck.worm.helicoid import Thread
    from setupcheck.worm.meshing import contact
    from setupcheck.worm.plunge_gap import Cut
    from setupcheck.worm.wheel_flank import COLUMNS, ROWS, Blank, wheel_flank

    worm = Thread(
        profile="ZA",
        starts=1,
        axial_module=2.5,
        reference_diameter=30.0,
        tip_diameter=35.0,
        pressure_angle=math.radians(20.0),
        thickness=math.pi * 1.25,
    )
    pair = Pair(thread=worm, teeth=40, centre_distance=65.0)
    blank = Blank(face_width=16.0, throat_diameter=105.0, throat_radius=12.5, outside_diameter=107.5)
    cut = Cut(radius=30.0, tilt=math.atan(1.0 / 12.0), clearance=0.5)
    x = np.linspace(0.0, 1.0, 100_000)

    def kernel() -> None:
        for _ in range(100):
            np.arctan(np.sqrt(x))

    def both_flanks(rows: int, columns: int) -> None:
        insert = envelope_insert(sections(pair, blank), cut)
        for side in (1, -1):
            flank = wheel_flank(pair, blank, side=side, rows=rows, columns=columns)  # type: ignore[arg-type]
            contact(flank, ease_off(flank, insert, cut).angle, film=0.006)

    usual, fine = timed(lambda: both_flanks(ROWS, COLUMNS)), timed(lambda: both_flanks(2 * ROWS, 2 * COLUMNS))
    ratio("contact map of both flanks / numpy kernel", usual, timed(kernel), "under 4", runs=7)
    ratio("contact map with four times the points / the usual one", fine, usual, "about 4, under 6", runs=7)
    recommend = timed(lambda: best_cutter(pair, blank, clearance=0.5, film=0.006, budget=0.005))
    ratio("recommended cutter / numpy kernel", recommend, timed(kernel), "under 50", runs=5)


PEAK = """\
import resource, sys
from setupcheck.flow import review
from setupcheck.report.text import as_text
as_text(review(sys.argv[1]))
used = resource.getrusage(resource.RUSAGE_SELF)
print(used.ru_utime + used.ru_stime, used.ru_maxrss / (1e6 if sys.platform == "darwin" else 1e3))
"""


def largest_job() -> None:
    """The largest job that is read, beside the worm wheel: time of the processor, and peak memory of the whole process."""
    from tests.bench.largest import largest

    with tempfile.TemporaryDirectory() as folder:
        big = Path(folder) / "largest.yaml"
        big.write_text(largest(), encoding="utf-8")
        told = [
            subprocess.run(
                [sys.executable, "-c", PEAK, str(path)], env=ENVIRONMENT, capture_output=True, text=True, check=True
            ).stdout.split()
            for path in (big, JOB)
        ]
    (large, high), (usual, low) = ((float(a), float(b)) for a, b in told)
    print(
        f"{'largest job that is read / worm wheel, processor':<58} {large:8.1f} / {usual:8.1f} s  = {large / usual:5.1f}"
    )
    print(f"{'the same, peak memory':<58} {high:8.0f} / {low:8.0f} MB = {high / low:5.1f}")


if __name__ == "__main__":
    ratio(
        "setupcheck --help / import typer",
        process("-m", "setupcheck", "--help"),
        process("-c", "import typer"),
        "under 1.3",
    )
    ratio(
        "setupcheck review / the five imports",
        process("-m", "setupcheck", "review", str(JOB)),
        process("-c", FIVE),
        "under 2",
    )
    random_numbers()
    many_jobs()
    throughput()
    whole_rule_book()
    worm_contact()
    largest_job()
