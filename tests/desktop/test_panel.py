"""A panel's title line."""

from PySide6.QtWidgets import QLabel, QMainWindow, QToolButton, QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.panel import Panel, PanelTitle


def test_the_title_shows_words_and_closes_the_panel(qtbot: QtBot) -> None:
    window = QMainWindow()
    qtbot.addWidget(window)
    panel = Panel("inspector", "Inspector", QWidget())
    window.addDockWidget(window.dockWidgetArea(panel) or panel.allowedAreas().RightDockWidgetArea, panel)
    window.show()
    panel.show_words("Transformer T1", "33 / 11 kV")
    title = panel.titleBarWidget()
    assert isinstance(title, PanelTitle) and title.words == ("Transformer T1", "33 / 11 kV")
    (close,) = title.findChildren(QToolButton)
    assert close.accessibleName() == "Close Inspector"
    close.click()
    assert not panel.isVisible()


def test_a_panel_can_have_a_title_line_of_its_own(qtbot: QtBot) -> None:
    strip = QLabel("Buses")
    panel = Panel("drawer", "Drawer", QWidget(), strip)
    qtbot.addWidget(panel)
    assert panel.titleBarWidget() is strip
    panel.show_words("ignored")
    assert strip.text() == "Buses"
