"""IEC 60909-0: from the initial currents to ip, i_dc, Ib, Ik and Ith; for one fault, or for many at once.

The formulas are in ``iec60909_decay``. Chosen here, where the standard leaves a choice:

- κ of an unbalanced fault is that of the impedance its own current flows through (Z1 + Z2 for two lines, Z1 + Z2 + Z0
  for one line to earth, ...) by methods (b) and (c); method (a) looks at the positive sequence.
- Method (b) has its factor 1.15 unless every branch and source that carries fault current has R/X below 0.3.
- Ik of a three-phase fault is I″k without motors. The curves of λ for a single generator are not in the program.
- n = 1: the a.c. part is taken as lasting, which is right far from generators and on the safe side near them.
- Converter sources add their constant current to the a.c. parts, to I″k, ip (without κ), Ib and Ik, but not to i_dc.
"""

from collections.abc import Iterator
from dataclasses import dataclass, replace

import numpy as np

from onelinefault.engine import iec60909_decay as decay
from onelinefault.engine.case import View
from onelinefault.engine.feeding import Edge, Feeding, feeding_of
from onelinefault.engine.grids import Grid, Grids
from onelinefault.engine.iec60909 import Iec60909
from onelinefault.engine.iec60909_factors import LOW_VOLTAGE_KV, NEGLIGIBLE_MOTOR_SHARE
from onelinefault.engine.iec60909_figures import IecFigures, MachineShare, Partial, Peak
from onelinefault.engine.iec60909_machines import breaking
from onelinefault.engine.network import FloatArray, IntArray, Network
from onelinefault.engine.ordering import BoolArray
from onelinefault.engine.results import FaultResult
from onelinefault.engine.sight import Places, Sight
from onelinefault.engine.symmetrical import POSITIVE
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from onelinefault.model.transforming import Autotransformer, Transformer, Transformer3

_APART = "every source comes on its own way: what is left of each is added"
_MESHED = "sources share branches: rule for meshed networks"
_UNBALANCED = "unbalanced: taken as I″k"
_TRANSFORMERS = (Transformer, Transformer3, Autotransformer)


class Deriver:
    """Derives figures in all views of one case."""

    def __init__(self, grids: Grids) -> None:
        self.grids = grids
        self._feeding: dict[View, Feeding] = {}

    def views(self, grid: Grid, nodes: IntArray, kind: FaultKind) -> list[View]:
        """The view that a fault at each node is calculated in; without motors where they shall and may be left out."""
        views = [method_of(grid).view_of(int(node), kind) for node in nodes]
        if not self.grids.case.leave_out_small_motors:
            return views
        places = Places(nodes, _three_phase())
        shares = {view: self.motor_share(self._sight(view, places)) for view in set(views)}
        small = [shares[view][k] <= NEGLIGIBLE_MOTOR_SHARE for k, view in enumerate(views)]
        return [
            method_of(self.grids.grid(view)).without_motors() if left_out else view
            for view, left_out in zip(views, small, strict=True)
        ]

    def of_result(self, result: FaultResult, view: View, places: Places) -> IecFigures:
        """The figures of a single fault, with partial currents where it is at a power station unit's terminals."""
        figures = self.figures(view, places)[0]
        return replace(figures, partials=tuple(_partials(self.grids.grid(view), result, figures.machines)))

    def figures(self, view: View, places: Places) -> list[IecFigures]:
        """The figures of the same fault at each of the places."""
        return list(_Arrays(self, view, places).figures())

    def _sight(self, view: View, places: Places) -> Sight:
        return Sight(self.grids.grid(view), places)

    def motor_share(self, sight: Sight) -> FloatArray:
        """What motors add to the three-phase current without them, over that, shape (k,)."""
        other = method_of(sight.grid).without_motors()
        if other == sight.grid.view:
            return np.zeros(len(sight.places.nodes))
        without = self._sight(other, sight.places)
        with_pu, without_pu = (_three_phase_pu(one) for one in (sight, without))
        share = np.divide(with_pu, without_pu, out=np.full(len(with_pu), np.inf), where=without_pu > 0)
        return np.where(with_pu > 0, share - 1, 0.0)

    def feeding_at(self, grid: Grid, places: Places) -> tuple[Feeding, IntArray]:
        """What feeds the places, and their numbers in it: a point along a branch is a node of its own."""
        network = grid.network
        if places.branch >= 0:
            return _feeding(grid.plant, network, places.branch), np.array([len(network.nodes)])
        if grid.view not in self._feeding:
            self._feeding[grid.view] = _feeding(grid.plant, network)
        return self._feeding[grid.view], places.nodes


