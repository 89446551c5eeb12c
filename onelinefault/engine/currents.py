"""The network's stamps, used both ways: as admittance matrices, and as the currents that voltages drive.

Per unit with the sequence axis last, as in ``network``. A current counts positive out of a node into the part.
"""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import TypeVar

import numpy as np

from onelinefault.engine.network import ComplexArray, IntArray, Network, TerminalKey
from onelinefault.engine.ordering import BoolArray, SummingMatrix
from onelinefault.engine.symmetrical import ZERO, to_phases

Key = TypeVar("Key")


def admittances(network: Network) -> tuple[ComplexArray, ComplexArray]:
    """The matrices Y of the three sequences: diagonal (n, 3) and, for each branch, its entry Y_ij = −y/t, shape (m, 3).

    Source: nodal admittance matrix with off-nominal ratios, see ``network``.
    """
    diagonal = np.zeros((len(network.nodes), 3), np.complex128)
    transfer = network.y_series / network.ratio
    np.add.at(diagonal, network.from_node, transfer / network.ratio + network.y_from)
    np.add.at(diagonal, network.to_node, network.y_series + network.y_to)
    np.add.at(diagonal, network.shunt_node, network.y_shunt)
    return diagonal, -transfer


def has_shunt(network: Network) -> BoolArray:
    """Whether anything joins the node to earth (sequence reference) in each sequence, shape (n, 3)."""
    shunted = np.zeros((len(network.nodes), 3), np.bool_)
    for node, y in (
        (network.from_node, network.y_from),
        (network.to_node, network.y_to),
        (network.shunt_node, network.y_shunt),
    ):
        np.logical_or.at(shunted, node, y != 0)
    return shunted


def branch_currents(network: Network, at_from: ComplexArray, at_to: ComplexArray) -> tuple[ComplexArray, ComplexArray]:
    """Currents into every branch at its from and its to end, both (m, ..., 3) per unit.

    at_from, at_to (m, ..., 3): the voltages at its ends, by sequence.
    """
    extra = (slice(None), *(None,) * (at_from.ndim - 2))
    ratio, y = network.ratio[extra], network.y_series[extra]
    through = y * (at_from / ratio - at_to)
    return through / ratio + network.y_from[extra] * at_from, network.y_to[extra] * at_to - through


@dataclass(frozen=True, eq=False)
class ByKey(Mapping[Key, ComplexArray]):
    """Rows of an array by key: looks like a dict, costs nothing to make. array (k, ...)."""

    row: Mapping[Key, int]
    array: ComplexArray

    def __getitem__(self, key: Key) -> ComplexArray:
        found: ComplexArray = self.array[self.row[key]]
        return found

    def __iter__(self) -> Iterator[Key]:
        return iter(self.row)

    def __len__(self) -> int:
        return len(self.row)


@dataclass(frozen=True, eq=False)
class Terminals:
    """All terminals of a plant, and which elements of the network hang on each. Made once for each network.

    row: terminal → row. node (t,): its node, −1 outside the network. gather: sums elements, which are all branches at
    their from end, at their to end, all shunts, all converters, onto the t terminals and a last row for those without.
    turn (t, 3) and base_ka (t,): the factors of its node.
    """

    row: Mapping[TerminalKey, int]
    node: IntArray
    gather: SummingMatrix

    @classmethod
    def of(cls, network: Network, others: Iterable[TerminalKey] = ()) -> "Terminals":
        """The network's terminals and others (those that are out of service carry no current)."""
        row = {key: number for number, key in enumerate(dict.fromkeys([*network.node_of, *others]))}
        node = np.array([network.node_of.get(key, -1) for key in row], np.int64)
        hung: list[TerminalKey | None] = [ends[0] for ends in network.branch_terminals]
        hung += [ends[1] for ends in network.branch_terminals]
        hung += [*network.shunt_terminals, *(converter_terminal(network, c) for c in range(len(network.converters)))]
        nowhere = len(row)
        target = np.array([nowhere if key is None else row.get(key, nowhere) for key in hung], np.int64)
        return cls(row, node, SummingMatrix.of(nowhere + 1, target))

    def currents_pu(
        self, at_from: ComplexArray, at_to: ComplexArray, shunts: ComplexArray, converters: ComplexArray
    ) -> ComplexArray:
        """Currents from the node into the parts at each terminal, (t, 3), of the elements' currents, (m|m|s|c, 3)."""
        return (self.gather @ np.concatenate((at_from, at_to, shunts, converters)))[:-1]


def converter_terminal(network: Network, number: int) -> TerminalKey | None:
    """The terminal of a converter: the one of its part at its node."""
    converter = network.converters[number]
    keys = (key for key in network.nodes[converter.node].terminals if key[0] == converter.part)
    return next(keys, None)


def neutral_currents(
    network: Network, at_from: ComplexArray, at_to: ComplexArray, shunts: ComplexArray, base_ka: ComplexArray
) -> dict[tuple[str, str], complex]:
    """Currents to earth in the star points, kA, by part and side: Σ factor · 3 I0 of the element's end.

    at_from, at_to (m, 3), shunts (s, 3): element currents per unit. base_ka (n,): base currents of the nodes, turned to
    the reference where one is chosen. Source: Kirchhoff's law in the star point.
    """
    element = {
        "from": (at_from, network.from_node),
        "to": (at_to, network.to_node),
        "shunt": (shunts, network.shunt_node),
    }
    found: dict[tuple[str, str], complex] = {}
    for term in network.neutral_terms:
        current, node = element[term.element.removeprefix("branch ")]
        into_earth = 3 * term.factor * current[term.index, ZERO] * base_ka[node[term.index]]
        key = (term.part, term.side)
        found[key] = found.get(key, 0j) + complex(into_earth)
    return found


def phases_ka(currents_pu: ComplexArray, factor: ComplexArray) -> ComplexArray:
    """Phase currents in kA of per-unit sequence currents, shape (..., 3): factor (..., 3) turns and scales."""
    return to_phases(currents_pu * factor)
