"""Where the shipped rules and jobs lie: inside the installed package, or in the checkout it runs from. Leaf module."""

from __future__ import annotations

from pathlib import Path

from setupcheck.errors import SetupcheckError


def shipped(name: str) -> Path:
    """Folder or file `rules/…` or `jobs/…` as it was shipped.

    Raises: SetupcheckError if neither the wheel nor a checkout has it.
    """
    package = Path(__file__).resolve().parent
    inside = package / "_shipped" / name
    if inside.exists():
        return inside
    checkout = package.parent
    if (checkout / "pyproject.toml").is_file() and (checkout / name).exists():
        return checkout / name
    raise SetupcheckError(f"this installation lacks {name}. Install setupcheck again")
