"""Edits of what parts are called and rated: names, typed values, their basis, positions, and the title block."""

from collections.abc import Iterable
from dataclasses import replace
from typing import Any

from onelinefault.errors import EditError, EntryError
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.editing_draft import Draft, called, listed
from onelinefault.model.edits import Edit
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.part import Part, describe
from onelinefault.model.plant import Document, Plant


def rename(plant: Plant, part_id: str, name: str) -> Edit:
    """Give a part another name. Raises EditError when the part does not exist."""
    draft = Draft(plant)
    part = draft.part(part_id)
    name = " ".join(name.split())
    draft.put(replace(part, name=name))
    return draft.edit(f"Rename {called(part)} to {name}" if name else f"Take the name of {called(part)} away")


def set_text(plant: Plant, ids: Iterable[str], field: str, text: str, basis: Basis | None = None) -> Edit:
    """Type one rating of one or more parts anew; an empty text clears it.

    Other forms of the same rating (load loss for X/R, ...) are cleared, so that what was typed last counts. Raises
    EntryError when a part has no such rating or the text cannot be taken, EditError when a part does not exist.
    """
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    for part in parts:
        draft.put(_typed(part, field, text, basis))
    if not parts:
        return draft.edit("Nothing chosen")
    label = describe(type(parts[0]), field).label
    shown = draft.parts[parts[0].id].text(field)
    many = f"{len(parts)} parts" if len(parts) > 1 else called(parts[0])
    return draft.edit(f"Set {label} of {many} to {shown}" if shown else f"Clear {label} of {many}")


def set_texts(plant: Plant, part_id: str, texts: dict[str, str], basis: Basis | None = None) -> Edit:
    """Type several ratings of one part in one step, as a lookup does.

    Raises EntryError when a text cannot be taken, EditError when the part does not exist.
    """
    draft = Draft(plant)
    part = before = draft.part(part_id)
    for field, text in texts.items():
        part = _typed(part, field, text, basis)
    for field, text in texts.items():  # a lookup may give two forms of one rating: the later has not cleared the first
        part = part.with_text(field, text, basis)
    draft.put(part)
    return draft.edit(f"Fill in {called(before)}")


def set_basis(plant: Plant, ids: Iterable[str], field: str, basis: Basis | None) -> Edit:
    """Say how a typed rating is known; None takes the mark away. Parts where it is not typed stay as they are.

    Raises EntryError when a part has no such rating, EditError when a part does not exist.
    """
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    label = describe(type(parts[0]), field).label if parts else field
    for part in parts:
        describe(type(part), field)
        if part.given(field) is not None:
            marks = {key: mark for key, mark in part.basis.items() if key != field}
            draft.put(replace(part, basis=marks if basis is None else {**marks, field: basis}))
    return draft.edit(f"Mark {label} of {listed(parts)} as {basis or 'nameplate'}")


def set_attribute(plant: Plant, part_id: str, name: str, value: int) -> Edit:
    """Set a drawn measure in modules: the length of a bus (never shorter than its wires) or the width of a note.

    Raises EditError when the part does not exist or has no such measure.
    """
    draft = Draft(plant)
    part = draft.part(part_id)
    if isinstance(part, Bus) and name == "length":
        ends = [end.at or 0 for wire in draft.wires_of(part_id) for end in wire.ends if end.part == part_id]
        draft.put(replace(part, length=max([value, 0, *ends])))
    elif isinstance(part, Note) and name == "width":
        draft.put(replace(part, width=max(value, 2)))
    else:
        raise EditError(f"{part.title} has no {name} that could be set; a bus has a length, a note a width")
    return draft.edit(f"Set {name} of {called(part)}")


def set_closed(plant: Plant, ids: Iterable[str], closed: bool) -> Edit:
    """Close or open devices. Raises EditError for a part that is no switching device or does not exist."""
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    for part in parts:
        _require_position(part)
        if part.value("closed") is not closed:
            draft.put(_with(part, closed=closed))
    return draft.edit(f"{'Close' if closed else 'Open'} {listed(parts)}")


def toggle_closed(plant: Plant, part_id: str) -> Edit:
    """Open a closed device, close an open one. Raises EditError as ``set_closed`` does."""
    part = Draft(plant).part(part_id)
    _require_position(part)
    return set_closed(plant, (part_id,), part.value("closed") is not True)


def set_in_service(plant: Plant, ids: Iterable[str], in_service: bool) -> Edit:
    """Take parts out of service or back into it. Raises EditError when a part does not exist."""
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    for part in parts:
        draft.put(replace(part, in_service=in_service))
    return draft.edit(f"Put {listed(parts)} into service" if in_service else f"Take {listed(parts)} out of service")


def set_document(plant: Plant, field: str, text: str) -> Edit:
    """Type one field of the title block or of the calculation's basis anew; an empty text clears it.

    Raises EntryError when there is no such field or the text cannot be taken.
    """
    fields = fields_of(Document)
    if field not in fields:
        raise EntryError(f"the plant has no field {field}; it has {', '.join(fields)}")
    document = _with(plant.document, **{field: fields[field].value_from(text)})
    changed = document if document != plant.document else None
    label = fields[field].label
    return Edit(f"Set {label} to {text.strip()}" if text.strip() else f"Clear {label}", document=changed)


def _typed(part: Part, field: str, text: str, basis: Basis | None) -> Part:
    """The part with a rating typed, and other forms of the same rating cleared."""
    typed = part.with_text(field, text, basis)
    if typed.given(field) is not None:
        for other in describe(type(part), field).alternatives:
            if typed.given(other) is not None:
                typed = typed.with_text(other, "")
    return typed


def _require_position(part: Part) -> None:
    if "closed" not in fields_of(type(part)):
        raise EditError(f"{part.title} cannot be opened or closed; breakers, switches and fuses can")


def _with(value: Any, **changes: Any) -> Any:
    return replace(value, **changes)
