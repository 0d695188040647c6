"""The maker of mutants makes what it says, one change at a time, and the list of survivors names mutants that there are."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest
import yaml

from tests.mutants import __main__ as told
from tests.mutants import making, running
from tests.mutants.against import modules

SOURCE = '''
"""Words stay."""
LIMIT = 2.0
def area(width, height, *, unit: int = 1):
    """So do these, 3 of them."""
    if width < 0 or height < 0:
        raise ValueError(f"{width} below 0")
    return scaled(width, height) * LIMIT
'''
CHANGES = {
    "2.0 -> 2.2",
    "1 -> 2",
    "width < 0 or height < 0 -> width < 0 and height < 0",
    "width < 0 -> width <= 0",
    "width < 0 -> width > 0",
    "height < 0 -> height <= 0",
    "height < 0 -> height > 0",
    "0 -> 1",
    "removed: raise ValueError(f'{width} below 0')",
    "return scaled(width, height) * LIMIT -> return None",
    "scaled(width, height) * LIMIT -> scaled(width, height) / LIMIT",
    "scaled(width, height) -> scaled(height, width)",
}


def test_every_kind_of_change_is_made_and_words_are_left_alone() -> None:
    assert {says for _, says in making.mutants(SOURCE)} == CHANGES


def test_each_mutant_differs_from_the_source_in_that_one_change() -> None:
    plain = ast.unparse(ast.parse(SOURCE)).splitlines()
    for number in range(len(making.mutants(SOURCE))):
        found = making.mutant(SOURCE, number)
        lines = ast.unparse(found.tree).splitlines()
        assert len([1 for a, b in zip(plain, lines, strict=True) if a != b]) == 1, found.says
        compile(found.tree, "mutant", "exec")


def test_the_hook_gives_the_mutant_for_its_module_alone() -> None:
    name = "setupcheck.ledger.heads"
    source = running.file_of(name).read_text(encoding="utf-8")
    number = next(n for n, (_, says) in enumerate(making.mutants(source)) if says == "heads == 1 -> heads != 1")
    hook = running.Hook(name, making.mutant(source, number).tree)
    spec = hook.find_spec(name)
    assert spec is not None and hook.find_spec("setupcheck.ledger.teeth") is None
    import importlib.util

    module = importlib.util.module_from_spec(spec)
    hook.exec_module(module)
    assert module.share_left(2, 0.0) == 1.0


def test_every_module_has_tests_that_exist_and_survivors_are_mutants_with_a_reason() -> None:
    found = modules()
    assert all(tests for tests in found.values())
    rows = yaml.safe_load(Path(__file__).with_name("survivors.yaml").read_text(encoding="utf-8"))
    for row in rows:
        source = running.file_of(row["module"]).read_text(encoding="utf-8")
        lines = source.splitlines()
        every = [(says, lines[at - 1].strip()) for at, says in making.mutants(source)]
        assert any(row["change"] == says and row.get("stands_in", line) == line for says, line in every), row
        assert row["reason"].split(":")[0] in ("equivalent", "elsewhere", "words", "test added", "to do"), row


def test_a_survivor_excuses_its_own_line_and_no_other() -> None:
    source = "first = 0\nlast = 0\n"
    same = {("m", "0 -> 1", "last = 0")}
    assert [told.excused("m", making.mutant(source, n), source, same) for n in (0, 1)] == [False, True]
    assert told.excused("m", making.mutant(source, 0), source, {("m", "0 -> 1", "")})
    assert not told.excused("other", making.mutant(source, 1), source, same)


@pytest.mark.parametrize("name", ["setupcheck.ledger.combine", "setupcheck.ledger.draws", "setupcheck.division.fit"])
def test_the_core_has_many(name: str) -> None:
    assert len(making.mutants(running.file_of(name).read_text(encoding="utf-8"))) > 100
