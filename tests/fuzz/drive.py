"""One file of any kind put through its reader and, where it reads, through what is made of it. What is a finding is told."""

from __future__ import annotations

import json
import os
import re
import shutil
import signal
import sys
import tempfile
import traceback
import unicodedata
import warnings
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING

from setupcheck.errors import SetupcheckError
from setupcheck.flow import load_job, prepare
from setupcheck.record import record
from setupcheck.shipped import shipped
from tests.bad_input.ring import RING

if TYPE_CHECKING:
    from setupcheck.flow import Review

BOUND = 60
"""Seconds of the processor after which one file hangs; a large job with all that is made of it takes some. Our choice."""
PACKAGE = "setupcheck"
CHECKOUT = Path(__file__).resolve().parents[2]


@record
class Finding:
    """Something that no input may bring about: what, where in the package, and the whole story."""

    what: str
    where: str
    story: str


class Hang(BaseException):
    """The bound has passed. No Exception, so that nothing on the way takes it for its own."""


class Drive:
    """Files are put through in a folder of its own, which is taken away at the end."""

    def __init__(self) -> None:
        self._folder = tempfile.TemporaryDirectory()
        self.at = Path(self._folder.name)
        (self.at / "ring.yaml").write_text(RING, "utf-8")
        self.rules = self.at / "rules"
        shutil.copytree(shipped("rules"), self.rules)
        self.ring = load_job(self.at / "ring.yaml")
        self.wheel = load_job(shipped("jobs") / "rotator-worm-wheel.yaml")
        self.quantities = prepare(self.ring)[1].quantities
        self.refused = 0

    def close(self) -> None:
        """Takes the folder away."""
        self._folder.cleanup()

    def through(self, kind: str, raw: bytes, *, deep: bool = False) -> Finding | None:
        """What is wrong with how one file was taken; None where it was read or refused in words.

        deep  also what takes longer: the sheet, index tables, remedies, drawings
        """
        try:
            with _bounded(), warnings.catch_warnings():
                warnings.simplefilter("error")
                said = getattr(self, f"_{kind}")(raw, deep)
        except SetupcheckError as refusal:
            self.refused += 1
            said = str(refusal)
            if not said.strip():
                return Finding("an empty message", type(refusal).__name__, "")
        except Hang:
            return Finding("a hang", _innermost(), traceback.format_exc())
        except BaseException as wrong:
            if isinstance(wrong, KeyboardInterrupt):
                raise
            return Finding(type(wrong).__name__, _innermost(), traceback.format_exc())
        return _raw_characters(said)

    def _file(self, name: str, raw: bytes) -> Path:
        path = self.at / name
        path.write_bytes(raw)
        return path

    def _job(self, raw: bytes, deep: bool) -> str:
        from setupcheck.flow import review
        from setupcheck.report.json import as_json
        from setupcheck.report.text import as_text

        found = review(self._file("job.yaml", raw))
        data = as_json(found)
        json.loads(data, parse_constant=_no_constant)
        said = data + as_text(found, everything=True) + as_text(found)
        return said + self._deep(found) if deep else said

    def _deep(self, found: Review) -> str:
        """What other commands make of a review; each may refuse for a reason of its own."""
        from setupcheck.flow import mend
        from setupcheck.report import remedy, remedy_data
        from setupcheck.report.index_table import as_csv, as_index_table
        from setupcheck.report.sheet import as_sheet

        def mended() -> str:
            both = mend(found.loaded)
            data = remedy_data.as_json(*both)
            json.loads(data, parse_constant=_no_constant)
            return data + remedy.as_text(*both)

        said = ""
        for made in (
            lambda: as_sheet(found),
            lambda: as_index_table(found.loaded, found.book, None),
            lambda: as_csv(found.loaded, found.book, None),
            mended,
        ):
            try:
                said += made()
            except SetupcheckError as refusal:
                said += str(refusal)
        return said

    def _house(self, raw: bytes, deep: bool) -> str:
        from setupcheck.flow import review
        from setupcheck.report.json import as_json
        from setupcheck.report.text import as_text

        found = review(self.ring, house=self._file("house.yaml", raw), on="2026-12-01")
        data = as_json(found)
        json.loads(data, parse_constant=_no_constant)
        return data + as_text(found, everything=True)

    def _rule(self, raw: bytes, deep: bool) -> str:
        from setupcheck.rulebook import load_rulebook

        head = raw[:4000].decode("utf-8", "replace")
        family = re.search(r"id: *\"?([A-Z]+)-\d", head)
        name = f"{family[1].lower()}.yaml" if family else "book.yaml"
        if not family and "closing_line" in head:
            name = "cautions.yaml"
        elif not family and "title" in head:
            name = "sources.yaml"
        place = self.rules / name
        before = place.read_bytes() if place.exists() else None
        try:
            place.write_bytes(raw)
            book = load_rulebook(self.rules, quantities=self.quantities)
        finally:
            if before is None:
                place.unlink()
            else:
                place.write_bytes(before)
        return book.version

    def _record(self, raw: bytes, deep: bool) -> str:
        from setupcheck.flow import review
        from setupcheck.report.device_record import as_record, load_record
        from setupcheck.report.text import as_text

        path = self._file("record.csv", raw)
        said = as_record(load_record(path))
        return said + as_text(review(self.ring, devices=path))

    def _readings(self, raw: bytes, deep: bool) -> str:
        from setupcheck.flow import read_back
        from setupcheck.report.readings import as_json, as_text

        found = read_back(self.wheel if deep else self.ring, self._file("readings.csv", raw))
        data = as_json(found)
        json.loads(data, parse_constant=_no_constant)
        return data + as_text(found)


