"""A notice waits for an answer and then goes."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.notice_bar import NoticeBar


def test_the_answer_is_the_key_of_its_button(qtbot: QtBot) -> None:
    bar = NoticeBar()
    qtbot.addWidget(bar)
    answers: list[str] = []
    bar.answered.connect(answers.append)
    assert not bar.isVisible()
    bar.ask("Work was found.", [("yes", "Take it"), ("no", "Leave it")])
    assert bar.isVisible() and bar.accessibleName() == "Work was found."
    QTest.mouseClick(bar.buttons["no"], Qt.MouseButton.LeftButton)
    assert answers == ["no"] and not bar.isVisible()
    bar.ask("Again?", [("once", "Once more")])
    assert list(bar.buttons) == ["once"]
