"""A plant's networks in one case, view by view, each made and factored when it is first asked for."""

from dataclasses import dataclass, replace
from functools import cached_property

from onelinefault.engine.build import build_network
from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.faults import Equations
from onelinefault.engine.network import Network
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.reshaping import reshaped
from onelinefault.model.plant import Plant

MOTOR_KINDS = ("induction_motor", "synchronous_motor")


@dataclass(frozen=True, eq=False)
class Grid:
    """One view of a case: network, equations, voltages before a fault."""

    plant: Plant
    case: Case
    view: View
    network: Network

    @cached_property
    def equations(self) -> Equations:
        """The network's equations in the three sequences."""
        return Equations(self.network)

    @cached_property
    def prefault(self) -> Prefault:
        """The voltages before a fault, as the case asks. Raises SingularNetworkError if nothing determines them."""
        factor = self.plant.document.prefault_pu
        if self.case.prefault != "no-load" or self.network.driving is not None:
            return Prefault.nominal(self.network, factor)
        motors = {part.id for part in self.plant.parts.values() if part.kind in MOTOR_KINDS}
        return Prefault.from_sources(self.network, factor, self.equations.pattern, motors)


class Grids:
    """All views of a plant in a case. network: made elsewhere, in place of the plant's own whole one."""

    def __init__(self, plant: Plant, case: Case, network: Network | None = None) -> None:
        self.plant = plant
        self.case = case
        self._grids: dict[View, Grid] = {}
        if network is not None:
            self._grids[WHOLE] = Grid(plant, case, WHOLE, network)

    def grid(self, view: View = WHOLE) -> Grid:
        """One view, made at the first use. All views have the same nodes."""
        if view not in self._grids:
            self._grids[view] = Grid(self.plant, self.case, view, self._network(view))
        return self._grids[view]

    def _network(self, view: View) -> Network:
        plain = replace(view, resistance=1.0, reactance=1.0)
        if plain == view:
            return build_network(self.plant, self.case, view)
        return reshaped(self.grid(plain).network, view.resistance, view.reactance)