def _no_constant(name: str) -> float:
    raise ArithmeticError(f"{name} in JSON")


def _raw_characters(said: str) -> Finding | None:
    """A finding where a text holds what a terminal would obey."""
    for at, character in enumerate(said):
        if character != "\n" and unicodedata.category(character) in ("Cc", "Cf", "Cs", "Zl", "Zp"):
            return Finding("a raw control character", f"U+{ord(character):04X}", repr(said[max(0, at - 80) : at + 20]))
    return None


def _innermost() -> str:
    """The innermost place inside the package, as module and function."""
    frames = traceback.extract_tb(sys.exc_info()[2])
    inside = [f for f in frames if f"{os.sep}{PACKAGE}{os.sep}" in f.filename and "site-packages" not in f.filename]
    if not inside:
        return "outside"
    last = inside[-1]
    return f"{Path(last.filename).resolve().relative_to(CHECKOUT)}:{last.name}"


@contextmanager
def _bounded() -> Iterator[None]:
    """Raises Hang inside where the bound passes, in time of the processor; no bound where the system has no such timer."""
    if not hasattr(signal, "SIGPROF"):
        yield
        return

    def ring(*_: object) -> None:
        raise Hang

    before = signal.signal(signal.SIGPROF, ring)
    signal.setitimer(signal.ITIMER_PROF, BOUND)
    try:
        yield
    finally:
        signal.setitimer(signal.ITIMER_PROF, 0.0)
        signal.signal(signal.SIGPROF, before)


def smaller(raw: bytes, same: Callable[[bytes], bool], *, attempts: int = 400) -> bytes:
    """The file with everything left away that the finding does not need: lines first, then halves of lines."""
    for cut in (lambda b: b.splitlines(keepends=True), lambda b: [b[i : i + 8] for i in range(0, len(b), 8)]):
        parts = cut(raw)
        size = max(1, len(parts) // 2)
        while attempts > 0:
            at = 0
            while at < len(parts) and attempts > 0:
                less = parts[:at] + parts[at + size :]
                attempts -= 1
                if same(b"".join(less)):
                    parts = less
                else:
                    at += size
            if size == 1:
                break
            size //= 2
        raw = b"".join(parts)
    return raw
