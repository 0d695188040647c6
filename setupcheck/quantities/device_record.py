"""A shop's own record of its devices, one CSV line an entry: `four-jaw-A, runout, 2026-11-02, 7 um`. mm, rad, K."""

from __future__ import annotations

import csv
import datetime
import hashlib
import re
from collections.abc import Iterator, Mapping
from dataclasses import replace
from pathlib import Path

from setupcheck.errors import JobError, Problem
from setupcheck.notation import NotationError, nearest, quoted
from setupcheck.physics.prediction import mean_of, prediction_limit, spread_of
from setupcheck.quantities.typical import WHATS
from setupcheck.record import record
from setupcheck.yamlfile import read_text

LEAST_ENTRIES = 5
"""Entries before a limit is worked out. Source: our screening choice; with fewer, t makes the limit useless or lucky."""
CONFIDENCE = 0.95
"""Of the limit for the next value. Source: common practice."""
COLUMNS = ("device", "what", "date", "value", "note")
NEEDED = COLUMNS[:4]
HEADER = ", ".join(NEEDED)
EXAMPLE = "four-jaw-A, runout, 2026-11-02, 7 um"

SIGNED = ("reading", "touch", "position", "setting", "tilt", "temperature_error")
"""What may come out either way of nought, so that its entries may have a sign. All else is a size, never negative."""
MOST_LAST = 10
"""Last values that are held against those before them. Source: our screening choice."""
_LENGTHS = ("runout", "face_runout", "axis", "reading", "touch", "position")
_DATE = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}")
_INCHES = re.compile(r"(in|in\.|inch|inches|thou|mils?|uin|microinch)$")


@record
class Entry:
    """One line: value in mm, rad or K; `inches` where it was written so."""

    device: str
    what: str
    date: str
    value: float
    note: str
    line: int
    inches: bool = False


@record
class Series:
    """All entries of one device and one thing, by date."""

    device: str
    what: str
    entries: tuple[Entry, ...]

    @property
    def values(self) -> list[float]:
        """The values by date, as written."""
        return [entry.value for entry in self.entries]

    @property
    def name(self) -> str:
        """As findings name it: `four-jaw-A runout`."""
        return f"{self.device} {self.what.replace('_', ' ')}"

    @property
    def metric(self) -> str:
        """Unit it is shown in."""
        if self.what in _LENGTHS:
            return "um"
        return "K" if self.what == "temperature_error" else "arcsec"

    @property
    def unit(self) -> str:
        """The same; thou for lengths that were all written in inches."""
        inches = self.metric == "um" and all(entry.inches for entry in self.entries)
        return "thou" if inches else self.metric

    @property
    def thin(self) -> bool:
        """Too few entries for a limit."""
        return len(self.entries) < LEAST_ENTRIES

    @property
    def alike(self) -> bool:
        """Entries that are all the same number tell no spread: they were read too coarsely, or copied."""
        return len(set(self.values)) == 1

    @property
    def mean(self) -> float:
        """Mean of the entries."""
        return mean_of(self.values)

    @property
    def spread(self) -> float | None:
        """Standard deviation of single entries; None of one entry."""
        return spread_of(self.values) if len(self.entries) > 1 else None

    @property
    def largest(self) -> float:
        """The largest seen, without its sign."""
        return max(abs(value) for value in self.values)

    @property
    def limit(self) -> float | None:
        """What the next value keeps below, without its sign; None where the record is thin or all alike."""
        return limit_of(self.values)

    @property
    def rising(self) -> int:
        """How many of the last values all lie above the limit of those before them; 0 where none do.

        The longest such end of MOST_LAST values or fewer, with LEAST_ENTRIES or more before it. A single one lies there by
        chance about once in twenty times.
        """
        values = self.values
        for last in range(min(len(values) - LEAST_ENTRIES, MOST_LAST), 0, -1):
            before = limit_of(values[:-last])
            if before is not None and all(abs(value) > before for value in values[-last:]):
                return last
        return 0


