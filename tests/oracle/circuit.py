"""A plain circuit of coils in volts, ohms and amperes (kV, ohm, kA): Kirchhoff's two laws and nothing else.

Unknowns are node potentials, coil currents, and per magnetic limb the voltage of one turn. Every coil has one voltage
equation, every node a current equation, every limb an equation of ampere-turns. What the equations leave open (the
potential of a network that is nowhere earthed) stays open in ``Solution`` until a convention settles it.
"""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import qr, solve_triangular  # type: ignore[import-untyped, unused-ignore]
from scipy.sparse import csr_array  # type: ignore[import-untyped, unused-ignore]

ComplexArray = NDArray[np.complex128]


@dataclass
class Pin:
    """A point that coils end on; ``ledger`` collects the currents that flow from the pin into them (column, sign).

    node: column of its potential, or None for earth.
    """

    node: int | None
    ledger: list[tuple[int, int]] = field(default_factory=list)

    def twin(self) -> "Pin":
        """The same point with a ledger of its own."""
        return Pin(self.node)


@dataclass
class Coil:
    """One conductor from p to q. turns: kV per unit of limb voltage, by limb column. emf_kv: rise from q to p."""

    p: Pin
    q: Pin
    turns: Mapping[int, float] = field(default_factory=dict)
    emf_kv: complex = 0j


class Circuit:
    """Collects equations; ``matrix`` and ``right_side`` write them down."""

    def __init__(self) -> None:
        self.size = 0
        self._rows: list[dict[int, complex]] = []
        self._right: list[complex] = []
        self._node_rows: dict[int, dict[int, complex]] = {}

    def unknown(self) -> int:
        """A new column."""
        self.size += 1
        return self.size - 1

    def pin(self) -> Pin:
        """A new point with Kirchhoff's current law."""
        node = self.unknown()
        self._node_rows[node] = {}
        return Pin(node)

    def pins(self) -> list[Pin]:
        """Three new points."""
        return [self.pin() for _ in range(3)]

    def limbs(self) -> list[int]:
        """Three magnetic limbs, each with ampere-turns in balance (no magnetising current)."""
        columns = [self.unknown() for _ in range(3)]
        self._node_rows.update({column: {} for column in columns})
        return columns

    def coils(self, coils: Sequence[Coil], z_ohm: ComplexArray | None = None) -> list[int]:
        """Add coils coupled by an impedance matrix, shape (n, n), zero when not given. Returns the current columns."""
        columns = [self.unknown() for _ in coils]
        z = np.zeros((len(coils), len(coils))) if z_ohm is None else z_ohm
        for k, coil in enumerate(coils):
            self._connect(coil, columns[k])
            row: dict[int, complex] = {}
            for pin, sign in ((coil.p, 1.0), (coil.q, -1.0)):
                if pin.node is not None:
                    row[pin.node] = row.get(pin.node, 0) + sign
            for limb, turns in coil.turns.items():
                row[limb] = -turns
            for m, column in enumerate(columns):
                row[column] = -complex(z[k, m])
            self._rows.append(row)
            self._right.append(coil.emf_kv)
        return columns

    def coil(self, p: Pin, q: Pin, z_ohm: complex = 0j, emf_kv: complex = 0j) -> int:
        """One coil by itself."""
        return self.coils([Coil(p, q, emf_kv=emf_kv)], np.array([[z_ohm]]))[0]

    def _connect(self, coil: Coil, column: int) -> None:
        for pin, sign in ((coil.p, 1), (coil.q, -1)):
            pin.ledger.append((column, sign))
            if pin.node is not None:
                row = self._node_rows[pin.node]
                row[column] = row.get(column, 0) + sign
        for limb, turns in coil.turns.items():
            row = self._node_rows[limb]
            row[column] = row.get(column, 0) + turns

    def solve(self) -> "Solution":
        """All solutions of the circuit."""
        rows = [*self._rows, *self._node_rows.values()]
        a = np.zeros((len(rows), self.size), dtype=complex)
        for k, row in enumerate(rows):
            for column, value in row.items():
                a[k, column] = value
        b = np.zeros(len(rows), dtype=complex)
        b[: len(self._right)] = self._right
        return _all_solutions(a, b)


