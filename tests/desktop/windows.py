"""Sessions, windows and small helpers for the tests of the desktop."""

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from PySide6.QtCore import QSettings
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.session import Session
from onelinefault.desktop.settings import Settings
from onelinefault.desktop.solver import Solver
from onelinefault.desktop.style import Style
from onelinefault.drawing.painter import load_fonts
from onelinefault.model.plant import Plant
from tests.drawing.plants import pump_house


def settings_in(folder: Path) -> Settings:
    """Settings kept in a folder of the test's own."""
    return Settings(QSettings(str(folder / "settings.ini"), QSettings.Format.IniFormat))


def pump_session() -> tuple[Session, dict[str, str]]:
    """A session on the small pump house, and its ids by name."""
    plant, ids = pump_house()
    return Session(plant), ids


@contextmanager
def solver_for(session: Session) -> Iterator[Solver]:
    """A running solver that is stopped afterwards."""
    solver = Solver(session)
    try:
        yield solver
    finally:
        solver.stop()


def wait_solved(qtbot: QtBot, solver: Solver) -> None:
    """Wait for an answer to the present state."""
    qtbot.waitUntil(lambda: solver.answer is not None and not solver.stale and not solver.working, timeout=20000)


@contextmanager
def open_window(qtbot: QtBot, folder: Path, plant: Plant | None = None) -> Iterator[MainWindow]:
    """A shown window on the pump house (or another plant) that is closed without questions afterwards."""
    load_fonts()
    session = Session(pump_house()[0] if plant is None else plant)
    window = MainWindow(session, Solver(session), settings_in(folder), folder / "journals")
    qtbot.addWidget(window)
    window.resize(1400, 900)
    window.show()
    qtbot.waitExposed(window)
    try:
        yield window
    finally:
        window.solver.stop()
        window.files.release()
        session.saved_plant = session.plant
        window.close()


@contextmanager
def dressed(app: QApplication) -> Iterator[Style]:
    """The application in its own style, undressed again afterwards."""
    font, palette = app.font(), app.palette()
    style = Style(app)
    try:
        yield style
    finally:
        app.setStyleSheet("")
        app.setFont(font)
        app.setPalette(palette)
        style.deleteLater()
