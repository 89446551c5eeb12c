"""The window: it puts the panels round the sheet and the commands into menus, and does nothing itself."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QPoint, QSize, Qt, QTimer
from PySide6.QtGui import QCloseEvent, QKeyEvent
from PySide6.QtWidgets import QMainWindow, QToolBar, QVBoxLayout, QWidget

from onelinefault.desktop.action_states import ActionStates
from onelinefault.desktop.actions import fill_menus, make_actions
from onelinefault.desktop.canvas import Canvas
from onelinefault.desktop.commands_edit import EditCommands
from onelinefault.desktop.commands_fault import FaultCommands
from onelinefault.desktop.commands_parts import PartCommands
from onelinefault.desktop.commands_sheets import SheetCommands
from onelinefault.desktop.context_menu import context_menu
from onelinefault.desktop.files import Files
from onelinefault.desktop.find_bar import FindBar
from onelinefault.desktop.notice_bar import NoticeBar
from onelinefault.desktop.panels import Panels
from onelinefault.desktop.printing import Printing
from onelinefault.desktop.settings import METRIC, US
from onelinefault.desktop.sheet_tabs import SheetTabs
from onelinefault.desktop.status_line import StatusLine
from onelinefault.desktop.submenus import Submenus
from onelinefault.desktop.top_line import TopLine
from onelinefault.desktop.type_ahead import TypeAhead

if TYPE_CHECKING:
    from onelinefault.desktop.catalogue import Offer
    from onelinefault.desktop.hit import Hit
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.settings import Settings
    from onelinefault.desktop.solver import Solver

_ARROWS: Final = {
    Qt.Key.Key_Left: (-1, 0), Qt.Key.Key_Right: (1, 0), Qt.Key.Key_Up: (0, -1), Qt.Key.Key_Down: (0, 1),
}  # fmt: skip
_FAR = 5


class MainWindow(QMainWindow):
    """One window, one plant."""

    def __init__(self, session: Session, solver: Solver, settings: Settings, state_folder: Path) -> None:
        super().__init__()
        self.session, self.solver, self.settings = session, solver, settings
        self.canvas = Canvas(session, solver)
        self.sheet_tabs, self.find_bar, self.notice = SheetTabs(session), FindBar(session), NoticeBar()
        self.type_ahead = TypeAhead(self.canvas)
        self.panels = Panels(self, session, solver)
        pending = self.panels.inspector.take_pending
        self.files = Files(session, settings, self, self.notice, state_folder, pending)
        self.printing = Printing(session, solver, settings, self)
        self._edit_commands = EditCommands(session, self.canvas)
        doers = (
            self._edit_commands, PartCommands(session, self.canvas), FaultCommands(session, self.canvas),
            SheetCommands(session, self.sheet_tabs), self.files, self.printing, self.panels, self.canvas, self,
        )  # fmt: skip
        self._doers = doers
        self.actions_by_key = make_actions(self, doers)
        self._build()
        self._connect()
        self.panels.restore(*settings.layout(), settings.drawer_open)
        self.show_title()
        self.canvas.view.setFocus()

    def _build(self) -> None:
        actions = self.actions_by_key
        self.top_line = TopLine(self.session, actions["undo"], actions["redo"], actions["print_sheets"])
        bar = QToolBar(self.tr("Top line"))
        bar.setObjectName("top line")
        bar.setMovable(False)
        bar.toggleViewAction().setEnabled(False)
        bar.addWidget(self.top_line)
        self.addToolBar(bar)
        open_menus = fill_menus(self.menuBar(), actions)
        part_commands = next(doer for doer in self._doers if isinstance(doer, PartCommands))
        self.submenus = Submenus(self.session, self.settings, self.files, part_commands, self.panels, open_menus)
        self.states = ActionStates(self.session, actions, self)
        actions["units_us" if self.settings.units == US else "units_metric"].setChecked(True)
        self.setStatusBar(StatusLine(self.session, self.solver))
        self.setCentralWidget(self._middle())
        self.setMinimumSize(QSize(720, 480))
        self.resize(1440, 900)

    def _middle(self) -> QWidget:
        middle = QWidget()
        column = QVBoxLayout(middle)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        for widget in (self.notice, self.find_bar, self.canvas, self.sheet_tabs):
            column.addWidget(widget)
        column.setStretchFactor(self.canvas, 1)
        return middle

    def _connect(self) -> None:
        session = self.session
        session.file_changed.connect(self.show_title)
        session.plant_changed.connect(self.show_title)
        self.panels.shelf.wanted.connect(self.place_offer)
        self.type_ahead.wanted.connect(self.place_offer)
        self.type_ahead.closed.connect(self.canvas.view.setFocus)
        self.find_bar.found.connect(self.show_part)
        self.find_bar.closed.connect(self.canvas.view.setFocus)
        self.panels.drawer.picked.connect(self.show_parts)
        self.canvas.menu_wanted.connect(self.show_menu)

    # commands of the window itself

    def close_window(self) -> None:
        """Close; the question about unsaved work comes first."""
        self.close()

    def find_part(self) -> None:
        """Open the find line."""
        self.find_bar.start()

    def place_part(self) -> None:
        """Open the type-ahead at the pointer, or in the middle of the sheet."""
        view = self.canvas.view
        pointer = self.canvas.mapFromGlobal(self.cursor().pos())
        self.type_ahead.start(pointer if view.underMouse() else self.canvas.rect().center())

    def units_metric(self) -> None:
        """New plants: 50 Hz, ISO paper."""
        self.settings.units = METRIC

    def units_us(self) -> None:
        """New plants: 60 Hz, ANSI paper."""
        self.settings.units = US

    def show_keys(self) -> None:
        """All keys and gestures."""
        from onelinefault.desktop.about import Keys  # noqa: PLC0415 - not needed at the start

        self._help = Keys(self)
        self._help.open()

    def show_about(self) -> None:
        """Version, caution, licence."""
        from onelinefault.desktop.about import About  # noqa: PLC0415 - not needed at the start

        self._about = About(self)
        self._about.open()

    # what panels and the sheet ask for

    def place_offer(self, offer: Offer) -> None:
        """Let a part hang at the pointer."""
        self.canvas.start_placing(offer.kind, dict(offer.presets))

    def show_part(self, part_id: str) -> None:
        """Select a part and bring it into view, turning to its sheet."""
        self.show_parts((part_id,))

    def show_parts(self, part_ids: tuple[str, ...]) -> None:
        """Select parts and bring the first into view."""
        known = [key for key in part_ids if key in self.session.plant.parts]
        if known:
            self.session.select(frozenset(known))
            self.canvas.centre_on(known[0])

    def show_menu(self, hit: Hit, at: QPoint) -> None:
        """What a right click offers."""
        menu = context_menu(hit, self.session.plant, self.actions_by_key, self)
        menu.aboutToHide.connect(menu.deleteLater)
        menu.popup(at)

    def show_title(self, *_: object) -> None:
        """The title of the window: plant, file, and a star for unsaved changes."""
        name = self.session.plant.document.name or self.tr("New plant")
        file = f" – {self.session.path.name}" if self.session.path else ""
        self.setWindowTitle(f"{name}{file}[*] – OneLineFault")
        self.setWindowModified(self.session.edited)

    # the window's own events

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Keys that nobody below has taken: Escape, and on the sheet arrows and Enter."""
        key, on_sheet = Qt.Key(event.key()), self.canvas.view.hasFocus()
        if key == Qt.Key.Key_Escape and not on_sheet:
            self.canvas.view.setFocus()
        elif key == Qt.Key.Key_Escape:
            self.canvas.escape()
        elif key in _ARROWS and on_sheet:
            steps = _FAR if event.modifiers() & Qt.KeyboardModifier.ShiftModifier else 1
            dx, dy = _ARROWS[key]
            self._edit_commands.nudge(dx * steps, dy * steps)
        elif key in (Qt.Key.Key_Return, Qt.Key.Key_Enter) and on_sheet:
            self.panels.inspector.take_keyboard()
        else:
            super().keyPressEvent(event)

    def closeEvent(self, event: QCloseEvent) -> None:
        """Ask about unsaved work; then remember the layout and let go of file and thread."""
        if not self.files.may_close():
            event.ignore()
            return
        self.settings.keep_layout(self.saveGeometry(), self.panels.state())
        self.settings.drawer_open = self.panels.drawer.is_open
        self.solver.stop()
        self.files.release()
        event.accept()

    def showEvent(self, event: object) -> None:
        """The first time: show the whole sheet once everything has its place."""
        super().showEvent(event)  # type: ignore[arg-type]
        QTimer.singleShot(0, self.canvas.view.keep_fitted)
