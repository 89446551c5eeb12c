"""Nominal voltages of the nodes, and what does not agree about them.

A node takes, in this order: the nominal voltage of its own bus, or of a supply; the one carried along cables, lines,
busways and reactors; a transformer winding's rated voltage; a machine's or consumer's rated voltage; the one behind an
open device or a conductor out of service. Where several stand at one place of the order, the lowest is taken: feeding
windings are rated above nominal voltage, the consumers' not.
"""

from collections import deque
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from onelinefault.engine.topology import DEVICES, Topology, components, is_closed
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.consumers import Bus, Capacitor, Load
from onelinefault.model.figures import voltage_text
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3

CARRIERS = (Cable, OverheadLine, Busway, Reactor)
WINDINGS: dict[type[Part], tuple[tuple[str, str], ...]] = {
    Transformer: (("high", "high_voltage"), ("low", "low_voltage")),
    Transformer3: (("high", "high_voltage"), ("medium", "medium_voltage"), ("low", "low_voltage")),
    Autotransformer: (("high", "high_voltage"), ("low", "low_voltage"), ("tertiary", "tertiary_voltage")),
}
"""Terminal and field of each winding's rated voltage, by kind of transformer."""
MACHINES = (
    SynchronousGenerator,
    SynchronousMotor,
    InductionMotor,
    ConverterSource,
    EarthingTransformer,
    Load,
    Capacitor,
)
UNKNOWN_KV = 1.0
SAME = 1.005  # nominal voltages whose ratio is below this are the same


@dataclass(frozen=True)
class NominalVoltages:
    """kv: of each node, ``UNKNOWN_KV`` where nothing says it. known: whether something does.

    zone: for each node the number of its group of nodes that conductors join.
    """

    kv: tuple[float, ...]
    known: tuple[bool, ...]
    zone: tuple[int, ...]
    findings: tuple[Finding, ...]


Stated = dict[int, list[tuple[float, Part]]]


def nominal_voltages(topology: Topology) -> NominalVoltages:
    """Nominal voltage of every node, in kV, with findings where two do not agree or none is known."""
    stated = _stated(topology)
    kv: dict[int, float] = {node: _bus_first(entries)[0] for node, entries in stated.items()}
    carriers = [p for p in topology.parts.values() if isinstance(p, CARRIERS) and p.in_service]
    edges = [_ends(topology, part) for part in carriers]
    _carry(kv, edges)
    one, other = np.array(edges, np.int64).reshape(-1, 2).T
    zone = components(len(topology.members), one, other).tolist()
    for candidates in (_rated_by_windings(topology), _rated_by_machines(topology)):
        _fill(kv, candidates, zone)
    _carry(kv, edges + [_ends(topology, p) for p in topology.parts.values() if _open_path(p)])
    findings = [*_two_on_a_node(stated), *_two_along(topology, kv, carriers), *_unknown(topology, kv)]
    nodes = range(len(topology.members))
    found, known = tuple(kv.get(node, UNKNOWN_KV) for node in nodes), tuple(node in kv for node in nodes)
    return NominalVoltages(found, known, tuple(zone), tuple(findings))


def volts(part: Part, name: str) -> float | None:
    """A voltage of the part in kV, None when it is not given."""
    value = getattr(part, name)
    return value.to("kV") if isinstance(value, Quantity) and value.dimension == "voltage" and value.value > 0 else None


def _stated(topology: Topology) -> Stated:
    stated: Stated = {}
    for part in topology.parts.values():
        if isinstance(part, Bus | Supply) and part.in_service:
            kv = volts(part, "nominal_voltage")
            if kv is not None:
                stated.setdefault(topology.nodes_of(part)[0], []).append((kv, part))
    return stated


def _bus_first(entries: list[tuple[float, Part]]) -> tuple[float, Part]:
    return next((entry for entry in entries if isinstance(entry[1], Bus)), entries[0])


def _ends(topology: Topology, part: Part) -> tuple[int, int]:
    one, other = topology.nodes_of(part)
    return one, other


def _open_path(part: Part) -> bool:
    is_open = isinstance(part, DEVICES) and not is_closed(part)
    return is_open or (isinstance(part, CARRIERS) and not part.in_service)


