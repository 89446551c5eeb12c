"""How fault current gets to each node: over which branches, and whether every source comes on a way of its own.

Only the graph counts, no impedance. Its blocks (largest parts without a cut node) and cut nodes form a tree. For a
fault at a node a block carries current where a source lies on another side of it than the fault; dead ends carry none.
Sources come separately where, the node taken away, no piece of the network holds two of them.
Source: graph theory (blocks and cut nodes; Hopcroft and Tarjan 1973), Kirchhoff's laws.
"""

from collections import deque
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, field

import networkx as nx
import numpy as np

from onelinefault.engine.network import FloatArray
from onelinefault.engine.ordering import BoolArray

Extremes = tuple[float, float]  # smallest and largest
NONE: Extremes = (np.inf, -np.inf)


@dataclass(frozen=True, slots=True)
class Edge:
    """A branch between two nodes with its R/X. transformer: it parts two voltage levels."""

    one: int
    other: int
    r_over_x: float
    transformer: bool = False


@dataclass(frozen=True, eq=False)
class Feeding:
    """What feeds a fault at each of n nodes.

    apart (n,): every source comes on a way of its own. largest (n,): largest R/X of all branches and sources that carry
    current, −∞ where nothing feeds. nearby (n,): smallest R/X of those at the fault's own voltage level and of the
    transformers next to it, ∞ where none is.
    """

    apart: BoolArray
    largest: FloatArray
    nearby: FloatArray


def feeding_of(n: int, edges: Sequence[Edge], sources: Sequence[tuple[int, float]]) -> Feeding:
    """What feeds each of n nodes, arrays of shape (n,); sources: node and R/X of each."""
    work = _Work(n, edges, sources)
    for members in nx.connected_components(work.graph):
        work.component(members)
    return Feeding(np.array(work.apart, np.bool_), np.array(work.largest), np.array(work.nearby))


def _extremes(values: Iterable[float]) -> Extremes:
    return _joined((value, value) for value in values)


def _joined(several: Iterable[Extremes]) -> Extremes:
    low, high = NONE
    for one_low, one_high in several:
        low, high = min(low, one_low), max(high, one_high)
    return low, high


@dataclass(eq=False)
class _Tree:
    """Blocks and cut nodes of one component. A block is a number; a vertex (any node) hangs on blocks.

    parent: the block towards the root of each vertex, and the vertex towards the root of each block. core: blocks with
    sources on two sides.
    """

    blocks: list[set[int]]
    above_vertex: dict[int, int] = field(default_factory=dict)
    above_block: dict[int, int] = field(default_factory=dict)
    order: list[int] = field(default_factory=list)  # blocks from the root outwards
    sources_below: dict[int, int] = field(default_factory=dict)  # of a block: at all its vertices but the upper one
    core: set[int] = field(default_factory=set)


