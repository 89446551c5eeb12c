"""IEC 60909-0, clause 9: how the currents of machines have decayed when a breaker opens.

Single-fed branches add up what is left of each; in other networks what each machine takes away is weighted with the
dip of its voltage. Currents are complex throughout; per unit of the plant's base.
"""

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from onelinefault.engine import iec60909_decay as decay
from onelinefault.engine.grids import Grid
from onelinefault.engine.iec60909_figures import MachineShare
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray, Network
from onelinefault.engine.sequence_machines import induction_mva, pole_pairs, running_count, synchronous_mva
from onelinefault.engine.sequence_stamps import in_unit
from onelinefault.engine.sight import Sight
from onelinefault.engine.symmetrical import POSITIVE
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.sources import InductionMotor, SynchronousGenerator, SynchronousMotor

SQRT3 = math.sqrt(3)


@dataclass(frozen=True, eq=False)
class Machines:
    """All machines of a network. Shapes (s,): parts by their place in the arrays.

    node; y: positive-sequence admittance, per unit; rated_pu: rated current of all that run; per_pair_mw: rated power
    of one induction motor for each pair of poles, not-a-number for synchronous machines.
    """

    parts: tuple[str, ...]
    node: IntArray
    y: ComplexArray
    rated_pu: FloatArray
    per_pair_mw: FloatArray

    @classmethod
    def of(cls, plant: Plant, network: Network) -> "Machines":
        """The synchronous and induction machines among the network's sources."""
        found = [(s, plant.parts[s.part]) for s in network.sources if s.part in plant.parts]
        machines = [
            (s, part) for s, part in found if isinstance(part, InductionMotor | SynchronousGenerator | SynchronousMotor)
        ]
        shunts = np.array([s.shunt for s, _ in machines], np.int64)
        node = np.array([s.node for s, _ in machines], np.int64)
        rated_ka = np.array([_rated_ka(part) for _, part in machines], np.float64)
        per_pair = np.array([_per_pair_mw(part, network.frequency_hz) for _, part in machines], np.float64)
        return cls(
            tuple(part.id for _, part in machines),
            node,
            network.y_shunt[shunts, POSITIVE],
            rated_ka / network.base_ka[node],
            per_pair,
        )

    def left(self, times_rated: FloatArray, time_s: float, part: slice) -> FloatArray:
        """Ib/I″k of some of the machines, shape (k, slice): μ of synchronous machines, μ·q of induction motors."""
        per_pair = self.per_pair_mw[part]
        synchronous = np.isnan(per_pair)
        motor = decay.motor_decay(times_rated, np.where(synchronous, 1.0, per_pair), time_s)
        return np.where(synchronous, decay.mu(times_rated, time_s), motor)


def _rated_ka(part: Part) -> float:
    kv = in_unit(part, "rated_voltage", "kV")
    if isinstance(part, InductionMotor):
        return induction_mva(part) * running_count(part) / (SQRT3 * kv)
    assert isinstance(part, SynchronousGenerator | SynchronousMotor)
    return synchronous_mva(part) / (SQRT3 * kv)


def _per_pair_mw(part: Part, frequency_hz: float) -> float:
    if not isinstance(part, InductionMotor):
        return math.nan
    return in_unit(part, "rated_power", "MW") / pole_pairs(part, frequency_hz)


@dataclass(frozen=True, eq=False)
class Breaking:
    """Symmetrical breaking currents in kA, shape (k,): of a meshed network, and of separately fed branches."""

    meshed_ka: FloatArray
    apart_ka: FloatArray
    shares: tuple[MachineShare, ...]


def breaking(plant: Plant, sight: Sight, time_s: float) -> Breaking:
    """Breaking currents of three-phase faults, arrays (k,); shares: of a single place's machines.

    Meshed: Ib = I″k − Σ ΔU″/(c·Un/√3)·(1 − μq)·I″kM with ΔU″ = jX″·I″kM, all complex; a product ΔU″·I″kM is the same on
    every level. Apart: Ib = I″k − Σ (1 − μq)·I″kM, each referred to the fault's level. Source: clause 9.
    """
    grid = sight.grid
    machines = Machines.of(plant, grid.network)
    whole = np.divide(sight.emf, sight.through, out=np.zeros_like(sight.emf), where=np.isfinite(sight.through))
    meshed, apart = whole.copy(), whole.copy()
    shares: list[MachineShare] = []
    for part, transfer in sight.transfers(machines.node):
        own = machines.y[part] * transfer * whole[:, None]
        times_rated = abs(own) / machines.rated_pu[part]
        left = machines.left(times_rated, time_s, part)
        reactance = (1 / machines.y[part]).imag
        dip = np.divide(1j * reactance * own, sight.emf[:, None], out=np.zeros_like(own), where=sight.live[:, None])
        meshed -= (dip * (1 - left) * own).sum(axis=1)
        apart -= (_at_fault(grid, sight, machines.node[part]) * (1 - left) * own).sum(axis=1)
        if len(whole) == 1:
            shares += _shares(grid, machines, part, own, times_rated, left)
    base_ka = grid.network.base_ka[sight.places.nodes]
    return Breaking(abs(meshed) * base_ka, abs(apart) * base_ka, tuple(shares))


def _at_fault(grid: Grid, sight: Sight, nodes: IntArray) -> FloatArray:
    """Factor that refers a per-unit current at each node to the fault's level by the unloaded ratios, shape (k, o)."""
    potentials, places = grid.prefault.potentials, sight.places
    own = grid.network.to_node[places.branch : places.branch + 1] if places.branch >= 0 else places.nodes
    same = potentials.component[nodes] == potentials.component[own][:, None]
    return np.where(same, potentials.ratio[nodes] / potentials.ratio[own][:, None], 0.0)


def _shares(
    grid: Grid, machines: Machines, part: slice, own: ComplexArray, times_rated: FloatArray, left: FloatArray
) -> Iterator[MachineShare]:
    ka = abs(own[0]) * grid.network.base_ka[machines.node[part]]
    for name, one_ka, times, share in zip(machines.parts[part], ka, times_rated[0], left[0], strict=True):
        yield MachineShare(name, float(one_ka), float(times), float(share))
