"""From a fault result to what the overlay shows: flows, voltages left, and the figures in the tags."""

from typing import Final

from onelinefault.drawing.overlay import Flow, OverlayData, Tag
from onelinefault.drawing.palette import level_role
from onelinefault.engine.network import ComplexArray, Network
from onelinefault.engine.results import FaultResult
from onelinefault.model.fault import FaultKind
from onelinefault.model.figures import angle_text, current_text, figure
from onelinefault.model.plant import Plant

KIND_WORDS: Final[dict[FaultKind, str]] = {
    FaultKind.THREE_PHASE: "three-phase fault",
    FaultKind.LINE_TO_LINE: "line-to-line fault",
    FaultKind.TWO_LINES_TO_EARTH: "two lines to earth",
    FaultKind.LINE_TO_EARTH: "line-to-earth fault",
}
METHOD_WORDS: Final = {"classical": "classical method", "iec60909": "IEC 60909-0"}
LEVEL_WORDS: Final = {"max": "largest", "min": "smallest"}
_NOISE: Final = 1e-4  # phases and sequences below this share of the largest are rounding, or nobody's concern
_LEAST_SHARE: Final = 0.005  # flows below this share of the largest are not drawn


def roles_of(network: Network) -> dict[tuple[str, str], str]:
    """Colour role of each terminal: its voltage level, or "dead" where nothing feeds it."""
    roles = {}
    for key, node in network.node_of.items():
        kv = network.nodes[node].nominal_kv
        known = kv if kv > 0 else None
        roles[key] = level_role(known) if network.live[node] else "dead"
    return roles


def overlay_data(plant: Plant, result: FaultResult, detail: int, *, stale: bool = False) -> OverlayData:
    """The overlay of a result. detail: 1 ribbons and gauges, 2 main figures too, 3 phases, angles and sequences too."""
    fault = result.fault
    flows, ends = _flows(plant, result)
    sizes = [flow.ka for flow in (*flows.values(), *ends.values())]
    return OverlayData(
        kind=str(fault.kind),
        phases=fault.faulted_phases,
        place=fault.place,
        flows=flows,
        ends=ends,
        voltage_left=_voltages_left(plant, result),
        tags=(_fault_tag(result, detail), *_flow_tags(plant, result, detail)),
        largest_ka=max([result.ik_ka, *sizes]),
        stale=stale,
        detail=detail,
    )


def _flows(plant: Plant, result: FaultResult) -> tuple[dict[str, Flow], dict[tuple[str, str], Flow]]:
    node_of = result.network.node_of
    flows, ends = {}, {}
    for wire_id, ka in result.wire_ka.items():
        a = plant.wires[wire_id].a if wire_id in plant.wires else None
        flow = _flow(ka, node_of[a.part, a.terminal], result) if a and (a.part, a.terminal) in node_of else None
        if flow is not None:
            flows[wire_id] = flow
    for key, ka in result.terminal_ka.items():
        flow = _flow(ka, node_of[key], result) if key in node_of else None
        if flow is not None:
            ends[key] = flow
    return flows, ends


def fault_words(plant: Plant, result: FaultResult) -> str:
    """The fault in words: "three-phase fault at Board A, largest"."""
    fault = result.fault
    part = plant.parts.get(fault.place.part)
    where = part.name or part.title if part else fault.place.part
    if fault.place.fraction is not None:
        where += f" at {fault.place.fraction * 100:.3g} % of its length"
    phases = "" if fault.kind is FaultKind.THREE_PHASE else f" {fault.faulted_phases}"
    return f"{KIND_WORDS[fault.kind]}{phases}, {where}, {LEVEL_WORDS.get(result.case.level, result.case.level)}"


def _flow(phases_ka: ComplexArray, node: int, result: FaultResult) -> Flow | None:
    size = float(max(abs(phases_ka))) * result.network.nodes[node].nominal_kv / result.nominal_kv
    if size <= _LEAST_SHARE * max(result.ik_ka, 1e-12):
        return None
    return Flow(size, _runs_as_counted(phases_ka, node, result))


