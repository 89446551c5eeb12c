"""The search behind the routing of wires: the path of fewest bends, then of least length, between boxes.

Two steps on a `Lattice`: `bends_to_go` floods backwards from the end, one bend a step, and so knows exactly how many
bends are left from every crossing; `best_path` then looks for the shortest path (A*: Hart, Nilsson and Raphael 1968)
among those of fewest bends only. All coordinates are modules; y grows downwards.
"""

from __future__ import annotations

import heapq
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import count
from typing import NamedTuple

from onelinefault.drawing.routing_lattice import COMPASS, Lattice, Point, Rows, crossing_at

_NORTH, _EAST, _SOUTH, _WEST = range(4)
_LONGEST_EXTRA = 1  # bends that an end may cost by itself, see Stub.bends
_CLOSE = 1  # modules that a module close to an obstacle counts in addition
_TAKEN = 4  # modules that a module on another wire counts in addition: it looks like a joint that is none
_FourRows = tuple[Rows, Rows, Rows, Rows]  # by way


class Stub(NamedTuple):
    """A permitted way out of one end of a wire.

    `way`: direction out of the terminal; `tip`: first point where the wire may turn; `bends`: how many bends it costs
    to use this way out (0 or 1).
    """

    way: int
    tip: Point
    bends: int


@dataclass(frozen=True, slots=True)
class Level:
    """Where a wire may be with a given number of bends left: row sets by way.

    `arrived[way][j]`: crossings in row j come to by travelling `way`; `leaving[way][j]`: crossings that may be left in
    `way`, the tips of the ends among them.
    """

    arrived: _FourRows
    leaving: _FourRows


def bends_to_go(grid: Lattice, starts: Sequence[Stub], ends: Sequence[Stub]) -> tuple[int, list[Level]] | None:
    """Fewest bends from any start to any end, and for 0, 1, 2, ... bends left where a wire may then be.

    The bends of the stubs are counted in. None when there is no path at all.
    """
    levels: list[Level] = []
    seen: list[Rows] = [[0] * len(grid.ys) for _ in COMPASS]
    mirrored: dict[int, int] = {}
    fewest: int | None = None
    while fewest is None or fewest >= len(levels):
        seeds = _seeds(grid, [end for end in ends if end.bends == len(levels)])
        level = _next_level(grid, levels[-1] if levels else None, seeds, seen, mirrored)
        if level is None and len(levels) > _LONGEST_EXTRA:
            break
        levels.append(level or Level(_none(grid), _none(grid)))
        for start in starts:
            if _is_in(grid, levels[-1].arrived[start.way], start.tip):
                total = len(levels) - 1 + start.bends
                fewest = total if fewest is None else min(fewest, total)
    return None if fewest is None else (fewest, levels)


def _seeds(grid: Lattice, ends: Iterable[Stub]) -> _FourRows:
    """The tips of the ends, by the way a wire travels when it comes in."""
    rows = _none(grid)
    for end in ends:
        crossing = crossing_at(grid, end.tip)
        if crossing:
            rows[end.way ^ 2][crossing[1]] |= 1 << crossing[0]
    return rows


def _none(grid: Lattice) -> _FourRows:
    """No crossing, for each way."""
    north, east, south, west = ([0] * len(grid.ys) for _ in COMPASS)
    return north, east, south, west


def _is_in(grid: Lattice, rows: Rows, point: Point) -> bool:
    crossing = crossing_at(grid, point)
    return crossing is not None and bool(rows[crossing[1]] >> crossing[0] & 1)


def _next_level(
    grid: Lattice,
    previous: Level | None,
    tips: _FourRows,
    seen: list[Rows],
    mirrored: dict[int, int],
) -> Level | None:
    """Crossings first reached with one bend more than `previous`, or from `tips`; None when there are none."""
    seeds = tips
    if previous is not None:
        north, east, south, west = previous.leaving
        upright = [a | b for a, b in zip(north, south, strict=True)]
        level = [a | b for a, b in zip(east, west, strict=True)]
        turns = (level, upright, level, upright)
        seeds = _united(tips, turns)
    floods = (
        _flood_north(grid, seeds[_NORTH]),
        _flood_east(grid, seeds[_EAST], mirrored),
        _flood_south(grid, seeds[_SOUTH]),
        _flood_west(grid, seeds[_WEST]),
    )
    fresh = ([new & ~old for new, old in zip(floods[way], seen[way], strict=True)] for way in range(4))
    arrived = (next(fresh), next(fresh), next(fresh), next(fresh))
    if not any(map(any, (*arrived, *tips))):
        return None
    for way in range(4):
        seen[way] = [new | old for new, old in zip(arrived[way], seen[way], strict=True)]
    return Level(arrived, _united(tips, _leaving(grid, arrived)))


