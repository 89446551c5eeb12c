"""Submenus whose contents change: recent files, sheets to move parts to, panels."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

from PySide6.QtCore import QObject
from PySide6.QtGui import QAction
from PySide6.QtWidgets import QMenu

if TYPE_CHECKING:
    from onelinefault.desktop.commands_parts import PartCommands
    from onelinefault.desktop.files import Files
    from onelinefault.desktop.panels import Panels
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.settings import Settings


class Submenus(QObject):
    """Fills each submenu when it is about to be shown."""

    def __init__(
        self,
        session: Session,
        settings: Settings,
        files: Files,
        parts: PartCommands,
        panels: Panels,
        menus: Mapping[str, QMenu],
    ) -> None:
        super().__init__(files)
        self._session, self._settings, self._menus = session, settings, menus
        menus[">recent"].aboutToShow.connect(self.fill_recent)
        menus[">recent"].triggered.connect(files.open_recent)
        menus[">to_sheet"].aboutToShow.connect(self.fill_sheets)
        menus[">to_sheet"].triggered.connect(parts.to_sheet)
        for dock in panels.docks.values():
            action = dock.toggleViewAction()
            action.setStatusTip(self.tr("Show or hide this panel"))
            menus[">panels"].addAction(action)

    def fill_recent(self) -> None:
        """The files opened or saved last."""
        menu = self._menus[">recent"]
        menu.clear()
        for number, path in enumerate(self._settings.recent, 1):
            action = QAction(f"&{number % 10} {path.name}", menu)
            action.setData(str(path))
            action.setStatusTip(str(path))
            menu.addAction(action)
        self._say_nothing(menu, self.tr("No file yet"))

    def fill_sheets(self) -> None:
        """The other sheets."""
        menu = self._menus[">to_sheet"]
        menu.clear()
        for sheet in self._session.plant.sheets:
            if sheet.id != self._session.sheet_id:
                action = QAction(sheet.title.replace("&", "&&"), menu)
                action.setData(sheet.id)
                menu.addAction(action)
        self._say_nothing(menu, self.tr("There is only one sheet"))

    def _say_nothing(self, menu: QMenu, words: str) -> None:
        if menu.isEmpty():
            menu.addAction(words).setEnabled(False)
