"""A division test's CSV, read row by row into plain arrays. Angles rad.

station  where round the work a reading stands. Columns `angle_…`: a place on the work, counter-clockwise from its mark seen
         from +z (`tooth`: its number). Columns `turned_…`: how far the work was turned, for an instrument that rides on it.
value    `deviation_arcsec`: how much further counter-clockwise the work stands than it should; `reading_…`: the instrument.
"""

from __future__ import annotations

import csv
from array import array
from collections import Counter
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, BinaryIO

from setupcheck.division.columns import (
    KNOWN,
    STATION_COLUMNS,
    VALUE_COLUMNS,
    BadCell,
    column_name,
    is_number,
    reader,
    refuse_formula,
    unknown_column,
)
from setupcheck.errors import SetupcheckError, printable
from setupcheck.notation import quoted
from setupcheck.record import record

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

MOST_ROWS = 2_000_000
"""Rows of one file. Our choice: 2 million took 0.4 GB and half a minute of one processor here."""
MOST_RUNS = 200
"""Runs of one file, each with a zero of its own in the fit. Our choice."""
MOST_PROBLEMS = 10
"""Wrong cells told of one file before reading stops. Our choice."""
LONGEST_LINE = 10_000
"""Characters of a line: far above any row of readings. Our choice."""
EMPTY = ("", "-", "--", "n/a", "na", "none")
"""How a station that was not read may stand in its cell. Our choice."""
MAY_BE_EMPTY = ("direction", "face")
_EXAMPLE = "angle_deg,deviation_arcsec"


@record(eq=False)
class Readings:
    """The rows of one file that have a reading, in their order.

    kind       angle, turned or tooth: what a station is;  how  deviation or reading
    station    [rad], or the tooth's number;  value  [rad]
    run        number of each row's run, counted in the order they first come;  runs  their names
    direction  +1 forward, -1 reverse, 0 not said;  face  1 left, 2 right, 0 not said
    minutes    times, or None: then rows follow each other evenly;  line  of the file
    empty      lines without a reading
    """

    file: str
    kind: str
    how: str
    station: NDArray[np.float64]
    value: NDArray[np.float64]
    run: NDArray[np.int32]
    runs: tuple[str, ...]
    direction: NDArray[np.int8]
    face: NDArray[np.int8]
    minutes: NDArray[np.float64] | None
    line: NDArray[np.int32]
    empty: tuple[int, ...]

    def __len__(self) -> int:
        return len(self.value)


def read_test(path: str | Path, *, progress: Callable[[int], None] | None = None) -> Readings:
    """Read the CSV of a division test.

    progress  called now and then with the bytes read so far
    Raises: SetupcheckError with every wrong cell (up to ten), its line and column.
    """
    place = Path(path)
    shown = printable(str(place))
    try:
        if place.exists() and not place.is_file() and not place.is_dir():  # a pipe would keep us waiting
            raise SetupcheckError(f"{shown} is no plain file. Write the name of a CSV on the disk")
        with place.open("rb") as file:
            return _read(file, shown, progress)
    except IsADirectoryError:
        raise SetupcheckError(f"{shown} is a folder. Write the name of the CSV in it") from None
    except FileNotFoundError:
        raise SetupcheckError(
            f"{shown}: there is no such file. `setupcheck readings --template` prints one to start from"
        ) from None
    except OSError as why:
        raise SetupcheckError(f"{shown} cannot be read: {why.strerror or why}") from None


def _read(file: BinaryIO, shown: str, progress: Callable[[int], None] | None) -> Readings:
    lines = _Lines(file, shown, progress)
    header, delimiter = _header(lines, shown)
    return _Table(shown, header).filled(csv.reader(lines, delimiter=delimiter), lines)


