"""Files that commands write: refused first where they cannot be written, never met half written, and kept once they are told.

A file is written beside its place, brought to the disk (fsync), and then moved or linked there, so that a run which is killed
leaves what was there before. What it may leave besides is one hidden part file, which no later run reads; the first one that
writes into the same folder a day later takes it away.
"""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from setupcheck.errors import SetupcheckError, printable

BEFORE, BEHIND = ".setupcheck-", ".part"
"""Name of a part file: short, so that a name of any length can be written, and no other file is taken for one."""
STALE = 86_400.0
"""Seconds after which a part file is nobody's any more. Source: our choice; a write takes less than a second."""


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


def refuse_place(path: Path, *, force: bool) -> None:
    """Refuses a place where a file cannot be written, before anything is worked out. A link is never written through."""
    shown = printable(str(path))
    with _told(shown):
        if path.is_dir():
            raise SetupcheckError(f"{shown} is a folder. Write the name of a file, as in {shown}/drawing.svg")
        _refuse_name(path, shown)
        if path.is_symlink():
            raise SetupcheckError(
                f"{shown} is a link, and no link is written through or replaced. Write the name of the file it leads to"
            )
        if path.exists() and not path.is_file():
            raise SetupcheckError(
                f"{shown} is no plain file but a device or a pipe. Write the name of a file on the disk"
            )
        if not path.parent.is_dir():
            raise SetupcheckError(f"{shown}: there is no folder {printable(str(path.parent))}. Make it first")
        if path.exists() and not force:
            raise SetupcheckError(
                f"{shown} is already there and stays as it is. Write another name, or --force to replace it"
            )


def write_whole(path: Path, text: str, *, force: bool) -> None:
    """The whole file at once; with `force` it takes the place of another one, and its permissions.

    Raises: SetupcheckError where it cannot be written; what was there stays as it is.
    """
    shown = printable(str(path))
    with _told(shown), _beside(path, text) as beside:
        refuse_place(path, force=force)  # somebody may have written there meanwhile
        if not force:
            _place(beside, path, f"{_already(shown)}, or --force to replace it")
            return
        with contextlib.suppress(FileNotFoundError):
            beside.chmod(stat.S_IMODE(path.stat().st_mode))
        beside.replace(path)


def refuse_new(path: Path) -> None:
    """Refuses a place where a new file cannot be written. Nothing is ever replaced there, not even a link that leads nowhere."""
    shown = printable(str(path))
    with _told(shown, "Write another name"):
        if path.is_dir():
            raise SetupcheckError(
                f"{shown} is a folder. Write the name of a file in it, as in {path.name or '.'}/job.yaml"
            )
        _refuse_name(path, shown)
        if os.path.lexists(path):
            raise SetupcheckError(_already(shown))
        if not path.parent.is_dir():
            raise SetupcheckError(f"{shown}: there is no folder {printable(str(path.parent))}. Make it first")


def write_new(path: Path, text: str) -> None:
    """A file that was not there before, whole.

    Raises: SetupcheckError where somebody has put something there meanwhile, or where it cannot be written.
    """
    refuse_new(path)
    shown = printable(str(path))
    with _told(shown), _beside(path, text) as beside:
        _place(beside, path, _already(shown))


@contextmanager
def _beside(path: Path, text: str) -> Iterator[Path]:
    """A part file in the same folder, whole and on the disk. The folder is brought to the disk behind; the part file goes."""
    _sweep(path.parent)
    handle, name = tempfile.mkstemp(dir=path.parent, prefix=BEFORE, suffix=BEHIND)
    beside = Path(name)
    try:
        with os.fdopen(handle, "w", encoding="utf-8", errors="replace", newline="\n") as file:
            file.write(text)
            file.flush()
            os.fsync(file.fileno())
        beside.chmod(0o666 & ~_umask())
        yield beside
        _to_disk(path.parent)
    finally:
        with contextlib.suppress(OSError):
            beside.unlink(missing_ok=True)


def _place(beside: Path, path: Path, already: str) -> None:
    """Links a whole file into its place, which fails where anything is, even a link that leads nowhere.

    A file system without links gets an empty file first, which fails alike, and has it replaced.
    """
    try:
        os.link(beside, path)
    except FileExistsError:
        raise SetupcheckError(already) from None
    except OSError:
        try:
            path.open("x").close()
        except FileExistsError:
            raise SetupcheckError(already) from None
        beside.replace(path)


def _sweep(folder: Path) -> None:
    """Takes away what killed runs left in a folder more than a day ago."""
    with contextlib.suppress(OSError):
        for left in folder.glob(f"{BEFORE}*{BEHIND}"):
            with contextlib.suppress(OSError):
                found = left.lstat()
                if stat.S_ISREG(found.st_mode) and time.time() - found.st_mtime > STALE:
                    left.unlink()


def _to_disk(folder: Path) -> None:
    """The entry of a file in its folder, brought to the disk; a system that cannot open a folder does it by itself."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


@contextmanager
def _told(shown: str, hint: str = "What was there stays as it is") -> Iterator[None]:
    """What the system refuses, in words: a full disk, a folder that may not be written, a name that is too long."""
    try:
        yield
    except OSError as why:
        raise SetupcheckError(f"{shown} cannot be written: {why.strerror or why}. {hint}") from None


def _refuse_name(path: Path, shown: str) -> None:
    """A name that nobody could type again, that a terminal would obey, or that Windows would take for a device or cut short."""
    if printable(path.name) != path.name:
        raise SetupcheckError(f"{shown} has a control character in its name. Write a name of letters and digits")
    why = kept_by_windows(path.name) if ON_WINDOWS else ""
    if why:
        raise SetupcheckError(f"{shown} cannot be a file: {why}. Write another name")


def _already(shown: str) -> str:
    return f"{shown} is already there and stays as it is. Write another name"


def _umask() -> int:
    """What new files of this process may not have."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
