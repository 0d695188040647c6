"""The datums of the route: operations down the page, each surface under the holding that cut it, arrows from what it is held on.

Layout of our own. A surface that is held on later keeps a lane straight down to that operation; lanes are shared by
surfaces whose lanes do not overlap, so that lines cross bars only, at a gap, and never each other.
"""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.record import record
from setupcheck.report.pictures import TALLEST, WIDEST, Picture
from setupcheck.report.pictures.fitting import box, short, spans, wrapped
from setupcheck.report.pictures.routes import Node, Route, Row, ends, holding, route_of, transfers, way
from setupcheck.report.svg import THICK, line, picture, polygon, words
from setupcheck.report.wording import clean

LABEL, FIELD, EDGE = 37.5, 43.0, 178.0
"""Right edge of the labels, and both edges of the field of surfaces [mm of paper]. Source: our choice."""
FEWEST, MOST = 6, 7
"""Lanes side by side. Source: our choice; more than the larger number leaves no room for names."""
HEAVY = 0.8
"""Width of the lines of the way between teeth and bore [mm of paper]. Source: our choice."""
LINE = 3.7
"""Distance of two lines of small text [mm of paper]. Source: our choice."""
ROLES = {"and_centre": "plane 2", "outer": "outer", "inner": "inner"}
"""Words for what a datum rules, where the key of the job file is not one."""
ASIDE = 2.6
"""How far beside its lane an arrow leaves, where the lane goes on [mm of paper]. Source: our choice."""


@record(frozen=False)
class Band:
    """One row of the drawing: an operation, or what comes bought or as stock.

    at     the route's row, 0 for what comes;  slots  lane of each node made here;  more  surfaces without a box of their own
    lines  of role words over the bar;  top, bar, foot  where it stands [mm of paper]
    """

    at: int
    label: str
    under: str
    made: list[Node]
    slots: dict[Node, int]
    more: int = 0
    lines: int = 0
    top: float = 0.0
    bar: float = 0.0
    foot: float = 0.0


@record(frozen=False)
class Sheet:
    """Everything placed: bands, lanes, and the chain drawn heavily."""

    route: Route
    bands: list[Band]
    lanes: int
    chain: list[Node | int]
    marks: dict[Node, list[str]]

    def left(self, slot: int) -> float:
        return FIELD + slot * self.wide

    @property
    def wide(self) -> float:
        return (EDGE - FIELD) / self.lanes

    def lane(self, slot: int) -> float:
        """Where the line down from a box stands."""
        return self.left(slot) + min(4.0, self.wide / 2.0)

    def home(self, node: Node) -> Band | None:
        return next((b for b in self.bands if node in b.slots), None)

    def used(self, node: Node) -> list[Band]:
        """The bands held on a surface, from the top."""
        return [b for b in self.bands if b.at and node in self.route.rows[b.at].held]

    def heavy(self, one: Node | int, other: Node | int) -> bool:
        """Whether two things stand side by side in the chain."""
        pairs = list(zip(self.chain, self.chain[1:], strict=False))
        return (one, other) in pairs or (other, one) in pairs


def offered(found: Review) -> Iterator[Picture]:
    """The graph, where the job has a route."""
    if found.loaded.job.setups:
        yield Picture("datums", "which datum each surface hangs on, from operation to operation", lambda: _draw(found))


def _draw(found: Review) -> str:
    route = route_of(found)
    pair = ends(found, route)
    chain = way(route, *pair) if pair is not None else None
    sheet = Sheet(route, [], FEWEST, chain or [], {})
    _marks(sheet)
    sheet.bands = _bands(sheet)
    _lanes(sheet)
    title = "Datums: what each surface was held on"
    parts = [words((4.0, 6.5), title, size=4.0, bold=True)]
    y = 7.5
    for text in _summary(route, pair, chain):
        y += 4.4
        parts.append(words((4.0, y), text))
    left_out = _heights(sheet, y + 3.0)
    for band in sheet.bands:
        parts += _band(sheet, band)
    parts += _kept(sheet)
    y = sheet.bands[-1].foot if sheet.bands else y
    for text in _legend(sheet, left_out):
        y += 4.2
        parts.append(words((4.0, y), text))
    return picture(WIDEST, y + 2.0, title=title, parts=parts) + "\n"


# -- what goes where -------------------------------------------------------------------------------------------------