def _united(one: _FourRows, other: _FourRows) -> _FourRows:
    """Crossings of either set, for each way."""
    north, east, south, west = ([a | b for a, b in zip(one[way], other[way], strict=True)] for way in range(4))
    return north, east, south, west


def _leaving(grid: Lattice, arrived: Sequence[Rows]) -> _FourRows:
    """Crossings from which one step in each way leads to a crossing of `arrived`."""
    north, east, south, west = arrived
    return (
        [0, *(row & free for row, free in zip(north, grid.down, strict=True))][:-1],
        [row >> 1 & free for row, free in zip(east, grid.across, strict=True)],
        [row & free for row, free in zip([*south[1:], 0], grid.down, strict=True)],
        [(row & free) << 1 for row, free in zip(west, grid.across, strict=True)],
    )


def _flood_north(grid: Lattice, seeds: Rows) -> Rows:
    """Crossings from which going north leads to a seed."""
    flood, row = [], 0
    for seed, free in zip(seeds, [0, *grid.down], strict=False):
        row = row & free | seed
        flood.append(row)
    return flood


def _flood_south(grid: Lattice, seeds: Rows) -> Rows:
    """Crossings from which going south leads to a seed."""
    flood, row = [], 0
    for seed, free in zip(reversed(seeds), reversed(grid.down), strict=True):
        row = row & free | seed
        flood.append(row)
    return flood[::-1]


def _flood_west(grid: Lattice, seeds: Rows) -> Rows:
    """Crossings from which going west leads to a seed."""
    return [_run_up(seed, free) if seed else 0 for seed, free in zip(seeds, grid.across, strict=True)]


def _flood_east(grid: Lattice, seeds: Rows, mirrored: dict[int, int]) -> Rows:
    """Crossings from which going east leads to a seed: as west, seen in a mirror, since a carry only runs upwards."""
    columns = len(grid.xs)
    flood = []
    for seed, free in zip(seeds, grid.across, strict=True):
        if not seed:
            flood.append(0)
            continue
        if free not in mirrored:
            mirrored[free] = _mirror(free, columns - 1)
        flood.append(_mirror(_run_up(_mirror(seed, columns), mirrored[free]), columns))
    return flood


def _run_up(seed: int, free: int) -> int:
    """Bits that are seeds or reached from one by free steps upwards: the carry of an addition runs along them."""
    return seed | ((seed & free) + free ^ free)


def _mirror(row: int, width: int) -> int:
    """The row with its bits in opposite order."""
    return int(f"{row:0{width}b}"[::-1], 2)


class _Node(NamedTuple):
    """A ray about to start; nodes are taken by least `guess`, then nearest to the end, then oldest.

    `guess`: least possible whole cost; `rest`: the part of it still ahead; `cost`: the part behind. `bends_left` is
    negative when the end has been reached.
    """

    guess: int
    rest: int
    order: int
    cost: int
    way: int
    column: int
    row: int
    bends_left: int
    turns: tuple[Point, ...]


