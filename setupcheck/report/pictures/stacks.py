"""Each requirement on its own limit's scale: the causes side by side as a bar, and each of them as a sentence.

What the bar shows is what the review prints: worst = base + the sum of the pushes, towards the end that is judged, and both
ways from the base where there are two limits. A cause that takes away is drawn under the bar, backwards.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Scope
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record
from setupcheck.report.pictures import WIDEST, Picture
from setupcheck.report.pictures.fitting import SIZE, box, outlined, short, wrapped
from setupcheck.report.pictures.stack_bars import Bar, Piece, bar_of, laid, lane_ends, share_of
from setupcheck.report.svg import THICK, THIN, line, picture, polygon, room, words
from setupcheck.report.text import limits_in_words
from setupcheck.report.wording import finer, in_unit, title_of

NO_STACK = ("torque", "contact-length", "contact-area")
"""Requirements that are offered only where they have a value and a limit."""
LEFT, RIGHT = 6.0, 174.0
"""Where the scale begins and ends [mm of paper]. Source: our choice."""
BAR_TOP, BAR = 20.5, 6.5
"""Upper edge and height of the bar [mm of paper]. Source: our choice."""
GREYS = ("#ffffff", "#bbbbbb", "#e4e4e4", "#999999", "#d0d0d0", "#f2f2f2", "#adadad", "#dadada")
"""Fills of the pieces in their order; neighbours differ in black and white too. Source: our choice."""
LIMIT_LINE = 0.9
"""Width of the line of a limit [mm of paper], which no piece may be taken for. Source: our choice."""
ROW = 4.2
"""Distance of two lines of text [mm of paper]. Source: our choice."""


def offered(found: Review) -> Iterator[Picture]:
    """One drawing for each requirement, open ones too; torque and contact where they have a value."""
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if scope.key not in found.results and stack.require.what in NO_STACK:
            continue
        number = stack.index + 1
        title = f"{number}: {title_of(scope)}, its causes on the scale of its limit"
        yield Picture(f"stack-{number}", title, lambda scope=scope: _draw(found, scope))  # type: ignore[misc]


def _draw(found: Review, scope: Scope) -> str:
    result = found.results.get(scope.key)
    return _open(found, scope) if result is None else _closed(found, bar_of(found, scope, result))


# -- the sheet -------------------------------------------------------------------------------------------------------


@record
class _Scale:
    """From the unit of a figure to mm of paper."""

    low: float
    high: float

    def x(self, value: float) -> float:
        share = (value - self.low) / (self.high - self.low)
        return LEFT + min(max(share, 0.0), 1.0) * (RIGHT - LEFT)


def _scale(bar: Bar) -> _Scale:
    """From zero to the limit or past it; between two limits, and where the value is far from zero, from a little below."""
    c = bar.result.combined
    seen = [*bar.limits, bar.base, *lane_ends(bar)]
    seen += [c.worst.high, c.likely.high] if "up" in bar.ways else []
    seen += [c.worst.low, c.likely.low] if "down" in bar.ways else []
    low, high = min(seen), max(seen)
    if "down" not in bar.ways or (low >= 0.0 and low < 0.4 * high):
        low = min(low, 0.0)
    if high <= low:
        high = low + 1.0
    edge = 0.04 * (high - low)
    return _Scale(low if low == 0.0 else low - edge, high + edge)


def _closed(found: Review, bar: Bar) -> str:
    scale, result = _scale(bar), bar.result
    title = f"{result.stack.index + 1}  {title_of(bar.scope)}"
    parts = [words((LEFT, 5.8), short(title, RIGHT - LEFT, 4.0), size=4.0, bold=True)]
    parts += _judged(bar)
    parts += _bars(bar, scale)
    parts += _limits(bar, scale)  # over the pieces, where one of them passes it
    y = BAR_TOP + BAR + 2.0
    if any((p.up if w == "up" else p.down) < 0.0 for p in bar.pieces for w in bar.ways):
        y += 4.0
    more, y = _numbers(bar, scale, y)
    parts += more
    more, y = _spans(bar, scale, y, found.loaded.job.confidence)
    parts += more
    more, y = _sentences(bar, y + 2.0, inches=found.book.inches)
    parts += more
    return picture(WIDEST, y + 1.0, title=title, parts=parts) + "\n"


def _judged(bar: Bar) -> list[str]:
    """The worst case on its limit, as the review says it, and how far inside or outside that is."""
    margin = bar.result.margin
    text = f"worst case {limits_in_words(bar.result, bar.unit, bar.digits)}"
    if bar.result.stack.require.what.startswith("contact"):
        text = limits_in_words(bar.result, bar.unit, bar.digits)
    if margin is None:
        return [words((LEFT, 11.2), short(text, RIGHT - LEFT, 3.4), size=3.4)]
    said = f"inside by {show(margin, bar.unit, bar.digits)}" if margin >= 0.0 else _outside(bar, -margin)
    size = 3.4 if room(text, 3.4) + room(said, 3.4) + 4.0 <= RIGHT - LEFT else SIZE
    return [
        words((LEFT, 11.2), short(text, RIGHT - LEFT - room(said, size) - 3.0, size), size=size),
        words((RIGHT, 11.2), said, size=size, anchor="end", bold=margin < 0.0),
    ]


def _outside(bar: Bar, by: float) -> str:
    c, s = bar.result.combined, bar.result.stack
    short_of = s.low is not None and (s.high is None or s.low - c.worst.low >= c.worst.high - s.high)
    return f"{'short' if short_of else 'over'} by {show(by, bar.unit, bar.digits)}"


def _limits(bar: Bar, scale: _Scale) -> list[str]:
    """Heavy lines with their values; where one is passed, the way past it as an arrow over the bar."""
    s, c = bar.result.stack, bar.result.combined
    both = s.low is not None and s.high is not None
    parts = []
    taken: list[tuple[float, float]] = []
    for value, name in ((s.low, "at least"), (s.high, "at most")):
        if value is None:
            continue
        x = scale.x(value)
        parts.append(line((x, BAR_TOP - 3.5), (x, BAR_TOP + BAR + 1.5), width=LIMIT_LINE))
        text = f"{name if both or s.high is None else 'limit'} {show(value, bar.unit, bar.digits)}"
        start = _clear(x, room(text, SIZE), taken)
        parts.append(words((start, BAR_TOP - 4.2), text, bold=True))
        taken.append((start, start + room(text, SIZE)))
    text = "0" if bar.base == 0.0 else f"without errors {show(bar.base, bar.unit, bar.digits)}"
    if bar.pieces:
        alone = _clear(scale.x(bar.base), room(text, SIZE), ())
        parts += [words((alone, BAR_TOP - 4.2), text)] if _is_free(alone, alone + room(text, SIZE), taken) else []
    passed = [(s.high, c.worst.high)] if s.high is not None and c.worst.high > s.high else []
    passed += [(s.low, c.worst.low)] if s.low is not None and c.worst.low < s.low else []
    for limit, worst in passed:
        a, b = scale.x(limit), scale.x(worst)
        if abs(b - a) < 0.6:
            continue
        y, tip = BAR_TOP - 1.6, min(2.2, abs(b - a))
        back = b - tip if b > a else b + tip
        parts.append(line((a, y), (back, y), width=1.0))
        parts.append(polygon([(b, y), (back, y - 1.2), (back, y + 1.2)]))
    return parts


def _clear(x: float, wide: float, taken: Sequence[tuple[float, float]]) -> float:
    """Where a text about x begins: on the sheet, and right of what is taken."""
    start = min(max(x - wide / 2.0, 2.0), WIDEST - 2.0 - wide)
    for low, high in taken:
        if start < high + 2.0 and low < start + wide + 2.0:
            start = high + 2.0
            if start + wide > WIDEST - 2.0:
                start = low - 2.0 - wide
    return start


def _is_free(start: float, end: float, taken: Sequence[tuple[float, float]]) -> bool:
    return all(start >= high + 1.5 or end <= low - 1.5 for low, high in taken)


def _bars(bar: Bar, scale: _Scale) -> list[str]:
    pieces: list[str] = []
    parts: list[str] = []
    for piece, a, b, lane in laid(bar):
        x, wide = min(scale.x(a), scale.x(b)), abs(scale.x(b) - scale.x(a))
        y, high = (BAR_TOP, BAR) if not lane else (BAR_TOP + BAR + 1.0, 3.0)
        pieces.append(box(x, y, wide, high, fill=_fill(piece), stroke=0.0))
        if piece.measured:
            parts.append(line((x, y + high - 0.5), (x + wide, y + high - 0.5), width=1.0))
    parts = [outlined(pieces), *parts] if pieces else parts
    axis = BAR_TOP + BAR
    parts.append(line((LEFT, axis), (RIGHT, axis), width=THICK))
    zero = scale.x(bar.base)
    parts.append(line((zero, BAR_TOP - 1.5), (zero, axis + 1.5), width=THICK))
    if not bar.pieces:  # a value that no cause moves: a diamond on the scale
        x = scale.x(bar.base)
        y = BAR_TOP + BAR / 2.0
        parts.append(polygon([(x, y - 2.5), (x + 1.8, y), (x, y + 2.5), (x - 1.8, y)]))
    return parts


def _fill(piece: Piece) -> str:
    return GREYS[(piece.number - 1) % len(GREYS)]


def _numbers(bar: Bar, scale: _Scale, y: float) -> tuple[list[str], float]:
    """Each piece's number: in it where it is wide enough, else under the bar, led to its piece; and where that ends."""
    parts, narrow = [], []
    for piece, a, b, lane in laid(bar):
        x, wide = (scale.x(a) + scale.x(b)) / 2.0, abs(scale.x(b) - scale.x(a))
        text = str(piece.number)
        if wide > room(text, SIZE) + 1.6 and not lane and _off_limits(bar, scale, x, room(text, SIZE)):
            parts.append(words((x, BAR_TOP + BAR / 2.0 + 1.05), text, anchor="middle"))
        else:
            narrow.append((x, text, BAR_TOP + BAR + (4.0 if lane else 0.0)))
    if not narrow:
        return parts, y
    narrow.sort()
    places = _apart([x for x, _, _ in narrow], 4.6)
    for place, (x, text, foot) in zip(places, narrow, strict=True):
        parts.append(line((x, foot), (place, y + 2.2)))
        parts.append(words((place, y + 5.0), text, anchor="middle"))
    return parts, y + 5.5


