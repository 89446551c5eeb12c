"""From the drawing to nodes: terminals that wires and closed devices hold at one potential.

Parts and wires are taken in the order of their ids' numbers, so the order in which a plant lists them changes nothing.
"""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components

from onelinefault.engine.network import IntArray, Joint, TerminalKey
from onelinefault.model.consumers import Bus
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.switching import Breaker, Fuse, Switch

DEVICES = (Breaker, Switch, Fuse)


@dataclass(frozen=True)
class Topology:
    """Nodes as groups of terminals. parts: in the order of their ids. buses: ids of the buses at each node.

    members: the terminals of each node, in the order of the parts. joints: wires and closed devices inside nodes.
    """

    parts: Mapping[str, Part]
    members: tuple[tuple[TerminalKey, ...], ...]
    node_of: Mapping[TerminalKey, int]
    buses: tuple[tuple[str, ...], ...]
    joints: tuple[Joint, ...]

    def node(self, part: str, terminal: str) -> int:
        """The node at a terminal of a part."""
        return self.node_of[part, terminal]

    def nodes_of(self, part: Part) -> tuple[int, ...]:
        """The nodes at a part's terminals, in their order."""
        return tuple(self.node_of[part.id, terminal.name] for terminal in part.terminals)


@lru_cache(maxsize=65536)
def id_order(item_id: str) -> tuple[str, int, str]:
    """Sort key of an id: "p2" comes before "p10"."""
    match = re.search(r"\d+$", item_id)
    return (item_id[: match.start()], int(match.group()), item_id) if match else (item_id, -1, item_id)


def is_closed(part: Part) -> bool:
    """Whether the part is a device that joins its two terminals: in service and closed."""
    return isinstance(part, DEVICES) and part.in_service and part.value("closed") is True


def topology_of(plant: Plant) -> Topology:
    """Find the nodes of a plant.

    A device out of service is open; wires to a bus out of service end nowhere. A wire to itself or to a terminal that
    does not exist joins nothing.
    """
    parts = {part_id: plant.parts[part_id] for part_id in sorted(plant.parts, key=id_order)}
    keys = [(part.id, terminal.name) for part in parts.values() for terminal in part.terminals]
    number = {key: k for k, key in enumerate(keys)}
    joints = _joints(plant, parts, number)
    label = _components(len(keys), [(number[j.a], number[j.b]) for j in joints])
    members: list[list[TerminalKey]] = [[] for _ in range(int(label.max(initial=-1)) + 1)]
    for key, node in zip(keys, label.tolist(), strict=True):
        members[node].append(key)
    buses = tuple(tuple(part_id for part_id, _ in group if _is_bus(parts[part_id])) for group in members)
    node_of = dict(zip(keys, label.tolist(), strict=True))
    return Topology(parts, tuple(tuple(group) for group in members), node_of, buses, joints)


def node_label(topology: Topology, node: int) -> str:
    """The name of the node's first bus, or a phrase that finds the place: "between T1 and Q3", "at M2"."""
    buses = topology.buses[node]
    if buses:
        bus = topology.parts[buses[0]]
        return bus.name or bus.title
    parts = [topology.parts[part_id] for part_id in dict.fromkeys(part_id for part_id, _ in topology.members[node])]
    names = [part.name or part.title for part in parts if not isinstance(part, Bus)] or [parts[0].title]
    return f"between {names[0]} and {names[1]}" if len(names) > 1 else f"at {names[0]}"


def _is_bus(part: Part) -> bool:
    """A bus that is listed; a length of 0 without a name is a mere joint."""
    return isinstance(part, Bus) and bool(part.length or part.name)


def _joints(plant: Plant, parts: Mapping[str, Part], number: Mapping[TerminalKey, int]) -> tuple[Joint, ...]:
    dead_bars = {part.id for part in parts.values() if isinstance(part, Bus) and not part.in_service}
    joints = []
    for wire_id in sorted(plant.wires, key=id_order):
        wire = plant.wires[wire_id]
        a, b = (wire.a.part, wire.a.terminal), (wire.b.part, wire.b.terminal)
        if a != b and a in number and b in number and a[0] not in dead_bars and b[0] not in dead_bars:
            joints.append(Joint(wire_id, True, a, b))
    for part in parts.values():
        if is_closed(part):
            one, other = part.terminals
            joints.append(Joint(part.id, False, (part.id, one.name), (part.id, other.name)))
    return tuple(joints)


def _components(size: int, pairs: list[tuple[int, int]]) -> IntArray:
    """The component of each of ``size`` things, numbered in the order of their first members; shape (size,)."""
    if not size:
        return np.zeros(0, np.int64)
    ends = np.array(pairs, np.int64).reshape(-1, 2)
    graph = coo_array((np.ones(len(ends), np.int8), (ends[:, 0], ends[:, 1])), shape=(size, size))
    _, found = connected_components(graph, directed=False)
    _, first, label = np.unique(found, return_index=True, return_inverse=True)
    rank = np.empty(len(first), np.int64)
    rank[np.argsort(first)] = np.arange(len(first))
    return np.asarray(rank[label], np.int64)


def components(size: int, one: IntArray, other: IntArray) -> IntArray:
    """Connected components of a graph with edges one–other, shape (edges,) each, as numbers of shape (size,).

    They are numbered in the order of their first members.
    """
    return _components(size, list(zip(one.tolist(), other.tolist(), strict=True)))