@dataclass(frozen=True)
class Solution:
    """Every solution: ``one`` plus any combination of the columns of ``free``, shapes (n,) and (n, k)."""

    one: ComplexArray
    free: ComplexArray

    def settled(self, zero_rows: ComplexArray) -> ComplexArray:
        """The solution that makes ``zero_rows @ x`` smallest, shape (n,); used for potentials only."""
        moved = zero_rows @ self.free
        if not np.any(
            np.abs(moved) > 1e-9
        ):  # what is open is of no account here: the free columns have largest entry 1
            return self.one
        moved[np.abs(moved) <= 1e-9] = 0
        choice = np.linalg.lstsq(moved, -(zero_rows @ self.one), rcond=1e-9)[0]
        settled: ComplexArray = self.one + self.free @ choice
        return settled


RANK_OPEN, RANK_SURE = 1e-12, 1e-10


def _all_solutions(a: ComplexArray, b: ComplexArray) -> Solution:
    """Rank-revealing QR of the evenly scaled matrix, refined."""
    rows, columns = _even_scales(np.abs(a))
    q, r, order = qr(a * rows[:, None] * columns, pivoting=True, mode="economic")
    size = np.abs(np.diag(r)) / abs(r[0, 0])
    rank = int(np.sum(size > RANK_OPEN))
    assert not np.any((size > RANK_OPEN) & (size < RANK_SURE)), f"rank in doubt: {np.sort(size)[:6]}"

    def particular(right: ComplexArray) -> ComplexArray:
        bent = q.conj().T @ (right * rows[:, None])
        x: ComplexArray = np.zeros((a.shape[1], right.shape[1]), dtype=np.complex128)
        x[order[:rank]] = solve_triangular(r[:rank, :rank], bent[:rank])
        scaled: ComplexArray = x * columns[:, None]
        return scaled

    free: ComplexArray = np.zeros((a.shape[1], a.shape[1] - rank), dtype=np.complex128)
    free[order[:rank]] = -solve_triangular(r[:rank, :rank], r[:rank, rank:])
    free[order[rank:]] = np.eye(a.shape[1] - rank)
    free *= columns[:, None]
    free /= np.abs(free).max(axis=0)
    right: ComplexArray = np.column_stack((b, np.zeros((a.shape[0], free.shape[1]))))
    found = _refined(a, np.column_stack((particular(b[:, None]), free)), right, particular)
    left = (a @ found[:, 0] - b) * rows
    largest = np.abs(found[:, 0] / columns).max(initial=1)
    assert np.abs(left).max(initial=0) <= 1e-9 * largest, "the circuit contradicts itself"
    return Solution(found[:, 0], found[:, 1:])


def _refined(
    a: ComplexArray, x: ComplexArray, b: ComplexArray, solve: Callable[[ComplexArray], ComplexArray]
) -> ComplexArray:
    """x with a @ x = b to the last digit: a network that only capacitance ties to earth is held by next to nothing."""
    longer, long_a = x.astype(np.clongdouble), csr_array(a.astype(np.clongdouble))
    for _ in range(2):
        longer = longer + solve(np.asarray(b - long_a @ longer, np.complex128))
    refined: ComplexArray = longer.astype(np.complex128)
    return refined


def _even_scales(size: NDArray[np.float64]) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Powers of two that bring every row's and column's largest entry near one (scaling without rounding)."""
    rows, columns = np.ones(size.shape[0]), np.ones(size.shape[1])
    for _ in range(4):
        scaled = size * rows[:, None] * columns
        rows *= _halved(scaled.max(axis=1))
        scaled = size * rows[:, None] * columns
        columns *= _halved(scaled.max(axis=0))
    return rows, columns


def _halved(largest: NDArray[np.float64]) -> NDArray[np.float64]:
    safe = np.where(largest > 0, largest, 1.0)
    power: NDArray[np.float64] = 2.0 ** -np.round(np.log2(safe) / 2)
    return power
