"""A study: one plant in one case, ready to be asked for faults. Everything is worked out once, when first needed."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace

import numpy as np

from onelinefault.engine.bus_rows import bus_rows
from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.derivation import Derivation, derived_rows
from onelinefault.engine.faults import Equations
from onelinefault.engine.grids import Grids
from onelinefault.engine.iec60909_derive import Deriver
from onelinefault.engine.network import Network
from onelinefault.engine.places import place_named
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.results import BusRow, FaultResult
from onelinefault.engine.scene import Scene
from onelinefault.engine.sight import Places
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant

_DERIVATIONS: Mapping[str, Callable[[Grids], Derivation]] = {"iec60909": Deriver}


class Study:
    """Faults in a plant (already completed with typical data) for a case.

    Nothing is computed before it is asked for: the network at the first use, its factors at the first fault. network: a
    network made elsewhere, instead of the plant's own. A method may calculate a fault in another view of the case than
    the whole one (inside a power station unit, say); the network, equations and names here are those of the whole.
    Raises StudyError for a case that asks for what there is not.
    """

    def __init__(self, plant: Plant, case: Case, network: Network | None = None) -> None:
        self.plant = plant
        self.case = case
        self.grids = Grids(plant, case, network)
        self._scenes: dict[View, Scene] = {}
        derivation = _DERIVATIONS.get(case.method)
        self._derivation = derivation(self.grids) if derivation else None

    def _scene(self, view: View = WHOLE) -> Scene:
        if view not in self._scenes:
            self._scenes[view] = Scene(self.grids.grid(view))
        return self._scenes[view]

    @property
    def network(self) -> Network:
        """The plant as nodes, branches and shunts."""
        return self.grids.grid().network

    @property
    def findings(self) -> tuple[Finding, ...]:
        """What building the network found."""
        return self.network.findings

    @property
    def equations(self) -> Equations:
        """The network's equations in the three sequences."""
        return self.grids.grid().equations

    @property
    def prefault(self) -> Prefault:
        """The voltages before a fault, as the case asks. Raises SingularNetworkError if nothing determines them."""
        return self.grids.grid().prefault

    @property
    def assumed(self) -> dict[int, tuple[str, ...]]:
        """For each island the names of parts with typical or guessed data."""
        return self._scene().assumed

    def place_nodes(self, name: str) -> Place:
        """The place that a name means, see ``places.place_named``. Raises NoSuchPlaceError with near names."""
        return place_named(self.plant, name)

    def fault(self, fault: Fault) -> FaultResult:
        """One fault with all voltages and currents.

        A place without any source gives zero currents and a finding. Raises NoSuchPlaceError when the place is not
        there or out of service, StudyError when the fault makes no sense, SingularNetworkError when impedances
        cancel.
        """
        site = self._scene().site(fault.place)
        if self._derivation is None:
            return self._scene().fault(fault, site)
        view = self._derivation.views(self.grids.grid(), np.array([site.node]), fault.kind)[0]
        result = self._scene(view).fault(fault, site)
        if not result.network.live[site.node]:
            return result
        figures = self._derivation.of_result(result, view, Places.at(site, fault))
        return replace(result, figures=figures, peak_ka=figures.peak_ka)

    def all_buses(self, kinds: Sequence[FaultKind] = tuple(FaultKind)) -> list[BusRow]:
        """All buses in the plant's order, each with all kinds of fault, bolted.

        Raises SingularNetworkError when impedances cancel.
        """
        if self._derivation is not None:
            return derived_rows(self._derivation, WHOLE, kinds, self.assumed)
        return bus_rows(self.plant, self.equations, self.prefault, kinds, self.assumed)


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
