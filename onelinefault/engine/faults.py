"""One fault, and faults at many nodes at once, in per unit and sequences.

Seen from the fault the network is a voltage behind an impedance in each sequence (Thévenin), all of it read off
columns of Z = Y⁻¹::

    V_s(k) = E_s(k) − Z_s(kk) I_s          I, V at the fault: ``boundary``
    V_s(i) = E_s(i) − Z_s(ik) I_s          everywhere else, i ≠ k

E is the voltage before the fault (positive sequence only). Converters add their own current to the positive sequence
(``converters``). Where a sequence is open at the fault (no path to earth), I_s = 0 and V_s is the same, by the
ratios, in everything that hangs together there. Source: superposition (Thévenin 1883; Anderson 1973, chapter 3).
"""

from dataclasses import dataclass, field
from functools import cached_property

import numpy as np

from onelinefault.engine.boundary import Boundary
from onelinefault.engine.converters import ConverterGroup, settle
from onelinefault.engine.currents import admittances, branch_currents, has_shunt
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray, Network
from onelinefault.engine.ordering import BoolArray, Pattern, analyse
from onelinefault.engine.prefault import Potentials, Prefault
from onelinefault.engine.solver import Factor, factorise
from onelinefault.engine.solver_earthing import earthed_nodes
from onelinefault.engine.symmetrical import POSITIVE
from onelinefault.errors import SingularNetworkError

LEAK = 1e-6
"""Shunt of a converter on its limit current where nothing else ties an island's positive sequence to a voltage.

Such an island is fed by converters alone. The shunt changes its currents by a millionth.
"""

LOOP_CLOSES = 1e-4
"""Relative voltage left over by a loop of ratios that counts as closed; it would carry less than rounding shows."""

_SEQUENCE_NAMES = ("positive", "negative", "zero")


