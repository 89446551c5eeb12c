"""One view of a plant in a case, ready to be asked for faults."""

from functools import cached_property

import numpy as np

from onelinefault.engine import remarks
from onelinefault.engine.along import SplitBranch, spot_along
from onelinefault.engine.assumed import assumed_names
from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.fault_result import Translator
from onelinefault.engine.faults import Solution, Spot, solve_fault
from onelinefault.engine.grids import Grid
from onelinefault.engine.places import Site, site_of
from onelinefault.engine.results import FaultResult
from onelinefault.engine.symmetrical import ZERO
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding

EARTH_FAULTS = (FaultKind.LINE_TO_EARTH, FaultKind.TWO_LINES_TO_EARTH)


class Scene:
    """A grid with all that results need besides, worked out once, when first needed."""

    def __init__(self, grid: Grid) -> None:
        self.grid = grid
        self.plant = grid.plant
        self.network = grid.network

    @cached_property
    def assumed(self) -> dict[int, tuple[str, ...]]:
        """For each island the names of parts with typical or guessed data."""
        return assumed_names(self.plant, self.network)

    @cached_property
    def _translator(self) -> Translator:
        every = ((part.id, terminal.name) for part in self.plant.parts.values() for terminal in part.terminals)
        return Translator.of(self.grid.case, self.grid.equations, self.grid.prefault, every)

    @cached_property
    def _branch_of(self) -> dict[str, int]:
        return {part: branch for branch, part in enumerate(self.network.branch_parts)}

    def site(self, place: Place) -> Site:
        """Where a place is, alike in all views of a case. Raises NoSuchPlaceError when it is not in the network."""
        return site_of(self.plant, self.network, self._branch_of, place)

    def fault(self, fault: Fault, site: Site) -> FaultResult:
        """A fault at its site. Raises StudyError, SingularNetworkError as Study.fault does."""
        network, equations, prefault = self.network, self.grid.equations, self.grid.prefault
        boundary = boundary_of(fault, float(self._translator.scales.base_ohm[site.node]))
        split = None
        if not network.live[site.node]:
            spot, solution = self._nothing(site.node)
        elif site.branch >= 0:
            split = SplitBranch.of(network, site.branch, site.fraction)
            spot = spot_along(equations, split, prefault, site.fraction)
            solution = solve_fault(equations, spot, boundary)
        else:
            spot = equations.spot(site.node, prefault)
            solution = solve_fault(equations, spot, boundary)
        findings = self._findings(fault, site, spot, solution)
        return self._translator.result(fault, site, spot, boundary, solution, split, findings)

    def _nothing(self, node: int) -> tuple[Spot, Solution]:
        """A place that no source feeds, and what happens there."""
        n, c = len(self.network.nodes), len(self.network.converters)
        none, calm = np.zeros((n + 2, 3), np.complex128), np.zeros(c, np.complex128)
        spot = Spot(
            node=node,
            z=np.full(3, np.inf, np.complex128),
            columns=none[2:],
            follow=none[2:].real,
            before=self.grid.prefault.everywhere(node),
            emf=0j,
            to_converters=calm,
            converter_columns=np.zeros((n, c), np.complex128),
        )
        return spot, Solution(none[0], none[1], none[2:], calm, np.ones(c, np.bool_))

    def _findings(self, fault: Fault, site: Site, spot: Spot, solution: Solution) -> tuple[Finding, ...]:
        label, place = self.network.nodes[site.node].label, (fault.place.part,)
        if not self.network.live[site.node]:
            return (remarks.dead(label, place),)
        found = []
        if fault.kind in EARTH_FAULTS and not np.isfinite(spot.z[ZERO]):
            found.append(remarks.unearthed(label, place))
        unsettled = [c.part for c, rest in zip(self.network.converters, solution.settled, strict=True) if not rest]
        if unsettled:
            titles = [self.plant.parts[part].title if part in self.plant.parts else part for part in unsettled]
            found.append(remarks.unsettled(titles, tuple(unsettled)))
        names = self.assumed.get(int(self.network.island[site.node]), ())
        if names:
            found.append(remarks.assumed(names))
        return tuple(found)