def _summary(route: Route, pair: tuple[Node, Node] | None, chain: list[Node | int] | None) -> list[str]:
    """How many transfers lie between the two surfaces, and which."""
    if pair is None:
        return []
    one, other = (_name(route, node) for node in pair)
    if chain is None:
        return [short(f"No chain of holdings joins {one} and {other}.", EDGE - 4.0)]
    steps = [
        _name(route, x) if isinstance(x, tuple) else f"op {route.rows[x].op}" if x >= 0 else "as bought" for x in chain
    ]
    count = len(transfers(route, chain))
    how = "both out of one holding" if not count else " - ".join(steps)
    return wrapped(f"{one} to {other}: {count} {'transfer' if count == 1 else 'transfers'}, {how}", EDGE - 4.0, 3)


def _name(route: Route, node: Node) -> str:
    """`hub@30`; without the operation where only one state of the surface exists; with its part where another has the name."""
    part, name, at = node
    states = {n for row in route.rows for n in row.made if n[:2] == (part, name)}
    twice = any(n[0] != part and n[1] == name for row in route.rows for n in row.made)
    shown = f"{clean(part)}.{clean(name)}" if twice else clean(name)
    return f"{shown}@{route.rows[at].op}" if len(states) > 1 and at else shown


def _marks(sheet: Sheet) -> None:
    """What stands under a name in its box: the requirements that speak of it."""
    for node, numbers in sheet.route.asked.items():
        sheet.marks.setdefault(node, []).append(f"asked {spans(numbers)}")
    for node, numbers in sheet.route.about.items():
        sheet.marks.setdefault(node, []).append(f"axis of {spans(numbers)}")


def _bands(sheet: Sheet) -> list[Band]:
    """The operations, and before the first that is held on it, what comes bought or as stock."""
    route, waiting = sheet.route, dict(sheet.route.came)
    groups: dict[tuple[str, str], list[Node]] = {}
    for node, how in waiting.items():
        groups.setdefault((node[0], how), []).append(node)
    due: dict[int, list[tuple[str, str]]] = {}
    for key, nodes in groups.items():
        uses = [at for at, row in enumerate(route.rows) if any(n in row.held for n in nodes)]
        due.setdefault(min(uses, default=1), []).append(key)
    bands = []
    for at, row in enumerate(route.rows):
        for part, how in due.get(at, []):
            bands.append(Band(0, clean(part), how, groups[part, how], {}))
        if at:
            under = f"keeps op {row.keeps}" if row.keeps is not None else clean(row.what)
            bands.append(Band(at, f"op {row.op}", under, list(row.made), {}))
    return bands


def _lanes(sheet: Sheet) -> None:
    """A lane for every box; leaves are gathered where a row would have more than fit side by side."""
    ending: dict[Node, int] = {}
    for i, band in enumerate(sheet.bands):
        for node in band.made:
            uses = [j for j, b in enumerate(sheet.bands) if b.at and node in sheet.route.rows[b.at].held]
            ending[node] = max(uses, default=i)
    passing = [
        sum(1 for j, b in enumerate(sheet.bands) for n in b.made if j < i < ending[n]) for i in range(len(sheet.bands))
    ]
    for i, band in enumerate(sheet.bands):
        if passing[i] + len(band.made) > MOST:
            leaves = [n for n in band.made if ending[n] == i and n not in sheet.marks and n not in sheet.chain]
            over = passing[i] + len(band.made) - MOST + (1 if band.at else 0)
            gone = leaves[max(len(leaves) - over, 0) :]
            band.made = [n for n in band.made if n not in gone]
            band.more = len(gone)
    needed = [passing[i] + len(b.made) + (1 if b.more and b.at else 0) for i, b in enumerate(sheet.bands)]
    sheet.lanes = max([FEWEST, *needed])
    taken: dict[int, Node] = {}
    before: dict[tuple[str, str], int] = {}
    for i, band in enumerate(sheet.bands):
        taken = {slot: node for slot, node in taken.items() if ending[node] > i}
        for node in sorted(band.made, key=lambda n: n[:2] not in before):
            free = [s for s in range(sheet.lanes) if s not in taken and s not in band.slots.values()]
            slot = before.get(node[:2], -1)
            band.slots[node] = slot if slot in free else free[0]
            before[node[:2]] = band.slots[node]
        taken |= {slot: node for node, slot in band.slots.items() if ending[node] > i}