class _Walk:
    """A* over rays: a node goes straight on while it can still arrive, and starts a new one wherever it may turn."""

    def __init__(self, grid: Lattice, levels: Sequence[Level], end: Point, ends: Sequence[Stub]) -> None:
        self.grid, self.levels, self.end = grid, levels, end
        self.queue: list[_Node] = []
        self.best: dict[tuple[int, int, int], int] = {}
        self.order = count()
        self.goals = {(stub.way ^ 2, *at): stub for stub in ends if (at := crossing_at(grid, stub.tip))}

    def push(self, way: int, crossing: tuple[int, int], cost: int, bends_left: int, turns: tuple[Point, ...]) -> None:
        """Adds a node, unless its crossing has been reached in the same way for less."""
        column, row = crossing
        key = (way if bends_left >= 0 else -1, column, row)
        if cost >= self.best.get(key, cost + 1):
            return
        self.best[key] = cost
        rest = abs(self.grid.xs[column] - self.end[0]) + abs(self.grid.ys[row] - self.end[1])
        heapq.heappush(
            self.queue, _Node(cost + rest, rest, next(self.order), cost, way, column, row, bends_left, turns)
        )

    def begin(self, start: Point, stub: Stub, bends_left: int) -> None:
        """Adds the node at the tip of a way out of the start."""
        crossing = crossing_at(self.grid, stub.tip)
        if crossing and _is_in(self.grid, self.levels[bends_left].arrived[stub.way], stub.tip):
            self.push(stub.way, crossing, self._stub_cost(start, stub), bends_left, ())

    def run(self) -> tuple[Point, ...] | None:
        """Turning points of the first path that reaches the end."""
        while self.queue:
            node = heapq.heappop(self.queue)
            if node.bends_left < 0:
                return node.turns
            self._follow(node)
        return None

    def _follow(self, node: _Node) -> None:
        """Goes along the ray and pushes a node wherever it may turn or has arrived."""
        way, column, row, cost, left = node.way, node.column, node.row, node.cost, node.bends_left
        arrived = self.levels[left].arrived[way]
        while arrived[row] >> column & 1:
            self._finish((way, column, row), cost, left, node.turns)
            if left:
                self._turn(way, column, row, cost, node)
            if not self._is_free(way, column, row):
                return
            column, row, length = self._step(way, column, row)
            cost += length

    def _turn(self, way: int, column: int, row: int, cost: int, node: _Node) -> None:
        """Pushes the nodes that begin with a turn at a crossing of the ray."""
        left = node.bends_left - 1
        for turn in (way + 1 & 3, way + 3 & 3):
            if not self.levels[left].leaving[turn][row] >> column & 1:
                continue
            turns = (*node.turns, (self.grid.xs[column], self.grid.ys[row]))
            self._finish((turn, column, row), cost, left, turns)
            if self._is_free(turn, column, row):
                next_column, next_row, length = self._step(turn, column, row)
                self.push(turn, (next_column, next_row), cost + length, left, turns)

    def _finish(self, arrival: tuple[int, int, int], cost: int, left: int, turns: tuple[Point, ...]) -> None:
        """Pushes the last node if this way, column and row lead into the end."""
        stub = self.goals.get(arrival)
        if stub and stub.bends == left:
            crossing = self.grid.xs.index(self.end[0]), self.grid.ys.index(self.end[1])
            self.push(arrival[0], crossing, cost + self._stub_cost(self.end, stub), -1, turns)

    def _stub_cost(self, point: Point, stub: Stub) -> int:
        """Cost of going from an end of the wire to the tip of one of its stubs."""
        crossing, cost = crossing_at(self.grid, point), 0
        while crossing and (self.grid.xs[crossing[0]], self.grid.ys[crossing[1]]) != stub.tip:
            column, row, length = self._step(stub.way, *crossing)
            crossing = column, row
            cost += length
        return cost

    def _is_free(self, way: int, column: int, row: int) -> bool:
        """Whether the step from a crossing is free."""
        if way == _NORTH:
            return bool(row and self.grid.down[row - 1] >> column & 1)
        if way == _SOUTH:
            return bool(self.grid.down[row] >> column & 1)
        column -= way == _WEST
        return bool(column >= 0 and self.grid.across[row] >> column & 1)

    def _step(self, way: int, column: int, row: int) -> tuple[int, int, int]:
        """The next crossing and the cost of the step to it."""
        grid = self.grid
        if way in (_NORTH, _SOUTH):
            upper = row - (way == _NORTH)
            length = grid.ys[upper + 1] - grid.ys[upper]
            close, taken = grid.down_close[upper] >> column & 1, grid.down_taken[upper] >> column & 1
            return column, row + way - 1, length * (1 + close * _CLOSE + taken * _TAKEN)
        first = column - (way == _WEST)
        length = grid.xs[first + 1] - grid.xs[first]
        close, taken = grid.across_close[row] >> first & 1, grid.across_taken[row] >> first & 1
        return column + 2 - way, row, length * (1 + close * _CLOSE + taken * _TAKEN)


def best_path(
    grid: Lattice, start: Point, starts: Sequence[Stub], end: Point, ends: Sequence[Stub]
) -> tuple[Point, ...] | None:
    """Turning points of the shortest of the paths with fewest bends; None when there is no path.

    Modules close to an obstacle count double and those on another wire fivefold, so that the path keeps off both where
    that costs no bend.
    """
    found = bends_to_go(grid, starts, ends)
    if found is None:
        return None
    fewest, levels = found
    walk = _Walk(grid, levels, end, ends)
    for stub in starts:
        if 0 <= fewest - stub.bends < len(levels):
            walk.begin(start, stub, fewest - stub.bends)
    return walk.run()
