"""What derives a method's figures, whatever the method: the views faults are calculated in, and figures for them."""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Protocol

import numpy as np

from onelinefault.engine.bus_rows import bus_rows, buses_of
from onelinefault.engine.case import View
from onelinefault.engine.derived import Figures
from onelinefault.engine.grids import Grid, Grids
from onelinefault.engine.network import IntArray
from onelinefault.engine.results import BusRow, FaultResult
from onelinefault.engine.sight import Places
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place


class Derivation(Protocol):
    """Made once for each study; holds the grids of all its views."""

    grids: Grids

    def views(self, grid: Grid, nodes: IntArray, kind: FaultKind) -> Sequence[View]:
        """The view that a fault of a kind at each node, shape (k,), is calculated in."""

    def of_result(self, result: FaultResult, view: View, places: Places) -> Figures:
        """The figures of a single fault, calculated in a view."""

    def figures(self, view: View, places: Places) -> Sequence[Figures]:
        """The figures of the same fault at each of the places, in their order."""


def derived_rows(
    derivation: Derivation, view: View, kinds: Sequence[FaultKind], assumed: Mapping[int, tuple[str, ...]]
) -> list[BusRow]:
    """The table of all buses with the method's figures: each bus in the view that its fault asks for.

    view: from which the others are chosen. assumed: names by island. Raises SingularNetworkError when impedances
    cancel.
    """
    plant = derivation.grids.plant
    buses = buses_of(plant)
    found: dict[tuple[str, FaultKind], BusRow] = {}
    for kind in kinds:
        for chosen, group in _by_view(derivation, view, buses, kind).items():
            grid = derivation.grids.grid(chosen)
            rows = bus_rows(plant, grid.equations, grid.prefault, (kind,), assumed, group)
            for row in _with_figures(derivation, chosen, rows, kind):
                found[row.part, kind] = row
    return [found[bus.id, kind] for bus in buses for kind in kinds]


def _by_view(derivation: Derivation, view: View, buses: Sequence[Bus], kind: FaultKind) -> dict[View, list[Bus]]:
    grid = derivation.grids.grid(view)
    node_of = grid.network.node_of
    there = [bus for bus in buses if (bus.id, "bar") in node_of]
    views = derivation.views(grid, np.array([node_of[bus.id, "bar"] for bus in there], np.int64), kind)
    chosen = {bus.id: own for bus, own in zip(there, views, strict=True)}
    groups: dict[View, list[Bus]] = {}
    for bus in buses:
        groups.setdefault(chosen.get(bus.id, view), []).append(bus)
    return groups


def _with_figures(derivation: Derivation, view: View, rows: Sequence[BusRow], kind: FaultKind) -> list[BusRow]:
    """Rows of places that are fed get their figures, the others stay as they are."""
    network = derivation.grids.grid(view).network
    node = {row.part: network.node_of.get((row.part, "bar"), -1) for row in rows}
    fed = sorted({k for k in node.values() if k >= 0 and network.live[k]})
    if not fed:
        return list(rows)
    figures = derivation.figures(view, Places(np.array(fed, np.int64), Fault(Place(""), kind)))
    of_node = dict(zip(fed, figures, strict=True))
    return [_with(row, of_node.get(node[row.part])) for row in rows]


def _with(row: BusRow, figures: Figures | None) -> BusRow:
    return row if figures is None else replace(row, figures=figures, peak_ka=figures.peak_ka)
