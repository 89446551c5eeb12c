"""A fault part of the way along a cable, a line or a busway: the branch is split there, by a low-rank change.

With x the fraction from the from end i, the branch becomes two, and the fault point m a node between them::

    i ──(t:1)── y/x ── m ── y/(1−x) ── j

Each piece is a pi section of its own length, with x and 1−x of the branch's shunts (exact enough: the lengths of plant
cables and lines are far below a wavelength).

Eliminating m again leaves a branch between i and j. Without charging it is the branch that was there, and nothing
else has changed, so all impedances of the network stand. With charging it differs a little, and the 2 × 2 difference
D is put in by Woodbury's formula, ``Z' = Z − Z_:q (1 + D Z_qq)⁻¹ D Z_q:`` with q = (i, j). A current at m acts as the
shares w of it at i and j (the division of the pieces)::

    z_m = Z'_:q w        z_mm = 1/Y_mm + wᵀ Z'_qq w        w = −Y_mq / Y_mm

No new factorisation. Parallel circuits are one branch already, so the fault hits all of them at the same place.
Source: Kron's reduction; Woodbury 1950.
"""

from dataclasses import dataclass

import numpy as np

from onelinefault.engine.faults import Equations, Solution, Spot
from onelinefault.engine.network import ComplexArray, Network
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.symmetrical import POSITIVE


@dataclass(frozen=True, eq=False)
class SplitBranch:
    """A branch in two pieces. All arrays by sequence, shape (3, ...).

    ends: nodes i and j. piece_from, piece_to (3, 2, 2): admittances of the pieces between (i, m) and (m, j). shares
    (3, 2): w above. y_point (3,): Y_mm. difference (3, 2, 2): D above, exactly 0 without charging.
    """

    branch: int
    ends: tuple[int, int]
    piece_from: ComplexArray
    piece_to: ComplexArray
    shares: ComplexArray
    y_point: ComplexArray
    difference: ComplexArray

    @classmethod
    def of(cls, network: Network, branch: int, fraction: float) -> "SplitBranch":
        """The branch split at a fraction between 0 and 1, both excluded."""
        x, t, y = fraction, network.ratio[branch].astype(np.complex128), network.y_series[branch]
        y_from, y_to = network.y_from[branch], network.y_to[branch]
        first = _pi_section(t, y / x, x * y_from, x * y_to)
        second = _pi_section(np.ones(3, np.complex128), y / (1 - x), (1 - x) * t**2 * y_from, (1 - x) * y_to)
        y_point = first[:, 1, 1] + second[:, 0, 0]
        out = np.stack((first[:, 0, 1], second[:, 1, 0]), axis=-1)
        shares = -np.divide(out, y_point[:, None], out=np.zeros((3, 2), np.complex128), where=y_point[:, None] != 0)
        reduced = out[:, :, None] * shares[:, None, :]
        reduced[:, 0, 0] += first[:, 0, 0]
        reduced[:, 1, 1] += second[:, 1, 1]
        charged = ((y_from != 0) | (y_to != 0))[:, None, None]
        difference = np.where(charged, reduced - _pi_section(t, y, y_from, y_to), 0.0)
        ends = (int(network.from_node[branch]), int(network.to_node[branch]))
        return cls(branch, ends, first, second, shares, y_point, difference)

    def updated(self, columns: ComplexArray, of_ends: ComplexArray) -> ComplexArray:
        """Columns of Z, shape (n, k, 3), after the change; of_ends (n, 2, 3): those of the nodes i and j before it."""
        changed = columns.copy()
        ends = list(self.ends)
        for s in np.flatnonzero(self.difference.any(axis=(1, 2))):
            Z, D = of_ends[:, :, s], self.difference[s]
            changed[:, :, s] -= Z @ np.linalg.solve(np.eye(2) + D @ Z[ends], D @ columns[ends, :, s])
        return changed

    def piece_currents(self, at_from: ComplexArray, at_point: ComplexArray, at_to: ComplexArray) -> ComplexArray:
        """Currents into the pieces at i and at j, shape (2, 3), of the voltages (3,) at i, m and j."""
        first = np.einsum("sa,as->s", self.piece_from[:, 0], np.stack((at_from, at_point)))
        second = np.einsum("sa,as->s", self.piece_to[:, 1], np.stack((at_point, at_to)))
        return np.stack((first, second))


def spot_along(equations: Equations, split: SplitBranch, prefault: Prefault, fraction: float) -> Spot:
    """The network as seen from the point of the split, shapes as in Spot, (n, 3). ``node`` is the nearer end."""
    group = equations.converters
    of_ends = equations.factor.columns(np.array(split.ends))
    apart = equations.network.y_series[split.branch] == 0  # the point hangs on its own charging, if on anything
    is_open = np.where(apart, split.y_point == 0, ~np.isfinite(of_ends[split.ends[0], 0]))
    closed = np.where(np.isfinite(of_ends), of_ends, 0.0)
    columns_of_ends = split.updated(closed, closed)
    columns = np.einsum("nqs,sq->ns", columns_of_ends, split.shares)
    alone = np.divide(1.0, split.y_point, out=np.zeros(3, np.complex128), where=split.y_point != 0)
    z = alone + np.einsum("qs,sq->s", columns[list(split.ends)], split.shares)
    z[is_open] = np.inf
    follow = equations.follow(split.ends[1], is_open)
    follow[:, apart] = 0.0
    to_all = np.zeros((*equations.converter_columns.shape, 3), np.complex128)
    to_all[:, :, POSITIVE] = equations.converter_columns
    converter_columns = split.updated(to_all, closed)[:, :, POSITIVE]
    before = _before(split, prefault, closed)
    nominal = prefault.factor[split.ends[1]]
    emf = nominal if prefault.no_load is None else before[list(split.ends)] @ split.shares[POSITIVE]
    return Spot(
        node=split.ends[0] if fraction <= 0.5 else split.ends[1],
        z=z,
        columns=columns,
        follow=follow,
        before=before,
        emf=complex(emf),
        to_converters=columns[group.node, POSITIVE],
        converter_columns=converter_columns,
    )


def _before(split: SplitBranch, prefault: Prefault, of_ends: ComplexArray) -> ComplexArray:
    """Voltages before the fault, shape (n,): the point is at the potential of the branch's inner side (of node j)."""
    before = prefault.everywhere(split.ends[1])
    if prefault.no_load is None:
        return before
    solved = np.zeros((len(before), 1, 3), np.complex128)
    solved[:, 0, POSITIVE] = before
    return split.updated(solved, of_ends)[:, 0, POSITIVE]


def point_currents(split: SplitBranch, spot: Spot, solution: Solution, balancing: bool) -> ComplexArray:
    """Currents into the faulted branch at its from and to end, shape (2, 3), per unit.

    balancing: whether what flows before the fault is counted (no-load voltages).
    """
    point = solution.voltage.copy()
    at_from, at_to = (solution.change[end].copy() for end in split.ends)
    if balancing:
        at_from[POSITIVE] += spot.before[split.ends[0]]
        at_to[POSITIVE] += spot.before[split.ends[1]]
    else:
        point[POSITIVE] -= spot.emf
    return split.piece_currents(at_from, point, at_to)


def _pi_section(t: ComplexArray, y: ComplexArray, y_from: ComplexArray, y_to: ComplexArray) -> ComplexArray:
    """Admittances (3, 2, 2) of a branch as in ``network``."""
    mutual = -y / t
    rows = (np.stack((y / t**2 + y_from, mutual), -1), np.stack((mutual, y + y_to), -1))
    return np.stack(rows, axis=-2)
