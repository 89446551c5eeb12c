"""The plant as a network in per unit: nodes, two-port branches and shunts in three sequences.

Sequence axis everywhere: index 0 positive, 1 negative, 2 zero. Ratios are real, so that every admittance matrix is
complex symmetric; phase displacement is kept apart per node and applied to results afterwards.

A branch k between nodes i = from_node[k] and j = to_node[k] has, in each sequence, an ideal ratio t at its from side,
a series admittance y and a shunt at each end::

    i ──(t:1)──┬── y ──┬── j           I_i = (y / t²) V_i − (y / t) V_j + y_from V_i
             y_from   y_to             I_j = −(y / t) V_i + y V_j + y_to V_j

both currents flowing into the branch (y_from is at node i's own side of the ratio). Absent in a sequence: y = 0.
"""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from onelinefault.engine.method import CLASSICAL, Method
from onelinefault.model.findings import Finding

ComplexArray = NDArray[np.complex128]
FloatArray = NDArray[np.float64]
IntArray = NDArray[np.int64]

TerminalKey = tuple[str, str]  # part id, terminal name


@dataclass(frozen=True, slots=True)
class Node:
    """Terminals at one potential. label: the bus's name, or a phrase that finds the place on the sheet.

    inner: the star point of a three-winding transformer, no terminal on the sheet. buses: ids of its buses, the first
    gives the label. known: whether anything states the nominal voltage; where nothing does it is a mere 1 kV.
    """

    label: str
    nominal_kv: float
    terminals: tuple[TerminalKey, ...]
    buses: tuple[str, ...] = ()
    inner: bool = False
    known: bool = True


@dataclass(frozen=True, slots=True)
class Source:
    """A shunt that drives current: a supply or a rotating machine (its admittance is in the shunt arrays)."""

    part: str
    node: int
    shunt: int


@dataclass(frozen=True, slots=True)
class Converter:
    """A limited current source. limit_pu: largest current on the plant's base; angle_deg: current lags by this.

    constant: it feeds its limit whatever the voltage, in phase with the fault current (IEC 60909).
    """

    part: str
    node: int
    limit_pu: float
    angle_deg: float
    constant: bool = False


@dataclass(frozen=True)
class Network:
    """All arrays of one plant in one case. Shapes: n nodes, m branches, s shunts.

    branch_terminals: per branch the (part, terminal) at its from and to end; None at an inner node.
    neutral_terms: (part, side label, kind of element "branch from" | "branch to" | "shunt", index, factor): the current
    to earth in a star point is factor · 3 I0 of that element's terminal (kA on the side's own base).
    displacement_deg: angle by which positive-sequence quantities at the node lead those of its island's reference node.
    live: whether any source or converter feeds the node. joints: closed devices and wires, for the currents inside
    nodes. method: what decided the impedances. driving: voltage that drives a fault at the node over its nominal
    voltage, None: the plant's own factor. corrections: factors of the method on the parts' impedances.
    """

    base_mva: float
    frequency_hz: float
    nodes: tuple[Node, ...]
    node_of: Mapping[TerminalKey, int]
    from_node: IntArray
    to_node: IntArray
    ratio: FloatArray  # (m, 3)
    y_series: ComplexArray  # (m, 3)
    y_from: ComplexArray  # (m, 3)
    y_to: ComplexArray  # (m, 3)
    branch_parts: tuple[str, ...]
    branch_terminals: tuple[tuple[TerminalKey | None, TerminalKey | None], ...]
    shunt_node: IntArray
    y_shunt: ComplexArray  # (s, 3)
    shunt_parts: tuple[str, ...]
    shunt_terminals: tuple[TerminalKey | None, ...]
    sources: tuple[Source, ...]
    converters: tuple[Converter, ...]
    displacement_deg: FloatArray  # (n,)
    island: IntArray  # (n,)
    live: NDArray[np.bool_]  # (n,)
    joints: tuple["Joint", ...]
    neutral_terms: tuple["NeutralTerm", ...] = ()
    findings: tuple[Finding, ...] = ()
    method: Method = CLASSICAL
    driving: FloatArray | None = None  # (n,)
    corrections: tuple["PartCorrection", ...] = ()

    @property
    def nominal_kv(self) -> FloatArray:
        """Nominal line-to-line voltage of each node in kV, shape (n,)."""
        return np.array([node.nominal_kv for node in self.nodes])

    @property
    def base_ka(self) -> FloatArray:
        """Base current of each node in kA, shape (n,)."""
        ka: FloatArray = self.base_mva / (np.sqrt(3) * self.nominal_kv)
        return ka

    @property
    def base_ohm(self) -> FloatArray:
        """Base impedance of each node in ohm, shape (n,)."""
        ohm: FloatArray = self.nominal_kv**2 / self.base_mva
        return ohm


@dataclass(frozen=True, slots=True)
class PartCorrection:
    """A factor of the method on one part, "K_T" say."""

    part: str
    name: str
    value: float


@dataclass(frozen=True, slots=True)
class Joint:
    """A wire or a closed device inside a node; its current follows from Kirchhoff's law (see ``joints``)."""

    id: str
    is_wire: bool
    a: TerminalKey
    b: TerminalKey


@dataclass(frozen=True, slots=True)
class NeutralTerm:
    """Where the current of an earthed star point is read: factor · 3 I0 of an element's end."""

    part: str
    side: str
    element: str  # "from" or "to" end of a branch, or "shunt"
    index: int
    factor: float = 1.0
