"""The arrows of the map: which package may import which, and what must not be loaded before it is needed."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2] / "setupcheck"

EVERYWHERE = {"record"}
"""What any module may import: it needs the standard library alone and knows nothing of the trade."""

MAY_IMPORT: dict[str, set[str]] = {
    "record": set(),
    "errors": set(),
    "notation": set(),
    "yamlfile": {"errors"},
    "shipped": {"errors"},
    "ledger": set(),
    "physics": set(),
    "worm": set(),
    "division": {"errors", "notation", "physics"},
    "jobfile": {"errors", "notation", "yamlfile"},
    "quantities": {"errors", "notation", "yamlfile", "shipped", "ledger", "physics", "worm", "division", "jobfile"},
    "rulebook": {"errors", "notation", "yamlfile"},
    "flow": {"division", "jobfile", "quantities", "rulebook", "shipped"},
    "allowed": {"errors", "flow", "jobfile", "quantities", "rulebook"},
    "report": {"errors", "notation", "ledger", "division", "jobfile", "quantities", "rulebook", "flow", "allowed", ""},
    "starting": {"errors", "notation", "shipped", "division", "worm", "jobfile", "quantities", "rulebook", "flow"},
    "many": {"errors", "flow", "report"},
    "cli": {"errors", "flow", "many", "report", "rulebook", "starting", ""},
    "": {"errors", "flow", "jobfile", "many", "quantities", "report", "rulebook", "shipped"},
    "__main__": {"cli"},
}
"""Package -> the packages of ours it may import; "" is setupcheck/__init__.py (the version and the facade)."""

FORBIDDEN_OUTSIDE: dict[str, set[str]] = {
    "notation": {"numpy", "pydantic", "yaml", "rich", "typer"},
    "yamlfile": {"numpy", "pydantic", "rich", "typer"},
    "ledger": {"pydantic", "yaml", "rich", "typer"},
    "physics": {"pydantic", "yaml", "rich", "typer"},
    "jobfile": {"numpy", "rich", "typer"},
    "rulebook": {"numpy", "pydantic", "rich", "typer"},
    "quantities": {"rich", "typer"},
    "report": {"typer"},
    "starting": {"numpy", "pydantic", "yaml", "rich", "typer"},
    "cli": {"numpy", "pydantic", "yaml"},
}


def package_of(file: Path) -> str:
    parts = file.relative_to(ROOT).with_suffix("").parts
    return "" if parts == ("__init__",) else parts[0]


def imported(file: Path) -> set[str]:
    """Full names of all modules a file imports, wherever in it."""
    found: set[str] = set()
    for node in ast.walk(ast.parse(file.read_text())):
        if isinstance(node, ast.Import):
            found |= {a.name for a in node.names}
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{file}: relative import"
            module = node.module or ""
            found |= {f"{module}.{a.name}" for a in node.names} if module == "setupcheck" else {module}
    return found


FILES = sorted(ROOT.rglob("*.py"))


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(ROOT)))
def test_a_module_imports_only_what_the_map_allows(file: Path) -> None:
    package = package_of(file)
    allowed = MAY_IMPORT[package] | {package}
    for name in imported(file):
        parts = name.split(".")
        if parts[0] == "setupcheck":
            target = (
                parts[1]
                if (len(parts) > 1 and (ROOT / parts[1]).exists())
                or (len(parts) > 1 and (ROOT / f"{parts[1]}.py").exists())
                else ""
            )
            assert target in allowed | EVERYWHERE, f"{file.name} imports {name}"
        assert parts[0] not in FORBIDDEN_OUTSIDE.get(package, set()), f"{file.name} imports {name}"


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(ROOT)))
def test_a_module_stays_small_enough_to_read(file: Path) -> None:
    assert len(file.read_text().splitlines()) <= 450


def test_every_package_stands_on_the_map() -> None:
    assert {package_of(f) for f in FILES} <= set(MAY_IMPORT)


def loaded_by(code: str) -> set[str]:
    """Names of the modules loaded after running some code in a fresh Python."""
    run = subprocess.run(
        [sys.executable, "-c", f"{code}\nimport sys; print('\\n'.join(sys.modules))"],
        capture_output=True,
        text=True,
        check=True,
        cwd=ROOT.parent,
    )
    return set(run.stdout.splitlines())


HELP = (
    "import contextlib, io\nfrom setupcheck.cli.main import app\nwith contextlib.redirect_stdout(io.StringIO()):\n"
    "    try: app(['--help'])\n    except SystemExit: pass"
)
REVIEW = (
    "import contextlib, io\nfrom setupcheck.cli.main import app\nwith contextlib.redirect_stdout(io.StringIO()):\n"
    "    try: app(['review', 'jobs/index-plate.yaml'])\n    except SystemExit: pass"
)


def test_help_loads_no_heavy_package() -> None:
    assert not loaded_by(HELP) & {"numpy", "pydantic", "yaml", "rich.console", "setupcheck.flow"}


def test_a_review_to_a_pipe_loads_nothing_it_does_not_need() -> None:
    assert not loaded_by(REVIEW) & {
        "scipy",
        "jinja2",
        "rich.console",
        "concurrent.futures",
        "multiprocessing",
        "setupcheck.many",
        "setupcheck.cli.many",
        "setupcheck.report.summary",
        "setupcheck.rulebook.describe",
        "setupcheck.report.working",
        "setupcheck.report.json",
        "setupcheck.report.vary",
        "setupcheck.report.remedy",
        "setupcheck.quantities.mending",
        "setupcheck.quantities.trials",
        "setupcheck.quantities.single_causes",
        "setupcheck.jobfile.editing",
        "setupcheck.jobfile.changing",
        "setupcheck.jobfile.ranging",
        "setupcheck.report.device_record",
        "setupcheck.report.job_schema",
        "setupcheck.report.started",
        "setupcheck.starting",
        "setupcheck.jobfile.keys",
        "setupcheck.jobfile.spelling",
        "setupcheck.quantities.device_record",
        "setupcheck.quantities.own_values",
        "setupcheck.quantities.judgeable",
        "setupcheck.rulebook.house",
        "setupcheck.rulebook.house_file",
        "setupcheck.rulebook.house_rules",
        "setupcheck.report.house",
        "setupcheck.report.house_check",
        "setupcheck.physics.student_t",
    }


def test_the_facade_is_light_until_it_is_used() -> None:
    assert not loaded_by("import setupcheck") & {"numpy", "pydantic", "yaml", "setupcheck.flow"}


def test_a_command_that_leaves_its_jobs_to_workers_loads_nothing_of_a_review() -> None:
    assert not loaded_by("import setupcheck.cli.many") & {
        "numpy",
        "pydantic",
        "yaml",
        "setupcheck.flow",
        "rich.console",
    }
