"""Nodes without a path to earth: found by graph, left out of the equations, and given their exact infinite impedances.

In the zero sequence whole parts of a plant float: behind delta windings, or where every star point is isolated. Their
admittance matrix is singular (every row sums to zero), and the impedance to earth is infinite. A current put into such
a component has nowhere to go; a node outside it sees none of it.
"""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components

from onelinefault.engine.ordering import BoolArray, ComplexArray, IntArray

INFINITE = complex(np.inf, 0.0)
"""The impedance to earth of an unearthed node. Test with ``isinf`` before multiplying: ∞ times 0 is not a number."""


def earthed_nodes(n_nodes: int, rows: IntArray, cols: IntArray, couples: BoolArray, has_shunt: BoolArray) -> BoolArray:
    """Which nodes have a path to earth in each scenario, shape (n, k).

    rows, cols (c,): end nodes of the couplings. couples (c, k): whether the coupling is there in the scenario.
    has_shunt (n, k): whether anything connects the node to earth (source, machine, charging, earthed star point).
    A node is earthed if its connected component has a shunt. A ring of unequal transformer ratios is no shunt: to have
    its circulating current solved, mark one of its nodes. Source: graph theory; no threshold is involved.
    """
    shunted = np.asarray(has_shunt, np.bool_)
    k = shunted.shape[1]
    coupling, scenario = np.nonzero(couples)
    one, other = np.asarray(rows)[coupling] * k + scenario, np.asarray(cols)[coupling] * k + scenario
    n_components, component = _components(n_nodes * k, one, other)
    has_earth = np.zeros(n_components, np.bool_)
    has_earth[component[shunted.ravel()]] = True
    return has_earth[component].reshape(n_nodes, k)


def _components(n: int, one: IntArray, other: IntArray) -> tuple[int, IntArray]:
    """Number of connected components of a graph of n nodes and the component of each."""
    if not n:
        return 0, np.zeros(0, np.int64)
    graph = coo_array((np.ones(len(one), np.int8), (one, other)), shape=(n, n))
    count, label = connected_components(graph, directed=False)
    return int(count), np.asarray(label, np.int64)


@dataclass(frozen=True, eq=False)
class UnearthedNodes:
    """The f (node, scenario) combinations without earth. coupled (c, k): which couplings from_node–to_node exist.

    node, scenario (f,): the combinations.
    """

    node: IntArray
    scenario: IntArray
    shape: tuple[int, int]
    from_node: IntArray
    to_node: IntArray
    coupled: BoolArray

    @classmethod
    def of(
        cls, earthed: BoolArray, from_node: IntArray, to_node: IntArray, coupled: BoolArray
    ) -> "UnearthedNodes | None":
        """Those of ``earthed`` (n, k) that are not; None if all are.

        Raises ValueError if a coupling joins an earthed to an unearthed node: the marks cannot be right then.
        """
        if earthed.all():
            return None
        if (coupled & (earthed.take(from_node, axis=0) != earthed.take(to_node, axis=0))).any():
            raise ValueError("a coupling joins a node that is marked as earthed to one that is not")
        node, scenario = np.nonzero(~earthed)
        return cls(node, scenario, (earthed.shape[0], earthed.shape[1]), from_node, to_node, coupled)

    def separate(self, diagonal: ComplexArray, off_diagonal: ComplexArray) -> tuple[ComplexArray, ComplexArray]:
        """The matrix entries with the equations of unearthed nodes replaced by x = b."""
        floats = np.zeros(self.shape, np.bool_)
        floats[self.node, self.scenario] = True
        return np.where(floats, 1.0, diagonal), np.where(floats.take(self.from_node, axis=0), 0.0, off_diagonal)

    def overwrite_solution(self, x: ComplexArray, rhs: ComplexArray) -> None:
        """Put infinity into x (n, m, k) in unearthed components that rhs (n, m, k) puts current into, else 0."""
        injected = rhs[self.node, :, self.scenario] != 0
        if not injected.any():
            return
        count, component = self._components
        reached = np.zeros((count, injected.shape[1]), np.bool_)
        np.logical_or.at(reached, component, injected)
        x[self.node, :, self.scenario] = np.where(reached[component], INFINITE, 0.0)

    def overwrite_selected(self, diagonal: ComplexArray, adjacent: ComplexArray) -> None:
        """Put infinity on the diagonal (n, k) and between ends (c, k) in the same unearthed component."""
        diagonal[self.node, self.scenario] = INFINITE
        component = np.full(self.shape, -1)
        component[self.node, self.scenario] = self._components[1]
        here, there = component.take(self.from_node, axis=0), component.take(self.to_node, axis=0)
        adjacent[(here == there) & (here >= 0)] = INFINITE

    @cached_property
    def _components(self) -> tuple[int, IntArray]:
        """Number of unearthed components over all scenarios, and that of each combination (f,)."""
        number = np.full(self.shape, -1)
        number[self.node, self.scenario] = np.arange(len(self.node))
        one, other = number.take(self.from_node, axis=0), number.take(self.to_node, axis=0)
        joined = self.coupled & (one >= 0)
        return _components(len(self.node), one[joined], other[joined])
