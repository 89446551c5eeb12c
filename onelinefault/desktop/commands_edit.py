"""Commands of the Edit menu: history, clipboard, selection."""

from __future__ import annotations

from typing import TYPE_CHECKING

from onelinefault.desktop.clipboard import fragment_on, put_fragment
from onelinefault.drawing.shapes import MODULE_DU
from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import added_parts, copy, cut, duplicate, move, paste, remove

if TYPE_CHECKING:
    from onelinefault.desktop.canvas import Canvas
    from onelinefault.desktop.session import Session
    from onelinefault.model.edits import Edit
    from onelinefault.model.plant import Point

_PASTED_ASIDE = 2  # modules


class EditCommands:
    """Does the commands of their names."""

    def __init__(self, session: Session, canvas: Canvas) -> None:
        self._session, self._canvas = session, canvas
        self._last_paste: tuple[object, Point] | None = None

    def undo(self) -> None:
        """Take the last step back."""
        self._session.undo()

    def redo(self) -> None:
        """Do it again."""
        self._session.redo()

    def copy(self) -> None:
        """Copy the selected parts."""
        parts, _ = selected(self._session)
        if parts:
            put_fragment(copy(self._session.plant, parts))
            self._session.said.emit(f"Copied {len(parts)} parts" if len(parts) > 1 else "Copied a part")

    def cut(self) -> None:
        """Copy, and take away."""
        parts, wires = selected(self._session)
        if parts or wires:
            fragment, edit = cut(self._session.plant, parts, wires)
            if not fragment.empty:
                put_fragment(fragment)
            self._session.apply(edit)

    def paste(self) -> None:
        """Put what was copied at the pointer, or beside where it was copied from."""
        fragment = fragment_on()
        if fragment is None or fragment.empty:
            self._session.said.emit("There are no copied parts to paste.")
            return
        x, y = self._free_place(fragment.origin)
        try:
            self._add(paste(self._session.plant, fragment, self._session.sheet_id, x, y))
        except OneLineFaultError as error:
            self._session.said.emit(str(error))

    def duplicate(self) -> None:
        """A copy beside the selection."""
        parts, _ = selected(self._session)
        if parts:
            self._add(duplicate(self._session.plant, parts))

    def delete(self) -> None:
        """Take the selection away."""
        parts, wires = selected(self._session)
        if parts or wires:
            self._session.apply(remove(self._session.plant, parts, wires))

    def select_all(self) -> None:
        """Select all parts and wires of this sheet."""
        picture = self._canvas.scene.picture
        self._session.select(frozenset((*picture.parts, *picture.wires)))

    def rename(self) -> None:
        """Rename in place."""
        self._canvas.rename_selected()

    def nudge(self, dx: int, dy: int) -> bool:
        """Move the selected parts by modules; whether there were any."""
        parts, _ = selected(self._session)
        return bool(parts) and self._session.apply(move(self._session.plant, parts, dx, dy))

    def _add(self, edit: Edit) -> None:
        before = self._session.plant
        if self._session.apply(edit):
            self._session.select(frozenset(added_parts(before, edit)))

    def _free_place(self, origin: Point) -> Point:
        """At the pointer when it is over the sheet; a second paste at the same place goes aside."""
        view = self._canvas.view
        if view.underMouse():
            place = round(view.last_point.x() / MODULE_DU), round(view.last_point.y() / MODULE_DU)
        else:
            place = origin[0] + _PASTED_ASIDE, origin[1] + _PASTED_ASIDE
        aim = (self._session.sheet_id, place)
        taken = self._last_paste
        if taken is not None and taken[0] == aim:
            place = taken[1][0] + _PASTED_ASIDE, taken[1][1] + _PASTED_ASIDE
        self._last_paste = (aim, place)
        return place


def selected(session: Session) -> tuple[list[str], list[str]]:
    """Ids of the selected parts and wires, in the plant's order."""
    chosen, plant = session.selection, session.plant
    return [key for key in plant.parts if key in chosen], [key for key in plant.wires if key in chosen]
