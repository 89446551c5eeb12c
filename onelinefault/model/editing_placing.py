"""Edits that put parts on a sheet and shift them there: place, move, turn, mirror, stretch, move a label or a tag."""

from collections.abc import Callable, Iterable, Mapping
from dataclasses import replace
from typing import Any

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.editing_draft import Draft, called, counted, listed
from onelinefault.model.editing_paths import tidy_corners
from onelinefault.model.edits import Edit
from onelinefault.model.fields import fields_of
from onelinefault.model.part import Part, place_of
from onelinefault.model.parts import part_class
from onelinefault.model.plant import End, Plant, Point, Wire

_DRAWN = ("name", "mirrored", "in_service", "length", "width", "label_dx", "label_dy")


def place(plant: Plant, kind: str, sheet: str, x: int, y: int, turn: int = 0, **presets: Any) -> Edit:
    """Put a new part on a sheet, with the next free name of its kind ("T1", "Bus 1").

    presets: ratings as text by field name, or drawn properties (name, mirrored, in_service, length of a bus in
    modules, width of a note). Raises EntryError for an unknown kind or a text that cannot be taken, EditError for an
    unknown sheet or property.
    """
    draft = Draft(plant)
    part = new_part(draft, kind, sheet, x, y, turn, presets)
    return draft.edit(f"Place {called(part)}")


def new_part(
    draft: Draft, kind: str, sheet: str, x: int, y: int, turn: int = 0, presets: Mapping[str, Any] | None = None
) -> Part:
    """Add a new part to a draft and give it. Raises as ``place`` does."""
    made = part_class(kind)
    require_sheet(draft.plant, sheet)
    given = dict(presets or {})
    drawn = {key: given.pop(key) for key in _DRAWN if key in given and key not in fields_of(made)}
    if isinstance(drawn.get("length", drawn.get("width", 0)), str):
        raise EditError(f"the drawn size of {made.label} is a whole number of modules")
    name = drawn.pop("name", None)
    try:
        part = made(id=draft.new_id("p"), sheet=sheet, x=x, y=y, turn=turn % 4, **drawn)
    except TypeError:
        raise EditError(f"{made.label} has no {' or '.join(drawn)}") from None
    for field, text in given.items():
        part = part.with_text(field, str(text))
    part = replace(part, name=_first_name(draft, part) if name is None else str(name))
    draft.put(part)
    return part


def require_sheet(plant: Plant, sheet: str) -> None:
    """Raise EditError unless the plant has the sheet."""
    if plant.sheet(sheet) is None:
        raise EditError(f"there is no sheet {sheet}; the plant has {', '.join(s.id for s in plant.sheets)}")


def move(plant: Plant, part_ids: Iterable[str], dx: int, dy: int) -> Edit:
    """Move parts by whole modules; their wires stay joined.

    Corners between two moved parts move too, others stay where they were set, unless they have become pointless.
    Raises EditError when a part does not exist.
    """
    draft = Draft(plant)
    parts = draft.chosen_parts(part_ids)
    shift(draft, {part.id: (dx, dy) for part in parts})
    return draft.edit(f"Move {listed(parts)}")


def shift(draft: Draft, shifts: Mapping[str, Point]) -> None:
    """Move each part by its own shift; corners go along where both ends of a wire make the same move."""
    for part_id, (dx, dy) in shifts.items():
        part = draft.part(part_id)
        draft.put(replace(part, x=part.x + dx, y=part.y + dy))
    for wire in _with_corners(draft, shifts):
        there = [shifts.get(end.part, (0, 0)) for end in wire.ends]
        dx, dy = there[0] if there[0] == there[1] else (0, 0)
        _put_corners(draft, wire, [(x + dx, y + dy) for x, y in wire.corners])


def turn(plant: Plant, ids: Iterable[str]) -> Edit:
    """Turn parts by a quarter, clockwise, several of them as one figure about the middle one.

    Raises EditError when a part does not exist.
    """

    def turned(part: Part, centre: Point) -> Part:
        x, y = _quarter((part.x, part.y), centre)
        return replace(part, x=x, y=y, turn=(part.turn + 1) % 4)

    return _transform(plant, ids, turned, _quarter, "Turn")


def mirror(plant: Plant, ids: Iterable[str]) -> Edit:
    """Mirror parts left to right, several of them as one figure about the middle one.

    Raises EditError when a part does not exist.
    """

    def mirrored(part: Part, centre: Point) -> Part:
        x, y = _reflected((part.x, part.y), centre)
        return replace(part, x=x, y=y, turn=-part.turn % 4, mirrored=not part.mirrored)

    return _transform(plant, ids, mirrored, _reflected, "Mirror")


