"""The table of all buses: every kind of fault at every bus, worked out together."""

import math
from collections.abc import Iterator, Mapping, Sequence
from itertools import repeat

import numpy as np

from onelinefault.engine import peak
from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.faults import Equations, Solutions, solve_everywhere
from onelinefault.engine.network import ComplexArray, FloatArray, Network
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.results import BusRow
from onelinefault.engine.symmetrical import to_phases
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant


def bus_rows(
    plant: Plant,
    equations: Equations,
    prefault: Prefault,
    kinds: Sequence[FaultKind],
    assumed: Mapping[int, tuple[str, ...]],
    of: Sequence[Bus] | None = None,
) -> list[BusRow]:
    """Rows of all buses with a length in the plant's order, each with all kinds in their order; bolted, usual phases.

    A bus without a source or out of service has zero currents and no impedances. assumed: names by island. of: some
    buses in place of all.
    """
    network = equations.network
    buses = buses_of(plant) if of is None else of
    at = [network.node_of.get((bus.id, "bar"), -1) for bus in buses]
    is_live = [node >= 0 and bool(network.live[node]) for node in at]
    live = [(bus, node) for bus, node, feeds in zip(buses, at, is_live, strict=True) if feeds]
    dead = [(bus, node) for bus, node, feeds in zip(buses, at, is_live, strict=True) if not feeds]
    island = network.island.tolist()
    names = [assumed.get(island[node], ()) for _, node in live]
    tables = [
        (_live_rows(equations, prefault, kind, live, names), iter([_dead_row(network, *bus, kind) for bus in dead]))
        for kind in kinds
    ]
    return [next(rows[0] if feeds else rows[1]) for feeds in is_live for rows in tables]


def buses_of(plant: Plant) -> list[Bus]:
    """All buses with a length in the plant's order."""
    return [part for part in plant.parts.values() if isinstance(part, Bus) and part.length > 0]


def _dead_row(network: Network, bus: Bus, node: int, kind: FaultKind) -> BusRow:
    kv = network.nodes[node].nominal_kv if node >= 0 else 0.0
    nothing = (0.0, 0.0, 0.0)
    return BusRow(
        bus.name or bus.id, bus.id, kv, kind.value, 0.0, nothing, nothing, 0.0, None, 0.0, 0.0, None, None, None
    )


def _live_rows(
    equations: Equations,
    prefault: Prefault,
    kind: FaultKind,
    buses: Sequence[tuple[Bus, int]],
    assumed: Sequence[tuple[str, ...]],
) -> Iterator[BusRow]:
    """One kind of fault at all buses that a source feeds."""
    network = equations.network
    nodes, place = np.unique(np.array([node for _, node in buses], np.int64), return_inverse=True)
    solved = solve_everywhere(equations, prefault, nodes, boundary_of(Fault(Place(""), kind)))
    nominal = np.array([network.nodes[node].nominal_kv for node in nodes])
    phases = phases_of_solutions(solved, network.base_mva / (np.sqrt(3) * nominal))
    size = np.abs(phases)
    ik = size.max(axis=1)
    base_ohm = nominal**2 / network.base_mva
    return map(
        BusRow,
        (bus.name or bus.id for bus, _ in buses),
        (bus.id for bus, _ in buses),
        nominal[place].tolist(),
        repeat(kind.value),
        ik[place].tolist(),
        map(tuple, size[place].tolist()),
        map(tuple, _angles(phases)[place].tolist()),
        abs(phases.sum(axis=1))[place].tolist(),
        [None if math.isnan(ratio) else ratio for ratio in peak.x_over_r(solved.through)[place].tolist()],
        peak.fault_level_mva(ik, nominal)[place].tolist(),
        peak.peak_ka(ik, solved.through)[place].tolist(),
        *(_pairs(solved.z[place, sequence], base_ohm[place]) for sequence in range(3)),
        assumed,
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


def _pairs(z: ComplexArray, base_ohm: FloatArray) -> list[tuple[float, float] | None]:
    closed = np.isfinite(z)
    r, x = (np.where(closed, z, 0.0).view(np.float64).reshape(-1, 2) * base_ohm[:, None]).T.tolist()
    return [(a, b) if there else None for a, b, there in zip(r, x, closed.tolist(), strict=True)]