def _carry(kv: dict[int, float], edges: Iterable[tuple[int, int]]) -> None:
    """Spread known voltages along the edges, each node from the nearest; between equally near ones from the lowest."""
    neighbours: dict[int, list[int]] = {}
    for one, other in edges:
        neighbours.setdefault(one, []).append(other)
        neighbours.setdefault(other, []).append(one)
    waiting = deque(sorted((node for node in neighbours if node in kv), key=lambda node: (kv[node], node)))
    while waiting:
        node = waiting.popleft()
        for neighbour in neighbours[node]:
            if neighbour not in kv:
                kv[neighbour] = kv[node]
                waiting.append(neighbour)


def _fill(kv: dict[int, float], candidates: dict[int, float], zone: list[int]) -> None:
    """Give the nodes of an unknown zone (nodes that conductors join) the lowest rated voltage in it."""
    lowest: dict[int, float] = {}
    for node, value in candidates.items():
        if node not in kv:
            _lower(lowest, zone[node], value)
    for node, number in enumerate(zone):
        if node not in kv and number in lowest:
            kv[node] = lowest[number]


def _rated_by_windings(topology: Topology) -> dict[int, float]:
    rated: dict[int, float] = {}
    for part in topology.parts.values():
        for terminal, name in WINDINGS.get(type(part), ()):
            _lower(rated, topology.node(part.id, terminal), volts(part, name))
    return rated


def _rated_by_machines(topology: Topology) -> dict[int, float]:
    rated: dict[int, float] = {}
    for part in topology.parts.values():
        if isinstance(part, MACHINES):
            _lower(rated, topology.nodes_of(part)[0], volts(part, "rated_voltage"))
    return rated


def _lower(rated: dict[int, float], node: int, kv: float | None) -> None:
    if kv is not None:
        rated[node] = min(kv, rated.get(node, kv))


def _two_on_a_node(stated: Stated) -> list[Finding]:
    findings = []
    for entries in stated.values():
        lowest, highest = min(entries, key=lambda e: e[0]), max(entries, key=lambda e: e[0])
        if highest[0] > SAME * lowest[0]:
            findings.append(_two_voltages(highest, lowest, "are at one node"))
    return findings


def _two_voltages(one: tuple[float, Part], other: tuple[float, Part], how: str, via: Part | None = None) -> Finding:
    remedy = "Put a transformer between them, part them, or correct a nominal voltage."
    named = f"{one[1].title} ({voltage_text(one[0])}) and {other[1].title} ({voltage_text(other[0])})"
    parts = (one[1].id, other[1].id) + ((via.id,) if via else ())
    return Finding(Severity.ERROR, "two-voltages", f"{named} {how}.", remedy, parts, "nominal_voltage")


def _two_along(topology: Topology, kv: dict[int, float], carriers: Sequence[Part]) -> list[Finding]:
    findings = []
    for part in carriers:
        one, other = _ends(topology, part)
        if one in kv and other in kv and max(kv[one], kv[other]) > SAME * min(kv[one], kv[other]):
            ends = [(kv[node], _voltage_giver(topology, node, part)) for node in (one, other)]
            findings.append(_two_voltages(ends[0], ends[1], f"are joined by {part.title}", via=part))
    return findings


def _voltage_giver(topology: Topology, node: int, otherwise: Part) -> Part:
    """The part to name for a node's voltage: its bus or supply, else any other part there."""
    here = [topology.parts[part_id] for part_id, _ in topology.members[node]]
    ranked = sorted(here, key=lambda p: (not isinstance(p, Bus | Supply), p.id == otherwise.id))
    return ranked[0]


def _unknown(topology: Topology, kv: dict[int, float]) -> list[Finding]:
    """A remark for every bus without a known voltage."""
    findings = []
    for node, buses in enumerate(topology.buses):
        if buses and node not in kv:
            bus = topology.parts[buses[0]]
            message = f"The nominal voltage of {bus.title} is not known: nothing near it states one."
            remedy = f"Enter the nominal voltage of {bus.title}, or connect it to a supply or a transformer."
            findings.append(Finding(Severity.WARNING, "unknown-voltage", message, remedy, (bus.id,), "nominal_voltage"))
    return findings
