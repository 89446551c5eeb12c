"""One matrix solved by sparse LU with pivoting: the slower way for the few matrices that the fast way must not touch.

Negative star legs, series capacitors and charging can make a pivot of the symmetric elimination vanish although the
matrix is regular. Partial pivoting (SuperLU) does not mind. Entries of the inverse come from unit vectors, in blocks.
"""

from dataclasses import dataclass

import numpy as np
from scipy.sparse import csc_array
from scipy.sparse.linalg import LinearOperator, SuperLU, onenormest, splu

from onelinefault.engine.ordering import ComplexArray, FloatArray, IntArray
from onelinefault.errors import SingularNetworkError

BLOCK = 64
"""Unit vectors solved at once: 16 to 64 was the quickest."""

MAX_CONDITION = 1e13
"""Largest condition number of the equilibrated matrix: beyond it fewer than three digits would be left."""


@dataclass(frozen=True, eq=False)
class PivotedMatrix:
    """LU factors with pivoting of the matrix scaled on both sides by ``scale`` (n,), so that units do not matter."""

    lu: SuperLU
    scale: FloatArray

    @classmethod
    def of(
        cls, from_node: IntArray, to_node: IntArray, diagonal: ComplexArray, off_diagonal: ComplexArray
    ) -> "PivotedMatrix":
        """Factor the matrix with this diagonal (n,) and these entries (c,) at from–to and to–from, duplicates summed.

        Raises SingularNetworkError if it is singular, or singular for all practical purposes, or not finite.
        """
        n = len(diagonal)
        node = np.arange(n)
        rows, cols = np.concatenate((node, from_node, to_node)), np.concatenate((node, to_node, from_node))
        matrix = csc_array((np.concatenate((diagonal, off_diagonal, off_diagonal)), (rows, cols)), shape=(n, n))
        largest = abs(matrix).max(axis=1).toarray().ravel()
        if not (np.isfinite(largest).all() and largest.all()):
            raise SingularNetworkError("an admittance of the network is infinite, or a node has none at all")
        scale = 1.0 / np.sqrt(largest)
        scaled = csc_array(matrix * scale[:, None] * scale[None, :])
        try:
            lu = splu(scaled, permc_spec="MMD_AT_PLUS_A")
        except RuntimeError as error:
            raise SingularNetworkError("the impedances of the network cancel exactly") from error
        if not _condition(scaled, lu) < MAX_CONDITION:
            raise SingularNetworkError("the impedances of the network cancel all but exactly")
        return cls(lu, scale)

    def solve(self, rhs: ComplexArray) -> ComplexArray:
        """Solve Y x = rhs, both (n, m)."""
        scale = self.scale[:, None]
        return np.asarray(self.lu.solve(np.ascontiguousarray(rhs * scale)), np.complex128) * scale

    def selected_inverse(self, from_node: IntArray, to_node: IntArray) -> tuple[ComplexArray, ComplexArray]:
        """Z_jj of all nodes, shape (n,), and Z at from–to of all couplings, shape (c,)."""
        n = len(self.scale)
        diagonal, adjacent = np.empty(n, np.complex128), np.empty(len(to_node), np.complex128)
        for first in range(0, n, BLOCK):
            nodes = np.arange(first, min(first + BLOCK, n))
            unit = np.zeros((n, len(nodes)), np.complex128)
            unit[nodes, nodes - first] = 1.0
            columns = self.solve(unit)
            diagonal[nodes] = columns[nodes, nodes - first]
            here = np.flatnonzero((to_node >= first) & (to_node < first + BLOCK))
            adjacent[here] = columns[from_node[here], to_node[here] - first]
        return diagonal, adjacent


def _condition(matrix: csc_array, lu: SuperLU) -> float:
    """Estimate of the condition number in the 1-norm (Higham and Tisseur, 2000)."""
    inverse = LinearOperator(
        matrix.shape,
        matvec=lu.solve,
        matmat=lu.solve,
        rmatvec=lambda x: lu.solve(x.conj()).conj(),  # the matrix is symmetric
        rmatmat=lambda x: lu.solve(x.conj()).conj(),
        dtype=np.complex128,
    )
    with np.errstate(all="ignore"):
        return float(onenormest(inverse) * abs(matrix).sum(axis=0).max())
