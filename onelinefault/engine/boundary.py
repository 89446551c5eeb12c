"""What a fault demands of voltages and currents at its place, and the currents that meet it.

A fault is written once, in phases: three equations between the phase voltages to earth V and the currents I that leave
the network, ``C_v V + C_i I = 0``. With faulted phases F, an impedance Zf in each and a common Zg to earth::

    touches earth        p in F:  V_p − Zf I_p − Zg Σ_F I = 0          p not in F:  I_p = 0
    does not touch it    neighbours p, q in F:  (V_p − Zf I_p) − (V_q − Zf I_q) = 0     Σ_F I = 0     I_p = 0 elsewhere

That is the fault's boundary admittance without any division, so a bolted fault (Zf = Zg = 0) is exact. Fortescue's
matrix takes it to sequences, where the network is V_s = E_s − Z_s I_s with E in the positive sequence only. Each
sequence has one unknown u_s: the current where Z_s is finite, the voltage where the sequence is open (Z_s infinite,
I_s = 0), so an unearthed network is exact too.

Conventions: Zf of a line-to-line fault is the whole impedance between the two lines (half of it stands in each); of a
line-to-earth fault Zf and Zg add up; a three-phase fault does not touch earth. The closed forms of the textbooks
(three-phase V/(Z1+Zf), line-to-earth V/(Z1+Z2+Z0+3Zf), ...) are limits of these equations and stand in the tests.
Source: Anderson, "Analysis of Faulted Power Systems", 1973, chapters 2 and 3 (general fault admittance).
"""

import cmath
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from onelinefault.engine.network import ComplexArray
from onelinefault.engine.symmetrical import PHASES_OF_SEQUENCES, POSITIVE, ZERO
from onelinefault.errors import StudyError
from onelinefault.model.fault import Fault, FaultKind

_PHASE_COUNT = {
    FaultKind.THREE_PHASE: 3,
    FaultKind.LINE_TO_LINE: 2,
    FaultKind.TWO_LINES_TO_EARTH: 2,
    FaultKind.LINE_TO_EARTH: 1,
}
_TOUCHES_EARTH = (FaultKind.TWO_LINES_TO_EARTH, FaultKind.LINE_TO_EARTH)


@dataclass(frozen=True)
class Boundary:
    """The three equations of a fault in sequence quantities: voltage_rows @ V + current_rows @ I = 0.

    voltage_rows (3, 3); current_rows (..., 3, 3) in the unit of the impedances, one set for each place where the fault
    impedance differs. touches_earth: whether a zero-sequence current can flow at all.
    """

    voltage_rows: ComplexArray
    current_rows: ComplexArray
    touches_earth: bool

    def solve(self, emf: ComplexArray, z: ComplexArray) -> tuple[ComplexArray, ComplexArray]:
        """Sequence currents into the fault and sequence voltages at it, both (..., 3).

        emf (...): positive-sequence voltage before the fault. z (..., 3): impedances of the network seen from the
        fault, complex infinity where a sequence is open. Units as the caller's (per unit, or kV and ohm).
        """
        z = np.moveaxis(np.asarray(z, np.complex128), -1, 0).copy()  # places last: neighbours in memory
        if not self.touches_earth:  # no residual current, and nothing moves the neutral, whatever Z0 is
            z[ZERO] = 1.0
        is_open = ~np.isfinite(z)
        through, drop = np.where(is_open, 0.0, 1.0), np.where(is_open, 1.0, z)
        C_v, C_i = self.voltage_rows[..., None], np.moveaxis(self.current_rows, (-2, -1), (0, 1))
        C_i = C_i.reshape(3, 3, -1)
        matrix = C_i * through.reshape(3, -1) - C_v * drop.reshape(3, -1)
        unknown = _solve3(matrix, -C_v[:, POSITIVE] * np.ravel(emf)).reshape(z.shape)
        if not self.touches_earth:
            unknown[ZERO] = 0.0  # of which rounding had left a little
        voltage = -drop * unknown
        voltage[POSITIVE] += emf
        return np.moveaxis(through * unknown, 0, -1), np.moveaxis(voltage, 0, -1)


