"""Edits of the running arrangements: named sets of switch positions and in-service marks."""

from collections.abc import Mapping
from dataclasses import replace

from onelinefault.errors import EditError
from onelinefault.model.editing_draft import Draft, called
from onelinefault.model.edits import Edit
from onelinefault.model.fields import fields_of
from onelinefault.model.plant import Arrangement, Plant


def add_arrangement(plant: Plant, name: str, like: str | None = None) -> Edit:
    """Add an arrangement, as the sheet shows it or like another one.

    Raises EditError for an empty or taken name, or when there is no arrangement to take after.
    """
    _require_free(plant, name)
    draft = Draft(plant)
    added = Arrangement(draft.new_id("a"), name.strip())
    if like is not None:
        pattern = _found(plant, like)
        added = replace(added, closed=dict(pattern.closed), in_service=dict(pattern.in_service))
    arrangements = (*plant.arrangements, added)
    return Edit(f"Add arrangement {added.name}", arrangements=arrangements, next_number=draft.next_number)


def rename_arrangement(plant: Plant, arrangement_id: str, name: str) -> Edit:
    """Give an arrangement another name. Raises EditError when it does not exist or the name is empty or taken."""
    chosen = _found(plant, arrangement_id)
    _require_free(plant, name, chosen)
    return _replaced(plant, chosen, replace(chosen, name=name.strip()), f"Rename arrangement {chosen.name}")


def remove_arrangement(plant: Plant, arrangement_id: str) -> Edit:
    """Remove an arrangement. Raises EditError when it does not exist."""
    chosen = _found(plant, arrangement_id)
    return Edit(
        f"Remove arrangement {chosen.name}",
        arrangements=tuple(a for a in plant.arrangements if a.id != arrangement_id),
    )


def set_arrangement_position(plant: Plant, arrangement_id: str, part_id: str, closed: bool | None) -> Edit:
    """Say how a device stands in an arrangement; None: as the sheet shows it.

    Raises EditError when the arrangement or the device does not exist, or the part cannot be opened.
    """
    chosen, part = _found(plant, arrangement_id), Draft(plant).part(part_id)
    if "closed" not in fields_of(type(part)):
        raise EditError(f"{part.title} cannot be opened or closed; breakers, switches and fuses can")
    word = "as drawn" if closed is None else "closed" if closed else "open"
    changed = replace(chosen, closed=_marked(chosen.closed, part_id, closed))
    return _replaced(plant, chosen, changed, f"{called(part)} {word} in {chosen.name}")


def set_arrangement_service(plant: Plant, arrangement_id: str, part_id: str, in_service: bool | None) -> Edit:
    """Say whether a part is in service in an arrangement; None: as the sheet shows it.

    Raises EditError when the arrangement or the part does not exist.
    """
    chosen, part = _found(plant, arrangement_id), Draft(plant).part(part_id)
    word = "as drawn" if in_service is None else "in service" if in_service else "out of service"
    changed = replace(chosen, in_service=_marked(chosen.in_service, part_id, in_service))
    return _replaced(plant, chosen, changed, f"{called(part)} {word} in {chosen.name}")


def _found(plant: Plant, arrangement_id: str) -> Arrangement:
    for arrangement in plant.arrangements:
        if arrangement.id == arrangement_id:
            return arrangement
    raise EditError(f"there is no arrangement {arrangement_id} (any more)")


def _require_free(plant: Plant, name: str, itself: Arrangement | None = None) -> None:
    wanted = name.strip().casefold()
    if not wanted:
        raise EditError("an arrangement needs a name")
    if any(a.name.casefold() == wanted for a in plant.arrangements if a is not itself):
        raise EditError(f"there is an arrangement called {name.strip()} already")


def _marked(marks: Mapping[str, bool], part_id: str, mark: bool | None) -> dict[str, bool]:
    rest = {key: value for key, value in marks.items() if key != part_id}
    return rest if mark is None else {**rest, part_id: mark}


def _replaced(plant: Plant, before: Arrangement, after: Arrangement, sentence: str) -> Edit:
    if before == after:
        return Edit(sentence)
    return Edit(sentence, arrangements=tuple(after if a is before else a for a in plant.arrangements))
