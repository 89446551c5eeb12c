"""The panels round the sheet: where they stand at first, how they are moved, closed and restored."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QByteArray, QObject, Qt
from PySide6.QtWidgets import QApplication, QDockWidget, QMainWindow, QWidget

from onelinefault.desktop.drawer import Drawer
from onelinefault.desktop.inspector import Inspector
from onelinefault.desktop.panel import Panel
from onelinefault.desktop.settings import LAYOUT_VERSION
from onelinefault.desktop.shelf import WIDTH, Shelf
from onelinefault.desktop.style import widget_scale
from onelinefault.desktop.working_panel import WorkingPanel

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.solver import Solver

_INSPECTOR_WIDTH, _DRAWER_HEIGHT = 330, 215
_ANY_HEIGHT: Final = 16_777_215  # QWIDGETSIZE_MAX


class Panels(QObject):
    """Shelf, inspector, working and drawer as docks of a window."""

    def __init__(self, window: QMainWindow, session: Session, solver: Solver) -> None:
        super().__init__(window)
        self._window = window
        self.shelf = Shelf()
        self.inspector = Inspector(session)
        self.working = WorkingPanel(session, solver)
        self.drawer = Drawer(session, solver)
        self.docks = {
            "shelf": Panel("shelf", self.tr("Parts"), self.shelf),
            "inspector": Panel("inspector", self.tr("Inspector"), self.inspector),
            "working": Panel("working", self.tr("Working"), self.working),
            "drawer": Panel("drawer", self.tr("Drawer"), self.drawer, self.drawer.strip),
        }
        self.inspector.titled.connect(self.docks["inspector"].show_words)
        self.working.titled.connect(self.docks["working"].show_words)
        self.drawer.opened.connect(self._fold_drawer)
        self.inspector.refresh()
        self.working.refresh()
        self._set_up()
        self._place()

    def _set_up(self) -> None:
        window, corner, area = self._window, Qt.Corner, Qt.DockWidgetArea
        window.setCorner(corner.BottomLeftCorner, area.LeftDockWidgetArea)
        window.setCorner(corner.BottomRightCorner, area.RightDockWidgetArea)
        window.setDockOptions(QMainWindow.DockOption.AllowNestedDocks | QMainWindow.DockOption.AllowTabbedDocks)
        window.setContextMenuPolicy(Qt.ContextMenuPolicy.NoContextMenu)

    def _place(self) -> None:
        window, area = self._window, Qt.DockWidgetArea
        places = {
            "shelf": area.LeftDockWidgetArea, "inspector": area.RightDockWidgetArea,
            "working": area.RightDockWidgetArea, "drawer": area.BottomDockWidgetArea,
        }  # fmt: skip
        for key, dock in self.docks.items():
            if dock.isFloating():
                dock.setFloating(False)
            window.addDockWidget(places[key], dock)
            dock.show()
        window.splitDockWidget(self.docks["inspector"], self.docks["working"], Qt.Orientation.Vertical)
        self._set_sizes()
        self._fold_drawer(self.drawer.is_open)

    def _set_sizes(self) -> None:
        docks, window = self.docks, self._window
        scale = widget_scale(window)
        sideways = [docks["shelf"], docks["inspector"]]
        window.resizeDocks(sideways, [round(WIDTH * scale), round(_INSPECTOR_WIDTH * scale)], Qt.Orientation.Horizontal)
        window.resizeDocks([docks["inspector"], docks["working"]], [540, 420], Qt.Orientation.Vertical)

    def restore(self, geometry: QByteArray, state: QByteArray, drawer_open: bool) -> None:
        """Put the window and its panels where they were; empty values leave them where they are."""
        if not geometry.isEmpty():
            self._window.restoreGeometry(geometry)
        self.drawer.set_open(drawer_open)
        if not state.isEmpty():
            self._window.restoreState(state, LAYOUT_VERSION)
        self._fold_drawer(drawer_open)

    def state(self) -> QByteArray:
        """Where the panels are, to be remembered."""
        return self._window.saveState(LAYOUT_VERSION)

    # commands

    def restore_panels(self) -> None:
        """All panels where they were at first."""
        self._place()

    def next_panel(self) -> None:
        """Move the keyboard to the next panel: shelf, sheet, inspector, working, drawer."""
        middle = self._window.centralWidget()
        assert middle is not None
        docks = self.docks
        holders: list[QWidget] = [docks["shelf"], middle, docks["inspector"], docks["working"], docks["drawer"]]
        focused = QApplication.focusWidget()
        now = next((i for i, holder in enumerate(holders) if focused is not None and holder.isAncestorOf(focused)), 0)
        for step in range(1, len(holders) + 1):
            if _focus_in(holders[(now + step) % len(holders)]):
                return

    def open_drawer(self) -> None:
        """Show the tables."""
        self.docks["drawer"].show()
        self.drawer.set_open(True)

    def toggle_drawer(self) -> None:
        """Show or fold the tables; a drawer that was closed as a panel comes back."""
        if self.docks["drawer"].isHidden():
            self.open_drawer()
        else:
            self.drawer.toggle()

    def _fold_drawer(self, is_open: bool) -> None:
        dock: QDockWidget = self.docks["drawer"]
        strip = self.drawer.strip.sizeHint().height()
        dock.setMinimumHeight(strip + (90 if is_open else 0))
        dock.setMaximumHeight(_ANY_HEIGHT if is_open else strip)
        if is_open:
            dock.show()
            self._window.resizeDocks([dock], [_DRAWER_HEIGHT], Qt.Orientation.Vertical)


def _focus_in(holder: QWidget) -> bool:
    """Give the keyboard to the first thing in a panel that takes it; whether there was any."""
    for child in holder.findChildren(QWidget):
        takes = child.focusPolicy() & Qt.FocusPolicy.TabFocus and child.isEnabled()
        if takes and child.isVisible() and child.property("part") != "quiet":
            child.setFocus(Qt.FocusReason.TabFocusReason)
            return True
    return False
