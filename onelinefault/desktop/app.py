"""Where the program is put together: application, style, session, solver, window."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QCoreApplication, QStandardPaths, QTimer
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QApplication

from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.new_plant import new_plant
from onelinefault.desktop.session import Session
from onelinefault.desktop.settings import Settings
from onelinefault.desktop.solver import Solver
from onelinefault.desktop.style import Style

if TYPE_CHECKING:
    from collections.abc import Sequence

_WARM_UP_MS: Final = 200  # the engine is loaded after the first paint, so that the window stands before it


def make_application(arguments: Sequence[str] = ()) -> QApplication:
    """The application in its dress; the one that runs already, if any."""
    running = QCoreApplication.instance()
    if isinstance(running, QApplication):
        return running
    QCoreApplication.setOrganizationName("OneLineFault")
    QCoreApplication.setApplicationName("OneLineFault")
    QGuiApplication.setDesktopFileName("onelinefault")
    app = QApplication([sys.argv[0] if sys.argv else "onelinefault", *arguments])
    Style(app)
    return app


def state_folder() -> Path:
    """Where crash journals stand: a folder of the user's own."""
    place = QStandardPaths.writableLocation(QStandardPaths.StandardLocation.AppLocalDataLocation)
    return Path(place or Path.home() / ".onelinefault") / "journals"


def make_window(settings: Settings | None = None, folder: Path | None = None) -> MainWindow:
    """A window with a new plant. An application must exist."""
    kept = settings or Settings()
    session = Session(new_plant(kept.units))
    return MainWindow(session, Solver(session), kept, folder or state_folder())


def run(path: str | None = None) -> int:
    """Open the window, with a plant file if one is named; gives the exit code."""
    app = make_application()
    window = make_window()
    window.show()
    if path:
        window.files.open_path(Path(path))
    QTimer.singleShot(_WARM_UP_MS, window.solver.refresh)
    QTimer.singleShot(_WARM_UP_MS, window.files.offer_left_over)
    return app.exec()