def method_of(grid: Grid) -> Iec60909:
    """The policy of a grid that was made by this method."""
    method = grid.network.method
    assert isinstance(method, Iec60909)
    return method


@dataclass(frozen=True)
class _Breaking:
    meshed_ka: FloatArray
    apart_ka: FloatArray
    reasons: list[str]
    machines: tuple[MachineShare, ...] = ()


class _Arrays:
    """All figures of k places as arrays, shape (k,) each."""

    def __init__(self, deriver: Deriver, view: View, places: Places) -> None:
        self.deriver, self.view, self.places = deriver, view, places
        self.case = deriver.grids.case
        self.sight = self.at(view)
        self.method = method_of(self.sight.grid)
        self.is_three_phase = places.fault.kind is FaultKind.THREE_PHASE
        self.phases = self.sight.phases_ka(True)
        self.lines_ka = abs(self.phases)
        self.ik_ka: FloatArray = self.lines_ka.max(axis=1)
        self.decaying_ka = abs(self.sight.phases_ka(False)).max(axis=1)  # what comes through impedances
        self.lasting_ka = np.maximum(self.ik_ka - self.decaying_ka, 0.0)  # what converters add
        feeding, own = deriver.feeding_at(self.sight.grid, places)
        self.apart: BoolArray = feeding.apart[own]
        self.largest, self.nearby = feeding.largest[own], feeding.nearby[own]

    def at(self, view: View) -> Sight:
        """The same places in another view."""
        return Sight(self.deriver.grids.grid(view), self.places)

    def ratio_at(self, frequency_ratio: float) -> FloatArray:
        """R/X at system frequency found at an equivalent one."""
        return self.at(replace(self.view, reactance=frequency_ratio)).ratio * frequency_ratio

    def peaks(self) -> dict[str, tuple[FloatArray, FloatArray, FloatArray]]:
        """R/X, κ and ip by each method."""
        kv = self.sight.grid.network.nominal_kv[self.places.nodes]
        ratio_a = np.where(np.isfinite(self.nearby), self.nearby, 0.0)
        ratio_c = self.ratio_at(decay.PEAK_FREQUENCY_RATIO)
        above = self.largest >= decay.MARGIN_FROM_R_OVER_X
        kappas = {
            "a": (ratio_a, decay.kappa(ratio_a)),
            "b": (self.sight.ratio, decay.kappa_at_fault(self.sight.ratio, kv <= LOW_VOLTAGE_KV, above)),
            "b-plain": (self.sight.ratio, decay.kappa(self.sight.ratio)),
            "c": (ratio_c, decay.kappa(ratio_c)),
        }
        lasting = decay.peak_ka(self.lasting_ka, 1.0)
        return {
            name: (ratio, kappa, decay.peak_ka(self.decaying_ka, kappa) + lasting)
            for name, (ratio, kappa) in kappas.items()
        }

    def direct_current(self) -> tuple[FloatArray, FloatArray]:
        """R/X at the equivalent frequency for the smallest time delay, and i_dc then."""
        hertz, time_s = self.sight.grid.network.frequency_hz, self.case.minimum_time_delay_s
        ratio = self.ratio_at(float(decay.direct_current_frequency_ratio(hertz, time_s)))
        return ratio, decay.direct_current_ka(self.decaying_ka, ratio, hertz, time_s)

    def breaking(self) -> _Breaking:
        """Ib by both rules; unbalanced: I″k."""
        count = len(self.places.nodes)
        if not self.is_three_phase:
            return _Breaking(self.ik_ka, self.ik_ka, [_UNBALANCED] * count)
        sight = self.at(self.method.without_drives())
        found = breaking(sight.grid.plant, sight, self.case.minimum_time_delay_s)
        total, decaying = (abs(sight.phases_ka(converters)).max(axis=1) for converters in (True, False))
        lasting: FloatArray = np.maximum(total - decaying, 0.0)
        reasons = [_APART if apart else _MESHED for apart in self.apart]
        return _Breaking(found.meshed_ka + lasting, found.apart_ka + lasting, reasons, found.shares)

    def steady(self) -> FloatArray:
        """Ik: I″k, of a three-phase fault without motors."""
        if not self.is_three_phase:
            return self.ik_ka
        steady_ka: FloatArray = abs(self.at(self.method.without_motors()).phases_ka(True)).max(axis=1)
        return steady_ka

    def figures(self) -> Iterator[IecFigures]:
        """One by one."""
        case, peaks, broken = self.case, self.peaks(), self.breaking()
        ratio_dc, idc = self.direct_current()
        steady, share = self.steady(), self.deriver.motor_share(self.sight)
        hertz = self.sight.grid.network.frequency_hz
        m = decay.m(hertz, case.duration_s, peaks[case.peak_method][1])
        n = 1.0
        ith = np.sqrt(m * self.decaying_ka**2 + n * self.ik_ka**2)
        kv = self.sight.grid.network.nominal_kv[self.places.nodes]
        earth = abs(self.phases.sum(axis=1))
        for k in range(len(self.places.nodes)):
            a, b, third = self.lines_ka[k].tolist()
            yield IecFigures(
                c=self.method.c(float(kv[k])),
                lines_ka=(a, b, third),
                earth_ka=float(earth[k]),
                ik_ka=float(self.ik_ka[k]),
                of_converters_ka=float(self.lasting_ka[k]),
                peaks={name: Peak(*(float(values[k]) for values in found)) for name, found in peaks.items()},
                peak_method=case.peak_method,
                minimum_time_delay_s=case.minimum_time_delay_s,
                r_over_x_dc=float(ratio_dc[k]),
                idc_ka=float(idc[k]),
                ib_meshed_ka=float(broken.meshed_ka[k]),
                ib_apart_ka=float(broken.apart_ka[k]),
                apart=bool(self.apart[k]),
                ib_reason=broken.reasons[k],
                ik_steady_ka=float(steady[k]),
                duration_s=case.duration_s,
                m=float(m[k]),
                n=n,
                ith_ka=float(ith[k]),
                motor_share=float(share[k]),
                motors_negligible=bool(share[k] <= NEGLIGIBLE_MOTOR_SHARE),
                machines=broken.machines,
            )


