"""The tabs of the sheets under the paper; they appear when there is more than one."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeyEvent, QMouseEvent
from PySide6.QtWidgets import QLineEdit

from onelinefault.desktop.tabs import Tabs
from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import move_sheet, rename_sheet

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session


class SheetTabs(Tabs):
    """A click turns to a sheet, a drag changes the order, a double click renames."""

    def __init__(self, session: Session) -> None:
        super().__init__()
        self._session = session
        self._filling = False
        self._renaming = ""
        self.setMovable(True)
        self.setAccessibleName(self.tr("Sheets"))
        self._line = _TitleLine(self)
        self._line.setAccessibleName(self.tr("Title of the sheet"))
        self._line.hide()
        self._line.editingFinished.connect(self._renamed)
        self.currentChanged.connect(self._turned)
        self.tabMoved.connect(self._moved)
        session.plant_changed.connect(self.refresh)
        session.sheet_changed.connect(self.refresh)
        self.refresh()

    def refresh(self, *_: object) -> None:
        """Show the sheets as they are."""
        sheets = self._session.plant.sheets
        wanted = [(sheet.id, sheet.title.replace("&", "&&")) for sheet in sheets]
        self._filling = True
        if wanted != [(self.tabData(i), self.tabText(i)) for i in range(self.count())]:
            while self.count() > len(wanted):
                self.removeTab(self.count() - 1)
            while self.count() < len(wanted):
                self.addTab("")
            for i, (sheet_id, title) in enumerate(wanted):
                self.setTabText(i, title)
                self.setTabData(i, sheet_id)
        self.setCurrentIndex([sheet.id for sheet in sheets].index(self._session.sheet_id))
        self._filling = False
        self.setVisible(len(sheets) > 1 or bool(self._renaming))

    def rename_current(self) -> None:
        """Put a line over the tab to type its title."""
        self._renaming = self._session.sheet_id
        self.setVisible(True)
        index = self.currentIndex()
        self._line.setText(self.tabText(index).replace("&&", "&"))
        self._line.setGeometry(self.tabRect(index).adjusted(0, 1, 60, -1))
        self._line.selectAll()
        self._line.show()
        self._line.setFocus()

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        """Rename."""
        if self.tabAt(event.position().toPoint()) == self.currentIndex():
            self.rename_current()

    def give_up(self) -> None:
        """No other title."""
        self._renaming = ""
        self._line.hide()
        self.refresh()

    def _renamed(self) -> None:
        sheet_id, title = self._renaming, self._line.text()
        if not sheet_id:
            return
        self.give_up()
        try:
            self._session.apply(rename_sheet(self._session.plant, sheet_id, title))
        except OneLineFaultError as error:
            self._session.said.emit(str(error))

    def _turned(self, index: int) -> None:
        if not self._filling and index >= 0:
            self._session.show_sheet(str(self.tabData(index)))

    def _moved(self, old: int, new: int) -> None:
        if not self._filling:
            self._session.apply(move_sheet(self._session.plant, str(self.tabData(new)), new))


class _TitleLine(QLineEdit):
    """A line over a tab; Escape gives up."""

    def __init__(self, tabs: SheetTabs) -> None:
        super().__init__(tabs)
        self._tabs = tabs

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Escape:
            self._tabs.give_up()
        else:
            super().keyPressEvent(event)