def _off_limits(bar: Bar, scale: _Scale, x: float, wide: float) -> bool:
    """No limit line goes through a number in the bar."""
    marks = [*bar.limits, bar.base]
    return all(abs(scale.x(value) - x) > wide / 2.0 + 0.6 for value in marks)


def _apart(wanted: Sequence[float], gap: float) -> list[float]:
    """Places in the order wanted, at least a gap apart, all on the sheet."""
    places: list[float] = []
    for x in wanted:
        places.append(max(x, places[-1] + gap) if places else max(x, LEFT))
    over = places[-1] - RIGHT
    for i in range(len(places) - 1, -1, -1):
        most = RIGHT if i == len(places) - 1 else places[i + 1] - gap
        places[i] = min(places[i], most) if over > 0.0 else places[i]
    return places


def _spans(bar: Bar, scale: _Scale, y: float, confidence: float) -> tuple[list[str], float]:
    """Worst case, drawn values and rss as lines from the base (or from end to end), each with its words."""
    if not bar.pieces:
        return [], y
    parts: list[str] = []
    c, per_cent = bar.result.combined, f"{confidence * 100:g}"
    rows = (("worst case", c.worst, 0.5), (f"{per_cent} in 100 draws", c.likely, THICK), ("rss", c.rss, THIN))
    both = len(bar.ways) == 2
    for name, ends, width in rows:
        low = ends.low if "down" in bar.ways else bar.base
        high = ends.high if "up" in bar.ways else bar.base
        told = (
            f"{in_unit(low, bar.unit, bar.digits)} to {show(high, bar.unit, bar.digits)}"
            if both
            else show(high if "up" in bar.ways else low, bar.unit, bar.digits)
        )
        more, y = _span(scale.x(low), scale.x(high), y + ROW, f"{name} {told}", width, bar.ways)
        parts += more
    return parts, y


