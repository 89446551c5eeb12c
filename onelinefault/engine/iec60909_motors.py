"""IEC 60909-0, 6.10: the rules by which asynchronous motors may be left out for a fault at a place.

The first rule needs both calculations and is what ``Case.leave_out_small_motors`` goes by. The other two are the
standard's short cuts from nameplates; they are told here, and decide nothing.
"""

import math
from collections.abc import Iterator
from dataclasses import dataclass

import networkx as nx

from onelinefault.engine.iec60909_factors import (
    LOW_VOLTAGE_KV,
    motors_add_little,
    motors_behind_transformers_limit,
    rated_currents_add_little,
    voltage_factor,
)
from onelinefault.engine.iec60909_figures import IecFigures
from onelinefault.engine.network import Network
from onelinefault.engine.sequence_machines import induction_mva, running_count
from onelinefault.engine.sequence_stamps import in_unit
from onelinefault.engine.study import Study
from onelinefault.errors import StudyError
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.sources import InductionMotor
from onelinefault.model.transforming import Autotransformer, Transformer, Transformer3

SQRT3 = math.sqrt(3)
_TRANSFORMERS = (Transformer, Transformer3, Autotransformer)


@dataclass(frozen=True, slots=True)
class MotorsBehind:
    """Motors that the fault's level feeds through transformers alone: ids, ΣPrM in MW, ΣSrT in MVA, and the rule.

    limit: the largest ΣPrM/ΣSrT at which they may be left out.
    """

    transformers: tuple[str, ...]
    motors: tuple[str, ...]
    motors_mw: float
    transformers_mva: float
    limit: float

    @property
    def negligible(self) -> bool:
        """Whether ΣPrM/ΣSrT keeps within the limit."""
        return self.motors_mw <= self.limit * self.transformers_mva


@dataclass(frozen=True, slots=True)
class MotorRules:
    """What the rules say at one place.

    with_ka, without_ka: three-phase I″k with and without all motors; negligible: they add no more than 5 %. rated_ka:
    ΣIrM of the motors at the fault's own level; rated_negligible: that is no more than 1 % of without_ka (None: not a
    low-voltage place). behind: groups of motors behind transformers, with their own short cut.
    """

    with_ka: float
    without_ka: float
    negligible: bool
    rated_ka: float
    rated_negligible: bool | None
    behind: tuple[MotorsBehind, ...]


def motor_rules(study: Study, place: Place) -> MotorRules:
    """The rules for a three-phase fault at a place, by the largest currents.

    Raises NoSuchPlaceError when the place is not there, StudyError when the study is not one of the largest currents by
    this method. Source: 6.10; from memory.
    """
    case = study.case
    if case.method != "iec60909" or case.level != "max" or not case.motors or case.leave_out_small_motors:
        raise StudyError("The rules for motors need the largest currents by IEC 60909, with all motors in.")
    result = study.fault(Fault(place, FaultKind.THREE_PHASE))
    figures = result.figures
    without_ka = result.ik_ka / (1 + figures.motor_share) if isinstance(figures, IecFigures) else 0.0
    level = _Level.of(study.plant, result.network, result.node)
    rated = [_rated_ka(part) for part in level.motors]
    low_voltage = result.nominal_kv <= LOW_VOLTAGE_KV
    c = voltage_factor(result.nominal_kv, "max", case.lv_tolerance_percent)
    return MotorRules(
        with_ka=result.ik_ka,
        without_ka=without_ka,
        negligible=motors_add_little(result.ik_ka, without_ka),
        rated_ka=sum(rated),
        rated_negligible=rated_currents_add_little(rated, without_ka) if low_voltage else None,
        behind=tuple(_behind(level, c, result.nominal_kv, without_ka)),
    )


@dataclass(frozen=True)
class _Level:
    """The fault's voltage level: motors on it, and the pieces behind its transformers that motors alone feed."""

    motors: tuple[InductionMotor, ...]
    pieces: tuple[tuple[tuple[Part, ...], tuple[InductionMotor, ...]], ...]

    @classmethod
    def of(cls, plant: Plant, network: Network, node: int) -> "_Level":
        """Around a node."""
        ends = list(zip(network.branch_parts, network.from_node.tolist(), network.to_node.tolist(), strict=True))
        crossing = [isinstance(plant.parts[part], _TRANSFORMERS) for part, _, _ in ends]
        graph: nx.Graph[int] = nx.Graph()
        graph.add_nodes_from(range(len(network.nodes)))
        graph.add_edges_from((i, j) for (_, i, j), over in zip(ends, crossing, strict=True) if not over)
        level = nx.node_connected_component(graph, node)
        graph.add_edges_from((i, j) for _, i, j in ends)
        graph.remove_nodes_from(level)
        sources = [(source.node, plant.parts[source.part]) for source in network.sources]
        pieces = []
        for piece in nx.connected_components(graph):
            into = [plant.parts[part] for part, i, j in ends if {i, j} & level and {i, j} & piece]
            feeding = [part for at, part in sources if at in piece]
            feeding += [plant.parts[c.part] for c in network.converters if c.node in piece]
            motors = tuple(part for part in feeding if isinstance(part, InductionMotor))
            if into and motors and len(motors) == len(feeding) and all(isinstance(p, Transformer) for p in into):
                pieces.append((tuple(into), motors))
        return cls(tuple(p for at, p in sources if at in level and isinstance(p, InductionMotor)), tuple(pieces))


def _behind(level: _Level, c: float, nominal_kv: float, without_ka: float) -> Iterator[MotorsBehind]:
    if without_ka == 0:
        return
    for transformers, motors in level.pieces:
        mva = sum(in_unit(part, "rated_power", "MVA") for part in transformers)
        mw = sum(in_unit(part, "rated_power", "MW") * running_count(part) for part in motors)
        limit = motors_behind_transformers_limit(c, mva, nominal_kv, without_ka)
        yield MotorsBehind(tuple(p.id for p in transformers), tuple(p.id for p in motors), mw, mva, limit)


def _rated_ka(part: InductionMotor) -> float:
    return induction_mva(part) * running_count(part) / (SQRT3 * in_unit(part, "rated_voltage", "kV"))