def limit_of(values: list[float]) -> float | None:
    """95 % prediction limit, yet never below the largest value seen: what has been can come again.

    None for fewer than LEAST_ENTRIES values, and for values that are all alike.
    Source: physics.prediction; the largest seen is our screening choice.
    """
    if len(values) < LEAST_ENTRIES or len(set(values)) == 1:
        return None
    signed = min(values) < 0.0
    return max(prediction_limit(values, confidence=CONFIDENCE, both_ways=signed), *(abs(value) for value in values))


@record(eq=False)
class DeviceRecord:
    """A record file: its name, the sha256 of its text, and its series by (device, what), in the order of the file."""

    file: str
    sha256: str
    series: Mapping[tuple[str, str], Series]

    def of(self, device: str | None, what: str) -> Series | None:
        """The series of a device by its own name; a record of the kind (`four-jaw`) says nothing of `four-jaw-A`."""
        return self.series.get((device, what)) if device is not None else None


def read_record(path: str | Path) -> DeviceRecord:
    """Read a record file.

    Raises: JobError with every problem of the file, each with its line.
    """
    try:
        text = read_text(path, if_empty=f"Write a header, {HEADER}, and an entry: {EXAMPLE}")
    except JobError as why:
        raise JobError(why.file, why.lines, [_as_csv(problem) for problem in why.problems]) from None
    return read_record_text(text, str(path))


def _as_csv(problem: Problem) -> Problem:
    hint = "Name a record of devices, written as CSV" if problem.hint.startswith("Name a job file") else problem.hint
    return replace(problem, hint=hint)


def read_record_text(text: str, file: str) -> DeviceRecord:
    """Read the text of a record; `file` is the name shown in messages."""
    reading = _Reading(text)
    entries = reading.entries()
    if reading.problems:
        raise JobError(file, reading.lines, reading.problems)
    grouped: dict[tuple[str, str], list[Entry]] = {}
    for entry in entries:
        grouped.setdefault((entry.device, entry.what), []).append(entry)
    series = {  # entries of one day stay as they stand in the file
        key: Series(*key, tuple(sorted(group, key=lambda entry: entry.date))) for key, group in grouped.items()
    }
    return DeviceRecord(Path(file).name, hashlib.sha256(text.encode()).hexdigest(), series)


class _Wrong(Exception):
    """One thing wrong on a line: the piece of text it is about, the problem, and what to write."""


class _Reading:
    """One pass over the lines of a record, problems collected."""

    def __init__(self, text: str) -> None:
        self.lines = text.split("\n")
        self.problems: list[Problem] = []

    def entries(self) -> list[Entry]:
        """Every entry that can be read; none below a header that cannot."""
        rows = self._rows()
        number, header = next(rows, (0, []))
        if number == 0:
            if not self.problems:
                self._note(0, "", "the file holds no entries", f"Write a header, {HEADER}, and an entry: {EXAMPLE}")
            return []
        columns = [cell.lower() for cell in header]
        try:
            _check_header(columns)
        except _Wrong as why:
            self._note(number, *why.args)
            return []
        found = [entry for number, cells in rows if (entry := self._entry(number, columns, cells)) is not None]
        if not found and not self.problems:
            self._note(number, "", "there is no entry below the header", f"Write one: {EXAMPLE}")
        return found

    def _rows(self) -> Iterator[tuple[int, list[str]]]:
        """Lines that are not empty and no comment, each in cells; one entry stands on one line."""
        for number, line in enumerate(self.lines, 1):
            if not line.strip() or line.lstrip().startswith("#"):
                continue
            try:
                cells = next(csv.reader([line], skipinitialspace=True, strict=True))
            except (csv.Error, StopIteration):
                self._note(
                    number, "", "a cell begins with a quotation mark that is not closed", 'Write "like this, or so"'
                )
                continue
            yield number, [cell.strip() for cell in cells]

    def _entry(self, number: int, columns: list[str], cells: list[str]) -> Entry | None:
        try:
            while len(cells) > len(columns) and not cells[-1]:  # a spreadsheet's empty columns
                cells = cells[:-1]
            if len(cells) > len(columns):
                raise _Wrong("", f"this line has {len(cells)} cells under {len(columns)} columns", _MORE_CELLS)
            row = dict(zip(columns, cells + [""] * (len(columns) - len(cells)), strict=True))
            return _entry_of(row, number)
        except _Wrong as why:
            self._note(number, *why.args)
            return None

    def _note(self, number: int, piece: str, problem: str, hint: str) -> None:
        line = self.lines[number - 1] if number else ""
        at = line.find(piece) if piece else -1
        start, long = (at, len(piece)) if at >= 0 else (len(line) - len(line.lstrip()), len(line.strip()))
        self.problems.append(Problem("", number, start + 1, long, problem, hint))


