"""The window as a whole: keys reach the right place, panels come back, everything has a name."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QAbstractButton, QLabel, QLineEdit, QMenu, QWidget
from pytestqt.qtbot import QtBot

from onelinefault.desktop.actions import BY_KEY, MENUS
from onelinefault.desktop.main_window import MainWindow
from onelinefault.desktop.modes import Placing
from onelinefault.desktop.settings import US
from onelinefault.model.editing import add_sheet
from onelinefault.model.fault import FaultKind
from tests.desktop.windows import open_window, wait_solved


@pytest.fixture
def window(qtbot: QtBot, tmp_path: Path) -> Iterator[MainWindow]:
    with open_window(qtbot, tmp_path) as window:
        yield window


def part(window: MainWindow, name: str) -> str:
    return window.session.plant.named(name)[0].id


def select(window: MainWindow, name: str) -> None:
    window.session.select(frozenset({part(window, name)}))


def test_from_a_click_to_figures_in_all_panels(window: MainWindow, qtbot: QtBot) -> None:
    window.canvas.fault_part(part(window, "Board A"))
    wait_solved(qtbot, window.solver)
    assert window.panels.working.lines
    assert window.panels.drawer.strip.tabs.tabText(0) == "Buses 2"
    assert "nodes" in window.statusBar().solved.text()  # type: ignore[attr-defined]
    assert window.canvas.scene.tag_items


def test_keys_do_commands(window: MainWindow) -> None:
    view = window.canvas.view
    select(window, "G1")
    QTest.keyClick(view, Qt.Key.Key_R)
    assert window.session.plant.parts[part(window, "G1")].turn == 1
    QTest.keyClick(view, Qt.Key.Key_4)
    assert window.session.choices.kind is FaultKind.LINE_TO_EARTH
    QTest.keyClick(view, Qt.Key.Key_Z, Qt.KeyboardModifier.ControlModifier)
    assert window.session.plant.parts[part(window, "G1")].turn == 0
    QTest.keyClick(view, Qt.Key.Key_Delete)
    assert window.session.plant.named("G1") == []


def test_letters_typed_into_a_row_are_no_commands(window: MainWindow) -> None:
    select(window, "G1")
    window.panels.inspector.refresh()
    line = window.panels.inspector.row("name").line  # type: ignore[attr-defined]
    before = window.session.plant
    line.setFocus()
    line.selectAll()
    QTest.keyClicks(line, "RM41/")
    assert line.text() == "RM41/"
    assert window.session.plant is before
    QTest.keyClick(line, Qt.Key.Key_Return)
    assert window.session.plant.named("RM41/")
    QGuiApplication.processEvents()
    QTest.keyClick(line, Qt.Key.Key_Z, Qt.KeyboardModifier.ControlModifier)
    assert window.session.plant is before  # undo reaches the plant when the line has nothing to undo


def test_arrows_nudge_and_escape_leaves(window: MainWindow) -> None:
    select(window, "G1")
    key = part(window, "G1")
    x = window.session.plant.parts[key].x
    window.activateWindow()
    window.canvas.view.setFocus()
    if window.canvas.view.hasFocus():  # the window system may keep the keyboard from a test
        QTest.keyClick(window.canvas.view, Qt.Key.Key_Right)
        QTest.keyClick(window.canvas.view, Qt.Key.Key_Right, Qt.KeyboardModifier.ShiftModifier)
        assert window.session.plant.parts[key].x == x + 6
    window.canvas.fault_part(part(window, "Board A"))
    QTest.keyClick(window.canvas.view, Qt.Key.Key_Escape)
    assert window.session.fault is None and window.session.selection
    QTest.keyClick(window.canvas.view, Qt.Key.Key_Escape)
    assert window.session.selection == frozenset()


def test_shelf_and_type_ahead_start_placing(window: MainWindow) -> None:
    QTest.keyClicks(window.panels.shelf.search, "cab")
    QTest.keyClick(window.panels.shelf.search, Qt.Key.Key_Return)
    assert isinstance(window.canvas.mode, Placing)
    window.canvas.end_mode()
    QTest.keyClick(window.canvas.view, Qt.Key.Key_A)
    assert window.type_ahead.isVisible()
    QTest.keyClicks(window.type_ahead.line, "fu")
    QTest.keyClick(window.type_ahead.line, Qt.Key.Key_Return)
    assert isinstance(window.canvas.mode, Placing)


def test_find_turns_to_the_sheet_of_the_part(window: MainWindow) -> None:
    session = window.session
    first = session.sheet_id
    session.apply(add_sheet(session.plant, "Empty"))
    session.show_sheet(session.plant.sheets[1].id)
    window.actions_by_key["find_part"].trigger()
    QTest.keyClicks(window.find_bar.line, "pumps")
    assert session.sheet_id == first
    assert session.selection == {part(window, "Pumps")}


def test_a_row_of_the_drawer_selects_and_centres_its_part(window: MainWindow, qtbot: QtBot) -> None:
    window.solver.refresh()
    wait_solved(qtbot, window.solver)
    window.panels.open_drawer()
    table = window.panels.drawer.buses
    table.selectRow(table.sorted.row_of(part(window, "Board A")))
    assert window.session.selection == {part(window, "Board A")}


def test_a_right_click_opens_a_menu_that_does_not_block(window: MainWindow) -> None:
    view = window.canvas.view
    key = part(window, "T1")
    place = view.mapFromScene(window.canvas.scene.part_items[key].boundingRect().center())
    QTest.mouseClick(view.viewport(), Qt.MouseButton.RightButton, Qt.KeyboardModifier.NoModifier, place)
    menus = [m for m in window.findChildren(QMenu) if m.isVisible()]
    assert len(menus) == 1
    menus[0].close()


def test_panels_can_be_closed_and_restored(window: MainWindow) -> None:
    for dock in window.panels.docks.values():
        dock.close()
    assert not any(dock.isVisible() for dock in window.panels.docks.values())
    window.actions_by_key["restore_panels"].trigger()
    assert all(dock.isVisible() for dock in window.panels.docks.values())
    window.panels.docks["inspector"].toggleViewAction().trigger()
    assert not window.panels.docks["inspector"].isVisible()


def test_the_layout_is_remembered(qtbot: QtBot, tmp_path: Path) -> None:
    with open_window(qtbot, tmp_path) as window:
        window.panels.docks["working"].close()
        window.actions_by_key["toggle_drawer"].trigger()
        assert window.panels.drawer.is_open
        window.close()
    with open_window(qtbot, tmp_path) as window:
        assert not window.panels.docks["working"].isVisible()
        assert window.panels.docks["inspector"].isVisible()
        assert window.panels.drawer.is_open and window.panels.drawer.isVisible()


def test_a_folded_drawer_is_one_line_high(window: MainWindow) -> None:
    dock = window.panels.docks["drawer"]
    QGuiApplication.processEvents()
    folded = dock.height()
    assert folded <= window.panels.drawer.strip.sizeHint().height() + 2
    window.panels.open_drawer()
    QGuiApplication.processEvents()
    assert dock.height() > folded + 80
    window.panels.toggle_drawer()
    QGuiApplication.processEvents()
    assert dock.height() == folded


def test_the_keyboard_goes_from_panel_to_panel(window: MainWindow) -> None:
    visited = []
    for _ in range(5):
        window.actions_by_key["next_panel"].trigger()
        focused = window.focusWidget()
        visited.append(next((k for k, d in window.panels.docks.items() if d.isAncestorOf(focused)), "sheet"))
    assert set(visited) == {"shelf", "inspector", "working", "drawer", "sheet"}


def test_submenus_are_filled_when_they_are_opened(window: MainWindow, tmp_path: Path) -> None:
    window.settings.add_recent(tmp_path / "mill.plant.json")
    window.submenus.fill_recent()
    window.submenus.fill_sheets()
    texts = {menu.title(): [a.text() for a in menu.actions()] for menu in window.findChildren(QMenu)}
    assert texts["Open re&cent"] == ["&1 mill.plant.json"]
    assert texts["To another &sheet"] == ["There is only one sheet"]
    assert len(texts["&Panels"]) == 4
    window.session.apply(add_sheet(window.session.plant, "Boards & drives"))
    window.submenus.fill_sheets()
    texts = {menu.title(): [a.text() for a in menu.actions()] for menu in window.findChildren(QMenu)}
    assert texts["To another &sheet"] == ["Boards && drives"]


def test_units_of_new_plants_are_chosen_in_the_menu(window: MainWindow) -> None:
    window.actions_by_key["units_us"].trigger()
    assert window.settings.units == US
    window.files.new_plant()
    assert window.session.plant.document.frequency_hz == 60
    window.actions_by_key["units_metric"].trigger()
    window.files.new_plant()
    assert window.session.plant.document.frequency_hz == 50


def test_help_opens_without_blocking(window: MainWindow) -> None:
    for key in ("show_about", "show_keys"):
        window.actions_by_key[key].trigger()
    shown = [d for d in window.findChildren(QWidget) if d.isWindow() and d.isVisible() and d is not window]
    assert {d.windowTitle() for d in shown} >= {"About OneLineFault", "Keys and gestures"}
    for dialog in shown:
        dialog.close()


def test_every_control_that_takes_the_keyboard_has_a_name(window: MainWindow) -> None:
    select(window, "T1")
    window.panels.inspector.refresh()
    window.panels.open_drawer()
    nameless = []
    for widget in window.findChildren(QWidget):
        if widget.focusPolicy() & Qt.FocusPolicy.TabFocus and widget.isVisible() and widget.focusProxy() is None:
            words = widget.text() if isinstance(widget, (QAbstractButton, QLabel)) else ""
            if not (widget.accessibleName() or words):
                nameless.append(widget)
    assert nameless == []


def test_every_action_tells_a_sentence(window: MainWindow) -> None:
    for title, keys in MENUS:
        for key in keys:
            if key in BY_KEY:
                assert window.actions_by_key[key].statusTip(), (title, key)


def test_the_sheet_keeps_most_of_a_small_screen(window: MainWindow) -> None:
    window.resize(1280, 800)
    QGuiApplication.processEvents()
    assert (window.width(), window.height()) == (1280, 800)
    assert window.canvas.width() >= 700 and window.canvas.height() >= 560
    lines = [w for w in window.findChildren(QLineEdit) if w.isVisible()]
    for line in lines:
        corner = line.mapTo(window, QPoint(line.width(), 0))
        assert corner.x() <= 1280
