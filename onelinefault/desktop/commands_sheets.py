"""Commands of the Sheets menu."""

from __future__ import annotations

from typing import TYPE_CHECKING

from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import add_sheet, move_sheet, remove_sheet

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.sheet_tabs import SheetTabs


class SheetCommands:
    """Does the commands of their names with the sheet that is shown."""

    def __init__(self, session: Session, tabs: SheetTabs) -> None:
        self._session, self._tabs = session, tabs

    def add_sheet(self) -> None:
        """Add a sheet and turn to it."""
        if self._session.apply(add_sheet(self._session.plant)):
            self._session.show_sheet(self._session.plant.sheets[-1].id)

    def rename_sheet(self) -> None:
        """Rename in place, on the sheet's tab."""
        self._tabs.rename_current()

    def remove_sheet(self) -> None:
        """Remove the sheet with what is on it, as one step that can be undone."""
        try:
            self._session.apply(remove_sheet(self._session.plant, self._session.sheet_id, with_parts=True))
        except OneLineFaultError as error:
            self._session.said.emit(str(error))

    def sheet_earlier(self) -> None:
        """One place forward."""
        self._move(-1)

    def sheet_later(self) -> None:
        """One place back."""
        self._move(1)

    def next_sheet(self) -> None:
        """Turn to the next one."""
        self._turn(1)

    def previous_sheet(self) -> None:
        """Turn to the one before."""
        self._turn(-1)

    def _place(self) -> int:
        return [sheet.id for sheet in self._session.plant.sheets].index(self._session.sheet_id)

    def _move(self, by: int) -> None:
        place = self._place() + by
        if 0 <= place < len(self._session.plant.sheets):
            self._session.apply(move_sheet(self._session.plant, self._session.sheet_id, place))

    def _turn(self, by: int) -> None:
        sheets = self._session.plant.sheets
        self._session.show_sheet(sheets[(self._place() + by) % len(sheets)].id)
