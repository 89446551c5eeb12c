"""Edits of wires: connect, join on to an existing wire, set corners, route anew, insert a part."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from typing import Any

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus
from onelinefault.model.editing_draft import Draft, called, counted, is_joint
from onelinefault.model.editing_paths import heading_at, split_corners, tidy_corners
from onelinefault.model.editing_placing import new_part, require_sheet
from onelinefault.model.edits import Edit, check_end
from onelinefault.model.part import Part, place_of
from onelinefault.model.plant import End, Plant, Point, Wire


@dataclass(frozen=True, slots=True)
class WirePoint:
    """A place on an existing wire, in modules; connecting there makes a joint."""

    wire: str
    x: int
    y: int


def connect(plant: Plant, a: End | WirePoint, b: End | WirePoint, corners: Sequence[Point] = ()) -> Edit:
    """Draw a wire between two terminals, or places on existing wires, which then get a joint.

    On a bus, ``End.at`` None takes the place of the bar nearest to the other end. Raises EditError for nonsense: both
    ends at one part, a wire that is there already, an end at no terminal, a place beyond the end of a bus.
    """
    draft = Draft(plant)
    if isinstance(a, WirePoint) and isinstance(b, WirePoint) and a.wire == b.wire:
        raise EditError("both places are on the same wire; they are joined already")
    first, second = (_tap(draft, end) if isinstance(end, WirePoint) else end for end in (a, b))
    _add_wire(draft, first, second, corners)
    return draft.edit(f"Connect {_named(draft, first, second)}")


def set_corners(plant: Plant, wire_id: str, corners: Sequence[Point]) -> Edit:
    """Put a wire's corners by hand; pointless ones go. Raises EditError when the wire does not exist."""
    draft = Draft(plant)
    wire = draft.wire(wire_id)
    tidy = tidy_corners(draft.place_of_end(wire.a), corners, draft.place_of_end(wire.b))
    draft.put_wire(replace(wire, corners=tidy))
    return draft.edit("Shape a wire")


def set_end_place(plant: Plant, wire_id: str, bus_id: str, at: int) -> Edit:
    """Slide the end of a wire along its bus. Raises EditError when it is not there or beyond the bar."""
    draft = Draft(plant)
    wire, bus = draft.wire(wire_id), draft.part(bus_id)
    if bus_id not in (wire.a.part, wire.b.part) or not isinstance(bus, Bus):
        raise EditError(f"wire {wire_id} does not end on {bus.title} as a bus")
    ends = [_checked(draft, replace(e, at=at)) if e.part == bus_id else e for e in wire.ends]
    draft.put_wire(replace(wire, a=ends[0], b=ends[1]))
    return draft.edit(f"Slide a wire along {called(bus)}")


def reroute(plant: Plant, ids: Iterable[str]) -> Edit:
    """Let wires find their way anew: those named, and those between and on the parts named.

    Raises EditError for an id that is neither a wire nor a part.
    """
    draft = Draft(plant)
    wires: dict[str, Wire] = {}
    for key in ids:
        found = [draft.wires[key]] if key in draft.wires else draft.wires_of(draft.part(key).id)
        wires.update((w.id, w) for w in found)
    for wire in wires.values():
        draft.put_wire(replace(wire, corners=()))
    return draft.edit(f"Route {counted(len(wires), 'wire')} anew")


def insert_into_wire(
    plant: Plant, wire_id: str, part: str, x: int, y: int, path: Sequence[Point] | None = None, **presets: Any
) -> Edit:
    """Put a part with two terminals, or a bus, into a wire: the wire is cut, the part turned along it and joined.

    part: the id of a part that has no wires yet, or a kind of part to be placed anew (presets as in ``place``).
    x, y: the part's origin, or for a new bus the place where it meets the wire, in modules. path: the wire as it is
    drawn, both ends included, where that is known better than from its set corners. Raises EditError when the part
    cannot stand in a wire, EntryError for an unknown kind or a text that cannot be taken.
    """
    draft = Draft(plant)
    wire = draft.wire(wire_id)
    points = (draft.place_of_end(wire.a), *wire.corners, draft.place_of_end(wire.b))
    heading = heading_at(path or points, (x, y))
    sheet = draft.part(wire.a.part).sheet
    known = plant.parts.get(part)
    placed = known if known is not None else new_part(draft, part, sheet, x, y, presets=presets)
    _require_insertable(draft, placed, wire)
    placed = _turned_along(replace(placed, x=x, y=y, sheet=sheet), heading, fresh=known is None)
    draft.put(placed)
    first, second = _facing_ends(placed, heading, (x, y))
    before, after = split_corners(points[0], wire.corners, points[-1], (x, y))
    _cut_wire(draft, wire, (first, second), (before, after))
    return draft.edit(f"Insert {called(placed)}")


