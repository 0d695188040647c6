"""Where the shipped rules and jobs lie: inside the installed package, or in the checkout it runs from. Leaf module."""

from __future__ import annotations

from pathlib import Path

from setupcheck.errors import SetupcheckError, printable


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


def examples() -> tuple[str, ...]:
    """Names of the shipped jobs, in alphabetical order.

    >>> examples()[:2]
    ('bearing-ring-seat', 'bevel-pinion-blank')
    """
    return tuple(sorted(path.stem for path in shipped("jobs").glob("*.yaml")))


def example(name: str) -> Path:
    """The file of a shipped job by its name, without `.yaml`.

    Raises: SetupcheckError with the names there are.

    >>> example("index-plate").name
    'index-plate.yaml'
    """
    if name not in examples():
        raise SetupcheckError(f"there is no shipped job '{printable(name[:60])}'. There: {', '.join(examples())}")
    return shipped(f"jobs/{name}.yaml")
