"""Symmetrical components: three phases as a positive, a negative and a zero sequence, and back.

Last axis of every array: sequences (positive, negative, zero) or phases (a, b, c). With a = 1∠120°::

    a-phase = I1 + I2 + I0        b-phase = a² I1 + a I2 + I0        c-phase = a I1 + a² I2 + I0

Source: Fortescue, "Method of symmetrical co-ordinates applied to the solution of polyphase networks", 1918.
"""

import numpy as np

from onelinefault.engine.network import ComplexArray, FloatArray

POSITIVE, NEGATIVE, ZERO = 0, 1, 2
"""Places on the sequence axis."""

TURN = complex(-0.5, np.sqrt(0.75))
"""The operator a = 1∠120°."""

PHASES_OF_SEQUENCES: ComplexArray = np.array([[1, 1, 1], [TURN**2, TURN, 1], [TURN, TURN**2, 1]], np.complex128)
"""Fortescue's matrix, shape (3, 3): phases = matrix @ sequences."""

SEQUENCES_OF_PHASES: ComplexArray = PHASES_OF_SEQUENCES.conj().T / 3
"""Its inverse, shape (3, 3)."""


def to_phases(sequences: ComplexArray) -> ComplexArray:
    """Phase quantities of sequence quantities, shape (..., 3) both. The matrix is written out: much faster for many."""
    positive, negative, zero = (sequences[..., s] for s in range(3))
    phases = np.empty(sequences.shape, np.complex128)
    both, ahead = positive + negative, TURN.imag * 1j * (positive - negative)
    phases[..., 0] = zero + both
    behind = zero - 0.5 * both
    phases[..., 1] = behind - ahead
    phases[..., 2] = behind + ahead
    return phases


def to_sequences(phases: ComplexArray) -> ComplexArray:
    """Sequence quantities of phase quantities, shape (..., 3) both."""
    sequences: ComplexArray = phases @ SEQUENCES_OF_PHASES.T
    return sequences


def turns(angle_deg: FloatArray) -> ComplexArray:
    """Factors that turn sequence quantities by phase displacements, shape (..., 3) for angles of shape (...).

    Positive sequence by +angle, negative by −angle, zero not at all (its sign stands in the ratios). The negative
    sequence turns the other way because its phase order is reversed. Source: IEC 60076-1, phase displacement by clock
    number.
    """
    ahead = np.exp(1j * np.deg2rad(np.asarray(angle_deg, np.float64)))
    return np.stack((ahead, ahead.conj(), np.ones_like(ahead)), axis=-1)
