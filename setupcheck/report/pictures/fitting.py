"""Text that has to fit into a given width of paper: cleaned, cut short with an ellipsis, or broken into lines. mm of paper."""

from __future__ import annotations

from collections.abc import Iterable

from setupcheck.report.svg import CHARACTER, tag
from setupcheck.report.wording import clean

SIZE = 3.0
"""Height of the letters of a label [mm of paper]. Source: our choice, readable at arm's length."""


def characters(width: float, size: float = SIZE) -> int:
    """How many characters surely fit into a width [mm of paper], at least one.

    >>> characters(18.6), characters(0.5)
    (10, 1)
    """
    return max(1, int(width / (CHARACTER * size) + 1e-9))


def short(text: str, width: float, size: float = SIZE) -> str:
    """One line of cleaned text, its end an ellipsis where it would be wider than `width` [mm of paper].

    >>> short("spindle.shoulder", 18.6), short("hub", 18.6)
    ('spindle.s…', 'hub')
    """
    line, most = " ".join(clean(text).split()), characters(width, size)
    return line if len(line) <= most else line[: most - 1].rstrip() + "…"


def wrapped(text: str, width: float, most: int, size: float = SIZE) -> list[str]:
    """Up to `most` lines of cleaned text, each no wider than `width` [mm of paper]; what is left over ends in an ellipsis.

    >>> wrapped("op 40, clearance of hub in spigot", 37.2, 2)
    ['op 40, clearance of', 'hub in spigot']
    """
    room, lines, words = characters(width, size), [""], clean(text).split()
    for at, word in enumerate(words):
        joined = f"{lines[-1]} {word}".strip()
        if len(joined) <= room:
            lines[-1] = joined
        elif len(lines) == most or (not lines[-1]):
            lines[-1] = short(" ".join([lines[-1], *words[at:]]), width, size)
            if len(lines) == most or at == len(words) - 1:
                break
            lines.append("")
        else:
            lines.append(short(word, width, size))
    return [line for line in lines if line]


def spans(numbers: Iterable[int]) -> str:
    """Numbers with runs of three or more drawn together.

    >>> spans([1, 2, 3, 5, 6, 9])
    '1-3, 5, 6, 9'
    """
    runs: list[list[int]] = []
    for n in sorted(set(numbers)):
        if runs and n == runs[-1][-1] + 1:
            runs[-1].append(n)
        else:
            runs.append([n])
    told = [f"{r[0]}-{r[-1]}" if len(r) > 2 else ", ".join(map(str, r)) for r in runs]
    return ", ".join(told)


def box(x: float, y: float, width: float, height: float, *, fill: str = "white", stroke: float = 0.13) -> str:
    """A rectangle from its upper left corner, outlined; without an outline where `stroke` is 0 [mm of paper]."""
    line: dict[str, str | float] = {"stroke": "black", "stroke_width": stroke} if stroke else {}
    return tag("rect", x=x, y=y, width=width, height=height, fill=fill, **line)


def outlined(boxes: Iterable[str], *, stroke: float = 0.13) -> str:
    """Shapes without outlines of their own, outlined alike: shorter than saying it at each of them [mm of paper]."""
    return tag("g", "".join(boxes), stroke="black", stroke_width=stroke)
