"""ISO 286: limits of a size with a tolerance class, and what a hole and a shaft make together. Lengths mm.

The tables come in as parsed rows (numbers in um, as every printed table has them); what is a rule is written here:

    shafts  d e f g       es from the table, ei = es - IT              h        es = 0
            k (4 to 7)    ei from the table, es = ei + IT              js       es = +IT/2, ei = -IT/2
            m n p r s t u ei from the table, es = ei + IT              k coarser than 7: ei = 0
    holes   D E F G       EI = -es of the small letter                 H        EI = 0;  JS as js
            K M N         ES = -ei + delta up to grade 8 (over 3 mm)   P R S T U  the same up to grade 7
            coarser, or up to 3 mm: ES = -ei;  N coarser than 8 over 3 mm: ES = 0;  K coarser than 8 over 3 mm: none
    delta = IT(n) - IT(n-1), so that P7/h6 is the same fit as H7/p6: a hole n with a shaft n-1, the letters changed over.

Source: ISO/R 286:1962 rules as given in Narayana et al., Machine Drawing, p.222; k and K, M, N coarser than the rule, the
case up to 3 mm and the halves of JS from memory (the standard lets JS7 to JS11 drop an odd um; we keep it).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import field
from itertools import pairwise

from setupcheck.record import record

LARGEST = 500.0
"""Largest size of the tables [mm]. Source: ISO 286-1 has other formulas above it (from memory)."""

UPPER = ("d", "e", "f", "g")
"""Shafts below the nominal size: the table gives es."""
LOWER = ("k", "m", "n", "p", "r", "s", "t", "u")
"""Shafts above it: the table gives ei."""
SHAFTS = ("d", "e", "f", "g", "h", "js", "k", "m", "n", "p", "r", "s", "t", "u")
"""Letters of shafts we can look up; the holes are the same in capitals."""
HOLES = tuple(letter.upper() for letter in SHAFTS)

K_GRADES = range(4, 8)
"""Grades in which k stands off the nominal size. Source: ISO/R 286:1962."""
DELTA_OVER = 3.0
"""The delta rule is for sizes over this [mm]. Source: ISO/R 286:1962."""
DELTA_TO_GRADE = {"K": 8, "M": 8, "N": 8, "P": 7, "R": 7, "S": 7, "T": 7, "U": 7}
"""Coarsest grade of the delta rule. Source: ISO/R 286:1962."""
N_COARSE_OVER = 1.0
"""N coarser than grade 8 is not for sizes up to this [mm]. Source: ISO 286-1, from memory."""

_CLASS = re.compile(r"([A-Za-z]{1,2})([0-9]{1,2})")
_GRADE = re.compile(r"IT([1-9][0-9]?)")
_NOISE = 1e-9  # mm; a smaller difference of two limits is only binary fractions (our screening choice)


@record
class Cell:
    """One number of the tables.

    column       `IT7`, `s`, or the class of an exception, `M6`
    over, up_to  its step of sizes [mm]; the upper end belongs to it
    microns      the number [um]
    source       whose number it is
    doubtful     remembered only, and not what the standard's own formula gives
    """

    column: str
    over: float
    up_to: float
    microns: int
    source: str
    doubtful: bool = False


@record
class Tables:
    """Cells of every column, by rising size; `exceptions` are upper deviations printed off the rule."""

    columns: Mapping[str, tuple[Cell, ...]]
    exceptions: tuple[Cell, ...] = ()

    def grades(self) -> tuple[int, ...]:
        """Grades that are tabulated, rising."""
        return tuple(sorted(int(column[2:]) for column in self.columns if column.startswith("IT")))


@record
class Limits:
    """Deviations from the nominal size [mm], lower <= upper (EI and ES of a hole, ei and es of a shaft)."""

    lower: float
    upper: float

    def __post_init__(self) -> None:
        if not self.lower <= self.upper:
            raise ValueError(f"the lower deviation {self.lower:g} mm is above the upper one, {self.upper:g} mm")


@record
class Play:
    """Least and most play of a joint on the diameter [mm]; below zero it is interference."""

    least: float
    most: float

    @property
    def kind(self) -> str:
        """`clearance`, `interference` or `transition`; just touching at one end is no transition (ISO 286-1, from memory)."""
        if self.least >= 0.0:
            return "clearance"
        return "interference" if self.most <= 0.0 else "transition"

    def words(self) -> str:
        """The play as a planner says it.

        >>> Play(-0.078, -0.029).words(), Play(0.007, 0.041).words(), Play(-0.015, 0.019).words()
        ('interference 29 to 78 um', 'clearance 7 to 41 um', 'transition, interference 15 um to clearance 19 um')
        """
        if self.kind == "transition":
            return f"transition, interference {_um(self.least)} um to clearance {_um(self.most)} um"
        low, high = sorted((abs(self.least), abs(self.most)))
        return f"{self.kind} {_um(low)} to {_um(high)} um"


@record(frozen=False)
class _Looked:
    """A tolerance class at one size, and the cells read on the way."""

    tables: Tables
    nominal: float
    name: str
    read: list[Cell] = field(default_factory=list)

    def cell(self, column: str) -> int:
        for cell in self.tables.columns.get(column, ()):
            if cell.over < self.nominal <= cell.up_to:
                self.read.append(cell)
                return cell.microns
        raise ValueError(f"{self.name} is not tabulated at {self.nominal:g} mm{self._from()}")

    def exception(self) -> int | None:
        for cell in self.tables.exceptions:
            if cell.column == self.name and cell.over < self.nominal <= cell.up_to:
                self.read.append(cell)
                return cell.microns
        return None

    def _from(self) -> str:
        """Where the letter begins, when the size lies below it (t begins over 24 mm)."""
        cells = self.tables.columns.get(self.name.rstrip("0123456789").lower(), ())
        return f", only over {cells[0].over:g} mm" if cells and self.nominal <= cells[0].over else ""


def limits(tables: Tables, nominal: float, tolerance_class: str) -> Limits:
    """Limits of a size with a class: upper and lower deviation, by table and rule as the head of this module says.

    nominal          nominal size [mm], over 0 to 500
    tolerance_class  letter and grade, `H7` for a hole, `s6` for a shaft
    Returns mm; thousandths are exact decimals (halves of a um with js).
    Raises: ValueError for a size outside the table, a letter or a grade that is not in it, or a class that is not made.
    Source: ISO 286-1; each number as its row in the tables says.

    >>> rows = [{"over": 80, "up_to": 120, "IT6": 22, "IT7": 35, "evidence": "a"}]
    >>> shafts = [{"over": 80, "up_to": 100, "s": 71, "evidence": "a"}]
    >>> some = read_tables({"a": "GB/T 1800.3-1998"}, rows, shafts=shafts)
    >>> limits(some, 100.0, "H7"), limits(some, 100.0, "s6"), limits(some, 100.0, "S7")
    (Limits(lower=0.0, upper=0.035), Limits(lower=0.071, upper=0.093), Limits(lower=-0.093, upper=-0.058))
    """
    lower, upper = _halves(_looked(tables, nominal, tolerance_class))
    return Limits(lower / 2000.0, upper / 2000.0)


def basis(tables: Tables, nominal: float, tolerance_class: str) -> tuple[Cell, ...]:
    """The cells that the limits of a class rest on, in the order of reading. Raises as `limits`."""
    looked = _looked(tables, nominal, tolerance_class)
    _halves(looked)
    return tuple(looked.read)


def fit(hole: Limits, shaft: Limits) -> Play:
    """Play of a hole and a shaft of one nominal size, on the diameter [mm].

    least = EI - es, most = ES - ei; below zero the shaft is larger than the hole.
    hole, shaft  deviations from the same nominal size [mm], from a class or measured
    Source: definition, ISO 286-1.

    >>> fit(Limits(0.0, 0.025), Limits(0.060, 0.076)).words()
    'interference 35 to 76 um'
    """
    return Play(_cleaned(hole.lower - shaft.upper), _cleaned(hole.upper - shaft.lower))


def read_tables(
    sources: Mapping[str, str],
    grades: Iterable[Mapping[str, object]],
    *,
    shafts: Iterable[Mapping[str, object]],
    exceptions: Iterable[Mapping[str, object]] = (),
) -> Tables:
    """Tables from parsed rows.

    sources     name -> text of every source a row may name in `evidence`
    grades      rows {over, up_to, IT7: 35, …, evidence, doubtful: [IT7]}; sizes mm, values um
    shafts      rows {over, up_to, s: 71, …, evidence, doubtful: [s]}
    exceptions  rows {class: M6, over, up_to, upper: -9, evidence, doubtful: true}
    Raises: ValueError for a row without evidence, an unknown column, a value that is no whole um, steps that overlap or
    leave a gap.
    """
    found: dict[str, list[Cell]] = {}
    for rows, table in ((grades, "grades"), (shafts, "shafts")):
        for row in rows:
            for cell in _cells(row, table, sources):
                found.setdefault(cell.column, []).append(cell)
    columns = {name: tuple(sorted(cells, key=lambda cell: cell.over)) for name, cells in found.items()}
    for name, cells in columns.items():
        for before, after in pairwise(cells):
            if before.up_to != after.over:
                raise ValueError(f"column {name}: {after.over:g} mm does not follow on {before.up_to:g} mm")
    odd = []
    for row in exceptions:
        over, up_to, source = _step(row, sources)
        name = str(row.get("class"))
        known = _CLASS.fullmatch(name)
        if known is None or known[1] not in DELTA_TO_GRADE:
            raise ValueError(f"'{name}' is no class of a hole from K to U, so it cannot be an exception")
        odd.append(Cell(name, over, up_to, _whole(row, "upper"), source, row.get("doubtful") is True))
    return Tables(columns, tuple(odd))


def _looked(tables: Tables, nominal: float, tolerance_class: str) -> _Looked:
    """A size and a class that can be looked up at all."""
    found = _CLASS.fullmatch(tolerance_class)
    if found is None:
        raise ValueError(f"'{tolerance_class}' is no tolerance class; H7 or s6 is one")
    letter, digits = found.groups()
    if letter not in SHAFTS and letter not in HOLES:
        raise ValueError(
            f"the letter {letter} of {tolerance_class} is not in our tables, which have shafts {' '.join(SHAFTS)} "
            f"and the same in capitals for holes"
        )
    grades = tables.grades()
    if digits != str(int(digits)) or int(digits) not in grades:
        ours = f"IT{grades[0]} to IT{grades[-1]}" if grades else "no grades"
        raise ValueError(f"grade {digits} of {tolerance_class} is not in our tables, which have {ours}")
    if not 0.0 < nominal <= LARGEST:
        raise ValueError(f"{nominal:g} mm is outside the tables of ISO 286 here, over 0 to {LARGEST:g} mm")
    return _Looked(tables, nominal, tolerance_class)


def _halves(looked: _Looked) -> tuple[int, int]:
    """Lower and upper deviation in half microns: js halves an odd tolerance, and whole numbers keep mm exact."""
    letter = looked.name.rstrip("0123456789")
    grade = int(looked.name[len(letter) :])
    tolerance = looked.cell(f"IT{grade}")
    if letter in ("js", "JS"):
        return -tolerance, tolerance
    if letter in ("h", "H"):
        return (-2 * tolerance, 0) if letter == "h" else (0, 2 * tolerance)
    if letter in SHAFTS:
        if letter in UPPER:
            es = looked.cell(letter)
            return 2 * (es - tolerance), 2 * es
        ei = 0 if letter == "k" and grade not in K_GRADES else looked.cell(letter)
        return 2 * ei, 2 * (ei + tolerance)
    if letter.lower() in UPPER:
        ei = -looked.cell(letter.lower())
        return 2 * ei, 2 * (ei + tolerance)
    es = _upper_of_a_tight_hole(looked, letter, grade, tolerance=tolerance)
    return 2 * (es - tolerance), 2 * es


def _upper_of_a_tight_hole(looked: _Looked, letter: str, grade: int, *, tolerance: int) -> int:
    """ES of K to U [um]: the exception if one is printed, else -ei of the small letter, plus delta where it applies."""
    printed = looked.exception()
    if printed is not None:
        return printed
    if looked.nominal <= DELTA_OVER and not (letter == "N" and grade > DELTA_TO_GRADE["N"]):
        return -looked.cell(letter.lower())
    if grade <= DELTA_TO_GRADE[letter]:
        if f"IT{grade - 1}" not in looked.tables.columns:
            raise ValueError(f"{looked.name} needs grade {grade - 1}, which is not in our tables")
        return -looked.cell(letter.lower()) + tolerance - looked.cell(f"IT{grade - 1}")
    if letter == "K" or (letter == "N" and looked.nominal <= N_COARSE_OVER):
        raise ValueError(f"ISO 286 does not make {looked.name} at {looked.nominal:g} mm")
    if letter == "N" and looked.nominal > DELTA_OVER:
        return 0
    return -looked.cell(letter.lower())


def _cells(row: Mapping[str, object], table: str, sources: Mapping[str, str]) -> Iterable[Cell]:
    """The cells of one row; every key that is no step and no evidence is a column."""
    over, up_to, source = _step(row, sources)
    marked = row.get("doubtful", [])
    doubtful = {str(column) for column in marked} if isinstance(marked, list) else {str(marked)}
    columns = [key for key in row if key not in ("over", "up_to", "evidence", "doubtful")]
    for column in columns:
        if not (_GRADE.fullmatch(column) if table == "grades" else column in UPPER + LOWER):
            raise ValueError(f"{table} have no column {column} ({over:g} to {up_to:g} mm)")
        yield Cell(column, over, up_to, _whole(row, column), source, column in doubtful)
    if unknown := doubtful - set(columns):
        raise ValueError(f"doubtful names {', '.join(sorted(unknown))}, which the row {over:g} to {up_to:g} mm lacks")


def _step(row: Mapping[str, object], sources: Mapping[str, str]) -> tuple[float, float, str]:
    """Step of sizes and source of a row."""
    over, up_to, name = _whole(row, "over"), _whole(row, "up_to"), str(row.get("evidence"))
    if not 0 <= over < up_to <= LARGEST:
        raise ValueError(f"the step {over} to {up_to} mm does not rise or leaves the tables")
    if name not in sources:
        raise ValueError(f"the row {over} to {up_to} mm has no evidence that the sources name")
    return float(over), float(up_to), sources[name]


def _whole(row: Mapping[str, object], key: str) -> int:
    value = row.get(key)
    if isinstance(value, bool) or not isinstance(value, int):
        raise ValueError(f"{key} is '{value}', not a whole number, in the row {dict(row)}")
    return value


def _cleaned(millimetres: float) -> float:
    """A difference of two decimals without the noise of binary fractions, so that 0 is 0."""
    return 0.0 if abs(millimetres) < _NOISE else millimetres


def _um(millimetres: float) -> str:
    return f"{round(abs(millimetres) * 1000.0, 1):g}"
