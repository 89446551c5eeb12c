"""A study: one plant in one state, ready to be asked for faults. Everything is worked out once, when first needed."""

from collections.abc import Sequence
from functools import cached_property

import numpy as np

from onelinefault.engine import remarks
from onelinefault.engine.along import SplitBranch, spot_along
from onelinefault.engine.assumed import assumed_names
from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.build import build_network
from onelinefault.engine.bus_rows import bus_rows
from onelinefault.engine.case import Case
from onelinefault.engine.fault_result import Translator
from onelinefault.engine.faults import Equations, Solution, Spot, solve_fault
from onelinefault.engine.network import Network
from onelinefault.engine.places import Site, place_named, site_of
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.results import BusRow, FaultResult
from onelinefault.engine.symmetrical import ZERO
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant

MOTOR_KINDS = ("induction_motor", "synchronous_motor")
EARTH_FAULTS = (FaultKind.LINE_TO_EARTH, FaultKind.TWO_LINES_TO_EARTH)


class Study:
    """Faults in a plant (already completed with typical data) for a case.

    Nothing is computed before it is asked for: the network at the first use, its factors at the first fault. network: a
    network made elsewhere, instead of the plant's own.
    """

    def __init__(self, plant: Plant, case: Case, network: Network | None = None) -> None:
        self.plant = plant
        self.case = case
        self._given_network = network

    @cached_property
    def network(self) -> Network:
        """The plant as nodes, branches and shunts."""
        return self._given_network or build_network(self.plant, self.case)

    @property
    def findings(self) -> tuple[Finding, ...]:
        """What building the network found."""
        return self.network.findings

    @cached_property
    def equations(self) -> Equations:
        """The network's equations in the three sequences."""
        return Equations(self.network)

    @cached_property
    def prefault(self) -> Prefault:
        """The voltages before a fault, as the case asks. Raises SingularNetworkError if nothing determines them."""
        factor = self.plant.document.prefault_pu
        if self.case.prefault != "no-load":
            return Prefault.nominal(self.network, factor)
        motors = {part.id for part in self.plant.parts.values() if part.kind in MOTOR_KINDS}
        return Prefault.from_sources(self.network, factor, self.equations.pattern, motors)

    @cached_property
    def assumed(self) -> dict[int, tuple[str, ...]]:
        """For each island the names of parts with typical or guessed data."""
        return assumed_names(self.plant, self.network)

    @cached_property
    def _translator(self) -> Translator:
        every = ((part.id, terminal.name) for part in self.plant.parts.values() for terminal in part.terminals)
        return Translator.of(self.case, self.equations, self.prefault, every)

    @cached_property
    def _branch_of(self) -> dict[str, int]:
        return {part: branch for branch, part in enumerate(self.network.branch_parts)}

    def place_nodes(self, name: str) -> Place:
        """The place that a name means, see ``places.place_named``. Raises NoSuchPlaceError with near names."""
        return place_named(self.plant, name)

    def fault(self, fault: Fault) -> FaultResult:
        """One fault with all voltages and currents.

        A place without any source gives zero currents and a finding. Raises NoSuchPlaceError when the place is not
        there or out of service, StudyError when the fault makes no sense, SingularNetworkError when impedances
        cancel.
        """
        network = self.network
        site = site_of(self.plant, network, self._branch_of, fault.place)
        boundary = boundary_of(fault, float(self._translator.scales.base_ohm[site.node]))
        split = None
        if not network.live[site.node]:
            spot, solution = self._nothing(site.node)
        elif site.branch >= 0:
            split = SplitBranch.of(network, site.branch, site.fraction)
            spot = spot_along(self.equations, split, self.prefault, site.fraction)
            solution = solve_fault(self.equations, spot, boundary)
        else:
            spot = self.equations.spot(site.node, self.prefault)
            solution = solve_fault(self.equations, spot, boundary)
        findings = self._findings(fault, site, spot, solution)
        return self._translator.result(fault, site, spot, boundary, solution, split, findings)

    def all_buses(self, kinds: Sequence[FaultKind] = tuple(FaultKind)) -> list[BusRow]:
        """All buses in the plant's order, each with all kinds of fault, bolted.

        Raises SingularNetworkError when impedances cancel.
        """
        return bus_rows(self.plant, self.equations, self.prefault, kinds, self.assumed)

    def _nothing(self, node: int) -> tuple[Spot, Solution]:
        """A place that no source feeds, and what happens there."""
        n, c = len(self.network.nodes), len(self.network.converters)
        none, calm = np.zeros((n + 2, 3), np.complex128), np.zeros(c, np.complex128)
        spot = Spot(
            node=node,
            z=np.full(3, np.inf, np.complex128),
            columns=none[2:],
            follow=none[2:].real,
            before=self.prefault.everywhere(node),
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


def device_duty_ka(study: Study, device_part: str, kind: FaultKind = FaultKind.THREE_PHASE) -> float:
    """The duty of a closed breaker, switch or fuse in kA: not the total of the bus.

    It is the larger of the currents through the device for a fault just on its one side and just on its other, largest
    phase. An open device carries nothing. Raises NoSuchPlaceError when there is no such device in service. Source:
    common practice (IEC 60909-0 and IEEE C37.010 both ask for the current through the device).
    """
    through = 0.0
    for side in ("a", "b"):
        result = study.fault(Fault(Place(device_part, side), kind))
        through = max(through, float(abs(result.terminal_ka[device_part, "a"]).max()))
    return through
