"""The jobs of a drawer: those that stand in folders, and those that are named."""

from __future__ import annotations

import os
import re
from collections.abc import Iterator, Sequence
from pathlib import Path

from setupcheck.errors import SetupcheckError, printable
from setupcheck.record import record

HOUSE_FILE = "setupcheck-house.yaml"
ENDINGS = (".yaml", ".yml")
LOOKED_AT = 1_000_000
"""Bytes of a file in which the key `setupcheck` is looked for; a larger one goes to the reader. Source: our choice."""
_KEY = re.compile(rb"""(?:\A(?:\xef\xbb\xbf)?|[\r\n])(?:[ {]*["']?)setupcheck["']?[ ]*:""")


@record
class Drawer:
    """What was found.

    jobs      paths in order: as they were named, those of a folder sorted, its own before those of the folders in it
    skipped   files of folders that are no job, as they have no key `setupcheck`
    shut      folder below a named one -> why it could not be looked into
    """

    jobs: tuple[str, ...]
    skipped: tuple[str, ...]
    shut: dict[str, str]


def opened(named: Sequence[Path]) -> Drawer:
    """All jobs of the files and folders named, each once. A file that is named is a job, whatever it holds.

    Raises: SetupcheckError where nothing that was named holds a job.
    """
    jobs: dict[str, str] = {}
    skipped: dict[str, None] = {}
    shut: dict[str, str] = {}
    for one in named:
        if not one.is_dir():
            jobs.setdefault(os.path.abspath(one), str(one))  # noqa: PTH100 (a link is the name it has)
            continue
        for path in _files(one, shut):
            if _is_job(path):
                jobs.setdefault(os.path.abspath(path), path)  # noqa: PTH100
            else:
                skipped[path] = None
    if not jobs and not shut:
        raise SetupcheckError(_nothing(named, skipped))
    return Drawer(tuple(jobs.values()), tuple(skipped), shut)


def _nothing(named: Sequence[Path], skipped: dict[str, None]) -> str:
    names = ", ".join(printable(str(one)) for one in named)
    count = len(skipped)
    seen = f" ({count} without the key `setupcheck`)" if count else ""
    return f"{names}: there is no job here{seen}, no *.yaml or *.yml with the key setupcheck"


def _files(folder: Path, shut: dict[str, str]) -> Iterator[str]:
    """YAML files of a folder and those below it, sorted; hidden ones and house files left out, links to folders not followed."""

    def cannot(why: OSError) -> None:
        shut[str(why.filename)] = why.strerror or str(why)

    for here, folders, files in os.walk(folder, onerror=cannot):
        folders[:] = sorted(name for name in folders if not name.startswith("."))
        for name in sorted(files):
            if name.lower().endswith(ENDINGS) and not name.startswith(".") and name != HOUSE_FILE:
                yield str(Path(here, name))


def _is_job(path: str) -> bool:
    """Whether a file has the key of a job; whatever cannot be told from its text is left to the reader, who says why."""
    found = Path(path)
    try:
        if not found.is_file():  # a pipe would wait for ever
            return True
        with found.open("rb") as file:
            text = file.read(LOOKED_AT + 1)
    except OSError:
        return True
    return len(text) > LOOKED_AT or b"\x00" in text or _KEY.search(text) is not None