def _heights(sheet: Sheet, top: float) -> int:
    """Where each band stands; how many at the end find no room on the sheet."""
    y, room_for_words = top, TALLEST - 16.0
    for close in (False, True):
        y = top
        for band in sheet.bands:
            y = _one_height(sheet, band, y, close=close)
        if y <= room_for_words:
            return 0
    fits = [b for b in sheet.bands if b.foot <= room_for_words]
    left_out = sum(1 for b in sheet.bands[len(fits) :] if b.at)
    sheet.bands = fits
    return left_out


def _one_height(sheet: Sheet, band: Band, y: float, *, close: bool) -> float:
    row = sheet.route.rows[band.at]
    if close:
        sheet.marks.clear()
    roles = max((len(r) for r in row.held.values()), default=0) if band.at else 0
    band.lines = 0 if close else roles
    band.top = y
    over = (max(LINE * band.lines + 2.2, 3.4) if roles else 1.0) if band.at else 0.0
    band.bar = y + over
    box_high = max((_box_height(sheet, n) for n in band.slots), default=0.0)
    under = (2.6 if band.at and band.slots else 0.0) + box_high
    band.foot = max(band.bar + under, band.bar + 6.4 if band.at else y + 8.6) + (1.0 if close else 2.6)
    return band.foot


def _mark_lines(sheet: Sheet, node: Node) -> list[str]:
    return [text for mark in sheet.marks.get(node, []) for text in wrapped(mark, sheet.wide - 3.4, 4)]


def _box_height(sheet: Sheet, node: Node) -> float:
    return 4.6 + LINE * len(_mark_lines(sheet, node))


# -- drawing ---------------------------------------------------------------------------------------------------------


def _band(sheet: Sheet, band: Band) -> list[str]:
    row = sheet.route.rows[band.at]
    parts = _label(sheet, band)
    if band.at:
        parts += _bar(sheet, band, row)
        for node in row.held:
            parts += _held(sheet, band, node, row)
    for node in band.slots:
        parts += _node(sheet, band, node)
    if band.more and band.at:
        free = [s for s in range(sheet.lanes) if s not in band.slots.values() and s not in _passing(sheet, band)]
        at = sheet.left(free[-1]) if free else EDGE - 12.0
        parts.append(words((at, band.bar + 6.0), short(f"+{band.more} more", sheet.wide)))
    return parts


def _label(sheet: Sheet, band: Band) -> list[str]:
    y = band.bar - 3.4 if band.at else band.top
    heavy = HEAVY if band.at and band.at in sheet.chain else 0.2
    frame = box(6.0, y, LABEL - 6.0, 8.4, stroke=heavy)
    under = f"{band.under}, +{band.more} more" if band.more and not band.at else band.under
    if not band.at:
        frame = frame.replace("/>", ' stroke-dasharray="1.2 0.9"/>')
    return [
        frame,
        words((7.4, y + 3.6), short(band.label, LABEL - 8.8), bold=True),
        words((7.4, y + 7.3), short(under, LABEL - 8.8)),
    ]


def _passing(sheet: Sheet, band: Band) -> list[int]:
    """Lanes that go on under a band's bar."""
    here = sheet.bands.index(band)
    found = []
    for i, other in enumerate(sheet.bands[:here]):
        for node, slot in other.slots.items():
            uses = [sheet.bands.index(b) for b in sheet.used(node)]
            if i < here < max(uses, default=i):
                found.append(slot)
    return found


def _arrow_at(sheet: Sheet, band: Band, node: Node) -> float | None:
    """Where the arrow of a datum meets the bar: on its lane, or beside it where the lane goes on."""
    home = sheet.home(node)
    if home is None:
        return None
    slot = home.slots[node]
    return sheet.lane(slot) + (ASIDE if slot in _passing(sheet, band) else 0.0)


def _bar(sheet: Sheet, band: Band, row: Row) -> list[str]:
    """The holding as a bar, open where a lane passes through it; double where it is the holding of an earlier operation."""
    held = [x for node in row.held if (x := _arrow_at(sheet, band, node)) is not None]
    made = [sheet.lane(slot) for slot in band.slots.values()]
    right = max([*held, *made, FIELD]) + 1.5
    heavy = holding(sheet.route, band.at) in sheet.chain
    gaps = sorted(sheet.lane(slot) for slot in _passing(sheet, band))
    cuts = [LABEL, *(x for gap in gaps if gap < right for x in (gap - 0.9, gap + 0.9)), right]
    levels = (band.bar - 0.5, band.bar + 0.5) if row.keeps is not None else (band.bar,)
    width = HEAVY if heavy else 0.4
    return [
        line((a, y), (b, y), width=width if len(levels) == 1 else 0.35)
        for y in levels
        for a, b in zip(cuts[::2], cuts[1::2], strict=True)
        if b > a
    ]


