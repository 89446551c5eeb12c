"""Several edits as one step of the history."""

from collections.abc import Callable, Iterable
from typing import TypeVar

from onelinefault.model.edits import Edit, apply
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant, Point, Wire

T = TypeVar("T")


def combine(edits: Iterable[Edit], sentence: str) -> Edit:
    """One edit that does what the edits do one after the other; where two name the same thing, the later wins.

    Each edit must have been built for the plant as the ones before it leave it (``in_turn`` sees to that).
    """
    parts: dict[str, Part | None] = {}
    wires: dict[str, Wire | None] = {}
    tags: dict[str, Point | None] = {}
    whole = Edit(sentence)
    for edit in edits:
        parts.update(edit.parts)
        wires.update(edit.wires)
        tags.update(edit.tags)
        whole = Edit(
            sentence,
            document=_later(whole.document, edit.document),
            sheets=_later(whole.sheets, edit.sheets),
            arrangements=_later(whole.arrangements, edit.arrangements),
            next_number=_later(whole.next_number, edit.next_number),
        )
    return Edit(sentence, parts, wires, tags, whole.document, whole.sheets, whole.arrangements, whole.next_number)


def in_turn(plant: Plant, steps: Iterable[Callable[[Plant], Edit]], sentence: str) -> Edit:
    """One edit from steps that each build an edit for the plant as the steps before leave it.

    Raises EditError when a step is refused.
    """
    edits = []
    for step in steps:
        edits.append(step(plant))
        plant = apply(plant, edits[-1])
    return combine(edits, sentence)


def _later(before: T | None, after: T | None) -> T | None:
    return before if after is None else after