@dataclass(frozen=True, eq=False)
class Equations:
    """The factored equations of a network. Columns, diagonal and neighbours of Z are worked out on demand and kept."""

    network: Network
    _potentials: dict[int, Potentials] = field(default_factory=dict, init=False, repr=False)

    @cached_property
    def pattern(self) -> Pattern:
        """The symbolic analysis of the network's topology."""
        return analyse(len(self.network.nodes), self.network.from_node, self.network.to_node)

    @cached_property
    def tied(self) -> BoolArray:
        """Which nodes have a path to earth in each sequence, shape (n, 3): by graph, without a threshold on impedances.

        A loop of ratios that does not close ties a voltage too: only zero lets no current flow round it.
        """
        network = self.network
        i, j, there = network.from_node, network.to_node, network.y_series != 0
        tied = earthed_nodes(len(network.nodes), i, j, there, has_shunt(network))
        turned = there & ~tied[i] & (network.ratio != 1)
        for sequence in np.flatnonzero(turned.any(axis=0)):
            V, t = self.potential(int(sequence)), network.ratio[:, sequence]
            loose = there[:, sequence] & (abs(V.ratio[i] - t * V.ratio[j]) > LOOP_CLOSES * abs(V.ratio[i]))
            tied[np.isin(V.component, V.component[i[loose]]), sequence] = True
        return tied

    @cached_property
    def factor(self) -> Factor:
        """The factors of all three sequences. Raises SingularNetworkError naming the place where it failed."""
        diagonal, transfer = admittances(self.network)
        tied = self.tied
        if len(self._weak):
            tied = tied.copy()
            tied[self._weak, POSITIVE] = True
            for converter in self.network.converters:
                if not self.tied[converter.node, POSITIVE]:
                    diagonal[converter.node, POSITIVE] += LEAK * converter.limit_pu
        try:
            return factorise(self.pattern, diagonal, transfer, tied)
        except SingularNetworkError as error:
            raise self._named(error) from error

    @cached_property
    def _weak(self) -> IntArray:
        """Nodes whose positive sequence nothing but converters ties to a voltage."""
        if not self.network.converters:
            return np.zeros(0, np.int64)
        component = self.potential(POSITIVE).component
        fed = np.isin(component, component[self.converters.node])
        return np.flatnonzero(fed & ~self.tied[:, POSITIVE])

    def _named(self, error: SingularNetworkError) -> SingularNetworkError:
        if not 0 <= error.node < len(self.network.nodes):
            return error
        label = self.network.nodes[error.node].label
        return SingularNetworkError(
            f"The {_SEQUENCE_NAMES[error.scenario]}-sequence impedances cancel around {label}: look there for a"
            " negative star leg, a capacitance, or an impedance of zero, and correct it.",
            error.node,
            error.scenario,
        )

    @cached_property
    def converters(self) -> ConverterGroup:
        """The converters' data as arrays."""
        return ConverterGroup.of(self.network)

    @cached_property
    def converter_columns(self) -> ComplexArray:
        """Positive-sequence Z between all nodes and the converters, shape (n, c)."""
        if not self.network.converters:
            return np.zeros((len(self.network.nodes), 0), np.complex128)
        return _closed(self.factor.columns(self.converters.node)[:, :, POSITIVE])

    @cached_property
    def diagonal(self) -> ComplexArray:
        """Impedances seen from each node, shape (n, 3), infinite where open."""
        return self.factor.diagonal()

    @cached_property
    def adjacent(self) -> ComplexArray:
        """Transfer impedances between the ends of each branch, shape (m, 3), 0 where open."""
        return _closed(self.factor.adjacent())

    def potential(self, sequence: int) -> Potentials:
        """Relative voltages of the unloaded network in a sequence."""
        if sequence not in self._potentials:
            self._potentials[sequence] = Potentials.of(self.network, sequence)
        return self._potentials[sequence]

    def spot(self, node: int, prefault: Prefault) -> "Spot":
        """The network as seen from a node."""
        columns = self.factor.columns(np.array([node]))[:, 0, :]
        z = columns[node].copy()
        return Spot(
            node=node,
            z=z,
            columns=_closed(columns),
            follow=self.follow(node, ~np.isfinite(z)),
            before=prefault.everywhere(node),
            emf=complex(prefault.at(np.array([node]))[0]),
            to_converters=self.converter_columns[node],
            converter_columns=self.converter_columns,
        )

    def follow(self, node: int, is_open: BoolArray) -> FloatArray:
        """Voltages of all nodes per volt at this one, shape (n, 3), in the open sequences (3,); 0 in the others."""
        found = np.zeros((len(self.network.nodes), 3))
        for sequence in np.flatnonzero(is_open):
            found[:, sequence] = self.potential(int(sequence)).seen_from(node)
        return found


@dataclass(frozen=True, eq=False)
class Spot:
    """Where a fault is, and the network as seen from there, per unit.

    node: whose bases hold there. z (3,): infinite where open. columns (n, 3): transfer impedances, 0 where open.
    follow (n, 3): voltages per volt at the fault where open, else 0. before (n,): positive-sequence voltages before
    the fault; emf: that at the fault itself. to_converters (c,), converter_columns (n, c): positive-sequence transfer
    impedances.
    """

    node: int
    z: ComplexArray
    columns: ComplexArray
    follow: FloatArray
    before: ComplexArray
    emf: complex
    to_converters: ComplexArray
    converter_columns: ComplexArray


@dataclass(frozen=True, eq=False)
class Solution:
    """A solved fault in per unit: current (3,) into the fault and voltage (3,) at it; change (n, 3): of all voltages.

    converters (c,): currents they feed. settled (c,): whether each converter's current came to rest.
    """

    current: ComplexArray
    voltage: ComplexArray
    change: ComplexArray
    converters: ComplexArray
    settled: BoolArray


