"""Transformers as coils on limbs, by ampere-turns: an independent derivation of their sequence admittances.

On each limb the ampere-turns of all coils cancel (no magnetising current) and a coil's leakage stands per turn² between
it and the limb's common flux. Coils are then wired to named pins; pins that lead nowhere are eliminated (Kron).
No sequences, no per unit: kV, kA, ohm.
"""

import cmath
import math
from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from onelinefault.engine.network import ComplexArray
from onelinefault.engine.sequence_stamps import INNER, Stamps

A = cmath.rect(1, 2 * math.pi / 3)
# columns: positive, negative, zero
FORTESCUE = np.array([[1, 1, 1], [A**2, A, 1], [A, A**2, 1]])
Coil = tuple[int, float, complex, str, str]  # limb, turns (in kV), leakage in ohm at those turns, pin at dot, other pin
EARTH = "earth"


def admittance(coils: Sequence[Coil], kept: Sequence[str], earthing_ohm: Mapping[str, complex]) -> ComplexArray:
    """Admittance matrix in siemens between the kept pins and earth, shape (kept, kept).

    Unknowns: voltages of the other pins, coil currents, a flux voltage per limb. Equations: each coil's voltage is its
    turns times the flux plus its leakage; the ampere-turns of a limb cancel; current is kept at the other pins.
    Star points that nothing earths may float: the least-squares solution settles their voltage.
    """
    inner = sorted({p for c in coils for p in c[3:]} - {*kept, EARTH})
    limbs = sorted({c[0] for c in coils})
    n_pins, n_coils = len(inner), len(coils)
    left = np.zeros((n_coils + len(limbs) + n_pins, n_pins + n_coils + len(limbs)), complex)
    right = np.zeros((len(left), len(kept)), complex)
    out = np.zeros((len(kept), left.shape[1]), complex)
    for k, (limb, turns, leakage, dot, other) in enumerate(coils):
        left[k, n_pins + k] = -leakage
        left[k, n_pins + n_coils + limbs.index(limb)] = -turns
        left[n_coils + limbs.index(limb), n_pins + k] = turns
        for pin, sign in ((dot, 1), (other, -1)):
            if pin in kept:
                right[k, kept.index(pin)] -= sign
                out[kept.index(pin), n_pins + k] += sign
            elif pin != EARTH:
                left[k, inner.index(pin)] += sign
                left[n_coils + len(limbs) + inner.index(pin), n_pins + k] += sign
    for pin, ohm in earthing_ohm.items():
        left[n_coils + len(limbs) + inner.index(pin), inner.index(pin)] += 1 / ohm
    solution, *_ = np.linalg.lstsq(left, right, rcond=1e-13)
    assert np.abs(left @ solution - right).max() < 1e-9
    found: ComplexArray = out @ solution
    return found


def reduced(y: ComplexArray, kept: int) -> ComplexArray:
    """Kron reduction of all nodes after the first ones; nodes without any admittance drop out."""
    rest = y[kept:, kept:]
    folded: ComplexArray = y[:kept, :kept] - y[:kept, kept:] @ np.linalg.pinv(rest) @ y[kept:, :kept]
    return folded


def with_earth_at(coils: Sequence[Coil], pin: str) -> list[Coil]:
    """The coils with one pin solidly earthed."""
    return [(limb, n, z, *(EARTH if p == pin else p for p in ends)) for limb, n, z, *ends in coils]


def phases(side: str) -> list[str]:
    """The three pins of a side."""
    return [f"{side}{k}" for k in range(3)]


def in_sequences(y: ComplexArray) -> NDArray[np.complex128]:
    """From pins in the order of sides and phases to (3, sides, sides); checks that the sequences do not mix."""
    sides = len(y) // 3
    turn = np.kron(np.eye(sides), FORTESCUE)
    mixed = (np.linalg.inv(turn) @ y @ turn).reshape(sides, 3, sides, 3)
    for s in range(3):
        for other in range(3):
            assert s == other or np.abs(mixed[:, s, :, other]).max() < 1e-9 * np.abs(y).max()
    return np.array([mixed[:, s, :, s] for s in range(3)])


def star(side: str, kv: float, leakage: complex, roll: int = 0, flip: int = 1) -> list[Coil]:
    """Three coils from the side's phases to its star point "side n"; phase k on limb k + roll."""
    turns = flip * kv / math.sqrt(3)
    return [((k + roll) % 3, turns, leakage, f"{side}{k}", f"{side} n") for k in range(3)]


def delta(side: str, kv: float, leakage: complex, roll: int = 0, flip: int = 1) -> list[Coil]:
    """Three coils between the side's phases k and k + 1; leakage in ohm of one coil."""
    return [((k + roll) % 3, flip * kv, leakage, f"{side}{k}", f"{side}{(k + 1) % 3}") for k in range(3)]


def zigzag(side: str, kv: float, leakage: complex, roll: int = 0, flip: int = 1) -> list[Coil]:
    """Two half coils a phase on limbs k + roll and k + roll + 1, the second reversed; leakage in ohm of a half coil."""
    half = flip * kv / 3
    coils: list[Coil] = []
    for k in range(3):
        coils.append(((k + roll) % 3, half, leakage, f"{side}{k}", f"{side} m{k}"))
        coils.append(((k + roll + 1) % 3, -half, leakage, f"{side} m{k}", f"{side} n"))
    return coils


def lag_deg(y_positive: ComplexArray) -> float:
    """How far the second of two sides lags the first at no load."""
    gain = -y_positive[1, 0] / y_positive[1, 1]
    return -math.degrees(cmath.phase(gain)) % 360


def of_stamps(
    stamps: Stamps, terminals: Sequence[str], node_kv: Sequence[float], base_mva: float, turned: bool = True
) -> NDArray[np.complex128]:
    """The same (3, sides, sides) in siemens from the engine's stamps, rotated by its displacements."""
    names = [*terminals, *([INNER] if stamps.inner_kv else [])]
    kv = np.array([*node_kv, *([stamps.inner_kv] if stamps.inner_kv else [])])
    y = np.zeros((3, len(names), len(names)), complex)
    lead = np.zeros(len(names))
    for b in stamps.branches:
        i, j = names.index(b.a), names.index(b.b)
        if b.b == INNER:
            lead[i] = -b.lead_deg
        else:
            lead[j] = lead[i] + b.lead_deg
        for s in range(3):
            t = b.ratio[s]
            y[s, i, i] += b.y[s] / t**2 + b.y_a[s]
            y[s, j, j] += b.y[s] + b.y_b[s]
            y[s, i, j] -= b.y[s] / t
            y[s, j, i] -= b.y[s] / t
    for shunt in stamps.shunts:
        for s in range(3):
            y[s, names.index(shunt.terminal), names.index(shunt.terminal)] += shunt.y[s]
    y = y * base_mva / np.outer(kv, kv)
    y = np.array([reduced(m, len(terminals)) for m in y])
    turn = np.exp(1j * np.radians(lead[: len(terminals)])) if turned else np.ones(len(terminals))
    y[0] = turn[:, None] * y[0] / turn[None, :]
    y[1] = turn.conj()[:, None] * y[1] / turn.conj()[None, :]
    return y
