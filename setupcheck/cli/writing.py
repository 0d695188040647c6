"""Files that commands write: refused first where they cannot be written, and never met half written."""

from __future__ import annotations

import contextlib
import os
import tempfile
from pathlib import Path

from setupcheck.errors import SetupcheckError, printable

_DEVICES = {"CON", "PRN", "AUX", "NUL", *(f"{port}{n}" for port in ("COM", "LPT") for n in "123456789¹²³")}
"""Names that Windows keeps for devices, whatever ending they have. Source: its documentation on naming files, from memory."""
ON_WINDOWS = os.name == "nt"


def kept_by_windows(name: str) -> str:
    """Why a file of this name cannot be had under Windows; empty where it can.

    >>> kept_by_windows("aux.svg")
    'AUX is a device there'
    >>> kept_by_windows("auxiliary.svg")
    ''
    """
    device = name.partition(".")[0].rstrip(" ").upper()
    if device in _DEVICES:
        return f"{device} is a device there"
    odd = next((character for character in name if character in '<>:"|?*'), "")
    if odd:
        return f"a name has no {odd} there"
    return "a name ends with no point or space there" if name.endswith((".", " ")) else ""


def _refuse_name(path: Path) -> None:
    """Refuses a name that Windows would take for a device, for a stream of another file, or cut short."""
    why = kept_by_windows(path.name) if ON_WINDOWS else ""
    if why:
        raise SetupcheckError(f"{printable(str(path))} cannot be a file: {why}. Write another name")


def refuse_place(path: Path, *, force: bool) -> None:
    """Refuses a place where a drawing cannot be written, before anything is worked out."""
    _refuse_name(path)
    shown = printable(str(path))
    if path.is_dir():
        raise SetupcheckError(f"{shown} is a folder. Write the name of a file, as in {shown}/drawing.svg")
    if not path.parent.is_dir():
        raise SetupcheckError(f"{shown}: there is no folder {printable(str(path.parent))}. Make it first")
    if path.exists() and not force:
        raise SetupcheckError(
            f"{shown} is already there and stays as it is. Write another name, or --force to replace it"
        )


def write_whole(path: Path, text: str, *, force: bool) -> None:
    """The whole file at once: it is written beside its place and then moved there, so nobody ever meets half of it."""
    beside: Path | None = None
    try:
        handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.", suffix=".part")
        beside = Path(name)
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
            file.write(text)
        beside.chmod(0o666 & ~_umask())
        refuse_place(path, force=force)  # somebody may have written there meanwhile
        beside.replace(path)
    except OSError as why:
        raise SetupcheckError(f"{printable(str(path))} cannot be written: {why.strerror or why}") from None
    finally:
        if beside is not None:
            with contextlib.suppress(OSError):
                beside.unlink(missing_ok=True)


def refuse_new(path: Path) -> None:
    """Refuses a place where a new file cannot be written. Nothing is ever replaced there, not even a link that leads nowhere."""
    _refuse_name(path)
    shown = printable(str(path))
    try:
        if path.is_dir():
            raise SetupcheckError(
                f"{shown} is a folder. Write the name of a file in it, as in {path.name or '.'}/job.yaml"
            )
        if os.path.lexists(path):
            raise SetupcheckError(_already(shown))
        if not path.parent.is_dir():
            raise SetupcheckError(f"{shown}: there is no folder {printable(str(path.parent))}. Make it first")
    except OSError as why:
        raise SetupcheckError(f"{shown} cannot be written: {why.strerror or why}. Write another name") from None


def write_new(path: Path, text: str) -> None:
    """A file that was not there before, whole: it is written beside its place and then linked there, which fails where
    somebody has put something meanwhile."""
    shown = printable(str(path))
    beside: Path | None = None
    try:
        handle, name = tempfile.mkstemp(dir=path.parent, prefix=".setupcheck.", suffix=".part")
        beside = Path(name)
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
            file.write(text)
        beside.chmod(0o666 & ~_umask())
        _link(beside, path, text)
    except FileExistsError:
        raise SetupcheckError(_already(shown)) from None
    except OSError as why:
        raise SetupcheckError(f"{shown} cannot be written: {why.strerror or why}") from None
    finally:
        if beside is not None:
            with contextlib.suppress(OSError):
                beside.unlink(missing_ok=True)


def _link(beside: Path, path: Path, text: str) -> None:
    """Puts a whole file in its place.

    Raises: FileExistsError where something is there.
    """
    try:
        os.link(beside, path)
    except FileExistsError:
        raise
    except OSError:  # a file system without links: made only if nothing is there
        with path.open("x", encoding="utf-8", newline="\n") as file:
            file.write(text)


def _already(shown: str) -> str:
    return f"{shown} is already there and stays as it is. Write another name"


def _umask() -> int:
    """What new files of this process may not have."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
