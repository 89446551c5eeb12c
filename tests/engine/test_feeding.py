"""Which branches carry fault current, against the currents; whether sources come apart, against the graph."""

from dataclasses import dataclass

import networkx as nx
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.feeding import Edge, feeding_of

CARRIES = 1e-9


@dataclass(frozen=True)
class Net:
    """n nodes, edges, sources as (node, R/X)."""

    n: int
    edges: tuple[Edge, ...]
    sources: tuple[tuple[int, float], ...]


@st.composite
def nets(draw: st.DrawFn) -> Net:
    """Small networks, often with dead ends, parallels, rings and loose pieces."""
    n = draw(st.integers(1, 9))
    node = st.integers(0, n - 1)
    ends = draw(st.lists(st.tuples(node, node, st.booleans()), max_size=12))
    edges = tuple(Edge(a, b, 0.01 + 0.01 * k, t) for k, (a, b, t) in enumerate(ends))
    at = draw(st.lists(node, max_size=4))
    return Net(n, edges, tuple((a, 0.2 + 0.01 * k) for k, a in enumerate(at)))


def carrying(net: Net, fault: int) -> tuple[list[Edge], list[float]]:
    """Edges and sources with current for one ampere drawn at the fault: nodal analysis, arbitrary impedances."""
    rng = np.random.default_rng(7)
    y_edge = 1 / (rng.uniform(0.5, 2, len(net.edges)) + 1j * rng.uniform(0.5, 2, len(net.edges)))
    y_source = 1 / (rng.uniform(0.5, 2, len(net.sources)) + 1j * rng.uniform(0.5, 2, len(net.sources)))
    matrix = np.zeros((net.n, net.n), np.complex128)
    for edge, y in zip(net.edges, y_edge, strict=True):
        for i, j, sign in ((0, 0, 1), (1, 1, 1), (0, 1, -1), (1, 0, -1)):
            ends = (edge.one, edge.other)
            matrix[ends[i], ends[j]] += sign * y
    for (node, _), y in zip(net.sources, y_source, strict=True):
        matrix[node, node] += y
    graph = nx.MultiGraph()
    graph.add_nodes_from(range(net.n))
    graph.add_edges_from((edge.one, edge.other) for edge in net.edges)
    fed = sorted(nx.node_connected_component(graph, fault))
    if not any(node in fed for node, _ in net.sources):
        return [], []
    volts = np.zeros(net.n, np.complex128)
    draw = np.array([1.0 if node == fault else 0.0 for node in fed])
    volts[fed] = np.linalg.solve(matrix[np.ix_(fed, fed)], draw)
    edges = [
        edge
        for edge, y in zip(net.edges, y_edge, strict=True)
        if edge.one in fed and abs(y * (volts[edge.one] - volts[edge.other])) > CARRIES
    ]
    sources = [ratio for (node, ratio), y in zip(net.sources, y_source, strict=True) if abs(y * volts[node]) > CARRIES]
    return edges, sources


def apart(net: Net, fault: int) -> bool:
    """No piece of the network without the node has two sources."""
    graph = nx.MultiGraph()
    graph.add_nodes_from(range(net.n))
    graph.add_edges_from((edge.one, edge.other) for edge in net.edges)
    own = nx.node_connected_component(graph, fault)
    pieces = nx.connected_components(graph.subgraph(own - {fault}))
    return all(sum(node in piece for node, _ in net.sources) <= 1 for piece in pieces)


def level(net: Net, fault: int) -> set[int]:
    """Nodes that hang together with the fault without transformers."""
    graph = nx.Graph()
    graph.add_nodes_from(range(net.n))
    graph.add_edges_from((edge.one, edge.other) for edge in net.edges if not edge.transformer)
    return set(nx.node_connected_component(graph, fault))


@settings(max_examples=150, deadline=None)
@given(net=nets())
def test_ratios_are_those_of_what_carries_current(net: Net) -> None:
    found = feeding_of(net.n, net.edges, net.sources)
    for fault in range(net.n):
        edges, sources = carrying(net, fault)
        own = level(net, fault)
        near = [edge.r_over_x for edge in edges if {edge.one, edge.other} & own]
        near += [ratio for node, ratio in net.sources if node in own and sources]
        assert found.largest[fault] == max([edge.r_over_x for edge in edges] + sources, default=-np.inf)
        assert found.nearby[fault] == min(near, default=np.inf)
        if sources:
            assert found.apart[fault] == apart(net, fault)


@pytest.mark.parametrize(
    ("edges", "sources", "wanted"),
    [
        ([(0, 1), (1, 2)], [0, 1], [True, True, False]),  # both sources come to node 2 over one line
        ([(0, 2), (1, 2)], [0, 1], [True, True, True]),  # a star: each on its own line
        ([(0, 1), (0, 1), (1, 2)], [0], [True, True, True]),  # one source over a pair of lines
        ([(0, 1), (1, 2), (2, 0)], [0, 1], [True, True, False]),  # a ring with a source at two corners
        ([(0, 1)], [0, 0], [True, False]),  # two at one bus: apart there, together behind a line
    ],
)
def test_sources_come_apart_or_together(edges: list[tuple[int, int]], sources: list[int], wanted: list[bool]) -> None:
    n = 1 + max(max(edge) for edge in edges)
    found = feeding_of(n, [Edge(a, b, 0.1) for a, b in edges], [(node, 0.1) for node in sources])
    assert found.apart.tolist() == wanted


def test_a_dead_end_counts_only_for_faults_behind_it() -> None:
    # source 0 – line R/X 0.1 – 1 – cable R/X 2 – 2: the cable carries nothing for a fault at 1
    found = feeding_of(3, [Edge(0, 1, 0.1), Edge(1, 2, 2.0)], [(0, 0.05)])
    assert found.largest.tolist() == [0.05, 0.1, 2.0]
    assert found.nearby.tolist() == [0.05, 0.05, 0.05]


def test_only_the_fault_s_own_level_and_the_transformers_next_to_it_are_near() -> None:
    # source 0.01 – 0 – line 0.02 – 1 – transformer 0.05 – 2 – cable 0.5 – 3
    edges = [Edge(0, 1, 0.02), Edge(1, 2, 0.05, True), Edge(2, 3, 0.5)]
    assert feeding_of(4, edges, [(0, 0.01)]).nearby.tolist() == [0.01, 0.01, 0.05, 0.05]


def test_large_trees_and_rings_need_no_deep_recursion() -> None:
    n = 4000
    chain = [Edge(k, k + 1, 0.1) for k in range(n - 1)]
    assert feeding_of(n, chain, [(0, 0.1)]).apart.all()
    ring = [*chain, Edge(n - 1, 0, 0.2)]
    found = feeding_of(n, ring, [(0, 0.1)])
    assert found.largest[1:].tolist() == [0.2] * (n - 1)
