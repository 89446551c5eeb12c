"""The few lines of the sheet on which a good wire can run, and what is free between them.

A best path between boxes can always be pushed sideways until its segments lie on an *interesting* line: that of a
terminal, or one just outside an obstacle. Only these make up a `Lattice`. A row of it is one integer used as a set of
columns, so that whole rows are flooded by single operations (common practice for flood fills on bit boards).

All coordinates are modules; y grows downwards.
"""

from __future__ import annotations

from bisect import bisect_left, bisect_right
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from math import ceil, floor

Point = tuple[int, int]
"""x, y in modules."""
Dir = tuple[int, int]
"""Step of one module: N, E, S or W."""
Box = tuple[float, float, float, float]
"""Left, top, right, bottom; only the inside is closed to wires, its edge is not."""
Segment = tuple[Point, Point]
"""A level or upright piece of wire."""
Rows = list[int]
"""A set of crossings: for each row of a lattice the set of its columns, as bits."""

COMPASS: tuple[Dir, Dir, Dir, Dir] = ((0, -1), (1, 0), (0, 1), (-1, 0))
"""North, east, south, west; the place of a direction in this tuple is called its *way* (0 to 3)."""


@dataclass(frozen=True, slots=True)
class Lattice:
    """The interesting lines of a region and what is free between them.

    `xs`, `ys`: columns and rows in modules. Bit i of `across[j]` says that the step from column i to i + 1 in row j is
    free, bit i of `down[j]` that the step from row j to j + 1 in column i is. The same for steps that come close to an
    obstacle (`across_close`, `down_close`) and for those on another wire (`across_taken`, `down_taken`).
    """

    xs: list[int]
    ys: list[int]
    across: Rows
    down: Rows
    across_close: Rows
    down_close: Rows
    across_taken: Rows
    down_taken: Rows


def lattice(region: Box, points: Sequence[Point], boxes: Sequence[Box], wires: Sequence[Segment] = ()) -> Lattice:
    """Interesting lines within `region` for wires between `points`, round `boxes` and preferably not on top of `wires`.

    The points themselves are closed to wires that do not end there.
    """
    left, top, right, bottom = region
    ends = [(x - 0.5, y - 0.5, x + 0.5, y + 0.5) for x, y in points]
    spans = [*boxes, *((min(a[0], b[0]), min(a[1], b[1]), max(a[0], b[0]), max(a[1], b[1])) for a, b in wires)]
    xs = _lines(left, right, [x for x, _ in points], [(box[0], box[2]) for box in spans])
    ys = _lines(top, bottom, [y for _, y in points], [(box[1], box[3]) for box in spans])
    across_shut, down_shut = _covered(xs, ys, [*boxes, *ends])
    zones = [(box[0] - 1, box[1] - 1, box[2] + 1, box[3] + 1) for box in boxes]
    across_close, down_close = _covered(xs, ys, zones)
    across_taken, down_taken = _taken(xs, ys, wires)
    all_across, all_down = (1 << len(xs) - 1) - 1, (1 << len(xs)) - 1
    return Lattice(
        xs,
        ys,
        [all_across & ~shut for shut in across_shut],
        [all_down & ~shut for shut in down_shut[:-1]] + [0],
        across_close,
        down_close,
        across_taken,
        down_taken,
    )


def _lines(low: float, high: float, places: Iterable[int], spans: Iterable[tuple[float, float]]) -> list[int]:
    """Coordinates worth a line: the places and both sides of them, and outside each span at no and at one module."""
    wanted: set[int] = set()
    for place in places:
        wanted.update((place - 1, place, place + 1))
    for start, stop in spans:
        before, after = floor(start), ceil(stop)
        wanted.update((before - 1, before, after, after + 1))
    return sorted(value for value in wanted if low <= value <= high)


def _covered(xs: list[int], ys: list[int], boxes: Iterable[Box]) -> tuple[Rows, Rows]:
    """Steps across and steps down that touch the inside of a box, as one set of columns for each row."""
    across, down = [0] * len(ys), [0] * len(ys)
    for left, top, right, bottom in boxes:
        first, last = bisect_right(xs, left), bisect_left(xs, right)
        upper, lower = bisect_right(ys, top), bisect_left(ys, bottom)
        columns = (1 << last) - (1 << first) if last > first else 0
        steps = (1 << last) - (1 << max(first - 1, 0))
        for row in range(upper, lower):
            across[row] |= steps
        for row in range(max(upper - 1, 0), lower):
            down[row] |= columns
    return across, down


def _taken(xs: list[int], ys: list[int], wires: Iterable[Segment]) -> tuple[Rows, Rows]:
    """Steps across and steps down that lie on a wire, as one set of columns for each row."""
    across, down = [0] * len(ys), [0] * len(ys)
    for a, b in wires:
        left, right, top, bottom = min(a[0], b[0]), max(a[0], b[0]), min(a[1], b[1]), max(a[1], b[1])
        if top == bottom and (row := _index(ys, top)) >= 0:
            first, last = bisect_right(xs, left), bisect_left(xs, right)
            across[row] |= (1 << last) - (1 << max(first - 1, 0))
        if left == right and (column := _index(xs, left)) >= 0:
            for row in range(max(bisect_right(ys, top) - 1, 0), bisect_left(ys, bottom)):
                down[row] |= 1 << column
    return across, down


def _index(lines: list[int], value: int) -> int:
    """Place of a coordinate among the lines, or -1."""
    place = bisect_left(lines, value)
    return place if place < len(lines) and lines[place] == value else -1


def crossing_at(grid: Lattice, point: Point) -> tuple[int, int] | None:
    """Column and row of a point; None when it is not a crossing of the lattice."""
    column, row = _index(grid.xs, point[0]), _index(grid.ys, point[1])
    return None if column < 0 or row < 0 else (column, row)
