"""An edit: one named, reversible change of the plant, as a value.

An edit lists what stands afterwards (None: gone). ``apply`` makes the new plant and shares all untouched parts;
``inverse`` is the edit that takes it back. Gestures and inspector rows build edits in ``editing``.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TypeVar

from onelinefault.errors import EditError, EntryError
from onelinefault.model.part import Part
from onelinefault.model.parts import terminal_of
from onelinefault.model.plant import Arrangement, Document, End, Plant, Point, Sheet, Wire

T = TypeVar("T")


@dataclass(frozen=True)
class Edit:
    """One step of the history. sentence: what it was, for people ("Move T1"). Fields left None change nothing."""

    sentence: str
    parts: Mapping[str, Part | None] = field(default_factory=dict)
    wires: Mapping[str, Wire | None] = field(default_factory=dict)
    tags: Mapping[str, Point | None] = field(default_factory=dict)
    document: Document | None = None
    sheets: tuple[Sheet, ...] | None = None
    arrangements: tuple[Arrangement, ...] | None = None
    next_number: int | None = None

    @property
    def empty(self) -> bool:
        """True when the edit names nothing to change."""
        others = (self.document, self.sheets, self.arrangements, self.next_number)
        return not (self.parts or self.wires or self.tags) and all(o is None for o in others)


def apply(plant: Plant, edit: Edit) -> Plant:
    """The plant after the edit.

    Raises EditError, and nothing changes, when a wire would end nowhere or a part would stand on no sheet.
    """
    after = replace(
        plant,
        parts=_changed(plant.parts, edit.parts),
        wires=_changed(plant.wires, edit.wires),
        tags=_changed(plant.tags, edit.tags),
        document=edit.document or plant.document,
        sheets=plant.sheets if edit.sheets is None else edit.sheets,
        arrangements=plant.arrangements if edit.arrangements is None else edit.arrangements,
        next_number=plant.next_number if edit.next_number is None else edit.next_number,
    )
    _check(after, edit)
    return after


def inverse(plant: Plant, edit: Edit) -> Edit:
    """The edit that takes ``edit`` back: ``apply(apply(p, e), inverse(p, e)) == p``."""
    return Edit(
        sentence=edit.sentence,
        parts={key: plant.parts.get(key) for key in edit.parts},
        wires={key: plant.wires.get(key) for key in edit.wires},
        tags={key: plant.tags.get(key) for key in edit.tags},
        document=None if edit.document is None else plant.document,
        sheets=None if edit.sheets is None else plant.sheets,
        arrangements=None if edit.arrangements is None else plant.arrangements,
        next_number=None if edit.next_number is None else plant.next_number,
    )


def check_end(plant: Plant, end: End) -> None:
    """Raise EditError unless the end of a wire is at a terminal that exists."""
    part = plant.parts.get(end.part)
    if part is None:
        raise EditError(f"a wire would end at a part that does not exist ({end.part})")
    try:
        terminal_of(part, end.terminal)
    except EntryError as error:
        raise EditError(str(error)) from None


def _check(plant: Plant, edit: Edit) -> None:
    sheets = {sheet.id for sheet in plant.sheets}
    if not sheets:
        raise EditError("a plant keeps at least one sheet")
    touched = plant.parts if edit.sheets is not None else edit.parts
    for part_id in touched:
        part = plant.parts.get(part_id)
        if part is not None and part.sheet not in sheets:
            raise EditError(f"{part.title} would stand on a sheet that does not exist ({part.sheet})")
    for wire_id in edit.wires:
        wire = plant.wires.get(wire_id)
        if wire is not None:
            check_end(plant, wire.a)
            check_end(plant, wire.b)
    gone = {key for key, part in edit.parts.items() if part is None}
    if gone:
        for wire in plant.wires.values():
            if wire.a.part in gone or wire.b.part in gone:
                raise EditError(f"wire {wire.id} would end at a part that is gone")


def _changed(before: Mapping[str, T], changes: Mapping[str, T | None]) -> Mapping[str, T]:
    if not changes:
        return before
    after = dict(before)
    for key, value in changes.items():
        if value is None:
            after.pop(key, None)
        else:
            after[key] = value
    return after