def _span(a: float, b: float, y: float, text: str, width: float, ways: Sequence[str]) -> tuple[list[str], float]:
    """A line with its ends marked, and its words where they find room: right of it, left of it, in a gap, else above it.

    y  base line of its words [mm of paper]; what comes back is where the next one may begin
    """
    wide, level = room(text, SIZE), y - 1.0
    ends = (a, b) if len(ways) == 2 else (_tip(a, b, ways),)
    if b + 2.0 + wide <= WIDEST - 1.0:
        at, anchor, drawn = b + 2.0, "start", [(a, b)]
    elif a - 2.0 - wide >= 1.0:
        at, anchor, drawn = a - 2.0, "end", [(a, b)]
    elif b - a > wide + 12.0:
        at, anchor = (a + b) / 2.0, "middle"
        drawn = [(a, at - wide / 2.0 - 1.0), (at + wide / 2.0 + 1.0, b)]
    else:
        at, anchor, drawn = min(max((a + b) / 2.0, wide / 2.0 + 1.0), WIDEST - 1.0 - wide / 2.0), "middle", [(a, b)]
        level = y + 2.4
    parts = [words((at, y), text, anchor=anchor)]
    parts += [line((one, level), (other, level), width=width) for one, other in drawn]
    parts += [line((x, level - 1.2), (x, level + 1.2), width=width) for x in ends]
    return parts, max(y, level + 1.0)


