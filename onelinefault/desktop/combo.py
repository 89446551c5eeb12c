"""A combo box with a small chevron that the wheel does not change while one only scrolls past."""

from __future__ import annotations

from PySide6.QtCore import QPointF
from PySide6.QtGui import QPainter, QPaintEvent, QPen, QPolygonF, QWheelEvent
from PySide6.QtWidgets import QComboBox


class Combo(QComboBox):
    """As Qt's own, apart from that."""

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Leave the wheel to what scrolls."""
        event.ignore()

    def paintEvent(self, event: QPaintEvent) -> None:
        """The box, and the chevron at its right end."""
        super().paintEvent(event)
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(QPen(self.palette().placeholderText().color(), 1.4))
        x, y = self.width() - 12.0, self.height() / 2
        painter.drawPolyline(QPolygonF([QPointF(x - 3.5, y - 1.8), QPointF(x, y + 1.8), QPointF(x + 3.5, y - 1.8)]))
