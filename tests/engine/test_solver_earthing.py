"""Paths to earth against networkx, and what is put in place of infinite impedances."""

import networkx as nx
import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.solver_earthing import UnearthedNodes, earthed_nodes


@settings(max_examples=40, deadline=None)
@given(st.integers(1, 30), st.integers(0, 40), st.integers(0, 2**32))
def test_agrees_with_walking_the_graph(n: int, n_couplings: int, seed: int) -> None:
    rng = np.random.default_rng(seed)
    rows, cols = rng.integers(0, n, (2, n_couplings))
    couples, has_shunt = rng.random((n_couplings, 3)) < 0.6, rng.random((n, 3)) < 0.1
    earthed = earthed_nodes(n, rows, cols, couples, has_shunt)
    for s in range(3):
        graph = nx.empty_graph(n)
        graph.add_edges_from(zip(rows[couples[:, s]].tolist(), cols[couples[:, s]].tolist(), strict=True))
        reached = {m for node in np.flatnonzero(has_shunt[:, s]) for m in nx.node_connected_component(graph, int(node))}
        assert set(np.flatnonzero(earthed[:, s]).tolist()) == reached


def test_no_nodes_and_no_couplings() -> None:
    nothing = np.zeros(0, np.int64)
    assert earthed_nodes(0, nothing, nothing, np.zeros((0, 3), bool), np.zeros((0, 3), bool)).shape == (0, 3)
    shunts = np.array([[True, False], [False, False]])
    assert (earthed_nodes(2, nothing, nothing, np.zeros((0, 2), bool), shunts) == shunts).all()


def test_all_earthed_is_nothing_to_leave_out() -> None:
    one = np.zeros(1, np.int64)
    assert UnearthedNodes.of(np.ones((2, 3), bool), one, one + 1, np.ones((1, 3), bool)) is None


def test_separate_equations_have_no_neighbours() -> None:
    earthed = np.array([[True, True], [True, False], [True, False]])
    rows, cols = np.array([0, 1]), np.array([1, 2])
    unearthed = UnearthedNodes.of(earthed, rows, cols, np.array([[True, False], [True, True]]))
    assert unearthed is not None
    own, mutual = unearthed.separate(np.full((3, 2), 7j), np.array([[-2j, 0], [-5j, -5j]]))
    assert own.tolist() == [[7j, 7j], [7j, 1], [7j, 1]]
    assert mutual.tolist() == [[-2j, 0], [-5j, 0]]