def joined(draft: Draft, a: End, b: End) -> bool:
    """Whether a wire joins two terminals already; where on a bus it ends does not matter."""
    return any(
        {(e.part, e.terminal) for e in wire.ends} == {(a.part, a.terminal), (b.part, b.terminal)}
        for wire in draft.wires_of(a.part)
    )


def _add_wire(draft: Draft, a: End, b: End, corners: Sequence[Point]) -> None:
    a, b = _checked(draft, a, b), _checked(draft, b, a)
    if a.part == b.part:
        raise EditError(f"both ends are at {draft.part(a.part).title}; a wire joins two parts")
    if joined(draft, a, b):
        names = f"{draft.part(a.part).title} and {draft.part(b.part).title}"
        raise EditError(f"{names} are joined there already")
    tidy = tidy_corners(draft.place_of_end(a), corners, draft.place_of_end(b))
    draft.put_wire(Wire(draft.new_id("w"), a, b, tidy))


def _checked(draft: Draft, end: End, other: End | None = None) -> End:
    """The end with its place on a bar settled. Raises EditError when there is nothing to end at."""
    check_end(replace(draft.plant, parts=draft.parts), end)
    part = draft.part(end.part)
    if not isinstance(part, Bus):
        return replace(end, at=None)
    if end.at is None:
        return replace(end, at=_nearest(part, draft.place_of_end(other)) if other else 0)
    if not 0 <= end.at <= part.length:
        raise EditError(f"{part.title} is {part.length} modules long; a wire cannot end at {end.at}")
    return end


def _nearest(bus: Bus, point: Point) -> int:
    ux, uy = place_of(replace(bus, x=0, y=0), 1, 0)
    along = (point[0] - bus.x) * ux + (point[1] - bus.y) * uy
    return int(min(max(along, 0), bus.length))


def _tap(draft: Draft, point: WirePoint) -> End:
    """The end that stands for a place on a wire: a new joint there, or the wire's own end if the place is at it."""
    wire, at = draft.wire(point.wire), (point.x, point.y)
    start, end = draft.place_of_end(wire.a), draft.place_of_end(wire.b)
    if at in (start, end):
        return wire.a if at == start else wire.b
    sheet = draft.part(wire.a.part).sheet
    joint = new_part(draft, "bus", sheet, *at, presets={"length": 0})
    there = End(joint.id, "bar", 0)
    before, after = split_corners(start, wire.corners, end, at)
    _cut_wire(draft, wire, (there, there), (before, after))
    return there


def _cut_wire(
    draft: Draft, wire: Wire, ends: tuple[End, End], corners: tuple[Sequence[Point], Sequence[Point]]
) -> None:
    """Two wires in place of one; the first keeps the id."""
    first = Wire(wire.id, wire.a, ends[0], tuple(corners[0]))
    second = Wire(draft.new_id("w"), ends[1], wire.b, tuple(corners[1]))
    for piece in (first, second):
        tidy = tidy_corners(draft.place_of_end(piece.a), piece.corners, draft.place_of_end(piece.b))
        draft.put_wire(replace(piece, corners=tidy))


def _require_insertable(draft: Draft, part: Part, wire: Wire) -> None:
    require_sheet(draft.plant, part.sheet)
    if not isinstance(part, Bus) and len(part.terminals) != 2:
        many = len(part.terminals)
        raise EditError(f"{part.title} has {counted(many, 'terminal')} and cannot stand in a wire")
    if draft.wires_of(part.id):
        raise EditError(f"{part.title} is connected already; take its wires away first")
    if part.id in (wire.a.part, wire.b.part):
        raise EditError(f"the wire ends at {part.title} itself")


def _turned_along(part: Part, heading: Point, fresh: bool) -> Part:
    """The part turned so that the wire runs through it: a bus across it, others along it, first end up or left."""
    upright = heading[0] == 0
    if isinstance(part, Bus):
        across = part.turn if (part.turn % 2 == 0) == upright else (part.turn + 1) % 4
        turned = replace(part, turn=across)
        if not fresh:
            return turned
        x, y = place_of(turned, -(part.length // 2), 0)  # a new bus meets the wire with its middle
        return replace(turned, x=int(x), y=int(y))
    if (part.turn % 2 == 0) == upright:
        return part
    return replace(part, turn=0 if upright else 3)


def _facing_ends(part: Part, heading: Point, at: Point) -> tuple[End, End]:
    """The ends that face the wire's first and second piece."""
    if isinstance(part, Bus):
        there = End(part.id, "bar", _nearest(part, at))
        return there, there
    places = {t.name: place_of(part, t.dx, t.dy) for t in part.terminals}
    order = sorted(places, key=lambda name: places[name][0] * heading[0] + places[name][1] * heading[1])
    return End(part.id, order[0]), End(part.id, order[1])


def _named(draft: Draft, a: End, b: End) -> str:
    parts = [draft.part(a.part), draft.part(b.part)]
    if all(is_joint(p) for p in parts):
        return "two wires"
    return " to ".join(called(p) if not is_joint(p) else "a wire" for p in parts)
