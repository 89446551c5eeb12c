"""The table of all buses: every kind of fault at every bus, worked out together."""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from onelinefault.engine import peak
from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.faults import Equations, Solutions, solve_everywhere
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.results import BusRow
from onelinefault.engine.symmetrical import to_phases
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant

Pair = tuple[float, float] | None
_NO_PHASES = (0.0, 0.0, 0.0)


def bus_rows(
    plant: Plant,
    equations: Equations,
    prefault: Prefault,
    kinds: Sequence[FaultKind],
    assumed: Mapping[int, tuple[str, ...]],
) -> list[BusRow]:
    """Rows of all buses with a length in the plant's order, each with all kinds in their order; bolted, usual phases.

    A bus without a source or out of service has zero currents and no impedances. assumed: names by island.
    """
    network = equations.network
    buses = [part for part in plant.parts.values() if isinstance(part, Bus) and part.length > 0]
    at = [network.node_of.get((bus.id, "bar"), -1) for bus in buses]
    nodes = sorted({node for node in at if node >= 0 and network.live[node]})
    place = {node: number for number, node in enumerate(nodes)}
    solved = [_solve(equations, prefault, np.array(nodes, np.int64), kind) for kind in kinds] if nodes else []
    rows: list[BusRow] = []
    for bus, node in zip(buses, at, strict=True):
        name, number = bus.name or bus.id, place.get(node)
        kv = network.nodes[node].nominal_kv if node >= 0 else 0.0
        if number is None:
            rows += [_dead_row(name, bus.id, kv, kind) for kind in kinds]
            continue
        names = assumed.get(int(network.island[node]), ())
        rows += [columns.row(number, name, bus.id, kv, names) for columns in solved]
    return rows


def _dead_row(name: str, part: str, kv: float, kind: FaultKind) -> BusRow:
    return BusRow(name, part, kv, kind.value, 0.0, _NO_PHASES, _NO_PHASES, 0.0, None, 0.0, 0.0, None, None, None)


@dataclass(frozen=True, slots=True)
class _Columns:
    """The values of one kind of fault, one entry for each node."""

    kind: FaultKind
    ik: list[float]
    phases: list[tuple[float, float, float]]
    angles: list[tuple[float, float, float]]
    residual: list[float]
    x_over_r: list[float]
    level: list[float]
    peak: list[float]
    z: tuple[list[Pair], ...]

    def row(self, k: int, name: str, part: str, kv: float, assumed: tuple[str, ...]) -> BusRow:
        ratio = self.x_over_r[k]
        return BusRow(
            name,
            part,
            kv,
            self.kind.value,
            self.ik[k],
            self.phases[k],
            self.angles[k],
            self.residual[k],
            None if math.isnan(ratio) else ratio,
            self.level[k],
            self.peak[k],
            self.z[0][k],
            self.z[1][k],
            self.z[2][k],
            assumed,
        )


def _solve(equations: Equations, prefault: Prefault, nodes: IntArray, kind: FaultKind) -> _Columns:
    """One kind of fault at all the nodes."""
    network = equations.network
    solved = solve_everywhere(equations, prefault, nodes, boundary_of(Fault(Place(""), kind)))
    nominal = network.nominal_kv[nodes]
    phases = phases_of_solutions(solved, network.base_mva / (np.sqrt(3) * nominal))
    size: FloatArray = abs(phases)
    ik = size.max(axis=1)
    return _Columns(
        kind=kind,
        ik=ik.tolist(),
        phases=_triples(size),
        angles=_triples(_angles(phases)),
        residual=abs(phases.sum(axis=1)).tolist(),
        x_over_r=peak.x_over_r(solved.through).tolist(),
        level=peak.fault_level_mva(ik, nominal).tolist(),
        peak=peak.peak_ka(ik, solved.through).tolist(),
        z=tuple(_pairs(solved.z[:, sequence], nominal**2 / network.base_mva) for sequence in range(3)),
    )


def phases_of_solutions(solved: Solutions, base_ka: FloatArray) -> ComplexArray:
    """Phase currents into the faults in kA, shape (k, 3), the voltage before each fault at 0°; base_ka (k,)."""
    size = abs(solved.emf)
    start = np.divide(size, solved.emf, out=np.ones(size.shape, np.complex128), where=size > 0)
    return to_phases(solved.current * (base_ka * start)[:, None])


def _angles(phases: ComplexArray) -> FloatArray:
    """Degrees, 0 where the current is nothing but rounding."""
    size = abs(phases)
    real = size > 1e-12 * size.max(axis=1, keepdims=True)
    angles: FloatArray = np.where(real, np.rad2deg(np.angle(phases)), 0.0)
    return angles


def _triples(values: FloatArray) -> list[tuple[float, float, float]]:
    return [(a, b, c) for a, b, c in values.tolist()]


def _pairs(z: ComplexArray, base_ohm: FloatArray) -> list[Pair]:
    closed = np.isfinite(z)
    r, x = (np.where(closed, z, 0.0).view(np.float64).reshape(-1, 2) * base_ohm[:, None]).T.tolist()
    return [(a, b) if there else None for a, b, there in zip(r, x, closed.tolist(), strict=True)]
