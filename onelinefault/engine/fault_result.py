"""From a solved fault in per unit to what the drawing, the tables and the working show: kA, kV, ohm, by phase.

Every node's quantities are turned by its phase displacement against the faulted node (positive sequence forwards,
negative backwards, zero not), so that the faulted node's phase-a voltage before the fault lies at 0° and remote
phases are the real ones, on both sides of every transformer.
"""

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from onelinefault.engine import peak
from onelinefault.engine.along import SplitBranch, point_currents
from onelinefault.engine.boundary import Boundary
from onelinefault.engine.case import Case
from onelinefault.engine.currents import (
    ByKey,
    Terminals,
    branch_currents,
    neutral_currents,
    phases_ka,
)
from onelinefault.engine.faults import Equations, Solution, Spot, impedance_through
from onelinefault.engine.joints import InnerCurrents
from onelinefault.engine.network import ComplexArray, FloatArray, Network, TerminalKey
from onelinefault.engine.places import Site
from onelinefault.engine.prefault import Prefault
from onelinefault.engine.results import FaultResult, SourceShare
from onelinefault.engine.symmetrical import POSITIVE, to_phases, turns
from onelinefault.model.fault import Fault
from onelinefault.model.findings import Finding


@dataclass(frozen=True, eq=False)
class Scales:
    """What takes per unit to kA and kV at each node, made once for each network.

    turned_ka, turned_kv (n, 3): base current and phase-to-earth base voltage, turned by the node's displacement. turn
    (n, 3): the displacement alone. base_ka, base_ohm (n,): 0 where a node has no nominal voltage.
    """

    turn: ComplexArray
    turned_ka: ComplexArray
    turned_kv: ComplexArray
    base_ka: FloatArray
    base_ohm: FloatArray

    @classmethod
    def of(cls, network: Network) -> "Scales":
        """The scales of a network."""
        nominal = network.nominal_kv
        base_ka = np.divide(network.base_mva / np.sqrt(3), nominal, out=np.zeros(len(nominal)), where=nominal > 0)
        turn = turns(network.displacement_deg)
        kv = (nominal / np.sqrt(3))[:, None]
        return cls(turn, turn * base_ka[:, None], turn * kv, base_ka, network.base_ohm)


