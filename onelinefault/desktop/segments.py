"""A row of buttons of which one is chosen: one choice out of a few, all in sight."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QButtonGroup, QHBoxLayout, QToolButton, QWidget


class _Segment(QToolButton):
    """A button that leaves the arrow keys to the row it stands in."""

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() in (Qt.Key.Key_Left, Qt.Key.Key_Right):
            event.ignore()
        else:
            super().keyPressEvent(event)


class Segments(QWidget):
    """chosen: the key of the button a person pressed. Arrow keys move the choice."""

    chosen = Signal(str)

    def __init__(self, name: str, choices: Sequence[tuple[str, str, str]], parent: QWidget | None = None) -> None:
        """choices: (key, words on the button, tooltip)."""
        super().__init__(parent)
        self.setAccessibleName(name)
        self._name = name
        self._group = QButtonGroup(self)
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(0, 0, 0, 0)
        self._row.setSpacing(6)
        self.buttons: dict[str, QToolButton] = {}
        self._group.buttonClicked.connect(self._pressed)
        self.set_choices(choices)

    def set_choices(self, choices: Sequence[tuple[str, str, str]]) -> None:
        """Offer other choices."""
        for button in self.buttons.values():
            self._group.removeButton(button)
            self._row.removeWidget(button)
            button.deleteLater()
        self.buttons = {}
        for key, words, tip in choices:
            button = _Segment()
            button.setText(words)
            button.setCheckable(True)
            button.setProperty("part", "segment")
            button.setProperty("key", key)
            button.setToolTip(tip)
            button.setStatusTip(tip)
            button.setAccessibleName(f"{self._name}: {words}")
            button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
            self._group.addButton(button)
            self._row.addWidget(button)
            button.show()  # at once, so that size hints count it
            self.buttons[key] = button

    def show_choice(self, key: str) -> None:
        """Mark a button as chosen, without a signal."""
        if key in self.buttons:
            self.buttons[key].setChecked(True)

    def set_tight(self, tight: bool, words: dict[str, str] | None = None) -> None:
        """Stand closer together, with shorter words where given."""
        self._row.setSpacing(2 if tight else 6)
        for key, button in self.buttons.items():
            if words is not None and key in words:
                button.setText(words[key])
            if bool(button.property("tight")) != tight:
                button.setProperty("tight", tight)
                button.style().unpolish(button)
                button.style().polish(button)
        self._row.invalidate()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Left and right go to the neighbour and choose it."""
        step = {Qt.Key.Key_Left: -1, Qt.Key.Key_Right: 1}.get(Qt.Key(event.key()))
        keys = list(self.buttons)
        now = next((place for place, key in enumerate(keys) if self.buttons[key].isChecked()), -1)
        if step is None or not keys:
            super().keyPressEvent(event)
            return
        button = self.buttons[keys[(now + step) % len(keys)]]
        button.setFocus(Qt.FocusReason.OtherFocusReason)
        button.click()

    def _pressed(self, button: QToolButton) -> None:
        self.chosen.emit(str(button.property("key")))
