"""Running mutants: one forked child for each, in which an import hook gives the mutant for its module.

The child runs the module's own doctests and the tests named for it; nothing is ever written to the sources. A child that
uses more processor time than three times what the sources need counts as killed: a loop that no longer ends is noticed.
"""

from __future__ import annotations

import ast
import doctest
import importlib
import importlib.abc
import importlib.machinery
import json
import os
import resource
import sys
import time
import traceback
import types
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
EXAMPLES = 3
"""Examples of a property test in a child: most mutants fall to the first; our choice."""
SLOW = ("two_processes", "random_routes")
"""Words in names of tests that are left out: they start processes of their own, or take longer than all others together."""
MEMORY = 4 << 30


@dataclass
class Ended:
    """How a child ended: killed, by what (`tests`, `doctest`, `import`, `time`), and processor seconds."""

    killed: bool
    by: str
    seconds: float


class Hook(importlib.abc.MetaPathFinder, importlib.abc.Loader):
    """Gives one module from a tree instead of its file."""

    def __init__(self, name: str, tree: ast.Module) -> None:
        self.name, self.tree = name, tree
        self.file = str(file_of(name))

    def find_spec(self, name: str, path: object = None, target: object = None) -> importlib.machinery.ModuleSpec | None:
        if name != self.name:
            return None
        spec = importlib.machinery.ModuleSpec(name, self, origin=self.file)
        spec.has_location = True
        return spec

    def create_module(self, spec: importlib.machinery.ModuleSpec) -> None:
        return None

    def exec_module(self, module: types.ModuleType) -> None:
        exec(compile(self.tree, self.file, "exec"), module.__dict__)


def file_of(name: str) -> Path:
    """The source of a module."""
    return ROOT / (name.replace(".", "/") + ".py")


class Few:
    """A plugin of pytest: few examples of property tests, the slow ones left out, the quick ones first.

    known   processor seconds of each test of the sources as they are; where there are none yet, they go into `path`
    budget  tests are taken, quickest first, until they need so many seconds together
    """

    def __init__(self, known: Mapping[str, float], path: str = "", budget: float = 0.0) -> None:
        self.known, self.path, self.budget = known, path, budget
        self.spent: dict[str, float] = {}

    def pytest_collection_modifyitems(self, items: list) -> None:  # type: ignore[type-arg]
        from hypothesis import settings

        items[:] = [i for i in items if not any(word in i.name for word in SLOW)]
        for item in items:
            inner = getattr(item, "obj", None)
            kept = getattr(inner, "_hypothesis_internal_use_settings", None)
            if kept is not None:
                inner._hypothesis_internal_use_settings = settings(kept, max_examples=EXAMPLES)
        if self.known:
            items.sort(key=lambda i: self.known.get(i.nodeid, 0.0))
            left = self.budget
            taken = []
            for item in items:
                left -= self.known.get(item.nodeid, 0.0)
                if left >= 0.0:
                    taken.append(item)
            items[:] = taken

    @pytest.hookimpl(wrapper=True)
    def pytest_runtest_protocol(self, item: pytest.Item) -> Iterator[None]:
        started = time.process_time()
        done = yield
        self.spent[item.nodeid] = time.process_time() - started
        return done

    def pytest_sessionfinish(self) -> None:
        if self.path:
            Path(self.path).write_text(json.dumps(self.spent), encoding="utf-8")


def preload() -> None:
    """What every child needs and no mutant touches: loaded once. Nothing of the project itself."""
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
    for name in (
        "numpy",
        "scipy.stats",
        "scipy.integrate",
        "scipy.optimize",
        "yaml",
        "pydantic",
        "hypothesis",
        "pytest",
    ):
        importlib.import_module(name)
    assert not any(n == "setupcheck" or n.startswith("setupcheck.") for n in sys.modules)


def run(name: str, tree: ast.Module | None, tests: Sequence[str], few: Few, *, seconds: int) -> Ended:
    """One child: the mutant of a module (None: the module as it is) against its doctests and tests."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    child = os.fork()
    if child == 0:
        _live(name, tree, tests, few, seconds)
    _, status = os.waitpid(child, 0)
    used = resource.getrusage(resource.RUSAGE_CHILDREN)
    spent = used.ru_utime + used.ru_stime - before.ru_utime - before.ru_stime
    if os.WIFSIGNALED(status):
        return Ended(True, "time", spent)
    code = os.WEXITSTATUS(status)
    return Ended(code != 0, {0: "", 2: "import", 3: "doctest"}.get(code, "tests"), spent)


def _live(name: str, tree: ast.Module | None, tests: Sequence[str], few: Few, seconds: int) -> None:
    """In the child; never returns. Exit code 0: nothing was noticed."""
    code = 1
    try:
        resource.setrlimit(resource.RLIMIT_CPU, (seconds, seconds + 1))
        resource.setrlimit(resource.RLIMIT_AS, (MEMORY, MEMORY))
        if not os.environ.get("MUTANTS_SHOW"):
            nowhere = os.open(os.devnull, os.O_WRONLY)
            os.dup2(nowhere, 1)
            os.dup2(nowhere, 2)
        code = _judged(name, tree, tests, few)
    except BaseException:
        traceback.print_exc()
    finally:
        sys.stdout.flush()
        os._exit(code)


def _judged(name: str, tree: ast.Module | None, tests: Sequence[str], few: Few) -> int:
    if tree is not None:
        sys.meta_path.insert(0, Hook(name, tree))
    os.chdir(ROOT)
    try:
        module = importlib.import_module(name)
    except Exception:  # a module that no longer loads is noticed by whoever imports it: killed
        return 2
    if doctest.testmod(module).failed:
        return 3
    loaded_before = "ignore::pytest.PytestAssertRewriteWarning"  # hypothesis was, before pytest could look at it
    options = ["-x", "-q", "-p", "no:cacheprovider", "-p", "no:xdist", "-W", loaded_before]
    return int(pytest.main([*options, *tests], plugins=[few]))