class _Lines:
    """Lines of the file that are neither comment nor empty, as text; remembers the number of the last one."""

    def __init__(self, file: BinaryIO, shown: str, progress: Callable[[int], None] | None) -> None:
        self.file, self.shown, self.progress = file, shown, progress
        self.number = self.bytes = 0

    def __iter__(self) -> Iterator[str]:
        return self

    def __next__(self) -> str:
        while True:
            raw = self.file.readline(LONGEST_LINE + 1)
            if not raw:
                raise StopIteration
            self.number += 1
            self.bytes += len(raw)
            if self.progress is not None and not self.number % 20_000:
                self.progress(self.bytes)
            text = self._text(raw)
            if text and not text.isspace() and text[0] != "#" and not text.lstrip().startswith("#"):
                return text

    def _text(self, raw: bytes) -> str:
        place = f"{self.shown}:{self.number}"
        if self.number == 1:
            if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
                raise SetupcheckError(f"{place}: the file is UTF-16. Save it as CSV UTF-8")
            raw = raw.removeprefix(b"\xef\xbb\xbf")
        if b"\0" in raw:
            raise SetupcheckError(f"{place}: the line has NUL bytes, so this is not text. Save the table as CSV UTF-8")
        if len(raw) > LONGEST_LINE:
            raise SetupcheckError(
                f"{place}: the line has more than {LONGEST_LINE} characters. Write one reading a line"
            )
        try:
            return raw.decode("utf-8").replace("\r", "")
        except UnicodeDecodeError:
            raise SetupcheckError(f"{place}: the line is not UTF-8. Save the table as CSV UTF-8") from None


def _header(lines: _Lines, shown: str) -> tuple[list[str], str]:
    """Names of the columns, and what stands between cells: the sign the first line has most of."""
    first = next(lines, None)
    if first is None:
        raise SetupcheckError(
            f"{shown}: there is nothing in the file but empty lines and comments. The first line names the columns, "
            f"as in {_EXAMPLE}; `setupcheck readings --template` prints a file to start from"
        )
    delimiter = max(",;\t", key=first.count)
    try:
        cells = next(csv.reader([first], delimiter=delimiter))
    except csv.Error as why:
        raise SetupcheckError(f"{shown}:{lines.number}: the line of column names cannot be read: {why}") from None
    return _named([column_name(cell) for cell in cells], f"{shown}:{lines.number}"), delimiter


def _named(names: list[str], place: str) -> list[str]:
    """The names, checked.  Raises: SetupcheckError."""
    while names and not names[-1]:
        names = names[:-1]  # separators a spreadsheet leaves at the end
    if not names or (not set(names) & set(KNOWN) and any(name in EMPTY or is_number(name) for name in names)):
        raise SetupcheckError(f"{place}: the first line has no names of columns. Write them above, as in {_EXAMPLE}")
    for name, times in Counter(names).items():
        if not name:
            raise SetupcheckError(f"{place}: a column has no name. Name it, or note")
        if times > 1:
            raise SetupcheckError(f"{place}: the column {name} is there {times} times. Keep one of them")
        if name not in KNOWN:
            raise SetupcheckError(f"{place}: {unknown_column(name)}")
    for columns, what in ((STATION_COLUMNS, "station"), (VALUE_COLUMNS, "reading")):
        found = [name for name in names if name in columns]
        if not found:
            raise SetupcheckError(f"{place}: no column has the {what}s. Write one of {', '.join(columns)}")
        if len(found) > 1:
            raise SetupcheckError(f"{place}: {' and '.join(found)} both give the {what}. Keep one of them")
    return names