def _tip(a: float, b: float, ways: Sequence[str]) -> float:
    return b if "up" in ways else a


def _sentences(bar: Bar, y: float, *, inches: bool) -> tuple[list[str], float]:
    """What each piece is, how much, and how much of the limit; with the fill and number of its piece."""
    swatches: list[str] = []
    parts: list[str] = []
    unit, digits = finer(bar.unit, inches=inches)
    of, scale = share_of(bar)
    for piece in bar.pieces:
        size = piece.size
        if len(bar.ways) == 2 and abs(piece.up - piece.down) > 1e-9 * max(abs(piece.up), abs(piece.down)):
            told = f"{show(piece.up, unit, digits)} up, {show(piece.down, unit, digits)} down"
        else:
            told = show(abs(size), unit, digits) + (" both ways" if len(bar.ways) == 2 else "")
        told += piece.known
        if size < 0.0:
            told += ", which it takes away"
        elif scale > 0.0:
            told += f", {size / scale * 100.0:.0f} % of {of}"
        lines = _sentence(piece.said, told)
        y += ROW
        swatches.append(box(LEFT, y - 2.7, 4.0, 3.2, fill=_fill(piece), stroke=0.0))
        if piece.measured:
            parts.append(line((LEFT, y), (LEFT + 4.0, y), width=1.0))
        parts.append(words((LEFT + 9.0, y), str(piece.number), anchor="end"))
        for i, text in enumerate(lines):
            y += ROW - 0.5 if i else 0.0
            parts.append(words((LEFT + 11.0, y), text))
    if not bar.pieces:
        y += ROW
        said = "nothing adds, both share all their errors" if not bar.limits or not bar.base else "one value, no causes"
        parts.append(words((LEFT, y), said))
    return [outlined(swatches), *parts] if swatches else parts, y + 1.5


def _sentence(said: str, told: str) -> list[str]:
    """Cause and size in at most two lines; a long cause is cut, its size never."""
    wide = WIDEST - LEFT - 13.0
    whole = f"{said}: {told}"
    if room(whole, SIZE) <= wide:
        return [whole]
    if room(told, SIZE) + 12.0 > wide:
        return [short(said, wide), short(told, wide)]
    lines = wrapped(whole, wide, 2)
    return lines if lines[-1].endswith(told) else [short(said, wide), told]


def _open(found: Review, scope: Scope) -> str:
    """A requirement that cannot be told yet: what is missing, large."""
    title = f"{stack_of(scope).index + 1}  {title_of(scope)}"
    answer = found.book.get("stack.combined", scope)
    missing, because = (answer.missing, answer.because) if isinstance(answer, Open) else ((), "")
    parts = [
        words((LEFT, 5.8), short(title, RIGHT - LEFT, 4.0), size=4.0, bold=True),
        words((LEFT, 17.0), "Cannot tell: a number is missing", size=6.0, bold=True),
    ]
    y = 19.0
    if because:
        for text in wrapped(because, RIGHT - LEFT, 3, 4.0):
            y += 6.0
            parts.append(words((LEFT, y), text, size=4.0))
    for path in missing[:5]:
        y += 6.5
        parts.append(words((LEFT, y), short(f"fill {path}", RIGHT - LEFT, 4.5), size=4.5))
    if len(missing) > 5:
        y += 6.0
        parts.append(words((LEFT, y), f"and {len(missing) - 5} more", size=4.0))
    return picture(WIDEST, y + 5.0, title=title, parts=parts) + "\n"