_MORE_CELLS = 'Write a point for the decimal (7.5 um), and a note with a comma in quotation marks: "worn, noisy"'


def _check_header(columns: list[str]) -> None:
    if len(columns) == 1 and any(mark in columns[0] for mark in ";\t"):
        raise _Wrong("", "the columns are not parted by commas", f"Save it with commas: {HEADER}")
    while columns and not columns[-1]:
        columns.pop()
    for number, column in enumerate(columns):
        if column not in COLUMNS:
            near = nearest(column, COLUMNS)
            what = f"{quoted(column)} is no column of a record" if column else "a column has no name"
            raise _Wrong(
                column,
                what,
                f"{f'Did you mean {near}? ' if near else ''}Write the header: {HEADER}, and note where you want one",
            )
        if column in columns[:number]:
            raise _Wrong(column, f"the column {column} stands there twice", "Keep one of them")
    missing = [column for column in NEEDED if column not in columns]
    if missing:
        raise _Wrong("", f"the header lacks {', '.join(missing)}", f"Write {HEADER}")


def _entry_of(row: Mapping[str, str], number: int) -> Entry:
    for column, cell in row.items():
        if cell.startswith("="):
            raise _Wrong(cell, f"{quoted(cell)} is a formula", "Save the sheet with values, not formulas")
        if not cell and column in NEEDED:
            raise _Wrong("", f"this line has no {column}", f"Write all of {HEADER}: {EXAMPLE}")
    device, what, date, value = (row[column] for column in NEEDED)
    if what not in WHATS:
        near = nearest(what, WHATS)
        said = f"Did you mean {near}? " if near else ""
        raise _Wrong(what, f"{quoted(what)} is nothing a record keeps", f"{said}Write one of: {', '.join(WHATS)}")
    if not _is_date(date):
        raise _Wrong(date, f"{quoted(date)} is not a date", "Write year-month-day, as in 2026-11-02")
    try:
        read = _value(what, value)
    except NotationError as why:
        raise _Wrong(value, f"{why.problem} ({what} of {device})", why.hint) from None
    return Entry(device, what, date, read, row.get("note", ""), number, bool(_INCHES.search(value)))


def _value(what: str, text: str) -> float:
    """One reading [mm, rad or K], with its sign where `what` may have one."""
    text = text.replace("\u2212", "-")
    if text.startswith(("\u00b1", "+-", "+/-")):
        raise NotationError(f"{quoted(text)} is a bound", "Write the reading itself, without \u00b1")
    if text[:1] not in ("-", "+"):
        return WHATS[what](text)
    rest = text[1:].strip()
    if rest[:1] in ("-", "+"):
        raise NotationError(f"{quoted(text)} has two signs", f"Write {text[:1]}{rest[1:].strip()}")
    size = WHATS[what](rest)
    if text[0] == "-" and what not in SIGNED:
        raise NotationError(f"{quoted(text)} is below zero", "Write 0 or more, without a minus sign")
    return -size if text[0] == "-" else size


def _is_date(text: str) -> bool:
    """Year-month-day in digits, and such a day there is."""
    if not _DATE.fullmatch(text):
        return False
    try:
        datetime.date.fromisoformat(text)
    except ValueError:
        return False
    return True
