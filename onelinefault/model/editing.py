"""Builders of edits: for every gesture and inspector row a pure function (plant, ...) → Edit with its sentence.

This is the one place to import them from; the functions live in the ``editing_*`` modules. Every edit built here can
be applied to the plant it was built for; one that would change nothing is ``empty``.
"""

from onelinefault.model.editing_align import DIRECTIONS, EDGES, align, distribute, extent
from onelinefault.model.editing_arrangements import (
    add_arrangement,
    remove_arrangement,
    rename_arrangement,
    set_arrangement_position,
    set_arrangement_service,
)
from onelinefault.model.editing_clipboard import Fragment, added_parts, copy, cut, duplicate, paste
from onelinefault.model.editing_combining import combine, in_turn
from onelinefault.model.editing_draft import Draft, is_joint
from onelinefault.model.editing_paths import tidy_corners
from onelinefault.model.editing_placing import (
    anchor,
    clear_tag,
    clear_tags,
    mirror,
    move,
    move_label,
    place,
    set_tag,
    stretch_bus,
    turn,
)
from onelinefault.model.editing_ratings import (
    rename,
    set_attribute,
    set_basis,
    set_closed,
    set_document,
    set_in_service,
    set_text,
    set_texts,
    toggle_closed,
)
from onelinefault.model.editing_removing import remove
from onelinefault.model.editing_sheets import (
    add_sheet,
    move_sheet,
    move_to_sheet,
    remove_sheet,
    rename_sheet,
    set_paper,
)
from onelinefault.model.editing_wires import WirePoint, connect, insert_into_wire, reroute, set_corners, set_end_place
from onelinefault.model.plant import Plant

__all__ = [
    "DIRECTIONS",
    "EDGES",
    "Draft",
    "Fragment",
    "WirePoint",
    "add_arrangement",
    "add_sheet",
    "added_parts",
    "align",
    "anchor",
    "clear_tag",
    "clear_tags",
    "combine",
    "connect",
    "copy",
    "cut",
    "distribute",
    "duplicate",
    "extent",
    "in_turn",
    "insert_into_wire",
    "is_joint",
    "mirror",
    "move",
    "move_label",
    "move_sheet",
    "move_to_sheet",
    "new_ids",
    "paste",
    "place",
    "remove",
    "remove_arrangement",
    "remove_sheet",
    "rename",
    "rename_arrangement",
    "rename_sheet",
    "reroute",
    "set_arrangement_position",
    "set_arrangement_service",
    "set_attribute",
    "set_basis",
    "set_closed",
    "set_corners",
    "set_document",
    "set_end_place",
    "set_in_service",
    "set_paper",
    "set_tag",
    "set_text",
    "set_texts",
    "stretch_bus",
    "tidy_corners",
    "toggle_closed",
    "turn",
]


def new_ids(plant: Plant, prefix: str, count: int) -> tuple[str, ...]:
    """The next unused ids with a prefix ("p", "w", "s" or "a"), as the next edit would issue them."""
    draft = Draft(plant)
    return tuple(draft.new_id(prefix) for _ in range(count))