def solve_fault(equations: Equations, spot: Spot, boundary: Boundary) -> Solution:
    """The fault described by ``boundary`` (per unit) at the spot; arrays as in Solution, changes of shape (n, 3)."""
    group = equations.converters
    fed = settle(
        group,
        boundary,
        emf=np.array([spot.emf]),
        z=spot.z[None],
        to_converters=spot.to_converters[None],
        between=spot.converter_columns[group.node],
        before=spot.before[group.node][None],
    )
    current, voltage = fed.current[0], fed.voltage[0]
    change = spot.follow * voltage - spot.columns * current
    if group.count:
        change[:, POSITIVE] += spot.converter_columns @ fed.converters[0]
    return Solution(current, voltage, change, fed.converters[0], fed.settled[0])


@dataclass(frozen=True, eq=False)
class Solutions:
    """Faults of one kind at k nodes in per unit: nodes (k,); current, voltage, z (k, 3); emf (k,).

    through (k,): the impedance that the current flows through, E1/I1 without the converters, infinite where none flows.
    converters, settled (k, c) as in Solution.
    """

    nodes: IntArray
    emf: ComplexArray
    z: ComplexArray
    current: ComplexArray
    voltage: ComplexArray
    through: ComplexArray
    converters: ComplexArray
    settled: BoolArray


def solve_everywhere(equations: Equations, prefault: Prefault, nodes: IntArray, boundary: Boundary) -> Solutions:
    """The same fault at each of the nodes (k,), one at a time; arrays as in Solutions, shape (k, 3) mostly."""
    group, z, emf = equations.converters, equations.diagonal[nodes], prefault.at(nodes)
    fed = settle(
        group,
        boundary,
        emf=emf,
        z=z,
        to_converters=equations.converter_columns[nodes],
        between=equations.converter_columns[group.node],
        before=prefault.at_others(nodes, group.node),
    )
    z = np.where(equations.tied[nodes], z, np.inf)
    through = impedance_through(boundary, z)
    return Solutions(nodes, emf, z, fed.current, fed.voltage, through, fed.converters, fed.settled)


def impedance_through(boundary: Boundary, z: ComplexArray) -> ComplexArray:
    """The impedance a fault's positive-sequence current flows through, E1/I1, shape (k,) for z (k, 3).

    Three-phase Z1 + Zf, line-to-line Z1 + Z2 + Zf, line-to-earth Z1 + Z2 + Z0 + 3(Zf + Zg), two lines to earth
    Z1 + Zf + (Z2 + Zf) ∥ (Z0 + Zf + 3 Zg). Infinite where no current flows. X/R of a fault is the X/R of this.
    """
    current = boundary.solve(np.ones(z.shape[:-1], np.complex128), z)[0][..., POSITIVE]
    flows = abs(current) > 0
    return np.divide(1.0, current, out=np.full(current.shape, np.inf, np.complex128), where=flows)


def currents_next_to_faults(equations: Equations, everywhere: Solutions) -> tuple[ComplexArray, ComplexArray]:
    """For faults at all nodes in order: what each branch takes out of the faulted node, at both its ends, (m, 3) each.

    The first is the current into the branch at its from end for a fault at its from node, the second the same at its to
    end; what the branch feeds into the fault is the negative. Sequences, per unit, the balancing currents before the
    fault not counted. Needs no more than Z between neighbours.
    """
    network, adjacent = equations.network, equations.adjacent
    own = -_closed(equations.diagonal) * everywhere.current
    from_node, to_node = network.from_node, network.to_node
    near_from, near_to = own[from_node], own[to_node]
    far_to, far_from = -adjacent * everywhere.current[from_node], -adjacent * everywhere.current[to_node]
    if equations.converters.count:
        C, J = equations.converter_columns, everywhere.converters
        for change, place, fault in (
            (near_from, from_node, from_node),
            (far_to, to_node, from_node),
            (near_to, to_node, to_node),
            (far_from, from_node, to_node),
        ):
            change[:, POSITIVE] += (C[place] * J[fault]).sum(axis=1)
    return branch_currents(network, near_from, far_to)[0], branch_currents(network, far_from, near_to)[1]


def _closed(z: ComplexArray) -> ComplexArray:
    """Transfer impedances with 0 for infinity: through an open sequence flows no current."""
    return np.where(np.isfinite(z), z, 0.0)
