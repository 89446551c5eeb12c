"""From a plant to its network in one case: nodes, voltages, stamps, displacements, islands, findings."""

from dataclasses import dataclass, field

import numpy as np

from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.checks import check_islands, check_loops, check_parts
from onelinefault.engine.checks_motors import check_motors
from onelinefault.engine.displacement import carry, wrapped
from onelinefault.engine.methods import Situation, method_for
from onelinefault.engine.network import (
    ComplexArray,
    Converter,
    IntArray,
    Network,
    NeutralTerm,
    Node,
    PartCorrection,
    Source,
    TerminalKey,
)
from onelinefault.engine.sequence import in_network, stamps_of
from onelinefault.engine.sequence_stamps import INNER, PartLeftOutError, Setting, Stamps, Triple, left_out
from onelinefault.engine.topology import Topology, components, node_label, topology_of
from onelinefault.engine.voltages import NominalVoltages, nominal_voltages
from onelinefault.errors import EntryError
from onelinefault.model.findings import Finding
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant

SAME_ANGLE_DEG = 1e-6
SAME_LOG_RATIO = 0.005  # loops of transformers may differ by so much in ratio without a remark


def build_network(plant: Plant, case: Case, view: View = WHOLE) -> Network:
    """The network of a plant whose missing ratings were completed, in one case, seen in one of its views.

    All views of a case have the same nodes. What cannot be calculated is left out, with an error finding that names the
    part, the reason and the remedy. Never raises for what a user can draw or type; raises StudyError for a case that
    names no method.
    """
    document = plant.document
    topology = topology_of(plant)
    voltages = nominal_voltages(topology)
    method = method_for(Situation(case, view, topology, voltages, document.frequency_hz))
    setting = Setting(document.base_mva, document.frequency_hz, case, method)
    rows = _Rows.of(topology, voltages)
    rows.findings += method.findings
    rows.findings += [*voltages.findings, *check_parts(topology, voltages)]
    rows.findings += check_motors(topology, voltages.zone)
    for part in topology.parts.values():
        if in_network(part, setting):
            rows.add(part, setting)
    return _assembled(rows, setting)


@dataclass
class _Rows:
    """Lists that grow part by part and become the network's arrays."""

    topology: Topology
    voltages: NominalVoltages
    nodes: list[Node]
    findings: list[Finding] = field(default_factory=list)
    from_node: list[int] = field(default_factory=list)
    to_node: list[int] = field(default_factory=list)
    ratio: list[tuple[float, float, float]] = field(default_factory=list)
    y_series: list[Triple] = field(default_factory=list)
    y_from: list[Triple] = field(default_factory=list)
    y_to: list[Triple] = field(default_factory=list)
    lead_deg: list[float] = field(default_factory=list)
    branch_parts: list[str] = field(default_factory=list)
    branch_terminals: list[tuple[TerminalKey | None, TerminalKey | None]] = field(default_factory=list)
    shunt_node: list[int] = field(default_factory=list)
    y_shunt: list[Triple] = field(default_factory=list)
    shunt_terminals: list[TerminalKey] = field(default_factory=list)
    sources: list[Source] = field(default_factory=list)
    converters: list[Converter] = field(default_factory=list)
    neutral_terms: list[NeutralTerm] = field(default_factory=list)
    corrections: list[PartCorrection] = field(default_factory=list)

    @classmethod
    def of(cls, topology: Topology, voltages: NominalVoltages) -> "_Rows":
        nodes = [
            Node(node_label(topology, k), voltages.kv[k], members, topology.buses[k], known=voltages.known[k])
            for k, members in enumerate(topology.members)
        ]
        return cls(topology, voltages, nodes)

    def add(self, part: Part, setting: Setting) -> None:
        """Put a part's stamps into the lists, or the finding that says why it is left out."""
        node_kv = tuple(self.voltages.kv[node] for node in self.topology.nodes_of(part))
        try:
            stamps = stamps_of(part, node_kv, setting)
        except PartLeftOutError as error:
            self.findings.append(error.finding)
            return
        except (EntryError, ArithmeticError, ValueError) as error:
            remedy = f"Check the ratings of {part.title}."
            self.findings.append(left_out(part, "bad-rating", f"{error}", remedy).finding)
            return
        self.findings += stamps.findings
        self.corrections += [PartCorrection(part.id, c.name, c.value) for c in stamps.corrections if c.name]
        self._add_star_points(part, stamps)
        self._add_branches(part, stamps)
        self._add_shunts(part, stamps)

    def _add_star_points(self, part: Part, stamps: Stamps) -> None:
        """To be called before the part's own elements are added: star points count from the present ends."""
        for star in stamps.star_points:
            start = len(self.shunt_node) if star.element == "shunt" else len(self.from_node)
            self.neutral_terms.append(NeutralTerm(part.id, star.side, star.element, start + star.index))

    def _add_branches(self, part: Part, stamps: Stamps) -> None:
        inner = -1
        if stamps.inner_kv:
            inner = len(self.nodes)
            self.nodes.append(Node(f"inside {part.name or part.title}", stamps.inner_kv, (), inner=True))
        for branch in stamps.branches:
            ends = [None if t == INNER else (part.id, t) for t in (branch.a, branch.b)]
            i, j = (inner if key is None else self.topology.node_of[key] for key in ends)
            self.from_node.append(i)
            self.to_node.append(j)
            self.ratio.append(branch.ratio)
            self.y_series.append(branch.y)
            self.y_from.append(branch.y_a)
            self.y_to.append(branch.y_b)
            self.lead_deg.append(branch.lead_deg)
            self.branch_parts.append(part.id)
            self.branch_terminals.append((ends[0], ends[1]))

    def _add_shunts(self, part: Part, stamps: Stamps) -> None:
        for shunt in stamps.shunts:
            node = self.topology.node(part.id, shunt.terminal)
            if shunt.source:
                self.sources.append(Source(part.id, node, len(self.shunt_node)))
            self.shunt_node.append(node)
            self.y_shunt.append(shunt.y)
            self.shunt_terminals.append((part.id, shunt.terminal))
        for converter in stamps.converters:
            node = self.topology.node(part.id, converter.terminal)
            self.converters.append(
                Converter(part.id, node, converter.limit_pu, converter.angle_deg, converter.constant)
            )


