"""Typical values for what is not typed: shown in the inspector's rows, and filled in on request as one step."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import TYPE_CHECKING

from onelinefault.errors import TablesError
from onelinefault.model.completion import completed_part
from onelinefault.model.editing import in_turn, set_texts
from onelinefault.model.fields import Basis, fields_of
from onelinefault.store.tables import load_tables

if TYPE_CHECKING:
    from onelinefault.model.edits import Edit
    from onelinefault.model.part import Part
    from onelinefault.model.plant import Plant


def completed_parts(plant: Plant, parts: Sequence[Part]) -> list[Part]:
    """The parts with typical values filled in where nothing is typed; as they are when the tables cannot be read."""
    try:
        tables = load_tables()
    except TablesError:
        return list(parts)
    return [completed_part(part, tables, plant.document.frequency_hz)[0] for part in parts]


def offered(part: Part, completed: Part) -> dict[str, str]:
    """The typical values that a part could be given, as texts by field name."""
    names = fields_of(type(part))
    return {name: completed.text(name) for name in names if part.given(name) is None and completed.text(name)}


def fill_in(plant: Plant, parts: Sequence[Part]) -> Edit:
    """The edit that types the typical values of some parts, marked as typical."""
    steps: list[Callable[[Plant], Edit]] = []
    for part, completed in zip(parts, completed_parts(plant, parts), strict=True):
        texts = offered(part, completed)
        if texts:
            steps.append(_filling(part.id, texts))
    names = [part.name or part.label for part in parts]
    whom = names[0] if len(names) == 1 else f"{len(names)} parts"
    return in_turn(plant, steps, f"Fill in typical values of {whom}")


def _filling(part_id: str, texts: dict[str, str]) -> Callable[[Plant], Edit]:
    def step(plant: Plant) -> Edit:
        return set_texts(plant, part_id, texts, Basis.TYPICAL)

    return step