def boundary_of(fault: Fault, base_ohm: ComplexArray | float = 1.0) -> Boundary:
    """The equations of a fault; its impedances are divided by base_ohm, a number or an array of shape (...).

    Raises StudyError when the phases do not fit the kind of fault or an impedance is not a finite number.
    """
    zf, zg = (np.asarray(ohm / np.asarray(base_ohm), np.complex128) for ohm in _impedances(fault))
    faulted = ["abc".index(phase) for phase in _phases(fault)]
    touches_earth = fault.kind in _TOUCHES_EARTH
    voltage_rows = np.zeros((3, 3), np.complex128)
    current_rows = np.zeros((*zf.shape, 3, 3), np.complex128)
    for p in set(range(3)) - set(faulted):
        current_rows[..., p, p] = 1.0
    if touches_earth:
        _join_to_earth(faulted, zf, zg, voltage_rows, current_rows)
    else:
        _join_lines(faulted, zf / 2 if len(faulted) == 2 else zf, voltage_rows, current_rows)
    return Boundary(voltage_rows @ PHASES_OF_SEQUENCES, current_rows @ PHASES_OF_SEQUENCES, touches_earth)


def _join_to_earth(
    faulted: list[int], zf: ComplexArray, zg: ComplexArray, voltage_rows: ComplexArray, current_rows: ComplexArray
) -> None:
    for p in faulted:
        voltage_rows[p, p] = 1.0
        current_rows[..., p, p] -= zf
        for q in faulted:
            current_rows[..., p, q] -= zg


def _join_lines(faulted: list[int], zf: ComplexArray, voltage_rows: ComplexArray, current_rows: ComplexArray) -> None:
    for p, q in pairwise(faulted):
        voltage_rows[p, p], voltage_rows[p, q] = 1.0, -1.0
        current_rows[..., p, p], current_rows[..., p, q] = -zf, zf
    current_rows[..., faulted[-1], faulted] = 1.0


def _phases(fault: Fault) -> str:
    phases = fault.faulted_phases.lower()
    if len(set(phases)) != len(phases) or set(phases) - set("abc") or len(phases) != _PHASE_COUNT[fault.kind]:
        count = _PHASE_COUNT[fault.kind]
        raise StudyError(
            f"A {fault.kind.value} fault cannot join phases {fault.phases!r}; write {count} of the letters a, b, c,"
            " each once."
        )
    return phases


def _impedances(fault: Fault) -> tuple[complex, complex]:
    for ohm in (fault.zf_ohm, fault.zg_ohm):
        if not cmath.isfinite(ohm):
            raise StudyError(f"The fault impedance {ohm} is not a finite number of ohm; write 0 for a bolted fault.")
    return fault.zf_ohm, fault.zg_ohm


def _solve3(matrix: ComplexArray, rhs: ComplexArray) -> ComplexArray:
    """Solve k systems of 3 equations at once by Cramer's rule; least squares where one is singular.

    Singular are only places whose voltage nothing determines, such as the negative sequence of an island that
    converters alone feed: the smallest solution is taken. matrix (3, 3, k), rhs (3, k) or (3, 1); gives (3, k).
    """
    one, two, three = matrix[:, 0], matrix[:, 1], matrix[:, 2]
    two_three, rhs_three = _cross(two, three), _cross(rhs, three)
    determinant = _dot(one, two_three)
    row_size = abs(matrix).sum(axis=1).prod(axis=0)
    singular = ~(abs(determinant) > 1e-14 * row_size)
    with np.errstate(all="ignore"):
        inverse = 1.0 / determinant
        solution = np.stack((_dot(rhs, two_three), _dot(one, rhs_three), _dot(one, _cross(two, rhs)))) * inverse
    if singular.any():
        known = np.broadcast_to(rhs, solution.shape)[:, singular]
        least = np.linalg.pinv(np.moveaxis(matrix[:, :, singular], -1, 0), rcond=1e-12)
        solution[:, singular] = (least @ known.T[..., None])[..., 0].T
    return solution


def _dot(left: ComplexArray, right: ComplexArray) -> ComplexArray:
    """Scalar product over the first axis, without conjugation, shape (k,)."""
    product: ComplexArray = left[0] * right[0] + left[1] * right[1] + left[2] * right[2]
    return product


def _cross(left: ComplexArray, right: ComplexArray) -> ComplexArray:
    """Vector product over the first axis, without conjugation, shape (3, k)."""
    product = np.empty(np.broadcast_shapes(left.shape, right.shape), np.complex128)
    for p, q, r in ((0, 1, 2), (1, 2, 0), (2, 0, 1)):
        product[p] = left[q] * right[r] - left[r] * right[q]
    return product
