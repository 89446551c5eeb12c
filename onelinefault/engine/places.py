"""Where a fault can stand: from a name or a place on the sheet to a node, or to a point along a branch."""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from difflib import get_close_matches

from onelinefault.engine.network import Network, TerminalKey
from onelinefault.errors import NoSuchPlaceError
from onelinefault.model.fault import Place
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant

_LAST_WORD = re.compile(r"[ .]([^ .]+)$")

LONG_KINDS = ("cable", "overhead_line", "busway")
"""Kinds of parts along which a fault can stand."""


@dataclass(frozen=True, slots=True)
class Site:
    """A place in the network: a terminal of a node, or (branch ≥ 0) a fraction along a branch from its from end."""

    node: int
    terminal: TerminalKey | None
    branch: int = -1
    fraction: float = 0.0


def place_named(plant: Plant, name: str) -> Place:
    """The place a name means: a bus's bar, another part's first terminal, or the terminal named ("T1 low", "T1.low").

    A part's id does as well as its name; where several parts share a name, a bus goes first. Raises NoSuchPlaceError
    with the names that come near.
    """
    part, terminal = _part_named(plant, name), ""
    if part is None:
        head, _, terminal = _LAST_WORD.sub(r"\n\1", name.strip()).partition("\n")
        part = _part_named(plant, head)
    names = [t.name for t in part.terminals] if part else []
    if part is None or not names or (terminal and terminal not in names):
        raise NoSuchPlaceError(_nothing_called(plant, name))
    return Place(part.id, terminal or names[0])


def _part_named(plant: Plant, name: str) -> Part | None:
    if not name.strip():
        return None
    found = sorted(plant.named(name), key=lambda part: part.kind != "bus")
    return found[0] if found else plant.parts.get(name.strip())


def _nothing_called(plant: Plant, name: str) -> str:
    by_folded = {part.name.strip().casefold(): part.name for part in plant.parts.values() if part.name.strip()}
    near = get_close_matches(name.strip().casefold(), by_folded, n=4, cutoff=0.5)
    if near:
        return f"There is nothing called {name!r} to put a fault on; near it: {', '.join(by_folded[n] for n in near)}."
    buses = [part.name or part.id for part in plant.parts.values() if part.kind == "bus"][:8]
    known = f"; buses: {', '.join(buses)}" if buses else "; the plant has no bus yet"
    return f"There is nothing called {name!r} to put a fault on{known}."


def site_of(plant: Plant, network: Network, branch_of: Mapping[str, int], place: Place) -> Site:
    """The site of a place. branch_of: part id → its branch.

    A fraction of 0 or 1 is the node at that end. Raises NoSuchPlaceError when the part, the terminal or the branch is
    not there, is out of service, or the fraction lies outside 0..1.
    """
    if place.fraction is None:
        return _at_terminal(plant, network, (place.part, place.terminal))
    part = _in_service(plant, place.part)
    if not 0 <= place.fraction <= 1:
        raise NoSuchPlaceError(
            f"A fault on {part.title} cannot be at {place.fraction:g} of its length; give a fraction from 0 to 1."
        )
    if part.kind not in LONG_KINDS:
        raise NoSuchPlaceError(f"A fault cannot be part of the way along {part.title}; put it on one of its terminals.")
    if place.fraction in (0, 1):
        return _at_terminal(plant, network, (part.id, "a" if place.fraction == 0 else "b"))
    branch = branch_of.get(part.id)
    if branch is None:
        raise NoSuchPlaceError(f"{_sentence(part)} is not in the network: its data are not complete or not possible.")
    start = network.branch_terminals[branch][0]
    fraction = place.fraction if start is None or start[1] == "a" else 1 - place.fraction
    end = network.from_node if fraction <= 0.5 else network.to_node
    return Site(int(end[branch]), None, branch, fraction)


def _at_terminal(plant: Plant, network: Network, key: TerminalKey) -> Site:
    part = _in_service(plant, key[0])
    names = [terminal.name for terminal in part.terminals]
    if key[1] not in names:
        raise NoSuchPlaceError(f"{_sentence(part)} has no terminal {key[1]!r}; it has {', '.join(names) or 'none'}.")
    if key not in network.node_of:
        raise NoSuchPlaceError(
            f"{_sentence(part)} is not in the network; put the fault on a part that carries current."
        )
    return Site(network.node_of[key], key)


def _in_service(plant: Plant, part_id: str) -> Part:
    part = plant.parts.get(part_id)
    if part is None:
        raise NoSuchPlaceError(f"There is no part {part_id!r} on the sheets; choose a bus or a terminal that is there.")
    if not part.in_service:
        raise NoSuchPlaceError(
            f"{_sentence(part)} is out of service, so no fault can be put on it; put it in service or choose another"
            " place."
        )
    return part


def _sentence(part: Part) -> str:
    return part.title[:1].upper() + part.title[1:]