class _Work:
    """The arrays as they grow, component by component."""

    def __init__(self, n: int, edges: Sequence[Edge], sources: Sequence[tuple[int, float]]) -> None:
        self.graph: nx.Graph[int] = nx.Graph()
        self.graph.add_nodes_from(range(n))
        self.parallel: dict[tuple[int, int], list[Edge]] = {}
        for edge in edges:
            if edge.one != edge.other:
                self.graph.add_edge(edge.one, edge.other)
                self.parallel.setdefault(_key(edge.one, edge.other), []).append(edge)
        self.sources: dict[int, list[float]] = {}
        for node, ratio in sources:
            self.sources.setdefault(node, []).append(ratio)
        self.level = _levels(n, edges)
        self.apart = [True] * n
        self.largest = [-np.inf] * n
        self.nearby = [np.inf] * n

    def component(self, members: set[int]) -> None:
        """Fill in the nodes of one connected component."""
        feeding = [node for node in members if node in self.sources]
        if not feeding:
            return
        total = sum(len(self.sources[node]) for node in feeding)
        pieces = nx.biconnected_component_edges(self.graph.subgraph(members))
        edges = [[edge for pair in piece for edge in self.parallel[_key(*pair)]] for piece in pieces]
        tree = _tree(feeding[0], [{end for edge in block for end in (edge.one, edge.other)} for block in edges])
        self._count(tree)
        self._apart(tree, members, total)
        self._ratios(tree, members, edges)

    def _count(self, tree: _Tree) -> None:
        """Sources below each block; above it there is always that of the root."""
        below = {vertex: len(ratios) for vertex, ratios in self.sources.items()}
        for block in reversed(tree.order):
            upper = tree.above_block[block]
            inside = sum(below.get(vertex, 0) for vertex in tree.blocks[block] if vertex != upper)
            tree.sources_below[block] = inside
            below[upper] = below.get(upper, 0) + inside
            if inside:
                tree.core.add(block)

    def _apart(self, tree: _Tree, members: set[int], total: int) -> None:
        """Each piece that is left when the node is taken away holds one source at most."""
        below = dict.fromkeys(members, 0)
        for block in tree.order:
            upper, inside = tree.above_block[block], tree.sources_below[block]
            below[upper] += inside
            if inside > 1:
                self.apart[upper] = False
        for vertex in members:
            if vertex in tree.above_vertex and total - below[vertex] - len(self.sources.get(vertex, ())) > 1:
                self.apart[vertex] = False

    def _ratios(self, tree: _Tree, members: set[int], edges: list[list[Edge]]) -> None:
        feeding = {node: self.sources[node] for node in members if node in self.sources}
        core = _extremes(edge.r_over_x for block in tree.core for edge in edges[block])
        everywhere = _joined([core, _extremes(ratio for ratios in feeding.values() for ratio in ratios)])
        levels: dict[int, float] = {}
        for level, ratio in self._by_level(tree, edges, feeding):
            levels[level] = min(levels.get(level, np.inf), ratio)
        for vertex in members:
            self.largest[vertex] = everywhere[1]
            self.nearby[vertex] = levels.get(self.level[vertex], np.inf)
        for block in tree.order:
            if block not in tree.core:
                self._dead_end(tree.blocks[block], tree.above_block[block], edges[block])

    def _by_level(
        self, tree: _Tree, edges: list[list[Edge]], feeding: dict[int, list[float]]
    ) -> Iterator[tuple[int, float]]:
        """Level and R/X of all that carries current wherever the fault is; a transformer counts at both its levels."""
        for node, ratios in feeding.items():
            yield from ((self.level[node], ratio) for ratio in ratios)
        for block in tree.core:
            for edge in edges[block]:
                yield from ((level, edge.r_over_x) for level in {self.level[edge.one], self.level[edge.other]})

    def _dead_end(self, vertices: set[int], upper: int, edges: list[Edge]) -> None:
        """Nodes behind a cut node without a source: the way there carries the current of a fault at them."""
        largest = max(self.largest[upper], *(edge.r_over_x for edge in edges))
        for vertex in vertices - {upper}:
            level = self.level[vertex]
            near = [e.r_over_x for e in edges if level in (self.level[e.one], self.level[e.other])]
            if level == self.level[upper]:
                near.append(self.nearby[upper])
            else:
                near.append(self.nearby[vertex])
            self.largest[vertex] = largest
            self.nearby[vertex] = min(near)


def _key(one: int, other: int) -> tuple[int, int]:
    return (one, other) if one < other else (other, one)


def _tree(root: int, blocks: list[set[int]]) -> _Tree:
    """The tree of blocks and cut nodes, seen from a node."""
    tree = _Tree(blocks)
    on: dict[int, list[int]] = {}
    for number, vertices in enumerate(blocks):
        for vertex in vertices:
            on.setdefault(vertex, []).append(number)
    waiting = deque([root])
    while waiting:
        vertex = waiting.popleft()
        for block in on.get(vertex, ()):
            if block in tree.above_block:
                continue
            tree.above_block[block] = vertex
            tree.order.append(block)
            for other in blocks[block] - {vertex}:
                tree.above_vertex[other] = block
                waiting.append(other)
    return tree


def _levels(n: int, edges: Sequence[Edge]) -> list[int]:
    """For each node the number of its voltage level: what hangs together without transformers."""
    graph: nx.Graph[int] = nx.Graph()
    graph.add_nodes_from(range(n))
    graph.add_edges_from((edge.one, edge.other) for edge in edges if not edge.transformer)
    level = [0] * n
    for number, members in enumerate(nx.connected_components(graph)):
        for node in members:
            level[node] = number
    return level
