"""Phase displacement and no-load voltage of nodes, carried over the branches of each island; rings that do not close.

LV positive-sequence voltage lags HV by clock · 30° (IEC 60076-1). Round any closed loop the displacements add up to a
multiple of 360° and the ratios multiply to 1, or the transformers in the loop cannot be paralleled.
"""

from collections import deque
from dataclasses import dataclass, field

import numpy as np

from onelinefault.engine.network import FloatArray, IntArray


@dataclass(frozen=True)
class Carried:
    """values: of every node, relative to the lowest-numbered node of its island, shape (n,).

    broken: branches that close a loop which does not add up. tree: for each node the branch and the node it was
    reached from, None at an island's first node.
    """

    values: FloatArray
    broken: tuple[int, ...]
    tree: tuple[tuple[int, int] | None, ...]
    from_node: IntArray
    to_node: IntArray

    def loop(self, branch: int) -> tuple[int, ...]:
        """The branches of the loop that a broken branch closes with the tree, itself first."""
        ways = [self._way(int(ends[branch])) for ends in (self.from_node, self.to_node)]
        shared = set(ways[0]) & set(ways[1])
        return (branch, *(k for way in ways for k in way if k not in shared))

    def _way(self, node: int) -> list[int]:
        way = []
        while (step := self.tree[node]) is not None:
            way.append(step[0])
            node = step[1]
        return way


def carry(
    n_nodes: int, from_node: IntArray, to_node: IntArray, step: FloatArray, period: float, tolerance: float
) -> Carried:
    """Add up ``step`` along branches from each island's first node; arrays of shape (m,).

    The value at a branch's to end is that at its from end plus its step. Values that differ by a multiple of ``period``
    (0: none) agree within ``tolerance``.
    """
    walk = _Walk.over(n_nodes, from_node, to_node, step)
    for first in range(n_nodes):
        if first not in walk.values:
            walk.spread(first)
    found = np.array([walk.values[node] for node in range(n_nodes)], np.float64)
    gap = np.abs(found[from_node] + step - found[to_node])
    if period:
        gap = np.minimum(gap % period, period - gap % period)
    broken = tuple(np.flatnonzero(gap > tolerance).tolist())
    return Carried(found, broken, tuple(walk.tree), from_node, to_node)


@dataclass
class _Walk:
    """A breadth-first walk over all islands. neighbours: for each node (branch, other node, step to it)."""

    neighbours: list[list[tuple[int, int, float]]]
    tree: list[tuple[int, int] | None]
    values: dict[int, float] = field(default_factory=dict)

    @classmethod
    def over(cls, n_nodes: int, from_node: IntArray, to_node: IntArray, step: FloatArray) -> "_Walk":
        neighbours: list[list[tuple[int, int, float]]] = [[] for _ in range(n_nodes)]
        for k, (i, j, rise) in enumerate(zip(from_node.tolist(), to_node.tolist(), step.tolist(), strict=True)):
            neighbours[i].append((k, j, rise))
            neighbours[j].append((k, i, -rise))
        return cls(neighbours, [None] * n_nodes)

    def spread(self, first: int) -> None:
        self.values[first] = 0.0
        waiting = deque([first])
        while waiting:
            node = waiting.popleft()
            for branch, neighbour, rise in self.neighbours[node]:
                if neighbour not in self.values:
                    self.values[neighbour] = self.values[node] + rise
                    self.tree[neighbour] = (branch, node)
                    waiting.append(neighbour)


def wrapped(angle_deg: FloatArray) -> FloatArray:
    """Angles in degrees brought between −180 (exclusive) and 180 (inclusive); same shape."""
    turned: FloatArray = 180.0 - (180.0 - angle_deg) % 360.0
    return turned
