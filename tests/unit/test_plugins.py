"""The search for plugins that the command leaves out, and when it does not."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]


def said(code: str, **environment: str) -> str:
    """What a fresh Python prints."""
    own = {k: v for k, v in os.environ.items() if k != "PYDANTIC_DISABLE_PLUGINS"}
    done = subprocess.run(
        [sys.executable, "-c", code],
        env={**own, "PYTHONPATH": str(CHECKOUT), **environment},
        capture_output=True,
        text=True,
        check=True,
    )
    return done.stdout.strip()


START = "import sys\nfrom setupcheck.cli import plugins\nplugins.leave_out()\n"
BUILD = "import pydantic\npydantic.TypeAdapter(int).validate_python('3')\n"
SHOW = "print(type(sys.modules.get(plugins.SEARCH)).__name__)"


def test_pydantic_builds_its_models_without_the_search() -> None:
    assert "_NoSearch" == said(START + BUILD + SHOW)


def test_whatever_else_is_asked_of_the_search_brings_in_the_real_one() -> None:
    assert "module" == said(START + "from pydantic.plugin._loader import annotations\n" + BUILD + SHOW)


@pytest.mark.parametrize("wanted", ["", "one-of-them"])
def test_plugins_that_somebody_wants_are_searched_for(wanted: str) -> None:
    assert "module" == said(START + BUILD + SHOW, PYDANTIC_DISABLE_PLUGINS=wanted)
