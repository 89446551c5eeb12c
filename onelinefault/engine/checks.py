"""Findings that need the network: loose ends, voltages that do not fit, loops, dead islands, more motors than power."""

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from onelinefault.engine.displacement import Carried
from onelinefault.engine.network import Converter, IntArray, Node, Source
from onelinefault.engine.sequence import MOTORS
from onelinefault.engine.topology import DEVICES, Topology, id_order, node_label
from onelinefault.engine.voltages import CARRIERS, MACHINES, WINDINGS, NominalVoltages, volts
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.figures import voltage_text
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part

FAR_OFF = 1.1  # rated against nominal voltage
MOST_NAMED = 4  # so many things are named in one message, the rest is counted


def check_parts(topology: Topology, voltages: NominalVoltages) -> list[Finding]:
    """Remarks on single parts in their places: nothing connected, rated voltage far from the node's."""
    findings: list[Finding] = []
    for part in topology.parts.values():
        if part.in_service and part.terminals:
            findings += _loose_ends(topology, part)
            findings += _far_voltages(topology, voltages, part)
    return findings


def check_loops(
    parts: Mapping[str, Part], branch_parts: Sequence[str], turned: Carried, scaled: Carried
) -> list[Finding]:
    """Loops whose displacements (an error) or ratios (a warning) do not add up; each set of transformers once."""
    findings = []
    for named in _transformers_in_loops(parts, branch_parts, turned):
        message = f"Phase displacements round the loop of {_listed(named)} do not add up: they cannot be paralleled."
        remedy = "Correct a vector group, or open the loop."
        findings.append(Finding(Severity.ERROR, "displacement-loop", message, remedy, _ids(named), "vector_group"))
    for named in _transformers_in_loops(parts, branch_parts, scaled):
        message = f"The ratios round the loop of {_listed(named)} differ: current circulates in it without any load."
        remedy = "Check rated voltages and taps, or open the loop."
        findings.append(Finding(Severity.WARNING, "ratio-loop", message, remedy, _ids(named), "tap"))
    return findings


def check_islands(
    topology: Topology,
    nodes: Sequence[Node],
    island: IntArray,
    live: NDArray[np.bool_],
    sources: Sequence[Source],
    converters: Sequence[Converter],
) -> list[Finding]:
    """Islands without a source (hints), fed by motors or converters alone (warnings); island and live: shape (n,)."""
    parts = topology.parts
    if not sources and not converters:
        return _no_source(parts)
    strong = {int(island[s.node]) for s in sources if not isinstance(parts[s.part], MOTORS)}
    dead: dict[int, list[Part]] = {}
    weak: dict[int, list[Part]] = {}
    for k, node in enumerate(nodes):
        group = None if live[k] and island[k] in strong else weak if live[k] else dead
        if group is not None:
            group.setdefault(int(island[k]), []).extend(parts[bus] for bus in node.buses if parts[bus].in_service)
    findings = [_dead(buses) for buses in dead.values() if buses]
    for number, buses in weak.items():
        feeding = [s.part for s in sources if island[s.node] == number]
        feeding += [c.part for c in converters if island[c.node] == number]
        findings.append(_weak([parts[part_id] for part_id in feeding], buses))
    return findings


def _loose_ends(topology: Topology, part: Part) -> list[Finding]:
    loose = [t.name for t in part.terminals if len(topology.members[topology.node(part.id, t.name)]) == 1]
    if not loose:
        return []
    where = "" if len(part.terminals) == 1 else f" at {' and '.join(loose)}"
    message = f"Nothing is connected to {part.title}{where}."
    spare = isinstance(part, (*DEVICES, *CARRIERS, Bus)) or len(loose) < len(part.terminals)
    severity = Severity.HINT if spare else Severity.WARNING
    return [Finding(severity, "loose-end", message, f"Draw a wire to {part.title}, or delete it.", (part.id,))]


def _far_voltages(topology: Topology, voltages: NominalVoltages, part: Part) -> list[Finding]:
    findings = []
    for terminal, name in _rated_fields(part):
        rated, node = volts(part, name), topology.node(part.id, terminal)
        if rated is None or not voltages.known[node]:
            continue
        nominal = voltages.kv[node]
        # a cable or a device may well be made for more than it is used at
        too_high = rated > FAR_OFF * nominal and not isinstance(part, (*DEVICES, *CARRIERS))
        if too_high or nominal > FAR_OFF * rated:
            message = (
                f"{part.title} is rated {voltage_text(rated)}, but the nominal voltage of {node_label(topology, node)} "
                f"is {voltage_text(nominal)}."
            )
            remedy = f"Check the rated voltage of {part.title}, and where it is connected."
            findings.append(Finding(Severity.WARNING, "voltage-mismatch", message, remedy, (part.id,), name))
    return findings


def _rated_fields(part: Part) -> tuple[tuple[str, str], ...]:
    if type(part) in WINDINGS:
        return WINDINGS[type(part)]
    if isinstance(part, (*MACHINES, *DEVICES, *CARRIERS)) and hasattr(part, "rated_voltage"):
        return tuple((terminal.name, "rated_voltage") for terminal in part.terminals[:1])
    return ()


def _transformers_in_loops(
    parts: Mapping[str, Part], branch_parts: Sequence[str], carried: Carried
) -> list[tuple[Part, ...]]:
    found: dict[frozenset[str], tuple[Part, ...]] = {}
    for branch in carried.broken:
        ids = {branch_parts[k] for k in carried.loop(branch)}
        named = tuple(part for part in (parts[part_id] for part_id in ids) if type(part) in WINDINGS)
        named = tuple(sorted(named or (parts[branch_parts[branch]],), key=lambda p: id_order(p.id)))
        found.setdefault(frozenset(_ids(named)), named)
    return list(found.values())


def _no_source(parts: Mapping[str, Part]) -> list[Finding]:
    if all(isinstance(part, Note) for part in parts.values()):
        return []
    message = "Nothing feeds the plant: there is no source in service."
    remedy = "Place a supply or a generator and connect it, or put one in service."
    return [Finding(Severity.ERROR, "no-source", message, remedy)]


def _dead(buses: Sequence[Part]) -> Finding:
    message = f"{_listed(buses)} {'is' if len(buses) == 1 else 'are'} dead: no source is connected."
    return Finding(Severity.HINT, "dead-island", message, "Close a switch or draw a wire to a live part.", _ids(buses))


def _weak(feeding: Sequence[Part], buses: Sequence[Part]) -> Finding:
    fed = f"{_listed(buses)} " if buses else "A part of the plant "
    message = (
        f"{fed}{'are' if len(buses) > 1 else 'is'} fed by {_listed(feeding)} alone, without a supply or generator."
    )
    remedy = "Check whether the connection to the supply is meant to be open."
    return Finding(Severity.WARNING, "motors-only", message, remedy, (*_ids(feeding), *_ids(buses)))


def _listed(parts: Sequence[Part]) -> str:
    """ "T1, T2 and T3", the first few of many."""
    names = [part.name or part.title for part in parts]
    if len(names) > MOST_NAMED:
        names = [*names[:MOST_NAMED], f"{len(names) - MOST_NAMED} more"]
    return " and ".join([", ".join(names[:-1]), names[-1]] if len(names) > 1 else names)


def _ids(parts: Sequence[Part]) -> tuple[str, ...]:
    return tuple(part.id for part in parts)
