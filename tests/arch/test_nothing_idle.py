"""Nothing of the package stands idle: what only tests use is no part of the product, and a check of it proves nothing of it.

A name counts as used where code names it outside its own definition, or the rules do; words of docstrings do not count.
"""

from __future__ import annotations

import ast
import re
from dataclasses import dataclass
from pathlib import Path

import setupcheck
from setupcheck.shipped import shipped

ROOT = Path(setupcheck.__file__).parent
NO_USE = {"record", "cache", "lru_cache"}
"""Decorators that put what they decorate into no list."""


@dataclass(frozen=True)
class Defined:
    """A function, class or constant of a module, and the names in it."""

    file: str
    name: str
    names: frozenset[str]
    listed: bool


def names_in(node: ast.AST) -> frozenset[str]:
    """Names, attributes and words of short strings (types in quotes, places of the facade), not those of docstrings."""
    docs = {
        id(n.body[0].value)
        for n in ast.walk(node)
        if isinstance(n, ast.FunctionDef | ast.ClassDef) and n.body and isinstance(n.body[0], ast.Expr)
    }
    found: set[str] = set()
    for n in ast.walk(node):
        if isinstance(n, ast.Name):
            found.add(n.id)
        elif isinstance(n, ast.Attribute):
            found.add(n.attr)
        elif isinstance(n, ast.Constant) and isinstance(n.value, str) and id(n) not in docs:
            found |= set(re.findall(r"\w+", n.value)) if re.fullmatch(r"[\w.:| ]+", n.value) else set()
    return frozenset(found)


def package() -> tuple[list[Defined], frozenset[str]]:
    """(what modules define, names used outside any definition)."""
    defined: list[Defined] = []
    free: set[str] = set()
    for file in sorted(ROOT.rglob("*.py")):
        for node in ast.parse(file.read_text(encoding="utf-8")).body:
            where = str(file.relative_to(ROOT))
            if isinstance(node, ast.FunctionDef | ast.ClassDef):
                by = frozenset().union(*(names_in(d) for d in node.decorator_list)) - NO_USE
                defined.append(Defined(where, node.name, names_in(node) - {node.name}, bool(by)))
            elif isinstance(node, ast.Assign | ast.AnnAssign):
                target = node.targets[0] if isinstance(node, ast.Assign) else node.target
                if isinstance(target, ast.Name):
                    defined.append(Defined(where, target.id, names_in(node) - {target.id}, False))
                else:
                    free |= names_in(node)
            elif not isinstance(node, ast.Import | ast.ImportFrom | ast.Expr) or not isinstance(
                getattr(node, "value", None), ast.Constant | None
            ):
                free |= names_in(node)
    return defined, frozenset(free)


def idle(defined: list[Defined], used_anyway: frozenset[str]) -> set[tuple[str, str]]:
    """(file, name) of what nothing names, and of what is named by those alone."""
    found: set[tuple[str, str]] = set()
    while True:
        used = used_anyway.union(*(d.names for d in defined if (d.file, d.name) not in found))
        now = {(d.file, d.name) for d in defined if d.name not in used and not d.listed and not d.name.startswith("__")}
        if now == found:
            return found
        found = now


def test_nothing_of_the_package_is_used_by_tests_alone() -> None:
    defined, free = package()
    in_rules = {w for f in shipped("rules").rglob("*.yaml") for w in re.findall(r"\w+", f.read_text(encoding="utf-8"))}
    assert idle(defined, free | in_rules) == set()


def test_what_only_an_idle_thing_names_is_idle_as_well() -> None:
    made = [
        Defined("a.py", "outer", frozenset({"inner", "kept"}), False),
        Defined("a.py", "inner", frozenset(), False),
        Defined("a.py", "kept", frozenset(), False),
        Defined("b.py", "command", frozenset({"kept"}), True),
    ]
    assert idle(made, frozenset()) == {("a.py", "outer"), ("a.py", "inner")}
    assert idle(made, frozenset({"outer"})) == set()