@dataclass(frozen=True, eq=False)
class Translator:
    """Makes results of solutions; holds all that is the same for every fault in a network.

    terminal_scale (t, 3): the turned base current at each terminal.
    """

    case: Case
    equations: Equations
    prefault: Prefault
    scales: Scales
    terminals: Terminals
    inner: InnerCurrents
    terminal_scale: ComplexArray

    @classmethod
    def of(cls, case: Case, equations: Equations, prefault: Prefault, others: Iterable[TerminalKey]) -> "Translator":
        """For a network. others: terminals that are not in it (out of service) and shall be listed without current."""
        network = equations.network
        terminals = Terminals.of(network, others)
        inner, scales = InnerCurrents.of(network.joints, terminals.row), Scales.of(network)
        outside = np.zeros((1, 3), np.complex128)  # terminals that are in no node have −1, the last row
        terminal_scale: ComplexArray = np.concatenate((scales.turned_ka, outside))[terminals.node]
        return cls(case, equations, prefault, scales, terminals, inner, terminal_scale)

    def result(
        self,
        fault: Fault,
        site: Site,
        spot: Spot,
        boundary: Boundary,
        solution: Solution,
        split: SplitBranch | None,
        findings: tuple[Finding, ...],
    ) -> FaultResult:
        """The result of a solved fault. split: the faulted branch, where the fault stands along one."""
        network, scales, node = self.equations.network, self.scales, site.node
        reference = self._reference(spot)
        elements = self._element_currents(spot, solution, split)
        z = spot.z.copy()
        if not self.equations.tied[node, POSITIVE]:
            z[POSITIVE] = np.inf  # fed by converters alone
        through = impedance_through(boundary, z[None])
        sequence_ka = solution.current * scales.turned_ka[node] * reference
        phases = to_phases(sequence_ka)
        ik = float(abs(phases).max())
        terminal_ka, wire_ka = self._inside_nodes(elements, reference, site, phases)
        before = np.zeros_like(solution.change)
        before[:, POSITIVE] = spot.before
        nominal_kv = network.nodes[node].nominal_kv
        return FaultResult(
            fault=fault,
            case=self.case,
            network=network,
            node=node,
            nominal_kv=nominal_kv,
            prefault_kv=abs(spot.emf) * nominal_kv,
            sequence_ka=sequence_ka,
            phases_ka=phases,
            residual_ka=complex(3 * sequence_ka[2]),
            z_ohm=_ohm(z, float(scales.base_ohm[node])),
            x_over_r=float(peak.x_over_r(through)[0]),
            fault_level_mva=float(peak.fault_level_mva(np.array(ik), np.array(nominal_kv))),
            peak_ka=float(peak.peak_ka(np.array([ik]), through)[0]),
            prefault_voltages_kv=to_phases(before * (scales.turned_kv * reference)),
            voltages_kv=to_phases((before + solution.change) * (scales.turned_kv * reference)),
            terminal_ka=ByKey(self.terminals.row, terminal_ka),
            wire_ka=wire_ka,
            neutral_ka=neutral_currents(network, *elements[:3], scales.turned_ka[:, 2] * reference[2]),
            sources=tuple(self._sources(spot, solution, elements, reference, split)),
            findings=findings,
            fault_kv=to_phases(solution.voltage * scales.turned_kv[node] * reference),
        )

    def _reference(self, spot: Spot) -> ComplexArray:
        """Factors (3,) that put the faulted node's phase-a voltage before the fault at 0°."""
        start = 1.0 if not spot.emf else abs(spot.emf) / spot.emf
        reference: ComplexArray = self.scales.turn[spot.node].conj() * start
        return reference

    def _element_currents(
        self, spot: Spot, solution: Solution, split: SplitBranch | None
    ) -> tuple[ComplexArray, ComplexArray, ComplexArray, ComplexArray]:
        """Per-unit currents into branches at both ends, (m, 3), shunts, (s, 3), and converters, (c, 3)."""
        network, emf = self.equations.network, self.prefault.emf
        voltage = solution.change
        if emf is not None:  # what flows before the fault counts too
            voltage = voltage.copy()
            voltage[:, POSITIVE] += spot.before
        at_from, at_to = branch_currents(network, voltage[network.from_node], voltage[network.to_node])
        shunt_voltage = voltage[network.shunt_node]
        if emf is not None:
            shunt_voltage[:, POSITIVE] -= emf
        if split is not None:
            at_from[split.branch], at_to[split.branch] = point_currents(split, spot, solution, emf is not None)
        converters = np.zeros((len(network.converters), 3), np.complex128)
        converters[:, POSITIVE] = -solution.converters
        return at_from, at_to, network.y_shunt * shunt_voltage, converters

    def _inside_nodes(
        self,
        elements: tuple[ComplexArray, ComplexArray, ComplexArray, ComplexArray],
        reference: ComplexArray,
        site: Site,
        fault_phases: ComplexArray,
    ) -> tuple[ComplexArray, ByKey[str]]:
        """Phase currents at all terminals, shape (t, 3), and in all wires."""
        terminal = phases_ka(self.terminals.currents_pu(*elements), self.terminal_scale * reference)
        leaving = terminal.copy()
        if site.terminal is not None:
            leaving[self.terminals.row[site.terminal]] += fault_phases
        flow = self.inner.flows(leaving)
        self.inner.into_devices(flow, terminal)
        return terminal, ByKey(self.inner.wires, flow)

    def _sources(
        self,
        spot: Spot,
        solution: Solution,
        elements: tuple[ComplexArray, ComplexArray, ComplexArray, ComplexArray],
        reference: ComplexArray,
        split: SplitBranch | None,
    ) -> Iterable[SourceShare]:
        """Shares of sources and converters. Their positive-sequence currents add up to the fault's when each is
        referred to the fault's voltage by the ratios of the unloaded network (no charging counted)."""
        network = self.equations.network
        shunt = np.array([source.shunt for source in network.sources], np.int64)
        node = np.concatenate((network.shunt_node[shunt], self.equations.converters.node))
        parts = [source.part for source in network.sources] + [converter.part for converter in network.converters]
        driven = -network.y_shunt[shunt, POSITIVE] * solution.change[network.shunt_node[shunt], POSITIVE]
        fed = np.concatenate((driven, solution.converters))
        ratio = self.prefault.potentials.seen_from(split.ends[1] if split else spot.node)[node]
        at_fault = ratio * fed * (self.scales.turned_ka[spot.node, POSITIVE] * reference[POSITIVE])
        total = solution.current[POSITIVE] * self.scales.turned_ka[spot.node, POSITIVE] * reference[POSITIVE]
        share = (at_fault * total.conj()).real / abs(total) ** 2 if total else np.zeros(len(node))
        own: ComplexArray = -np.concatenate((elements[2][shunt], elements[3]))
        out = phases_ka(own, self.scales.turned_ka[node] * reference)
        for part, phases, part_of_it, fraction in zip(parts, out, at_fault.tolist(), share.tolist(), strict=True):
            yield SourceShare(part, phases, part_of_it, fraction)


def _ohm(z: ComplexArray, base_ohm: float) -> tuple[complex | None, complex | None, complex | None]:
    """Three impedances in ohm, None where infinite."""
    one, two, zero = (complex(value) * base_ohm if np.isfinite(value) else None for value in z)
    return one, two, zero
