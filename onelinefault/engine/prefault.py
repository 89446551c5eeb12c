"""The voltages before the fault: the plant unloaded, ratios followed from node to node.

**nominal** (the classical method): the voltage at the fault is nominal times the plant's factor, and everywhere else
it is what lets the unloaded network carry no current: V_i = t·V_j along every branch. Nothing flows before the fault,
also no charging current: that is in the results only as far as the fault changes it.

**no-load**: Y1 V = Σ y E over the sources that set a voltage (supplies and generators, each with its emf at its nominal
voltage times the factor); taps and off-nominal ratios then show in V. Motors run at the voltage they find and feed no
current before the fault. Sources of different no-load voltage drive a balancing current, which the results contain.

Where the ratios around a loop do not close, the voltages along one spanning tree are taken (a finding names the
transformers). Source: superposition, IEC 60909-0 clause 4 in its classical form (voltage behind each source).
"""

from collections.abc import Collection, Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from scipy.sparse import csr_array
from scipy.sparse.csgraph import breadth_first_order, connected_components

from onelinefault.engine.currents import admittances, has_shunt
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray, Network
from onelinefault.engine.ordering import BoolArray, Pattern
from onelinefault.engine.solver import factorise
from onelinefault.engine.solver_earthing import earthed_nodes
from onelinefault.engine.symmetrical import POSITIVE


@dataclass(frozen=True, eq=False)
class Potentials:
    """Relative voltages of an unloaded sequence network. ratio (n,): V of each node over V of its component's root.

    component (n,): which nodes hang together in this sequence. root (components,): the node at ratio 1.
    """

    ratio: FloatArray
    component: IntArray
    root: IntArray

    @classmethod
    def of(cls, network: Network, sequence: int, wanted_roots: Sequence[int] = ()) -> "Potentials":
        """Potentials of one sequence; a component's root is the first of the wanted roots that lies in it, or any
        node."""
        n = len(network.nodes)
        there = np.flatnonzero((network.y_series[:, sequence] != 0) & (network.from_node != network.to_node))
        one, other, t = network.from_node[there], network.to_node[there], network.ratio[there, sequence]
        graph = csr_array((np.ones(len(one)), (one, other)), shape=(n, n))
        count, found = connected_components(graph, directed=False)
        component = np.asarray(found, np.int64)
        root = np.full(count, -1, np.int64)
        for nodes in (np.arange(n)[::-1], np.array(wanted_roots, np.int64)[::-1]):
            root[component[nodes]] = nodes
        if (t == 1.0).all():
            return cls(np.ones(n), component, root)
        return cls(_along_tree(n, one, other, t, root), component, root)

    def seen_from(self, node: int) -> FloatArray:
        """Voltage of every node for one volt at this one, no current flowing, shape (n,); 0 outside its component."""
        same = self.component == self.component[node]
        return np.where(same, self.ratio / self.ratio[node], 0.0)


def _along_tree(n: int, one: IntArray, other: IntArray, t: FloatArray, root: IntArray) -> FloatArray:
    """Products of the ratios along a breadth-first tree from each component's root; V_one = t · V_other."""
    start, goal = np.concatenate((one, other)), np.concatenate((other, one))
    step = np.concatenate((1.0 / t, t))  # V_goal / V_start
    key, chosen = np.unique(start * n + goal, return_index=True)  # of parallel branches the first
    start, goal, step = start[chosen], goal[chosen], step[chosen]
    above = np.full(len(root), n)  # a node above all roots makes the forest one tree
    edges = (np.ones(len(start) + len(root)), (np.concatenate((start, above)), np.concatenate((goal, root))))
    _, predecessors = breadth_first_order(csr_array(edges, shape=(n + 1, n + 1)), n, directed=True)
    parent = np.asarray(predecessors[:n], np.int64)
    ratio = np.ones(n + 1)
    inner = np.flatnonzero(parent < n)
    ratio[inner] = step[np.searchsorted(key, parent[inner] * n + inner)]
    ancestor = np.append(parent, n)
    while (ancestor < n).any():  # pointer doubling: twice as far up the tree each time
        ratio, ancestor = ratio * ratio[ancestor], ancestor[ancestor]
    return ratio[:n]