def anchor(part: Part) -> Point:
    """The place by which a part is turned and lined up: its origin, of a bus the middle of the bar, of a note too."""
    width = part.length if isinstance(part, Bus) else part.width if isinstance(part, Note) else 0
    x, y = place_of(part, width // 2, 0)
    return int(x), int(y)


def stretch_bus(plant: Plant, bus_id: str, end: str, to: Point | int) -> Edit:
    """Drag one end of a bus along its line; every wire stays where it is on the sheet.

    end: "start" (the bus's origin) or "far". to: where the end is dragged, as a place on the sheet, or as modules
    along the bar from where its start was. The bar is never cut shorter than its wires, nor than one module. Raises
    EditError when there is no such bus or end.
    """
    draft = Draft(plant)
    bus = draft.part(bus_id)
    if not isinstance(bus, Bus) or end not in ("start", "far"):
        raise EditError(f"{bus.title} has no end {end} that could be dragged; a bus has start and far")
    along = to if isinstance(to, int) else _along(bus, to)
    used = [e.at or 0 for wire in draft.wires_of(bus_id) for e in wire.ends if e.part == bus_id]
    if end == "far":
        draft.put(replace(bus, length=max([along, 1, *used])))
        return draft.edit(f"Stretch {called(bus)}")
    cut = min([along, max(bus.length, 1) - 1, *used])
    x, y = place_of(bus, cut, 0)
    draft.put(replace(bus, x=int(x), y=int(y), length=max(bus.length - cut, 1)))
    for wire in draft.wires_of(bus_id):
        a, b = (_slid(e, cut) if e.part == bus_id else e for e in wire.ends)
        draft.put_wire(replace(wire, a=a, b=b))
    return draft.edit(f"Stretch {called(bus)}")


def move_label(plant: Plant, part_id: str, label_dx: int, label_dy: int) -> Edit:
    """Put a part's label so many modules from its usual place. Raises EditError when the part does not exist."""
    draft = Draft(plant)
    part = draft.part(part_id)
    draft.put(replace(part, label_dx=label_dx, label_dy=label_dy))
    return draft.edit(f"Move the label of {called(part)}")


def set_tag(plant: Plant, key: str, offset: Point) -> Edit:
    """Put a figure's callout at an offset in modules from its usual place."""
    return Edit("Move a tag", tags={key: offset} if plant.tags.get(key) != offset else {})


def clear_tags(plant: Plant, keys: Iterable[str] | None = None) -> Edit:
    """Let callouts find their places themselves again: those named, or all."""
    chosen = [key for key in (plant.tags if keys is None else keys) if key in plant.tags]
    return Edit(f"Release {counted(len(chosen), 'tag')}", tags=dict.fromkeys(chosen))


def clear_tag(plant: Plant, key: str) -> Edit:
    """Let one callout find its place itself again."""
    return clear_tags(plant, (key,))


def _first_name(draft: Draft, part: Part) -> str:
    if isinstance(part, Note) or (isinstance(part, Bus) and part.length == 0):
        return ""
    return draft.free_name("Bus 1" if isinstance(part, Bus) else f"{part.letter}1")


def _transform(
    plant: Plant,
    ids: Iterable[str],
    change: Callable[[Part, Point], Part],
    carry: Callable[[Point, Point], Point],
    verb: str,
) -> Edit:
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    if not parts:
        return draft.edit(f"{verb} nothing")
    centre = _middle_of(parts)
    for part in parts:
        draft.put(change(part, centre))
    chosen = {part.id for part in parts}
    for wire in _with_corners(draft, chosen):
        both = wire.a.part in chosen and wire.b.part in chosen
        _put_corners(draft, wire, [carry(c, centre) for c in wire.corners] if both else wire.corners)
    return draft.edit(f"{verb} {listed(parts)}")


def _middle_of(parts: list[Part]) -> Point:
    """The anchor nearest to the middle: it is the same part before and after, so four turns come back to the start."""
    places = [anchor(part) for part in parts]
    middle_x2 = min(x for x, _ in places) + max(x for x, _ in places)
    middle_y2 = min(y for _, y in places) + max(y for _, y in places)
    nearest = min(parts, key=lambda p: (_square2(anchor(p), middle_x2, middle_y2), p.id))
    return anchor(nearest)


def _square2(point: Point, middle_x2: int, middle_y2: int) -> int:
    return (2 * point[0] - middle_x2) ** 2 + (2 * point[1] - middle_y2) ** 2


def _quarter(point: Point, centre: Point) -> Point:
    return centre[0] - (point[1] - centre[1]), centre[1] + (point[0] - centre[0])


def _reflected(point: Point, centre: Point) -> Point:
    return 2 * centre[0] - point[0], point[1]


def _with_corners(draft: Draft, parts: Iterable[str]) -> list[Wire]:
    chosen = set(parts)
    return [w for w in draft.wires.values() if w.corners and (w.a.part in chosen or w.b.part in chosen)]


def _put_corners(draft: Draft, wire: Wire, corners: Iterable[Point]) -> None:
    tidy = tidy_corners(draft.place_of_end(wire.a), tuple(corners), draft.place_of_end(wire.b))
    draft.put_wire(replace(wire, corners=tidy))


def _along(bus: Bus, point: Point) -> int:
    """Modules along the bar from its start to the place nearest to a point on the sheet."""
    x, y = place_of(replace(bus, x=0, y=0), 1, 0)
    return int((point[0] - bus.x) * x + (point[1] - bus.y) * y)


def _slid(end: End, by: int) -> End:
    return replace(end, at=(end.at or 0) - by)
