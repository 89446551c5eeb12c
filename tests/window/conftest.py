"""The whole program in a real window, with settings and journals of its own."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import QSettings
from pytestqt.qtbot import QtBot

from onelinefault.desktop.app import make_window
from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.settings import Settings
from tests.window.hand import ScreenHand


@pytest.fixture
def window(qtbot: QtBot, tmp_path: Path) -> Iterator[MainWindow]:
    store = QSettings(str(tmp_path / "settings.ini"), QSettings.Format.IniFormat)
    made = make_window(Settings(store), tmp_path / "journals")
    made.move(0, 0)
    made.resize(1800, 1000)
    made.show()
    qtbot.waitExposed(made)
    made.activateWindow()
    qtbot.wait(300)
    yield made
    made.session.mark_saved(tmp_path / "done.plant.json")  # so that closing asks nothing
    made.close()


@pytest.fixture
def hand(qtbot: QtBot, window: MainWindow) -> ScreenHand:
    return ScreenHand(qtbot, window)
