"""A few letters and Enter, and a part hangs at the pointer."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.type_ahead import TypeAhead


@pytest.fixture
def popup(qtbot: QtBot) -> Iterator[tuple[TypeAhead, list[str]]]:
    below = QWidget()
    qtbot.addWidget(below)
    below.resize(600, 400)
    below.show()
    qtbot.waitExposed(below)
    popup = TypeAhead(below)
    wanted: list[str] = []
    popup.wanted.connect(lambda offer: wanted.append(offer.kind))
    yield popup, wanted


def test_tr_and_enter_is_a_transformer(popup: tuple[TypeAhead, list[str]]) -> None:
    line, wanted = popup
    line.start(QPoint(100, 100))
    QTest.keyClicks(line.line, "tr")
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    assert wanted == ["transformer"]
    assert not line.isVisible()


def test_up_and_down_go_through_the_list(popup: tuple[TypeAhead, list[str]]) -> None:
    line, wanted = popup
    line.start(QPoint(100, 100))
    QTest.keyClicks(line.line, "tr")
    QTest.keyClick(line.line, Qt.Key.Key_Down)
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    line.start(QPoint(100, 100))
    QTest.keyClicks(line.line, "tr")
    QTest.keyClick(line.line, Qt.Key.Key_Up)
    last = line.list.currentRow()
    assert last == line.list.count() - 1
    line.list.itemClicked.emit(line.list.item(last))
    assert wanted[0] == "transformer3" and len(wanted) == 2


def test_escape_places_nothing(popup: tuple[TypeAhead, list[str]]) -> None:
    line, wanted = popup
    line.start(QPoint(10, 10))
    QTest.keyClick(line.line, Qt.Key.Key_Escape)
    assert wanted == [] and not line.isVisible()
    line.start(QPoint(10, 10))
    QTest.keyClicks(line.line, "qqq")
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    assert wanted == []


def test_it_stays_inside_the_sheet(popup: tuple[TypeAhead, list[str]]) -> None:
    line, _ = popup
    for corner in (QPoint(595, 395), QPoint(-20, -20), QPoint(0, 395)):
        line.start(corner)
        assert line.parentWidget().rect().contains(line.geometry())
