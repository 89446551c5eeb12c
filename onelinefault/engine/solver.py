"""The numerical heart: solutions and chosen entries of the inverse of sparse, complex symmetric admittance matrices.

Every fault calculation asks for entries of Z = Y⁻¹: the driving-point impedance Z_kk of the faulted node, the column
Z e_k for the voltages of all nodes, or, for faults at *every* node with the currents next to each fault, all Z_kk and
the Z_ij of all branches. Z itself is full; these entries can be had without the others.

**Factors.** Symmetric Gauss elimination, which is the star-mesh transformation: for a pivot v with couplings C_a = Y_va
to its remaining neighbours a::

    d = Y_vv     S_a = C_a / d     Y_ab ← Y_ab − C_a S_b     for all neighbours a, b

which is Y = L D Lᵀ with L_av = S_a. Y is symmetric and not Hermitian (real ratios, phase displacement kept apart):
nothing is conjugated. ``ordering`` says which pivots go together (a level) and where each number stands; what is left
at the end (the dense top) is inverted by LAPACK.

**Solving.** Y x = b: up the levels b_a ← b_a − S_a b_v, then x = b / d (top: its inverse), then down the levels
x_v ← x_v − Σ S_a x_a.

**Selected inversion.** The same recursion with matrices. With Z known for all later nodes, for pivot v::

    Z_va = − Σ_b Z_ab S_b        Z_vv = 1/d − Σ_a S_a Z_va

Only Z_ab between neighbours of one pivot is asked for, and those pairs have a slot each: the elimination itself has
coupled them. So going down the levels gives Z exactly on the diagonal and on every coupling, for the price of the
factors (Takahashi, Fagan, Chin, "Formation of a sparse bus impedance matrix", 1973).

**Scenarios.** The last axis of every array carries the matrices that share the topology: three sequences, or three
times the running arrangements. All are done in the same array operations. A coupling that a scenario does not have is
0 there.

**Nodes without a path to earth** in a scenario (behind deltas in the zero sequence) make Y singular. They are left out
exactly: the caller marks them (``earthed_nodes``), their equations become x = b, and afterwards every Z between nodes
of the same unearthed component is reported as complex infinity, between different components as 0. There is no small
"leak" shunt, which would cost half the digits.

**Pivots** are not searched for. With passive branches none can be small, but negative star legs and capacitances can
cancel. So every factorisation is checked (``MAX_PIVOT_LOSS``, ``MAX_MULTIPLIER``), and a scenario that fails is solved
by sparse LU with pivoting instead (``solver_pivoting``): slower, same answers; ``Factor.pivot_fallback`` tells.

Units: the caller's (per unit as a rule); Y and Z are reciprocal.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from onelinefault.engine.ordering import BoolArray, ComplexArray, FloatArray, IntArray, Pattern
from onelinefault.engine.solver_dense import invert_symmetric
from onelinefault.engine.solver_earthing import UnearthedNodes, earthed_nodes
from onelinefault.engine.solver_pivoting import PivotedMatrix
from onelinefault.errors import SingularNetworkError

__all__ = ["Factor", "earthed_nodes", "factorise"]

MAX_PIVOT_LOSS = 1e10
"""Largest |original diagonal / pivot|: beyond it a pivot is taken for what rounding left of an exact cancellation."""

MAX_MULTIPLIER = 100.0
"""Largest |S_a|. At most about √2 with resistances and reactances, beyond 1 only by cancellation; 100 costs two to four
digits at worst, as the threshold pivoting of sparse solvers allows (common practice)."""


@dataclass(frozen=True, eq=False)
class Factor:
    """Factors of k matrices with one pattern. Made by ``factorise``.

    multiplier (n_slots, k): S of each eliminated coupling. inverse_pivot (n, k): 1/d at each place, in the top the
    diagonal of its inverse. top_inverse (k, t, t). unearthed: the nodes left out, None if there are none. pivoted: the
    scenarios that needed pivoting; the other fields are 0 there.
    """

    pattern: Pattern
    multiplier: ComplexArray
    inverse_pivot: ComplexArray
    top_inverse: ComplexArray
    unearthed: UnearthedNodes | None
    pivoted: Mapping[int, PivotedMatrix]

    @property
    def n_scenarios(self) -> int:
        """Number of matrices k."""
        return len(self.top_inverse)

    @property
    def pivot_fallback(self) -> tuple[bool, ...]:
        """For each scenario whether it needed the slower factorisation with pivoting."""
        return tuple(s in self.pivoted for s in range(self.n_scenarios))

    def solve(self, rhs: ComplexArray) -> ComplexArray:
        """Solve Y x = rhs (voltages for node currents). Gives x (n, m, k).

        rhs: shape (n, m, k), or (n, m) for the same in all scenarios.
        In a component without a path to earth x is complex infinity wherever any current is injected into that
        component and 0 otherwise.
        """
        pattern, k = self.pattern, self.n_scenarios
        b = np.asarray(rhs, np.complex128)
        b = np.broadcast_to(b[:, :, None] if b.ndim == 2 else b, (pattern.n_nodes, b.shape[1], k))
        x = self._substitute(b.take(pattern.order, axis=0)).take(pattern.place, axis=0)
        for s, matrix in self.pivoted.items():
            x[:, :, s] = matrix.solve(b[:, :, s])
        if self.unearthed is not None:
            self.unearthed.overwrite_solution(x, b)
        return x

    def columns(self, nodes: IntArray) -> ComplexArray:
        """The columns Z e_j of the inverse for these m nodes j, shape (n, m, k): voltages for a unit current at node j.

        Unearthed nodes: infinity within the same unearthed component, 0 to all others.
        """
        chosen = np.asarray(nodes, np.int64).ravel()
        unit = np.zeros((self.pattern.n_nodes, len(chosen)), np.complex128)
        unit[chosen, np.arange(len(chosen))] = 1.0
        return self.solve(unit)

    def diagonal(self) -> ComplexArray:
        """Driving-point impedances Z_jj of all nodes, shape (n, k), read-only; infinity at unearthed nodes."""
        return self._selected[0]

    def adjacent(self) -> ComplexArray:
        """Transfer impedances Z_ij between the ends of every coupling, in the order given to ``analyse``, shape (c, k).

        Read-only. Also where the coupling is 0 in a scenario. Unearthed nodes: infinity if both ends belong to the same
        unearthed component, else 0.
        """
        return self._selected[1]

    @cached_property
    def _selected(self) -> tuple[ComplexArray, ComplexArray]:
        pattern = self.pattern
        selected = self._selected_inverse()
        diagonal, adjacent = selected.take(pattern.place, axis=0), selected.take(pattern.coupling_slot, axis=0)
        for s, matrix in self.pivoted.items():
            diagonal[:, s], adjacent[:, s] = matrix.selected_inverse(pattern.from_node, pattern.to_node)
        if self.unearthed is not None:
            self.unearthed.overwrite_selected(diagonal, adjacent)
        diagonal.flags.writeable = adjacent.flags.writeable = False  # they are handed out without copying
        return diagonal, adjacent

    def _substitute(self, x: ComplexArray) -> ComplexArray:
        """Forward and back substitution in place; x (n, m, k) by places."""
        pattern, top = self.pattern, self.pattern.top
        multiplier = self.multiplier[:, None, :]
        for level in pattern.levels:
            S = multiplier[level.slots]
            x[level.pivots.stop :] -= level.onto_neighbours @ (S * x[level.pivots].take(level.owner, axis=0))
        x[:top] *= self.inverse_pivot[:top, None, :]
        x[top:] = (self.top_inverse @ x[top:].transpose(2, 0, 1)).transpose(1, 2, 0)
        for level in reversed(pattern.levels):
            S = multiplier[level.slots]
            x[level.pivots] -= level.onto_pivots @ (S * x.take(level.neighbour, axis=0))
        return x

    def _selected_inverse(self) -> ComplexArray:
        """Z on the diagonal by places, followed by Z on every slot, shape (n + n_slots, k)."""
        pattern = self.pattern
        selected = np.concatenate((self.inverse_pivot, self.multiplier))  # the right shape; the slots are overwritten
        own, mutual = selected[: pattern.n_nodes], selected[pattern.n_nodes :]
        mutual[pattern.top_slots] = self.top_inverse[:, pattern.top_row, pattern.top_column].T
        for level in reversed(pattern.levels):
            S = self.multiplier[level.slots]
            weighted = S * own.take(level.neighbour, axis=0)
            if len(level.partner):
                between = mutual.take(level.partner_slot, axis=0)
                weighted += level.onto_partnered @ (between * S.take(level.partner, axis=0))
            mutual[level.slots] = -weighted
            own[level.pivots] += level.onto_pivots @ (S * weighted)
        return selected


def factorise(
    pattern: Pattern, diagonal: ComplexArray, off_diagonal: ComplexArray, earthed: BoolArray | None = None
) -> Factor:
    """Factors of k complex symmetric matrices on this pattern.

    diagonal (n, k): the sum of the admittances at each node. off_diagonal (c, k): the entry Y_ij of each coupling
    given to ``analyse`` (−y/t of a branch), 0 where a scenario lacks it; parallel ones are summed. earthed (n, k),
    default all: see ``earthed_nodes``; nodes that are not earthed are left out, whatever their values.

    Raises StudyError (SingularNetworkError) if a matrix is singular in spite of pivoting; ValueError for wrong shapes.
    Source: L D Lᵀ and star-mesh elimination, see the module's text.
    """
    _check_shapes(pattern, diagonal, off_diagonal, earthed)
    own = np.asarray(diagonal, np.complex128)
    mutual = np.asarray(off_diagonal, np.complex128)
    unearthed = None
    if earthed is not None:
        unearthed = UnearthedNodes.of(earthed, pattern.from_node, pattern.to_node, mutual != 0)
    if unearthed is not None:
        own, mutual = unearthed.separate(own, mutual)
    with np.errstate(all="ignore"):  # bad pivots are looked for afterwards
        multiplier, inverse_pivot, top_inverse, trusted = _eliminate(pattern, own, mutual)
    pivoted = {int(s): _pivoted(pattern, own, mutual, inverse_pivot, int(s)) for s in np.flatnonzero(~trusted)}
    for s in pivoted:
        multiplier[:, s], inverse_pivot[:, s], top_inverse[s] = 0.0, 0.0, 0.0
    return Factor(pattern, multiplier, inverse_pivot, top_inverse, unearthed, pivoted)


def _eliminate(
    pattern: Pattern, diagonal: ComplexArray, off_diagonal: ComplexArray
) -> tuple[ComplexArray, ComplexArray, ComplexArray, BoolArray]:
    """L D Lᵀ: multiplier, inverse_pivot, top_inverse as in Factor, and whether each scenario can be trusted, (k,)."""
    n, top = pattern.n_nodes, pattern.top
    stamped = pattern.stamp @ np.concatenate((diagonal, off_diagonal))
    own, mutual = stamped[:n], stamped[n:]
    original, inverse_pivot = own.copy(), np.empty_like(own)
    for level in pattern.levels:
        inverse_pivot[level.pivots] = 1.0 / own[level.pivots]
        C = mutual[level.slots]
        S = C * inverse_pivot[level.pivots].take(level.owner, axis=0)
        own[level.pivots.stop :] -= level.onto_neighbours @ (C * S)
        if len(level.pair_a):
            star_mesh = C.take(level.pair_a, axis=0) * S.take(level.pair_b, axis=0)
            mutual[level.slots.stop :] -= level.onto_pair_slots @ star_mesh
        mutual[level.slots] = S
    top_inverse, top_growth = _invert_top(pattern, own[top:], mutual[pattern.top_slots])
    inverse_pivot[top:] = np.diagonal(top_inverse, axis1=1, axis2=2).T
    growth = np.maximum(top_growth, _largest(mutual[: pattern.top_slots.start]))
    trusted = (_largest(original * inverse_pivot) < MAX_PIVOT_LOSS) & (growth < MAX_MULTIPLIER)
    return mutual, inverse_pivot, top_inverse, trusted


def _invert_top(pattern: Pattern, own: ComplexArray, mutual: ComplexArray) -> tuple[ComplexArray, FloatArray]:
    """Inverse of what is left, shape (k, t, t), and its largest multipliers, shape (k,)."""
    size, k = own.shape
    dense = np.zeros((k, size, size), np.complex128)
    dense[:, np.arange(size), np.arange(size)] = own.T
    dense[:, pattern.top_row, pattern.top_column] = mutual.T
    dense[:, pattern.top_column, pattern.top_row] = mutual.T
    return invert_symmetric(dense)


def _largest(values: ComplexArray) -> FloatArray:
    """Largest real or imaginary part in each scenario, shape (k,); not-a-number if any is."""
    parts: FloatArray = np.abs(values.view(np.float64)).max(axis=0, initial=0.0)
    return np.maximum(parts[0::2], parts[1::2])


def _pivoted(
    pattern: Pattern, diagonal: ComplexArray, off_diagonal: ComplexArray, inverse_pivot: ComplexArray, scenario: int
) -> PivotedMatrix:
    """The scenario with pivoting; its error says near which node the elimination failed."""
    try:
        return PivotedMatrix.of(pattern.from_node, pattern.to_node, diagonal[:, scenario], off_diagonal[:, scenario])
    except SingularNetworkError as error:
        with np.errstate(all="ignore"):
            loss = np.abs(inverse_pivot[:, scenario] * diagonal[pattern.order, scenario])
        node = int(pattern.order[np.argmax(np.where(np.isfinite(loss), loss, np.inf))])
        raise SingularNetworkError(
            f"No single solution of the network in matrix {scenario + 1}: {error}. Look at the parts at node {node}:"
            " a negative star leg or a capacitance may cancel another impedance, or an impedance may be zero.",
            node=node,
            scenario=scenario,
        ) from error


def _check_shapes(
    pattern: Pattern, diagonal: ComplexArray, off_diagonal: ComplexArray, earthed: BoolArray | None
) -> None:
    k = diagonal.shape[1] if diagonal.ndim == 2 else 0
    if k < 1 or diagonal.shape != (pattern.n_nodes, k) or off_diagonal.shape != (pattern.n_couplings, k):
        raise ValueError("diagonal must be (nodes, scenarios) and off_diagonal (couplings, scenarios)")
    if earthed is not None and earthed.shape != diagonal.shape:
        raise ValueError("earthed must be (nodes, scenarios)")
