"""The network as seen from one place or from many: what a method needs to derive figures from several networks.

Places are nodes, which all views of a case have alike, or one point along a branch.
"""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from onelinefault.engine.along import SplitBranch, spot_along
from onelinefault.engine.boundary import Boundary, boundary_of
from onelinefault.engine.converters import settle
from onelinefault.engine.faults import Spot, impedance_through
from onelinefault.engine.grids import Grid
from onelinefault.engine.network import ComplexArray, FloatArray, IntArray
from onelinefault.engine.ordering import BoolArray
from onelinefault.engine.places import Site
from onelinefault.engine.symmetrical import POSITIVE, to_phases
from onelinefault.model.fault import Fault

AT_ONCE = 64  # sources whose columns are worked out together


@dataclass(frozen=True, eq=False)
class Places:
    """k places with the same fault: nodes (k,); or with a branch a single point along it, and the nearer node."""

    nodes: IntArray
    fault: Fault
    branch: int = -1
    fraction: float = 0.0

    @classmethod
    def at(cls, site: Site, fault: Fault) -> "Places":
        """The single place of a fault."""
        return cls(np.array([site.node]), fault, site.branch, site.fraction)


@dataclass(frozen=True, eq=False)
class Sight:
    """k places in one grid, per unit."""

    grid: Grid
    places: Places

    @cached_property
    def _spot(self) -> Spot | None:
        """The full view of a single place."""
        places, grid = self.places, self.grid
        if len(places.nodes) != 1:
            return None
        if places.branch < 0:
            return grid.equations.spot(int(places.nodes[0]), grid.prefault)
        split = SplitBranch.of(grid.network, places.branch, places.fraction)
        return spot_along(grid.equations, split, grid.prefault, places.fraction)

    @cached_property
    def live(self) -> BoolArray:
        """Whether a source or a converter feeds each place, shape (k,)."""
        return self.grid.network.live[self.places.nodes]

    @cached_property
    def emf(self) -> ComplexArray:
        """Voltage before the fault, shape (k,)."""
        spot = self._spot
        return self.grid.prefault.at(self.places.nodes) if spot is None else np.array([spot.emf])

    @cached_property
    def z(self) -> ComplexArray:
        """Impedances in the three sequences, shape (k, 3), infinite where open."""
        spot, equations, nodes = self._spot, self.grid.equations, self.places.nodes
        z = equations.diagonal[nodes] if spot is None else spot.z[None]
        tied = equations.tied[nodes] if self.places.branch < 0 else np.isfinite(z)
        return np.where(tied & self.live[:, None], z, np.inf)

    def boundary(self) -> Boundary:
        """The fault's equations; reactances of its own impedances are those of the view's frequency."""
        fault, view = self.places.fault, self.grid.view
        zf, zg = (complex(view.resistance * z.real, view.reactance * z.imag) for z in (fault.zf_ohm, fault.zg_ohm))
        base = float(self.grid.network.base_ohm[self.places.nodes[0]]) if len(self.places.nodes) else 1.0
        return boundary_of(replace(fault, zf_ohm=zf, zg_ohm=zg), base or 1.0)

    @cached_property
    def through(self) -> ComplexArray:
        """Impedance that the fault current flows through, E1/I1 without converters, shape (k,), infinite where none."""
        return impedance_through(self.boundary(), self.z)

    @cached_property
    def ratio(self) -> FloatArray:
        """R/X of that impedance, shape (k,); 0 where no current flows."""
        flows = np.isfinite(self.through)
        z = np.where(flows, self.through, 1j)
        ratio: FloatArray = np.divide(z.real, z.imag, out=np.zeros(len(z)), where=z.imag > 0)
        return ratio

    def phases_ka(self, converters: bool) -> ComplexArray:
        """Phase currents into the fault in kA, shape (k, 3), its voltage before at 0°; with or without converters."""
        current = self._fed if converters and self.grid.network.converters else self._unfed
        turned = np.divide(abs(self.emf), self.emf, out=np.ones(len(self.emf), np.complex128), where=self.emf != 0)
        return to_phases(current * (turned * self.grid.network.base_ka[self.places.nodes])[:, None])

    @cached_property
    def _unfed(self) -> ComplexArray:
        return np.where(self.live[:, None], self.boundary().solve(self.emf, self.z)[0], 0.0)

    @cached_property
    def _fed(self) -> ComplexArray:
        grid, spot, nodes = self.grid, self._spot, self.places.nodes
        group, equations = grid.equations.converters, grid.equations
        if spot is None:
            z, to_converters = equations.diagonal[nodes], equations.converter_columns[nodes]
            columns, before = equations.converter_columns, grid.prefault.at_others(nodes, group.node)
        else:
            z, to_converters = spot.z[None], spot.to_converters[None]
            columns, before = spot.converter_columns, spot.before[group.node][None]
        fed = settle(
            group, self.boundary(), emf=self.emf, z=z, to_converters=to_converters, between=columns[group.node],
            before=before,
        )  # fmt: skip
        return np.where(self.live[:, None], fed.current, 0.0)

    def transfers(self, nodes: IntArray) -> Iterator[tuple[slice, ComplexArray]]:
        """Positive-sequence transfer impedances to other nodes (o,), a slice of them at a time, shape (k, slice)."""
        spot = self._spot
        for start in range(0, len(nodes), AT_ONCE):
            part = slice(start, start + AT_ONCE)
            if spot is not None:
                yield part, spot.columns[nodes[part], POSITIVE][None]
                continue
            columns = self.grid.equations.factor.columns(nodes[part])[self.places.nodes, :, POSITIVE]
            yield part, np.where(np.isfinite(columns), columns, 0.0)
