"""Which results rest on data that nobody has read off a nameplate."""

from collections.abc import Mapping

from onelinefault.engine.network import Network
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.quantity import Quantity

UNSURE = (Basis.TYPICAL, Basis.GUESSED)

IMPEDANCE_DEFAULTS = frozenset(
    {
        "x_over_r",
        "r0_over_x0",
        "x0_over_r0",
        "subtransient_reactance",
        "zero_sequence_reactance",
        "zero_sequence_impedance",
        "efficiency",
        "power_factor",
        "locked_rotor_ratio",
        "current_limit",
    }
)
"""Ratings whose default stands in for a nameplate value; other defaults (tap 0 %, one in parallel) say what is
usual."""


def assumed_names(plant: Plant, network: Network) -> dict[int, tuple[str, ...]]:
    """For each island the names of its parts whose impedances rest on typical or guessed data, in the plant's order."""
    islands = _islands_of_parts(network)
    found: dict[int, list[str]] = {}
    for part_id, part in plant.parts.items():
        if part_id in islands and rests_on_assumptions(part):
            found.setdefault(islands[part_id], []).append(part.name or part.id)
    return {island: tuple(names) for island, names in found.items()}


def rests_on_assumptions(part: Part) -> bool:
    """Whether a rating in use is marked typical or guessed, or is a default that stands for an impedance."""
    for name, field in fields_of(type(part)).items():
        if part.given(name) is not None:
            if part.basis.get(name) in UNSURE and name not in ("rated_current", "rated_time"):
                return True
        elif (
            isinstance(field.default, Quantity)
            and name in IMPEDANCE_DEFAULTS
            and all(part.given(other) is None for other in field.alternatives)
        ):
            return True
    return False


def _islands_of_parts(network: Network) -> Mapping[str, int]:
    islands = {
        part: int(network.island[node]) for part, node in zip(network.branch_parts, network.from_node, strict=True)
    }
    islands |= {
        part: int(network.island[node]) for part, node in zip(network.shunt_parts, network.shunt_node, strict=True)
    }
    return islands | {converter.part: int(network.island[converter.node]) for converter in network.converters}
