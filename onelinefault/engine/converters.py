"""Converter sources: a limited current instead of a voltage behind an impedance.

The law of one converter, from its terminal's positive-sequence voltage V against the voltage E before the fault::

    |J| = limit · min(1, max(0, (1 − |V|/|E|) / 0.1))      full current at a dip of 10 %, none without a dip
    J lags the reference by the converter's fault angle    positive sequence only

The reference angle is that of V while at least half the voltage is left. Below, it goes over to the angle of E,
because a converter cannot follow the angle of a voltage that vanishes: it keeps the one it knew (voltage memory). Law
and figures are common practice (reactive-current support of grid codes), not a standard's.

A method may take converters as constant currents instead (IEC 60909-0, 6.9): each feeds its limit, and what it adds to
the fault current, Z_ij·J_j/Z_i in three-phase faults, is in phase with the rest, so that magnitudes add up.

The rest of the plant is linear: with Thévenin's voltage and impedances at the fault, each converter's voltage is an
affine function of all currents J. So only J is iterated on, at most 50 rounds: fixed point, each step damped by the
converters' own loop gain and corrected by what the last two rounds taught. Currents are per unit; k faults at once, c
converters.
"""

from dataclasses import dataclass

import numpy as np

from onelinefault.engine.boundary import Boundary
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray, Network
from onelinefault.engine.ordering import BoolArray
from onelinefault.engine.symmetrical import POSITIVE

FULL_CURRENT_DIP = 0.1
"""Dip of the voltage, per unit of the voltage before, at which a converter feeds its full limit (common practice)."""

MEMORY_BELOW = 0.5
"""Voltage left below which the angle held from before the fault takes over (common practice)."""

ROUNDS = 50
ROUNDS_REMEMBERED = 2
SETTLED = 1e-9
"""A converter has settled when its current asks for a change of less than this share of its limit."""


@dataclass(frozen=True, eq=False)
class ConverterGroup:
    """All converters: node, limit (per unit), factor that turns a unit reference into the current's direction, (c,).

    constant: they feed their limits whatever the voltage, and what they add to the fault current is in phase with it.
    """

    node: IntArray
    limit: FloatArray
    direction: ComplexArray
    constant: bool = False

    @classmethod
    def of(cls, network: Network) -> "ConverterGroup":
        """The network's converters."""
        converters = network.converters
        angle = np.array([c.angle_deg for c in converters], np.float64)
        return cls(
            np.array([c.node for c in converters], np.int64),
            np.array([c.limit_pu for c in converters], np.float64),
            np.exp(-1j * np.deg2rad(angle)),
            any(c.constant for c in converters),
        )

    @property
    def count(self) -> int:
        """Number of converters."""
        return len(self.node)

    def currents(self, voltage: ComplexArray, before: ComplexArray) -> ComplexArray:
        """The law: currents fed at these terminal voltages, shape (k, c) all; nothing where there was no voltage."""
        alive = before != 0
        left = np.divide(abs(voltage), abs(before), out=np.ones(alive.shape), where=alive)
        share = np.clip((1 - left) / FULL_CURRENT_DIP, 0.0, 1.0)
        present = np.minimum(left / MEMORY_BELOW, 1.0)  # weight of the angle of the voltage that is left
        reference = present * _unit(voltage) + (1 - present) * _unit(before)
        currents: ComplexArray = self.limit * share * _unit(reference) * self.direction
        return currents

    def damping(self, voltage: ComplexArray, before: ComplexArray, gain: FloatArray) -> FloatArray:
        """How far to follow the law in one round, 0..1, shape (k, c): gain is Σ |dV/dJ| · limit of all converters."""
        left = np.divide(abs(voltage), abs(before), out=np.ones(before.shape), where=before != 0)
        slope = np.where(
            left > 1 - 1.5 * FULL_CURRENT_DIP, 1 / FULL_CURRENT_DIP, np.where(left < MEMORY_BELOW, 2.0, 1.0)
        )
        damped: FloatArray = 1 / (1 + gain * slope)
        return damped


