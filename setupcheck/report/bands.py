"""Where a value on a grid of points lies below a level: areas to fill and their edge, straight between the points.

Points have the unit of whoever asks, values and levels share another. A grid is rows of points, all of one length.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TypeVar

from setupcheck.report.svg import Point

T = TypeVar("T")
Row = Sequence[Point]
Corner = tuple[Point, float]
Triangle = tuple[Corner, Corner, Corner]
Piece = tuple[Point, Point]


def areas(points: Sequence[Row], values: Sequence[Sequence[float]], level: float) -> Iterator[list[Point]]:
    """Polygons that cover where the value is at most the level; cells that lie below it whole are joined along their row.

    Source: straight interpolation over both triangles of each cell.

    >>> square = [[(0.0, 0.0), (1.0, 0.0)], [(0.0, 1.0), (1.0, 1.0)]]
    >>> list(areas(square, [[0.0, 0.0], [0.0, 0.0]], 1.0))
    [[(0.0, 0.0), (1.0, 0.0), (1.0, 1.0), (0.0, 1.0)]]
    >>> list(areas(square, [[0.0, 4.0], [4.0, 4.0]], 1.0))
    [[(0.0, 0.0), (0.25, 0.0), (0.0, 0.25)]]
    """
    for i in range(len(points) - 1):
        low, high = points[i], points[i + 1]
        whole = [
            max(values[i][j], values[i][j + 1], values[i + 1][j], values[i + 1][j + 1]) <= level
            for j in range(len(low) - 1)
        ]
        j = 0
        while j < len(whole):
            if not whole[j]:
                for triangle in _triangles(points, values, i, j):
                    cut = _below(triangle, level)
                    if len(cut) > 2:
                        yield cut
                j += 1
                continue
            start = j
            while j < len(whole) and whole[j]:
                j += 1
            yield [*low[start : j + 1], *reversed(high[start : j + 1])]


def edges(points: Sequence[Row], values: Sequence[Sequence[float]], level: float) -> Iterator[Piece]:
    """Straight pieces of the line round where the value is at most the level, the rim of the grid included.

    >>> square = [[(0.0, 0.0), (1.0, 0.0)], [(0.0, 1.0), (1.0, 1.0)]]
    >>> for piece in edges(square, [[0.0, 4.0], [4.0, 4.0]], 1.0):
    ...     print(*piece)
    (0.25, 0.0) (0.0, 0.25)
    (0.0, 0.0) (0.25, 0.0)
    (0.0, 0.25) (0.0, 0.0)
    """
    for i in range(len(points) - 1):
        for j in range(len(points[0]) - 1):
            for triangle in _triangles(points, values, i, j):
                met = [at for a, b in _around(triangle) if (at := _crossing(a, b, level)) is not None]
                if len(met) == 2 and met[0] != met[1]:
                    yield met[0], met[1]
    around = rim(points)
    of = rim(values)
    for a, b in zip(zip(around, of, strict=True), zip(around[1:], of[1:], strict=False), strict=False):
        kept = _below((a, b), level)
        if len(kept) > 1 and kept[0] != kept[1]:
            yield kept[0], kept[1]


def rim(grid: Sequence[Sequence[T]]) -> list[T]:
    """What stands on the rim of a grid, once round and back to the first.

    >>> rim([[1, 2, 3], [8, 0, 4], [7, 6, 5]])
    [1, 2, 3, 4, 5, 6, 7, 8, 1]
    """
    right = [row[-1] for row in grid[1:-1]]
    left = [row[0] for row in reversed(grid[1:-1])]
    return [*grid[0], *right, *reversed(grid[-1]), *left, grid[0][0]]


def _triangles(points: Sequence[Row], values: Sequence[Sequence[float]], i: int, j: int) -> Iterator[Triangle]:
    a, b, c, d = ((points[k][m], values[k][m]) for k, m in ((i, j), (i, j + 1), (i + 1, j + 1), (i + 1, j)))
    yield a, b, d
    yield b, c, d


def _around(corners: Sequence[Corner]) -> Iterator[tuple[Corner, Corner]]:
    return zip(corners, [*corners[1:], corners[0]], strict=True)


def _below(corners: Sequence[Corner], level: float) -> list[Point]:
    """The part of a triangle, or of a piece between two corners, that lies at most at the level."""
    kept: list[Point] = []
    pairs = _around(corners) if len(corners) > 2 else iter([(corners[0], corners[1])])
    for a, b in pairs:
        if a[1] <= level:
            kept.append(a[0])
        if (at := _crossing(a, b, level)) is not None:
            kept.append(at)
    if len(corners) == 2 and corners[1][1] <= level:
        kept.append(corners[1][0])
    return kept


def _crossing(a: Corner, b: Corner, level: float) -> Point | None:
    """Where the value passes the level between two corners."""
    if (a[1] <= level) == (b[1] <= level):
        return None
    (xa, ya), (xb, yb) = a[0], b[0]
    share = (level - a[1]) / (b[1] - a[1])
    return xa + share * (xb - xa), ya + share * (yb - ya)
