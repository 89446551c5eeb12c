"""Tabs keep their width when they are chosen, and their bold words fit."""

from PySide6.QtGui import QFont, QFontMetrics
from pytestqt.qtbot import QtBot

from onelinefault.desktop.tabs import Tabs


def test_bold_words_fit_and_nothing_moves(qtbot: QtBot) -> None:
    tabs = Tabs()
    qtbot.addWidget(tabs)
    for words in ("Buses 7", "Findings 138"):
        tabs.addTab(words)
    tabs.resize(tabs.sizeHint())
    tabs.show()
    qtbot.waitExposed(tabs)
    before = [tabs.tabRect(i) for i in range(2)]
    tabs.setCurrentIndex(1)
    assert [tabs.tabRect(i) for i in range(2)] == before
    bold = QFont(tabs.font())
    bold.setBold(True)
    for i in range(2):
        assert tabs.tabRect(i).width() >= QFontMetrics(bold).horizontalAdvance(tabs.tabText(i))