def _held(sheet: Sheet, band: Band, node: Node, row: Row) -> list[str]:
    """The arrow from a datum down to the bar, and what it rules there."""
    home, x = sheet.home(node), _arrow_at(sheet, band, node)
    if home is None or x is None:
        return []
    lane = sheet.lane(home.slots[node])
    heavy = sheet.heavy(node, band.at)
    above = [b for b in sheet.used(node) if b.top < band.top]
    lowest = max(band.top + 0.2, band.bar - LINE * max(band.lines, 1) - 1.6)
    start = above[-1].bar if above else _bottom(sheet, home, node)
    if above:  # the lane went past that bar
        start = max(b.bar for b in above)
    turn = max(lowest, start + 0.6) if x > lane else start
    width = HEAVY if heavy else THICK
    parts = [line((lane, start), (lane, band.bar if x > lane else band.bar - 1.8), width=width if x == lane else THICK)]
    if x > lane:
        parts += [line((lane, turn), (x, turn), width=width), line((x, turn), (x, band.bar - 1.8), width=width)]
        if heavy:
            parts.append(line((lane, start), (lane, turn), width=width))
    if heavy and above:
        parts.append(line((lane, _bottom(sheet, home, node)), (lane, start), width=width))
    parts.append(polygon([(x, band.bar), (x - 0.9, band.bar - 2.2), (x + 0.9, band.bar - 2.2)]))
    slot = home.slots[node]
    for i, role in enumerate(row.held[node][: band.lines]):
        y = band.bar - 1.4 - LINE * (len(row.held[node]) - 1 - i)
        text = short(ROLES.get(role, role), min(sheet.lane(slot) + sheet.wide, WIDEST - 0.5) - 0.8 - x - 1.4)
        parts.append(words((x + 1.4, y), text))
    return parts


def _bottom(sheet: Sheet, home: Band, node: Node) -> float:
    return _top_of_box(home) + _box_height(sheet, node)


def _top_of_box(band: Band) -> float:
    return band.bar + 2.6 if band.at else band.top


def _node(sheet: Sheet, band: Band, node: Node) -> list[str]:
    """A surface: its name, the requirements that speak of it, and the short line from the holding that cut it."""
    slot = band.slots[node]
    x, y, high = sheet.left(slot), _top_of_box(band), _box_height(sheet, node)
    in_chain = node in sheet.chain
    lane = sheet.lane(slot)
    parts = []
    if band.at:
        heavy = sheet.heavy(node, holding(sheet.route, band.at))
        parts.append(line((lane, band.bar), (lane, y), width=HEAVY if heavy else THICK))
    frame = box(x, y, sheet.wide - 1.6, high, stroke=HEAVY if in_chain else 0.2)
    if not band.at:
        frame = frame.replace("/>", ' stroke-dasharray="1.2 0.9"/>')
    parts.append(frame)
    name = short(_name(sheet.route, node), sheet.wide - 3.4)
    parts.append(words((x + 0.9, y + 3.4), name, bold=in_chain))
    for i, text in enumerate(_mark_lines(sheet, node)):
        parts.append(words((x + 0.9, y + 3.4 + LINE * (i + 1)), text))
    return parts


def _kept(sheet: Sheet) -> list[str]:
    """A double line from the operation that keeps a holding up to the one that made it."""
    parts = []
    for band in sheet.bands:
        at = holding(sheet.route, band.at)
        first = next((b for b in sheet.bands if b.at == at), None)
        if not band.at or at == band.at or first is None:
            continue
        for x in (2.6, 3.6):
            a, b = (x, first.bar + 0.8), (x, band.bar + 0.8)
            parts.append(line(a, b))
        for y in (first.bar + 0.8, band.bar + 0.8):
            parts.append(line((2.6, y), (6.0, y)))
    return parts


def _legend(sheet: Sheet, left_out: int) -> list[str]:
    found = [f"{left_out} more operations find no room here."] if left_out else []
    found.append("Arrow into a bar: held on. Box under a bar: cut in that holding. Dashed: bought or stock.")
    more = ["asked, axis of: requirements by number"] if sheet.marks else []
    more += ["double: holding kept"] if any(row.keeps is not None for row in sheet.route.rows) else []
    more += ["heavy: the way above"] if sheet.chain else []
    if more:
        found.append("; ".join(more) + ".")
    return found
