"""Which results rest on data that nobody has read off a nameplate."""

from collections.abc import Mapping

from onelinefault.engine.network import Network
from onelinefault.model.completion_rules import ASSUMED_DEFAULTS
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant

UNSURE = (Basis.TYPICAL, Basis.GUESSED)


def assumed_names(plant: Plant, network: Network) -> dict[int, tuple[str, ...]]:
    """For each island the names of its parts whose data are in part typical or guessed, in the plant's order.

    Only parts that are in the network count: a motor out of service says nothing about a result.
    """
    islands = _islands_of_parts(network)
    found: dict[int, list[str]] = {}
    for part_id, part in plant.parts.items():
        if part_id in islands and (rests_on_assumptions(part) or network.method.assumes(part)):
            found.setdefault(islands[part_id], []).append(part.name or part.id)
    return {island: tuple(names) for island, names in found.items()}


def rests_on_assumptions(part: Part) -> bool:
    """Whether a rating in use is marked typical or guessed, or a default stands in for a nameplate value."""
    if part.basis and any(basis in UNSURE and part.given(name) is not None for name, basis in part.basis.items()):
        return True
    defaults = ASSUMED_DEFAULTS.get(type(part))
    if not defaults:
        return False
    fields = fields_of(type(part))
    return any(
        part.given(name) is None and matters(part) and all(part.given(o) is None for o in fields[name].alternatives)
        for name, matters in defaults
    )


def _islands_of_parts(network: Network) -> Mapping[str, int]:
    island = network.island.tolist()
    nodes = [
        *zip(network.branch_parts, network.from_node.tolist(), strict=True),
        *zip(network.shunt_parts, network.shunt_node.tolist(), strict=True),
        *((converter.part, converter.node) for converter in network.converters),
    ]
    return {part: island[node] for part, node in nodes}