def _three_phase() -> Fault:
    return Fault(Place(""), FaultKind.THREE_PHASE)


def _three_phase_pu(sight: Sight) -> FloatArray:
    """|E/Z1| of bolted three-phase faults."""
    z1 = abs(sight.z[:, POSITIVE])
    current: FloatArray = np.where(np.isfinite(z1), abs(sight.emf) / np.where(np.isfinite(z1), z1, 1.0), 0.0)
    return current


def _partials(grid: Grid, result: FaultResult, machines: tuple[MachineShare, ...]) -> Iterator[Partial]:
    """Partial currents from the generator's and the network's side of a fault at a unit's terminals (7.2).

    Each side is single-fed as far as the unit goes: κ is that of its own impedance E/I. They are added as phasors for
    what is common to both, and taken one by one for a breaker between.
    """
    method = method_of(grid)
    unit = method.units.get(grid.view.inside)
    if unit is None or result.node not in unit.terminals or result.fault.kind is not FaultKind.THREE_PHASE:
        return
    left = {machine.part: machine.left for machine in machines}
    for key in ((unit.generator.id, "line"), (unit.transformer.id, "low")):
        phase_ka = -complex(result.terminal_ka[key][0])
        if phase_ka == 0:
            continue
        z = 1 / phase_ka
        kappa = float(decay.kappa(max(z.real, 0.0) / z.imag if z.imag > 0 else 0.0))
        ik = abs(phase_ka)
        yield Partial(key[0], ik, kappa, float(decay.peak_ka(ik, kappa)), ik * left.get(key[0], 1.0))


def _feeding(plant: Plant, network: Network, split: int = -1) -> Feeding:
    """What feeds each node by the positive sequence; a split branch has a node in its middle, with the last number."""
    n = len(network.nodes)
    edges = list(_edges(plant, network))
    if split >= 0:
        whole = edges[split]
        edges += [replace(whole, other=n), replace(whole, one=n)]
        del edges[split]
    sources = [
        (source.node, _ratio(1 / complex(network.y_shunt[source.shunt, POSITIVE]))) for source in network.sources
    ]
    return feeding_of(n + (split >= 0), edges, sources)


def _edges(plant: Plant, network: Network) -> Iterator[Edge]:
    """All branches in order. A leg of a star has the smallest R/X of the pairs that it belongs to."""
    legs: dict[str, list[complex]] = {}
    impedances = [1 / complex(y) if y != 0 else np.inf for y in network.y_series[:, POSITIVE]]
    for part, z in zip(network.branch_parts, impedances, strict=True):
        legs.setdefault(part, []).append(z)
    ends = zip(network.from_node.tolist(), network.to_node.tolist(), strict=True)
    for part, z, (one, other) in zip(network.branch_parts, impedances, ends, strict=True):
        of_star = legs[part] if len(legs[part]) == 3 else []
        ratios = [_ratio(z + leg) for leg in of_star if leg is not z] or [_ratio(z)]
        yield Edge(one, other, min(ratios), isinstance(plant.parts.get(part), _TRANSFORMERS))


def _ratio(z: complex) -> float:
    """R/X, 0 where there is no reactance to speak of (then κ is the largest that can be)."""
    return max(z.real, 0.0) / z.imag if z.imag > 0 else 0.0