@dataclass(frozen=True, eq=False)
class Prefault:
    """Positive-sequence voltages before a fault, per unit.

    factor (n,): multiple of nominal at a fault at each node, or of every emf.

    no_load (n,): solved voltages, None in the nominal way. emf (s,): voltage behind each shunt in the no-load way.
    """

    network: Network
    factor: FloatArray
    potentials: Potentials
    no_load: ComplexArray | None = None
    emf: ComplexArray | None = None

    @classmethod
    def nominal(cls, network: Network, factor: float) -> "Prefault":
        """The nominal way, see the module's text. Islands other than the fault's stand at the factor at a source.

        Where the method says what drives a fault, that goes before the plant's factor.
        """
        feeding = [source.node for source in network.sources] + [c.node for c in network.converters]
        factors = np.full(len(network.nodes), factor) if network.driving is None else network.driving
        return cls(network, factors, Potentials.of(network, POSITIVE, feeding))

    @classmethod
    def from_sources(cls, network: Network, factor: float, pattern: Pattern, motors: Collection[str]) -> "Prefault":
        """The no-load way. motors: parts that set no voltage, unless nothing else in their island does.

        Raises SingularNetworkError if the unloaded network has no single solution.
        """
        nominal = cls.nominal(network, factor)
        driving = _driving(network, motors)
        is_source = np.zeros(len(network.shunt_node), np.bool_)
        is_source[[source.shunt for source in network.sources]] = True
        y = np.where(is_source & ~driving, 0.0, network.y_shunt[:, POSITIVE])
        unloaded = replace(network, y_shunt=np.repeat(y[:, None], 3, axis=1))
        diagonal, transfer = (a[:, :1] for a in admittances(unloaded))
        earthed = earthed_nodes(
            len(network.nodes), network.from_node, network.to_node, transfer != 0, has_shunt(unloaded)[:, :1]
        )
        injected = np.zeros((len(network.nodes), 1), np.complex128)
        np.add.at(injected[:, 0], network.shunt_node, np.where(driving, y * factor, 0.0))
        solved = factorise(pattern, diagonal, transfer, earthed).solve(injected)[:, 0, 0]
        voltage = np.where(earthed[:, 0], solved, nominal._anywhere)
        emf = np.where(driving, factor, np.where(is_source, voltage[network.shunt_node], 0.0))
        return cls(network, nominal.factor, nominal.potentials, voltage, emf)

    @cached_property
    def _anywhere(self) -> ComplexArray:
        """Nominal voltages with every component's root at the factor, shape (n,)."""
        factor = self.factor[self.potentials.root[self.potentials.component]]
        return np.where(self.network.live, factor * self.potentials.ratio, 0.0).astype(np.complex128)

    def at(self, nodes: IntArray) -> ComplexArray:
        """The voltage at each of these nodes for a fault there, shape (k,)."""
        if self.no_load is not None:
            solved: ComplexArray = self.no_load[nodes]
            return solved
        return np.where(self.network.live[nodes], self.factor[nodes], 0.0).astype(np.complex128)

    def at_others(self, nodes: IntArray, others: IntArray) -> ComplexArray:
        """The voltage at each other node for a fault at each node, shape (k, o)."""
        if self.no_load is not None:
            return np.broadcast_to(self.no_load[others], (len(nodes), len(others)))
        component, ratio = self.potentials.component, self.potentials.ratio
        same = (component[nodes][:, None] == component[others]) & self.network.live[others]
        voltage: ComplexArray = np.where(
            same, self.factor[nodes][:, None] * ratio[others] / ratio[nodes][:, None], self._anywhere[others]
        )
        return voltage

    def everywhere(self, node: int) -> ComplexArray:
        """The voltages of all nodes for a fault at this one, shape (n,)."""
        voltage: ComplexArray = self.at_others(np.array([node]), np.arange(len(self.network.nodes)))[0]
        return voltage


def _driving(network: Network, motors: Collection[str]) -> BoolArray:
    """Which shunts set the no-load voltage, shape (s,): supplies and generators, motors where an island has no
    other."""
    shunt = np.array([source.shunt for source in network.sources], np.int64)
    island = network.island[network.shunt_node[shunt]]
    sets = np.array([source.part not in motors for source in network.sources], np.bool_)
    sets |= ~np.isin(island, island[sets])
    driving = np.zeros(len(network.shunt_node), np.bool_)
    driving[shunt[sets]] = True
    return driving
