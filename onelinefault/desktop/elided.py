"""A label that cuts its words short with an ellipsis where there is no room; the whole text is in its tooltip."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QLabel


class ElidedLabel(QLabel):
    """Takes up to ``room`` pixels, or as much as there is."""

    def __init__(self, words: str = "", room: int = 10_000) -> None:
        super().__init__(words)
        self._room = room

    def setText(self, words: str) -> None:
        """Show other words."""
        super().setText(words)
        self.setToolTip(words)

    def set_room(self, room: int) -> None:
        """Take at most so many pixels."""
        if room != self._room:
            self._room = room
            self.updateGeometry()

    def sizeHint(self) -> QSize:
        """As wide as the words, at most as wide as allowed."""
        hint = super().sizeHint()
        return QSize(min(hint.width(), self._room), hint.height())

    def minimumSizeHint(self) -> QSize:
        """A few letters."""
        return QSize(min(40, self.sizeHint().width()), super().minimumSizeHint().height())

    def paintEvent(self, event: QPaintEvent) -> None:
        """The words, cut short if need be."""
        painter = QPainter(self)
        room = self.contentsRect()
        words = self.fontMetrics().elidedText(self.text(), Qt.TextElideMode.ElideRight, room.width())
        painter.setPen(self.palette().color(self.foregroundRole()))
        painter.drawText(room, self.alignment(), words)
