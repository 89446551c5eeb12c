"""Commands of the Part menu: turning, positions, lining up, wires."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import TYPE_CHECKING

from PySide6.QtGui import QAction

from onelinefault.desktop.commands_edit import selected
from onelinefault.desktop.modes import Placing
from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import (
    align,
    distribute,
    mirror,
    move_to_sheet,
    reroute,
    set_closed,
    set_in_service,
    turn,
)
from onelinefault.model.fields import fields_of

if TYPE_CHECKING:
    from onelinefault.desktop.canvas import Canvas
    from onelinefault.desktop.session import Session
    from onelinefault.model.edits import Edit
    from onelinefault.model.plant import Plant

    Builder = Callable[..., Edit]


class PartCommands:
    """Does the commands of their names with the selected parts."""

    def __init__(self, session: Session, canvas: Canvas) -> None:
        self._session, self._canvas = session, canvas

    def draw_wire(self) -> None:
        """Draw a wire click by click."""
        self._canvas.start_wire()

    def rotate(self) -> None:
        """Turn what hangs at the pointer, or the selection."""
        if isinstance(self._canvas.mode, Placing):
            self._canvas.mode.turn()
        else:
            self._do(turn)

    def mirror(self) -> None:
        """Mirror the selection."""
        self._do(mirror)

    def open_close(self) -> None:
        """Open the selected devices if any is closed, else close them."""
        plant = self._session.plant
        devices = [key for key in selected(self._session)[0] if "closed" in fields_of(type(plant.parts[key]))]
        if devices:
            self._session.apply(set_closed(plant, devices, not _any(plant, devices, "closed")))
        else:
            self._session.said.emit("Select a breaker, switch or fuse to open or close it.")

    def in_out_of_service(self) -> None:
        """Take the selection out of service if any of it is in service, else put it back."""
        plant, parts = self._session.plant, selected(self._session)[0]
        if parts:
            self._session.apply(set_in_service(plant, parts, not any(plant.parts[key].in_service for key in parts)))

    def align_left(self) -> None:
        """Line up on the left."""
        self._do(align, "left")

    def align_centre(self) -> None:
        """Put under one another."""
        self._do(align, "centre")

    def align_right(self) -> None:
        """Line up on the right."""
        self._do(align, "right")

    def align_top(self) -> None:
        """Line up at the top."""
        self._do(align, "top")

    def align_middle(self) -> None:
        """Put beside one another."""
        self._do(align, "middle")

    def align_bottom(self) -> None:
        """Line up at the bottom."""
        self._do(align, "bottom")

    def distribute_across(self) -> None:
        """Space out from left to right."""
        self._do(distribute, "across")

    def distribute_down(self) -> None:
        """Space out from top to bottom."""
        self._do(distribute, "down")

    def reroute(self) -> None:
        """Let the program find the way of the selected wires, and of the selected parts' wires, anew."""
        parts, wires = selected(self._session)
        if parts or wires:
            self._apply(reroute, [*parts, *wires])

    def to_sheet(self, action: QAction) -> None:
        """Move the selected parts to the sheet that an action of the submenu names, and follow them."""
        sheet_id = str(action.data())
        parts = selected(self._session)[0]
        if parts and self._session.apply(move_to_sheet(self._session.plant, parts, sheet_id)):
            self._session.show_sheet(sheet_id)

    def _do(self, builder: Builder, *more: str) -> None:
        parts = selected(self._session)[0]
        if parts:
            self._apply(builder, parts, *more)

    def _apply(self, builder: Builder, ids: Iterable[str], *more: str) -> None:
        try:
            self._session.apply(builder(self._session.plant, ids, *more))
        except OneLineFaultError as error:
            self._session.said.emit(str(error))


def _any(plant: Plant, ids: Iterable[str], field: str) -> bool:
    return any(plant.parts[key].value(field) is True for key in ids)
