"""The index table that goes to the machine: text of 80 columns and CSV. Exact fractions are rounded once, when written."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from fractions import Fraction

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.notation import show
from setupcheck.notation.shares import fixed_of, sexagesimal
from setupcheck.quantities.book import Book, Known, Open, Scope
from setupcheck.quantities.index_lines import (
    Setting,
    SineLine,
    coordinate,
    direction,
    fitting_steps,
    linear_step,
    sine_line,
    total_moved,
)
from setupcheck.quantities.index_table import IndexTable, table_step
from setupcheck.quantities.inserts import decimals
from setupcheck.record import record
from setupcheck.report.wording import clean, in_unit, wrap

RULED = 10
"""Lines between two rules across the table, so that the eye keeps its line. Source: common practice."""
BOX = "[ ]"
DMS = "degrees,minutes,seconds"


@record
class Column:
    """One column: its head on paper, its name in the CSV (none: paper only), its width (0: CSV only), the cell of a line."""

    head: str
    name: str
    width: int
    cell: Callable[[Setting], str]


def tables_of(loaded: LoadedJob, book: Book, op: int | None) -> list[tuple[Scope, IndexTable]]:
    """The tables of a job, or of one of its operations.

    Raises: SetupcheckError that says which operations divide, or what to fill.
    """
    file = loaded.file
    dividing = [s for s in book.instances("setup") if book.get("divide.table", s) is not None]
    if not dividing:
        raise SetupcheckError(
            f"{file}: no setup divides a circle. Write at the setup that cuts the teeth or holes how it is done, as in "
            "divide: {by: hole-circle, circle: 18}"
        )
    asked = [s for s in dividing if op is None or s.op == op]
    if not asked:
        known = op in [s.op for s in book.instances("setup")]
        what = "does not divide a circle of two places or more by a divide entry" if known else "is not in this job"
        raise SetupcheckError(f"{file}: op {op} {what}. Write --op {' or '.join(str(s.op) for s in dividing)}")
    return [(scope, _table(file, book, scope)) for scope in asked]


def _table(file: str, book: Book, scope: Scope) -> IndexTable:
    answer = book.get("divide.table", scope)
    if isinstance(answer, Open):
        circles = book.get("divide.circles", scope)
        fits = f"; circles that close: {circles.value}" if isinstance(circles, Known) else ""
        why = answer.because or f"fill {', '.join(answer.missing)}"
        raise SetupcheckError(f"{file}: no index table of op {scope.op}: {why}{fits}")
    assert isinstance(answer, Known)
    assert isinstance(answer.value, IndexTable)
    return answer.value


def as_index_table(loaded: LoadedJob, book: Book, op: int | None = None) -> str:
    """Every index table of the job as text, or that of one operation."""
    job = loaded.job
    lines = [*wrap(f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title))]
    for scope, table in tables_of(loaded, book, op):
        lines += ["", *_head(book, scope, table), "", *_body(table, inches=book.inches)]
        lines += [*wrap(_closing(book, scope, table), rest="  ")]
    return "\n".join(lines) + "\n"


def as_csv(loaded: LoadedJob, book: Book, op: int | None = None) -> str:
    """The index table of one operation as CSV: a head, then numbers alone, one line a place, the start again at the end.

    Raises: SetupcheckError where the job divides in several operations and none is named.
    """
    found = tables_of(loaded, book, op)
    if len(found) > 1:
        ops = [str(scope.op) for scope, _ in found]
        raise SetupcheckError(
            f"{loaded.file}: op {' and '.join(ops)} divide, and a CSV holds one table. Write --op {ops[0]}"
        )
    ((_, table),) = found
    columns = [c for c in _columns(table, inches=book.inches) if c.name]
    rows = [",".join(cell for c in columns for cell in c.cell(line).split()) for line in table.lines]
    return (
        "\n".join([",".join(["line", *(c.name for c in columns)]), *(f"{i},{r}" for i, r in enumerate(rows, 1))]) + "\n"
    )


@record
class OnPaper:
    """An index table as it goes on the sheet: title, what to know, heads, the cells of every line, and the closing line."""

    title: str
    notes: tuple[str, ...]
    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    closing: str


def on_paper(book: Book, scope: Scope, table: IndexTable) -> OnPaper:
    """The same table without a width."""
    columns = [c for c in _columns(table, inches=book.inches) if c.width]
    return OnPaper(
        clean(_title(scope, table)),
        tuple(clean(note) for note in _notes(book, scope, table)),
        tuple(c.head for c in columns),
        tuple(tuple(c.cell(line) for c in columns) for line in table.lines),
        _closing(book, scope, table),
    )


def _title(scope: Scope, table: IndexTable) -> str:
    head = f", head {table.worm_ratio}:1" if table.worm_ratio else ""
    circle = f", circle of {table.circle} holes" if table.circle else ""
    return f"INDEX TABLE, op {scope.op}: {table.count} {table.what} of {table.ref} by {table.by}{head}{circle}"


def _notes(book: Book, scope: Scope, table: IndexTable) -> Iterator[str]:
    yield from (*_steps(book, scope, table), *_hands(table), _legend(table))


def _head(book: Book, scope: Scope, table: IndexTable) -> Iterator[str]:
    yield from wrap(_title(scope, table), rest="  ")
    for said in _notes(book, scope, table):
        yield from wrap(said, first="  - ", rest="    ")


def _steps(book: Book, scope: Scope, table: IndexTable) -> Iterator[str]:
    fits = fitting_steps(table)
    arms = next((holes for circle, _, holes in fits if circle == table.circle and holes), None)
    between = f"; between the sector arms {arms} spaces, {arms + 1} holes" if arms and table.order == "in-turn" else ""
    yield f"from place to place: {table_step(table).partition(' (')[0]}{between}"
    owner = "on this head's plates" if table.own else "from 15 to 66 holes"
    if fits and not any(holes for _, _, holes in fits):
        yield f"every circle {owner} fits: the pin comes back into its hole, no sector arms are needed"
    elif fits:
        told = ", ".join(f"{c}: {_turns(whole) * bool(whole)}{holes}" for c, whole, holes in fits)
        yield f"circles {owner} that fit, and the holes of a step: {told}"
    other = book.get("divide.other_ways", scope)
    if isinstance(other, Known):
        yield str(other.value)
    off = book.get("divide.table_off", scope)
    if isinstance(off, Known) and isinstance(off.value, float):
        arc = off.value * table.radius
        yield (
            f"rounding leaves up to {show(off.value, 'arcsec', 2)} at a place, "
            f"{show(arc, 'thou', 2) if book.inches else show(arc, 'um', 1)} along its circle; counted from the start, so "
            "nothing adds up"
        )


def _turns(whole: int) -> str:
    return f"{whole} turn{'' if whole == 1 else 's'} "


def _hands(table: IndexTable) -> Iterator[str]:
    seen = f"numbers run counter-clockwise seen from the {table.away} end, which points away from the spindle or table"
    if table.kind == "x-y":
        yield f"{seen}; place 1 is the first cut{_start(table)}"
        return
    yield f"place 1 is the first cut{_start(table)}; {seen}: from cut to cut the work turns clockwise seen from there"
    turned = "turn the crank" if table.worm_ratio else "come up to each setting"
    yield (
        f"{turned} one way only, the way that does this; gone too far, or going back: turn back past the mark and past the "
        "backlash, then come up to it from the usual side"
    )
    if table.order == "spread":
        yield (
            "cut in spread order: the moves of the table always go on forward, past the start where need be; the short way "
            "back is as good if the last bit of it is forward"
        )
    yield "cutter stopped and clear of the work before you index by hand; unlock the spindle to turn it, lock it before the cut"


def _start(table: IndexTable) -> str:
    return f", {show(table.start, 'deg', 4)} from the part's mark seen the same way" if abs(table.start) > 1e-12 else ""


def _legend(table: IndexTable) -> str:
    if table.kind == "x-y":
        return (
            "X along the part's mark, Y square to it, both from the axis, seen from that end; the last two columns are what "
            "rounding leaves, outward and counter-clockwise positive"
        )
    kinds = {
        "holes": "turns and holes are the move to the place, `at` is the hole counted from the start",
        "positions": "step is the move to the place in positions of the device, `at` is its position counted from the start",
        "sine-bar": "angle and blocks count from the quarter; below zero they stand before it, the blocks under the other end",
        "angles": "turns and dial are what the crank has made since the start"
        if table.worm_ratio
        else "angles count from the start",
    }
    left = (
        "off is set less exact"
        if table.per_turn or table.kind == "sine-bar"
        else "no step of the device is stated, so nothing is rounded"
    )
    return f"{kinds[table.kind]}; {left}"


def _body(table: IndexTable, *, inches: bool) -> Iterator[str]:
    columns = [c for c in _columns(table, inches=inches) if c.width]
    columns.append(Column("done", "", 6, lambda line: BOX))
    head = "".join(f"{c.head:>{c.width}}" for c in columns)
    yield head
    yield "-" * len(head)
    for number, line in enumerate(table.lines, 1):
        yield "".join(f"{c.cell(line):>{c.width}}" for c in columns)
        if number % RULED == 0 or number >= len(table.lines) - 1:
            yield "-" * len(head)


def _closing(book: Book, scope: Scope, table: IndexTable) -> str:
    """The last line in words, from the moves added up."""
    gap = book.get("divide.table_open", scope)
    missing = float(gap.value) if isinstance(gap, Known) else 0.0  # type: ignore[arg-type]
    if missing:
        return (
            f"The last line is place 1 again, but the device stands {show(missing, 'arcsec', 2)} away from its start."
        )
    total, turns = total_moved(table)
    work = f"{turns} turn{'s' if turns != 1 else ''} of the work"
    if table.kind == "holes" and table.circle:
        said = f"{total} holes = {total // table.circle} turns of the crank = {work}"
    elif table.per_turn:
        said = f"{total} steps = {work}"
    else:
        said = f"{table.count} times {Fraction(360, table.count)} deg = 360 deg" if table.order == "in-turn" else work
    return f"The last line is place 1 again. All moves together: {said}, so the table closes."


# -- columns ---------------------------------------------------------------------------------------------------------


def _columns(table: IndexTable, *, inches: bool) -> list[Column]:
    place = Column("place", "place", 5, lambda line: str(line.place))
    if table.kind == "x-y":
        return [place, *_coordinates(table, inches=inches)]
    if table.kind == "sine-bar":
        return [place, *_sine_bar(table, inches=inches)]
    return [place, *_moves(table), *_angles(lambda line: line.angle), _off(table)]


def _moves(table: IndexTable) -> Sequence[Column]:
    if table.kind == "positions":
        whole = int(table.per_turn or 1)
        return (
            Column("step", "step", 7, lambda line: str(line.moved)),
            Column("at", "at_position", 7, lambda line: str(line.steps % whole)),
        )
    if table.kind == "holes":
        circle = table.circle or 1
        return (
            Column("turns", "turns", 7, lambda line: str(line.moved // circle)),
            Column("holes", "holes", 7, lambda line: str(line.moved % circle)),
            Column("at", "at_hole", 6, lambda line: str(line.steps % circle)),
        )
    if table.worm_ratio:
        ratio = table.worm_ratio
        return (
            Column("turns", "crank_turns", 7, lambda line: str(line.angle * ratio // 1)),
            Column(
                "dial",
                "dial_degrees,dial_minutes,dial_seconds",
                12,
                lambda line: " ".join(sexagesimal(line.angle * ratio % 1 / ratio)),
            ),
        )
    return ()


def _angles(angle: Callable[[Setting], Fraction]) -> Sequence[Column]:
    """One angle in all three spellings, each rounded from the exact fraction."""
    return (
        Column("deg min sec", DMS, 14, lambda line: " ".join(sexagesimal(angle(line)))),
        Column("gon", "gon", 11, lambda line: fixed_of(angle(line), 400, 5)),
        Column("deg", "decimal_degrees", 12, lambda line: fixed_of(angle(line), 360, 6)),
    )


def _off(table: IndexTable) -> Column:
    unknown = table.per_turn is None
    return Column(
        'off/"', "" if unknown else "off_arcsec", 8, lambda line: "-" if unknown else fixed_of(line.off, 1_296_000, 2)
    )


def _coordinates(table: IndexTable, *, inches: bool) -> Sequence[Column]:
    unit, fine, more = ("in", "thou", 2) if inches else ("mm", "um", 1)
    digits = decimals(linear_step(table, inches=inches) / (25.4 if inches else 1.0))

    def part(name: str, shown: str, places: int) -> Callable[[Setting], str]:
        return lambda line: in_unit(getattr(coordinate(table, line, inches=inches), name), shown, places)

    return (
        Column(f"X/{unit}", f"x_{unit}", 11, part("x", unit, digits)),
        Column(f"Y/{unit}", f"y_{unit}", 11, part("y", unit, digits)),
        Column(f"radius/{unit}", f"radius_{unit}", 11, part("radius", unit, digits)),
        Column("deg min sec", DMS, 14, lambda line: " ".join(sexagesimal(direction(table, line)))),
        Column(f"out/{fine}", f"outward_{fine}", 9, part("radial", fine, more)),
        Column(f"on/{fine}", f"along_{fine}", 9, part("tangential", fine, more)),
    )


def _sine_bar(table: IndexTable, *, inches: bool) -> Sequence[Column]:
    unit, digits = ("in", 4) if inches else ("mm", 3)

    def at(line: Setting) -> SineLine:
        return sine_line(table, line, inches=inches)

    def away(line: Setting) -> str:
        return ("-" if at(line).away < 0 else "") + " ".join(sexagesimal(abs(at(line).away)))

    return (
        Column("quarter", "quarter_degrees", 9, lambda line: str(90 * at(line).quarter)),
        Column("from it", "", 14, away),
        Column("", "from_quarter_degrees", 0, lambda line: fixed_of(at(line).away, 360, 6)),
        Column(f"blocks/{unit}", f"blocks_{unit}", 12, lambda line: in_unit(at(line).blocks, unit, digits)),
        Column('off/"', "off_arcsec", 8, lambda line: in_unit(at(line).off, "arcsec", 2)),
        Column("deg min sec", DMS, 14, lambda line: " ".join(sexagesimal(line.angle))),
    )
