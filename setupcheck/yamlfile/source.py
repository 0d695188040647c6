"""The text of a file: one plain UTF-8 text of sensible size, or one clear error. Line ends come out as newlines."""

from __future__ import annotations

import os
import stat
from os import PathLike
from pathlib import Path

from setupcheck.errors import JobError, Problem
from setupcheck.yamlfile.limits import LARGEST_FILE

_BYTE_ORDER_MARKS = (  # UTF-32 before UTF-16: the longer mark begins with the shorter
    (b"\xff\xfe\x00\x00", "UTF-32"),
    (b"\x00\x00\xfe\xff", "UTF-32"),
    (b"\xff\xfe", "UTF-16"),
    (b"\xfe\xff", "UTF-16"),
)


def read_text(path: str | PathLike[str], *, if_empty: str = "Write key: value on its lines") -> str:
    """The text of a file, without byte order mark, lines ended by newlines only.

    if_empty  what to write into a file that holds nothing
    Raises JobError: no such file, a directory or a device, unreadable, empty, over 2 MB (seen before it is read),
    not text, not UTF-8 (with the line).
    """
    file = os.fspath(path)
    raw = _bytes_of(file)
    for mark, name in _BYTE_ORDER_MARKS:
        if raw.startswith(mark):
            raise _refusal(file, f"the file is saved as {name}", "Save it as UTF-8")
    if b"\x00" in raw:
        raise _refusal(file, "the file is not text", "Name a job file, written as YAML")
    raw = raw.removeprefix(b"\xef\xbb\xbf")
    try:
        text = raw.decode("utf-8")
    except UnicodeDecodeError as why:
        raise _not_utf8(file, raw, why.start) from None
    text = text.replace("\r\n", "\n").replace("\r", "\n")
    if not text.strip():
        raise _refusal(file, "the file is empty", if_empty)
    return text


def _bytes_of(file: str) -> bytes:
    if not file:  # pathlib would take it for the directory it stands in
        raise _refusal(file, "there is no such file", "Check the name and the directory")
    try:
        found = Path(file).stat()
        if stat.S_ISDIR(found.st_mode):
            raise _refusal(file, "this is a directory", "Name a file in it")
        if not stat.S_ISREG(found.st_mode):
            raise _refusal(file, "this is not a plain file", "Name a file on the disk")
        if found.st_size > LARGEST_FILE:
            raise _too_large(file, found.st_size)
        with Path(file).open("rb") as stream:
            raw = stream.read(found.st_size + 1)
            if len(raw) > found.st_size:  # it grew, or its size cannot be known beforehand
                raw += stream.read(LARGEST_FILE + 1 - len(raw))
    except FileNotFoundError:
        raise _refusal(file, "there is no such file", "Check the name and the directory") from None
    except PermissionError:
        raise _refusal(file, "the file may not be read", "Check its permissions") from None
    except (OSError, ValueError) as why:  # ValueError: a NUL in the name
        says = why.strerror if isinstance(why, OSError) and why.strerror else str(why)
        raise _refusal(file, f"the file cannot be read ({says})", "Check the name and the disk") from None
    if len(raw) > LARGEST_FILE:  # it grew while it was read
        raise _too_large(file, len(raw))
    return raw


def _too_large(file: str, size: int) -> JobError:
    limit = LARGEST_FILE / 1e6
    return _refusal(
        file, f"the file has {size / 1e6:.1f} MB, more than {limit:.0f} MB", "Name a job file, written as YAML"
    )


def _not_utf8(file: str, raw: bytes, at: int) -> JobError:
    lines = raw.decode("utf-8", errors="replace").replace("\r\n", "\n").replace("\r", "\n").split("\n")
    before = raw[:at].replace(b"\r\n", b"\n").replace(b"\r", b"\n")
    line = before.count(b"\n") + 1
    column = len(before[before.rfind(b"\n") + 1 :].decode("utf-8")) + 1
    what = f"the byte 0x{raw[at]:02x} is not UTF-8"
    return JobError(file, lines, [Problem("", line, column, 1, what, "Save the file as UTF-8")])


def _refusal(file: str, problem: str, hint: str) -> JobError:
    return JobError(file, (), [Problem("", 0, 0, 0, problem, hint)])
