"""Cut, copy, paste, duplicate: a fragment is a value of parts and the wires among them."""

from collections.abc import Iterable
from dataclasses import dataclass, replace

from onelinefault.model.editing_draft import Draft, listed
from onelinefault.model.editing_placing import require_sheet
from onelinefault.model.editing_removing import settle_joints, take_away, told
from onelinefault.model.edits import Edit
from onelinefault.model.part import Part
from onelinefault.model.plant import End, Plant, Point, Wire


@dataclass(frozen=True, slots=True)
class Fragment:
    """A piece of a plant: parts with places relative to its own origin, and the wires between these parts.

    origin: where its own origin (left and upper edge of the parts' origins) was on the sheet it was copied from.
    """

    parts: tuple[Part, ...]
    wires: tuple[Wire, ...] = ()
    origin: Point = (0, 0)

    @property
    def empty(self) -> bool:
        """True when there is nothing to paste."""
        return not self.parts


def copy(plant: Plant, ids: Iterable[str]) -> Fragment:
    """The parts chosen and the wires whose both ends are at them. Raises EditError when a part does not exist."""
    parts = Draft(plant).chosen_parts(ids)
    if not parts:
        return Fragment(())
    x0, y0 = min(p.x for p in parts), min(p.y for p in parts)
    chosen = {part.id for part in parts}
    wires = [w for w in plant.wires.values() if w.a.part in chosen and w.b.part in chosen]
    return Fragment(
        tuple(replace(p, x=p.x - x0, y=p.y - y0) for p in parts),
        tuple(replace(w, corners=_shifted(w.corners, -x0, -y0)) for w in wires),
        (x0, y0),
    )


def paste(plant: Plant, fragment: Fragment, sheet: str, dx: int, dy: int) -> Edit:
    """Put a fragment on a sheet with its origin at (dx, dy), under new ids and, where taken, new names.

    "T1" becomes the next free "T2"; joints that are left with fewer than three wires dissolve or go. Raises EditError
    for an unknown sheet.
    """
    draft = Draft(plant)
    _paste(draft, fragment, sheet, dx, dy)
    return draft.edit(f"Paste {listed(fragment.parts)}")


def duplicate(plant: Plant, ids: Iterable[str], dx: int = 2, dy: int = 2) -> Edit:
    """Paste a copy of parts so many modules beside them, on their sheet. Raises EditError as ``copy`` does."""
    fragment = copy(plant, ids)
    draft = Draft(plant)
    if not fragment.empty:
        x, y = fragment.origin
        _paste(draft, fragment, fragment.parts[0].sheet, x + dx, y + dy)
    return draft.edit(f"Duplicate {listed(fragment.parts)}")


def cut(plant: Plant, part_ids: Iterable[str], wire_ids: Iterable[str] = ()) -> tuple[Fragment, Edit]:
    """A copy of parts, and the edit that takes them and the wires named away, with healing.

    Raises EditError for an id that does not exist.
    """
    draft = Draft(plant)
    ids = dict.fromkeys((*part_ids, *wire_ids))
    wires = [draft.wire(key) for key in ids if key in draft.wires]
    parts = draft.chosen_parts(ids)
    fragment = copy(plant, [part.id for part in parts])
    take_away(draft, parts, wires)
    return fragment, draft.edit(f"Cut {told(parts, wires)}")


def added_parts(plant: Plant, edit: Edit) -> tuple[str, ...]:
    """Ids of the parts that an edit adds to a plant, for choosing them afterwards."""
    return tuple(key for key, part in edit.parts.items() if part is not None and key not in plant.parts)


def _paste(draft: Draft, fragment: Fragment, sheet: str, dx: int, dy: int) -> None:
    require_sheet(draft.plant, sheet)
    new_ids = {part.id: draft.new_id("p") for part in fragment.parts}
    for part in fragment.parts:
        name = draft.free_name(part.name) if part.name else ""
        draft.put(replace(part, id=new_ids[part.id], name=name, sheet=sheet, x=part.x + dx, y=part.y + dy))
    for wire in fragment.wires:
        a, b = (_renamed(end, new_ids) for end in wire.ends)
        draft.put_wire(Wire(draft.new_id("w"), a, b, _shifted(wire.corners, dx, dy)))
    settle_joints(draft, new_ids.values())


def _renamed(end: End, new_ids: dict[str, str]) -> End:
    return replace(end, part=new_ids[end.part])


def _shifted(corners: tuple[Point, ...], dx: int, dy: int) -> tuple[Point, ...]:
    return tuple((x + dx, y + dy) for x, y in corners)
