"""Taking parts and wires away so that what is left stays joined: series parts heal into a wire, joints dissolve."""

from collections.abc import Iterable

from onelinefault.model.editing_draft import Draft, counted, is_joint, listed, other_end, reversed_wire
from onelinefault.model.editing_paths import tidy_corners
from onelinefault.model.editing_wires import joined
from onelinefault.model.edits import Edit
from onelinefault.model.part import Part
from onelinefault.model.plant import End, Plant, Wire
from onelinefault.model.quantity import Quantity

_SAME_VOLTAGE = 0.1  # rated voltages that differ by less, as a share, are of one level


def remove(plant: Plant, part_ids: Iterable[str], wire_ids: Iterable[str] = ()) -> Edit:
    """Take parts and wires away.

    A series part (two terminals, one wire on each) leaves one wire between its two neighbours, unless a wire would
    join what was apart: at a transformer between two voltages, an open device, a part out of service. Of any other
    part the wires go too. A joint left with two wires dissolves into
    one, with fewer it goes. Ids may be mixed in either list. Raises EditError for an id that does not exist.
    """
    draft = Draft(plant)
    ids = dict.fromkeys((*part_ids, *wire_ids))
    wires = [draft.wire(key) for key in ids if key in draft.wires]
    parts = draft.chosen_parts(ids)
    take_away(draft, parts, wires)
    return draft.edit(f"Delete {told(parts, wires)}")


def told(parts: list[Part], wires: list[Wire]) -> str:
    """What a sentence calls a selection of parts and wires: "T1", "a wire", "5 parts and 2 wires"."""
    if not wires:
        return listed(parts)
    words = "a wire" if len(wires) == 1 else counted(len(wires), "wire")
    return f"{listed(parts)} and {words}" if parts else words


def take_away(draft: Draft, parts: Iterable[Part], wires: Iterable[Wire] = (), heal: bool = True) -> None:
    """Take parts and wires out of a draft, heal what can be healed, and settle the joints beside them."""
    beside: dict[str, None] = {}
    for wire in wires:
        if wire.id in draft.wires:
            _drop_wire(draft, wire, beside)
    for part in parts:
        if part.id in draft.parts:
            _take_part(draft, part, heal, beside)
    settle_joints(draft, beside)


def settle_joints(draft: Draft, part_ids: Iterable[str]) -> None:
    """Dissolve joints that are left with two wires, take away those with fewer, and look at their neighbours then."""
    waiting = dict.fromkeys(part_ids)
    while waiting:
        part = draft.parts.get(waiting.popitem()[0])
        if part is None or not is_joint(part):
            continue
        wires = draft.wires_of(part.id)
        if len(wires) == 2:
            _join_over(draft, part, wires[0], wires[1], waiting)
        elif len(wires) < 2:
            for wire in wires:
                _drop_wire(draft, wire, waiting)
            draft.drop(part.id)


def _take_part(draft: Draft, part: Part, heal: bool, beside: dict[str, None]) -> None:
    wires = draft.wires_of(part.id)
    if heal and len(wires) == 2 and _in_series(part, wires):
        _join_over(draft, part, wires[0], wires[1], beside)
        return
    for wire in wires:
        _drop_wire(draft, wire, beside)
    draft.drop(part.id)


def _in_series(part: Part, wires: list[Wire]) -> bool:
    if is_joint(part):
        return True
    used = {end.terminal for wire in wires for end in wire.ends if end.part == part.id}
    return len(part.terminals) == 2 and len(used) == 2 and not _keeps_apart(part)


def _keeps_apart(part: Part) -> bool:
    is_open = hasattr(part, "closed") and part.value("closed") is False
    return is_open or not part.in_service or _between_two_voltages(part)


def _between_two_voltages(part: Part) -> bool:
    values = [part.given(name) for name in ("high_voltage", "low_voltage") if hasattr(part, name)]
    known = sorted(value.to("kV") for value in values if isinstance(value, Quantity))
    return len(known) == 2 and known[0] < known[1] * (1 - _SAME_VOLTAGE)


def _join_over(draft: Draft, part: Part, first: Wire, second: Wire, beside: dict[str, None]) -> None:
    """One wire in place of a part and its two wires; the first wire's id lives on."""
    if first.a.part == part.id:
        first = reversed_wire(first)
    if second.a.part != part.id:
        second = reversed_wire(second)
    a, b = other_end(first, part.id), other_end(second, part.id)
    for wire in (first, second):
        draft.drop_wire(wire.id)
    draft.drop(part.id)
    if a.part == b.part or joined(draft, a, b):
        beside.update({a.part: None, b.part: None})
        return
    draft.put_wire(Wire(first.id, a, b, _joined_corners(draft, a, b, first, second)))


def _joined_corners(draft: Draft, a: End, b: End, first: Wire, second: Wire) -> tuple[tuple[int, int], ...]:
    return tidy_corners(draft.place_of_end(a), (*first.corners, *second.corners), draft.place_of_end(b))


def _drop_wire(draft: Draft, wire: Wire, beside: dict[str, None]) -> None:
    draft.drop_wire(wire.id)
    beside.update({wire.a.part: None, wire.b.part: None})
