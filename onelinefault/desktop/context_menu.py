"""What a right click offers: what fits the thing under the pointer."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

from PySide6.QtGui import QAction
from PySide6.QtWidgets import QMenu, QWidget

from onelinefault.model.fields import fields_of

if TYPE_CHECKING:
    from onelinefault.desktop.hit import Hit
    from onelinefault.model.plant import Plant

_PAPER = ("place_part", "draw_wire", "paste", "-", "select_all", "fit", "-", "clear_fault", "page_setup")
_WIRE = ("reroute", "delete", "-", "fit_selection")
_PART = ("fault_here", "-", "rename", "rotate", "mirror")
_AFTER = ("in_out_of_service", "-", "cut", "copy", "duplicate", "delete", "-", "reroute", "fit_selection")


def keys_for(hit: Hit, plant: Plant) -> tuple[str, ...]:
    """The commands offered for what was hit."""
    part = plant.parts.get(hit.key)
    if part is not None:
        device = ("open_close",) if "closed" in fields_of(type(part)) else ()
        return (*_PART, *device, *_AFTER)
    return _WIRE if hit.kind == "wire" else _PAPER


def context_menu(hit: Hit, plant: Plant, actions: Mapping[str, QAction], parent: QWidget) -> QMenu:
    """A menu of the commands that fit."""
    menu = QMenu(parent)
    for key in keys_for(hit, plant):
        if key == "-":
            menu.addSeparator()
        else:
            menu.addAction(actions[key])
    return menu
