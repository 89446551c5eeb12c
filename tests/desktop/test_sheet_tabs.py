"""Tabs of sheets: shown when there are several, turned, moved and renamed in place."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QLineEdit, QVBoxLayout, QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.session import Session
from onelinefault.desktop.sheet_tabs import SheetTabs
from onelinefault.model.editing import add_sheet, remove_sheet, rename_sheet
from tests.desktop.windows import pump_session


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[tuple[Session, SheetTabs]]:
    session, _ = pump_session()
    holder = QWidget()
    tabs = SheetTabs(session)
    QVBoxLayout(holder).addWidget(tabs)
    qtbot.addWidget(holder)
    holder.resize(600, 60)
    holder.show()
    qtbot.waitExposed(holder)
    yield session, tabs


def line(tabs: SheetTabs) -> QLineEdit:
    return tabs.findChildren(QLineEdit)[0]


def test_they_appear_with_the_second_sheet(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    assert not tabs.isVisible()
    session.apply(add_sheet(session.plant, "Boards"))
    assert tabs.isVisible()
    assert [tabs.tabText(i) for i in range(tabs.count())] == [s.title for s in session.plant.sheets]
    session.apply(remove_sheet(session.plant, session.plant.sheets[1].id))
    assert not tabs.isVisible()


def test_a_click_turns_and_turning_chooses_the_tab(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    session.apply(add_sheet(session.plant, "Boards"))
    QTest.mouseClick(tabs, Qt.MouseButton.LeftButton, pos=tabs.tabRect(1).center())
    assert session.sheet_id == session.plant.sheets[1].id
    session.show_sheet(session.plant.sheets[0].id)
    assert tabs.currentIndex() == 0


def test_moving_a_tab_moves_the_sheet(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    session.apply(add_sheet(session.plant, "Boards"))
    first, second = (sheet.id for sheet in session.plant.sheets)
    tabs.moveTab(0, 1)
    assert [sheet.id for sheet in session.plant.sheets] == [second, first]
    assert [tabs.tabData(i) for i in range(2)] == [second, first]


def test_a_double_click_renames_and_escape_does_not(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    session.apply(add_sheet(session.plant, "Boards"))
    QTest.mouseDClick(tabs, Qt.MouseButton.LeftButton, pos=tabs.tabRect(0).center())
    assert line(tabs).isVisible()
    line(tabs).selectAll()
    QTest.keyClicks(line(tabs), "Intake")
    QTest.keyClick(line(tabs), Qt.Key.Key_Return)
    assert session.plant.sheets[0].title == "Intake"
    tabs.rename_current()
    QTest.keyClicks(line(tabs), "nonsense")
    QTest.keyClick(line(tabs), Qt.Key.Key_Escape)
    assert not line(tabs).isVisible()
    assert session.plant.sheets[0].title == "Intake"


def test_a_refused_title_is_said(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    said: list[str] = []
    session.said.connect(said.append)
    before = session.plant
    tabs.rename_current()
    line(tabs).clear()
    QTest.keyClick(line(tabs), Qt.Key.Key_Return)
    assert session.plant is before
    assert "title" in said[-1]
    assert not tabs.isVisible()  # the only sheet needs no tab


def test_titles_follow_the_plant(bench: tuple[Session, SheetTabs]) -> None:
    session, tabs = bench
    session.apply(add_sheet(session.plant, "Boards"))
    session.apply(rename_sheet(session.plant, session.plant.sheets[1].id, "Drives"))
    assert tabs.tabText(1) == "Drives"
    session.undo()
    assert tabs.tabText(1) == "Boards"
    session.apply(rename_sheet(session.plant, session.plant.sheets[1].id, "Fans & pumps"))
    assert tabs.tabText(1) == "Fans && pumps"  # one & would underline a letter
    session.show_sheet(session.plant.sheets[1].id)
    tabs.rename_current()
    assert line(tabs).text() == "Fans & pumps"
