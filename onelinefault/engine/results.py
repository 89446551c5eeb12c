"""What a fault calculation gives: values for the drawing, the tables and the working.

Sequence axis: 0 positive, 1 negative, 2 zero. Phase axis: 0 a, 1 b, 2 c. Angles are those of complex numbers, with the
faulted node's phase-a voltage before the fault at 0°, carried through each transformer's displacement.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from onelinefault.engine.case import Case
from onelinefault.engine.derived import Figures
from onelinefault.engine.network import ComplexArray, FloatArray, Network, TerminalKey
from onelinefault.model.fault import Fault
from onelinefault.model.findings import Finding


@dataclass(frozen=True)
class SourceShare:
    """What one source feeds. phases_ka: at its own terminals, out of the source, shape (3,).

    at_fault_ka: its part of the fault current's positive sequence referred to the fault's voltage, complex kA;
    share: the part of the total, 0..1, by projection on the total.
    """

    part: str
    phases_ka: ComplexArray
    at_fault_ka: complex
    share: float


@dataclass(frozen=True)
class FaultResult:
    """One fault, all currents and voltages.

    sequence_ka: I1, I2, I0 at the fault, shape (3,). phases_ka: fault current of each phase, shape (3,). residual_ka:
    3 I0. z_ohm: Z1, Z2, Z0 at the fault; None where open. voltages_kv: phase-to-earth at all nodes, shape (n, 3).
    terminal_ka: current from the node into the part at each terminal, shape (3,) each. wire_ka: from end a to end b.
    neutral_ka: current to earth in each earthed star point, by (part, side). x_over_r: of the impedance the kind's
    current flows through, not-a-number where none flows. peak_ka: largest phase, asymmetrical peak at half a cycle.
    findings: what is to be said about this fault, such as typical or guessed data that it rests on. fault_kv:
    phase-to-earth voltages at the fault itself, shape (3,). A fault along a branch has the nearer end as its node.
    figures: what the method derives besides (its peak current is then peak_ka); None: nothing.
    """

    fault: Fault
    case: Case
    network: Network
    node: int
    nominal_kv: float
    prefault_kv: float
    sequence_ka: ComplexArray
    phases_ka: ComplexArray
    residual_ka: complex
    z_ohm: tuple[complex | None, complex | None, complex | None]
    x_over_r: float
    fault_level_mva: float
    peak_ka: float
    prefault_voltages_kv: ComplexArray
    voltages_kv: ComplexArray
    terminal_ka: Mapping[TerminalKey, ComplexArray]
    wire_ka: Mapping[str, ComplexArray]
    neutral_ka: Mapping[tuple[str, str], complex]
    sources: tuple[SourceShare, ...]
    findings: tuple[Finding, ...] = ()
    fault_kv: ComplexArray = field(default_factory=lambda: np.zeros(3, np.complex128))
    figures: Figures | None = None

    @property
    def z_pu(self) -> tuple[complex | None, complex | None, complex | None]:
        """Z1, Z2, Z0 at the fault in per unit of the plant's base; None where open."""
        base = self.nominal_kv**2 / self.network.base_mva
        one, two, zero = (None if ohm is None else ohm / base for ohm in self.z_ohm)
        return one, two, zero

    @property
    def ik_ka(self) -> float:
        """Largest of the three phase currents at the fault, kA."""
        return float(max(abs(self.phases_ka)))

    @property
    def voltage_left(self) -> FloatArray:
        """Smallest phase-to-earth voltage of each node over nominal line-to-neutral, shape (n,), 1 = 100 %."""
        nominal = self.network.nominal_kv / 3**0.5
        left: FloatArray = abs(self.voltages_kv).min(axis=1) / nominal
        return left


@dataclass(frozen=True, slots=True)
class BusRow:
    """One bus and one kind of fault, as the tables show it. Impedances as (r, x) in ohm; None where open.

    figures: as in FaultResult.
    """

    bus: str
    part: str
    nominal_kv: float
    kind: str
    ik_ka: float
    phases_ka: tuple[float, float, float]
    phases_deg: tuple[float, float, float]
    residual_ka: float
    x_over_r: float | None
    fault_level_mva: float
    peak_ka: float
    z1_ohm: tuple[float, float] | None
    z2_ohm: tuple[float, float] | None
    z0_ohm: tuple[float, float] | None
    assumed: tuple[str, ...] = ()
    figures: Figures | None = None
