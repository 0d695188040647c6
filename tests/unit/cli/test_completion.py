"""Completion in the shell: its scripts, what it offers, and that no other start loads anything for it."""

from __future__ import annotations

import os
import re
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from setupcheck.cli import main
from setupcheck.flow import rules
from setupcheck.shipped import examples, shipped

ROOT = Path(__file__).resolve().parents[3]
START = "import sys; sys.argv[0] = 'setupcheck'; from setupcheck.cli.main import run_and_leave; run_and_leave()"
SHELLS = ("bash", "zsh", "fish")
COMMANDS = {str(one.name) for one in main.app.registered_commands}


def started(*words: str, cwd: Path, code: str = START, **environment: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-c", code, *words], capture_output=True, text=True, encoding="utf-8", cwd=cwd, check=False,
        env={**os.environ, "PYTHONPATH": str(ROOT), **environment},
    )  # fmt: skip


def asked(shell: str, line: str, cwd: Path) -> str:
    """What the program answers when a shell asks for the last word of a line."""
    words = line.split(" ")
    own = {"COMP_WORDS": line, "COMP_CWORD": str(len(words) - 1)} if shell == "bash" else {"_TYPER_COMPLETE_ARGS": line}
    action = {"_TYPER_COMPLETE_FISH_ACTION": "get-args"} if shell == "fish" else {}
    done = started(cwd=cwd, _SETUPCHECK_COMPLETE=f"complete_{shell}", **own, **action)
    assert done.stderr == ""
    return done.stdout


def offered(line: str, cwd: Path, shell: str = "bash") -> list[str]:
    told = asked(shell, line, cwd)
    if shell == "zsh":
        return re.findall(r'^[^"\n]*"([^"]*)"', told, re.M)
    return [row.partition("\t")[0] for row in told.splitlines() if row]


@pytest.fixture(scope="module")
def shop(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("shop")
    shutil.copytree(shipped("jobs"), folder / "jobs")
    (folder / "odd").mkdir()
    (folder / "odd" / "ring no. 3.yaml").write_text("title: t\n", encoding="utf-8")
    return folder


# -- scripts ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("shell", SHELLS)
def test_each_shell_gets_its_script(shell: str, tmp_path: Path) -> None:
    script = started(cwd=tmp_path, _SETUPCHECK_COMPLETE=f"source_{shell}").stdout
    shown = started("--show-completion", shell, cwd=tmp_path, _TYPER_COMPLETE_TEST_DISABLE_SHELL_DETECTION="1").stdout
    registers = {"bash": "complete -o default -F", "zsh": "compdef ", "fish": "complete --command setupcheck"}
    assert registers[shell] in script
    assert f"_SETUPCHECK_COMPLETE=complete_{shell}" in script
    assert script.split() == shown.split()


def test_the_script_of_bash_completes_a_word_in_bash(shop: Path) -> None:
    bash = shutil.which("bash")
    if bash is None:
        pytest.skip("bash is not here")
    tool = shop / "bin" / "setupcheck"
    tool.parent.mkdir(exist_ok=True)
    tool.write_text(f'#!/bin/sh\nexec \'{sys.executable}\' -c "{START}" "$@"\n', encoding="utf-8")
    tool.chmod(0o755)
    script = started(cwd=shop, _SETUPCHECK_COMPLETE="source_bash").stdout
    typed = (
        f"{script}\nCOMP_WORDS=(setupcheck review jobs/rot); COMP_CWORD=2\n"
        "_setupcheck_completion setupcheck\nprintf '%s\\n' \"${COMPREPLY[@]}\"\n"
    )
    done = subprocess.run(
        [bash, "--norc", "-c", typed], capture_output=True, text=True, cwd=shop, check=True,
        env={**os.environ, "PATH": f"{tool.parent}{os.pathsep}{os.environ['PATH']}", "PYTHONPATH": str(ROOT)},
    )  # fmt: skip
    assert done.stdout.split() == ["jobs/rotator-worm-wheel.yaml"]


# -- what is offered -------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("shell", SHELLS)
def test_commands_options_and_job_files_are_offered_in_each_shell(shell: str, shop: Path) -> None:
    assert set(offered("setupcheck re", shop, shell)) == {one for one in COMMANDS if one.startswith("re")}
    assert {"--json", "--house", "--on"} <= set(offered("setupcheck review --", shop, shell))
    assert offered("setupcheck review jobs/sp", shop, shell) == [
        f"jobs/{name}.yaml" for name in examples() if name.startswith("sp")
    ]


@pytest.mark.parametrize("command", sorted(COMMANDS - {"new", "record", "rules", "schema"}))
def test_every_command_that_takes_a_job_offers_job_files(command: str, shop: Path) -> None:
    assert offered(f"setupcheck {command} jobs/inde", shop) == ["jobs/index-plate.yaml"]


def test_folders_and_names_to_quote_are_left_to_the_shell(shop: Path) -> None:
    assert offered("setupcheck review jo", shop) == []
    assert offered("setupcheck review odd/ri", shop) == []
    assert offered("setupcheck review nowhere/x", shop) == []
    assert asked("zsh", "setupcheck review jo", shop).strip() == "_files"


def test_rules_drawings_kinds_and_words_are_offered(shop: Path) -> None:
    assert offered("setupcheck rules STACK-", shop) == [
        rule.id for rule in rules().rules if rule.id.startswith("STACK-")
    ]
    drawn = offered("setupcheck sheet jobs/rotator-worm-wheel.yaml -o a.svg --drawing hold-", shop)
    assert {"hold-30", "hold-50"} <= set(drawn)
    assert offered("setupcheck sheet nowhere.yaml --drawing hold-", shop) == []
    assert "worm-wheel" in offered("setupcheck new a.yaml --kind w", shop)
    assert offered("setupcheck new a.yaml --like sprock", shop) == ["sprocket"]
    assert offered("setupcheck schema --of ", shop) == ["job", "review"]
    assert offered("setupcheck insert a.yaml --paper A", shop) == ["A4", "A3"]


# -- what it costs ---------------------------------------------------------------------------------------------------

LOADED = (
    "import atexit, os, sys; sys.argv[0] = 'setupcheck'\n"
    "from setupcheck.cli import main\n"
    "try: main.run()\n"
    "except SystemExit: pass\n"
    "print('LOADED', *sys.modules)\n"
)


def loaded(*words: str, cwd: Path, **environment: str) -> set[str]:
    (line,) = re.findall(r"^LOADED (.*)$", started(*words, cwd=cwd, code=LOADED, **environment).stdout, re.M)
    return set(line.split())


def test_no_start_without_a_shell_that_asks_loads_what_completes(shop: Path) -> None:
    for words in (("--help",), ("review", "jobs/index-plate.yaml"), ("schema",)):
        assert "setupcheck.cli.completing" not in loaded(*words, cwd=shop)


def test_a_tab_loads_neither_a_review_nor_what_it_needs(shop: Path) -> None:
    for line in ("setupcheck re", "setupcheck review jobs/sp"):
        own = {"COMP_WORDS": line, "COMP_CWORD": str(line.count(" "))}
        found = loaded(cwd=shop, _SETUPCHECK_COMPLETE="complete_bash", **own)
        assert "setupcheck.cli.completing" in found
        assert found & {"numpy", "yaml", "jinja2", "rich.console", "setupcheck.flow"} == set()
