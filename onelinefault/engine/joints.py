"""Currents inside a node: in the wires on the sheet and in closed breakers, switches and fuses.

A node of the network is a graph on the sheet: terminals joined by wires and closed devices (joints). What every part
takes out of its terminal is known from the network's solution, so Kirchhoff's current law at each terminal gives the
joints' currents f (from their end a to their end b)::

    Σ f leaving − Σ f arriving = −(current into the part there) − (fault current leaving there) = s

Where the graph is a tree there is one answer: a joint carries the sum of s on its far side. Where closed devices form
rings, Kirchhoff's law leaves a current free in each ring; the split of least Σ f² is taken (joints of equal
resistance). Written for all nodes at once: ``f = G s`` for a spanning forest, G a sparse matrix of ±1, then rings are
levelled::

    f ← f − N (NᵀN)⁻¹ Nᵀ f          N: one column of ±1 for each ring, the joints around it

Source: Kirchhoff 1847; minimum-norm solution of linear equations.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from scipy.sparse import coo_array, csc_array, csr_array
from scipy.sparse.csgraph import breadth_first_order, connected_components
from scipy.sparse.linalg import SuperLU, splu

from onelinefault.engine.network import ComplexArray, IntArray, Joint, TerminalKey
from onelinefault.engine.ordering import BoolArray


@dataclass(frozen=True, eq=False)
class InnerCurrents:
    """The joints of a plant, ready for any currents. Made once for each network.

    wires: wire id → its row among the joints. G (e × t) as above; rings N (e × r); gram: factors of NᵀN, None without
    rings. device_rows: for each closed device its joint's row and those of its terminals a and b.
    """

    wires: Mapping[str, int]
    G: csr_array
    rings: csr_array
    gram: SuperLU | None
    device_rows: IntArray

    @classmethod
    def of(cls, joints: Sequence[Joint], row: Mapping[TerminalKey, int]) -> "InnerCurrents":
        """For these joints between terminals; row: terminal → its row in the arrays of currents."""
        a = np.array([row[joint.a] for joint in joints], np.int64)
        b = np.array([row[joint.b] for joint in joints], np.int64)
        forest = _Forest.of(len(row), a, b)
        rings = _rings(forest, a, b)
        gram = splu(csc_array(rings.T @ rings)) if rings.shape[1] else None
        devices = np.array([number for number, joint in enumerate(joints) if not joint.is_wire], np.int64)
        return cls(
            {joint.id: number for number, joint in enumerate(joints) if joint.is_wire},
            forest.paths().T.tocsr(),
            rings,
            gram,
            np.stack((devices, a[devices], b[devices]), axis=-1),
        )

    def flows(self, into_parts: ComplexArray) -> ComplexArray:
        """Currents of the joints from a to b, shape (e, 3).

        into_parts (t, 3): currents out of the node at each terminal, of parts and fault together; 0 at closed devices.
        """
        flow = _times(self.G, -into_parts)
        if self.gram is not None:
            around = _times(self.rings.T.tocsr(), flow)
            flow = flow - _times(self.rings, self.gram.solve(around.real) + 1j * self.gram.solve(around.imag))
        return flow

    def into_devices(self, flow: ComplexArray, terminals: ComplexArray) -> None:
        """Write the currents into the closed devices at their terminals a and b into ``terminals``, shape (t, 3)."""
        joint, at_a, at_b = self.device_rows.T
        terminals[at_a] = flow[joint]
        terminals[at_b] = -flow[joint]


@dataclass(frozen=True, eq=False)
class _Forest:
    """A breadth-first forest of the graph. parent (t,), joint (t,): towards the root, −1 at roots; sign (t,): +1
    where the joint's end a is at this terminal."""

    parent: IntArray
    joint: IntArray
    sign: IntArray
    n_joints: int

    @classmethod
    def of(cls, n: int, a: IntArray, b: IntArray) -> "_Forest":
        graph = csr_array((np.ones(len(a)), (a, b)), shape=(n, n))
        count, component = connected_components(graph, directed=False)
        degree = np.bincount(a, minlength=n) + np.bincount(b, minlength=n)
        root = np.empty(count, np.int64)
        by_degree = np.argsort(degree, kind="stable")  # the last written, a bus bar as a rule, is the root: short paths
        root[component[by_degree]] = by_degree
        start, goal = np.concatenate((a, b, np.full(count, n))), np.concatenate((b, a, root))
        whole = csr_array((np.ones(len(start)), (start, goal)), shape=(n + 1, n + 1))
        parent = np.asarray(breadth_first_order(whole, n, directed=True)[1][:n], np.int64)
        parent[parent == n] = -1
        key, first = np.unique(np.concatenate((a, b)) * n + np.concatenate((b, a)), return_index=True)
        inner = np.flatnonzero(parent >= 0)
        found = first[np.searchsorted(key, inner * n + parent[inner])]
        joint, sign = np.full(n, -1, np.int64), np.ones(n, np.int64)
        joint[inner] = found % len(a) if len(a) else found
        sign[inner] = np.where(found < len(a), 1, -1)
        return cls(parent, joint, sign, len(a))

    @property
    def chosen(self) -> BoolArray:
        """Which joints are in the forest."""
        chosen = np.zeros(self.n_joints, np.bool_)
        chosen[self.joint[self.joint >= 0]] = True
        return chosen

    def paths(self) -> csr_array:
        """The joints on the way from each terminal to its root, (t × e): +1 where they lead from a to b, else −1."""
        terminal = np.arange(len(self.parent))
        place = terminal
        rows, columns, signs = [], [], []
        while True:
            going = self.parent[place] >= 0
            terminal, place = terminal[going], place[going]
            if not len(place):
                break
            rows.append(terminal)
            columns.append(self.joint[place])
            signs.append(self.sign[place])
            place = self.parent[place]
        shape = (len(self.parent), self.n_joints)
        if not rows:
            return csr_array(shape)
        entries = (np.concatenate(signs).astype(np.float64), (np.concatenate(rows), np.concatenate(columns)))
        return csr_array(coo_array(entries, shape=shape))


def _rings(forest: _Forest, a: IntArray, b: IntArray) -> csr_array:
    """One column for each joint outside the forest: itself from a to b, then the forest's way from b back to a."""
    extra = np.flatnonzero(~forest.chosen)
    if not len(extra):
        return csr_array((len(a), 0))
    paths = forest.paths()
    itself = csr_array((np.ones(len(extra)), (np.arange(len(extra)), extra)), shape=(len(extra), len(a)))
    return csr_array((itself + paths[b[extra]] - paths[a[extra]]).T)


def _times(matrix: csr_array, operand: ComplexArray) -> ComplexArray:
    """A real sparse matrix times a complex array (k, 3), as real products of neighbouring columns."""
    flat = np.ascontiguousarray(operand).view(np.float64)
    product: ComplexArray = np.ascontiguousarray(matrix @ flat).view(np.complex128)
    return product
