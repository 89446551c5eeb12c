"""Edits of the sheets: add, remove, rename, paper, order, and moving parts from one to another."""

from collections.abc import Iterable
from dataclasses import replace

from onelinefault.errors import EditError
from onelinefault.model.editing_draft import Draft, counted, listed
from onelinefault.model.editing_placing import require_sheet, shift
from onelinefault.model.editing_removing import take_away
from onelinefault.model.edits import Edit
from onelinefault.model.plant import PAPER_MM, Plant, Sheet


def add_sheet(plant: Plant, title: str = "", paper: str | None = None, upright: bool | None = None) -> Edit:
    """Add a sheet at the end, by default of the same paper as the last one. Raises EditError for an unknown paper."""
    draft = Draft(plant)
    last = plant.sheets[-1]
    sheet = Sheet(
        draft.new_id("s"),
        title or f"Sheet {len(plant.sheets) + 1}",
        _known_paper(last.paper if paper is None else paper),
        last.upright if upright is None else upright,
    )
    return Edit(f"Add {sheet.title}", sheets=(*plant.sheets, sheet), next_number=draft.next_number)


def remove_sheet(plant: Plant, sheet_id: str, with_parts: bool = False) -> Edit:
    """Remove a sheet. Raises EditError for the last sheet, and for one that holds parts unless they shall go too."""
    require_sheet(plant, sheet_id)
    if len(plant.sheets) == 1:
        raise EditError("a plant keeps at least one sheet")
    draft = Draft(plant)
    parts = plant.on_sheet(sheet_id)
    title = next(s.title for s in plant.sheets if s.id == sheet_id)
    if parts and not with_parts:
        held = counted(len(parts), "part")
        raise EditError(f"{title} holds {held}; move them to another sheet, or remove the sheet with its parts")
    take_away(draft, parts, heal=False)
    edit = draft.edit(f"Remove {title}")
    return replace(edit, sheets=tuple(s for s in plant.sheets if s.id != sheet_id))


def rename_sheet(plant: Plant, sheet_id: str, title: str) -> Edit:
    """Give a sheet another title. Raises EditError for an unknown sheet or an empty title."""
    if not title.strip():
        raise EditError("a sheet keeps a title")
    return _changed_sheet(plant, sheet_id, f"Rename a sheet to {title.strip()}", title=title.strip())


def set_paper(plant: Plant, sheet_id: str, paper: str, upright: bool | None = None) -> Edit:
    """Change a sheet's paper, and whether it stands upright. Raises EditError for an unknown sheet or paper."""
    require_sheet(plant, sheet_id)
    turned = upright if upright is not None else next(s.upright for s in plant.sheets if s.id == sheet_id)
    sentence = f"Set paper to {_known_paper(paper)}{' upright' if turned else ''}"
    return _changed_sheet(plant, sheet_id, sentence, paper=paper, upright=turned)


def move_sheet(plant: Plant, sheet_id: str, position: int) -> Edit:
    """Put a sheet at another place in the order, counted from 0. Raises EditError for an unknown sheet."""
    require_sheet(plant, sheet_id)
    moved = next(s for s in plant.sheets if s.id == sheet_id)
    rest = [s for s in plant.sheets if s.id != sheet_id]
    rest.insert(min(max(position, 0), len(rest)), moved)
    return Edit(f"Move {moved.title}", sheets=tuple(rest) if tuple(rest) != plant.sheets else None)


def move_to_sheet(plant: Plant, ids: Iterable[str], sheet_id: str, dx: int = 0, dy: int = 0) -> Edit:
    """Move parts to another sheet; their wires stay joined, across sheets where the other end does not move along.

    Raises EditError for an unknown sheet or part.
    """
    require_sheet(plant, sheet_id)
    draft = Draft(plant)
    parts = [part for part in draft.chosen_parts(ids) if part.sheet != sheet_id]
    for part in parts:
        draft.put(replace(part, sheet=sheet_id))
    shift(draft, {part.id: (dx, dy) for part in parts})
    for part in parts:
        for wire in draft.wires_of(part.id):
            if draft.part(wire.a.part).sheet != draft.part(wire.b.part).sheet:
                draft.put_wire(replace(wire, corners=()))
    title = next(s.title for s in plant.sheets if s.id == sheet_id)
    return draft.edit(f"Move {listed(parts)} to {title}")


def _known_paper(paper: str) -> str:
    if paper not in PAPER_MM:
        raise EditError(f"there is no paper {paper}; choose one of {', '.join(PAPER_MM)}")
    return paper


def _changed_sheet(plant: Plant, sheet_id: str, sentence: str, **changes: object) -> Edit:
    require_sheet(plant, sheet_id)
    sheets = tuple(replace(s, **changes) if s.id == sheet_id else s for s in plant.sheets)  # type: ignore[arg-type]
    return Edit(sentence, sheets=sheets if sheets != plant.sheets else None)
