"""A small line at the pointer: "tr" and Enter, and a transformer hangs there."""

from __future__ import annotations

from typing import Final

from PySide6.QtCore import QPoint, Qt, Signal
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QFrame, QLineEdit, QListWidget, QListWidgetItem, QVBoxLayout, QWidget

from onelinefault.desktop.catalogue import Offer, found

_MOST: Final = 7


class TypeAhead(QFrame):
    """wanted: (offer) is to be placed."""

    wanted = Signal(object)
    closed = Signal()

    def __init__(self, over: QWidget) -> None:
        super().__init__(over)
        self._over = over
        self._offers: list[Offer] = []
        self.setProperty("part", "popup")
        self.line = _Line(self)
        self.line.setPlaceholderText(self.tr("Part to place"))
        self.line.setAccessibleName(self.tr("Part to place"))
        self.list = QListWidget()
        self.list.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self.list.setAccessibleName(self.tr("Parts that fit"))
        self.list.setVerticalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        column = QVBoxLayout(self)
        column.setContentsMargins(6, 6, 6, 6)
        column.setSpacing(4)
        column.addWidget(self.line)
        column.addWidget(self.list)
        self.setFixedWidth(190)
        self.line.textChanged.connect(self._fill)
        self.line.returnPressed.connect(self.take)
        self.list.itemClicked.connect(self._clicked)
        self.hide()

    def start(self, at: QPoint) -> None:
        """Open with a corner at a point of the widget below, wholly inside it."""
        self.line.clear()
        self._fill("")
        self.adjustSize()
        x = min(max(at.x(), 4), self._over.width() - self.width() - 4)
        y = min(max(at.y(), 4), self._over.height() - self.height() - 4)
        self.move(x, y)
        self.show()
        self.raise_()
        self.line.setFocus()

    def take(self) -> None:
        """The chosen part is to be placed."""
        row = self.list.currentRow()
        if 0 <= row < len(self._offers):
            self.give_up()
            self.wanted.emit(self._offers[row])

    def give_up(self) -> None:
        """Close."""
        if self.isVisible():
            self.hide()
            self.closed.emit()

    def step(self, by: int) -> None:
        """Choose the next or the one before."""
        count = self.list.count()
        if count:
            self.list.setCurrentRow((self.list.currentRow() + by) % count)

    def _fill(self, typed: str) -> None:
        self._offers = found(typed)[:_MOST]
        self.list.clear()
        for offer in self._offers:
            self.list.addItem(QListWidgetItem(offer.shown))
        self.list.setCurrentRow(0)
        height = self.list.sizeHintForRow(0) * max(len(self._offers), 1) + 6 if self._offers else 24
        self.list.setFixedHeight(height)
        self.adjustSize()

    def _clicked(self, item: QListWidgetItem) -> None:
        self.take()


class _Line(QLineEdit):
    """Up and down go through the list, Escape and leaving close."""

    def __init__(self, popup: TypeAhead) -> None:
        super().__init__()
        self._popup = popup

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Escape:
            self._popup.give_up()
        elif event.key() in (Qt.Key.Key_Down, Qt.Key.Key_Up):
            self._popup.step(1 if event.key() == Qt.Key.Key_Down else -1)
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: object) -> None:
        super().focusOutEvent(event)  # type: ignore[arg-type]
        self._popup.give_up()
