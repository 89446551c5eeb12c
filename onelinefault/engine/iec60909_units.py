"""Power station units: a generator and a transformer marked as one, and the places that lie inside them.

Source: IEC 60909-0, 6.7 and 7.2; its factors are in ``iec60909_factors``.
"""

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from onelinefault.engine import iec60909_factors as factors
from onelinefault.engine.method import Correction
from onelinefault.engine.sequence_machines import subtransient_ohm, synchronous_mva
from onelinefault.engine.sequence_stamps import PartLeftOutError, in_unit
from onelinefault.engine.sequence_transformers import leakage
from onelinefault.engine.topology import Topology, components
from onelinefault.engine.voltages import NominalVoltages
from onelinefault.errors import EntryError, StudyError
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part
from onelinefault.model.sources import SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Transformer


@dataclass(frozen=True)
class Unit:
    """One power station unit. nominal_kv: UnQ of the network at the transformer's high side; node: the generator's.

    inside: nodes between generator and transformer and those fed from there alone. bus_kv: their own nominal voltage
    of the generator's zone, by node.
    """

    generator: SynchronousGenerator
    transformer: Transformer
    nominal_kv: float
    node: int
    inside: frozenset[int]
    terminals: frozenset[int]
    c_max: float
    c_max_generator: float

    @cached_property
    def sin_phi(self) -> float:
        """Sine of the generator's rated power-factor angle."""
        return sine_of_rated_angle(self.generator)

    @cached_property
    def generator_kv(self) -> float:
        """Rated voltage UrG."""
        return in_unit(self.generator, "rated_voltage", "kV")

    @cached_property
    def above_rated_pu(self) -> float:
        """pG, the permanent voltage range of the generator."""
        return in_unit(self.generator, "voltage_range", "pu")

    @cached_property
    def x_pu(self) -> tuple[float, float]:
        """x″d of the generator and xT of the transformer, each on its own rating."""
        own_ohm = self.generator_kv**2 / synchronous_mva(self.generator)
        return subtransient_ohm(self.generator, own_ohm) / own_ohm, leakage(self.transformer).imag

    @property
    def with_tap_changer(self) -> bool:
        """Whether the transformer has an on-load tap changer."""
        return self.transformer.value("on_load_tap_changer") is True

    def factor(self) -> Correction:
        """K_S with, K_SO without an on-load tap changer: for faults outside the unit, on both its parts."""
        high, low = (in_unit(self.transformer, f"{side}_voltage", "kV") for side in ("high", "low"))
        x_generator, x_transformer = self.x_pu
        voltages = (self.nominal_kv, self.generator_kv, high, low)
        if self.with_tap_changer:
            value = factors.unit_factor_with_tap_changer(
                self.c_max, x_generator, x_transformer, self.sin_phi, *voltages
            )
            return Correction("K_S", value)
        tap = in_unit(self.transformer, "tap_range", "pu")
        value = factors.unit_factor_without_tap_changer(
            self.c_max, x_generator, self.sin_phi, *voltages, self.above_rated_pu, tap
        )
        return Correction("K_SO", value)

    def factor_inside(self, part: Part) -> Correction:
        """K_G,S of the generator or K_T,S of the transformer (K_G,SO, K_T,SO without tap changer), faults inside."""
        above = 0.0 if self.with_tap_changer else self.above_rated_pu
        ending = "S" if self.with_tap_changer else "SO"
        x_generator, x_transformer = self.x_pu
        if part.id == self.generator.id:
            value = factors.generator_factor_inside_unit(self.c_max_generator, x_generator, self.sin_phi, above)
            return Correction(f"K_G,{ending}", value)
        value = factors.transformer_factor_inside_unit(self.c_max_generator, x_transformer, self.sin_phi, above)
        return Correction(f"K_T,{ending}", value)


def sine_of_rated_angle(part: SynchronousGenerator | SynchronousMotor) -> float:
    """sin φ of the rated power factor; a typical one where none is given."""
    cosine = min(1.0, in_unit(part, "power_factor", ""))
    return math.sqrt(1 - cosine**2)


