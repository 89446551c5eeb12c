"""One choice out of a few."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.segments import Segments


def make(qtbot: QtBot) -> tuple[Segments, list[str]]:
    segments = Segments("Colour", [("r", "red", "Red"), ("g", "green", "Green"), ("b", "blue", "Blue")])
    qtbot.addWidget(segments)
    segments.show()
    qtbot.waitExposed(segments)
    chosen: list[str] = []
    segments.chosen.connect(chosen.append)
    return segments, chosen


def test_a_click_chooses_and_only_one_is_chosen(qtbot: QtBot) -> None:
    segments, chosen = make(qtbot)
    segments.show_choice("r")
    assert chosen == []  # showing is not choosing
    QTest.mouseClick(segments.buttons["b"], Qt.MouseButton.LeftButton)
    assert chosen == ["b"]
    assert [key for key, button in segments.buttons.items() if button.isChecked()] == ["b"]


def test_arrow_keys_go_round(qtbot: QtBot) -> None:
    segments, chosen = make(qtbot)
    segments.show_choice("b")
    segments.buttons["b"].setFocus()
    QTest.keyClick(segments.buttons["b"], Qt.Key.Key_Right)
    QTest.keyClick(segments.buttons["r"], Qt.Key.Key_Left)
    assert chosen == ["r", "b"]


def test_other_choices_and_shorter_words(qtbot: QtBot) -> None:
    segments, _ = make(qtbot)
    segments.set_choices([("a", "alpha", ""), ("z", "zeta", "")])
    assert list(segments.buttons) == ["a", "z"]
    wide = segments.sizeHint().width()
    segments.set_tight(True, {"a": "α", "z": "ζ"})
    assert segments.sizeHint().width() < wide
    assert segments.buttons["a"].accessibleName() == "Colour: alpha"
