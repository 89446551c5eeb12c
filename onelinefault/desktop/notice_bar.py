"""A notice over the sheet with a few answers to it. It waits; it never stands in the way."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QPushButton


class NoticeBar(QFrame):
    """answered: (key of the button)."""

    answered = Signal(str)

    def __init__(self) -> None:
        super().__init__()
        self.setProperty("part", "notice")
        self.words = QLabel()
        self.words.setTextFormat(Qt.TextFormat.PlainText)
        self.words.setWordWrap(True)
        self.buttons: dict[str, QPushButton] = {}
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(14, 6, 10, 6)
        self._row.addWidget(self.words, 1)
        self.hide()

    def ask(self, words: str, answers: Sequence[tuple[str, str]]) -> None:
        """Show a notice. answers: (key, words on the button)."""
        for button in self.buttons.values():
            self._row.removeWidget(button)
            button.deleteLater()
        self.buttons = {}
        self.words.setText(words)
        self.setAccessibleName(words)
        for key, label in answers:
            button = QPushButton(label)
            button.setObjectName(key)
            button.clicked.connect(self._answer)
            self._row.addWidget(button)
            self.buttons[key] = button
        self.show()

    def _answer(self) -> None:
        self.hide()
        self.answered.emit(self.sender().objectName())
