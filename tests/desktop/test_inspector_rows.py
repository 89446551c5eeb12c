"""The rows of the inspector by themselves: entries, ticks, basis dots."""

import pytest
from PySide6.QtCore import QEvent, Qt
from PySide6.QtGui import QKeyEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QMenu
from pytestqt.qtbot import QtBot

from onelinefault.desktop.inspector_rows import MARKS, ChoiceRow, EntryLine, FlagRow, LineRow, Row, row_widget
from onelinefault.desktop.inspector_state import RowState
from onelinefault.drawing.symbols_marks import basis_dot
from onelinefault.model.fields import Basis

LINE = RowState("rating", "impedance", "Impedance", "per cent", "10 %", basis=Basis.LETTER, typed=True, help="Of it.")
CHOICE = RowState("rating", "core", "Core", "choice", "", "three-limb", choices=("three-limb", "five-limb"))
FLAG = RowState("part", "in_service", "In service", "flag", "yes")


def shown(qtbot: QtBot, state: RowState) -> tuple[Row, list[tuple[str, bool]]]:
    row = row_widget(state)
    qtbot.addWidget(row)
    row.show_state(state)
    row.resize(300, 30)
    row.show()
    qtbot.waitExposed(row)
    said: list[tuple[str, bool]] = []
    row.entered.connect(lambda _row, text, left: said.append((text, left)))
    return row, said


def test_each_kind_of_row_has_its_widget(qtbot: QtBot) -> None:
    assert isinstance(shown(qtbot, LINE)[0], LineRow)
    assert isinstance(shown(qtbot, CHOICE)[0], ChoiceRow)
    assert isinstance(shown(qtbot, FLAG)[0], FlagRow)


def test_enter_takes_the_text_and_leaving_takes_it_too(qtbot: QtBot) -> None:
    row, said = shown(qtbot, LINE)
    assert isinstance(row, LineRow)
    row.line.selectAll()
    QTest.keyClicks(row.line, "12 %")
    QTest.keyClick(row.line, Qt.Key.Key_Return)
    assert said == [("12 %", False)]
    QTest.keyClicks(row.line, "13 %")
    row.take_pending()
    assert said[-1] == ("13 %", True)


def test_escape_gives_back_what_was_there(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, LINE)
    assert isinstance(row, LineRow)
    QTest.keyClicks(row.line, "99")
    QTest.keyClick(row.line, Qt.Key.Key_Escape)
    assert row.line.text() == "10 %"
    assert not row.line.isModified()


def override(line: EntryLine, key: Qt.Key, modifier: Qt.KeyboardModifier) -> bool:
    event = QKeyEvent(QEvent.Type.ShortcutOverride, key, modifier)
    event.ignore()
    line.event(event)
    return event.isAccepted()


def test_undo_is_the_lines_own_only_while_it_has_something_to_undo(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, LINE)
    assert isinstance(row, LineRow)
    control = Qt.KeyboardModifier.ControlModifier
    assert not override(row.line, Qt.Key.Key_Z, control)
    QTest.keyClicks(row.line, "1")
    assert override(row.line, Qt.Key.Key_Z, control)
    assert override(row.line, Qt.Key.Key_Escape, Qt.KeyboardModifier.NoModifier)
    assert override(row.line, Qt.Key.Key_R, Qt.KeyboardModifier.NoModifier)  # a letter is typed, not a command


def test_a_refused_entry_is_told_under_the_row_and_named_aloud(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, LINE)
    row.say("Impedance: ten: expected a number")
    assert row.trouble.isVisible() and "expected" in row.trouble.text()
    assert row.editor.property("fault") is True
    row.show_state(RowState("rating", "impedance", "Impedance", "per cent", "11 %", missing=False))
    assert not row.trouble.isVisible()
    assert row.editor.property("fault") is False


def test_names_tell_what_is_mixed_or_required(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, LINE)
    assert row.editor.accessibleName() == "Impedance"
    assert row.editor.toolTip() == "Of it."
    row.show_state(RowState("rating", "impedance", "Impedance", placeholder="required", missing=True))
    assert row.editor.accessibleName() == "Impedance, required"
    row.show_state(RowState("rating", "impedance", "Impedance", placeholder="mixed", mixed=True))
    assert row.editor.accessibleName() == "Impedance, mixed"
    assert isinstance(row, LineRow) and row.line.placeholderText() == "mixed"


def test_a_choice_can_be_picked_or_typed_or_left_to_its_default(qtbot: QtBot) -> None:
    row, said = shown(qtbot, CHOICE)
    assert isinstance(row, ChoiceRow)
    assert (row.line.text(), row.line.placeholderText()) == ("", "three-limb")
    row.combo.setCurrentIndex(1)
    row.combo.textActivated.emit("five-limb")
    assert said == [("five-limb", False)]
    row.line.selectAll()
    QTest.keyClicks(row.line, "three-limb")
    QTest.keyClick(row.line, Qt.Key.Key_Return)
    assert said[-1] == ("three-limb", False)


def test_ticks(qtbot: QtBot) -> None:
    row, said = shown(qtbot, FLAG)
    assert isinstance(row, FlagRow)
    assert row.tick.isChecked() and row.tick.text() == "yes"
    row.tick.click()
    assert said == [("no", False)]
    row.show_state(RowState("part", "in_service", "In service", "flag", "", mixed=True))
    assert row.tick.checkState() == Qt.CheckState.PartiallyChecked
    row.tick.click()
    assert said[-1] == ("yes", False)


def test_the_basis_menu_offers_all_words_and_says_which_was_picked(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, LINE)
    picked: list[str] = []
    row.marked.connect(lambda _row, word: picked.append(word))
    row.dot.offer()
    menu = row.dot.findChildren(QMenu)[0]
    assert [action.text() for action in menu.actions()] == [basis.value for basis in Basis]
    assert [action.text() for action in menu.actions() if action.isChecked()] == ["letter"]
    menu.actions()[-1].trigger()
    assert picked == ["guessed"]
    menu.close()


def test_only_a_typed_value_can_be_marked(qtbot: QtBot) -> None:
    row, _ = shown(qtbot, CHOICE)
    assert not row.dot.isEnabled()
    assert "not given" in row.dot.accessibleName()


@pytest.mark.parametrize("basis", list(Basis))
def test_every_basis_has_a_mark(basis: Basis) -> None:
    assert basis_dot(MARKS[basis])


def test_the_four_marks_differ() -> None:
    assert len({basis_dot(mark) for mark in set(MARKS.values())}) == 4