def units_of(
    topology: Topology, voltages: NominalVoltages, lv_tolerance_percent: float
) -> tuple[tuple[Unit, ...], tuple[Finding, ...]]:
    """All units in service, and remarks on transformers marked as part of one that cannot be.

    Raises StudyError for a low-voltage tolerance without voltage factors.
    """
    found, findings = [], []
    taken: set[str] = set()
    for part in topology.parts.values():
        if not isinstance(part, Transformer) or not part.in_service or not (part.unit_generator or "").strip():
            continue
        generator = _generator(topology, voltages, part, taken)
        if isinstance(generator, Finding):
            findings.append(generator)
            continue
        taken.add(generator.id)
        unit = _unit(topology, voltages, part, generator, lv_tolerance_percent)
        try:
            unit.factor()
            unit.factor_inside(part)
        except (PartLeftOutError, EntryError, ArithmeticError, ValueError):
            continue  # the part itself is left out, with a finding of its own
        except StudyError:
            findings.append(_no_unit(part, "its reactance is too large for a factor K_T,S"))
            continue
        found.append(unit)
    return tuple(found), tuple(findings)


def _generator(
    topology: Topology, voltages: NominalVoltages, part: Transformer, taken: set[str]
) -> SynchronousGenerator | Finding:
    wanted = (part.unit_generator or "").strip()
    named = [
        other
        for other in topology.parts.values()
        if isinstance(other, SynchronousGenerator)
        and wanted.casefold() in (other.name.strip().casefold(), other.id.casefold())
    ]
    if not named:
        return _no_unit(part, f"there is no generator called {wanted!r}")
    zone = voltages.zone[topology.node(part.id, "low")]
    here = [g for g in named if voltages.zone[topology.node(g.id, "line")] == zone]
    if not here:
        return _no_unit(part, f"generator {wanted} is not connected to its low side")
    if not here[0].in_service:
        return _no_unit(part, f"generator {wanted} is out of service")
    if here[0].id in taken:
        return _no_unit(part, f"generator {wanted} makes a unit with another transformer already")
    return here[0]


def _no_unit(part: Transformer, reason: str) -> Finding:
    return Finding(
        Severity.WARNING,
        "no-unit",
        f"{part.title} is marked as one unit with a generator, but {reason}; it counts as a network transformer.",
        f"Correct the generator's name in {part.title}, connect it, or clear the mark.",
        (part.id,),
        "unit_generator",
    )


def _unit(
    topology: Topology, voltages: NominalVoltages, part: Transformer, generator: SynchronousGenerator, tolerance: float
) -> Unit:
    high, low = topology.nodes_of(part)
    node = topology.node(generator.id, "line")
    terminals = frozenset(k for k, zone in enumerate(voltages.zone) if zone == voltages.zone[node])
    inside = _fed_from(topology, part, low)
    if high in inside:
        inside = terminals
    c_max = factors.voltage_factor(voltages.kv[high], factors.Level.MAX, tolerance)
    c_max_generator = factors.voltage_factor(voltages.kv[node], factors.Level.MAX, tolerance)
    return Unit(generator, part, voltages.kv[high], node, inside, terminals, c_max, c_max_generator)


def _fed_from(topology: Topology, without: Transformer, node: int) -> frozenset[int]:
    """Nodes that hang together with a node when a transformer is taken away."""
    ends = np.array(list(_edges(topology, without)), np.int64).reshape(-1, 2)
    group = components(len(topology.members), ends[:, 0], ends[:, 1])
    return frozenset(np.flatnonzero(group == group[node]).tolist())


def _edges(topology: Topology, without: Part) -> Iterator[tuple[int, int]]:
    for part in topology.parts.values():
        if part.in_service and part.id != without.id and len(part.terminals) > 1 and not hasattr(part, "closed"):
            first, *others = topology.nodes_of(part)
            yield from ((first, other) for other in others)


def by_part(units: tuple[Unit, ...]) -> Mapping[str, Unit]:
    """The unit of each generator and transformer that belongs to one, by id."""
    return {part.id: unit for unit in units for part in (unit.generator, unit.transformer)}