@dataclass(frozen=True, eq=False)
class Fed:
    """k faults with c converters: current, voltage (k, 3) at the fault, converters (k, c), settled (k, c)."""

    current: ComplexArray
    voltage: ComplexArray
    converters: ComplexArray
    settled: BoolArray


def settle(
    group: ConverterGroup,
    boundary: Boundary,
    *,
    emf: ComplexArray,
    z: ComplexArray,
    to_converters: ComplexArray,
    between: ComplexArray,
    before: ComplexArray,
) -> Fed:
    """Fault currents with the converters' share.

    emf (k,): voltage before the fault at the fault. z (k, 3): impedances seen from it. to_converters (k, c), between
    (c, c): positive-sequence transfer impedances. before (k, c): the converters' voltages before the fault.
    """
    unit_current, unit_voltage = boundary.solve(np.ones(len(emf), np.complex128), z)
    pull = unit_current[:, POSITIVE, None] * to_converters  # change of the converters' voltage per volt of emf
    fed = np.zeros(to_converters.shape, np.complex128)
    settled = np.ones(fed.shape, np.bool_)
    if group.constant:
        fed = group.limit * _unit(to_converters).conj() * _unit(emf)[:, None]
    elif group.count:
        gain = _gain(group.limit / np.maximum(abs(before), 1e-3), between, pull, to_converters)
        past: list[tuple[ComplexArray, ComplexArray]] = []
        for _ in range(ROUNDS):
            total = emf + (to_converters * fed).sum(axis=1)
            voltage = before + fed @ between.T - pull * total[:, None]
            asked = group.currents(voltage, before) - fed
            settled = abs(asked) <= SETTLED * group.limit
            if settled.all():
                break
            step = group.damping(voltage, before, gain) * asked
            past = [*past[-ROUNDS_REMEMBERED:], (fed, step)]
            fed = fed + step - _learned(past)
    total = (emf + (to_converters * fed).sum(axis=1))[:, None]
    return Fed(unit_current * total, unit_voltage * total, fed, settled)


def _learned(past: list[tuple[ComplexArray, ComplexArray]]) -> ComplexArray:
    """What the last rounds say the next step does too much, shape (k, c); past: (currents, step) of each round.

    The steps seen are taken as linear in the currents; the combination of earlier rounds that cancels most of the last
    step is what is mixed in. Source: Anderson, "Iterative procedures for nonlinear integral equations", 1965.
    """
    (fed, step), earlier = past[-1], past[:-1]
    if not earlier:
        return np.zeros_like(fed)
    of_steps = np.stack([step - other for _, other in earlier], axis=-1)
    of_currents = np.stack([fed - other for other, _ in earlier], axis=-1)
    gram = np.einsum("kcm,kcn->kmn", of_steps.conj(), of_steps).real
    spread = 1e-14 * np.trace(gram, axis1=1, axis2=2) + np.finfo(float).tiny  # keeps it regular when nothing moves
    gram += spread[:, None, None] * np.eye(len(earlier))
    weight = np.linalg.solve(gram, np.einsum("kcm,kc->km", of_steps.conj(), step).real[..., None])
    mixed: ComplexArray = ((of_currents + of_steps) @ weight)[..., 0]
    return mixed


def _gain(weight: FloatArray, between: ComplexArray, pull: ComplexArray, to_converters: ComplexArray) -> FloatArray:
    """How much all limits together move each converter's voltage, per unit of it, shape (k, c)."""
    gain = np.empty(pull.shape)
    for number, row in enumerate(between):  # one converter at a time: (k, c, c) would be too large at once
        gain[:, number] = (abs(row - pull[:, number, None] * to_converters) * weight).sum(axis=1)
    return gain


def _unit(values: ComplexArray) -> ComplexArray:
    """Values over their magnitudes, same shape; 0 stays 0."""
    size = abs(values)
    return np.divide(values, size, out=np.zeros(values.shape, np.complex128), where=size > 0)