class _Table:
    """The columns as they fill: compact arrays, no object a row."""

    def __init__(self, shown: str, names: list[str]) -> None:
        self.shown, self.names = shown, names
        self.station_column = next(n for n in names if n in STATION_COLUMNS)
        self.value_column = next(n for n in names if n in VALUE_COLUMNS)
        self.cells = {n: array("d") for n in names if n not in ("note", "run")}
        self.readers = [(i, n, reader(n), self.cells[n].append) for i, n in enumerate(names) if n in self.cells]
        self.run_at = names.index("run") if "run" in names else -1
        self.value_at = names.index(self.value_column)
        self.run, self.runs = array("i"), {"": 0}
        self.line, self.empty = array("i"), array("i")
        self.problems: list[str] = []

    def filled(self, rows: Iterator[list[str]], lines: _Lines) -> Readings:
        try:
            for row in rows:
                self._add(row, lines.number)
                if len(self.problems) >= MOST_PROBLEMS:
                    break
        except csv.Error as why:
            self.problems.append(f"{self.shown}:{lines.number}: the line cannot be read: {why}")
        if self.problems:
            raise SetupcheckError("\n".join(self.problems))
        if not self.line:
            raise SetupcheckError(f"{self.shown}: no line has a reading. Write one line for each, below the names")
        return self._readings()

    def _add(self, row: list[str], number: int) -> None:
        if len(row) != len(self.names) and not self._right_length(row, number):
            return
        if not row[self.value_at][-1:].isdigit() and row[self.value_at].strip().lower() in EMPTY:
            self.empty.append(number)
            return
        if len(self.line) >= MOST_ROWS:
            raise SetupcheckError(
                f"{self.shown}:{number}: more than {MOST_ROWS:,} readings. Give each station's mean of a run instead"
            )
        for i, name, read, append in self.readers:
            cell = row[i]
            try:
                append(read(cell.strip()) if cell or name not in MAY_BE_EMPTY else 0.0)
            except BadCell as wrong:  # the file is refused as a whole, so columns of different length do no harm
                self.problems.append(f"{self.shown}:{number}: column {name}: {printable(str(wrong))}")
        self.line.append(number)
        self.run.append(self._run(row[self.run_at].strip(), number) if self.run_at >= 0 else 0)

    def _right_length(self, row: list[str], number: int) -> bool:
        """Whether only empty cells are too many, or the row is short of cells that may be empty; told where neither."""
        wanted = len(self.names)
        if len(row) > wanted and not any(cell.strip() for cell in row[wanted:]):
            del row[wanted:]
            return True
        if len(row) < wanted and all(n in ("note", "direction", "face", "run") for n in self.names[len(row) :]):
            row.extend([""] * (wanted - len(row)))
            return True
        self.problems.append(
            f"{self.shown}:{number}: {len(row)} cell{'' if len(row) == 1 else 's'} where the first line names {wanted} columns. "
            "Write one cell for each, empty where there is nothing; a decimal is written with a point"
        )
        return False

    def _run(self, name: str, number: int) -> int:
        found = self.runs.get(name)
        if found is None:
            try:
                refuse_formula(name)
            except BadCell as wrong:
                self.problems.append(f"{self.shown}:{number}: column run: {printable(str(wrong))}")
                return 0
            if len(self.runs) > MOST_RUNS:
                self.problems.append(f"{self.shown}:{number}: more than {MOST_RUNS} runs, the last {quoted(name)}")
                return 0
            found = self.runs[name] = len(self.runs)
        return found

    def _readings(self) -> Readings:
        import numpy as np

        def small(name: str) -> NDArray[np.int8]:
            told = self.cells.get(name)
            return np.zeros(len(self.line), np.int8) if told is None else np.frombuffer(told).astype(np.int8)

        minutes = self.cells.get("minutes")
        codes, run = np.unique(np.frombuffer(self.run, np.int32), return_inverse=True)
        names = list(self.runs)
        return Readings(
            self.shown,
            self.station_column.partition("_")[0],
            self.value_column.partition("_")[0],
            np.frombuffer(self.cells[self.station_column]),
            np.frombuffer(self.cells[self.value_column]),
            run.astype(np.int32),
            tuple(names[int(code)] for code in codes),
            small("direction"),
            small("face"),
            None if minutes is None else np.frombuffer(minutes),
            np.frombuffer(self.line, np.int32),
            tuple(self.empty[:1000]),
        )
