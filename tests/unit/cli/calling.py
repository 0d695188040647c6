"""The command called inside the process of the tests."""

from __future__ import annotations

from pathlib import Path

from typer.testing import CliRunner

from setupcheck.cli.main import app
from setupcheck.errors import SetupcheckError


def run(*arguments: str | Path) -> tuple[int, str]:
    """(exit code, output or the refusal) of `setupcheck` with these arguments."""
    found = CliRunner().invoke(app, [str(a) for a in arguments])
    if isinstance(found.exception, SetupcheckError):  # the command prints it and exits 2
        return 2, str(found.exception)
    assert found.exception is None or isinstance(found.exception, SystemExit), found.exception
    return found.exit_code, found.output