def _runs_as_counted(phases_ka: ComplexArray, node: int, result: FaultResult) -> bool:
    """Whether the current runs the way it is counted, not against it.

    A current that feeds the fault lags its phase's voltage before the fault by 0 to 90 degrees; a delta-star
    transformer on the way turns that by up to 30 degrees. So the strongest phase is taken, and its lag compared with
    the middle of the possible range, 45 degrees.
    """
    phase = strongest_phase(phases_ka)
    power = result.prefault_voltages_kv[node, phase] * phases_ka[phase].conjugate()
    return bool(power.real + power.imag >= 0)


def _voltages_left(plant: Plant, result: FaultResult) -> dict[str, float]:
    left = result.voltage_left * 100
    found = {}
    for index, node in enumerate(result.network.nodes):
        if result.network.live[index]:
            for bus in node.buses:
                if bus in plant.parts and plant.parts[bus].name:
                    found[bus] = float(left[index])
    return found


def _fault_tag(result: FaultResult, detail: int) -> Tag:
    lines = []
    if detail >= 2:
        lines.append(f"peak {current_text(result.peak_ka)}  X/R {figure(result.x_over_r)}")
    if detail >= 3:
        lines += _phase_lines(result.phases_ka, result.ik_ka) + _sequence_lines(result)
    return Tag("fault", current_text(result.ik_ka), tuple(lines), filled=True)


def _phase_lines(phases_ka: ComplexArray, largest_ka: float) -> list[str]:
    return [
        f"{name} {current_text(abs(value))} {angle_text(value)}"
        for name, value in zip("abc", (complex(v) for v in phases_ka), strict=True)
        if abs(value) > _NOISE * largest_ka
    ]


def _sequence_lines(result: FaultResult) -> list[str]:
    names, least = ("I1", "I2", "I0"), _NOISE * result.ik_ka
    values = [complex(v) for v in result.sequence_ka]
    lines = [
        f"{n} {current_text(abs(v))} {angle_text(v)}" for n, v in zip(names, values, strict=True) if abs(v) > least
    ]
    if abs(result.residual_ka) > least:
        lines.append(f"3I0 {current_text(abs(result.residual_ka))}")
    return lines


def _flow_tags(plant: Plant, result: FaultResult, detail: int) -> list[Tag]:
    """One tag for each wire that carries current into the faulted node from outside, and for each source."""
    if detail < 2:
        return []
    tags = []
    for (part_id, terminal), node, ka in _feeders(plant, result):
        towards = ka if _runs_as_counted(ka, node, result) else -ka
        strongest = complex(towards[strongest_phase(towards)])
        lines = [f"{angle_text(strongest)} {plant.parts[part_id].name}".strip()]
        if detail >= 3:
            lines += _phase_lines(towards, abs(strongest))
        tags.append(Tag(f"{part_id} {terminal}", current_text(abs(strongest)), tuple(lines)))
    return tags


def _feeders(plant: Plant, result: FaultResult) -> list[tuple[tuple[str, str], int, ComplexArray]]:
    """Terminals where parts feed the faulted node, and those of sources elsewhere, with node and current.

    A source whose current arrives unchanged at the faulted node, along one line, is shown there only.
    """
    found, arriving = [], set[tuple[float, float]]()
    node_of = result.network.node_of
    sources = {share.part for share in result.sources}
    for key, ka in result.terminal_ka.items():
        part, node = plant.parts.get(key[0]), node_of.get(key)
        if part is None or node is None or hasattr(part, "closed") or part.kind == "bus":
            continue
        size = float(max(abs(ka)))
        referred = size * result.network.nodes[node].nominal_kv / result.nominal_kv
        if referred > max(_LEAST_SHARE * result.ik_ka, 1e-5) and (node == result.node or part.id in sources):
            found.append((key, node, ka))
            if node == result.node:
                arriving.add(_mark(size, node, result))
    return [(k, n, ka) for k, n, ka in found if n == result.node or _mark(max(abs(ka)), n, result) not in arriving]


def _mark(size_ka: float, node: int, result: FaultResult) -> tuple[float, float]:
    """Size and voltage level of a current, to five digits."""
    return float(f"{size_ka:.4e}"), result.network.nodes[node].nominal_kv


def strongest_phase(phases_ka: ComplexArray) -> int:
    """Index of the largest of three phase currents, shape (3,); the first of those that are equal but for rounding."""
    sizes = abs(phases_ka)
    return int((sizes > sizes.max() * (1 - 1e-6)).argmax()) if sizes.max() > 0 else 0