def _assembled(rows: _Rows, setting: Setting) -> Network:
    topology, n = rows.topology, len(rows.nodes)
    from_node, to_node = _integers(rows.from_node), _integers(rows.to_node)
    ratio = np.array(rows.ratio, np.float64).reshape(-1, 3)
    turned = carry(n, from_node, to_node, np.array(rows.lead_deg, np.float64), 360.0, SAME_ANGLE_DEG)
    scaled = carry(n, from_node, to_node, -np.log(ratio[:, 0]), 0.0, SAME_LOG_RATIO)
    island = components(n, from_node, to_node)
    fed = [s.node for s in rows.sources] + [c.node for c in rows.converters]
    live = np.isin(island, island[_integers(fed)])
    driving = setting.method.driving([node.nominal_kv for node in rows.nodes])
    rows.findings += check_loops(topology.parts, rows.branch_parts, turned, scaled)
    rows.findings += check_islands(topology, rows.nodes, island, live, rows.sources, rows.converters)
    return Network(
        base_mva=setting.base_mva,
        frequency_hz=setting.frequency_hz,
        nodes=tuple(rows.nodes),
        node_of=topology.node_of,
        from_node=from_node,
        to_node=to_node,
        ratio=ratio,
        y_series=_triples(rows.y_series),
        y_from=_triples(rows.y_from),
        y_to=_triples(rows.y_to),
        branch_parts=tuple(rows.branch_parts),
        branch_terminals=tuple(rows.branch_terminals),
        shunt_node=_integers(rows.shunt_node),
        y_shunt=_triples(rows.y_shunt),
        shunt_parts=tuple(part_id for part_id, _ in rows.shunt_terminals),
        shunt_terminals=tuple(rows.shunt_terminals),
        sources=tuple(rows.sources),
        converters=tuple(rows.converters),
        displacement_deg=wrapped(turned.values),
        island=island,
        live=live,
        joints=topology.joints,
        neutral_terms=tuple(rows.neutral_terms),
        findings=tuple(rows.findings),
        method=setting.method,
        driving=None if driving is None else np.array(driving, np.float64),
        corrections=tuple(rows.corrections),
    )


def _integers(values: list[int]) -> IntArray:
    return np.array(values, np.int64)


def _triples(rows: list[Triple]) -> ComplexArray:
    return np.array(rows, np.complex128).reshape(-1, 3)
